//! Where the pressure lies below that of the air.

use super::grade::Grade;
use crate::quantity::{AbsolutePressure, GaugePressure, Head, PipeLength};
use crate::water::Water;

/// A stretch of pipe under less than atmospheric pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SuctionStretch {
    /// Where it starts.
    pub from: PipeLength,
    /// Where it ends.
    pub to: PipeLength,
    /// Lowest gauge pressure in it.
    pub lowest: GaugePressure,
    /// Where that is.
    pub lowest_at: PipeLength,
}

/// How near the lowest pressure comes to boiling.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct VapourMargin {
    /// Index of the node.
    pub node: usize,
    /// Absolute pressure there.
    pub absolute: AbsolutePressure,
    /// Absolute pressure less vapour pressure, as a head of the water.
    /// Negative: the column parts.
    pub margin: Head,
}

impl Grade {
    /// Stretches with negative gauge pressure, in order, with their exact ends.
    #[must_use]
    pub fn below_atmosphere(&self) -> Vec<SuctionStretch> {
        unimplemented!()
    }

    /// Margin of the lowest pressure above the vapour pressure.
    #[must_use]
    pub fn vapour_margin(
        &self,
        atmosphere: AbsolutePressure,
        water: &Water,
        gravity: crate::quantity::Acceleration,
    ) -> VapourMargin {
        let _ = (atmosphere, water, gravity);
        unimplemented!()
    }
}
