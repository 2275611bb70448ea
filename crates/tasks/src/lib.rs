//! The developer's commands behind `cargo task`: one module each.
//!
//! The static server is public, since the walk through the page in `tests/browser`
//! serves the built page with it.

mod bench;
mod commands;
mod evaluate;
mod page;
pub mod places;
mod post_build;
mod process;
mod proof;
mod say;
mod schema;
mod serve;
pub mod server;
mod setup;
mod size;
mod tally;
mod test;
mod trouble;

use std::process::ExitCode;

/// Runs the command named by the first argument with the rest of them.
///
/// The exit code is that of the command: 0 when it did what it says, otherwise
/// what `cargo task help` lists for it (1 unless told otherwise).
#[must_use]
pub fn run(arguments: &[String]) -> ExitCode {
    let name = arguments.first().map_or("help", String::as_str);
    let Some(command) = commands::find(name) else {
        say::trouble(&trouble::Trouble::new(
            format!("There is no command {name:?}."),
            "`cargo task help` lists the commands.",
        ));
        return ExitCode::from(2);
    };
    match (command.run)(arguments.get(1..).unwrap_or_default()) {
        Ok(code) => code,
        Err(trouble) => {
            say::trouble(&trouble);
            ExitCode::from(command.trouble_code)
        }
    }
}

/// Writes `sw.js` for the built page in `folder`, as the build does after
/// checking that the page keeps to itself.
///
/// # Errors
/// What is wrong, in words.
pub fn write_service_worker(folder: &std::path::Path) -> Result<(), String> {
    post_build::finish(folder)
        .map(|_| ())
        .map_err(|trouble| trouble.to_string())
}
