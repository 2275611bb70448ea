//! `cargo task bench`: speeds as ratios within one run.

use crate::trouble::Trouble;
use crate::{places, process, say};
use std::process::{Command, ExitCode};

/// Runs the speed benchmark as it is built for release.
pub(crate) fn run(_: &[String]) -> Result<ExitCode, Trouble> {
    say::step("Speed, as ratios within one run");
    process::run(
        Command::new("cargo")
            .args(["bench", "-p", "outside", "--bench", "speed"])
            .current_dir(places::root()),
        "Mend what the compiler named above.",
    )?;
    Ok(ExitCode::SUCCESS)
}
