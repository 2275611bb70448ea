//! The sweep: every catalogue pipe, one pipe all the way, against the book's
//! own line and flow.
//!
//! A study: it evaluates altered books and is never called by `evaluate`. It
//! is resumable, so that the page can work it in slices an edit cancels.
//!
//! Rows come first without surge, and say that it is unsettled ([`Sweep`]).
//! Those that do not fail otherwise are then solved by the same transient on
//! its coarser grid ([`SurgeSweep`]): every start of every event that counts,
//! each peak raised by the error of that grid as measured on the chosen line.

use crate::book::Book;
use crate::evaluate::Findings;
use crate::field::Field;
use crate::figure::{CloneGap, Figure, Gap, Lack};
use crate::judge::verdicts;
use crate::resolve::{Resolved, resolve};
use crate::steady::steady;
use crate::transient::{Depth, LEAST_ERROR, transient_to};
use crate::verdict::{StretchVerdict, Verdict};
use crate::walls::{CollapseFigures, walls};
use hydraulics::quantity::{GaugePressure, Head};
use pipes::{Attested, Material, Pipe};
use std::sync::Arc;
use uom::si::f64::{Length, Power, Velocity};

/// One pipe, all the way.
#[derive(Debug, Clone, PartialEq)]
pub struct Row {
    /// Its id: of the catalogue, or `own/<id>`.
    pub pipe: String,
    /// Its label in tables.
    pub short: String,
    /// Its series.
    pub series: String,
    /// Its material.
    pub material: Material,
    /// Its rating as printed: symbol and number, or grade.
    pub class: String,
    /// Outside diameter over least wall: what parts the classes of a series.
    pub ratio: f64,
    /// Bore.
    pub bore: Length,
    /// Mean velocity at the flow that passes.
    pub velocity: Figure<Velocity>,
    /// Head lost from forebay to nozzle.
    pub loss: Figure<Head>,
    /// The same as a share of gross head; over 1 the pipe cannot pass the
    /// flow.
    pub loss_share: Figure<f64>,
    /// Net head at the nozzle.
    pub net_head: Figure<Head>,
    /// Power in the jets.
    pub power: Figure<Power>,
    /// Highest standing pressure.
    pub standing: Figure<GaugePressure>,
    /// Highest pressure in a surge; unsettled until the row is solved.
    pub surge: Figure<GaugePressure>,
    /// The same over what the weakest part bears.
    pub surge_share: Figure<f64>,
    /// Quick surge estimate: settles nothing.
    pub quick_rise: Figure<Head>,
    /// Standing pressure over what the weakest part bears.
    pub share: Figure<f64>,
    /// The same with the quick surge estimate on top.
    pub share_with_quick: Figure<f64>,
    /// Collapse under full vacuum.
    pub collapse: Figure<CollapseFigures>,
    /// Whether every figure it rests on has a source that was seen.
    pub seen: bool,
    /// The verdict, with its checks.
    pub verdict: StretchVerdict,
}

/// A sweep at work.
#[derive(Debug, Clone)]
pub struct Sweep {
    base: Resolved,
    pipes: Vec<Arc<Pipe>>,
    done: usize,
}

impl Sweep {
    /// A sweep over the catalogue and the book's own pipes, none done yet.
    #[must_use]
    pub fn new(book: &Book) -> Sweep {
        Sweep::over(book, pipes::catalogue().pipes.iter().cloned().map(Arc::new))
    }

    /// A sweep over these pipes, and the book's own.
    #[must_use]
    pub fn over(book: &Book, pipes: impl Iterator<Item = Arc<Pipe>>) -> Sweep {
        let mut base = resolve(book);
        // One stretch from end to end; which pipe comes with each row.
        if let Some(mut only) = base.stretches.first().cloned() {
            if let Some(last) = base.stretches.last()
                && let (Ok(first), Ok(last)) = (&mut only.span, &last.span)
            {
                first.to = last.to;
            }
            for fitting in &mut base.fittings {
                fitting.stretch = fitting.at.is_ok().then_some(only.id);
            }
            for turn in &mut base.turns {
                turn.stretch = Some(only.id);
            }
            base.stretches = vec![only];
        }
        let own = own_pipes(book);
        Sweep {
            base,
            pipes: pipes.chain(own).collect(),
            done: 0,
        }
    }

    /// How many rows there will be.
    #[must_use]
    pub fn total(&self) -> usize {
        self.pipes.len()
    }

    /// How many rows are done.
    #[must_use]
    pub fn done(&self) -> usize {
        self.done
    }

    /// The next `count` rows; fewer at the end, none after it.
    pub fn advance(&mut self, count: usize) -> Vec<Row> {
        let end = (self.done + count).min(self.pipes.len());
        let rows = (self.done..end).filter_map(|i| self.row(i)).collect();
        self.done = end;
        rows
    }

    fn row(&mut self, index: usize) -> Option<Row> {
        self.row_to(index, Depth::Quick)
    }

    fn row_to(&mut self, index: usize, depth: Depth) -> Option<Row> {
        let pipe = Arc::clone(self.pipes.get(index)?);
        self.base.stretches.first_mut()?.pipe = Ok(Arc::clone(&pipe));
        let found = &self.base;
        let steady = steady(found);
        let transient = transient_to(found, &steady, depth);
        let walls = walls(found, &steady, &transient);
        let verdict = verdicts(found, &steady, &transient, &walls).pop()?;
        let wall = walls.stretches.into_iter().next()?;
        let seen = wall.at_rating.as_ref().is_ok_and(|a| a.attested.is_seen())
            && pipe.dimensions.attested == Attested::Seen
            && pipe.modulus_short.attested == Attested::Seen;
        Some(Row {
            pipe: pipe.id.clone(),
            short: pipe.short.clone(),
            series: pipe.series.clone(),
            material: pipe.material,
            class: class(&pipe),
            ratio: ratio(pipe.outside_diameter / pipe.wall_min),
            bore: pipe.bore(),
            velocity: steady
                .stretches
                .first()
                .map_or(Err(Gap::needs(Field::DesignFlow)), |(_, run)| {
                    run.clone().map(|r| r.velocity)
                }),
            loss: steady.loss.clone(),
            loss_share: steady.loss_share.clone(),
            net_head: steady.solved.clone_gap().map(|s| s.net_head),
            power: steady.solved.clone_gap().map(|s| s.jet_power),
            standing: wall.standing.map(|s| s.pressure),
            surge: wall.surge.map(|s| s.pressure),
            surge_share: wall.surge_share,
            quick_rise: transient
                .quick
                .first()
                .map_or(Err(Gap::Unsettled(Lack::Surge)), |(_, q)| {
                    q.clone().map(|q| q.rise)
                }),
            share: wall.share,
            share_with_quick: wall.share_with_quick,
            collapse: wall.collapse,
            seen,
            verdict,
        })
    }
}

/// The second pass of a sweep at work: rows with surge.
#[derive(Debug, Clone)]
pub struct SurgeSweep {
    sweep: Sweep,
    /// Places of the rows to be solved.
    places: Vec<usize>,
    done: usize,
    /// Error of the coarse grid, as a share of the rise; none until measured.
    error: Option<f64>,
}

impl SurgeSweep {
    /// The second pass over the rows of a sweep that is done, for those that
    /// do not fail already. The error of the coarse grid is that of the chosen
    /// line in `findings`; where its surge is not solved, that of the first
    /// row, which is then solved in full to measure it.
    #[must_use]
    pub fn new(sweep: Sweep, rows: &[Row], findings: &Findings) -> SurgeSweep {
        let places = rows
            .iter()
            .enumerate()
            .filter(|(_, row)| row.verdict.verdict != Verdict::Fails)
            .map(|(place, _)| place)
            .collect();
        let surge = findings.transient.surge.as_ref();
        SurgeSweep {
            sweep,
            places,
            done: 0,
            error: surge.ok().map(|s| s.trust.coarse_error),
        }
    }

    /// How many rows there are to solve.
    #[must_use]
    pub fn total(&self) -> usize {
        self.places.len()
    }

    /// How many are solved.
    #[must_use]
    pub fn done(&self) -> usize {
        self.done
    }

    /// Solves the next `count` rows: each with its place among the rows of the
    /// first pass. Fewer at the end, none after it.
    pub fn advance(&mut self, count: usize) -> Vec<(usize, Row)> {
        let end = (self.done + count).min(self.places.len());
        let mut rows = Vec::with_capacity(end - self.done);
        for place in self.places.get(self.done..end).unwrap_or_default() {
            let error = match self.error {
                Some(error) => error,
                None => {
                    let measured = self.sweep.coarse_error(*place).unwrap_or(LEAST_ERROR);
                    self.error = Some(measured);
                    measured
                }
            };
            if let Some(row) = self.sweep.row_to(*place, Depth::Coarse(error)) {
                rows.push((*place, row));
            }
        }
        self.done = end;
        rows
    }
}

impl Sweep {
    /// The error of the coarse grid on one row, solved in full.
    fn coarse_error(&mut self, index: usize) -> Option<f64> {
        let pipe = Arc::clone(self.pipes.get(index)?);
        self.base.stretches.first_mut()?.pipe = Ok(pipe);
        let steady = steady(&self.base);
        let solved = transient_to(&self.base, &steady, Depth::Full).surge.ok()?;
        Some(solved.trust.coarse_error)
    }
}

fn ratio(x: uom::si::f64::Ratio) -> f64 {
    x.get::<uom::si::ratio::ratio>()
}

/// A pipe's rating as printed.
#[must_use]
pub fn class(pipe: &Pipe) -> String {
    match &pipe.rating {
        pipes::Rating::Class(c) => format!("{} {}", c.symbol, c.number),
        pipes::Rating::Stress(s) => s.grade.clone(),
    }
}

/// The book's own pipes that can be used.
fn own_pipes(book: &Book) -> Vec<Arc<Pipe>> {
    let mut reader = crate::resolve::Reader {
        book,
        assumptions: Vec::new(),
        troubles: Vec::new(),
    };
    book.own_pipes
        .iter()
        .filter_map(|entry| crate::resolve::own_pipe::build(&mut reader, entry).ok())
        .map(Arc::new)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::demo;
    use crate::entry::Entry;
    use crate::evaluate::evaluate;
    use crate::pipe_copy::PipeCopy;
    use crate::reading::DecimalMark;
    use crate::verdict::{CheckKind, Verdict};

    fn all(book: &Book) -> Vec<Row> {
        let mut sweep = Sweep::new(book);
        let total = sweep.total();
        let mut rows = Vec::new();
        while sweep.done() < total {
            rows.extend(sweep.advance(37));
        }
        assert_eq!(rows.len(), total);
        assert!(sweep.advance(10).is_empty());
        rows
    }

    #[test]
    fn a_row_is_what_the_whole_book_says_with_that_pipe() {
        let mut book = demo("demo");
        book.line.stretches.truncate(1);
        for row in all(&book).iter().step_by(41) {
            let pipe = pipes::catalogue().find(&row.pipe).unwrap();
            book.pipes = vec![PipeCopy::of(pipe)];
            book.line.stretches[0].pipe = Some(row.pipe.clone());
            let found = evaluate(&book);
            assert_eq!(row.loss, found.steady.loss, "{}", row.pipe);
            // Surge apart, which the first pass leaves unsettled.
            for (a, b) in row
                .verdict
                .checks
                .iter()
                .zip(&found.judged.stretches[0].checks)
            {
                match a.kind {
                    CheckKind::SurgePressure => {
                        assert_eq!(a.gap, Some(Gap::Unsettled(Lack::Surge)));
                    }
                    CheckKind::LowestPressure => assert!(a.verdict >= Verdict::Unsettled),
                    _ => assert_eq!(a, b, "{}", row.pipe),
                }
            }
            assert_eq!(row.share, found.walls.stretches[0].share);
        }
    }

    /// A row solved on the coarse grid, with its allowance, says no better
    /// than the whole book with that pipe says on the fine one.
    #[test]
    fn a_solved_row_is_never_kinder_than_the_whole_book() {
        let mut book = demo("demo");
        book.line.stretches.truncate(1);
        let found = evaluate(&book);
        let mut sweep = Sweep::new(&book);
        let rows = sweep.advance(usize::MAX);
        let mut second = SurgeSweep::new(sweep, &rows, &found);
        assert!(second.total() > 20);
        let mut solved = 0;
        let mut settled = 0;
        while second.done() < second.total() {
            for (place, row) in second.advance(7) {
                solved += 1;
                assert_eq!(row.pipe, rows[place].pipe);
                settled += usize::from(row.verdict.verdict <= Verdict::Tight);
                if solved % 23 != 1 {
                    continue;
                }
                let pipe = pipes::catalogue().find(&row.pipe).unwrap();
                book.pipes = vec![PipeCopy::of(pipe)];
                book.line.stretches[0].pipe = Some(row.pipe.clone());
                let found = evaluate(&book);
                let whole = &found.judged.stretches[0];
                assert!(row.verdict.verdict >= whole.verdict, "{}", row.pipe);
                let (coarse, fine) = (row.surge.clone(), found.walls.stretches[0].surge.clone());
                let (coarse, fine) = (coarse.unwrap().pa(), fine.unwrap().pressure.pa());
                assert!(
                    coarse >= fine * (1.0 - 1e-9),
                    "{}: {coarse} {fine}",
                    row.pipe
                );
                assert!(coarse < fine * 1.05, "{}: {coarse} {fine}", row.pipe);
            }
        }
        assert_eq!(solved, second.total());
        assert!(settled > 5 && second.advance(3).is_empty());
    }

    #[test]
    fn no_pipe_holds_where_surge_is_not_solved() {
        let rows = all(&demo("demo"));
        assert!(rows.iter().all(|r| r.verdict.verdict >= Verdict::Unsettled));
        assert!(rows.iter().any(|r| r.verdict.verdict == Verdict::Fails));
        assert!(rows.iter().any(|r| r.verdict.verdict == Verdict::Unsettled));
    }

    #[test]
    fn too_narrow_a_pipe_still_shows_its_loss() {
        let rows = all(&demo("demo"));
        let narrow = rows
            .iter()
            .find(|r| r.loss_share.as_ref().is_ok_and(|s| *s > 1.0))
            .expect("some catalogue pipe is too narrow for the demo");
        assert!(narrow.net_head.is_err());
        assert_eq!(narrow.verdict.verdict, Verdict::Fails);
        assert_eq!(
            narrow.verdict.deciding_check().unwrap().kind,
            CheckKind::PassesFlow
        );
        assert!(narrow.velocity.is_ok());
    }

    #[test]
    fn without_a_flow_pressures_stand() {
        let mut book = demo("demo");
        book.stream.design_flow_m3_s =
            Entry::typed("?", "L/s", Field::DesignFlow.kind(), DecimalMark::Point);
        let row = Sweep::new(&book).advance(1).pop().unwrap();
        assert!(row.loss.is_err() && row.standing.is_ok() && row.collapse.is_ok());
    }
}
