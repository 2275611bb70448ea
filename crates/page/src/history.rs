//! Undo and redo: whole-book snapshots, the key strokes of one field taken
//! together.

use std::sync::Arc;
use workbook::{Book, Field};

/// Most steps kept. A book of forty stations is some kilobytes.
const MOST_STEPS: usize = 200;

/// What an edit touches, so that key strokes in one place undo together.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Touch {
    /// A number's text or unit.
    Field(Field),
    /// A plain text, by its place.
    Text(String),
    /// Anything done in one act: never taken together with another.
    Act,
}

/// The book as it stands, with the way back and forth.
#[derive(Debug, Clone)]
pub struct History {
    now: Arc<Book>,
    past: Vec<Arc<Book>>,
    future: Vec<Arc<Book>>,
    open: Option<Touch>,
}

impl History {
    /// Begins with this book and nothing to undo.
    #[must_use]
    pub fn new(book: Book) -> History {
        History {
            now: Arc::new(book),
            past: Vec::new(),
            future: Vec::new(),
            open: None,
        }
    }

    /// The book as it stands.
    #[must_use]
    pub fn now(&self) -> &Arc<Book> {
        &self.now
    }

    /// Whether there is a step to take back.
    #[must_use]
    pub fn can_undo(&self) -> bool {
        !self.past.is_empty()
    }

    /// Whether there is a step to take again.
    #[must_use]
    pub fn can_redo(&self) -> bool {
        !self.future.is_empty()
    }

    /// Changes the book. Returns whether anything changed; every step counts
    /// one in [`Book::revision`], which never falls.
    pub fn edit(&mut self, touch: Touch, change: impl FnOnce(&mut Book)) -> bool {
        let mut book = (*self.now).clone();
        change(&mut book);
        book.revision = self.now.revision;
        if book == *self.now {
            return false;
        }
        let joined = touch != Touch::Act && self.open.as_ref() == Some(&touch);
        if joined
            && self
                .past
                .last()
                .is_some_and(|p| same_but_revision(p, &book))
        {
            // Typed, and taken back by hand: no step is left to undo.
            self.past.pop();
            self.future.clear();
            self.open = None;
            self.now = Arc::new(book);
            return true;
        }
        if !joined {
            book.revision += 1;
            self.past.push(Arc::clone(&self.now));
            if self.past.len() > MOST_STEPS {
                self.past.remove(0);
            }
        }
        self.future.clear();
        self.open = Some(touch);
        self.now = Arc::new(book);
        true
    }

    /// Ends the joining of key strokes: the field was left.
    pub fn close(&mut self) {
        self.open = None;
    }

    /// Takes the last step back. Returns whether there was one.
    pub fn undo(&mut self) -> bool {
        let Some(earlier) = self.past.pop() else {
            return false;
        };
        self.future.push(Arc::clone(&self.now));
        self.step_to(&earlier);
        true
    }

    /// Takes a step again that was taken back. Returns whether there was one.
    pub fn redo(&mut self) -> bool {
        let Some(later) = self.future.pop() else {
            return false;
        };
        self.past.push(Arc::clone(&self.now));
        self.step_to(&later);
        true
    }

    /// Gives the book as it stands another key, without a step: two windows
    /// wrote to the old one.
    pub fn rename(&mut self, id: &str, name: &str) {
        let mut book = (*self.now).clone();
        book.id = id.to_owned();
        book.site.name = name.to_owned();
        book.revision += 1;
        self.now = Arc::new(book);
    }

    fn step_to(&mut self, book: &Arc<Book>) {
        let mut book = (**book).clone();
        // A later state, though its content is an earlier one's; and the key
        // is not part of what is undone.
        book.revision = self.now.revision + 1;
        book.id.clone_from(&self.now.id);
        self.now = Arc::new(book);
        self.open = None;
    }
}

/// Whether two states say the same, whichever came later.
fn same_but_revision(a: &Book, b: &Book) -> bool {
    let mut a = a.clone();
    a.revision = b.revision;
    a == *b
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use workbook::Entry;
    use workbook::reading::DecimalMark;

    fn type_flow(h: &mut History, text: &str) -> bool {
        h.edit(Touch::Field(Field::DesignFlow), |b| {
            b.stream.design_flow_m3_s =
                Entry::typed(text, "L/s", Field::DesignFlow.kind(), DecimalMark::Point);
        })
    }

    fn flow(h: &History) -> String {
        h.now().stream.design_flow_m3_s.text.clone()
    }

    #[test]
    fn key_strokes_of_one_visit_undo_together() {
        let mut h = History::new(Book::new("k"));
        type_flow(&mut h, "3");
        type_flow(&mut h, "38");
        h.close();
        type_flow(&mut h, "385");
        assert!(h.undo());
        assert_eq!(flow(&h), "38");
        assert!(h.undo());
        assert_eq!(flow(&h), "");
        assert!(!h.undo());
        assert!(h.redo() && h.redo() && !h.redo());
        assert_eq!(flow(&h), "385");
    }

    #[test]
    fn an_edit_of_nothing_is_no_step_and_a_new_edit_ends_redo() {
        let mut h = History::new(Book::new("k"));
        type_flow(&mut h, "3");
        assert!(!type_flow(&mut h, "3"));
        assert_eq!(h.now().revision, 1);
        h.undo();
        assert_eq!(h.now().revision, 2);
        h.edit(Touch::Act, |b| b.site.name = "n".into());
        assert!(!h.can_redo());
    }

    #[test]
    fn the_key_is_not_undone() {
        let mut h = History::new(Book::new("old"));
        type_flow(&mut h, "3");
        h.rename("new", "copy");
        h.undo();
        assert_eq!(h.now().id, "new");
    }

    #[test]
    fn typing_taken_back_by_hand_leaves_no_step() {
        let mut h = History::new(Book::new("k"));
        assert!(type_flow(&mut h, "3"));
        assert!(type_flow(&mut h, "38"));
        assert!(h.edit(Touch::Field(Field::DesignFlow), |b| {
            b.stream.design_flow_m3_s = Entry::default();
        }));
        assert!(!h.can_undo());
        assert!(h.now().stream.design_flow_m3_s.is_empty());
        // The next key stroke is a step again.
        assert!(type_flow(&mut h, "4"));
        assert!(h.undo());
        assert!(h.now().stream.design_flow_m3_s.is_empty());
    }

    proptest! {
        #[test]
        fn undoing_all_comes_back_to_the_start(texts in proptest::collection::vec("[0-9]{1,3}", 0..30), closes in any::<u32>()) {
            let start = Book::new("k");
            let mut h = History::new(start.clone());
            for (i, t) in texts.iter().enumerate() {
                type_flow(&mut h, t);
                if closes >> (i % 32) & 1 == 1 { h.close(); }
            }
            let end = (**h.now()).clone();
            while h.undo() {}
            let mut back = (**h.now()).clone();
            prop_assert!(back.revision >= end.revision);
            back.revision = 0;
            prop_assert_eq!(back, start);
            while h.redo() {}
            prop_assert_eq!(flow(&h), end.stream.design_flow_m3_s.text);
        }
    }
}
