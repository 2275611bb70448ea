//! Loss coefficients of fittings.
//!
//! A local loss is K V^2/(2 g). Every K here says which velocity it multiplies
//! ([`Reference`]), where it comes from, and whether that source was seen
//! ([`Attested`]). Handbooks differ: expect -20 to +30 % on any of them (Sanks,
//! Pumping Station Design, note to Table B-6), more for parts of small bore.
//!
//! Fixed values lie in small tables (`data/*.csv`) with their sources at the
//! head; those that follow geometry are functions: [`sudden_contraction`],
//! [`gradual_contraction`], [`sudden_expansion`], [`gradual_expansion`],
//! [`smooth_bend`], [`mitre_bend`], [`valve()`], [`TrashRack`].

mod bend;
mod fixed;
mod rack;
mod reducer;
mod table;
mod valve;

pub use bend::{MitreWall, compound_mitre_bend, mitre_bend, smooth_bend};
pub use fixed::{
    Entrance, FixedLoss, OpenValve, Tee, entrance, fixed_loss, fixed_losses, open_valve,
    rounded_entrance, tee,
};
pub use rack::{BarShape, TrashRack};
pub use reducer::{
    contraction_coefficient, gradual_contraction, gradual_expansion, sudden_contraction,
    sudden_expansion,
};
pub use valve::{ValveOpening, valve};

use crate::quantity::{Acceleration, Angle, Head, Length, Velocity};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::angle::degree;
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

/// Head lost over velocity head; from 0 up.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct LossCoefficient(f64);

impl LossCoefficient {
    /// No loss.
    pub const ZERO: Self = Self(0.0);

    /// Checks and wraps the number.
    ///
    /// # Errors
    /// [`FittingError::Coefficient`] when it is negative or not finite.
    pub fn new(value: f64) -> Result<Self, FittingError> {
        if value >= 0.0 && value.is_finite() {
            Ok(Self(value))
        } else {
            Err(FittingError::Coefficient(value))
        }
    }

    /// The number.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }

    /// Head lost at the velocity this coefficient multiplies: K V^2/(2 g).
    #[must_use]
    pub fn head(self, velocity: Velocity, gravity: Acceleration) -> Head {
        let v = velocity.get::<meter_per_second>();
        Head::from_m(self.0 * v * v / (2.0 * gravity.get::<meter_per_second_squared>()))
    }

    /// The same loss referred to the velocity in another bore: K (to/from)^4.
    ///
    /// # Errors
    /// [`FittingError::Bore`] when a bore is not positive.
    pub fn referred(self, from: Length, to: Length) -> Result<Self, FittingError> {
        let (from, to) = (positive(from)?, positive(to)?);
        let ratio = to / from;
        Self::new(self.0 * ratio * ratio * ratio * ratio)
    }
}

/// Which velocity a coefficient multiplies.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Reference {
    /// The velocity in the pipe before the fitting.
    Upstream,
    /// The velocity in the pipe after the fitting.
    Downstream,
    /// The velocity in the fitting's own nominal bore (for a rack: the
    /// approach velocity).
    Own,
}

/// Whether the published source of a value was seen.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Attested {
    /// The page, or an open-source library that codes it, was seen.
    Seen,
    /// From memory: nothing may hold on the strength of it alone.
    FromMemory,
}

/// A loss coefficient with all that must be said about it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Loss {
    /// The coefficient.
    pub k: LossCoefficient,
    /// The velocity it multiplies.
    pub reference: Reference,
    /// Whether the source was seen.
    pub attested: Attested,
    /// Where it comes from.
    pub source: &'static str,
}

/// Why there is no loss coefficient.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum FittingError {
    /// The coefficient is negative or not finite.
    Coefficient(f64),
    /// The bore (or bar or gap) is not a positive length.
    Bore(Length),
    /// The bores stand the wrong way round for a contraction or expansion.
    NotNarrower {
        /// The bore that should be the wider.
        wide: Length,
        /// The bore that should be the narrower.
        narrow: Length,
    },
    /// The angle lies outside the method's range.
    Angle {
        /// The angle.
        angle: Angle,
        /// Lowest angle, degrees.
        low: f64,
        /// Highest angle, degrees.
        high: f64,
    },
    /// The ratio (bend radius over bore, corner radius over bore, spacing over
    /// bore, open share, clogged share) lies outside the method's range.
    Ratio {
        /// The ratio.
        ratio: f64,
        /// Lowest ratio.
        low: f64,
        /// Highest ratio.
        high: f64,
    },
}

impl core::fmt::Display for FittingError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Coefficient(value) => write!(f, "loss coefficient {value} is below 0"),
            Self::Bore(bore) => write!(f, "bore {} m is not above 0", bore.get::<meter>()),
            Self::NotNarrower { wide, narrow } => write!(
                f,
                "bore {} m is not narrower than {} m",
                narrow.get::<meter>(),
                wide.get::<meter>()
            ),
            Self::Angle { angle, low, high } => write!(
                f,
                "angle {} degrees lies outside {low} to {high} degrees",
                angle.get::<degree>()
            ),
            Self::Ratio { ratio, low, high } => {
                write!(f, "ratio {ratio} lies outside {low} to {high}")
            }
        }
    }
}

impl core::error::Error for FittingError {}

/// A positive length in metres.
fn positive(length: Length) -> Result<f64, FittingError> {
    let metres = length.get::<meter>();
    if metres > 0.0 && metres.is_finite() {
        Ok(metres)
    } else {
        Err(FittingError::Bore(length))
    }
}

/// An angle in degrees inside a range.
fn degrees_within(angle: Angle, low: f64, high: f64) -> Result<f64, FittingError> {
    let degrees = angle.get::<degree>();
    // An angle given in degrees may come back a rounding error outside.
    if degrees >= low * (1.0 - 1e-12) && degrees <= high * (1.0 + 1e-12) {
        Ok(degrees.clamp(low, high))
    } else {
        Err(FittingError::Angle { angle, low, high })
    }
}

/// A ratio inside a range.
fn ratio_within(ratio: f64, low: f64, high: f64) -> Result<f64, FittingError> {
    if (low..=high).contains(&ratio) {
        Ok(ratio)
    } else {
        Err(FittingError::Ratio { ratio, low, high })
    }
}
