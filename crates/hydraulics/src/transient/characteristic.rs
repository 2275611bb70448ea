//! Open share against stroke.

use super::error::TransientError;
use crate::nozzle::Needle;
use crate::quantity::Length;
use uom::si::length::meter;

/// How much of a nozzle or valve is open at a stroke: discharge coefficient
/// times area, over that at full stroke.
#[derive(Debug, Clone, PartialEq)]
pub enum Characteristic {
    /// Area falls with stroke in a straight line.
    Linear,
    /// A valve's own table: (stroke, open share), both from 0 to 1; straight
    /// between rows.
    Table(Vec<(f64, f64)>),
    /// A needle by its geometry ([`Needle::area`]); its coefficients are taken
    /// as constant.
    Needle {
        /// The needle.
        needle: Needle,
        /// Travel from shut to the full stroke of this nozzle. Beyond
        /// [`Needle::full_stroke`] the travel is dead.
        travel: Length,
    },
}

impl Characteristic {
    pub(super) fn check(&self) -> Result<(), TransientError> {
        match self {
            Self::Linear => Ok(()),
            Self::Table(rows) => check_table(rows),
            Self::Needle { needle, travel } => {
                let metres = travel.get::<meter>();
                let whole = needle.area(*travel).is_ok();
                if metres > 0.0 && whole {
                    Ok(())
                } else {
                    Err(TransientError::Characteristic { row: 0 })
                }
            }
        }
    }

    /// Open share at a stroke from 0 to 1.
    #[must_use]
    pub fn open_share(&self, stroke: f64) -> f64 {
        match self {
            Self::Linear => stroke,
            Self::Table(rows) => interpolate(rows, stroke),
            Self::Needle { needle, travel } => {
                let share = |part: f64| needle.open_share(*travel * part).unwrap_or(f64::NAN);
                share(stroke) / share(1.0)
            }
        }
    }
}

fn check_table(rows: &[(f64, f64)]) -> Result<(), TransientError> {
    let mut before: Option<(f64, f64)> = None;
    for (row, (stroke, share)) in rows.iter().enumerate() {
        let fits = match before {
            None => stroke.abs() <= 0.0 && share.abs() <= 0.0,
            Some((last, least)) => *stroke > last && *share >= least && *share <= 1.0,
        };
        if !fits {
            return Err(TransientError::Characteristic { row });
        }
        before = Some((*stroke, *share));
    }
    match before {
        Some((stroke, share)) if (stroke - 1.0).abs() <= 0.0 && (share - 1.0).abs() <= 0.0 => {
            Ok(())
        }
        _ => Err(TransientError::Characteristic {
            row: rows.len().saturating_sub(1),
        }),
    }
}

/// Straight between rows whose first numbers rise; the ends are held.
fn interpolate(rows: &[(f64, f64)], x: f64) -> f64 {
    let after = rows.partition_point(|row| row.0 < x);
    match (
        after.checked_sub(1).and_then(|i| rows.get(i)),
        rows.get(after),
    ) {
        (Some(a), Some(b)) => a.1 + (b.1 - a.1) * ((x - a.0) / (b.0 - a.0)),
        (None, Some(only)) | (Some(only), None) => only.1,
        (None, None) => f64::NAN,
    }
}
