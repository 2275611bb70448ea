//! Stations of the line.

use super::{free_id, place_of};
use workbook::Book;
use workbook::book::{Id, Station, SurveyWay};

/// Adds an empty station at the foot of the line. Returns its number.
pub fn add(book: &mut Book) -> Id {
    insert_at(book, book.line.stations.len())
}

/// How the next station is levelled unless told otherwise: as the last one.
#[must_use]
pub fn usual_way(book: &Book) -> SurveyWay {
    book.line
        .stations
        .last()
        .map_or(SurveyWay::Level, |s| s.way)
}

/// Whether anything was typed of how a station lies in height.
fn is_levelled(station: &Station) -> bool {
    [
        &station.level_m,
        &station.fore_sight_deg,
        &station.back_sight_deg,
        &station.staff_back_m,
        &station.staff_fore_m,
    ]
    .into_iter()
    .any(|entry| !entry.is_empty())
}

/// Levels every station below the first in this way, but for those where
/// something was typed already.
pub fn level_by(book: &mut Book, way: SurveyWay) {
    for station in book.line.stations.iter_mut().skip(1) {
        if !is_levelled(station) {
            station.way = way;
        }
    }
}

/// Inserts an empty station above this one. Returns its number.
pub fn insert_before(book: &mut Book, station: Id) -> Option<Id> {
    let place = place_of(book, station)?;
    Some(insert_at(book, place))
}

/// Inserts an empty station below this one. Returns its number.
pub fn insert_after(book: &mut Book, station: Id) -> Option<Id> {
    let place = place_of(book, station)?;
    Some(insert_at(book, place + 1))
}

fn insert_at(book: &mut Book, place: usize) -> Id {
    let id = free_id(book.line.stations.iter().map(|s| s.id));
    let place = place.min(book.line.stations.len());
    // Levelled as the one above; the first of a line has a level.
    let (way, distance_kind) = place
        .checked_sub(1)
        .and_then(|above| book.line.stations.get(above))
        .map_or((SurveyWay::Level, None), |s| (s.way, s.distance_kind));
    book.line.stations.insert(
        place,
        Station {
            id,
            way,
            distance_kind,
            ..Station::default()
        },
    );
    if place == 0
        && let Some(first) = book.line.stretches.first_mut()
    {
        first.from_station = id;
    }
    id
}

/// Takes a station out. What begins or sits there moves to the next station
/// down (at the foot, to the one above); a stretch left without length goes.
/// A line keeps two stations. Returns whether it was taken out.
pub fn remove(book: &mut Book, station: Id) -> bool {
    let Some(place) = place_of(book, station) else {
        return false;
    };
    if book.line.stations.len() <= 2 {
        return false;
    }
    book.line.stations.remove(place);
    let heir_place = place.min(book.line.stations.len() - 1);
    let heir = book.line.stations[heir_place].id;
    for s in &mut book.line.stretches {
        if s.from_station == station {
            s.from_station = heir;
        }
    }
    for f in &mut book.line.fittings {
        if f.at_station == station {
            f.at_station = heir;
        }
    }
    // A stretch that now begins where another does, or at the foot, has no
    // length left. Of two at one place the later one lies there.
    let last = book.line.stations.last().map(|s| s.id);
    let starts: Vec<Id> = book.line.stretches.iter().map(|s| s.from_station).collect();
    let mut i = 0;
    book.line.stretches.retain(|s| {
        let next_same = starts.get(i + 1) == Some(&s.from_station);
        i += 1;
        !next_same && Some(s.from_station) != last
    });
    true
}

#[cfg(test)]
mod tests {
    use super::super::check::is_whole;
    use super::super::{fittings, stretches};
    use super::*;
    use proptest::prelude::*;
    use workbook::book::FittingKind;

    #[test]
    fn a_new_head_of_the_line_begins_the_first_stretch() {
        let mut book = Book::new("k");
        let id = insert_before(&mut book, 1).unwrap();
        assert_eq!(book.line.stretches[0].from_station, id);
        assert!(is_whole(&book));
    }

    #[test]
    fn what_sat_at_a_station_moves_on() {
        let mut book = Book::new("k");
        let (a, b) = (add(&mut book), add(&mut book));
        stretches::split_at(&mut book, a).unwrap();
        let f = fittings::add(&mut book, a, FittingKind::Bend).unwrap();
        assert!(remove(&mut book, a));
        // The last station may begin no stretch, so the split is gone.
        assert_eq!(book.line.stretches.len(), 1);
        assert_eq!(book.line.fittings[0].id, f);
        assert_eq!(book.line.fittings[0].at_station, b);
        assert!(is_whole(&book));
    }

    #[test]
    fn a_way_of_levelling_goes_on_down_the_line_and_spares_what_was_typed() {
        let mut book = Book::new("k");
        let typed = add(&mut book);
        let entry = workbook::Entry::typed(
            "12",
            "m",
            workbook::units::Kind::Level,
            workbook::reading::DecimalMark::Point,
        );
        book.line.stations[2].level_m = entry;
        let empty = add(&mut book);
        level_by(&mut book, SurveyWay::Staff);
        let way = |book: &Book, id| {
            let station = book.line.stations.iter().find(|s| s.id == id);
            station.map(|s| s.way)
        };
        assert_eq!(way(&book, 1), Some(SurveyWay::Level));
        assert_eq!(way(&book, typed), Some(SurveyWay::Level));
        assert_eq!(way(&book, empty), Some(SurveyWay::Staff));
        assert_eq!(usual_way(&book), SurveyWay::Staff);
        let next = add(&mut book);
        assert_eq!(way(&book, next), Some(SurveyWay::Staff));
        let head = insert_before(&mut book, 1).unwrap();
        assert_eq!(way(&book, head), Some(SurveyWay::Level));
    }

    #[test]
    fn two_stations_stay() {
        let mut book = Book::new("k");
        assert!(!remove(&mut book, 1));
    }

    proptest! {
        #[test]
        fn any_run_of_edits_leaves_the_book_whole(ops in proptest::collection::vec((0u8..7, 0usize..50), 0..80)) {
            let mut book = Book::new("k");
            for (op, n) in ops {
                let station = book.line.stations[n % book.line.stations.len()].id;
                let stretch = book.line.stretches[n % book.line.stretches.len()].id;
                match op {
                    0 => { add(&mut book); }
                    1 => { insert_before(&mut book, station); }
                    2 => { insert_after(&mut book, station); }
                    3 => { remove(&mut book, station); }
                    4 => { stretches::split_at(&mut book, station); }
                    5 => { stretches::remove(&mut book, stretch); }
                    _ => { fittings::add(&mut book, station, FittingKind::Bend); stretches::start_at(&mut book, stretch, station); }
                }
                prop_assert!(is_whole(&book));
            }
        }
    }
}
