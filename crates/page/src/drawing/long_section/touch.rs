//! What a finger can hit, and where a crosshair stands.

use super::super::label::Rect;
use super::super::polyline;
use super::layout::Layout;
use super::{LongSection, plain};

/// What was hit; the number is its place in the input.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum HitWhat {
    /// A stretch, by its band.
    Stretch(usize),
    /// A station: a point of the line with `is_station`.
    Station(usize),
    /// A fitting.
    Fitting(usize),
}

/// A box that can be hit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hit {
    /// Left edge in pixels.
    pub x0: f64,
    /// Upper edge.
    pub y0: f64,
    /// Right edge.
    pub x1: f64,
    /// Lower edge.
    pub y1: f64,
    /// What it is.
    pub what: HitWhat,
}

/// Where the crosshair stands.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crosshair {
    /// Chainage there.
    pub chainage: f64,
    /// Pixel of it.
    pub x: f64,
    /// Level of the pipe.
    pub pipe: f64,
    /// Pixel of it.
    pub pipe_y: f64,
    /// Level of the grade line, and its pixel.
    pub grade: Option<(f64, f64)>,
    /// Upper and lower end of the crosshair's line in pixels.
    pub span: (f64, f64),
    /// The nearest station, by its place among the points.
    pub nearest_station: Option<usize>,
}

/// Half of what a thumb needs, in pixels.
const THUMB: f64 = 22.0;

/// The first box that holds the point.
pub(super) fn hit(hits: &[Hit], x: f64, y: f64) -> Option<HitWhat> {
    hits.iter()
        .find(|h| {
            Rect {
                x0: h.x0,
                y0: h.y0,
                x1: h.x1,
                y1: h.y1,
            }
            .holds_point(x, y)
        })
        .map(|h| h.what)
}

/// Fittings on top, then the class band, then the field shared out among the
/// stations at the middle between neighbours.
pub(super) fn hits(section: &LongSection, layout: &Layout) -> Vec<Hit> {
    let line = plain(section);
    let mut hits = Vec::new();
    for (i, f) in section.fittings.iter().enumerate() {
        let y = f.y.or_else(|| polyline::at(&line, f.x));
        if let Some((x, y)) = y.and_then(|y| layout.px((f.x, y))) {
            let half = THUMB * 0.6;
            let what = HitWhat::Fitting(i);
            hits.push(Hit {
                x0: x - half,
                y0: y - half,
                x1: x + half,
                y1: y + half,
                what,
            });
        }
    }
    for (i, s) in section.stretches.iter().enumerate() {
        if let (Some(x0), Some(x1)) = (layout.x.px(s.from), layout.x.px(s.to)) {
            // Down to the edge, and as high as a thumb needs.
            let y1 = layout.size.height;
            let top = y1 - 2.0 * THUMB;
            let y0 = if top < layout.band.0 {
                top
            } else {
                layout.band.0
            };
            hits.push(Hit {
                x0,
                y0,
                x1,
                y1,
                what: HitWhat::Stretch(i),
            });
        }
    }
    let stations: Vec<(usize, f64)> = section
        .points
        .iter()
        .enumerate()
        .filter(|(_, p)| p.is_station)
        .filter_map(|(i, p)| Some((i, layout.x.px(p.x)?)))
        .collect();
    for (k, (i, x)) in stations.iter().enumerate() {
        let before = k.checked_sub(1).and_then(|j| stations.get(j));
        let x0 = before.map_or(0.0, |b| f64::midpoint(b.1, *x));
        let x1 = stations
            .get(k + 1)
            .map_or(layout.size.width, |a| f64::midpoint(a.1, *x));
        hits.push(Hit {
            x0,
            y0: 0.0,
            x1,
            y1: layout.size.height,
            what: HitWhat::Station(*i),
        });
    }
    hits
}

/// What the crosshair needs, kept with the drawing.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Touch {
    line: Vec<(f64, f64)>,
    stations: Vec<(usize, f64)>,
    grade: Vec<(f64, f64)>,
    x: super::super::scale::Scale,
    y: super::super::scale::Scale,
    span: (f64, f64),
}

impl Touch {
    pub(super) fn of(section: &LongSection, layout: &Layout) -> Touch {
        Touch {
            line: plain(section),
            stations: section
                .points
                .iter()
                .enumerate()
                .filter(|(_, p)| p.is_station)
                .map(|(i, p)| (i, p.x))
                .collect(),
            grade: section
                .grade
                .as_ref()
                .map(|g| g.points.clone())
                .unwrap_or_default(),
            x: layout.x,
            y: layout.y,
            span: (layout.field.y0, layout.band.1),
        }
    }

    pub(super) fn pixel_of(&self, chainage: f64) -> Option<(f64, f64)> {
        Some((
            self.x.px(chainage)?,
            self.y.px(polyline::at(&self.line, chainage)?)?,
        ))
    }

    pub(super) fn crosshair(&self, x: f64) -> Option<Crosshair> {
        let (first, last) = (self.line.first()?.0, self.line.last()?.0);
        let asked = self.x.value(x)?;
        let chainage = if asked < first {
            first
        } else if asked > last {
            last
        } else {
            asked
        };
        let (x, pipe_y) = self.pixel_of(chainage)?;
        let grade =
            polyline::at(&self.grade, chainage).and_then(|level| Some((level, self.y.px(level)?)));
        let near = |s: &&(usize, f64)| (s.1 - chainage).abs();
        let nearest_station = self
            .stations
            .iter()
            .min_by(|a, b| near(a).total_cmp(&near(b)))
            .map(|s| s.0);
        Some(Crosshair {
            chainage,
            x,
            pipe: polyline::at(&self.line, chainage)?,
            pipe_y,
            grade,
            span: self.span,
            nearest_station,
        })
    }
}
