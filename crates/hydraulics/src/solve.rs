//! Bracketed, guaranteed root finding.
//!
//! [`Bracket::new`] proves the change of sign, so [`Bracket::solve`] cannot be
//! misused: it always ends, with a root inside the bracket, and says why it
//! stopped and how large the residual is.

/// When to stop looking for a root.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tolerance {
    /// Largest width of the final bracket, as a share of the root.
    pub relative: f64,
    /// Largest width of the final bracket, in the unit of the unknown; matters
    /// only for roots near zero.
    pub absolute: f64,
    /// Most evaluations allowed.
    pub evaluations: u32,
}

impl Default for Tolerance {
    /// Near machine precision: relative 4e-16, absolute 1e-300, 200
    /// evaluations (bisection alone needs about 60 for a bracket that spans a
    /// factor of two).
    fn default() -> Self {
        Self {
            relative: 4e-16,
            absolute: 1e-300,
            evaluations: 200,
        }
    }
}

/// Why the search ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[non_exhaustive]
pub enum Stop {
    /// The function is exactly zero at the root.
    Exact,
    /// The bracket is narrower than the tolerance.
    Narrow,
    /// The evaluations ran out: the root lies in the bracket, less closely.
    Evaluations,
    /// The function gave a value that is not finite: the root lies in the
    /// bracket, no nearer than the best point before.
    NotFinite,
    /// The answer has a closed form: nothing was searched.
    ClosedForm,
}

/// A root and how good it is.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Solution {
    /// The root, in the unit of the unknown.
    pub root: f64,
    /// Value of the function there.
    pub residual: f64,
    /// Number of function evaluations after the two of the bracket.
    pub iterations: u32,
    /// Why the search ended.
    pub stop: Stop,
}

/// Why there is no bracket.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum BracketError {
    /// The function has the same sign at both ends.
    NoSignChange {
        /// Lower end.
        low: f64,
        /// Value there.
        at_low: f64,
        /// Upper end.
        high: f64,
        /// Value there.
        at_high: f64,
    },
    /// An end, or the function there, is not a finite number.
    NotFinite {
        /// The end that failed.
        at: f64,
        /// Value there.
        value: f64,
    },
}

impl core::fmt::Display for BracketError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::NoSignChange {
                low,
                at_low,
                high,
                at_high,
            } => write!(
                f,
                "no change of sign between {low} (value {at_low}) and {high} (value {at_high})"
            ),
            Self::NotFinite { at, value } => write!(f, "not finite at {at}: {value}"),
        }
    }
}

impl core::error::Error for BracketError {}

/// Two points between which a continuous function changes sign.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bracket {
    low: f64,
    at_low: f64,
    high: f64,
    at_high: f64,
}

impl Bracket {
    /// Evaluates the function at both ends and proves the change of sign.
    ///
    /// # Errors
    /// [`BracketError::NoSignChange`] when both values have one sign,
    /// [`BracketError::NotFinite`] when an end or a value is not finite.
    pub fn new(
        low: f64,
        high: f64,
        function: &mut impl FnMut(f64) -> f64,
    ) -> Result<Self, BracketError> {
        let at_low = function(low);
        let at_high = function(high);
        for (at, value) in [(low, at_low), (high, at_high)] {
            if !at.is_finite() || !value.is_finite() {
                return Err(BracketError::NotFinite { at, value });
            }
        }
        if (at_low > 0.0 && at_high > 0.0) || (at_low < 0.0 && at_high < 0.0) {
            return Err(BracketError::NoSignChange {
                low,
                at_low,
                high,
                at_high,
            });
        }
        Ok(Self {
            low,
            at_low,
            high,
            at_high,
        })
    }

    /// Narrows the bracket until the tolerance is met.
    ///
    /// # Method
    /// Chandrupatla 1997 (Advances in Engineering Software 28, 145-149):
    /// inverse quadratic interpolation where the last three points promise it,
    /// bisection otherwise. The change of sign is an invariant, so the root
    /// never leaves the bracket. A value that is not finite ends the search
    /// ([`Stop::NotFinite`]).
    ///
    /// # Example
    /// ```
    /// use hydraulics::solve::{Bracket, Tolerance};
    /// let mut f = |x: f64| x * x - 2.0;
    /// let found = Bracket::new(1.0, 2.0, &mut f)?.solve(Tolerance::default(), &mut f);
    /// assert!((found.root - 2.0_f64.sqrt()).abs() < 1e-15);
    /// # Ok::<(), hydraulics::solve::BracketError>(())
    /// ```
    pub fn solve(self, tolerance: Tolerance, function: &mut impl FnMut(f64) -> f64) -> Solution {
        let (mut a, mut fa) = (self.high, self.at_high);
        let (mut b, mut fb) = (self.low, self.at_low);
        let mut share: f64 = 0.5;
        let mut iterations = 0;
        loop {
            let (root, residual) = if fa.abs() < fb.abs() {
                (a, fa)
            } else {
                (b, fb)
            };
            let done = |stop, iterations| Solution {
                root,
                residual,
                iterations,
                stop,
            };
            if residual.abs() <= 0.0 {
                return done(Stop::Exact, iterations);
            }
            let width = (b - a).abs();
            let allowed = tolerance.relative * root.abs() + tolerance.absolute;
            // Below two units in the last place nothing lies between.
            if width <= allowed.max(2.0 * f64::EPSILON * root.abs()) {
                return done(Stop::Narrow, iterations);
            }
            if iterations >= tolerance.evaluations {
                return done(Stop::Evaluations, iterations);
            }
            let least = (0.5 * allowed / width).min(0.5);
            let step = share.clamp(least, 1.0 - least);
            let x = a + step * (b - a);
            let fx = function(x);
            iterations += 1;
            if !fx.is_finite() {
                return done(Stop::NotFinite, iterations);
            }
            let (c, fc);
            if (fx > 0.0) == (fa > 0.0) {
                (c, fc) = (a, fa);
            } else {
                (c, fc) = (b, fb);
                (b, fb) = (a, fa);
            }
            (a, fa) = (x, fx);
            // Inverse quadratic interpolation, where it is monotone.
            let xi = (a - b) / (c - b);
            let phi = (fa - fb) / (fc - fb);
            share = if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
                fa / (fb - fa) * (fc / (fb - fc))
                    + (c - a) / (b - a) * (fa / (fc - fa)) * (fb / (fc - fb))
            } else {
                0.5
            };
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::math;
    use proptest::prelude::*;

    fn solve(low: f64, high: f64, mut f: impl FnMut(f64) -> f64) -> Solution {
        Bracket::new(low, high, &mut f)
            .expect("a change of sign")
            .solve(Tolerance::default(), &mut f)
    }

    #[test]
    fn no_sign_change_is_refused() {
        let found = Bracket::new(1.0, 2.0, &mut |x| x);
        assert!(matches!(found, Err(BracketError::NoSignChange { .. })));
        let found = Bracket::new(0.0, f64::INFINITY, &mut |x| x);
        assert!(matches!(found, Err(BracketError::NotFinite { .. })));
    }

    #[test]
    fn a_root_at_an_end_is_found_without_searching() {
        let found = solve(0.0, 1.0, |x| x);
        assert_eq!(found.stop, Stop::Exact);
        assert_eq!(found.iterations, 0);
        assert!(found.root.abs() < f64::MIN_POSITIVE);
    }

    #[test]
    fn hard_shapes_end_quickly() {
        // A triple root, a step, and a nearly flat power: the shapes that make
        // false position crawl.
        for (found, root) in [
            (solve(0.0, 3.0, |x| math::powi(x - 1.25, 3)), 1.25),
            (solve(0.0, 3.0, |x| if x < 1.25 { -1.0 } else { 1.0 }), 1.25),
            (solve(0.0, 3.0, |x| math::powi(x, 20) - 1.0), 1.0),
            (
                solve(-1.0, 30.0, |x| math::exp(-x) - 0.5),
                core::f64::consts::LN_2,
            ),
        ] {
            assert!(found.iterations < 130, "{found:?}");
            assert!((found.root - root).abs() < 1e-5, "{found:?}");
            assert_ne!(found.stop, Stop::Evaluations);
        }
    }

    #[test]
    fn a_value_that_is_not_finite_ends_the_search() {
        let found = solve(-1.0, 2.0, |x| if x.abs() < 0.9 { f64::NAN } else { x });
        assert_eq!(found.stop, Stop::NotFinite);
        assert!(found.root.is_finite() && found.residual.is_finite());
    }

    proptest! {
        #[test]
        fn finds_the_square_root(x in 1e-12..1e12_f64) {
            let found = solve(0.0, x + 1.0, |r| r * r - x);
            prop_assert!((found.root - x.sqrt()).abs() <= 1e-15 * x.sqrt());
            prop_assert!(found.iterations <= 100);
        }
    }
}
