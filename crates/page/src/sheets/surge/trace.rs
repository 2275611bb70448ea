//! The course of the level at the foot, drawn and in words.

use crate::drawing::trace_chart::{Trace, TraceDrawing, TracePoint, TraceWords, draw};
use crate::drawing::{DrawingError, Size};
use crate::parts::drawing_panel::WIDE;
use crate::state::State;
use crate::theme::Theme;
use leptos::prelude::*;
use words::{Key, Words, capital, text};
use workbook::Measure;
use workbook::transient::Surge;
use workbook::units::Kind;

/// What is drawn of a run, in the units of the screen.
fn chart_of(words: Words, surge: &Surge) -> Trace {
    let (time, level) = (
        Kind::Time.default_unit(words.units),
        Kind::Level.default_unit(words.units),
    );
    let at = |value: Measure, after: Measure| TracePoint {
        time: time.from_base(after.value),
        level: level.from_base(value.value),
        label: words.figure(value),
    };
    let (highest, lowest) = (surge.foot_highest, surge.foot_lowest);
    let named = |key: Key, unit: &str| format!("{} {unit}", words.say(key));
    Trace {
        points: surge
            .foot
            .times
            .iter()
            .zip(&surge.foot.grades)
            .map(|(t, y)| (time.from_base(*t), level.from_base(*y)))
            .collect(),
        start: level.from_base(Measure::from(surge.foot_start).value),
        highest: at(highest.0.into(), highest.1.into()),
        lowest: at(lowest.0.into(), lowest.1.into()),
        words: TraceWords {
            time: named(Key::SURGE_TRACE_AXIS_TIME, time.symbol),
            level: named(Key::SURGE_TRACE_AXIS_LEVEL, level.symbol),
            start: words.say(Key::SURGE_TRACE_START).to_owned(),
            title: words.say(Key::SURGE_TRACE).to_owned(),
            desc: words.say(Key::SURGE_TRACE_DESCRIBED).to_owned(),
        },
    }
}

/// The same in a sentence.
fn said(words: Words, surge: &Surge) -> String {
    let (highest, lowest) = (surge.foot_highest, surge.foot_lowest);
    text::surge_trace_said(
        words,
        &capital(&words.start(surge.deciding)),
        &words.figure(surge.foot_start),
        &words.figure(highest.0),
        &words.figure(highest.1),
        &words.figure(lowest.0),
        &words.figure(lowest.1),
    )
}

fn drawn(words: Words, surge: &Surge, size: Size) -> Result<TraceDrawing, DrawingError> {
    let number = |x: f64, decimals: usize| words.axis(x, decimals);
    draw(&chart_of(words, surge), size, &number)
}

fn room(window: (f64, f64), big: bool) -> Size {
    let (width, _) = window;
    let width = if width >= WIDE {
        (width * 9.0 / 20.0).max(416.0) - 48.0
    } else {
        width - 24.0
    };
    Size {
        big,
        ..Size::screen(width.max(280.0).round(), 200.0)
    }
}

/// The chart with its sentence; nothing where surge is unsettled, which is
/// said above it.
pub(super) fn trace(state: State) -> AnyView {
    (move || {
        let words = state.words.get();
        let size = room(state.window.get(), state.theme.get() == Theme::Outdoor);
        state.findings.with(|f| {
            let surge = f.transient.surge.as_ref().ok()?;
            let said = said(words, surge);
            let svg = drawn(words, surge, size).ok().map(|d| {
                let picture = d.picture;
                view! {
                    <svg
                        class="drawing-svg"
                        viewBox=picture.view_box()
                        role="img"
                        aria-labelledby="surge-trace-title surge-trace-desc"
                        data-test="surge-trace"
                    >
                        <title id="surge-trace-title">{picture.title.clone()}</title>
                        <desc id="surge-trace-desc">{picture.desc.clone()}</desc>
                        <g inner_html=picture.svg.clone()></g>
                    </svg>
                }
            });
            Some(view! {
                <h4>{words.say(Key::SURGE_TRACE)}</h4>
                {svg}
                <p class="drawing-caption" data-test="surge-trace-said">
                    {said}
                </p>
            })
        })
    })
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{demo, evaluate};

    #[test]
    fn the_demo_trace_draws_and_reads_in_both_unit_systems() {
        let findings = evaluate(&demo::demo("k"));
        let surge = findings.transient.surge.as_ref().unwrap();
        for units in [UnitSystem::Metric, UnitSystem::UsCustomary] {
            let words = Words::new(Language::Spanish, units);
            let chart = chart_of(words, surge);
            assert!(chart.highest.level > chart.start && chart.lowest.level <= chart.start);
            assert!(drawn(words, surge, Size::screen(336.0, 200.0)).is_ok());
            assert!(said(words, surge).contains(&chart.highest.label));
        }
    }
}
