//! Stations as typed to the profile of the pipe's axis.
//!
//! The profile joins stations by straight lines. A slope distance is the
//! pipe's own length between two stations, and must not be shorter than the
//! rise or fall it spans; a horizontal distance gives the length by
//! Pythagoras. Rows left wholly empty are not stations yet.

use crate::book::{DistanceKind, Id, Reckoning, Station};
use crate::field::Field;
use crate::figure::{Figure, Gap, Trouble};
use crate::resolve::Reader;
use hydraulics::math;
use hydraulics::quantity::{HorizontalDistance, Level, PipeLength};

/// Most stations of one line.
pub const MOST_STATIONS: usize = 1000;

/// A station on the profile.
#[derive(Debug, Clone, PartialEq)]
pub struct StationAt {
    /// Its number.
    pub id: Id,
    /// Its name, if it has one.
    pub name: String,
    /// Along the pipe from the first station.
    pub chainage: PipeLength,
    /// On the plan from the first station.
    pub horizontal: HorizontalDistance,
    /// Level of the pipe's axis.
    pub level: Level,
}

/// The profile of the line.
#[derive(Debug, Clone, PartialEq)]
pub struct Profile {
    /// Stations from the first to the last before one that cannot be used;
    /// what can be drawn.
    pub usable: Vec<StationAt>,
    /// Why the profile ends there, if it does not reach the last station.
    pub broken: Option<Gap>,
    /// Level of the first station.
    pub first_level: Figure<Level>,
    /// Level of the last station.
    pub last_level: Figure<Level>,
    /// Length of the pipe along the line.
    pub pipe_length: Figure<PipeLength>,
    /// Length on the plan.
    pub plan_length: Figure<HorizontalDistance>,
}

impl Profile {
    /// All the stations, where every one can be used.
    ///
    /// # Errors
    /// The gap that breaks the profile.
    pub fn whole(&self) -> Figure<&[StationAt]> {
        match &self.broken {
            None => Ok(&self.usable),
            Some(gap) => Err(gap.clone()),
        }
    }

    /// The station of this number, if it can be used.
    #[must_use]
    pub fn station(&self, id: Id) -> Option<&StationAt> {
        self.usable.iter().find(|s| s.id == id)
    }

    /// The level of the pipe's axis at a chainage within the profile.
    #[must_use]
    pub fn level_at(&self, chainage: PipeLength) -> Option<Level> {
        let x = chainage.m();
        let after = self.usable.iter().position(|s| s.chainage.m() >= x)?;
        let b = &self.usable[after];
        let Some(a) = after.checked_sub(1).map(|i| &self.usable[i]) else {
            return Some(b.level);
        };
        let span = b.chainage.m() - a.chainage.m();
        if span <= 0.0 {
            return Some(b.level);
        }
        let t = (x - a.chainage.m()) / span;
        Some(Level::from_m(a.level.m() + t * (b.level.m() - a.level.m())))
    }
}

/// Whether a row holds anything.
fn begun(station: &Station) -> bool {
    !station.distance_m.is_empty() || !station.level_m.is_empty()
}

pub(crate) fn profile(r: &mut Reader<'_>) -> Profile {
    let book = r.book;
    let rows: Vec<&Station> = book.line.stations.iter().filter(|s| begun(s)).collect();
    let first_level = end_level(r, rows.first().copied(), 0);
    let last_level = if rows.len() > 1 {
        end_level(r, rows.last().copied(), 1)
    } else {
        Err(Gap::needs(next_row(r, rows.first().copied())))
    };
    let (usable, broken) = walk(r, &rows);
    // Later stations are still read, so that each wrong one is named.
    for station in rows.iter().skip(usable.len()) {
        for field in [
            Field::StationDistance(station.id),
            Field::StationLevel(station.id),
        ] {
            let _ = r.optional(field);
        }
    }
    let broken = broken
        .or_else(|| (usable.len() < 2).then(|| Gap::needs(next_row(r, rows.first().copied()))));
    let end = match (&broken, usable.last()) {
        (None, Some(end)) => Ok((end.chainage, end.horizontal)),
        (Some(gap), _) => Err(gap.clone()),
        (None, None) => Err(Gap::needs(next_row(r, None))),
    };
    Profile {
        pipe_length: end.clone().map(|(along, _)| along),
        plan_length: end.map(|(_, plan)| plan),
        usable,
        broken,
        first_level,
        last_level,
    }
}

/// The level entry of the next station to be filled in.
fn next_row(r: &Reader<'_>, first: Option<&Station>) -> Field {
    let empty = r.book.line.stations.iter().find(|s| !begun(s));
    match (first, empty) {
        (None, Some(s)) => Field::StationLevel(s.id),
        (Some(_), Some(s)) => Field::StationDistance(s.id),
        (Some(s), None) => Field::StationLevel(s.id),
        (None, None) => Field::StationLevel(1),
    }
}

fn end_level(r: &mut Reader<'_>, station: Option<&Station>, nth: usize) -> Figure<Level> {
    match station {
        Some(s) => r.needed(Field::StationLevel(s.id)).map(Level::from_m),
        None => {
            let id = r.book.line.stations.get(nth).map_or(1, |s| s.id);
            Err(Gap::needs(Field::StationLevel(id)))
        }
    }
}

fn walk(r: &mut Reader<'_>, rows: &[&Station]) -> (Vec<StationAt>, Option<Gap>) {
    if rows.len() > MOST_STATIONS {
        let trouble = Trouble::TooManyStations { count: rows.len() };
        r.note(trouble.clone());
        return (Vec::new(), Some(Gap::Wrong(trouble)));
    }
    let mut placed: Vec<StationAt> = Vec::with_capacity(rows.len());
    let mut origin = 0.0;
    for (i, station) in rows.iter().enumerate() {
        let next = if i == 0 {
            first(r, station).map(|(at, start)| {
                origin = start;
                at
            })
        } else {
            following(r, station, &placed[i - 1], origin)
        };
        match next {
            Ok(at) => placed.push(at),
            Err(gap) => return (placed, Some(gap)),
        }
    }
    (placed, None)
}

/// The first station, and the distance typed for it, which running distances
/// count from.
fn first(r: &mut Reader<'_>, station: &Station) -> Figure<(StationAt, f64)> {
    let start = r.quietly(Field::StationDistance(station.id), 0.0)?;
    let level = r.needed(Field::StationLevel(station.id))?;
    let at = StationAt {
        id: station.id,
        name: station.name.clone(),
        chainage: PipeLength::from_m(0.0),
        horizontal: HorizontalDistance::from_m(0.0),
        level: Level::from_m(level),
    };
    Ok((at, start))
}

fn following(
    r: &mut Reader<'_>,
    station: &Station,
    before: &StationAt,
    origin: f64,
) -> Figure<StationAt> {
    let typed = r.needed(Field::StationDistance(station.id))?;
    let level = r.needed(Field::StationLevel(station.id))?;
    let kind = r.book.line.distance_kind;
    let so_far = match kind {
        DistanceKind::Slope => before.chainage.m(),
        DistanceKind::Horizontal => before.horizontal.m(),
    };
    let leg = match r.book.line.reckoning {
        Reckoning::FromPrevious => typed,
        Reckoning::FromStart => typed - origin - so_far,
    };
    let id = station.id;
    // Distances are typed to a millimetre at best.
    let leg = if leg.abs() < 1e-9 { 0.0 } else { leg };
    if leg < 0.0 {
        return r.wrong(Trouble::StationBehind {
            station: id,
            back_m: -leg,
        });
    }
    let fall = before.level.m() - level;
    let (along, plan) = match kind {
        DistanceKind::Slope => {
            if leg < fall.abs() {
                return r.wrong(Trouble::StationTooSteep {
                    station: id,
                    distance_m: leg,
                    fall_m: fall.abs(),
                });
            }
            (leg, ((leg - fall) * (leg + fall)).sqrt())
        }
        DistanceKind::Horizontal => (math::hypot(leg, fall), leg),
    };
    if along <= 0.0 {
        return r.wrong(Trouble::StationRepeated { station: id });
    }
    Ok(StationAt {
        id,
        name: station.name.clone(),
        chainage: PipeLength::from_m(before.chainage.m() + along),
        horizontal: HorizontalDistance::from_m(before.horizontal.m() + plan),
        level: Level::from_m(level),
    })
}

#[cfg(test)]
mod tests {
    use crate::book::{Book, DistanceKind, Reckoning, Station};
    use crate::entry::Entry;
    use crate::figure::{Gap, Trouble};
    use crate::reading::DecimalMark;
    use crate::resolve::resolve;
    use crate::units::Kind;
    use proptest::prelude::*;

    fn book(kind: DistanceKind, reckoning: Reckoning, rows: &[(&str, &str)]) -> Book {
        let mut book = Book::new("test");
        book.line.distance_kind = kind;
        book.line.reckoning = reckoning;
        book.line.stations = (1..)
            .zip(rows)
            .map(|(id, (distance, level))| Station {
                id,
                name: String::new(),
                distance_m: Entry::typed(distance, "m", Kind::Distance, DecimalMark::Point),
                level_m: Entry::typed(level, "m", Kind::Level, DecimalMark::Point),
                ..Station::default()
            })
            .collect();
        book
    }

    // 3-4-5 triangles worked by hand.
    #[test]
    fn slope_and_horizontal_distances_give_the_same_line() {
        let slope = [("0", "100"), ("50", "60"), ("100", "30")];
        let plan = [("0", "100"), ("30", "60"), ("70", "30")];
        let legs = [("", "100"), ("50", "60"), ("50", "30")];
        for (kind, reckoning, rows) in [
            (DistanceKind::Slope, Reckoning::FromStart, slope),
            (DistanceKind::Horizontal, Reckoning::FromStart, plan),
            (DistanceKind::Slope, Reckoning::FromPrevious, legs),
        ] {
            let found = resolve(&book(kind, reckoning, &rows)).profile;
            assert!((found.pipe_length.unwrap().m() - 100.0).abs() < 1e-9);
            assert!((found.plan_length.unwrap().m() - 70.0).abs() < 1e-9);
            assert!((found.usable[1].horizontal.m() - 30.0).abs() < 1e-9);
        }
    }

    #[test]
    fn a_line_may_start_at_any_tape_reading() {
        let rows = [("12", "100"), ("62", "60")];
        let found = resolve(&book(DistanceKind::Slope, Reckoning::FromStart, &rows)).profile;
        assert!((found.pipe_length.unwrap().m() - 50.0).abs() < 1e-9);
    }

    #[test]
    fn empty_rows_are_no_stations() {
        let rows = [("0", "100"), ("", ""), ("50", "60"), ("", "")];
        let found = resolve(&book(DistanceKind::Slope, Reckoning::FromStart, &rows)).profile;
        assert_eq!(found.usable.len(), 2);
        assert_eq!(found.broken, None);
    }

    #[test]
    fn what_cannot_be_is_refused_with_the_station() {
        let trouble = |rows: &[(&str, &str)]| {
            let found = resolve(&book(DistanceKind::Slope, Reckoning::FromStart, rows));
            match found.profile.broken {
                Some(Gap::Wrong(trouble)) => {
                    assert!(found.troubles.contains(&trouble));
                    trouble
                }
                other => panic!("{other:?}"),
            }
        };
        assert!(matches!(
            trouble(&[("0", "100"), ("50", "60"), ("40", "50")]),
            Trouble::StationBehind { station: 3, .. }
        ));
        assert!(matches!(
            trouble(&[("0", "100"), ("30", "60")]),
            Trouble::StationTooSteep { station: 2, .. }
        ));
        assert!(matches!(
            trouble(&[("0", "100"), ("0", "100")]),
            Trouble::StationRepeated { station: 2 }
        ));
        assert!(matches!(
            trouble(&[("0", "100"), ("x", "60")]),
            Trouble::Entry(..)
        ));
    }

    #[test]
    fn a_broken_station_leaves_head_and_flow_alone() {
        let mut b = book(
            DistanceKind::Slope,
            Reckoning::FromStart,
            &[("0", "100"), ("x", "60"), ("100", "30")],
        );
        b.stream.design_flow_m3_s = Entry::typed("38", "L/s", Kind::Flow, DecimalMark::Point);
        let found = resolve(&b);
        assert!((found.gross_head.unwrap().m() - 70.0).abs() < 1e-12);
        assert!(found.design_flow.is_ok());
        assert!(found.profile.pipe_length.is_err());
        assert_eq!(found.profile.usable.len(), 1);
    }

    proptest! {
        #[test]
        fn the_pipe_is_never_shorter_than_the_straight_line(
            legs in proptest::collection::vec((0.0..200.0f64, -50.0..50.0f64), 1..30)
        ) {
            let mut level = 500.0;
            let mut rows = vec![("0".to_owned(), "500".to_owned())];
            for (plan, fall) in &legs {
                level -= fall;
                rows.push((format!("{plan}"), format!("{level}")));
            }
            let rows: Vec<(&str, &str)> =
                rows.iter().map(|(a, b)| (a.as_str(), b.as_str())).collect();
            let found = resolve(&book(DistanceKind::Horizontal, Reckoning::FromPrevious, &rows));
            if let (Ok(length), Some(end)) = (&found.profile.pipe_length, found.profile.usable.last()) {
                let fall = 500.0 - end.level.m();
                let straight = hydraulics::math::hypot(end.horizontal.m(), fall);
                prop_assert!(length.m() >= straight - 1e-9);
            }
        }
    }
}
