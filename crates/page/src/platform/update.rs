//! A newer edition of the page waits: said by the shell's boot script, taken
//! when the person says so.

/// Whether a newer edition waits already.
#[must_use]
pub fn is_waiting() -> bool {
    super::root::get("data-update").as_deref() == Some("waiting")
}

/// Runs `tell` when a newer edition has come.
pub fn on_waiting(tell: impl Fn() + 'static) {
    let handle = leptos::prelude::window_event_listener_untyped("fallwright-update", move |_| {
        tell();
    });
    // The page listens for as long as it lives.
    std::mem::forget(handle);
}

/// Takes the newer edition: the page is loaded again.
pub fn accept() {
    if let Ok(event) = web_sys::Event::new("fallwright-accept") {
        let _ = super::window().dispatch_event(&event);
    }
}
