//! One of many, in a list that opens.

use crate::gate::gate;
use leptos::prelude::*;

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
