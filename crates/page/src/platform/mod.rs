//! All that the page asks of the browser. Nothing outside this folder uses
//! `web_sys`, `js_sys` or the store.

pub mod clock;
pub mod file;
pub mod frame;
pub mod place;
pub mod root;
pub mod settings;
pub mod storage;
pub mod update;
pub mod viewport;

pub use leptos::ev;
pub use web_sys::{KeyboardEvent, PointerEvent, WheelEvent};

/// The page's window; there is one wherever the page runs.
fn window() -> web_sys::Window {
    leptos::prelude::window()
}
