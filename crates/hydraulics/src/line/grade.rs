//! The grade line for a given flow.

use super::layout::{Line, Place, StepKind};
use super::spec::LineError;
use crate::friction::{Friction, FrictionError, FrictionLaw, GREATEST_REYNOLDS, Regime};
use crate::quantity::{GaugePressure, Head, Level, PipeLength, Velocity, VolumeRate};
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

/// The line's state at one place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Node {
    /// Chainage.
    pub chainage: PipeLength,
    /// Level of the pipe's axis.
    pub level: Level,
    /// Energy level: grade plus velocity head.
    pub energy: Level,
    /// Grade (piezometric) level.
    pub grade: Level,
    /// Gauge pressure at the pipe's axis.
    pub pressure: GaugePressure,
    /// Mean velocity.
    pub velocity: Velocity,
    /// Index of the run it lies in.
    pub run: usize,
    /// Index of the point it lies at, if it lies at one.
    pub point: Option<usize>,
}

/// What one run loses.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RunLoss {
    /// Where the run starts.
    pub from: PipeLength,
    /// Where it ends.
    pub to: PipeLength,
    /// Head lost by friction along it.
    pub friction_loss: Head,
    /// Head lost by the local losses in it (those at its end included).
    pub local_loss: Head,
    /// Head lost in the change of bore at its end.
    pub reducer_loss: Head,
    /// Mean velocity.
    pub velocity: Velocity,
    /// Reynolds number; 0 without flow.
    pub reynolds: f64,
    /// Darcy factor; `None` without flow.
    pub factor: Option<f64>,
    /// Regime.
    pub regime: Regime,
}

/// What a reader of the grade line must be told.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum LineCaution {
    /// The flow in a run lies between laminar and turbulent: its loss is
    /// uncertain.
    UncertainRegime {
        /// Index of the run.
        run: usize,
        /// Its Reynolds number.
        reynolds: f64,
    },
    /// Hazen-Williams or Manning is used below Re 4000, where they do not
    /// hold.
    EmpiricalLawNotTurbulent {
        /// Index of the run.
        run: usize,
        /// Its Reynolds number.
        reynolds: f64,
    },
}

/// The grade line for one flow.
#[derive(Debug, Clone, PartialEq)]
pub struct Grade {
    /// The flow.
    pub flow: VolumeRate,
    /// Nodes from the inlet to the foot: one at every point and run end, two
    /// (before and after) at every local loss and change of bore.
    pub nodes: Vec<Node>,
    /// Head lost by friction, all runs.
    pub friction_loss: Head,
    /// Head lost locally, changes of bore included.
    pub local_loss: Head,
    /// What each run loses.
    pub runs: Vec<RunLoss>,
    /// Index of the node with the lowest pressure.
    pub lowest: usize,
    /// What must be told.
    pub cautions: Vec<LineCaution>,
    /// Forebay level less energy at the foot less all losses: what the
    /// arithmetic leaves over, zero but for rounding.
    pub residual: Head,
}

impl Line {
    /// The grade line for a given flow.
    ///
    /// # Equation
    /// Bernoulli along the pipe: energy falls by gradient times length in each
    /// run and by K V^2/(2 g) at each local loss and change of bore.
    ///
    /// # Errors
    /// [`LineError::Flow`] for a negative flow; [`LineError::Run`] when the
    /// Reynolds number in a run is beyond 1e9;
    /// [`LineError::LossBeyondCounting`] for absurd local losses.
    pub fn grade(&self, flow: VolumeRate) -> Result<Grade, LineError> {
        let q = flow.get::<cubic_meter_per_second>();
        if !(q >= 0.0 && q.is_finite()) {
            return Err(LineError::Flow(flow));
        }
        let frictions: Vec<Friction> = self
            .runs
            .iter()
            .map(|run| self.run_friction(run, q))
            .collect();
        for (run, friction) in frictions.iter().enumerate() {
            if friction.reynolds > GREATEST_REYNOLDS {
                let error = FrictionError::Reynolds(friction.reynolds);
                return Err(LineError::Run { run, error });
            }
        }
        let nodes = self.nodes(q, &frictions);
        let runs = self.run_losses(q, &frictions);
        let friction_loss = sum(runs.iter().map(|run| run.friction_loss));
        let local_loss = sum(runs.iter().map(|run| run.local_loss + run.reducer_loss));
        let foot = nodes.last().map_or(self.spec.forebay, |node| node.energy);
        if !foot.m().is_finite() {
            return Err(LineError::LossBeyondCounting(flow));
        }
        let residual = (self.spec.forebay - foot) - friction_loss - local_loss;
        Ok(Grade {
            flow,
            lowest: lowest(&nodes),
            cautions: self.cautions(&frictions),
            nodes,
            friction_loss,
            local_loss,
            runs,
            residual,
        })
    }

    fn nodes(&self, flow: f64, frictions: &[Friction]) -> Vec<Node> {
        let mut energy = self.spec.forebay.m();
        let mut nodes = Vec::with_capacity(self.steps.len() + 1);
        nodes.push(self.node(self.start, energy, frictions));
        for step in &self.steps {
            energy -= match step.kind {
                // The friction of the run in which the pipe before the node
                // lies, which is that of the node.
                StepKind::Pipe(length) => {
                    length * frictions.get(step.end.run).map_or(0.0, |f| f.gradient)
                }
                StepKind::Local(coefficient) => coefficient * flow * flow,
            };
            nodes.push(self.node(step.end, energy, frictions));
        }
        nodes
    }

    fn node(&self, place: Place, energy: f64, frictions: &[Friction]) -> Node {
        let velocity = frictions.get(place.run).map_or(0.0, |f| f.velocity);
        let grade = energy - velocity * velocity / (2.0 * self.gravity);
        let height = grade - place.level;
        Node {
            chainage: PipeLength::from_m(place.chainage),
            level: Level::from_m(place.level),
            energy: Level::from_m(energy),
            grade: Level::from_m(grade),
            pressure: Head::from_m(height).pressure(self.spec.water.density(), self.spec.gravity),
            velocity: Velocity::new::<meter_per_second>(velocity),
            run: place.run,
            point: place.point,
        }
    }

    fn run_losses(&self, flow: f64, frictions: &[Friction]) -> Vec<RunLoss> {
        self.runs
            .iter()
            .zip(frictions)
            .map(|(run, friction)| RunLoss {
                from: PipeLength::from_m(run.from),
                to: PipeLength::from_m(run.to),
                friction_loss: Head::from_m(friction.gradient * (run.to - run.from)),
                local_loss: Head::from_m(run.local * flow * flow),
                reducer_loss: Head::from_m(run.reducer * flow * flow),
                velocity: Velocity::new::<meter_per_second>(friction.velocity),
                reynolds: friction.reynolds,
                factor: friction.factor,
                regime: friction.regime,
            })
            .collect()
    }

    fn cautions(&self, frictions: &[Friction]) -> Vec<LineCaution> {
        let mut cautions = Vec::new();
        for (run, (layout, friction)) in self.runs.iter().zip(frictions).enumerate() {
            let reynolds = friction.reynolds;
            let empirical = !matches!(layout.law, FrictionLaw::ColebrookWhite { .. });
            match friction.regime {
                Regime::Laminar | Regime::Transition if empirical => {
                    cautions.push(LineCaution::EmpiricalLawNotTurbulent { run, reynolds });
                }
                Regime::Transition => {
                    cautions.push(LineCaution::UncertainRegime { run, reynolds });
                }
                Regime::Still | Regime::Laminar | Regime::Turbulent => {}
            }
        }
        cautions
    }
}

/// Sum of heads.
fn sum(heads: impl Iterator<Item = Head>) -> Head {
    heads.fold(Head::from_m(0.0), |total, head| total + head)
}

/// Index of the node with the lowest pressure, the first of equals.
fn lowest(nodes: &[Node]) -> usize {
    nodes
        .iter()
        .enumerate()
        .min_by(|a, b| a.1.pressure.pa().total_cmp(&b.1.pressure.pa()))
        .map_or(0, |(index, _)| index)
}
