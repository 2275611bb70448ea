//! The steady line: one pipe from a forebay to its nozzles, as surveyed.
//!
//! Water stands at the forebay level. Energy (level plus pressure head plus
//! velocity head) starts there and only falls: by friction along each run, by
//! local losses where they are, by the change of bore between unequal runs.
//! The grade (piezometric) line lies one velocity head below the energy line;
//! pressure is the height of the grade line above the pipe.
//!
//! Three questions, one model:
//!
//! - flow given: [`Line::grade`];
//! - nozzles given, flow solved: [`Line::flow_for`];
//! - flow given, equal nozzles solved: [`Line::bore_for`].
//!
//! Net head is the pressure head plus the velocity head just before a nozzle,
//! above the jet axis. At the change of bore between two runs the loss is that
//! of a sudden change ([`crate::fittings::sudden_contraction`],
//! [`crate::fittings::sudden_expansion`]): a well-made reducer loses less, so
//! this is on the safe side. Nothing else comes in by itself: entrance, rack,
//! bends and valves are [`LocalLoss`]es.
//!
//! Assumptions: the pipe runs full, flow is steady, velocity is uniform over
//! the section. Below the vapour pressure the answer is arithmetic only:
//! [`Grade::below_atmosphere`] and [`Grade::vapour_margin`] say where.

mod curve;
mod grade;
mod jets;
mod layout;
mod spec;
mod suction;
#[cfg(test)]
mod tests;

pub use curve::{CurvePoint, PowerCurve};
pub use grade::{Grade, LineCaution, Node, RunLoss};
pub use jets::{Jet, NozzleSet, NozzleTemplate, Solved};
pub use layout::Line;
pub(crate) use layout::RunLayout;
pub use spec::{LineError, LineSpec, LocalLoss, Point, Run};
pub use suction::{SuctionStretch, VapourMargin};
