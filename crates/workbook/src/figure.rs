//! A computed figure: known, unsettled with what is missing, or wrong with the
//! reason. One bad entry takes with it only the figures that rest on it.

use crate::book::Id;
use crate::entry::EntryTrouble;
use crate::field::Field;
use crate::pipe_copy::PipeCopyError;
use hydraulics::fittings::FittingError;
use hydraulics::intake::IntakeError;
use hydraulics::line::LineError;
use hydraulics::nozzle::NozzleError;
use hydraulics::quantity::{Level, PipeLength};
use hydraulics::surge::{SurgeError, WaveError};
use hydraulics::transient::TransientError;
use hydraulics::water::WaterError;

/// A figure, or why there is none.
pub type Figure<T> = Result<T, Gap>;

/// Why there is no figure.
#[derive(Debug, Clone, PartialEq)]
pub enum Gap {
    /// Something it needs is missing.
    Unsettled(Lack),
    /// Something it rests on cannot be.
    Wrong(Trouble),
}

/// What is missing.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Lack {
    /// An entry is still empty.
    Entry(Field),
    /// A stretch has no pipe yet.
    Pipe(Id),
    /// The whole transient has not been solved: a quick formula's figure
    /// settles nothing.
    Surge,
    /// The machine's flow changes with its speed, which is not modelled.
    Machine,
    /// The valve closes by a table that has no row.
    ValveTable,
    /// Halving the step of the transient moves its peak too far.
    NotConverged {
        /// How far, as a share of the rise.
        moved: f64,
    },
    /// The balances of volume and energy of the transient do not close.
    NotBalanced {
        /// What they leave over, as a share.
        left: f64,
    },
    /// The water column parts: what follows cannot be trusted.
    ColumnParts {
        /// Where the largest cavity stood.
        at: PipeLength,
    },
    /// A fitting has no rating entered.
    Rating(Id),
    /// The limit rests on a value whose source was not seen.
    Source(Id),
}

/// What cannot be.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Trouble {
    /// An entry cannot be used.
    Entry(Field, EntryTrouble),
    /// A station lies before the one it follows.
    StationBehind {
        /// The station.
        station: Id,
        /// How far back it lies, m.
        back_m: f64,
    },
    /// A slope distance is shorter than the difference of level it spans.
    StationTooSteep {
        /// The station.
        station: Id,
        /// The distance, m.
        distance_m: f64,
        /// The rise or fall, m.
        fall_m: f64,
    },
    /// Two stations at one place and level: no pipe between them.
    StationRepeated {
        /// The later station.
        station: Id,
    },
    /// A horizontal distance with a sight straight up or down: no fall
    /// follows from them.
    StationUpright {
        /// The station.
        station: Id,
    },
    /// The closing error is to be spread, but no leg since the last level
    /// entered was levelled by angle or staff.
    NothingToSpread,
    /// More stations than the book takes.
    TooManyStations {
        /// How many there are.
        count: usize,
    },
    /// A stretch begins at a station that is not on the line, or not below
    /// where the one before begins.
    StretchStart {
        /// The stretch.
        stretch: Id,
    },
    /// A fitting sits at a station that is not on the line.
    FittingStation {
        /// The fitting.
        fitting: Id,
    },
    /// The book names a pipe it holds no copy of.
    PipeUnknown {
        /// The stretch.
        stretch: Id,
        /// The name.
        pipe: String,
    },
    /// The book's copy of a pipe is no pipe.
    PipeCopy {
        /// The pipe's id.
        pipe: String,
        /// Why.
        why: PipeCopyError,
    },
    /// A pipe of the user's own cannot be.
    OwnPipe {
        /// Its number.
        id: Id,
        /// Why.
        why: pipes::OwnPipeError,
    },
    /// The forebay does not lie above the jets.
    NoHead {
        /// Forebay level.
        forebay: Level,
        /// Jet axis.
        jets: Level,
    },
    /// Forebay levels out of order: lowest, normal, highest.
    ForebayOrder {
        /// The field that breaks the order.
        field: Field,
    },
    /// The coldest is warmer than the warmest.
    TemperatureOrder {
        /// The field that breaks the order.
        field: Field,
    },
    /// The line could not be solved.
    Line(LineError),
    /// The submergence the intake needs cannot be found.
    Intake(IntakeError),
    /// A nozzle cannot be.
    Nozzle(NozzleError),
    /// Outside the range of the water's properties.
    Water(WaterError),
    /// A fitting's loss cannot be found.
    Fitting {
        /// The fitting.
        fitting: Id,
        /// Why.
        why: FittingError,
    },
    /// The loss of a bend from the survey cannot be found.
    Bend {
        /// The station.
        station: Id,
        /// Why.
        why: FittingError,
    },
    /// The pipe's rating cannot be used at this temperature.
    Rating {
        /// The stretch.
        stretch: Id,
        /// Why.
        why: pipes::RatingError,
    },
    /// The wall cannot be figured.
    Wall {
        /// The stretch.
        stretch: Id,
        /// Why.
        why: statics::WallError,
    },
    /// The wave speed cannot be had.
    Wave {
        /// The stretch.
        stretch: Id,
        /// Why.
        why: WaveError,
    },
    /// A row of the valve's table does not follow from the one before, or the
    /// row of full stroke is not fully open.
    ValveRow {
        /// Its index.
        row: usize,
    },
    /// The transient cannot be computed.
    Transient(TransientError),
    /// The quick surge figure cannot be had.
    Surge {
        /// The stretch.
        stretch: Id,
        /// Why.
        why: SurgeError,
    },
}

/// Where in the book something is wrong or missing.
#[derive(Debug, Clone, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Place {
    /// An entry.
    Field(Field),
    /// A station.
    Station(Id),
    /// A stretch.
    Stretch(Id),
    /// A fitting.
    Fitting(Id),
    /// A pipe of the user's own.
    OwnPipe(Id),
    /// One of the book's copies.
    Pipe(String),
    /// The line as a whole.
    Line,
    /// The nozzles.
    Jets,
    /// How the jets are shut.
    Surge,
}

impl Gap {
    /// Shorthand for a missing entry.
    #[must_use]
    pub fn needs(field: Field) -> Gap {
        Gap::Unsettled(Lack::Entry(field))
    }
}

impl Trouble {
    /// Where it is to be mended.
    #[must_use]
    pub fn place(&self) -> Place {
        match self {
            Trouble::Entry(field, _)
            | Trouble::ForebayOrder { field }
            | Trouble::TemperatureOrder { field } => Place::Field(*field),
            Trouble::StationBehind { station, .. }
            | Trouble::StationTooSteep { station, .. }
            | Trouble::StationRepeated { station }
            | Trouble::StationUpright { station }
            | Trouble::Bend { station, .. } => Place::Station(*station),
            Trouble::ValveRow { row } => Place::Field(Field::ValveStroke(*row)),
            Trouble::Transient(_) => Place::Surge,
            Trouble::NothingToSpread => Place::Field(Field::KnownFall),
            Trouble::StretchStart { stretch }
            | Trouble::PipeUnknown { stretch, .. }
            | Trouble::Rating { stretch, .. }
            | Trouble::Wall { stretch, .. }
            | Trouble::Wave { stretch, .. }
            | Trouble::Surge { stretch, .. } => Place::Stretch(*stretch),
            Trouble::FittingStation { fitting } | Trouble::Fitting { fitting, .. } => {
                Place::Fitting(*fitting)
            }
            Trouble::PipeCopy { pipe, .. } => Place::Pipe(pipe.clone()),
            Trouble::OwnPipe { id, .. } => Place::OwnPipe(*id),
            Trouble::Line(LineError::FlowTooGreat { .. }) => Place::Field(Field::DesignFlow),
            Trouble::Nozzle(_) => Place::Jets,
            Trouble::Water(_) => Place::Field(Field::ColdestWater),
            Trouble::Intake(_)
            | Trouble::NoHead { .. }
            | Trouble::Line(_)
            | Trouble::TooManyStations { .. } => Place::Line,
        }
    }
}

impl Lack {
    /// Where it is to be entered, if it can be.
    #[must_use]
    pub fn place(&self) -> Option<Place> {
        match self {
            Lack::Entry(field) => Some(Place::Field(*field)),
            Lack::Pipe(stretch) => Some(Place::Stretch(*stretch)),
            Lack::Rating(fitting) => Some(Place::Field(Field::FittingRating(*fitting))),
            Lack::ValveTable => Some(Place::Surge),
            Lack::Surge
            | Lack::Machine
            | Lack::NotConverged { .. }
            | Lack::NotBalanced { .. }
            | Lack::ColumnParts { .. }
            | Lack::Source(_) => None,
        }
    }
}

/// Borrowing a figure without losing why there is none.
pub(crate) trait CloneGap<T> {
    /// The figure by reference, or a copy of its gap.
    fn clone_gap(&self) -> Figure<&T>;
}

impl<T> CloneGap<T> for Figure<T> {
    fn clone_gap(&self) -> Figure<&T> {
        self.as_ref().map_err(Clone::clone)
    }
}
