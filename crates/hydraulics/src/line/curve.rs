//! Power against flow through a given pipe.

use super::jets::NozzleTemplate;
use super::layout::Line;
use super::spec::LineError;
use crate::quantity::{Head, Power, VolumeRate};

/// One point of the curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CurvePoint {
    /// Flow.
    pub flow: VolumeRate,
    /// Net head.
    pub net_head: Head,
    /// Power in the jets.
    pub jet_power: Power,
    /// Share of the gross head (forebay to jet axis) that is lost.
    pub lost_share: f64,
}

/// Power in the jets against flow, the nozzles changing with the flow.
#[derive(Debug, Clone, PartialEq)]
pub struct PowerCurve {
    /// Points at evenly spaced flows from 0 to the greatest.
    pub points: Vec<CurvePoint>,
    /// The point of greatest power: near one third of the head lost. A limit
    /// to stay away from, not a target.
    pub greatest_power: CurvePoint,
    /// Flow at which all head is lost.
    pub greatest_flow: VolumeRate,
}

impl Line {
    /// Power against flow, in `steps` even steps (at least 1).
    ///
    /// # Errors
    /// As for [`Line::bore_for`].
    pub fn power_curve(
        &self,
        template: &NozzleTemplate,
        steps: usize,
    ) -> Result<PowerCurve, LineError> {
        let _ = (template, steps);
        unimplemented!()
    }
}
