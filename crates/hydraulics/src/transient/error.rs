//! What can be wrong with a transient.

use crate::line::LineError;
use crate::quantity::{AbsolutePressure, Level, PipeLength, Time, Velocity};
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

/// Why a transient cannot be computed. Indices count from 0.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum TransientError {
    /// The steady line, or its start, cannot be computed.
    Line(LineError),
    /// There are not as many wave speeds as runs.
    WaveSpeedCount {
        /// Runs of the line.
        runs: usize,
        /// Wave speeds given.
        wave_speeds: usize,
    },
    /// A wave speed lies outside 20 to 2000 m/s.
    WaveSpeed {
        /// Index of the run.
        run: usize,
        /// The wave speed.
        wave_speed: Velocity,
    },
    /// The atmosphere's pressure is not positive and finite.
    Atmosphere(AbsolutePressure),
    /// A characteristic's table does not start at stroke 0 with share 0, does
    /// not end at stroke 1 with share 1, has strokes that do not rise, or
    /// shares outside 0 to 1 or falling.
    Characteristic {
        /// Index of the row.
        row: usize,
    },
    /// A law's times or strokes cannot be used: times must rise from 0,
    /// strokes lie in 0 to 1 and, for a closing law, run from 1 to 0 without
    /// rising.
    Law {
        /// Index of the point.
        point: usize,
    },
    /// A time is negative or not finite.
    Time(Time),
    /// A stroke lies outside 0 to 1.
    Stroke {
        /// Index of the nozzle.
        nozzle: usize,
        /// Its stroke.
        stroke: f64,
    },
    /// There are not as many strokes as nozzles.
    StrokeCount {
        /// Nozzles of the foot.
        nozzles: usize,
        /// Strokes given.
        strokes: usize,
    },
    /// Nozzle of this index does not exist, or is shut from the start.
    NoSuchJet {
        /// Index of the nozzle.
        nozzle: usize,
    },
    /// A grid was asked for with fewer than 2 cells, or with a share that is
    /// not above 0 and at most 0.5.
    GridSpec,
    /// No grid of at most [`super::Grid::MOST_CELLS`] cells alters the wave
    /// speeds by as little as wished.
    GridTooFine {
        /// Cells over the line in the finest grid tried.
        cells: usize,
        /// The greatest alteration on it, as a share.
        alteration: f64,
    },
    /// The grid was made for another line.
    GridOfAnotherLine,
    /// Friction in one cell takes more than half of what its wave could stop:
    /// the grid is too coarse for this flow.
    GridTooCoarse {
        /// Index of the run.
        run: usize,
    },
    /// The run would last more than [`super::Model::MOST_STEPS`] steps.
    TooLong {
        /// Steps it would last.
        steps: f64,
    },
    /// A chainage lies outside the line.
    ProbeOutside(PipeLength),
    /// The steady start already lies below the vapour pressure.
    StartsBelowVapour {
        /// Where.
        chainage: PipeLength,
        /// Grade level there.
        grade: Level,
    },
    /// A gas share or weight of the cavity model is out of range.
    GasCavity,
    /// A search has no set of jets, fewer than 10 part openings, a slowest time
    /// that is not positive, or a tolerance that is not above 0 and at most
    /// 0.1; or its step is longer than L/(2a).
    SearchSpec,
    /// The start lies in another order than the case it is for, or the model
    /// was made for other nozzles.
    StartsDiffer,
    /// The arithmetic left the finite numbers.
    NotFinite {
        /// Time into the run.
        time: Time,
        /// Where it was found first.
        chainage: PipeLength,
    },
}

impl core::fmt::Display for TransientError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Line(error) => error.fmt(f),
            Self::WaveSpeedCount { runs, wave_speeds } => {
                write!(f, "{wave_speeds} wave speeds for {runs} runs")
            }
            Self::WaveSpeed { run, wave_speed } => write!(
                f,
                "wave speed {} m/s of run {run} lies outside 20 to 2000 m/s",
                wave_speed.get::<meter_per_second>()
            ),
            Self::Atmosphere(value) => write!(f, "atmosphere of {} Pa", value.pa()),
            Self::Characteristic { row } => {
                write!(f, "row {row} of the characteristic cannot be used")
            }
            Self::Law { point } => write!(f, "point {point} of the law cannot be used"),
            Self::Time(time) => write!(f, "time {} s is below 0", time.get::<second>()),
            Self::Stroke { nozzle, stroke } => {
                write!(f, "stroke {stroke} of nozzle {nozzle} lies outside 0 to 1")
            }
            Self::StrokeCount { nozzles, strokes } => {
                write!(f, "{strokes} strokes for {nozzles} nozzles")
            }
            Self::NoSuchJet { nozzle } => write!(f, "nozzle {nozzle} has no jet"),
            Self::GridSpec => write!(f, "cells or shares of the grid cannot be used"),
            Self::GridTooFine { cells, alteration } => write!(
                f,
                "even {cells} cells alter a wave speed by {alteration} of itself"
            ),
            Self::GridOfAnotherLine => write!(f, "the grid was made for another line"),
            Self::GridTooCoarse { run } => {
                write!(f, "cells of run {run} are too long for their friction")
            }
            Self::TooLong { steps } => write!(f, "the run would last {steps} steps"),
            Self::ProbeOutside(at) => write!(f, "chainage {} m lies outside the line", at.m()),
            Self::StartsBelowVapour { chainage, grade } => write!(
                f,
                "the start lies below vapour pressure at {} m, grade {} m",
                chainage.m(),
                grade.m()
            ),
            Self::GasCavity => write!(f, "share or weight of the gas cavity is out of range"),
            Self::SearchSpec => write!(f, "the search for a closing time cannot be made"),
            Self::StartsDiffer => write!(f, "the start is that of other nozzles"),
            Self::NotFinite { time, chainage } => write!(
                f,
                "not finite at {} s, chainage {} m",
                time.get::<second>(),
                chainage.m()
            ),
        }
    }
}

impl core::error::Error for TransientError {}

impl From<LineError> for TransientError {
    fn from(error: LineError) -> Self {
        Self::Line(error)
    }
}
