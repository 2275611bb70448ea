//! Where the web of derived values is cut.
//!
//! At every key the framework asks each value that hangs on the book, however
//! far, whether it has changed. Thousands of fields of a long line would be
//! asked through the same few values. A gate asks once, and wakes what is
//! behind it only where the answer is another.

use leptos::prelude::*;

/// A value that wakes its readers only when it changes.
///
/// What stands here is derived, never set by hand; it follows within the same
/// turn of the browser, before anything is drawn.
pub fn gate<T>(value: impl Fn() -> T + Send + Sync + 'static) -> ReadSignal<T>
where
    T: PartialEq + Send + Sync + 'static,
{
    let kept = RwSignal::new(untrack(&value));
    Effect::new(move |_| {
        let now = value();
        if kept.with_untracked(|was| *was != now) {
            kept.set(now);
        }
    });
    kept.read_only()
}
