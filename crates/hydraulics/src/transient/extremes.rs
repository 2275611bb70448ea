//! Highest and lowest pressure of every run of pipe.

use super::run::Run;
use super::surge_line::SurgeLine;
use crate::quantity::{Head, PipeLength};

/// Extremes of one run of pipe, as pressure heads at the pipe's axis (grade
/// less level), with where they lie.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StretchExtremes {
    /// Highest pressure head.
    pub highest: (Head, PipeLength),
    /// Lowest pressure head; negative below atmosphere.
    pub lowest: (Head, PipeLength),
}

impl Run {
    /// Extremes of every run of the line, in order: at every node and every
    /// surveyed point, so that neither the lowest point of a run nor a high
    /// point between nodes is missed.
    ///
    /// `line` is the one the run was computed on.
    #[must_use]
    pub fn extremes(&self, line: &SurgeLine) -> Vec<StretchExtremes> {
        let nowhere = PipeLength::from_m(f64::NAN);
        let runs = line.spec().line.run_layouts();
        let mut found = vec![
            StretchExtremes {
                highest: (Head::from_m(f64::NEG_INFINITY), nowhere),
                lowest: (Head::from_m(f64::INFINITY), nowhere),
            };
            runs.len()
        ];
        let mut note = |run: usize, at: PipeLength, high: Head, low: Head| {
            if let Some(extremes) = found.get_mut(run) {
                if high > extremes.highest.0 {
                    extremes.highest = (high, at);
                }
                if low < extremes.lowest.0 {
                    extremes.lowest = (low, at);
                }
            }
        };
        for node in &self.nodes {
            note(
                node.run,
                node.chainage,
                node.highest - node.level,
                node.lowest - node.level,
            );
        }
        for point in &line.spec().line.spec().points {
            let at = point.chainage.m();
            let Some((high, low)) = self.range_at(point.chainage) else {
                continue;
            };
            for (index, run) in runs.iter().enumerate() {
                if at >= run.from - 1e-6 && at <= run.to + 1e-6 {
                    note(index, point.chainage, high - point.level, low - point.level);
                }
            }
        }
        // A lumped run has no node of its own: its ends are those beside it.
        for (index, run) in runs.iter().enumerate() {
            for at in [run.from, run.to] {
                let place = PipeLength::from_m(at);
                let level = crate::quantity::Level::from_m(line.spec().line.level_si(at));
                if let Some((high, low)) = self.range_at(place) {
                    note(index, place, high - level, low - level);
                }
            }
        }
        found
    }
}
