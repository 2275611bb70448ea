//! `cargo task proof`: longer campaigns than every change can wait for.

use crate::test::{self, Board};
use crate::trouble::Trouble;
use crate::{places, serve, setup};
use std::process::{Command, ExitCode};
use std::time::Duration;

/// How many cases each property is tried with.
const CASES: &str = "20000";
/// How often the browser is killed while it saves.
const KILLS: &str = "200";
const HOUR: Duration = Duration::from_secs(3600);

/// Runs the campaigns named, or all, and closes with `N passed, N failed`.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    let names = ["properties", "crash"];
    if let Some(other) = arguments
        .iter()
        .find(|name| !names.contains(&name.as_str()))
    {
        return Err(Trouble::new(
            format!("There is no campaign {other:?}."),
            "The campaigns are properties and crash.",
        ));
    }
    let wanted = |name: &str| arguments.is_empty() || arguments.iter().any(|one| one == name);
    let mut board = Board::default();
    if wanted("properties") {
        board.tests(
            &format!("properties, {CASES} cases each"),
            Command::new("cargo")
                .args(["test", "--no-fail-fast"])
                .current_dir(places::root())
                .env("PROPTEST_CASES", CASES),
            4 * HOUR,
        );
    }
    if wanted("crash") {
        let kit = setup::for_page()?;
        let browser = setup::for_browser()?;
        setup::for_walk()?;
        serve::build(&kit)?;
        board.tests(
            &format!("the browser killed {KILLS} times while it saves"),
            test::walks(&browser)
                .args(["--test", "crash"])
                .env("FALLWRIGHT_KILLS", KILLS),
            4 * HOUR,
        );
    }
    Ok(board.close())
}
