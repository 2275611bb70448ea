//! Cautions: what can hurt someone, shown where the choice is made and on
//! every print.

use crate::book::Id;
use hydraulics::quantity::{PipeLength, Velocity};

/// A view of the book.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Sheet {
    /// Flow.
    Stream,
    /// The surveyed line.
    Line,
    /// Choice of pipe.
    Pipe,
    /// Nozzles.
    Jets,
    /// Transients.
    Surge,
    /// Walls, thrust, vents, anchors, supports.
    Hold,
    /// Energy and money.
    Worth,
    /// Gauge readings.
    Gauge,
    /// The print.
    Print,
}

/// A caution, with what it rests on.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Caution {
    /// Surge is not solved: no pipe here is shown to hold.
    SurgeUnsolved,
    /// Ratings fall with temperature; sun on bare pipe.
    TemperatureAndSun {
        /// Stretches that lie bare.
        bare: Vec<Id>,
    },
    /// The line runs below atmospheric pressure.
    SubAtmospheric {
        /// From where to where.
        lengths: Vec<(PipeLength, PipeLength)>,
        /// Whether water would boil somewhere: flow will part.
        boils: bool,
    },
    /// A pipe emptied without air let in is crushed: vents.
    CollapseAndVents {
        /// Stretches that do not stand full vacuum.
        weak: Vec<Id>,
    },
    /// Fast water wears pipe and nozzles, and silt makes it worse.
    VelocityAndSilt {
        /// The greatest velocity, where it passes the limit.
        fast: Option<(Id, Velocity)>,
    },
    /// Standing water freezes and bursts pipe.
    Freezing,
    /// Pressure pushes bends, reducers, tees and closed ends apart.
    ThrustAtBends,
    /// Joints, valves and fittings may be weaker than the pipe.
    WeakJoints {
        /// Fittings with no rating entered.
        unrated: Vec<Id>,
    },
    /// Close, drain and lock before work; the jet cuts.
    DepressuriseBeforeWork,
    /// Local codes, water rights, and a licensed engineer's review.
    LocalCodesAndReview,
    /// Figures rest on values whose source was not seen.
    SourceNotSeen {
        /// Stretches whose pipe rests on such values.
        stretches: Vec<Id>,
    },
    /// Flow between laminar and turbulent: losses are uncertain.
    RegimeUncertain,
    /// The flow lies near the greatest power the pipe can pass.
    NearGreatestPower,
    /// More head is lost than the cap.
    LossOverCap {
        /// Share of gross head lost.
        share: f64,
        /// The cap.
        cap: f64,
    },
    /// The site is invented: not to be built from.
    Invented,
}

impl Caution {
    /// The sheets where the decision it bears on is made. Every caution is on
    /// the print beside.
    #[must_use]
    pub fn sheets(&self) -> &'static [Sheet] {
        match self {
            Caution::SurgeUnsolved | Caution::TemperatureAndSun { .. } => {
                &[Sheet::Pipe, Sheet::Print]
            }
            Caution::SubAtmospheric { .. }
            | Caution::CollapseAndVents { .. }
            | Caution::Freezing => &[Sheet::Line, Sheet::Pipe, Sheet::Print],
            Caution::VelocityAndSilt { .. } => &[Sheet::Pipe, Sheet::Jets, Sheet::Print],
            Caution::ThrustAtBends => &[Sheet::Line, Sheet::Print],
            Caution::WeakJoints { .. } => &[Sheet::Line, Sheet::Pipe, Sheet::Jets, Sheet::Print],
            Caution::DepressuriseBeforeWork => &[Sheet::Jets, Sheet::Print],
            Caution::LocalCodesAndReview => &[Sheet::Stream, Sheet::Pipe, Sheet::Print],
            Caution::SourceNotSeen { .. } => &[Sheet::Pipe, Sheet::Print],
            Caution::RegimeUncertain | Caution::NearGreatestPower | Caution::LossOverCap { .. } => {
                &[Sheet::Pipe, Sheet::Jets, Sheet::Print]
            }
            Caution::Invented => &[
                Sheet::Stream,
                Sheet::Line,
                Sheet::Pipe,
                Sheet::Jets,
                Sheet::Print,
            ],
        }
    }

    /// Whether it speaks of a danger that this book shows, and not of one that
    /// every line has.
    #[must_use]
    pub fn is_pressing(&self) -> bool {
        match self {
            Caution::SurgeUnsolved
            | Caution::SubAtmospheric { .. }
            | Caution::SourceNotSeen { .. }
            | Caution::RegimeUncertain
            | Caution::NearGreatestPower
            | Caution::LossOverCap { .. }
            | Caution::Invented => true,
            Caution::TemperatureAndSun { bare } => !bare.is_empty(),
            Caution::CollapseAndVents { weak } => !weak.is_empty(),
            Caution::VelocityAndSilt { fast } => fast.is_some(),
            Caution::WeakJoints { unrated } => !unrated.is_empty(),
            Caution::Freezing
            | Caution::ThrustAtBends
            | Caution::DepressuriseBeforeWork
            | Caution::LocalCodesAndReview => false,
        }
    }
}
