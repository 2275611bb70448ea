//! Computes the grid natively, for the test in the browser to compare with.

use std::error::Error;
use std::fmt::Write as _;
use std::path::Path;
use std::{env, fs};

#[path = "src/grid.rs"]
mod grid;

fn main() -> Result<(), Box<dyn Error>> {
    let mut text = String::new();
    for (name, lines) in grid::groups()? {
        writeln!(text, "# {name}")?;
        for line in lines {
            writeln!(text, "{line}")?;
        }
    }
    let folder = env::var_os("OUT_DIR").ok_or("cargo sets OUT_DIR")?;
    fs::write(Path::new(&folder).join("native.txt"), text)?;
    Ok(())
}
