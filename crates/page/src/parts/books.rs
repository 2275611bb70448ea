//! The books of this device: open, new, demo, copy, delete; files in and out.

use crate::keeping::{Saved, store_trouble};
use crate::parts::title_block::name;
use crate::platform::storage::{self, Persistence, Record};
use crate::platform::{clock, file, place};
use crate::slug;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, text};
use workbook::{Book, demo, format};

const DIALOG: &str = "books-dialog";
const ASK: &str = "ask-dialog";
const FILE: &str = "file-input";
const MIME: &str = "application/json";

/// A book from a file, beside the stored book of the same key.
#[derive(Debug, Clone, PartialEq)]
pub struct Incoming {
    /// The book of the file.
    pub book: Book,
    /// The stored one.
    pub stored: Record,
    /// Revision of the stored one, where it can be read.
    pub revision: Option<u64>,
}

/// Opens the list.
pub fn open(state: State) {
    refresh(state);
    place::open_dialog(DIALOG);
}

fn close() {
    place::close_dialog(DIALOG);
}

fn refresh(state: State) {
    state.listing.set(true);
    leptos::task::spawn_local(async move {
        let listed = storage::list().await;
        state.listing.set(false);
        match listed {
            Ok(records) => state.stored.set(records),
            Err(why) => state.tell(store_trouble(state.words.get_untracked(), &why), true),
        }
    });
}

/// Hands the book in view over as a file.
pub fn save_file(state: State) {
    let words = state.words.get_untracked();
    let book = state.book.get_untracked();
    match format::write(&book) {
        Ok(json) => {
            let file_name = slug::file_name(&name(&book, words), book.revision);
            if file::save(&file_name, &json, MIME) {
                state.tell(text::state_file_saved(words, &file_name), false);
            }
        }
        Err(why) => state.tell(text::state_not_saved_why(words, &why.to_string()), true),
    }
}

/// Lets the person pick a book's file.
pub fn pick_file() {
    place::press(FILE);
}

/// Opens the demo under a key of its own.
pub fn open_demo(state: State) {
    new_book(state, demo::demo(&clock::new_key()));
}

fn new_book(state: State, book: Book) {
    state.open(book);
    state.keep();
    close();
}

/// Another book like this one, under a key of its own.
fn copy_of(state: State, record: &Record) {
    let words = state.words.get_untracked();
    match format::read(record.json.as_bytes()) {
        Ok(mut book) => {
            book.id = clock::new_key();
            book.site.name = text::page_copy_of(words, &book.site.name).trim().to_owned();
            new_book(state, book);
        }
        Err(why) => {
            let why = words.file_trouble(&why);
            state.tell(text::file_stored_damaged(words, &why), true);
        }
    }
}

/// Opens a book from the bytes of a file; asks where a stored one has its key.
async fn take_file(state: State, bytes: Vec<u8>) {
    let words = state.words.get_untracked();
    let book = match format::read(&bytes) {
        Ok(book) => book,
        Err(why) => {
            state.tell(words.file_trouble(&why), true);
            return;
        }
    };
    match storage::load(&book.id).await {
        Ok(None) => take(state, book),
        Ok(Some(stored)) => {
            let kept = format::read(stored.json.as_bytes()).ok();
            if kept.as_ref() == Some(&book) {
                // The same book: nothing can be lost.
                state.open_record(&stored);
                close();
                return;
            }
            state.incoming.set(Some(Incoming {
                revision: kept.map(|b| b.revision),
                book,
                stored,
            }));
            place::open_dialog(ASK);
        }
        // Without a store there is nothing to replace.
        Err(_) => take(state, book),
    }
}

fn take(state: State, book: Book) {
    let words = state.words.get_untracked();
    let said = text::state_opened(words, &name(&book, words));
    new_book(state, book);
    state.tell(said, false);
}

/// The list of books.
#[component]
pub fn BooksDialog() -> impl IntoView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let act = move |test: &'static str, key: Key, act: Callback<()>| {
        view! {
            <button type="button" class="button" data-test=test on:click=move |_| act.run(())>
                {say(key)}
            </button>
        }
    };
    let rows = move || {
        let here = state.book.with(|b| b.id.clone());
        state
            .stored
            .get()
            .into_iter()
            .map(|record| row(state, record, &here))
            .collect_view()
    };
    view! {
        <dialog id=DIALOG aria-labelledby="books-head" data-test="books-dialog">
            <div class="dialog-head">
                <h2 id="books-head">{say(Key::DO_BOOKS)}</h2>
                <button
                    type="button"
                    class="button-quiet"
                    data-test="books-close"
                    on:click=|_| close()
                >
                    {say(Key::DO_CLOSE)}
                </button>
            </div>
            <div class="dialog-body">
                {move || storage_words(state).map(|w| view! { <p class="quiet">{w}</p> })}
                <ul
                    class="books"
                    aria-busy=move || if state.listing.get() { "true" } else { "false" }
                >
                    {rows}
                </ul>
                <Show when=move || state.stored.with(Vec::is_empty)>
                    <p class="quiet">{say(Key::STATE_NO_BOOKS)}</p>
                </Show>
                <div class="buttons buttons-even">
                    {act(
                        "book-new",
                        Key::DO_NEW_BOOK,
                        Callback::new(move |()| new_book(state, Book::new(&clock::new_key()))),
                    )}
                    {act(
                        "book-demo",
                        Key::DO_DEMO_BOOK,
                        Callback::new(move |()| open_demo(state)),
                    )}
                    {act(
                        "book-file-open",
                        Key::DO_OPEN_FILE,
                        Callback::new(|()| pick_file()),
                    )}
                    {act(
                        "book-file-save",
                        Key::DO_SAVE_FILE,
                        Callback::new(move |()| save_file(state)),
                    )}
                </div>
                <input
                    type="file"
                    id=FILE
                    class="visually-hidden"
                    tabindex="-1"
                    accept=".json,application/json"
                    aria-label=say(Key::DO_OPEN_FILE)
                    data-test="file-input"
                    on:change=move |e| {
                        leptos::task::spawn_local(async move {
                            if let Some(bytes) = file::picked(e).await {
                                take_file(state, bytes).await;
                            }
                        });
                    }
                />
            </div>
        </dialog>
        <AskDialog/>
    }
}

/// Where the browser may clear what it stores, that is said here.
fn storage_words(state: State) -> Option<&'static str> {
    let words = state.words.get();
    match (state.saved.get(), state.persistence.get()) {
        (Saved::Not(storage::StoreTrouble::Unavailable), _) => {
            Some(words.say(Key::STATE_NO_STORAGE))
        }
        (_, Persistence::MayBeCleared | Persistence::Unknown) => {
            Some(words.say(Key::STATE_MAY_CLEAR))
        }
        (_, Persistence::Kept) => Some(words.say(Key::STATE_KEPT)),
    }
}

fn row(state: State, record: Record, here: &str) -> impl IntoView + use<> {
    let say = move |key: Key| move || state.words.get().say(key);
    let is_here = record.id == here;
    let named = {
        let name = record.name.clone();
        move || {
            if name.trim().is_empty() {
                state.words.get().say(Key::STATE_UNTITLED).to_owned()
            } else {
                name.clone()
            }
        }
    };
    let when = {
        let changed = record.changed.clone();
        move || {
            let words = state.words.get();
            text::state_last_edit(words, &clock::local(&changed, words.language.code()))
        }
    };
    let sure = RwSignal::new(false);
    let record = StoredValue::new(record);
    let id = record.with_value(|r| r.id.clone());
    let delete = move |_| {
        let id = record.with_value(|r| r.id.clone());
        state.forget(&id);
        state.stored.update(|all| all.retain(|r| r.id != id));
        if is_here {
            state.open(Book::new(&clock::new_key()));
        }
    };
    let sure_words = {
        let named = named.clone();
        move || text::state_delete_sure(state.words.get(), &named())
    };
    view! {
        <li data-test=format!("book-{id}")>
            <button
                type="button"
                data-test=format!("book-open-{id}")
                aria-current=is_here.then_some("true")
                on:click=move |_| {
                    let opened = is_here || record.with_value(|r| state.open_record(r));
                    if opened {
                        close();
                    }
                }
            >
                <strong>{named}</strong>
                {is_here
                    .then(|| view! { <span class="marked">{say(Key::PAGE_BOOK_HERE)}</span> })}
                <span class="quiet">{when}</span>
            </button>
            <div class="buttons">
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("book-copy-{id}")
                    on:click=move |_| record.with_value(|r| copy_of(state, r))
                >
                    {say(Key::DO_COPY_BOOK)}
                </button>
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("book-save-{id}")
                    on:click=move |_| {
                        record
                            .with_value(|r| {
                                // As it stands in the store, readable or not.
                                let _ = file::save(&slug::file_name(&r.name, 0), &r.json, MIME);
                            });
                    }
                >
                    {say(Key::DO_SAVE_FILE)}
                </button>
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("book-delete-{id}")
                    on:click=move |_| sure.set(true)
                >
                    {say(Key::DO_DELETE_BOOK)}
                </button>
            </div>
            <Show when=move || sure.get()>
                <div role="alert">
                    <p>{sure_words.clone()}</p>
                    <div class="buttons">
                        <button
                            type="button"
                            class="button button-strong"
                            data-test=format!("book-delete-sure-{}", record.with_value(|r| r.id.clone()))
                            on:click=delete
                        >
                            {say(Key::DO_DELETE_BOOK_SURE)}
                        </button>
                        <button
                            type="button"
                            class="button"
                            on:click=move |_| sure.set(false)
                        >
                            {say(Key::DO_CANCEL)}
                        </button>
                    </div>
                </div>
            </Show>
        </li>
    }
}

/// Asks which of two books of one key should stand.
#[component]
fn AskDialog() -> impl IntoView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let done = move || {
        state.incoming.set(None);
        place::close_dialog(ASK);
    };
    let asked = move || {
        let words = state.words.get();
        state.incoming.with(|i| {
            let i = i.as_ref()?;
            let number = |n: u64| n.to_string();
            let stored = i
                .revision
                .map_or_else(|| words.say(Key::FIGURE_NOT_KNOWN).to_owned(), number);
            let file = number(i.book.revision);
            Some(text::state_already_stored(
                words,
                &name(&i.book, words),
                &stored,
                &file,
            ))
        })
    };
    let keep_both = move |_| {
        if let Some(incoming) = state.incoming.get_untracked() {
            let words = state.words.get_untracked();
            let mut book = incoming.book;
            book.id = clock::new_key();
            book.site.name = text::page_copy_of(words, &book.site.name).trim().to_owned();
            done();
            take(state, book);
        }
    };
    let replace = move |_| {
        if let Some(incoming) = state.incoming.get_untracked() {
            state.know(&incoming.stored);
            done();
            take(state, incoming.book);
        }
    };
    view! {
        <dialog id=ASK aria-labelledby="ask-text" data-test="ask-dialog">
            <div class="dialog-body">
                <p id="ask-text">{asked}</p>
            </div>
            <div class="dialog-foot">
                <button
                    type="button"
                    class="button button-strong"
                    data-test="ask-keep-both"
                    on:click=keep_both
                >
                    {say(Key::DO_KEEP_BOTH)}
                </button>
                <button type="button" class="button" data-test="ask-replace" on:click=replace>
                    {say(Key::DO_REPLACE)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="ask-cancel"
                    on:click=move |_| done()
                >
                    {say(Key::DO_CANCEL)}
                </button>
            </div>
        </dialog>
    }
}
