//! The shapes that tell families of pipe apart before any colour does.

use super::svg::Path;

/// A shape for a family of points.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Shape {
    /// A circle.
    Circle,
    /// A square.
    Square,
    /// A triangle standing on its side.
    Triangle,
    /// A square on its corner.
    Diamond,
    /// A triangle standing on its corner.
    Wedge,
    /// A six-sided figure.
    Hexagon,
    /// An upright cross, outlined.
    Cross,
    /// A house.
    House,
    /// A lying bar.
    Flat,
    /// A standing bar.
    Tall,
    /// A triangle that points left.
    Left,
    /// A triangle that points right.
    Right,
}

impl Shape {
    /// All of them, in the order they are given out.
    pub const ALL: [Shape; 12] = [
        Shape::Circle,
        Shape::Square,
        Shape::Triangle,
        Shape::Diamond,
        Shape::Wedge,
        Shape::Hexagon,
        Shape::Cross,
        Shape::House,
        Shape::Flat,
        Shape::Tall,
        Shape::Left,
        Shape::Right,
    ];

    /// The shape of the family at this place; they repeat after the twelfth.
    #[must_use]
    pub const fn of(family: usize) -> Shape {
        Shape::ALL[family % Shape::ALL.len()]
    }

    /// Its outline around a centre. `r` is the radius of a circle of the same
    /// weight to the eye.
    pub fn outline(self, path: &mut Path, centre: (f64, f64), r: f64) {
        let corners: &[(f64, f64)] = match self {
            Shape::Circle => return path.circle(centre, r),
            Shape::Square => &[(-0.88, -0.88), (0.88, -0.88), (0.88, 0.88), (-0.88, 0.88)],
            Shape::Triangle => &[(0.0, -1.2), (1.1, 0.8), (-1.1, 0.8)],
            Shape::Diamond => &[(0.0, -1.25), (1.25, 0.0), (0.0, 1.25), (-1.25, 0.0)],
            Shape::Wedge => &[(0.0, 1.2), (1.1, -0.8), (-1.1, -0.8)],
            Shape::Hexagon => &[
                (-1.1, 0.0),
                (-0.55, -0.95),
                (0.55, -0.95),
                (1.1, 0.0),
                (0.55, 0.95),
                (-0.55, 0.95),
            ],
            Shape::Cross => &[
                (-0.4, -1.1),
                (0.4, -1.1),
                (0.4, -0.4),
                (1.1, -0.4),
                (1.1, 0.4),
                (0.4, 0.4),
                (0.4, 1.1),
                (-0.4, 1.1),
                (-0.4, 0.4),
                (-1.1, 0.4),
                (-1.1, -0.4),
                (-0.4, -0.4),
            ],
            Shape::Flat => &[(-1.35, -0.55), (1.35, -0.55), (1.35, 0.55), (-1.35, 0.55)],
            Shape::Tall => &[(-0.55, -1.35), (0.55, -1.35), (0.55, 1.35), (-0.55, 1.35)],
            Shape::Left => &[(-1.2, 0.0), (0.8, -1.1), (0.8, 1.1)],
            Shape::Right => &[(1.2, 0.0), (-0.8, -1.1), (-0.8, 1.1)],
            Shape::House => &[
                (-0.9, 0.95),
                (-0.9, -0.2),
                (0.0, -1.15),
                (0.9, -0.2),
                (0.9, 0.95),
            ],
        };
        for (i, (dx, dy)) in corners.iter().enumerate() {
            let at = (centre.0 + dx * r, centre.1 + dy * r);
            if i == 0 {
                path.move_to(at);
            } else {
                path.line_to(at);
            }
        }
        path.close();
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_two_shapes_are_the_same() {
        let drawn: Vec<Path> = Shape::ALL
            .iter()
            .map(|s| {
                let mut p = Path::new();
                s.outline(&mut p, (10.0, 10.0), 5.0);
                p
            })
            .collect();
        for (i, a) in drawn.iter().enumerate() {
            assert!(drawn[i + 1..].iter().all(|b| a != b));
        }
        assert_eq!(Shape::of(12), Shape::of(0));
    }
}
