//! Stretches of the line.

use super::place_of;
use workbook::Book;
use workbook::book::Id;
pub use workbook::edit::{may_split_at, split_at};

/// Takes a stretch out; the one above runs on in its place, and at the head
/// the one below. A line keeps one stretch. Returns whether it was taken out.
pub fn remove(book: &mut Book, stretch: Id) -> bool {
    if book.line.stretches.len() < 2 {
        return false;
    }
    let Some(place) = book.line.stretches.iter().position(|s| s.id == stretch) else {
        return false;
    };
    let taken = book.line.stretches.remove(place);
    if place == 0 {
        book.line.stretches[0].from_station = taken.from_station;
    }
    super::pipes::drop_unused(book);
    true
}

/// The stations a stretch may begin at: below where the one above begins,
/// above where the next does. The first stretch begins at the first station.
#[must_use]
pub fn starts_for(book: &Book, stretch: Id) -> Vec<Id> {
    let Some(place) = book.line.stretches.iter().position(|s| s.id == stretch) else {
        return Vec::new();
    };
    let start = |i: usize| {
        book.line
            .stretches
            .get(i)
            .and_then(|s| place_of(book, s.from_station))
    };
    if place == 0 {
        return book
            .line
            .stations
            .first()
            .map(|s| s.id)
            .into_iter()
            .collect();
    }
    let above = start(place - 1).unwrap_or(0);
    let below = start(place + 1).unwrap_or(book.line.stations.len().saturating_sub(1));
    let mut all = Vec::new();
    for (i, s) in book.line.stations.iter().enumerate() {
        if i > above && i < below {
            all.push(s.id);
        }
    }
    all
}

/// Moves the start of a stretch, where it may begin there. Returns whether it
/// was moved.
pub fn start_at(book: &mut Book, stretch: Id, station: Id) -> bool {
    if !starts_for(book, stretch).contains(&station) {
        return false;
    }
    if let Some(s) = book.line.stretches.iter_mut().find(|s| s.id == stretch) {
        s.from_station = station;
        return true;
    }
    false
}

/// The stretch that runs on from this station; at the foot, the last one.
#[must_use]
pub fn at_station(book: &Book, station: Id) -> Option<Id> {
    let place = place_of(book, station)?;
    book.line
        .stretches
        .iter()
        .rfind(|s| place_of(book, s.from_station).is_some_and(|p| p <= place))
        .map(|s| s.id)
}

#[cfg(test)]
mod tests {
    use super::super::check::is_whole;
    use super::super::stations;
    use super::*;

    fn four() -> Book {
        let mut book = Book::new("k");
        stations::add(&mut book);
        stations::add(&mut book);
        book
    }

    #[test]
    fn a_split_keeps_pipe_and_laying() {
        let mut book = four();
        book.line.stretches[0].pipe = Some("own/1".into());
        let id = split_at(&mut book, 2).unwrap();
        assert_eq!(book.line.stretches[1].id, id);
        assert_eq!(book.line.stretches[1].pipe.as_deref(), Some("own/1"));
        assert!(is_whole(&book));
        assert_eq!(split_at(&mut book, 2), None);
        assert_eq!(split_at(&mut book, 1), None);
        assert_eq!(split_at(&mut book, 4), None);
        assert_eq!(at_station(&book, 1), Some(1));
        assert_eq!(at_station(&book, 4), Some(id));
    }

    #[test]
    fn the_neighbour_runs_on_where_one_is_taken_out() {
        let mut book = four();
        let id = split_at(&mut book, 3).unwrap();
        assert!(remove(&mut book, 1));
        assert_eq!(book.line.stretches[0].id, id);
        assert!(is_whole(&book));
        assert!(!remove(&mut book, id));
    }

    #[test]
    fn a_start_moves_only_between_its_neighbours() {
        let mut book = four();
        let id = split_at(&mut book, 2).unwrap();
        assert_eq!(starts_for(&book, id), vec![2, 3]);
        assert!(start_at(&mut book, id, 3));
        assert!(!start_at(&mut book, id, 4));
        assert!(!start_at(&mut book, 1, 2));
    }
}
