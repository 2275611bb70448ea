//! The long section: above the sheets on a phone, beside them on a wide
//! screen, one line while a field is written in.

use crate::drawing::Size;
use crate::drawing::long_section::{HitWhat, LongSectionDrawing};
use crate::edits::stretches;
use crate::parts::drawing_full;
use crate::parts::line_drawing::{Named, drawn, named};
use crate::parts::verdicts::{mark_svg, share_of, worst};
use crate::platform::place;
use crate::speak;
use crate::state::{State, state};
use crate::theme::Theme;
use leptos::prelude::*;
use words::{Key, text};
use workbook::Measure;
use workbook::units::Kind;

/// From this width on the drawing stands beside the sheet, CSS pixels; as in
/// the style sheet.
pub const WIDE: f64 = 900.0;

/// The book's drawing in this room.
pub fn picture(state: State, size: Size) -> Option<(Named, LongSectionDrawing)> {
    let words = state.words.get();
    let book = state.book.get();
    let selected = state.stretch.get();
    let named = state.findings.with(|f| named(&book, f, words, selected))?;
    let drawing = drawn(named.section.clone(), size, words).ok()?;
    Some((named, drawing))
}

/// Room for the drawing in a window.
fn room(window: (f64, f64), big: bool) -> Size {
    let (width, height) = window;
    let (w, h) = if width >= WIDE {
        // The left of two columns, as in the style sheet, less its padding.
        let column = (width * 11.0 / 20.0).min(width - 416.0);
        (column - 28.0, (height - 210.0).clamp(260.0, 620.0))
    } else {
        let least = if height < 700.0 { 190.0 } else { 220.0 };
        (
            width,
            (width * 0.62).clamp(least, (height * 0.42).max(least)),
        )
    };
    Size {
        big,
        ..Size::screen(w.max(300.0).round(), h.round())
    }
}

/// What is at a point of a drawing: selects it everywhere.
pub fn select(state: State, named: &Named, drawing: &LongSectionDrawing, at: (f64, f64)) {
    match drawing.hit(at.0, at.1) {
        Some(HitWhat::Stretch(i)) => {
            let id = named.stretches.get(i).copied();
            // A second tap lets go.
            let same = id.is_some() && state.stretch.get_untracked() == id;
            state.stretch.set(if same { None } else { id });
        }
        Some(HitWhat::Station(i)) => {
            select_station(state, named.stations.get(i).copied().flatten());
        }
        Some(HitWhat::Fitting(i)) => {
            select_station(state, named.fittings.get(i).copied().flatten());
        }
        None => {}
    }
}

fn select_station(state: State, station: Option<workbook::book::Id>) {
    let Some(id) = station else { return };
    state.station.set(Some(id));
    let stretch = state.book.with_untracked(|b| stretches::at_station(b, id));
    state.stretch.set(stretch);
}

/// What a touched place of the line says: chainage, levels, pressure head.
fn read_out(state: State, drawing: &LongSectionDrawing, x: f64) -> Option<String> {
    let cross = drawing.crosshair(x)?;
    let words = state.words.get();
    let (distance, level) = (
        Kind::Distance.default_unit(words.units),
        Kind::Level.default_unit(words.units),
    );
    let chainage = Measure::new(distance.to_base(cross.chainage), Kind::Distance);
    let pipe = Measure::new(level.to_base(cross.pipe), Kind::Level);
    let (chainage, pipe) = (words.figure(chainage), words.figure(pipe));
    Some(match cross.grade {
        Some((grade, _)) => {
            let head = Measure::new(level.to_base(grade - cross.pipe), Kind::Head);
            text::page_at_place_with_head(words, &chainage, &pipe, &words.figure(head))
        }
        None => text::page_at_place(words, &chainage, &pipe),
    })
}

/// The drawing with what a pointer shows on it.
pub fn live_svg(
    state: State,
    id: &'static str,
    found: Signal<Option<(Named, LongSectionDrawing)>>,
    pointer: RwSignal<Option<f64>>,
) -> impl Fn() -> Option<AnyView> {
    move || {
        let (named, drawing) = found.get()?;
        let title = format!("{id}-title");
        let desc = format!("{id}-desc");
        let labelled = format!("{title} {desc}");
        let picture = drawing.picture.clone();
        let (width, height) = (picture.width, picture.height);
        let over = StoredValue::new(drawing.clone());
        let at = move |e: &leptos::ev::PointerEvent| {
            let (left, top, w, h) = place::frame_of(e)?;
            Some((
                (f64::from(e.client_x()) - left) / w * width,
                (f64::from(e.client_y()) - top) / h * height,
            ))
        };
        let chainage = move || {
            let id = state.station.get()?;
            let words = state.words.get();
            let unit = Kind::Distance.default_unit(words.units);
            state.findings.with(|f| {
                let station = f.resolved.profile.station(id)?;
                Some(unit.from_base(Measure::from(station.chainage).value))
            })
        };
        let cross = move || {
            over.with_value(|d| {
                let (x, y) = match pointer.get() {
                    Some(x) => {
                        let c = d.crosshair(x)?;
                        (c.x, c.pipe_y)
                    }
                    None => d.pixel_of(chainage()?)?,
                };
                let span = d.crosshair(x)?.span;
                Some(view! {
                    <line class="d-cross" x1=x x2=x y1=span.0 y2=span.1></line>
                    <circle class="d-cross-dot" cx=x cy=y r="5"></circle>
                })
            })
        };
        let click = move |e: leptos::ev::PointerEvent| {
            if let Some(at) = at(&e) {
                select(state, &named, &drawing, at);
                pointer.set(Some(at.0));
            }
        };
        Some(
            view! {
                <svg
                    class="drawing-svg"
                    viewBox=picture.view_box()
                    role="img"
                    aria-labelledby=labelled
                    data-test=id
                    on:pointerup=click
                    on:pointermove=move |e| {
                        if e.pointer_type() == "mouse" {
                            pointer.set(at(&e).map(|a| a.0));
                        }
                    }
                    on:pointerleave=move |_| pointer.set(None)
                >
                    <title id=title>{picture.title.clone()}</title>
                    <desc id=desc>{picture.desc.clone()}</desc>
                    <g inner_html=picture.svg.clone()></g>
                    <g>{cross}</g>
                </svg>
            }
            .into_any(),
        )
    }
}

/// The drawing of every sheet.
#[component]
pub fn DrawingPanel() -> impl IntoView {
    let state = state();
    let pointer = RwSignal::new(None);
    let size = Memo::new(move |_| room(state.window.get(), state.theme.get() == Theme::Outdoor));
    let found = Memo::new(move |_| picture(state, size.get()));
    let shrunk = move || state.writing.get() && state.window.get().0 < WIDE;
    let caption = move || {
        let words = state.words.get();
        let Some(x) = pointer.get() else {
            return selected_words(state);
        };
        found
            .with(|f| f.as_ref().and_then(|(_, d)| read_out(state, d, x)))
            .unwrap_or_else(|| words.say(Key::PAGE_TOUCH_DRAWING).to_owned())
    };
    let svg = live_svg(state, "drawing", found.into(), pointer);
    view! {
        <section
            class="drawing"
            class:is-shrunk=shrunk
            aria-label=move || state.words.get().say(Key::SECTION_TITLE)
        >
            <div class="drawing-shrunk" data-test="drawing-line">{move || one_line(state)}</div>
            {move || {
                svg()
                    .unwrap_or_else(|| {
                        view! {
                            <p class="drawing-empty" data-test="drawing-empty">
                                {move || state.words.get().say(Key::SECTION_EMPTY)}
                            </p>
                        }
                        .into_any()
                    })
            }}
            <Show when=move || found.with(Option::is_some)>
                <div class="drawing-caption">
                    <span data-test="drawing-said">{caption}</span>
                    <button
                        type="button"
                        class="button-quiet"
                        data-test="drawing-open"
                        aria-haspopup="dialog"
                        on:click=move |_| drawing_full::open(state)
                    >
                        {move || state.words.get().say(Key::DO_SHOW_FULL_DRAWING)}
                    </button>
                </div>
            </Show>
        </section>
    }
}

/// What is selected, or how to select.
fn selected_words(state: State) -> String {
    let words = state.words.get();
    let book = state.book.get();
    if let Some(station) = state.station.get() {
        return speak::station(words, &book, station);
    }
    match state.stretch.get() {
        Some(stretch) => speak::stretch(words, &book, &state.findings.get(), stretch),
        None => words.say(Key::PAGE_TOUCH_DRAWING).to_owned(),
    }
}

/// Lowest pressure and verdict, while a field is written in.
fn one_line(state: State) -> AnyView {
    let words = state.words.get();
    let book = state.book.get();
    let findings = state.findings.get();
    let lowest = match &findings.steady.lowest {
        Ok(lowest) => text::page_lowest_of(words, &words.figure(lowest.pressure)),
        Err(gap) => words.about(&book).gap(gap),
    };
    match worst(state) {
        Some(verdict) => {
            let (lead, _) = speak::stretch_verdict(words, &book, &findings, &verdict);
            // Two things, and neither the reason of the other.
            view! {
                {mark_svg(verdict.verdict, share_of(&verdict))}
                <span>{lead.trim_end_matches(':').to_owned()}</span>
                <span class="drawing-lowest">{lowest}</span>
            }
            .into_any()
        }
        None => view! { <span class="drawing-lowest">{lowest}</span> }.into_any(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn there_is_room_on_every_window() {
        for window in [
            (320.0, 568.0),
            (360.0, 800.0),
            (899.0, 500.0),
            (900.0, 600.0),
            (2560.0, 1440.0),
        ] {
            let size = room(window, false);
            assert!(size.width >= 300.0 && size.width <= window.0);
            assert!(size.height >= 190.0 && size.height <= window.1);
        }
    }
}
