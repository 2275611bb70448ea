//! What the print says in sentences: what is unsettled, cautions, what was
//! taken for granted, sources, and the place to sign.

use crate::parts::cautions::one;
use crate::parts::verdicts::mark_svg;
use leptos::prelude::*;
use pipes::{Attested, Pipe, Rating};
use words::{Key, Words, capital, text};
use workbook::figure::Gap;
use workbook::format;
use workbook::schedule::Schedule;
use workbook::{Book, Findings};

fn notes(title: &'static str, test: &'static str, lines: Vec<String>) -> AnyView {
    let items: Vec<AnyView> = lines
        .into_iter()
        .map(|l| view! { <li>{l}</li> }.into_any())
        .collect();
    view! {
        <section class="print-section" data-test=test>
            <h2>{title}</h2>
            <ul class="print-notes">{items}</ul>
        </section>
    }
    .into_any()
}

fn add(lines: &mut Vec<String>, line: String) {
    if !line.trim().is_empty() && !lines.contains(&line) {
        lines.push(line);
    }
}

/// Everything that is wrong or not settled, each in plain words, once.
#[must_use]
pub(super) fn unsettled_lines(words: Words, book: &Book, findings: &Findings) -> Vec<String> {
    let about = words.about(book);
    let mut lines = Vec::new();
    for trouble in findings.troubles() {
        add(&mut lines, about.trouble(&trouble));
    }
    for gap in [
        findings.resolved.design_flow.as_ref().err(),
        findings.resolved.profile.broken.as_ref(),
        findings.resolved.gross_head.as_ref().err(),
        findings.steady.solved.as_ref().err(),
    ]
    .into_iter()
    .flatten()
    {
        add(&mut lines, said(words, book, gap));
    }
    for verdict in &findings.judged.stretches {
        for check in &verdict.checks {
            if let Some(gap) = &check.gap {
                add(&mut lines, said(words, book, gap));
            }
        }
    }
    lines
}

fn said(words: Words, book: &Book, gap: &Gap) -> String {
    words.about(book).gap(gap)
}

/// At the top of the print: the verdict, and all that stands open.
pub(super) fn unsettled(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let lines = unsettled_lines(words, book, findings);
    let about = words.about(book);
    let verdict = findings.judged.verdict;
    let stretches: Vec<AnyView> = findings
        .judged
        .stretches
        .iter()
        .map(|v| view! { <li>{about.stretch_verdict(v, &findings.resolved)}</li> }.into_any())
        .collect();
    let open: Vec<AnyView> = if lines.is_empty() {
        vec![view! { <li>{words.say(Key::PRINT_UNSETTLED_NONE)}</li> }.into_any()]
    } else {
        lines
            .into_iter()
            .map(|l| view! { <li>{l}</li> }.into_any())
            .collect()
    };
    view! {
        <section class="print-section" data-test="print-unsettled">
            <h2>{words.say(Key::PRINT_VERDICT)}</h2>
            <p>
                {mark_svg(verdict, None)} " "
                <strong>
                    {text::verdict_book(words, words.verdict(verdict))}
                </strong> " " {words.say(Key::PRINT_NOT_FOR_BUILDING)}
            </p>
            <ul class="print-notes">{stretches}</ul>
        </section>
        <section class="print-section" data-test="print-open">
            <h2>{words.say(Key::PRINT_UNSETTLED)}</h2>
            <ul class="print-notes">{open}</ul>
        </section>
    }
    .into_any()
}

/// Every caution, the pressing ones first.
pub(super) fn cautions(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let items: Vec<AnyView> = findings
        .judged
        .cautions
        .iter()
        .map(|c| one(&words.about(book).caution(c), c.is_pressing()))
        .collect();
    view! {
        <section class="print-section" data-test="print-cautions">
            <h2>{words.say(Key::PRINT_CAUTIONS)}</h2>
            <ul class="cautions">{items}</ul>
        </section>
    }
    .into_any()
}

/// What was taken for granted.
pub(super) fn assumptions(words: Words, book: &Book, findings: &Findings) -> AnyView {
    use workbook::book::DistanceKind;
    let mut lines: Vec<String> = Vec::new();
    for a in findings.assumptions() {
        add(&mut lines, words.about(book).assumption(a));
    }
    add(&mut lines, words.say(Key::ASSUMPTION_FRICTION).to_owned());
    let distances = match book.line.distance_kind {
        DistanceKind::Slope => Key::ASSUMPTION_DISTANCES_SLOPE,
        DistanceKind::Horizontal => Key::ASSUMPTION_DISTANCES_HORIZONTAL,
    };
    add(&mut lines, words.say(distances).to_owned());
    notes(
        words.say(Key::PRINT_ASSUMPTIONS),
        "print-assumptions",
        lines,
    )
}

/// Every source a pipe rests on, those not seen marked.
fn pipe_sources(pipe: &Pipe) -> Vec<(&str, Attested)> {
    let mut all = vec![
        (pipe.dimensions.source.as_str(), pipe.dimensions.attested),
        (pipe.derating.source.as_str(), derating_attested(pipe)),
        (&pipe.roughness_new.source, pipe.roughness_new.attested),
        (&pipe.roughness_aged.source, pipe.roughness_aged.attested),
        (&pipe.modulus_short.source, pipe.modulus_short.attested),
        (&pipe.modulus_long.source, pipe.modulus_long.attested),
        (&pipe.poisson.source, pipe.poisson.attested),
        (&pipe.density.source, pipe.density.attested),
    ];
    match &pipe.rating {
        Rating::Class(class) => all.push((&class.source, class.attested)),
        Rating::Stress(steel) => all.extend([
            (
                steel.yield_strength.source.as_str(),
                steel.yield_strength.attested,
            ),
            (
                &steel.tensile_strength.source,
                steel.tensile_strength.attested,
            ),
            (&steel.normal.source, steel.normal.attested),
            (&steel.joint_factor.source, steel.joint_factor.attested),
            (&steel.corrosion.source, steel.corrosion.attested),
            (&steel.mill_tolerance.source, steel.mill_tolerance.attested),
        ]),
    }
    all.extend(pipe.supply.iter().map(|s| (s.source.as_str(), s.attested)));
    all
}

fn derating_attested(pipe: &Pipe) -> Attested {
    pipe.derating
        .points
        .iter()
        .fold(Attested::Seen, |all, p| all.and(p.attested))
}

/// Sources of the pipes and fittings used; values from memory marked.
pub(super) fn sources(words: Words, findings: &Findings, schedule: &Schedule) -> AnyView {
    let mut lines = Vec::new();
    let line = |source: &str, seen: bool| {
        let source = capital(&words.source(source));
        if seen {
            source
        } else {
            format!("{source} ({})", words.say(Key::WORKING_FROM_MEMORY))
        }
    };
    for (_, found) in &schedule.lines {
        let Ok(found) = found else { continue };
        for (source, attested) in pipe_sources(&found.pipe) {
            add(&mut lines, line(source, attested.is_seen()));
        }
    }
    for (_, loss) in &findings.steady.fittings {
        if let Ok(loss) = loss {
            add(&mut lines, line(loss.source, loss.seen));
        }
    }
    notes(words.say(Key::PAGE_SOURCES), "print-sources", lines)
}

/// Place for the reviewer, and what made the print.
pub(super) fn review(words: Words, book: &Book) -> AnyView {
    let made = text::print_made_with(words, &format::program(), &book.catalogue_edition);
    let filled = |text: &str| {
        if text.trim().is_empty() {
            "\u{a0}".to_owned()
        } else {
            text.to_owned()
        }
    };
    view! {
        <section class="print-section print-keep" data-test="print-review">
            <h2>{words.say(Key::PRINT_REVIEWER_TITLE)}</h2>
            <p>{filled(&book.print.reviewer)} " " {filled(&book.print.reviewer_licence)}</p>
            <div class="print-sign">
                <div>{words.say(Key::PRINT_REVIEWER)}</div>
                <div>{words.say(Key::PRINT_LICENCE)}</div>
                <div>{words.say(Key::PRINT_SIGNATURE)}</div>
            </div>
            <p>{made}</p>
        </section>
    }
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{Entry, Field, demo, evaluate};

    #[test]
    fn surge_stands_among_what_is_open_and_nothing_stands_twice() {
        let mut book = demo::demo("k");
        book.surge.closing_time_s = Entry::default();
        let findings = evaluate(&book);
        for language in Language::ALL {
            let words = Words::new(language, UnitSystem::Metric);
            let lines = unsettled_lines(words, &book, &findings);
            let closing = words.field_label(Field::ClosingTime).to_lowercase();
            let named = lines.iter().any(|l| l.to_lowercase().contains(&closing));
            assert!(named, "{lines:?}");
            let mut once = lines.clone();
            once.sort();
            once.dedup();
            assert_eq!(once.len(), lines.len());
        }
    }

    #[test]
    fn an_empty_book_names_what_is_missing() {
        let book = Book::new("k");
        let words = Words::new(Language::English, UnitSystem::Metric);
        assert!(!unsettled_lines(words, &book, &evaluate(&book)).is_empty());
    }
}
