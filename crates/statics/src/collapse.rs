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
