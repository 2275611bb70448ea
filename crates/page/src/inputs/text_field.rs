//! Plain texts: names, notes, dates.

use crate::history::Touch;
use crate::platform::place;
use crate::state::state;
use leptos::ev;
use leptos::prelude::*;
use words::Key;
use workbook::Book;

/// What a text field asks for, beside where it stands.
#[derive(Debug, Clone, Copy, Default)]
pub struct TextLook {
    /// Several lines.
    pub long: bool,
    /// Of a few letters: shares its row with others.
    pub short: bool,
    /// What to enter.
    pub hint: Option<Key>,
}

/// A plain text with its label above it. `slug` names it in `id` and
/// `data-test`, after `text-`.
pub fn text_field(
    slug: &str,
    label: Key,
    look: TextLook,
    get: impl Fn(&Book) -> String + Copy + Send + Sync + 'static,
    set: impl Fn(&mut Book, String) + Copy + 'static,
) -> AnyView {
    let TextLook { long, short, hint } = look;
    let state = state();
    let id = format!("text-{slug}");
    let touch = Touch::Text(slug.to_owned());
    let before = StoredValue::new(String::new());
    let value = Memo::new(move |_| state.book.with(|b| get(b)));
    let take = move |text: String| {
        state.edit(touch.clone(), move |book| set(book, text));
    };
    let enter = move |_| {
        before.set_value(value.get_untracked());
        state.close_step();
    };
    let leave = move |_| state.close_step();
    let put_back = take.clone();
    let key = move |e: ev::KeyboardEvent| match e.key().as_str() {
        "Escape" => {
            e.prevent_default();
            e.stop_propagation();
            put_back(before.get_value());
        }
        "Enter" if !long => {
            e.prevent_default();
            place::blur();
        }
        _ => {}
    };
    let described = format!("{id}-hint");
    let entry = if long {
        view! {
            <textarea
                class="field-input"
                id=id.clone()
                data-test=id.clone()
                aria-describedby=described.clone()
                prop:value=move || value.get()
                on:input=move |e| take(event_target_value(&e))
                on:focus=enter
                on:blur=leave
                on:keydown=key
            ></textarea>
        }
        .into_any()
    } else {
        view! {
            <input
                type="text"
                class="field-input"
                enterkeyhint="done"
                autocomplete="off"
                id=id.clone()
                data-test=id.clone()
                aria-describedby=described.clone()
                prop:value=move || value.get()
                on:input=move |e| take(event_target_value(&e))
                on:focus=enter
                on:blur=leave
                on:keydown=key
            />
        }
        .into_any()
    };
    view! {
        <div class="field" class:field-wide=!short>
            <label class="field-label" for=id>{move || state.words.get().say(label)}</label>
            <div class="field-line">{entry}</div>
            <p class="field-hint" id=described>
                {move || hint.map(|h| state.words.get().say(h)).unwrap_or_default()}
            </p>
        </div>
    }
    .into_any()
}
