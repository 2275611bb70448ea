//! The sheets, each one view of the book.

pub mod jets;
pub mod line;
pub mod pipe;
pub mod print;
pub mod stream;
pub mod surge;

use crate::state::state;
use leptos::prelude::*;
use words::Key;

/// Head of a sheet: its name, and what it is about.
pub fn head(name: Key, about: Key) -> AnyView {
    let state = state();
    view! {
        <h2 class="sheet-head">
            <strong>{move || state.words.get().say(name)}</strong>
            " "
            {move || state.words.get().say(about)}
        </h2>
    }
    .into_any()
}

/// A part of a sheet under a head of its own. `slug` makes the name of its head.
pub fn part(slug: &'static str, title: Key, body: AnyView) -> AnyView {
    let state = state();
    let head = format!("{slug}-head");
    let labelled = head.clone();
    view! {
        <section class="sheet-part" aria-labelledby=labelled data-test=slug>
            <h3 id=head>{move || state.words.get().say(title)}</h3>
            {body}
        </section>
    }
    .into_any()
}
