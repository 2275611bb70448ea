//! Water: density, viscosity, vapour pressure, speed of sound and bulk modulus
//! from 0 to 60 degC at about one atmosphere.
//!
//! Each property has its own published equation, all of them good fits to
//! IAPWS-95 at 101 325 Pa in this range. Pressure is left out: at 100 bar
//! density is 0.5 % higher and viscosity 1 % lower at most, which is less than
//! any roughness is known.

use crate::constants::CELSIUS_ZERO_K;
use crate::math;
use crate::quantity::{
    AbsolutePressure, DynamicViscosity, KinematicViscosity, MassConcentration, MassDensity,
    Pressure, ThermodynamicTemperature, Velocity,
};
use uom::si::dynamic_viscosity::pascal_second;
use uom::si::kinematic_viscosity::square_meter_per_second;
use uom::si::mass_concentration::kilogram_per_cubic_meter as kilogram_of_solids_per_cubic_meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;
use uom::si::thermodynamic_temperature::kelvin;
use uom::si::velocity::meter_per_second;

/// Lowest temperature the equations are used for, K (0 degC).
pub const LOWEST_TEMPERATURE_K: f64 = CELSIUS_ZERO_K;
/// Highest temperature the equations are used for, K (60 degC).
pub const HIGHEST_TEMPERATURE_K: f64 = CELSIUS_ZERO_K + 60.0;
/// Largest load of suspended solids the mixture rule is used for, kg per m3 of
/// mixture. Beyond about 5 % by mass the mixture no longer flows like water
/// (common practice).
pub const GREATEST_SOLIDS_KG_M3: f64 = 50.0;

/// Why there is no water of that kind.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum WaterError {
    /// The temperature lies outside 0..=60 degC
    /// ([`LOWEST_TEMPERATURE_K`], [`HIGHEST_TEMPERATURE_K`]).
    Temperature(ThermodynamicTemperature),
    /// The load of solids lies outside 0..=50 kg/m3
    /// ([`GREATEST_SOLIDS_KG_M3`]).
    Solids(MassConcentration),
    /// The density of the grains is not above that of water.
    GrainDensity(MassDensity),
}

impl core::fmt::Display for WaterError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Temperature(value) => write!(
                f,
                "water temperature {} K lies outside {LOWEST_TEMPERATURE_K} to {HIGHEST_TEMPERATURE_K} K",
                value.get::<kelvin>()
            ),
            Self::Solids(value) => write!(
                f,
                "suspended solids {} kg/m3 lie outside 0 to {GREATEST_SOLIDS_KG_M3} kg/m3",
                value.get::<kilogram_of_solids_per_cubic_meter>()
            ),
            Self::GrainDensity(value) => write!(
                f,
                "grain density {} kg/m3 is not above that of water",
                value.get::<kilogram_per_cubic_meter>()
            ),
        }
    }
}

impl core::error::Error for WaterError {}

/// Water at one temperature, its properties computed once.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Water {
    temperature: f64,
    density: f64,
    dynamic_viscosity: f64,
    vapour_pressure: f64,
    sound_speed: f64,
}

impl Water {
    /// Clean water at the given temperature and about one atmosphere.
    ///
    /// # Valid for
    /// 0 to 60 degC. Within 0.1 % of IAPWS-95 (viscosity within 0.5 % of the
    /// IAPWS 2008 formulation).
    ///
    /// # Errors
    /// [`WaterError::Temperature`] outside that range.
    ///
    /// # Example
    /// ```
    /// use hydraulics::quantity::{ThermodynamicTemperature, unit};
    /// use hydraulics::water::Water;
    /// let water = Water::at(ThermodynamicTemperature::new::<
    ///     unit::thermodynamic_temperature::degree_celsius,
    /// >(15.0))?;
    /// let density = water.density().get::<unit::mass_density::kilogram_per_cubic_meter>();
    /// assert!((density - 999.10).abs() < 0.01);
    /// # Ok::<(), hydraulics::water::WaterError>(())
    /// ```
    pub fn at(temperature: ThermodynamicTemperature) -> Result<Self, WaterError> {
        let t = temperature.get::<kelvin>();
        // A degree Celsius value may arrive a rounding error outside.
        if !(t > LOWEST_TEMPERATURE_K - 1e-9 && t < HIGHEST_TEMPERATURE_K + 1e-9) {
            return Err(WaterError::Temperature(temperature));
        }
        Ok(Self {
            temperature: t,
            density: density(t - CELSIUS_ZERO_K),
            dynamic_viscosity: dynamic_viscosity(t),
            vapour_pressure: saturation_pressure(t),
            sound_speed: sound_speed(t - CELSIUS_ZERO_K),
        })
    }

    /// The same water carrying suspended solids: only the density changes.
    ///
    /// # Equation
    /// rho = rho_w + c (1 - rho_w / rho_s), with c the mass of solids per
    /// volume of mixture (volumes add up). Viscosity is left as it is: at the
    /// largest load allowed Einstein's 1 + 2.5 phi raises it by 5 %.
    ///
    /// # Errors
    /// A load outside 0..=50 kg/m3, or grains no denser than water.
    pub fn carrying(
        self,
        solids: MassConcentration,
        grain_density: MassDensity,
    ) -> Result<Self, WaterError> {
        let load = solids.get::<kilogram_of_solids_per_cubic_meter>();
        if !(0.0..=GREATEST_SOLIDS_KG_M3).contains(&load) {
            return Err(WaterError::Solids(solids));
        }
        let grain = grain_density.get::<kilogram_per_cubic_meter>();
        if !(grain > self.density && grain.is_finite()) {
            return Err(WaterError::GrainDensity(grain_density));
        }
        Ok(Self {
            density: self.density + load * (1.0 - self.density / grain),
            ..self
        })
    }

    /// The temperature asked for.
    #[must_use]
    pub fn temperature(&self) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<kelvin>(self.temperature)
    }

    /// Density.
    ///
    /// # Source
    /// Kell, Journal of Chemical and Engineering Data 20 (1975), 97-105, at
    /// 101 325 Pa.
    #[must_use]
    pub fn density(&self) -> MassDensity {
        MassDensity::new::<kilogram_per_cubic_meter>(self.density)
    }

    /// Dynamic viscosity.
    ///
    /// # Source
    /// IAPWS SR6-08 (2011), equation for 0.1 MPa (Patek and others, Journal of
    /// Physical and Chemical Reference Data 38 (2009), 21-29, Table 2).
    #[must_use]
    pub fn dynamic_viscosity(&self) -> DynamicViscosity {
        DynamicViscosity::new::<pascal_second>(self.dynamic_viscosity)
    }

    /// Kinematic viscosity: dynamic viscosity over density.
    #[must_use]
    pub fn kinematic_viscosity(&self) -> KinematicViscosity {
        KinematicViscosity::new::<square_meter_per_second>(self.dynamic_viscosity / self.density)
    }

    /// Vapour (saturation) pressure.
    ///
    /// # Source
    /// Wagner and Pruss, Journal of Physical and Chemical Reference Data 22
    /// (1993), 783-787, equation 1; IAPWS SR1-86(1992).
    #[must_use]
    pub fn vapour_pressure(&self) -> AbsolutePressure {
        AbsolutePressure::from_pa(self.vapour_pressure)
    }

    /// Speed of sound in open water.
    ///
    /// # Source
    /// Marczak, Journal of the Acoustical Society of America 102 (1997),
    /// 2776-2779, at about one atmosphere.
    #[must_use]
    pub fn sound_speed(&self) -> Velocity {
        Velocity::new::<meter_per_second>(self.sound_speed)
    }

    /// Adiabatic bulk modulus, rho c^2: the one that governs waves.
    ///
    /// For silt-laden water this uses the mixture's density with the sound
    /// speed of clean water; solids are stiffer than water, so it is a slight
    /// overestimate of the true speed's inertia and on the safe side.
    #[must_use]
    pub fn bulk_modulus(&self) -> Pressure {
        Pressure::new::<pascal>(self.density * self.sound_speed * self.sound_speed)
    }

    /// Density in kg/m3, for kernels.
    pub(crate) fn density_si(&self) -> f64 {
        self.density
    }

    /// Kinematic viscosity in m2/s, for kernels.
    pub(crate) fn kinematic_viscosity_si(&self) -> f64 {
        self.dynamic_viscosity / self.density
    }
}

/// Polynomial with the constant first.
fn polynomial(coefficients: &[f64], x: f64) -> f64 {
    coefficients.iter().rev().fold(0.0, |sum, c| sum * x + c)
}

/// Density, kg/m3, at t degC (Kell 1975).
fn density(t: f64) -> f64 {
    polynomial(
        &[
            999.839_52,
            16.945_176,
            -7.987_040_1e-3,
            -46.170_461e-6,
            105.563_02e-9,
            -280.542_53e-12,
        ],
        t,
    ) / (1.0 + 16.879_850e-3 * t)
}

/// Dynamic viscosity, Pa s, at t K (IAPWS SR6-08).
fn dynamic_viscosity(t: f64) -> f64 {
    const TERMS: [(f64, f64); 4] = [
        (280.68, -1.9),
        (511.45, -7.7),
        (61.131, -19.6),
        (0.459_03, -40.0),
    ];
    let reduced = t / 300.0;
    1e-6 * TERMS
        .iter()
        .map(|(factor, power)| factor * math::pow(reduced, *power))
        .sum::<f64>()
}

/// Saturation pressure, Pa, at t K (Wagner and Pruss 1993).
fn saturation_pressure(t: f64) -> f64 {
    const CRITICAL_K: f64 = 647.096;
    const CRITICAL_PA: f64 = 22.064e6;
    const TERMS: [(f64, f64); 6] = [
        (-7.859_517_83, 1.0),
        (1.844_082_59, 1.5),
        (-11.786_649_7, 3.0),
        (22.680_741_1, 3.5),
        (-15.961_871_9, 4.0),
        (1.801_225_02, 7.5),
    ];
    let tau = 1.0 - t / CRITICAL_K;
    let sum: f64 = TERMS
        .iter()
        .map(|(factor, power)| factor * math::pow(tau, *power))
        .sum();
    CRITICAL_PA * math::exp(CRITICAL_K / t * sum)
}

/// Speed of sound, m/s, at t degC (Marczak 1997).
fn sound_speed(t: f64) -> f64 {
    polynomial(
        &[
            1.402_385e3,
            5.038_813,
            -5.799_136e-2,
            3.287_156e-4,
            -1.398_845e-6,
            2.787_860e-9,
        ],
        t,
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn at(celsius: f64) -> Water {
        Water::at(ThermodynamicTemperature::new::<degree_celsius>(celsius)).unwrap()
    }

    #[test]
    fn ends_of_the_range_are_inside_and_beyond_is_refused() {
        at(0.0);
        at(60.0);
        for celsius in [-0.01, 60.01, f64::NAN, f64::INFINITY] {
            let temperature = ThermodynamicTemperature::new::<degree_celsius>(celsius);
            assert!(Water::at(temperature).is_err(), "{celsius}");
        }
    }

    #[test]
    fn silt_makes_water_heavier() {
        let clean = at(10.0);
        let grain = MassDensity::new::<kilogram_per_cubic_meter>(2650.0);
        let load = MassConcentration::new::<kilogram_of_solids_per_cubic_meter>(10.0);
        let laden = clean.carrying(load, grain).unwrap();
        let gained = (laden.density() - clean.density()).get::<kilogram_per_cubic_meter>();
        // 10 kg of solids take the room of 3.77 kg of water.
        assert!((gained - (10.0 - 10.0 / 2650.0 * clean.density_si())).abs() < 1e-9);
        assert!(
            clean
                .carrying(load, MassDensity::new::<kilogram_per_cubic_meter>(900.0))
                .is_err()
        );
        let mud = MassConcentration::new::<kilogram_of_solids_per_cubic_meter>(51.0);
        assert!(clean.carrying(mud, grain).is_err());
    }

    #[test]
    fn densest_at_four_degrees() {
        assert!(at(3.98).density() > at(3.0).density());
        assert!(at(3.98).density() > at(5.0).density());
    }

    proptest! {
        #[test]
        fn warmer_water_is_thinner_and_nearer_to_boiling(t in 0.0..59.0_f64) {
            let cold = at(t);
            let warm = at(t + 1.0);
            prop_assert!(warm.dynamic_viscosity() < cold.dynamic_viscosity());
            prop_assert!(warm.vapour_pressure() > cold.vapour_pressure());
            prop_assert!(warm.sound_speed() > cold.sound_speed());
        }
    }
}
