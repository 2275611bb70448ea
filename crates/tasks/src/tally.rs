//! Counting tests by the closing lines of their runners.

/// Tests passed and failed so far.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub(crate) struct Tally {
    /// Tests that passed.
    pub(crate) passed: u64,
    /// Tests that failed.
    pub(crate) failed: u64,
}

impl Tally {
    /// Adds what a line says, if it is a closing line as cargo's and
    /// wasm-bindgen's runners print it: `test result: ok. 3 passed; 0 failed; ...`.
    pub(crate) fn read(&mut self, line: &str) {
        let Some(rest) = line.trim().strip_prefix("test result: ") else {
            return;
        };
        let Some((_, counts)) = rest.split_once(". ") else {
            return;
        };
        for part in counts.split(';') {
            let mut words = part.split_whitespace();
            let (Some(number), Some(what)) = (words.next(), words.next()) else {
                continue;
            };
            let Ok(number) = number.parse::<u64>() else {
                continue;
            };
            match what {
                "passed" => self.passed += number,
                "failed" => self.failed += number,
                _ => {}
            }
        }
    }

    /// One check that counts as a test.
    pub(crate) fn of(good: bool) -> Self {
        Self {
            passed: u64::from(good),
            failed: u64::from(!good),
        }
    }

    /// Adds another count.
    pub(crate) fn add(&mut self, other: Self) {
        self.passed += other.passed;
        self.failed += other.failed;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn closing_lines_add_up_and_others_do_not_count() {
        let mut tally = Tally::default();
        for line in [
            "running 2 tests",
            "test result: ok. 12 passed; 0 failed; 1 ignored; 0 measured; 0 filtered out; finished in 0.00s",
            "    test result: FAILED. 1 passed; 2 failed; 0 ignored; 0 filtered out",
            "99 passed; 99 failed",
            "test tests::a ... ok",
        ] {
            tally.read(line);
        }
        assert_eq!(
            tally,
            Tally {
                passed: 13,
                failed: 2
            }
        );
    }
}
