//! The shortest safe closing time.

use super::error::TransientError;
use super::event::Event;
use super::family::LawFamily;
use super::friction::FrictionModel;
use super::grid::{Grid, count};
use super::model::Model;
use super::run::{Run, RunOptions, Scratch};
use super::surge_line::SurgeLine;
use crate::quantity::Time;
use uom::si::time::second;

/// Fewest part openings a search closes from.
const FEWEST_OPENINGS: usize = 10;

/// What a search is made over.
#[derive(Debug, Clone, PartialEq)]
pub struct SearchSpec {
    /// Sets of jets: the strokes of all nozzles when the set is fully open
    /// (0 for those that stay shut).
    pub sets: Vec<Vec<f64>>,
    /// Openings from which each set closes, evenly spaced, the full one
    /// included: at least 10.
    pub openings: usize,
    /// The laws.
    pub family: LawFamily,
    /// Slowest full-stroke time considered.
    pub slowest: Time,
    /// Step of the scan; at most L/(2a), a quarter of [`SurgeLine::period`].
    /// `None` takes that.
    pub step: Option<Time>,
    /// Width of the last bracket, as a share of the time; above 0, at most
    /// 0.1.
    pub tolerance: f64,
    /// Friction.
    pub friction: FrictionModel,
    /// What each run is asked for.
    pub options: RunOptions,
}

impl SearchSpec {
    /// One speed, 10 openings, steps of L/(2a), a bracket of 0.5 %, lean
    /// runs.
    #[must_use]
    pub fn new(sets: Vec<Vec<f64>>, slowest: Time) -> Self {
        Self {
            sets,
            openings: FEWEST_OPENINGS,
            family: LawFamily::OneSpeed,
            slowest,
            step: None,
            tolerance: 0.005,
            friction: FrictionModel::default(),
            options: RunOptions::lean(),
        }
    }

    /// The sets of 1 to `jets` equal jets: the first open, the others shut.
    #[must_use]
    pub fn equal_sets(jets: usize) -> Vec<Vec<f64>> {
        (1..=jets)
            .map(|open| {
                (0..jets)
                    .map(|jet| if jet < open { 1.0 } else { 0.0 })
                    .collect()
            })
            .collect()
    }

    fn check(&self, period: f64) -> Result<f64, TransientError> {
        let longest = 0.25 * period;
        let step = self.step.map_or(longest, |step| step.get::<second>());
        let slowest = self.slowest.get::<second>();
        let sound = !self.sets.is_empty()
            && self.openings >= FEWEST_OPENINGS
            && slowest > 0.0
            && slowest.is_finite()
            && self.tolerance > 0.0
            && self.tolerance <= 0.1
            && step > 0.0
            && step <= longest * (1.0 + 1e-12);
        if sound {
            Ok(step)
        } else {
            Err(TransientError::SearchSpec)
        }
    }
}

/// A start a closing was computed from.
#[derive(Debug, Clone, PartialEq)]
pub struct StartCase {
    /// Index of the set of jets.
    pub set: usize,
    /// Opening, as a share of the set's strokes.
    pub opening: f64,
    /// Strokes of all nozzles.
    pub strokes: Vec<f64>,
}

/// What a search found.
#[derive(Debug, Clone, PartialEq)]
pub enum ClosingAnswer {
    /// The shortest time such that it and every longer time tried, up to the
    /// slowest, hold from every start.
    Shortest {
        /// The time.
        time: Time,
        /// The longest time that fails.
        fails_at: Time,
        /// The start from which it fails.
        decides: StartCase,
    },
    /// Every time holds, down to the shortest of the family (for one speed:
    /// closing at once).
    Any,
    /// Not even the slowest holds.
    None {
        /// The start from which it fails.
        decides: StartCase,
    },
}

#[derive(Debug, Clone, PartialEq)]
enum State {
    /// Candidate under test; the time before it that held.
    Scan {
        time: f64,
        held: Option<f64>,
    },
    /// A time that fails (from a start) and one that holds.
    Bracket {
        fails: f64,
        by: usize,
        holds: f64,
    },
    Done(ClosingAnswer),
}

/// The search, to be advanced a few runs at a time.
///
/// # Method
/// Full-stroke times are tried from the slowest down in steps of at most
/// L/(2a), because a longer time is not always milder; at the first that fails
/// the bracket is halved until it is narrow. A time holds when the judge says
/// so of every run, from every set of jets and every opening at the same rate
/// of stroke. A run in which the column parts never holds.
#[derive(Debug, Clone)]
pub struct ClosingSearch {
    models: Vec<Model>,
    cases: Vec<StartCase>,
    /// Order in which starts are tried: the last that failed first.
    order: Vec<usize>,
    /// Place in the order of the next run of the candidate.
    next: usize,
    state: State,
    family: LawFamily,
    options: RunOptions,
    slowest: f64,
    step: f64,
    tolerance: f64,
    runs: usize,
}

impl ClosingSearch {
    /// Prepares every start.
    ///
    /// # Errors
    /// [`TransientError::SearchSpec`]; what [`Model::new`] refuses of a start.
    pub fn new(line: &SurgeLine, grid: &Grid, spec: &SearchSpec) -> Result<Self, TransientError> {
        let step = spec.check(line.period().get::<second>())?;
        let mut models = Vec::new();
        let mut cases = Vec::new();
        for (set, full) in spec.sets.iter().enumerate() {
            for part in (1..=spec.openings).rev() {
                let opening = count(part) / count(spec.openings);
                let strokes: Vec<f64> = full.iter().map(|stroke| stroke * opening).collect();
                models.push(Model::new(line, grid, &strokes, spec.friction)?);
                cases.push(StartCase {
                    set,
                    opening,
                    strokes,
                });
            }
        }
        let slowest = spec.slowest.get::<second>();
        // The law of the slowest must exist.
        spec.family.law(spec.slowest)?;
        Ok(Self {
            order: (0..cases.len()).collect(),
            models,
            cases,
            next: 0,
            state: State::Scan {
                time: slowest,
                held: None,
            },
            family: spec.family.clone(),
            options: spec.options.clone(),
            slowest,
            step,
            tolerance: spec.tolerance,
            runs: 0,
        })
    }

    /// Does at most `runs` runs; the answer once there is one. `judge` says
    /// whether a run keeps what must be kept.
    ///
    /// # Errors
    /// What [`Model::run`] refuses.
    pub fn advance(
        &mut self,
        runs: usize,
        scratch: &mut Scratch,
        mut judge: impl FnMut(&Run, &StartCase) -> bool,
    ) -> Result<Option<&ClosingAnswer>, TransientError> {
        for _ in 0..runs {
            let Some(time) = self.candidate() else {
                break;
            };
            let law = self.family.law(Time::new::<second>(time))?;
            let Some(index) = self.order.get(self.next).copied() else {
                break;
            };
            let (Some(model), Some(case)) = (self.models.get(index), self.cases.get(index)) else {
                break;
            };
            let event = Event::close(&case.strokes, &law)?;
            let run = model.run_whole(&event, &self.options, scratch)?;
            self.runs += 1;
            let holds = run.is_some_and(|run| run.separation.is_none() && judge(&run, case));
            if holds {
                self.next += 1;
                if self.next == self.order.len() {
                    self.next = 0;
                    self.held(time);
                }
            } else {
                let failing = self.order.remove(self.next);
                self.order.insert(0, failing);
                self.next = 0;
                self.failed(time, failing);
            }
        }
        Ok(self.answer())
    }

    /// Runs to the end.
    ///
    /// # Errors
    /// What [`Model::run`] refuses.
    pub fn finish(
        mut self,
        scratch: &mut Scratch,
        mut judge: impl FnMut(&Run, &StartCase) -> bool,
    ) -> Result<ClosingAnswer, TransientError> {
        loop {
            if let Some(answer) = self.advance(1, scratch, &mut judge)? {
                return Ok(answer.clone());
            }
        }
    }

    /// The answer, once there is one.
    #[must_use]
    pub fn answer(&self) -> Option<&ClosingAnswer> {
        match &self.state {
            State::Done(answer) => Some(answer),
            _ => None,
        }
    }

    /// Runs done.
    #[must_use]
    pub fn runs(&self) -> usize {
        self.runs
    }

    /// The slowest time it began at.
    #[must_use]
    pub fn slowest(&self) -> Time {
        Time::new::<second>(self.slowest)
    }

    /// Share of the times that is scanned, 0 to 1: progress.
    #[must_use]
    pub fn progress(&self) -> f64 {
        match &self.state {
            State::Scan { held, .. } => held.map_or(0.0, |held| 1.0 - held / self.slowest),
            State::Bracket { holds, .. } => 1.0 - holds / self.slowest,
            State::Done(_) => 1.0,
        }
    }

    /// Every start.
    #[must_use]
    pub fn cases(&self) -> &[StartCase] {
        &self.cases
    }

    /// The models of every start, in the order of [`Self::cases`].
    #[must_use]
    pub fn models(&self) -> &[Model] {
        &self.models
    }

    fn candidate(&self) -> Option<f64> {
        match &self.state {
            State::Scan { time, .. } => Some(*time),
            State::Bracket { fails, holds, .. } => Some(0.5 * (fails + holds)),
            State::Done(_) => None,
        }
    }

    fn held(&mut self, time: f64) {
        let least = self.family.least().get::<second>();
        self.state = match &self.state {
            State::Scan { .. } if time <= least => State::Done(ClosingAnswer::Any),
            State::Scan { .. } => {
                let next = time - self.step;
                State::Scan {
                    time: if next > least { next } else { least },
                    held: Some(time),
                }
            }
            State::Bracket { fails, by, .. } => self.narrowed(*fails, *by, time),
            State::Done(answer) => State::Done(answer.clone()),
        };
    }

    fn failed(&mut self, time: f64, by: usize) {
        self.state = match &self.state {
            State::Scan { held: None, .. } => State::Done(ClosingAnswer::None {
                decides: self.case(by),
            }),
            State::Scan {
                held: Some(holds), ..
            }
            | State::Bracket { holds, .. } => self.narrowed(time, by, *holds),
            State::Done(answer) => State::Done(answer.clone()),
        };
    }

    fn narrowed(&self, fails: f64, by: usize, holds: f64) -> State {
        if holds - fails <= self.tolerance * holds {
            State::Done(ClosingAnswer::Shortest {
                time: Time::new::<second>(holds),
                fails_at: Time::new::<second>(fails),
                decides: self.case(by),
            })
        } else {
            State::Bracket { fails, by, holds }
        }
    }

    fn case(&self, index: usize) -> StartCase {
        self.cases.get(index).cloned().unwrap_or(StartCase {
            set: 0,
            opening: 1.0,
            strokes: Vec::new(),
        })
    }
}
