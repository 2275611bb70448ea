//! Surge in words: starts, closing laws, what a search found, and why a run
//! can be trusted.

use crate::Words;
use crate::about::About;
use crate::name::{capital, sentence};
use crate::text::{self, Key};
use uom::si::time::second;
use workbook::closing::{Decides, Found, Proposal, Shortest, TwoSpeeds};
use workbook::measure::Measure;
use workbook::resolve::drive::Speeds;
use workbook::schedule::ClosingOrder;
use workbook::transient::{EventKind, Start, Trust};
use workbook::units::Kind;
use workbook::verdict::CheckKind;

impl Words {
    /// An event with its start, as a clause: "2 jets shut from 10 % of full
    /// stroke".
    #[must_use]
    pub fn start(self, start: Start) -> String {
        let jets = text::surge_jets(self, start.open as usize);
        let opening = self.brief(Measure::share(start.opening));
        match start.event {
            EventKind::Closing => text::surge_closing(self, &jets, &opening),
            EventKind::LoadLost => text::surge_load_lost(self, &jets, &opening),
            EventKind::Blocked => text::surge_blocked(self, &jets),
            EventKind::Opening => text::surge_opening(self, &jets),
            EventKind::Slam => text::surge_slam(self, &jets),
        }
    }

    /// Speeds of a closing, as a clause: "15 s from full stroke to shut".
    #[must_use]
    pub fn speeds(self, speeds: &Speeds) -> String {
        let all = self.figure(speeds.full_stroke());
        match *speeds {
            Speeds::One { .. } => text::surge_one_speed(self, &all),
            Speeds::Two { fast, slow, knee } => text::surge_two_speeds(
                self,
                &self.figure(fast),
                &self.brief(Measure::share(knee)),
                &self.figure(slow),
                &all,
            ),
        }
    }

    /// Why the run shown can be trusted, each a whole sentence: time step and
    /// cells, alteration of wave speeds, lumped stretches, convergence,
    /// balances, the coarse grid.
    #[must_use]
    pub fn trust(self, trust: &Trust) -> Vec<String> {
        let share = |x: f64| self.figure(Measure::share(x));
        let altered = trust
            .stretches
            .iter()
            .map(|s| s.altered.abs())
            .fold(0.0, f64::max);
        let lumped = trust.stretches.iter().filter(|s| s.cells == 0).count();
        let left = trust.balance.volume.abs().max(trust.balance.energy.abs());
        let milliseconds = self.figure(Measure::number(
            (trust.step.get::<second>() * 1e4).round() / 10.0,
        ));
        vec![
            text::surge_step(self, &milliseconds, &self.count(trust.cells)),
            text::surge_altered(self, &share(altered)),
            match lumped {
                0 => self.say(Key::SURGE_LUMPED_NONE).to_owned(),
                some => text::surge_lumped(self, &self.count(some)),
            },
            text::surge_converged(self, &share(trust.moved)),
            if left < 1e-6 {
                self.say(Key::SURGE_BALANCED).to_owned()
            } else {
                text::surge_balance_left(self, &share(left))
            },
            text::surge_coarse(
                self,
                &self.count(trust.runs.0),
                &self.count(trust.runs.1),
                &share(trust.coarse_error),
            ),
        ]
    }
}

impl About<'_> {
    /// What breaks first where a closing is too short, as a clause.
    #[must_use]
    pub fn decides(self, decides: &Decides) -> String {
        let words = self.words;
        let start = words.start(decides.start);
        match decides.stretch {
            None => text::surge_decides_parts(words, &start),
            Some(id) => {
                let stretch = self.stretch(id);
                match decides.check {
                    CheckKind::LowestPressure => text::surge_decides_low(words, &stretch, &start),
                    _ => text::surge_decides_high(words, &stretch, &start),
                }
            }
        }
    }

    /// What the search for the shortest safe closing found, in sentences.
    #[must_use]
    pub fn closing_found(self, found: &Found) -> String {
        let words = self.words;
        let slowest = words.brief(Measure::from(found.slowest));
        let mut said = match &found.shortest {
            Shortest::Time { time, decides, .. } => text::surge_shortest(
                words,
                &words.figure(*time),
                &slowest,
                &self.decides(decides),
            ),
            Shortest::AtOnce => words.say(Key::SURGE_SHORTEST_AT_ONCE).to_owned(),
            Shortest::None { decides } => {
                text::surge_shortest_none(words, &slowest, &self.decides(decides))
            }
        };
        if let Some(proposal) = &found.proposal {
            said.push(' ');
            said.push_str(&self.closing_proposal(proposal));
        }
        said
    }

    /// What may be ordered, and what the line comes to with it.
    #[must_use]
    pub fn closing_proposal(self, proposal: &Proposal) -> String {
        let words = self.words;
        text::surge_proposal(
            words,
            &words.speeds(&proposal.speeds),
            &words.brief(Measure::share(proposal.reserve)),
            words.verdict(proposal.verdict),
        )
    }

    /// What two speeds gain, in sentences.
    #[must_use]
    pub fn two_speeds_found(self, found: &TwoSpeeds) -> String {
        let words = self.words;
        format!(
            "{} {}",
            text::surge_two_found(
                words,
                &words.figure(found.time),
                &words.figure(found.one_speed)
            ),
            self.closing_proposal(&found.proposal)
        )
    }

    /// The closing time as ordered on the print, in sentences.
    #[must_use]
    pub fn closing_order(self, order: &ClosingOrder) -> String {
        let words = self.words;
        let speeds = capital(&sentence(&words.speeds(&order.speeds)));
        let reserve = words.brief(Measure::new(order.reserve, Kind::Share));
        let with_reserve = words.figure(order.with_reserve);
        let more = if order.reserve_holds {
            text::surge_order_reserve(words, &with_reserve, &reserve)
        } else {
            text::surge_order_no_reserve(words, &with_reserve, &reserve)
        };
        format!("{speeds} {more}")
    }
}
