//! The march in time.

use super::account::Account;
use super::cells::{Cells, GasRows};
use super::error::TransientError;
use super::event::{Course, Event};
use super::gas::{EndNode, GasCavity};
use super::grid::count;
use super::kernel::{Rows, step};
use super::model::{Model, Reach};
use super::run::{Run, RunOptions, Scratch};
use super::traces::Traces;
use crate::quantity::{PipeLength, Time};
use uom::si::time::second;

/// Steps between looks for suction.
const LOOK: usize = 32;

/// Ways a march can end.
#[derive(Debug)]
pub(super) enum Ended {
    Done(Box<Run>),
    /// The head fell to the vapour pressure, and cavities were not modelled.
    Suction,
}

/// A run on its way.
#[derive(Debug)]
pub(super) struct March<'a> {
    pub(super) model: &'a Model,
    pub(super) options: &'a RunOptions,
    pub(super) scratch: &'a mut Scratch,
    pub(super) course: Course<'a>,
    pub(super) gas: Option<GasCavity>,
    pub(super) dt: f64,
    pub(super) steps: usize,
    /// Index of node 0 in the rows of P and M.
    pub(super) base_p: usize,
    pub(super) base_m: usize,
    pub(super) slack: usize,
    pub(super) nodes: usize,
    pub(super) velocity: f64,
    pub(super) air: f64,
    pub(super) account: Account,
    /// Energy head of the end node solved last.
    pub(super) end_head: f64,
    pub(super) foot_grade: f64,
    pub(super) foot_flow: f64,
    pub(super) draws_air: bool,
}

impl<'a> March<'a> {
    pub(super) fn new(
        model: &'a Model,
        event: &'a Event,
        options: &'a RunOptions,
        scratch: &'a mut Scratch,
        gas: Option<GasCavity>,
    ) -> Result<Self, TransientError> {
        let nodes = model.chainages.len();
        let slack = if nodes > 512 { nodes } else { 512 };
        let mut march = Self {
            model,
            options,
            scratch,
            course: Course::new(&model.line, event),
            gas,
            dt: model.grid.step_si(),
            steps: model.steps(event, options.duration)?,
            base_p: slack,
            base_m: 0,
            slack,
            nodes,
            velocity: if options.velocity_head { 1.0 } else { 0.0 },
            air: model.line.vapour_and_air().1,
            account: Account::default(),
            end_head: 0.0,
            foot_grade: 0.0,
            foot_flow: 0.0,
            draws_air: false,
        };
        march.fill();
        Ok(march)
    }

    /// Lays the steady start into the rows.
    fn fill(&mut self) {
        let (model, nodes) = (self.model, self.nodes);
        let q = model.flow;
        let s = &mut *self.scratch;
        let reset = |row: &mut Vec<f64>, length: usize, value: f64| {
            row.clear();
            row.resize(length, value);
        };
        reset(&mut s.p, nodes + self.slack, 0.0);
        reset(&mut s.m, nodes + self.slack, 0.0);
        reset(&mut s.high, nodes, f64::NEG_INFINITY);
        reset(&mut s.low, nodes, f64::INFINITY);
        reset(&mut s.lost, nodes, 0.0);
        reset(&mut s.flow, nodes, q);
        reset(&mut s.flow_before, nodes, q);
        reset(&mut s.joint_flow, model.joints.len(), q);
        for reach in &model.reaches {
            let d = (reach.b + reach.half * q.abs()) * q;
            for node in reach.first..=reach.first + reach.cells {
                s.p[self.base_p + node] = model.energies[node] + d;
                s.m[self.base_m + node] = model.energies[node] - d;
            }
        }
        if let Some(gas) = self.gas {
            reset(&mut s.void, nodes, 0.0);
            for reach in &model.reaches {
                let velocity = self.velocity * reach.velocity_head * q * q;
                for node in reach.first..=reach.first + reach.cells {
                    let above = model.energies[node] - velocity - model.floors[node];
                    s.void[node] = gas_constant(reach, gas, node, self.air) / above;
                }
            }
            s.void_most.clone_from(&s.void);
        }
    }

    /// Volume times head of the gas at a node.
    pub(super) fn constant(&self, reach: &Reach, gas: GasCavity, node: usize) -> f64 {
        gas_constant(reach, gas, node, self.air)
    }

    pub(super) fn run(&mut self) -> Result<Ended, TransientError> {
        let mut traces = Traces::new(self)?;
        let stock_before = self.stock();
        let void_before = self.voids();
        let guard = self.options.cavity.is_some() && self.gas.is_none();
        for number in 0..=self.steps {
            let time = count(number) * self.dt;
            self.joints(time);
            if !(self.foot_flow.is_finite() && self.foot_grade.is_finite()) {
                return Err(self.not_finite(time));
            }
            traces.record(self, number, time);
            self.cells();
            self.shift();
            if guard && (number.is_multiple_of(LOOK) || number == self.steps) && self.suction() {
                return Ok(Ended::Suction);
            }
        }
        if !self.all_finite() {
            return Err(self.not_finite(count(self.steps) * self.dt));
        }
        let balance = self
            .options
            .balance
            .then(|| self.balance(stock_before, void_before));
        Ok(Ended::Done(Box::new(self.finish(traces, balance))))
    }

    /// Solves the joints, from the forebay to the foot.
    fn joints(&mut self, time: f64) {
        let model = self.model;
        for (index, joint) in model.joints.iter().enumerate() {
            let before = self.scratch.joint_flow[index];
            let upper = index.checked_sub(1).and_then(|i| model.reaches.get(i));
            let lower = model.reaches.get(index);
            let above = upper.map(|reach| {
                let p = self.scratch.p[self.base_p + reach.first + reach.cells];
                (p, reach.b, reach.half)
            });
            let below = lower.map(|reach| {
                (
                    self.scratch.m[self.base_m + reach.first],
                    reach.b,
                    reach.half,
                )
            });
            let dt = self.dt;
            let q = match (above, below) {
                (None, Some(below)) => joint.flow((model.forebay, 0.0, 0.0), below, before, dt),
                (Some(above), Some(below)) => {
                    self.end(index, above, |from| joint.flow(from, below, before, dt))
                }
                (Some(above), None) => {
                    let c = self.course.conductance(time);
                    let q = self.end(index, above, |from| joint.outflow(from, c, before, dt));
                    // Beyond the losses and the inertia that lie at the foot.
                    let taken = joint.loss * q * q.abs() + joint.inertia * (q - before) / dt;
                    let velocity = self.velocity * model.foot_velocity_head * q * q;
                    self.foot_grade = self.end_head - taken - velocity;
                    self.draws_air |= q < 0.0;
                    self.foot_flow = q;
                    q
                }
                (None, None) => 0.0,
            };
            if let (Some(reach), Some((m, b, half))) = (lower, below) {
                let node = reach.first;
                self.scratch.p[self.base_p + node] = m + 2.0 * b * q;
                let velocity = self.velocity * reach.velocity_head * q * q;
                self.note(node, m + b * q + half * q * q.abs() - velocity, q);
            }
            if self.options.balance {
                self.count_joint(index, q, before, time);
            }
            self.scratch.joint_flow[index] = q;
        }
    }

    /// Solves the lower end of the reach before a joint: `through` is the flow
    /// through the joint from a head with impedance and half friction. Gives
    /// the flow through the joint.
    fn end(
        &mut self,
        index: usize,
        above: (f64, f64, f64),
        through: impl Fn((f64, f64, f64)) -> f64,
    ) -> f64 {
        let reach = &self.model.reaches[index - 1];
        let node = reach.first + reach.cells;
        let (p, b, half) = above;
        let (head, velocity, q_in, q_out);
        if let Some(gas) = self.gas {
            let flow = self.scratch.flow[node];
            // That of a step ago, so that the root stays simple.
            velocity = self.velocity * reach.velocity_head * flow * flow;
            let end = EndNode {
                p,
                b,
                half,
                floor: self.model.floors[node] + velocity,
                void: self.scratch.void[node],
                constant: self.constant(reach, gas, node),
                dt: self.dt,
            };
            let x;
            (x, q_in, q_out) = end.solve(|e| through((e, 0.0, 0.0)));
            head = end.floor + x;
            let void = end.constant / x;
            self.scratch.void[node] = void;
            if void > self.scratch.void_most[node] {
                self.scratch.void_most[node] = void;
            }
            self.account.cavities += head * (q_in - q_out);
        } else {
            q_out = through(above);
            q_in = q_out;
            head = p - b * q_in - half * q_in * q_in.abs();
            velocity = self.velocity * reach.velocity_head * q_in * q_in;
        }
        self.scratch.m[self.base_m + node] = p - 2.0 * b * q_in;
        self.end_head = head;
        self.note(node, head - velocity, q_in);
        if self.options.balance {
            self.account.ends += half * q_in.abs() * q_in * q_in;
        }
        q_out
    }

    /// Keeps flow and grade of an end node.
    fn note(&mut self, node: usize, grade: f64, flow: f64) {
        let s = &mut *self.scratch;
        let twice = 2.0 * grade;
        s.flow[node] = flow;
        if twice > s.high[node] {
            s.high[node] = twice;
        }
        if twice < s.low[node] {
            s.low[node] = twice;
        }
    }

    /// Nodes within the reaches.
    fn cells(&mut self) {
        let model = self.model;
        for reach in &model.reaches {
            if reach.cells < 2 {
                continue;
            }
            let (from, to) = (reach.first + 1, reach.first + reach.cells);
            let slow = self.gas.is_some() || reach.table.is_some() || reach.unsteady > 0.0;
            let s = &mut *self.scratch;
            let p = &mut s.p[self.base_p + from..self.base_p + to];
            let m = &mut s.m[self.base_m + from..self.base_m + to];
            let (high, low) = (&mut s.high[from..to], &mut s.low[from..to]);
            if !slow {
                let rows = Rows { p, m, high, low };
                let lost = self.options.balance.then(|| &mut s.lost[from..to]);
                step(rows, lost, reach.kernel, self.velocity * reach.curve);
                continue;
            }
            let gas_constant = self
                .gas
                .map(|gas| gas.share * reach.area * reach.dx * self.air);
            let gas = gas_constant.map(|constant| GasRows {
                void: &mut s.void[from..to],
                most: &mut s.void_most[from..to],
                floor: &model.floors[from..to],
                constant,
            });
            let mut cells = Cells {
                reach,
                p,
                m,
                high,
                low,
                lost: &mut s.lost[from..to],
                flow: &mut s.flow[from - 1..=to],
                flow_before: &mut s.flow_before[from - 1..=to],
                gas,
                dt: self.dt,
                velocity: self.velocity,
            };
            self.account.cavities += cells.step() / self.dt;
        }
    }

    /// Both waves run one cell on: the rows stay, their bases move.
    fn shift(&mut self) {
        if self.base_p == 0 {
            self.scratch.p.copy_within(0..self.nodes, self.slack);
            self.base_p = self.slack;
        }
        self.base_p -= 1;
        if self.base_m == self.slack {
            self.scratch
                .m
                .copy_within(self.slack..self.slack + self.nodes, 0);
            self.base_m = 0;
        }
        self.base_m += 1;
    }

    /// Whether the grade fell to the vapour pressure anywhere.
    fn suction(&self) -> bool {
        self.scratch
            .low
            .iter()
            .zip(&self.model.floors)
            .any(|(low, floor)| *low <= 2.0 * floor)
    }

    fn all_finite(&self) -> bool {
        let row =
            |row: &[f64], base: usize| row[base..base + self.nodes].iter().all(|x| x.is_finite());
        row(&self.scratch.p, self.base_p) && row(&self.scratch.m, self.base_m)
    }

    fn not_finite(&self, time: f64) -> TransientError {
        let node = (0..self.nodes)
            .find(|node| {
                let (p, m) = (
                    self.scratch.p[self.base_p + node],
                    self.scratch.m[self.base_m + node],
                );
                !(p.is_finite() && m.is_finite())
            })
            .unwrap_or(self.nodes - 1);
        TransientError::NotFinite {
            time: Time::new::<second>(time),
            chainage: PipeLength::from_m(self.model.chainages[node]),
        }
    }
}

/// Volume times head of the gas at a node: half a cell's at the ends of a
/// reach.
fn gas_constant(reach: &Reach, gas: GasCavity, node: usize, air: f64) -> f64 {
    let end = node == reach.first || node == reach.first + reach.cells;
    let volume = reach.area * reach.dx * if end { 0.5 } else { 1.0 };
    gas.share * volume * air
}
