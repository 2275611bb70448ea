//! `hydraulics` against published figures, one file per subject. The figures
//! and their sources lie in `data/hydraulics/`; every row of a file is used, or
//! the test fails.

#![expect(
    clippy::unwrap_used,
    clippy::panic,
    reason = "helpers of tests, which the exception for test functions does not reach"
)]

mod fittings;
mod friction;
mod jets;
mod rows;
mod surge;
mod transient;
mod water;
