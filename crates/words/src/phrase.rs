//! Phrases that the workbook writes into formulas and sources.
//!
//! The workbook cites in English, as the publications are cited. What of it is
//! prose and no citation is known here, and is put into the language.

use crate::text::Key;
use crate::{Language, Words};

/// The phrases, longer ones first, so that none hides within another.
const PHRASES: [Key; 44] = [
    Key::PHRASE_NET_HEAD,
    Key::PHRASE_CAREFUL_RULE,
    Key::PHRASE_GREATEST,
    Key::PHRASE_LOSSES,
    Key::PHRASE_STOP,
    Key::PHRASE_SEARCHED,
    Key::PHRASE_GRADE_LOWEST,
    Key::PHRASE_GRADE_HIGHEST,
    Key::PHRASE_CHAIN,
    Key::PHRASE_ABOVE_PERIOD,
    Key::PHRASE_ESTIMATE,
    Key::PHRASE_BUBBLES,
    Key::PHRASE_HELD_UPPER,
    Key::PHRASE_HELD_JOINTS,
    Key::PHRASE_COLD,
    Key::PHRASE_CHARACTERISTICS,
    Key::PHRASE_CHAPTERS,
    Key::PHRASE_STARTING,
    Key::PHRASE_RIGID,
    Key::PHRASE_SUCTION,
    Key::PHRASE_WEAKEST,
    Key::PHRASE_HELD,
    Key::PHRASE_LEVELS,
    Key::PHRASE_ENERGY,
    Key::PHRASE_TORRICELLI,
    Key::PHRASE_HYDROSTATICS,
    Key::PHRASE_LOWEST_PLACE,
    Key::PHRASE_CONTINUITY_NOZZLES,
    Key::PHRASE_KINETIC,
    Key::PHRASE_GRADE_LINE,
    Key::PHRASE_OVALITY,
    Key::PHRASE_JOINT,
    Key::PHRASE_CONTINUITY_JETS,
    Key::PHRASE_USER,
    Key::PHRASE_STATIONS,
    Key::PHRASE_SURVEY,
    Key::PHRASE_WITH_CONSTANTS,
    Key::PHRASE_WITH_LINING,
    Key::PHRASE_COMMON_PRACTICE,
    Key::PHRASE_FROM_MEMORY,
    Key::PHRASE_CONTINUITY,
    Key::PHRASE_ROUGHNESS,
    Key::PHRASE_MODULUS,
    Key::PHRASE_DENSITY,
];

impl Words {
    /// A source, as printed. Publications are cited as they are.
    #[must_use]
    pub fn source(self, source: &str) -> String {
        self.phrases(source)
    }

    /// A formula of a working, as printed: symbols as they are, and the remark
    /// that goes with it in the language.
    #[must_use]
    pub fn formula(self, formula: &str) -> String {
        self.phrases(formula)
    }

    fn phrases(self, text: &str) -> String {
        let mut text = text.to_owned();
        if self.language == Language::English {
            return text;
        }
        for phrase in PHRASES {
            let english = phrase.of(Language::English);
            if text.contains(english) {
                text = text.replace(english, self.say(phrase));
            }
        }
        text
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use workbook::demo::demo;
    use workbook::evaluate::evaluate;
    use workbook::units::UnitSystem;
    use workbook::working::FigureKey;

    /// Everything the demo's workings print as formula or source.
    fn printed() -> Vec<String> {
        let book = demo("demo");
        let found = evaluate(&book);
        let mut keys = vec![
            FigureKey::GrossHead,
            FigureKey::PipeLength,
            FigureKey::Loss,
            FigureKey::LossShare,
            FigureKey::NetHead,
            FigureKey::JetVelocity,
            FigureKey::NozzleBore,
            FigureKey::JetDiameter,
            FigureKey::JetPower,
            FigureKey::Lowest,
            FigureKey::GreatestPower,
            FigureKey::ClosingError,
            FigureKey::SubmergenceNeeded,
            FigureKey::Deflection(3),
            FigureKey::BendLoss(3),
            FigureKey::Michaud,
            FigureKey::Allievi,
            FigureKey::WaterStarting,
        ];
        for stretch in &book.line.stretches {
            keys.extend([
                FigureKey::Velocity(stretch.id),
                FigureKey::FrictionLoss(stretch.id),
                FigureKey::Bore(stretch.id),
                FigureKey::Standing(stretch.id),
                FigureKey::Allowable(stretch.id),
                FigureKey::Share(stretch.id),
                FigureKey::WaveSpeed(stretch.id),
                FigureKey::QuickRise(stretch.id),
                FigureKey::Collapse(stretch.id),
                FigureKey::Mass(stretch.id),
                FigureKey::SurgeHighest(stretch.id),
                FigureKey::SurgeLowest(stretch.id),
                FigureKey::SurgeShare(stretch.id),
                FigureKey::SurgeCollapse(stretch.id),
            ]);
        }
        keys.extend(
            book.line
                .fittings
                .iter()
                .map(|f| FigureKey::FittingLoss(f.id)),
        );
        let mut printed = Vec::new();
        for key in keys {
            let working = found.working(key).unwrap();
            printed.push(working.formula.to_owned());
            printed.extend(working.sources);
        }
        printed
    }

    #[test]
    fn every_phrase_is_still_the_workbooks_own() {
        let printed = printed();
        let elsewhere = [
            // Of a steel rated by stress, of a loss entered by hand, of presets.
            Key::PHRASE_JOINT,
            Key::PHRASE_USER,
            Key::PHRASE_COMMON_PRACTICE,
            // Of other restraints, and of air.
            Key::PHRASE_BUBBLES,
            Key::PHRASE_HELD_UPPER,
            Key::PHRASE_HELD_JOINTS,
        ];
        for phrase in PHRASES {
            let english = phrase.of(Language::English);
            let met = printed.iter().any(|text| text.contains(english));
            assert!(
                met || elsewhere.contains(&phrase),
                "{english} is printed nowhere"
            );
        }
    }

    #[test]
    fn no_formula_keeps_english_prose() {
        let es = Words::new(Language::Spanish, UnitSystem::Metric);
        let book = demo("demo");
        let found = evaluate(&book);
        for key in [
            FigureKey::PipeLength,
            FigureKey::NetHead,
            FigureKey::Lowest,
            FigureKey::Standing(1),
            FigureKey::Share(1),
            FigureKey::QuickRise(1),
            FigureKey::WaveSpeed(1),
            FigureKey::GreatestPower,
            FigureKey::Mass(1),
        ] {
            let formula = found.working(key).unwrap().formula;
            let spanish = es.formula(formula);
            assert_ne!(spanish, formula);
            for word in [
                "the", "with", "of", "at", "by", "for", "above", "pipe", "before",
            ] {
                let met = spanish
                    .split(|c: char| !c.is_alphabetic())
                    .any(|w| w == word);
                assert!(!met, "{word} in {spanish}");
            }
        }
        let en = Words::new(Language::English, UnitSystem::Metric);
        assert_eq!(en.source("common practice"), "common practice");
        assert_eq!(es.source("common practice"), "práctica común");
        assert_eq!(es.source("ISO 4427-2:2019"), "ISO 4427-2:2019");
    }

    #[test]
    fn no_phrase_hides_within_a_later_one() {
        let texts = PHRASES.map(|k| k.of(Language::English));
        for (i, first) in texts.iter().enumerate() {
            assert!(
                !texts[i + 1..].iter().any(|later| later.contains(first)),
                "{first}"
            );
        }
    }
}
