//! `cargo task test`: every test, or the parts named.

use crate::setup::{self, Browser, Kit};
use crate::tally::Tally;
use crate::trouble::Trouble;
use crate::{page, places, process, say};
use std::process::{Command, ExitCode};
use std::time::{Duration, Instant};

const TARGET: &str = "wasm32-unknown-unknown";
/// The packages that are compiled for the browser.
const FOR_BROWSER: [&str; 2] = ["page", "wasm-bits"];
const MINUTE: Duration = Duration::from_secs(60);

#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Part {
    Lint,
    Native,
    Wasm,
    Browser,
}

const PARTS: [(&str, Part); 4] = [
    ("lint", Part::Lint),
    ("native", Part::Native),
    ("wasm", Part::Wasm),
    ("browser", Part::Browser),
];

/// Runs the parts named, or all, and closes with `N passed, N failed`.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    let parts = parts(arguments)?;
    let mut board = Board::default();
    // Everything that may be missing first: a download refused is better known at once.
    let needs_page = parts.iter().any(|part| *part != Part::Native);
    let kit = if needs_page {
        setup::for_page()?
    } else {
        Kit::default()
    };
    let browser = if parts.contains(&Part::Wasm) || parts.contains(&Part::Browser) {
        Some(setup::for_browser()?)
    } else {
        None
    };
    if parts.contains(&Part::Browser) {
        setup::for_walk()?;
    }
    for part in parts {
        match (part, &browser) {
            (Part::Lint, _) => lint(&mut board, &kit),
            (Part::Native, _) => native(&mut board),
            (Part::Wasm, Some(browser)) => wasm(&mut board, &kit, browser),
            (Part::Browser, Some(browser)) => walk(&mut board, &kit, browser),
            (Part::Wasm | Part::Browser, None) => {}
        }
    }
    Ok(board.close())
}

fn parts(arguments: &[String]) -> Result<Vec<Part>, Trouble> {
    if arguments.is_empty() {
        return Ok(PARTS.map(|(_, part)| part).to_vec());
    }
    arguments
        .iter()
        .map(|argument| {
            PARTS
                .iter()
                .find_map(|(name, part)| (name == argument).then_some(*part))
                .ok_or_else(|| {
                    Trouble::new(
                        format!("There is no part {argument:?}."),
                        "The parts are lint, native, wasm and browser.",
                    )
                })
        })
        .collect()
}

fn cargo() -> Command {
    let mut command = Command::new("cargo");
    command.current_dir(places::root());
    command
}

fn lint(board: &mut Board, kit: &Kit) {
    board.check(
        "layout of the code",
        cargo().args(["fmt", "--all", "--check"]),
    );
    let mut clippy = cargo();
    clippy.args(["clippy", "--workspace", "--all-targets"]);
    if !kit.debian {
        for package in FOR_BROWSER {
            clippy.args(["--exclude", package]);
        }
    }
    board.check("lints, native", clippy.args(["--", "-Dwarnings"]));
    if kit.debian {
        say::note("Debian's compiler comes without Clippy: the page is linted natively above");
    } else {
        // Without the tests: what they are written with does not compile for
        // the browser.
        let mut clippy = kit.command("cargo");
        clippy
            .args(["clippy", "--lib", "--bins", "--target", TARGET])
            .current_dir(places::root());
        for package in FOR_BROWSER {
            clippy.args(["-p", package]);
        }
        board.check("lints, WebAssembly", clippy.args(["--", "-Dwarnings"]));
    }
    board.check(
        "documentation",
        cargo()
            .args(["doc", "--no-deps", "--document-private-items"])
            .env("RUSTDOCFLAGS", "-Dwarnings"),
    );
}

fn native(board: &mut Board) {
    board.tests(
        "native",
        // The page's pure modules too; what needs a browser comes after.
        cargo().args([
            "test",
            "--no-fail-fast",
            "--workspace",
            "--exclude",
            "walkthrough",
            "--exclude",
            "wasm-bits",
        ]),
        40 * MINUTE,
    );
}

fn wasm(board: &mut Board, kit: &Kit, browser: &Browser) {
    let mut packages = vec!["wasm-bits"];
    if places::root().join("crates/page/tests").is_dir() {
        packages.push("page");
    }
    for package in packages {
        let mut command = in_browser(kit, browser);
        command.args(["--release", "--tests", "-p", package]);
        board.tests(
            &format!("WebAssembly in the browser: {package}"),
            &mut command,
            30 * MINUTE,
        );
    }
}

/// `cargo test` for WebAssembly, run in the browser.
pub(crate) fn in_browser(kit: &Kit, browser: &Browser) -> Command {
    let mut command = kit.command("cargo");
    command
        .args(["test", "--target", TARGET])
        .current_dir(places::root())
        .env(
            "CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUNNER",
            "wasm-bindgen-test-runner",
        )
        .env("CHROMEDRIVER", &browser.driver)
        .env("WASM_BINDGEN_TEST_TIMEOUT", "120");
    command
}

fn walk(board: &mut Board, kit: &Kit, browser: &Browser) {
    say::step("page");
    let begun = Instant::now();
    let built = page::build(kit);
    board.add("building the page", Tally::of(built.is_ok()), begun);
    if let Err(trouble) = built {
        say::trouble(&trouble);
        return;
    }
    board.tests("walk through the page", &mut walks(browser), 40 * MINUTE);
}

/// The command that takes the walks through the built page.
pub(crate) fn walks(browser: &Browser) -> Command {
    let mut command = cargo();
    command
        .args(["test", "--no-fail-fast", "-p", "walkthrough"])
        .env("CHROMIUM", &browser.chromium)
        .env("CHROMEDRIVER", &browser.driver);
    command
}

/// What ran, and how it went.
#[derive(Debug, Default)]
pub(crate) struct Board {
    rows: Vec<(String, Tally, Duration)>,
}

impl Board {
    /// Runs a check that counts as one test.
    fn check(&mut self, name: &str, command: &mut Command) {
        say::step(name);
        let begun = Instant::now();
        let good = process::run(command, "Mend what is named above.");
        if let Err(trouble) = &good {
            say::trouble(trouble);
        }
        self.add(name, Tally::of(good.is_ok()), begun);
    }

    /// Runs a test runner and counts its tests.
    pub(crate) fn tests(&mut self, name: &str, command: &mut Command, limit: Duration) {
        say::step(name);
        let begun = Instant::now();
        let tally = match process::counted(command, limit) {
            Ok((good, mut tally)) => {
                // It failed without a failed test, or passed without any: it did not run.
                if (!good && tally.failed == 0) || (good && tally.passed == 0) {
                    say::note("no test was run to its end");
                    tally.failed += 1;
                }
                tally
            }
            Err(trouble) => {
                say::trouble(&trouble);
                Tally::of(false)
            }
        };
        self.add(name, tally, begun);
    }

    /// Takes up what was counted under a name.
    pub(crate) fn add(&mut self, name: &str, tally: Tally, begun: Instant) {
        self.rows.push((name.to_owned(), tally, begun.elapsed()));
    }

    pub(crate) fn close(&self) -> ExitCode {
        let mut sum = Tally::default();
        say::line("");
        for (name, tally, took) in &self.rows {
            sum.add(*tally);
            say::line(&format!(
                "{name:44} {:>6} passed {:>4} failed {:>6.0} s",
                tally.passed,
                tally.failed,
                took.as_secs_f64()
            ));
        }
        say::line(&format!("\n{} passed, {} failed", sum.passed, sum.failed));
        if sum.failed == 0 {
            ExitCode::SUCCESS
        } else {
            ExitCode::FAILURE
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn words(text: &str) -> Vec<String> {
        text.split_whitespace().map(str::to_owned).collect()
    }

    #[test]
    fn parts_are_read_or_refused() {
        assert_eq!(parts(&[]).unwrap().len(), 4);
        assert_eq!(
            parts(&words("wasm lint")).unwrap(),
            [Part::Wasm, Part::Lint]
        );
        assert!(parts(&words("nativ")).is_err());
    }

    #[test]
    fn a_runner_without_tests_is_a_failure() {
        let mut board = Board::default();
        board.tests("none", &mut Command::new("true"), MINUTE);
        board.tests("broken", &mut Command::new("false"), MINUTE);
        assert_eq!(
            board.rows[0].1,
            Tally {
                passed: 0,
                failed: 1
            }
        );
        assert_eq!(
            board.rows[1].1,
            Tally {
                passed: 0,
                failed: 1
            }
        );
    }
}
