//! A pipe of the user's own.

use std::fmt;

use uom::si::f64::{
    Length, MassDensity, Pressure, TemperatureCoefficient, ThermodynamicTemperature,
};

use crate::{Material, SteelRating, SupplyKind};

mod build;
mod check;
mod steel;

pub use steel::plate_steel;

/// What the user knows of a pipe that is not in the catalogue. What is left
/// out comes from the material, with its own source and mark.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnPipe {
    /// As ordered; must not be blank.
    pub designation: String,
    /// Short label for tables; the designation when blank.
    pub short: String,
    /// Standard, if any; may be blank.
    pub standard: String,
    /// Where the figures come from ("supplier's sheet of 3 May"); must not be blank.
    pub source: String,
    /// Material of the wall.
    pub material: Material,
    /// Outside diameter.
    pub outside_diameter: Length,
    /// Least wall without lining. For steel rated by stress: the nominal wall.
    pub wall_min: Length,
    /// Greatest wall, where known. Not for steel rated by stress.
    pub wall_max: Option<Length>,
    /// Lining thickness, zero for none.
    pub lining: Length,
    /// Rating.
    pub rating: OwnRating,
    /// Derating points (temperature, factor) by rising temperature; none for
    /// the material's own rule. Where the material has none (GRP, other) the
    /// rating then holds up to its own temperature only.
    pub derating: Option<Vec<(ThermodynamicTemperature, f64)>>,
    /// Roughness when new.
    pub roughness_new: Option<Length>,
    /// Roughness after years of use.
    pub roughness_aged: Option<Length>,
    /// Modulus for short loads.
    pub modulus_short: Option<Pressure>,
    /// Modulus for lasting loads.
    pub modulus_long: Option<Pressure>,
    /// Poisson ratio.
    pub poisson: Option<f64>,
    /// Linear thermal expansion.
    pub expansion: Option<TemperatureCoefficient>,
    /// Density of the wall.
    pub density: Option<MassDensity>,
    /// Lengths in which it is sold.
    pub supply: Vec<(SupplyKind, Length)>,
}

impl Default for OwnPipe {
    /// A blank form: nothing known, so that [`OwnPipe::build`] refuses it.
    fn default() -> Self {
        Self {
            designation: String::new(),
            short: String::new(),
            standard: String::new(),
            source: String::new(),
            material: Material::Other,
            outside_diameter: Length::default(),
            wall_min: Length::default(),
            wall_max: None,
            lining: Length::default(),
            rating: OwnRating::Class {
                symbol: String::new(),
                number: String::new(),
                pressure: Pressure::default(),
                at: ThermodynamicTemperature::default(),
            },
            derating: None,
            roughness_new: None,
            roughness_aged: None,
            modulus_short: None,
            modulus_long: None,
            poisson: None,
            expansion: None,
            density: None,
            supply: Vec::new(),
        }
    }
}

/// The rating of a pipe of the user's own.
#[derive(Debug, Clone, PartialEq)]
pub enum OwnRating {
    /// A pressure class.
    Class {
        /// Symbol, e.g. "PN".
        symbol: String,
        /// Number, e.g. "10".
        number: String,
        /// Lasting gauge pressure.
        pressure: Pressure,
        /// Temperature it is given for.
        at: ThermodynamicTemperature,
    },
    /// By stress; for [`Material::Steel`] only.
    Stress(Box<SteelRating>),
}

/// Why a pipe of the user's own cannot be. Lengths in m, pressures in Pa.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum OwnPipeError {
    /// A text that must be given is blank.
    Blank {
        /// Which: "designation" or "source".
        field: &'static str,
    },
    /// A value is not a finite number.
    NotFinite {
        /// Which field.
        field: &'static str,
    },
    /// A value is not above zero (or, for a lining, below zero).
    NotPositive {
        /// Which field.
        field: &'static str,
        /// The value.
        value: f64,
    },
    /// A value lies outside its range.
    OutOfRange {
        /// Which field.
        field: &'static str,
        /// The value.
        value: f64,
        /// Least allowed.
        least: f64,
        /// Greatest allowed.
        greatest: f64,
    },
    /// The greatest wall is thinner than the least.
    WallsCrossed {
        /// Least wall.
        least: f64,
        /// Greatest wall.
        greatest: f64,
    },
    /// Wall and lining leave no bore.
    NoBore {
        /// Mean wall with lining.
        wall_and_lining: f64,
        /// Half the outside diameter.
        half_diameter: f64,
    },
    /// [`Material::Other`] brings no value for a field left out.
    Missing {
        /// Which field.
        field: &'static str,
    },
    /// Rated by stress, but not steel.
    StressNeedsSteel {
        /// The material.
        material: Material,
    },
    /// A steel rated by stress was given a greatest wall.
    StressNeedsNominalWall,
    /// The lasting modulus is above the short one.
    ModuliCrossed {
        /// Short.
        short: f64,
        /// Lasting.
        long: f64,
    },
    /// Derating temperatures do not rise, or factors rise.
    DeratingDisordered {
        /// Index of the first point out of order.
        index: usize,
    },
    /// The derating list is empty.
    DeratingEmpty,
    /// The steel wall cannot be rated as described.
    Wall(statics::WallError),
}

impl fmt::Display for OwnPipeError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Blank { field } => write!(f, "{field} is blank"),
            Self::NotFinite { field } => write!(f, "{field} is not a finite number"),
            Self::NotPositive { field, value } => write!(f, "{field} is {value}, not above zero"),
            Self::OutOfRange {
                field,
                value,
                least,
                greatest,
            } => {
                write!(f, "{field} is {value}, outside {least} to {greatest}")
            }
            Self::WallsCrossed { least, greatest } => {
                write!(
                    f,
                    "the greatest wall {greatest} m is under the least wall {least} m"
                )
            }
            Self::NoBore {
                wall_and_lining,
                half_diameter,
            } => write!(
                f,
                "wall and lining of {wall_and_lining} m leave no bore in half a diameter of {half_diameter} m"
            ),
            Self::Missing { field } => {
                write!(f, "{field} is not known for this material: enter it")
            }
            Self::StressNeedsSteel { material } => {
                write!(f, "{} cannot be rated as steel by stress", material.slug())
            }
            Self::StressNeedsNominalWall => {
                write!(
                    f,
                    "steel rated by stress takes its nominal wall and no greatest wall"
                )
            }
            Self::ModuliCrossed { short, long } => {
                write!(
                    f,
                    "the lasting modulus {long} Pa is above the short one {short} Pa"
                )
            }
            Self::DeratingDisordered { index } => {
                write!(f, "derating point {} is out of order", index + 1)
            }
            Self::DeratingEmpty => write!(f, "the derating list is empty"),
            Self::Wall(error) => write!(f, "steel wall: {error}"),
        }
    }
}

impl std::error::Error for OwnPipeError {}

#[cfg(test)]
mod tests;
