//! The sweep: what every pipe would lose, against its bore.
//!
//! Both axes are logarithmic, so that pipes of one series fall on a nearly
//! straight band and small losses are read as well as large ones. A family (one
//! pressure class, one series) has a shape of its own. An outline that is broken
//! is unsettled, as everywhere; a pipe that fails is struck through; one that
//! another pipe beats in every way is small and light, and one whose mark would lie
//! over another is a tick, so that seven hundred points still read. The loss cap is the strongest line: it is what the
//! installer decided. Greatest power is a curiosity and stays quiet.

mod key;
mod paint;
mod thin;

use super::label::Rect;
use super::scale::Scale;
use super::ticks::{Tick, logarithmic_ticks};
use super::{DrawingError, NumberFormat, Picture, Size, Verdict, under};
use thin::Role;

/// One pipe.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SweepPoint {
    /// Bore in the display unit (mm or in).
    pub bore: f64,
    /// Share of the gross head lost, 0 to 1; more than [`MOST_SHARE`] is above the
    /// chart.
    pub loss_share: f64,
    /// Its family, by place in [`SweepChart::families`].
    pub family: usize,
    /// What it came to.
    pub verdict: Verdict,
    /// Whether another pipe is at least as good in every way that is judged.
    pub dominated: bool,
    /// Whether it is the one chosen.
    pub chosen: bool,
}

/// A limit drawn across.
#[derive(Debug, Clone, PartialEq)]
pub struct Limit {
    /// Share of the gross head.
    pub share: f64,
    /// What it says: "loss cap 10 %".
    pub label: String,
}

/// Words of the chart, in the reader's language.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct SweepWords {
    /// Over the bore axis, at its end: "bore mm".
    pub bore: String,
    /// Over the loss axis: "loss, of gross head".
    pub loss: String,
    /// By the chosen point: "PE100 225 SDR 11".
    pub chosen: String,
    /// In the key, for points struck through.
    pub fails: String,
    /// In the key, for broken outlines.
    pub unsettled: String,
    /// In the key, for half-filled points.
    pub tight: String,
    /// In the key, for small light points.
    pub dominated: String,
    /// In the key, for ticks.
    pub more: String,
    /// Name of the chart.
    pub title: String,
    /// What it shows.
    pub desc: String,
}

/// All that the chart shows.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct SweepChart {
    /// The pipes; those the page has filtered away are simply not in it.
    pub points: Vec<SweepPoint>,
    /// Names of the families: "SDR 11".
    pub families: Vec<String>,
    /// The cap on the loss.
    pub cap: Option<Limit>,
    /// Where the power is greatest: a loss of one third of the gross head (for a
    /// loss that goes with the square of the flow).
    pub greatest_power: Option<Limit>,
    /// Words.
    pub words: SweepWords,
}

/// Points that are not in the picture, counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct NotShown {
    /// They lose more than [`MOST_SHARE`] of the head.
    pub above: usize,
    /// They lose so little that no one decides by it.
    pub below: usize,
    /// They have no loss or no bore that could be drawn.
    pub without: usize,
}

/// The finished chart.
#[derive(Debug, Clone, PartialEq)]
pub struct SweepDrawing {
    /// The static part.
    pub picture: Picture,
    /// How many points are not in the picture, so that the page can say so.
    pub not_shown: NotShown,
    /// How many are ticks, for want of room.
    pub ticks: usize,
    /// Labels that found no room.
    pub left_out: Vec<String>,
    /// Pixels of each point, in the order of the input; `None` when not shown.
    pixels: Vec<Option<(f64, f64)>>,
    lesser: Vec<bool>,
    field: Rect,
}

impl SweepDrawing {
    /// The point nearest to a pointer, if one lies within a thumb's reach of it.
    /// A small light point must be clearly nearer than a full one to be picked.
    #[must_use]
    pub fn nearest(&self, x: f64, y: f64) -> Option<usize> {
        const REACH: f64 = 36.0;
        const HANDICAP: f64 = 6.0;
        self.pixels
            .iter()
            .zip(&self.lesser)
            .enumerate()
            .filter_map(|(i, (at, lesser))| {
                let at = (*at)?;
                let (dx, dy) = (at.0 - x, at.1 - y);
                let away = (dx * dx + dy * dy).sqrt() + if *lesser { HANDICAP } else { 0.0 };
                (away <= REACH).then_some((i, away))
            })
            .min_by(|a, b| a.1.total_cmp(&b.1))
            .map(|(i, _)| i)
    }

    /// Where a point stands, for a ring around the one that is touched.
    #[must_use]
    pub fn pixel_of(&self, index: usize) -> Option<(f64, f64)> {
        *self.pixels.get(index)?
    }

    /// The box the points lie in: left, top, right, bottom.
    #[must_use]
    pub const fn field(&self) -> (f64, f64, f64, f64) {
        (self.field.x0, self.field.y0, self.field.x1, self.field.y1)
    }
}

/// Frame, scales and ticks.
#[derive(Debug, Clone)]
struct Layout {
    size: Size,
    field: Rect,
    x: Scale,
    y: Scale,
    x_ticks: Vec<(Tick, String)>,
    y_ticks: Vec<(Tick, String)>,
    bore_baseline: f64,
    key: key::Key,
}

/// Draws the chart. `bore` writes a bore for its axis, `percent` a percentage
/// with its sign.
///
/// # Errors
/// [`DrawingError::TooFew`] when no point can be shown,
/// [`DrawingError::NoRoom`] when the room is too small to be legible.
pub fn draw(
    chart: &SweepChart,
    size: Size,
    bore: NumberFormat<'_>,
    percent: NumberFormat<'_>,
) -> Result<SweepDrawing, DrawingError> {
    let mut layout = Layout::of(chart, size, bore, percent, None)?;
    let mut pixels = layout.pixels(chart);
    let mut roles = layout.roles(chart, &pixels);
    if roles.contains(&Role::Tick) {
        // The key tells of ticks, and names no family that is ticks alone: it
        // takes other room, and the field with it.
        layout = Layout::of(chart, size, bore, percent, Some(&roles))?;
        pixels = layout.pixels(chart);
        roles = layout.roles(chart, &pixels);
    }
    let painted = paint::paint(chart, &layout, &pixels, &roles);
    Ok(SweepDrawing {
        picture: Picture {
            svg: painted.svg,
            width: size.width,
            height: size.height,
            title: chart.words.title.clone(),
            desc: chart.words.desc.clone(),
        },
        not_shown: count_not_shown(chart, &pixels),
        ticks: roles.iter().filter(|r| **r == Role::Tick).count(),
        left_out: painted.left_out,
        pixels,
        lesser: roles
            .iter()
            .map(|r| matches!(r, Role::Light | Role::Tick))
            .collect(),
        field: layout.field,
    })
}

fn count_not_shown(chart: &SweepChart, pixels: &[Option<(f64, f64)>]) -> NotShown {
    let mut counts = NotShown::default();
    for (p, _) in chart
        .points
        .iter()
        .zip(pixels)
        .filter(|(_, at)| at.is_none())
    {
        let counted = if !(p.bore > 0.0 && p.bore.is_finite() && p.loss_share >= 0.0) {
            &mut counts.without
        } else if p.loss_share > MOST_SHARE {
            &mut counts.above
        } else {
            &mut counts.below
        };
        *counted += 1;
    }
    counts
}

fn is_drawable(p: &SweepPoint) -> bool {
    p.bore > 0.0 && p.bore.is_finite() && p.loss_share > 0.0 && p.loss_share <= 1.0
}

/// Losses below the cap by more than this factor are not shown: a catalogue runs
/// to bores where the loss is nothing, and a chart that followed it there would
/// have no room for what is decided.
const BELOW_CAP: f64 = 15.0;
/// A loss above this share of the head is not shown: beyond one third more loss
/// means less power, and no one goes that far.
pub const MOST_SHARE: f64 = 0.6;
/// Losses under this share of the head are not shown.
#[must_use]
pub fn least_share(cap: Option<f64>) -> f64 {
    let usable = cap.filter(|c| *c > 0.0 && *c <= 1.0);
    usable.unwrap_or(USUAL_CAP) / BELOW_CAP
}

/// What stands in for the cap where there is none: one tenth of the head (common
/// practice).
const USUAL_CAP: f64 = 0.1;

/// How many of `most` fit when each takes `each` of `room`.
fn how_many(room: f64, each: f64, most: usize) -> usize {
    (1..=most).take_while(|k| *k as f64 * each <= room).count()
}

impl Layout {
    fn of(
        chart: &SweepChart,
        size: Size,
        bore: NumberFormat<'_>,
        percent: NumberFormat<'_>,
        roles: Option<&[Role]>,
    ) -> Result<Layout, DrawingError> {
        let text = size.text();
        let no_room = DrawingError::NoRoom {
            width: size.width,
            height: size.height,
        };
        let (bores, losses) = ranges(chart).ok_or(DrawingError::TooFew {
            found: 0,
            needed: 1,
        })?;

        let right = size.width - text * 0.9;
        let key = key::Key::of(chart, roles, size, right - text * 0.5);
        let roof = text
            * if chart.words.loss.is_empty() {
                1.0
            } else {
                2.1
            };
        let bore_baseline = size.height - key.height - text * 0.5;
        let floor = bore_baseline - text * 1.25;
        if under(floor - roof, text * 4.0) {
            return Err(no_room);
        }
        let most = how_many(floor - roof, text * 2.2, 10).max(2);
        let y_ticks: Vec<(Tick, String)> = logarithmic_ticks(losses.0, losses.1, most, 100.0)
            .into_iter()
            .map(|t| (t, percent(t.reads, t.decimals)))
            .collect();
        let widest = y_ticks
            .iter()
            .map(|t| super::label::text_width(&t.1, text, false))
            .fold(text, f64::max);
        let left = widest + text;
        if under(right - left, text * 8.0) {
            return Err(no_room);
        }
        let most = how_many(right - left, text * 3.0, 14).max(2);
        let x_ticks = logarithmic_ticks(bores.0, bores.1, most, 1.0)
            .into_iter()
            .map(|t| (t, bore(t.reads, t.decimals)))
            .collect();
        let none = || no_room;
        Ok(Layout {
            size,
            field: Rect {
                x0: left,
                y0: roof,
                x1: right,
                y1: floor,
            },
            x: Scale::logarithmic(bores, (left, right)).ok_or_else(none)?,
            y: Scale::logarithmic(losses, (floor, roof)).ok_or_else(none)?,
            x_ticks,
            y_ticks,
            bore_baseline,
            key,
        })
    }
}

impl Layout {
    /// Where each point stands; `None` for those not in the picture.
    fn pixels(&self, chart: &SweepChart) -> Vec<Option<(f64, f64)>> {
        let at = |p: &SweepPoint| {
            if !is_drawable(p) {
                return None;
            }
            let at = (self.x.px(p.bore)?, self.y.px(p.loss_share)?);
            self.field.holds_point(at.0, at.1).then_some(at)
        };
        chart.points.iter().map(at).collect()
    }

    /// How each point is drawn, that no mark lies over another.
    fn roles(&self, chart: &SweepChart, pixels: &[Option<(f64, f64)>]) -> Vec<Role> {
        let scale = self.size.text() / 12.0;
        thin::roles(chart, pixels, (12.0 * scale, 6.5 * scale, 19.0 * scale))
    }
}

type Ranges = ((f64, f64), (f64, f64));

/// Bores and losses with a margin, so that no shape is cut by the edge; the
/// limits are always in.
fn ranges(chart: &SweepChart) -> Option<Ranges> {
    let least = least_share(chart.cap.as_ref().map(|c| c.share));
    // The window gives way to the chosen one, and to a chart with nothing in it.
    let inside = |p: &SweepPoint| p.loss_share >= least && p.loss_share <= MOST_SHARE;
    let none_inside = !chart.points.iter().any(|p| is_drawable(p) && inside(p));
    let counts = |p: &&SweepPoint| is_drawable(p) && (none_inside || inside(p) || p.chosen);
    let (mut bores, mut losses) = ((f64::MAX, 0.0_f64), (f64::MAX, 0.0_f64));
    let widen = |range: &mut (f64, f64), v: f64| {
        *range = (
            if v < range.0 { v } else { range.0 },
            if v > range.1 { v } else { range.1 },
        );
    };
    for p in chart.points.iter().filter(counts) {
        widen(&mut bores, p.bore);
        widen(&mut losses, p.loss_share);
    }
    if bores.1 <= 0.0 {
        return None;
    }
    for limit in chart.cap.iter().chain(&chart.greatest_power) {
        if limit.share > 0.0 && limit.share <= 1.0 {
            widen(&mut losses, limit.share);
        }
    }
    let top = (losses.1 * 1.35).min(1.0);
    Some((
        (bores.0 / 1.07, bores.1 * 1.07),
        (
            losses.0 / 1.35,
            if top > losses.0 { top } else { losses.0 * 1.35 },
        ),
    ))
}

#[cfg(test)]
mod tests;
