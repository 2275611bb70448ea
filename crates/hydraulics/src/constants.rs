//! Physical constants, each with its source.

use crate::quantity::{AbsolutePressure, Acceleration};
use uom::si::acceleration::meter_per_second_squared;

/// Standard acceleration of free fall, m/s2. Source: 3rd General Conference on
/// Weights and Measures (1901); ISO 80000-3:2019.
pub const STANDARD_GRAVITY_M_S2: f64 = 9.806_65;

/// Standard atmosphere at sea level, Pa. Source: 10th General Conference on
/// Weights and Measures (1954); ISO 2533:1975.
pub const STANDARD_ATMOSPHERE_PA: f64 = 101_325.0;

/// Zero of the Celsius scale, K. Source: ISO 80000-5:2019.
pub const CELSIUS_ZERO_K: f64 = 273.15;

/// Standard acceleration of free fall ([`STANDARD_GRAVITY_M_S2`]).
#[must_use]
pub fn standard_gravity() -> Acceleration {
    Acceleration::new::<meter_per_second_squared>(STANDARD_GRAVITY_M_S2)
}

/// Standard atmosphere at sea level ([`STANDARD_ATMOSPHERE_PA`]).
#[must_use]
pub fn standard_atmosphere() -> AbsolutePressure {
    AbsolutePressure::from_pa(STANDARD_ATMOSPHERE_PA)
}
