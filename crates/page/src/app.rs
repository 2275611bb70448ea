//! The page as a whole: what stands around the sheets, keys, first start.

use crate::parts::banners::Banners;
use crate::parts::books::BooksDialog;
use crate::parts::drawing_full::DrawingFull;
use crate::parts::drawing_panel::DrawingPanel;
use crate::parts::import::ImportDialog;
use crate::parts::next_entry::NextEntry;
use crate::parts::tabs::Tabs;
use crate::parts::title_block::TitleBlock;
use crate::parts::working::WorkingDialog;
use crate::platform::{frame, place, update};
use crate::sheets::jets::JetsSheet;
use crate::sheets::line::LineSheet;
use crate::sheets::pipe::PipeSheet;
use crate::sheets::print::PrintSheet;
use crate::sheets::stream::StreamSheet;
use crate::sheets::surge::SurgeSheet;
use crate::state::{State, sheet_of, sheet_slug};
use crate::sweeping;
use leptos::ev;
use leptos::prelude::*;
use words::Key;
use workbook::caution::Sheet;

/// How long after a field was left the drawing grows back, ms: a tap on a
/// button must not find it moved away under the finger.
const GROW_MS: u64 = 350;

/// The page.
#[component]
pub fn App() -> impl IntoView {
    let state = State::new();
    provide_context(state);
    state.carry_out();
    sweeping::follow(state);
    state.start();
    listen(state);
    let say = move |key: Key| move || state.words.get().say(key);
    let main = move || {
        if !state.ready.get() {
            return view! { <p>{say(Key::APP_LOADING)}</p> }.into_any();
        }
        match state.sheet.get() {
            Sheet::Line => view! { <LineSheet/> }.into_any(),
            Sheet::Pipe => view! { <PipeSheet/> }.into_any(),
            Sheet::Jets => view! { <JetsSheet/> }.into_any(),
            Sheet::Surge => view! { <SurgeSheet/> }.into_any(),
            Sheet::Print => view! { <PrintSheet/> }.into_any(),
            _ => view! { <StreamSheet/> }.into_any(),
        }
    };
    view! {
        <div
            class="app"
            data-test="app"
            data-ready=move || if state.ready.get() { "yes" } else { "no" }
            on:focusin=move |_| {
                if is_written_in() {
                    state.writing.set(true);
                } else {
                    grow(state);
                }
            }
            on:focusout=move |_| grow(state)
        >
            <a class="skip-link" href="#sheet" on:click=|e| {
                e.prevent_default();
                place::focus("sheet");
            }>
                {say(Key::PAGE_SKIP)}
            </a>
            <TitleBlock/>
            <div class="notices">
                <Banners/>
                <NextEntry/>
            </div>
            // The print shows the drawing itself.
            <Show when=move || state.sheet.get() != Sheet::Print>
                <DrawingPanel/>
            </Show>
            <main
                class="sheet"
                id="sheet"
                tabindex="-1"
                data-test=move || format!("sheet-{}", sheet_slug(state.sheet.get()))
            >
                {main}
            </main>
            <Tabs/>
        </div>
        <BooksDialog/>
            <ImportDialog/>
        <WorkingDialog/>
        <DrawingFull/>
    }
}

/// Whether the person writes, or goes through the sheet by keyboard.
fn is_written_in() -> bool {
    place::is_writing() || place::is_keyed()
}

/// Lets the drawing grow back, a moment later, unless there is writing again.
fn grow(state: State) {
    frame::after(GROW_MS, move || state.writing.set(is_written_in()));
}

/// Follows what happens to the window.
fn listen(state: State) {
    let hash = window_event_listener(ev::hashchange, move |_| {
        if let Some(sheet) = sheet_of(&place::sheet()) {
            state.sheet.set(sheet);
        }
    });
    let keys = window_event_listener(ev::keydown, move |e| {
        if !(e.ctrl_key() || e.meta_key()) || e.alt_key() || place::is_in_dialog() {
            return;
        }
        match (e.key().to_lowercase().as_str(), e.shift_key()) {
            ("z", false) => {
                e.prevent_default();
                state.undo();
            }
            ("z", true) | ("y", false) => {
                e.prevent_default();
                state.redo();
            }
            ("s", false) => {
                e.prevent_default();
                crate::parts::books::save_file(state);
            }
            _ => {}
        }
    });
    // The page listens for as long as it lives.
    std::mem::forget((hash, keys));
    update::on_waiting(move || state.update.set(true));
}
