//! Cautions: what can hurt someone, shown where the choice is made and on
//! every print.

use crate::book::Id;
use crate::transient::EventKind;
use hydraulics::quantity::{GaugePressure, Head, PipeLength, Velocity};
use uom::si::f64::Time;

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
    /// The water column parts in an event that counts.
    ColumnParts {
        /// The event.
        event: EventKind,
        /// Where.
        at: PipeLength,
    },
    /// What a slammed guard valve would do, where none may be slammed.
    Slam {
        /// The highest pressure.
        highest: GaugePressure,
        /// Stretches it takes beyond what they bear.
        beyond: Vec<Id>,
        /// Where the column parts, if it does.
        parts: Option<PipeLength>,
    },
    /// What a jet blocked at once would do, where the rack is to prevent it.
    JetBlocked {
        /// The highest pressure.
        highest: GaugePressure,
        /// Stretches it takes beyond what they bear.
        beyond: Vec<Id>,
        /// Where the column parts, if it does.
        parts: Option<PipeLength>,
    },
    /// The closing time must be built into the drive, not left to a hand.
    ClosingTimeBuiltIn {
        /// Time from full stroke to shut.
        closing: Time,
    },
    /// Plastics tire under surge that comes again and again.
    PlasticsTire {
        /// Stretches of plastic pipe.
        stretches: Vec<Id>,
    },
    /// Air shut in the pipe makes pressures that no solution here knows.
    EntrappedAir {
        /// Whether a jet draws air in an event that counts.
        drawn: bool,
    },
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
    /// Air collects in the pipe: a vent is needed there.
    AirCollects {
        /// Stations at high points.
        high: Vec<Id>,
        /// Stations where the pipe turns down.
        steepens: Vec<Id>,
    },
    /// Water stays in low points of an emptied pipe, and silt settles there.
    WaterStays {
        /// Stations that need a drain.
        drains: Vec<Id>,
    },
    /// The intake lies too high: vortices draw air.
    Submergence {
        /// Water over the top of the intake, lowest forebay level.
        found: Head,
        /// What the criterion asks.
        needed: Head,
    },
    /// Fore and back sights of a leg do not agree.
    SightsDiffer {
        /// The stations the legs lead to.
        stations: Vec<Id>,
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
            Caution::SurgeUnsolved => &[Sheet::Pipe, Sheet::Surge, Sheet::Print],
            Caution::TemperatureAndSun { .. } => &[Sheet::Pipe, Sheet::Print],
            Caution::ColumnParts { .. }
            | Caution::Slam { .. }
            | Caution::JetBlocked { .. }
            | Caution::ClosingTimeBuiltIn { .. } => {
                &[Sheet::Pipe, Sheet::Jets, Sheet::Surge, Sheet::Print]
            }
            Caution::PlasticsTire { .. } => &[Sheet::Pipe, Sheet::Surge, Sheet::Print],
            Caution::EntrappedAir { .. } => &[Sheet::Line, Sheet::Surge, Sheet::Print],
            Caution::SubAtmospheric { .. }
            | Caution::CollapseAndVents { .. }
            | Caution::AirCollects { .. }
            | Caution::Submergence { .. }
            | Caution::Freezing => &[Sheet::Line, Sheet::Pipe, Sheet::Print],
            Caution::VelocityAndSilt { .. } => &[Sheet::Pipe, Sheet::Jets, Sheet::Print],
            Caution::ThrustAtBends | Caution::WaterStays { .. } | Caution::SightsDiffer { .. } => {
                &[Sheet::Line, Sheet::Print]
            }
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
                Sheet::Surge,
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
            | Caution::ColumnParts { .. }
            | Caution::ClosingTimeBuiltIn { .. }
            | Caution::SubAtmospheric { .. }
            | Caution::SourceNotSeen { .. }
            | Caution::RegimeUncertain
            | Caution::NearGreatestPower
            | Caution::LossOverCap { .. }
            | Caution::AirCollects { .. }
            | Caution::WaterStays { .. }
            | Caution::Submergence { .. }
            | Caution::SightsDiffer { .. }
            | Caution::Invented => true,
            Caution::Slam { beyond, parts, .. } | Caution::JetBlocked { beyond, parts, .. } => {
                !beyond.is_empty() || parts.is_some()
            }
            Caution::EntrappedAir { drawn } => *drawn,
            Caution::PlasticsTire { .. } => false,
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
