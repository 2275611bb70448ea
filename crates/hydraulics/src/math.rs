//! The one place with transcendental functions.
//!
//! Platforms differ in the last place of `ln`, `exp` and `powf`; the `libm`
//! crate (pinned in the workspace) does not, because it is plain Rust compiled
//! the same everywhere. Everything in this house goes through here, and a
//! clippy rule keeps the platform's own functions out. `f64::sqrt`, `abs`,
//! `floor` and the arithmetic operators are exact by IEEE 754 and stay in use.

mod log;

pub use log::ln_positive_normal;
pub(crate) use log::{add_ln, coarse_ln};

/// Circle constant, re-exported so that callers need one import.
pub use core::f64::consts::PI;

/// Makes one-argument wrappers over `libm`.
macro_rules! unary {
    ($($(#[$doc:meta])* $name:ident => $libm:ident;)*) => {
        $($(#[$doc])* #[must_use] #[inline] pub fn $name(x: f64) -> f64 { libm::$libm(x) })*
    };
}

unary! {
    /// Natural logarithm.
    ln => log;
    /// Natural logarithm of 1 + x, accurate for small x.
    ln_1p => log1p;
    /// Logarithm to base 10.
    log10 => log10;
    /// Logarithm to base 2.
    log2 => log2;
    /// e to the power x.
    exp => exp;
    /// e to the power x, less 1, accurate for small x.
    exp_m1 => expm1;
    /// 10 to the power x.
    exp10 => exp10;
    /// Sine of an angle in radians.
    sin => sin;
    /// Cosine of an angle in radians.
    cos => cos;
    /// Tangent of an angle in radians.
    tan => tan;
    /// Arc sine in radians; x in -1..=1.
    asin => asin;
    /// Arc cosine in radians; x in -1..=1.
    acos => acos;
    /// Arc tangent in radians.
    atan => atan;
    /// Hyperbolic sine.
    sinh => sinh;
    /// Hyperbolic cosine.
    cosh => cosh;
    /// Hyperbolic tangent.
    tanh => tanh;
    /// Cube root.
    cbrt => cbrt;
}

/// `x` to the power `y`.
#[must_use]
#[inline]
pub fn pow(x: f64, y: f64) -> f64 {
    libm::pow(x, y)
}

/// `x` to a whole power by repeated squaring: only multiplications, so the
/// same bits everywhere; a few units in the last place for large `n`.
#[must_use]
#[inline]
pub fn powi(x: f64, n: i32) -> f64 {
    let mut left = n.unsigned_abs();
    let mut base = x;
    let mut product = 1.0;
    while left > 0 {
        if left & 1 == 1 {
            product *= base;
        }
        base *= base;
        left >>= 1;
    }
    if n < 0 { 1.0 / product } else { product }
}

/// Angle of the point (x, y) in radians, in -pi..=pi.
#[must_use]
#[inline]
pub fn atan2(y: f64, x: f64) -> f64 {
    libm::atan2(y, x)
}

/// Length of the vector (x, y).
#[must_use]
#[inline]
pub fn hypot(x: f64, y: f64) -> f64 {
    libm::hypot(x, y)
}

/// Sine and cosine of an angle in radians.
#[must_use]
#[inline]
pub fn sin_cos(x: f64) -> (f64, f64) {
    libm::sincos(x)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn whole_powers_agree_with_multiplication() {
        assert!((powi(1.7, 5) - 1.7 * 1.7 * 1.7 * 1.7 * 1.7).abs() < 1e-14);
        assert!((powi(2.0, -3) - 0.125).abs() < f64::EPSILON);
        assert!((powi(-3.0, 0) - 1.0).abs() < f64::EPSILON);
    }

    #[test]
    fn the_functions_are_the_ones_named() {
        assert!((ln(exp(1.25)) - 1.25).abs() < 1e-15);
        assert!((log10(1e7) - 7.0).abs() < 1e-15);
        assert!((exp10(-2.0) - 0.01).abs() < 1e-17);
        assert!((pow(10.0, 0.5) - 10.0_f64.sqrt()).abs() < 1e-15);
        assert!((asin(sin(0.3)) - 0.3).abs() < 1e-15);
        assert!((acos(cos(0.3)) - 0.3).abs() < 1e-15);
        assert!((atan(tan(0.3)) - 0.3).abs() < 1e-15);
        assert!((atan2(1.0, -1.0) - 0.75 * PI).abs() < 1e-15);
        assert!((cbrt(27.0) - 3.0).abs() < 1e-15);
        assert!((hypot(3.0, 4.0) - 5.0).abs() < 1e-15);
        assert!((cosh(0.5) - sinh(0.5) - exp(-0.5)).abs() < 1e-15);
        assert!((tanh(0.5) - sinh(0.5) / cosh(0.5)).abs() < 1e-15);
        let (s, c) = sin_cos(1.1);
        assert!((s * s + c * c - 1.0).abs() < 1e-15);
        assert!((ln_1p(1e-10) - 1e-10).abs() < 1e-19);
        assert!((exp_m1(1e-10) - 1e-10).abs() < 1e-19);
        assert!((log2(8.0) - 3.0).abs() < 1e-15);
    }
}
