//! Thinning of a track: the fewest stations that keep every fix within a
//! tolerance of the straight lines between them.
//!
//! Source: Douglas, D. and Peucker, T. (1973), Algorithms for the reduction of
//! the number of points required to represent a digitized line or its
//! caricature, Cartographica 10(2), 112-122; here in space, plan and level
//! together, because a pipe bends either way.

use hydraulics::math;

/// A point of the track: north, east and level, m.
pub type Point = [f64; 3];

/// Tolerance taken where none is chosen, m: about what one fix of a hand-held
/// receiver is sure to on the plan, under open sky (common practice).
pub const USUAL_TOLERANCE_M: f64 = 5.0;

/// Which of the points stay, in their order: those marked in `pinned`, the
/// first and the last always. Every point that goes lies within `tolerance_m`
/// of the line between those that stay beside it.
///
/// None where more than `most` would stay: the work is at most `most` times
/// the number of points.
///
/// # Panics
/// Never: `pinned` that is shorter than `points` pins no more of them.
#[must_use]
pub fn thin(
    points: &[Point],
    pinned: &[bool],
    tolerance_m: f64,
    most: usize,
) -> Option<Vec<usize>> {
    let Some(end) = points.len().checked_sub(1) else {
        return Some(Vec::new());
    };
    let mut stays: Vec<usize> = (0..=end)
        .filter(|i| *i == 0 || *i == end || pinned.get(*i).copied().unwrap_or(false))
        .collect();
    let mut spans: Vec<(usize, usize)> = stays.windows(2).map(|w| (w[0], w[1])).collect();
    while let Some((from, to)) = spans.pop() {
        if stays.len() > most {
            return None;
        }
        let mut farthest = (tolerance_m, from);
        for i in from + 1..to {
            let off = off_line(points[i], points[from], points[to]);
            if off > farthest.0 {
                farthest = (off, i);
            }
        }
        if farthest.1 > from {
            stays.push(farthest.1);
            spans.push((from, farthest.1));
            spans.push((farthest.1, to));
        }
    }
    if stays.len() > most {
        return None;
    }
    stays.sort_unstable();
    Some(stays)
}

/// How far a point lies from the straight line between two others, ends
/// included.
fn off_line(p: Point, a: Point, b: Point) -> f64 {
    let minus = |x: Point, y: Point| [x[0] - y[0], x[1] - y[1], x[2] - y[2]];
    let dot = |x: Point, y: Point| x[0] * y[0] + x[1] * y[1] + x[2] * y[2];
    let (along, to) = (minus(b, a), minus(p, a));
    let length2 = dot(along, along);
    let share = if length2 > 0.0 {
        (dot(to, along) / length2).clamp(0.0, 1.0)
    } else {
        0.0
    };
    let foot = [share * along[0], share * along[1], share * along[2]];
    let off = minus(to, foot);
    math::hypot(math::hypot(off[0], off[1]), off[2])
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn a_straight_line_keeps_its_ends_and_what_is_pinned() {
        let points: Vec<Point> = (0..50).map(|i| [f64::from(i), 0.0, 0.0]).collect();
        assert_eq!(thin(&points, &[], 0.1, 1000), Some(vec![0, 49]));
        let mut pinned = vec![false; 50];
        pinned[20] = true;
        assert_eq!(thin(&points, &pinned, 0.1, 1000), Some(vec![0, 20, 49]));
        assert_eq!(thin(&[], &[], 1.0, 10), Some(vec![]));
        assert_eq!(thin(&points[..1], &[], 1.0, 10), Some(vec![0]));
    }

    #[test]
    fn a_corner_in_plan_or_level_stays() {
        let plan = [[0.0, 0.0, 0.0], [50.0, 9.0, 0.0], [100.0, 0.0, 0.0]];
        let level = [[0.0, 0.0, 0.0], [50.0, 0.0, 9.0], [100.0, 0.0, 0.0]];
        for points in [plan, level] {
            assert_eq!(thin(&points, &[], 5.0, 10), Some(vec![0, 1, 2]));
            assert_eq!(thin(&points, &[], 10.0, 10), Some(vec![0, 2]));
        }
        assert_eq!(thin(&plan, &[], 5.0, 2), None);
    }

    #[test]
    fn a_track_that_will_not_thin_is_given_up_early() {
        // Every fix a corner: without the limit, the square of the number.
        let points: Vec<Point> = (0..60_000)
            .map(|i| [f64::from(i), f64::from(i % 2) * 100.0, 0.0])
            .collect();
        assert_eq!(thin(&points, &[], 1.0, 1000), None);
    }

    proptest! {
        #[test]
        fn what_goes_lies_within_the_tolerance(
            steps in proptest::collection::vec((-10.0..10.0f64, -10.0..10.0f64, -5.0..5.0f64), 2..120),
            tolerance in 0.0..20.0f64,
        ) {
            let mut at = [0.0; 3];
            let points: Vec<Point> = steps.iter().map(|(n, e, z)| {
                at = [at[0] + n, at[1] + e, at[2] + z];
                at
            }).collect();
            let stays = thin(&points, &[], tolerance, 1000).unwrap();
            prop_assert_eq!(stays[0], 0);
            prop_assert_eq!(*stays.last().unwrap(), points.len() - 1);
            for w in stays.windows(2) {
                prop_assert!(w[0] < w[1]);
                for i in w[0]..w[1] {
                    prop_assert!(off_line(points[i], points[w[0]], points[w[1]]) <= tolerance + 1e-9);
                }
            }
        }
    }
}
