//! The signs of what sits on a line: small, filled with paper, and different in
//! outline. In the manner of usual piping signs (common practice).

use super::super::svg::{Path, Svg};
use super::Glyph;

/// How far a sign reaches above and below its point, in units of its size.
pub(super) const fn reach(glyph: Glyph) -> (f64, f64) {
    match glyph {
        Glyph::Vent => (3.4, 0.6),
        Glyph::Drain => (0.6, 2.5),
        Glyph::Anchor => (0.7, 1.5),
        _ => (1.3, 1.3),
    }
}

/// Draws a sign at a point of the line; `s` is about half its size.
pub(super) fn draw(svg: &mut Svg, glyph: Glyph, at: (f64, f64), s: f64) {
    let (x, y) = at;
    let mut path = Path::new();
    let mut corners = |points: &[(f64, f64)]| {
        for (i, (dx, dy)) in points.iter().enumerate() {
            let to = (x + dx * s, y + dy * s);
            if i == 0 {
                path.move_to(to);
            } else {
                path.line_to(to);
            }
        }
        path.close();
    };
    match glyph {
        // Two triangles that meet.
        Glyph::Valve => corners(&[(-1.2, -0.8), (1.2, 0.8), (1.2, -0.8), (-1.2, 0.8)]),
        // A body that narrows.
        Glyph::Reducer => corners(&[(-0.8, -1.0), (0.8, -0.5), (0.8, 0.5), (-0.8, 1.0)]),
        // Bars across the flow.
        Glyph::Rack => {
            corners(&[(-0.6, -1.2), (0.6, -1.2), (0.6, 1.2), (-0.6, 1.2)]);
            for k in [-0.6, 0.0, 0.6] {
                path.stroke((x - 0.6 * s, y + k * s), (x + 0.6 * s, y + k * s));
            }
        }
        // A stem with a cap, above the line.
        Glyph::Vent => {
            path.stroke((x, y), (x, y - 2.0 * s));
            path.circle((x, y - 2.6 * s), 0.62 * s);
        }
        // A stem with a drop, below it.
        Glyph::Drain => {
            path.stroke((x, y), (x, y + 1.2 * s));
            for (i, (dx, dy)) in [(-0.7, 1.2), (0.7, 1.2), (0.0, 2.3)].iter().enumerate() {
                let to = (x + dx * s, y + dy * s);
                if i == 0 {
                    path.move_to(to);
                } else {
                    path.line_to(to);
                }
            }
            path.close();
        }
        Glyph::Bend => path.circle(at, 0.55 * s),
        // A block under the line.
        Glyph::Anchor => corners(&[(-1.0, -0.5), (1.0, -0.5), (1.3, 1.3), (-1.3, 1.3)]),
        // A nose that points onward.
        Glyph::Jet => corners(&[(-1.1, -0.9), (0.5, -0.3), (0.5, 0.3), (-1.1, 0.9)]),
        Glyph::Other => corners(&[(-0.7, -0.7), (0.7, -0.7), (0.7, 0.7), (-0.7, 0.7)]),
    }
    svg.path("d-mark", &path);
}
