//! The laws by which friction may be given, and how they translate.

use super::colebrook::colebrook_factor;
use super::factor::{
    FrictionError, GREATEST_RELATIVE_ROUGHNESS, GREATEST_REYNOLDS, LEAST_REYNOLDS, Regime,
    TURBULENT_LIMIT, factor_si,
};
use crate::math;
use crate::quantity::{Acceleration, Length, VolumeRate};
use crate::water::Water;
use uom::si::acceleration::meter_per_second_squared;
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

/// Range of the Hazen-Williams coefficient accepted: from badly tuberculated
/// iron to the smoothest plastic (common practice: 40 to 160).
pub const HAZEN_WILLIAMS_RANGE: (f64, f64) = (40.0, 160.0);
/// Range of Manning's n accepted, s/m^(1/3): from glass to corrugated metal
/// (Chow, Open-Channel Hydraulics, 1959, Table 5-6: 0.008 to 0.030).
pub const MANNING_RANGE: (f64, f64) = (0.007, 0.035);

/// Bores accepted, m: from a hair to a tunnel.
pub const BORE_RANGE_M: (f64, f64) = (1e-6, 100.0);

/// Factor of the Hazen-Williams formula in SI units: 1.318 x 0.3048^0.37 of
/// its first form in feet (Williams and Hazen, Hydraulic Tables, 1905).
const HAZEN_WILLIAMS_SI: f64 = 0.849_182;

/// How the friction of a pipe is given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum FrictionLaw {
    /// Darcy-Weisbach with Colebrook-White: the absolute roughness of the
    /// wall.
    ColebrookWhite {
        /// Absolute (equivalent sand) roughness.
        roughness: Length,
    },
    /// Hazen-Williams. Meant for water near 15 degC in turbulent flow at
    /// about 0.3 to 3 m/s in bores from 50 mm up.
    HazenWilliams {
        /// The coefficient C, 40 to 160.
        coefficient: f64,
    },
    /// Manning. Meant for rough turbulent flow.
    Manning {
        /// The coefficient n, s/m^(1/3), 0.007 to 0.035.
        n: f64,
    },
}

/// Friction at one flow.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Friction {
    /// Head lost per length of pipe (metres per metre).
    pub gradient: f64,
    /// Mean velocity, m/s.
    pub velocity: f64,
    /// Reynolds number; 0 without flow.
    pub reynolds: f64,
    /// The Darcy factor that gives this gradient; `None` without flow.
    pub factor: Option<f64>,
    /// The regime.
    pub regime: Regime,
}

impl FrictionLaw {
    /// Checks the law's own numbers, for a bore.
    ///
    /// # Errors
    /// The number that lies outside its range.
    pub fn check(&self, bore: Length) -> Result<(), FrictionError> {
        let d = bore.get::<meter>();
        if !(BORE_RANGE_M.0..=BORE_RANGE_M.1).contains(&d) {
            return Err(FrictionError::Bore(bore));
        }
        match *self {
            Self::ColebrookWhite { roughness } => {
                let e = roughness.get::<meter>();
                if !(e >= 0.0 && e.is_finite()) {
                    return Err(FrictionError::Roughness(roughness));
                }
                if e / d > GREATEST_RELATIVE_ROUGHNESS {
                    return Err(FrictionError::RelativeRoughness(e / d));
                }
            }
            Self::HazenWilliams { coefficient } => {
                let (low, high) = HAZEN_WILLIAMS_RANGE;
                if !(low..=high).contains(&coefficient) {
                    return Err(FrictionError::HazenWilliams(coefficient));
                }
            }
            Self::Manning { n } => {
                let (low, high) = MANNING_RANGE;
                if !(low..=high).contains(&n) {
                    return Err(FrictionError::Manning(n));
                }
            }
        }
        Ok(())
    }

    /// Head lost per length of pipe, and what it rests on.
    ///
    /// # Equation
    /// Darcy-Weisbach: f V^2 / (2 g D), f by [`super::darcy_factor`].
    /// Hazen-Williams: V = 0.849 C R^0.63 S^0.54, R = D/4 (Williams and
    /// Hazen 1905). Manning: V = R^(2/3) S^(1/2) / n (Manning 1891). The two
    /// empirical laws know neither viscosity nor regime: below Re 4000 they
    /// mean little, and [`Friction::regime`] says so.
    ///
    /// # Errors
    /// A negative flow, a bore or coefficient outside its range, a Reynolds
    /// number above 1e9.
    pub fn head_gradient(
        &self,
        flow: VolumeRate,
        bore: Length,
        water: &Water,
        gravity: Acceleration,
    ) -> Result<Friction, FrictionError> {
        self.check(bore)?;
        let d = bore.get::<meter>();
        let area = math::PI * d * d / 4.0;
        let velocity = flow.get::<cubic_meter_per_second>() / area;
        if !(velocity >= 0.0 && velocity.is_finite()) {
            return Err(FrictionError::Velocity(crate::quantity::Velocity::new::<
                meter_per_second,
            >(velocity)));
        }
        let reynolds = velocity * d / water.kinematic_viscosity_si();
        if reynolds > GREATEST_REYNOLDS {
            return Err(FrictionError::Reynolds(reynolds));
        }
        let g = gravity.get::<meter_per_second_squared>();
        Ok(self.friction_si(velocity, d, reynolds, g))
    }

    /// Kernel of [`Self::head_gradient`] on checked SI numbers.
    pub(crate) fn friction_si(&self, velocity: f64, d: f64, reynolds: f64, g: f64) -> Friction {
        if velocity <= 0.0 || reynolds < LEAST_REYNOLDS {
            return Friction {
                gradient: 0.0,
                velocity: 0.0,
                reynolds: 0.0,
                factor: None,
                regime: Regime::Still,
            };
        }
        let kinetic_gradient = velocity * velocity / (2.0 * g * d);
        let radius = d / 4.0;
        let (gradient, factor) = match *self {
            Self::ColebrookWhite { roughness } => {
                let factor = factor_si(reynolds, roughness.get::<meter>() / d);
                (factor * kinetic_gradient, factor)
            }
            Self::HazenWilliams { coefficient } => {
                let conveyance = HAZEN_WILLIAMS_SI * coefficient * math::pow(radius, 0.63);
                let gradient = math::pow(velocity / conveyance, 1.0 / 0.54);
                (gradient, gradient / kinetic_gradient)
            }
            Self::Manning { n } => {
                let root = n * velocity / math::pow(radius, 2.0 / 3.0);
                let gradient = root * root;
                (gradient, gradient / kinetic_gradient)
            }
        };
        Friction {
            gradient,
            velocity,
            reynolds,
            factor: Some(factor),
            regime: Regime::of(reynolds),
        }
    }
}

/// The wall roughness that loses as much as the law does, at this flow.
///
/// # Equation
/// Colebrook-White solved for eps: eps/D = 3.7 (10^(-1/(2 sqrt f)) -
/// 2.51/(Re sqrt f)), closed form.
///
/// # Errors
/// [`FrictionError::NotTurbulent`] below Re 4000;
/// [`FrictionError::SmootherThanSmooth`] when even a smooth pipe loses more;
/// [`FrictionError::RelativeRoughness`] when more than 0.1 of the bore would
/// be needed; what [`FrictionLaw::head_gradient`] refuses.
pub fn equivalent_roughness(
    law: &FrictionLaw,
    flow: VolumeRate,
    bore: Length,
    water: &Water,
    gravity: Acceleration,
) -> Result<Length, FrictionError> {
    if let FrictionLaw::ColebrookWhite { roughness } = law {
        law.check(bore)?;
        return Ok(*roughness);
    }
    let friction = turbulent(law, flow, bore, water, gravity)?;
    let factor = friction.factor.unwrap_or(f64::NAN);
    let root = factor.sqrt();
    let ratio = 3.7 * (math::exp10(-0.5 / root) - 2.51 / (friction.reynolds * root));
    if ratio < 0.0 {
        return Err(FrictionError::SmootherThanSmooth {
            factor,
            smooth: colebrook_factor(friction.reynolds, 0.0),
        });
    }
    if ratio > GREATEST_RELATIVE_ROUGHNESS {
        return Err(FrictionError::RelativeRoughness(ratio));
    }
    Ok(bore * ratio)
}

/// The Hazen-Williams coefficient that loses as much as the law does, at this
/// flow.
///
/// # Errors
/// [`FrictionError::NotTurbulent`] below Re 4000; what
/// [`FrictionLaw::head_gradient`] refuses. The coefficient may lie outside
/// [`HAZEN_WILLIAMS_RANGE`]: it is what it is.
pub fn equivalent_hazen_williams(
    law: &FrictionLaw,
    flow: VolumeRate,
    bore: Length,
    water: &Water,
    gravity: Acceleration,
) -> Result<f64, FrictionError> {
    let friction = turbulent(law, flow, bore, water, gravity)?;
    let radius = bore.get::<meter>() / 4.0;
    Ok(friction.velocity
        / (HAZEN_WILLIAMS_SI * math::pow(radius, 0.63) * math::pow(friction.gradient, 0.54)))
}

/// Manning's n that loses as much as the law does, at this flow.
///
/// # Errors
/// [`FrictionError::NotTurbulent`] below Re 4000; what
/// [`FrictionLaw::head_gradient`] refuses. The coefficient may lie outside
/// [`MANNING_RANGE`]: it is what it is.
pub fn equivalent_manning(
    law: &FrictionLaw,
    flow: VolumeRate,
    bore: Length,
    water: &Water,
    gravity: Acceleration,
) -> Result<f64, FrictionError> {
    let friction = turbulent(law, flow, bore, water, gravity)?;
    let radius = bore.get::<meter>() / 4.0;
    Ok(math::pow(radius, 2.0 / 3.0) * friction.gradient.sqrt() / friction.velocity)
}

/// Friction of a flow that must be turbulent.
fn turbulent(
    law: &FrictionLaw,
    flow: VolumeRate,
    bore: Length,
    water: &Water,
    gravity: Acceleration,
) -> Result<Friction, FrictionError> {
    let friction = law.head_gradient(flow, bore, water, gravity)?;
    if friction.reynolds < TURBULENT_LIMIT {
        return Err(FrictionError::NotTurbulent {
            reynolds: friction.reynolds,
        });
    }
    Ok(friction)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::standard_gravity;
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn water() -> Water {
        Water::at(crate::quantity::ThermodynamicTemperature::new::<
            degree_celsius,
        >(15.0))
        .unwrap()
    }

    fn m(value: f64) -> Length {
        Length::new::<meter>(value)
    }

    fn flow(value: f64) -> VolumeRate {
        VolumeRate::new::<cubic_meter_per_second>(value)
    }

    fn gradient(law: FrictionLaw, q: f64, bore: f64) -> Friction {
        law.head_gradient(flow(q), m(bore), &water(), standard_gravity())
            .unwrap()
    }

    #[test]
    fn numbers_outside_are_refused_with_the_value() {
        let check = |law: FrictionLaw| law.check(m(0.1));
        assert_eq!(
            check(FrictionLaw::HazenWilliams { coefficient: 15.0 }),
            Err(FrictionError::HazenWilliams(15.0))
        );
        assert_eq!(
            check(FrictionLaw::Manning { n: 0.1 }),
            Err(FrictionError::Manning(0.1))
        );
        let rough = |metres| FrictionLaw::ColebrookWhite {
            roughness: m(metres),
        };
        assert_eq!(check(rough(-1e-6)), Err(FrictionError::Roughness(m(-1e-6))));
        assert!(matches!(
            check(rough(0.011)),
            Err(FrictionError::RelativeRoughness(_))
        ));
        assert!(check(rough(f64::NAN)).is_err());
        assert!(rough(0.0).check(m(0.0)).is_err());
        let back = rough(0.0).head_gradient(flow(-1.0), m(0.1), &water(), standard_gravity());
        assert!(matches!(back, Err(FrictionError::Velocity(_))));
    }

    #[test]
    fn still_water_loses_nothing() {
        for law in [
            FrictionLaw::ColebrookWhite { roughness: m(1e-4) },
            FrictionLaw::HazenWilliams { coefficient: 140.0 },
            FrictionLaw::Manning { n: 0.01 },
        ] {
            let friction = gradient(law, 0.0, 0.1);
            assert_eq!(friction.regime, Regime::Still);
            assert_eq!(friction.factor, None);
            assert!(friction.gradient.abs() < f64::MIN_POSITIVE);
            // Nor does a flow too small to square.
            let drop = gradient(law, 1e-310, 0.1);
            assert!(drop.gradient.abs() < f64::MIN_POSITIVE);
        }
    }

    #[test]
    fn hazen_williams_in_its_usual_short_form() {
        // h/L = 10.67 Q^1.852 / (C^1.852 D^4.87), as handbooks print it.
        let short =
            10.67 * math::pow(0.05, 1.852) / (math::pow(140.0, 1.852) * math::pow(0.2, 4.8704));
        let found = gradient(FrictionLaw::HazenWilliams { coefficient: 140.0 }, 0.05, 0.2).gradient;
        assert!((found / short - 1.0).abs() < 2e-3, "{found} {short}");
    }

    #[test]
    fn smoother_than_smooth_is_an_error() {
        let law = FrictionLaw::HazenWilliams { coefficient: 160.0 };
        let found = equivalent_roughness(&law, flow(0.002), m(0.1), &water(), standard_gravity());
        assert!(
            matches!(found, Err(FrictionError::SmootherThanSmooth { .. })),
            "{found:?}"
        );
        let slow = equivalent_roughness(&law, flow(1e-4), m(0.1), &water(), standard_gravity());
        assert!(matches!(slow, Err(FrictionError::NotTurbulent { .. })));
    }

    proptest! {
        #[test]
        fn conversions_there_and_back(q in 0.01..0.5_f64, bore in 0.1..0.8_f64, share in 1e-5..0.05_f64) {
            let (w, g) = (water(), standard_gravity());
            let rough = FrictionLaw::ColebrookWhite { roughness: m(share * bore) };
            let same = gradient(rough, q, bore).gradient;
            let coefficient = equivalent_hazen_williams(&rough, flow(q), m(bore), &w, g).unwrap();
            prop_assume!((HAZEN_WILLIAMS_RANGE.0..=HAZEN_WILLIAMS_RANGE.1).contains(&coefficient));
            let hazen = FrictionLaw::HazenWilliams { coefficient };
            prop_assert!((gradient(hazen, q, bore).gradient / same - 1.0).abs() < 1e-12);
            let back = equivalent_roughness(&hazen, flow(q), m(bore), &w, g).unwrap();
            prop_assert!((back.get::<meter>() / (share * bore) - 1.0).abs() < 1e-6);
            let n = equivalent_manning(&rough, flow(q), m(bore), &w, g).unwrap();
            prop_assume!((MANNING_RANGE.0..=MANNING_RANGE.1).contains(&n));
            let manning = FrictionLaw::Manning { n };
            prop_assert!((gradient(manning, q, bore).gradient / same - 1.0).abs() < 1e-12);
            let back = equivalent_roughness(&manning, flow(q), m(bore), &w, g).unwrap();
            prop_assert!((back.get::<meter>() / (share * bore) - 1.0).abs() < 1e-6);
        }

        #[test]
        fn every_law_loses_more_with_flow_and_less_with_bore(
            q in 0.002..0.5_f64, bore in 0.08..0.8_f64, pick in 0_usize..3,
        ) {
            let law = [
                FrictionLaw::ColebrookWhite { roughness: m(1e-4) },
                FrictionLaw::HazenWilliams { coefficient: 140.0 },
                FrictionLaw::Manning { n: 0.01 },
            ][pick];
            let here = gradient(law, q, bore).gradient;
            prop_assert!(gradient(law, q * 1.01, bore).gradient > here);
            prop_assert!(gradient(law, q, bore * 1.01).gradient < here);
        }
    }
}
