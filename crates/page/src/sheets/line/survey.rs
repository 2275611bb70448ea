//! How the line was surveyed beyond its table: the way of each station, what
//! the survey is closed on, how the pipe is turned, how water comes to the
//! intake.

use crate::inputs::{NumberField, choice};
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, text};
use workbook::book::{Approach, BendKind, DistanceKind, Id, Station, SurveyWay};
use workbook::units::Kind;
use workbook::{Book, Field, Measure};

/// The ways a level is found.
pub(super) const WAYS: [(SurveyWay, &str, Key); 3] = [
    (SurveyWay::Level, "level", Key::OPTION_BY_LEVEL),
    (SurveyWay::Angle, "angle", Key::OPTION_BY_ANGLE),
    (SurveyWay::Staff, "staff", Key::OPTION_BY_STAFF),
];

const KINDS: [(Option<DistanceKind>, &str, Key); 3] = [
    (None, "line", Key::OPTION_AS_LINE),
    (Some(DistanceKind::Slope), "slope", Key::OPTION_SLOPE),
    (
        Some(DistanceKind::Horizontal),
        "horizontal",
        Key::OPTION_HORIZONTAL,
    ),
];

const BENDS: [(BendKind, &str, Key); 3] = [
    (BendKind::Smooth, "smooth", Key::OPTION_BEND_SMOOTH),
    (BendKind::Mitre, "mitre", Key::OPTION_BEND_MITRE),
    (BendKind::Joints, "joints", Key::OPTION_BEND_JOINTS),
];

const BENDS_HERE: [(Option<BendKind>, &str, Key); 4] = [
    (None, "line", Key::OPTION_AS_LINE),
    (Some(BendKind::Smooth), "smooth", Key::OPTION_BEND_SMOOTH),
    (Some(BendKind::Mitre), "mitre", Key::OPTION_BEND_MITRE),
    (Some(BendKind::Joints), "joints", Key::OPTION_BEND_JOINTS),
];

const SPREADS: [(bool, &str, Key); 2] = [
    (false, "no", Key::OPTION_SPREAD_NO),
    (true, "yes", Key::OPTION_SPREAD_YES),
];

const APPROACHES: [(Approach, &str, Key); 2] = [
    (Approach::Lateral, "lateral", Key::OPTION_APPROACH_LATERAL),
    (
        Approach::Symmetrical,
        "symmetrical",
        Key::OPTION_APPROACH_SYMMETRICAL,
    ),
];

fn find(book: &Book, id: Id) -> Option<&Station> {
    book.line.stations.iter().find(|s| s.id == id)
}

fn find_mut(book: &mut Book, id: Id) -> Option<&mut Station> {
    book.line.stations.iter_mut().find(|s| s.id == id)
}

/// What is entered of one station beside its numbers in the table.
pub(super) fn of_station(state: State, id: Id) -> AnyView {
    let place = Memo::new(move |_| {
        state.book.with(|b| {
            let count = b.line.stations.len();
            b.line
                .stations
                .iter()
                .position(|s| s.id == id)
                .map(|place| (place > 0, place + 1 < count))
        })
    });
    let below_first = move || place.get().is_some_and(|(below, _)| below);
    let between = move || place.get() == Some((true, true));
    view! {
        <div class="fields">
            <Show when=below_first>
                {choice(
                    &format!("station-way-{id}"),
                    Key::FIELD_STATION_WAY,
                    &WAYS,
                    move |b| find(b, id).map(|s| s.way).unwrap_or_default(),
                    move |b, way| {
                        if let Some(s) = find_mut(b, id) {
                            s.way = way;
                        }
                    },
                )}
                {choice(
                    &format!("station-kind-{id}"),
                    Key::FIELD_STATION_KIND,
                    &KINDS,
                    move |b| find(b, id).and_then(|s| s.distance_kind),
                    move |b, kind| {
                        if let Some(s) = find_mut(b, id) {
                            s.distance_kind = kind;
                        }
                    },
                )}
            </Show>
            <Show when=between>
                <NumberField field=Field::StationTurn(id)/>
                {choice(
                    &format!("station-bend-{id}"),
                    Key::FIELD_STATION_BEND,
                    &BENDS_HERE,
                    move |b| find(b, id).and_then(|s| s.bend),
                    move |b, bend| {
                        if let Some(s) = find_mut(b, id) {
                            s.bend = bend;
                        }
                    },
                )}
            </Show>
        </div>
    }
    .into_any()
}

/// What is entered once for the whole survey, and how it closes.
pub(super) fn of_line() -> AnyView {
    let state = state();
    view! {
        <details class="sheet-part fold" data-test="survey">
        <summary data-test="survey-fold">
            <span>{move || state.words.get().say(Key::LINE_SURVEY)}</span>
            <span class="num">{move || error(state)}</span>
        </summary>
        <div class="fields">
            <NumberField field=Field::KnownFall/>
            {choice(
                "spread",
                Key::FIELD_SPREAD,
                &SPREADS,
                |b| b.line.spread_error,
                |b, spread| b.line.spread_error = spread,
            )}
        </div>
        <p data-test="closing">{move || closing(state)}</p>
        <ul class="quiet" data-test="sights-differ">{move || sights(state)}</ul>
        <div class="fields">
            {choice("bend", Key::FIELD_LINE_BEND, &BENDS, |b| b.line.bend, |b, v| b.line.bend = v)}
            <NumberField field=Field::BendRadius/>
            <NumberField field=Field::JointDeflection/>
            <NumberField field=Field::AirSlopeChange/>
            {choice(
                "approach",
                Key::FIELD_APPROACH,
                &APPROACHES,
                |b| b.limits.intake_approach,
                |b, v| b.limits.intake_approach = v,
            )}
        </div>
        </details>
    }
    .into_any()
}

/// The closing error alone, beside the fold's name.
fn error(state: State) -> Option<String> {
    let words = state.words.get();
    state.findings.with(|f| {
        let closing = f.resolved.profile.closing.as_ref().ok()?.as_ref()?;
        Some(words.figure(closing.error))
    })
}

/// How the survey closes, where there is something to close on.
fn closing(state: State) -> Option<String> {
    let words = state.words.get();
    state.findings.with(|f| {
        let closing = f.resolved.profile.closing.as_ref().ok()?.as_ref()?;
        let said = text::line_closing(
            words,
            &words.figure(closing.surveyed),
            &words.figure(closing.known),
            &words.figure(closing.error),
        );
        Some(match closing.spread_over {
            Some(over) => format!(
                "{said}, {}.",
                text::line_closing_spread(words, &words.figure(over))
            ),
            None => format!("{said}."),
        })
    })
}

fn sights(state: State) -> Vec<AnyView> {
    let words = state.words.get();
    let differ = state
        .findings
        .with(|f| f.resolved.profile.sights_differ.clone());
    differ
        .into_iter()
        .map(|(id, degrees)| {
            let station = state.book.with(|b| words.about(b).station(id));
            let angle = words.figure(Measure::new(degrees, Kind::Angle));
            view! { <li>{text::line_sights_differ(words, &station, &angle)}</li> }.into_any()
        })
        .collect()
}
