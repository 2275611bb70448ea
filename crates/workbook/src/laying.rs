//! The laying list: station by station in the order the crew lays, with the
//! pipe of each leg and what sits there.

use crate::book::{FittingKind, Id, Laying, LayingOrder};
use crate::evaluate::Findings;
use crate::figure::{CloneGap, Figure};
use crate::relief::{Collects, Drain};
use crate::resolve::bends::Made;
use crate::resolve::parts::Stretch;
use crate::schedule::{Reducer, reducers};
use hydraulics::quantity::{Level, PipeLength};
use pipes::Pipe;
use std::sync::Arc;
/// What is laid at a station.
#[derive(Debug, Clone, PartialEq)]
pub enum Item {
    /// A fitting placed by hand.
    Fitting {
        /// Its number.
        id: Id,
        /// What it is.
        kind: FittingKind,
        /// How many in a row.
        count: Figure<u32>,
        /// What it is called on the order.
        note: String,
    },
    /// A turn of the line, and how it is made.
    Turn {
        /// How it is made.
        made: Made,
        /// True deflection, degree.
        deflection_deg: f64,
        /// Turn on the plan, to the left below zero, degree; looking down the
        /// line.
        plan_deg: f64,
        /// Turn in the vertical, above zero where the pipe steepens downhill,
        /// degree.
        vertical_deg: f64,
    },
    /// Another pipe or another way of laying begins, down the line.
    Change {
        /// The stretch above.
        above: Id,
        /// The stretch below.
        below: Id,
        /// The change of bore, if there is one.
        reducer: Option<Reducer>,
    },
    /// A vent is needed.
    Vent(Collects),
    /// A drain is needed.
    Drain,
}

/// The leg laid after a station.
#[derive(Debug, Clone, PartialEq)]
pub struct Leg {
    /// The station it leads to.
    pub to: Id,
    /// Along the pipe.
    pub length: PipeLength,
    /// Slope, degree below the horizontal looking down the line.
    pub slope_deg: f64,
    /// The stretch it lies in.
    pub stretch: Id,
    /// Its pipe.
    pub pipe: Figure<Arc<Pipe>>,
    /// How it is laid.
    pub laying: Laying,
}

/// One station of the list.
#[derive(Debug, Clone, PartialEq)]
pub struct Row {
    /// The station.
    pub station: Id,
    /// Its name, if it has one.
    pub name: String,
    /// Along the pipe from the first station of the line.
    pub at: PipeLength,
    /// Level of the pipe's axis.
    pub level: Level,
    /// What is laid there.
    pub items: Vec<Item>,
    /// The leg laid next; none at the end.
    pub next: Option<Leg>,
}

/// The laying list of a line.
///
/// # Errors
/// The gap that breaks the profile, or keeps a stretch from its place.
pub fn laying(findings: &Findings, order: LayingOrder) -> Figure<Vec<Row>> {
    let found = &findings.resolved;
    let stations = found.profile.whole()?;
    for stretch in &found.stretches {
        stretch.span.clone_gap()?;
    }
    let reducers = reducers(found);
    let mut rows: Vec<Row> = stations
        .iter()
        .map(|s| Row {
            station: s.id,
            name: s.name.clone(),
            at: s.chainage,
            level: s.level,
            items: Vec::new(),
            next: None,
        })
        .collect();
    let place = |at: PipeLength| stations.partition_point(|s| s.chainage < at);
    let mut put = |at: PipeLength, item: Item| {
        if let Some(row) = rows.get_mut(place(at)) {
            row.items.push(item);
        }
    };
    for pair in found.stretches.windows(2) {
        let [above, below] = pair else { continue };
        let at = below.span.clone()?.from;
        let reducer = reducers.iter().flatten().find(|r| r.below == below.id);
        put(
            at,
            Item::Change {
                above: above.id,
                below: below.id,
                reducer: reducer.cloned(),
            },
        );
    }
    for fitting in &found.fittings {
        let Ok(at) = fitting.at else { continue };
        put(
            at,
            Item::Fitting {
                id: fitting.id,
                kind: fitting.kind,
                count: fitting.count.clone(),
                note: fitting.note.clone(),
            },
        );
    }
    for turn in &found.turns {
        let (Ok(made), Ok(deflection_deg), Ok(plan_deg)) =
            (&turn.made, &turn.deflection_deg, &turn.plan_deg)
        else {
            continue;
        };
        put(
            turn.at,
            Item::Turn {
                made: *made,
                deflection_deg: *deflection_deg,
                plan_deg: *plan_deg,
                vertical_deg: turn.vertical_deg(),
            },
        );
    }
    for vent in findings.relief.vents.iter().flatten() {
        put(vent.at, Item::Vent(vent.why));
    }
    for Drain { at, .. } in findings.relief.drains.iter().flatten() {
        put(*at, Item::Drain);
    }
    let mut legs = legs(findings)?;
    match order {
        LayingOrder::Downhill => {
            for (row, leg) in rows.iter_mut().zip(legs) {
                row.next = Some(leg);
            }
        }
        LayingOrder::Uphill => {
            rows.reverse();
            legs.reverse();
            let to: Vec<Id> = rows.iter().skip(1).map(|row| row.station).collect();
            for ((row, leg), to) in rows.iter_mut().zip(legs).zip(to) {
                row.next = Some(Leg { to, ..leg });
            }
        }
    }
    Ok(rows)
}

/// Every leg, down the line, leading to its lower station.
fn legs(findings: &Findings) -> Figure<Vec<Leg>> {
    let found = &findings.resolved;
    let stations = found.profile.whole()?;
    let mut legs = Vec::with_capacity(stations.len());
    let mut stretches = found.stretches.iter().peekable();
    let mut current: Option<&Stretch> = None;
    for pair in stations.windows(2) {
        let [a, b] = pair else { continue };
        while let Some(stretch) =
            stretches.next_if(|s| s.span.as_ref().is_ok_and(|span| span.from <= a.chainage))
        {
            current = Some(stretch);
        }
        let Some(stretch) = current else { continue };
        let plan = (b.horizontal - a.horizontal).m();
        let fall = (a.level - b.level).m();
        legs.push(Leg {
            to: b.id,
            length: b.chainage - a.chainage,
            slope_deg: hydraulics::math::atan2(fall, plan) * 180.0 / hydraulics::math::PI,
            stretch: stretch.id,
            pipe: stretch.pipe.clone(),
            laying: stretch.laying,
        });
    }
    Ok(legs)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::demo;
    use crate::evaluate::evaluate;

    #[test]
    fn uphill_is_downhill_from_the_other_end() {
        let found = evaluate(&demo("demo"));
        let down = laying(&found, LayingOrder::Downhill).unwrap();
        let up = laying(&found, LayingOrder::Uphill).unwrap();
        let stations: Vec<Id> = down.iter().map(|r| r.station).collect();
        let reversed: Vec<Id> = up.iter().rev().map(|r| r.station).collect();
        assert_eq!(stations, reversed);
        for rows in [&down, &up] {
            let length: f64 = rows
                .iter()
                .filter_map(|r| r.next.as_ref())
                .map(|l| l.length.m())
                .sum();
            assert!(
                (length - found.resolved.profile.pipe_length.clone().unwrap().m()).abs() < 1e-9
            );
            for pair in rows.windows(2) {
                let leg = pair[0].next.as_ref().unwrap();
                assert_eq!(leg.to, pair[1].station);
                let apart = (pair[1].at - pair[0].at).m().abs();
                assert!((leg.length.m() - apart).abs() < 1e-12);
            }
            assert_eq!(rows.last().unwrap().next, None);
        }
    }

    #[test]
    fn everything_placed_is_laid_once() {
        let book = demo("demo");
        let found = evaluate(&book);
        let rows = laying(&found, LayingOrder::Uphill).unwrap();
        let items: Vec<&Item> = rows.iter().flat_map(|r| &r.items).collect();
        let count = |f: fn(&Item) -> bool| items.iter().filter(|i| f(i)).count();
        assert_eq!(
            count(|i| matches!(i, Item::Fitting { .. })),
            book.line.fittings.len()
        );
        assert_eq!(
            count(|i| matches!(i, Item::Turn { .. })),
            found.resolved.turns.len()
        );
        assert_eq!(
            count(|i| matches!(i, Item::Vent(_))),
            found.relief.vents.clone().unwrap().len()
        );
        let change = rows
            .iter()
            .find(|r| r.items.iter().any(|i| matches!(i, Item::Change { .. })))
            .unwrap();
        assert_eq!(change.station, book.line.stretches[1].from_station);
        // Above the cut lies the first stretch.
        assert_eq!(change.next.as_ref().unwrap().stretch, 1);
    }
}
