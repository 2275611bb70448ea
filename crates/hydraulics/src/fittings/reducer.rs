//! Changes of bore.

use super::table::{Between, Entry, attested, lookup, rows};
use super::{
    Attested, FittingError, Loss, LossCoefficient, Reference, degrees_within, positive,
    ratio_within,
};
use crate::friction::DarcyFactor;
use crate::math;
use crate::quantity::{Angle, Length};

const RENNELS: &str =
    "Rennels and Hudson, Pipe Flow, 2012, as coded in the open library fluids 1.3.1";

/// Narrow over wide bore, after the check that it is so.
fn bore_ratio(wide: Length, narrow: Length) -> Result<f64, FittingError> {
    let ratio = positive(narrow)? / positive(wide)?;
    if ratio <= 1.0 {
        Ok(ratio)
    } else {
        Err(FittingError::NotNarrower { wide, narrow })
    }
}

/// Sudden contraction from a wider to a narrower bore.
///
/// # Equation
/// K = 0.0696 (1 - b^5) L^2 + (L - 1)^2 on the downstream velocity, with b the
/// ratio of bores and L = 1 + 0.622 (1 - 0.215 b^2 - 0.785 b^5) the jet's
/// contraction. Source: Rennels and Hudson 2012, equations 10.3 and 10.4. It
/// lies above Weisbach's older values ([`contraction_coefficient`]), on the
/// safe side.
///
/// # Errors
/// A bore that is not positive, or bores the wrong way round.
pub fn sudden_contraction(upstream: Length, downstream: Length) -> Result<Loss, FittingError> {
    let ratio = bore_ratio(upstream, downstream)?;
    let jet = 1.0 + 0.622 * jet_shape(ratio);
    let k = 0.0696 * (1.0 - math::powi(ratio, 5)) * jet * jet + (jet - 1.0) * (jet - 1.0);
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Downstream,
        attested: Attested::Seen,
        source: RENNELS,
    })
}

/// 1 - 0.215 b^2 - 0.785 b^5, zero for equal bores.
fn jet_shape(ratio: f64) -> f64 {
    // Written so that equal bores give an exact zero.
    let square = ratio * ratio;
    0.215 * (1.0 - square) + 0.785 * (1.0 - square * square * ratio)
}

/// Conical contraction with the given total angle.
///
/// # Equation
/// Rennels and Hudson 2012, equations 10.9 to 10.13, on the downstream velocity:
/// wall friction f (1 - b^4)/(8 sin(a/2)) and contraction
/// 0.0696 sin(a/2) (1 - b^5) L^2 + (L - 1)^2 with
/// L = 1 + 0.622 (a/180)^(4/5) (1 - 0.215 b^2 - 0.785 b^5).
///
/// # Errors
/// Bores as for [`sudden_contraction`]; an angle outside 5..=180 degrees.
pub fn gradual_contraction(
    upstream: Length,
    downstream: Length,
    total_angle: Angle,
    friction: DarcyFactor,
) -> Result<Loss, FittingError> {
    let ratio = bore_ratio(upstream, downstream)?;
    let degrees = degrees_within(total_angle, 5.0, 180.0)?;
    let sin = math::sin(degrees * math::PI / 360.0);
    let jet = 1.0 + 0.622 * math::pow(degrees / 180.0, 0.8) * jet_shape(ratio);
    let wall = friction.get() * (1.0 - math::powi(ratio, 4)) / (8.0 * sin);
    let k =
        wall + 0.0696 * sin * (1.0 - math::powi(ratio, 5)) * jet * jet + (jet - 1.0) * (jet - 1.0);
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Downstream,
        attested: Attested::Seen,
        source: RENNELS,
    })
}

/// Sudden expansion from a narrower to a wider bore.
///
/// # Equation
/// Borda-Carnot: K = (1 - (D1/D2)^2)^2 on the upstream velocity.
///
/// # Errors
/// A bore that is not positive, or bores the wrong way round.
pub fn sudden_expansion(upstream: Length, downstream: Length) -> Result<Loss, FittingError> {
    let ratio = bore_ratio(downstream, upstream)?;
    let k = 1.0 - ratio * ratio;
    Ok(Loss {
        k: LossCoefficient::new(k * k)?,
        reference: Reference::Upstream,
        attested: Attested::Seen,
        source: "Borda-Carnot (momentum balance, exact for uniform velocity)",
    })
}

/// Conical expansion with the given total angle.
///
/// # Equation
/// K = 3.5 tan(a/2)^1.22 (1 - (D1/D2)^2)^2 on the upstream velocity, after
/// Gibson; Hydraulic Institute, Engineering Data Book, 2nd edition 1990,
/// equation 3.B.4; the same form in Sanks, Table B-6.
///
/// # Valid for
/// Total angle 7.5 to 35 degrees. Beyond it use [`sudden_expansion`].
///
/// # Errors
/// Bores as for [`sudden_expansion`]; an angle outside 7.5..=35 degrees.
pub fn gradual_expansion(
    upstream: Length,
    downstream: Length,
    total_angle: Angle,
) -> Result<Loss, FittingError> {
    let ratio = bore_ratio(downstream, upstream)?;
    let degrees = degrees_within(total_angle, 7.5, 35.0)?;
    let sudden = 1.0 - ratio * ratio;
    let share = 3.5 * math::pow(math::tan(degrees * math::PI / 360.0), 1.22);
    Ok(Loss {
        k: LossCoefficient::new(share * sudden * sudden)?,
        reference: Reference::Upstream,
        attested: Attested::Seen,
        source: "Hydraulic Institute, Engineering Data Book, 2nd ed. 1990, eq. 3.B.4 (after Gibson)",
    })
}

/// Weisbach's contraction coefficient Cc of a sudden contraction, from the
/// ratio of areas (downstream over upstream); K = (1/Cc - 1)^2 on the
/// downstream velocity.
///
/// # Source
/// Table `data/weisbach_contraction.csv`, interpolated on straight lines.
///
/// # Errors
/// A ratio outside 0.1..=1.
pub fn contraction_coefficient(area_ratio: f64) -> Result<f64, FittingError> {
    let ratio = ratio_within(area_ratio, 0.1, 1.0)?;
    let entries: Vec<Entry> = rows(include_str!("../data/weisbach_contraction.csv"))
        .filter_map(|row| {
            Some(Entry {
                x: row.first()?.parse().ok()?,
                y: row.get(1)?.parse().ok()?,
                attested: attested(row.get(2)?),
            })
        })
        .collect();
    lookup(&entries, ratio, Between::Linear)
        .map(|(value, _)| value)
        .ok_or(FittingError::Ratio {
            ratio,
            low: 0.1,
            high: 1.0,
        })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::angle::degree;
    use uom::si::length::meter;

    fn m(value: f64) -> Length {
        Length::new::<meter>(value)
    }

    #[test]
    fn equal_bores_lose_nothing_and_wrong_ways_are_refused() {
        assert!(sudden_contraction(m(0.2), m(0.2)).unwrap().k.get() < 1e-300);
        assert!(sudden_expansion(m(0.2), m(0.2)).unwrap().k.get() < 1e-300);
        assert!(sudden_contraction(m(0.1), m(0.2)).is_err());
        assert!(sudden_expansion(m(0.2), m(0.1)).is_err());
        assert!(sudden_expansion(m(0.0), m(0.1)).is_err());
        assert!(gradual_expansion(m(0.1), m(0.2), Angle::new::<degree>(60.0)).is_err());
        assert!(gradual_expansion(m(0.1), m(0.2), Angle::new::<degree>(35.0)).is_ok());
    }

    #[test]
    fn a_cone_of_180_degrees_is_sudden() {
        let factor = DarcyFactor::new(1e-12).unwrap();
        let cone =
            gradual_contraction(m(0.2), m(0.1), Angle::new::<degree>(180.0), factor).unwrap();
        let sudden = sudden_contraction(m(0.2), m(0.1)).unwrap();
        assert!((cone.k.get() - sudden.k.get()).abs() < 1e-9);
    }

    #[test]
    fn weisbach_table_reads_whole() {
        for tenth in 1..=10 {
            let ratio = f64::from(tenth) / 10.0;
            let cc = contraction_coefficient(ratio).unwrap();
            assert!((0.6..=1.0).contains(&cc), "{ratio} {cc}");
        }
        assert!(contraction_coefficient(0.05).is_err());
    }

    proptest! {
        #[test]
        fn tighter_changes_lose_more(ratio in 0.1..0.98_f64) {
            let wide = m(1.0);
            let here = sudden_contraction(wide, m(ratio + 0.01)).unwrap().k;
            prop_assert!(sudden_contraction(wide, m(ratio)).unwrap().k > here);
            let here = sudden_expansion(m(ratio + 0.01), wide).unwrap().k;
            prop_assert!(sudden_expansion(m(ratio), wide).unwrap().k > here);
            // Gentler than sudden.
            let cone = Angle::new::<degree>(20.0);
            let gentle = gradual_expansion(m(ratio), wide, cone).unwrap().k;
            prop_assert!(gentle < sudden_expansion(m(ratio), wide).unwrap().k);
        }
    }
}
