//! `hydraulics` against published figures, one file per subject. The figures
//! and their sources lie in `data/hydraulics/`; every row of a file is used, or
//! the test fails.

mod fittings;
mod friction;
mod jets;
mod rows;
mod surge;
mod water;
