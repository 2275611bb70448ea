//! Colebrook-White to machine precision.

use super::factor::{DarcyFactor, FrictionError, LAMINAR_LIMIT, RelativeRoughness, ReynoldsNumber};
use crate::math::ln_positive_normal;

/// ln(10) / 2: with F = 1/(a sqrt f) and a = 2/ln 10 the equation becomes
/// F + ln(b + p F) = 0.
const HALF_LN_10: f64 = 1.151_292_546_497_022_8;
/// 3.7 of the equation, as used throughout.
const ROUGH: f64 = 3.7;
/// 2.51 * 2 / ln 10.
const SMOOTH: f64 = 2.180_158_299_154_324;

/// Darcy factor of turbulent flow by Colebrook-White.
///
/// # Equation
/// 1/sqrt f = -2 log10( (eps/D)/3.7 + 2.51/(Re sqrt f) ). Source: Colebrook,
/// Journal of the Institution of Civil Engineers 11 (1939), 133-156. Papers
/// mix 3.7 and 3.71: this is 3.7 and 2.51.
///
/// # Valid for
/// Turbulent flow: Re from 2300 (the equation itself is meant for 4000 up; the
/// rest is its mathematical value) to 1e9, eps/D 0 to 0.1. Solved, not
/// approximated: the relative error is a few units in the last place.
///
/// # Errors
/// [`FrictionError::NotTurbulent`] below Re 2300.
///
/// # Example
/// ```
/// use hydraulics::friction::{colebrook_white, RelativeRoughness, ReynoldsNumber};
/// let f = colebrook_white(ReynoldsNumber::new(4000.0)?, RelativeRoughness::new(1e-3)?)?;
/// assert!((f.get() / 0.040_910_389_862_846_13 - 1.0).abs() < 1e-15);
/// # Ok::<(), hydraulics::friction::FrictionError>(())
/// ```
pub fn colebrook_white(
    reynolds: ReynoldsNumber,
    roughness: RelativeRoughness,
) -> Result<DarcyFactor, FrictionError> {
    if reynolds.get() < LAMINAR_LIMIT {
        return Err(FrictionError::NotTurbulent {
            reynolds: reynolds.get(),
        });
    }
    Ok(DarcyFactor::computed(colebrook_factor(
        reynolds.get(),
        roughness.get(),
    )))
}

/// Kernel of [`colebrook_white`] on plain numbers, without checks: Reynolds
/// number 2300..=1e9, relative roughness 0..=0.1.
///
/// # Method
/// A start F0 from a short fixed-point form with a cheap logarithm, one full
/// logarithm for the residual r = F0 + ln(b + p F0), then the series for the
/// remaining step d of r + d + ln(1 + u d) = 0, u = p/(b + p F0), reverted to
/// the fourth order. No branch, so that a loop over it vectorises.
#[must_use]
#[inline(always)]
#[expect(
    clippy::inline_always,
    reason = "the loop around it vectorises only when it is inlined"
)]
pub fn colebrook_factor(reynolds: f64, relative_roughness: f64) -> f64 {
    let b = relative_roughness / ROUGH;
    let p = SMOOTH / reynolds;
    let rough_start = -ln_positive_normal(b + p * 7.0);
    let f0 = -ln_positive_normal(b + p * rough_start);
    let argument = b + p * f0;
    let residual = f0 + ln_positive_normal(argument);
    let u = p / argument;
    let slope = 1.0 / (1.0 + u);
    let n = -residual * slope;
    let c2 = 0.5 * u * u * slope;
    let c3 = -u * u * u * slope / 3.0;
    let step = n + n * n * (c2 + n * (2.0 * c2 * c2 + c3));
    let root = f0 + step;
    let w = HALF_LN_10 / root;
    w * w
}

/// Colebrook-White over slices: `factors[i]` from `reynolds[i]` and
/// `relative_roughness[i]`, as far as the shortest of the three reaches. The
/// same bits as [`colebrook_factor`], vectorised by the compiler. No checks.
pub fn colebrook_factors(reynolds: &[f64], relative_roughness: &[f64], factors: &mut [f64]) {
    for ((out, re), rr) in factors.iter_mut().zip(reynolds).zip(relative_roughness) {
        *out = colebrook_factor(*re, *rr);
    }
}
