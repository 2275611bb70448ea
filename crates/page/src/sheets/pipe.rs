//! Pipe: what each stretch comes to, and every pipe of the catalogue against
//! loss, pressure and collapse.

mod chart;
mod table;

use crate::edits::pipes::take_catalogue;
use crate::inputs::{NumberField, choice};
use crate::parts::cautions::cautions;
use crate::parts::figures::figures;
use crate::parts::own_pipe::OwnPipes;
use crate::parts::verdicts::verdict_line;
use crate::sheets::{head, part};
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, text};
use workbook::Field;
use workbook::book::{Id, RoughnessAge};
use workbook::caution::Sheet;
use workbook::pipe_copy::differs;
use workbook::working::FigureKey;

const ROUGHNESS: [(RoughnessAge, &str, Key); 2] = [
    (RoughnessAge::Aged, "aged", Key::SETTING_ROUGHNESS_AGED),
    (RoughnessAge::New, "new", Key::SETTING_ROUGHNESS_NEW),
];

/// The sheet.
#[component]
pub fn PipeSheet() -> impl IntoView {
    let state = state();
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stretches.iter().map(|s| s.id).collect::<Vec<Id>>())
    });
    let detail = Memo::new(move |_| {
        state
            .stretch
            .get()
            .or_else(|| state.book.with(|b| b.line.stretches.first().map(|s| s.id)))
    });
    let limits = view! {
        <div class="fields">
            <NumberField field=Field::LossCap/>
            <NumberField field=Field::VelocityHigh/>
            <NumberField field=Field::TightMargin/>
            <NumberField field=Field::CollapseSafety/>
            <NumberField field=Field::Spare/>
            {choice(
                "roughness",
                Key::SETTING_ROUGHNESS,
                &ROUGHNESS,
                |b| b.limits.roughness,
                |b, v| b.limits.roughness = v,
            )}
        </div>
    }
    .into_any();
    view! {
        {head(Key::SHEET_PIPE, Key::PAGE_ABOUT_PIPE)}
        <For each=move || ids.get() key=|id| *id children=move |id| stretch(state, id)/>
        {move || {
            detail
                .get()
                .map(|id| {
                    let said = move || {
                        let words = state.words.get();
                        let book = state.book.get();
                        let name = speak::stretch(words, &book, &state.findings.get(), id);
                        text::page_figures_of(words, &name)
                    };
                    view! {
                        <details class="sheet-part fold" data-test="stretch-figures">
                            <summary>{said}</summary>
                            {figures(stretch_figures(id))}
                        </details>
                    }
                })
        }}
        <section class="sheet-part" aria-labelledby="sweep-head" data-test="sweep">
            <h3 id="sweep-head">{move || state.words.get().say(Key::SWEEP_TITLE)}</h3>
            {table::controls(state)} {chart::chart(state)} {table::table(state)}
        </section>
        <OwnPipes/>
        {part("limits", Key::SETTING_LIMITS, limits)}
        {cautions(Sheet::Pipe)}
    }
}

/// The figures of one stretch.
#[must_use]
pub fn stretch_figures(id: Id) -> Vec<FigureKey> {
    vec![
        FigureKey::Bore(id),
        FigureKey::Velocity(id),
        FigureKey::FrictionLoss(id),
        FigureKey::Standing(id),
        FigureKey::Allowable(id),
        FigureKey::Share(id),
        FigureKey::WaveSpeed(id),
        FigureKey::QuickRise(id),
        FigureKey::Collapse(id),
        FigureKey::Mass(id),
    ]
}

/// A stretch: its pipe, its verdict; a tap selects it.
fn stretch(state: State, id: Id) -> AnyView {
    let chosen = move || state.stretch.get() == Some(id);
    let named = move || {
        let words = state.words.get();
        let book = state.book.get();
        speak::stretch(words, &book, &state.findings.get(), id)
    };
    let pipe = move || {
        let words = state.words.get();
        state.findings.with(|f| {
            let found = f.resolved.stretches.iter().find(|s| s.id == id)?;
            Some(match &found.pipe {
                Ok(pipe) => pipe.designation.clone(),
                Err(gap) => state.book.with(|b| words.about(b).gap(gap)),
            })
        })
    };
    let changed = Memo::new(move |_| {
        state.book.with(|b| {
            let name = b.line.stretches.iter().find(|s| s.id == id)?.pipe.clone()?;
            let copy = b.pipes.iter().find(|p| p.id == name)?;
            differs(copy).map(|_| (name, copy.designation.clone()))
        })
    });
    view! {
        <section
            class="sheet-part"
            id=format!("stretch-{id}")
            tabindex="-1"
            data-test=format!("stretch-{id}")
        >
            <h3>
                <button
                    type="button"
                    class="pick-head"
                    data-test=format!("stretch-pick-{id}")
                    aria-pressed=move || if chosen() { "true" } else { "false" }
                    on:click=move |_| {
                        state.stretch.set(if chosen() { None } else { Some(id) });
                    }
                >
                    <span>
                        {named}
                        <span class="pick-more" data-test=format!("stretch-pipe-{id}")>
                            {pipe}
                        </span>
                    </span>
                </button>
            </h3>
            {verdict_line(id)}
            {move || {
                changed
                    .get()
                    .map(|(name, designation)| {
                        view! {
                            <p class="quiet">
                                {move || text::copy_differs(state.words.get(), &designation)} " "
                                <button
                                    type="button"
                                    class="button-quiet"
                                    data-test=format!("take-catalogue-{id}")
                                    on:click=move |_| {
                                        let name = name.clone();
                                        state
                                            .act(|b| {
                                                take_catalogue(b, &name);
                                            });
                                    }
                                >
                                    {move || state.words.get().say(Key::PAGE_TAKE_CATALOGUE)}
                                </button>
                            </p>
                        }
                    })
            }}
        </section>
    }
    .into_any()
}
