//! `cargo task proof`: longer campaigns than every change can wait for.

mod fuzz;
mod mutants;

use crate::test::{self, Board};
use crate::trouble::Trouble;
use crate::{page, places, setup};
use std::process::{Command, ExitCode};
use std::time::Duration;

/// How many cases each property is tried with.
const CASES: &str = "20000";
/// How often the browser is killed while it saves.
const KILLS: &str = "200";
const HOUR: Duration = Duration::from_secs(3600);

/// One campaign.
struct Campaign {
    name: &'static str,
    run: fn(&mut Board) -> Result<(), Trouble>,
}

const CAMPAIGNS: [Campaign; 4] = [
    Campaign {
        name: "properties",
        run: properties,
    },
    Campaign {
        name: "crash",
        run: crash,
    },
    Campaign {
        name: "fuzz",
        run: fuzz::run,
    },
    Campaign {
        name: "mutants",
        run: mutants::run,
    },
];

/// Runs the campaigns named, or all, and closes with `N passed, N failed`.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    if let Some(other) = arguments
        .iter()
        .find(|name| !CAMPAIGNS.iter().any(|one| one.name == name.as_str()))
    {
        return Err(Trouble::new(
            format!("There is no campaign {other:?}."),
            format!(
                "The campaigns are {}.",
                CAMPAIGNS.map(|one| one.name).join(", ")
            ),
        ));
    }
    let mut board = Board::default();
    for campaign in CAMPAIGNS {
        if arguments.is_empty() || arguments.iter().any(|name| name == campaign.name) {
            (campaign.run)(&mut board)?;
        }
    }
    Ok(board.close())
}

fn properties(board: &mut Board) -> Result<(), Trouble> {
    board.tests(
        &format!("properties, {CASES} cases each"),
        Command::new("cargo")
            .args(["test", "--no-fail-fast"])
            // The page's pure modules have properties too.
            .args(["--workspace", "--exclude", "walkthrough"])
            .args(["--exclude", "wasm-bits"])
            .current_dir(places::root())
            .env("PROPTEST_CASES", CASES),
        4 * HOUR,
    );
    Ok(())
}

fn crash(board: &mut Board) -> Result<(), Trouble> {
    let kit = setup::for_page()?;
    let browser = setup::for_browser()?;
    setup::for_walk()?;
    page::build(&kit)?;
    board.tests(
        &format!("the browser killed {KILLS} times while it saves"),
        test::walks(&browser)
            .args(["--test", "crash"])
            .env("FALLWRIGHT_KILLS", KILLS),
        4 * HOUR,
    );
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_unknown_campaign_is_named_with_those_there_are() {
        let said = run(&["fuz".to_owned()]).unwrap_err().to_string();
        assert!(
            said.contains("\"fuz\"") && said.contains("fuzz, mutants"),
            "{said}"
        );
    }
}
