//! The sweep as a chart: loss against bore.

use crate::drawing::Size;
use crate::drawing::sweep_chart::{
    Limit, MOST_SHARE, NotShown, SweepChart, SweepDrawing, SweepPoint, SweepWords, draw,
    least_share,
};
use crate::parts::drawing_panel::WIDE;
use crate::parts::line_drawing::mark;
use crate::platform::place;
use crate::sheets::pipe::table::{cap_of, chosen_pipes, read_row};
use crate::state::State;
use crate::sweep_table::{Filter, is_fit, shown};
use crate::theme::Theme;
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::Measure;
use workbook::sweep::Row;
use workbook::units::Kind;

/// What is drawn, and which row each point is.
#[derive(Debug, Clone, PartialEq)]
struct Charted {
    drawing: SweepDrawing,
    rows: Vec<usize>,
}

fn families(rows: &[&Row], filter: Filter, words: Words) -> (Vec<String>, Vec<usize>) {
    let mut names: Vec<String> = Vec::new();
    let mut places = Vec::new();
    for row in rows {
        let name = if filter.material.is_some() {
            row.class.clone()
        } else {
            words.name(row.material).to_owned()
        };
        let place = names.iter().position(|n| *n == name).unwrap_or_else(|| {
            names.push(name);
            names.len() - 1
        });
        places.push(place);
    }
    (names, places)
}

/// The chart of these rows.
fn chart_of(
    rows: &[Row],
    places: &[usize],
    filter: Filter,
    (cap, greatest): (Option<f64>, Option<f64>),
    chosen: &[String],
    words: Words,
) -> (SweepChart, Vec<usize>) {
    let drawn: Vec<usize> = places
        .iter()
        .copied()
        .filter(|i| rows[*i].loss_share.is_ok())
        .collect();
    let picked: Vec<&Row> = drawn.iter().map(|i| &rows[*i]).collect();
    let (families, family) = families(&picked, filter, words);
    let unit = Kind::Bore.default_unit(words.units);
    let points = picked
        .iter()
        .zip(family)
        .map(|(row, family)| SweepPoint {
            bore: unit.from_base(Measure::bore(row.bore).value),
            loss_share: row.loss_share.clone().unwrap_or(f64::NAN),
            family,
            verdict: mark(row.verdict.verdict),
            dominated: !is_fit(row, cap),
            chosen: chosen.contains(&row.pipe),
        })
        .collect();
    let share = |s: f64| words.figure(Measure::share(s));
    let chosen_name = picked
        .iter()
        .find(|r| chosen.contains(&r.pipe))
        .map(|r| r.short.clone())
        .unwrap_or_default();
    let say = |key: Key| words.say(key).to_owned();
    let chart = SweepChart {
        points,
        families,
        cap: cap.map(|s| Limit {
            share: s,
            label: text::page_cap_of(words, &share(s)),
        }),
        greatest_power: greatest.map(|share| Limit {
            share,
            label: say(Key::SWEEP_GREATEST_POWER),
        }),
        words: SweepWords {
            bore: format!("{} {}", words.say(Key::SWEEP_AXIS_BORE), unit.symbol),
            loss: say(Key::SWEEP_AXIS_LOSS),
            chosen: chosen_name,
            fails: say(Key::VERDICT_FAILS),
            unsettled: say(Key::VERDICT_UNSETTLED),
            tight: say(Key::VERDICT_TIGHT),
            dominated: say(Key::PAGE_OVER_CAP_OR_FAILS),
            more: say(Key::PAGE_MORE_CLOSE),
            title: say(Key::SWEEP_CHART),
            desc: text::sweep_chart_described(words, &words.count(picked.len())),
        },
    };
    (chart, drawn)
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
        ..Size::screen(width.max(280.0).round(), 300.0)
    }
}

/// What the chart leaves out or only hints at, counted.
fn left_out(words: Words, drawing: &SweepDrawing, cap: Option<f64>) -> String {
    let share = |s: f64| words.brief(Measure::share(s));
    let NotShown {
        above,
        below,
        without,
    } = drawing.not_shown;
    let mut said = Vec::new();
    if drawing.ticks > 0 {
        said.push(text::sweep_chart_ticks(words, drawing.ticks));
    }
    if above > 0 {
        said.push(text::sweep_chart_above(words, above, &share(MOST_SHARE)));
    }
    if below > 0 {
        let least = words.figure(Measure::share(least_share(cap)));
        said.push(text::sweep_chart_below(words, below, &least));
    }
    if without > 0 {
        said.push(text::sweep_chart_without(words, without));
    }
    said.join(" ")
}

/// The chart with what a touch shows on it.
pub(super) fn chart(state: State) -> AnyView {
    let touched = RwSignal::new(None::<usize>);
    let found = Memo::new(move |_| {
        let words = state.words.get();
        let filter = state.filter.get();
        let cap = cap_of(state);
        // Where the power of the line as it stands is greatest.
        let greatest = state.findings.with(|f| {
            let curve = f.operation.power.as_ref().ok()?;
            Some(curve.greatest_power.lost_share)
        });
        let chosen = chosen_pipes(state);
        let size = room(state.window.get(), state.theme.get() == Theme::Outdoor);
        state.rows.with(|all| {
            let places = shown(all, filter, cap, &chosen);
            let (chart, rows) = chart_of(all, &places, filter, (cap, greatest), &chosen, words);
            let bore = |x: f64, d: usize| words.axis(x, d);
            let per_cent = |x: f64, d: usize| format!("{}\u{202f}%", words.axis(x, d));
            let drawing = draw(&chart, size, &bore, &per_cent).ok()?;
            Some(Charted { drawing, rows })
        })
    });
    (move || {
        let Some(Charted { drawing, rows }) = found.get() else {
            // Nothing to draw: say why, once the rows are there.
            let any = state.rows.with(|r| !r.is_empty());
            return any.then(|| {
                let said = move || state.words.get().say(Key::SWEEP_NEEDS_LINE);
                view! { <p class="quiet" data-test="sweep-empty">{said}</p> }.into_any()
            });
        };
        let left_out = left_out(state.words.get(), &drawing, cap_of(state));
        let picture = drawing.picture.clone();
        let (width, height) = (picture.width, picture.height);
        let drawing = StoredValue::new(drawing);
        let pick = move |e: leptos::ev::PointerEvent| {
            let Some((left, top, w, h)) = place::frame_of(&e) else {
                return;
            };
            let at = (
                (f64::from(e.client_x()) - left) / w * width,
                (f64::from(e.client_y()) - top) / h * height,
            );
            touched.set(drawing.with_value(|d| d.nearest(at.0, at.1)));
        };
        let ring = move || {
            let (x, y) = touched
                .get()
                .and_then(|i| drawing.with_value(|d| d.pixel_of(i)))?;
            Some(view! { <circle class="d-ring" cx=x cy=y r="11"></circle> })
        };
        let said = move || {
            let words = state.words.get();
            let row = rows.get(touched.get()?).copied()?;
            state
                .rows
                .with(|rows| rows.get(row).map(|r| read_row(words, r)))
        };
        let drawn = view! {
            <svg
                class="drawing-svg"
                viewBox=picture.view_box()
                role="img"
                aria-labelledby="sweep-chart-title sweep-chart-desc"
                data-test="sweep-chart"
                on:pointerdown=pick
            >
                <title id="sweep-chart-title">{picture.title.clone()}</title>
                <desc id="sweep-chart-desc">{picture.desc.clone()}</desc>
                <g inner_html=picture.svg.clone()></g>
                <g>{ring}</g>
            </svg>
            <p class="drawing-caption" data-test="sweep-said">
                {move || {
                    said()
                        .unwrap_or_else(|| {
                            state.words.get().say(Key::PAGE_TOUCH_CHART).to_owned()
                        })
                }}
            </p>
            <p class="quiet" data-test="sweep-left-out">{left_out}</p>
        };
        Some(drawn.into_any())
    })
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;
    use pipes::Material;
    use words::language::Language;
    use workbook::demo::demo;
    use workbook::sweep::Sweep;
    use workbook::units::UnitSystem;

    #[test]
    fn the_demo_sweep_draws_with_its_chosen_pipe() {
        let mut sweep = Sweep::new(&demo("k"));
        let total = sweep.total();
        let rows = sweep.advance(total);
        let words = Words::new(Language::English, UnitSystem::UsCustomary);
        for material in [None, Some(Material::Pe100)] {
            let filter = Filter {
                material,
                fit_only: false,
                ..Filter::default()
            };
            let chosen = vec!["pe100-iso4427/225/sdr17".to_owned()];
            let places = shown(&rows, filter, Some(0.1), &chosen);
            let (chart, drawn) =
                chart_of(&rows, &places, filter, (Some(0.1), None), &chosen, words);
            assert_eq!(chart.points.len(), drawn.len());
            assert_eq!(chart.points.iter().filter(|p| p.chosen).count(), 1);
            let number = |x: f64, d: usize| format!("{x:.d$}");
            assert!(draw(&chart, Size::screen(336.0, 300.0), &number, &number).is_ok());
        }
    }
}
