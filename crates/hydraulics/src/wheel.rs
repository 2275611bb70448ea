//! The impulse wheel a jet drives: its size and what it can take of the jet.
//!
//! Speed ratio is the speed of the buckets on the pitch circle over that of
//! the jet. Without friction the best is 0.5; wheels run at 0.43 to 0.48.

use crate::math;
use crate::quantity::{Angle, AngularVelocity, Length, Velocity};
use uom::si::angle::degree;
use uom::si::angular_velocity::radian_per_second;
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

/// Why a wheel cannot be computed.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum WheelError {
    /// The jet does not move.
    JetVelocity(Velocity),
    /// The wheel does not turn.
    Speed(AngularVelocity),
    /// The speed ratio does not lie between 0 and 1.
    SpeedRatio(f64),
    /// The angle by which the bucket turns the jet lies outside 90 to 180
    /// degrees.
    Deflection(Angle),
    /// The share of relative velocity the bucket keeps lies outside 0 to 1.
    Kept(f64),
}

impl core::fmt::Display for WheelError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::JetVelocity(value) => write!(
                f,
                "jet velocity {} m/s is not above 0",
                value.get::<meter_per_second>()
            ),
            Self::Speed(value) => write!(
                f,
                "speed {} rad/s is not above 0",
                value.get::<radian_per_second>()
            ),
            Self::SpeedRatio(value) => write!(f, "speed ratio {value} is not between 0 and 1"),
            Self::Deflection(value) => write!(
                f,
                "deflection {} degrees lies outside 90 to 180 degrees",
                value.get::<degree>()
            ),
            Self::Kept(value) => write!(f, "share {value} of velocity kept lies outside 0 to 1"),
        }
    }
}

impl core::error::Error for WheelError {}

/// Pitch diameter of the wheel that runs at a speed under a jet.
///
/// # Equation
/// D = 2 (u/c) c / omega, from u = omega D/2.
///
/// # Errors
/// A jet or wheel that does not move, a ratio not between 0 and 1.
pub fn pitch_diameter(
    jet_velocity: Velocity,
    speed_ratio: f64,
    speed: AngularVelocity,
) -> Result<Length, WheelError> {
    let c = jet_velocity.get::<meter_per_second>();
    if !(c > 0.0 && c.is_finite()) {
        return Err(WheelError::JetVelocity(jet_velocity));
    }
    let omega = speed.get::<radian_per_second>();
    if !(omega > 0.0 && omega.is_finite()) {
        return Err(WheelError::Speed(speed));
    }
    let ratio = ratio_inside(speed_ratio)?;
    Ok(Length::new::<meter>(2.0 * ratio * c / omega))
}

/// Share of the jet's power that the buckets take.
///
/// # Equation
/// 2 x (1 - x) (1 - k cos d), with x the speed ratio, d the angle by which the
/// bucket turns the jet (165 degrees, say) and k the share of the relative
/// velocity it keeps. Euler's equation; the form of every textbook (for
/// instance Douglas, Fluid Mechanics, example 23.2). Windage and bearings are
/// not in it.
///
/// # Errors
/// A ratio not between 0 and 1, an angle outside 90..=180 degrees, a share
/// outside 0..=1.
pub fn runner_efficiency(
    speed_ratio: f64,
    deflection: Angle,
    kept: f64,
) -> Result<f64, WheelError> {
    let x = ratio_inside(speed_ratio)?;
    let degrees = deflection.get::<degree>();
    if !(90.0..=180.0 * (1.0 + 1e-12)).contains(&degrees) {
        return Err(WheelError::Deflection(deflection));
    }
    if !(0.0..=1.0).contains(&kept) {
        return Err(WheelError::Kept(kept));
    }
    let cos = math::cos(degrees * math::PI / 180.0);
    Ok(2.0 * x * (1.0 - x) * (1.0 - kept * cos))
}

/// A ratio between 0 and 1, both excluded.
fn ratio_inside(ratio: f64) -> Result<f64, WheelError> {
    if ratio > 0.0 && ratio < 1.0 {
        Ok(ratio)
    } else {
        Err(WheelError::SpeedRatio(ratio))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn nonsense_is_refused() {
        let turn = Angle::new::<degree>(165.0);
        assert!(runner_efficiency(1.0, turn, 0.9).is_err());
        assert!(runner_efficiency(0.5, Angle::new::<degree>(80.0), 0.9).is_err());
        assert!(runner_efficiency(0.5, turn, 1.1).is_err());
        let speed = AngularVelocity::new::<radian_per_second>;
        let jet = Velocity::new::<meter_per_second>;
        assert!(pitch_diameter(jet(0.0), 0.46, speed(50.0)).is_err());
        assert!(pitch_diameter(jet(30.0), 0.46, speed(0.0)).is_err());
    }

    proptest! {
        #[test]
        fn half_the_jet_speed_is_best(x in 0.01..0.99_f64, turn in 90.0..180.0_f64, kept in 0.0..1.0_f64) {
            let turn = Angle::new::<degree>(turn);
            let here = runner_efficiency(x, turn, kept).unwrap();
            prop_assert!(here <= runner_efficiency(0.5, turn, kept).unwrap());
            prop_assert!((0.0..=1.0 + 1e-12).contains(&here));
        }
    }
}
