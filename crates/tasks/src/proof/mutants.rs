//! Small changes to the engineering, one at a time: each should bring a test
//! down. What is changed and what may survive stands in `.cargo/mutants.toml`.

use super::HOUR;
use crate::tally::Tally;
use crate::test::Board;
use crate::trouble::Trouble;
use crate::{places, process, say, setup};
use std::fs;
use std::path::Path;
use std::time::Instant;

/// Changes `hydraulics` and `statics`: their own tests first, then the checks
/// against published values for what those let pass.
pub(super) fn run(board: &mut Board) -> Result<(), Trouble> {
    let kit = setup::for_mutants()?;
    let folder = places::target().join("mutants");
    if folder.exists() {
        fs::remove_dir_all(&folder).map_err(|error| Trouble::file("clear", &folder, &error))?;
    }
    fs::create_dir_all(&folder).map_err(|error| Trouble::file("make", &folder, &error))?;
    let begun = Instant::now();
    for (step, tests, again) in [
        ("their own tests", "hydraulics,statics", false),
        ("the checks against published values", "outside", true),
    ] {
        say::step(&format!("Changing hydraulics and statics: {step}"));
        let mut command = kit.command("cargo");
        command
            .args(["mutants", "--no-shuffle", "--colors", "never"])
            .args(["-p", "hydraulics", "-p", "statics"])
            .args(["--test-package", tests])
            .arg("--output")
            .arg(&folder)
            .current_dir(places::root());
        if again {
            // Only those that nothing has caught yet.
            command.arg("--iterate");
        }
        process::lines(&mut command, HOUR.saturating_mul(8), |_| {})?;
    }
    let out = folder.join("mutants.out");
    let missed = listed(&out, "missed.txt");
    for one in &missed {
        say::note(&format!("survived: {one}"));
    }
    let caught = ["caught.txt", "previously_caught.txt", "timeout.txt"]
        .map(|name| listed(&out, name).len())
        .iter()
        .sum::<usize>();
    if caught == 0 {
        return Err(Trouble::new(
            "No change brought any test down: none was tried.",
            "Read what cargo-mutants said above.",
        ));
    }
    let tally = Tally {
        passed: caught as u64,
        failed: missed.len() as u64,
    };
    board.add("changes that a test notices", tally, begun);
    Ok(())
}

/// The lines of a list that cargo-mutants leaves; none where there is no list.
fn listed(folder: &Path, name: &str) -> Vec<String> {
    fs::read_to_string(folder.join(name))
        .unwrap_or_default()
        .lines()
        .map(str::to_owned)
        .collect()
}
