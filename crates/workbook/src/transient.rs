//! Stage 3: transients.
//!
//! The whole transient of the book's own line: every event from every start,
//! with new pipe, the highest forebay level, the nozzles as ordered and the
//! wave speed of the coldest wall ([`Surge`]). Beside it the quick figures of
//! Joukowsky, Michaud and Allievi: estimates, which settle nothing.
//!
//! # Starts
//! The closing starts from every set of equal jets at ten openings each, at
//! the same rate of stroke; a jet blocked, the guard valve slammed and the
//! opening from every set at full stroke.
//!
//! # What counts
//! Closing, opening, load lost; one jet blocked, unless the book says that
//! nothing that could block one gets past the rack (a stop at once parts the
//! column in the upper part of nearly every line, so a line is not judged by
//! it where it cannot happen; the usual is that it can). The slammed valve is
//! always computed and shown, and counts where the book says that the guard
//! valve can be slammed. The usual is that it cannot: a guard valve with a gear or a
//! screw takes its time whatever the hand does, and a line judged against a
//! slam that cannot happen would hide what the closing does. Where it can, as
//! with a lever on a quarter turn, the user says so.
//!
//! # Cost
//! All starts run on a coarse grid; on a fine one only those that could be
//! the worst of some stretch once the coarse grid's own error, measured on the
//! runs made on both, is added.

mod found;
mod quick;
mod setup;
mod solve;
mod starts;
mod trace;

pub use found::{
    EnvelopeNode, EventPeak, Extreme, Parted, Peaks, StretchOnGrid, StretchSurge, Surge, Trust,
};
pub use quick::{QuickClosing, QuickSurge};
pub(crate) use setup::{Moves, Setup, family, law, trouble};
pub(crate) use solve::{LEAST_ERROR, Solver};
pub(crate) use starts::sets;
pub use starts::{EVENTS, EventKind, OPENINGS, Start};
pub use trace::{Shown, show, trace_at};

use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap, Lack, Trouble};
use crate::resolve::{Assumption, Resolved};
use crate::steady::Steady;
use hydraulics::quantity::Head;
use hydraulics::surge::series;
use uom::si::f64::Time;

/// Everything stage 3 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Transient {
    /// The quick estimate, stretch by stretch.
    pub quick: Vec<(Id, Figure<QuickSurge>)>,
    /// Time for a wave to run up the whole line and back.
    pub period: Figure<Time>,
    /// The greatest of the quick rises: what the foot may see.
    pub greatest_rise: Figure<Head>,
    /// Michaud's and Allievi's estimates of the closing.
    pub quick_closing: Figure<QuickClosing>,
    /// The whole transient.
    pub surge: Figure<Surge>,
    /// What verdicts rest on: those of `surge`, or of a study's coarser
    /// solution.
    pub peaks: Figure<Peaks>,
    /// What was taken for granted here.
    pub assumptions: Vec<Assumption>,
}

/// How far the transient is solved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Depth {
    /// Quick figures only: surge stays unsettled.
    Quick,
    /// On the coarse grid, every extreme raised by this share of its rise.
    Coarse(f64),
    /// In full.
    Full,
}

/// Stage 3, in full.
#[must_use]
pub fn transient(found: &Resolved, steady: &Steady) -> Transient {
    transient_to(found, steady, Depth::Full)
}

pub(crate) fn transient_to(found: &Resolved, steady: &Steady, depth: Depth) -> Transient {
    let mut waves = Vec::new();
    let quick: Vec<(Id, Figure<QuickSurge>)> = found
        .stretches
        .iter()
        .zip(&steady.stretches)
        .map(|(stretch, (_, run))| {
            let figure = quick::quick(found, stretch, run).map(|(wave, surge)| {
                waves.push(wave);
                surge
            });
            (stretch.id, figure)
        })
        .collect();
    let whole: Figure<()> = quick
        .iter()
        .try_for_each(|(_, q)| q.clone_gap().map(|_| ()));
    let one = whole.clone().and_then(|()| {
        let first = found.stretches.first().map_or(1, |s| s.id);
        series(&waves).map_err(|why| {
            Gap::Wrong(Trouble::Surge {
                stretch: first,
                why,
            })
        })
    });
    let greatest_rise = whole.map(|()| {
        quick
            .iter()
            .filter_map(|(_, q)| q.as_ref().ok())
            .map(|q| q.rise)
            .fold(Head::from_m(0.0), |a, b| if b > a { b } else { a })
    });
    let quick_closing = one.clone_gap().and_then(|one| quick::closing(found, one));
    let (surge, peaks) = solved(found, steady, depth);
    Transient {
        assumptions: assumptions(found, &quick),
        quick,
        period: one.map(|s| s.period),
        greatest_rise,
        quick_closing,
        surge,
        peaks,
    }
}

fn solved(found: &Resolved, steady: &Steady, depth: Depth) -> (Figure<Surge>, Figure<Peaks>) {
    let unsolved = || Gap::Unsettled(Lack::Surge);
    let both = |gap: Gap| (Err(gap.clone()), Err(gap));
    if depth == Depth::Quick {
        return both(unsolved());
    }
    let attempt = || -> Figure<(Setup, Moves)> {
        let setup = Setup::new(found, steady)?;
        Ok((setup, Moves::new(found)?))
    };
    let (setup, moves) = match attempt() {
        Ok(parts) => parts,
        Err(gap) => return both(gap),
    };
    let mut solver = Solver::new(&setup, &moves);
    if let Depth::Coarse(error) = depth {
        return (Err(unsolved()), solver.coarse_peaks(error));
    }
    let surge = solver.solve();
    let peaks = surge.clone_gap().map(|s| s.peaks.clone());
    (surge, peaks)
}

fn assumptions(found: &Resolved, quick: &[(Id, Figure<QuickSurge>)]) -> Vec<Assumption> {
    let mut all = Vec::new();
    let stiffest = quick
        .iter()
        .filter_map(|(_, q)| q.as_ref().ok())
        .map(|q| q.stiffening)
        .fold(1.0, f64::max);
    if stiffest > 1.0
        && let Ok(wall) = quick::cold_wall(found)
    {
        all.push(Assumption::ColdWall {
            wall,
            stiffening: stiffest,
        });
    }
    if found.drive.speeds.is_ok() && found.drive.opening == Ok(None) {
        all.push(Assumption::OpeningAsClosing);
    }
    all
}
#[cfg(test)]
mod timing_test;
