//! Verdicts in words: always with the reason and the figure that decides.

use crate::Words;
use crate::about::About;
use crate::name::{capital, clause, sentence};
use crate::text::{self, Key};
use workbook::figure::Gap;
use workbook::measure::Measure;
use workbook::resolve::Resolved;
use workbook::verdict::{Check, CheckKind, StretchVerdict, Verdict, Weakest};

impl Words {
    /// A verdict as one word, without capital: beside its mark.
    #[must_use]
    pub fn verdict(self, verdict: Verdict) -> &'static str {
        self.say(match verdict {
            Verdict::Holds => Key::VERDICT_HOLDS,
            Verdict::Tight => Key::VERDICT_TIGHT,
            Verdict::Unsettled => Key::VERDICT_UNSETTLED,
            Verdict::Fails => Key::VERDICT_FAILS,
        })
    }

    /// What that word means, in a sentence.
    #[must_use]
    pub fn verdict_means(self, verdict: Verdict) -> &'static str {
        self.say(match verdict {
            Verdict::Holds => Key::VERDICT_HOLDS_MEANS,
            Verdict::Tight => Key::VERDICT_TIGHT_MEANS,
            Verdict::Unsettled => Key::VERDICT_UNSETTLED_MEANS,
            Verdict::Fails => Key::VERDICT_FAILS_MEANS,
        })
    }

    /// The name of a check, as a heading.
    #[must_use]
    pub fn check_name(self, kind: CheckKind) -> &'static str {
        self.say(match kind {
            CheckKind::PassesFlow => Key::CHECK_PASSES,
            CheckKind::StandingPressure => Key::CHECK_STANDING,
            CheckKind::SurgePressure => Key::CHECK_SURGE,
            CheckKind::LowestPressure => Key::CHECK_LOWEST,
            CheckKind::Collapse => Key::CHECK_COLLAPSE,
        })
    }

    /// The figures of a check as a clause: "4.80 bar standing of 10.0 bar
    /// allowed"; none where there are none.
    #[must_use]
    pub fn check_figures(self, check: &Check) -> Option<String> {
        let found = self.figure(check.found?);
        let both: fn(Words, &str, &str) -> String = match check.kind {
            CheckKind::PassesFlow => text::check_passes_said,
            CheckKind::StandingPressure => text::check_standing_said,
            CheckKind::SurgePressure => text::check_surge_said,
            CheckKind::LowestPressure => text::check_lowest_said,
            CheckKind::Collapse => text::check_collapse_said,
        };
        let bare: fn(Words, &str) -> String = match check.kind {
            CheckKind::PassesFlow => text::check_passes_bare,
            CheckKind::StandingPressure => text::check_standing_bare,
            CheckKind::SurgePressure => text::check_surge_bare,
            CheckKind::LowestPressure => text::check_lowest_bare,
            CheckKind::Collapse => text::check_collapse_bare,
        };
        Some(match check.allowed {
            Some(allowed) => both(self, &found, &self.figure(allowed)),
            None => bare(self, &found),
        })
    }
}

impl About<'_> {
    /// A check in one sentence: its figures with the share used, the weakest
    /// part and the place, and what keeps it from being settled.
    #[must_use]
    pub fn check(self, check: &Check) -> String {
        let words = self.words;
        let mut parts = Vec::new();
        parts.extend(words.check_figures(check));
        if let Some(share) = check.share.filter(|s| s.is_finite()) {
            let share = words.figure(Measure::share(share));
            parts.push(text::check_share(words, &share));
        }
        parts.extend(self.weakest(check));
        if let Some(at) = check.at.filter(|_| check.found.is_some()) {
            parts.push(text::check_at(words, &words.figure(at)));
        }
        let mut said = parts.join(", ");
        if let Some(gap) = &check.gap {
            if !said.is_empty() {
                said.push_str("; ");
            }
            said.push_str(&clause(&self.gap(gap)));
        }
        if said.is_empty() {
            return text::check_not_made(words, words.check_name(check.kind));
        }
        sentence(&said)
    }

    fn weakest(self, check: &Check) -> Option<String> {
        match check.weakest? {
            Weakest::Pipe => None,
            Weakest::Fitting(id) => {
                Some(text::check_weakest_fitting(self.words, &self.fitting(id)))
            }
            Weakest::Jets => Some(self.words.say(Key::CHECK_WEAKEST_JETS).to_owned()),
        }
    }

    /// Why a stretch has its verdict, as a clause without full stop: the
    /// figures that decide, and all that is not settled.
    #[must_use]
    pub fn verdict_reason(self, verdict: &StretchVerdict) -> String {
        let words = self.words;
        let checks = &verdict.checks;
        let mut parts: Vec<String> = Vec::new();
        match verdict.verdict {
            Verdict::Fails | Verdict::Tight => {
                for check in checks.iter().filter(|c| c.verdict == verdict.verdict) {
                    match words.check_figures(check) {
                        Some(figures) => {
                            parts.push(figures);
                            parts.extend(self.weakest(check));
                        }
                        None => parts.extend(check.gap.as_ref().map(|g| clause(&self.gap(g)))),
                    }
                }
            }
            Verdict::Unsettled => {
                let standing = checks
                    .iter()
                    .find(|c| c.kind == CheckKind::StandingPressure);
                parts.extend(standing.and_then(|c| words.check_figures(c)));
                let gaps = checks
                    .iter()
                    .filter(|c| c.verdict == Verdict::Unsettled)
                    .filter_map(|c| c.gap.as_ref());
                for gap in distinct(gaps) {
                    parts.push(clause(&self.gap(gap)));
                }
            }
            Verdict::Holds => {
                // The check that uses the most of what is allowed.
                let used = |c: &&Check| c.share.unwrap_or(0.0);
                let most = checks.iter().max_by(|a, b| used(a).total_cmp(&used(b)));
                parts.extend(most.and_then(|c| words.check_figures(c)));
            }
        }
        if parts.is_empty() {
            return words.say(Key::VERDICT_NO_CHECKS).to_owned();
        }
        parts.join("; ")
    }

    /// The verdict of a stretch in one sentence: "Unsettled in PE 100 200
    /// SDR 17, 151 m to 305 m: 4.80 bar standing of 10.0 bar allowed; surge is
    /// not solved yet."
    #[must_use]
    pub fn stretch_verdict(self, verdict: &StretchVerdict, found: &Resolved) -> String {
        let words = self.words;
        let word = capital(words.verdict(verdict.verdict));
        let why = self.verdict_reason(verdict);
        let stretch = found.stretches.iter().find(|s| s.id == verdict.stretch);
        let said = match stretch.map(|s| (&s.pipe, &s.span)) {
            Some((Ok(pipe), Ok(span))) => text::verdict_stretch(
                words,
                &word,
                &pipe.short,
                &words.figure(span.from),
                &words.figure(span.to),
                &why,
            ),
            _ => {
                let stretch = self.stretch(verdict.stretch);
                text::verdict_stretch_plain(words, &word, &stretch, &why)
            }
        };
        sentence(&said)
    }
}

fn distinct<'a>(gaps: impl Iterator<Item = &'a Gap>) -> Vec<&'a Gap> {
    let mut met: Vec<&Gap> = Vec::new();
    for gap in gaps {
        if !met.contains(&gap) {
            met.push(gap);
        }
    }
    met
}
