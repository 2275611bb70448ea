//! Long studies in slices, so that the page stays awake between them and an
//! edit cancels what is left.

/// Where a study stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Progress {
    /// Parts done.
    pub done: usize,
    /// Parts in all.
    pub all: usize,
}

impl Progress {
    /// Whether nothing is left.
    #[must_use]
    pub fn is_whole(self) -> bool {
        self.done >= self.all
    }
}

/// Tickets for studies: only the holder of the newest may go on.
#[derive(Debug, Default)]
pub struct Tickets {
    newest: u64,
}

/// Leave to go on with a study, until a newer one is given.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Ticket(u64);

impl Tickets {
    /// A new ticket; every earlier one ends.
    pub fn issue(&mut self) -> Ticket {
        self.newest += 1;
        Ticket(self.newest)
    }

    /// Whether this ticket still stands.
    #[must_use]
    pub fn stands(&self, ticket: Ticket) -> bool {
        self.newest == ticket.0
    }
}

/// Runs `part` over `parts` until it is done or `in_time` says no more; at
/// least one part is done in each slice, so that a slow machine gets on too.
/// Returns where the study stands.
pub fn slice(
    mut progress: Progress,
    mut part: impl FnMut(usize),
    mut in_time: impl FnMut() -> bool,
) -> Progress {
    while !progress.is_whole() {
        part(progress.done);
        progress.done += 1;
        if !in_time() {
            break;
        }
    }
    progress
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn an_edit_ends_what_is_under_way() {
        let mut t = Tickets::default();
        let first = t.issue();
        assert!(t.stands(first));
        let second = t.issue();
        assert!(!t.stands(first) && t.stands(second));
    }

    proptest! {
        #[test]
        fn every_part_is_done_once_and_in_order(all in 0usize..200, budget in 0usize..20) {
            let mut seen = Vec::new();
            let mut progress = Progress { done: 0, all };
            let mut slices = 0;
            while !progress.is_whole() {
                let mut left = budget;
                progress = slice(progress, |i| seen.push(i), || { left = left.saturating_sub(1); left > 0 });
                slices += 1;
                prop_assert!(slices <= all);
            }
            prop_assert_eq!(seen, (0..all).collect::<Vec<_>>());
        }
    }
}
