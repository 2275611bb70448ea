//! Laws that every transient owes, on made-up lines.

mod bench_line;
mod checks;
mod closing;
mod grids;
mod laws;
mod sudden;

use bench_line::{Bench, Pipe};
