//! The messages, generated at build time from `messages/`.
//!
//! A plain message is a constant of [`Key`], said by [`Words::say`]; one that
//! is filled in is a function here, taking what it is filled with.

use crate::Words;
use crate::language::Language;

/// A plain message: its text in every language.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Key(&'static [&'static str; Language::ALL.len()]);

impl Key {
    pub(crate) fn of(self, language: Language) -> &'static str {
        self.0[language.index()]
    }
}

/// The text of the language, with each mark (a control character, one above
/// its place) replaced by its piece.
fn fill(words: Words, texts: &[&str; Language::ALL.len()], pieces: &[&str]) -> String {
    let text = texts[words.language.index()];
    let mut out = String::with_capacity(text.len() + 16 * pieces.len());
    let is_mark = |c: char| c < ' ';
    for part in text.split_inclusive(is_mark) {
        let Some(mark) = part.chars().next_back().filter(|c| is_mark(*c)) else {
            out.push_str(part);
            continue;
        };
        out.push_str(&part[..part.len() - mark.len_utf8()]);
        let place = (u32::from(mark) as usize).wrapping_sub(1);
        out.push_str(pieces.get(place).copied().unwrap_or_default());
    }
    out
}

/// The same for a plural: one form for exactly one, one for all others.
fn fill_plural(
    words: Words,
    count: usize,
    texts: &[[&str; 2]; Language::ALL.len()],
    pieces: &[&str],
) -> String {
    let form = usize::from(count != 1);
    fill(words, &[texts[0][form], texts[1][form]], pieces)
}

#[allow(
    clippy::too_many_arguments,
    reason = "generated: one argument for each name in the message"
)]
mod generated {
    use super::{Key, fill, fill_plural};
    use crate::Words;
    include!(concat!(env!("OUT_DIR"), "/messages.rs"));
}
pub use generated::*;

#[cfg(test)]
mod tests {
    use super::*;
    use workbook::units::UnitSystem;

    #[test]
    fn every_message_is_whole_in_every_language() {
        for language in Language::ALL {
            let words = Words::new(language, UnitSystem::Metric);
            for (key, text) in every_message(words) {
                assert!(!text.trim().is_empty(), "{key}");
                assert!(!text.contains(['{', '}']), "{key}: {text}");
                assert!(!text.contains(char::is_control), "{key}: {text}");
                assert!(!text.contains("  "), "{key}: {text}");
            }
        }
    }

    #[test]
    fn pieces_take_their_places() {
        let words = Words::new(Language::English, UnitSystem::Metric);
        assert_eq!(
            fill(words, &["\u{2} a \u{1}\u{2}", ""], &["x", "y"]),
            "y a xy"
        );
        assert_eq!(fill(words, &["none", ""], &[]), "none");
        let forms = [["one \u{1}", "many \u{1}"], ["", ""]];
        assert_eq!(fill_plural(words, 1, &forms, &["1"]), "one 1");
        assert_eq!(fill_plural(words, 0, &forms, &["0"]), "many 0");
    }
}
