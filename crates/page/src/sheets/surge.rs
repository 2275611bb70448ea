//! Surge: how the jets are shut, what else moves the water, and what the line
//! then sees.

mod found;
mod trace;

use crate::edits::valve;
use crate::inputs::{NumberField, choice, choice_in_list};
use crate::parts::cautions::cautions;
use crate::sheets::{head, part};
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, text};
use workbook::book::{ClosingSpeeds, Id, MachineKind, NozzleKind, OpenArea, PipeHeld};
use workbook::caution::Sheet;
use workbook::{Book, Field};

const SPEEDS: [(ClosingSpeeds, &str, Key); 2] = [
    (ClosingSpeeds::One, "one", Key::OPTION_CLOSING_ONE),
    (ClosingSpeeds::Two, "two", Key::OPTION_CLOSING_TWO),
];

const AREAS: [(OpenArea, &str, Key); 4] = [
    (OpenArea::AsNozzle, "nozzle", Key::OPTION_AREA_AS_NOZZLE),
    (OpenArea::Straight, "straight", Key::OPTION_AREA_STRAIGHT),
    (OpenArea::Needle, "needle", Key::OPTION_AREA_NEEDLE),
    (OpenArea::Table, "table", Key::OPTION_AREA_TABLE),
];

const MACHINES: [(MachineKind, &str, Key); 2] = [
    (MachineKind::Impulse, "impulse", Key::OPTION_MACHINE_IMPULSE),
    (
        MachineKind::FlowWithSpeed,
        "flow-with-speed",
        Key::OPTION_MACHINE_FLOW_WITH_SPEED,
    ),
];

const HELD: [(PipeHeld, &str, Key); 3] = [
    (
        PipeHeld::Throughout,
        "throughout",
        Key::OPTION_HELD_THROUGHOUT,
    ),
    (PipeHeld::UpperEnd, "upper-end", Key::OPTION_HELD_UPPER_END),
    (PipeHeld::ExpansionJoints, "joints", Key::OPTION_HELD_JOINTS),
];

const YES_NO: [(bool, &str, Key); 2] = [
    (true, "yes", Key::OPTION_YES),
    (false, "no", Key::OPTION_NO),
];

/// Whether the open area is that of a needle.
fn by_needle(book: &Book) -> bool {
    match book.surge.area {
        OpenArea::Needle => true,
        OpenArea::AsNozzle => book.jets.kind == NozzleKind::Needle,
        OpenArea::Straight | OpenArea::Table => false,
    }
}

/// The sheet.
#[component]
pub fn SurgeSheet() -> impl IntoView {
    let state = state();
    view! {
        {head(Key::SHEET_SURGE, Key::PAGE_ABOUT_SURGE)}
        {part("surge-law", Key::SURGE_ENTRIES, law(state))}
        {part("surge-found", Key::SURGE_FOUND, found::found(state))}
        {part("surge-others", Key::SURGE_OTHERS, others())}
        {part("surge-held", Key::SURGE_HELD, held())}
        {part("surge-allowances", Key::SURGE_ALLOWANCES, allowances(state))}
        {cautions(Sheet::Surge)}
    }
}

fn law(state: State) -> AnyView {
    let two = Memo::new(move |_| state.book.with(|b| b.surge.speeds == ClosingSpeeds::Two));
    let needle = Memo::new(move |_| state.book.with(|b| by_needle(b)));
    let table = Memo::new(move |_| state.book.with(|b| b.surge.area == OpenArea::Table));
    view! {
        <div class="fields">
            {choice(
                "speeds",
                Key::FIELD_CLOSING_SPEEDS,
                &SPEEDS,
                |b| b.surge.speeds,
                |b, v| b.surge.speeds = v,
            )}
            {move || {
                if two.get() {
                    [Field::FastTime, Field::SlowTime, Field::Knee]
                        .map(|field| view! { <NumberField field=field/> })
                        .collect_view()
                        .into_any()
                } else {
                    view! { <NumberField field=Field::ClosingTime/> }.into_any()
                }
            }}
            {choice_in_list(
                "open-area",
                Key::FIELD_OPEN_AREA,
                &AREAS,
                |b| b.surge.area,
                |b, v| b.surge.area = v,
            )}
            <Show when=move || needle.get()>
                <NumberField field=Field::NeedleAngle/>
                <NumberField field=Field::NeedleTravel/>
            </Show>
            <NumberField field=Field::ClosingReserve/>
        </div>
        <Show when=move || table.get()>{valve_table(state)}</Show>
    }
    .into_any()
}

fn valve_table(state: State) -> AnyView {
    let rows = Memo::new(move |_| state.book.with(|b| b.surge.valve.len()));
    let row = move |i: usize| {
        let delete = move || {
            let words = state.words.get();
            text::do_delete_row(words, &words.count(i + 1))
        };
        view! {
            <div class="fields">
                <NumberField field=Field::ValveStroke(i) brief={i > 0}/>
                <NumberField field=Field::ValveOpen(i) brief={i > 0}/>
            </div>
            <div class="buttons">
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("valve-delete-{i}")
                    on:click=move |_| {
                        state
                            .act(|b| {
                                valve::remove(b, i);
                            });
                    }
                >
                    {delete}
                </button>
            </div>
        }
        .into_any()
    };
    view! {
        <fieldset class="sheet-part" data-test="valve-table">
            <legend>
                <strong>{move || state.words.get().say(Key::FIELD_VALVE_TABLE)}</strong>
            </legend>
            {move || (0..rows.get()).map(row).collect_view()}
            <div class="buttons">
                <button
                    type="button"
                    class="button"
                    data-test="valve-add"
                    on:click=move |_| state.act(valve::add)
                >
                    {move || state.words.get().say(Key::DO_ADD_ROW)}
                </button>
            </div>
        </fieldset>
    }
    .into_any()
}

fn others() -> AnyView {
    view! {
        <div class="fields">
            <NumberField field=Field::OpeningTime/>
            <NumberField field=Field::SlamTime/>
            {choice(
                "guard-slam",
                Key::FIELD_GUARD_MAY_SLAM,
                &YES_NO,
                |b| b.surge.guard_may_slam,
                |b, v| b.surge.guard_may_slam = v,
            )}
            {choice(
                "kept-clear",
                Key::FIELD_JETS_KEPT_CLEAR,
                &YES_NO,
                |b| b.surge.jets_kept_clear,
                |b, v| b.surge.jets_kept_clear = v,
            )}
            {choice(
                "deflectors",
                Key::FIELD_DEFLECTORS,
                &YES_NO,
                |b| b.surge.deflectors,
                |b, v| b.surge.deflectors = v,
            )}
            {choice_in_list(
                "machine",
                Key::FIELD_MACHINE,
                &MACHINES,
                |b| b.surge.machine,
                |b, v| b.surge.machine = v,
            )}
        </div>
    }
    .into_any()
}

fn held() -> AnyView {
    view! {
        <div class="fields">
            {choice_in_list(
                "held",
                Key::FIELD_PIPE_HELD,
                &HELD,
                |b| b.surge.held,
                |b, v| b.surge.held = v,
            )}
            {choice(
                "unsteady-friction",
                Key::FIELD_UNSTEADY_FRICTION,
                &YES_NO,
                |b| b.surge.unsteady_friction,
                |b, v| b.surge.unsteady_friction = v,
            )}
            <NumberField field=Field::EntrainedAir/>
        </div>
    }
    .into_any()
}

fn allowances(state: State) -> AnyView {
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.line.stretches.iter().map(|s| s.id).collect::<Vec<Id>>())
    });
    let one = move |id: Id| {
        let named = move || {
            let words = state.words.get();
            let book = state.book.get();
            speak::stretch(words, &book, &state.findings.get(), id)
        };
        view! {
            <div>
                <p class="quiet">{named}</p>
                <NumberField field=Field::SurgeAllowed(id)/>
            </div>
        }
    };
    view! {
        <div class="fields">
            <For each=move || ids.get() key=|id| *id children=one/>
        </div>
    }
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_needle_is_asked_for_where_one_shuts() {
        let mut book = Book::new("k");
        assert!(!by_needle(&book));
        book.jets.kind = NozzleKind::Needle;
        assert!(by_needle(&book));
        book.surge.area = OpenArea::Table;
        assert!(!by_needle(&book));
        book.surge.area = OpenArea::Needle;
        book.jets.kind = NozzleKind::Fixed;
        assert!(by_needle(&book));
    }
}
