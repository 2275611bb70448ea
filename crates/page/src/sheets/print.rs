//! Print: the schedule and the findings as they go on paper, shown as they
//! will print.

mod notes;
mod pieces;
mod surge;
mod tables;

use crate::drawing::Size;
use crate::inputs::{TextLook, choice, text_field};
use crate::parts::books;
use crate::parts::line_drawing::{drawn, named};
use crate::parts::title_block::name;
use crate::platform::file;
use crate::sheets::head;
use crate::slug;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, Words, csv, text};
use workbook::book::{LayingOrder, Paper, PrintParts};
use workbook::laying::laying;
use workbook::schedule::schedule;
use workbook::{Book, Findings};

const PAPERS: [(Paper, &str, Key); 2] = [
    (Paper::A4, "a4", Key::SETTING_PAPER_A4),
    (Paper::Letter, "letter", Key::SETTING_PAPER_LETTER),
];

const PARTS: [(PrintParts, &str, Key); 3] = [
    (PrintParts::Both, "both", Key::OPTION_PRINT_BOTH),
    (PrintParts::Schedule, "schedule", Key::OPTION_PRINT_SCHEDULE),
    (PrintParts::LayingList, "laying", Key::OPTION_PRINT_LAYING),
];

const LAID: [(LayingOrder, &str, Key); 2] = [
    (LayingOrder::Uphill, "uphill", Key::OPTION_LAY_UPHILL),
    (LayingOrder::Downhill, "downhill", Key::OPTION_LAY_DOWNHILL),
];

/// Room for the long section on both papers, within their margins, mm.
const DRAWING_MM: (f64, f64) = (180.0, 95.0);

/// The sheet.
#[component]
pub fn PrintSheet() -> impl IntoView {
    let state = state();
    view! {
        <div class="screen-only">
            {head(Key::SHEET_PRINT, Key::PAGE_ABOUT_PRINT)} <div class="fields">
                {choice(
                    "paper",
                    Key::SETTING_PAPER,
                    &PAPERS,
                    |b| b.print.paper,
                    |b, p| b.print.paper = p,
                )}
                {choice(
                    "print-parts",
                    Key::PRINT_PARTS,
                    &PARTS,
                    |b| b.print.parts,
                    |b, p| b.print.parts = p,
                )}
                {choice(
                    "laid",
                    Key::LAY_ORDER,
                    &LAID,
                    |b| b.print.laid,
                    |b, p| b.print.laid = p,
                )}
                {text_field(
                    "reviewer",
                    Key::PRINT_REVIEWER,
                    TextLook::default(),
                    |b| b.print.reviewer.clone(),
                    |b, t| b.print.reviewer = t,
                )}
                {text_field(
                    "licence",
                    Key::PRINT_LICENCE,
                    TextLook::default(),
                    |b| b.print.reviewer_licence.clone(),
                    |b, t| b.print.reviewer_licence = t,
                )}
            </div>
            <div class="buttons">
                <button
                    type="button"
                    class="button button-strong"
                    data-test="print"
                    on:click=|_| file::print()
                >
                    {move || state.words.get().say(Key::PAGE_PRINT_NOW)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="csv-schedule"
                    on:click=move |_| save_csv(state, PrintParts::Schedule)
                >
                    {move || state.words.get().say(Key::LAY_CSV_SCHEDULE)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="csv-laying"
                    on:click=move |_| save_csv(state, PrintParts::LayingList)
                >
                    {move || state.words.get().say(Key::LAY_CSV_LAYING)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="print-save-file"
                    on:click=move |_| books::save_file(state)
                >
                    {move || state.words.get().say(Key::DO_SAVE_FILE)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="print-open-file"
                    on:click=move |_| books::pick_file()
                >
                    {move || state.words.get().say(Key::DO_OPEN_FILE)}
                </button>
            </div>
        </div>
        {move || paper(state)}
    }
}

/// Hands one of the lists over for a spreadsheet.
fn save_csv(state: State, part: PrintParts) {
    let words = state.words.get_untracked();
    let book = state.book.get_untracked();
    let findings = state.findings.get_untracked();
    let (table, list) = match part {
        PrintParts::LayingList => match laying(&findings, book.print.laid) {
            Ok(rows) => (csv::laying(words, &book, &rows), "laying"),
            Err(gap) => {
                state.tell(words.about(&book).gap(&gap), true);
                return;
            }
        },
        _ => (
            csv::schedule(words, &book, &schedule(&book, &findings)),
            "schedule",
        ),
    };
    let file_name = slug::csv_name(&name(&book, words), list, book.revision);
    if file::save(&file_name, &csv::file(words, &table), "text/csv") {
        state.tell(text::state_file_saved(words, &file_name), false);
    }
}

/// All that prints.
fn paper(state: State) -> AnyView {
    let words = state.words.get();
    let book = state.book.get();
    let findings = state.findings.get();
    let schedule = schedule(&book, &findings);
    view! {
        <div
            class="print-scroll"
            tabindex="0"
            role="region"
            aria-label=words.say(Key::PRINT_PREVIEW)
        >
        <article class="print-sheet" data-test="print-sheet" lang=words.language.code()>
            {title_block(words, &book, &findings)}
            {(book.print.parts != PrintParts::LayingList)
                .then(|| {
                    view! {
                        {notes::unsettled(words, &book, &findings)}
                        {section(words, &book, &findings)}
                        {tables::schedule(words, &book, &schedule)}
                        {tables::pressures(words, &book, &schedule)}
                        {surge::section(words, &book, &findings)}
                        {pieces::section(words, &book, &findings, &schedule)}
                        {tables::fittings(words, &book, &findings)}
                        {tables::nozzles(words, &book, &findings)}
                        {tables::stations(words, &book, &findings)}
                    }
                        .into_any()
                })}
            {notes::cautions(words, &book, &findings)}
            {(book.print.parts != PrintParts::LayingList)
                .then(|| {
                    view! {
                        {notes::assumptions(words, &book, &findings)}
                        {notes::sources(words, &findings, &schedule)}
                        {notes::review(words, &book)}
                    }
                        .into_any()
                })}
            {(book.print.parts != PrintParts::Schedule)
                .then(|| pieces::laying(words, &book, &findings))}
        </article>
        </div>
    }
    .into_any()
}

fn title_block(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let resolved = &findings.resolved;
    let flow = match (
        &resolved.design_flow,
        book.stream.design_flow_m3_s.plus_minus,
    ) {
        (Ok(flow), Some(doubt)) => words.doubtful(*flow, doubt),
        (Ok(flow), None) => words.figure(*flow),
        (Err(gap), _) => words.about(book).gap(gap),
    };
    let head = resolved
        .gross_head
        .as_ref()
        .map_or_else(|gap| words.about(book).gap(gap), |h| words.figure(*h));
    let units = words.name(book.units).to_owned();
    let cells: Vec<AnyView> = [
        (Key::FIELD_SITE_CLIENT, book.site.client.clone()),
        (Key::PRINT_PREPARED, book.site.prepared_by.clone()),
        (Key::PRINT_DATE, book.site.date.clone()),
        (Key::FIGURE_DESIGN_FLOW, flow),
        (Key::FIGURE_GROSS_HEAD, head),
        (Key::PRINT_UNITS, units),
    ]
    .into_iter()
    .filter(|(_, value)| !value.trim().is_empty())
    .map(|(key, value)| {
        view! {
            <div>
                <dt>{words.say(key)}</dt>
                <dd>{value}</dd>
            </div>
        }
        .into_any()
    })
    .collect();
    view! {
        <header class="print-titleblock">
            <div class="print-site">
                {name(book, words)} <small>{book.site.place.clone()}</small>
                <small>
                    {words.say(Key::PRINT_TITLE)} " · "
                    {text::state_revision(words, &book.revision.to_string())}
                </small>
                {book.invented.then(|| view! { <small>{words.say(Key::PRINT_INVENTED)}</small> })}
            </div>
            <dl>{cells}</dl>
        </header>
    }
    .into_any()
}

fn section(words: Words, book: &Book, findings: &Findings) -> Option<AnyView> {
    let named = named(book, findings, words, None)?;
    let size = Size::paper_mm(DRAWING_MM.0, DRAWING_MM.1);
    let drawing = drawn(named.section, size, words).ok()?;
    let scale = drawing.print_scale.map(|s| {
        let whole = |x: f64| words.axis(x, 0);
        text::page_scale(words, &whole(s.horizontal), &whole(s.vertical))
    });
    let said = drawing.left_out.join(" · ");
    Some(
        view! {
            <section class="print-section print-keep">
                <h2>{words.say(Key::SECTION_TITLE)}</h2>
                <figure
                    class="print-drawing"
                    data-test="print-drawing"
                    inner_html=drawing.picture.element("drawing-svg", "print-section")
                ></figure>
                <p>{scale} " " {said}</p>
            </section>
        }
        .into_any(),
    )
}
