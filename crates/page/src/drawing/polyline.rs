//! Broken lines that go forward in x: the line, the grade line, a band's edges.

/// The y at `x`, straight between points; `None` before the first and after the
/// last. Where two points share an x the later one counts.
#[must_use]
pub fn at(points: &[(f64, f64)], x: f64) -> Option<f64> {
    let (first, last) = (points.first()?, points.last()?);
    if !(x >= first.0 && x <= last.0) {
        return None;
    }
    let after = points.partition_point(|p| p.0 <= x);
    let Some(b) = points.get(after) else {
        return Some(last.1);
    };
    let a = points.get(after.checked_sub(1)?)?;
    Some(a.1 + (x - a.0) / (b.0 - a.0) * (b.1 - a.1))
}

/// The part from `from` to `to`, with its ends cut where they fall between
/// points. Empty when nothing lies there.
#[must_use]
pub fn part(points: &[(f64, f64)], from: f64, to: f64) -> Vec<(f64, f64)> {
    let (Some(first), Some(last)) = (points.first(), points.last()) else {
        return Vec::new();
    };
    let from = if from > first.0 { from } else { first.0 };
    let to = if to < last.0 { to } else { last.0 };
    if from > to {
        return Vec::new();
    }
    let mut out = Vec::new();
    if let Some(y) = at(points, from) {
        out.push((from, y));
    }
    out.extend(points.iter().filter(|p| p.0 > from && p.0 < to));
    if let Some(y) = at(points, to).filter(|_| to > from) {
        out.push((to, y));
    }
    out
}

/// The place of the first point that lies before the one ahead of it.
#[must_use]
pub fn first_backwards(points: &[(f64, f64)]) -> Option<usize> {
    points
        .windows(2)
        .position(|w| w[1].0 < w[0].0)
        .map(|i| i + 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    const LINE: [(f64, f64); 4] = [(0.0, 10.0), (10.0, 20.0), (10.0, 30.0), (20.0, 0.0)];

    #[test]
    fn straight_between_points_and_nothing_outside() {
        assert_eq!(at(&LINE, 5.0), Some(15.0));
        assert_eq!(at(&LINE, 10.0), Some(30.0));
        assert_eq!(at(&LINE, 20.0), Some(0.0));
        assert_eq!(at(&LINE, 20.1), None);
        assert_eq!(at(&LINE, f64::NAN), None);
        assert_eq!(at(&[], 0.0), None);
    }

    #[test]
    fn a_part_is_cut_where_it_was_asked_for() {
        assert_eq!(part(&LINE, 5.0, 15.0).first(), Some(&(5.0, 15.0)));
        assert_eq!(part(&LINE, 5.0, 15.0).last(), Some(&(15.0, 15.0)));
        assert_eq!(part(&LINE, -5.0, 99.0), LINE.to_vec());
        assert!(part(&LINE, 30.0, 40.0).is_empty());
        assert!(part(&[], 0.0, 1.0).is_empty());
    }

    #[test]
    fn backwards_is_found() {
        assert_eq!(first_backwards(&LINE), None);
        assert_eq!(
            first_backwards(&[(0.0, 0.0), (2.0, 0.0), (1.0, 0.0)]),
            Some(2)
        );
    }
}
