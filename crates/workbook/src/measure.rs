//! A computed value on its way to a screen, a print or a file: how much, and
//! of what kind.

use crate::units::Kind;
use hydraulics::quantity::{
    AbsolutePressure, GaugePressure, Head, HorizontalDistance, Level, PipeLength,
};
use uom::si::f64::{
    LinearMassDensity, Mass, Power, Pressure, ThermodynamicTemperature, Time, Velocity, VolumeRate,
};
use uom::si::thermodynamic_temperature::degree_celsius;

/// A value in its kind's base unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Measure {
    /// In the base unit of `kind`.
    pub value: f64,
    /// What it measures.
    pub kind: Kind,
}

impl Measure {
    /// `value` in the base unit of `kind`.
    #[must_use]
    pub fn new(value: f64, kind: Kind) -> Measure {
        Measure { value, kind }
    }

    /// A share of a whole.
    #[must_use]
    pub fn share(value: f64) -> Measure {
        Measure::new(value, Kind::Share)
    }

    /// A plain number.
    #[must_use]
    pub fn number(value: f64) -> Measure {
        Measure::new(value, Kind::Number)
    }

    /// A small dimension.
    #[must_use]
    pub fn bore(value: uom::si::f64::Length) -> Measure {
        Measure::new(value.get::<uom::si::length::meter>(), Kind::Bore)
    }
}

macro_rules! measures {
    ($($from:ty => $kind:ident, $get:expr;)+) => {
        $(impl From<$from> for Measure {
            fn from(x: $from) -> Measure {
                let get: fn($from) -> f64 = $get;
                Measure::new(get(x), Kind::$kind)
            }
        })+
    };
}

measures! {
    Level => Level, |x| x.m();
    Head => Head, |x| x.m();
    PipeLength => Distance, |x| x.m();
    HorizontalDistance => Distance, |x| x.m();
    GaugePressure => Pressure, |x| x.pa();
    AbsolutePressure => Pressure, |x| x.pa();
    Pressure => Pressure, |x| x.get::<uom::si::pressure::pascal>();
    VolumeRate => Flow, |x| x.get::<uom::si::volume_rate::cubic_meter_per_second>();
    Velocity => Velocity, |x| x.get::<uom::si::velocity::meter_per_second>();
    Power => Power, |x| x.get::<uom::si::power::watt>();
    Time => Time, |x| x.get::<uom::si::time::second>();
    ThermodynamicTemperature => Temperature, |x| x.get::<degree_celsius>();
    Mass => Mass, |x| x.get::<uom::si::mass::kilogram>();
    LinearMassDensity => MassPerLength, |x| {
        x.get::<uom::si::linear_mass_density::kilogram_per_meter>()
    };
}
