//! One line naming the next entry the book needs, and leading to it.

use crate::state::state;
use leptos::prelude::*;

/// The line; nothing where nothing is needed.
#[component]
pub fn NextEntry() -> impl IntoView {
    let state = state();
    let next = Memo::new(move |_| state.findings.with(|f| f.next.clone()));
    move || {
        let next = next.get()?;
        let said = {
            let next = next.clone();
            move || {
                let words = state.words.get();
                state.book.with(|b| words.about(b).next(&next))
            }
        };
        Some(view! {
            <button
                type="button"
                class="next-entry"
                data-test="next"
                on:click=move |_| state.go_to(next.sheet, &next.place)
            >
                <span>{said}</span>
            </button>
        })
    }
}
