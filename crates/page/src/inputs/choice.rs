//! One of a few, all in sight.

use crate::state::{State, state};
use leptos::prelude::*;
use words::Key;
use workbook::Book;

/// An option: its value, its name in `data-test`, its words.
pub type OptionOf<T> = (T, &'static str, Key);

/// A choice of the book, as a line of segments. `slug` names it in `id` and
/// `data-test`: each option is `<slug>-<option>`.
pub fn choice<T>(
    slug: &str,
    label: Key,
    options: &[OptionOf<T>],
    get: impl Fn(&Book) -> T + Copy + Send + Sync + 'static,
    set: impl Fn(&mut Book, T) + Copy + Send + Sync + 'static,
) -> AnyView
where
    T: Copy + PartialEq + Send + Sync + 'static,
{
    let state = state();
    let now = Memo::new(move |_| state.book.with(|b| get(b)));
    choice_of(state, slug, label, options, now.into(), move |value| {
        state.act(move |book| set(book, value));
    })
}

/// The same of anything: what is chosen now, and what to do with a choice.
pub fn choice_of<T>(
    state: State,
    slug: &str,
    label: Key,
    options: &[OptionOf<T>],
    now: Signal<T>,
    take: impl Fn(T) + Copy + 'static,
) -> AnyView
where
    T: Copy + PartialEq + Send + Sync + 'static,
{
    let name = slug.to_owned();
    let rows: Vec<AnyView> = options
        .iter()
        .map(|(value, option, key)| {
            let (value, key) = (*value, *key);
            view! {
                <label class="choice-option">
                    <input
                        type="radio"
                        name=name.clone()
                        data-test=format!("{name}-{option}")
                        prop:checked=move || now.get() == value
                        on:change=move |_| take(value)
                    />
                    <span>{move || state.words.get().say(key)}</span>
                </label>
            }
            .into_any()
        })
        .collect();
    let label_id = format!("{slug}-label");
    view! {
        <div class="field field-wide">
            <span class="field-label" id=label_id.clone()>
                {move || state.words.get().say(label)}
            </span>
            <div class="choice" role="radiogroup" aria-labelledby=label_id>
                {rows}
            </div>
        </div>
    }
    .into_any()
}
