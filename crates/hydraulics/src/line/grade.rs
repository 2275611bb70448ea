//! The grade line for a given flow.

use super::layout::Line;
use super::spec::LineError;
use crate::friction::Regime;
use crate::quantity::{GaugePressure, Head, Level, PipeLength, Velocity, VolumeRate};

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
    /// # Errors
    /// [`LineError::Flow`] for a negative flow; [`LineError::Run`] when the
    /// Reynolds number in a run is beyond 1e9.
    pub fn grade(&self, flow: VolumeRate) -> Result<Grade, LineError> {
        let _ = flow;
        unimplemented!()
    }
}
