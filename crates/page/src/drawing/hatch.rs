//! Hatching as plain strokes, cut by geometry: no pattern, no clip path and so
//! no id that could clash on a page.

use super::polyline;
use super::svg::Path;

/// Strokes at 45 degrees, rising to the right, `spacing` pixels apart along x,
/// in the band between the line `top` and the line `bottom` (pixels, y down,
/// both going forward in x). Where `bottom` lies above `top` nothing is drawn.
#[must_use]
pub fn between(top: &[(f64, f64)], bottom: &[(f64, f64)], spacing: f64) -> Path {
    let mut path = Path::new();
    let (Some(first), Some(last)) = (top.first(), top.last()) else {
        return path;
    };
    let ys = || top.iter().chain(bottom).map(|p| p.1);
    let (least, most) = ys().fold((f64::MAX, f64::MIN), |(lo, hi), y| {
        (if y < lo { y } else { lo }, if y > hi { y } else { hi })
    });
    if !(spacing > 0.5 && least <= most) {
        return path;
    }
    // A stroke is all points with x + y = c. Fixed to whole multiples of the
    // spacing, so that it does not crawl when the line is edited.
    let mut c = ((first.0 + least) / spacing).ceil() * spacing;
    while c <= last.0 + most {
        stroke(&mut path, top, bottom, c);
        c += spacing;
    }
    path
}

/// The same from `top` down to a depth in pixels below it.
#[must_use]
pub fn under(top: &[(f64, f64)], depth: f64, spacing: f64) -> Path {
    let bottom: Vec<(f64, f64)> = top.iter().map(|p| (p.0, p.1 + depth)).collect();
    between(top, &bottom, spacing)
}

/// How far the point of stroke `c` at `x` is inside: the lesser of its distances
/// from the edges, negative outside.
fn inside(top: &[(f64, f64)], bottom: &[(f64, f64)], c: f64, x: f64) -> Option<f64> {
    let y = c - x;
    let (below_top, above_bottom) = (y - polyline::at(top, x)?, polyline::at(bottom, x)? - y);
    Some(if below_top < above_bottom {
        below_top
    } else {
        above_bottom
    })
}

/// Adds the pieces of stroke `c`. Along it `inside` is straight between the
/// corners of both lines and where they change places, so it is enough to look
/// at those.
fn stroke(path: &mut Path, top: &[(f64, f64)], bottom: &[(f64, f64)], c: f64) {
    let mut xs: Vec<f64> = Vec::new();
    for line in [top, bottom] {
        for w in line.windows(2) {
            let (a, b) = (w[0], w[1]);
            xs.push(a.0);
            xs.push(b.0);
            // Where the stroke crosses this piece: a + t (b - a) has x + y = c.
            let slope = (b.0 - a.0) + (b.1 - a.1);
            let t = (c - a.0 - a.1) / slope;
            if t > 0.0 && t < 1.0 {
                xs.push(a.0 + t * (b.0 - a.0));
            }
        }
    }
    xs.sort_by(f64::total_cmp);
    let mut begun: Option<f64> = None;
    for w in xs.windows(2) {
        let (a, b) = (w[0], w[1]);
        if b - a < 1e-6 {
            continue;
        }
        let is_inside = inside(top, bottom, c, f64::midpoint(a, b)).is_some_and(|d| d > 0.0);
        match (is_inside, begun) {
            (true, None) => begun = Some(a),
            (false, Some(from)) => {
                piece(path, c, from, a);
                begun = None;
            }
            _ => {}
        }
    }
    if let (Some(from), Some(to)) = (begun, xs.last()) {
        piece(path, c, from, *to);
    }
}

fn piece(path: &mut Path, c: f64, from: f64, to: f64) {
    // Specks are noise.
    if to - from > 0.7 {
        path.stroke((from, c - from), (to, c - to));
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn ends(path: &Path) -> Vec<(f64, f64)> {
        let mut svg = super::super::svg::Svg::new();
        svg.path("h", path);
        let text = svg.finish();
        let Some(d) = text.split(" d=\"").nth(1).and_then(|t| t.split('"').next()) else {
            return Vec::new();
        };
        d.split(['M', 'L'])
            .filter(|s| !s.is_empty())
            .map(|s| {
                let (x, y) = s.split_once(' ').unwrap();
                (x.parse().unwrap(), y.parse().unwrap())
            })
            .collect()
    }

    #[test]
    fn every_stroke_stays_under_the_line_and_above_the_floor() {
        let top = [(0.0, 20.0), (30.0, 60.0), (60.0, 10.0), (100.0, 80.0)];
        let bottom = [(0.0, 90.0), (100.0, 90.0)];
        let strokes = ends(&between(&top, &bottom, 7.0));
        assert!(strokes.len() > 20);
        for (x, y) in strokes {
            assert!(y >= polyline::at(&top, x).unwrap() - 0.05, "{x} {y}");
            assert!(y <= 90.05 && (0.0..=100.0).contains(&x), "{x} {y}");
        }
    }

    #[test]
    fn a_stroke_is_cut_in_two_by_a_trough() {
        // A stroke of slope 1 meets the rise of the line twice.
        let top = [
            (0.0, 50.0),
            (40.0, 50.0),
            (50.0, 0.0),
            (60.0, 50.0),
            (100.0, 50.0),
        ];
        let bottom = [(0.0, 60.0), (100.0, 60.0)];
        let strokes = ends(&between(&top, &bottom, 5.0));
        assert!(strokes.iter().any(|p| p.1 < 49.0), "the peak is hatched");
        assert!(
            strokes
                .iter()
                .all(|p| p.1 >= polyline::at(&top, p.0).unwrap() - 0.05)
        );
    }

    #[test]
    fn nothing_where_the_band_is_turned_over() {
        assert_eq!(
            between(
                &[(0.0, 50.0), (9.0, 50.0)],
                &[(0.0, 40.0), (9.0, 40.0)],
                5.0
            ),
            Path::new()
        );
        assert_eq!(between(&[], &[], 5.0), Path::new());
        assert_eq!(under(&[(0.0, 5.0), (50.0, 5.0)], 10.0, 0.0), Path::new());
    }
}
