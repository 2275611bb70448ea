//! Random bytes as files, typed texts and books: `tests/fuzz`.

use super::HOUR;
use crate::tally::Tally;
use crate::test::Board;
use crate::trouble::Trouble;
use crate::{places, process, say, setup};
use std::time::Instant;
use std::{env, fs};

/// How long each target is tried, in seconds; `FALLWRIGHT_FUZZ_SECONDS` says
/// otherwise.
const SECONDS: u32 = 600;
/// Longest input, in bytes: a book is longer than what libFuzzer takes by itself.
const LONGEST: u32 = 65_536;

/// The targets, and a folder with examples to start from.
const TARGETS: [(&str, Option<&str>); 3] = [
    ("book", Some("tests/outside/data/books")),
    ("number", None),
    ("evaluate", None),
];

/// Tries every target for its time; one that was brought down counts as failed.
pub(super) fn run(board: &mut Board) -> Result<(), Trouble> {
    let kit = setup::for_fuzz()?;
    let seconds = env::var("FALLWRIGHT_FUZZ_SECONDS")
        .ok()
        .and_then(|text| text.parse().ok())
        .unwrap_or(SECONDS);
    for (target, examples) in TARGETS {
        let name = format!("random bytes for {seconds} s: {target}");
        say::step(&name);
        let begun = Instant::now();
        let corpus = places::target().join("fuzz/corpus").join(target);
        fs::create_dir_all(&corpus).map_err(|error| Trouble::file("make", &corpus, &error))?;
        let mut command = kit.command("cargo");
        command
            // Without a sanitizer, which only nightly compilers have; there is
            // no unsafe code to watch.
            .args(["fuzz", "run", "--sanitizer", "none"])
            .args(["--fuzz-dir", "tests/fuzz", "--target-dir"])
            .arg(places::target().join("fuzz"))
            .arg(target)
            .arg(&corpus)
            .args(examples)
            .args(["--", "-timeout=20", "-verbosity=0", "-print_final_stats=1"])
            .arg(format!("-max_total_time={seconds}"))
            .arg(format!("-max_len={LONGEST}"))
            .current_dir(places::root());
        let good = process::lines(&mut command, HOUR.saturating_mul(2), |_| {})?;
        if !good {
            say::note(&format!(
                "what brought it down lies in tests/fuzz/artifacts/{target}: keep it as a test"
            ));
        }
        board.add(&name, Tally::of(good), begun);
    }
    Ok(())
}
