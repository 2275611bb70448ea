//! Round ticks, in the unit the reader sees.

use hydraulics::math::{exp10, log10};

/// One tick.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tick {
    /// Where it stands, in the axis' own values.
    pub value: f64,
    /// What it reads, in the unit the reader sees.
    pub reads: f64,
    /// How many decimals tell it from its neighbours.
    pub decimals: usize,
}

/// Decimals needed so that multiples of `step` are told apart.
fn decimals_of(step: f64) -> usize {
    let mut decimals = 0;
    let mut s = step;
    while decimals < 9 && (s - s.round()).abs() > 1e-6 * s.abs() {
        s *= 10.0;
        decimals += 1;
    }
    decimals
}

/// The smallest of 1, 2, 2.5, 5, 10 times a power of ten that is at least `least`.
/// `least` must be above zero and finite.
#[must_use]
pub fn round_step(least: f64) -> f64 {
    let power = exp10(log10(least).floor());
    for m in [1.0, 2.0, 2.5, 5.0, 10.0] {
        // A hair of room, so that 0.1 + 0.2 style dust does not skip a step.
        if m * power >= least * (1.0 - 1e-9) {
            return m * power;
        }
    }
    10.0 * power
}

/// Straight ticks from `from` to `to`, at most `most` of them, round after
/// multiplying by `factor` (1 when the values are already what is read).
///
/// Empty when nothing can be told apart: ends not finite or the same, `most`
/// zero, or `factor` not above zero.
#[must_use]
pub fn linear_ticks(from: f64, to: f64, most: usize, factor: f64) -> Vec<Tick> {
    let (low, high) = if from <= to { (from, to) } else { (to, from) };
    let (low, high) = (low * factor, high * factor);
    let span = high - low;
    if most == 0 || factor.is_nan() || factor <= 0.0 || !(span > 0.0 && span.is_finite()) {
        return Vec::new();
    }
    // Too fine for the numbers themselves: 1e12 +- 1e-6.
    if span < 1e-9 * low.abs().max(high.abs()) {
        return Vec::new();
    }
    let mut step = round_step(span / most as f64);
    loop {
        let first = (low / step - 1e-9).ceil();
        let last = (high / step + 1e-9).floor();
        let count = last - first + 1.0;
        if count <= most as f64 {
            let decimals = decimals_of(step);
            let mut ticks = Vec::new();
            let mut k = first;
            while k <= last {
                // Adding zero turns -0 into 0.
                let reads = k * step + 0.0;
                ticks.push(Tick {
                    value: reads / factor,
                    reads,
                    decimals,
                });
                k += 1.0;
            }
            return ticks;
        }
        step = round_step(step * 1.01);
    }
}

/// Ticks for a logarithmic axis: the fullest of four sets of round numbers that
/// gives at most `most`; if even powers of ten are too many, every second one,
/// and so on. Empty when an end is not above zero.
#[must_use]
pub fn logarithmic_ticks(from: f64, to: f64, most: usize, factor: f64) -> Vec<Tick> {
    const SETS: [&[f64]; 4] = [
        &[
            1.0, 1.2, 1.4, 1.6, 1.8, 2.0, 2.5, 3.0, 3.5, 4.0, 4.5, 5.0, 6.0, 7.0, 8.0, 9.0,
        ],
        &[1.0, 1.5, 2.0, 3.0, 4.0, 5.0, 7.0],
        &[1.0, 2.0, 5.0],
        &[1.0],
    ];
    let (low, high) = if from <= to { (from, to) } else { (to, from) };
    let (low, high) = (low * factor, high * factor);
    if most == 0 || !(low > 0.0 && high.is_finite() && high > low) {
        return Vec::new();
    }
    let (first, last) = (log10(low).floor(), log10(high).ceil());
    let mut fewest = Vec::new();
    for set in SETS {
        let mut ticks = Vec::new();
        let mut power = first;
        while power <= last {
            let ten = exp10(power);
            for m in set {
                let reads = m * ten;
                if reads >= low * (1.0 - 1e-9) && reads <= high * (1.0 + 1e-9) {
                    ticks.push(Tick {
                        value: reads / factor,
                        reads,
                        decimals: decimals_of(reads),
                    });
                }
            }
            power += 1.0;
        }
        if ticks.len() <= most {
            if ticks.len() >= 2 {
                return ticks;
            }
            // One round number says nothing about a logarithmic axis.
            return linear_ticks(from, to, most, factor);
        }
        fewest = ticks;
    }
    let every = fewest.len().div_ceil(most);
    fewest.into_iter().step_by(every).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn reads(ticks: &[Tick]) -> Vec<f64> {
        ticks
            .iter()
            .map(|t| (t.reads * 1e6).round() / 1e6)
            .collect()
    }

    #[test]
    fn levels_tick_at_twenties() {
        assert_eq!(
            reads(&linear_ticks(14.0, 103.0, 5, 1.0)),
            [20.0, 40.0, 60.0, 80.0, 100.0]
        );
        assert_eq!(
            reads(&linear_ticks(103.0, 14.0, 5, 1.0)),
            [20.0, 40.0, 60.0, 80.0, 100.0]
        );
    }

    #[test]
    fn ticks_are_round_in_the_unit_read() {
        // Metres on the axis, feet on the label.
        let ticks = linear_ticks(0.0, 30.0, 5, 1.0 / 0.3048);
        assert_eq!(reads(&ticks), [0.0, 20.0, 40.0, 60.0, 80.0]);
        assert!((ticks[1].value - 6.096).abs() < 1e-12);
    }

    #[test]
    fn decimals_tell_neighbours_apart() {
        let ticks = linear_ticks(1.0, 1.9, 4, 1.0);
        assert_eq!(reads(&ticks), [1.0, 1.25, 1.5, 1.75]);
        assert!(ticks.iter().all(|t| t.decimals == 2));
        assert_eq!(linear_ticks(0.0, 40.0, 4, 1.0)[0].decimals, 0);
    }

    #[test]
    fn minus_nought_is_nought() {
        let ticks = linear_ticks(-1.0, 1.0, 3, 1.0);
        assert!(
            ticks
                .iter()
                .all(|t| t.reads != 0.0 || t.reads.is_sign_positive())
        );
    }

    #[test]
    fn shares_tick_at_one_two_five() {
        let ticks = logarithmic_ticks(0.009, 0.55, 7, 100.0);
        assert_eq!(reads(&ticks), [1.0, 2.0, 5.0, 10.0, 20.0, 50.0]);
        assert_eq!(ticks[0].decimals, 0);
    }

    #[test]
    fn a_narrow_logarithmic_axis_still_ticks() {
        assert!(logarithmic_ticks(101.0, 119.0, 6, 1.0).len() >= 2);
        assert!(logarithmic_ticks(1e-9, 1e9, 5, 1.0).len() <= 5);
    }

    #[test]
    fn nothing_to_tell_apart_is_no_tick() {
        assert!(linear_ticks(5.0, 5.0, 5, 1.0).is_empty());
        assert!(linear_ticks(f64::NAN, 5.0, 5, 1.0).is_empty());
        assert!(linear_ticks(0.0, f64::INFINITY, 5, 1.0).is_empty());
        assert!(linear_ticks(0.0, 1.0, 0, 1.0).is_empty());
        assert!(linear_ticks(0.0, 1.0, 5, 0.0).is_empty());
        assert!(logarithmic_ticks(0.0, 1.0, 5, 1.0).is_empty());
        assert!(logarithmic_ticks(2.0, 2.0, 5, 1.0).is_empty());
    }

    proptest! {
        #[test]
        fn ticks_lie_inside_evenly_and_never_too_many(
            from in -1e5_f64..1e5, span in 1e-2_f64..1e5, most in 2_usize..12,
        ) {
            let to = from + span;
            let ticks = linear_ticks(from, to, most, 1.0);
            prop_assert!(ticks.len() <= most);
            let room = 1e-6 * (span + from.abs());
            for t in &ticks {
                prop_assert!(t.value >= from - room && t.value <= to + room);
            }
            for three in ticks.windows(3) {
                let (a, b) = (three[1].value - three[0].value, three[2].value - three[1].value);
                prop_assert!((a - b).abs() <= room);
            }
        }

        #[test]
        fn logarithmic_ticks_lie_inside(from in 1e-4_f64..1e3, factor in 1.05_f64..1e4, most in 3_usize..12) {
            let to = from * factor;
            let ticks = logarithmic_ticks(from, to, most, 1.0);
            prop_assert!(ticks.len() <= most);
            for t in &ticks {
                prop_assert!(t.value >= from * 0.999_999 && t.value <= to * 1.000_001);
            }
            prop_assert!(ticks.windows(2).all(|w| w[0].value < w[1].value));
        }
    }
}
