//! The one component for every number of the book.
//!
//! The text stands in the book as typed, usable or not, and is read at each
//! key, so that every figure follows. Escape puts back what stood there when
//! the field was entered.

use super::typing::{add_doubt, change_sign, next_unit, unit_of, worth_showing};
use crate::platform::place;
use crate::slug;
use crate::state::{State, state};
use crate::station_rows::{StationRow, station_of};
use leptos::ev;
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::figure::{Place, Trouble};
use workbook::{Entry, Field, Measure};

/// What a field shows and does, label apart.
#[derive(Debug, Clone, Copy)]
struct Handle {
    state: State,
    words: Signal<Words>,
    field: Field,
    entry: Memo<Entry>,
    unit: Memo<&'static str>,
    trouble: Memo<Option<String>>,
    read_as: Memo<Option<String>>,
    focused: RwSignal<bool>,
    before: StoredValue<Entry>,
}

impl Handle {
    fn new(field: Field) -> Handle {
        let state = state();
        let words = state.words_of(field);
        let entry = state.entry(field);
        let kind = field.kind();
        let unit = Memo::new(move |_| {
            let system = words.get().units;
            entry.with(|e| unit_of(e, kind, system))
        });
        let row = station_of(field).map(|id| state.station_row(id));
        let trouble =
            Memo::new(move |_| trouble_of(state, words.get(), field, entry, row.as_ref()));
        let read_as = Memo::new(move |_| {
            let words = words.get();
            let reading = entry.with(|e| worth_showing(&e.text, kind, unit.get(), words.mark))?;
            let value = words.full(Measure::new(reading.value, kind));
            let shown = match reading.plus_minus {
                Some(doubt) if field.kind() != workbook::units::Kind::Temperature => {
                    words.doubtful(Measure::new(reading.value, kind), doubt)
                }
                _ => value,
            };
            Some(text::hint_reads_as(words, &shown))
        });
        Handle {
            state,
            words,
            field,
            entry,
            unit,
            trouble,
            read_as,
            focused: RwSignal::new(false),
            before: StoredValue::new(Entry::default()),
        }
    }

    fn id(self) -> String {
        format!("field-{}", slug::field(self.field))
    }

    fn take(self, text: &str) {
        self.state
            .type_entry(self.field, text, self.unit.get_untracked());
    }

    fn enter(self) {
        self.before.set_value(self.entry.get_untracked());
        self.focused.set(true);
        self.state.close_step();
    }

    fn leave(self) {
        self.focused.set(false);
        self.state.close_step();
    }

    fn put_back(self) {
        let before = self.before.get_value();
        let field = self.field;
        self.state
            .edit(crate::history::Touch::Field(field), move |book| {
                if let Some(entry) = book.entry_mut(field) {
                    *entry = before;
                }
            });
    }

    fn turn_unit(self) {
        let next = next_unit(self.field.kind(), self.unit.get_untracked());
        let text = self.entry.with_untracked(|e| e.text.clone());
        // A step of its own, apart from the typing before and after.
        self.state.close_step();
        self.state.type_entry(self.field, &text, next);
        self.state.close_step();
    }

    fn with_text(self, change: fn(&str) -> String) {
        let text = self.entry.with_untracked(|e| change(&e.text));
        self.take(&text);
    }

    fn input(self, name: Option<Signal<String>>, next: Option<Callback<()>>) -> impl IntoView {
        let id = self.id();
        let described = format!("{id}-trouble {id}-read {id}-hint");
        let first = match self.field {
            Field::StationDistance(id) => Some(self.state.station_row(id)),
            _ => None,
        };
        let hint = move || {
            let words = self.words.get();
            let stands_in = match &first {
                // Distances are counted from the first station.
                Some(row) => row.with(|r| r.place == Some(0)).then_some(0.0),
                None => self.field.preset().map(|p| p.value),
            };
            stands_in.map(|x| words.value(Measure::new(x, self.field.kind())))
        };
        view! {
            <input
                type="text"
                class="field-input"
                inputmode="decimal"
                enterkeyhint=if next.is_some() { "next" } else { "done" }
                autocomplete="off"
                autocapitalize="off"
                spellcheck="false"
                id=id.clone()
                data-test=id
                aria-label=move || name.map(|n| n.get())
                aria-invalid=move || self.trouble.with(Option::is_some).then_some("true")
                aria-describedby=described
                placeholder=hint
                prop:value=move || self.entry.with(|e| e.text.clone())
                on:input=move |e| self.take(&event_target_value(&e))
                on:focus=move |_| self.enter()
                on:blur=move |_| self.leave()
                on:keydown=move |e: ev::KeyboardEvent| match e.key().as_str() {
                    "Escape" => {
                        e.prevent_default();
                        e.stop_propagation();
                        self.put_back();
                    }
                    "Enter" => {
                        e.prevent_default();
                        match next {
                            Some(next) => next.run(()),
                            None => place::blur(),
                        }
                    }
                    _ => {}
                }
            />
        }
    }

    fn minus(self) -> impl IntoView {
        self.field.kind().may_be_negative().then(|| {
            view! {
                <button
                    type="button"
                    class="field-minus"
                    aria-label=move || self.words.get().say(Key::DO_MINUS)
                    data-test=format!("{}-minus", self.id())
                    on:mousedown=|e| e.prevent_default()
                    on:click=move |_| self.with_text(change_sign)
                >
                    "\u{2212}"
                </button>
            }
        })
    }

    fn unit(self) -> impl IntoView {
        let kind = self.field.kind();
        match kind.units() {
            [only] if only.symbol.is_empty() => None,
            [only] => Some(view! { <span class="field-unit">{only.symbol}</span> }.into_any()),
            _ => Some(
                view! {
                    <button
                        type="button"
                        class="field-unit"
                        aria-label=move || text::do_unit(self.words.get(), self.unit.get())
                        data-test=format!("{}-unit", self.id())
                        on:mousedown=|e| e.prevent_default()
                        on:click=move |_| self.turn_unit()
                    >
                        {move || self.unit.get()}
                    </button>
                }
                .into_any(),
            ),
        }
    }

    /// What stands below the line; in a table only what is out of the
    /// ordinary.
    fn below(self, brief: bool) -> impl IntoView {
        let id = self.id();
        let preset = move || {
            let words = self.words.get();
            if brief {
                None
            } else if self.focused.get() {
                Some(words.field_hint(self.field))
            } else if self.entry.with(Entry::is_empty) {
                words.field_preset(self.field)
            } else {
                None
            }
            .unwrap_or_default()
        };
        view! {
            <p class="field-read-as" id=format!("{id}-read")>
                {move || self.read_as.get().unwrap_or_default()}
            </p>
            <p class="field-hint" id=format!("{id}-hint")>{preset}</p>
            <p
                class="field-trouble"
                id=format!("{id}-trouble")
                data-test=format!("{id}-trouble")
            >
                {move || self.trouble.get().unwrap_or_default()}
            </p>
        }
    }
}

/// What is wrong with an entry, in words: what was typed, or else what it does
/// to the rest.
fn trouble_of(
    state: State,
    words: Words,
    field: Field,
    entry: Memo<Entry>,
    row: Option<&ArcRwSignal<StationRow>>,
) -> Option<String> {
    let own = entry.with(|e| field.value_of(e).err());
    if let Some(why) = own {
        return Some(words.entry_trouble(field, &why));
    }
    let of_rest = |all: &[Trouble]| {
        all.iter()
            .find(|t| !matches!(t, Trouble::Entry(..)) && shown_at(t, field))
            .cloned()
    };
    let found = match row {
        Some(row) => row.with(|r| of_rest(&r.troubles)),
        None => state.troubles.with(|all| of_rest(all)),
    }?;
    Some(state.book.with(|b| words.about(b).trouble(&found)))
}

/// Whether a trouble is said beside this field.
fn shown_at(trouble: &Trouble, field: Field) -> bool {
    match trouble.place() {
        Place::Field(at) => at == field,
        Place::Station(id) => field == Field::StationDistance(id),
        _ => false,
    }
}

/// A number with its label above it.
#[component]
pub fn NumberField(
    /// The entry.
    field: Field,
    /// A label of its own, where the entry's usual name will not do.
    #[prop(optional)]
    label: Option<Key>,
    /// Whether a key for ± stands by.
    #[prop(optional)]
    doubt: bool,
    /// Whether its hint is left out, as in a row of many.
    #[prop(optional)]
    brief: bool,
    /// Where Enter leads, if on.
    #[prop(optional)]
    next: Option<Callback<()>>,
) -> impl IntoView {
    let handle = Handle::new(field);
    let state = handle.state;
    let id = handle.id();
    let name = move || match label {
        Some(key) => state.words.get().say(key).to_owned(),
        None => state.words.get().field_label(field).to_owned(),
    };
    let doubt = doubt.then(|| {
        view! {
            <button
                type="button"
                class="field-minus"
                aria-label=move || state.words.get().say(Key::PAGE_ADD_DOUBT)
                data-test=format!("{}-doubt", handle.id())
                on:mousedown=|e| e.prevent_default()
                on:click=move |_| {
                    handle.with_text(add_doubt);
                    place::focus_end(&handle.id());
                }
            >
                "±"
            </button>
        }
    });
    view! {
        <div class="field">
            <label class="field-label" for=id>{name}</label>
            <div class="field-line">
                {handle.minus()} {handle.input(None, next)} {doubt} {handle.unit()}
            </div>
            {handle.below(brief)}
        </div>
    }
    .into_any()
}

/// A number in a cell of a table whose head names it; the unit is shown where
/// it is another than the column's.
#[component]
pub fn NumberCell(
    /// The entry.
    field: Field,
    /// What it is called when read aloud.
    #[prop(into)]
    name: Signal<String>,
    /// The unit the head of the column shows.
    #[prop(into)]
    column_unit: Signal<&'static str>,
    /// Where Enter leads.
    next: Callback<()>,
    /// Runs when the cell is entered.
    on_enter: Callback<()>,
) -> impl IntoView {
    let handle = Handle::new(field);
    let other = move || {
        let unit = handle.unit.get();
        (unit != column_unit.get() && !handle.entry.with(Entry::is_empty)).then_some(unit)
    };
    view! {
        <div class="field-line" on:focusin=move |_| on_enter.run(())>
            {handle.minus()} {handle.input(Some(name), Some(next))}
            {move || other().map(|u| view! { <span class="field-unit">{u}</span> })}
        </div>
        {handle.below(true)}
    }
    .into_any()
}
