//! The level at a place against time: one line, the level before it, and its
//! highest and lowest points, each named where it is.

use super::label::{Placer, Rect, Words, along, around, text_width};
use super::scale::Scale;
use super::svg::{Anchor, Path, Svg};
use super::ticks::{Tick, linear_ticks};
use super::{DrawingError, NumberFormat, Picture, Size, polyline, under};

/// A point of the course that is pointed out.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct TracePoint {
    /// Time.
    pub time: f64,
    /// Level.
    pub level: f64,
    /// What it says: "97.3 m".
    pub label: String,
}

/// Words of the chart, in the reader's language.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct TraceWords {
    /// At the end of the time axis: "Time s".
    pub time: String,
    /// Over the level axis: "Grade level m".
    pub level: String,
    /// By the level before it begins.
    pub start: String,
    /// Name of the chart.
    pub title: String,
    /// What it shows.
    pub desc: String,
}

/// All that the chart shows, in display units.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Trace {
    /// Time and level; time never goes backwards.
    pub points: Vec<(f64, f64)>,
    /// Level before it begins.
    pub start: f64,
    /// Highest point.
    pub highest: TracePoint,
    /// Lowest point.
    pub lowest: TracePoint,
    /// Words.
    pub words: TraceWords,
}

/// The finished chart.
#[derive(Debug, Clone, PartialEq)]
pub struct TraceDrawing {
    /// The static part.
    pub picture: Picture,
    /// Labels that found no room.
    pub left_out: Vec<String>,
}

struct Axes {
    field: Rect,
    x: Scale,
    y: Scale,
    x_ticks: Vec<(Tick, String)>,
    y_ticks: Vec<(Tick, String)>,
}

/// Draws the chart. `number` writes a time or a level for its axis.
///
/// # Errors
/// [`DrawingError::TooFew`] without two points at different times;
/// [`DrawingError::NotDrawable`] when a number is not finite;
/// [`DrawingError::Backwards`] when time goes back;
/// [`DrawingError::NoRoom`] when the room is too small to be legible.
pub fn draw(
    trace: &Trace,
    size: Size,
    number: NumberFormat<'_>,
) -> Result<TraceDrawing, DrawingError> {
    check(trace)?;
    let axes = axes(trace, size, number)?;
    let text = size.text();
    let mut svg = Svg::new();
    grid(&mut svg, trace, &axes, size);
    let at = |p: (f64, f64)| Some((axes.x.px(p.0)?, axes.y.px(p.1)?));
    let line = thinned(
        &trace
            .points
            .iter()
            .filter_map(|p| at(*p))
            .collect::<Vec<_>>(),
    );
    let mut placer = Placer::new(Rect {
        y0: axes.field.y0 - text,
        ..axes.field
    });
    let mut left_out = Vec::new();
    let before: Vec<(f64, f64)> = axes
        .y
        .px(trace.start)
        .map(|y| vec![(axes.field.x0, y), (axes.field.x1, y)])
        .unwrap_or_default();
    svg.path("d-static", &Path::through(&before));
    svg.path("d-surge", &Path::through(&line));
    placer.avoid(&before, 0.5);
    placer.avoid(&line, 2.0);
    let radius = text * 0.26;
    let points = [&trace.highest, &trace.lowest];
    for place in points.iter().filter_map(|p| at((p.time, p.level))) {
        svg.circle("d-mark", place, radius);
        placer.take(Rect {
            x0: place.0 - radius,
            y0: place.1 - radius,
            x1: place.0 + radius,
            y1: place.1 + radius,
        });
    }
    for point in points {
        let Some(place) = at((point.time, point.level)) else {
            continue;
        };
        let words = Words {
            text: &point.label,
            class: "d-text d-surge-text d-halo",
            size: text,
            strong: false,
        };
        let places = around(place.0, place.1, radius + text * 0.3, text);
        if placer.write(&mut svg, &words, &places).is_none() {
            left_out.push(point.label.clone());
        }
    }
    let words = Words {
        text: &trace.words.start,
        class: "d-text d-soft d-halo",
        size: text,
        strong: false,
    };
    let places = along(&before, &words, 2.0, &[1.0, 0.75, 0.5, 0.25, 0.0], false);
    if placer.write(&mut svg, &words, &places).is_none() {
        left_out.push(trace.words.start.clone());
    }
    Ok(TraceDrawing {
        picture: Picture {
            svg: svg.finish(),
            width: size.width,
            height: size.height,
            title: trace.words.title.clone(),
            desc: trace.words.desc.clone(),
        },
        left_out,
    })
}

fn check(trace: &Trace) -> Result<(), DrawingError> {
    let points = &trace.points;
    let finite = |p: &(f64, f64)| p.0.is_finite() && p.1.is_finite();
    if let Some(index) = points.iter().position(|p| !finite(p)) {
        return Err(DrawingError::NotDrawable { index });
    }
    if let Some(index) = polyline::first_backwards(points) {
        return Err(DrawingError::Backwards { index });
    }
    match (points.first(), points.last()) {
        (Some(a), Some(b)) if b.0 > a.0 => Ok(()),
        _ => Err(DrawingError::TooFew {
            found: points.len().min(1),
            needed: 2,
        }),
    }
}

fn axes(trace: &Trace, size: Size, number: NumberFormat<'_>) -> Result<Axes, DrawingError> {
    let text = size.text();
    let no_room = DrawingError::NoRoom {
        width: size.width,
        height: size.height,
    };
    let (roof, floor) = (text * 1.9, size.height - text * 1.9);
    if under(floor - roof, text * 3.0) {
        return Err(no_room);
    }
    let from = trace.points.first().map_or(0.0, |p| p.0);
    let to = trace.points.last().map_or(1.0, |p| p.0);
    let seen = trace
        .points
        .iter()
        .map(|p| p.1)
        .chain([trace.start, trace.highest.level, trace.lowest.level])
        .filter(|y| y.is_finite());
    let (low, high) = seen.fold((f64::MAX, f64::MIN), |(lo, hi), y| {
        (if y < lo { y } else { lo }, if y > hi { y } else { hi })
    });
    // A level that does not move still gets a height.
    let span = if high - low > 0.1 { high - low } else { 0.1 };
    let (low, high) = (low - span * 0.12, low + span * 1.12);
    let written = |ticks: Vec<Tick>| -> Vec<(Tick, String)> {
        ticks
            .into_iter()
            .map(|t| (t, number(t.reads, t.decimals)))
            .collect()
    };
    let y_ticks = written(linear_ticks(low, high, 5, 1.0));
    let widest = y_ticks
        .iter()
        .map(|t| text_width(&t.1, text, false))
        .fold(text, f64::max);
    let (left, right) = (widest + text, size.width - text * 0.9);
    if under(right - left, text * 6.0) {
        return Err(no_room);
    }
    Ok(Axes {
        field: Rect {
            x0: left,
            y0: roof,
            x1: right,
            y1: floor,
        },
        x: Scale::linear((from, to), (left, right)).ok_or(no_room)?,
        y: Scale::linear((low, high), (floor, roof)).ok_or(no_room)?,
        x_ticks: written(linear_ticks(from, to, 6, 1.0)),
        y_ticks,
    })
}

fn grid(svg: &mut Svg, trace: &Trace, axes: &Axes, size: Size) {
    const SOFT: &str = "d-text d-soft";
    let (text, field) = (size.text(), axes.field);
    for (tick, label) in &axes.y_ticks {
        let Some(y) = axes.y.px(tick.value) else {
            continue;
        };
        svg.line("d-grid", (field.x0, y), (field.x1, y));
        let at = (field.x0 - text * 0.5, y + text * 0.36);
        svg.text(SOFT, at, Anchor::End, text, label);
    }
    svg.text(
        SOFT,
        (text * 0.4, text),
        Anchor::Start,
        text,
        &trace.words.level,
    );
    // The name of the axis ends the row; ticks that would touch it go without
    // words.
    let baseline = size.height - text * 0.5;
    let end = size.width - text * 0.5;
    svg.text(SOFT, (end, baseline), Anchor::End, text, &trace.words.time);
    let free_until = end - text_width(&trace.words.time, text, false) - text * 0.6;
    for (tick, label) in &axes.x_ticks {
        let Some(x) = axes.x.px(tick.value) else {
            continue;
        };
        svg.line("d-grid", (x, field.y0), (x, field.y1));
        if x + text_width(label, text, false) / 2.0 <= free_until {
            svg.text(SOFT, (x, baseline), Anchor::Middle, text, label);
        }
    }
}

/// At most four points a pixel column: its first, last, highest and lowest.
/// More cannot be seen, and a long run has thousands.
fn thinned(line: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let mut kept: Vec<(f64, f64)> = Vec::new();
    let mut i = 0;
    while i < line.len() {
        let column = line[i].0.floor();
        let end = i + line[i..].partition_point(|p| p.0 < column + 1.0).max(1);
        let (mut top, mut foot) = (i, i);
        for k in i..end {
            if line[k].1 < line[top].1 {
                top = k;
            }
            if line[k].1 > line[foot].1 {
                foot = k;
            }
        }
        let mut places = [i, top, foot, end - 1];
        places.sort_unstable();
        for (n, place) in places.iter().enumerate() {
            if n == 0 || *place != places[n - 1] {
                kept.push(line[*place]);
            }
        }
        i = end;
    }
    kept
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::drawing::samples::cases;
    use proptest::prelude::*;

    fn number(x: f64, decimals: usize) -> String {
        format!("{x:.decimals$}")
    }

    fn wave(points: u32) -> Trace {
        let at = |i: u32| {
            let t = f64::from(i) * 20.0 / f64::from(points - 1);
            (t, 80.0 + if i.is_multiple_of(3) { 14.0 } else { -6.0 })
        };
        Trace {
            points: (0..points).map(at).collect(),
            start: 80.0,
            highest: TracePoint {
                time: 0.0,
                level: 94.0,
                label: "94.0 m".into(),
            },
            lowest: TracePoint {
                time: 1.0,
                level: 74.0,
                label: "74.0 m".into(),
            },
            words: TraceWords {
                time: "Time s".into(),
                level: "Grade level m".into(),
                start: "before".into(),
                title: "At the foot".into(),
                desc: "Invented.".into(),
            },
        }
    }

    #[test]
    fn a_chart_names_its_extremes_and_axes() {
        let drawing = draw(&wave(400), Size::screen(336.0, 200.0), &number).unwrap();
        let svg = &drawing.picture.svg;
        for word in ["94.0 m", "74.0 m", "Time s", "Grade level m"] {
            assert!(svg.contains(word), "{word}");
        }
        assert!(!svg.contains("style="));
    }

    #[test]
    fn thinning_keeps_every_peak_a_pixel_can_show() {
        let line: Vec<(f64, f64)> = (0..5000)
            .map(|i| (f64::from(i) * 0.05, if i == 2718 { 3.0 } else { 50.0 }))
            .collect();
        let kept = thinned(&line);
        assert!(kept.len() <= 4 * 251);
        assert!(kept.contains(&line[2718]));
        assert!(kept.windows(2).all(|w| w[0].0 <= w[1].0));
        assert_eq!((kept[0], kept[kept.len() - 1]), (line[0], line[4999]));
        assert_eq!(thinned(&[]), []);
    }

    #[test]
    fn what_cannot_be_drawn_says_why() {
        let size = Size::screen(336.0, 200.0);
        let mut trace = wave(10);
        trace.points[4].1 = f64::NAN;
        assert_eq!(
            draw(&trace, size, &number),
            Err(DrawingError::NotDrawable { index: 4 })
        );
        trace = wave(10);
        trace.points.swap(2, 3);
        assert!(matches!(
            draw(&trace, size, &number),
            Err(DrawingError::Backwards { .. })
        ));
        trace.points.clear();
        assert!(matches!(
            draw(&trace, size, &number),
            Err(DrawingError::TooFew { .. })
        ));
        assert!(matches!(
            draw(&wave(10), Size::screen(40.0, 30.0), &number),
            Err(DrawingError::NoRoom { .. })
        ));
    }

    proptest! {
        #![proptest_config(cases())]
        #[test]
        fn any_course_draws_or_says_why(
            levels in prop::collection::vec(-1e4_f64..1e4, 0..60),
            width in 0.0_f64..900.0, height in 0.0_f64..400.0,
        ) {
            let points: Vec<(f64, f64)> =
                levels.iter().enumerate().map(|(i, y)| (i as f64 * 0.1, *y)).collect();
            let trace = Trace { points, ..wave(2) };
            if let Ok(drawing) = draw(&trace, Size::screen(width, height), &number) {
                prop_assert!(!drawing.picture.svg.contains("NaN"));
            }
        }
    }
}
