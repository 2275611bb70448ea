//! Writes to the store, in order, one at a time; of several versions of one
//! book waiting, only the last is written.

use std::collections::VecDeque;

/// A write that waits.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Write<T> {
    /// Keep this version of the book of this key.
    Keep {
        /// The book's key.
        id: String,
        /// The version.
        version: T,
    },
    /// Forget the book of this key.
    Forget {
        /// The book's key.
        id: String,
    },
}

impl<T> Write<T> {
    fn id(&self) -> &str {
        match self {
            Write::Keep { id, .. } | Write::Forget { id } => id,
        }
    }
}

/// Writes that wait, and whether one is under way.
#[derive(Debug)]
pub struct SaveQueue<T> {
    waiting: VecDeque<Write<T>>,
    under_way: Option<String>,
}

impl<T> Default for SaveQueue<T> {
    fn default() -> Self {
        SaveQueue {
            waiting: VecDeque::new(),
            under_way: None,
        }
    }
}

impl<T> SaveQueue<T> {
    /// Adds a write. One of the same book that still waits is overtaken.
    pub fn push(&mut self, write: Write<T>) {
        self.waiting.retain(|w| w.id() != write.id());
        self.waiting.push_back(write);
    }

    /// The next write to begin, unless one is under way. The caller begins it,
    /// and says [`SaveQueue::done`] when it has ended, well or not.
    pub fn begin(&mut self) -> Option<Write<T>> {
        if self.under_way.is_some() {
            return None;
        }
        let write = self.waiting.pop_front()?;
        self.under_way = Some(write.id().to_owned());
        Some(write)
    }

    /// The write under way has ended.
    pub fn done(&mut self) {
        self.under_way = None;
    }

    /// Whether a write of this book waits.
    #[must_use]
    pub fn waits(&self, id: &str) -> bool {
        self.waiting.iter().any(|w| w.id() == id)
    }

    /// Whether nothing waits and nothing is under way for this book: what was
    /// written last is all there is.
    #[must_use]
    pub fn settled(&self, id: &str) -> bool {
        self.under_way.as_deref() != Some(id) && !self.waits(id)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use std::collections::HashMap;

    fn keep(id: &str, version: u32) -> Write<u32> {
        Write::Keep {
            id: id.into(),
            version,
        }
    }

    #[test]
    fn one_at_a_time_and_the_last_wins() {
        let mut q = SaveQueue::default();
        q.push(keep("a", 1));
        assert_eq!(q.begin(), Some(keep("a", 1)));
        q.push(keep("a", 2));
        q.push(keep("a", 3));
        assert_eq!(q.begin(), None);
        assert!(!q.settled("a"));
        q.done();
        assert!(!q.settled("a") && q.settled("b"));
        assert_eq!(q.begin(), Some(keep("a", 3)));
        q.done();
        assert!(q.settled("a"));
        assert_eq!(q.begin(), None);
    }

    #[test]
    fn forgetting_overtakes_keeping_and_the_other_way_round() {
        let mut q = SaveQueue::default();
        q.push(keep("a", 1));
        q.push(Write::Forget { id: "a".into() });
        assert_eq!(q.begin(), Some(Write::Forget { id: "a".into() }));
        q.push(keep("a", 2));
        q.done();
        assert_eq!(q.begin(), Some(keep("a", 2)));
    }

    proptest! {
        #[test]
        fn the_store_ends_as_if_every_write_had_been_made(ops in proptest::collection::vec((0u8..3, any::<bool>(), any::<bool>()), 0..60)) {
            let mut q = SaveQueue::default();
            let (mut wanted, mut store) = (HashMap::new(), HashMap::new());
            let write = |store: &mut HashMap<String, u32>, w: Write<u32>| match w {
                Write::Keep { id, version } => { store.insert(id, version); }
                Write::Forget { id } => { store.remove(&id); }
            };
            for (i, (book, forget, step)) in ops.into_iter().enumerate() {
                let id = book.to_string();
                let w = if forget { Write::Forget { id } } else { keep(&id, u32::try_from(i).unwrap()) };
                write(&mut wanted, w.clone());
                q.push(w);
                if step && let Some(w) = q.begin() { write(&mut store, w); q.done(); }
            }
            while let Some(w) = q.begin() { write(&mut store, w); q.done(); }
            prop_assert_eq!(store, wanted);
        }
    }
}
