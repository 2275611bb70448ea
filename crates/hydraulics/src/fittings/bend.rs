//! Bends.

use super::table::{Between, Entry, attested, lookup, rows};
use super::{
    Attested, FittingError, Loss, LossCoefficient, Reference, degrees_within, ratio_within,
};
use crate::friction::DarcyFactor;
use crate::math;
use crate::quantity::Angle;
use std::sync::LazyLock;

const HYDRAULIC_INSTITUTE: &str =
    "Hydraulic Institute, Engineering Data Book, 2nd ed. 1990, Table 33 (Re about 2.25e5)";

/// Smooth bend: a curved piece of constant bore.
///
/// # Equation
/// K = f a r + (0.10 + 2.4 f) sin(a/2) + 6.6 f (sqrt(sin(a/2)) + sin(a/2)) /
/// r^(4 a/pi), with a the angle in radians, r the radius of the bend's axis
/// over the bore and f the Darcy factor of the pipe. Source: Rennels and
/// Hudson, Pipe Flow, 2012, equation 15.8. The friction of the bend's own
/// length is in it.
///
/// # Valid for
/// Angle from 0 to 180 degrees, radius 0.5 to 20 bores. Against a second
/// handbook (Miller 1990) it is up to 2.5 times as much at small angles, on the
/// safe side; for a close return bend it is less (0.28 against 0.4 at 1.4
/// bores): use the fixed fitting `bend-180-return` there.
///
/// # Errors
/// An angle or radius outside that range.
pub fn smooth_bend(
    angle: Angle,
    radius_over_bore: f64,
    friction: DarcyFactor,
) -> Result<Loss, FittingError> {
    let radians = degrees_within(angle, 0.0, 180.0)? * math::PI / 180.0;
    let radius = ratio_within(radius_over_bore, 0.5, 20.0)?;
    let f = friction.get();
    let sin = math::sin(radians / 2.0);
    let k = f * radians * radius
        + (0.10 + 2.4 * f) * sin
        + 6.6 * f * (sin.sqrt() + sin) / math::pow(radius, 4.0 * radians / math::PI);
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Own,
        attested: Attested::Seen,
        source: "Rennels and Hudson, Pipe Flow, 2012, eq. 15.8, as coded in the open library fluids 1.3.1",
    })
}

/// Wall of a mitre bend.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum MitreWall {
    /// Smooth wall.
    Smooth,
    /// Rough wall, relative roughness 0.0022.
    Rough,
}

// Read once: a line may turn at hundreds of stations.
static SMOOTH_MITRES: LazyLock<Vec<Entry>> = LazyLock::new(|| single_mitres(1, 2));
static ROUGH_MITRES: LazyLock<Vec<Entry>> = LazyLock::new(|| single_mitres(3, 4));

/// Angles and coefficients of one wall, from the table's columns.
fn single_mitres(value_column: usize, attested_column: usize) -> Vec<Entry> {
    rows(include_str!("../data/mitre_single.csv"))
        .filter_map(|row| {
            Some(Entry {
                x: row.first()?.parse().ok()?,
                y: row.get(value_column)?.parse().ok()?,
                attested: attested(row.get(attested_column)?),
            })
        })
        .collect()
}

/// Single mitre bend: two straight pieces cut at an angle.
///
/// # Source
/// Table `data/mitre_single.csv`: Hydraulic Institute, Engineering Data Book,
/// 2nd edition 1990, Table 33; between its angles on straight lines, from 0 at
/// no angle. Rows that were not seen are marked in the table.
///
/// # Valid for
/// 0 to 90 degrees, Reynolds number about 2.25e5.
///
/// # Errors
/// An angle outside 0..=90 degrees.
pub fn mitre_bend(angle: Angle, wall: MitreWall) -> Result<Loss, FittingError> {
    let degrees = degrees_within(angle, 0.0, 90.0)?;
    let entries: &[Entry] = match wall {
        MitreWall::Smooth => &SMOOTH_MITRES,
        MitreWall::Rough => &ROUGH_MITRES,
    };
    let (k, attested) = lookup(entries, degrees, Between::Linear).ok_or(FittingError::Angle {
        angle,
        low: 0.0,
        high: 90.0,
    })?;
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Own,
        attested,
        source: HYDRAULIC_INSTITUTE,
    })
}

/// Compound mitre bend of 90 degrees: two cuts of 45 degrees, or three of 30,
/// with straight pieces between of the given length over bore (measured on the
/// axis).
///
/// # Source
/// Table `data/mitre_compound.csv`: Hydraulic Institute, Engineering Data
/// Book, 2nd edition 1990, Table 33; on straight lines between its spacings.
///
/// # Errors
/// [`FittingError::Ratio`] when the number of cuts is not 2 or 3, or the
/// spacing lies outside the table (0.71 to 6.28 bores for two cuts, 1.23 to
/// 6.1 for three).
pub fn compound_mitre_bend(
    cuts: u8,
    spacing_over_bore: f64,
    wall: MitreWall,
) -> Result<Loss, FittingError> {
    let value_column = match wall {
        MitreWall::Smooth => 2,
        MitreWall::Rough => 3,
    };
    let entries: Vec<Entry> = rows(include_str!("../data/mitre_compound.csv"))
        .filter_map(|row| {
            let of: u8 = row.first()?.parse().ok()?;
            if of != cuts {
                return None;
            }
            Some(Entry {
                x: row.get(1)?.parse().ok()?,
                y: row.get(value_column)?.parse().ok()?,
                attested: attested(row.get(4)?),
            })
        })
        .collect();
    let (Some(first), Some(last)) = (entries.first(), entries.last()) else {
        return Err(FittingError::Ratio {
            ratio: f64::from(cuts),
            low: 2.0,
            high: 3.0,
        });
    };
    let spacing = ratio_within(spacing_over_bore, first.x, last.x)?;
    let (k, attested) = lookup(&entries, spacing, Between::Linear).ok_or(FittingError::Ratio {
        ratio: spacing,
        low: first.x,
        high: last.x,
    })?;
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Own,
        attested,
        source: HYDRAULIC_INSTITUTE,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::angle::degree;

    fn deg(value: f64) -> Angle {
        Angle::new::<degree>(value)
    }

    #[test]
    fn no_bend_loses_nothing() {
        let f = DarcyFactor::new(0.02).unwrap();
        assert!(smooth_bend(deg(0.0), 1.5, f).unwrap().k.get() < 1e-300);
        assert!(mitre_bend(deg(0.0), MitreWall::Smooth).unwrap().k.get() < 1e-300);
    }

    #[test]
    fn outside_the_tables_is_refused() {
        let f = DarcyFactor::new(0.02).unwrap();
        assert!(smooth_bend(deg(181.0), 1.5, f).is_err());
        assert!(smooth_bend(deg(90.0), 0.4, f).is_err());
        assert!(mitre_bend(deg(91.0), MitreWall::Rough).is_err());
        assert!(compound_mitre_bend(4, 1.5, MitreWall::Smooth).is_err());
        assert!(compound_mitre_bend(2, 0.7, MitreWall::Smooth).is_err());
    }

    #[test]
    fn more_cuts_lose_less() {
        let single = mitre_bend(deg(90.0), MitreWall::Smooth).unwrap().k;
        let double = compound_mitre_bend(2, 1.86, MitreWall::Smooth).unwrap().k;
        let triple = compound_mitre_bend(3, 1.7, MitreWall::Smooth).unwrap().k;
        assert!(single > double && double > triple);
    }

    #[test]
    fn memory_rows_are_marked() {
        assert_eq!(
            mitre_bend(deg(90.0), MitreWall::Smooth).unwrap().attested,
            Attested::FromMemory
        );
        assert_eq!(
            mitre_bend(deg(22.5), MitreWall::Rough).unwrap().attested,
            Attested::Seen
        );
    }

    proptest! {
        #[test]
        fn sharper_mitres_lose_more(angle in 0.0..89.0_f64) {
            for wall in [MitreWall::Smooth, MitreWall::Rough] {
                let here = mitre_bend(deg(angle), wall).unwrap().k;
                prop_assert!(mitre_bend(deg(angle + 1.0), wall).unwrap().k > here);
            }
            let smooth = mitre_bend(deg(angle), MitreWall::Smooth).unwrap().k;
            prop_assert!(mitre_bend(deg(angle), MitreWall::Rough).unwrap().k >= smooth);
        }

        #[test]
        fn longer_bends_lose_more(angle in 1.0..170.0_f64, f in 0.008..0.05_f64) {
            let f = DarcyFactor::new(f).unwrap();
            let here = smooth_bend(deg(angle), 1.0, f).unwrap().k;
            prop_assert!(smooth_bend(deg(angle + 5.0), 1.0, f).unwrap().k > here);
        }
    }
}
