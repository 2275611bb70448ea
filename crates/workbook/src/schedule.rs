//! The pipe schedule: what is ordered, stretch by stretch.

use crate::book::{Book, Id, Laying};
use crate::evaluate::Findings;
use crate::figure::{CloneGap, Figure};
use crate::resolve::parts::PlacedFitting;
use crate::sweep::class;
use crate::verdict::StretchVerdict;
use crate::walls::StretchWalls;
use hydraulics::quantity::{Head, PipeLength};
use pipes::{Pipe, SupplyKind};
use std::sync::Arc;
use uom::si::f64::{Length, LinearMassDensity, Mass};

/// Pieces to order.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Order {
    /// Straight lengths or coils.
    pub kind: SupplyKind,
    /// Length of one.
    pub piece: Length,
    /// How many, the spare share included.
    pub pieces: u32,
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

/// The schedule.
#[derive(Debug, Clone, PartialEq)]
pub struct Schedule {
    /// Stretch by stretch; a stretch that cannot be ordered yet says why.
    pub lines: Vec<(Id, Figure<Line>)>,
    /// Fittings.
    pub fittings: Vec<PlacedFitting>,
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
        length: findings.resolved.profile.pipe_length.clone(),
        mass,
    }
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
            orders: orders(&pipe, order_length, mass_per_length),
            mass_per_length,
            order_length,
            spare,
            pipe,
        })
    };
    Some(build())
}

fn orders(pipe: &Pipe, length: PipeLength, mass: LinearMassDensity) -> Vec<Order> {
    pipe.supply
        .iter()
        .filter_map(|supply| {
            Some(Order {
                kind: supply.kind,
                piece: supply.length,
                pieces: pieces(length.get(), supply.length)?,
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
