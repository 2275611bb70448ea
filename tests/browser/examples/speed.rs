//! How fast the built page is on a processor slowed down to a quarter, as a
//! phone is: what `cargo task bench page` prints.
//!
//! Prints lines `timed NAME MILLISECONDS`. It judges nothing: a benchmark informs.
#![expect(
    clippy::print_stdout,
    reason = "cargo task bench reads what is printed"
)]

use serde_json::json;
use std::fs;
use walkthrough::{Key, Page, Result, walk};
use workbook::book::Station;
use workbook::demo::demo;
use workbook::reading::DecimalMark;
use workbook::{Book, Entry, Field, format};

/// How much slower than this machine.
const SLOWDOWN: u32 = 4;
/// Starts of each sort; the middle one is told.
const STARTS: usize = 5;
/// Key presses timed in each field.
const KEYS: usize = 60;
// Keys without a character, as WebDriver writes them.
const END: &str = "\u{e010}";
const HOME: &str = "\u{e011}";
const RIGHT: &str = "\u{e014}";

/// Put into every document before its own scripts: notes how long compiling
/// and instantiating took, and when the first book stood on the screen.
const WATCH_START: &str = "
    (() => {
      const marks = window.benchStart = { code: 0, usable: 0 };
      for (const way of ['instantiate', 'instantiateStreaming']) {
        const own = WebAssembly[way];
        WebAssembly[way] = async (...given) => {
          const begun = performance.now();
          const made = await own.apply(WebAssembly, given);
          marks.code += performance.now() - begun;
          return made;
        };
      }
      const watch = new MutationObserver(() => {
        if (!document.querySelector('[data-test=app][data-ready=yes]')) { return; }
        watch.disconnect();
        requestAnimationFrame(() => {
          const painted = new MessageChannel();
          painted.port1.onmessage = () => { marks.usable = performance.now(); };
          painted.port2.postMessage(0);
        });
      });
      watch.observe(document, { subtree: true, childList: true, attributes: true,
        attributeFilter: ['data-ready'] });
    })();";

/// From the moment of a key press to the frame after a figure in the title
/// block changed: both depend on the entries that are typed in.
const WATCH_KEYS: &str = "
    const waits = window.benchKeys = [];
    let pressed = null;
    document.addEventListener('keydown', (event) => { pressed = event.timeStamp; }, true);
    const watch = new MutationObserver(() => {
      if (pressed === null) { return; }
      const from = pressed;
      pressed = null;
      requestAnimationFrame(() => {
        const painted = new MessageChannel();
        painted.port1.onmessage = () => { waits.push(performance.now() - from); };
        painted.port2.postMessage(0);
      });
    });
    for (const figure of document.querySelectorAll('.titleblock-figure .figure')) {
      watch.observe(figure, { subtree: true, childList: true, characterData: true });
    }";

fn main() {
    starts();
    keys("demo", &demo("bench"));
    keys("long", &long_book());
}

/// The demo book with its line measured at 500 stations.
fn long_book() -> Book {
    const STATIONS: u32 = 500;
    let mut book = demo("bench-long");
    let (first, last) = (186.2, 118.6);
    let typed = |field: Field, value: f64| {
        Entry::typed(
            &format!("{value:.2}"),
            "m",
            field.kind(),
            DecimalMark::Point,
        )
    };
    book.line.stations = (1..=STATIONS)
        .map(|id| {
            let share = f64::from(id - 1) / f64::from(STATIONS - 1);
            // Uneven ground, so that every station tells something.
            let uneven = 0.1 * f64::from(id * 7 % 11) * share * (1.0 - share);
            Station {
                id,
                name: String::new(),
                distance_m: typed(Field::StationDistance(id), 374.0 * share),
                level_m: typed(
                    Field::StationLevel(id),
                    first + (last - first) * share + uneven,
                ),
                ..Station::default()
            }
        })
        .collect();
    if let Some(second) = book.line.stretches.get_mut(1) {
        second.from_station = STATIONS / 2;
    }
    for (fitting, id) in book.line.fittings.iter_mut().zip((1..).step_by(50)) {
        fitting.at_station = id;
    }
    book
}

/// Cold starts, and starts of the kept page without its server.
fn starts() {
    let mut cold = Vec::new();
    let mut code = Vec::new();
    let mut offline = Vec::new();
    for number in 0..STARTS {
        // A new profile each time: nothing of the page is in any cache.
        walk(&format!("bench-start-{number}"), async |page| {
            let (usable, compiled) = start(page).await?;
            cold.push(usable);
            code.push(compiled);
            page.until_offline_ready().await?;
            page.close().await?;
            page.stop_server();
            page.start().await?;
            offline.push(start(page).await?.0);
            Ok(())
        });
    }
    tell("cold-start", &mut cold, 0.5);
    tell("compile", &mut code, 0.5);
    tell("offline-restart", &mut offline, 0.5);
}

/// Opens the page: when it was usable, and how long its code took.
async fn start(page: &mut Page) -> Result<(f64, f64)> {
    page.driver()?
        .cdp()
        .send_raw(
            "Page.addScriptToEvaluateOnNewDocument",
            json!({ "source": WATCH_START }),
        )
        .await?;
    page.slow_down(SLOWDOWN).await?;
    page.open("").await?;
    page.until(
        "the page is usable",
        "return window.benchStart?.usable > 0;",
    )
    .await?;
    let marks = page.script("return window.benchStart;", vec![]).await?;
    page.slow_down(1).await?;
    match (marks["usable"].as_f64(), marks["code"].as_f64()) {
        (Some(usable), Some(code)) => Ok((usable, code)),
        _ => Err(format!("no times: {marks}").into()),
    }
}

/// Key presses in two fields of a book.
fn keys(name: &str, book: &Book) {
    walk(&format!("bench-keys-{name}"), async |page| {
        let file = tasks::places::target().join(format!("walks/bench-{name}.json"));
        fs::write(&file, format::write(book)?)?;
        page.goto("").await?;
        page.tap_test("tab-books").await?;
        page.choose_file("book-file-open", "file-input", &file)
            .await?;
        page.until(
            "the book is opened",
            "return document.querySelector('dialog[open]') === null;",
        )
        .await?;
        page.until_saved().await?;
        // Behind the decimal mark: the flow has a ± after its number.
        let behind_flow: &[&str] = &[HOME, RIGHT, RIGHT, "."];
        for (what, sheet, field, way) in [
            ("flow", "stream", "field-DesignFlow", behind_flow),
            ("level", "line", "field-ForebayNormal", &[END]),
        ] {
            page.sheet(sheet).await?;
            let mut waits = typed(page, field, way).await?;
            tell(&format!("keys-{name}-{what}"), &mut waits, 0.95);
        }
        Ok(())
    });
}

/// How long each key press in a field took to show.
///
/// `way` leads to where a decimal can be typed and taken away again.
async fn typed(page: &Page, field: &str, way: &[&str]) -> Result<Vec<f64>> {
    page.tap_test(field).await?;
    let element = page.find_test(field).await?;
    for key in way {
        element.send_keys(*key).await?;
    }
    page.script(WATCH_KEYS, vec![]).await?;
    page.slow_down(SLOWDOWN).await?;
    for number in 0..KEYS {
        if number % 2 == 0 {
            element.send_keys("7").await?;
        } else {
            element.send_keys(Key::Backspace + "").await?;
        }
        page.until(
            "the key press shows",
            &format!("return window.benchKeys.length > {number};"),
        )
        .await?;
    }
    page.slow_down(1).await?;
    let waits = page.script("return window.benchKeys;", vec![]).await?;
    Ok(waits
        .as_array()
        .into_iter()
        .flatten()
        .filter_map(serde_json::Value::as_f64)
        .collect())
}

/// Prints the value below which that share of all lies.
fn tell(name: &str, all: &mut [f64], share: f64) {
    all.sort_by(f64::total_cmp);
    let at = (1..=all.len())
        .find(|&count| count as f64 >= share * all.len() as f64)
        .unwrap_or(1);
    if let Some(value) = all.get(at - 1) {
        println!("timed {name} {value:.1}");
    }
}
