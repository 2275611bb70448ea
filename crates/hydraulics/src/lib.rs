//! Water in pipes: properties, friction, fittings, the steady line with its
//! jets, quick surge figures, transients.
//!
//! The picture is a penstock: water stands at a known level in a forebay,
//! runs down a pipe whose bore may change on the way, and leaves through
//! nozzles at the foot. Levels are heights above the survey's datum, chainage
//! is measured along the pipe, head is energy per weight in metres of the
//! water itself, pressure is gauge pressure unless it is called absolute.
//!
//! Where to start:
//!
//! - [`water::Water::at`] and [`air::standard_pressure`] for what flows and
//!   what stands around it;
//! - [`friction::FrictionLaw`] and [`fittings`] for what is lost;
//! - [`line::Line`] for the grade line, the flow through given nozzles
//!   ([`line::Line::flow_for`]) and the nozzle for a given flow
//!   ([`line::Line::bore_for`]);
//! - [`surge`] for wave speed and the quick surge figures. They are
//!   first estimates: they do not replace the transient solution;
//! - [`transient`] for that solution, and the shortest safe closing time.
//!
//! Quantities cross the doors as [`quantity`] types over `uom` (f64, SI);
//! what `uom` cannot tell apart has a newtype of its own. Kernels run on plain
//! SI `f64`. All transcendental functions come from [`math`], so that a phone
//! and the test machine give the same bits.
//!
//! The crate does no input or output and knows no document, no screen and no
//! language.

pub mod air;
pub mod constants;
pub mod fittings;
pub mod friction;
pub mod gravity;
pub mod intake;
pub mod line;
pub mod math;
pub mod nozzle;
pub mod quantity;
pub mod solve;
pub mod surge;
pub mod transient;
pub mod water;
pub mod wheel;
