//! What can be wrong with the numbers handed to a wall formula.

use std::fmt;

/// The input of a wall formula that an error is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Input {
    /// Diameter of the pipe, m.
    Diameter,
    /// Thickness of the wall, m.
    Wall,
    /// Pressure, Pa gauge.
    Pressure,
    /// Stress, Pa.
    Stress,
    /// Modulus of elasticity, Pa.
    Modulus,
    /// Poisson ratio, dimensionless.
    Poisson,
    /// Ovality, dimensionless.
    Ovality,
    /// Safety factor, dimensionless.
    SafetyFactor,
    /// Longitudinal joint factor, dimensionless.
    JointFactor,
    /// Mill tolerance as a share of the nominal wall, dimensionless.
    MillTolerance,
    /// Corrosion allowance, m.
    Corrosion,
    /// Depth of thread, m.
    ThreadDepth,
    /// Yield strength, Pa.
    YieldStrength,
    /// Tensile strength, Pa.
    TensileStrength,
    /// Share of yield or tensile strength that may be used, dimensionless.
    DesignFactor,
}

/// Why a wall formula gives no figure. All values are in SI base units.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum WallError {
    /// The input is not a finite number.
    NotFinite {
        /// Which input.
        input: Input,
    },
    /// The input lies outside what the formula can take.
    OutOfRange {
        /// Which input.
        input: Input,
        /// The value given.
        value: f64,
        /// The least value (see the function's page for whether it is itself allowed).
        least: f64,
        /// The greatest value (likewise).
        greatest: f64,
    },
    /// The wall is as thick as half the diameter or thicker: no bore is left.
    NoBore {
        /// The wall, m.
        wall: f64,
        /// Half the outside diameter, m.
        half_diameter: f64,
    },
    /// Mill tolerance, corrosion and thread together take the whole wall.
    NothingLeft {
        /// The nominal wall, m.
        nominal: f64,
        /// What is taken off, m.
        taken_off: f64,
    },
}

impl fmt::Display for WallError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NotFinite { input } => write!(f, "{input:?} is not a finite number"),
            Self::OutOfRange {
                input,
                value,
                least,
                greatest,
            } => {
                write!(f, "{input:?} is {value}, outside {least} to {greatest}")
            }
            Self::NoBore {
                wall,
                half_diameter,
            } => {
                write!(
                    f,
                    "wall {wall} m leaves no bore in half a diameter of {half_diameter} m"
                )
            }
            Self::NothingLeft { nominal, taken_off } => {
                write!(
                    f,
                    "allowances of {taken_off} m take the whole wall of {nominal} m"
                )
            }
        }
    }
}

impl std::error::Error for WallError {}

/// Finite and above zero.
pub(crate) fn positive(input: Input, value: f64) -> Result<f64, WallError> {
    between(input, value, f64::MIN_POSITIVE, f64::MAX).map_err(|error| match error {
        WallError::OutOfRange {
            input,
            value,
            greatest,
            ..
        } => WallError::OutOfRange {
            input,
            value,
            least: 0.0,
            greatest,
        },
        other => other,
    })
}

/// Finite and within `least..=greatest`.
pub(crate) fn between(
    input: Input,
    value: f64,
    least: f64,
    greatest: f64,
) -> Result<f64, WallError> {
    if !value.is_finite() {
        Err(WallError::NotFinite { input })
    } else if value < least || value > greatest {
        Err(WallError::OutOfRange {
            input,
            value,
            least,
            greatest,
        })
    } else {
        Ok(value)
    }
}

/// Diameter and wall, both above zero, with a bore left.
pub(crate) fn tube(diameter: f64, wall: f64) -> Result<(f64, f64), WallError> {
    let diameter = positive(Input::Diameter, diameter)?;
    let wall = positive(Input::Wall, wall)?;
    if wall >= diameter / 2.0 {
        return Err(WallError::NoBore {
            wall,
            half_diameter: diameter / 2.0,
        });
    }
    Ok((diameter, wall))
}

/// A result that must be finite to be handed out (huge inputs can overflow).
pub(crate) fn finite(input: Input, value: f64) -> Result<f64, WallError> {
    if value.is_finite() {
        Ok(value)
    } else {
        Err(WallError::NotFinite { input })
    }
}
