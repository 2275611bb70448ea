//! The stations, each on its own: on a long line a key in one row must not
//! wake the others.

use leptos::prelude::*;
use std::collections::HashMap;
use words::Words;
use workbook::book::{Id, Station};
use workbook::figure::{Place, Trouble};
use workbook::{Book, Field};

/// A station, where it stands, and what is wrong with it.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct StationRow {
    /// The words it is told in; none before the page has any. They are kept
    /// here because a signal that thousands listen to is slow to leave.
    pub words: Option<Words>,
    /// Its place in the line, from 0; none once it is gone.
    pub place: Option<usize>,
    /// The station.
    pub station: Station,
    /// What is wrong with it or with one of its entries.
    pub troubles: Vec<Trouble>,
}

/// The station an entry belongs to, if it is a station's.
#[must_use]
pub fn station_of(field: Field) -> Option<Id> {
    match field {
        Field::StationDistance(id)
        | Field::StationLevel(id)
        | Field::StationForeSight(id)
        | Field::StationBackSight(id)
        | Field::StationStaffBack(id)
        | Field::StationStaffFore(id)
        | Field::StationTurn(id) => Some(id),
        _ => None,
    }
}

fn place_of(trouble: &Trouble) -> Option<Id> {
    match trouble.place() {
        Place::Station(id) => Some(id),
        Place::Field(field) => station_of(field),
        _ => None,
    }
}

/// A signal for each station that anyone has asked for.
#[derive(Debug, Default)]
pub struct StationRows(HashMap<Id, ArcRwSignal<StationRow>>);

impl StationRows {
    /// The signal of a station.
    pub fn row(
        &mut self,
        words: Words,
        book: &Book,
        troubles: &[Trouble],
        id: Id,
    ) -> ArcRwSignal<StationRow> {
        let make = || {
            let place = book.line.stations.iter().position(|s| s.id == id);
            let station = place.and_then(|p| book.line.stations.get(p));
            ArcRwSignal::new(StationRow {
                words: Some(words),
                place,
                station: station.cloned().unwrap_or_default(),
                troubles: Self::troubles(troubles).remove(&id).unwrap_or_default(),
            })
        };
        self.0.entry(id).or_insert_with(make).clone()
    }

    fn troubles(all: &[Trouble]) -> HashMap<Id, Vec<Trouble>> {
        let mut by_station: HashMap<Id, Vec<Trouble>> = HashMap::new();
        for trouble in all {
            if let Some(id) = place_of(trouble) {
                by_station.entry(id).or_default().push(trouble.clone());
            }
        }
        by_station
    }

    /// Brings every signal up to a book and its troubles; those of stations
    /// that did not change stay asleep, and those of stations that are gone
    /// are let go.
    pub fn follow(&mut self, words: Words, book: &Book, troubles: &[Trouble]) {
        if self.0.is_empty() {
            return;
        }
        let mut troubles = Self::troubles(troubles);
        let mut here: HashMap<Id, (usize, &Station)> =
            HashMap::with_capacity(book.line.stations.len());
        for (place, station) in book.line.stations.iter().enumerate() {
            here.insert(station.id, (place, station));
        }
        self.0.retain(|id, row| {
            let Some((place, station)) = here.get(id) else {
                return false;
            };
            let troubles = troubles.remove(id).unwrap_or_default();
            let stands = row.with_untracked(|was| {
                was.words == Some(words)
                    && was.place == Some(*place)
                    && was.station == **station
                    && was.troubles == troubles
            });
            if !stands {
                row.set(StationRow {
                    words: Some(words),
                    place: Some(*place),
                    station: (*station).clone(),
                    troubles,
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
    use words::language::Language;
    use workbook::units::UnitSystem;

    fn words() -> Words {
        Words::new(Language::English, UnitSystem::Metric)
    }

    #[test]
    fn each_signal_follows_its_station() {
        let mut book = Book::new("k");
        let third = stations::add(&mut book);
        let mut rows = StationRows::default();
        let (first, last) = (
            rows.row(words(), &book, &[], 1),
            rows.row(words(), &book, &[], third),
        );
        assert_eq!(first.get_untracked().place, Some(0));
        assert_eq!(last.get_untracked().place, Some(2));
        book.line.stations[2].name = "foot".to_owned();
        stations::insert_before(&mut book, 1);
        let wrong = Trouble::StationRepeated { station: third };
        rows.follow(words(), &book, std::slice::from_ref(&wrong));
        assert_eq!(first.get_untracked().place, Some(1));
        assert_eq!(last.get_untracked().station.name, "foot");
        assert_eq!(last.get_untracked().troubles, [wrong]);
        assert_eq!(first.get_untracked().troubles, []);
    }

    #[test]
    fn a_station_that_is_gone_is_let_go() {
        let mut book = Book::new("k");
        let third = stations::add(&mut book);
        let mut rows = StationRows::default();
        rows.row(words(), &book, &[], third);
        stations::remove(&mut book, third);
        rows.follow(words(), &book, &[]);
        assert!(rows.0.is_empty());
        assert_eq!(
            rows.row(words(), &book, &[], third).get_untracked().place,
            None
        );
    }
}
