//! What the line sees: verdicts, extremes of every stretch, event by event,
//! and why the figures can be trusted; or why there are none.

use super::trace;
use crate::parts::figures::gap_class;
use crate::parts::verdicts::verdict_line;
use crate::state::State;
use leptos::prelude::*;
use words::{Key, Words, capital, text};
use workbook::book::Id;
use workbook::transient::{EventKind, EventPeak, StretchOnGrid, Surge};
use workbook::units::Kind;
use workbook::walls::StretchWalls;
use workbook::{Book, Findings, Measure};

/// All of it.
pub(super) fn found(state: State) -> AnyView {
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stretches.iter().map(|s| s.id).collect::<Vec<Id>>())
    });
    view! {
        <For each=move || ids.get() key=|id| *id children=verdict_line/>
        {move || {
            let words = state.words.get();
            let book = state.book.get();
            let findings = state.findings.get();
            match &findings.transient.surge {
                Ok(surge) => solved(words, &book, &findings, surge),
                Err(gap) => {
                    let said = words.about(&book).gap(gap);
                    view! {
                        <p class=gap_class(gap) data-test="surge-unsettled">
                            {said}
                        </p>
                    }
                        .into_any()
                }
            }
        }}
        {trace::trace(state)}
        {move || {
            let words = state.words.get();
            let book = state.book.get();
            state.findings.with(|f| beside(words, &book, f))
        }}
    }
    .into_any()
}

/// Number of a stretch in its list, from 1.
fn number(book: &Book, id: Id) -> String {
    let place = book.line.stretches.iter().position(|s| s.id == id);
    place.map_or_else(|| id.to_string(), |i| (i + 1).to_string())
}

fn column(words: Words, key: Key, kind: Option<Kind>) -> AnyView {
    let unit = kind.map_or("", |k| words.unit(k));
    let class = if kind.is_some() { "num" } else { "" };
    view! { <th scope="col" class=class>{words.say(key)} " " {unit}</th> }.into_any()
}

fn solved(words: Words, book: &Book, findings: &Findings, surge: &Surge) -> AnyView {
    let rows: Vec<AnyView> = findings
        .walls
        .stretches
        .iter()
        .map(|wall| stretch_row(words, book, wall))
        .collect();
    let peaks = &surge.peaks;
    let parts = peaks
        .parted
        .as_ref()
        .map(|p| text::surge_parts(words, &words.figure(p.at)));
    let air = peaks
        .draws_air
        .then(|| words.say(Key::SURGE_DRAWS_AIR).to_owned());
    let said: Vec<String> =
        core::iter::once(text::surge_decides(words, &words.start(surge.deciding)))
            .chain(parts)
            .chain(air)
            .collect();
    view! {
        <div
            class="table-scroll"
            tabindex="0"
            role="region"
            aria-label=words.say(Key::PAGE_PRESSURES)
        >
        <table class="table" data-test="surge-table">
            <thead>
                <tr>
                    {column(words, Key::PAGE_STRETCH, None)}
                    {column(words, Key::SURGE_COLUMN_HIGHEST, Some(Kind::Pressure))}
                    {column(words, Key::SURGE_COLUMN_AT, Some(Kind::Distance))}
                    {column(words, Key::SURGE_COLUMN_SHARE, Some(Kind::Share))}
                    {column(words, Key::SURGE_COLUMN_LOWEST, Some(Kind::Pressure))}
                    {column(words, Key::SURGE_COLUMN_AT, Some(Kind::Distance))}
                </tr>
            </thead>
            <tbody>{rows}</tbody>
        </table>
        </div>
        <p data-test="surge-decides">{said.join(" ")}</p>
        {events(words, findings, surge)}
    }
    .into_any()
}

fn stretch_row(words: Words, book: &Book, wall: &StretchWalls) -> AnyView {
    let both = |at: &workbook::figure::Figure<workbook::walls::PressureAt>| match at {
        Ok(p) => (words.value(p.pressure), words.value(p.at)),
        Err(_) => (crate::speak::none(), crate::speak::none()),
    };
    let (highest, highest_at) = both(&wall.surge);
    let (lowest, lowest_at) = both(&wall.surge_lowest);
    let share = wall.surge_share.as_ref().map_or_else(
        |_| crate::speak::none(),
        |s| words.value(Measure::share(*s)),
    );
    view! {
        <tr data-test=format!("surge-stretch-{}", wall.stretch)>
            <th scope="row">{number(book, wall.stretch)}</th>
            <td class="num">{highest}</td>
            <td class="num">{highest_at}</td>
            <td class="num">{share}</td>
            <td class="num">{lowest}</td>
            <td class="num">{lowest_at}</td>
        </tr>
    }
    .into_any()
}

/// Highest and lowest pressure of an event, anywhere on the line.
fn extremes(event: &EventPeak) -> Option<(Measure, Measure)> {
    let highest = event
        .highest
        .iter()
        .max_by(|a, b| a.0.pa().total_cmp(&b.0.pa()))?;
    let lowest = event
        .lowest
        .iter()
        .min_by(|a, b| a.0.pa().total_cmp(&b.0.pa()))?;
    Some((highest.0.into(), lowest.0.into()))
}

fn events(words: Words, findings: &Findings, surge: &Surge) -> AnyView {
    let rows: Vec<AnyView> = surge
        .events
        .iter()
        .filter_map(|event| {
            let (highest, lowest) = extremes(event)?;
            let kind = event.start.event;
            let mut more = vec![words.start(event.start)];
            if let Some(parted) = &event.parted {
                more.push(text::surge_parts(words, &words.figure(parted.at)));
            }
            if !event.counts {
                more.push(words.say(Key::SURGE_NOT_COUNTED).to_owned());
            }
            let more = more
                .into_iter()
                .map(|said| view! { <span class="pick-more">{said}</span> })
                .collect_view();
            Some(
                view! {
                    <tr data-test=format!("event-{kind:?}")>
                        <th scope="row">
                            {words.name(kind)}
                            {more}
                        </th>
                        <td class="num">{words.value(highest)}</td>
                        <td class="num">{words.value(lowest)}</td>
                    </tr>
                }
                .into_any(),
            )
        })
        .collect();
    let kept = findings.resolved.drive.deflectors && surge.event(EventKind::LoadLost).is_none();
    view! {
        <h4>{words.say(Key::SURGE_EVENTS)}</h4>
        <table class="table" data-test="surge-events">
            <thead>
                <tr>
                    {column(words, Key::SURGE_COLUMN_EVENT, None)}
                    {column(words, Key::SURGE_COLUMN_HIGHEST, Some(Kind::Pressure))}
                    {column(words, Key::SURGE_COLUMN_LOWEST, Some(Kind::Pressure))}
                </tr>
            </thead>
            <tbody>{rows}</tbody>
        </table>
        {kept.then(|| view! { <p class="quiet">{words.say(Key::SURGE_LOAD_KEPT)}</p> })}
    }
    .into_any()
}

/// A figure of the run with its name.
struct Said {
    test: String,
    name: String,
    value: String,
}

impl Said {
    fn new(test: &str, name: impl Into<String>, value: String) -> Said {
        Said {
            test: format!("surge-{test}"),
            name: name.into(),
            value,
        }
    }
}

fn list(all: Vec<Said>) -> AnyView {
    let rows: Vec<AnyView> = all
        .into_iter()
        .map(|s| {
            view! {
                <div>
                    <dt class="figure-label">{s.name}</dt>
                    <dd class="figure" data-test=s.test>
                        {s.value}
                    </dd>
                </div>
            }
            .into_any()
        })
        .collect();
    view! { <dl class="figures">{rows}</dl> }.into_any()
}

/// Times, why the run can be trusted, and the quick figures beside it.
fn beside(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let transient = &findings.transient;
    let run = transient.surge.as_ref().ok().map(|surge| {
        let waves = surge
            .trust
            .stretches
            .iter()
            .map(|s| {
                let test = format!("surge-wave-{}", s.stretch);
                view! { <p class="quiet" data-test=test>{wave(words, book, s)}</p> }
            })
            .collect_view();
        view! {
            {list(times(words, surge))}
            <details class="sheet-part fold" data-test="surge-trust">
                <summary>{words.say(Key::SURGE_TRUST)}</summary>
                {list(trust(words, surge))}
                {waves}
            </details>
        }
        .into_any()
    });
    let quick = quick(words, findings);
    let quick = (!quick.is_empty()).then(|| {
        view! {
            <details class="sheet-part fold" data-test="surge-quick">
                <summary>{words.say(Key::SURGE_QUICK)}</summary>
                {list(quick)}
                <p class="quiet">{words.say(Key::SURGE_QUICK_NOTE)}</p>
            </details>
        }
        .into_any()
    });
    view! {
        {run}
        {quick}
    }
    .into_any()
}

fn times(words: Words, surge: &Surge) -> Vec<Said> {
    [
        ("closing", Key::SURGE_CLOSING_TIME, surge.closing),
        ("period", Key::SURGE_PERIOD, surge.period),
        (
            "water-starting",
            Key::SURGE_WATER_STARTING,
            surge.water_starting,
        ),
    ]
    .map(|(test, key, time)| Said::new(test, words.say(key), words.figure(time)))
    .into()
}

/// Every figure that says how far the run can be trusted.
fn trust(words: Words, surge: &Surge) -> Vec<Said> {
    let trust = &surge.trust;
    let share = |x: f64| small(words, x);
    let runs = text::surge_runs_said(
        words,
        &words.count(trust.runs.0),
        &words.count(trust.runs.1),
    );
    [
        ("step", Key::SURGE_TIME_STEP, words.figure(trust.step)),
        ("cells", Key::SURGE_CELLS, words.count(trust.cells)),
        ("moved", Key::SURGE_MOVED, share(trust.moved)),
        (
            "volume-left",
            Key::SURGE_VOLUME_LEFT,
            share(trust.balance.volume),
        ),
        (
            "energy-left",
            Key::SURGE_ENERGY_LEFT,
            share(trust.balance.energy),
        ),
        (
            "coarse-step",
            Key::SURGE_COARSE_STEP,
            words.figure(trust.coarse_step),
        ),
        (
            "coarse-cells",
            Key::SURGE_COARSE_CELLS,
            words.count(trust.coarse_cells),
        ),
        (
            "coarse-error",
            Key::SURGE_COARSE_ERROR,
            share(trust.coarse_error),
        ),
        ("runs", Key::SURGE_RUNS, runs),
    ]
    .into_iter()
    .map(|(test, key, value)| Said::new(test, words.say(key), value))
    .collect()
}

/// A small share; under a hundredth of a per cent no more than that is said,
/// so that rounding is not read as an error.
fn small(words: Words, x: f64) -> String {
    const LEAST: f64 = 1e-4;
    if x.abs() < LEAST {
        return text::figure_below(words, &words.brief(Measure::share(LEAST)));
    }
    words.full(Measure::share((x / LEAST).round() * LEAST))
}

/// How one stretch lies on the grid, in a sentence.
fn wave(words: Words, book: &Book, s: &StretchOnGrid) -> String {
    let (stretch, speed) = (
        words.about(book).stretch(s.stretch),
        words.figure(s.wave_speed),
    );
    if s.cells == 0 {
        capital(&text::surge_wave_lumped(words, &stretch, &speed))
    } else {
        text::surge_wave_altered(words, &stretch, &speed, &small(words, s.altered))
    }
}

fn quick(words: Words, findings: &Findings) -> Vec<Said> {
    let transient = &findings.transient;
    let mut all = Vec::new();
    if let Ok(rise) = &transient.greatest_rise {
        let name = words.say(Key::SURGE_QUICK_STOP);
        all.push(Said::new("quick-stop", name, words.figure(*rise)));
    }
    if let Ok(closing) = &transient.quick_closing {
        for (test, key, head) in [
            ("quick-michaud", Key::SURGE_QUICK_MICHAUD, closing.michaud),
            ("quick-allievi", Key::SURGE_QUICK_ALLIEVI, closing.allievi),
        ] {
            all.push(Said::new(test, words.say(key), words.figure(head)));
        }
    }
    all
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{demo, evaluate};

    #[test]
    fn the_demo_states_its_run_and_every_event_in_both_languages() {
        let book = demo::demo("k");
        let findings = evaluate(&book);
        let surge = findings.transient.surge.as_ref().unwrap();
        for language in Language::ALL {
            for units in [UnitSystem::Metric, UnitSystem::UsCustomary] {
                let words = Words::new(language, units);
                let said = trust(words, surge);
                assert_eq!(said.len(), 9);
                assert!(said.iter().all(|s| !s.value.is_empty()));
                assert_eq!(quick(words, &findings).len(), 3);
            }
        }
        for event in &surge.events {
            let (highest, lowest) = extremes(event).unwrap();
            assert!(highest.value > lowest.value);
        }
    }

    #[test]
    fn dust_is_below_what_is_said() {
        let words = Words::new(Language::English, UnitSystem::Metric);
        assert!(small(words, -1e-12).starts_with("below"));
        assert!(small(words, -0.012_34).contains("1.23"));
    }
}
