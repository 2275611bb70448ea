//! A first book, entered in the order of the page: flow, line, pipe, fittings,
//! nozzles; then what edits, undo, a wrong entry and other units do to it.
//!
//! The figures on the page are held against those that the workbook gives
//! natively for the book as the page has stored it.

use walkthrough::{Key, Page, Result, walk};
use words::{Language, Words};
use workbook::units::UnitSystem;
use workbook::verdict::Verdict;
use workbook::working::FigureKey;
use workbook::{Book, Findings, evaluate, format};

/// Stations as typed: distance along the slope from the first, and level.
const STATIONS: [(&str, &str); 6] = [
    ("0", "152.4"),
    ("12 ft", "152"),
    ("60", "146,5"),
    ("130", "131"),
    ("200", "118.5"),
    ("262.5", "103"),
];

fn metric() -> Words {
    Words::new(Language::English, UnitSystem::Metric)
}

/// The book as stored, and what it comes to.
async fn stored(page: &Page) -> Result<(Book, Findings)> {
    let book = format::read(page.stored_book().await?.as_bytes()).map_err(|e| format!("{e:?}"))?;
    let findings = evaluate(&book);
    Ok((book, findings))
}

/// Types the line down the table by Enter alone, from an empty book.
async fn enter_line(page: &Page) -> Result {
    page.sheet("line").await?;
    page.tap_test("field-StationDistance-1").await?;
    for (row, (distance, level)) in STATIONS.iter().enumerate() {
        let id = row + 1;
        let (here, there) = (
            format!("field-StationDistance-{id}"),
            format!("field-StationLevel-{id}"),
        );
        page.until(&format!("{here} has the focus"), &has_focus(&here))
            .await?;
        page.find_test(&here).await?.send_keys(*distance).await?;
        page.press(Key::Enter).await?;
        page.until(&format!("{there} has the focus"), &has_focus(&there))
            .await?;
        page.find_test(&there).await?.send_keys(*level).await?;
        // The last line ends with Tab: Enter would add a station.
        let last = row + 1 == STATIONS.len();
        page.press(if last { Key::Tab } else { Key::Enter }).await?;
    }
    let rows = page
        .script(
            "return document.querySelectorAll('[data-test=station-table] tbody tr').length;",
            vec![],
        )
        .await?;
    assert_eq!(rows, STATIONS.len(), "rows of the table");
    Ok(())
}

fn has_focus(id: &str) -> String {
    format!("return document.activeElement?.id === '{id}';")
}

/// Levels and temperatures, each by its label.
async fn enter_levels_and_temperatures(page: &Page) -> Result {
    page.sheet("line").await?;
    for (label, text) in [
        ("Normal forebay level", "153.2"),
        ("Highest forebay level", "153.5"),
        ("Lowest forebay level", "152.9"),
        ("Jet axis level", "103.4"),
    ] {
        page.fill(label, text).await?;
    }
    page.sheet("stream").await?;
    for (label, text) in [
        ("Altitude above sea", "700"),
        ("Coldest water", "2"),
        ("Warmest water", "18"),
        ("Warmest pipe wall", "20"),
        ("Coldest pipe wall", "0"),
    ] {
        page.fill(label, text).await?;
    }
    Ok(())
}

async fn enter_flow(page: &Page) -> Result {
    page.sheet("stream").await?;
    page.fill("Design flow", "24").await
}

/// Filters by material, and lays the first pipe of the list that does not fail.
async fn choose_pipe(page: &Page) -> Result<String> {
    page.sheet("pipe").await?;
    page.until_swept().await?;
    page.pick("sweep-material", "pe100").await?;
    page.until(
        "only PE 100 is listed",
        "const rows = [...document.querySelectorAll('[data-test^=row-]')];
         return rows.length > 0 && rows.every((row) => row.dataset.test.includes('pe100'));",
    )
    .await?;
    let test = page
        .script(
            "const open = document.querySelector('[data-test^=row-] td[data-verdict=unsettled]');
             return open.closest('tr').querySelector('[data-test^=choose-]').dataset.test;",
            vec![],
        )
        .await?;
    let test = test.as_str().ok_or("no pipe is open to choice")?.to_owned();
    page.tap_test(&test).await?;
    page.until(
        "the pipe is marked as chosen",
        &format!(
            "return document.querySelector('[data-test=\"{test}\"]')?.ariaPressed === 'true';"
        ),
    )
    .await?;
    Ok(test)
}

/// An entrance at the head and a bend further down, each with its rating.
async fn add_fittings(page: &Page) -> Result {
    page.sheet("line").await?;
    for id in [1, 2] {
        page.tap_test("fitting-add").await?;
        page.find_test(&format!("fitting-{id}")).await?;
    }
    page.pick("fitting-kind-1", "EntranceRounded").await?;
    page.pick("fitting-station-1", "1").await?;
    page.pick("fitting-kind-2", "Bend").await?;
    page.pick("fitting-station-2", "4").await?;
    for (field, text) in [
        ("field-FittingRating-1", "10"),
        ("field-FittingAngle-2", "22.5"),
        ("field-FittingRadius-2", "3"),
        ("field-FittingRating-2", "16"),
    ] {
        page.write(field, text).await?;
    }
    page.press(Key::Tab).await
}

async fn enter_jets(page: &Page) -> Result {
    page.sheet("jets").await?;
    page.fill("Number of nozzles", "2").await?;
    page.fill("Rating of manifold and valves", "16").await
}

/// The whole book, as the other tests of this file need it.
async fn enter_all(page: &Page) -> Result {
    enter_flow(page).await?;
    enter_line(page).await?;
    enter_levels_and_temperatures(page).await?;
    choose_pipe(page).await?;
    add_fittings(page).await?;
    enter_jets(page).await
}

/// Holds a figure on the page against the findings.
async fn agrees(page: &Page, found: &Findings, words: Words, key: FigureKey) -> Result<String> {
    let slug = format!("{key:?}").replace('(', "-").replace(')', "");
    let wanted = words.figure(
        found
            .working(key)
            .map_err(|gap| format!("{key:?}: {gap:?}"))?
            .result,
    );
    page.text_when(&format!("figure-{slug}"), |text| text == wanted)
        .await
        .map_err(|trouble| format!("{key:?}, natively {wanted:?}: {trouble}").into())
}

#[test]
fn a_first_book_is_entered_by_touch_and_keyboard() {
    walk("order", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;

        // The next-entry line leads to the flow, and then on.
        let first = page.text("next").await?;
        assert_eq!(first, "Next entry: design flow.");
        page.tap_test("next").await?;
        page.until("the flow has the focus", &has_focus("field-DesignFlow"))
            .await?;
        page.find_test("field-DesignFlow")
            .await?
            .send_keys("24")
            .await?;
        page.text_when("title-flow", |text| text.starts_with("24.0\u{202f}L/s"))
            .await?;
        let second = page.text_when("next", |text| text != first).await?;
        assert!(second.contains("station 1"), "{second}");
        page.tap_test("next").await?;
        page.find_test("sheet-line").await?;
        page.until(
            "the first station has the focus",
            // Distances are counted from there: its own is taken as none.
            &has_focus("field-StationLevel-1"),
        )
        .await?;
        enter_line(page).await?;
        page.text_when("field-StationDistance-2-trouble", str::is_empty)
            .await?;
        let read_as = page
            .script(
                "return document.getElementById('field-StationDistance-2-read').textContent;",
                vec![],
            )
            .await?;
        assert_eq!(read_as, "Read as 3.66\u{202f}m.");
        page.screenshot("order-line-360").await?;

        enter_levels_and_temperatures(page).await?;
        // 153.2 m normal forebay less 103.4 m jet axis.
        page.text_when("title-head", |text| text.starts_with("49.8\u{202f}m"))
            .await?;
        let third = page.text("next").await?;
        assert_eq!(third, "Next: choose a pipe for stretch 1.");
        // The keyboard put away, the drawing grows again: a tap before it has
        // would land on what slides under the finger.
        page.script("document.activeElement.blur();", vec![])
            .await?;
        page.until(
            "the drawing stands again",
            "return document.querySelector('.drawing') !== null
               && document.querySelector('.drawing.is-shrunk') === null;",
        )
        .await?;
        page.tap_test("next").await?;
        page.find_test("sheet-pipe").await?;
        let chosen = choose_pipe(page).await?;
        page.text_when("next", |text| text != third).await?;
        page.screenshot("order-pipe-360").await?;

        // The pipe stands in the book and its verdict is said: open, because no closing time
        // is entered yet.
        let (book, found) = stored(page).await?;
        let words = metric();
        let judged = &found.judged.stretches[0];
        assert_eq!(judged.verdict, Verdict::Unsettled);
        let pipe = book.line.stretches[0].pipe.clone().unwrap_or_default();
        assert_eq!(format!("choose-{}", pipe.replace(['/', '.'], "-")), chosen);
        let verdict = page
            .text_when("verdict-1", |text| text.contains("Unsettled"))
            .await?;
        let sentence = words.about(&book).stretch_verdict(judged, &found.resolved);
        assert!(
            flat(&verdict).contains(&flat(&sentence)),
            "{verdict} holds not {sentence}"
        );
        assert!(
            verdict
                .to_lowercase()
                .contains("closing time, full stroke is not entered yet"),
            "{verdict}"
        );
        let holding = page
            .script(
                "return document.querySelectorAll(
                   '[data-test^=row-] td[data-verdict=holds], .verdict[data-verdict=holds]').length;",
                vec![],
            )
            .await?;
        assert_eq!(
            holding, 0,
            "a pipe is said to hold though no closing time is entered"
        );

        add_fittings(page).await?;
        let (book, found) = stored(page).await?;
        assert_eq!(book.line.fittings.len(), 2);
        assert_eq!(
            found.resolved.fittings[1]
                .rating
                .as_ref()
                .map(|r| r.map(|r| words.figure(r))),
            Ok(Some("16.0\u{202f}bar".to_owned()))
        );

        enter_jets(page).await?;
        let (_, found) = stored(page).await?;
        for key in [
            FigureKey::NozzleBore,
            FigureKey::NetHead,
            FigureKey::JetVelocity,
            FigureKey::JetDiameter,
            FigureKey::JetPower,
            FigureKey::Loss,
            FigureKey::LossShare,
        ] {
            agrees(page, &found, words, key).await?;
        }
        page.screenshot("order-jets-360").await?;
        page.sheet("line").await?;
        for key in [
            FigureKey::GrossHead,
            FigureKey::PipeLength,
            FigureKey::Lowest,
        ] {
            agrees(page, &found, words, key).await?;
        }
        // The last that is asked for leads to the Surge sheet.
        page.tap_test("next").await?;
        page.find_test("sheet-surge").await?;
        page.write("field-ClosingTime", "30").await?;
        page.press(Key::Tab).await?;
        // The whole transient follows, and is what the workbook finds.
        page.find_test("surge-table").await?;
        let (_, found) = stored(page).await?;
        assert!(found.transient.surge.is_ok());
        page.screenshot("order-surge-360").await?;
        // All is entered: the line that asked for more is gone.
        page.until(
            "nothing more is asked for",
            "return document.querySelector('[data-test=next]') === null;",
        )
        .await?;
        // What was typed stands as typed.
        for (row, (distance, level)) in STATIONS.iter().enumerate() {
            let station = &stored(page).await?.0.line.stations[row];
            assert_eq!(
                (&*station.distance_m.text, &*station.level_m.text),
                (*distance, *level)
            );
        }
        Ok(())
    });
}

#[test]
fn an_edit_shows_at_once_and_undo_takes_it_back() {
    walk("undo", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        enter_all(page).await?;
        let words = metric();
        let (_, before) = stored(page).await?;
        let bore = agrees(page, &before, words, FigureKey::NozzleBore).await?;

        page.sheet("stream").await?;
        page.write("field-DesignFlow", "27").await?;
        // Not even the field is left: the title block follows each key.
        page.text_when("title-flow", |text| text.starts_with("27.0\u{202f}L/s"))
            .await?;
        page.sheet("jets").await?;
        let (_, after) = stored(page).await?;
        let wider = agrees(page, &after, words, FigureKey::NozzleBore).await?;
        assert_ne!(bore, wider);

        page.tap_test("undo").await?;
        page.text_when("figure-NozzleBore", |text| text == bore)
            .await?;
        page.text_when("title-flow", |text| text.starts_with("24.0\u{202f}L/s"))
            .await?;
        page.sheet("stream").await?;
        assert_eq!(page.written("field-DesignFlow").await?, "24");
        page.tap_test("redo").await?;
        page.text_when("title-flow", |text| text.starts_with("27.0\u{202f}L/s"))
            .await?;
        assert_eq!(page.written("field-DesignFlow").await?, "27");
        Ok(())
    });
}

#[test]
fn a_wrong_entry_says_why_and_leaves_the_rest_alone() {
    walk("wrong", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        enter_all(page).await?;
        page.sheet("line").await?;
        let (_, before) = stored(page).await?;
        let words = metric();
        let head = agrees(page, &before, words, FigureKey::GrossHead).await?;
        let length = agrees(page, &before, words, FigureKey::PipeLength).await?;

        page.sheet("stream").await?;
        page.write("field-DesignFlow", "a bucketful").await?;
        let why = page
            .text_when("field-DesignFlow-trouble", |text| !text.is_empty())
            .await?;
        assert!(why.starts_with("This is not a number."), "{why}");
        let field = page.find_test("field-DesignFlow").await?;
        assert_eq!(field.attr("aria-invalid").await?.as_deref(), Some("true"));
        let described = field.attr("aria-describedby").await?.unwrap_or_default();
        assert!(
            described
                .split(' ')
                .any(|id| id == "field-DesignFlow-trouble"),
            "{described}"
        );
        assert_eq!(page.text("title-head").await?.lines().next(), Some(&*head));
        let flow = page.text("title-flow").await?;
        assert!(flow.starts_with('\u{2014}'), "{flow}");
        page.screenshot("order-wrong-360").await?;

        // By the line that asks to mend it, back from another sheet.
        page.sheet("line").await?;
        page.text_when("figure-GrossHead", |text| text == head)
            .await?;
        page.text_when("figure-PipeLength", |text| text == length)
            .await?;
        page.text_when("figure-Loss", |text| text.contains("Design flow"))
            .await?;
        let next = page.text("next").await?;
        assert!(next.starts_with("To mend:"), "{next}");
        page.tap_test("next").await?;
        page.until("the flow has the focus", &has_focus("field-DesignFlow"))
            .await?;
        assert_eq!(page.written("field-DesignFlow").await?, "a bucketful");
        page.write("field-DesignFlow", "24").await?;
        page.text_when("field-DesignFlow-trouble", str::is_empty)
            .await?;
        let invalid = page
            .find_test("field-DesignFlow")
            .await?
            .attr("aria-invalid")
            .await?;
        assert_eq!(invalid, None);
        Ok(())
    });
}

/// Every text field of the sheet in view, as typed.
async fn typed(page: &Page) -> Result<serde_json::Value> {
    page.script(
        "return [...document.querySelectorAll('input.field-input, textarea')]
           .map((one) => [one.id, one.value]);",
        vec![],
    )
    .await
}

#[test]
fn other_units_change_the_figures_and_not_what_was_typed() {
    walk("units", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        enter_all(page).await?;
        let metric = metric();
        let us = Words::new(Language::English, UnitSystem::UsCustomary);
        let mut before = Vec::new();
        for sheet in ["stream", "line", "jets"] {
            page.sheet(sheet).await?;
            before.push(typed(page).await?);
        }
        let (_, found) = stored(page).await?;
        let keys = [
            FigureKey::NozzleBore,
            FigureKey::NetHead,
            FigureKey::Loss,
            FigureKey::JetVelocity,
        ];
        let mut shown = Vec::new();
        for key in keys {
            shown.push(agrees(page, &found, metric, key).await?);
        }

        page.sheet("stream").await?;
        page.tap_choice("units-us").await?;
        page.text_when("title-head", |text| text.starts_with("163.4\u{202f}ft"))
            .await?;
        let (book, found) = stored(page).await?;
        assert_eq!(book.units, UnitSystem::UsCustomary);
        page.sheet("jets").await?;
        for (key, old) in keys.into_iter().zip(&shown) {
            assert_ne!(&agrees(page, &found, us, key).await?, old);
        }
        for (sheet, old) in ["stream", "line", "jets"].into_iter().zip(&before) {
            page.sheet(sheet).await?;
            assert_eq!(&typed(page).await?, old, "texts on {sheet}");
        }
        page.sheet("stream").await?;
        page.tap_choice("units-metric").await?;
        page.sheet("jets").await?;
        for (key, old) in keys.into_iter().zip(&shown) {
            assert_eq!(&agrees(page, &found, metric, key).await?, old);
        }
        Ok(())
    });
}

#[test]
fn forty_stations_are_entered_and_an_edit_among_them_shows() {
    walk("forty", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        enter_flow(page).await?;
        page.sheet("line").await?;
        page.tap_test("field-StationDistance-1").await?;
        for row in 0..40 {
            let id = format!("field-StationDistance-{}", row + 1);
            page.until(&format!("{id} has the focus"), &has_focus(&id))
                .await?;
            // 12 m along the slope and 2.5 m down at each.
            let element = page.find_test(&id).await?;
            element
                .send_keys(format!("{}", row * 12) + Key::Enter)
                .await?;
            let id = format!("field-StationLevel-{}", row + 1);
            page.until(&format!("{id} has the focus"), &has_focus(&id))
                .await?;
            let end = if row == 39 { Key::Tab } else { Key::Enter };
            let level = 300.0 - f64::from(row) * 2.5;
            page.find_test(&id)
                .await?
                .send_keys(format!("{level}") + end)
                .await?;
        }
        page.text_when("title-head", |text| text.starts_with("97.5\u{202f}m"))
            .await?;
        page.text_when("figure-PipeLength", |text| text.starts_with("468\u{202f}m"))
            .await?;
        choose_pipe(page).await?;
        page.sheet("line").await?;
        let (_, before) = stored(page).await?;
        let words = metric();
        let loss = agrees(page, &before, words, FigureKey::Loss).await?;
        page.write("field-StationDistance-40", "500").await?;
        page.text_when("figure-PipeLength", |text| text.starts_with("500\u{202f}m"))
            .await?;
        let (book, after) = stored(page).await?;
        assert_eq!(book.line.stations.len(), 40);
        assert_ne!(agrees(page, &after, words, FigureKey::Loss).await?, loss);
        page.screenshot("forty-360").await
    });
}

/// Without any white space: wrapped text reads alike.
fn flat(text: &str) -> String {
    text.split_whitespace().collect()
}
