//! Whether a grid is fine enough.

use super::error::TransientError;
use super::event::Event;
use super::friction::FrictionModel;
use super::grid::Grid;
use super::model::Model;
use super::run::{Run, RunOptions, Scratch};
use super::surge_line::SurgeLine;
use crate::quantity::Level;

/// What halving the step did.
#[derive(Debug, Clone, PartialEq)]
pub struct Convergence {
    /// Highest grade over the line on the grid, and on the one with half the
    /// step.
    pub highest: (Level, Level),
    /// How far it moved, over its height above the higher of forebay and
    /// starting grade at the foot; 0 when there is no rise.
    pub moved: f64,
    /// The run on the finer grid.
    pub finer: Run,
}

/// Runs an event on a grid and on its half, and compares the peaks.
///
/// Meant to be below 0.005 where no cavity forms; with cavities nothing is
/// promised.
///
/// # Errors
/// What [`Model::new`] and [`Model::run`] refuse.
pub fn converge(
    line: &SurgeLine,
    grid: &Grid,
    event: &Event,
    friction: FrictionModel,
    options: &RunOptions,
    scratch: &mut Scratch,
) -> Result<Convergence, TransientError> {
    let mut on = |grid: &Grid| -> Result<Run, TransientError> {
        Model::new(line, grid, &event.start(), friction)?.run(event, options, scratch)
    };
    let coarse = on(grid)?;
    let finer = on(&grid.halved())?;
    let highest = (coarse.highest(), finer.highest());
    let forebay = line.spec().line.spec().forebay;
    let base = if forebay > finer.foot_start {
        forebay
    } else {
        finer.foot_start
    };
    let rise = (highest.1 - base).m();
    let apart = (highest.0 - highest.1).m().abs();
    Ok(Convergence {
        highest,
        moved: if rise > 1e-9 { apart / rise } else { 0.0 },
        finer,
    })
}
