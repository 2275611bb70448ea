//! Stations as surveyed to the profile of the pipe's axis.
//!
//! The profile joins stations by straight lines. A slope distance is the
//! pipe's own length between two stations, and must not be shorter than the
//! rise or fall it spans; a horizontal distance gives the length by
//! Pythagoras. A station has its level entered, or found from the station
//! before by clinometer (fall L sin a of a slope distance, D tan a of a
//! horizontal one; the mean of fore and back sight where both were taken,
//! which takes out the instrument's index error) or by staff or hose (fall the
//! reading here less the reading there). Rows left wholly empty are not
//! stations yet.
//!
//! Where the fall of the whole line is known, the survey's closing error is
//! shown, and on wish spread over the legs levelled by angle or staff since
//! the last level entered, each in proportion to its length: the usual
//! adjustment of a line of levels (Ghilani and Wolf, Elementary Surveying,
//! on adjusting simple level circuits; from memory).

use crate::book::{DistanceKind, Id, Reckoning, Station, SurveyWay};
use crate::field::{Field, station_fields};
use crate::figure::{Figure, Gap, Trouble};
use crate::resolve::Reader;
use hydraulics::math;
use hydraulics::quantity::{Head, HorizontalDistance, Level, PipeLength};

/// Most stations of one line.
pub const MOST_STATIONS: usize = 1000;

/// Fore and back sight of one leg that differ by more than this were not
/// taken on the same line, degree: twice what a hand clinometer reads to
/// (common practice).
pub const SIGHTS_DIFFER_DEG: f64 = 1.0;

/// A horizontal distance with a sight steeper than this gives no fall,
/// degree.
const STEEPEST_SIGHT_DEG: f64 = 89.9;

/// Distances and levels are typed to a millimetre at best; a fall longer than
/// its slope distance by less than this is rounding, m.
const ROUNDING_M: f64 = 1e-6;

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

/// How a survey closes on a known fall.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Closing {
    /// Fall from the first station to the last as surveyed.
    pub surveyed: Head,
    /// The known fall.
    pub known: Head,
    /// The first less the second.
    pub error: Head,
    /// Length of the legs it was spread over, where it was.
    pub spread_over: Option<PipeLength>,
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
    /// How the survey closes on the known fall, where one is entered.
    pub closing: Figure<Option<Closing>>,
    /// Stations whose fore and back sights differ by more than
    /// [`SIGHTS_DIFFER_DEG`], and by how much, degree.
    pub sights_differ: Vec<(Id, f64)>,
    /// Places in `usable` by number, sorted by number.
    by_id: Vec<(Id, usize)>,
    /// The row of the book each usable station stands in.
    pub(crate) rows: Vec<usize>,
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

    /// The place of the station of this number in `usable`.
    #[must_use]
    pub fn place(&self, id: Id) -> Option<usize> {
        let at = self.by_id.binary_search_by_key(&id, |(i, _)| *i).ok()?;
        self.by_id.get(at).map(|(_, place)| *place)
    }

    /// The station of this number, if it can be used.
    #[must_use]
    pub fn station(&self, id: Id) -> Option<&StationAt> {
        self.usable.get(self.place(id)?)
    }

    /// The level of the pipe's axis at a chainage within the profile.
    #[must_use]
    pub fn level_at(&self, chainage: PipeLength) -> Option<Level> {
        let x = chainage.m();
        let after = self.usable.partition_point(|s| s.chainage.m() < x);
        let b = self.usable.get(after)?;
        let Some(a) = after.checked_sub(1).and_then(|i| self.usable.get(i)) else {
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
pub(crate) fn begun(station: &Station) -> bool {
    [
        &station.distance_m,
        &station.level_m,
        &station.fore_sight_deg,
        &station.back_sight_deg,
        &station.staff_back_m,
        &station.staff_fore_m,
    ]
    .into_iter()
    .any(|entry| !entry.is_empty())
}

/// The entry of a station by its name; its distance for a name that is no
/// station's.
#[must_use]
pub fn station_entry(station: &Station, field: Field) -> &crate::entry::Entry {
    match field {
        Field::StationLevel(_) => &station.level_m,
        Field::StationForeSight(_) => &station.fore_sight_deg,
        Field::StationBackSight(_) => &station.back_sight_deg,
        Field::StationStaffBack(_) => &station.staff_back_m,
        Field::StationStaffFore(_) => &station.staff_fore_m,
        Field::StationTurn(_) => &station.plan_turn_deg,
        _ => &station.distance_m,
    }
}

impl Reader<'_> {
    /// The value of a station's entry, without looking the station up.
    pub(crate) fn of_station(&mut self, s: &Station, field: Field) -> Figure<Option<f64>> {
        self.optional_of(field, station_entry(s, field))
    }

    fn station_needs(&mut self, s: &Station, field: Field) -> Figure<f64> {
        self.of_station(s, field)?.ok_or(Gap::needs(field))
    }
}

/// One leg of the line, as measured.
#[derive(Debug, Clone, Copy)]
struct Leg {
    kind: DistanceKind,
    distance: f64,
    fall: f64,
}

/// What walking the line gives.
struct Walked {
    placed: Vec<StationAt>,
    /// The leg that leads to each station but the first.
    legs: Vec<Leg>,
    broken: Option<Gap>,
    sights_differ: Vec<(Id, f64)>,
}

pub(crate) fn profile(r: &mut Reader<'_>) -> Profile {
    let book = r.book;
    let (numbers, rows): (Vec<usize>, Vec<&Station>) = book
        .line
        .stations
        .iter()
        .enumerate()
        .filter(|(_, s)| begun(s))
        .unzip();
    let first_level = end_level(r, rows.first().copied(), 0);
    let mut walked = walk(r, &rows);
    // Later stations are still read, so that each wrong one is named.
    for station in rows.iter().skip(walked.placed.len()) {
        for field in station_fields(station.way, station.id) {
            let _ = r.of_station(station, field);
        }
    }
    for station in &book.line.stations {
        let _ = r.of_station(station, Field::StationTurn(station.id));
    }
    if walked.broken.is_none() && walked.placed.len() < 2 {
        walked.broken = Some(Gap::needs(next_row(r, rows.first().copied())));
    }
    let closing = close(r, &rows, &mut walked);
    let Walked {
        placed: usable,
        broken,
        sights_differ,
        ..
    } = walked;
    let last_level = match rows.last() {
        Some(last) if rows.len() > 1 && last.way == SurveyWay::Level => end_level(r, Some(last), 1),
        Some(_) if rows.len() > 1 => match (&broken, usable.last()) {
            (None, Some(end)) => Ok(end.level),
            (Some(gap), _) => Err(gap.clone()),
            (None, None) => Err(Gap::needs(next_row(r, None))),
        },
        first => Err(Gap::needs(next_row(r, first.copied()))),
    };
    let end = match (&broken, usable.last()) {
        (None, Some(end)) => Ok((end.chainage, end.horizontal)),
        (Some(gap), _) => Err(gap.clone()),
        (None, None) => Err(Gap::needs(next_row(r, None))),
    };
    let mut by_id: Vec<(Id, usize)> = usable.iter().enumerate().map(|(i, s)| (s.id, i)).collect();
    by_id.sort_unstable();
    let mut numbers = numbers;
    numbers.truncate(usable.len());
    Profile {
        pipe_length: end.clone().map(|(along, _)| along),
        plan_length: end.map(|(_, plan)| plan),
        usable,
        broken,
        first_level,
        last_level,
        closing,
        sights_differ,
        by_id,
        rows: numbers,
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
        Some(s) => r
            .station_needs(s, Field::StationLevel(s.id))
            .map(Level::from_m),
        None => {
            let id = r.book.line.stations.get(nth).map_or(1, |s| s.id);
            Err(Gap::needs(Field::StationLevel(id)))
        }
    }
}

fn walk(r: &mut Reader<'_>, rows: &[&Station]) -> Walked {
    let mut walked = Walked {
        placed: Vec::with_capacity(rows.len()),
        legs: Vec::with_capacity(rows.len()),
        broken: None,
        sights_differ: Vec::new(),
    };
    if rows.len() > MOST_STATIONS {
        let trouble = Trouble::TooManyStations { count: rows.len() };
        r.note(trouble.clone());
        walked.broken = Some(Gap::Wrong(trouble));
        return walked;
    }
    let mut origin = 0.0;
    for station in rows {
        let next = match walked.placed.last() {
            None => first(r, station).map(|(at, start)| {
                origin = start;
                at
            }),
            Some(before) => {
                leg(r, station, before, origin, &mut walked.sights_differ).and_then(|leg| {
                    walked.legs.push(leg);
                    placed(r, station.id, &station.name, before, leg)
                })
            }
        };
        match next {
            Ok(at) => walked.placed.push(at),
            Err(gap) => {
                walked.broken = Some(gap);
                return walked;
            }
        }
    }
    walked
}

/// The first station, and the distance typed for it, which running distances
/// count from.
fn first(r: &mut Reader<'_>, station: &Station) -> Figure<(StationAt, f64)> {
    let start = r
        .of_station(station, Field::StationDistance(station.id))?
        .unwrap_or(0.0);
    let level = r.station_needs(station, Field::StationLevel(station.id))?;
    let at = StationAt {
        id: station.id,
        name: station.name.clone(),
        chainage: PipeLength::from_m(0.0),
        horizontal: HorizontalDistance::from_m(0.0),
        level: Level::from_m(level),
    };
    Ok((at, start))
}

/// The leg that leads to a station, as measured.
fn leg(
    r: &mut Reader<'_>,
    station: &Station,
    before: &StationAt,
    origin: f64,
    differ: &mut Vec<(Id, f64)>,
) -> Figure<Leg> {
    let id = station.id;
    // Each is read before one of them can fail, so that every wrong one is
    // named.
    let typed = r.station_needs(station, Field::StationDistance(id));
    let (first, second) = match station.way {
        SurveyWay::Level => (r.station_needs(station, Field::StationLevel(id)), Ok(None)),
        SurveyWay::Angle => (
            r.station_needs(station, Field::StationForeSight(id)),
            r.of_station(station, Field::StationBackSight(id)),
        ),
        SurveyWay::Staff => (
            r.station_needs(station, Field::StationStaffBack(id)),
            r.of_station(station, Field::StationStaffFore(id)),
        ),
    };
    let typed = typed?;
    let line = r.book.line.distance_kind;
    let kind = station.distance_kind.unwrap_or(line);
    let running = kind == line && r.book.line.reckoning == Reckoning::FromStart;
    let so_far = match kind {
        DistanceKind::Slope => before.chainage.m(),
        DistanceKind::Horizontal => before.horizontal.m(),
    };
    let distance = if running {
        typed - origin - so_far
    } else {
        typed
    };
    let distance = if distance.abs() < 1e-9 { 0.0 } else { distance };
    if distance < 0.0 {
        return r.wrong(Trouble::StationBehind {
            station: id,
            back_m: -distance,
        });
    }
    let fall = match station.way {
        SurveyWay::Level => before.level.m() - first?,
        SurveyWay::Staff => {
            let fore = second?.ok_or(Gap::needs(Field::StationStaffFore(id)));
            fore? - first?
        }
        SurveyWay::Angle => {
            let sight = sight(id, first?, second?, differ);
            let radians = sight * math::PI / 180.0;
            match kind {
                DistanceKind::Slope => -distance * math::sin(radians),
                DistanceKind::Horizontal if sight.abs() > STEEPEST_SIGHT_DEG => {
                    return r.wrong(Trouble::StationUpright { station: id });
                }
                DistanceKind::Horizontal => -distance * math::tan(radians),
            }
        }
    };
    Ok(Leg {
        kind,
        distance,
        fall,
    })
}

/// The sight along a leg, degree above the horizontal: the mean of fore sight
/// and back sight turned about, where both were taken.
fn sight(id: Id, fore: f64, back: Option<f64>, differ: &mut Vec<(Id, f64)>) -> f64 {
    let Some(back) = back else {
        return fore;
    };
    let difference = (fore + back).abs();
    if difference > SIGHTS_DIFFER_DEG {
        differ.push((id, difference));
    }
    (fore - back) / 2.0
}

/// The station at the end of a leg.
fn placed(
    r: &mut Reader<'_>,
    id: Id,
    name: &str,
    before: &StationAt,
    leg: Leg,
) -> Figure<StationAt> {
    let (distance, fall) = (leg.distance, leg.fall);
    let (along, plan) = match leg.kind {
        DistanceKind::Slope => {
            let spare = distance - fall.abs();
            if spare < -ROUNDING_M {
                return r.wrong(Trouble::StationTooSteep {
                    station: id,
                    distance_m: distance,
                    fall_m: fall.abs(),
                });
            }
            (distance, (spare.max(0.0) * (distance + fall.abs())).sqrt())
        }
        DistanceKind::Horizontal => (math::hypot(distance, fall), distance),
    };
    if along <= 0.0 {
        return r.wrong(Trouble::StationRepeated { station: id });
    }
    Ok(StationAt {
        id,
        name: name.to_owned(),
        chainage: PipeLength::from_m(before.chainage.m() + along),
        horizontal: HorizontalDistance::from_m(before.horizontal.m() + plan),
        level: Level::from_m(before.level.m() - fall),
    })
}

/// How the line closes on the known fall; on wish, spreads the error.
fn close(r: &mut Reader<'_>, rows: &[&Station], walked: &mut Walked) -> Figure<Option<Closing>> {
    let known = r.optional(Field::KnownFall);
    // The station all those below it are levelled from.
    let below_first = rows.get(1..).unwrap_or(&[]);
    let from = below_first
        .iter()
        .rposition(|s| s.way == SurveyWay::Level)
        .map_or(0, |i| i + 1);
    let carried = rows.len().saturating_sub(from + 1);
    let wished = r.book.line.spread_error;
    let known = match known {
        Ok(Some(known)) => known,
        Ok(None) => return Ok(None),
        Err(gap) => {
            // Levels that rest on it cannot be had either.
            if wished && carried > 0 {
                walked.placed.truncate(from + 1);
                walked.broken.get_or_insert(gap.clone());
            }
            return Err(gap);
        }
    };
    if let Some(gap) = walked.broken.clone() {
        if wished {
            walked.placed.truncate(from + 1);
        }
        return Err(gap);
    }
    let (Some(start), Some(end)) = (walked.placed.first(), walked.placed.last()) else {
        return Err(Gap::needs(next_row(r, None)));
    };
    let surveyed = start.level - end.level;
    let mut closing = Closing {
        surveyed,
        known: Head::from_m(known),
        error: Head::from_m(surveyed.m() - known),
        spread_over: None,
    };
    if !wished {
        return Ok(Some(closing));
    }
    if carried == 0 {
        r.note(Trouble::NothingToSpread);
        return Ok(Some(closing));
    }
    let over = end.chainage - walked.placed[from].chainage;
    closing.spread_over = Some(over);
    let per_length = closing.error.m() / over.m();
    for i in from..walked.legs.len() {
        let length = walked.placed[i + 1].chainage - walked.placed[i].chainage;
        walked.legs[i].fall -= per_length * length.m();
    }
    // Lengths were taken from the line as surveyed, so it is laid anew only
    // now.
    for i in from..walked.legs.len() {
        let (id, name) = (walked.placed[i + 1].id, walked.placed[i + 1].name.clone());
        match placed(r, id, &name, &walked.placed[i], walked.legs[i]) {
            Ok(at) => walked.placed[i + 1] = at,
            Err(gap) => {
                walked.placed.truncate(i + 1);
                walked.broken = Some(gap.clone());
                return Err(gap);
            }
        }
    }
    Ok(Some(closing))
}

#[cfg(test)]
mod tests {
    use crate::book::{Book, DistanceKind, Reckoning, Station, SurveyWay};
    use crate::entry::Entry;
    use crate::field::Field;
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

    fn typed(field: Field, text: &str) -> Entry {
        let unit = field.kind().units()[0].symbol;
        Entry::typed(text, unit, field.kind(), DecimalMark::Point)
    }

    /// A station at the end of a leg of this length, with two readings.
    fn leg(id: u32, way: SurveyWay, distance: &str, first: &str, second: &str) -> Station {
        let mut s = Station {
            id,
            way,
            distance_m: typed(Field::StationDistance(id), distance),
            ..Station::default()
        };
        match way {
            SurveyWay::Level => s.level_m = typed(Field::StationLevel(id), first),
            SurveyWay::Angle => {
                s.fore_sight_deg = typed(Field::StationForeSight(id), first);
                s.back_sight_deg = typed(Field::StationBackSight(id), second);
            }
            SurveyWay::Staff => {
                s.staff_back_m = typed(Field::StationStaffBack(id), first);
                s.staff_fore_m = typed(Field::StationStaffFore(id), second);
            }
        }
        s
    }

    fn line(legs: Vec<Station>) -> Book {
        let mut book = Book::new("test");
        book.line.reckoning = Reckoning::FromPrevious;
        book.line.stations = vec![leg(1, SurveyWay::Level, "", "100", "")];
        book.line.stations.extend(legs);
        book
    }

    // Worked by hand: 50 m at 30 degrees falls 25 m; 12 % of 100 m is 12 m on
    // the plan; 2.5 m less 0.5 m of staff is 2 m; a rise of 30 degrees.
    #[test]
    fn ways_of_survey_mix_in_one_line() {
        let mut book = line(vec![
            leg(2, SurveyWay::Angle, "50", "-30", ""),
            leg(3, SurveyWay::Angle, "100", "-12 %", "12 %"),
            leg(4, SurveyWay::Staff, "10", "0.5", "2.5"),
            leg(5, SurveyWay::Angle, "4", "30", ""),
            leg(6, SurveyWay::Level, "30", "40", ""),
        ]);
        book.line.stations[2].distance_kind = Some(DistanceKind::Horizontal);
        let found = resolve(&book);
        assert_eq!(found.troubles, vec![]);
        let levels: Vec<f64> = found.profile.usable.iter().map(|s| s.level.m()).collect();
        for (got, expected) in levels.iter().zip([100.0, 75.0, 63.0, 61.0, 63.0, 40.0]) {
            assert!((got - expected).abs() < 1e-9, "{levels:?}");
        }
        let third = &found.profile.usable[2];
        assert!((third.chainage.m() - 50.0 - 10_144f64.sqrt()).abs() < 1e-9);
        let plan = 50.0 * 0.75f64.sqrt() + 100.0;
        assert!((third.horizontal.m() - plan).abs() < 1e-9);
    }

    #[test]
    fn fore_and_back_sights_are_averaged_and_a_slip_is_named() {
        let book = line(vec![
            leg(2, SurveyWay::Angle, "100", "-29.6", "30.4"),
            leg(3, SurveyWay::Angle, "100", "-30", "-30"),
        ]);
        let found = resolve(&book).profile;
        assert!((found.usable[1].level.m() - 50.0).abs() < 1e-9);
        assert_eq!(found.sights_differ.len(), 1);
        assert_eq!(found.sights_differ[0].0, 3);
    }

    #[test]
    fn a_pipe_may_stand_upright() {
        let mut book = line(vec![
            leg(2, SurveyWay::Level, "10", "90", ""),
            leg(3, SurveyWay::Angle, "5", "-90", ""),
            leg(4, SurveyWay::Level, "0", "80", ""),
            leg(5, SurveyWay::Staff, "3", "0.2", "3.2"),
        ]);
        book.line.stations[3].distance_kind = Some(DistanceKind::Horizontal);
        let found = resolve(&book);
        assert_eq!(found.troubles, vec![]);
        let end = found.profile.usable.last().unwrap();
        assert!(end.horizontal.m() < 1e-6, "{end:?}");
        assert!((end.chainage.m() - 23.0).abs() < 1e-9);
        assert!((end.level.m() - 77.0).abs() < 1e-9);
        // It goes straight on.
        assert!(
            found
                .turns
                .iter()
                .all(|t| t.deflection_deg.clone().unwrap() < 1e-3)
        );
    }

    #[test]
    fn a_horizontal_distance_has_no_upright_sight() {
        let mut book = line(vec![leg(2, SurveyWay::Angle, "10", "-90", "")]);
        book.line.distance_kind = DistanceKind::Horizontal;
        assert_eq!(
            resolve(&book).profile.broken,
            Some(Gap::Wrong(Trouble::StationUpright { station: 2 }))
        );
    }

    // An error of 0.6 m over 20 m and 40 m of legs: 0.2 m and 0.4 m.
    #[test]
    fn a_closing_error_is_shown_and_on_wish_spread_by_length() {
        let mut book = line(vec![
            leg(2, SurveyWay::Level, "50", "80", ""),
            leg(3, SurveyWay::Staff, "20", "0", "5.2"),
            leg(4, SurveyWay::Staff, "40", "0", "10.4"),
        ]);
        book.line.known_fall_m = typed(Field::KnownFall, "35");
        let found = resolve(&book).profile;
        let closing = found.closing.unwrap().unwrap();
        assert!((closing.error.m() - 0.6).abs() < 1e-9);
        assert_eq!(closing.spread_over, None);
        assert!((found.last_level.unwrap().m() - 64.4).abs() < 1e-9);

        book.line.spread_error = true;
        let found = resolve(&book).profile;
        let closing = found.closing.clone().unwrap().unwrap();
        assert!((closing.spread_over.unwrap().m() - 60.0).abs() < 1e-9);
        for (place, expected) in [(1, 80.0), (2, 75.0), (3, 65.0)] {
            let level = found.usable[place].level.m();
            assert!((level - expected).abs() < 1e-9, "{place}: {level}");
        }
        assert!((found.pipe_length.unwrap().m() - 110.0).abs() < 1e-9);
    }

    #[test]
    fn an_error_is_spread_over_no_level_that_was_entered() {
        let mut book = line(vec![
            leg(2, SurveyWay::Staff, "20", "0", "5"),
            leg(3, SurveyWay::Level, "50", "80", ""),
        ]);
        book.line.known_fall_m = typed(Field::KnownFall, "21");
        book.line.spread_error = true;
        let found = resolve(&book);
        assert_eq!(found.troubles, vec![Trouble::NothingToSpread]);
        assert!((found.profile.last_level.unwrap().m() - 80.0).abs() < 1e-12);
        assert_eq!(found.profile.broken, None);
    }

    #[test]
    fn a_leg_of_another_kind_counts_from_the_station_before() {
        let mut book = line(vec![
            leg(2, SurveyWay::Level, "50", "60", ""),
            leg(3, SurveyWay::Level, "40", "30", ""),
            leg(4, SurveyWay::Level, "150", "30", ""),
        ]);
        book.line.reckoning = Reckoning::FromStart;
        book.line.stations[2].distance_kind = Some(DistanceKind::Horizontal);
        let found = resolve(&book).profile;
        let chainages: Vec<f64> = found.usable.iter().map(|s| s.chainage.m()).collect();
        for (got, expected) in chainages.iter().zip([0.0, 50.0, 100.0, 150.0]) {
            assert!((got - expected).abs() < 1e-9, "{chainages:?}");
        }
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
