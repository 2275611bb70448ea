//! Kinds of quantity, and the units a person may type them in.
//!
//! The factors are `uom`'s; only the spellings are ours, because people type
//! what `uom` does not parse. Reading a typed text is [`crate::reading`]'s.

use hydraulics::math;
use serde::{Deserialize, Serialize};
use uom::si::f64::{Length, Power, Pressure, ThermodynamicTemperature, Time, Velocity, VolumeRate};
use uom::si::{length, power, pressure, thermodynamic_temperature, time, velocity, volume_rate};

/// What a number measures. Fixes the base unit it is kept in and the units it
/// may be typed in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Kind {
    /// Distance along the ground or the pipe. Base unit m.
    Distance,
    /// Height above the book's own datum; may be negative. Base unit m.
    Level,
    /// A head or a loss of head, in metres of water. Base unit m.
    Head,
    /// A small dimension: bore, wall, diameter. Base unit m, shown in mm or in.
    Bore,
    /// Volume flow. Base unit m³/s.
    Flow,
    /// Gauge pressure, or a pressure rating. Base unit Pa.
    Pressure,
    /// Stress or modulus of a wall. Base unit Pa, shown in MPa or psi.
    Stress,
    /// Temperature. Base unit degC (the one kind whose base is not SI proper).
    Temperature,
    /// Velocity. Base unit m/s.
    Velocity,
    /// Power. Base unit W.
    Power,
    /// Time. Base unit s.
    Time,
    /// An angle. Base unit degree.
    Angle,
    /// A share of a whole. Base 1, shown in per cent.
    Share,
    /// A plain number: a count or a coefficient.
    Number,
    /// Mass. Base unit kg.
    Mass,
    /// Mass per length. Base unit kg/m.
    MassPerLength,
    /// Money per length, in the book's own currency. Base unit 1/m.
    PricePerLength,
}

/// Which family of units the screen and the print use.
#[derive(
    Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, schemars::JsonSchema,
)]
#[serde(rename_all = "snake_case")]
pub enum UnitSystem {
    /// Metres, litres per second, bar.
    #[default]
    Metric,
    /// Feet, US gallons per minute, psi.
    UsCustomary,
}

/// A unit of some [`Kind`]: its printed symbol and its way to the base unit.
#[derive(Clone, Copy)]
pub struct Unit {
    /// The symbol as printed, and as kept in the file.
    pub symbol: &'static str,
    /// Other spellings taken when typed. Compared without regard to case
    /// unless one of them differs by case alone.
    spellings: &'static [&'static str],
    to_base: fn(f64) -> f64,
    from_base: fn(f64) -> f64,
    /// The base value per unit, leaving out any offset: what a ± scales by.
    pub(crate) span: fn(f64) -> f64,
}

impl std::fmt::Debug for Unit {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "Unit({})", self.symbol)
    }
}

impl PartialEq for Unit {
    fn eq(&self, other: &Self) -> bool {
        self.symbol == other.symbol
    }
}

impl Unit {
    /// The value in the kind's base unit of `x` of this unit.
    #[must_use]
    pub fn to_base(&self, x: f64) -> f64 {
        (self.to_base)(x)
    }

    /// The value in this unit of `x` of the kind's base unit.
    #[must_use]
    pub fn from_base(&self, x: f64) -> f64 {
        (self.from_base)(x)
    }

    pub(crate) fn spelled(&self, text: &str) -> bool {
        text == self.symbol
            || self.spellings.contains(&text)
            || text.eq_ignore_ascii_case(self.symbol)
            || self.spellings.iter().any(|s| s.eq_ignore_ascii_case(text))
    }
}

macro_rules! unit {
    ($symbol:literal, [$($spelling:literal),*], $quantity:ident, $unit:ty, $base:ty) => {
        Unit {
            symbol: $symbol,
            spellings: &[$($spelling),*],
            to_base: |x| $quantity::new::<$unit>(x).get::<$base>(),
            from_base: |x| $quantity::new::<$base>(x).get::<$unit>(),
            span: |x| $quantity::new::<$unit>(x).get::<$base>(),
        }
    };
}

macro_rules! plain {
    ($symbol:literal, [$($spelling:literal),*], $factor:expr) => {
        Unit {
            symbol: $symbol,
            spellings: &[$($spelling),*],
            to_base: |x| x * $factor,
            from_base: |x| x / $factor,
            span: |x| x * $factor,
        }
    };
}

const METRE: Unit = unit!(
    "m",
    ["meter", "metre", "metro", "metros"],
    Length,
    length::meter,
    length::meter
);
const FOOT: Unit = unit!(
    "ft",
    ["'", "′", "feet", "foot", "pie", "pies"],
    Length,
    length::foot,
    length::meter
);
pub(crate) const INCH: Unit = unit!(
    "in",
    ["\"", "″", "''", "inch", "inches", "pulg"],
    Length,
    length::inch,
    length::meter
);
const MILLIMETRE: Unit = unit!("mm", [], Length, length::millimeter, length::meter);
const CENTIMETRE: Unit = unit!("cm", [], Length, length::centimeter, length::meter);
const KILOMETRE: Unit = unit!("km", [], Length, length::kilometer, length::meter);

const LITRE_PER_SECOND: Unit = unit!(
    "L/s",
    ["l/s", "lps", "l/sec"],
    VolumeRate,
    volume_rate::liter_per_second,
    volume_rate::cubic_meter_per_second
);
const LITRE_PER_MINUTE: Unit = unit!(
    "L/min",
    ["l/min", "lpm"],
    VolumeRate,
    volume_rate::liter_per_minute,
    volume_rate::cubic_meter_per_second
);
const CUBIC_METRE_PER_SECOND: Unit = unit!(
    "m³/s",
    ["m3/s", "cumecs", "cumec"],
    VolumeRate,
    volume_rate::cubic_meter_per_second,
    volume_rate::cubic_meter_per_second
);
const CUBIC_METRE_PER_HOUR: Unit = unit!(
    "m³/h",
    ["m3/h", "m3/hr"],
    VolumeRate,
    volume_rate::cubic_meter_per_hour,
    volume_rate::cubic_meter_per_second
);
// uom's gallon and psi are rounded in the seventh digit; both are exact:
// 231 cubic inches (NIST SP 811, B.6), and a pound-force on a square inch.
const GALLON_PER_MINUTE: Unit = plain!(
    "gpm",
    ["gal/min", "usgpm", "US gpm"],
    231.0 * 0.0254 * 0.0254 * 0.0254 / 60.0
);
const CUBIC_FOOT_PER_SECOND: Unit = unit!(
    "ft³/s",
    ["ft3/s", "cfs"],
    VolumeRate,
    volume_rate::cubic_foot_per_second,
    volume_rate::cubic_meter_per_second
);

const BAR: Unit = unit!("bar", [], Pressure, pressure::bar, pressure::pascal);
const KILOPASCAL: Unit = unit!("kPa", [], Pressure, pressure::kilopascal, pressure::pascal);
const MEGAPASCAL: Unit = unit!(
    "MPa",
    ["N/mm2", "N/mm²"],
    Pressure,
    pressure::megapascal,
    pressure::pascal
);
const PSI: Unit = plain!(
    "psi",
    ["lb/in2"],
    0.453_592_37 * 9.806_65 / (0.0254 * 0.0254)
);
const GIGAPASCAL: Unit = unit!("GPa", [], Pressure, pressure::gigapascal, pressure::pascal);

const METRE_PER_SECOND: Unit = unit!(
    "m/s",
    ["mps"],
    Velocity,
    velocity::meter_per_second,
    velocity::meter_per_second
);
const FOOT_PER_SECOND: Unit = unit!(
    "ft/s",
    ["fps"],
    Velocity,
    velocity::foot_per_second,
    velocity::meter_per_second
);

const KILOWATT: Unit = unit!("kW", [], Power, power::kilowatt, power::watt);
const WATT: Unit = unit!("W", [], Power, power::watt, power::watt);
const HORSEPOWER: Unit = unit!("hp", [], Power, power::horsepower, power::watt);

const SECOND: Unit = unit!("s", ["sec"], Time, time::second, time::second);
const MINUTE: Unit = unit!("min", [], Time, time::minute, time::second);

const DEGREE_CELSIUS: Unit = Unit {
    symbol: "°C",
    spellings: &["C", "degC", "ºC"],
    to_base: |x| x,
    from_base: |x| x,
    span: |x| x,
};
const DEGREE_FAHRENHEIT: Unit = Unit {
    symbol: "°F",
    spellings: &["F", "degF", "ºF"],
    to_base: |x| {
        ThermodynamicTemperature::new::<thermodynamic_temperature::degree_fahrenheit>(x)
            .get::<thermodynamic_temperature::degree_celsius>()
    },
    from_base: |x| {
        ThermodynamicTemperature::new::<thermodynamic_temperature::degree_celsius>(x)
            .get::<thermodynamic_temperature::degree_fahrenheit>()
    },
    span: |x| x / 1.8,
};

const DEGREE: Unit = plain!("°", ["deg", "º"], 1.0);
// A slope in per cent is the tangent of its angle.
const PER_CENT_SLOPE: Unit = Unit {
    symbol: "%",
    spellings: &["pct"],
    to_base: |x| math::atan(x / 100.0) * 180.0 / math::PI,
    from_base: |x| math::tan(x * math::PI / 180.0) * 100.0,
    // Greatest where the slope is least, so a doubt is never made too small.
    span: |x| x / 100.0 * 180.0 / math::PI,
};
const PER_CENT: Unit = plain!("%", ["pct"], 0.01);
const ONE: Unit = plain!("", [], 1.0);
const KILOGRAM: Unit = plain!("kg", [], 1.0);
// International avoirdupois pound, exact (1959 agreement).
const POUND: Unit = plain!("lb", ["lbs"], 0.453_592_37);
const KILOGRAM_PER_METRE: Unit = plain!("kg/m", [], 1.0);
const POUND_PER_FOOT: Unit = plain!("lb/ft", [], 0.453_592_37 / 0.3048);
const PER_METRE: Unit = plain!("/m", ["per m"], 1.0);
const PER_FOOT: Unit = plain!("/ft", ["per ft"], 1.0 / 0.3048);

impl Kind {
    /// The units this kind may be typed in; the first is metric, shown by
    /// default; see [`Kind::default_unit`].
    #[must_use]
    pub fn units(self) -> &'static [Unit] {
        match self {
            Kind::Distance => &[METRE, FOOT, KILOMETRE],
            Kind::Level | Kind::Head => &[METRE, FOOT],
            Kind::Bore => &[MILLIMETRE, INCH, CENTIMETRE],
            Kind::Flow => &[
                LITRE_PER_SECOND,
                GALLON_PER_MINUTE,
                CUBIC_METRE_PER_SECOND,
                CUBIC_METRE_PER_HOUR,
                LITRE_PER_MINUTE,
                CUBIC_FOOT_PER_SECOND,
            ],
            Kind::Pressure => &[BAR, PSI, KILOPASCAL, MEGAPASCAL],
            Kind::Stress => &[MEGAPASCAL, PSI, GIGAPASCAL],
            Kind::Temperature => &[DEGREE_CELSIUS, DEGREE_FAHRENHEIT],
            Kind::Velocity => &[METRE_PER_SECOND, FOOT_PER_SECOND],
            Kind::Power => &[KILOWATT, HORSEPOWER, WATT],
            Kind::Time => &[SECOND, MINUTE],
            Kind::Angle => &[DEGREE, PER_CENT_SLOPE],
            Kind::Share => &[PER_CENT],
            Kind::Number => &[ONE],
            Kind::Mass => &[KILOGRAM, POUND],
            Kind::MassPerLength => &[KILOGRAM_PER_METRE, POUND_PER_FOOT],
            Kind::PricePerLength => &[PER_METRE, PER_FOOT],
        }
    }

    /// The unit a bare number is read in, and a figure shown in.
    #[must_use]
    pub fn default_unit(self, system: UnitSystem) -> Unit {
        let units = self.units();
        match system {
            UnitSystem::Metric => match self {
                Kind::Power => KILOWATT,
                _ => units[0],
            },
            UnitSystem::UsCustomary => match self {
                // Power is sold in kW on both sides.
                Kind::Power => KILOWATT,
                Kind::Angle => DEGREE,
                _ if units.len() > 1 && self != Kind::Time => units[1],
                _ => units[0],
            },
        }
    }

    /// The unit of this kind with this printed symbol or spelling.
    #[must_use]
    pub fn unit(self, symbol: &str) -> Option<Unit> {
        let units = self.units();
        // Exact first: "m" and "M" must not be taken for one another where
        // both exist.
        units
            .iter()
            .chain(self.more_units())
            .find(|u| u.symbol == symbol || u.spellings.contains(&symbol))
            .or_else(|| {
                units
                    .iter()
                    .chain(self.more_units())
                    .find(|u| u.spelled(symbol))
            })
            .copied()
    }

    /// Units taken when typed, but not offered by the unit button.
    fn more_units(self) -> &'static [Unit] {
        match self {
            Kind::Distance | Kind::Level | Kind::Head => &[INCH, CENTIMETRE, MILLIMETRE],
            Kind::Bore => &[METRE, FOOT],
            _ => &[],
        }
    }

    /// Whether a value below zero can make sense.
    #[must_use]
    pub fn may_be_negative(self) -> bool {
        matches!(self, Kind::Level | Kind::Temperature | Kind::Angle)
    }

    /// The base unit's suffix in file and findings field names.
    #[must_use]
    pub fn suffix(self) -> &'static str {
        match self {
            Kind::Distance | Kind::Level | Kind::Head | Kind::Bore => "m",
            Kind::Flow => "m3_s",
            Kind::Pressure | Kind::Stress => "pa",
            Kind::Temperature => "degc",
            Kind::Velocity => "m_s",
            Kind::Power => "w",
            Kind::Time => "s",
            Kind::Angle => "deg",
            Kind::Share => "share",
            Kind::Number => "number",
            Kind::Mass => "kg",
            Kind::MassPerLength => "kg_m",
            Kind::PricePerLength => "per_m",
        }
    }
}

/// Every kind there is, for tests that must miss none.
#[cfg(test)]
pub(crate) const ALL_KINDS: [Kind; 17] = [
    Kind::Distance,
    Kind::Level,
    Kind::Head,
    Kind::Bore,
    Kind::Flow,
    Kind::Pressure,
    Kind::Stress,
    Kind::Temperature,
    Kind::Velocity,
    Kind::Power,
    Kind::Time,
    Kind::Angle,
    Kind::Share,
    Kind::Number,
    Kind::Mass,
    Kind::MassPerLength,
    Kind::PricePerLength,
];

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn every_unit_is_found_by_its_own_symbol() {
        for kind in ALL_KINDS {
            for unit in kind.units() {
                assert_eq!(kind.unit(unit.symbol), Some(*unit), "{kind:?} {unit:?}");
            }
        }
    }

    #[test]
    fn a_slope_of_a_hundred_per_cent_is_45_degrees() {
        let slope = Kind::Angle.unit("%").unwrap();
        assert!((slope.to_base(100.0) - 45.0).abs() < 1e-12);
        assert!((slope.from_base(-45.0) + 100.0).abs() < 1e-12);
    }

    proptest! {
        #[test]
        fn a_unit_goes_there_and_back(x in 1e-6..1e6f64) {
            for kind in ALL_KINDS {
                for unit in kind.units() {
                    // Steep slopes come near the upright, where the tangent
                    // loses digits.
                    if kind == Kind::Angle && x > 80.0 {
                        continue;
                    }
                    let back = unit.from_base(unit.to_base(x));
                    prop_assert!((back - x).abs() <= 1e-11 * x.abs().max(1.0), "{:?} {}", unit, back);
                }
            }
        }
    }
}
