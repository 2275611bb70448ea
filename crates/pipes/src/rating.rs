//! What pressure a pipe may carry: by its class, or by stress.

use std::fmt;

use statics::WallError;
use statics::steel::{LoadCase, SteelAllowable, StressShares};
use uom::si::f64::{Length, Pressure, ThermodynamicTemperature};
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::{Attested, Sourced};

/// How the standard of a pipe rates it.
#[derive(Debug, Clone, PartialEq)]
pub enum Rating {
    /// By a pressure class.
    Class(ClassRating),
    /// By stress: the standard gives sizes and strengths but no pressure.
    Stress(Box<SteelRating>),
}

/// A pressure class, with its standard's own symbol and temperature.
#[derive(Debug, Clone, PartialEq)]
pub struct ClassRating {
    /// The symbol: "PN", "PR", "C", "PFA".
    pub symbol: String,
    /// The number that goes with the symbol, as printed: "12.5", "160 psi".
    pub number: String,
    /// Lasting pressure the class stands for, gauge.
    pub pressure: Pressure,
    /// Temperature it is given for (20 degC, 73 degF).
    pub at: ThermodynamicTemperature,
    /// Where the class comes from.
    pub source: String,
    /// Whether that source was seen.
    pub attested: Attested,
}

/// Shares of strength for one load case, with their source.
pub type Shares = Sourced<StressShares>;

/// All that rates a steel wall by stress. Each value is the user's to change.
#[derive(Debug, Clone, PartialEq)]
pub struct SteelRating {
    /// Grade, as ordered: "P235TR1", "ASTM A53 Grade B".
    pub grade: String,
    /// Least yield strength.
    pub yield_strength: Sourced<Pressure>,
    /// Least tensile strength.
    pub tensile_strength: Sourced<Pressure>,
    /// Shares of strength for lasting pressure.
    pub normal: Shares,
    /// Shares of strength for surge.
    pub transient: Shares,
    /// Shares of strength for the site test.
    pub test: Shares,
    /// Factor of the longitudinal joint, above 0 up to 1.
    pub joint_factor: Sourced<f64>,
    /// Corrosion allowance.
    pub corrosion: Sourced<Length>,
    /// Share of the nominal wall the mill may leave out (0.125 is 12.5 %).
    pub mill_tolerance: Sourced<f64>,
    /// Depth of thread, for threaded pipe.
    pub thread_depth: Option<Sourced<Length>>,
}

impl SteelRating {
    /// The shares of one load case.
    #[must_use]
    pub fn shares(&self, case: LoadCase) -> &Shares {
        match case {
            LoadCase::Normal => &self.normal,
            LoadCase::Transient => &self.transient,
            LoadCase::Test => &self.test,
        }
    }

    /// From memory when any ingredient of the given case is.
    #[must_use]
    pub fn attested(&self, case: LoadCase) -> Attested {
        let thread = self
            .thread_depth
            .as_ref()
            .map_or(Attested::Seen, |depth| depth.attested);
        self.yield_strength
            .attested
            .and(self.tensile_strength.attested)
            .and(self.shares(case).attested)
            .and(self.joint_factor.attested)
            .and(self.corrosion.attested)
            .and(self.mill_tolerance.attested)
            .and(thread)
    }
}

/// The pressure a pipe may carry, and what it rests on.
#[derive(Debug, Clone, PartialEq)]
pub struct Allowable {
    /// Allowable lasting (or case) gauge pressure at `temperature`.
    pub pressure: Pressure,
    /// Temperature factor in it.
    pub factor: f64,
    /// Wall temperature it holds at.
    pub temperature: ThermodynamicTemperature,
    /// How it was found.
    pub basis: Basis,
    /// Rule and source, in words fit for the calculation record.
    pub source: String,
    /// From memory when any ingredient is.
    pub attested: Attested,
}

/// How an [`Allowable`] was found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Basis {
    /// Class pressure times temperature factor.
    Class {
        /// Pressure of the class at its own temperature.
        rated: Pressure,
        /// That temperature.
        at: ThermodynamicTemperature,
    },
    /// Stress in a steel wall times temperature factor.
    Stress {
        /// Load case.
        case: LoadCase,
        /// Net wall, stress and which strength governs.
        wall: SteelAllowable,
    },
}

/// Why a pipe gives no allowable pressure.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum RatingError {
    /// The wall is hotter than the last point of the derating table.
    TooHot {
        /// Wall temperature asked for.
        wall: ThermodynamicTemperature,
        /// Highest temperature of the table.
        highest: ThermodynamicTemperature,
    },
    /// The temperature is not a finite number above absolute zero.
    Temperature {
        /// The value given, K.
        kelvin: f64,
    },
    /// No derating rule is kept for this pipe.
    NoDerating,
    /// The steel wall cannot be rated.
    Wall(WallError),
}

impl fmt::Display for RatingError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::TooHot { wall, highest } => write!(
                f,
                "wall at {:.1} degC is above the {:.1} degC the rating goes to",
                wall.get::<degree_celsius>(),
                highest.get::<degree_celsius>()
            ),
            Self::Temperature { kelvin } => write!(f, "{kelvin} K is not a temperature"),
            Self::NoDerating => write!(f, "no derating rule is known for this pipe"),
            Self::Wall(error) => write!(f, "steel wall: {error}"),
        }
    }
}

impl std::error::Error for RatingError {}

impl From<WallError> for RatingError {
    fn from(error: WallError) -> Self {
        Self::Wall(error)
    }
}
