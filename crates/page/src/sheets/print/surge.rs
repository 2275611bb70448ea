//! The closing that is ordered, and what the line sees in a surge.

use super::tables::{figure, number, td, th};
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::book::{ClosingSpeeds, Id};
use workbook::figure::Figure;
use workbook::units::Kind;
use workbook::walls::{PressureAt, StretchWalls};
use workbook::{Book, Field, Findings, Measure};

/// What is ordered, in sentences; none while nothing is known of the closing.
fn ordered(words: Words, book: &Book, findings: &Findings) -> Option<String> {
    let drive = &findings.resolved.drive;
    let speeds = drive.speeds.as_ref().ok()?;
    let closing = words.figure(speeds.full_stroke());
    let reserve = drive.reserve.as_ref().ok()?;
    let mut said = vec![text::surge_print_closing(
        words,
        &closing,
        &words.brief(Measure::share(*reserve)),
    )];
    if book.surge.speeds == ClosingSpeeds::Two {
        said.push(text::surge_print_two_speeds(words, &closing));
        said.extend(
            [Field::FastTime, Field::SlowTime, Field::Knee]
                .into_iter()
                .filter_map(|field| {
                    let value = match book.entry(field)?.value {
                        Some(value) => value,
                        None => field.preset()?.value,
                    };
                    let value = words.brief(Measure::new(value, field.kind()));
                    Some(format!("{}: {value}.", words.field_label(field)))
                }),
        );
    }
    Some(said.join(" "))
}

/// The section.
pub(super) fn section(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let body = match &findings.transient.surge {
        Ok(surge) => {
            let rows: Vec<AnyView> = findings
                .walls
                .stretches
                .iter()
                .map(|wall| row(words, book, wall))
                .collect();
            view! {
                <p>{text::surge_decides(words, &words.start(surge.deciding))}</p>
                <table class="print-table">
                    <thead>
                        <tr>
                            {th(words, Key::PAGE_NUMBER, None)}
                            {th(words, Key::SURGE_PRINT_HIGHEST, Some(Kind::Pressure))}
                            {th(words, Key::SURGE_COLUMN_AT, Some(Kind::Distance))}
                            {th(words, Key::SURGE_PRINT_ALLOWED, Some(Kind::Pressure))}
                            {th(words, Key::SCHEDULE_SHARE, Some(Kind::Share))}
                            {th(words, Key::SURGE_PRINT_LOWEST, Some(Kind::Pressure))}
                            {th(words, Key::SURGE_COLUMN_AT, Some(Kind::Distance))}
                        </tr>
                    </thead>
                    <tbody>{rows}</tbody>
                </table>
            }
            .into_any()
        }
        Err(gap) => view! { <p>{words.about(book).gap(gap)}</p> }.into_any(),
    };
    view! {
        <section class="print-section print-keep" data-test="print-surge">
            <h2>{words.say(Key::SURGE_PRINT)}</h2>
            <p data-test="print-closing">{ordered(words, book, findings)}</p>
            {body}
        </section>
    }
    .into_any()
}

fn row(words: Words, book: &Book, wall: &StretchWalls) -> AnyView {
    let pressure = |p: &Figure<PressureAt>| figure(words, &p.clone().map(|p| p.pressure));
    let place = |p: &Figure<PressureAt>| figure(words, &p.clone().map(|p| p.at));
    let allowed = wall.surge_bearing.clone().map(|b| b.pressure);
    let share = wall.surge_share.clone().map(Measure::share);
    let id: Id = wall.stretch;
    view! {
        <tr data-test=format!("surge-of-{id}")>
            <th scope="row">{number(book, id)}</th>
            {td(pressure(&wall.surge))}
            {td(place(&wall.surge))}
            {td(figure(words, &allowed))}
            {td(figure(words, &share))}
            {td(pressure(&wall.surge_lowest))}
            {td(place(&wall.surge_lowest))}
        </tr>
    }
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{Entry, demo, evaluate};

    #[test]
    fn the_closing_time_is_ordered_with_its_reserve() {
        let mut book = demo::demo("k");
        for language in Language::ALL {
            let words = Words::new(language, UnitSystem::Metric);
            let said = ordered(words, &book, &evaluate(&book)).unwrap();
            for figure in ["15", "25"] {
                assert!(said.contains(figure), "{said}");
            }
        }
        book.surge.closing_time_s = Entry::default();
        let words = Words::new(Language::English, UnitSystem::Metric);
        assert_eq!(ordered(words, &book, &evaluate(&book)), None);
    }
}
