//! The table of stations. Enter goes from distance to level to the next
//! station, and adds one at the foot.

use super::survey::{self, WAYS};
use crate::edits::{fittings, stations, stretches};
use crate::gate::gate;
use crate::inputs::typing::{next_unit, unit_of};
use crate::inputs::{NumberCell, NumberField, choice_of, picker};
use crate::platform::{frame, place};
use crate::slug;
use crate::speak;
use crate::state::{State, state};
use crate::station_rows::station_of;
use leptos::prelude::*;
use words::{Key, text};
use workbook::book::{FittingKind, Id, SurveyWay};
use workbook::field::station_fields;
use workbook::resolve::profile::station_entry;
use workbook::units::Kind;
use workbook::{Book, Entry, Field};

/// A column of the table.
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
            .map(|s| station_entry(s, side.field(s.id)))
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
fn after(book: &Book, field: Field) -> Option<Field> {
    let mut all = book
        .line
        .stations
        .iter()
        .enumerate()
        .flat_map(|(i, s)| station_fields(way_at(i, s.way), s.id));
    all.find(|f| *f == field)?;
    all.next()
}

/// The first station has nothing above it to be levelled from.
fn way_at(place: usize, way: SurveyWay) -> SurveyWay {
    if place == 0 { SurveyWay::Level } else { way }
}

/// Rows in the table at once: a phone draws hundreds of them at every key only
/// with a delay that is felt, and a thumb does not find its way among them.
const WINDOW: usize = 50;

/// The windows of a line: first and last place of each, from 0. A last window
/// of a few rows is one with the window before it.
fn windows(count: usize) -> Vec<(usize, usize)> {
    let mut all: Vec<(usize, usize)> = (0..count)
        .step_by(WINDOW)
        .map(|from| (from, (from + WINDOW).min(count) - 1))
        .collect();
    if let [.., before, last] = all.as_mut_slice()
        && last.1 - last.0 < WINDOW / 5
    {
        before.1 = last.1;
        all.pop();
    }
    all
}

/// The window a place is in.
fn window_of(count: usize, place: usize) -> usize {
    windows(count)
        .iter()
        .position(|(from, to)| (*from..=*to).contains(&place))
        .unwrap_or(0)
}

fn focus(state: State, field: Field) {
    // The window follows the station.
    if let Some(id) = station_of(field) {
        state.station.set(Some(id));
    }
    let id = format!("field-{}", slug::field(field));
    // A row that was just added draws itself first.
    if !place::focus(&id) {
        frame::after(30, move || {
            place::focus(&id);
        });
    }
}

fn enter(state: State, field: Field, next_way: RwSignal<Option<SurveyWay>>) {
    match state.book.with_untracked(|b| after(b, field)) {
        Some(field) => focus(state, field),
        None => add(state, next_way),
    }
}

/// Adds a station at the foot and puts the cursor in it.
fn add(state: State, next_way: RwSignal<Option<SurveyWay>>) {
    let mut added = None;
    state.act(|b| {
        let id = stations::add(b);
        if let (Some(way), Some(last)) = (next_way.get_untracked(), b.line.stations.last_mut()) {
            last.way = way;
        }
        added = Some(id);
    });
    if let Some(id) = added {
        focus(state, Field::StationDistance(id));
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
    let window = RwSignal::new(0);
    let shown = Memo::new(move |_| {
        ids.with(|all| {
            windows(all.len())
                .get(window.get())
                .or(windows(all.len()).last())
                .and_then(|(from, to)| all.get(*from..=*to))
                .map(<[Id]>::to_vec)
                .unwrap_or_default()
        })
    });
    // The selected station is always in the window.
    Effect::new(move |_| {
        let Some(id) = state.station.get() else {
            return;
        };
        let place = ids.with(|all| {
            let place = all.iter().position(|i| *i == id)?;
            Some(window_of(all.len(), place))
        });
        if let Some(place) = place.filter(|p| *p != window.get_untracked()) {
            window.set(place);
        }
    });
    let open = RwSignal::new(None);
    let next_way = RwSignal::new(None);
    let way_now = Signal::derive(move || {
        next_way
            .get()
            .unwrap_or_else(|| state.book.with(|b| stations::usual_way(b)))
    });
    let distance_unit = gate(move || column_unit(state, Side::Distance));
    let level_unit = gate(move || column_unit(state, Side::Level));
    let unit_button = move |side: Side, unit: ReadSignal<&'static str>| {
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
        {choice_of(
            state,
            "line-way",
            Key::FIELD_LINE_WAY,
            &WAYS,
            way_now,
            move |way| {
                next_way.set(Some(way));
                state.act(|b| stations::level_by(b, way));
            },
        )}
        <Show when=move || ids.with(|all| windows(all.len()).len() > 1)>
            {window_picker(state, ids, window)}
        </Show>
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
                    each=move || shown.get()
                    key=|id| *id
                    children=move |id| row(state, id, open, next_way, (distance_unit, level_unit))
                />
            </tbody>
        </table>
        <div class="buttons">
            <button
                type="button"
                class="button"
                data-test="station-add"
                on:click=move |_| add(state, next_way)
            >
                {say(Key::DO_ADD_STATION)}
            </button>
            <button
                type="button"
                class="button"
                data-test="import-open"
                on:click=|_| crate::parts::import::open()
            >
                {say(Key::DO_IMPORT)}
            </button>
        </div>
    }
    .into_any()
}

fn row(
    state: State,
    id: Id,
    open: RwSignal<Option<Id>>,
    next_way: RwSignal<Option<SurveyWay>>,
    (distance_unit, level_unit): (ReadSignal<&'static str>, ReadSignal<&'static str>),
) -> AnyView {
    let is_open = Memo::new(move |_| open.get() == Some(id));
    let row = state.station_row(id);
    let number = {
        let row = row.clone();
        Memo::new(move |_| row.with(|r| r.place.map_or(0, |p| p + 1)))
    };
    let name = {
        let row = row.clone();
        Memo::new(move |_| row.with(|r| r.station.name.clone()))
    };
    let chosen = move || state.station.get() == Some(id);
    let way = Memo::new(move |_| row.with(|r| way_at(r.place.unwrap_or_default(), r.station.way)));
    let cell = move |side: Side, unit: ReadSignal<&'static str>, label: Key| {
        let spoken = state.words_of(side.field(id));
        let called = Signal::derive(move || {
            let words = spoken.get();
            let place = words::capital(&name.with(|name| words.station(number.get(), name)));
            text::field_at(words, words.say(label), &place)
        });
        let field = side.field(id);
        view! {
            <NumberCell
                field=field
                name=called
                column_unit=unit
                next=Callback::new(move |()| enter(state, field, next_way))
                on_enter=Callback::new(move |()| state.station.set(Some(id)))
            />
        }
    };
    let level = Memo::new(move |_| level(state, id, way.get()));
    let levelled = move || match way.get() {
        SurveyWay::Level => cell(Side::Level, level_unit, Key::FIELD_STATION_LEVEL).into_any(),
        _ => view! { <p class="carried" data-test=format!("station-level-{id}")>{level}</p> }
            .into_any(),
    };
    let carried_row = move || match way.get() {
        SurveyWay::Level => None,
        way => Some(carried(state, id, way, next_way, chosen)),
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
            <td>{cell(Side::Distance, distance_unit, Key::FIELD_STATION_DISTANCE)}</td>
            <td>{levelled}</td>
        </tr>
        {carried_row}
        <Show when=move || is_open.get()>
            <tr>
                <td colspan="3">{tools(state, id)}</td>
            </tr>
        </Show>
    }
    .into_any()
}

/// Which part of a long line the table shows.
fn window_picker(state: State, ids: Memo<Vec<Id>>, window: RwSignal<usize>) -> AnyView {
    let parts = Signal::derive(move || {
        let words = state.words.get();
        windows(ids.with(Vec::len))
            .iter()
            .enumerate()
            .map(|(i, (from, to))| {
                let (from, to) = (words.count(from + 1), words.count(to + 1));
                (i.to_string(), text::place_from_to(words, &from, &to))
            })
            .collect::<Vec<_>>()
    });
    picker(
        "station-window",
        Signal::derive(move || state.words.get().say(Key::LINE_WINDOW).to_owned()),
        parts,
        Signal::derive(move || window.get().to_string()),
        move |value| {
            if let Ok(place) = value.parse() {
                window.set(place);
            }
        },
    )
}

/// The level that comes of sights or readings; nothing where it was entered.
fn level(state: State, id: Id, way: SurveyWay) -> String {
    if way == SurveyWay::Level {
        return String::new();
    }
    let words = state.words.get();
    state.findings.with(|f| {
        f.resolved
            .profile
            .station(id)
            .map_or_else(speak::none, |at| words.figure(at.level))
    })
}

/// The sights or readings that level a station from the one before, in a row
/// of their own.
fn carried(
    state: State,
    id: Id,
    way: SurveyWay,
    next_way: RwSignal<Option<SurveyWay>>,
    chosen: impl Fn() -> bool + Copy + Send + Sync + 'static,
) -> AnyView {
    let fields = station_fields(way, id)
        .into_iter()
        .filter(|f| !matches!(f, Field::StationDistance(_)))
        .map(|field| {
            view! {
                <NumberField
                    field=field
                    brief=true
                    next=Callback::new(move |()| enter(state, field, next_way))
                />
            }
        })
        .collect_view();
    view! {
        <tr class="carried-row" class:chosen=chosen>
            <td colspan="3">
                <div class="levelled" on:focusin=move |_| state.station.set(Some(id))>
                    {fields}
                </div>
            </td>
        </tr>
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
                focus(state, Field::StationDistance(id));
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
            {survey::of_station(state, id)}
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
        let follows = |field| after(&book, field);
        assert_eq!(
            follows(Field::StationDistance(1)),
            Some(Field::StationLevel(1))
        );
        assert_eq!(
            follows(Field::StationLevel(1)),
            Some(Field::StationDistance(2))
        );
        assert_eq!(follows(Field::StationLevel(2)), None);
    }

    #[test]
    fn a_long_line_is_shown_in_parts_that_hold_every_station_once() {
        assert_eq!(windows(0), vec![]);
        assert_eq!(windows(50), vec![(0, 49)]);
        // A short rest is not a part of its own.
        assert_eq!(windows(57), vec![(0, 56)]);
        assert_eq!(windows(75), vec![(0, 49), (50, 74)]);
        for count in 1..300 {
            let all: Vec<usize> = windows(count)
                .into_iter()
                .flat_map(|(from, to)| from..=to)
                .collect();
            assert_eq!(all, (0..count).collect::<Vec<_>>());
            for place in 0..count {
                let (from, to) = windows(count)[window_of(count, place)];
                assert!((from..=to).contains(&place));
            }
        }
    }

    #[test]
    fn enter_leads_through_the_sights_of_a_leg() {
        let mut book = Book::new("k");
        for station in &mut book.line.stations {
            station.way = SurveyWay::Angle;
        }
        // The first station has a level all the same.
        assert_eq!(
            after(&book, Field::StationLevel(1)),
            Some(Field::StationDistance(2))
        );
        assert_eq!(
            after(&book, Field::StationDistance(2)),
            Some(Field::StationForeSight(2))
        );
        assert_eq!(
            after(&book, Field::StationForeSight(2)),
            Some(Field::StationBackSight(2))
        );
        assert_eq!(after(&book, Field::StationBackSight(2)), None);
    }
}
