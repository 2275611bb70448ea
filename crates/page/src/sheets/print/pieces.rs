//! Bends, reducers, vents and drains of the print, with their places.

use crate::speak;
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::book::{Id, LayingOrder};
use workbook::figure::Figure;
use workbook::schedule::{BendGroup, Schedule};
use workbook::units::Kind;
use workbook::{Book, Findings, Measure};

/// One line of the table: what, how many, where.
type Piece = (String, usize, String);

/// A station with its chainage.
fn at(words: Words, book: &Book, findings: &Findings, station: Id) -> String {
    let name = words.about(book).station(station);
    findings
        .resolved
        .profile
        .station(station)
        .map_or(name.clone(), |s| {
            format!("{name}, {}", words.figure(s.chainage))
        })
}

fn bend(words: Words, book: &Book, findings: &Findings, group: &BendGroup) -> Piece {
    let angle = words.figure(Measure::new(group.angle_deg, Kind::Angle));
    let places: Vec<String> = group
        .stations
        .iter()
        .map(|(station, _)| at(words, book, findings, *station))
        .collect();
    (
        text::lay_bend(words, words.made(group.made), &angle, &group.pipe.short),
        group.stations.len(),
        places.join("; "),
    )
}

fn pieces(
    words: Words,
    book: &Book,
    findings: &Findings,
    schedule: &Schedule,
) -> Figure<Vec<Piece>> {
    let mut all = Vec::new();
    for group in schedule.bends.clone()? {
        all.push(bend(words, book, findings, &group));
    }
    for reducer in schedule.reducers.clone()? {
        let place = reducer.station.map_or_else(
            || words.figure(reducer.at),
            |s| at(words, book, findings, s),
        );
        all.push((words.reducer(&reducer), 1, place));
    }
    for vent in schedule.vents.clone()? {
        all.push((
            words.say(Key::LAY_VENT_PIECE).to_owned(),
            1,
            format!(
                "{} ({})",
                at(words, book, findings, vent.station),
                words.collects(vent.why)
            ),
        ));
    }
    for drain in schedule.drains.clone()? {
        all.push((
            words.say(Key::LAY_DRAIN_PIECE).to_owned(),
            1,
            at(words, book, findings, drain.station),
        ));
    }
    Ok(all)
}

/// The section of the print.
pub(super) fn section(
    words: Words,
    book: &Book,
    findings: &Findings,
    schedule: &Schedule,
) -> AnyView {
    let body = match pieces(words, book, findings, schedule) {
        Err(gap) => view! { <p>{words.about(book).gap(&gap)}</p> }.into_any(),
        Ok(all) if all.is_empty() => view! { <p>{words.say(Key::LAY_NO_PIECES)}</p> }.into_any(),
        Ok(all) => {
            let rows: Vec<AnyView> = all
                .into_iter()
                .map(|(what, count, place)| {
                    view! {
                        <tr>
                            <th scope="row">{what}</th>
                            <td class="num">{words.count(count)}</td>
                            <td>{place}</td>
                        </tr>
                    }
                    .into_any()
                })
                .collect();
            view! {
                <table class="print-table" data-test="print-pieces">
                    <thead>
                        <tr>
                            <th scope="col">{words.say(Key::LAY_PIECE)}</th>
                            <th scope="col" class="num">
                                {words.say(Key::LAY_NUMBER)}
                            </th>
                            <th scope="col">{words.say(Key::LAY_WHERE)}</th>
                        </tr>
                    </thead>
                    <tbody>{rows}</tbody>
                </table>
            }
            .into_any()
        }
    };
    view! {
        <section class="print-section">
            <h2>{words.say(Key::LAY_PIECES)}</h2>
            {body}
        </section>
    }
    .into_any()
}

/// The laying list, on pages of its own and large enough to read outdoors.
pub(super) fn laying(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let body = match workbook::laying::laying(findings, book.print.laid) {
        Err(gap) => view! { <p>{words.about(book).gap(&gap)}</p> }.into_any(),
        Ok(rows) => {
            let mut pipe = None;
            let rows: Vec<AnyView> = rows
                .iter()
                .map(|row| {
                    // A pipe is named where it begins, not at every station.
                    let stretch = row.next.as_ref().map(|leg| leg.stretch);
                    let begins = stretch != pipe;
                    pipe = stretch;
                    laid(words, book, row, begins)
                })
                .collect();
            view! {
                <table class="print-table print-large" data-test="print-laying">
                    <thead>
                        <tr>
                            <th scope="col">{words.say(Key::SCHEDULE_STATION)}</th>
                            <th scope="col" class="num">
                                {words.say(Key::FIGURE_CHAINAGE)} " "
                                {words.unit(Kind::Distance)}
                            </th>
                            <th scope="col">{words.say(Key::LAY_HERE)}</th>
                            <th scope="col" class="print-next">
                                {words.say(Key::LAY_NEXT)}
                            </th>
                        </tr>
                    </thead>
                    <tbody>{rows}</tbody>
                </table>
            }
            .into_any()
        }
    };
    view! {
        <section class="print-section print-list">
            <h2>{words.say(Key::LAY_TITLE)}</h2>
            <p>
                {words.say(Key::LAY_ABOUT)} ". "
                {words.name(book.print.laid)} ". "
                {words.say(Key::PRINT_NOT_FOR_BUILDING)}
            </p>
            {body}
        </section>
    }
    .into_any()
}

fn laid(words: Words, book: &Book, row: &workbook::laying::Row, begins: bool) -> AnyView {
    let about = words.about(book);
    let items: Vec<AnyView> = row
        .items
        .iter()
        .filter_map(|item| about.laid(item))
        .map(|said| view! { <div>{said}</div> }.into_any())
        .collect();
    let next = row.next.as_ref().map(|leg| {
        let pipe = leg
            .pipe
            .as_ref()
            .map_or_else(|gap| about.gap(gap), |p| p.short.clone());
        let slope = words.figure(Measure::new(leg.slope_deg.abs(), Kind::Angle));
        // Told as the crew goes.
        let down = (leg.slope_deg >= 0.0) == (book.print.laid == LayingOrder::Downhill);
        let slope = if down {
            text::lay_down(words, &slope)
        } else {
            text::lay_up(words, &slope)
        };
        view! {
            <div>
                <strong>{words.figure(leg.length)}</strong>
                ", "
                {slope}
            </div>
            {begins.then(|| view! { <div>{pipe} ", " {words.name(leg.laying)}</div> })}
        }
    });
    view! {
        <tr data-test=format!("laid-{}", row.station)>
            <th scope="row">
                {speak::station(words, book, row.station)}
                <div class="print-level">{text::line_level_is(words, &words.figure(row.level))}</div>
            </th>
            <td class="num">{words.value(row.at)}</td>
            <td>{items}</td>
            <td>{next}</td>
        </tr>
    }
    .into_any()
}
