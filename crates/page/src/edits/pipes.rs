//! The choice of pipe, and pipes of the user's own.

use super::free_id;
use workbook::Book;
use workbook::book::{Id, OwnPipeEntry};
pub use workbook::edit::drop_unused_copies as drop_unused;
use workbook::edit::keep_copy;
use workbook::pipe_copy::differs;

/// The name a stretch calls a pipe of the user's own by.
#[must_use]
pub fn own_name(id: Id) -> String {
    format!("own/{id}")
}

/// Lays this pipe in one stretch, or in all of them, and keeps a copy of it in
/// the book. A copy the book has already stands, whatever the catalogue says
/// now. Returns whether the pipe is known.
pub fn choose(book: &mut Book, pipe: &str, stretch: Option<Id>) -> bool {
    if !keep_copy(book, pipe) {
        return false;
    }
    for s in &mut book.line.stretches {
        if stretch.is_none_or(|id| id == s.id) {
            s.pipe = Some(pipe.to_owned());
        }
    }
    drop_unused(book);
    true
}

/// Takes the catalogue's present figures for a pipe the book has a copy of.
/// Returns whether anything changed.
pub fn take_catalogue(book: &mut Book, pipe: &str) -> bool {
    for copy in &mut book.pipes {
        if copy.id == pipe
            && let Some(now) = differs(copy)
        {
            *copy = now;
            return true;
        }
    }
    false
}

/// Adds a pipe of the user's own. Returns its number.
pub fn add_own(book: &mut Book) -> Id {
    let id = free_id(book.own_pipes.iter().map(|p| p.id));
    book.own_pipes.push(OwnPipeEntry {
        id,
        ..OwnPipeEntry::default()
    });
    id
}

/// Takes a pipe of the user's own out; stretches laid with it have none then.
/// Returns whether there was one.
pub fn remove_own(book: &mut Book, id: Id) -> bool {
    let before = book.own_pipes.len();
    book.own_pipes.retain(|p| p.id != id);
    let name = own_name(id);
    for s in &mut book.line.stretches {
        if s.pipe.as_deref() == Some(&name) {
            s.pipe = None;
        }
    }
    book.own_pipes.len() < before
}

#[cfg(test)]
mod tests {
    use super::super::stations;
    use super::super::stretches::split_at;
    use super::*;

    #[test]
    fn a_chosen_pipe_is_copied_once_and_dropped_when_unused() {
        let mut book = Book::new("k");
        let mid = stations::insert_after(&mut book, 1).unwrap();
        let second = split_at(&mut book, mid).unwrap();
        let all = &pipes::catalogue().pipes;
        let (Some(a), Some(b)) = (all.first(), all.last()) else {
            return;
        };
        assert!(choose(&mut book, &a.id, None));
        assert_eq!(book.pipes.len(), 1);
        assert!(choose(&mut book, &b.id, Some(second)));
        assert_eq!(book.pipes.len(), 2);
        assert!(choose(&mut book, &a.id, Some(second)));
        assert_eq!(book.pipes.len(), 1);
        assert!(!choose(&mut book, "no/such/pipe", None));
    }

    #[test]
    fn a_stretch_loses_an_own_pipe_taken_out() {
        let mut book = Book::new("k");
        let id = add_own(&mut book);
        assert!(choose(&mut book, &own_name(id), None));
        assert!(book.pipes.is_empty());
        assert!(remove_own(&mut book, id));
        assert_eq!(book.line.stretches[0].pipe, None);
    }

    #[test]
    fn a_copy_stands_until_the_catalogue_is_taken() {
        let Some(pipe) = pipes::catalogue().pipes.first() else {
            return;
        };
        let mut book = Book::new("k");
        choose(&mut book, &pipe.id, None);
        book.pipes[0].wall_min_m *= 1.01;
        let own = book.pipes[0].clone();
        choose(&mut book, &pipe.id, None);
        assert_eq!(book.pipes[0], own);
        assert!(take_catalogue(&mut book, &pipe.id));
        assert_ne!(book.pipes[0], own);
        assert!(!take_catalogue(&mut book, &pipe.id));
    }
}
