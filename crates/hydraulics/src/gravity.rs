//! Local gravity, as an option beside the standard value.

use crate::math;
use crate::quantity::{Acceleration, Angle, Length};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::angle::{degree, radian};
use uom::si::length::meter;

/// Range of altitudes the height term is used for, m either way.
pub const GREATEST_ALTITUDE_M: f64 = 20_000.0;

/// Why there is no gravity.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum GravityError {
    /// The latitude lies outside -90..=90 degrees.
    Latitude(Angle),
    /// The altitude lies outside -20 000..=20 000 m ([`GREATEST_ALTITUDE_M`]).
    Altitude(Length),
}

impl core::fmt::Display for GravityError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Latitude(value) => write!(
                f,
                "latitude {} degrees lies outside -90 to 90 degrees",
                value.get::<degree>()
            ),
            Self::Altitude(value) => write!(
                f,
                "altitude {} m lies outside {GREATEST_ALTITUDE_M} m either way",
                value.get::<meter>()
            ),
        }
    }
}

impl core::error::Error for GravityError {}

/// Normal gravity of the WGS 84 ellipsoid at a latitude and altitude.
///
/// # Equation
/// Somigliana's formula on the ellipsoid and the second-order height term:
/// NIMA TR8350.2 (2000), equations 4-1 and 4-3, constants of Tables 3.1 to
/// 3.4. The true value differs by less than 0.02 % almost everywhere.
///
/// # Errors
/// Latitude outside -90..=90 degrees, altitude outside -20 000..=20 000 m.
pub fn normal_gravity(latitude: Angle, altitude: Length) -> Result<Acceleration, GravityError> {
    const EQUATOR: f64 = 9.780_325_335_9;
    const SOMIGLIANA: f64 = 0.001_931_852_652_41;
    const ECCENTRICITY_SQUARED: f64 = 0.006_694_379_990_14;
    const SEMI_MAJOR_M: f64 = 6_378_137.0;
    const FLATTENING: f64 = 1.0 / 298.257_223_563;
    const CENTRIFUGAL: f64 = 0.003_449_786_506_84;

    let phi = latitude.get::<radian>();
    let pole = math::PI / 2.0 + 1e-12;
    if !(-pole..=pole).contains(&phi) {
        return Err(GravityError::Latitude(latitude));
    }
    let h = altitude.get::<meter>();
    if !(-GREATEST_ALTITUDE_M..=GREATEST_ALTITUDE_M).contains(&h) {
        return Err(GravityError::Altitude(altitude));
    }
    let sin = math::sin(phi);
    let sin2 = sin * sin;
    let surface = EQUATOR * (1.0 + SOMIGLIANA * sin2) / (1.0 - ECCENTRICITY_SQUARED * sin2).sqrt();
    let r = h / SEMI_MAJOR_M;
    let height =
        1.0 - 2.0 * (1.0 + FLATTENING + CENTRIFUGAL - 2.0 * FLATTENING * sin2) * r + 3.0 * r * r;
    Ok(Acceleration::new::<meter_per_second_squared>(
        surface * height,
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(latitude: f64, altitude: f64) -> f64 {
        normal_gravity(
            Angle::new::<degree>(latitude),
            Length::new::<meter>(altitude),
        )
        .unwrap()
        .get::<meter_per_second_squared>()
    }

    #[test]
    fn equator_and_pole() {
        // NIMA TR8350.2, Table 3.4: 9.7803253359 and 9.8321849378 m/s2.
        assert!((at(0.0, 0.0) - 9.780_325_335_9).abs() < 1e-12);
        assert!((at(90.0, 0.0) - 9.832_184_937_8).abs() < 1e-9);
        assert!((at(-90.0, 0.0) - at(90.0, 0.0)).abs() < 1e-12);
    }

    #[test]
    fn falls_with_altitude() {
        // Free-air gradient about 3.086e-6 per second squared.
        let gradient = (at(45.0, 0.0) - at(45.0, 1000.0)) / 1000.0;
        assert!((gradient - 3.086e-6).abs() < 0.004e-6, "{gradient}");
    }

    #[test]
    fn nonsense_is_refused() {
        let metre = Length::new::<meter>(1.0);
        assert!(normal_gravity(Angle::new::<degree>(91.0), metre).is_err());
        assert!(normal_gravity(Angle::new::<degree>(f64::NAN), metre).is_err());
        assert!(normal_gravity(Angle::new::<degree>(1.0), Length::new::<meter>(3e4)).is_err());
    }
}
