//! Two speeds, where one is needlessly slow.

use super::error::TransientError;
use super::family::LawFamily;
use super::grid::Grid;
use super::run::{Run, Scratch};
use super::search::{ClosingAnswer, ClosingSearch, SearchSpec, StartCase};
use super::surge_line::SurgeLine;
use crate::quantity::Time;

/// Knees and slow speeds among which two speeds are looked for.
#[derive(Debug, Clone, PartialEq)]
pub struct TwoSpeedSpec {
    /// Strokes of the knee.
    pub knees: Vec<f64>,
    /// Times of a full stroke at the slow speed, as multiples of the shortest
    /// safe time of one speed.
    pub slow: Vec<f64>,
}

impl Default for TwoSpeedSpec {
    /// Knees at 0.15, 0.25, 0.35 and 0.5; slow speeds 0.8, 1, 1.3 and 1.7
    /// times slower than one speed needs.
    fn default() -> Self {
        Self {
            knees: vec![0.15, 0.25, 0.35, 0.5],
            slow: vec![0.8, 1.0, 1.3, 1.7],
        }
    }
}

/// A law of two speeds that closes sooner than one speed may.
#[derive(Debug, Clone, PartialEq)]
pub struct TwoSpeedAnswer {
    /// Time from full stroke to shut.
    pub time: Time,
    /// Stroke of the knee.
    pub knee: f64,
    /// Time of a full stroke at the fast speed.
    pub fast: Time,
    /// Time of a full stroke at the slow speed.
    pub slow: Time,
    /// The start that decides; `None` when even the least time of this knee
    /// holds.
    pub decides: Option<StartCase>,
}

/// Looks for two speeds that close sooner than the shortest safe time of one
/// speed; `None` when none of those tried does.
///
/// For each knee and slow speed the full-stroke time is searched from that of
/// one speed down, with the judge and starts of `spec`.
///
/// # Errors
/// What [`ClosingSearch`] refuses.
pub fn two_speed(
    line: &SurgeLine,
    grid: &Grid,
    spec: &SearchSpec,
    one_speed: Time,
    among: &TwoSpeedSpec,
    scratch: &mut Scratch,
    mut judge: impl FnMut(&Run, &StartCase) -> bool,
) -> Result<Option<TwoSpeedAnswer>, TransientError> {
    let mut best: Option<TwoSpeedAnswer> = None;
    for knee in &among.knees {
        for factor in &among.slow {
            let slow = one_speed * *factor;
            let family = LawFamily::TwoSpeed { knee: *knee, slow };
            if family.least() >= one_speed {
                continue;
            }
            let wanted = SearchSpec {
                family: family.clone(),
                slowest: one_speed,
                ..spec.clone()
            };
            let search = ClosingSearch::new(line, grid, &wanted)?;
            let (time, decides) = match search.finish(scratch, &mut judge)? {
                ClosingAnswer::Shortest { time, decides, .. } => (time, Some(decides)),
                ClosingAnswer::Any => (family.least(), None),
                ClosingAnswer::None { .. } => continue,
            };
            let sooner = best.as_ref().is_none_or(|found| time < found.time);
            if sooner && time < one_speed {
                let fast = (time - family.least()) / (1.0 - knee);
                best = Some(TwoSpeedAnswer {
                    time,
                    knee: *knee,
                    fast,
                    slow,
                    decides,
                });
            }
        }
    }
    Ok(best)
}
