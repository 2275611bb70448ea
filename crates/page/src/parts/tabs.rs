//! The sheets at the bottom edge, and what is one tap from everywhere.

use crate::parts::books;
use crate::state::{SHEETS, sheet_slug, state};
use leptos::prelude::*;
use words::Key;
use workbook::caution::Sheet;

/// Name of a sheet.
#[must_use]
pub fn sheet_key(sheet: Sheet) -> Key {
    match sheet {
        Sheet::Stream => Key::SHEET_STREAM,
        Sheet::Line => Key::SHEET_LINE,
        Sheet::Pipe => Key::SHEET_PIPE,
        Sheet::Jets => Key::SHEET_JETS,
        Sheet::Surge => Key::SHEET_SURGE,
        Sheet::Hold => Key::SHEET_HOLD,
        Sheet::Worth => Key::SHEET_WORTH,
        Sheet::Gauge => Key::SHEET_GAUGE,
        Sheet::Print => Key::SHEET_PRINT,
    }
}

/// The bar of sheets and acts.
#[component]
pub fn Tabs() -> impl IntoView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let sheets: Vec<AnyView> = SHEETS
        .into_iter()
        .map(|sheet| {
            let slug = sheet_slug(sheet);
            view! {
                <a
                    class="tab"
                    href=format!("#{slug}")
                    data-test=format!("tab-{slug}")
                    aria-current=move || (state.sheet.get() == sheet).then_some("page")
                    on:click=move |e| {
                        e.prevent_default();
                        state.go(sheet);
                    }
                >
                    {say(sheet_key(sheet))}
                </a>
            }
            .into_any()
        })
        .collect();
    view! {
        <nav class="tabs" aria-label=say(Key::SHEET_LIST)>
            {sheets}
            <button
                type="button"
                class="tab tab-act"
                data-test="undo"
                disabled=move || !state.can_undo()
                on:click=move |_| state.undo()
            >
                {say(Key::DO_UNDO)}
            </button>
            <button
                type="button"
                class="tab tab-act"
                data-test="redo"
                disabled=move || !state.can_redo()
                on:click=move |_| state.redo()
            >
                {say(Key::DO_REDO)}
            </button>
            <button
                type="button"
                class="tab tab-act"
                data-test="theme"
                aria-label=move || {
                    let words = state.words.get();
                    words::text::page_theme_is(words, words.say(state.theme.get().key()))
                }
                on:click=move |_| state.next_theme()
            >
                {say(Key::SETTING_THEME)}
            </button>
            <button
                type="button"
                class="tab tab-act"
                data-test="tab-books"
                aria-haspopup="dialog"
                on:click=move |_| books::open(state)
            >
                {say(Key::DO_BOOKS)}
            </button>
            <button
                type="button"
                class="tab tab-act"
                data-test="save-file"
                on:click=move |_| books::save_file(state)
            >
                {say(Key::PAGE_TO_FILE)}
            </button>
        </nav>
    }
}
