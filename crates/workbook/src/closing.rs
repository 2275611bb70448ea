//! The shortest safe closing time, and two speeds where one is needlessly
//! slow: studies that propose what the drive is ordered with.
//!
//! A closing is safe where every stretch keeps to what the verdicts ask
//! ([`crate::judge`]: the same rule), from every set of jets and every opening,
//! and every longer closing up to the slowest looked at is safe too, because a
//! longer one is not always milder. The search runs on the coarse grid first,
//! each extreme raised by that grid's measured error, and from the time found
//! there down on the fine grid. The other events do not wait on the closing:
//! what is proposed is solved in full, and the verdict of that is said.

use crate::book::{Book, ClosingSpeeds, Id};
use crate::entry::Entry;
use crate::evaluate::Findings;
use crate::field::Field;
use crate::figure::{Figure, Gap, Lack};
use crate::judge::{highest_in_surge, lowest_in_surge, verdicts};
use crate::resolve::Resolved;
use crate::resolve::drive::Speeds;
use crate::steady::Steady;
use crate::transient::{
    Depth, EventKind, Moves, Setup, Solver, Start, family, law, sets, transient_to, trouble,
};
use crate::units::Kind;
use crate::verdict::{Check, CheckKind, Verdict};
use crate::walls::{PressureAt, StretchWalls, Walls, walls};
use hydraulics::transient::{
    ClosingAnswer, ClosingSearch, Grid, LawFamily, Run, Scratch, SearchSpec, StartCase,
    TwoSpeedSearch, TwoSpeedSpec,
};
use uom::si::f64::Time;
use uom::si::time::second;

/// A gain smaller than this share of the closing time is not worth a drive of
/// two speeds (common practice).
pub const WORTH_TWO_SPEEDS: f64 = 0.2;

/// What a closing that is too short breaks first.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Decides {
    /// The start from which it fails.
    pub start: Start,
    /// The stretch; none where the water column parts.
    pub stretch: Option<Id>,
    /// Which limit.
    pub check: CheckKind,
}

/// What the search finds.
#[derive(Debug, Clone, PartialEq)]
pub enum Shortest {
    /// The shortest safe time from full stroke to shut.
    Time {
        /// It and every longer one tried hold.
        time: Time,
        /// The longest that fails.
        fails_at: Time,
        /// What it breaks.
        decides: Decides,
    },
    /// Even closing at once holds.
    AtOnce,
    /// Not even the slowest looked at holds.
    None {
        /// What it breaks.
        decides: Decides,
    },
}

/// What the drive may be ordered with.
#[derive(Debug, Clone, PartialEq)]
pub struct Proposal {
    /// Speeds of the closing, reserve included.
    pub speeds: Speeds,
    /// The reserve, as a share of the shortest safe time.
    pub reserve: f64,
    /// The worst verdict of the line with it, every event counted, solved in
    /// full.
    pub verdict: Verdict,
}

/// What the study finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Found {
    /// The shortest safe closing.
    pub shortest: Shortest,
    /// Slowest closing looked at.
    pub slowest: Time,
    /// What may be ordered; none where nothing holds.
    pub proposal: Option<Proposal>,
    /// Runs it took.
    pub runs: usize,
}

/// Two speeds that close sooner.
#[derive(Debug, Clone, PartialEq)]
pub struct TwoSpeeds {
    /// Shortest safe time from full stroke to shut.
    pub time: Time,
    /// The same at one speed.
    pub one_speed: Time,
    /// What may be ordered.
    pub proposal: Proposal,
}

/// The limits a closing is held against.
#[derive(Debug, Clone)]
struct Limits {
    walls: Vec<StretchWalls>,
    margin: Figure<f64>,
}

/// A limit broken.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Broken {
    set: usize,
    opening: f64,
    stretch: Id,
    check: CheckKind,
}

impl Limits {
    fn of(findings: &Findings) -> Figure<Limits> {
        let walls = findings.walls.stretches.clone();
        for wall in &walls {
            wall.surge_bearing.clone()?;
            wall.suction_allowed.clone()?;
        }
        let limits = findings.resolved.limits.clone();
        Ok(Limits {
            walls,
            margin: limits.map(|l| l.tight_margin),
        })
    }

    /// The limit that a run breaks, if it breaks one: by the checks of the
    /// verdicts.
    fn broken(
        &self,
        solver: &Solver<'_>,
        run: &Run,
        case: &StartCase,
        error: f64,
    ) -> Option<Broken> {
        let start = start_of(case);
        let peaks = solver.raised_peaks(start, run, error);
        let over = |check: Figure<Check>| !check.is_ok_and(|c| c.verdict != Verdict::Fails);
        for (wall, surge) in self.walls.iter().zip(&peaks.stretches) {
            let place = |e: crate::transient::Extreme| PressureAt {
                pressure: e.pressure,
                at: e.at,
            };
            let broken = |check| Broken {
                set: case.set,
                opening: case.opening,
                stretch: wall.stretch,
                check,
            };
            if over(highest_in_surge(place(surge.highest), wall, &self.margin)) {
                return Some(broken(CheckKind::SurgePressure));
            }
            if over(lowest_in_surge(place(surge.lowest), wall)) {
                return Some(broken(CheckKind::LowestPressure));
            }
        }
        None
    }
}

fn start_of(case: &StartCase) -> Start {
    Start {
        event: EventKind::Closing,
        open: u32::try_from(case.set + 1).unwrap_or(1),
        opening: case.opening,
    }
}

/// What both studies stand on.
#[derive(Debug, Clone)]
struct Ground {
    resolved: Resolved,
    steady: Steady,
    setup: Setup,
    limits: Limits,
    reserve: f64,
    slowest: Time,
    /// The laws looked among.
    family: LawFamily,
    /// Error of the coarse grid.
    error: f64,
    coarse: Grid,
    fine: Grid,
    scratch: Scratch,
    /// The last limit broken.
    broken: Option<Broken>,
}

impl Ground {
    fn new(findings: &Findings) -> Figure<Ground> {
        let resolved = findings.resolved.clone();
        let setup = Setup::new(&resolved, &findings.steady)?;
        let limits = Limits::of(findings)?;
        let speeds = match &resolved.drive.speeds {
            Ok(speeds) => Some(*speeds),
            Err(Gap::Unsettled(Lack::Entry(Field::ClosingTime))) => None,
            Err(gap) => return Err(gap.clone()),
        };
        let slowest = resolved.drive.slowest.clone()?;
        let error = match &findings.transient.surge {
            Ok(surge) => surge.trust.coarse_error,
            Err(_) => {
                let moves = Moves::with(&resolved, &Speeds::One { time: slowest })?;
                Solver::new(&setup, &moves).solve()?.trust.coarse_error
            }
        };
        let coarse = Grid::new(&setup.line, setup.coarse(slowest)).map_err(trouble)?;
        let fine = Grid::new(&setup.line, setup.fine(slowest)).map_err(trouble)?;
        Ok(Ground {
            reserve: resolved.drive.reserve.clone()?,
            steady: findings.steady.clone(),
            family: family(speeds.as_ref()),
            resolved,
            setup,
            limits,
            slowest,
            error,
            coarse,
            fine,
            scratch: Scratch::new(),
            broken: None,
        })
    }

    fn spec(&self, slowest: Time) -> SearchSpec {
        SearchSpec {
            family: self.family.clone(),
            friction: self.setup.friction,
            ..SearchSpec::new(sets(self.setup.jets), slowest)
        }
    }

    /// A search on the coarse grid (`true`) or the fine one.
    fn search(&self, on_coarse: bool, slowest: Time) -> Figure<ClosingSearch> {
        let grid = if on_coarse { &self.coarse } else { &self.fine };
        ClosingSearch::new(&self.setup.line, grid, &self.spec(slowest)).map_err(trouble)
    }

    fn advance(
        &mut self,
        search: &mut ClosingSearch,
        runs: usize,
        error: f64,
    ) -> Figure<Option<ClosingAnswer>> {
        let moves = Moves::with(&self.resolved, &Speeds::One { time: self.slowest })?;
        let solver = Solver::new(&self.setup, &moves);
        let (limits, last) = (&self.limits, &mut self.broken);
        let answer = search
            .advance(runs, &mut self.scratch, |run, case| {
                match limits.broken(&solver, run, case, error) {
                    None => true,
                    Some(broken) => {
                        *last = Some(broken);
                        false
                    }
                }
            })
            .map_err(trouble)?;
        Ok(answer.cloned())
    }

    fn decides(&self, case: &StartCase) -> Decides {
        // A run whose column parts fails before its limits are looked at.
        let broken = self
            .broken
            .filter(|b| b.set == case.set && (b.opening - case.opening).abs() < 1e-9);
        Decides {
            start: start_of(case),
            stretch: broken.map(|b| b.stretch),
            check: broken.map_or(CheckKind::LowestPressure, |b| b.check),
        }
    }

    /// These speeds with the reserve, and what the line then comes to.
    fn proposal(&self, speeds: Speeds) -> Proposal {
        let reserve = 1.0 + self.reserve;
        let slower = |time: Time| {
            // Up to a tenth of a second: what can be ordered.
            let seconds = time.get::<second>() * reserve;
            Time::new::<second>((seconds * 10.0 - 1e-6).ceil() / 10.0)
        };
        let speeds = match speeds {
            Speeds::One { time } => Speeds::One { time: slower(time) },
            Speeds::Two { fast, slow, knee } => Speeds::Two {
                fast: slower(fast),
                slow: slower(slow),
                knee,
            },
        };
        Proposal {
            speeds,
            reserve: self.reserve,
            verdict: verdict_with(&self.resolved, &self.steady, speeds),
        }
    }

    /// The speeds of a full-stroke time, of the laws looked among.
    fn speeds_of(&self, time: Time) -> Speeds {
        match &self.family {
            LawFamily::TwoSpeed { knee, slow } => Speeds::Two {
                fast: (time - self.family.least()) / (1.0 - knee),
                slow: *slow,
                knee: *knee,
            },
            _ => Speeds::One { time },
        }
    }
}

/// The worst verdict of a line with other speeds of closing, solved in full.
pub(crate) fn verdict_with(found: &Resolved, steady: &Steady, speeds: Speeds) -> Verdict {
    let mut found = found.clone();
    found.drive.speeds = Ok(speeds);
    let transient = transient_to(&found, steady, Depth::Full);
    let walls: Walls = walls(&found, steady, &transient);
    verdicts(&found, steady, &transient, &walls)
        .iter()
        .map(|s| s.verdict)
        .max()
        .unwrap_or(Verdict::Unsettled)
}

#[derive(Debug, Clone)]
enum Phase {
    Coarse(ClosingSearch),
    Fine(ClosingSearch),
    Done(Found),
}

/// The search for the shortest safe closing, to be advanced a few runs at a
/// time.
#[derive(Debug, Clone)]
pub struct ClosingStudy {
    ground: Ground,
    phase: Phase,
    runs: usize,
}

impl ClosingStudy {
    /// Prepares the search for the book's line and the book's kind of law.
    ///
    /// # Errors
    /// What the transient or the limits lack.
    pub fn new(findings: &Findings) -> Figure<ClosingStudy> {
        let ground = Ground::new(findings)?;
        let first = ground.search(true, ground.slowest)?;
        Ok(ClosingStudy {
            ground,
            phase: Phase::Coarse(first),
            runs: 0,
        })
    }

    /// Does at most `runs` runs; what it finds, once it has.
    ///
    /// # Errors
    /// A run that cannot be computed.
    pub fn advance(&mut self, runs: usize) -> Figure<Option<&Found>> {
        let next = match &mut self.phase {
            Phase::Done(_) => None,
            Phase::Coarse(search) => {
                let error = self.ground.error;
                let answer = self.ground.advance(search, runs, error)?;
                let done = search.runs();
                match answer {
                    None => None,
                    Some(answer) => {
                        self.runs += done;
                        Some(after_coarse(&self.ground, &answer, self.runs)?)
                    }
                }
            }
            Phase::Fine(search) => {
                let from_top = search.slowest() >= self.ground.slowest;
                let answer = self.ground.advance(search, runs, 0.0)?;
                let done = search.runs();
                match answer {
                    None => None,
                    // What the coarse grid let pass the fine one does not:
                    // all again, there.
                    Some(ClosingAnswer::None { .. }) if !from_top => {
                        self.runs += done;
                        Some(Phase::Fine(self.ground.search(false, self.ground.slowest)?))
                    }
                    Some(answer) => {
                        self.runs += done;
                        Some(Phase::Done(found(&self.ground, &answer, self.runs)))
                    }
                }
            }
        };
        if let Some(next) = next {
            self.phase = next;
        }
        Ok(self.found())
    }

    /// What it finds, once it has.
    #[must_use]
    pub fn found(&self) -> Option<&Found> {
        match &self.phase {
            Phase::Done(found) => Some(found),
            _ => None,
        }
    }

    /// How far it is, from 0 to 1.
    #[must_use]
    pub fn progress(&self) -> f64 {
        match &self.phase {
            Phase::Coarse(search) => 0.6 * search.progress(),
            Phase::Fine(search) => 0.6 + 0.4 * search.progress(),
            Phase::Done(_) => 1.0,
        }
    }
}

/// What follows the answer of the coarse grid.
fn after_coarse(ground: &Ground, answer: &ClosingAnswer, runs: usize) -> Figure<Phase> {
    Ok(match answer {
        ClosingAnswer::Shortest { time, .. } => Phase::Fine(ground.search(false, *time)?),
        // With the error added it may fail where the fine grid holds.
        ClosingAnswer::None { .. } => Phase::Fine(ground.search(false, ground.slowest)?),
        ClosingAnswer::Any => Phase::Done(found(ground, answer, runs)),
    })
}

fn found(ground: &Ground, answer: &ClosingAnswer, runs: usize) -> Found {
    let (shortest, time) = match answer {
        ClosingAnswer::Shortest {
            time,
            fails_at,
            decides,
        } => (
            Shortest::Time {
                time: *time,
                fails_at: *fails_at,
                decides: ground.decides(decides),
            },
            Some(*time),
        ),
        ClosingAnswer::Any => (Shortest::AtOnce, Some(ground.family.least())),
        ClosingAnswer::None { decides } => (
            Shortest::None {
                decides: ground.decides(decides),
            },
            None,
        ),
    };
    Found {
        shortest,
        slowest: ground.slowest,
        proposal: time.map(|time| ground.proposal(ground.speeds_of(time))),
        runs,
    }
}

/// The search for two speeds that close sooner than one, to be advanced a few
/// runs at a time.
#[derive(Debug, Clone)]
pub struct TwoSpeedStudy {
    ground: Ground,
    search: TwoSpeedSearch,
    one_speed: Time,
    /// Found, once it is done; none where it is not worth it.
    found: Option<Option<TwoSpeeds>>,
}

impl TwoSpeedStudy {
    /// Prepares the search; `one_speed` is the shortest safe time at one speed.
    ///
    /// # Errors
    /// What the transient or the limits lack.
    pub fn new(findings: &Findings, one_speed: Time) -> Figure<TwoSpeedStudy> {
        let ground = Ground::new(findings)?;
        let search = TwoSpeedSearch::new(
            &ground.setup.line,
            &ground.coarse,
            &ground.spec(one_speed),
            one_speed,
            &TwoSpeedSpec::default(),
        );
        Ok(TwoSpeedStudy {
            ground,
            search,
            one_speed,
            found: None,
        })
    }

    /// Does at most `runs` runs; once it is done, what it finds: nothing where
    /// two speeds are not worth it.
    ///
    /// # Errors
    /// A run that cannot be computed.
    pub fn advance(&mut self, runs: usize) -> Figure<Option<Option<&TwoSpeeds>>> {
        if self.found.is_none() {
            let ground = &mut self.ground;
            let moves = Moves::with(
                &ground.resolved,
                &Speeds::One {
                    time: ground.slowest,
                },
            )?;
            let solver = Solver::new(&ground.setup, &moves);
            let (limits, error) = (&ground.limits, ground.error);
            let done = self
                .search
                .advance(runs, &mut ground.scratch, |run, case| {
                    limits.broken(&solver, run, case, error).is_none()
                })
                .map_err(trouble)?;
            if done {
                self.found = Some(self.best());
            }
        }
        Ok(self.found.as_ref().map(Option::as_ref))
    }

    fn best(&self) -> Option<TwoSpeeds> {
        let best = self.search.best()?;
        let speeds = Speeds::Two {
            fast: best.fast,
            slow: best.slow,
            knee: best.knee,
        };
        // The law must exist, and be worth its drive.
        law(&speeds).ok()?;
        let worth = best.time < self.one_speed * (1.0 - WORTH_TWO_SPEEDS);
        let proposal = self.ground.proposal(speeds);
        (worth && proposal.verdict < Verdict::Fails).then_some(TwoSpeeds {
            time: best.time,
            one_speed: self.one_speed,
            proposal,
        })
    }

    /// How far it is, from 0 to 1.
    #[must_use]
    pub fn progress(&self) -> f64 {
        self.search.progress()
    }
}

/// Takes a proposal: enters its speeds in the book.
pub fn apply(book: &mut Book, proposal: &Proposal) {
    let system = book.units;
    let time = |t: Time| Entry::set(t.get::<second>(), Kind::Time, system);
    match proposal.speeds {
        Speeds::One { time: closing } => {
            book.surge.speeds = ClosingSpeeds::One;
            book.surge.closing_time_s = time(closing);
        }
        Speeds::Two { fast, slow, knee } => {
            book.surge.speeds = ClosingSpeeds::Two;
            book.surge.fast_time_s = time(fast);
            book.surge.slow_time_s = time(slow);
            book.surge.knee_share = Entry::set(knee, Kind::Share, system);
        }
    }
}
