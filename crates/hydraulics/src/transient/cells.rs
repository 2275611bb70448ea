//! Nodes within a reach, the slow way: friction that follows the flow, unsteady
//! friction, gas cavities.

use super::gas::between;
use super::model::Reach;

/// The rows of the nodes strictly within one reach; `flow*` with one node more
/// at each end.
#[derive(Debug)]
pub(super) struct Cells<'a> {
    pub(super) reach: &'a Reach,
    pub(super) p: &'a mut [f64],
    pub(super) m: &'a mut [f64],
    pub(super) high: &'a mut [f64],
    pub(super) low: &'a mut [f64],
    pub(super) lost: &'a mut [f64],
    pub(super) flow: &'a mut [f64],
    pub(super) flow_before: &'a mut [f64],
    pub(super) gas: Option<GasRows<'a>>,
    pub(super) dt: f64,
    /// 0 to leave the velocity head out of the grade, 1 to count it.
    pub(super) velocity: f64,
}

/// The gas of those nodes.
#[derive(Debug)]
pub(super) struct GasRows<'a> {
    pub(super) void: &'a mut [f64],
    pub(super) most: &'a mut [f64],
    pub(super) floor: &'a [f64],
    /// Volume times head of every node.
    pub(super) constant: f64,
}

impl Cells<'_> {
    /// One step; the work done on cavities, in m of head times m3.
    pub(super) fn step(&mut self) -> f64 {
        let mut work = 0.0;
        for i in 0..self.p.len() {
            work += self.node(i);
        }
        if self.reach.unsteady > 0.0 {
            self.unsteady();
        }
        work
    }

    /// z of D/(1 + z), what friction does to D in one cell.
    fn brake(&self, d: f64) -> f64 {
        match &self.reach.table {
            Some(table) => {
                let share = table.share(d.abs());
                share / (1.0 - share)
            }
            None => 2.0 * self.reach.half_k * d.abs(),
        }
    }

    fn node(&mut self, i: usize) -> f64 {
        let (b, dt) = (self.reach.b, self.dt);
        let (p, m) = (self.p[i], self.m[i]);
        let d = 0.5 * (p - m);
        let z = self.brake(d);
        let twice_velocity = 4.0 * self.velocity * self.reach.curve * d * d;
        let mut work = 0.0;
        let (grade, flow);
        if let Some(gas) = &mut self.gas {
            // Half the friction, the cavity, the other half.
            let first = d - d / (1.0 + 0.5 * z);
            let (p1, m1) = (p - first, m + first);
            let floor = gas.floor[i] + 0.5 * twice_velocity;
            let x = between(p1 + m1, b, floor, gas.void[i], gas.constant, dt);
            let void = gas.constant / x;
            gas.void[i] = void;
            gas.most[i] = if void > gas.most[i] {
                void
            } else {
                gas.most[i]
            };
            let head = floor + x;
            let (d_in, d_out) = (p1 - head, head - m1);
            let d2 = 0.5 * (d_in + d_out);
            let second = d2 - d2 * ((1.0 + 0.5 * z) / (1.0 + z));
            self.p[i] = head + d_out - second;
            self.m[i] = head - d_in + second;
            self.lost[i] += first * (2.0 * d - first) + second * (2.0 * d2 - second);
            work = head * (d_in - d_out) / b * dt;
            grade = 2.0 * head - twice_velocity;
            flow = d2 / b;
        } else {
            let r = d - d / (1.0 + z);
            self.p[i] = p - r;
            self.m[i] = m + r;
            self.lost[i] += r * (2.0 * d - r);
            grade = (p + m) - twice_velocity;
            flow = (2.0 * d - r) / (2.0 * b);
        }
        self.flow[i + 1] = flow;
        self.high[i] = if grade > self.high[i] {
            grade
        } else {
            self.high[i]
        };
        self.low[i] = if grade < self.low[i] {
            grade
        } else {
            self.low[i]
        };
        work
    }

    /// Unsteady friction, from the flows of this step and the one before.
    fn unsteady(&mut self) {
        let Reach {
            unsteady,
            dx,
            wave_speed,
            ..
        } = *self.reach;
        for i in 0..self.p.len() {
            let q = self.flow[i + 1];
            let in_time = (q - self.flow_before[i + 1]) / self.dt;
            let in_space = (self.flow[i + 2] - self.flow[i]).abs() / (2.0 * dx);
            let sign = if q < 0.0 { -1.0 } else { 1.0 };
            let r = unsteady * (in_time + sign * wave_speed * in_space);
            let (p, m) = (self.p[i], self.m[i]);
            self.lost[i] += r * ((p - m) - r);
            self.p[i] = p - r;
            self.m[i] = m + r;
        }
        self.flow_before.copy_from_slice(self.flow);
    }
}
