//! How deep an intake must lie under water so that no vortex draws air.

use crate::quantity::{Length, Velocity};
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

/// How the water comes to the intake.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Approach {
    /// Straight, and alike from both sides.
    Symmetrical,
    /// From the side, or past a corner.
    Lateral,
}

/// Where the criterion comes from.
pub const SOURCE: &str = "J. L. Gordon, Vortices at intakes, Water Power 22 (1970) 4 (from memory)";

/// Why there is no submergence.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum IntakeError {
    /// The velocity is negative or not finite.
    Velocity(Velocity),
    /// The height of the opening is not positive.
    Height(Length),
}

impl core::fmt::Display for IntakeError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Velocity(v) => {
                write!(f, "velocity {} m/s is below 0", v.get::<meter_per_second>())
            }
            Self::Height(h) => write!(f, "height {} m is not above 0", h.get::<meter>()),
        }
    }
}

impl core::error::Error for IntakeError {}

impl Approach {
    /// Gordon's coefficient, s/m^0.5.
    ///
    /// He gave 0.3 and 0.4 in feet and seconds; over the square root of a foot
    /// in metres that is 0.543 and 0.725.
    #[must_use]
    pub fn coefficient(self) -> f64 {
        match self {
            Self::Symmetrical => 0.54,
            Self::Lateral => 0.72,
        }
    }
}

/// Least depth of water over the top of the opening that kept vortices away.
///
/// # Equation
/// S = c V sqrt(D), with V the velocity in the opening, D its height, and c
/// 0.54 for a symmetrical approach, 0.72 for a lateral one, in metres and
/// seconds. Source: [`SOURCE`].
///
/// # Valid for
/// Drawn from 29 intakes of low-head stations, far larger than a small
/// scheme's pipe; there a guide only, and less deep than many handbooks ask of
/// small, fast intakes. At no velocity nothing is needed by it: the opening
/// must lie under water all the same.
///
/// # Errors
/// A velocity below zero, or a height that is not above zero.
///
/// # Example
/// ```
/// use hydraulics::intake::{Approach, submergence};
/// use hydraulics::quantity::{Length, Velocity, unit};
///
/// let s = submergence(
///     Velocity::new::<unit::velocity::meter_per_second>(2.0),
///     Length::new::<unit::length::meter>(0.25),
///     Approach::Lateral,
/// )?;
/// assert!((s.get::<unit::length::meter>() - 0.72).abs() < 1e-12);
/// # Ok::<(), hydraulics::intake::IntakeError>(())
/// ```
pub fn submergence(
    velocity: Velocity,
    height: Length,
    approach: Approach,
) -> Result<Length, IntakeError> {
    let (v, d) = (velocity.get::<meter_per_second>(), height.get::<meter>());
    if !(v >= 0.0 && v.is_finite()) {
        return Err(IntakeError::Velocity(velocity));
    }
    if !(d > 0.0 && d.is_finite()) {
        return Err(IntakeError::Height(height));
    }
    Ok(Length::new::<meter>(approach.coefficient() * v * d.sqrt()))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(v: f64, d: f64, approach: Approach) -> Result<f64, IntakeError> {
        submergence(
            Velocity::new::<meter_per_second>(v),
            Length::new::<meter>(d),
            approach,
        )
        .map(|s| s.get::<meter>())
    }

    #[test]
    fn the_metric_coefficients_are_those_in_feet() {
        let root_foot = 0.3048_f64.sqrt();
        for (feet, approach) in [(0.3, Approach::Symmetrical), (0.4, Approach::Lateral)] {
            assert!((approach.coefficient() - feet / root_foot).abs() < 0.005);
        }
    }

    #[test]
    fn faster_and_wider_needs_more_and_the_side_most() {
        let s = |v, d| at(v, d, Approach::Symmetrical).unwrap();
        assert!(s(0.0, 0.3).abs() < 1e-300);
        assert!(s(2.0, 0.3) > s(1.0, 0.3));
        assert!(s(1.0, 0.4) > s(1.0, 0.3));
        assert!(at(1.0, 0.3, Approach::Lateral).unwrap() > s(1.0, 0.3));
    }

    #[test]
    fn nonsense_is_refused() {
        assert!(at(-1.0, 0.3, Approach::Lateral).is_err());
        assert!(at(f64::NAN, 0.3, Approach::Lateral).is_err());
        assert!(at(1.0, 0.0, Approach::Lateral).is_err());
    }
}
