//! Edits of the book that the page and the studies share, each leaving the
//! book whole: no stretch ever names a station that is gone.

use crate::book::{Book, DistanceKind, Id, Reckoning, Station, StretchEntry, SurveyWay};
use crate::entry::Entry;
use crate::pipe_copy::PipeCopy;
use crate::reading::DecimalMark;
use crate::resolve::profile::{Profile, StationAt};
use crate::units::{Kind, UnitSystem};

/// A number no item of the list has.
#[must_use]
pub fn free_id(ids: impl Iterator<Item = Id>) -> Id {
    ids.max().unwrap_or(0).saturating_add(1)
}

/// The place of a station in the line.
#[must_use]
pub fn place_of(book: &Book, station: Id) -> Option<usize> {
    book.line.stations.iter().position(|s| s.id == station)
}

/// Whether a new stretch may begin at this station: within the line, where
/// none begins yet.
#[must_use]
pub fn may_split_at(book: &Book, station: Id) -> bool {
    let inside = place_of(book, station)
        .is_some_and(|place| place > 0 && place + 1 < book.line.stations.len());
    inside
        && book
            .line
            .stretches
            .iter()
            .all(|s| s.from_station != station)
}

/// Begins a new stretch at this station, laid and piped as the one it parts.
/// Returns its number.
pub fn split_at(book: &mut Book, station: Id) -> Option<Id> {
    if !may_split_at(book, station) {
        return None;
    }
    let place = place_of(book, station)?;
    let parted = book
        .line
        .stretches
        .iter()
        .rposition(|s| place_of(book, s.from_station).is_some_and(|p| p < place))?;
    let id = free_id(book.line.stretches.iter().map(|s| s.id));
    let mut stretch: StretchEntry = book.line.stretches[parted].clone();
    stretch.id = id;
    stretch.from_station = station;
    book.line.stretches.insert(parted + 1, stretch);
    Some(id)
}

/// Keeps a copy of a catalogue pipe in the book. A copy the book has already
/// stands, whatever the catalogue says now. Returns whether the pipe is known;
/// a pipe of the book's own needs no copy.
pub fn keep_copy(book: &mut Book, pipe: &str) -> bool {
    let own = crate::resolve::parts::own_id(pipe)
        .is_some_and(|id| book.own_pipes.iter().any(|p| p.id == id));
    if own || book.pipes.iter().any(|p| p.id == pipe) {
        return true;
    }
    let Some(found) = pipes::catalogue().find(pipe) else {
        return false;
    };
    book.pipes.push(PipeCopy::of(found));
    true
}

/// Drops the copies no stretch uses.
pub fn drop_unused_copies(book: &mut Book) {
    let Book { line, pipes, .. } = book;
    pipes.retain(|copy| {
        line.stretches
            .iter()
            .any(|s| s.pipe.as_deref() == Some(copy.id.as_str()))
    });
}

/// Inserts a station on the leg below the usable station `above`, `down` m
/// along the pipe from it, measured and levelled as the leg is, so that the
/// line stays where it was (to the millimetre). Returns its number; none where
/// there is no such leg or the place does not lie within it.
pub fn insert_on_leg(book: &mut Book, profile: &Profile, above: Id, down: f64) -> Option<Id> {
    let place = profile.place(above)?;
    let (a, b) = (profile.usable.get(place)?, profile.usable.get(place + 1)?);
    let along = (b.chainage - a.chainage).m();
    if !(down > 0.0 && down < along) {
        return None;
    }
    let row = *profile.rows.get(place + 1)?;
    let id = free_id(book.line.stations.iter().map(|s| s.id));
    let line = (book.line.distance_kind, book.line.reckoning, book.units);
    let below = book.line.stations.get_mut(row)?;
    let station = parted(below, id, (a, b), down / along, line);
    book.line.stations.insert(row, station);
    Some(id)
}

/// The station that parts the leg to `below` at this share of it.
fn parted(
    below: &mut Station,
    id: Id,
    (a, b): (&StationAt, &StationAt),
    share: f64,
    (kind, reckoning, units): (DistanceKind, Reckoning, UnitSystem),
) -> Station {
    let own_kind = below.distance_kind.unwrap_or(kind);
    let whole = match own_kind {
        DistanceKind::Slope => (b.chainage - a.chainage).m(),
        DistanceKind::Horizontal => (b.horizontal - a.horizontal).m(),
    };
    let mut station = Station {
        id,
        way: below.way,
        distance_kind: below.distance_kind,
        ..Station::default()
    };
    let running = own_kind == kind && reckoning == Reckoning::FromStart;
    let part = whole * share;
    if running {
        let typed = below.distance_m.value.unwrap_or(whole);
        station.distance_m = like(&below.distance_m, typed - (whole - part), 3, units);
    } else {
        station.distance_m = like(&below.distance_m, part, 3, units);
        let rest = whole - station.distance_m.value.unwrap_or(part);
        below.distance_m = like(&below.distance_m, rest, 3, units);
    }
    match below.way {
        SurveyWay::Level => {
            // On the way down between both, by the distance as it was rounded.
            let level = a.level.m() - (a.level - b.level).m() * share;
            let steep =
                own_kind == DistanceKind::Slope && (a.level - b.level).m().abs() > 0.99 * whole;
            // A pipe that stands must not come out longer than its leg.
            station.level_m = like_level(&below.level_m, level, if steep { 7 } else { 3 }, units);
        }
        SurveyWay::Angle => {
            station.fore_sight_deg = below.fore_sight_deg.clone();
            station.back_sight_deg = below.back_sight_deg.clone();
        }
        SurveyWay::Staff => {
            let back = below.staff_back_m.value.unwrap_or(0.0);
            let fore = below.staff_fore_m.value.unwrap_or(0.0);
            let here = like(&below.staff_back_m, back + (fore - back) * share, 4, units);
            station.staff_back_m = below.staff_back_m.clone();
            station.staff_fore_m = here.clone();
            below.staff_back_m = here;
        }
    }
    station
}

/// A distance in the unit of another entry, its doubt kept.
fn like(other: &Entry, value: f64, decimals: usize, units: UnitSystem) -> Entry {
    in_unit_of(other, value, decimals, Kind::Distance, units)
}

fn like_level(other: &Entry, value: f64, decimals: usize, units: UnitSystem) -> Entry {
    in_unit_of(other, value, decimals, Kind::Level, units)
}

fn in_unit_of(other: &Entry, value: f64, decimals: usize, kind: Kind, units: UnitSystem) -> Entry {
    let unit = kind.unit(&other.unit).unwrap_or_else(|| {
        kind.default_unit(if other.is_empty() {
            units
        } else {
            UnitSystem::Metric
        })
    });
    let plain = |x: f64, digits: usize| {
        let text = format!("{x:.digits$}");
        match text.contains('.') {
            true => text.trim_end_matches('0').trim_end_matches('.').to_owned(),
            false => text,
        }
    };
    let mut text = plain(unit.from_base(value), decimals);
    if let Some(doubt) = other.plus_minus {
        text = format!("{text} ± {}", plain(unit.from_base(doubt), 4));
    }
    Entry::typed(&text, unit.symbol, kind, DecimalMark::Point)
}

/// Sets the pipe of a stretch to one the book has, or takes a copy of.
pub(crate) fn lay(book: &mut Book, stretch: Id, pipe: &str) -> bool {
    if !keep_copy(book, pipe) {
        return false;
    }
    match book.line.stretches.iter_mut().find(|s| s.id == stretch) {
        Some(entry) => {
            entry.pipe = Some(pipe.to_owned());
            true
        }
        None => false,
    }
}
