//! Forces and walls: hoop stress, allowable pressure of a steel wall, collapse
//! of a free pipe.
//!
//! Quantities cross the door as `uom` types (f64, SI); the kernels run on plain
//! SI numbers. Nothing here knows a document, a screen or a language.

pub mod collapse;
pub mod hoop;
pub mod steel;

mod check;

pub use check::{Input, WallError};
