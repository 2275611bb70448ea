//! Stretches: where each begins, how it is laid.

use crate::edits::stretches;
use crate::inputs::{NumberField, choice, picker};
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::Key;
use workbook::Field;
use workbook::book::{Id, Laying};
use workbook::caution::Sheet;

const LAYINGS: [(Laying, &str, Key); 3] = [
    (Laying::Buried, "buried", Key::LAYING_BURIED),
    (Laying::OnGround, "ground", Key::LAYING_ON_GROUND),
    (Laying::OnSupports, "supports", Key::LAYING_ON_SUPPORTS),
];

/// All of them.
pub(super) fn stretches() -> AnyView {
    let state = state();
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stretches.iter().map(|s| s.id).collect::<Vec<Id>>())
    });
    view! {
        <p class="quiet">{move || state.words.get().say(Key::PAGE_HOW_TO_SPLIT)}</p>
        <For each=move || ids.get() key=|id| *id children=move |id| one(state, id)/>
    }
    .into_any()
}

fn one(state: State, id: Id) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let laying = Memo::new(move |_| {
        state.book.with(|b| {
            b.line
                .stretches
                .iter()
                .find(|s| s.id == id)
                .map_or(Laying::Buried, |s| s.laying)
        })
    });
    let starts = Signal::derive(move || {
        let starts = state.book.with(|b| stretches::starts_for(b, id));
        state.called.with(|all| {
            // Both in the order of the line.
            let mut starts = starts.iter().peekable();
            all.iter()
                .filter(|(id, _)| starts.next_if_eq(&id).is_some())
                .map(|(id, name)| (id.to_string(), name.clone()))
                .collect::<Vec<_>>()
        })
    });
    let start = Signal::derive(move || {
        state.book.with(|b| {
            b.line
                .stretches
                .iter()
                .find(|s| s.id == id)
                .map_or_else(String::new, |s| s.from_station.to_string())
        })
    });
    let is_chosen = move || state.stretch.get() == Some(id);
    let many = move || state.book.with(|b| b.line.stretches.len() > 1);
    let named = move || {
        let words = state.words.get();
        let book = state.book.get();
        speak::stretch(words, &book, &state.findings.get(), id)
    };
    let pipe = move || {
        let words = state.words.get();
        state.findings.with(|f| {
            f.resolved
                .stretches
                .iter()
                .find(|s| s.id == id)
                .and_then(|s| s.pipe.as_ref().ok())
                .map_or_else(
                    || words.say(Key::PAGE_NO_PIPE).to_owned(),
                    |p| p.designation.clone(),
                )
        })
    };
    view! {
        <fieldset
            class="sheet-part"
            data-test=format!("line-stretch-{id}")
        >
            <legend>
                <button
                    type="button"
                    class="pick-head"
                    data-test=format!("line-stretch-pick-{id}")
                    aria-pressed=move || if is_chosen() { "true" } else { "false" }
                    on:click=move |_| {
                        state.stretch.set(if is_chosen() { None } else { Some(id) });
                    }
                >
                    <strong>{named}</strong>
                </button>
            </legend>
            <div class="fields">
                {picker(
                    &format!("stretch-start-{id}"),
                    Signal::derive(move || say(Key::LINE_STRETCHES_FROM)().to_owned()),
                    starts,
                    start,
                    move |value| {
                        if let Ok(station) = value.parse() {
                            state
                                .act(|b| {
                                    stretches::start_at(b, id, station);
                                });
                        }
                    },
                )}
                {choice(
                    &format!("laying-{id}"),
                    Key::FIELD_LAYING,
                    &LAYINGS,
                    move |b| {
                        b.line
                            .stretches
                            .iter()
                            .find(|s| s.id == id)
                            .map_or(Laying::Buried, |s| s.laying)
                    },
                    move |b, v| {
                        if let Some(s) = b.line.stretches.iter_mut().find(|s| s.id == id) {
                            s.laying = v;
                        }
                    },
                )}
                <Show when=move || laying.get() == Laying::Buried>
                    <NumberField field=Field::StretchCover(id)/>
                </Show>
            </div>
            <div class="buttons">
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("stretch-to-pipe-{id}")
                    on:click=move |_| {
                        state.stretch.set(Some(id));
                        state.go(Sheet::Pipe);
                    }
                >
                    {pipe}
                </button>
                <Show when=many>
                    <button
                        type="button"
                        class="button-quiet"
                        data-test=format!("stretch-delete-{id}")
                        on:click=move |_| {
                            state
                                .act(|b| {
                                    stretches::remove(b, id);
                                });
                        }
                    >
                        {say(Key::PAGE_DELETE_STRETCH)}
                    </button>
                </Show>
            </div>
        </fieldset>
    }
    .into_any()
}
