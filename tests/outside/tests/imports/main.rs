//! Survey files in the forms that other programs write them: each gives the
//! line, or names the row and the reason. The files are invented; the
//! geodesics are a library's.
#![allow(
    clippy::panic,
    clippy::unwrap_used,
    reason = "a helper of tests fails as a test does"
)]

mod csv_files;
mod geodesics;
mod gpx_files;

use std::path::PathBuf;

/// The bytes of a sample.
fn sample(name: &str) -> Vec<u8> {
    let path = PathBuf::from(env!("CARGO_MANIFEST_DIR"))
        .join("data")
        .join(name);
    std::fs::read(&path).unwrap_or_else(|why| panic!("{name}: {why}"))
}
