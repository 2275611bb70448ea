//! Line and jets in one solve.

use super::grade::Grade;
use super::layout::Line;
use super::spec::LineError;
use crate::nozzle::Nozzle;
use crate::quantity::{GaugePressure, Head, Length, Level, Power, Velocity, VolumeRate};
use crate::solve::Solution;

/// Open nozzles at the foot of a line, each at the end of its own branch; the
/// branches are alike.
#[derive(Debug, Clone, PartialEq)]
pub struct NozzleSet {
    /// The open nozzles, equal or not.
    pub nozzles: Vec<Nozzle>,
    /// Level of the jet axis.
    pub axis: Level,
    /// Loss coefficient of manifold, branch and valve of each nozzle, on the
    /// velocity in the branch.
    pub branch_k: f64,
    /// Bore of the branch, just before the nozzle.
    pub branch_bore: Length,
}

/// Equal nozzles whose bore is to be found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NozzleTemplate {
    /// How many.
    pub count: usize,
    /// Velocity coefficient of each.
    pub velocity_coefficient: f64,
    /// Contraction coefficient of each.
    pub contraction_coefficient: f64,
    /// Level of the jet axis.
    pub axis: Level,
    /// Loss coefficient of manifold, branch and valve of each nozzle, on the
    /// velocity in the branch.
    pub branch_k: f64,
    /// Bore of the branch, just before the nozzle.
    pub branch_bore: Length,
}

/// One jet.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Jet {
    /// Bore of its nozzle.
    pub bore: Length,
    /// Flow through it.
    pub flow: VolumeRate,
    /// Net head: pressure head plus velocity head just before the nozzle,
    /// above the jet axis.
    pub net_head: Head,
    /// Gauge pressure just before the nozzle, at the level of the axis.
    pub pressure: GaugePressure,
    /// Velocity of the jet.
    pub velocity: Velocity,
    /// Diameter of the contracted jet.
    pub diameter: Length,
    /// Power in the jet.
    pub power: Power,
}

/// A line and its jets, in balance.
#[derive(Debug, Clone, PartialEq)]
pub struct Solved {
    /// The grade line.
    pub grade: Grade,
    /// Net head; of unequal jets the mean, weighted by flow.
    pub net_head: Head,
    /// Velocity of the jet; of unequal jets that of the widest.
    pub jet_velocity: Velocity,
    /// Diameter of the jet; of unequal jets that of the widest.
    pub jet_diameter: Length,
    /// Bore of the nozzle; of unequal nozzles the widest.
    pub bore: Length,
    /// Power in all jets together.
    pub jet_power: Power,
    /// Head lost in the branch; of unequal jets the mean, weighted by flow.
    pub branch_loss: Head,
    /// The jets, in the order of the nozzles.
    pub jets: Vec<Jet>,
    /// How the unknown was found: the root is the flow in m3/s, or the bore in
    /// m; the residual is in m of head.
    pub solution: Solution,
}

impl Line {
    /// The flow through given nozzles.
    ///
    /// # Errors
    /// A set that cannot be used, or no head above the jet axis.
    pub fn flow_for(&self, set: &NozzleSet) -> Result<Solved, LineError> {
        let _ = set;
        unimplemented!()
    }

    /// The bore of equal nozzles for a given flow.
    ///
    /// # Errors
    /// A template that cannot be used, a flow that is not positive, or
    /// [`LineError::FlowTooGreat`] with the greatest flow the line can pass.
    pub fn bore_for(
        &self,
        flow: VolumeRate,
        template: &NozzleTemplate,
    ) -> Result<Solved, LineError> {
        let _ = (flow, template);
        unimplemented!()
    }
}
