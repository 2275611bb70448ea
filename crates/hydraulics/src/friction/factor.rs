//! The Darcy factor over all regimes.

use super::colebrook::colebrook_factor;
use crate::math;
use crate::quantity::{Acceleration, Head, KinematicViscosity, Length, PipeLength, Velocity};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::kinematic_viscosity::square_meter_per_second;
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

/// Reynolds number up to which flow is taken as laminar.
pub const LAMINAR_LIMIT: f64 = 2300.0;
/// Reynolds number from which flow is taken as fully turbulent.
pub const TURBULENT_LIMIT: f64 = 4000.0;
/// Greatest relative roughness accepted. Moody's diagram (1944) ends at 0.05;
/// beyond 0.1 the wall no longer is a rough wall but a row of obstacles.
pub const GREATEST_RELATIVE_ROUGHNESS: f64 = 0.1;
/// Greatest Reynolds number accepted: ten times the end of Moody's diagram.
pub const GREATEST_REYNOLDS: f64 = 1e9;

/// Least Reynolds number accepted: below it water stands still, and nothing
/// may underflow.
pub const LEAST_REYNOLDS: f64 = 1e-100;

/// Why there is no friction factor.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum FrictionError {
    /// The Reynolds number is not above 0 and at most 1e9
    /// ([`GREATEST_REYNOLDS`]).
    Reynolds(f64),
    /// The relative roughness lies outside 0..=0.1
    /// ([`GREATEST_RELATIVE_ROUGHNESS`]).
    RelativeRoughness(f64),
    /// The Darcy factor is not a positive number.
    Factor(f64),
    /// The bore is not a positive length, or (for a friction law) lies outside
    /// [`super::BORE_RANGE_M`].
    Bore(Length),
    /// The velocity is not a speed from zero up.
    Velocity(Velocity),
    /// The viscosity is not positive.
    Viscosity(KinematicViscosity),
    /// The roughness is negative or not finite.
    Roughness(Length),
    /// The Hazen-Williams coefficient lies outside its range
    /// ([`super::HAZEN_WILLIAMS_RANGE`]).
    HazenWilliams(f64),
    /// The Manning coefficient lies outside its range
    /// ([`super::MANNING_RANGE`]).
    Manning(f64),
    /// The equation holds for turbulent flow only, and this is not.
    NotTurbulent {
        /// Reynolds number of the flow.
        reynolds: f64,
    },
    /// The loss is less than in a hydraulically smooth pipe: no roughness
    /// gives it.
    SmootherThanSmooth {
        /// Factor that the loss asks for.
        factor: f64,
        /// Factor of the smooth pipe at that Reynolds number.
        smooth: f64,
    },
}

impl core::fmt::Display for FrictionError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Reynolds(value) => write!(
                f,
                "Reynolds number {value} is not above 0 and at most {GREATEST_REYNOLDS}"
            ),
            Self::RelativeRoughness(value) => write!(
                f,
                "relative roughness {value} lies outside 0 to {GREATEST_RELATIVE_ROUGHNESS}"
            ),
            Self::Factor(value) => write!(f, "friction factor {value} is not above 0"),
            Self::Bore(bore) => write!(f, "bore {} m is out of range", bore.get::<meter>()),
            Self::Velocity(value) => {
                write!(
                    f,
                    "velocity {} m/s is below 0",
                    value.get::<meter_per_second>()
                )
            }
            Self::Viscosity(value) => write!(
                f,
                "kinematic viscosity {} m2/s is not above 0",
                value.get::<square_meter_per_second>()
            ),
            Self::Roughness(value) => {
                write!(f, "roughness {} m is below 0", value.get::<meter>())
            }
            Self::HazenWilliams(value) => write!(
                f,
                "Hazen-Williams coefficient {value} lies outside {} to {}",
                super::HAZEN_WILLIAMS_RANGE.0,
                super::HAZEN_WILLIAMS_RANGE.1
            ),
            Self::Manning(value) => write!(
                f,
                "Manning coefficient {value} lies outside {} to {}",
                super::MANNING_RANGE.0,
                super::MANNING_RANGE.1
            ),
            Self::NotTurbulent { reynolds } => write!(
                f,
                "Reynolds number {reynolds} is below {TURBULENT_LIMIT}: not turbulent"
            ),
            Self::SmootherThanSmooth { factor, smooth } => write!(
                f,
                "friction factor {factor} is below that of a smooth pipe, {smooth}"
            ),
        }
    }
}

impl core::error::Error for FrictionError {}

/// Ratio of inertia to viscosity, V D / nu; above 0, at most 1e9.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct ReynoldsNumber(f64);

impl ReynoldsNumber {
    /// Checks and wraps the number.
    ///
    /// # Errors
    /// [`FrictionError::Reynolds`] when it is not above 0 and at most 1e9.
    pub fn new(value: f64) -> Result<Self, FrictionError> {
        if (LEAST_REYNOLDS..=GREATEST_REYNOLDS).contains(&value) {
            Ok(Self(value))
        } else {
            Err(FrictionError::Reynolds(value))
        }
    }

    /// The number.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }

    /// The regime it lies in.
    #[must_use]
    pub fn regime(self) -> Regime {
        Regime::of(self.0)
    }
}

/// Wall roughness over bore; 0 to 0.1.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct RelativeRoughness(f64);

impl RelativeRoughness {
    /// Checks and wraps the ratio.
    ///
    /// # Errors
    /// [`FrictionError::RelativeRoughness`] outside 0..=0.1.
    pub fn new(value: f64) -> Result<Self, FrictionError> {
        if (0.0..=GREATEST_RELATIVE_ROUGHNESS).contains(&value) {
            Ok(Self(value))
        } else {
            Err(FrictionError::RelativeRoughness(value))
        }
    }

    /// From a roughness and a bore.
    ///
    /// # Errors
    /// A bore that is not positive, or a ratio outside 0..=0.1.
    pub fn of(roughness: Length, bore: Length) -> Result<Self, FrictionError> {
        let d = bore.get::<meter>();
        if !(d > 0.0 && d.is_finite()) {
            return Err(FrictionError::Bore(bore));
        }
        Self::new(roughness.get::<meter>() / d)
    }

    /// The ratio.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

/// Darcy friction factor (four times Fanning's); above 0.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct DarcyFactor(f64);

impl DarcyFactor {
    /// Checks and wraps the factor.
    ///
    /// # Errors
    /// [`FrictionError::Factor`] when it is not a positive finite number.
    pub fn new(value: f64) -> Result<Self, FrictionError> {
        if value > 0.0 && value.is_finite() {
            Ok(Self(value))
        } else {
            Err(FrictionError::Factor(value))
        }
    }

    /// Wraps a factor that a kernel computed from checked numbers.
    pub(crate) fn computed(value: f64) -> Self {
        debug_assert!(value > 0.0 && value.is_finite());
        Self(value)
    }

    /// The factor.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

/// How the water flows.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Regime {
    /// No flow.
    Still,
    /// Laminar, Re up to 2300.
    Laminar,
    /// Between 2300 and 4000: the flow may be either, and the loss is
    /// uncertain. A caution is due.
    Transition,
    /// Turbulent, Re from 4000.
    Turbulent,
}

impl Regime {
    /// The regime of a Reynolds number (0 means no flow).
    #[must_use]
    pub fn of(reynolds: f64) -> Self {
        if reynolds <= 0.0 {
            Self::Still
        } else if reynolds <= LAMINAR_LIMIT {
            Self::Laminar
        } else if reynolds < TURBULENT_LIMIT {
            Self::Transition
        } else {
            Self::Turbulent
        }
    }
}

/// Reynolds number V D / nu.
///
/// # Errors
/// A velocity or bore or viscosity that is not positive, or a number above
/// 1e9.
pub fn reynolds_number(
    velocity: Velocity,
    bore: Length,
    viscosity: KinematicViscosity,
) -> Result<ReynoldsNumber, FrictionError> {
    let d = bore.get::<meter>();
    if !(d > 0.0 && d.is_finite()) {
        return Err(FrictionError::Bore(bore));
    }
    let nu = viscosity.get::<square_meter_per_second>();
    if !(nu > 0.0 && nu.is_finite()) {
        return Err(FrictionError::Viscosity(viscosity));
    }
    let v = velocity.get::<meter_per_second>();
    if !(v > 0.0 && v.is_finite()) {
        return Err(FrictionError::Velocity(velocity));
    }
    ReynoldsNumber::new(v * d / nu)
}

/// Laminar factor 64/Re (Hagen-Poiseuille), at any Reynolds number.
#[must_use]
pub fn laminar(reynolds: ReynoldsNumber) -> DarcyFactor {
    DarcyFactor::computed(64.0 / reynolds.get())
}

/// Head lost by friction along a pipe.
///
/// # Equation
/// h = f (L/D) V^2/(2 g) (Darcy-Weisbach).
///
/// # Errors
/// A bore that is not positive.
pub fn darcy_weisbach(
    factor: DarcyFactor,
    length: PipeLength,
    bore: Length,
    velocity: Velocity,
    gravity: Acceleration,
) -> Result<Head, FrictionError> {
    let d = bore.get::<meter>();
    if !(d > 0.0 && d.is_finite()) {
        return Err(FrictionError::Bore(bore));
    }
    let v = velocity.get::<meter_per_second>();
    let g = gravity.get::<meter_per_second_squared>();
    Ok(Head::from_m(
        factor.get() * (length.m() / d) * v * v / (2.0 * g),
    ))
}

/// The Darcy factor in whatever regime the flow is.
///
/// # Equation
/// 64/Re to 2300; Colebrook-White (3.7, 2.51) from 4000; between them
/// f = f1 (Re/2300)^p, the straight line in log-log through both ends, with
/// p = ln(f2/f1) / ln(4000/2300). Since f2 is above f1 for every roughness, f
/// rises with Re there and the head lost, as f Re^2, rises the faster: the
/// bridge is continuous, and monotone in head loss. It is ours, a stated
/// convention for a regime in which no formula holds.
///
/// # Example
/// ```
/// use hydraulics::friction::{darcy_factor, RelativeRoughness, ReynoldsNumber};
/// let f = darcy_factor(ReynoldsNumber::new(1e5)?, RelativeRoughness::new(1e-3)?);
/// assert!((f.get() - 0.022174).abs() < 1e-6);
/// # Ok::<(), hydraulics::friction::FrictionError>(())
/// ```
#[must_use]
pub fn darcy_factor(reynolds: ReynoldsNumber, roughness: RelativeRoughness) -> DarcyFactor {
    DarcyFactor::computed(factor_si(reynolds.get(), roughness.get()))
}

/// Kernel of [`darcy_factor`] on plain numbers, for checked arguments:
/// Reynolds number above 0, relative roughness 0..=0.1.
#[must_use]
pub fn factor_si(reynolds: f64, relative_roughness: f64) -> f64 {
    if reynolds >= TURBULENT_LIMIT {
        colebrook_factor(reynolds, relative_roughness)
    } else if reynolds <= LAMINAR_LIMIT {
        64.0 / reynolds
    } else {
        let start = 64.0 / LAMINAR_LIMIT;
        let end = colebrook_factor(TURBULENT_LIMIT, relative_roughness);
        let power = math::ln(end / start) / math::ln(TURBULENT_LIMIT / LAMINAR_LIMIT);
        start * math::pow(reynolds / LAMINAR_LIMIT, power)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn factor(re: f64, rr: f64) -> f64 {
        darcy_factor(
            ReynoldsNumber::new(re).unwrap(),
            RelativeRoughness::new(rr).unwrap(),
        )
        .get()
    }

    #[test]
    fn numbers_outside_are_refused() {
        for value in [0.0, -1.0, 1e-310, 1.1e9, f64::NAN, f64::INFINITY] {
            assert!(ReynoldsNumber::new(value).is_err());
        }
        for value in [-1e-9, 0.1001, f64::NAN] {
            assert!(RelativeRoughness::new(value).is_err());
        }
        for value in [0.0, -1.0, f64::NAN, f64::INFINITY] {
            assert!(DarcyFactor::new(value).is_err());
        }
    }

    #[test]
    fn regimes() {
        assert_eq!(Regime::of(0.0), Regime::Still);
        assert_eq!(Regime::of(2300.0), Regime::Laminar);
        assert_eq!(Regime::of(2300.1), Regime::Transition);
        assert_eq!(Regime::of(3999.9), Regime::Transition);
        assert_eq!(Regime::of(4000.0), Regime::Turbulent);
    }

    proptest! {
        #[test]
        fn laminar_is_64_over_re(re in 1e-3..2300.0_f64, rr in 0.0..0.1_f64) {
            prop_assert!((factor(re, rr) * re - 64.0).abs() < 1e-12);
        }

        #[test]
        fn bridge_is_continuous_at_both_ends(rr in 0.0..0.1_f64) {
            for end in [LAMINAR_LIMIT, TURBULENT_LIMIT] {
                let below = factor(end * (1.0 - 1e-12), rr);
                let above = factor(end * (1.0 + 1e-12), rr);
                prop_assert!((below / above - 1.0).abs() < 1e-10);
            }
        }

        #[test]
        fn head_loss_rises_with_flow_through_every_regime(re in 1.0..1e5_f64, rr in 0.0..0.1_f64) {
            let more = re * 1.000_1;
            prop_assert!(factor(more, rr) * more * more > factor(re, rr) * re * re);
        }

        #[test]
        fn factor_rises_with_roughness(re in 2301.0..1e9_f64, rr in 0.0..0.099_f64) {
            prop_assert!(factor(re, rr + 1e-4) > factor(re, rr));
        }
    }
}
