//! What a line is made of, and what can be wrong with it.

use crate::fittings::{FittingError, LossCoefficient};
use crate::friction::{FrictionError, FrictionLaw};
use crate::nozzle::NozzleError;
use crate::quantity::{Acceleration, Head, Length, Level, PipeLength, VolumeRate};
use crate::water::Water;
use uom::si::acceleration::meter_per_second_squared;
use uom::si::length::meter;
use uom::si::volume_rate::cubic_meter_per_second;

/// A surveyed point of the pipe's axis.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Chainage along the pipe; the first point is the inlet.
    pub chainage: PipeLength,
    /// Level of the pipe's axis.
    pub level: Level,
}

/// A run of one pipe, from where the run before it ends (the first from the
/// first point) to a chainage.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Run {
    /// Chainage of the run's end.
    pub to: PipeLength,
    /// Bore (inside diameter).
    pub bore: Length,
    /// Friction.
    pub friction: FrictionLaw,
}

/// A local loss.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LocalLoss {
    /// Chainage at which it is lost. At a change of bore it counts as lying
    /// before it.
    pub at: PipeLength,
    /// Loss coefficient.
    pub k: LossCoefficient,
    /// The bore whose velocity it multiplies; for a rack that of a circle of
    /// the rack's area.
    pub bore: Length,
}

/// All that makes a line.
#[derive(Debug, Clone, PartialEq)]
pub struct LineSpec {
    /// Level of the water in the forebay.
    pub forebay: Level,
    /// Surveyed points, from the inlet to the foot; at least two, chainage
    /// rising.
    pub points: Vec<Point>,
    /// Runs of pipe; the last ends at the last point.
    pub runs: Vec<Run>,
    /// Local losses, in any order of chainage.
    pub losses: Vec<LocalLoss>,
    /// The water.
    pub water: Water,
    /// Acceleration of free fall.
    pub gravity: Acceleration,
}

/// Why a line cannot be computed. Indices count from 0.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum LineError {
    /// Fewer than two points.
    TooFewPoints {
        /// How many there are.
        count: usize,
    },
    /// No run.
    NoRun,
    /// The forebay level is not finite.
    Forebay(Level),
    /// The acceleration of free fall is not positive.
    Gravity(Acceleration),
    /// A point's chainage or level is not finite.
    PointNotFinite {
        /// Index of the point.
        point: usize,
        /// The point.
        value: Point,
    },
    /// A point does not lie beyond the one before it.
    ChainageNotRising {
        /// Index of the point.
        point: usize,
        /// Chainage of the point before.
        before: PipeLength,
        /// Chainage of the point.
        chainage: PipeLength,
    },
    /// A point differs in level from the one before it by more than the pipe
    /// between them is long.
    SteeperThanVertical {
        /// Index of the point.
        point: usize,
        /// Difference of level.
        rise: Head,
        /// Length of pipe between.
        length: PipeLength,
    },
    /// A run does not end beyond the one before it.
    RunNotRising {
        /// Index of the run.
        run: usize,
        /// Where the run starts.
        from: PipeLength,
        /// Where it ends.
        to: PipeLength,
    },
    /// The last run does not end at the last point.
    RunsEndElsewhere {
        /// Where the last run ends.
        runs: PipeLength,
        /// Chainage of the last point.
        points: PipeLength,
    },
    /// A run's bore or friction cannot be used.
    Run {
        /// Index of the run.
        run: usize,
        /// Why.
        error: FrictionError,
    },
    /// A local loss lies outside the line.
    LossOutside {
        /// Index of the loss.
        loss: usize,
        /// Where it lies.
        at: PipeLength,
    },
    /// A local loss has a bore that is not positive, or so small that its loss
    /// is beyond counting.
    LossBore {
        /// Index of the loss.
        loss: usize,
        /// The bore.
        bore: Length,
    },
    /// The reducer after a run cannot be computed.
    Reducer {
        /// Index of the run before it.
        run: usize,
        /// Why.
        error: FittingError,
    },
    /// The flow is negative or not finite.
    Flow(VolumeRate),
    /// The head lost at this flow is beyond counting.
    LossBeyondCounting(VolumeRate),
    /// There is no nozzle.
    NoNozzle,
    /// A nozzle is wider than the branch that leads to it.
    NozzleWiderThanBranch {
        /// Index of the nozzle.
        nozzle: usize,
        /// Its bore.
        bore: Length,
        /// Bore of the branch.
        branch: Length,
    },
    /// The branch's loss coefficient is negative or its bore not positive.
    Branch {
        /// Loss coefficient.
        k: f64,
        /// Bore.
        bore: Length,
    },
    /// The nozzle's coefficients cannot be used.
    Nozzle(NozzleError),
    /// The jet axis does not lie below the forebay level.
    NoHead {
        /// Forebay level.
        forebay: Level,
        /// Level of the jet axis.
        axis: Level,
    },
    /// The line cannot pass the flow: all head would be lost.
    FlowTooGreat {
        /// The flow asked for.
        flow: VolumeRate,
        /// The greatest flow, with every nozzle as wide as its branch.
        greatest: VolumeRate,
    },
}

impl core::fmt::Display for LineError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        let flow_si = |flow: &VolumeRate| flow.get::<cubic_meter_per_second>();
        match self {
            Self::TooFewPoints { count } => {
                write!(f, "a line needs two points, here are {count}")
            }
            Self::NoRun => write!(f, "a line needs a run of pipe"),
            Self::Forebay(level) => write!(f, "forebay level {} m is not finite", level.m()),
            Self::Gravity(value) => write!(
                f,
                "acceleration of free fall {} m/s2 is not above 0",
                value.get::<meter_per_second_squared>()
            ),
            Self::PointNotFinite { point, value } => write!(
                f,
                "point {point} at chainage {} m, level {} m is not finite",
                value.chainage.m(),
                value.level.m()
            ),
            Self::ChainageNotRising {
                point,
                before,
                chainage,
            } => write!(
                f,
                "point {point} at chainage {} m does not lie beyond {} m",
                chainage.m(),
                before.m()
            ),
            Self::SteeperThanVertical {
                point,
                rise,
                length,
            } => write!(
                f,
                "point {point} lies {} m higher than the one before it, with {} m of pipe between",
                rise.m(),
                length.m()
            ),
            Self::RunNotRising { run, from, to } => {
                write!(f, "run {run} from {} m ends at {} m", from.m(), to.m())
            }
            Self::RunsEndElsewhere { runs, points } => write!(
                f,
                "the runs end at {} m, the points at {} m",
                runs.m(),
                points.m()
            ),
            Self::Run { run, error } => write!(f, "run {run}: {error}"),
            Self::LossOutside { loss, at } => {
                write!(f, "local loss {loss} at {} m lies outside the line", at.m())
            }
            Self::LossBore { loss, bore } => write!(
                f,
                "local loss {loss} has bore {} m, not above 0",
                bore.get::<meter>()
            ),
            Self::Reducer { run, error } => write!(f, "reducer after run {run}: {error}"),
            Self::Flow(flow) => write!(f, "flow {} m3/s is below 0", flow_si(flow)),
            Self::LossBeyondCounting(flow) => write!(
                f,
                "the head lost at {} m3/s is beyond counting",
                flow_si(flow)
            ),
            Self::NoNozzle => write!(f, "no nozzle is open"),
            Self::NozzleWiderThanBranch {
                nozzle,
                bore,
                branch,
            } => write!(
                f,
                "nozzle {nozzle} of {} m is wider than its branch of {} m",
                bore.get::<meter>(),
                branch.get::<meter>()
            ),
            Self::Branch { k, bore } => write!(
                f,
                "branch with loss coefficient {k} and bore {} m cannot be used",
                bore.get::<meter>()
            ),
            Self::Nozzle(error) => error.fmt(f),
            Self::NoHead { forebay, axis } => write!(
                f,
                "the jet axis at {} m does not lie below the forebay at {} m",
                axis.m(),
                forebay.m()
            ),
            Self::FlowTooGreat { flow, greatest } => write!(
                f,
                "the line cannot pass {} m3/s; the most it can is {} m3/s",
                flow_si(flow),
                flow_si(greatest)
            ),
        }
    }
}

impl core::error::Error for LineError {}

impl From<NozzleError> for LineError {
    fn from(error: NozzleError) -> Self {
        Self::Nozzle(error)
    }
}
