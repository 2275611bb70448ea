//! The title block on top of every sheet: site, revision, saved mark, design
//! flow, gross head.

use crate::keeping::Saved;
use crate::parts::books;
use crate::parts::drawing_panel::WIDE;
use crate::parts::figures::figure_text;
use crate::parts::working;
use crate::platform::storage::Persistence;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::caution::Sheet;
use workbook::figure::Place;
use workbook::working::FigureKey;
use workbook::{Book, Field};

/// What the book is called where no site was entered.
#[must_use]
pub fn name(book: &Book, words: Words) -> String {
    let name = book.site.name.trim();
    if name.is_empty() {
        words.say(Key::STATE_UNTITLED).to_owned()
    } else {
        name.to_owned()
    }
}

/// The foot of every printed page, as a quoted string of a style sheet.
#[must_use]
pub fn foot(book: &Book, words: Words) -> String {
    let revision = text::state_revision_short(words, &book.revision.to_string());
    let plain = format!("{} · {revision}", name(book, words));
    let mut quoted = String::from("\"");
    for c in plain.chars() {
        match c {
            '"' | '\\' => {
                quoted.push('\\');
                quoted.push(c);
            }
            // A line break would end the string.
            c if c.is_control() => quoted.push(' '),
            c => quoted.push(c),
        }
    }
    quoted.push('"');
    quoted
}

/// Title of the document.
#[must_use]
pub fn title(book: &Book, words: Words) -> String {
    format!("{} · {}", name(book, words), words.say(Key::APP_NAME))
}

/// The header.
#[component]
pub fn TitleBlock() -> impl IntoView {
    let state = state();
    let name = move || state.book.with(|b| name(b, state.words.get()));
    let trouble = move || matches!(state.saved.get(), Saved::Not(_));
    view! {
        <header class="titleblock">
            <h1 class="visually-hidden">{move || state.words.get().say(Key::APP_NAME)}</h1>
            <div class="titleblock-site">
                <button
                    type="button"
                    data-test="books"
                    aria-haspopup="dialog"
                    on:click=move |_| books::open(state)
                >
                    {name}
                </button>
                <span
                    class="titleblock-state"
                    class:is-trouble=trouble
                    data-test="saved"
                    data-saved=move || saved_slug(&state.saved.get())
                    role="status"
                >
                    {move || state_line(state)}
                </span>
            </div>
            <button
                type="button"
                class="titleblock-figure"
                data-test="title-flow"
                on:click=move |_| {
                    state.go_to(Sheet::Stream, &Place::Field(Field::DesignFlow));
                }
            >
                <span class="figure">{move || flow(state)}</span>
                <span class="figure-label">
                    {move || state.words.get().say(Key::FIGURE_DESIGN_FLOW)}
                </span>
            </button>
            <button
                type="button"
                class="titleblock-figure"
                data-test="title-head"
                on:click=move |_| working::open(state, FigureKey::GrossHead)
            >
                <span class="figure">{move || figure_text(state, FigureKey::GrossHead)}</span>
                <span class="figure-label">
                    {move || state.words.get().say(Key::FIGURE_GROSS_HEAD)}
                </span>
            </button>
        </header>
    }
}

fn flow(state: State) -> String {
    let words = state.words.get();
    state.findings.with(|f| match &f.resolved.design_flow {
        Ok(flow) => words.figure(*flow),
        Err(_) => "\u{2014}".to_owned(),
    })
}

fn saved_slug(saved: &Saved) -> &'static str {
    match saved {
        Saved::Nothing => "nothing",
        Saved::Saving => "saving",
        Saved::Kept => "saved",
        Saved::Not(_) => "not",
    }
}

/// Invented, revision, saved mark.
fn state_line(state: State) -> String {
    let words = state.words.get();
    let mut parts = Vec::new();
    state.book.with(|b| {
        if b.invented {
            parts.push(words.say(Key::PAGE_INVENTED).to_owned());
        }
        parts.push(text::state_revision_short(words, &b.revision.to_string()));
    });
    match state.saved.get() {
        Saved::Nothing => {}
        Saved::Saving => parts.push(words.say(Key::STATE_SAVING).to_lowercase()),
        // The list of books says it at length; a phone's title has no room.
        Saved::Kept
            if state.persistence.get() == Persistence::MayBeCleared
                && state.window.get().0 >= WIDE =>
        {
            parts.push(words.say(Key::PAGE_SAVED_FOR_NOW).to_owned());
        }
        Saved::Kept => parts.push(words.say(Key::STATE_SAVED).to_lowercase()),
        Saved::Not(_) => parts.insert(0, words.say(Key::STATE_NOT_SAVED).to_owned()),
    }
    parts.join(" · ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;

    #[test]
    fn the_foot_is_one_quoted_string_whatever_the_name() {
        let words = Words::new(Language::English, UnitSystem::Metric);
        let mut book = Book::new("k");
        book.site.name = "a \"b\" \\ c\nd".to_owned();
        assert!(foot(&book, words).starts_with(r#""a \"b\" \\ c d · "#));
    }
}
