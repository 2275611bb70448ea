//! What goes on paper is what the workbook finds: the demo book is printed, and
//! the PDF's text is held against figures that are computed here, natively.

use pipes::SupplyKind;
use serde_json::Value;
use std::path::Path;
use std::process::Command;
use walkthrough::{Page, Paper, Result, walk};
use words::{Key, Language, Words, text};
use workbook::figure::Figure;
use workbook::schedule::{Line, schedule};
use workbook::units::{Kind, UnitSystem};
use workbook::working::FigureKey;
use workbook::{Book, Findings, Measure, demo, evaluate};

/// Without white space, in small letters: text reads alike however it is wrapped.
fn flat(text: &str) -> String {
    text.split_whitespace().collect::<String>().to_lowercase()
}

/// A PDF's pages, each as its text in the order it was painted, flattened.
#[derive(Debug)]
struct Pages(Vec<String>);

impl Pages {
    fn read(pdf: &Path) -> Result<Self> {
        let output = Command::new("pdftotext")
            .args(["-raw", "-enc", "UTF-8"])
            .arg(pdf)
            .arg("-")
            .output()?;
        if !output.status.success() {
            return Err("pdftotext failed".into());
        }
        let whole = String::from_utf8(output.stdout)?;
        let mut pages: Vec<String> = whole.split('\u{c}').map(flat).collect();
        // Each page ends in a form feed.
        assert_eq!(pages.pop().as_deref(), Some(""), "after the last page");
        Ok(Self(pages))
    }

    /// The page that holds this text in one piece.
    fn page_of(&self, text: &str) -> Option<usize> {
        let text = flat(text);
        assert!(!text.is_empty(), "nothing to look for");
        self.0.iter().position(|page| page.contains(&text))
    }

    fn holds(&self, what: &str, text: &str) -> usize {
        match self.page_of(text) {
            Some(page) => page,
            None => unreachable_text(what, text, &self.0),
        }
    }
}

#[expect(clippy::panic, reason = "this is how a test fails")]
fn unreachable_text(what: &str, text: &str, pages: &[String]) -> usize {
    panic!(
        "{what}: {text:?} is on no page in one piece; the pages are {} long",
        pages
            .iter()
            .map(|p| p.len().to_string())
            .collect::<Vec<_>>()
            .join(", ")
    );
}

/// A table as the page holds it: heads of the columns, and rows of cells.
#[derive(Debug)]
struct Table {
    heads: Vec<String>,
    rows: Vec<Vec<String>>,
}

impl Table {
    async fn read(page: &Page, test: &str) -> Result<Self> {
        page.find_test(test).await?;
        let script = format!(
            "const table = document.querySelector('[data-test=\"{test}\"]');
             const cells = (row) => [...row.cells].map((cell) => cell.textContent);
             return [
               table.tHead ? cells(table.tHead.rows[0]) : [],
               [...table.rows].filter((row) => row.closest('thead') === null).map(cells),
             ];"
        );
        let (heads, rows) = serde_json::from_value(page.script(&script, vec![]).await?)?;
        Ok(Self { heads, rows })
    }

    /// The cell of a row under a head.
    fn cell(&self, row: usize, head: &str) -> &str {
        let found: Vec<usize> = (0..self.heads.len())
            .filter(|i| flat(&self.heads[*i]) == flat(head))
            .collect();
        assert_eq!(found.len(), 1, "columns {head:?} of {:?}", self.heads);
        &self.rows[row][found[0]]
    }
}

/// Every row of every table that prints, each as the text of its cells.
async fn all_rows(page: &Page) -> Result<Vec<String>> {
    let rows = page
        .script(
            "return [...document.querySelectorAll('[data-test=print-sheet] tr')]
               .map((row) => [...row.cells].map((cell) => cell.textContent).join(' '));",
            vec![],
        )
        .await?;
    Ok(serde_json::from_value(rows)?)
}

fn head(words: Words, key: Key, kind: Option<Kind>) -> String {
    format!("{} {}", words.say(key), kind.map_or("", |k| words.unit(k)))
}

fn shown<T: Copy + Into<Measure>>(words: Words, figure: &Figure<T>) -> String {
    match figure {
        Ok(value) => words.value(*value),
        Err(_) => "\u{2014}".to_owned(),
    }
}

/// Holds the schedule of the page against what is computed here.
async fn check_schedule(page: &Page, words: Words, book: &Book, found: &Findings) -> Result {
    let table = Table::read(page, "print-schedule").await?;
    let pressures = Table::read(page, "print-pressures").await?;
    let schedule = schedule(book, found);
    assert_eq!(schedule.lines.len(), 2);
    for (row, (_, line)) in schedule.lines.iter().enumerate() {
        let line: &Line = line.as_ref().map_err(|gap| format!("{gap:?}"))?;
        let pipe = &line.pipe;
        let same = |key: Key, kind: Kind, wanted: String| {
            assert_eq!(table.cell(row, &head(words, key, Some(kind))), wanted);
        };
        same(Key::SCHEDULE_FROM, Kind::Distance, words.value(line.from));
        same(Key::SCHEDULE_TO, Kind::Distance, words.value(line.to));
        same(
            Key::SCHEDULE_LENGTH,
            Kind::Distance,
            words.value(line.length),
        );
        same(
            Key::SCHEDULE_OUTSIDE_DIAMETER,
            Kind::Bore,
            words.value(Measure::bore(pipe.outside_diameter)),
        );
        same(
            Key::SCHEDULE_BORE,
            Kind::Bore,
            words.value(Measure::bore(pipe.bore())),
        );
        same(Key::SCHEDULE_MASS, Kind::Mass, words.value(line.mass));
        same(
            Key::SCHEDULE_MASS_PER_LENGTH,
            Kind::MassPerLength,
            words.value(line.mass_per_length),
        );
        let wall = table.cell(row, &head(words, Key::SCHEDULE_WALL, Some(Kind::Bore)));
        let least = words.value(Measure::bore(pipe.wall_min));
        assert!(wall.starts_with(&least), "wall {wall}, least {least}");
        let designation = table.cell(row, &head(words, Key::SCHEDULE_DESIGNATION, None));
        assert!(
            flat(designation).contains(&flat(&pipe.designation)),
            "{designation}"
        );
        assert!(
            flat(designation).contains(&flat(&pipe.standard)),
            "{designation}"
        );
        assert_eq!(
            table.cell(row, &head(words, Key::SCHEDULE_RATING, None)),
            line.class
        );
        let ordered = table.cell(row, &head(words, Key::SCHEDULE_ORDER, None));
        assert!(!line.orders.is_empty());
        for order in &line.orders {
            let piece = words.figure(Measure::new(
                Measure::bore(order.piece).value,
                Kind::Distance,
            ));
            let count = usize::try_from(order.pieces)?;
            let said = match order.kind {
                SupplyKind::Bar => text::schedule_lengths(words, count, &piece),
                SupplyKind::Coil => text::schedule_coils(words, count, &piece),
            };
            assert!(
                flat(ordered).contains(&flat(&said)),
                "{ordered} lacks {said}"
            );
        }
        let walls = &line.walls;
        let same = |key: Key, kind: Kind, wanted: String| {
            assert_eq!(pressures.cell(row, &head(words, key, Some(kind))), wanted);
        };
        same(
            Key::SCHEDULE_HIGHEST_STATIC,
            Kind::Head,
            shown(words, &line.highest_static),
        );
        same(
            Key::SCHEDULE_ALLOWED,
            Kind::Pressure,
            shown(words, &walls.bearing.clone().map(|b| b.pressure)),
        );
        same(
            Key::SCHEDULE_SHARE,
            Kind::Share,
            shown(words, &walls.share.clone().map(Measure::share)),
        );
        same(
            Key::FIGURE_LOWEST_PRESSURE,
            Kind::Pressure,
            shown(words, &walls.lowest.clone().map(|l| l.pressure)),
        );
    }
    let totals = table.rows.last().ok_or("no totals")?.join(" ");
    for total in [shown(words, &schedule.length), shown(words, &schedule.mass)] {
        assert!(totals.contains(&total), "{totals} lacks {total}");
    }
    Ok(())
}

/// Holds the rest of the print's text against what is computed here.
fn check_text(pages: &Pages, words: Words, book: &Book, found: &Findings) -> Result {
    let about = words.about(book);
    pages.holds("site", &book.site.name);
    for fitting in &found.resolved.fittings {
        let name = words.name(fitting.kind);
        pages.holds("fitting", name);
        if let Ok(Some(rating)) = &fitting.rating {
            pages.holds("rating", &words.value(*rating));
        }
    }
    for key in [
        FigureKey::NozzleBore,
        FigureKey::JetDiameter,
        FigureKey::JetVelocity,
        FigureKey::NetHead,
        FigureKey::Loss,
        FigureKey::JetPower,
    ] {
        let figure = found
            .working(key)
            .map_err(|gap| format!("{key:?}: {gap:?}"))?;
        let row = format!("{} {}", about.figure_name(key), words.figure(figure.result));
        pages.holds("nozzles", &row);
    }
    let jets = found
        .resolved
        .jets
        .as_ref()
        .map_err(|gap| format!("{gap:?}"))?;
    pages.holds(
        "nozzles",
        &format!("{} × {}", jets.count, words.name(jets.kind)),
    );
    // The drawing and the table of pressures name the same lowest pressure.
    let lowest = found
        .working(FigureKey::Lowest)
        .map_err(|gap| format!("{gap:?}"))?;
    let lowest = text::page_lowest_of(words, &words.figure(lowest.result));
    pages.holds("lowest pressure in the drawing", &lowest);
    for assumption in found.assumptions() {
        pages.holds("assumption", &about.assumption(assumption));
    }
    for caution in &found.judged.cautions {
        let said = about.caution(caution);
        pages.holds("caution", said.title);
        pages.holds("caution", &said.body);
    }
    // The closing that the verdicts rest on is ordered, with its reserve.
    assert!(found.transient.surge.is_ok(), "the demo's surge is solved");
    pages.holds("closing", words.say(Key::SURGE_PRINT));
    let closing = found
        .resolved
        .drive
        .speeds
        .as_ref()
        .map_err(|gap| format!("{gap:?}"))?
        .full_stroke();
    pages.holds("closing time", &words.figure(closing));
    let verdict = text::verdict_book(words, words.verdict(found.judged.verdict));
    assert_eq!(pages.holds("verdict", &verdict), 0);
    assert_eq!(
        pages.holds("not for building", words.say(Key::PRINT_NOT_FOR_BUILDING)),
        0
    );
    for stretch in &found.judged.stretches {
        let said = about.stretch_verdict(stretch, &found.resolved);
        assert_eq!(pages.holds("verdict of a stretch", &said), 0);
    }
    assert_eq!(pages.holds("invented", words.say(Key::PRINT_INVENTED)), 0);
    for key in [
        Key::PRINT_REVIEWER,
        Key::PRINT_LICENCE,
        Key::PRINT_SIGNATURE,
    ] {
        pages.holds("place of the reviewer", words.say(key));
    }
    Ok(())
}

/// The size of the first page in whole points.
fn paper_of(pdf: &Path) -> Result<String> {
    let output = Command::new("pdfinfo").arg(pdf).output()?;
    let said = String::from_utf8(output.stdout)?;
    said.lines()
        .find_map(|line| line.strip_prefix("Page size:"))
        .map(|size| size.trim().to_owned())
        .ok_or_else(|| "pdfinfo names no size".into())
}

async fn check_print(page: &Page, words: Words, paper: Paper, name: &str) -> Result<Pages> {
    let book = demo::demo("any");
    let found = evaluate(&book);
    let (choice, size) = match paper {
        Paper::A4 => ("paper-a4", "594.96 x 841.92"),
        Paper::Letter => ("paper-letter", "612 x 792"),
    };
    page.tap_choice(choice).await?;
    page.until(
        "the paper is chosen",
        &format!("return document.documentElement.classList.contains('{choice}');"),
    )
    .await?;
    check_schedule(page, words, &book, &found).await?;
    // The printer holds the other paper: the page's own choice stands.
    let other = match paper {
        Paper::A4 => Paper::Letter,
        Paper::Letter => Paper::A4,
    };
    let pdf = page.print_to(name, other).await?;
    let said = paper_of(&pdf)?;
    assert!(said.starts_with(size), "{said}");
    let pages = Pages::read(&pdf)?;
    check_text(&pages, words, &book, &found)?;
    let rows = all_rows(page).await?;
    assert!(rows.len() > 30, "{} rows", rows.len());
    for row in rows {
        pages.holds("a row in one piece", &row);
    }
    Ok(pages)
}

#[test]
fn the_print_says_what_the_workbook_finds() {
    walk("print", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        page.sheet("print").await?;
        let words = Words::new(Language::English, UnitSystem::Metric);
        check_print(page, words, Paper::A4, "print-a4").await?;
        check_print(page, words, Paper::Letter, "print-letter").await?;
        Ok(())
    });
}

/// Headings of the print.
const HEADINGS: [Key; 12] = [
    Key::PRINT_VERDICT,
    Key::PRINT_UNSETTLED,
    Key::SECTION_TITLE,
    Key::SCHEDULE_TITLE,
    Key::PAGE_PRESSURES,
    Key::SCHEDULE_FITTINGS,
    Key::SCHEDULE_NOZZLES,
    Key::PRINT_STATIONS,
    Key::PRINT_CAUTIONS,
    Key::PRINT_ASSUMPTIONS,
    Key::PAGE_SOURCES,
    Key::PRINT_REVIEWER_TITLE,
];

/// Heads of columns.
const COLUMNS: [Key; 22] = [
    Key::SCHEDULE_FROM,
    Key::SCHEDULE_TO,
    Key::SCHEDULE_LENGTH,
    Key::SCHEDULE_DESIGNATION,
    Key::SCHEDULE_OUTSIDE_DIAMETER,
    Key::SCHEDULE_WALL,
    Key::SCHEDULE_BORE,
    Key::SCHEDULE_RATING,
    Key::SCHEDULE_ORDER,
    Key::SCHEDULE_MASS,
    Key::SCHEDULE_MASS_PER_LENGTH,
    Key::SCHEDULE_HIGHEST_STATIC,
    Key::SCHEDULE_ALLOWED,
    Key::SCHEDULE_SHARE,
    Key::SCHEDULE_VERDICT,
    Key::SCHEDULE_FITTING,
    Key::SCHEDULE_STATION,
    Key::SCHEDULE_COUNT,
    Key::FIGURE_CHAINAGE,
    Key::FIGURE_RATING,
    Key::FIGURE_LEVEL,
    Key::FIGURE_HORIZONTAL_LENGTH,
];

/// Heads and headings of the print, as the page holds them.
async fn heads(page: &Page) -> Result<Vec<String>> {
    let found = page
        .script(
            "return [...document.querySelectorAll(
               '[data-test=print-sheet] :is(h2, h3, thead th, dt, .print-sign div)')]
               .map((one) => one.textContent.trim());",
            vec![],
        )
        .await?;
    Ok(serde_json::from_value(found)?)
}

#[test]
fn the_print_speaks_spanish_through_and_through() {
    walk("print-es", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        page.sheet("stream").await?;
        page.tap_choice("language-es").await?;
        page.until(
            "the page is Spanish",
            "return document.documentElement.lang === 'es';",
        )
        .await?;
        page.sheet("print").await?;
        let words = Words::new(Language::Spanish, UnitSystem::Metric);
        let english = Words::new(Language::English, UnitSystem::Metric);
        let pages = check_print(page, words, Paper::A4, "print-es-a4").await?;
        check_print(page, words, Paper::Letter, "print-es-letter").await?;

        let heads = heads(page).await?;
        assert!(heads.len() > 30, "{heads:?}");
        for key in HEADINGS {
            pages.holds("heading", words.say(key));
            assert!(
                heads.iter().any(|head| head == words.say(key)),
                "{}",
                words.say(key)
            );
        }
        for key in COLUMNS {
            let said = words.say(key);
            assert!(
                heads.iter().any(|head| head.starts_with(said)),
                "{said} in {heads:?}"
            );
            pages.holds("head of a column", said);
        }
        for key in HEADINGS.into_iter().chain(COLUMNS) {
            let said = english.say(key);
            // Some words are the same in both.
            let same = HEADINGS
                .into_iter()
                .chain(COLUMNS)
                .any(|other| words.say(other).starts_with(said));
            assert!(
                same || heads.iter().all(|head| !head.starts_with(said)),
                "English is left: {said}"
            );
        }
        let language: Value = page
            .script(
                "return document.querySelector('[data-test=print-sheet]').lang;",
                vec![],
            )
            .await?;
        assert_eq!(language, "es");
        Ok(())
    });
}
