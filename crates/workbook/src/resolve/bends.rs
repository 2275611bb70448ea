//! How the line turns at each station, and how the pipe is turned there.
//!
//! The turn in the vertical comes from the profile, that on the plan is typed;
//! the angle between the two legs in space is the true deflection. What joints
//! or flexing take up needs no bend piece; the rest is bends of the kind
//! chosen, unless one placed by hand stands at the station.

use crate::book::{BendKind, FittingKind, Id};
use crate::field::Field;
use crate::figure::{Figure, Gap};
use crate::resolve::parts::Stretch;
use crate::resolve::profile::{Profile, StationAt};
use crate::resolve::{Assumption, Reader};
use hydraulics::math;
use hydraulics::quantity::PipeLength;

/// A turn smaller than this is straight, degree: far below what is surveyed.
const STRAIGHT_DEG: f64 = 1e-6;

/// How the pipe is turned at a station.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Made {
    /// By joints or flexing, or there is no turn: no bend piece.
    Taken,
    /// By a smooth bend.
    Smooth {
        /// Radius over bore.
        radius: f64,
    },
    /// By a mitre bend.
    Mitre,
    /// By the fitting of this number, placed by hand.
    ByHand(Id),
}

/// The turn of the line at a station between two legs.
#[derive(Debug, Clone, PartialEq)]
pub struct Turn {
    /// The station.
    pub station: Id,
    /// Where it is.
    pub at: PipeLength,
    /// The stretch it belongs to: the one above, where it sits at a cut.
    pub stretch: Option<Id>,
    /// Slope of the leg above, degree below the horizontal.
    pub above_deg: f64,
    /// Slope of the leg below, degree below the horizontal.
    pub below_deg: f64,
    /// Turn on the plan, degree.
    pub plan_deg: Figure<f64>,
    /// True deflection, degree.
    pub deflection_deg: Figure<f64>,
    /// How it is made.
    pub made: Figure<Made>,
}

impl Turn {
    /// The turn in the vertical: above zero where the pipe steepens downhill,
    /// degree.
    #[must_use]
    pub fn vertical_deg(&self) -> f64 {
        self.below_deg - self.above_deg
    }

    /// Whether a bend piece from the survey is ordered here.
    #[must_use]
    pub fn is_piece(&self) -> bool {
        matches!(self.made, Ok(Made::Smooth { .. } | Made::Mitre))
    }
}

/// Direction of a leg in the vertical plane it lies in: its horizontal and its
/// downward part of 1.
fn direction(a: &StationAt, b: &StationAt) -> (f64, f64) {
    let along = (b.chainage - a.chainage).m();
    let plan = (b.horizontal - a.horizontal).m() / along;
    let down = (a.level - b.level).m() / along;
    (plan, down)
}

/// Angle between two legs in space, degree.
///
/// # Equation
/// cos t = cos v1 cos v2 cos h + sin v1 sin v2, with v the slopes of the legs
/// and h the turn on the plan: the scalar product of their directions. Taken
/// from the tangent, with the vector product, so that small turns keep their
/// digits.
fn between(above: (f64, f64), below: (f64, f64), plan_deg: f64) -> f64 {
    let (sin, cos) = math::sin_cos(plan_deg * math::PI / 180.0);
    let a = [above.0, 0.0, above.1];
    let b = [below.0 * cos, below.0 * sin, below.1];
    let dot = a[0] * b[0] + a[2] * b[2];
    let cross = [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ];
    let length = math::hypot(math::hypot(cross[0], cross[1]), cross[2]);
    math::atan2(length, dot) * 180.0 / math::PI
}

/// The turn at every station between two legs of the usable profile.
pub(crate) fn turns(r: &mut Reader<'_>, profile: &Profile, stretches: &[Stretch]) -> Vec<Turn> {
    let book = r.book;
    let mut by_hand: Vec<(Id, Id)> = book
        .line
        .fittings
        .iter()
        .filter(|f| matches!(f.kind, FittingKind::Bend | FittingKind::Mitre))
        .map(|f| (f.at_station, f.id))
        .collect();
    by_hand.sort_unstable();
    let mut turns = Vec::with_capacity(profile.usable.len());
    let mut stretch = 0;
    for (i, trio) in profile.usable.windows(3).enumerate() {
        let [a, b, c] = trio else { continue };
        let (above, below) = (direction(a, b), direction(b, c));
        let row = profile.rows.get(i + 1).map(|row| &book.line.stations[*row]);
        let plan_deg = row.map_or(Ok(0.0), |s| {
            r.of_station(s, Field::StationTurn(s.id))
                .map(|turn| turn.unwrap_or(0.0))
        });
        let deflection_deg = plan_deg.clone().map(|h| between(above, below, h));
        let hand = by_hand.partition_point(|(station, _)| *station < b.id);
        let hand = by_hand.get(hand).filter(|(station, _)| *station == b.id);
        let kind = row.and_then(|s| s.bend);
        let made = match hand {
            Some((_, fitting)) => Ok(Made::ByHand(*fitting)),
            None => made(r, &deflection_deg, kind),
        };
        // Stations and stretches both run downhill.
        while stretches
            .get(stretch)
            .is_some_and(|s| s.span.as_ref().is_ok_and(|span| span.to < b.chainage))
        {
            stretch += 1;
        }
        let holds = |s: &&Stretch| s.span.as_ref().is_ok_and(|span| span.holds(b.chainage));
        turns.push(Turn {
            station: b.id,
            at: b.chainage,
            stretch: stretches.iter().skip(stretch).find(holds).map(|s| s.id),
            above_deg: math::atan2(above.1, above.0) * 180.0 / math::PI,
            below_deg: math::atan2(below.1, below.0) * 180.0 / math::PI,
            plan_deg,
            deflection_deg,
            made,
        });
    }
    if turns.iter().any(Turn::is_piece) {
        r.assume(Assumption::BendsRatedAsPipe);
    }
    turns
}

fn made(
    r: &mut Reader<'_>,
    deflection: &Figure<f64>,
    chosen: Option<BendKind>,
) -> Result<Made, Gap> {
    let kind = chosen.unwrap_or(r.book.line.bend);
    if kind == BendKind::Joints {
        return Ok(Made::Taken);
    }
    let deflection = deflection.clone()?;
    if deflection < STRAIGHT_DEG {
        return Ok(Made::Taken);
    }
    // A bend asked for at this very station is made, however small.
    if chosen.is_none() && deflection <= r.needed(Field::JointDeflection)? {
        return Ok(Made::Taken);
    }
    Ok(match kind {
        BendKind::Mitre => Made::Mitre,
        _ => Made::Smooth {
            radius: r.needed(Field::BendRadius)?,
        },
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(slope: f64) -> (f64, f64) {
        let (sin, cos) = math::sin_cos(slope * math::PI / 180.0);
        (cos, sin)
    }

    #[test]
    fn turns_in_one_plane_are_what_they_are() {
        for (above, below, plan, expected) in [
            (0.0, 0.0, 30.0, 30.0),
            (20.0, 35.0, 0.0, 15.0),
            (-10.0, 25.0, 0.0, 35.0),
            (0.0, 90.0, 0.0, 90.0),
            // A vertical pipe is turned the same whichever way the plan goes.
            (0.0, 90.0, 70.0, 90.0),
            (90.0, 90.0, 45.0, 0.0),
            (45.0, -45.0, 180.0, 180.0),
        ] {
            let got = between(of(above), of(below), plan);
            assert!(
                (got - expected).abs() < 1e-9,
                "{above} {below} {plan}: {got}"
            );
        }
    }

    #[test]
    fn a_tiny_turn_keeps_its_digits() {
        let got = between(of(12.0), of(12.0 + 1e-7), 0.0);
        assert!((got - 1e-7).abs() < 1e-13, "{got}");
    }
}
