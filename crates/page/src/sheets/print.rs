//! Print: the schedule and the findings as they go on paper, shown as they
//! will print.

mod notes;
mod tables;

use crate::drawing::Size;
use crate::inputs::{TextLook, choice, text_field};
use crate::parts::books;
use crate::parts::line_drawing::{drawn, named};
use crate::parts::title_block::name;
use crate::platform::file;
use crate::sheets::head;
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, Words, text};
use workbook::book::Paper;
use workbook::schedule::schedule;
use workbook::{Book, Findings};

const PAPERS: [(Paper, &str, Key); 2] = [
    (Paper::A4, "a4", Key::SETTING_PAPER_A4),
    (Paper::Letter, "letter", Key::SETTING_PAPER_LETTER),
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
            {title_block(words, &book, &findings)} {notes::unsettled(words, &book, &findings)}
            {section(words, &book, &findings)}
            {tables::schedule(words, &book, &schedule)}
            {tables::pressures(words, &book, &schedule)}
            {tables::fittings(words, &book, &findings)}
            {tables::nozzles(words, &book, &findings)}
            {tables::stations(words, &book, &findings)}
            {notes::cautions(words, &book, &findings)}
            {notes::assumptions(words, &book, &findings)}
            {notes::sources(words, &findings, &schedule)} {notes::review(words, &book)}
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
