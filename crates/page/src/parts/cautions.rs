//! Cautions of a sheet, the pressing ones first.

use crate::state::state;
use leptos::prelude::*;
use words::CautionText;
use words::Key;
use workbook::caution::{Caution, Sheet};

/// Cautions that bear on what is decided on this sheet.
pub fn cautions(sheet: Sheet) -> AnyView {
    let state = state();
    let found: Memo<Vec<Caution>> = Memo::new(move |_| {
        state.findings.with(|f| {
            f.judged
                .cautions
                .iter()
                .filter(|c| c.sheets().contains(&sheet))
                .cloned()
                .collect()
        })
    });
    view! {
        <section class="sheet-part" aria-labelledby="cautions-head" data-test="cautions">
            <h3 id="cautions-head">{move || state.words.get().say(Key::CAUTION_TITLE)}</h3>
            <ul class="cautions">
                {move || {
                    let words = state.words.get();
                    let book = state.book.get();
                    found
                        .get()
                        .iter()
                        .map(|c| one(&words.about(&book).caution(c), c.is_pressing()))
                        .collect_view()
                }}
            </ul>
        </section>
    }
    .into_any()
}

/// One caution: title and body.
#[must_use]
pub fn one(said: &CautionText, pressing: bool) -> AnyView {
    view! {
        <li class="caution" class:caution-pressing=pressing>
            <strong>{said.title}</strong>
            " "
            <span class="caution-more">{said.body.clone()}</span>
        </li>
    }
    .into_any()
}
