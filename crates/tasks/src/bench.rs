//! `cargo task bench`: speeds beside their targets.
//!
//! Natively and in the browser as ratios within one run, since nanoseconds do
//! not carry from machine to machine; of the built page as milliseconds on a
//! processor slowed down to a quarter. Nothing here fails for being slow.

mod figures;

use crate::setup::{self, Browser, Kit};
use crate::test;
use crate::trouble::Trouble;
use crate::{page, places, process, say};
use figures::Times;
use std::process::{Command, ExitCode};
use std::time::Duration;

const PARTS: [&str; 3] = ["native", "wasm", "page"];
/// How often the browser and this machine are timed in turns.
const TURNS: usize = 3;
const LIMIT: Duration = Duration::from_secs(20 * 60);

/// Runs the parts named, or all, then prints the figures with their targets.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    if let Some(other) = arguments.iter().find(|one| !PARTS.contains(&one.as_str())) {
        return Err(Trouble::new(
            format!("There is no part {other:?}."),
            "The parts are native, wasm and page.",
        ));
    }
    let wanted = |part: &str| arguments.is_empty() || arguments.iter().any(|one| one == part);
    if wanted("native") {
        say::step("Speed, as ratios within one run");
        process::run(
            cargo().args(["bench", "-p", "outside", "--bench", "speed"]),
            "Mend what the compiler named above.",
        )?;
    }
    let mut lines = Vec::new();
    if wanted("wasm") {
        let kit = setup::for_page()?;
        let browser = setup::for_browser()?;
        lines.extend(in_turns(&kit, &browser)?.ratios());
    }
    if wanted("page") {
        let kit = setup::for_page()?;
        let browser = setup::for_browser()?;
        page::build(&kit)?;
        lines.extend(built_page(&browser)?.page(wasm_bytes()));
    }
    if !lines.is_empty() {
        say::line(&format!("\n{:<66} {:>8}   target", "", "reached"));
    }
    for line in lines {
        say::line(&line);
    }
    Ok(ExitCode::SUCCESS)
}

fn cargo() -> Command {
    let mut command = Command::new("cargo");
    command.current_dir(places::root());
    command
}

/// The same work in the browser and natively, in turns.
fn in_turns(kit: &Kit, browser: &Browser) -> Result<Both, Trouble> {
    const WORK: [&str; 5] = ["--release", "-p", "wasm-bits", "--features", "speed"];
    let mut both = Both::default();
    for turn in 1..=TURNS {
        say::step(&format!(
            "Timing in the browser and natively, turn {turn} of {TURNS}"
        ));
        let mut wasm = test::in_browser(kit, browser);
        wasm.args(WORK)
            .args(["--test", "speed", "--", "--nocapture"]);
        both.wasm.read(&mut wasm)?;
        let mut native = cargo();
        native
            .arg("run")
            .args(WORK)
            .args(["--example", "native_speed"]);
        both.native.read(&mut native)?;
    }
    Ok(both)
}

/// What was timed on both sides.
#[derive(Debug, Default)]
struct Both {
    wasm: Times,
    native: Times,
}

impl Both {
    fn ratios(&self) -> Vec<String> {
        let within = |times: &Times| times.ratio("colebrook", times, "two-ln");
        let against = |name: &str| self.wasm.ratio(name, &self.native, name);
        vec![
            figures::line(
                "Colebrook-White against two platform ln, WebAssembly",
                within(&self.wasm),
                "<= 0.75",
            ),
            figures::line(
                "Colebrook-White against two platform ln, native",
                within(&self.native),
                "<= 1.2",
            ),
            figures::line(
                "whole evaluation, WebAssembly against native",
                against("evaluation"),
                "<= 1.1",
            ),
            figures::line(
                "sweep of the catalogue, WebAssembly against native",
                against("sweep"),
                "<= 1.1",
            ),
            figures::line(
                "sweep of the catalogue in WebAssembly, against a frame of 16 ms",
                self.wasm.of("sweep").map(|seconds| seconds / 0.016),
                "< 1",
            ),
        ]
    }
}

/// The built page on a slow processor.
fn built_page(browser: &Browser) -> Result<Times, Trouble> {
    say::step("Timing the built page at a quarter of this processor's speed (some minutes)");
    let mut times = Times::default();
    let mut command = cargo();
    command
        .args(["run", "-p", "walkthrough", "--example", "speed"])
        .env("CHROMIUM", &browser.chromium)
        .env("CHROMEDRIVER", &browser.driver);
    times.read(&mut command)?;
    Ok(times)
}

/// Length of the page's module, bytes.
fn wasm_bytes() -> Option<u64> {
    std::fs::read_dir(places::dist())
        .ok()?
        .flatten()
        .find(|entry| entry.path().extension().is_some_and(|end| end == "wasm"))
        .and_then(|entry| entry.metadata().ok())
        .map(|data| data.len())
}
