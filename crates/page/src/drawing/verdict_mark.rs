//! The small scale beside a verdict: a tick at the limit, a bar of the share
//! used. Each verdict has a form of its own, so that none needs a colour:
//!
//! - holds: a bar that stops short of the tick
//! - tight: a bar that reaches a doubled tick
//! - fails: a taller bar that runs past the tick
//! - unsettled: a broken outline, whatever the share

use super::Verdict;
use super::svg::{Path, Svg};

/// Width of the mark's view box.
pub const WIDTH: f64 = 36.0;
/// Height of the mark's view box.
pub const HEIGHT: f64 = 20.0;
/// `viewBox` of the `svg` that holds a mark.
pub const VIEW_BOX: &str = "0 0 36 20";

const LEFT: f64 = 1.5;
const LIMIT: f64 = 26.5;
const RIGHT: f64 = 35.0;
const BASE: f64 = 16.5;

/// The elements of a mark, for an `svg` with [`VIEW_BOX`].
///
/// `share` is the share used of what is allowed; without one (or with one that
/// is not finite) the bar stands for the verdict alone. A share past the scale's
/// end fills it to the end.
#[must_use]
pub fn verdict_mark(verdict: Verdict, share: Option<f64>) -> String {
    let mut svg = Svg::new();
    let share = share.filter(|s| s.is_finite());
    let length = |share: f64| {
        let x = LEFT + share.max(0.0) * (LIMIT - LEFT);
        x.min(RIGHT)
    };
    match verdict {
        Verdict::Holds => {
            let end = length(share.unwrap_or(0.5)).clamp(LEFT + 2.0, LIMIT - 3.0);
            svg.rect("d-bar", LEFT, BASE - 6.5, end - LEFT, 6.5);
        }
        Verdict::Tight => {
            let end = length(share.unwrap_or(0.95)).clamp(LEFT + 2.0, LIMIT);
            svg.rect("d-bar", LEFT, BASE - 6.5, end - LEFT, 6.5);
            svg.line("d-scale", (LIMIT + 4.0, 3.0), (LIMIT + 4.0, BASE));
        }
        Verdict::Fails => {
            let end = length(share.unwrap_or(1.5)).clamp(LIMIT + 4.0, RIGHT);
            svg.rect("d-bar", LEFT, BASE - 6.5, LIMIT - LEFT, 6.5);
            svg.rect("d-bar-over", LIMIT, BASE - 11.0, end - LIMIT, 11.0);
        }
        Verdict::Unsettled => {
            let end = length(share.unwrap_or(0.6)).clamp(LEFT + 11.0, RIGHT);
            let mut path = Path::new();
            path.move_to((LEFT + 0.8, BASE));
            for at in [(LEFT + 0.8, BASE - 7.0), (end, BASE - 7.0), (end, BASE)] {
                path.line_to(at);
            }
            svg.path("d-bar-open", &path);
        }
    }
    svg.line("d-scale", (0.0, BASE), (WIDTH, BASE));
    svg.line("d-scale", (LIMIT, 1.5), (LIMIT, HEIGHT - 0.5));
    svg.finish()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const ALL: [Verdict; 4] = [
        Verdict::Holds,
        Verdict::Tight,
        Verdict::Unsettled,
        Verdict::Fails,
    ];

    /// The mark with its classes taken out: what is left is form alone.
    fn form(verdict: Verdict, share: Option<f64>) -> String {
        let mark = verdict_mark(verdict, share);
        mark.split("class=\"")
            .map(|s| s.split_once('"').map_or(s, |(_, rest)| rest))
            .collect()
    }

    #[test]
    fn verdicts_differ_in_form_at_the_same_share() {
        for share in [None, Some(0.0), Some(0.93), Some(1.0), Some(7.0)] {
            for (i, a) in ALL.iter().enumerate() {
                for b in &ALL[i + 1..] {
                    assert_ne!(form(*a, share), form(*b, share), "{a:?} {b:?} {share:?}");
                }
            }
        }
    }

    #[test]
    fn a_larger_share_is_a_longer_bar() {
        assert_ne!(
            verdict_mark(Verdict::Holds, Some(0.2)),
            verdict_mark(Verdict::Holds, Some(0.6))
        );
        assert_eq!(
            verdict_mark(Verdict::Fails, Some(9.0)),
            verdict_mark(Verdict::Fails, Some(99.0))
        );
    }

    proptest! {
        #[test]
        fn any_share_keeps_in_the_box(share in any::<f64>(), which in 0_usize..4) {
            let mark = verdict_mark(ALL[which], Some(share));
            for number in mark.split('"').filter_map(|s| s.parse::<f64>().ok()) {
                prop_assert!((0.0..=WIDTH).contains(&number), "{}", mark);
            }
            prop_assert!(!mark.contains("style"));
        }
    }
}
