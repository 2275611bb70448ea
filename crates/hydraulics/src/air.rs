//! The atmosphere around the pipe.

use crate::constants::{STANDARD_ATMOSPHERE_PA, STANDARD_GRAVITY_M_S2};
use crate::math;
use crate::quantity::{AbsolutePressure, Length};
use uom::si::length::meter;

/// Lowest altitude of the standard atmosphere's tables, m (ISO 2533:1975).
pub const LOWEST_ALTITUDE_M: f64 = -2000.0;
/// Top of the lowest layer of the standard atmosphere, m (ISO 2533:1975).
pub const HIGHEST_ALTITUDE_M: f64 = 11_000.0;

/// Nominal earth radius of ISO 2533:1975, m.
const EARTH_RADIUS_M: f64 = 6_356_766.0;
/// Temperature at sea level, K.
const SEA_LEVEL_K: f64 = 288.15;
/// Fall of temperature with geopotential altitude, K/m.
const LAPSE_K_M: f64 = 0.0065;
/// Specific gas constant of air, J/(kg K).
const GAS_CONSTANT: f64 = 287.052_87;

/// Why there is no pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum AirError {
    /// The altitude lies outside -2000..=11 000 m ([`LOWEST_ALTITUDE_M`],
    /// [`HIGHEST_ALTITUDE_M`]).
    Altitude(Length),
}

impl core::fmt::Display for AirError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        let Self::Altitude(value) = self;
        write!(
            f,
            "altitude {} m lies outside {LOWEST_ALTITUDE_M} to {HIGHEST_ALTITUDE_M} m",
            value.get::<meter>()
        )
    }
}

impl core::error::Error for AirError {}

/// Pressure of the standard atmosphere at an altitude above sea level.
///
/// # Equation
/// Geopotential altitude h = r z / (r + z) from the altitude z, then
/// [`standard_pressure_at_geopotential`]. Source: ISO 2533:1975, 2.3.
/// Weather moves the true pressure by up to 3 % either way.
///
/// # Errors
/// [`AirError::Altitude`] outside -2000..=11 000 m.
///
/// # Example
/// ```
/// use hydraulics::air::standard_pressure;
/// use hydraulics::quantity::{Length, unit};
/// let pressure = standard_pressure(Length::new::<unit::length::meter>(3000.0))?;
/// assert!((pressure.pa() - 70_121.0).abs() < 1.0);
/// # Ok::<(), hydraulics::air::AirError>(())
/// ```
pub fn standard_pressure(altitude: Length) -> Result<AbsolutePressure, AirError> {
    let z = altitude.get::<meter>();
    if !(LOWEST_ALTITUDE_M..=HIGHEST_ALTITUDE_M).contains(&z) {
        return Err(AirError::Altitude(altitude));
    }
    Ok(pressure(EARTH_RADIUS_M * z / (EARTH_RADIUS_M + z)))
}

/// Pressure of the standard atmosphere at a geopotential altitude.
///
/// # Equation
/// p = p0 (1 - L h / T0)^(g0 / (R L)). Source: ISO 2533:1975, equation 12 and
/// Table 5.
///
/// # Errors
/// [`AirError::Altitude`] outside -2000..=11 000 m.
pub fn standard_pressure_at_geopotential(altitude: Length) -> Result<AbsolutePressure, AirError> {
    let h = altitude.get::<meter>();
    if !(LOWEST_ALTITUDE_M..=HIGHEST_ALTITUDE_M).contains(&h) {
        return Err(AirError::Altitude(altitude));
    }
    Ok(pressure(h))
}

/// Pressure at geopotential altitude h in metres.
fn pressure(h: f64) -> AbsolutePressure {
    let ratio = 1.0 - LAPSE_K_M * h / SEA_LEVEL_K;
    let power = STANDARD_GRAVITY_M_S2 / (GAS_CONSTANT * LAPSE_K_M);
    AbsolutePressure::from_pa(STANDARD_ATMOSPHERE_PA * math::pow(ratio, power))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sea_level_is_the_standard_atmosphere() {
        let pressure = standard_pressure(Length::new::<meter>(0.0)).unwrap();
        assert!((pressure.pa() - STANDARD_ATMOSPHERE_PA).abs() < 1e-9);
    }

    #[test]
    fn outside_the_layer_is_refused() {
        for z in [-2001.0, 11_001.0, f64::NAN] {
            assert!(standard_pressure(Length::new::<meter>(z)).is_err());
            assert!(standard_pressure_at_geopotential(Length::new::<meter>(z)).is_err());
        }
    }
}
