//! The stations, each on its own: on a long line a key in one row must not
//! wake the others.

use leptos::prelude::*;
use std::collections::HashMap;
use workbook::Book;
use workbook::book::{Id, Station};

/// A station and where it stands.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct StationRow {
    /// Its place in the line, from 0; none once it is gone.
    pub place: Option<usize>,
    /// The station.
    pub station: Station,
}

/// A signal for each station that anyone has asked for.
#[derive(Debug, Default)]
pub struct StationRows(HashMap<Id, ArcRwSignal<StationRow>>);

impl StationRows {
    /// The signal of a station.
    pub fn row(&mut self, book: &Book, id: Id) -> ArcRwSignal<StationRow> {
        self.0
            .entry(id)
            .or_insert_with(|| {
                let found = book.line.stations.iter().enumerate();
                let row = found.into_iter().find(|(_, s)| s.id == id);
                ArcRwSignal::new(row.map_or_else(StationRow::default, |(place, station)| {
                    StationRow {
                        place: Some(place),
                        station: station.clone(),
                    }
                }))
            })
            .clone()
    }

    /// Brings every signal up to a book; those of stations that did not change
    /// stay asleep, and those of stations that are gone are let go.
    pub fn follow(&mut self, book: &Book) {
        if self.0.is_empty() {
            return;
        }
        let mut here: HashMap<Id, (usize, &Station)> =
            HashMap::with_capacity(book.line.stations.len());
        for (place, station) in book.line.stations.iter().enumerate() {
            here.insert(station.id, (place, station));
        }
        self.0.retain(|id, row| {
            let Some((place, station)) = here.get(id) else {
                return false;
            };
            let stands =
                row.with_untracked(|was| was.place == Some(*place) && was.station == **station);
            if !stands {
                row.set(StationRow {
                    place: Some(*place),
                    station: (*station).clone(),
                });
            }
            true
        });
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::edits::stations;

    #[test]
    fn each_signal_follows_its_station() {
        let mut book = Book::new("k");
        let third = stations::add(&mut book);
        let mut rows = StationRows::default();
        let (first, last) = (rows.row(&book, 1), rows.row(&book, third));
        assert_eq!(first.get_untracked().place, Some(0));
        assert_eq!(last.get_untracked().place, Some(2));
        book.line.stations[2].name = "foot".to_owned();
        stations::insert_before(&mut book, 1);
        rows.follow(&book);
        assert_eq!(first.get_untracked().place, Some(1));
        assert_eq!(last.get_untracked().station.name, "foot");
    }

    #[test]
    fn a_station_that_is_gone_is_let_go() {
        let mut book = Book::new("k");
        let third = stations::add(&mut book);
        let mut rows = StationRows::default();
        rows.row(&book, third);
        stations::remove(&mut book, third);
        rows.follow(&book);
        assert!(rows.0.is_empty());
        assert_eq!(
            rows.row(&book, third).get_untracked(),
            StationRow::default()
        );
    }
}
