//! The message catalogues and the number formatter: the only place where
//! findings become sentences and numbers become text.
//!
//! [`Words`] is the one handle: a language, a family of units and a decimal
//! mark. It prints figures ([`Words::figure`]) and says plain messages
//! ([`Words::say`]); messages that are filled in are functions of [`text`].
//! Sentences that name a station or a stretch need the book they stand in:
//! [`Words::about`].
//!
//! The messages stand in `messages/`, one file per language; the build checks
//! them against one another and turns them into [`Key`] and [`text`].

mod about;
mod caution;
pub mod csv;
mod field;
mod file;
mod import;
pub mod language;
mod laying;
mod name;
mod number;
mod phrase;
mod surge;
#[cfg(test)]
mod tests;
pub mod text;
mod trouble;
mod verdict;
mod why;
mod working;

pub use about::About;
pub use caution::CautionText;
pub use language::{Language, decimal_mark};
pub use name::{Named, capital};
pub use text::Key;

use workbook::reading::DecimalMark;
use workbook::units::UnitSystem;

/// How to speak: language, units and decimal mark. Cheap to copy about.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Words {
    /// The language.
    pub language: Language,
    /// The family of units.
    pub units: UnitSystem,
    /// The mark before the decimals, printed and read.
    pub mark: DecimalMark,
}

impl Words {
    /// In this language and these units, with the language's usual mark.
    #[must_use]
    pub fn new(language: Language, units: UnitSystem) -> Words {
        Words {
            language,
            units,
            mark: language.mark(),
        }
    }

    /// The same with another decimal mark: half of Spanish-speaking America
    /// writes a point; see [`decimal_mark`].
    #[must_use]
    pub fn with_mark(self, mark: DecimalMark) -> Words {
        Words { mark, ..self }
    }

    /// A plain message.
    #[must_use]
    pub fn say(self, key: Key) -> &'static str {
        key.of(self.language)
    }
}
