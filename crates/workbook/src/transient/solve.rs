//! Every event from every start: all of them on a coarse grid, then on a fine
//! one those that could be the worst of some stretch.
//!
//! A start whose column parts is run with cavities on the coarse grid, and
//! not for long: what follows does not converge on any grid, and no such run
//! holds.

use super::found::{
    EnvelopeNode, EventPeak, Extreme, Parted, Peaks, StretchOnGrid, StretchSurge, Surge, Trust,
};
use super::setup::{Moves, Setup, trouble};
use super::starts::{EventKind, Start, starts};
use crate::figure::{Figure, Gap, Lack};
use hydraulics::quantity::{Head, Level, PipeLength};
use hydraulics::transient::{
    Duration, Event, Grid, Model, Run, RunOptions, Scratch, StretchExtremes, TransientError,
};

/// Least share of the rise that the coarse grid is taken to fall short by.
pub(crate) const LEAST_ERROR: f64 = 0.01;
/// Rises below this share of the standing head are no measure of an error.
const SMALL_RISE: f64 = 0.01;
/// Most starts refined for their extremes; beyond them the coarse grid's,
/// raised by its error, stand.
const MOST_FINE: usize = 16;
/// Furthest that halving the step may move the peak, as a share of the rise.
pub(crate) const CONVERGED: f64 = 0.005;
/// The same as a share of the standing head, below which it is no matter.
const NO_MATTER: f64 = 2e-4;
/// Times the grid is refined where it is not fine enough.
const REFINEMENTS: u32 = 2;
/// Most that the balances may leave over, as a share.
const BALANCED: f64 = 1e-3;
/// Most starts of one kind run with cavities, the worst first.
const MOST_PARTED: usize = 3;
/// What a run of a short event that lasts only a few periods may miss, as a
/// share of the rise: of 2000 random lines of three pipes the most was 17 %
/// ([`Duration::ToThePeak`]).
const LATE_MISS: f64 = 0.25;
/// Periods after the last movement that a brief run lasts.
const BRIEF_PERIODS: f64 = 4.0;
/// Periods after the last movement that a run with cavities lasts.
const PARTED_PERIODS: f64 = 4.0;

/// Extremes of one start, pressure heads at every stretch.
#[derive(Debug, Clone)]
pub(crate) struct Found {
    pub(crate) start: Start,
    pub(crate) stretches: Vec<StretchExtremes>,
    pub(crate) foot: (Level, Level),
    pub(crate) parted: Option<Parted>,
    pub(crate) draws_air: bool,
    /// A short event, run for a few periods only: a later peak is not
    /// excluded.
    cut_short: bool,
}

/// Which extreme is looked at.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Sense {
    Highest,
    Lowest,
}

/// A line, its moves, and room to run.
pub(crate) struct Solver<'a> {
    pub(crate) setup: &'a Setup,
    pub(crate) moves: &'a Moves,
    scratch: Scratch,
    /// Standing head, m: what small is measured by.
    standing: f64,
}

impl<'a> Solver<'a> {
    pub(crate) fn new(setup: &'a Setup, moves: &'a Moves) -> Self {
        Solver {
            setup,
            moves,
            scratch: Scratch::new(),
            standing: (setup.forebay - setup.axis).m(),
        }
    }

    pub(crate) fn counts(&self, event: EventKind) -> bool {
        match event {
            EventKind::Slam => self.moves.guard_may_slam,
            EventKind::Blocked => !self.moves.jets_kept_clear,
            _ => true,
        }
    }

    /// One start on a grid.
    pub(crate) fn run(
        &mut self,
        grid: &Grid,
        start: Start,
        options: &RunOptions,
    ) -> Result<Run, TransientError> {
        let model = self.model(grid, start)?;
        let event = start.course(self.setup, self.moves)?;
        model.run(&event, options, &mut self.scratch)
    }

    /// One start on the fine grid, with what is asked for; where its column
    /// parts, with cavities on the coarse grid.
    pub(crate) fn to_show(
        &mut self,
        coarse: &Grid,
        fine: &Grid,
        start: Start,
        options: &RunOptions,
    ) -> Result<Run, TransientError> {
        let whole = self.run(fine, start, &without_cavities(options.clone()))?;
        if whole.separation.is_none() {
            return Ok(whole);
        }
        self.run(coarse, start, &with_cavities(options.clone()))
    }

    fn model(&self, grid: &Grid, start: Start) -> Result<Model, TransientError> {
        let strokes = start.first_strokes(self.setup.jets);
        Model::new(&self.setup.line, grid, &strokes, self.setup.friction)
    }

    /// Every start on the coarse grid, or those alone that count and to the
    /// end. Starts of one set at one opening share their steady state.
    fn all_coarse(&mut self, grid: &Grid, lasting: Lasting) -> Result<Vec<Found>, TransientError> {
        let long = without_cavities(RunOptions::lean());
        let brief = RunOptions {
            duration: Duration::PeriodsAfter(BRIEF_PERIODS),
            ..long.clone()
        };
        let period = self.setup.line.period();
        let mut all = Vec::new();
        let mut last: Option<Model> = None;
        let mut order = starts(self.setup.jets);
        order.retain(|s| lasting == Lasting::Brief || self.counts(s.event));
        order.sort_by(|a, b| {
            let shut = |s: &Start| s.event == EventKind::Opening;
            shut(a)
                .cmp(&shut(b))
                .then(a.open.cmp(&b.open))
                .then(b.opening.total_cmp(&a.opening))
        });
        for start in order {
            let strokes = start.first_strokes(self.setup.jets);
            let model = match last.take() {
                Some(model) if model.strokes() == strokes.as_slice() => model,
                _ => self.model(grid, start)?,
            };
            let event: Event = start.course(self.setup, self.moves)?;
            let cut_short = lasting == Lasting::Brief && event.ends() < period;
            let options = if cut_short { &brief } else { &long };
            let run = model.run(&event, options, &mut self.scratch)?;
            all.push(Found {
                cut_short,
                ..self.found(start, &run)
            });
            last = Some(model);
        }
        Ok(all)
    }

    pub(crate) fn found(&self, start: Start, run: &Run) -> Found {
        let mut stretches = run.extremes(&self.setup.line);
        self.with_jets(&mut stretches, run);
        // Without cavities the arithmetic goes below vapour pressure; water
        // does not.
        for extremes in &mut stretches {
            if extremes.lowest.0 < self.setup.vapour {
                extremes.lowest.0 = self.setup.vapour;
            }
        }
        Found {
            start,
            stretches,
            foot: (run.foot_highest.0, run.foot_lowest.0),
            parted: run.separation.map(|s| Parted {
                by: start,
                at: s.chainage,
                largest: s.largest,
            }),
            draws_air: run.draws_air,
            cut_short: false,
        }
    }

    /// Jets that lie below the pipe's foot bear more than it, and belong to
    /// the last stretch.
    fn with_jets(&self, stretches: &mut [StretchExtremes], run: &Run) {
        let (Some(last), Some(foot)) = (stretches.last_mut(), run.nodes.last()) else {
            return;
        };
        let at_jets = run.foot_highest.0 - self.setup.axis;
        if at_jets > last.highest.0 {
            last.highest = (at_jets, foot.chainage);
        }
    }

    /// How far an extreme lies from the standing level, m, never below 0, and
    /// its sign.
    fn excess(&self, extremes: &StretchExtremes, sense: Sense) -> f64 {
        let line = &self.setup.line.spec().line;
        let (head, at) = self.of(extremes, sense);
        let level = line_level(line, at).unwrap_or(self.setup.foot.m());
        let grade = head.m() + level;
        let away = match sense {
            Sense::Highest => grade - self.setup.forebay.m(),
            Sense::Lowest => self.setup.forebay.m() - grade,
        };
        if away > 0.0 { away } else { 0.0 }
    }

    #[expect(clippy::unused_self, reason = "reads as its neighbours do")]
    fn of(&self, extremes: &StretchExtremes, sense: Sense) -> (Head, PipeLength) {
        match sense {
            Sense::Highest => extremes.highest,
            Sense::Lowest => extremes.lowest,
        }
    }

    /// A coarse extreme, moved outward by an error, m of pressure head; larger
    /// is worse.
    fn badness(&self, extremes: &StretchExtremes, sense: Sense, error: f64) -> f64 {
        let head = self.of(extremes, sense).0.m();
        let by = error * self.excess(extremes, sense);
        match sense {
            Sense::Highest => head + by,
            Sense::Lowest => by - head,
        }
    }

    /// The share of its rise by which a coarse run falls short of a fine one,
    /// the most of all stretches.
    fn shortfall(&self, coarse: &Found, fine: &Found) -> f64 {
        let mut most = 0.0;
        for (c, f) in coarse.stretches.iter().zip(&fine.stretches) {
            for sense in [Sense::Highest, Sense::Lowest] {
                let (c, f) = (self.excess(c, sense), self.excess(f, sense));
                if f > SMALL_RISE * self.standing && f > c {
                    // Of what the coarse one has: that is what is raised.
                    let short = (f - c) / c.max(SMALL_RISE * self.standing);
                    if short > most {
                        most = short;
                    }
                }
            }
        }
        most
    }

    /// A run's extremes moved outward by an error.
    fn raised(&self, found: &Found, error: f64) -> Found {
        let mut found = found.clone();
        for extremes in &mut found.stretches {
            let up = error * self.excess(extremes, Sense::Highest);
            let down = error * self.excess(extremes, Sense::Lowest);
            extremes.highest.0 += Head::from_m(up);
            extremes.lowest.0 = extremes.lowest.0 - Head::from_m(down);
        }
        found
    }

    /// The worst over runs, with the lowest taken down to the lowest forebay
    /// level.
    pub(crate) fn peaks(&self, all: &[&Found]) -> Peaks {
        let setup = self.setup;
        let stretches = setup
            .stretches
            .iter()
            .enumerate()
            .filter_map(|(i, id)| {
                let worst = |sense| {
                    let bad = |f: &&&Found| {
                        f.stretches
                            .get(i)
                            .map_or(f64::NEG_INFINITY, |e| self.badness(e, sense, 0.0))
                    };
                    let found = all.iter().max_by(|a, b| bad(a).total_cmp(&bad(b)))?;
                    let (head, at) = self.of(found.stretches.get(i)?, sense);
                    Some((found.start, head, at))
                };
                let (high, low) = (worst(Sense::Highest)?, worst(Sense::Lowest)?);
                Some(StretchSurge {
                    stretch: *id,
                    highest: Extreme {
                        pressure: setup.pressure(high.1),
                        at: high.2,
                        by: high.0,
                    },
                    lowest: Extreme {
                        pressure: setup.pressure(low.1 - setup.low_by),
                        at: low.2,
                        by: low.0,
                    },
                })
            })
            .collect();
        Peaks {
            stretches,
            parted: all.iter().find_map(|f| f.parted),
            draws_air: all.iter().any(|f| f.draws_air),
        }
    }

    /// Only the coarse grid, every extreme raised by `error`: for studies.
    pub(crate) fn coarse_peaks(&mut self, error: f64) -> Figure<Peaks> {
        let longest = self.moves.longest();
        let grid = Grid::new(&self.setup.line, self.setup.coarse(longest)).map_err(trouble)?;
        let all = self.all_coarse(&grid, Lasting::ToTheEnd).map_err(trouble)?;
        let raised: Vec<Found> = all.iter().map(|f| self.raised(f, error)).collect();
        Ok(self.peaks(&raised.iter().collect::<Vec<_>>()))
    }

    /// The whole transient.
    pub(crate) fn solve(&mut self) -> Figure<Surge> {
        let longest = self.moves.longest();
        let coarse = Grid::new(&self.setup.line, self.setup.coarse(longest)).map_err(trouble)?;
        let mut all = self.all_coarse(&coarse, Lasting::Brief).map_err(trouble)?;
        let mut fine = Grid::new(&self.setup.line, self.setup.fine(longest)).map_err(trouble)?;
        let mut left = REFINEMENTS;
        loop {
            let refined = self.refine(&mut all, &coarse, &fine).map_err(trouble)?;
            let moved = self.moved(&fine, &refined).map_err(trouble)?;
            if moved.settles() {
                return self.result(&all, &coarse, &fine, refined, moved.share);
            }
            if left == 0 {
                return Err(Gap::Unsettled(Lack::NotConverged { moved: moved.share }));
            }
            left -= 1;
            fine = fine.halved();
        }
    }

    /// Runs on the fine grid what could be the worst of some stretch, and the
    /// worst of each kind of event.
    fn refine(
        &mut self,
        all: &mut [Found],
        coarse: &Grid,
        grid: &Grid,
    ) -> Result<Refined, TransientError> {
        let mut refined = Refined {
            runs: Vec::new(),
            error: LEAST_ERROR,
        };
        self.with_cavities(all, coarse, &mut refined)?;
        for event in [
            EventKind::Closing,
            EventKind::Blocked,
            EventKind::Opening,
            EventKind::Slam,
        ] {
            for sense in [Sense::Highest, Sense::Lowest] {
                if let Some(index) = self.worst_foot(all, event, sense) {
                    self.refine_one(all, index, grid, &mut refined)?;
                }
            }
        }
        while refined.runs.len() < MOST_FINE {
            let Some(index) = self.unrefined_worst(all, &refined) else {
                break;
            };
            if let Some(found) = all.get_mut(index).filter(|f| f.cut_short) {
                let options = without_cavities(RunOptions::lean());
                let run = self.run(coarse, found.start, &options)?;
                *found = self.found(found.start, &run);
                continue;
            }
            self.refine_one(all, index, grid, &mut refined)?;
        }
        Ok(refined)
    }

    /// The worst starts whose column parts, with cavities.
    fn with_cavities(
        &mut self,
        all: &[Found],
        grid: &Grid,
        refined: &mut Refined,
    ) -> Result<(), TransientError> {
        for event in super::starts::EVENTS {
            let mut parted: Vec<(usize, &Found)> = all
                .iter()
                .enumerate()
                .filter(|(_, f)| f.start.event == event && f.parted.is_some())
                .collect();
            parted.sort_by(|a, b| b.1.foot.0.m().total_cmp(&a.1.foot.0.m()));
            let most = if self.counts(event) { MOST_PARTED } else { 1 };
            for (index, found) in parted.into_iter().take(most) {
                let run = self.run(grid, found.start, &with_cavities(shown_options()))?;
                let mut again = self.found(found.start, &run);
                again.parted = again.parted.or(found.parted);
                refined.runs.push(RefinedRun {
                    index,
                    found: again,
                    run,
                });
            }
        }
        Ok(())
    }

    /// The start of this kind with the most extreme grade at the foot.
    #[expect(clippy::unused_self, reason = "reads as its neighbours do")]
    fn worst_foot(&self, all: &[Found], event: EventKind, sense: Sense) -> Option<usize> {
        let bad = |f: &Found| match sense {
            Sense::Highest => f.foot.0.m(),
            Sense::Lowest => -f.foot.1.m(),
        };
        all.iter()
            .enumerate()
            .filter(|(_, f)| f.start.event == event && f.parted.is_none())
            .max_by(|a, b| bad(a.1).total_cmp(&bad(b.1)))
            .map(|(index, _)| index)
    }

    /// A start not yet refined that, raised by the error found so far, could
    /// be worse than every refined one somewhere.
    fn unrefined_worst(&self, all: &[Found], refined: &Refined) -> Option<usize> {
        for stretch in 0..self.setup.stretches.len() {
            for sense in [Sense::Highest, Sense::Lowest] {
                let best = refined
                    .runs
                    .iter()
                    .filter(|r| self.counts(r.found.start.event))
                    .filter_map(|r| r.found.stretches.get(stretch))
                    .map(|e| self.badness(e, sense, 0.0))
                    .fold(f64::NEG_INFINITY, f64::max);
                let worst = all
                    .iter()
                    .enumerate()
                    .filter(|(i, f)| self.counts(f.start.event) && !refined.has(*i))
                    .filter(|(_, f)| f.parted.is_none())
                    .filter_map(|(i, f)| {
                        let e = f.stretches.get(stretch)?;
                        let late = if f.cut_short { LATE_MISS } else { 0.0 };
                        Some((i, self.badness(e, sense, refined.error + late)))
                    })
                    .max_by(|a, b| a.1.total_cmp(&b.1));
                if let Some((index, bad)) = worst
                    && bad > best + 1e-9 * self.standing
                {
                    return Some(index);
                }
            }
        }
        None
    }

    fn refine_one(
        &mut self,
        all: &[Found],
        index: usize,
        grid: &Grid,
        refined: &mut Refined,
    ) -> Result<(), TransientError> {
        let Some(coarse) = all.get(index) else {
            return Ok(());
        };
        if refined.has(index) {
            return Ok(());
        }
        let run = self.run(grid, coarse.start, &without_cavities(shown_options()))?;
        let found = self.found(coarse.start, &run);
        if found.parted.is_none() && !coarse.cut_short {
            let short = self.shortfall(coarse, &found);
            if short > refined.error {
                refined.error = short;
            }
        }
        refined.runs.push(RefinedRun { index, found, run });
        Ok(())
    }

    /// How far half the step moves the peak of the run shown.
    fn moved(&mut self, grid: &Grid, refined: &Refined) -> Result<Moved, TransientError> {
        let Some(shown) = refined.shown(|event| self.counts(event)) else {
            return Ok(Moved::default());
        };
        let (start, run) = (shown.found.start, &shown.run);
        if run.separation.is_some() {
            // Peaks after a cavity do not converge: nothing is promised, and
            // no such run holds.
            return Ok(Moved::default());
        }
        let peak = run.foot_highest;
        let until = peak.1 + self.setup.line.period();
        let options = RunOptions {
            duration: Duration::Until(until),
            ..without_cavities(RunOptions::lean())
        };
        let finer = self.run(&grid.halved(), start, &options)?;
        let apart = (peak.0 - finer.foot_highest.0).m().abs();
        let base = if self.setup.forebay > run.foot_start {
            self.setup.forebay
        } else {
            run.foot_start
        };
        let rise = (finer.foot_highest.0 - base).m();
        Ok(Moved {
            share: if rise > 1e-9 { apart / rise } else { 0.0 },
            of_standing: apart / self.standing,
        })
    }

    fn result(
        &mut self,
        all: &[Found],
        coarse: &Grid,
        fine: &Grid,
        refined: Refined,
        moved: f64,
    ) -> Figure<Surge> {
        let setup = self.setup;
        // Those that were not refined stand raised; none of them is the worst
        // of a stretch unless there were too many to refine.
        let raised: Vec<Found> = all
            .iter()
            .enumerate()
            .filter(|(i, f)| self.counts(f.start.event) && !refined.has(*i))
            .map(|(_, f)| self.raised(f, refined.error))
            .collect();
        let counted: Vec<&Found> = refined
            .runs
            .iter()
            .map(|r| &r.found)
            .filter(|f| self.counts(f.start.event))
            .chain(&raised)
            .collect();
        let peaks = self.peaks(&counted);
        let shown = refined
            .shown(|event| self.counts(event))
            .ok_or(Gap::Unsettled(Lack::Surge))?;
        let deciding = shown.found.start;
        let run = shown.run.clone();
        let balance = run.balance.ok_or(Gap::Unsettled(Lack::Surge))?;
        let left = balance.volume.abs().max(balance.energy.abs());
        if run.separation.is_none() && (left > BALANCED || left.is_nan()) {
            return Err(Gap::Unsettled(Lack::NotBalanced { left }));
        }
        let full = setup
            .line
            .steady(&vec![1.0; setup.jets as usize])
            .map_err(trouble)?
            .ok_or(Gap::Unsettled(Lack::Surge))?;
        let water_starting = setup
            .line
            .water_starting_time(full.grade.flow, full.net_head)
            .map_err(|why| {
                Gap::Wrong(crate::figure::Trouble::Surge {
                    stretch: setup.stretches.first().copied().unwrap_or(1),
                    why,
                })
            })?;
        Ok(Surge {
            peaks,
            events: self.events(&refined),
            envelope: self.envelope(&refined),
            deciding,
            foot: run.foot,
            foot_start: run.foot_start,
            foot_highest: run.foot_highest,
            foot_lowest: run.foot_lowest,
            closing: self.moves.law.full_stroke_time(),
            period: setup.line.period(),
            water_starting,
            trust: Trust {
                step: fine.step(),
                cells: fine.cells(),
                stretches: setup
                    .stretches
                    .iter()
                    .zip(&setup.wave_speeds)
                    .zip(fine.stretches())
                    .map(|((stretch, wave_speed), on)| StretchOnGrid {
                        stretch: *stretch,
                        wave_speed: *wave_speed,
                        altered: on.alteration,
                        cells: on.cells,
                    })
                    .collect(),
                moved,
                balance,
                coarse_step: coarse.step(),
                coarse_cells: coarse.cells(),
                coarse_error: refined.error,
                runs: (all.len(), refined.runs.len()),
            },
        })
    }

    fn events(&self, refined: &Refined) -> Vec<EventPeak> {
        super::starts::EVENTS
            .into_iter()
            .filter_map(|event| self.event(refined, event))
            .collect()
    }

    /// The worst of one kind of event: by stretch over all its refined runs.
    fn event(&self, refined: &Refined, event: EventKind) -> Option<EventPeak> {
        let run_as = match event {
            // Nothing moves: what stands before any event.
            EventKind::LoadLost if self.moves.deflectors => return self.load_lost(),
            EventKind::LoadLost => EventKind::Closing,
            other => other,
        };
        let runs: Vec<&Found> = refined
            .runs
            .iter()
            .map(|r| &r.found)
            .filter(|f| f.start.event == run_as)
            .collect();
        let top = runs
            .iter()
            .max_by(|a, b| a.foot.0.m().total_cmp(&b.foot.0.m()))?;
        let low = runs
            .iter()
            .map(|f| f.foot.1)
            .reduce(|a, b| if b < a { b } else { a })?;
        let peaks = self.peaks(&runs);
        Some(EventPeak {
            start: Start { event, ..top.start },
            counts: self.counts(event),
            foot_highest: top.foot.0,
            foot_lowest: low,
            highest: peaks
                .stretches
                .iter()
                .map(|s| (s.highest.pressure, s.highest.at))
                .collect(),
            lowest: peaks
                .stretches
                .iter()
                .map(|s| (s.lowest.pressure, s.lowest.at))
                .collect(),
            parted: peaks.parted,
        })
    }

    /// The load lost with the deflectors in: the running line, unmoved.
    fn load_lost(&self) -> Option<EventPeak> {
        let start = Start {
            event: EventKind::LoadLost,
            open: self.setup.jets,
            opening: 1.0,
        };
        let steady = self
            .setup
            .line
            .steady(&start.strokes(self.setup.jets))
            .ok()??;
        let foot = steady.grade.nodes.last()?;
        let grade = foot.level + foot.pressure.head(self.setup.density, gravity());
        let mut highest = Vec::new();
        let mut lowest = Vec::new();
        for index in 0..self.setup.stretches.len() {
            let of = |worse: fn(f64, f64) -> bool| {
                steady
                    .grade
                    .nodes
                    .iter()
                    .filter(|n| n.run == index)
                    .map(|n| (n.pressure, n.chainage))
                    .reduce(|a, b| if worse(b.0.pa(), a.0.pa()) { b } else { a })
            };
            highest.push(of(|b, a| b > a)?);
            lowest.push(of(|b, a| b < a)?);
        }
        Some(EventPeak {
            start,
            counts: true,
            foot_highest: grade,
            foot_lowest: grade,
            highest,
            lowest,
            parted: None,
        })
    }

    /// Highest and lowest level over every refined run that counts.
    fn envelope(&self, refined: &Refined) -> Vec<EnvelopeNode> {
        let lower = |level: Level| level - self.setup.low_by;
        let mut counted: Vec<&RefinedRun> = refined
            .runs
            .iter()
            .filter(|r| self.counts(r.found.start.event))
            .collect();
        // The finest nodes first; runs on other nodes are read between theirs.
        counted.sort_by_key(|r| core::cmp::Reverse(r.run.nodes.len()));
        let Some(first) = counted.first() else {
            return Vec::new();
        };
        let mut nodes: Vec<EnvelopeNode> = first
            .run
            .nodes
            .iter()
            .map(|n| EnvelopeNode {
                chainage: n.chainage,
                level: n.level,
                highest: n.highest,
                lowest: lower(n.lowest),
            })
            .collect();
        for run in counted.iter().skip(1).map(|r| &r.run) {
            let same = run.nodes.len() == nodes.len();
            for (i, node) in nodes.iter_mut().enumerate() {
                let range = if same {
                    run.nodes.get(i).map(|n| (n.highest, n.lowest))
                } else {
                    run.range_at(node.chainage)
                };
                let Some((high, low)) = range else { continue };
                if high > node.highest {
                    node.highest = high;
                }
                if lower(low) < node.lowest {
                    node.lowest = lower(low);
                }
            }
        }
        nodes
    }
}

/// How long the coarse runs last.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Lasting {
    /// Short events for a few periods only, to see which could be the worst.
    Brief,
    /// Every run to its peak; only the events that count.
    ToTheEnd,
}

/// To the peak, with the course at the foot and the balances.
fn shown_options() -> RunOptions {
    RunOptions {
        duration: RunOptions::lean().duration,
        ..RunOptions::default()
    }
}

fn without_cavities(options: RunOptions) -> RunOptions {
    RunOptions {
        cavity: None,
        ..options
    }
}

fn with_cavities(options: RunOptions) -> RunOptions {
    RunOptions {
        duration: Duration::PeriodsAfter(PARTED_PERIODS),
        cavity: RunOptions::default().cavity,
        ..options
    }
}

fn gravity() -> hydraulics::quantity::Acceleration {
    hydraulics::constants::standard_gravity()
}

/// Level of the pipe at a chainage, by its surveyed points.
fn line_level(line: &hydraulics::line::Line, at: PipeLength) -> Option<f64> {
    let points = &line.spec().points;
    let x = at.m();
    let after = points.partition_point(|p| p.chainage.m() < x);
    let b = points.get(after).or(points.last())?;
    let Some(a) = after.checked_sub(1).and_then(|i| points.get(i)) else {
        return Some(b.level.m());
    };
    let width = (b.chainage - a.chainage).m();
    if width <= 0.0 {
        return Some(b.level.m());
    }
    let share = (x - a.chainage.m()) / width;
    Some(a.level.m() + share * (b.level - a.level).m())
}

/// A start run on the fine grid.
#[derive(Debug)]
struct RefinedRun {
    index: usize,
    found: Found,
    run: Run,
}

/// All of them, and the error of the coarse grid they show.
#[derive(Debug)]
struct Refined {
    runs: Vec<RefinedRun>,
    error: f64,
}

impl Refined {
    fn has(&self, index: usize) -> bool {
        self.runs.iter().any(|r| r.index == index)
    }

    /// The run with the highest grade at the foot, of those that count.
    fn shown(&self, counts: impl Fn(EventKind) -> bool) -> Option<&RefinedRun> {
        self.runs
            .iter()
            .filter(|r| counts(r.found.start.event))
            .max_by(|a, b| a.found.foot.0.m().total_cmp(&b.found.foot.0.m()))
    }
}

/// How far half the step moves a peak.
#[derive(Debug, Clone, Copy, Default)]
struct Moved {
    share: f64,
    of_standing: f64,
}

impl Moved {
    fn settles(self) -> bool {
        self.share <= CONVERGED || self.of_standing <= NO_MATTER
    }
}
