//! Laws that every transient owes, on made-up lines.

mod bench_line;
mod checks;
mod sudden;

use bench_line::{Bench, Pipe};
