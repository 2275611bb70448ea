//! Rows of the valve's own table.

use workbook::Book;
use workbook::book::ValveRow;

/// Adds an empty row at the end.
pub fn add(book: &mut Book) {
    book.surge.valve.push(ValveRow::default());
}

/// Takes a row out. Returns whether there was one.
pub fn remove(book: &mut Book, row: usize) -> bool {
    let there = row < book.surge.valve.len();
    if there {
        book.surge.valve.remove(row);
    }
    there
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_row_comes_and_goes() {
        let mut book = Book::new("k");
        add(&mut book);
        add(&mut book);
        book.surge.valve[1].stroke_share.text = "50".into();
        assert!(remove(&mut book, 0));
        assert_eq!(book.surge.valve.len(), 1);
        assert_eq!(book.surge.valve[0].stroke_share.text, "50");
        assert!(!remove(&mut book, 1));
    }
}
