//! Later: after the next paint, after a while.

use leptos::prelude::{request_animation_frame, set_timeout};
use std::time::Duration;

/// Runs `work` once the browser has had a turn to paint and to take input.
pub fn soon(work: impl FnOnce() + 'static) {
    // A frame callback alone never comes in a hidden tab.
    set_timeout(work, Duration::ZERO);
}

/// Runs `work` before the next paint.
pub fn next_paint(work: impl FnOnce() + 'static) {
    request_animation_frame(work);
}

/// Runs `work` after this many milliseconds.
pub fn after(ms: u64, work: impl FnOnce() + 'static) {
    set_timeout(work, Duration::from_millis(ms));
}
