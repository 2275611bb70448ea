//! A survey from a file or pasted: how it is read, before it is taken.

use crate::inputs::{choice_of, picker};
use crate::platform::{file, place};
use crate::sheets::line::{DISTANCES, RECKONINGS};
use crate::state::{State, state};
use leptos::prelude::*;
use std::sync::Arc;
use words::{Key, text};
use workbook::import::gpx::{self, Gpx, Settings};
use workbook::import::table::{self, Choices, Column, Faulty, Preview, Table};
use workbook::import::{Displaced, Given, ImportedLine, Meaning, Note, Refusal, RowFault};
use workbook::reading::DecimalMark;

const DIALOG: &str = "import-dialog";
const FILE: &str = "import-file";
const PASTE: &str = "import-paste";
/// Faults named one by one; the rest are counted.
const FAULTS_NAMED: usize = 12;

/// What was brought in.
#[derive(Debug, Clone)]
enum Source {
    Nothing,
    Table(Arc<Table>),
    Gpx(Arc<Gpx>),
    Refused(Refusal),
}

const MARKS: [(DecimalMark, &str, Key); 2] = [
    (DecimalMark::Point, "point", Key::OPTION_POINT),
    (DecimalMark::Comma, "comma", Key::OPTION_COMMA),
];

const FAULTY: [(bool, &str, Key); 2] = [
    (false, "keep", Key::OPTION_FAULTY_KEEP),
    (true, "leave", Key::OPTION_FAULTY_LEAVE),
];

const WALKED: [(bool, &str, Key); 2] = [
    (false, "down", Key::OPTION_WALKED_DOWN),
    (true, "up", Key::OPTION_WALKED_UP),
];

/// Tolerances of thinning to choose from, m.
const TOLERANCES: [&str; 6] = ["0", "1", "2", "5", "10", "20"];

/// Everything chosen in the dialog.
#[derive(Debug, Clone, Copy)]
struct Import {
    state: State,
    source: RwSignal<Source>,
    choices: RwSignal<Choices>,
    leave_out: RwSignal<bool>,
    line: RwSignal<usize>,
    tolerance: RwSignal<String>,
    reversed: RwSignal<bool>,
}

impl Import {
    fn new(state: State) -> Import {
        Import {
            state,
            source: RwSignal::new(Source::Nothing),
            choices: RwSignal::new(Choices::default()),
            leave_out: RwSignal::new(false),
            line: RwSignal::new(0),
            tolerance: RwSignal::new(Settings::default().tolerance_m.to_string()),
            reversed: RwSignal::new(false),
        }
    }

    fn given(self) -> Given {
        let words = self.state.words.get_untracked();
        Given {
            mark: words.mark,
            units: words.units,
            distance_kind: self.state.book.with_untracked(|b| b.line.distance_kind),
        }
    }

    fn take(self, source: Source) {
        self.choices.set(Choices::default());
        self.leave_out.set(false);
        self.line.set(0);
        self.reversed.set(false);
        self.source.set(source);
    }

    fn read(self, bytes: &[u8]) {
        let source = if gpx::looks_like_gpx(bytes) {
            gpx::open(bytes).map(|g| Source::Gpx(Arc::new(g)))
        } else {
            table::open(bytes, self.given()).map(|t| Source::Table(Arc::new(t)))
        };
        self.take(source.unwrap_or_else(Source::Refused));
    }

    fn paste(self, pasted: &str) {
        if pasted.is_empty() {
            self.take(Source::Nothing);
        } else if gpx::looks_like_gpx(pasted.as_bytes()) {
            self.read(pasted.as_bytes());
        } else {
            let source = table::paste(pasted, self.given());
            self.take(source.map_or_else(Source::Refused, |t| Source::Table(Arc::new(t))));
        }
    }

    fn settings(self) -> Settings {
        Settings {
            tolerance_m: self
                .tolerance
                .with(|t| t.parse().unwrap_or(Settings::default().tolerance_m)),
            leave_out_faulty: self.leave_out.get(),
            reversed: self.reversed.get(),
        }
    }

    /// The line as it would be taken; none where something stands in the way.
    fn line(self) -> Option<Result<ImportedLine, Refusal>> {
        match self.source.get() {
            Source::Nothing | Source::Refused(_) => None,
            Source::Table(table) => {
                let faulty = if self.leave_out.get() {
                    Faulty::LeaveOut
                } else {
                    Faulty::Keep
                };
                self.choices.with(|c| table.take(c, faulty)).ok().map(Ok)
            }
            Source::Gpx(gpx) => Some(gpx.survey(self.line.get(), &self.settings())),
        }
    }
}

/// Opens the dialog.
pub fn open() {
    place::open_dialog(DIALOG);
}

/// The dialog.
#[component]
pub fn ImportDialog() -> impl IntoView {
    let state = state();
    let import = Import::new(state);
    let say = move |key: Key| move || state.words.get().say(key);
    let line = Memo::new(move |_| import.line());
    let body = move || match import.source.get() {
        Source::Nothing => view! { <p class="quiet">{say(Key::IMPORT_WHAT)}</p> }.into_any(),
        Source::Refused(why) => refused(state, &why),
        Source::Table(table) => table_view(import, &table),
        Source::Gpx(gpx) => gpx_view(import, &gpx),
    };
    let count = move || {
        line.with(|l| match l {
            Some(Ok(line)) => line.rows.len(),
            _ => 0,
        })
    };
    let take = move |_| {
        let Some(Ok(line)) = line.get_untracked() else {
            return;
        };
        let mut taken = false;
        state.act(|book| taken = line.put_into(book).is_some());
        if taken {
            let words = state.words.get_untracked();
            state.station.set(None);
            state.stretch.set(None);
            place::close_dialog(DIALOG);
            import.take(Source::Nothing);
            place::clear(PASTE);
            state.tell(text::import_taken(words, line.rows.len()), false);
        }
    };
    view! {
        <dialog id=DIALOG aria-labelledby="import-head" data-test="import-dialog">
            <div class="dialog-head">
                <h2 id="import-head">{say(Key::DO_IMPORT)}</h2>
                <button
                    type="button"
                    class="button-quiet"
                    data-test="import-close"
                    on:click=|_| place::close_dialog(DIALOG)
                >
                    {say(Key::DO_CLOSE)}
                </button>
            </div>
            <div class="dialog-body">
                <div class="buttons">
                    <button
                        type="button"
                        class="button"
                        data-test="import-pick"
                        on:click=|_| place::press(FILE)
                    >
                        {say(Key::DO_PICK_SURVEY)}
                    </button>
                </div>
                <input
                    type="file"
                    id=FILE
                    class="visually-hidden"
                    tabindex="-1"
                    accept=".csv,.tsv,.txt,.gpx,text/csv,text/plain,application/gpx+xml"
                    aria-label=say(Key::DO_PICK_SURVEY)
                    data-test=FILE
                    on:change=move |e| {
                        leptos::task::spawn_local(async move {
                            if let Some(bytes) = file::picked(e).await {
                                import.read(&bytes);
                            }
                        });
                    }
                />
                <div class="field">
                    <label class="field-label" for=PASTE>{say(Key::IMPORT_PASTE)}</label>
                    <textarea
                        id=PASTE
                        class="field-input import-paste"
                        rows="3"
                        spellcheck="false"
                        autocomplete="off"
                        data-test=PASTE
                        on:input=move |e| import.paste(&event_target_value(&e))
                    ></textarea>
                </div>
                {body}
                {move || displaced(state, count())}
            </div>
            <div class="dialog-foot">
                <button
                    type="button"
                    class="button button-strong"
                    data-test="import-take"
                    disabled=move || count() < 2
                    on:click=take
                >
                    {move || text::import_take(state.words.get(), count())}
                </button>
            </div>
        </dialog>
    }
}

fn refused(state: State, why: &Refusal) -> AnyView {
    let why = why.clone();
    view! {
        <p class="field-trouble" role="alert" data-test="import-refused">
            {move || state.words.get().import_refusal(&why)}
        </p>
    }
    .into_any()
}

/// What the survey would put out of its place.
fn displaced(state: State, count: usize) -> Option<AnyView> {
    let words = state.words.get();
    let lost = state.book.with(|b| Displaced::of(b));
    (count >= 2 && lost != Displaced::default()).then(|| {
        view! {
            <p class="caution" data-test="import-displaced">
                {text::import_displaced(
                    words,
                    &words.count(lost.stations),
                    &words.count(lost.stretches),
                    &words.count(lost.fittings),
                )}
            </p>
        }
        .into_any()
    })
}

fn notes(state: State, notes: &[Note], columns: &[Column]) -> AnyView {
    let words = state.words.get();
    let rows = notes
        .iter()
        .map(|n| view! { <li>{words.import_note(n, columns)}</li> })
        .collect_view();
    view! { <ul class="import-notes" data-test="import-notes">{rows}</ul> }.into_any()
}

fn faults(state: State, faults: &[RowFault], columns: &[Column]) -> AnyView {
    let words = state.words.get();
    let more = faults.len().saturating_sub(FAULTS_NAMED);
    let rows = faults
        .iter()
        .take(FAULTS_NAMED)
        .map(|f| view! { <li class="field-trouble">{words.import_fault(f, columns)}</li> })
        .collect_view();
    view! {
        <ul data-test="import-faults">
            {rows}
            {(more > 0).then(|| view! { <li>{text::import_more_faults(words, more)}</li> })}
        </ul>
    }
    .into_any()
}

fn table_view(import: Import, table: &Arc<Table>) -> AnyView {
    let state = import.state;
    let preview = {
        let table = Arc::clone(table);
        Memo::new(move |_| import.choices.with(|c| table.preview(c)))
    };
    let settled = move |get: fn(&Preview) -> DecimalMark| preview.with(get);
    let mark = Signal::derive(move || settled(|p| p.mark.0));
    let kind = Signal::derive(move || preview.with(|p| p.distance_kind.0));
    let reckoning = Signal::derive(move || preview.with(|p| p.reckoning.0));
    let count = preview.with_untracked(|p| p.columns.len());
    let heads = (0..count)
        .map(|i| column_head(import, preview, i))
        .collect_view();
    let first = move || {
        preview.with(|p| {
            p.first
                .iter()
                .map(|row| {
                    let cells = row
                        .cells
                        .iter()
                        .map(|c| view! { <td>{c.clone()}</td> })
                        .collect_view();
                    view! { <tr><th scope="row">{row.row.to_string()}</th>{cells}</tr> }
                })
                .collect_view()
        })
    };
    let about = move || {
        let words = state.words.get();
        preview.with(|p| {
            let parted = words.name(p.separator).to_owned();
            text::import_about(words, p.rows, &words.count(p.columns.len()), &parted)
        })
    };
    let obstacles = move || {
        let words = state.words.get();
        preview.with(|p| {
            p.obstacles
                .iter()
                .map(|o| {
                    view! { <li class="field-trouble">{words.import_obstacle(o, &p.columns)}</li> }
                })
                .collect_view()
        })
    };
    let has_faults = move || preview.with(|p| !p.faults.is_empty());
    let label = move |key: Key| move || state.words.get().say(key);
    view! {
        <p data-test="import-about">{about}</p>
        <div class="table-scroll" tabindex="0" role="region" aria-label=label(Key::IMPORT_COLUMNS)>
            <table class="table import-table" data-test="import-table">
                <thead>
                    <tr>
                        <th scope="col">{label(Key::IMPORT_ROW)}</th>
                        {heads}
                    </tr>
                </thead>
                <tbody>{first}</tbody>
            </table>
        </div>
        <div role="alert">
            <ul data-test="import-obstacles">{obstacles}</ul>
        </div>
        <div class="fields">
            {choice_of(
                state,
                "import-mark",
                Key::IMPORT_MARK,
                &MARKS,
                mark,
                move |v| import.choices.update(|c| c.mark = Some(v)),
            )}
            {choice_of(
                state,
                "import-kind",
                Key::FIELD_DISTANCE_KIND,
                &DISTANCES,
                kind,
                move |v| import.choices.update(|c| c.distance_kind = Some(v)),
            )}
            {choice_of(
                state,
                "import-reckoning",
                Key::FIELD_RECKONING,
                &RECKONINGS,
                reckoning,
                move |v| import.choices.update(|c| c.reckoning = Some(v)),
            )}
        </div>
        {move || preview.with(|p| faults(state, &p.faults, &p.columns))}
        <Show when=has_faults>{faulty_choice(import)}</Show>
        {move || {
            // What the taking itself notes comes last.
            let taken = import.line().and_then(Result::ok).map(|l| l.notes);
            preview.with(|p| notes(state, taken.as_deref().unwrap_or(&p.notes), &p.columns))
        }}
    }
    .into_any()
}

fn faulty_choice(import: Import) -> AnyView {
    choice_of(
        import.state,
        "import-faulty",
        Key::IMPORT_FAULTY,
        &FAULTY,
        import.leave_out.into(),
        move |v| import.leave_out.set(v),
    )
}

/// The head of a column: its own heading, what it is read as, in what unit.
fn column_head(import: Import, preview: Memo<Preview>, index: usize) -> AnyView {
    let state = import.state;
    let column = move |get: fn(&Column) -> String| {
        preview.with(|p| p.columns.get(index).map(get).unwrap_or_default())
    };
    let named = Signal::derive(move || {
        let words = state.words.get();
        preview.with(|p| words::capital(&words.import_column(index, &p.columns)))
    });
    let meanings = Signal::derive(move || {
        let words = state.words.get();
        Meaning::ALL
            .iter()
            .map(|m| (format!("{m:?}"), words.name(*m).to_owned()))
            .collect::<Vec<_>>()
    });
    let meaning = Signal::derive(move || column(|c| format!("{:?}", c.meaning)));
    let units = Signal::derive(move || {
        preview.with(|p| {
            let units = p.columns.get(index).map_or(&[][..], |c| c.meaning.units());
            units
                .iter()
                .map(|u| ((*u).to_owned(), (*u).to_owned()))
                .collect::<Vec<_>>()
        })
    });
    let unit = Signal::derive(move || column(|c| c.unit.to_owned()));
    let unit_label = Signal::derive(move || state.words.get().say(Key::IMPORT_UNIT).to_owned());
    let ground = move || {
        let words = state.words.get();
        preview.with(|p| p.columns.get(index).map(|c| words.name(c.meaning_from)))
    };
    let has_units = move || units.with(|u| u.len() > 1);
    view! {
        <th scope="col">
            {picker(
                &format!("import-column-{index}"),
                named,
                meanings,
                meaning,
                move |value| {
                    if let Some(m) = Meaning::ALL.into_iter().find(|m| format!("{m:?}") == value) {
                        import
                            .choices
                            .update(|c| {
                                c.meanings.insert(index, m);
                                c.units.remove(&index);
                            });
                    }
                },
            )}
            <Show when=has_units>
                {picker(
                    &format!("import-unit-{index}"),
                    unit_label,
                    units,
                    unit,
                    move |value| {
                        let known = preview
                            .with_untracked(|p| {
                                let column = p.columns.get(index)?;
                                column.meaning.units().iter().copied().find(|u| *u == value)
                            });
                        if let Some(unit) = known {
                            import
                                .choices
                                .update(|c| {
                                    c.units.insert(index, unit);
                                });
                        }
                    },
                )}
            </Show>
            <span class="quiet">{ground}</span>
        </th>
    }
    .into_any()
}

fn gpx_view(import: Import, gpx: &Gpx) -> AnyView {
    let state = import.state;
    let summaries = StoredValue::new(gpx.summaries());
    let lines = Signal::derive(move || {
        let words = state.words.get();
        summaries.with_value(|all| {
            all.iter()
                .enumerate()
                .map(|(i, s)| (i.to_string(), words.import_summary(s)))
                .collect::<Vec<_>>()
        })
    });
    let tolerances = Signal::derive(move || {
        let words = state.words.get();
        TOLERANCES
            .iter()
            .map(|t| {
                let metres = t.parse().unwrap_or_default();
                let shown = words.figure(workbook::Measure::new(
                    metres,
                    workbook::units::Kind::Distance,
                ));
                ((*t).to_owned(), shown)
            })
            .collect::<Vec<_>>()
    });
    let label = move |key: Key| Signal::derive(move || state.words.get().say(key).to_owned());
    let faulty = move || {
        let line = import.line.get();
        summaries.with_value(|all| all.get(line).is_some_and(|s| s.faulty > 0))
    };
    view! {
        <div class="fields" data-test="import-gpx">
            {picker(
                "import-line",
                label(Key::IMPORT_LINE),
                lines,
                Signal::derive(move || import.line.get().to_string()),
                move |value| {
                    if let Ok(line) = value.parse() {
                        import.line.set(line);
                    }
                },
            )}
            {picker(
                "import-tolerance",
                label(Key::IMPORT_TOLERANCE),
                tolerances,
                import.tolerance.into(),
                move |value| import.tolerance.set(value),
            )}
            {choice_of(
                state,
                "import-walked",
                Key::IMPORT_WALKED,
                &WALKED,
                import.reversed.into(),
                move |v| import.reversed.set(v),
            )}
            <Show when=faulty>{faulty_choice(import)}</Show>
        </div>
        {move || match import.line() {
            Some(Ok(line)) => notes(state, &line.notes, &[]),
            Some(Err(why)) => refused(state, &why),
            None => ().into_any(),
        }}
    }
    .into_any()
}
