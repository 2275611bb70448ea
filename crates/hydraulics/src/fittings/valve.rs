//! Valves part open.

use super::table::{Between, Entry, attested, lookup, rows};
use super::{FittingError, Loss, LossCoefficient, Reference, degrees_within, ratio_within};
use crate::quantity::Angle;

/// A valve and how far it is open.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum ValveOpening {
    /// Gate valve: share of its stroke that is open, 0.25 to 1.
    Gate {
        /// Open share of the stroke.
        open_share: f64,
    },
    /// Ball valve or plug cock: angle turned from fully open, 0 to 60 degrees.
    Ball {
        /// Angle from fully open.
        turned: Angle,
    },
    /// Butterfly valve: angle turned from fully open, 0 to 60 degrees.
    Butterfly {
        /// Angle from fully open.
        turned: Angle,
    },
}

/// Loss coefficient of a valve at an opening, on the velocity in its nominal
/// bore.
///
/// # Source
/// Table `data/valve_opening.csv`; between its openings on straight lines in
/// the logarithm of K. Makers' own curves differ by a factor of two: where a
/// valve throttles for long, use its maker's.
///
/// # Errors
/// An opening outside the table (nearly shut valves are not in it).
pub fn valve(opening: ValveOpening) -> Result<Loss, FittingError> {
    let (name, x) = match opening {
        ValveOpening::Gate { open_share } => ("gate", ratio_within(open_share, 0.25, 1.0)?),
        ValveOpening::Ball { turned } => ("ball", degrees_within(turned, 0.0, 60.0)?),
        ValveOpening::Butterfly { turned } => ("butterfly", degrees_within(turned, 0.0, 60.0)?),
    };
    let entries: Vec<Entry> = rows(include_str!("../data/valve_opening.csv"))
        .filter(|row| row.first() == Some(&name))
        .filter_map(|row| {
            Some(Entry {
                x: row.get(1)?.parse().ok()?,
                y: row.get(2)?.parse().ok()?,
                attested: attested(row.get(3)?),
            })
        })
        .collect();
    let (k, attested) = lookup(&entries, x, Between::Logarithmic).ok_or(FittingError::Ratio {
        ratio: x,
        low: entries.first().map_or(f64::NAN, |entry| entry.x),
        high: entries.last().map_or(f64::NAN, |entry| entry.x),
    })?;
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Own,
        attested,
        source: "trade table of part-open valves (after Weisbach), table page seen; open ball and butterfly: Sanks, Pumping Station Design, Table B-7",
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::angle::degree;

    #[test]
    fn ends_are_inside_and_beyond_is_refused() {
        let angle = Angle::new::<degree>;
        for opening in [
            ValveOpening::Gate { open_share: 1.0 },
            ValveOpening::Gate { open_share: 0.25 },
            ValveOpening::Ball { turned: angle(0.0) },
            ValveOpening::Ball {
                turned: angle(60.0),
            },
            ValveOpening::Butterfly { turned: angle(0.0) },
            ValveOpening::Butterfly {
                turned: angle(60.0),
            },
        ] {
            assert!(valve(opening).is_ok(), "{opening:?}");
        }
        assert!(valve(ValveOpening::Gate { open_share: 0.2 }).is_err());
        assert!(
            valve(ValveOpening::Gate {
                open_share: f64::NAN
            })
            .is_err()
        );
        assert!(
            valve(ValveOpening::Ball {
                turned: angle(61.0)
            })
            .is_err()
        );
        assert!(
            valve(ValveOpening::Butterfly {
                turned: angle(-1.0)
            })
            .is_err()
        );
    }

    proptest! {
        #[test]
        fn closing_loses_more(x in 0.0..1.0_f64) {
            let gate = |open_share| valve(ValveOpening::Gate { open_share }).unwrap().k;
            let share = 0.26 + 0.74 * x;
            prop_assert!(gate(share - 0.01) > gate(share));
            let turned = |degrees| Angle::new::<degree>(degrees);
            let ball = |degrees| valve(ValveOpening::Ball { turned: turned(degrees) }).unwrap().k;
            let disc = |degrees| valve(ValveOpening::Butterfly { turned: turned(degrees) }).unwrap().k;
            let degrees = 59.0 * x;
            prop_assert!(ball(degrees + 1.0) > ball(degrees));
            prop_assert!(disc(degrees + 1.0) > disc(degrees));
        }
    }
}
