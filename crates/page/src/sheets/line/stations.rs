//! The table of stations. Enter goes from distance to level to the next
//! station, and adds one at the foot.

use crate::edits::{fittings, stations, stretches};
use crate::inputs::NumberCell;
use crate::inputs::typing::{next_unit, unit_of};
use crate::platform::{frame, place};
use crate::slug;
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, text};
use workbook::book::{FittingKind, Id};
use workbook::units::Kind;
use workbook::{Book, Entry, Field};

/// Which of the two numbers of a station.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Side {
    Distance,
    Level,
}

impl Side {
    fn field(self, id: Id) -> Field {
        match self {
            Side::Distance => Field::StationDistance(id),
            Side::Level => Field::StationLevel(id),
        }
    }

    fn kind(self) -> Kind {
        match self {
            Side::Distance => Kind::Distance,
            Side::Level => Kind::Level,
        }
    }
}

/// The unit of a column: that of its first entry with one of its own, or the
/// screen's.
fn column_unit(state: State, side: Side) -> &'static str {
    let system = state.words.get().units;
    state.book.with(|b| {
        let first = b
            .line
            .stations
            .iter()
            .filter_map(|s| b.entry(side.field(s.id)))
            .find(|e| !e.is_empty());
        unit_of(first.unwrap_or(&Entry::default()), side.kind(), system)
    })
}

/// Reads every entry of a column in the next unit.
fn turn_column(state: State, side: Side, now: &str) {
    let next = next_unit(side.kind(), now);
    let mark = state.words.get_untracked().mark;
    state.act(move |b| {
        let ids: Vec<Id> = b.line.stations.iter().map(|s| s.id).collect();
        for id in ids {
            if let Some(e) = b.entry_mut(side.field(id)) {
                *e = Entry::typed(&e.text.clone(), next, side.kind(), mark);
            }
        }
    });
}

/// Where Enter leads from here; none at the foot of the line.
fn after(book: &Book, id: Id, side: Side) -> Option<(Id, Side)> {
    match side {
        Side::Distance => Some((id, Side::Level)),
        Side::Level => {
            let place = book.line.stations.iter().position(|s| s.id == id)?;
            let next = book.line.stations.get(place + 1)?;
            Some((next.id, Side::Distance))
        }
    }
}

fn focus(field: Field) {
    let id = format!("field-{}", slug::field(field));
    // A row that was just added draws itself first.
    if !place::focus(&id) {
        frame::after(30, move || {
            place::focus(&id);
        });
    }
}

fn enter(state: State, id: Id, side: Side) {
    let next = state.book.with_untracked(|b| after(b, id, side));
    match next {
        Some((id, side)) => focus(side.field(id)),
        None => add(state),
    }
}

/// Adds a station at the foot and puts the cursor in it.
fn add(state: State) {
    let mut added = None;
    state.act(|b| added = Some(stations::add(b)));
    if let Some(id) = added {
        focus(Field::StationDistance(id));
    }
}

/// The table with its tools.
pub(super) fn stations() -> AnyView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stations.iter().map(|s| s.id).collect::<Vec<Id>>())
    });
    let open = RwSignal::new(None);
    let distance_unit = Memo::new(move |_| column_unit(state, Side::Distance));
    let level_unit = Memo::new(move |_| column_unit(state, Side::Level));
    let unit_button = move |side: Side, unit: Memo<&'static str>| {
        let test = match side {
            Side::Distance => "stations-distance-unit",
            Side::Level => "stations-level-unit",
        };
        view! {
            <button
                type="button"
                class="field-unit"
                data-test=test
                aria-label=move || text::do_unit(state.words.get(), unit.get())
                on:click=move |_| turn_column(state, side, unit.get_untracked())
            >
                {move || unit.get()}
            </button>
        }
    };
    view! {
        <p class="quiet">
            {move || text::line_station_count(state.words.get(), ids.with(Vec::len))}
        </p>
        <table class="table table-entry" data-test="station-table">
            <thead>
                <tr>
                    <th scope="col">{say(Key::FIELD_STATION_NAME)}</th>
                    <th scope="col">
                        {say(Key::FIELD_STATION_DISTANCE)} " "
                        {unit_button(Side::Distance, distance_unit)}
                    </th>
                    <th scope="col">
                        {say(Key::FIELD_STATION_LEVEL)} " "
                        {unit_button(Side::Level, level_unit)}
                    </th>
                </tr>
            </thead>
            <tbody>
                <For
                    each=move || ids.get()
                    key=|id| *id
                    children=move |id| row(state, id, open, (distance_unit, level_unit))
                />
            </tbody>
        </table>
        <div class="buttons">
            <button
                type="button"
                class="button"
                data-test="station-add"
                on:click=move |_| add(state)
            >
                {say(Key::DO_ADD_STATION)}
            </button>
        </div>
    }
    .into_any()
}

fn row(
    state: State,
    id: Id,
    open: RwSignal<Option<Id>>,
    (distance_unit, level_unit): (Memo<&'static str>, Memo<&'static str>),
) -> AnyView {
    let is_open = Memo::new(move |_| open.get() == Some(id));
    let number = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stations.iter().position(|s| s.id == id))
            .map_or(0, |p| p + 1)
    });
    let name = Memo::new(move |_| {
        state.book.with(|b| {
            b.line
                .stations
                .iter()
                .find(|s| s.id == id)
                .map(|s| s.name.clone())
                .unwrap_or_default()
        })
    });
    let chosen = move || state.station.get() == Some(id);
    let cell = move |side: Side, unit: Memo<&'static str>, label: Key| {
        let called = Signal::derive(move || {
            let words = state.words.get();
            let place = state.book.with(|b| speak::station(words, b, id));
            text::field_at(words, words.say(label), &place)
        });
        view! {
            <td>
                <NumberCell
                    field=side.field(id)
                    name=called
                    column_unit=unit
                    next=Callback::new(move |()| enter(state, id, side))
                    on_enter=Callback::new(move |()| state.station.set(Some(id)))
                />
            </td>
        }
    };
    view! {
        <tr class:chosen=chosen data-test=format!("station-{id}")>
            <th scope="row">
                <button
                    type="button"
                    class="station-pick"
                    data-test=format!("station-pick-{id}")
                    aria-expanded=move || if is_open.get() { "true" } else { "false" }
                    on:click=move |_| {
                        state.station.set(Some(id));
                        open.set(if is_open.get_untracked() { None } else { Some(id) });
                    }
                >
                    <span class="station-number">{number}</span>
                    " "
                    <span>{name}</span>
                </button>
            </th>
            {cell(Side::Distance, distance_unit, Key::FIELD_STATION_DISTANCE)}
            {cell(Side::Level, level_unit, Key::FIELD_STATION_LEVEL)}
        </tr>
        <Show when=move || is_open.get()>
            <tr>
                <td colspan="3">{tools(state, id)}</td>
            </tr>
        </Show>
    }
    .into_any()
}

/// What can be done with the selected station.
fn tools(state: State, id: Id) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let tool = move |test: &'static str, key: Key, act: Callback<()>| {
        view! {
            <button
                type="button"
                class="button-quiet"
                data-test=test
                on:mousedown=|e| e.prevent_default()
                on:click=move |_| act.run(())
            >
                {say(key)}
            </button>
        }
    };
    let insert = move |below: bool| {
        Callback::new(move |()| {
            let mut added = None;
            state.act(|b| {
                added = if below {
                    stations::insert_after(b, id)
                } else {
                    stations::insert_before(b, id)
                };
            });
            if let Some(id) = added {
                focus(Field::StationDistance(id));
            }
        })
    };
    let delete = Callback::new(move |()| {
        let mut gone = false;
        state.act(|b| gone = stations::remove(b, id));
        if gone {
            state.station.set(None);
        }
    });
    let split = Callback::new(move |()| {
        let mut made = None;
        state.act(|b| made = stretches::split_at(b, id));
        if made.is_some() {
            state.stretch.set(made);
        }
    });
    let fit = Callback::new(move |()| {
        let mut made = None;
        state.act(|b| made = fittings::add(b, id, FittingKind::Bend));
        if let Some(id) = made {
            frame::after(60, move || {
                place::focus(&format!("fitting-{id}"));
            });
        }
    });
    let may_split = move || state.book.with(|b| stretches::may_split_at(b, id));
    let may_delete = move || state.book.with(|b| b.line.stations.len() > 2);
    view! {
        <div class="menu" role="group" data-test="station-tools" aria-labelledby="tools-name">
            <p>
                <strong id="tools-name">
                    {move || {
                        let words = state.words.get();
                        state.book.with(|b| speak::station(words, b, id))
                    }}
                </strong>
            </p>
            {crate::inputs::text_field(
                &format!("station-{id}-name"),
                Key::PAGE_NAME,
                crate::inputs::TextLook::default(),
                move |b| {
                    b.line
                        .stations
                        .iter()
                        .find(|s| s.id == id)
                        .map(|s| s.name.clone())
                        .unwrap_or_default()
                },
                move |b, t| {
                    if let Some(s) = b.line.stations.iter_mut().find(|s| s.id == id) {
                        s.name = t;
                    }
                },
            )}
            <div class="buttons">
                {tool("station-above", Key::DO_INSERT_ABOVE, insert(false))}
                {tool("station-below", Key::PAGE_INSERT_BELOW, insert(true))}
                <Show when=may_split>{tool("station-split", Key::DO_ADD_STRETCH, split)}</Show>
                {tool("station-fitting", Key::DO_ADD_FITTING, fit)}
                <Show when=may_delete>
                    {tool("station-delete", Key::PAGE_DELETE_STATION, delete)}
                </Show>
            </div>
        </div>
    }
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn enter_leads_down_the_line_and_ends_at_the_foot() {
        let book = Book::new("k");
        assert_eq!(after(&book, 1, Side::Distance), Some((1, Side::Level)));
        assert_eq!(after(&book, 1, Side::Level), Some((2, Side::Distance)));
        assert_eq!(after(&book, 2, Side::Level), None);
    }
}
