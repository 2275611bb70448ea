//! What moves the water, and what it starts from, in words.

use crate::Words;
use crate::name::lower;
use crate::text;
use workbook::measure::Measure;
use workbook::transient::{EventKind, Start};

impl Words {
    /// What an event starts from, as a clause: "2 jets open at 60 % of their
    /// stroke".
    #[must_use]
    pub fn start(self, start: &Start) -> String {
        let open = start.open as usize;
        match start.event {
            EventKind::Opening => text::surge_opened(self, open),
            _ => text::surge_from(self, open, &self.brief(Measure::share(start.opening))),
        }
    }

    /// An event with what it starts from, with a capital: "All jets shut by the
    /// closing law, 2 jets open at 60 % of their stroke".
    #[must_use]
    pub fn event(self, start: &Start) -> String {
        text::surge_event(self, self.name(start.event), &self.start(start))
    }

    /// The sentence that says which event and start decide.
    #[must_use]
    pub fn deciding(self, start: &Start) -> String {
        text::surge_decides(self, &lower(&self.event(start)))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::language::Language;
    use workbook::units::UnitSystem;

    #[test]
    fn a_start_names_its_jets_and_their_stroke() {
        let words = Words::new(Language::English, UnitSystem::Metric);
        let closing = Start {
            event: EventKind::Closing,
            open: 1,
            opening: 0.3,
        };
        let said = words.event(&closing);
        assert!(said.contains("1 jet open at 30\u{202f}%"), "{said}");
        let opening = Start {
            event: EventKind::Opening,
            open: 2,
            opening: 1.0,
        };
        assert_eq!(words.start(&opening), "2 jets opened from shut");
        assert!(words.deciding(&opening).contains("jets opened, 2 jets"));
    }
}
