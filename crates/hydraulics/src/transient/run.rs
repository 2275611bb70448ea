//! What is asked of a run, and what it gives.

use super::gas::GasCavity;
use crate::quantity::{Level, PipeLength, Time, Volume, VolumeRate};

/// How long a run lasts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Duration {
    /// To this many periods (2 sum(l/a)) after the last movement.
    PeriodsAfter(f64),
    /// The same, but on a line of unlike pipes at least 40 periods after an
    /// event that lasts less than a period: there the partial waves can meet
    /// long after. Measured on 2000 random lines of three pipes: after a
    /// shorter event 5 periods miss up to 17 % of the rise, 40 none; after a
    /// longer one 3 periods miss none.
    ToThePeak(f64),
    /// To this time.
    Until(Time),
}

/// What is asked of a run.
#[derive(Debug, Clone, PartialEq)]
pub struct RunOptions {
    /// How long it lasts.
    pub duration: Duration,
    /// The cavity model, taken up only where a run without it falls below the
    /// vapour pressure. `None`: water that bears any suction, for numerical
    /// comparisons only.
    pub cavity: Option<GasCavity>,
    /// Chainages of which a trace is wanted; the nearest node is taken.
    pub probes: Vec<PipeLength>,
    /// About how many points a trace has; 0 for no traces.
    pub trace_points: usize,
    /// About how many pictures of the whole line are kept, evenly spaced in
    /// time, first and last included; 0 for none.
    pub pictures: usize,
    /// Whether energy and volume are added up.
    pub balance: bool,
    /// Whether grade is energy less velocity head. `false` leaves the velocity
    /// head out, as most textbook examples do: for comparisons only.
    pub velocity_head: bool,
}

impl Default for RunOptions {
    /// To the peak and 10 periods after the last movement, cavities modelled, 400 points of
    /// trace at the foot, balances added up.
    fn default() -> Self {
        Self {
            duration: Duration::ToThePeak(10.0),
            cavity: Some(GasCavity::default()),
            probes: Vec::new(),
            trace_points: 400,
            pictures: 0,
            balance: true,
            velocity_head: true,
        }
    }
}

impl RunOptions {
    /// For searches and sweeps: to the peak and 4 periods after the last
    /// movement, no traces, no balances.
    #[must_use]
    pub fn lean() -> Self {
        Self {
            duration: Duration::ToThePeak(4.0),
            trace_points: 0,
            balance: false,
            ..Self::default()
        }
    }
}

/// Highest and lowest grade at a node over the run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NodeEnvelope {
    /// Chainage.
    pub chainage: PipeLength,
    /// Level of the pipe's axis.
    pub level: Level,
    /// Index of the run it lies in.
    pub run: usize,
    /// Highest grade level; less the level, the highest pressure head.
    pub highest: Level,
    /// Lowest grade level.
    pub lowest: Level,
}

/// Course of grade and flow at one node.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Trace {
    /// Times, s.
    pub times: Vec<f64>,
    /// Grade levels, m above the survey's datum.
    pub grades: Vec<f64>,
    /// Flows, m3/s.
    pub flows: Vec<f64>,
}

/// A trace within the line.
#[derive(Debug, Clone, PartialEq)]
pub struct Probe {
    /// Chainage of the node taken.
    pub chainage: PipeLength,
    /// Its trace.
    pub trace: Trace,
}

/// The whole line at one time.
///
/// Where cavities stand, the head within a reach is that of the waves that meet
/// there, before the gas of this step gives way: it may lie a little outside
/// the envelope. The same holds of [`Probe`].
#[derive(Debug, Clone, PartialEq)]
pub struct Picture {
    /// Time from the start of the event.
    pub time: Time,
    /// Grade level, m above the survey's datum, at the nodes of
    /// [`Run::nodes`] in their order.
    pub grades: Vec<f64>,
    /// Flow out of the nozzles, m3/s.
    pub flow_out: f64,
}

/// What the arithmetic leaves over.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Balance {
    /// Volume in less out less what line and cavities took up, over the sum of
    /// their amounts and what pressure holds in the line.
    pub volume: f64,
    /// Work of the forebay less energy out of the nozzles, losses, work on
    /// cavities and what the line took up, over the sum of their amounts and
    /// what the line holds. Zero but for rounding; where a run is lumped, its
    /// implicit step loses a little more (first order in the step).
    pub energy: f64,
}

/// A column that parts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Separation {
    /// Whether cavities were modelled; if not, the heads below vapour pressure
    /// are arithmetic only.
    pub modelled: bool,
    /// Where the largest cavity stood (without model: the node that fell
    /// furthest below vapour pressure).
    pub chainage: PipeLength,
    /// Its volume; 0 without model.
    pub largest: Volume,
    /// Number of nodes at which a cavity opened: the gas grew to a hundred
    /// times its volume at atmospheric pressure. Without model: nodes below
    /// vapour pressure.
    pub nodes: usize,
}

/// A transient, computed.
#[derive(Debug, Clone, PartialEq)]
pub struct Run {
    /// Envelope, from the inlet to the foot: every node; two at each joint. The
    /// last is the foot itself, just before the branches.
    pub nodes: Vec<NodeEnvelope>,
    /// Grade at the foot before anything moves.
    pub foot_start: Level,
    /// Highest grade at the foot, and when.
    pub foot_highest: (Level, Time),
    /// Lowest grade at the foot, and when.
    pub foot_lowest: (Level, Time),
    /// Flow before anything moves.
    pub flow_start: VolumeRate,
    /// Flow out of the nozzles at the end.
    pub flow_end: VolumeRate,
    /// Greatest flow out of the nozzles.
    pub flow_greatest: VolumeRate,
    /// Trace at the foot.
    pub foot: Trace,
    /// Traces asked for, in their order.
    pub probes: Vec<Probe>,
    /// Pictures asked for.
    pub pictures: Vec<Picture>,
    /// The column parts: the head fell to the vapour pressure. Such a run
    /// proves nothing but that the event must not happen: it never holds.
    pub separation: Option<Separation>,
    /// Whether the head at an open nozzle fell below its axis: it would draw
    /// air, and is computed as if it drew water.
    pub draws_air: bool,
    /// What the balances leave over, if added up.
    pub balance: Option<Balance>,
    /// Steps computed.
    pub steps: usize,
}

impl Run {
    /// Highest and lowest grade at a chainage, straight between nodes; at a
    /// joint the outermost. `None` outside the line.
    #[must_use]
    pub fn range_at(&self, chainage: PipeLength) -> Option<(Level, Level)> {
        let at = chainage.m();
        let mut found: Option<(f64, f64)> = None;
        for (a, b) in self.nodes.iter().zip(self.nodes.iter().skip(1)) {
            let (from, to) = (a.chainage.m(), b.chainage.m());
            if at < from || at > to || to <= from {
                continue;
            }
            let share = (at - from) / (to - from);
            let straight = |x: Level, y: Level| x.m() + share * (y.m() - x.m());
            let (high, low) = (straight(a.highest, b.highest), straight(a.lowest, b.lowest));
            found = Some(match found {
                None => (high, low),
                Some((h, l)) => (
                    if high > h { high } else { h },
                    if low < l { low } else { l },
                ),
            });
        }
        found.map(|(high, low)| (Level::from_m(high), Level::from_m(low)))
    }

    /// Highest grade over the line.
    #[must_use]
    pub fn highest(&self) -> Level {
        let most = |a: Level, node: &NodeEnvelope| if node.highest > a { node.highest } else { a };
        self.nodes.iter().fold(self.foot_start, most)
    }
}

/// Buffers that runs may share, one after another.
#[derive(Debug, Clone, Default)]
pub struct Scratch {
    pub(super) p: Vec<f64>,
    pub(super) m: Vec<f64>,
    /// Twice the highest and lowest grade above the axis.
    pub(super) high: Vec<f64>,
    pub(super) low: Vec<f64>,
    /// Energy lost to friction, in the kernel's measure.
    pub(super) lost: Vec<f64>,
    pub(super) flow: Vec<f64>,
    pub(super) flow_before: Vec<f64>,
    pub(super) void: Vec<f64>,
    pub(super) void_most: Vec<f64>,
    /// Flow through each joint a step ago.
    pub(super) joint_flow: Vec<f64>,
}

impl Scratch {
    /// Empty buffers.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }
}
