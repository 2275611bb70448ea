//! Edits of the book's lists, each leaving the book whole: no stretch or
//! fitting ever names a station that is gone.
//!
//! Plain functions on [`Book`], so that they are tested without a page.

pub mod fittings;
pub mod pipes;
pub mod stations;
pub mod stretches;
pub mod valve;

use workbook::edit::{free_id, place_of};

#[cfg(test)]
pub(crate) mod check {
    use super::place_of;
    use workbook::Book;

    /// What every edit must leave as it found it.
    pub(crate) fn is_whole(book: &Book) -> bool {
        let starts: Option<Vec<usize>> = book
            .line
            .stretches
            .iter()
            .map(|s| place_of(book, s.from_station))
            .collect();
        let Some(starts) = starts else { return false };
        let last = book.line.stations.len() - 1;
        starts.first() == Some(&0)
            && starts.windows(2).all(|w| w[0] < w[1])
            && starts.iter().all(|s| *s < last)
            && book
                .line
                .fittings
                .iter()
                .all(|f| place_of(book, f.at_station).is_some())
            && workbook::format::read(workbook::format::write(book).unwrap().as_bytes()).is_ok()
    }
}
