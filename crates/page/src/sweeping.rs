//! The sweep over every pipe, worked in slices that an edit cancels.

use crate::platform::{clock, frame};
use crate::slices::{Progress, Ticket, Tickets, slice};
use crate::state::State;
use leptos::prelude::*;
use pipes::Pipe;
use std::cell::RefCell;
use std::sync::Arc;
use workbook::Book;
use workbook::caution::Sheet;
use workbook::sweep::{Row, Sweep};

/// Longest slice, so that a key stroke is never kept waiting.
const SLICE_MS: f64 = 8.0;
/// Rows worked between two looks at the clock.
const PART: usize = 8;
/// A person types on: the sweep waits this long for the next key.
const WAIT_MS: u64 = 40;

thread_local! {
    static TICKETS: RefCell<Tickets> = RefCell::new(Tickets::default());
    static PIPES: Vec<Arc<Pipe>> =
        pipes::catalogue().pipes.iter().cloned().map(Arc::new).collect();
}

/// Follows the book with the sweep for as long as the Pipe sheet is in view.
pub fn follow(state: State) {
    Effect::new(move |_| {
        let book = state.book.get();
        if state.sheet.get() != Sheet::Pipe || !state.ready.get() {
            return;
        }
        let ticket = TICKETS.with_borrow_mut(Tickets::issue);
        state.sweeping.set(Some(Progress::default()));
        frame::after(WAIT_MS, move || begin(state, ticket, &book));
    });
}

fn stands(ticket: Ticket) -> bool {
    TICKETS.with_borrow(|t| t.stands(ticket))
}

fn begin(state: State, ticket: Ticket, book: &Book) {
    if !stands(ticket) {
        return;
    }
    let sweep = PIPES.with(|pipes| Sweep::over(book, pipes.iter().cloned()));
    let rows = Vec::with_capacity(sweep.total());
    go_on(state, ticket, sweep, rows);
}

fn go_on(state: State, ticket: Ticket, mut sweep: Sweep, mut rows: Vec<Row>) {
    if !stands(ticket) {
        return;
    }
    let parts = Progress {
        done: sweep.done() / PART,
        all: sweep.total().div_ceil(PART),
    };
    let end = clock::now_ms() + SLICE_MS;
    let parts = slice(
        parts,
        |_| rows.extend(sweep.advance(PART)),
        || clock::now_ms() < end,
    );
    let progress = Progress {
        done: sweep.done(),
        all: sweep.total(),
    };
    if parts.is_whole() {
        state.rows.set(Arc::new(rows));
        state.sweeping.set(None);
    } else {
        state.sweeping.set(Some(progress));
        frame::soon(move || go_on(state, ticket, sweep, rows));
    }
}
