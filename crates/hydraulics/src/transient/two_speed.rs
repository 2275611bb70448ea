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

/// The search for two speeds, to be advanced a few runs at a time.
///
/// For each knee and slow speed the full-stroke time is searched from that of
/// one speed down, with the judge and starts of the given spec.
#[derive(Debug, Clone)]
pub struct TwoSpeedSearch {
    line: SurgeLine,
    grid: Grid,
    spec: SearchSpec,
    one_speed: Time,
    /// Knees and slow speeds still to be tried, the next one last.
    left: Vec<(f64, Time)>,
    all: usize,
    at_work: Option<(f64, Time, ClosingSearch)>,
    best: Option<TwoSpeedAnswer>,
    runs: usize,
}

impl TwoSpeedSearch {
    /// Prepares the search for two speeds that close sooner than `one_speed`,
    /// the shortest safe time of one speed.
    #[must_use]
    pub fn new(
        line: &SurgeLine,
        grid: &Grid,
        spec: &SearchSpec,
        one_speed: Time,
        among: &TwoSpeedSpec,
    ) -> Self {
        let mut left: Vec<(f64, Time)> = among
            .knees
            .iter()
            .flat_map(|knee| among.slow.iter().map(|factor| (*knee, one_speed * *factor)))
            .filter(|(knee, slow)| *slow * *knee < one_speed)
            .collect();
        left.reverse();
        Self {
            line: line.clone(),
            grid: grid.clone(),
            spec: spec.clone(),
            one_speed,
            all: left.len(),
            left,
            at_work: None,
            best: None,
            runs: 0,
        }
    }

    /// Does at most `runs` runs; whether all is tried.
    ///
    /// # Errors
    /// What [`ClosingSearch`] refuses.
    pub fn advance(
        &mut self,
        runs: usize,
        scratch: &mut Scratch,
        mut judge: impl FnMut(&Run, &StartCase) -> bool,
    ) -> Result<bool, TransientError> {
        for _ in 0..runs {
            let Some((knee, slow, mut search)) = self.take()? else {
                return Ok(true);
            };
            match search.advance(1, scratch, &mut judge)?.cloned() {
                None => self.at_work = Some((knee, slow, search)),
                Some(answer) => {
                    self.runs += search.runs();
                    self.keep(knee, slow, answer);
                }
            }
        }
        Ok(self.is_done())
    }

    /// Whether all is tried.
    #[must_use]
    pub fn is_done(&self) -> bool {
        self.at_work.is_none() && self.left.is_empty()
    }

    /// Share of the knees and slow speeds that is tried, 0 to 1.
    #[must_use]
    pub fn progress(&self) -> f64 {
        let left = self.left.len() + usize::from(self.at_work.is_some());
        super::grid::count(self.all - left) / super::grid::count(self.all.max(1))
    }

    /// The soonest found so far; `None` when none is sooner than one speed.
    #[must_use]
    pub fn best(&self) -> Option<&TwoSpeedAnswer> {
        self.best.as_ref()
    }

    fn take(&mut self) -> Result<Option<(f64, Time, ClosingSearch)>, TransientError> {
        if let Some(at_work) = self.at_work.take() {
            return Ok(Some(at_work));
        }
        let Some((knee, slow)) = self.left.pop() else {
            return Ok(None);
        };
        let wanted = SearchSpec {
            family: LawFamily::TwoSpeed { knee, slow },
            slowest: self.one_speed,
            ..self.spec.clone()
        };
        let search = ClosingSearch::new(&self.line, &self.grid, &wanted)?;
        Ok(Some((knee, slow, search)))
    }

    fn keep(&mut self, knee: f64, slow: Time, answer: ClosingAnswer) {
        let least = LawFamily::TwoSpeed { knee, slow }.least();
        let (time, decides) = match answer {
            ClosingAnswer::Shortest { time, decides, .. } => (time, Some(decides)),
            ClosingAnswer::Any => (least, None),
            ClosingAnswer::None { .. } => return,
        };
        let sooner = self.best.as_ref().is_none_or(|found| time < found.time);
        if sooner && time < self.one_speed {
            self.best = Some(TwoSpeedAnswer {
                time,
                knee,
                fast: (time - least) / (1.0 - knee),
                slow,
                decides,
            });
        }
    }
}

/// Looks for two speeds that close sooner than the shortest safe time of one
/// speed; `None` when none of those tried does. [`TwoSpeedSearch`] to the end.
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
    let mut search = TwoSpeedSearch::new(line, grid, spec, one_speed, among);
    while !search.advance(64, scratch, &mut judge)? {}
    Ok(search.best().cloned())
}
