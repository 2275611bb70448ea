//! What the harnesses print as `timed NAME VALUE`, and the lines made of it.

use super::LIMIT;
use crate::process;
use crate::trouble::Trouble;
use std::collections::BTreeMap;
use std::process::Command;

/// Times by name: the least of each that was read.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct Times(BTreeMap<String, f64>);

impl Times {
    /// Runs a harness and takes up what it printed.
    pub(super) fn read(&mut self, command: &mut Command) -> Result<(), Trouble> {
        let shown = process::typed(command);
        let mut read = 0;
        let good = process::lines(command, LIMIT, |line| read += usize::from(self.take(line)))?;
        if good && read > 0 {
            return Ok(());
        }
        Err(Trouble::new(
            format!("`{shown}` ended without its times."),
            "Mend what is named above, then run it again.",
        ))
    }

    /// Takes up a line, if it is one of a time.
    fn take(&mut self, line: &str) -> bool {
        let mut words = line
            .split_whitespace()
            .skip_while(|word| *word != "timed")
            .skip(1);
        let (Some(name), Some(Ok(value))) = (words.next(), words.next().map(str::parse::<f64>))
        else {
            return false;
        };
        let least = self.0.entry(name.to_owned()).or_insert(value);
        *least = least.min(value);
        true
    }

    /// The time of that name.
    pub(super) fn of(&self, name: &str) -> Option<f64> {
        self.0.get(name).copied()
    }

    /// One time over another.
    pub(super) fn ratio(&self, name: &str, others: &Times, other: &str) -> Option<f64> {
        Some(self.of(name)? / others.of(other)?)
    }

    /// The lines of the built page, whose module has `wasm_bytes`.
    pub(super) fn page(&self, wasm_bytes: Option<u64>) -> Vec<String> {
        let mut lines = Vec::new();
        for (book, of_book) in [("demo", "demo book"), ("long", "500 stations")] {
            for (field, of_field) in [("flow", "design flow"), ("level", "forebay level")] {
                lines.push(line(
                    &format!("key press to paint, 95 of 100, {of_book}, {of_field}, ms"),
                    self.of(&format!("keys-{book}-{field}")),
                    "<= 50",
                ));
            }
        }
        let halves = wasm_bytes.map(|bytes| bytes as f64 / 524_288.0);
        lines.push(line(
            "cold start to usable, ms",
            self.of("cold-start"),
            "<= 600",
        ));
        lines.push(line(
            "start without the server to usable, ms",
            self.of("offline-restart"),
            "<= 400",
        ));
        lines.push(line(
            "fetching, compiling and instantiating, ms for each 0.5 MB",
            self.of("compile")
                .zip(halves)
                .map(|(ms, halves)| ms / halves),
            "<= 25",
        ));
        lines
    }
}

/// A figure beside its target.
pub(super) fn line(what: &str, reached: Option<f64>, target: &str) -> String {
    let reached = reached.map_or_else(
        || "not seen".to_owned(),
        |value| {
            if value < 10.0 {
                format!("{value:.3}")
            } else {
                format!("{value:.0}")
            }
        },
    );
    format!("{what:<66} {reached:>8}   {target}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_least_time_of_each_name_counts_and_other_lines_do_not() {
        let mut times = Times::default();
        assert!(times.take("timed sweep 2.5e-3"));
        assert!(times.take("    timed sweep 1.5e-3"));
        assert!(times.take("timed sweep 4e-3"));
        for other in ["sweep 1", "timed", "timed sweep", "timed sweep much", ""] {
            assert!(!times.take(other), "{other}");
        }
        assert_eq!(times.of("sweep"), Some(1.5e-3));
        assert_eq!(times.ratio("sweep", &times, "none"), None);
        assert!(line("sweep", times.ratio("sweep", &times, "sweep"), "<= 1").contains(" 1.000 "));
        assert!(line("none", None, "").contains("not seen"));
    }
}
