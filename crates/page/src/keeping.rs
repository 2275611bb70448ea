//! Keeping books in the browser: every edit written at once, in order, and
//! said to be saved only when the store has it.

use crate::platform::storage::{self, Outcome, Record, StoreTrouble};
use crate::platform::{clock, settings};
use crate::save_queue::{SaveQueue, Write};
use crate::state::State;
use leptos::prelude::*;
use std::collections::HashMap;
use std::sync::Arc;
use words::{Key, Words, text};
use workbook::Book;

/// Whether the book in view is kept.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Saved {
    /// Nothing was written yet that would need keeping.
    Nothing,
    /// A write is under way.
    Saving,
    /// The store has the book as it stands.
    Kept,
    /// The store has not taken it.
    Not(StoreTrouble),
}

/// The writes of this window.
#[derive(Debug)]
pub struct Keeper {
    queue: SaveQueue<Arc<Book>>,
    stamps: HashMap<String, String>,
    window: String,
    count: u64,
}

impl Keeper {
    /// For a window of this name.
    #[must_use]
    pub fn new(window: &str) -> Keeper {
        Keeper {
            queue: SaveQueue::default(),
            stamps: HashMap::new(),
            window: window.to_owned(),
            count: 0,
        }
    }

    fn stamp(&mut self) -> String {
        self.count += 1;
        format!("{}/{}", self.window, self.count)
    }
}

impl State {
    /// Has the book as it stands written to the store.
    pub fn keep(self) {
        let book = self.book.get_untracked();
        note_open(&book.id);
        self.saved.set(Saved::Saving);
        self.keeper.update_value(|k| {
            k.queue.push(Write::Keep {
                id: book.id.clone(),
                version: book,
            });
        });
        self.pump();
    }

    /// Has a stored book forgotten.
    pub fn forget(self, id: &str) {
        self.keeper.update_value(|k| {
            k.stamps.remove(id);
            k.queue.push(Write::Forget { id: id.to_owned() });
        });
        self.pump();
    }

    /// Notes the stamp of a record read from the store: its book may now be
    /// written over by this window.
    pub fn know(self, record: &Record) {
        self.keeper.update_value(|k| {
            k.stamps.insert(record.id.clone(), record.stamp.clone());
        });
    }

    /// Begins the next write, unless one is under way.
    fn pump(self) {
        let Some(write) = self.keeper.try_update_value(|k| k.queue.begin()).flatten() else {
            return;
        };
        leptos::task::spawn_local(async move {
            match write {
                Write::Keep { id, version } => self.write(&id, &version).await,
                Write::Forget { id } => {
                    if let Err(why) = storage::forget(&id).await {
                        self.tell(store_trouble(self.words.get_untracked(), &why), true);
                    }
                }
            }
            self.keeper.update_value(|k| k.queue.done());
            self.pump();
        });
    }

    async fn write(self, id: &str, book: &Book) {
        let outcome = self.try_write(id, book).await;
        let in_view = self.book.with_untracked(|b| b.id == id);
        match outcome {
            Ok(Outcome::Kept) => {
                let newest = self.keeper.with_value(|k| !k.queue.waits(id));
                if in_view && newest {
                    self.saved.set(Saved::Kept);
                }
            }
            Ok(Outcome::Foreign) if in_view => self.part_ways(),
            Ok(Outcome::Foreign) => {}
            Err(why) => {
                if in_view {
                    self.saved.set(Saved::Not(why));
                } else {
                    self.tell(store_trouble(self.words.get_untracked(), &why), true);
                }
            }
        }
    }

    async fn try_write(self, id: &str, book: &Book) -> Result<Outcome, StoreTrouble> {
        let json = workbook::format::write(book).map_err(|e| StoreTrouble::Other(e.to_string()))?;
        let (known, stamp) = self
            .keeper
            .try_update_value(|k| (k.stamps.get(id).cloned(), k.stamp()))
            .unwrap_or_default();
        let record = Record {
            id: id.to_owned(),
            json,
            changed: clock::now_iso(),
            name: book.site.name.clone(),
            stamp,
        };
        let outcome = storage::keep(&record, known.as_deref()).await?;
        if outcome == Outcome::Kept {
            self.know(&record);
        }
        Ok(outcome)
    }

    /// Another window has written this book since: what is here becomes a book
    /// of its own, so that neither is lost.
    fn part_ways(self) {
        let words = self.words.get_untracked();
        let name = self.book.with_untracked(|b| b.site.name.clone());
        let copy = text::page_copy_of(words, &name);
        self.rename(&clock::new_key(), copy.trim());
        self.keep();
        self.tell(text::page_parted(words, copy.trim()), true);
    }

    /// Asks the browser to keep the store, and opens the book last open, or
    /// the last changed, or leaves the empty one.
    pub fn start(self) {
        leptos::task::spawn_local(async move {
            match storage::list().await {
                Ok(records) => {
                    let found = to_open(&records, settings::get(settings::BOOK).as_deref());
                    if let Some(record) = found {
                        self.open_record(record);
                    }
                }
                Err(why) => self.saved.set(Saved::Not(why)),
            }
            self.ready.set(true);
            self.persistence.set(storage::persistence().await);
        });
    }

    /// Opens a stored book. One that cannot be read stays as it is, and is
    /// said. Returns whether it was opened.
    pub fn open_record(self, record: &Record) -> bool {
        match workbook::format::read(record.json.as_bytes()) {
            Ok(book) => {
                self.know(record);
                self.open(book);
                self.saved.set(Saved::Kept);
                true
            }
            Err(why) => {
                let words = self.words.get_untracked();
                let why = words.file_trouble(&why);
                self.tell(text::file_stored_damaged(words, &why), true);
                false
            }
        }
    }
}

/// Notes that this book is the one open, and when.
pub fn note_open(id: &str) {
    settings::set(settings::BOOK, &format!("{} {id}", clock::now_iso()));
}

/// The book to open at the start: the one last open, as noted, unless another
/// was changed after that. The note is kept less strictly than the books are:
/// a browser killed in the middle may bring back an old one.
fn to_open<'a>(records: &'a [Record], note: Option<&str>) -> Option<&'a Record> {
    let newest = records.iter().max_by(|a, b| a.changed.cmp(&b.changed))?;
    let noted = note.and_then(|n| n.split_once(' ')).and_then(|(when, id)| {
        let record = records.iter().find(|r| r.id == id)?;
        (when >= newest.changed.as_str()).then_some(record)
    });
    Some(noted.unwrap_or(newest))
}

/// What a trouble with the store means.
#[must_use]
pub fn store_trouble(words: Words, why: &StoreTrouble) -> String {
    match why {
        StoreTrouble::Unavailable => words.say(Key::STATE_NO_STORAGE).to_owned(),
        StoreTrouble::Full => words.say(Key::STATE_FULL).to_owned(),
        StoreTrouble::Other(why) => text::state_not_saved_why(words, why),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn record(id: &str, changed: &str) -> Record {
        Record {
            id: id.to_owned(),
            json: String::new(),
            changed: changed.to_owned(),
            name: String::new(),
            stamp: String::new(),
        }
    }

    #[test]
    fn the_newest_edit_wins_over_a_stale_note() {
        let books = [
            record("a", "2026-01-02T10:00:00Z"),
            record("b", "2026-01-02T12:00:00Z"),
        ];
        let opened = |note| to_open(&books, note).map(|r| r.id.as_str());
        assert_eq!(opened(Some("2026-01-02T13:00:00Z a")), Some("a"));
        assert_eq!(opened(Some("2026-01-02T11:00:00Z a")), Some("b"));
        assert_eq!(opened(Some("2026-01-02T13:00:00Z gone")), Some("b"));
        assert_eq!(opened(Some("garbage")), Some("b"));
        assert_eq!(opened(None), Some("b"));
        assert_eq!(to_open(&[], None), None);
    }
}
