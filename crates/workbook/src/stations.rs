//! What is found at each station: heads, pressures, and the share of the class
//! that is used there.

use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap};
use crate::operation::Operation;
use crate::resolve::Resolved;
use crate::steady::Steady;
use crate::walls::Walls;
use hydraulics::constants::standard_gravity;
use hydraulics::line::Grade;
use hydraulics::quantity::{GaugePressure, Head, Level, PipeLength};
use uom::si::f64::Pressure;

/// The running line at one station.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Running {
    /// Level of the grade line.
    pub grade: Level,
    /// Gauge pressure at the pipe's axis, below what sits there.
    pub pressure: GaugePressure,
}

/// What is found at one station.
#[derive(Debug, Clone, PartialEq)]
pub struct StationFinding {
    /// The station.
    pub station: Id,
    /// Along the pipe.
    pub at: PipeLength,
    /// Level of the pipe's axis.
    pub level: Level,
    /// Highest forebay level above the axis.
    pub static_head: Figure<Head>,
    /// The same as pressure.
    pub standing: Figure<GaugePressure>,
    /// At the design flow, all jets open, from the normal forebay level.
    pub running: Figure<Running>,
    /// At each set of open jets, in the order of [`Operation::sets`].
    pub sets: Figure<Vec<Running>>,
    /// What the pipe may bear at its warmest wall; at a cut, the weaker of the
    /// two.
    pub allowed: Figure<Pressure>,
    /// Standing pressure over that.
    pub share: Figure<f64>,
}

/// The running line at each surveyed point of a grade line, below what loses
/// head there.
pub(crate) fn at_points(grade: &Grade) -> Vec<Running> {
    let mut points: Vec<Running> = Vec::new();
    for node in &grade.nodes {
        let Some(point) = node.point else { continue };
        let running = Running {
            grade: node.grade,
            pressure: node.pressure,
        };
        // Points come in their order, some more than once.
        points.truncate(point);
        points.push(running);
    }
    points
}

/// What is found at each usable station.
#[must_use]
pub fn stations(
    found: &Resolved,
    steady: &Steady,
    operation: &Operation,
    walls: &Walls,
) -> Vec<StationFinding> {
    let running = steady.grade.clone_gap().map(at_points);
    let allowed = allowed(found, walls);
    found
        .profile
        .usable
        .iter()
        .zip(allowed)
        .enumerate()
        .map(|(i, (station, allowed))| {
            let static_head = found
                .forebay
                .highest
                .clone()
                .map(|highest| highest - station.level);
            let standing = static_head.clone().and_then(|head| {
                let density = found.cold_water.clone()?.density();
                Ok(head.pressure(density, standard_gravity()))
            });
            let share = standing.clone().and_then(|standing| {
                let allowed = GaugePressure::new(allowed.clone()?);
                Ok(standing.pa() / allowed.pa())
            });
            StationFinding {
                station: station.id,
                at: station.chainage,
                level: station.level,
                running: running
                    .clone_gap()
                    .and_then(|points| point(found, points, i)),
                sets: operation.sets.clone_gap().and_then(|sets| {
                    sets.iter()
                        .map(|set| point(found, &set.stations, i))
                        .collect()
                }),
                static_head,
                standing,
                allowed,
                share,
            }
        })
        .collect()
}

fn point(found: &Resolved, points: &[Running], place: usize) -> Figure<Running> {
    points.get(place).copied().ok_or_else(|| {
        let broken = found.profile.broken.clone();
        broken.unwrap_or(Gap::needs(crate::field::Field::StationLevel(1)))
    })
}

/// What the pipe may bear at each usable station.
fn allowed(found: &Resolved, walls: &Walls) -> Vec<Figure<Pressure>> {
    // A stretch whose place is not known may be anywhere.
    let lost = found.stretches.iter().find_map(|s| s.span.clone().err());
    let mut first = 0;
    found
        .profile
        .usable
        .iter()
        .map(|station| {
            if let Some(gap) = &lost {
                return Err(gap.clone());
            }
            let at = station.chainage;
            let spans = |i: usize| found.stretches.get(i).and_then(|s| s.span.as_ref().ok());
            while spans(first).is_some_and(|span| span.to < at) {
                first += 1;
            }
            let here = (first..found.stretches.len())
                .take_while(|i| spans(*i).is_some_and(|span| span.holds(at)));
            let mut least: Figure<Pressure> = Err(Gap::Unsettled(crate::figure::Lack::Pipe(1)));
            for (nth, i) in here.enumerate() {
                let bears = walls
                    .stretches
                    .get(i)
                    .map_or(Err(Gap::Unsettled(crate::figure::Lack::Pipe(1))), |wall| {
                        wall.allowable.clone().map(|a| a.pressure)
                    });
                least = match (nth, least, bears) {
                    (0, _, bears) => bears,
                    (_, Ok(a), Ok(b)) => Ok(if b < a { b } else { a }),
                    (_, Err(gap), _) | (_, _, Err(gap)) => Err(gap),
                };
            }
            least
        })
        .collect()
}
