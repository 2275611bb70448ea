//! From values to pixels and back, straight or logarithmic.

use hydraulics::math::{exp, ln};

/// One axis.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Scale {
    logarithmic: bool,
    /// The values at both ends; their logarithms where `logarithmic`.
    from: f64,
    to: f64,
    from_px: f64,
    to_px: f64,
}

impl Scale {
    /// A straight scale that puts `values.0` at `pixels.0` and `values.1` at
    /// `pixels.1`; either may run backwards. `None` when a number is not finite
    /// or both values are the same.
    #[must_use]
    pub fn linear(values: (f64, f64), pixels: (f64, f64)) -> Option<Scale> {
        let finite = [values.0, values.1, pixels.0, pixels.1]
            .iter()
            .all(|v| v.is_finite());
        let span = values.1 - values.0;
        (finite && span.is_finite() && span != 0.0).then_some(Scale {
            logarithmic: false,
            from: values.0,
            to: values.1,
            from_px: pixels.0,
            to_px: pixels.1,
        })
    }

    /// A logarithmic scale; `None` also when a value is not above zero.
    #[must_use]
    pub fn logarithmic(values: (f64, f64), pixels: (f64, f64)) -> Option<Scale> {
        if !(values.0 > 0.0 && values.1 > 0.0 && values.0.is_finite() && values.1.is_finite()) {
            return None;
        }
        let straight = Scale::linear((ln(values.0), ln(values.1)), pixels)?;
        Some(Scale {
            logarithmic: true,
            ..straight
        })
    }

    /// The pixel of a value; `None` when it has none (not finite, or not above
    /// zero on a logarithmic scale). Values outside the ends go outside.
    #[must_use]
    pub fn px(&self, value: f64) -> Option<f64> {
        let along = if self.logarithmic {
            if value > 0.0 && value.is_finite() {
                ln(value)
            } else {
                return None;
            }
        } else {
            value
        };
        let px = self.from_px
            + (along - self.from) / (self.to - self.from) * (self.to_px - self.from_px);
        px.is_finite().then_some(px)
    }

    /// The value at a pixel; `None` when the pixel is not finite, or so far out
    /// that the value is not.
    #[must_use]
    pub fn value(&self, px: f64) -> Option<f64> {
        let share = (px - self.from_px) / (self.to_px - self.from_px);
        let along = self.from + share * (self.to - self.from);
        let value = if self.logarithmic { exp(along) } else { along };
        value.is_finite().then_some(value)
    }

    /// The pixels at both ends.
    #[must_use]
    pub const fn pixels(&self) -> (f64, f64) {
        (self.from_px, self.to_px)
    }

    /// Pixels to one unit of value; of a straight scale only.
    #[must_use]
    pub fn px_per_unit(&self) -> f64 {
        ((self.to_px - self.from_px) / (self.to - self.from)).abs()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn ends_are_where_they_were_put() {
        let s = Scale::linear((20.0, 120.0), (200.0, 10.0)).unwrap();
        assert_eq!(s.px(20.0), Some(200.0));
        assert_eq!(s.px(120.0), Some(10.0));
        assert_eq!(s.px(70.0), Some(105.0));
        assert!((s.px_per_unit() - 1.9).abs() < 1e-12);
    }

    #[test]
    fn a_factor_is_a_distance_on_a_logarithmic_scale() {
        let s = Scale::logarithmic((1.0, 100.0), (0.0, 200.0)).unwrap();
        let px = |v: f64| s.px(v).unwrap();
        assert!((px(10.0) - 100.0).abs() < 1e-9);
        assert!(((px(4.0) - px(2.0)) - (px(2.0) - px(1.0))).abs() < 1e-9);
    }

    #[test]
    fn what_cannot_be_placed_is_not() {
        assert_eq!(Scale::linear((1.0, 1.0), (0.0, 1.0)), None);
        assert_eq!(Scale::linear((f64::NAN, 1.0), (0.0, 1.0)), None);
        assert_eq!(Scale::linear((-f64::MAX, f64::MAX), (0.0, 1.0)), None);
        assert_eq!(Scale::logarithmic((0.0, 1.0), (0.0, 1.0)), None);
        assert_eq!(Scale::logarithmic((-1.0, 1.0), (0.0, 1.0)), None);
        let s = Scale::logarithmic((1.0, 2.0), (0.0, 1.0)).unwrap();
        assert_eq!(s.px(0.0), None);
        assert_eq!(s.px(f64::INFINITY), None);
        assert_eq!(s.value(f64::NAN), None);
    }

    proptest! {
        #[test]
        fn there_and_back(
            from in 0.001_f64..1e4, span in 0.01_f64..1e4,
            a in -500.0_f64..500.0, b in 501.0_f64..2000.0, share in 0.0_f64..1.0,
            log in any::<bool>(),
        ) {
            let ends = (from, from + span);
            let s = if log { Scale::logarithmic(ends, (a, b)) } else { Scale::linear(ends, (a, b)) }.unwrap();
            let v = from + share * span;
            let back = s.value(s.px(v).unwrap()).unwrap();
            prop_assert!((back - v).abs() <= 1e-6 * v);
        }
    }
}
