//! Findings in words, put together for the page from what [`words`] says.

use words::capital;
use words::{Key, Words};
use workbook::book::Id;
use workbook::verdict::StretchVerdict;
use workbook::{Book, Findings};

/// A stretch as a heading: "Stretch 2, 151 to 305 m".
#[must_use]
pub fn stretch(words: Words, book: &Book, findings: &Findings, id: Id) -> String {
    let name = capital(&words.about(book).stretch(id));
    let span = findings
        .resolved
        .stretches
        .iter()
        .find(|s| s.id == id)
        .and_then(|s| s.span.as_ref().ok());
    match span {
        Some(span) => {
            let (from, to) = (words.value(span.from), words.figure(span.to));
            format!("{name}, {}", words::text::place_from_to(words, &from, &to))
        }
        None => name,
    }
}

/// A station as a heading.
#[must_use]
pub fn station(words: Words, book: &Book, id: Id) -> String {
    capital(&words.about(book).station(id))
}

/// The verdict of a stretch, its lead apart from the reason.
#[must_use]
pub fn stretch_verdict(
    words: Words,
    book: &Book,
    findings: &Findings,
    verdict: &StretchVerdict,
) -> (String, String) {
    let said = words
        .about(book)
        .stretch_verdict(verdict, &findings.resolved);
    match said.split_once(": ") {
        Some((lead, rest)) => (format!("{lead}:"), rest.to_owned()),
        None => (said, String::new()),
    }
}

/// What stands for a figure that has no room for its reason.
#[must_use]
pub fn none() -> String {
    "\u{2014}".to_owned()
}

/// A mark beside what rests on a source that was not seen.
#[must_use]
pub fn memory(words: Words, seen: bool) -> Option<&'static str> {
    (!seen).then(|| words.say(Key::SCHEDULE_FROM_MEMORY))
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{demo, evaluate};

    #[test]
    fn a_verdict_leads_with_its_word_and_place() {
        let book = demo::demo("k");
        let findings = evaluate(&book);
        for language in Language::ALL {
            let words = Words::new(language, UnitSystem::Metric);
            for verdict in &findings.judged.stretches {
                let (lead, rest) = stretch_verdict(words, &book, &findings, verdict);
                assert!(lead.ends_with(':') && !rest.is_empty(), "{lead} {rest}");
            }
        }
    }
}
