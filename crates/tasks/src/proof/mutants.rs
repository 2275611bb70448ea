//! Small changes to the engineering, one at a time: each should bring a test
//! down. What is changed and what may survive stands in `.cargo/mutants.toml`.

use super::HOUR;
use crate::setup::{self, Kit};
use crate::tally::Tally;
use crate::test::Board;
use crate::trouble::Trouble;
use crate::{places, process, say};
use std::path::{Path, PathBuf};
use std::time::Instant;
use std::{env, fs};

/// Which part of all changes is tried, as part/parts from 0/parts on: all of
/// them take a night. `FALLWRIGHT_MUTANTS` names another part, 0/1 all.
const PART: &str = "0/10";

/// Changes `hydraulics` and `statics`: their own tests first, then the checks
/// against published values for what those let pass.
pub(super) fn run(board: &mut Board) -> Result<(), Trouble> {
    let kit = setup::for_mutants()?;
    let part = env::var("FALLWRIGHT_MUTANTS").unwrap_or_else(|_| PART.to_owned());
    let begun = Instant::now();
    say::step(&format!(
        "Changing hydraulics and statics, part {part}: their own tests"
    ));
    // Every tenth of the list, not its first tenth.
    let chosen = ["--sharding", "round-robin", "--shard", &part].map(str::to_owned);
    let own = tried(&kit, "own", &["hydraulics", "statics"], &chosen)?;
    let mut missed = listed(&own, "missed.txt");
    let mut caught = listed(&own, "caught.txt").len() + listed(&own, "timeout.txt").len();
    if caught + missed.len() == 0 {
        return Err(Trouble::new(
            "No change was tried.",
            "Read what cargo-mutants said above.",
        ));
    }
    if !missed.is_empty() {
        say::step("What survived: the checks against published values");
        let these: Vec<String> = missed
            .iter()
            .map(|one| format!("--re=^{}$", escaped(one)))
            .collect();
        let outside = tried(&kit, "outside", &["outside"], &these)?;
        let still = listed(&outside, "missed.txt");
        let before = missed.len();
        // Others that it may have tried besides were not in this part.
        missed.retain(|one| still.contains(one));
        caught += before - missed.len();
    }
    for one in &missed {
        say::note(&format!("survived: {one}"));
    }
    let tally = Tally {
        passed: caught as u64,
        failed: missed.len() as u64,
    };
    board.add(
        &format!("changes that a test notices, part {part}"),
        tally,
        begun,
    );
    Ok(())
}

/// Tries the chosen changes with the tests of these packages; returns the
/// folder with the lists of what came of it.
fn tried(kit: &Kit, name: &str, tests: &[&str], chosen: &[String]) -> Result<PathBuf, Trouble> {
    let folder = places::target().join("mutants").join(name);
    if folder.exists() {
        fs::remove_dir_all(&folder).map_err(|error| Trouble::file("clear", &folder, &error))?;
    }
    fs::create_dir_all(&folder).map_err(|error| Trouble::file("make", &folder, &error))?;
    let mut command = kit.command("cargo");
    command
        .args(["mutants", "--no-shuffle", "--colors", "never"])
        .args(["-p", "hydraulics", "-p", "statics"])
        .args(["--test-package", &tests.join(",")])
        .arg("--output")
        .arg(&folder)
        .args(chosen)
        .current_dir(places::root());
    // It ends badly when anything survived, too: the lists tell.
    process::lines(&mut command, HOUR.saturating_mul(8), |_| {})?;
    Ok(folder.join("mutants.out"))
}

/// A text as a regular expression that matches it alone.
fn escaped(text: &str) -> String {
    let mut pattern = String::new();
    for character in text.chars() {
        // Escaped, these two would mean the ends of a word.
        if character.is_ascii_punctuation() && !"<>".contains(character) {
            pattern.push('\\');
        }
        pattern.push(character);
    }
    pattern
}

/// The lines of a list that cargo-mutants leaves; none where there is no list.
fn listed(folder: &Path, name: &str) -> Vec<String> {
    fs::read_to_string(folder.join(name))
        .unwrap_or_default()
        .lines()
        .map(str::to_owned)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_change_is_chosen_by_its_name_alone() {
        assert_eq!(
            escaped("a.rs:1:2: replace - with / in f -> T<U>"),
            "a\\.rs\\:1\\:2\\: replace \\- with \\/ in f \\-> T<U>"
        );
    }
}
