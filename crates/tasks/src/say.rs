//! The only place that writes to the terminal.
#![expect(
    clippy::print_stdout,
    clippy::print_stderr,
    reason = "a command line tool talks to its terminal"
)]

use crate::trouble::Trouble;
use std::io::Write;

/// A step begins.
pub(crate) fn step(text: &str) {
    println!("==> {text}");
    flush();
}

/// Something worth knowing within a step.
pub(crate) fn note(text: &str) {
    println!("    {text}");
    flush();
}

/// A line as it is, for results.
pub(crate) fn line(text: &str) {
    println!("{text}");
    flush();
}

/// What went wrong and what to do, on standard error.
pub(crate) fn trouble(trouble: &Trouble) {
    eprintln!("trouble: {trouble}");
}

fn flush() {
    // A reader that has gone away is no reason to stop the work.
    let _ = std::io::stdout().flush();
}
