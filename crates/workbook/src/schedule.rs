//! The pipe schedule: what is ordered, stretch by stretch.

use crate::book::{Book, Id, Laying};
use crate::evaluate::Findings;
use crate::figure::{CloneGap, Figure, Gap, Lack};
use crate::relief::{Drain, Vent};
use crate::resolve::Resolved;
use crate::resolve::bends::Made;
use crate::resolve::drive::Speeds;
use crate::resolve::parts::PlacedFitting;
use crate::sweep::class;
use crate::verdict::{StretchVerdict, Verdict};
use crate::walls::StretchWalls;
use hydraulics::quantity::{Head, PipeLength};
use pipes::{Pipe, SupplyKind};
use std::sync::Arc;
use uom::si::f64::{Length, LinearMassDensity, Mass, Time};

/// Pieces to order.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Order {
    /// Straight lengths or coils.
    pub kind: SupplyKind,
    /// Length of one.
    pub piece: Length,
    /// How many, the spare share included.
    pub pieces: u32,
    /// Joints between the pieces that lie in the stretch; those at its ends
    /// are not counted.
    pub joints: u32,
    /// Mass of one.
    pub piece_mass: Mass,
}

/// One line of the schedule.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// The stretch.
    pub stretch: Id,
    /// Chainage of its upper end.
    pub from: PipeLength,
    /// Chainage of its lower end.
    pub to: PipeLength,
    /// True length along the slope.
    pub length: PipeLength,
    /// The pipe.
    pub pipe: Arc<Pipe>,
    /// Rating as printed.
    pub class: String,
    /// How it is laid.
    pub laying: Laying,
    /// Highest standing head in the stretch.
    pub highest_static: Figure<Head>,
    /// Its walls' figures.
    pub walls: StretchWalls,
    /// Its verdict.
    pub verdict: Option<StretchVerdict>,
    /// Mass per length.
    pub mass_per_length: LinearMassDensity,
    /// Mass of the length laid.
    pub mass: Mass,
    /// What to order, one line a way it is sold; empty where no supply length
    /// is known: order the length with its spare.
    pub orders: Vec<Order>,
    /// Length to order, the spare share included.
    pub order_length: PipeLength,
    /// The spare share.
    pub spare: f64,
}

/// A change of bore between two stretches.
#[derive(Debug, Clone, PartialEq)]
pub struct Reducer {
    /// The stretch above.
    pub above: Id,
    /// The stretch below.
    pub below: Id,
    /// The station it sits at.
    pub station: Option<Id>,
    /// Where it is.
    pub at: PipeLength,
    /// Bore above.
    pub from: Length,
    /// Bore below.
    pub to: Length,
    /// Whether both pipes have one outside diameter: they join end to end with
    /// a step in the bore, and no reducer is ordered.
    pub step_only: bool,
}

/// Bends from the survey that are alike.
#[derive(Debug, Clone, PartialEq)]
pub struct BendGroup {
    /// The pipe they go into.
    pub pipe: Arc<Pipe>,
    /// Smooth, with its radius, or mitre.
    pub made: Made,
    /// Deflection to a whole degree.
    pub angle_deg: f64,
    /// Their stations, down the line, with the true deflection of each,
    /// degree.
    pub stations: Vec<(Id, f64)>,
}

/// The closing time as ordered.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ClosingOrder {
    /// Speeds of the drive, as in the book.
    pub speeds: Speeds,
    /// Time from full stroke to shut.
    pub full_stroke: Time,
    /// Reserve asked for, a share.
    pub reserve: f64,
    /// The time that reserve leaves: the drive may be this fast and the line
    /// still keeps to its limits, if `reserve_holds`.
    pub with_reserve: Time,
    /// Whether it does: no stretch fails, every event solved in full.
    pub reserve_holds: bool,
}

/// The schedule.
#[derive(Debug, Clone, PartialEq)]
pub struct Schedule {
    /// Stretch by stretch; a stretch that cannot be ordered yet says why.
    pub lines: Vec<(Id, Figure<Line>)>,
    /// Fittings.
    pub fittings: Vec<PlacedFitting>,
    /// Changes of bore between stretches, down the line.
    pub reducers: Figure<Vec<Reducer>>,
    /// Bends from the survey, by pipe, kind and angle.
    pub bends: Figure<Vec<BendGroup>>,
    /// Places that need a vent.
    pub vents: Figure<Vec<Vent>>,
    /// Places that need a drain.
    pub drains: Figure<Vec<Drain>>,
    /// The closing time the drive of the jets is ordered with.
    pub closing: Figure<ClosingOrder>,
    /// Length in all.
    pub length: Figure<PipeLength>,
    /// Mass of pipe in all.
    pub mass: Figure<Mass>,
}

/// The schedule of a book.
#[must_use]
pub fn schedule(book: &Book, findings: &Findings) -> Schedule {
    let lines: Vec<(Id, Figure<Line>)> = (0..book.line.stretches.len())
        .filter_map(|i| {
            let id = findings.resolved.stretches.get(i)?.id;
            Some((id, line(findings, i)?))
        })
        .collect();
    let mass = lines.iter().try_fold(Mass::default(), |sum, (_, line)| {
        Ok(sum + line.clone_gap()?.mass)
    });
    Schedule {
        lines,
        fittings: findings.resolved.fittings.clone(),
        reducers: reducers(&findings.resolved),
        bends: bends(&findings.resolved),
        vents: findings.relief.vents.clone(),
        drains: findings.relief.drains.clone(),
        closing: closing(findings),
        length: findings.resolved.profile.pipe_length.clone(),
        mass,
    }
}

/// The closing time ordered, and whether its reserve is one.
fn closing(findings: &Findings) -> Figure<ClosingOrder> {
    let surge = findings.transient.surge.clone_gap()?;
    let speeds = findings.resolved.drive.speeds.clone()?;
    let reserve = findings.resolved.drive.reserve.clone()?;
    let faster = |time: Time| time / (1.0 + reserve);
    let sped_up = match speeds {
        Speeds::One { time } => Speeds::One { time: faster(time) },
        Speeds::Two { fast, slow, knee } => Speeds::Two {
            fast: faster(fast),
            slow: faster(slow),
            knee,
        },
    };
    let verdict = crate::closing::verdict_with(&findings.resolved, &findings.steady, sped_up);
    Ok(ClosingOrder {
        speeds,
        full_stroke: surge.closing,
        reserve,
        with_reserve: sped_up.full_stroke(),
        reserve_holds: verdict <= Verdict::Tight,
    })
}

fn line(findings: &Findings, index: usize) -> Option<Figure<Line>> {
    let stretch = findings.resolved.stretches.get(index)?;
    let walls = findings.walls.stretches.get(index)?;
    let verdict = findings
        .judged
        .stretches
        .iter()
        .find(|v| v.stretch == stretch.id)
        .cloned();
    let build = || -> Figure<Line> {
        let span = stretch.span.clone()?;
        let pipe = Arc::clone(stretch.pipe.clone_gap()?);
        let spare = findings.resolved.limits.clone()?.spare;
        let length = span.length();
        let order_length = PipeLength::from_m(length.m() * (1.0 + spare));
        let mass_per_length = pipe.mass_per_length();
        let water = findings.resolved.cold_water.clone()?;
        let highest_static = walls.standing.clone().map(|s| {
            s.pressure
                .head(water.density(), hydraulics::constants::standard_gravity())
        });
        Ok(Line {
            stretch: stretch.id,
            from: span.from,
            to: span.to,
            length,
            class: class(&pipe),
            laying: stretch.laying,
            highest_static,
            walls: walls.clone(),
            verdict: verdict.clone(),
            mass: mass_per_length * length.get(),
            orders: orders(&pipe, length, order_length, mass_per_length),
            mass_per_length,
            order_length,
            spare,
            pipe,
        })
    };
    Some(build())
}

/// Changes of bore between stretches.
pub(crate) fn reducers(found: &Resolved) -> Figure<Vec<Reducer>> {
    let stations = found.profile.whole()?;
    let mut all = Vec::new();
    for pair in found.stretches.windows(2) {
        let [above, below] = pair else { continue };
        let (a, b) = (above.pipe.clone_gap()?, below.pipe.clone_gap()?);
        if a.bore() == b.bore() {
            continue;
        }
        let at = below.span.clone()?.from;
        let place = stations.partition_point(|s| s.chainage < at);
        all.push(Reducer {
            above: above.id,
            below: below.id,
            station: stations
                .get(place)
                .filter(|s| s.chainage == at)
                .map(|s| s.id),
            at,
            from: a.bore(),
            to: b.bore(),
            step_only: a.outside_diameter == b.outside_diameter,
        });
    }
    Ok(all)
}

/// Bends from the survey, alike ones together.
fn bends(found: &Resolved) -> Figure<Vec<BendGroup>> {
    found.profile.whole()?;
    let mut groups: Vec<BendGroup> = Vec::new();
    for turn in &found.turns {
        let made = turn.made.clone()?;
        if !turn.is_piece() {
            continue;
        }
        let deflection = turn.deflection_deg.clone()?;
        let stretch = found.stretches.iter().find(|s| Some(s.id) == turn.stretch);
        let pipe = match stretch {
            Some(stretch) => Arc::clone(stretch.pipe.clone_gap()?),
            None => return Err(Gap::Unsettled(Lack::Pipe(1))),
        };
        let angle_deg = deflection.round().max(1.0);
        let alike = |g: &&mut BendGroup| {
            g.pipe.id == pipe.id && g.made == made && (g.angle_deg - angle_deg).abs() < 0.5
        };
        match groups.iter_mut().find(alike) {
            Some(group) => group.stations.push((turn.station, deflection)),
            None => groups.push(BendGroup {
                pipe,
                made,
                angle_deg,
                stations: vec![(turn.station, deflection)],
            }),
        }
    }
    groups.sort_by(|a, b| {
        a.pipe
            .id
            .cmp(&b.pipe.id)
            .then(a.angle_deg.total_cmp(&b.angle_deg))
    });
    Ok(groups)
}

fn orders(
    pipe: &Pipe,
    laid: PipeLength,
    length: PipeLength,
    mass: LinearMassDensity,
) -> Vec<Order> {
    pipe.supply
        .iter()
        .filter_map(|supply| {
            Some(Order {
                kind: supply.kind,
                piece: supply.length,
                pieces: pieces(length.get(), supply.length)?,
                joints: pieces(laid.get(), supply.length)?.saturating_sub(1),
                piece_mass: mass * supply.length,
            })
        })
        .collect()
}

/// Whole pieces that make up at least `length`. A hair over a whole number,
/// from rounding, is not another piece.
fn pieces(length: Length, piece: Length) -> Option<u32> {
    let exact = (length / piece).get::<uom::si::ratio::ratio>();
    if !(exact.is_finite() && (0.0..1e9).contains(&exact)) {
        return None;
    }
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "between 0 and 1e9, as checked"
    )]
    Some((exact - 1e-9).ceil() as u32)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::demo;
    use crate::evaluate::evaluate;
    use proptest::prelude::*;
    use uom::si::length::meter;

    #[test]
    fn the_demo_schedule_covers_the_line() {
        let book = demo("demo");
        let s = schedule(&book, &evaluate(&book));
        let lines: Vec<&Line> = s.lines.iter().map(|(_, l)| l.as_ref().unwrap()).collect();
        assert!((lines[0].from.m()).abs() < 1e-12);
        assert_eq!(lines[0].to, lines[1].from);
        let sum: f64 = lines.iter().map(|l| l.length.m()).sum();
        assert!((sum - s.length.unwrap().m()).abs() < 1e-9);
        for line in lines {
            assert!(line.order_length > line.length);
            for order in &line.orders {
                let laid = f64::from(order.joints) * order.piece.get::<meter>();
                assert!(laid < line.length.m());
                assert!(laid + order.piece.get::<meter>() >= line.length.m() - 1e-6);
                let bought = f64::from(order.pieces) * order.piece.get::<meter>();
                assert!(bought >= line.order_length.m() - 1e-6);
                assert!(bought - order.piece.get::<meter>() < line.order_length.m());
            }
        }
    }

    proptest! {
        #[test]
        fn pieces_cover_the_length_and_no_more(length in 0.1..5000.0f64, piece in 1.0..200.0f64) {
            let m = Length::new::<meter>;
            let n = f64::from(pieces(m(length), m(piece)).unwrap());
            prop_assert!(n * piece >= length - 1e-6);
            prop_assert!((n - 1.0) * piece < length);
        }
    }
}
