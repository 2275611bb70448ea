//! What the transient finds.

use super::starts::{EventKind, Start};
use crate::book::Id;
use hydraulics::quantity::{GaugePressure, Level, PipeLength};
use hydraulics::transient::{Balance, Trace};
use uom::si::f64::{Time, Velocity, Volume};

/// An extreme of pressure, where it lies, and what brings it about.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Extreme {
    /// Gauge pressure.
    pub pressure: GaugePressure,
    /// Where.
    pub at: PipeLength,
    /// The event and its start.
    pub by: Start,
}

/// Extremes of one stretch over every event that counts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StretchSurge {
    /// The stretch.
    pub stretch: Id,
    /// Highest pressure.
    pub highest: Extreme,
    /// Lowest pressure, from the lowest forebay level.
    pub lowest: Extreme,
}

/// A water column that parts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Parted {
    /// The event and its start.
    pub by: Start,
    /// Where the largest cavity stood.
    pub at: PipeLength,
    /// Its volume.
    pub largest: Volume,
}

/// What the verdicts rest on.
#[derive(Debug, Clone, PartialEq)]
pub struct Peaks {
    /// Stretch by stretch, in the order of the line.
    pub stretches: Vec<StretchSurge>,
    /// The column parts in an event that counts: the first such.
    pub parted: Option<Parted>,
    /// In an event that counts a jet falls below atmospheric pressure and
    /// would draw air.
    pub draws_air: bool,
}

/// What one kind of event comes to, from its worst start.
#[derive(Debug, Clone, PartialEq)]
pub struct EventPeak {
    /// The event, and the start of its highest level at the foot.
    pub start: Start,
    /// Whether verdicts rest on it.
    pub counts: bool,
    /// Highest grade level at the foot.
    pub foot_highest: Level,
    /// Lowest grade level at the foot, from the highest forebay level.
    pub foot_lowest: Level,
    /// Highest pressure of each stretch, with its place.
    pub highest: Vec<(GaugePressure, PipeLength)>,
    /// Lowest pressure of each stretch, with its place.
    pub lowest: Vec<(GaugePressure, PipeLength)>,
    /// The column parts.
    pub parted: Option<Parted>,
}

/// Highest and lowest level at a node of the line, over every event that
/// counts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EnvelopeNode {
    /// Chainage.
    pub chainage: PipeLength,
    /// Level of the pipe.
    pub level: Level,
    /// Highest grade level.
    pub highest: Level,
    /// Lowest grade level, from the lowest forebay level.
    pub lowest: Level,
}

/// How one stretch lies on the grid.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StretchOnGrid {
    /// The stretch.
    pub stretch: Id,
    /// Its own wave speed.
    pub wave_speed: Velocity,
    /// How far that is altered, as a share; 0 where it is lumped.
    pub altered: f64,
    /// Cells; 0 where it is lumped: rigid, with its inertia and losses.
    pub cells: usize,
}

/// Why the run shown can be trusted.
#[derive(Debug, Clone, PartialEq)]
pub struct Trust {
    /// Time step.
    pub step: Time,
    /// Cells over the line.
    pub cells: usize,
    /// Stretch by stretch.
    pub stretches: Vec<StretchOnGrid>,
    /// How far halving the step moves the peak, as a share of the rise.
    pub moved: f64,
    /// What the balances of volume and energy leave over, as shares.
    pub balance: Balance,
    /// Time step of the coarser grid all starts are run on.
    pub coarse_step: Time,
    /// Cells of it.
    pub coarse_cells: usize,
    /// How much the coarser grid falls short, as a share of the rise: added to
    /// what is only run there.
    pub coarse_error: f64,
    /// Runs made on the coarser and the finer grid.
    pub runs: (usize, usize),
}

/// The whole transient.
#[derive(Debug, Clone, PartialEq)]
pub struct Surge {
    /// What the verdicts rest on.
    pub peaks: Peaks,
    /// Every kind of event, in the order of [`super::EVENTS`].
    pub events: Vec<EventPeak>,
    /// Highest and lowest level along the line, from the inlet to the foot.
    pub envelope: Vec<EnvelopeNode>,
    /// The event and start of the highest level at the foot: the run shown.
    pub deciding: Start,
    /// Course at the foot of that run.
    pub foot: Trace,
    /// Grade at the foot before it.
    pub foot_start: Level,
    /// Highest grade at the foot, and when.
    pub foot_highest: (Level, Time),
    /// Lowest grade at the foot of that run, and when.
    pub foot_lowest: (Level, Time),
    /// Time from full stroke to shut.
    pub closing: Time,
    /// Time for a wave to run up the line and back.
    pub period: Time,
    /// Water starting time, all jets open.
    pub water_starting: Time,
    /// Time step, alterations, convergence and balances of the run shown.
    pub trust: Trust,
}

impl Surge {
    /// What one kind of event comes to.
    #[must_use]
    pub fn event(&self, kind: EventKind) -> Option<&EventPeak> {
        self.events.iter().find(|e| e.start.event == kind)
    }
}
