//! Collapse of a free pipe under outside pressure (or vacuum inside).

use uom::si::f64::{Length, Pressure};
use uom::si::length::meter;
use uom::si::pressure::pascal;

use crate::check::{self, Input, WallError};

/// Greatest ovality [`free_ring`] takes: 10 %.
pub const GREATEST_OVALITY: f64 = 0.10;

/// Mean diameter over wall below which the ring is called thick.
pub const THIN_RING: f64 = 10.0;

/// A long free pipe, unstiffened and unsupported by soil.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FreeRing {
    /// Outside diameter.
    pub outside_diameter: Length,
    /// Wall that resists: the least wall, less corrosion, without lining.
    pub wall: Length,
    /// Modulus of elasticity: short term for a passing vacuum, long term for a
    /// lasting one.
    pub modulus: Pressure,
    /// Poisson ratio, 0 to 0.5. Where it is not known, 0 gives the least
    /// critical pressure and so is the careful choice.
    pub poisson: f64,
    /// Ovality (mean diameter less least diameter, over mean diameter), 0 to
    /// [`GREATEST_OVALITY`]; 0.02 is 2 %.
    pub ovality: f64,
}

/// What [`free_ring`] finds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Collapse {
    /// Outside less inside pressure at which the oval pipe gives way,
    /// `round * ovality_factor`. No safety factor is in it.
    pub critical: Pressure,
    /// The same for a truly round pipe.
    pub round: Pressure,
    /// What ovality leaves of it, above 0 up to 1.
    pub ovality_factor: f64,
    /// Hoop compression in the wall at `critical`, p D / (2 t): where it comes
    /// near yield, the wall gives way sooner than this elastic figure says.
    pub hoop_compression: Pressure,
    /// Mean diameter over wall. Below [`THIN_RING`] the thin-ring formula is
    /// outside its range: it then gives too much, though such walls stand
    /// many atmospheres.
    pub mean_diameter_over_wall: f64,
}

impl Collapse {
    /// Is the ring thin enough for the formula?
    #[must_use]
    pub fn is_thin(&self) -> bool {
        self.mean_diameter_over_wall >= THIN_RING
    }

    /// The critical pressure over a safety factor (at least 1).
    ///
    /// # Errors
    /// [`WallError::OutOfRange`] when the factor is below 1, or not finite.
    pub fn allowed(&self, safety_factor: f64) -> Result<Pressure, WallError> {
        let factor = check::between(Input::SafetyFactor, safety_factor, 1.0, f64::MAX)?;
        Ok(self.critical / factor)
    }
}

/// Critical outside pressure of a long free pipe:
/// p = 2 E / (1 - nu^2) (t / (D - t))^3, D being the **outside** diameter, so
/// that D - t is the diameter of the middle of the wall; times the share that
/// ovality leaves, ((1 - q) / (1 + q)^2)^3.
///
/// Sources: ring formula of Bresse, with the plate stiffness E/(1 - nu^2) for a
/// long tube (Timoshenko and Gere, Theory of Elastic Stability, article 7.5
/// (article number from memory); Roark, Formulas for Stress and Strain, Table
/// 35 case 19a: E / (4 (1 - nu^2)) (t / r)^3 with r the mean radius, which is
/// the same). Ovality: the reduction factor of ASTM F1216 appendix X1 (from
/// memory).
///
/// Valid for a thin ring ([`Collapse::is_thin`]), within the elastic range,
/// longer than several diameters between stiffeners.
///
/// # Errors
/// [`WallError`] when a value is not finite, not above zero, outside the range
/// given on its field, or the wall leaves no bore.
pub fn free_ring(ring: &FreeRing) -> Result<Collapse, WallError> {
    let (d, t) = check::tube(
        ring.outside_diameter.get::<meter>(),
        ring.wall.get::<meter>(),
    )?;
    let e = check::positive(Input::Modulus, ring.modulus.get::<pascal>())?;
    let nu = check::between(Input::Poisson, ring.poisson, 0.0, 0.5)?;
    let ovality = check::between(Input::Ovality, ring.ovality, 0.0, GREATEST_OVALITY)?;
    let mean = d - t;
    let slender = t / mean;
    let round = 2.0 * e / (1.0 - nu * nu) * (slender * slender * slender);
    let factor = ovality_factor(ovality);
    let critical = check::finite(Input::Modulus, round * factor)?;
    let hoop = check::finite(Input::Modulus, critical * (d / (2.0 * t)))?;
    Ok(Collapse {
        critical: Pressure::new::<pascal>(critical),
        round: Pressure::new::<pascal>(round),
        ovality_factor: factor,
        hoop_compression: Pressure::new::<pascal>(hoop),
        mean_diameter_over_wall: mean / t,
    })
}

fn ovality_factor(q: f64) -> f64 {
    let base = (1.0 - q) / ((1.0 + q) * (1.0 + q));
    base * base * base
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn ring(d: f64, t: f64, e: f64, nu: f64, ovality: f64) -> FreeRing {
        FreeRing {
            outside_diameter: Length::new::<meter>(d),
            wall: Length::new::<meter>(t),
            modulus: Pressure::new::<pascal>(e),
            poisson: nu,
            ovality,
        }
    }

    fn critical(ring: &FreeRing) -> f64 {
        free_ring(ring).unwrap().critical.get::<pascal>()
    }

    #[test]
    fn the_diameter_is_that_of_the_middle_of_the_wall() {
        // D 0.504 m outside, t 4 mm: the mean diameter is 0.5 m.
        let found = free_ring(&ring(0.504, 0.004, 206e9, 0.3, 0.0)).unwrap();
        let by_hand = 2.0 * 206e9 / 0.91 * (0.004_f64 / 0.5) * (0.004 / 0.5) * (0.004 / 0.5);
        assert!((found.critical.get::<pascal>() / by_hand - 1.0).abs() < 1e-12);
        assert!(found.is_thin());
        assert_eq!(found.critical, found.round);
        assert!(
            !free_ring(&ring(0.1, 0.015, 1e9, 0.45, 0.0))
                .unwrap()
                .is_thin()
        );
    }

    #[test]
    fn a_safety_factor_divides() {
        let found = free_ring(&ring(0.504, 0.004, 206e9, 0.3, 0.02)).unwrap();
        let allowed = found.allowed(2.0).unwrap();
        assert!((allowed.get::<pascal>() * 2.0 - found.critical.get::<pascal>()).abs() < 1e-6);
        assert!(found.allowed(0.99).is_err());
        assert!(found.allowed(f64::NAN).is_err());
    }

    #[test]
    fn impossible_rings_are_named() {
        for (bad, input) in [
            (ring(0.5, 0.004, 0.0, 0.3, 0.0), Input::Modulus),
            (ring(0.5, 0.004, 1e9, 0.51, 0.0), Input::Poisson),
            (ring(0.5, 0.004, 1e9, -0.1, 0.0), Input::Poisson),
            (ring(0.5, 0.004, 1e9, 0.3, 0.11), Input::Ovality),
            (ring(0.5, 0.0, 1e9, 0.3, 0.0), Input::Wall),
        ] {
            let Err(WallError::OutOfRange { input: named, .. }) = free_ring(&bad) else {
                panic!("{bad:?} should be refused");
            };
            assert_eq!(named, input);
        }
        assert!(matches!(
            free_ring(&ring(0.5, 0.25, 1e9, 0.3, 0.0)),
            Err(WallError::NoBore { .. })
        ));
        assert!(free_ring(&ring(f64::NAN, 0.004, 1e9, 0.3, 0.0)).is_err());
    }

    proptest! {
        #[test]
        fn laws(
            d in 0.02..5.0_f64, share in 0.002..0.2_f64, e in 1e7..3e11_f64,
            nu in 0.0..0.49_f64, q in 0.0..0.09_f64, k in 0.2..5.0_f64,
        ) {
            let base = critical(&ring(d, d * share, e, nu, q));
            let near = |a: f64, b: f64| (a / b - 1.0).abs() < 1e-9;
            // Only t/D counts; pressure goes with the modulus.
            prop_assert!(near(critical(&ring(d * k, d * k * share, e, nu, q)), base));
            prop_assert!(near(critical(&ring(d, d * share, e * k, nu, q)), base * k));
            // Thicker and stiffer sideways resist more; ovality resists less.
            prop_assert!(critical(&ring(d, d * share * 1.01, e, nu, q)) > base);
            prop_assert!(critical(&ring(d, d * share, e, nu + 0.01, q)) > base);
            prop_assert!(critical(&ring(d, d * share, e, nu, q + 0.01)) < base);
            prop_assert!(critical(&ring(d, d * share, e, 0.0, q)) <= base);
        }

        #[test]
        fn never_a_figure_that_is_not_finite(
            d in any::<f64>(), t in any::<f64>(), e in any::<f64>(), nu in any::<f64>(), q in any::<f64>(),
        ) {
            if let Ok(found) = free_ring(&ring(d, t, e, nu, q)) {
                prop_assert!(found.critical.get::<pascal>().is_finite());
                prop_assert!(found.hoop_compression.get::<pascal>().is_finite());
                prop_assert!(found.mean_diameter_over_wall.is_finite());
            }
        }
    }
}
