//! Jets: number, bore solved or chosen, fixed or needle; flow and power with
//! each set of jets open.

use crate::inputs::{NumberField, choice};
use crate::parts::cautions::cautions;
use crate::parts::figures::{figures, gap_class};
use crate::sheets::{head, part};
use crate::state::state;
use leptos::prelude::*;
use words::{Key, text};
use workbook::book::{BoreSizing, NozzleKind};
use workbook::caution::Sheet;
use workbook::units::Kind;
use workbook::working::FigureKey;
use workbook::{Field, Measure};

const SIZINGS: [(BoreSizing, &str, Key); 2] = [
    (BoreSizing::Solved, "solved", Key::OPTION_BORE_SOLVED),
    (BoreSizing::Chosen, "chosen", Key::OPTION_BORE_CHOSEN),
];

const KINDS: [(NozzleKind, &str, Key); 2] = [
    (NozzleKind::Fixed, "fixed", Key::OPTION_NOZZLE_FIXED),
    (NozzleKind::Needle, "needle", Key::OPTION_NOZZLE_NEEDLE),
];

/// The sheet.
#[component]
pub fn JetsSheet() -> impl IntoView {
    let state = state();
    let chosen = move || state.book.with(|b| b.jets.sizing == BoreSizing::Chosen);
    let more = [
        Field::JetVelocityCoefficient,
        Field::JetContraction,
        Field::BranchK,
        Field::BranchBore,
        Field::JetRating,
    ]
    .map(|field| view! { <NumberField field=field/> });
    view! {
        {head(Key::SHEET_JETS, Key::PAGE_ABOUT_JETS)}
        <div class="fields" id="sheet-jets">
            <NumberField field=Field::JetCount/>
            {choice(
                "bore-sizing",
                Key::FIELD_BORE_SIZING,
                &SIZINGS,
                |b| b.jets.sizing,
                |b, v| b.jets.sizing = v,
            )}
            <Show when=chosen>
                <NumberField field=Field::JetBore/>
            </Show>
            {choice(
                "nozzle-kind",
                Key::FIELD_NOZZLE_KIND,
                &KINDS,
                |b| b.jets.kind,
                |b, v| b.jets.kind = v,
            )}
            {more}
        </div>
        {figures(
            vec![
                FigureKey::NozzleBore,
                FigureKey::NetHead,
                FigureKey::JetVelocity,
                FigureKey::JetDiameter,
                FigureKey::JetPower,
                FigureKey::Loss,
                FigureKey::LossShare,
                FigureKey::GreatestPower,
            ],
        )}
        <p class="quiet" data-test="power-curve">{move || curve_words()}</p>
        {part("jet-sets", Key::JETS_SETS, sets())}
        {cautions(Sheet::Jets)}
    }
}

/// Where on the curve of power against flow the design sits.
fn curve_words() -> String {
    let state = state();
    let words = state.words.get();
    state.findings.with(|f| match &f.operation.power {
        Ok(curve) => {
            let top = &curve.greatest_power;
            text::page_greatest_power(
                words,
                &words.figure(top.jet_power),
                &words.figure(top.flow),
                &words.figure(Measure::share(top.lost_share)),
            )
        }
        Err(gap) => state.book.with(|b| words.about(b).gap(gap)),
    })
}

fn sets() -> AnyView {
    let state = state();
    let head = move || {
        let words = state.words.get();
        [
            (Key::JETS_COLUMN_OPEN, None),
            (Key::JETS_COLUMN_FLOW, Some(Kind::Flow)),
            (Key::JETS_COLUMN_NET, Some(Kind::Head)),
            (Key::SWEEP_COLUMN_LOSS, Some(Kind::Head)),
            (Key::JETS_COLUMN_POWER, Some(Kind::Power)),
        ]
        .map(|(key, kind)| {
            let unit = kind.map_or("", |k| words.unit(k));
            view! { <th scope="col" class="num">{words.say(key)} " " {unit}</th> }
        })
    };
    (move || {
        let words = state.words.get();
        state.findings.with(|f| match &f.operation.sets {
            Ok(sets) => {
                let rows = sets
                    .iter()
                    .map(|s| {
                        view! {
                            <tr data-test=format!("jets-open-{}", s.open)>
                                <th scope="row" class="num">
                                    {s.open}
                                </th>
                                <td class="num">{words.value(s.flow)}</td>
                                <td class="num">{words.value(s.net_head)}</td>
                                <td class="num">{words.value(s.loss)}</td>
                                <td class="num">{words.value(s.power)}</td>
                            </tr>
                        }
                    })
                    .collect_view();
                view! {
                    <table class="table" data-test="jet-table">
                        <thead>
                            <tr>{head()}</tr>
                        </thead>
                        <tbody>{rows}</tbody>
                    </table>
                }
                .into_any()
            }
            Err(gap) => {
                let said = state.book.with(|b| words.about(b).gap(gap));
                view! { <p class=gap_class(gap)>{said}</p> }.into_any()
            }
        })
    })
    .into_any()
}
