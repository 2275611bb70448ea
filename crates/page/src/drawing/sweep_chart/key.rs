//! The key under the chart: only what occurs in it, in rows that fit.

use super::super::label::text_width;
use super::super::shape::Shape;
use super::super::{Size, Verdict};
use super::SweepChart;
use super::thin::Role;

/// What an entry shows before its words.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Sign {
    /// The shape of a family.
    Family(Shape),
    /// Half filled.
    Tight,
    /// A broken outline.
    Unsettled,
    /// Struck through.
    Fails,
    /// Small and light.
    Dominated,
    /// A tick.
    More,
}

/// One entry: where its sign is centred, and its words.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Entry {
    pub(super) sign: Sign,
    pub(super) text: String,
    /// Centre of the sign, from the key's left and top.
    pub(super) x: f64,
    pub(super) y: f64,
}

/// The key, laid out.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Key {
    pub(super) entries: Vec<Entry>,
    pub(super) height: f64,
}

impl Key {
    /// Rows no wider than `width`. Where the roles of the points are known, only
    /// what is drawn is named.
    pub(super) fn of(chart: &SweepChart, roles: Option<&[Role]>, size: Size, width: f64) -> Key {
        let text = size.text();
        let role = |i: usize| roles.and_then(|r| r.get(i)).copied();
        let has = |f: &dyn Fn(&super::SweepPoint) -> bool| {
            let drawn = |i| !matches!(role(i), Some(Role::Tick | Role::Absent));
            let mut points = chart.points.iter().enumerate();
            points.any(|(i, p)| drawn(i) && f(p))
        };
        let mut wanted: Vec<(Sign, &str)> = chart
            .families
            .iter()
            .enumerate()
            .filter(|(i, _)| has(&|p| p.family == *i))
            .map(|(i, name)| (Sign::Family(Shape::of(i)), name.as_str()))
            .collect();
        let words = &chart.words;
        for (sign, text, occurs) in [
            (
                Sign::Tight,
                &words.tight,
                has(&|p| p.verdict == Verdict::Tight),
            ),
            (
                Sign::Unsettled,
                &words.unsettled,
                has(&|p| p.verdict == Verdict::Unsettled),
            ),
            (
                Sign::Fails,
                &words.fails,
                has(&|p| p.verdict == Verdict::Fails),
            ),
            (
                Sign::Dominated,
                &words.dominated,
                has(&|p| p.dominated && !p.chosen),
            ),
            (
                Sign::More,
                &words.more,
                roles.is_some_and(|r| r.contains(&Role::Tick)),
            ),
        ] {
            if occurs {
                wanted.push((sign, text));
            }
        }
        let row = text * 1.55;
        let (mut x, mut y) = (0.0, row * 0.5);
        let mut entries = Vec::new();
        for (sign, words) in wanted.into_iter().filter(|w| !w.1.is_empty()) {
            let taken = text * 1.3 + text_width(words, text, false) + text * 1.0;
            if x > 0.0 && x + taken - text > width {
                x = 0.0;
                y += row;
            }
            entries.push(Entry {
                sign,
                text: words.to_owned(),
                x: x + text * 0.55,
                y,
            });
            x += taken;
        }
        let height = if entries.is_empty() {
            0.0
        } else {
            y + row * 0.6
        };
        Key { entries, height }
    }
}
