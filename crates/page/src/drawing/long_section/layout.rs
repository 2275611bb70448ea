//! Where everything goes: the frame, the scales, the scale on paper.

use super::super::label::{Rect, text_width};
use super::super::scale::Scale;
use super::super::ticks::{Tick, linear_ticks};
use super::super::{DrawingError, NumberFormat, PX_PER_MM, Size, under};
use super::{LongSection, plain};

/// The scale of a print: 1 to these numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PrintScale {
    /// Along the line.
    pub horizontal: f64,
    /// In height.
    pub vertical: f64,
}

/// The frame and both axes.
#[derive(Debug, Clone)]
pub(super) struct Layout {
    pub(super) size: Size,
    /// The field the lines are drawn in.
    pub(super) field: Rect,
    pub(super) x: Scale,
    pub(super) y: Scale,
    /// Upper and lower edge of the class band; the same when there is none.
    pub(super) band: (f64, f64),
    /// Baseline of the chainages.
    pub(super) chainage_baseline: f64,
    pub(super) ticks: Vec<(Tick, String)>,
    pub(super) print_scale: Option<PrintScale>,
}

impl Layout {
    pub(super) fn of(
        section: &LongSection,
        size: Size,
        number: NumberFormat<'_>,
    ) -> Result<Layout, DrawingError> {
        let text = size.text();
        let no_room = DrawingError::NoRoom {
            width: size.width,
            height: size.height,
        };
        let line = plain(section);
        let (from, to) = match (line.first(), line.last()) {
            (Some(a), Some(b)) if b.0 > a.0 => (a.0, b.0),
            _ => {
                return Err(DrawingError::TooFew {
                    found: line.len(),
                    needed: 2,
                });
            }
        };
        let (low, high) = levels(section);

        // Below: band, then chainages.
        let band_height = if section.stretches.is_empty() {
            0.0
        } else {
            text * 1.9
        };
        let chainage_baseline = size.height - text * 0.5;
        let band_bottom = size.height - text * 1.75;
        let band_top = band_bottom - band_height;
        let floor = band_top - text * 0.6;
        let roof = text
            * if section.level_unit.is_empty() {
                0.8
            } else if section.highest_static.is_some() {
                // For two names, one upon the other.
                2.4
            } else {
                1.7
            };
        if under(floor - roof, text * 3.0) {
            return Err(no_room);
        }

        // Room above the highest line for its own label.
        let most = (2..9)
            .take_while(|k| f64::from(*k) * text * 2.4 < floor - roof)
            .count()
            + 1;
        let ticks: Vec<(Tick, String)> = linear_ticks(low, high, most, 1.0)
            .into_iter()
            .map(|t| (t, number(t.reads, t.decimals)))
            .collect();
        let widest = ticks
            .iter()
            .map(|t| text_width(&t.1, text, false))
            .fold(text, f64::max);
        let left = widest + text * 1.0;
        let right = size.width - text * 0.9;
        if under(right - left, text * 6.0) {
            return Err(no_room);
        }

        let field = Rect {
            x0: left,
            y0: roof,
            x1: right,
            y1: floor,
        };
        let none = || no_room;
        let (x, y, print_scale) = if size.print && section.unit_mm > 0.0 {
            on_paper((from, to), (low, high), &field, section.unit_mm).ok_or_else(none)?
        } else {
            let x = Scale::linear((from, to), (left, right)).ok_or_else(none)?;
            let y = Scale::linear((low, high), (floor, roof)).ok_or_else(none)?;
            (x, y, None)
        };
        // At a usual scale the line may need less height than there is: what is
        // below moves up, and the drawing is that much lower.
        let spare = floor - y.pixels().0;
        Ok(Layout {
            size: Size {
                height: size.height - spare,
                ..size
            },
            field: Rect {
                x1: x.pixels().1,
                y1: floor - spare,
                ..field
            },
            x,
            y,
            band: (band_top - spare, band_bottom - spare),
            chainage_baseline: chainage_baseline - spare,
            ticks,
            print_scale,
        })
    }

    /// The pixels of a point; `check` has seen to it that there are some.
    pub(super) fn px(&self, p: (f64, f64)) -> Option<(f64, f64)> {
        Some((self.x.px(p.0)?, self.y.px(p.1)?))
    }

    /// The pixels of a broken line.
    pub(super) fn pxs(&self, points: &[(f64, f64)]) -> Vec<(f64, f64)> {
        points.iter().filter_map(|p| self.px(*p)).collect()
    }

    pub(super) fn exaggeration(&self) -> f64 {
        self.y.px_per_unit() / self.x.px_per_unit()
    }
}

/// The levels to be shown, with room above and below. A line that is level all
/// along still gets a height.
fn levels(section: &LongSection) -> (f64, f64) {
    let (mut low, mut high) = (f64::MAX, f64::MIN);
    let mut see = |y: f64| {
        if y.is_finite() {
            if y < low {
                low = y;
            }
            if y > high {
                high = y;
            }
        }
    };
    for p in &section.points {
        see(p.y);
    }
    for level in section.static_level.iter().chain(&section.highest_static) {
        see(level.y);
    }
    let surge = section.surge.iter().flat_map(|s| [&s.highest, &s.lowest]);
    for line in section.grade.iter().chain(surge) {
        for p in &line.points {
            see(p.1);
        }
    }
    if let Some(point) = &section.lowest {
        see(point.y);
    }
    let span = high - low;
    let length = match (section.points.first(), section.points.last()) {
        (Some(a), Some(b)) => b.x - a.x,
        _ => 1.0,
    };
    // Nothing is exaggerated more than fifty times: a flat line looks flat.
    let least = length / 50.0;
    let span = if span > least { span } else { least };
    (low - span * 0.11, low + span * 1.14)
}

/// Denominators of usual drawing scales: 1, 1.25, 2, 2.5 and 5 to a power of ten where
/// the unit is metric; whole feet to the inch where it is the foot (common
/// practice of both trades). The smallest that is at least `least`.
fn usual_scale(least: f64, unit_mm: f64) -> Option<f64> {
    // 12 times 1, 2, 3, 4, 5, 6 or 10 feet to the inch, times a power of ten.
    let feet = (unit_mm - 304.8).abs() < 1.0;
    let steps: &[f64] = if feet {
        &[12.0, 24.0, 36.0, 48.0, 60.0, 72.0]
    } else {
        &[10.0, 12.5, 20.0, 25.0, 50.0]
    };
    let mut ten = 1.0;
    for _ in 0..9 {
        for s in steps {
            if s * ten >= least {
                return Some(s * ten);
            }
        }
        ten *= 10.0;
    }
    None
}

type OnPaper = (Scale, Scale, Option<PrintScale>);

/// The largest usual scale at which the line fits its field.
fn on_paper(along: (f64, f64), levels: (f64, f64), field: &Rect, unit_mm: f64) -> Option<OnPaper> {
    let unit_px = unit_mm * PX_PER_MM;
    let horizontal = usual_scale(
        (along.1 - along.0) * unit_px / (field.x1 - field.x0),
        unit_mm,
    )?;
    let vertical = usual_scale(
        (levels.1 - levels.0) * unit_px / (field.y1 - field.y0),
        unit_mm,
    )?;
    let width = (along.1 - along.0) * unit_px / horizontal;
    let height = (levels.1 - levels.0) * unit_px / vertical;
    let x = Scale::linear(along, (field.x0, field.x0 + width))?;
    let y = Scale::linear(levels, (field.y0 + height, field.y0))?;
    Some((
        x,
        y,
        Some(PrintScale {
            horizontal,
            vertical,
        }),
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn usual_scales_are_usual() {
        assert_eq!(usual_scale(1.0, 1000.0), Some(10.0));
        assert_eq!(usual_scale(2001.0, 1000.0), Some(2500.0));
        assert_eq!(usual_scale(2500.0, 1000.0), Some(2500.0));
        // 1 inch to 200 feet.
        assert_eq!(usual_scale(1300.0, 304.8), Some(2400.0));
        assert_eq!(usual_scale(1e30, 1000.0), None);
    }
}
