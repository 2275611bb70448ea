//! Line: the surveyed stations, water levels, stretches, fittings.

mod cuts;
mod fittings;
mod found;
mod stations;
mod stretches;
mod survey;

use crate::inputs::{NumberField, choice};
use crate::parts::cautions::cautions;
use crate::parts::figures::figures;
use crate::sheets::{head, part};
use leptos::prelude::*;
use words::Key;
use workbook::Field;
use workbook::book::{DistanceKind, Reckoning};
use workbook::caution::Sheet;
use workbook::working::FigureKey;

/// How distances are measured.
pub(crate) const DISTANCES: [(DistanceKind, &str, Key); 2] = [
    (DistanceKind::Slope, "slope", Key::OPTION_SLOPE),
    (
        DistanceKind::Horizontal,
        "horizontal",
        Key::OPTION_HORIZONTAL,
    ),
];

/// What distances are counted from.
pub(crate) const RECKONINGS: [(Reckoning, &str, Key); 2] = [
    (Reckoning::FromStart, "start", Key::OPTION_FROM_START),
    (
        Reckoning::FromPrevious,
        "previous",
        Key::OPTION_FROM_PREVIOUS,
    ),
];

/// The sheet.
#[component]
pub fn LineSheet() -> impl IntoView {
    let levels = [
        Field::ForebayNormal,
        Field::ForebayHighest,
        Field::ForebayLowest,
        Field::JetAxis,
        Field::TailLevel,
        Field::GaugeLevel,
    ]
    .map(|field| view! { <NumberField field=field/> });
    view! {
        {head(Key::SHEET_LINE, Key::PAGE_ABOUT_LINE)}
        <div class="fields">
            {choice(
                "distance-kind",
                Key::FIELD_DISTANCE_KIND,
                &DISTANCES,
                |b| b.line.distance_kind,
                |b, v| b.line.distance_kind = v,
            )}
            {choice(
                "reckoning",
                Key::FIELD_RECKONING,
                &RECKONINGS,
                |b| b.line.reckoning,
                |b, v| b.line.reckoning = v,
            )}
        </div>
        {part("stations", Key::LINE_STATIONS, stations::stations())}
        {figures(
            vec![
                FigureKey::GrossHead,
                FigureKey::PipeLength,
                FigureKey::Loss,
                FigureKey::LossShare,
                FigureKey::Lowest,
            ],
        )}
        {part(
            "levels",
            Key::LINE_LEVELS,
            view! { <div class="fields">{levels}</div> }.into_any(),
        )}
        {found::found()}
        {survey::of_line()}
        {part(
            "stretches",
            Key::LINE_STRETCHES,
            view! { {cuts::cuts()} {stretches::stretches()} }.into_any(),
        )}
        {part("fittings", Key::LINE_FITTINGS, fittings::fittings())}
        {cautions(Sheet::Line)}
    }
}
