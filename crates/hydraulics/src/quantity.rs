//! The quantities that cross the doors of this crate.
//!
//! Plain physical quantities are those of `uom` (f64, SI base units),
//! re-exported here so that every crate of the house uses the same ones. What
//! `uom` cannot tell apart, because the dimension is the same, gets a newtype:
//!
//! | type | what it is |
//! |---|---|
//! | [`Level`] | height above the survey's datum |
//! | [`Head`] | difference of levels, or energy per weight: a height of water |
//! | [`PipeLength`] | length or chainage measured along the pipe |
//! | [`HorizontalDistance`] | distance on the plan |
//! | [`GaugePressure`] | pressure above the local atmosphere |
//! | [`AbsolutePressure`] | pressure above vacuum |

use core::ops::{Add, AddAssign, Mul, Neg, Sub};

pub use uom::si::f64::{
    Acceleration, Angle, AngularVelocity, Area, DynamicViscosity, Energy, Force,
    KinematicViscosity, Length, Mass, MassConcentration, MassDensity, Power, Pressure, Ratio,
    TemperatureInterval, ThermodynamicTemperature, Time, Velocity, Volume, VolumeRate,
};

/// The unit modules of `uom` for the quantities above.
pub mod unit {
    pub use uom::si::{
        acceleration, angle, angular_velocity, area, dynamic_viscosity, energy, force,
        kinematic_viscosity, length, mass, mass_concentration, mass_density, power, pressure,
        ratio, temperature_interval, thermodynamic_temperature, time, velocity, volume,
        volume_rate,
    };
}

use uom::si::length::meter;
use uom::si::pressure::pascal;

/// Defines a newtype over a `uom` quantity with plain-number doors.
macro_rules! newtype {
    ($(#[$doc:meta])* $name:ident($inner:ident), $unit:ident, $from:ident, $to:ident, $word:literal) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
        pub struct $name($inner);

        impl $name {
            /// Wraps the quantity.
            #[must_use]
            pub fn new(value: $inner) -> Self {
                Self(value)
            }

            /// The quantity inside.
            #[must_use]
            pub fn get(self) -> $inner {
                self.0
            }

            #[doc = concat!("From a number of ", $word, ".")]
            #[must_use]
            pub fn $from(value: f64) -> Self {
                Self($inner::new::<$unit>(value))
            }

            #[doc = concat!("As a number of ", $word, ".")]
            #[must_use]
            pub fn $to(self) -> f64 {
                self.0.get::<$unit>()
            }
        }
    };
}

newtype!(
    /// Height above the survey's datum. May be negative.
    Level(Length), meter, from_m, m, "metres"
);
newtype!(
    /// Difference of two levels, or energy per weight, as a height of the
    /// water that flows. May be negative.
    Head(Length), meter, from_m, m, "metres"
);
newtype!(
    /// Length, or chainage, measured along the pipe.
    PipeLength(Length), meter, from_m, m, "metres"
);
newtype!(
    /// Distance measured on the plan.
    HorizontalDistance(Length), meter, from_m, m, "metres"
);
newtype!(
    /// Pressure above the local atmosphere; negative below it.
    GaugePressure(Pressure), pascal, from_pa, pa, "pascals"
);
newtype!(
    /// Pressure above vacuum.
    AbsolutePressure(Pressure), pascal, from_pa, pa, "pascals"
);

impl Sub for Level {
    type Output = Head;
    fn sub(self, lower: Self) -> Head {
        Head(self.0 - lower.0)
    }
}

impl Sub<Head> for Level {
    type Output = Self;
    fn sub(self, head: Head) -> Self {
        Self(self.0 - head.0)
    }
}

impl Add<Head> for Level {
    type Output = Self;
    fn add(self, head: Head) -> Self {
        Self(self.0 + head.0)
    }
}

impl Add for Head {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl AddAssign for Head {
    fn add_assign(&mut self, other: Self) {
        self.0 += other.0;
    }
}

impl Sub for Head {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self(self.0 - other.0)
    }
}

impl Neg for Head {
    type Output = Self;
    fn neg(self) -> Self {
        Self(-self.0)
    }
}

impl Mul<f64> for Head {
    type Output = Self;
    fn mul(self, factor: f64) -> Self {
        Self(self.0 * factor)
    }
}

impl Add for PipeLength {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl Sub for PipeLength {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self(self.0 - other.0)
    }
}

impl Add for HorizontalDistance {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl Sub for HorizontalDistance {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self(self.0 - other.0)
    }
}

impl Head {
    /// The gauge pressure of this head of water of the given density.
    ///
    /// # Equation
    /// p = rho g h.
    #[must_use]
    pub fn pressure(self, density: MassDensity, gravity: Acceleration) -> GaugePressure {
        GaugePressure(density * gravity * self.0)
    }
}

impl GaugePressure {
    /// The head of water of the given density that this pressure stands for.
    ///
    /// # Equation
    /// h = p / (rho g).
    #[must_use]
    pub fn head(self, density: MassDensity, gravity: Acceleration) -> Head {
        Head(self.0 / (density * gravity))
    }

    /// The absolute pressure under the given atmosphere.
    #[must_use]
    pub fn absolute(self, atmosphere: AbsolutePressure) -> AbsolutePressure {
        AbsolutePressure(self.0 + atmosphere.0)
    }
}

impl Add for GaugePressure {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl Sub for GaugePressure {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self(self.0 - other.0)
    }
}

impl AbsolutePressure {
    /// The gauge pressure against the given atmosphere.
    #[must_use]
    pub fn gauge(self, atmosphere: Self) -> GaugePressure {
        GaugePressure(self.0 - atmosphere.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn levels_and_heads() {
        let forebay = Level::from_m(120.0);
        let axis = Level::from_m(20.5);
        assert!(((forebay - axis).m() - 99.5).abs() < 1e-12);
        assert!(((forebay - Head::from_m(3.0)).m() - 117.0).abs() < 1e-12);
        assert!(((axis + Head::from_m(3.0)).m() - 23.5).abs() < 1e-12);
    }

    #[test]
    fn gauge_and_absolute() {
        let atmosphere = AbsolutePressure::from_pa(90_000.0);
        let gauge = GaugePressure::from_pa(-20_000.0);
        assert!((gauge.absolute(atmosphere).pa() - 70_000.0).abs() < 1e-9);
        assert!((gauge.absolute(atmosphere).gauge(atmosphere).pa() + 20_000.0).abs() < 1e-9);
    }

    #[test]
    fn head_and_pressure_are_inverse() {
        let density = MassDensity::new::<uom::si::mass_density::kilogram_per_cubic_meter>(999.0);
        let gravity = Acceleration::new::<uom::si::acceleration::meter_per_second_squared>(9.80665);
        let head = Head::from_m(10.0);
        let pressure = head.pressure(density, gravity);
        assert!((pressure.pa() - 97_968.433_5).abs() < 1e-6);
        assert!((pressure.head(density, gravity).m() - 10.0).abs() < 1e-12);
    }
}
