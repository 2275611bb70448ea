//! The drawing opened over the whole screen, where it pans and zooms.

use crate::drawing::Size;
use crate::parts::drawing_panel::{picture, select};
use crate::parts::pan::View;
use crate::platform::place;
use crate::state::{State, state};
use crate::theme::Theme;
use leptos::ev::{PointerEvent, WheelEvent};
use leptos::prelude::*;
use words::Key;

const DIALOG: &str = "drawing-full";
/// Height of the row of buttons, CSS pixels.
const HEAD: f64 = 60.0;
/// A pointer that moved less than this was a tap.
const TAP: f64 = 8.0;

/// Opens it.
pub fn open(state: State) {
    state.full.set(true);
    place::open_dialog(DIALOG);
}

/// How the picture follows the fingers.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Follow {
    /// Not at all.
    Stay,
    /// Dragged by this much.
    Drag((f64, f64)),
    /// Zoomed by a factor about a point.
    Zoom(f64, (f64, f64)),
}

/// Pointers that are down, with where they are; how far they have moved.
#[derive(Debug, Clone, Default)]
struct Grip {
    pointers: Vec<(i32, (f64, f64))>,
    moved: f64,
}

impl Grip {
    /// Moves a pointer. Returns how the picture follows: drag, or zoom about a
    /// point.
    fn moved_to(&mut self, id: i32, to: (f64, f64)) -> Follow {
        let before = self.spread();
        let Some(pointer) = self.pointers.iter_mut().find(|p| p.0 == id) else {
            return Follow::Stay;
        };
        let by = (to.0 - pointer.1.0, to.1 - pointer.1.1);
        pointer.1 = to;
        self.moved += by.0.abs() + by.1.abs();
        if self.pointers.len() == 1 {
            return Follow::Drag(by);
        }
        match (before, self.spread()) {
            (Some((was, _)), Some((now, middle))) if was > 1.0 => Follow::Zoom(now / was, middle),
            _ => Follow::Stay,
        }
    }

    /// Distance of two pointers and the middle between them.
    fn spread(&self) -> Option<(f64, (f64, f64))> {
        let [(_, a), (_, b), ..] = self.pointers.as_slice() else {
            return None;
        };
        let (dx, dy) = (a.0 - b.0, a.1 - b.1);
        Some((
            (dx * dx + dy * dy).sqrt(),
            ((a.0 + b.0) / 2.0, (a.1 + b.1) / 2.0),
        ))
    }
}

/// The dialog.
#[component]
pub fn DrawingFull() -> impl IntoView {
    let state = state();
    let shown = state.full;
    let window = move || {
        let (w, h) = state.window.get();
        (w.max(300.0), (h - HEAD).max(200.0))
    };
    let view = RwSignal::new(View::whole((360.0, 640.0)));
    let in_window = Memo::new(move |_| view.get().resized(window()));
    let zoomed = Memo::new(move |_| in_window.get().picture());
    let grip = StoredValue::new(Grip::default());
    let found = Memo::new(move |_| {
        if !shown.get() {
            return None;
        }
        let (w, h) = zoomed.get();
        let big = state.theme.get() == Theme::Outdoor;
        picture(
            state,
            Size {
                big,
                ..Size::screen(w, h)
            },
        )
    });
    let zoom = move |factor: f64| {
        let v = in_window.get_untracked();
        view.set(v.zoomed(factor, (v.window.0 / 2.0, v.window.1 / 2.0)));
    };
    let point = |e: &PointerEvent| {
        let (left, top, ..) = place::frame_of(e)?;
        Some((
            f64::from(e.client_x()) - left,
            f64::from(e.client_y()) - top,
        ))
    };
    let down = move |e: PointerEvent| {
        let Some(at) = point(&e) else { return };
        place::capture(&e);
        grip.update_value(|g| {
            if g.pointers.is_empty() {
                g.moved = 0.0;
            }
            g.pointers.push((e.pointer_id(), at));
        });
    };
    let moved = move |e: PointerEvent| {
        let Some(at) = point(&e) else { return };
        let follow = grip.try_update_value(|g| g.moved_to(e.pointer_id(), at));
        match follow {
            Some(Follow::Drag(by)) => view.set(in_window.get_untracked().dragged(by)),
            Some(Follow::Zoom(factor, middle)) => {
                view.set(in_window.get_untracked().zoomed(factor, middle));
            }
            Some(Follow::Stay) | None => {}
        }
    };
    let up = move |e: PointerEvent| {
        let tap = grip
            .try_update_value(|g| {
                g.pointers.retain(|p| p.0 != e.pointer_id());
                g.pointers.is_empty() && g.moved < TAP
            })
            .unwrap_or(false);
        if tap && let Some(at) = point(&e) {
            let v = in_window.get_untracked();
            found.with_untracked(|f| {
                if let Some((named, drawing)) = f {
                    select(state, named, drawing, (at.0 + v.at.0, at.1 + v.at.1));
                }
            });
        }
    };
    let cancel = move |e: PointerEvent| {
        grip.update_value(|g| g.pointers.retain(|p| p.0 != e.pointer_id()));
    };
    let wheel = move |e: WheelEvent| {
        e.prevent_default();
        let Some((left, top, ..)) = place::frame_of(&e) else {
            return;
        };
        let at = (
            f64::from(e.client_x()) - left,
            f64::from(e.client_y()) - top,
        );
        let factor = if e.delta_y() < 0.0 { 1.2 } else { 1.0 / 1.2 };
        view.set(in_window.get_untracked().zoomed(factor, at));
    };
    let button = move |test: &'static str, key: Key, act: Callback<()>| {
        view! {
            <button
                type="button"
                class="button-quiet"
                data-test=test
                on:click=move |_| act.run(())
            >
                {move || state.words.get().say(key)}
            </button>
        }
    };
    view! {
        <dialog
            id=DIALOG
            class="drawing-full"
            aria-label=move || state.words.get().say(Key::SECTION_TITLE)
            on:close=move |_| shown.set(false)
        >
            <div class="dialog-head">
                {button("zoom-in", Key::DO_ZOOM_IN, Callback::new(move |()| zoom(1.5)))}
                {button("zoom-out", Key::DO_ZOOM_OUT, Callback::new(move |()| zoom(1.0 / 1.5)))}
                {button(
                    "zoom-fit",
                    Key::DO_ZOOM_FIT,
                    Callback::new(move |()| view.set(View::whole(window()))),
                )}
                {button(
                    "drawing-close",
                    Key::DO_CLOSE,
                    Callback::new(|()| place::close_dialog(DIALOG)),
                )}
            </div>
            {move || {
                let picture = found.with(|f| f.as_ref().map(|(_, d)| d.picture.clone()))?;
                Some(
                    view! {
                        <svg
                            class="drawing-svg drawing-full"
                            viewBox=move || in_window.get().view_box()
                            role="img"
                            aria-label=picture.title
                            data-test="drawing-large"
                            on:pointerdown=down
                            on:pointermove=moved
                            on:pointerup=up
                            on:pointercancel=cancel
                            on:wheel=wheel
                        >
                            <g inner_html=picture.svg></g>
                        </svg>
                    },
                )
            }}
        </dialog>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_finger_drags_and_two_zoom() {
        let mut grip = Grip::default();
        grip.pointers.push((1, (0.0, 0.0)));
        assert_eq!(grip.moved_to(1, (3.0, 4.0)), Follow::Drag((3.0, 4.0)));
        grip.pointers.push((2, (13.0, 4.0)));
        assert_eq!(
            grip.moved_to(2, (23.0, 4.0)),
            Follow::Zoom(2.0, (13.0, 4.0))
        );
        assert_eq!(grip.moved_to(9, (0.0, 0.0)), Follow::Stay);
    }
}
