//! What the page knows: the book with its history, what is derived from it,
//! and where the person is looking.
//!
//! Everything shown is derived from [`State::book`]; nothing is kept in step
//! by hand.

use crate::gate::gate;
use crate::history::{History, Touch};
use crate::keeping::{Keeper, Saved};
use crate::parts::books::Incoming;
use crate::platform::storage::{Persistence, Record};
use crate::platform::{clock, frame, place, root, settings, update, viewport};
use crate::slices::Progress;
use crate::station_rows::{StationRow, StationRows, station_of};
use crate::sweep_table::Filter;
use crate::theme::Theme;
use leptos::prelude::*;
use std::sync::Arc;
use words::Words;
use words::language::Language;
use workbook::book::Id;
use workbook::caution::Sheet;
use workbook::figure::{Place, Trouble};
use workbook::reading::DecimalMark;
use workbook::resolve::profile::station_entry;
use workbook::sweep::Row;
use workbook::working::FigureKey;
use workbook::{Book, Entry, Field, Findings, evaluate, evaluate_before_surge};

/// The sheets of this edition, in the order of the tabs.
pub const SHEETS: [Sheet; 6] = [
    Sheet::Stream,
    Sheet::Line,
    Sheet::Pipe,
    Sheet::Jets,
    Sheet::Surge,
    Sheet::Print,
];

/// How long after a key the whole transient is solved, if no other key came.
const SOLVE_MS: u64 = 80;

/// How long good news stays in view.
const NOTICE_MS: u64 = 6000;

/// Name of a sheet in the address and in `data-test` marks.
#[must_use]
pub fn sheet_slug(sheet: Sheet) -> &'static str {
    match sheet {
        Sheet::Stream => "stream",
        Sheet::Line => "line",
        Sheet::Pipe => "pipe",
        Sheet::Jets => "jets",
        Sheet::Surge => "surge",
        Sheet::Hold => "hold",
        Sheet::Worth => "worth",
        Sheet::Gauge => "gauge",
        Sheet::Print => "print",
    }
}

/// The sheet of a name in the address, if this edition has it.
#[must_use]
pub fn sheet_of(slug: &str) -> Option<Sheet> {
    SHEETS.into_iter().find(|s| sheet_slug(*s) == slug)
}

/// Something to tell the person, once.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Notice {
    /// What.
    pub text: String,
    /// Whether it is a trouble.
    pub trouble: bool,
}

/// The page's state. Cheap to hand about; one for the whole page.
#[derive(Debug, Clone, Copy)]
pub struct State {
    history: RwSignal<History>,
    /// The book as it stands.
    pub book: Memo<Arc<Book>>,
    /// All that is computed from it.
    pub findings: Memo<Arc<Findings>>,
    /// The stations, each on its own.
    rows_of_stations: StoredValue<StationRows>,
    /// What each station is called, in the order of the line.
    pub called: ReadSignal<Vec<(Id, String)>>,
    /// Everything in it that is wrong.
    pub troubles: ReadSignal<Vec<Trouble>>,
    /// Language of the page.
    pub language: RwSignal<Language>,
    /// Language, units and decimal mark.
    pub words: Memo<Words>,
    /// Theme of the page.
    pub theme: RwSignal<Theme>,
    /// The sheet in view.
    pub sheet: RwSignal<Sheet>,
    /// The stretch selected, everywhere.
    pub stretch: RwSignal<Option<Id>>,
    /// The station selected, everywhere.
    pub station: RwSignal<Option<Id>>,
    /// Whether a field is being written in.
    pub writing: RwSignal<bool>,
    /// Whether the book is kept.
    pub saved: RwSignal<Saved>,
    /// Whether the browser may clear what it keeps.
    pub persistence: RwSignal<Persistence>,
    /// Something to tell.
    pub notice: RwSignal<Option<Notice>>,
    /// The figure whose working is open.
    pub working: RwSignal<Option<FigureKey>>,
    /// Whether the drawing is opened over the whole screen.
    pub full: RwSignal<bool>,
    /// Stored books, as last read from the store.
    pub stored: RwSignal<Vec<Record>>,
    /// Whether they are being read.
    pub listing: RwSignal<bool>,
    /// A book from a file, whose key a stored book has too.
    pub incoming: RwSignal<Option<Incoming>>,
    /// Which rows of the sweep are shown.
    pub filter: RwSignal<Filter>,
    /// Rows of the last sweep that was completed.
    pub rows: RwSignal<Arc<Vec<Row>>>,
    /// How far the sweep under way has come; none where the rows are of the
    /// book as it stands.
    pub sweeping: RwSignal<Option<Progress>>,
    /// Size of the window.
    pub window: RwSignal<(f64, f64)>,
    /// Whether a newer edition of the page waits.
    pub update: RwSignal<bool>,
    /// Whether the first book has been opened.
    pub ready: RwSignal<bool>,
    /// Writes to the store.
    pub(crate) keeper: StoredValue<Keeper, LocalStorage>,
}

impl State {
    /// The state at the start, with an empty book.
    #[must_use]
    pub fn new() -> State {
        let history = RwSignal::new(History::new(Book::new(&clock::new_key())));
        let book = Memo::new(move |_| history.with(|h| Arc::clone(h.now())));
        let writing = RwSignal::new(false);
        let solved: RwSignal<Option<(Arc<Book>, Arc<Findings>)>> = RwSignal::new(None);
        let findings = Memo::new(move |_| {
            let book = book.get();
            match solved.get() {
                Some((of, findings)) if Arc::ptr_eq(&of, &book) => findings,
                // Between two keys there is no time for the whole transient.
                _ if writing.get_untracked() => Arc::new(evaluate_before_surge(&book)),
                _ => Arc::new(evaluate(&book)),
            }
        });
        Effect::new(move |_| {
            let now = book.get();
            if !writing.get_untracked() {
                return;
            }
            frame::after(SOLVE_MS, move || {
                if Arc::ptr_eq(&book.get_untracked(), &now) {
                    let findings = Arc::new(evaluate(&now));
                    solved.set(Some((now, findings)));
                }
            });
        });
        let troubles = gate(move || findings.with(|f| f.troubles()));
        let tags = settings::browser_languages();
        let asked: Vec<String> = settings::get(settings::LANGUAGE)
            .into_iter()
            .chain(tags.iter().cloned())
            .collect();
        let language = RwSignal::new(Language::pick(asked.iter().map(String::as_str)));
        let units = gate(move || book.with(|b| b.units));
        let words = Memo::new(move |_| {
            let language = language.get();
            // A browser of the same language tells which mark its region
            // writes; else the language does.
            let regional: Vec<&str> = tags
                .iter()
                .map(String::as_str)
                .filter(|t| Language::from_tag(t) == Some(language))
                .collect();
            let mark: DecimalMark = if regional.is_empty() {
                language.mark()
            } else {
                words::decimal_mark(regional)
            };
            Words::new(language, units.get()).with_mark(mark)
        });
        let rows_of_stations = StoredValue::new(StationRows::default());
        Effect::new(move |_| {
            let (words, troubles) = (words.get(), troubles.get());
            book.with(|b| rows_of_stations.update_value(|rows| rows.follow(words, b, &troubles)));
        });
        let called = gate(move || {
            let words = words.get();
            book.with(|b| {
                let about = words.about(b);
                about
                    .every_station()
                    .map(|(id, name)| (id, words::capital(&name)))
                    .collect()
            })
        });
        State {
            history,
            book,
            rows_of_stations,
            called,
            findings,
            troubles,
            language,
            words,
            theme: RwSignal::new(Theme::kept()),
            sheet: RwSignal::new(sheet_of(&place::sheet()).unwrap_or(Sheet::Stream)),
            stretch: RwSignal::new(None),
            station: RwSignal::new(None),
            writing,
            saved: RwSignal::new(Saved::Nothing),
            persistence: RwSignal::new(Persistence::Unknown),
            notice: RwSignal::new(None),
            working: RwSignal::new(None),
            full: RwSignal::new(false),
            stored: RwSignal::new(Vec::new()),
            listing: RwSignal::new(false),
            incoming: RwSignal::new(None),
            filter: RwSignal::new(Filter::default()),
            rows: RwSignal::new(Arc::new(Vec::new())),
            sweeping: RwSignal::new(None),
            window: viewport::followed(),
            update: RwSignal::new(update::is_waiting()),
            ready: RwSignal::new(false),
            keeper: StoredValue::new_local(Keeper::new(&clock::new_key())),
        }
    }

    /// Changes the book; nothing happens where the change changes nothing.
    pub fn edit(self, touch: Touch, change: impl FnOnce(&mut Book)) {
        if self.changing(|h| h.edit(touch, change)) {
            self.keep();
        }
    }

    /// Changes the book in one act of its own.
    pub fn act(self, change: impl FnOnce(&mut Book)) {
        self.edit(Touch::Act, change);
    }

    /// The field was left: its next key stroke is a new step.
    pub fn close_step(self) {
        self.history.update_untracked(History::close);
    }

    /// Takes the last step back.
    pub fn undo(self) {
        if self.changing(History::undo) {
            self.mend_selection();
            self.keep();
        }
    }

    /// Takes it again.
    pub fn redo(self) {
        if self.changing(History::redo) {
            self.mend_selection();
            self.keep();
        }
    }

    /// Whether there is a step to take back.
    #[must_use]
    pub fn can_undo(self) -> bool {
        self.history.with(History::can_undo)
    }

    /// Whether there is a step to take again.
    #[must_use]
    pub fn can_redo(self) -> bool {
        self.history.with(History::can_redo)
    }

    /// Opens another book in place of this one; what of this one is not
    /// written yet still waits in the queue.
    pub fn open(self, book: Book) {
        crate::keeping::note_open(&book.id);
        self.stretch.set(None);
        self.station.set(None);
        self.saved.set(Saved::Nothing);
        // What was said was said of the other book.
        self.notice.set(None);
        self.history.set(History::new(book));
        self.ready.set(true);
    }

    /// Gives the book another key and name: another window wrote to the old.
    pub(crate) fn rename(self, id: &str, name: &str) {
        crate::keeping::note_open(id);
        self.history.update(|h| h.rename(id, name));
    }

    /// Says something once.
    pub fn tell(self, text: String, trouble: bool) {
        // A trouble said under an open dialog would not be seen.
        if trouble {
            place::close_dialogs();
            place::to_top();
        }
        let notice = Notice { text, trouble };
        self.notice.set(Some(notice.clone()));
        if !trouble {
            // Good news goes by itself.
            frame::after(NOTICE_MS, move || {
                if self.notice.get_untracked().as_ref() == Some(&notice) {
                    self.notice.set(None);
                }
            });
        }
    }

    /// Goes to a sheet.
    pub fn go(self, sheet: Sheet) {
        if self.sheet.get_untracked() != sheet {
            self.sheet.set(sheet);
            place::to_top();
        }
        place::set_sheet(sheet_slug(sheet));
    }

    /// Goes to where a place of the book is entered, and puts the cursor there.
    pub fn go_to(self, sheet: Sheet, place: &Place) {
        match place {
            Place::Station(id) => self.station.set(Some(*id)),
            Place::Field(field) if station_of(*field).is_some() => {
                self.station.set(station_of(*field));
            }
            Place::Stretch(id) | Place::Field(Field::StretchCover(id)) => {
                self.stretch.set(Some(*id));
            }
            _ => {}
        }
        // Beside the other entries of the surge.
        let sheet = match place {
            Place::Field(Field::SurgeAllowed(_)) => Sheet::Surge,
            _ => sheet,
        };
        self.go(sheet);
        let id = crate::slug::place(place);
        // The sheet draws itself first.
        frame::after(60, move || {
            place::focus(&id);
        });
    }

    /// A station on its own, followed.
    #[must_use]
    pub fn station_row(self, id: Id) -> ArcRwSignal<StationRow> {
        let (words, book) = (self.words.get_untracked(), self.book.get_untracked());
        self.rows_of_stations
            .try_update_value(|rows| rows.row(words, &book, &self.troubles.get_untracked(), id))
            .unwrap_or_default()
    }

    /// The words a field is told in: those of its station's row, or the page's.
    #[must_use]
    pub fn words_of(self, field: Field) -> Signal<Words> {
        match station_of(field) {
            Some(id) => {
                let row = self.station_row(id);
                let page = self.words;
                Memo::new(move |_| row.with(|r| r.words).unwrap_or_else(|| page.get())).into()
            }
            None => self.words.into(),
        }
    }

    /// The entry of this name, followed.
    #[must_use]
    pub fn entry(self, field: Field) -> Memo<Entry> {
        let book = self.book;
        match station_of(field) {
            Some(id) => {
                let row = self.station_row(id);
                Memo::new(move |_| row.with(|r| station_entry(&r.station, field).clone()))
            }
            None => Memo::new(move |_| book.with(|b| b.entry(field).cloned().unwrap_or_default())),
        }
    }

    /// Takes what a person types into a field whose unit button shows `unit`.
    pub fn type_entry(self, field: Field, text: &str, unit: &str) {
        let mark = self.words.get_untracked().mark;
        self.edit(Touch::Field(field), |book| {
            let usual = field.kind().default_unit(book.units).symbol;
            if let Some(entry) = book.entry_mut(field) {
                // Emptied again, a field is as it was before anything was typed.
                *entry = if text.is_empty() && unit == usual {
                    Entry::default()
                } else {
                    Entry::typed(text, unit, field.kind(), mark)
                };
            }
        });
    }

    /// Chooses the language of the page.
    pub fn speak(self, language: Language) {
        settings::set(settings::LANGUAGE, language.code());
        self.language.set(language);
    }

    /// The next theme.
    pub fn next_theme(self) {
        let theme = self.theme.get_untracked().next();
        settings::set(settings::THEME, theme.slug());
        self.theme.set(theme);
    }

    /// Carries language, theme, paper and title out to the document.
    pub fn carry_out(self) {
        let (book, words, theme, sheet) = (self.book, self.words, self.theme, self.sheet);
        let set_foot = move || {
            let foot = book.with(|b| crate::parts::title_block::foot(b, words.get()));
            root::set_property("--print-foot", &foot);
        };
        Effect::new(move |_| root::set("lang", words.get().language.code()));
        let paper = gate(move || book.with(|b| b.print.paper));
        Effect::new(move |_| {
            root::set("class", &crate::theme::classes(theme.get(), paper.get()));
        });
        Effect::new(move |_| {
            // The foot of every printed page. On the root it touches the style
            // of everything there is, so only where it is about to be seen.
            if sheet.get() == Sheet::Print {
                set_foot();
            }
        });
        root::before_print(set_foot);
        let title = gate(move || book.with(|b| crate::parts::title_block::title(b, words.get())));
        Effect::new(move |_| title.with(|title| root::set_title(title)));
    }

    fn changing(self, change: impl FnOnce(&mut History) -> bool) -> bool {
        self.history
            .try_maybe_update(|h| {
                let changed = change(h);
                (changed, changed)
            })
            .unwrap_or(false)
    }

    /// Forgets a selection the book no longer has.
    fn mend_selection(self) {
        let book = self.book.get_untracked();
        if let Some(id) = self.stretch.get_untracked()
            && book.line.stretches.iter().all(|s| s.id != id)
        {
            self.stretch.set(None);
        }
        if let Some(id) = self.station.get_untracked()
            && book.line.stations.iter().all(|s| s.id != id)
        {
            self.station.set(None);
        }
    }
}

impl Default for State {
    fn default() -> State {
        State::new()
    }
}

/// The page's one state.
///
/// # Panics
/// Outside the page, where none was provided.
#[must_use]
pub fn state() -> State {
    expect_context::<State>()
}
