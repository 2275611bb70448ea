//! The march in time.

use super::cells::{Cells, GasRows};
use super::error::TransientError;
use super::event::{Course, Event};
use super::gas::{EndNode, GasCavity};
use super::grid::{count, nearest};
use super::kernel::{Rows, step};
use super::model::{Model, Reach};
use super::run::{
    Balance, Duration, NodeEnvelope, Probe, Run, RunOptions, Scratch, Separation, Trace,
};
use crate::quantity::{Level, PipeLength, Time, Volume, VolumeRate};
use uom::si::time::second;
use uom::si::volume::cubic_meter;
use uom::si::volume_rate::cubic_meter_per_second;

/// Steps between looks for suction.
const LOOK: usize = 32;
/// A cavity counts as open when its gas stands at this share of the
/// atmosphere's pressure above vapour.
const OPEN_SHARE: f64 = 0.01;

/// Ways a march can end.
enum Ended {
    Done(Box<Run>),
    /// The head fell to the vapour pressure, and cavities were not modelled.
    Suction,
}

impl Model {
    /// Runs an event that begins at this start.
    ///
    /// The run is computed with water that bears suction; where the head falls
    /// to the vapour pressure it is computed again from the start with
    /// [`GasCavity`] at every node but the inlet, and [`Run::separation`] says
    /// so.
    ///
    /// # Errors
    /// [`TransientError::StartsDiffer`] when the event starts from other
    /// strokes, [`TransientError::StartsBelowVapour`],
    /// [`TransientError::TooLong`], [`TransientError::ProbeOutside`],
    /// [`TransientError::NotFinite`].
    pub fn run(
        &self,
        event: &Event,
        options: &RunOptions,
        scratch: &mut Scratch,
    ) -> Result<Run, TransientError> {
        let same = event.strokes().len() == self.strokes.len()
            && event
                .strokes()
                .iter()
                .zip(&self.strokes)
                .all(|(stroke, start)| (stroke.first() - start).abs() <= 1e-12);
        if !same {
            return Err(TransientError::StartsDiffer);
        }
        if let Some(gas) = options.cavity {
            gas.check()?;
            self.check_start()?;
        }
        let mut march = March::new(self, event, options, scratch, None)?;
        if let Ended::Done(run) = march.run()? {
            return Ok(*run);
        }
        let mut again = March::new(self, event, options, scratch, options.cavity)?;
        match again.run()? {
            Ended::Done(run) => Ok(*run),
            // A march with gas never ends in suction.
            Ended::Suction => Err(TransientError::GasCavity),
        }
    }

    /// Runs with gas at every node from the start, whatever the head.
    #[cfg(test)]
    pub(super) fn run_with_gas(
        &self,
        event: &Event,
        options: &RunOptions,
        scratch: &mut Scratch,
        gas: GasCavity,
    ) -> Result<Run, TransientError> {
        match March::new(self, event, options, scratch, Some(gas))?.run()? {
            Ended::Done(run) => Ok(*run),
            Ended::Suction => Err(TransientError::GasCavity),
        }
    }

    /// Refuses a start below the vapour pressure.
    fn check_start(&self) -> Result<(), TransientError> {
        for reach in &self.reaches {
            let velocity = reach.velocity_head * self.flow * self.flow;
            for node in reach.first..=reach.first + reach.cells {
                let (energy, floor) = (self.energies[node], self.floors[node]);
                if energy - velocity <= floor {
                    return Err(TransientError::StartsBelowVapour {
                        chainage: PipeLength::from_m(self.chainages[node]),
                        grade: Level::from_m(energy - velocity + self.axis),
                    });
                }
            }
        }
        Ok(())
    }

    fn steps(&self, event: &Event, duration: Duration) -> Result<usize, TransientError> {
        let dt = self.grid.step_si();
        let lasting = match duration {
            Duration::PeriodsAfter(periods) => {
                event.end_si() + periods * self.line.period().get::<second>()
            }
            Duration::Until(time) => time.get::<second>(),
        };
        let steps = (lasting / dt - 1e-9).ceil();
        if (0.0..=Self::MOST_STEPS).contains(&steps) {
            Ok(nearest(steps))
        } else if steps.is_finite() && steps > 0.0 {
            Err(TransientError::TooLong { steps })
        } else {
            Err(TransientError::Time(Time::new::<second>(lasting)))
        }
    }

    /// The node nearest to a chainage.
    fn node_at(&self, chainage: PipeLength) -> Result<usize, TransientError> {
        let at = chainage.m();
        let ends = (self.chainages.first(), self.chainages.last());
        let inside = match ends {
            (Some(first), Some(last)) => at >= first - 1e-6 && at <= last + 1e-6,
            _ => false,
        };
        if !inside {
            return Err(TransientError::ProbeOutside(chainage));
        }
        let nearer =
            |a: &(usize, &f64), b: &(usize, &f64)| (a.1 - at).abs().total_cmp(&(b.1 - at).abs());
        Ok(self
            .chainages
            .iter()
            .enumerate()
            .min_by(nearer)
            .map_or(0, |(node, _)| node))
    }
}

/// Sums of what passes, per unit of time step: volumes in m3/s, energies in
/// m of head times m3/s.
#[derive(Debug, Default)]
struct Account {
    entered: f64,
    left: f64,
    passed: f64,
    work: f64,
    jets: f64,
    joints: f64,
    ends: f64,
    cavities: f64,
}

struct March<'a> {
    model: &'a Model,
    options: &'a RunOptions,
    scratch: &'a mut Scratch,
    course: Course<'a>,
    gas: Option<GasCavity>,
    dt: f64,
    steps: usize,
    /// Index of node 0 in the rows of P and M.
    base_p: usize,
    base_m: usize,
    slack: usize,
    nodes: usize,
    velocity: f64,
    air: f64,
    account: Account,
    /// Energy head of the end node solved last.
    end_head: f64,
    foot_grade: f64,
    foot_flow: f64,
    draws_air: bool,
}

impl<'a> March<'a> {
    fn new(
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
    fn constant(&self, reach: &Reach, gas: GasCavity, node: usize) -> f64 {
        gas_constant(reach, gas, node, self.air)
    }

    fn run(&mut self) -> Result<Ended, TransientError> {
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

    /// Adds up what a joint passes, loses and gives off.
    fn count_joint(&mut self, index: usize, q: f64, before: f64, time: f64) {
        let model = self.model;
        let joint = &model.joints[index];
        let account = &mut self.account;
        // What the inertia gained, plus what its implicit step loses.
        account.joints += joint.loss * q.abs() * q * q
            + 0.5 * joint.inertia * (q * q - before * before) / self.dt;
        if index == 0 {
            account.entered += q;
            account.work += model.forebay * q;
            account.passed += q.abs();
        }
        if index == model.reaches.len() {
            account.left += q;
            account.passed += q.abs();
            let c = self.course.conductance(time);
            if c > 0.0 {
                account.jets += q.abs() * q * q / c;
            }
        } else if let Some(reach) = model.reaches.get(index) {
            account.ends += reach.half * q.abs() * q * q;
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

    /// Volume and energy of the two waves on their way: P at every node but
    /// the first of a reach, M at every node but the last.
    fn stock(&self) -> (f64, f64) {
        let (mut volume, mut energy) = (0.0, 0.0);
        for reach in &self.model.reaches {
            let (mut sum, mut squares) = (0.0, 0.0);
            for cell in 0..reach.cells {
                let p = self.scratch.p[self.base_p + reach.first + cell + 1];
                let m = self.scratch.m[self.base_m + reach.first + cell];
                sum += p + m;
                squares += p * p + m * m;
            }
            volume += sum * self.dt / (2.0 * reach.b);
            energy += squares * self.dt / (4.0 * reach.b);
        }
        (volume, energy)
    }

    fn voids(&self) -> f64 {
        if self.gas.is_some() {
            // The inlet's gas never moves, so it adds nothing.
            self.scratch.void.iter().sum()
        } else {
            0.0
        }
    }

    fn balance(&self, before: (f64, f64), void_before: f64) -> Balance {
        let after = self.stock();
        let account = &self.account;
        let gained = after.0 - before.0;
        let grown = self.voids() - void_before;
        let over = (account.entered - account.left) * self.dt - gained + grown;
        let amount = account.passed * self.dt + gained.abs() + grown.abs() + after.0.abs();
        let friction: f64 = self
            .model
            .reaches
            .iter()
            .map(|reach| {
                let lost: f64 = self.scratch.lost[reach.first..=reach.first + reach.cells]
                    .iter()
                    .sum();
                lost / (2.0 * reach.b)
            })
            .sum();
        let parts = [
            account.work,
            -account.jets,
            -account.joints,
            -account.ends,
            -account.cavities,
            -friction,
            -(after.1 - before.1) / self.dt,
        ];
        let left: f64 = parts.iter().sum();
        let all: f64 = parts.iter().map(|part| part.abs()).sum::<f64>() + after.1 / self.dt;
        let share = |over: f64, of: f64| if of > 0.0 { over / of } else { 0.0 };
        Balance {
            volume: share(over, amount),
            energy: share(left, all),
        }
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

    /// Grade above the axis and flow at a node, after the joints and before
    /// the cells of a step.
    fn state(&self, node: usize) -> (f64, f64) {
        let model = self.model;
        let Some(reach) = model
            .reaches
            .iter()
            .find(|reach| node <= reach.first + reach.cells)
        else {
            return (f64::NAN, f64::NAN);
        };
        let (p, m) = (
            self.scratch.p[self.base_p + node],
            self.scratch.m[self.base_m + node],
        );
        let (head, q);
        if node == reach.first {
            q = (p - m) / (2.0 * reach.b);
            head = m + reach.b * q + reach.half * q * q.abs();
        } else if node == reach.first + reach.cells {
            q = (p - m) / (2.0 * reach.b);
            head = p - reach.b * q - reach.half * q * q.abs();
        } else {
            // D = B Q + R Q|Q|/2.
            q = super::joint::flow_of(reach.b, reach.half, 0.5 * (p - m));
            head = 0.5 * (p + m);
        }
        (head - self.velocity * reach.velocity_head * q * q, q)
    }

    fn finish(&self, traces: Traces, balance: Option<Balance>) -> Run {
        let model = self.model;
        let mut nodes = Vec::with_capacity(self.nodes + 2);
        for reach in &model.reaches {
            for node in reach.first..=reach.first + reach.cells {
                nodes.push(NodeEnvelope {
                    chainage: PipeLength::from_m(model.chainages[node]),
                    level: Level::from_m(model.levels[node]),
                    run: reach.run,
                    highest: Level::from_m(0.5 * self.scratch.high[node] + model.axis),
                    lowest: Level::from_m(0.5 * self.scratch.low[node] + model.axis),
                });
            }
        }
        let level = |found: (f64, f64)| {
            (
                Level::from_m(found.0 + model.axis),
                Time::new::<second>(found.1),
            )
        };
        let (inlet, foot) = model.ends;
        if let Some(first) = nodes
            .first()
            .filter(|node| node.chainage.m() > inlet.0 + 1e-6)
        {
            let lumped = NodeEnvelope {
                chainage: PipeLength::from_m(inlet.0),
                level: Level::from_m(inlet.1),
                run: 0,
                ..*first
            };
            nodes.insert(0, lumped);
        }
        nodes.push(NodeEnvelope {
            chainage: PipeLength::from_m(foot.0),
            level: Level::from_m(foot.1),
            run: model.last_run,
            highest: level(traces.highest).0,
            lowest: level(traces.lowest).0,
        });
        let flow = VolumeRate::new::<cubic_meter_per_second>;
        Run {
            nodes,
            foot_start: Level::from_m(traces.start + model.axis),
            foot_highest: level(traces.highest),
            foot_lowest: level(traces.lowest),
            flow_start: flow(model.flow),
            flow_end: flow(self.foot_flow),
            flow_greatest: flow(traces.flow_greatest),
            foot: traces.foot,
            probes: traces.probes.into_iter().map(|(_, probe)| probe).collect(),
            separation: self.separation(),
            draws_air: self.draws_air,
            balance,
            steps: self.steps,
        }
    }

    fn separation(&self) -> Option<Separation> {
        let model = self.model;
        let at = |node: usize| PipeLength::from_m(model.chainages[node]);
        if let Some(gas) = self.gas {
            let mut found = (0, 0.0, 0);
            for (index, reach) in model.reaches.iter().enumerate() {
                for node in reach.first..=reach.first + reach.cells {
                    if index == 0 && node == 0 {
                        continue;
                    }
                    let most = self.scratch.void_most[node];
                    let open = self.constant(reach, gas, node) / (OPEN_SHARE * self.air);
                    if most > found.1 {
                        (found.0, found.1) = (node, most);
                    }
                    found.2 += usize::from(most >= open);
                }
            }
            return Some(Separation {
                modelled: true,
                chainage: at(found.0),
                largest: Volume::new::<cubic_meter>(found.1),
                nodes: found.2,
            });
        }
        let mut found = (0, 0.0, 0);
        for (node, (low, floor)) in self.scratch.low.iter().zip(&model.floors).enumerate() {
            let short = floor - 0.5 * low;
            if short >= 0.0 {
                found.2 += 1;
                if short >= found.1 {
                    (found.0, found.1) = (node, short);
                }
            }
        }
        (found.2 > 0).then(|| Separation {
            modelled: false,
            chainage: at(found.0),
            largest: Volume::new::<cubic_meter>(0.0),
            nodes: found.2,
        })
    }
}

/// Volume times head of the gas at a node: half a cell's at the ends of a
/// reach.
fn gas_constant(reach: &Reach, gas: GasCavity, node: usize, air: f64) -> f64 {
    let end = node == reach.first || node == reach.first + reach.cells;
    let volume = reach.area * reach.dx * if end { 0.5 } else { 1.0 };
    gas.share * volume * air
}

/// What is kept of the course in time.
struct Traces {
    every: usize,
    start: f64,
    highest: (f64, f64),
    lowest: (f64, f64),
    flow_greatest: f64,
    foot: Trace,
    probes: Vec<(usize, Probe)>,
}

impl Traces {
    fn new(march: &March<'_>) -> Result<Self, TransientError> {
        let points = march.options.trace_points;
        let probes = march
            .options
            .probes
            .iter()
            .map(|chainage| {
                let node = march.model.node_at(*chainage)?;
                let probe = Probe {
                    chainage: PipeLength::from_m(march.model.chainages[node]),
                    trace: Trace::default(),
                };
                Ok((node, probe))
            })
            .collect::<Result<_, TransientError>>()?;
        Ok(Self {
            every: if points == 0 {
                0
            } else {
                march.steps.div_ceil(points).max(1)
            },
            start: 0.0,
            highest: (f64::NEG_INFINITY, 0.0),
            lowest: (f64::INFINITY, 0.0),
            flow_greatest: 0.0,
            foot: Trace::default(),
            probes,
        })
    }

    fn record(&mut self, march: &March<'_>, number: usize, time: f64) {
        let (grade, flow) = (march.foot_grade, march.foot_flow);
        if number == 0 {
            self.start = grade;
        }
        if grade > self.highest.0 {
            self.highest = (grade, time);
        }
        if grade < self.lowest.0 {
            self.lowest = (grade, time);
        }
        if flow > self.flow_greatest {
            self.flow_greatest = flow;
        }
        let due = self.every > 0 && (number.is_multiple_of(self.every) || number == march.steps);
        if !due {
            return;
        }
        let keep = |trace: &mut Trace, grade: f64, flow: f64| {
            trace.times.push(time);
            trace.grades.push(grade + march.model.axis);
            trace.flows.push(flow);
        };
        keep(&mut self.foot, grade, flow);
        for (node, probe) in &mut self.probes {
            let (grade, flow) = march.state(*node);
            keep(&mut probe.trace, grade, flow);
        }
    }
}
