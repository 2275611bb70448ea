//! Fittings on the line.

use super::{free_id, place_of};
use workbook::Book;
use workbook::book::{FittingEntry, FittingKind, Id};

/// Every kind of fitting, in the order of the line.
pub const KINDS: [FittingKind; 13] = [
    FittingKind::TrashRack,
    FittingKind::EntranceSharp,
    FittingKind::EntranceRounded,
    FittingKind::EntranceBellmouth,
    FittingKind::EntranceProjecting,
    FittingKind::Bend,
    FittingKind::Mitre,
    FittingKind::GateValve,
    FittingKind::BallValve,
    FittingKind::ButterflyValve,
    FittingKind::TeeRun,
    FittingKind::TeeBranch,
    FittingKind::Own,
];

/// Adds a fitting at a station. Returns its number.
pub fn add(book: &mut Book, station: Id, kind: FittingKind) -> Option<Id> {
    place_of(book, station)?;
    let id = free_id(book.line.fittings.iter().map(|f| f.id));
    book.line.fittings.push(FittingEntry {
        id,
        at_station: station,
        kind,
        ..FittingEntry::default()
    });
    Some(id)
}

/// Takes a fitting out. Returns whether there was one.
pub fn remove(book: &mut Book, fitting: Id) -> bool {
    let before = book.line.fittings.len();
    book.line.fittings.retain(|f| f.id != fitting);
    book.line.fittings.len() < before
}

/// The fitting of this number, to be changed.
pub fn find_mut(book: &mut Book, fitting: Id) -> Option<&mut FittingEntry> {
    book.line.fittings.iter_mut().find(|f| f.id == fitting)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_fitting_comes_and_goes() {
        let mut book = Book::new("k");
        assert_eq!(add(&mut book, 9, FittingKind::Bend), None);
        let id = add(&mut book, 1, FittingKind::Bend).unwrap();
        assert_eq!(find_mut(&mut book, id).unwrap().at_station, 1);
        assert!(remove(&mut book, id));
        assert!(!remove(&mut book, id));
    }
}
