//! A natural logarithm without tables or branches, so that a loop over a slice
//! vectorises (natively and in wasm simd128) and gives the same bits in both.

/// Upper part of ln 2: its last 32 bits are zero, so that k times it is exact
/// for every exponent k. From FreeBSD msun `e_log.c`.
const LN2_HIGH: f64 = f64::from_bits(0x3FE6_2E42_FEE0_0000);
/// ln 2 less [`LN2_HIGH`].
const LN2_LOW: f64 = f64::from_bits(0x3DEA_39EF_3579_3C76);

/// 2^52 + 2^51: adding a small whole number to its bits and subtracting it
/// again turns that number into an f64 without a conversion instruction
/// (which baseline x86-64 lacks for vectors of 64-bit integers).
const ROUNDER: f64 = 6_755_399_441_055_744.0;

/// Bits of the smallest mantissa kept: about sqrt(1/2), so that the reduced
/// argument lies in sqrt(1/2)..sqrt(2).
const HALF_ROOT_BITS: u64 = 0x3FE6_A09E_0000_0000;

/// Coefficients of R, lowest power first.
const LG: [f64; 7] = [
    0.6666666666666735,
    0.3999999999940942,
    0.2857142874366239,
    0.22222198432149784,
    0.1818357216161805,
    0.15313837699209373,
    0.14798198605116586,
];

/// The bits of an f64 below its exponent.
const FRACTION_BITS: u64 = (1 << 52) - 1;

/// Natural logarithm of a positive normal number, within one unit in the last
/// place. The method is that of FreeBSD msun `e_log.c`.
///
/// # Valid for
/// Positive, finite and not subnormal `x`. Anything else gives a meaningless
/// (but defined) number: callers check first.
#[must_use]
#[inline(always)]
#[expect(
    clippy::inline_always,
    reason = "the loop around it vectorises only when it is inlined"
)]
pub fn ln_positive_normal(x: f64) -> f64 {
    add_ln(0.0, x)
}

/// `start` + ln `x`, for a positive normal `x`: where `start` is near -ln `x`
/// the sum keeps the digits that rounding the logarithm first would lose.
///
/// # Equation
/// x = 2^k (1 + f); with s = f/(2 + f), ln(1 + f) = f - f^2/2 +
/// s (f^2/2 + R(s^2)), R the minimax polynomial of FreeBSD msun `e_log.c`
/// (Sun Microsystems, 1993), summed in a tree so that little waits on
/// anything else.
#[must_use]
#[inline(always)]
#[expect(
    clippy::inline_always,
    reason = "the loop around it vectorises only when it is inlined"
)]
pub(crate) fn add_ln(start: f64, x: f64) -> f64 {
    let shifted = x
        .to_bits()
        .wrapping_sub(HALF_ROOT_BITS)
        .wrapping_add(1023 << 52);
    let k = f64::from_bits(ROUNDER.to_bits().wrapping_add(shifted >> 52)) - (ROUNDER + 1023.0);
    let f = f64::from_bits((shifted & FRACTION_BITS).wrapping_add(HALF_ROOT_BITS)) - 1.0;
    let s = f / (2.0 + f);
    let z = s * s;
    let w = z * z;
    let ww = w * w;
    let even = (LG[1] + w * LG[3]) + ww * LG[5];
    let odd = (LG[0] + w * LG[2]) + ww * (LG[4] + w * LG[6]);
    let half_square = 0.5 * f * f;
    let large = ((start + k * LN2_HIGH) + f) - half_square;
    large + (s * (half_square + (w * even + z * odd)) + k * LN2_LOW)
}

/// 2^-40: what a unit of the upper bits, as read by [`coarse_ln`], is worth in the logarithm to base 2.
const UNIT: f64 = 1.0 / 1_099_511_627_776.0;

/// [`coarse_ln`]'s straight line: the value of its constant term in base 2,
/// with 0.043 to share the error between both signs.
const LINE_START: f64 = 4096.0 + 1023.0 - 0.043;

/// `scale` times ln `x` plus `offset`, to 0.03 `scale`: exponent and fraction
/// read off the bits as one number, which is a straight line between powers of
/// two. For starting values; two operations after the shift.
#[must_use]
#[inline(always)]
#[expect(clippy::inline_always, reason = "part of a vectorised loop")]
pub(crate) fn coarse_ln(x: f64, scale: f64, offset: f64) -> f64 {
    let upper = f64::from_bits((x.to_bits() >> 12) | 4_503_599_627_370_496.0_f64.to_bits());
    let per_unit = scale * core::f64::consts::LN_2;
    upper * (per_unit * UNIT) + (offset - per_unit * LINE_START)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn exact_points() {
        assert!(ln_positive_normal(1.0).abs() < f64::MIN_POSITIVE);
        assert!((ln_positive_normal(2.0) - core::f64::consts::LN_2).abs() < 1.2e-16);
        assert!((ln_positive_normal(10.0) - core::f64::consts::LN_10).abs() < 4.5e-16);
    }

    proptest! {
        #[test]
        fn the_coarse_one_is_near(exponent in -1000.0..1000.0_f64) {
            let x = libm::exp2(exponent);
            prop_assert!((coarse_ln(x, 2.0, 3.0) - 2.0 * libm::log(x) - 3.0).abs() < 0.061);
        }

        #[test]
        fn the_sum_keeps_what_rounding_would_lose(x in 1e-9..0.1_f64) {
            // exp of the sum corrects the start to within its own rounding.
            let start = -libm::log(x);
            prop_assert!(add_ln(start, x).abs() <= 2.5e-16 * start);
        }

        #[test]
        fn agrees_with_libm(exponent in -1022.0..1023.0_f64) {
            let x = libm::exp2(exponent);
            let reference = libm::log(x);
            prop_assert!((ln_positive_normal(x) - reference).abs() <= 2.3e-16 * reference.abs());
        }

        #[test]
        fn agrees_with_libm_near_one(x in 0.5..2.0_f64) {
            let reference = libm::log(x);
            prop_assert!((ln_positive_normal(x) - reference).abs() <= 2.3e-16 * reference.abs());
        }
    }
}
