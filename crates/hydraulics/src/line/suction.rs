//! Where the pressure lies below that of the air.

use super::grade::{Grade, Node};
use crate::quantity::{AbsolutePressure, Acceleration, GaugePressure, Head, PipeLength};
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
    ///
    /// Pressure runs straight between nodes, so the ends are exact and the
    /// lowest pressure lies at a node.
    #[must_use]
    pub fn below_atmosphere(&self) -> Vec<SuctionStretch> {
        let mut stretches: Vec<SuctionStretch> = Vec::new();
        let mut open: Option<SuctionStretch> = None;
        let mut before: Option<&Node> = None;
        for node in &self.nodes {
            let negative = node.pressure.pa() < 0.0;
            match (&mut open, negative) {
                (None, true) => {
                    let from = before.map_or(node.chainage, |before| crossing(before, node));
                    open = Some(SuctionStretch {
                        from,
                        to: node.chainage,
                        lowest: node.pressure,
                        lowest_at: node.chainage,
                    });
                }
                (Some(stretch), true) => {
                    stretch.to = node.chainage;
                    if node.pressure < stretch.lowest {
                        stretch.lowest = node.pressure;
                        stretch.lowest_at = node.chainage;
                    }
                }
                (Some(stretch), false) => {
                    stretch.to = before.map_or(node.chainage, |before| crossing(before, node));
                    stretches.extend(open.take());
                }
                (None, false) => {}
            }
            before = Some(node);
        }
        stretches.extend(open);
        stretches
    }

    /// Margin of the lowest pressure above the vapour pressure, under the
    /// given atmosphere. `None` for a grade without nodes.
    ///
    /// Water that stands under suction gives off air long before it boils:
    /// common practice keeps a siphon above about -7 m of head.
    #[must_use]
    pub fn vapour_margin(
        &self,
        atmosphere: AbsolutePressure,
        water: &Water,
        gravity: Acceleration,
    ) -> Option<VapourMargin> {
        let node = self.nodes.get(self.lowest)?;
        let absolute = node.pressure.absolute(atmosphere);
        let margin = absolute.gauge(water.vapour_pressure());
        Some(VapourMargin {
            node: self.lowest,
            absolute,
            margin: margin.head(water.density(), gravity),
        })
    }
}

/// Where the pressure between two nodes of unlike sign is zero.
fn crossing(before: &Node, after: &Node) -> PipeLength {
    let (a, b) = (before.pressure.pa(), after.pressure.pa());
    let (from, to) = (before.chainage.m(), after.chainage.m());
    PipeLength::from_m(from + (to - from) * (a / (a - b)))
}
