//! What is found at each station, as a table: the equal of the drawing for
//! those who cannot see it.

use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::figure::Figure;
use workbook::stations::StationFinding;
use workbook::units::Kind;
use workbook::{Book, Findings, Measure};

/// The table, drawn only while it is opened: a long line has many rows.
pub(super) fn found() -> AnyView {
    let state = state();
    let open = RwSignal::new(false);
    view! {
        <details
            class="sheet-part fold"
            data-test="stations-found"
            on:toggle=move |e| open.set(crate::platform::place::is_open(&e))
        >
            <summary>{move || state.words.get().say(Key::LAY_FOUND)}</summary>
            {move || open.get().then(|| table(state))}
        </details>
    }
    .into_any()
}

fn table(state: State) -> AnyView {
    let words = state.words.get();
    let book = state.book.get();
    let findings = state.findings.get();
    let sets = findings
        .operation
        .sets
        .as_ref()
        .map_or(0, |sets| sets.len());
    // The last set is all jets, which the running pressure shows.
    let some = sets.saturating_sub(1);
    let head = |key: Key, kind: Kind| {
        view! {
            <th scope="col" class="num">
                {words.say(key)} " " {words.unit(kind)}
            </th>
        }
    };
    let set_heads: Vec<AnyView> = (1..=some)
        .map(|n| {
            view! {
                <th scope="col" class="num">
                    {text::lay_set_pressure(words, &words.count(n))} " "
                    {words.unit(Kind::Pressure)}
                </th>
            }
            .into_any()
        })
        .collect();
    let rows: Vec<AnyView> = findings
        .stations
        .iter()
        .map(|s| row(words, &book, &findings, s, some))
        .collect();
    view! {
        <div
            class="table-scroll table-tall"
            tabindex="0"
            role="region"
            aria-label=words.say(Key::LAY_FOUND)
        >
            <table class="table" data-test="stations-found-table">
                <thead>
                    <tr>
                        <th scope="col">{words.say(Key::SCHEDULE_STATION)}</th>
                        {head(Key::FIGURE_CHAINAGE, Kind::Distance)}
                        {head(Key::FIGURE_LEVEL, Kind::Level)}
                        {head(Key::LAY_STATIC_HEAD, Kind::Head)}
                        {head(Key::LAY_SHARE, Kind::Share)}
                        {head(Key::LAY_RUNNING, Kind::Pressure)}
                        {set_heads}
                    </tr>
                </thead>
                <tbody>{rows}</tbody>
            </table>
        </div>
    }
    .into_any()
}

fn cell<T: Copy + Into<Measure>>(words: Words, figure: &Figure<T>) -> AnyView {
    let shown = figure
        .as_ref()
        .map_or_else(|_| speak::none(), |x| words.value(*x));
    view! { <td class="num">{shown}</td> }.into_any()
}

fn row(
    words: Words,
    book: &Book,
    findings: &Findings,
    found: &StationFinding,
    some: usize,
) -> AnyView {
    let relief = &findings.relief;
    let mut marks = Vec::new();
    if let Some(vent) = relief
        .vents
        .iter()
        .flatten()
        .find(|v| v.station == found.station)
    {
        marks.push(text::lay_vent(words, &words.collects(vent.why)));
    }
    if relief
        .drains
        .iter()
        .flatten()
        .any(|d| d.station == found.station)
    {
        marks.push(words.say(Key::LAY_DRAIN).to_owned());
    }
    let sets: Vec<AnyView> = (0..some)
        .map(|n| {
            let pressure = found
                .sets
                .clone()
                .map(|sets| sets.get(n).map(|r| r.pressure));
            match pressure {
                Ok(Some(p)) => view! { <td class="num">{words.value(p)}</td> }.into_any(),
                _ => view! { <td class="num">{speak::none()}</td> }.into_any(),
            }
        })
        .collect();
    view! {
        <tr data-test=format!("found-{}", found.station)>
            <th scope="row">
                {speak::station(words, book, found.station)}
                {(!marks.is_empty())
                    .then(|| view! { <div class="quiet">{marks.join("; ")}</div> })}
            </th>
            <td class="num">{words.value(found.at)}</td>
            <td class="num">{words.value(found.level)}</td>
            {cell(words, &found.static_head)}
            {cell(words, &found.share.clone().map(Measure::share))}
            {cell(words, &found.running.clone().map(|r| r.pressure))}
            {sets}
        </tr>
    }
    .into_any()
}
