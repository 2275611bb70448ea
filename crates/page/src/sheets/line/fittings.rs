//! Fittings: kind, station, what decides the loss, rating.

use crate::edits::fittings::{KINDS, add, find_mut, remove};
use crate::inputs::{NumberField, TextLook, picker, text_field};
use crate::parts::figures::{figure_name, plain_figure};
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, capital};
use workbook::book::{FittingEntry, FittingKind, Id};
use workbook::field::fitting_fields;
use workbook::working::FigureKey;
use workbook::{Book, Field};

fn find(book: &Book, id: Id) -> Option<&FittingEntry> {
    book.line.fittings.iter().find(|f| f.id == id)
}

/// All of them, with a button for another.
pub(super) fn fittings() -> AnyView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.fittings.iter().map(|f| f.id).collect::<Vec<Id>>())
    });
    // What is added from now on opens by itself; the rest are one line each.
    let opens = StoredValue::new(false);
    let add_one = move |_| {
        opens.set_value(true);
        // The first is the entrance, at the head of the line; then mostly bends.
        let first = state.book.with_untracked(|b| b.line.fittings.is_empty());
        let station = state
            .station
            .get_untracked()
            .filter(|_| !first)
            .or_else(|| {
                state
                    .book
                    .with_untracked(|b| b.line.stations.first().map(|s| s.id))
            });
        if let Some(station) = station {
            state.act(|b| {
                let kind = if first {
                    FittingKind::EntranceSharp
                } else {
                    FittingKind::Bend
                };
                add(b, station, kind);
            });
        }
    };
    view! {
        <Show when=move || ids.with(Vec::is_empty)>
            <p class="quiet">{say(Key::LINE_NO_FITTINGS)}</p>
        </Show>
        <For each=move || ids.get() key=|id| *id children=move |id| one(state, id, opens.get_value())/>
        <div class="buttons">
            <button type="button" class="button" data-test="fitting-add" on:click=add_one>
                {say(Key::DO_ADD_FITTING)}
            </button>
        </div>
    }
    .into_any()
}

fn one(state: State, id: Id, open: bool) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let kind = Memo::new(move |_| {
        state
            .book
            .with(|b| find(b, id).map(|f| f.kind).unwrap_or_default())
    });
    let kinds = Signal::derive(move || {
        let words = state.words.get();
        KINDS
            .iter()
            .map(|k| (format!("{k:?}"), words.name(*k).to_owned()))
            .collect::<Vec<_>>()
    });
    let stations = Signal::derive(move || {
        state.called.with(|all| {
            all.iter()
                .map(|(id, name)| (id.to_string(), name.clone()))
                .collect::<Vec<_>>()
        })
    });
    let station = Signal::derive(move || {
        state
            .book
            .with(|b| find(b, id).map_or_else(String::new, |f| f.at_station.to_string()))
    });
    let fields = move || {
        fitting_fields(kind.get(), id)
            .into_iter()
            .chain([Field::FittingCount(id), Field::FittingRating(id)])
            .map(|f| view! { <NumberField field=f/> })
            .collect_view()
    };
    let k = Signal::derive(move || {
        state
            .findings
            .with(|f| f.working(FigureKey::FittingLoss(id)).map(|w| w.result))
    });
    let named = move || {
        let words = state.words.get();
        state.book.with(|b| capital(&words.about(b).fitting(id)))
    };
    let lost = move || {
        let words = state.words.get();
        k.with(|k| {
            k.as_ref()
                .map_or_else(|_| speak::none(), |k| words.figure(*k))
        })
    };
    view! {
        <details
            class="fold"
            open=open
            data-test=format!("fitting-{id}")
        >
            <summary id=format!("fitting-{id}") data-test=format!("fitting-fold-{id}")>
                <span>{named}</span>
                <span class="num">{lost}</span>
            </summary>
            <fieldset>
            <legend class="visually-hidden">{named}</legend>
            <div class="fields">
                {picker(
                    &format!("fitting-kind-{id}"),
                    Signal::derive(move || say(Key::FIELD_FITTING_KIND)().to_owned()),
                    kinds,
                    Signal::derive(move || format!("{:?}", kind.get())),
                    move |value| {
                        if let Some(kind) = KINDS.into_iter().find(|k| format!("{k:?}") == value) {
                            state
                                .act(|b| {
                                    if let Some(f) = find_mut(b, id) {
                                        f.kind = kind;
                                    }
                                });
                        }
                    },
                )}
                {picker(
                    &format!("fitting-station-{id}"),
                    Signal::derive(move || say(Key::FIELD_FITTING_STATION)().to_owned()),
                    stations,
                    station,
                    move |value| {
                        if let Ok(station) = value.parse() {
                            state
                                .act(|b| {
                                    if let Some(f) = find_mut(b, id) {
                                        f.at_station = station;
                                    }
                                });
                        }
                    },
                )} {fields}
                {text_field(
                    &format!("fitting-{id}-note"),
                    Key::FIELD_FITTING_NOTE,
                    TextLook::default(),
                    move |b| find(b, id).map(|f| f.note.clone()).unwrap_or_default(),
                    move |b, t| {
                        if let Some(f) = find_mut(b, id) {
                            f.note = t;
                        }
                    },
                )}
            </div>
            <dl class="figures">
                {plain_figure(
                    "fitting-loss",
                    move || figure_name(state, FigureKey::FittingLoss(id)),
                    k,
                )}
            </dl>
            <div class="buttons">
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("fitting-delete-{id}")
                    on:click=move |_| {
                        state
                            .act(|b| {
                                remove(b, id);
                            });
                    }
                >
                    {say(Key::DO_DELETE_FITTING)}
                </button>
            </div>
            </fieldset>
        </details>
    }
    .into_any()
}
