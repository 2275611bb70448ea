//! The size of the window.

use leptos::prelude::*;

/// Width and height of the window in CSS pixels, followed; widths are taken in
/// steps, so that a drawing is not made anew for each pixel.
#[must_use]
pub fn followed() -> RwSignal<(f64, f64)> {
    let size = RwSignal::new(now());
    let handle = window_event_listener(leptos::ev::resize, move |_| {
        let now = now();
        if size.get_untracked() != now {
            size.set(now);
        }
    });
    // The page listens for as long as it lives.
    std::mem::forget(handle);
    size
}

fn now() -> (f64, f64) {
    let window = super::window();
    let number = |v: Result<wasm_bindgen::JsValue, _>| v.ok().and_then(|v| v.as_f64());
    (
        number(window.inner_width()).unwrap_or(360.0),
        number(window.inner_height()).unwrap_or(800.0),
    )
}
