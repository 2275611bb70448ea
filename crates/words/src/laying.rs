//! The laying list and proposed cuts in words.

use crate::about::About;
use crate::name::{capital, lower};
use crate::text::{self, Key};
use workbook::book::{FittingKind, Id};
use workbook::cut::{CutAt, Proposal};
use workbook::laying::Item;
use workbook::measure::Measure;
use workbook::relief::Collects;
use workbook::resolve::bends::Made;
use workbook::schedule::Reducer;
use workbook::units::Kind;

/// A turn smaller than this is not worth naming, degree.
const UNSEEN_DEG: f64 = 0.05;

impl crate::Words {
    /// How a turn is made: "Smooth bend", "Taken by the joints".
    #[must_use]
    pub fn made(self, made: Made) -> &'static str {
        self.say(match made {
            Made::Taken => Key::LAY_TAKEN,
            Made::Smooth { .. } => Key::OPTION_BEND_SMOOTH,
            Made::Mitre => Key::OPTION_BEND_MITRE,
            Made::ByHand(_) => Key::LAY_BY_HAND,
        })
    }

    /// Why air collects at a place: "high point", "turns down by 12 %".
    #[must_use]
    pub fn collects(self, why: Collects) -> String {
        match why {
            Collects::HighPoint => self.say(Key::LAY_HIGH_POINT).to_owned(),
            Collects::Steepens { by } => text::lay_steepens(self, &self.figure(Measure::share(by))),
        }
    }

    /// A change of bore: "200 mm to 180 mm".
    #[must_use]
    pub fn reducer(self, reducer: &Reducer) -> String {
        let bore = |x| self.figure(Measure::bore(x));
        let (from, to) = (bore(reducer.from), bore(reducer.to));
        if reducer.step_only {
            text::lay_step(self, &from, &to)
        } else {
            text::lay_reducer(self, &from, &to)
        }
    }

    /// Which way a turn goes: "4.5° down, 11.9° to the right"; empty for none.
    #[must_use]
    pub fn turned(self, vertical_deg: f64, plan_deg: f64) -> String {
        let angle = |x: f64| self.figure(Measure::new(x.abs(), Kind::Angle));
        let mut parts = Vec::new();
        if vertical_deg.abs() >= UNSEEN_DEG {
            parts.push(if vertical_deg > 0.0 {
                text::lay_down(self, &angle(vertical_deg))
            } else {
                text::lay_up(self, &angle(vertical_deg))
            });
        }
        if plan_deg.abs() >= UNSEEN_DEG {
            parts.push(if plan_deg > 0.0 {
                text::lay_right(self, &angle(plan_deg))
            } else {
                text::lay_left(self, &angle(plan_deg))
            });
        }
        parts.join(", ")
    }
}

impl About<'_> {
    /// What is laid at a station, as on the crew's list; none for a turn too
    /// small to be seen.
    #[must_use]
    pub fn laid(self, item: &Item) -> Option<String> {
        let words = self.words;
        Some(match item {
            Item::Fitting {
                kind, note, count, ..
            } => {
                let note = note.trim();
                let name = match (*kind, note.is_empty()) {
                    (FittingKind::Own, false) => note.to_owned(),
                    (kind, true) => words.name(kind).to_owned(),
                    (kind, false) => format!("{} ({note})", words.name(kind)),
                };
                match count {
                    Ok(count) if *count > 1 => {
                        let count = usize::try_from(*count).unwrap_or(usize::MAX);
                        text::lay_several(words, &words.count(count), &lower(&name))
                    }
                    _ => name,
                }
            }
            Item::Turn {
                made,
                deflection_deg,
                plan_deg,
                vertical_deg,
            } => {
                if *deflection_deg < UNSEEN_DEG {
                    return None;
                }
                let angle = words.figure(Measure::new(*deflection_deg, Kind::Angle));
                let turned = words.turned(*vertical_deg, *plan_deg);
                let one_way = vertical_deg.abs() < UNSEEN_DEG || plan_deg.abs() < UNSEEN_DEG;
                if turned.is_empty() {
                    text::lay_turn(words, words.made(*made), &angle)
                } else if one_way {
                    // The one angle is the deflection.
                    text::lay_turn(words, words.made(*made), &turned)
                } else {
                    text::lay_turn_by(words, words.made(*made), &angle, &turned)
                }
            }
            Item::Change { below, reducer, .. } => {
                let begins = capital(&text::lay_change(words, &self.stretch(*below)));
                match reducer {
                    Some(reducer) => format!("{begins}; {}", lower(&words.reducer(reducer))),
                    None => begins,
                }
            }
            Item::Vent(why) => text::lay_vent(words, &words.collects(*why)),
            Item::Drain => words.say(Key::LAY_DRAIN).to_owned(),
        })
    }

    /// What the cut study finds for a stretch, as a sentence.
    #[must_use]
    pub fn proposal(self, stretch: Id, proposal: &Proposal) -> String {
        let words = self.words;
        let name = self.stretch(stretch);
        let said = match proposal {
            Proposal::Enough => text::cut_enough(words, &name),
            Proposal::Cut(cut) => {
                let (above, below) = (self.pipe(&cut.above), self.pipe(&cut.below));
                let chainage = words.figure(cut.chainage);
                match cut.at {
                    CutAt::Station(id) => {
                        text::cut_at(words, &name, &self.station(id), &chainage, &above, &below)
                    }
                    CutAt::NewBelow { .. } => {
                        text::cut_new(words, &name, &chainage, &above, &below)
                    }
                }
            }
            Proposal::AllAlong { pipe } => text::cut_all_along(words, &self.pipe(pipe), &name),
            Proposal::OwnPipe => text::cut_own(words, &name),
            Proposal::NoneStronger => text::cut_none(words, &name),
        };
        capital(&said)
    }
}
