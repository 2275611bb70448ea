//! The developer's commands behind `cargo task`.

use std::process::ExitCode;

fn main() -> ExitCode {
    tasks::run(&std::env::args().skip(1).collect::<Vec<_>>())
}
