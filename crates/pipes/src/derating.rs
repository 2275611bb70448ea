//! Pressure allowed against wall temperature.

use uom::si::f64::ThermodynamicTemperature;
use uom::si::thermodynamic_temperature::kelvin;

use crate::{Attested, RatingError};

/// One point of a derating table.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DeratingPoint {
    /// Wall temperature.
    pub temperature: ThermodynamicTemperature,
    /// Share of the rated pressure allowed, above 0 up to 1.
    pub factor: f64,
    /// Whether this point was seen.
    pub attested: Attested,
}

/// A derating table: factor 1 up to the first point, straight lines between
/// points, an error above the last. Temperatures rise and factors never do.
#[derive(Debug, Clone, PartialEq)]
pub struct Derating {
    /// The points, by rising temperature.
    pub points: Vec<DeratingPoint>,
    /// The rule, by name, with its source.
    pub source: String,
}

impl Derating {
    /// Index of the first point out of order: temperatures must rise, factors
    /// must not, and lie above 0 up to 1.
    #[must_use]
    pub fn disorder(&self) -> Option<usize> {
        let mut last: Option<&DeratingPoint> = None;
        for (index, point) in self.points.iter().enumerate() {
            let possible = point.factor > 0.0 && point.factor <= 1.0;
            let ordered = last.is_none_or(|last| {
                point.temperature.get::<kelvin>() > last.temperature.get::<kelvin>()
                    && point.factor <= last.factor
            });
            if !possible || !ordered {
                return Some(index);
            }
            last = Some(point);
        }
        None
    }

    /// The factor at a wall temperature, and whether the points it rests on
    /// were seen.
    ///
    /// # Errors
    /// [`RatingError::TooHot`] above the last point, [`RatingError::Temperature`]
    /// when the temperature is not a finite number above 0 K,
    /// [`RatingError::NoDerating`] when the table is empty.
    pub fn factor(&self, wall: ThermodynamicTemperature) -> Result<(f64, Attested), RatingError> {
        let at = wall.get::<kelvin>();
        if !at.is_finite() || at <= 0.0 {
            return Err(RatingError::Temperature { kelvin: at });
        }
        let (Some(first), Some(last)) = (self.points.first(), self.points.last()) else {
            return Err(RatingError::NoDerating);
        };
        if at <= first.temperature.get::<kelvin>() {
            return Ok((1.0, first.attested));
        }
        for pair in self.points.windows(2) {
            let (low, high) = (&pair[0], &pair[1]);
            let (from, to) = (
                low.temperature.get::<kelvin>(),
                high.temperature.get::<kelvin>(),
            );
            if at <= to {
                let share = (at - from) / (to - from);
                let factor = low.factor + share * (high.factor - low.factor);
                return Ok((factor, low.attested.and(high.attested)));
            }
        }
        Err(RatingError::TooHot {
            wall,
            highest: last.temperature,
        })
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;

    use super::*;
    use crate::catalogue;

    fn celsius(value: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(value)
    }

    fn rule() -> Derating {
        let point = |t, factor, attested| DeratingPoint {
            temperature: celsius(t),
            factor,
            attested,
        };
        Derating {
            points: vec![
                point(20.0, 1.0, Attested::Seen),
                point(30.0, 0.8, Attested::Seen),
                point(40.0, 0.4, Attested::FromMemory),
            ],
            source: "invented".to_owned(),
        }
    }

    #[test]
    fn lines_between_points_and_marks_with_them() {
        let rule = rule();
        let at = |t: f64| rule.factor(celsius(t)).unwrap();
        for (t, factor, attested) in [
            (-10.0, 1.0, Attested::Seen),
            (20.0, 1.0, Attested::Seen),
            (25.0, 0.9, Attested::Seen),
            (30.0, 0.8, Attested::Seen),
            (35.0, 0.6, Attested::FromMemory),
            (40.0, 0.4, Attested::FromMemory),
        ] {
            assert!((at(t).0 - factor).abs() < 1e-12, "{t}");
            assert_eq!(at(t).1, attested, "{t}");
        }
    }

    #[test]
    fn too_hot_no_temperature_and_no_rule_are_errors() {
        let rule = rule();
        let hot = rule.factor(celsius(40.01));
        assert!(matches!(hot, Err(RatingError::TooHot { .. })));
        for k in [f64::NAN, f64::INFINITY, 0.0, -5.0] {
            let given = ThermodynamicTemperature::new::<kelvin>(k);
            assert!(
                matches!(rule.factor(given), Err(RatingError::Temperature { .. })),
                "{k}"
            );
        }
        let empty = Derating {
            points: Vec::new(),
            source: String::new(),
        };
        assert_eq!(empty.factor(celsius(20.0)), Err(RatingError::NoDerating));
    }

    proptest! {
        #[test]
        fn never_rises_with_temperature(a in -20.0..70.0_f64, b in -20.0..70.0_f64, which in 0..10_000_usize) {
            let pipes = &catalogue().pipes;
            let derating = &pipes[which % pipes.len()].derating;
            let (low, high) = (celsius(a.min(b)), celsius(a.max(b)));
            match (derating.factor(low), derating.factor(high)) {
                (Ok((cold, _)), Ok((warm, _))) => prop_assert!(warm <= cold && warm > 0.0 && cold <= 1.0),
                (Err(_), Ok(_)) => prop_assert!(false, "allowed warm but not cold"),
                _ => {}
            }
        }
    }
}
