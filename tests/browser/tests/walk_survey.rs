//! A humped line as it is surveyed: entered by thumb in mixed ways, its
//! cautions named, cut where the class runs out, printed with its laying list
//! and read back; and a survey brought in from a file's text.
//!
//! The figures are held against those the workbook gives natively for the
//! book as the page has stored it.

use std::collections::HashSet;
use std::process::Command;
use walkthrough::{Key, Page, Paper, Result, walk};
use words::{Language, Words, csv};
use workbook::cut::{Proposal, proposals};
use workbook::laying::laying;
use workbook::schedule::schedule;
use workbook::units::UnitSystem;
use workbook::{Book, Findings, evaluate, format};

/// One station as typed: distance from the first, and what levels it.
enum Row {
    Level(&'static str, &'static str),
    /// Fore sight and back sight.
    Angle(&'static str, &'static str, &'static str),
}

/// Down from the forebay, over a hump that nearly reaches its level, to the
/// powerhouse. The last leg is sighted.
const ROWS: [Row; 6] = [
    Row::Level("0", "150"),
    Row::Level("60", "138"),
    Row::Level("120", "149.2"),
    Row::Level("200", "120"),
    Row::Level("280", "95"),
    Row::Angle("340", "-14.5", "14.3"),
];

fn metric() -> Words {
    Words::new(Language::English, UnitSystem::Metric)
}

async fn stored(page: &Page) -> Result<(Book, Findings)> {
    let book = format::read(page.stored_book().await?.as_bytes()).map_err(|e| format!("{e:?}"))?;
    let findings = evaluate(&book);
    Ok((book, findings))
}

/// Types into the field that has the focus and goes on by Enter.
async fn type_on(page: &Page, field: &str, text: &str) -> Result {
    page.until(
        &format!("{field} has the focus"),
        &format!("return document.activeElement?.id === '{field}';"),
    )
    .await?;
    page.find_test(field).await?.send_keys(text).await?;
    page.press(Key::Enter).await
}

async fn enter_line(page: &Page) -> Result {
    page.sheet("line").await?;
    page.tap_test("field-StationDistance-1").await?;
    for (row, id) in ROWS.iter().zip(1..) {
        let distance = format!("field-StationDistance-{id}");
        match row {
            Row::Level(along, level) => {
                type_on(page, &distance, along).await?;
                if id + 1 == ROWS.len() {
                    // The next station is sighted: chosen before it is added.
                    let level_field = format!("field-StationLevel-{id}");
                    page.find_test(&level_field)
                        .await?
                        .send_keys(*level)
                        .await?;
                    page.press(Key::Tab).await?;
                    page.tap_choice("line-way-angle").await?;
                    page.tap_test("station-add").await?;
                } else {
                    type_on(page, &format!("field-StationLevel-{id}"), level).await?;
                }
            }
            Row::Angle(along, fore, back) => {
                type_on(page, &distance, along).await?;
                type_on(page, &format!("field-StationForeSight-{id}"), fore).await?;
                page.find_test(&format!("field-StationBackSight-{id}"))
                    .await?
                    .send_keys(*back)
                    .await?;
                page.press(Key::Tab).await?;
            }
        }
    }
    Ok(())
}

async fn enter_rest(page: &Page) -> Result {
    page.sheet("stream").await?;
    page.fill("Design flow", "15").await?;
    for (label, text) in [
        ("Altitude above sea", "700"),
        ("Coldest water", "2"),
        ("Warmest water", "18"),
        ("Warmest pipe wall", "20"),
        ("Coldest pipe wall", "0"),
    ] {
        page.fill(label, text).await?;
    }
    page.sheet("line").await?;
    page.fill("Normal forebay level", "151").await?;
    page.fill("Lowest forebay level", "150.6").await
}

/// Lays a pipe that the foot of the line is too deep for.
async fn lay_weak_pipe(page: &Page) -> Result {
    page.sheet("pipe").await?;
    page.until_swept().await?;
    page.pick("sweep-material", "pe100").await?;
    page.tap_choice("sweep-fit-all").await?;
    // The list shows a first part of many rows.
    page.until(
        "the weak pipe is listed",
        "const weak = document.querySelector('[data-test=choose-pe100-iso4427-125-sdr26]');
         if (weak) return true;
         document.querySelector('[data-test=sweep-all]')?.click();
         return false;",
    )
    .await?;
    page.tap_test("choose-pe100-iso4427-125-sdr26").await
}

async fn cautions(page: &Page) -> Result<String> {
    let text = page
        .script(
            "return [...document.querySelectorAll('.caution')].map((c) => c.textContent).join('\\n');",
            vec![],
        )
        .await?;
    Ok(text.as_str().unwrap_or_default().to_owned())
}

#[test]
fn a_humped_line_is_entered_cut_and_printed() {
    walk("survey", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        enter_line(page).await?;
        enter_rest(page).await?;
        let (book, found) = stored(page).await?;
        assert_eq!(found.troubles(), vec![], "{book:?}");
        let profile = &found.resolved.profile;
        assert_eq!(profile.usable.len(), ROWS.len());
        // 60 m at 14.4 degrees, the mean of both sights: 14.921 m (by hand).
        let foot = profile.usable.last().ok_or("no foot")?.level.m();
        assert!((foot - (95.0 - 14.921)).abs() < 1e-3, "{foot}");

        lay_weak_pipe(page).await?;
        page.sheet("line").await?;
        // What the hump does is named, with its station.
        let (_, found) = stored(page).await?;
        let suction = found.steady.suction.clone().map_err(|e| format!("{e:?}"))?;
        assert!(!suction.is_empty(), "the hump runs below atmosphere");
        let vents = found.relief.vents.clone().map_err(|e| format!("{e:?}"))?;
        assert!(vents.iter().any(|v| v.station == 3), "{vents:?}");
        let said = cautions(page).await?;
        for caution in &found.judged.cautions {
            use workbook::caution::{Caution, Sheet};
            let named = matches!(
                caution,
                Caution::SubAtmospheric { .. } | Caution::AirCollects { .. }
            );
            if named && caution.sheets().contains(&Sheet::Line) {
                let wanted = metric().about(&book).caution(caution).body;
                assert!(said.contains(&wanted), "{said} lacks {wanted}");
            }
        }
        assert!(said.contains("station 3"), "{said}");
        page.screenshot("survey-hump-360").await?;

        // The class runs out down the line: one tap cuts it there.
        let wanted = proposals(&found);
        let Some((stretch, Ok(Proposal::Cut(cut)))) = wanted.first() else {
            return Err(format!("no cut is proposed: {wanted:?}").into());
        };
        page.tap_test(&format!("cut-take-{stretch}")).await?;
        page.until(
            "two stretches are there",
            "return document.querySelectorAll('[data-test^=line-stretch-pick-]').length === 2;",
        )
        .await?;
        let (book, found) = stored(page).await?;
        assert_eq!(book.line.stretches.len(), 2);
        assert_eq!(
            book.line.stretches[1].pipe.as_deref(),
            Some(cut.below.as_str())
        );
        let at = found.resolved.stretches[1]
            .span
            .clone()
            .map_err(|e| format!("{e:?}"))?;
        assert!((at.from.m() - cut.chainage.m()).abs() < 0.01);
        assert!(
            proposals(&found)
                .iter()
                .all(|(_, p)| *p == Ok(Proposal::Enough)),
            "the cut is enough"
        );

        // The class change is moved up the hill, to a station that was there.
        let second = book.line.stretches[1].id;
        page.pick(&format!("stretch-start-{second}"), "4").await?;
        let (book, _) = stored(page).await?;
        assert_eq!(book.line.stretches[1].from_station, 4);

        // Every station is in the table that stands for the drawing.
        let fold = page.find_css("[data-test=stations-found] summary").await?;
        page.tap_on(&fold).await?;
        for station in &found.resolved.profile.usable {
            page.find_test(&format!("found-{}", station.id)).await?;
        }
        page.screenshot_whole("survey-line-360-whole").await?;
        page.check_access().await?;
        page.check_narrow().await?;
        check_lists(page).await
    });
}

/// Prints, and reads pieces and laying list back from the PDF.
async fn check_lists(page: &mut Page) -> Result {
    page.sheet("print").await?;
    page.find_test("print-laying").await?;
    let (book, found) = stored(page).await?;
    // In the order it was painted: cell by cell.
    let pdf = page.print_to("survey", Paper::A4).await?;
    let output = Command::new("pdftotext")
        .arg("-raw")
        .arg(&pdf)
        .arg("-")
        .output()?;
    let pdf = String::from_utf8(output.stdout)?;
    let flat = |text: &str| text.split_whitespace().collect::<String>().to_lowercase();
    let printed = flat(&pdf);
    let words = metric();
    let rows = laying(&found, book.print.laid).map_err(|e| format!("{e:?}"))?;
    assert_eq!(rows.len(), book.line.stations.len());
    let title = flat(words.say(words::Key::LAY_TITLE));
    let list = printed.split(&title).last().unwrap_or_default();
    let mut order = Vec::new();
    for row in &rows {
        let shown = page.text(&format!("laid-{}", row.station)).await?;
        assert!(
            flat(&shown).contains(&flat(&words.value(row.at))),
            "{shown}"
        );
        for item in &row.items {
            if let Some(said) = words.about(&book).laid(item) {
                assert!(flat(&shown).contains(&flat(&said)), "{shown} lacks {said}");
            }
        }
        // Each line has a level of its own here.
        let line = flat(&words::text::line_level_is(words, &words.figure(row.level)));
        order.push(
            list.find(&line)
                .ok_or(format!("{line} is not printed in {list}"))?,
        );
    }
    assert!(order.is_sorted(), "laid from the powerhouse up: {order:?}");
    let lists = schedule(&book, &found);
    let bends = lists.bends.clone().map_err(|e| format!("{e:?}"))?;
    assert!(!bends.is_empty(), "the survey asks for bends");
    for heading in [words::Key::LAY_TITLE, words::Key::LAY_PIECES] {
        assert!(printed.contains(&flat(words.say(heading))));
    }
    assert!(printed.contains(&flat(words.say(words::Key::LAY_VENT_PIECE))));
    // Only the crew's list, from the other end.
    page.tap_choice("print-parts-laying").await?;
    page.tap_choice("laid-downhill").await?;
    page.until(
        "the schedule is gone",
        "return document.querySelector('[data-test=print-schedule]') === null;",
    )
    .await?;
    page.screenshot_whole("survey-laying-360-whole").await?;
    page.print("survey-laying", Paper::Letter).await?;
    // The file for a spreadsheet holds a row for each station.
    let table = csv::laying(words, &book, &rows);
    assert_eq!(table.rows.len(), rows.len());
    page.tap_test("csv-laying").await?;
    page.find_test("notice").await?;
    Ok(())
}

#[test]
fn a_survey_is_brought_in_seen_before_it_is_taken() {
    walk("import", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        page.sheet("line").await?;
        let before = stored(page).await?.0;
        page.tap_test("import-open").await?;
        // Cells of a spreadsheet, one of them unusable.
        page.script(
            "const area = document.querySelector('[data-test=import-paste]');
             area.value = arguments[0];
             area.dispatchEvent(new Event('input', { bubbles: true }));",
            vec!["Peg\tDistance (m)\tLevel (m)\nA\t0\t612,4\nB\t42,5\t598,1\nC\tabc\t580\nD\t120\t560,25\n".into()],
        )
        .await?;
        let faults = page
            .text_when("import-faults", |t| t.contains("abc"))
            .await?;
        assert!(faults.contains('4'), "the row is named: {faults}");
        page.check_access().await?;
        page.screenshot("import-360").await?;
        assert_eq!(
            stored(page).await?.0,
            before,
            "nothing is changed by looking"
        );
        page.tap_choice("import-faulty-leave").await?;
        page.tap_test("import-take").await?;
        page.until(
            "the dialog is closed",
            "return document.querySelector('dialog[open]') === null;",
        )
        .await?;
        let (book, found) = stored(page).await?;
        assert_eq!(book.line.stations.len(), 3);
        assert_eq!(found.resolved.profile.usable.len(), 3);
        let ids: HashSet<_> = book.line.stations.iter().map(|s| s.id).collect();
        assert!(
            book.line
                .fittings
                .iter()
                .all(|f| ids.contains(&f.at_station))
        );
        page.tap_test("undo").await?;
        page.until(
            "the old line is back",
            &format!(
                "return document.querySelectorAll('[data-test=station-table] tbody tr').length === {};",
                before.line.stations.len()
            ),
        )
        .await
    });
}
