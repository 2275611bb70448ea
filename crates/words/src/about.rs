//! Words about one book: places named as the user knows them, by name and by
//! their number along the line.

use crate::Words;
use crate::name::lower;
use crate::text::{self, Key};
use workbook::book::{Book, FittingKind, Id};
use workbook::field::Field;
use workbook::figure::{Gap, Lack, Place};
use workbook::next::Next;

/// Words about a book; made by [`Words::about`].
#[derive(Debug, Clone, Copy)]
pub struct About<'a> {
    /// How to speak.
    pub words: Words,
    /// The book spoken of.
    pub book: &'a Book,
}

impl Words {
    /// Words about this book.
    #[must_use]
    pub fn about(self, book: &Book) -> About<'_> {
        About { words: self, book }
    }
}

/// The number a row has in its list, from 1; where it is no longer there, its
/// own number.
fn place_in(ids: impl Iterator<Item = Id>, id: Id) -> usize {
    let mut ids = ids;
    ids.position(|i| i == id)
        .map_or(usize::try_from(id).unwrap_or(usize::MAX), |i| i + 1)
}

impl Words {
    /// "station 3 (Spring box)", by its number, from 1, and its name, if any.
    #[must_use]
    pub fn station(self, number: usize, name: &str) -> String {
        let number = self.count(number);
        match name.trim() {
            "" => text::place_station(self, &number),
            name => text::place_station_named(self, &number, name),
        }
    }
}

impl About<'_> {
    /// "station 3 (Spring box)".
    #[must_use]
    pub fn station(self, id: Id) -> String {
        let stations = &self.book.line.stations;
        let number = place_in(stations.iter().map(|s| s.id), id);
        let name = stations
            .iter()
            .find(|s| s.id == id)
            .map(|s| s.name.as_str());
        self.words.station(number, name.unwrap_or_default())
    }

    /// Every station of the line, each as [`About::station`] says it, without
    /// looking for each.
    pub fn every_station(self) -> impl Iterator<Item = (Id, String)> {
        let stations = self.book.line.stations.iter().enumerate();
        stations.map(move |(place, s)| (s.id, self.words.station(place + 1, &s.name)))
    }

    /// Several stations, "station 1, station 2 (Saddle)".
    #[must_use]
    pub fn stations(self, ids: &[Id]) -> String {
        let names: Vec<String> = ids.iter().map(|id| self.station(*id)).collect();
        names.join(", ")
    }

    /// "stretch 2".
    #[must_use]
    pub fn stretch(self, id: Id) -> String {
        let stretches = self.book.line.stretches.iter().map(|s| s.id);
        text::place_stretch(self.words, &self.words.count(place_in(stretches, id)))
    }

    /// Several stretches, "stretch 1, stretch 2".
    #[must_use]
    pub fn stretches(self, ids: &[Id]) -> String {
        let names: Vec<String> = ids.iter().map(|id| self.stretch(*id)).collect();
        names.join(", ")
    }

    /// "gate valve at station 4".
    #[must_use]
    pub fn fitting(self, id: Id) -> String {
        let Some(fitting) = self.book.line.fittings.iter().find(|f| f.id == id) else {
            return self.words.say(Key::PLACE_FITTING_GONE).to_owned();
        };
        let note = fitting.note.trim();
        let name = if fitting.kind == FittingKind::Own && !note.is_empty() {
            note.to_owned()
        } else {
            lower(self.words.name(fitting.kind))
        };
        text::place_fitting(self.words, &name, &self.station(fitting.at_station))
    }

    /// "own pipe “Old mill pipe”".
    #[must_use]
    pub fn own_pipe(self, id: Id) -> String {
        let pipes = &self.book.own_pipes;
        match pipes.iter().find(|p| p.id == id).map(|p| p.name.trim()) {
            Some(name) if !name.is_empty() => text::place_own_pipe_named(self.words, name),
            _ => {
                let number = place_in(pipes.iter().map(|p| p.id), id);
                text::place_own_pipe(self.words, &self.words.count(number))
            }
        }
    }

    /// A pipe by the name it is known by: the short label of the book's copy
    /// or of the catalogue, an own pipe's name, or else its id.
    #[must_use]
    pub fn pipe(self, id: &str) -> String {
        if let Some(own) = id.strip_prefix("own/").and_then(|n| n.parse().ok()) {
            return self.own_pipe(own);
        }
        if let Some(copy) = self.book.pipes.iter().find(|p| p.id == id) {
            return copy.short.clone();
        }
        pipes::catalogue()
            .find(id)
            .map_or_else(|| id.to_owned(), |p| p.short.clone())
    }

    /// An entry with its place: "Level, station 3 (Spring box)".
    #[must_use]
    pub fn field(self, field: Field) -> String {
        let label = self.words.field_label(field);
        match self.place_of(field) {
            Some(place) => text::field_at(self.words, label, &place),
            None => label.to_owned(),
        }
    }

    fn place_of(self, field: Field) -> Option<String> {
        Some(match field {
            Field::StationDistance(id)
            | Field::StationLevel(id)
            | Field::StationForeSight(id)
            | Field::StationBackSight(id)
            | Field::StationStaffBack(id)
            | Field::StationStaffFore(id)
            | Field::StationTurn(id) => self.station(id),
            Field::StretchCover(id) | Field::SurgeAllowed(id) => self.stretch(id),
            Field::ValveStroke(row) | Field::ValveOpen(row) => {
                text::place_valve_row(self.words, &self.words.count(row + 1))
            }
            Field::FittingCount(id)
            | Field::FittingAngle(id)
            | Field::FittingRadius(id)
            | Field::FittingOpening(id)
            | Field::RackWidth(id)
            | Field::RackLength(id)
            | Field::RackBar(id)
            | Field::RackGap(id)
            | Field::RackClogged(id)
            | Field::FittingK(id)
            | Field::FittingRating(id) => self.fitting(id),
            Field::Own(id, _) => self.own_pipe(id),
            Field::Price(i) => self.pipe(&self.book.prices.pipes.get(i)?.pipe),
            _ => return None,
        })
    }

    /// Where something is missing or wrong, for the middle of a sentence.
    #[must_use]
    pub fn place(self, place: &Place) -> String {
        match place {
            Place::Field(field) => lower(&self.field(*field)),
            Place::Station(id) => self.station(*id),
            Place::Stretch(id) => self.stretch(*id),
            Place::Fitting(id) => self.fitting(*id),
            Place::OwnPipe(id) => self.own_pipe(*id),
            Place::Pipe(id) => text::place_pipe(self.words, &self.pipe(id)),
            Place::Line => self.words.say(Key::PLACE_LINE).to_owned(),
            Place::Surge => self.words.say(Key::PLACE_SURGE).to_owned(),
            Place::Jets => self.words.say(Key::PLACE_JETS).to_owned(),
        }
    }

    /// The one line that names the next entry needed.
    #[must_use]
    pub fn next(self, next: &Next) -> String {
        match &next.why {
            Gap::Unsettled(Lack::Pipe(id)) => text::next_pipe(self.words, &self.stretch(*id)),
            Gap::Unsettled(_) => text::next_entry(self.words, &self.place(&next.place)),
            Gap::Wrong(_) => text::next_mend(self.words, &self.place(&next.place)),
        }
    }
}
