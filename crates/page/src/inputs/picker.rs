//! One of many, in a list that opens.

use super::choice::OptionOf;
use crate::gate::gate;
use crate::state::state;
use leptos::prelude::*;
use words::Key;
use workbook::Book;

/// A list to pick from: each option a value and its words. `id` is its `id` and
/// `data-test`.
pub fn picker(
    id: &str,
    label: Signal<String>,
    options: Signal<Vec<(String, String)>>,
    now: Signal<String>,
    take: impl Fn(String) + 'static,
) -> AnyView {
    // Drawn anew only where the list itself changes, not with every key.
    let options = Memo::new(move |_| options.get());
    // Every option of a long list asks for it.
    let now = gate(move || now.get());
    let options_view = move || {
        options
            .get()
            .into_iter()
            .map(|(value, words)| {
                let chosen = value.clone();
                view! {
                    <option value=value prop:selected=move || now.get() == chosen>
                        {words}
                    </option>
                }
            })
            .collect_view()
    };
    view! {
        <div class="field field-wide">
            <label class="field-label" for=id.to_owned()>{move || label.get()}</label>
            <div class="field-line">
                <select
                    class="field-input"
                    id=id.to_owned()
                    data-test=id.to_owned()
                    on:change=move |e| take(event_target_value(&e))
                >
                    {options_view}
                </select>
            </div>
        </div>
    }
    .into_any()
}

/// A choice of the book whose options are too long to stand side by side: one
/// of a few, in a list. `slug` is its `id` and `data-test`, each option's name
/// its value.
pub fn choice_in_list<T>(
    slug: &'static str,
    label: Key,
    options: &'static [OptionOf<T>],
    get: impl Fn(&Book) -> T + Copy + Send + Sync + 'static,
    set: impl Fn(&mut Book, T) + Copy + Send + Sync + 'static,
) -> AnyView
where
    T: Copy + PartialEq + Send + Sync + 'static,
{
    let state = state();
    let named = Signal::derive(move || state.words.get().say(label).to_owned());
    let all = Signal::derive(move || {
        let words = state.words.get();
        options
            .iter()
            .map(|(_, name, key)| ((*name).to_owned(), words.say(*key).to_owned()))
            .collect::<Vec<_>>()
    });
    let now = Signal::derive(move || {
        let value = state.book.with(|b| get(b));
        let found = options.iter().find(|o| o.0 == value);
        found.map_or("", |o| o.1).to_owned()
    });
    picker(slug, named, all, now, move |name| {
        if let Some((value, ..)) = options.iter().find(|o| o.1 == name) {
            state.act(move |book| set(book, *value));
        }
    })
}
