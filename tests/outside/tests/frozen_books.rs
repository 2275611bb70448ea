//! Books as older editions wrote them must open for ever.
//!
//! The figures compared here are our own output of the day the file was
//! frozen: change detectors, no evidence that the figures are right.
#![allow(clippy::panic, reason = "a helper of tests fails as a test does")]

use workbook::format;
use workbook::verdict::Verdict;
use workbook::working::FigureKey;
use workbook::{EntryTrouble, Field, Trouble, evaluate};

const FORMAT_1: &[u8] = include_bytes!("../data/books/format-1.json");
/// With the fields that format 1 grew by for the line as surveyed.
const SURVEY: &[u8] = include_bytes!("../data/books/format-1-survey.json");

#[test]
fn format_1_opens_with_its_figures() {
    let book = format::read(FORMAT_1).unwrap();
    assert_eq!(book.format, 1);
    assert!(book.invented);
    let found = evaluate(&book);
    // The one entry left unusable on purpose is kept as typed, and named.
    assert_eq!(book.levels.tail_m.text, "about 117");
    assert!(matches!(
        found.troubles()[..],
        [Trouble::Entry(
            Field::TailLevel,
            EntryTrouble::Unreadable(_)
        )]
    ));
    assert_eq!(found.judged.verdict, Verdict::Unsettled);
    let near = |a: f64, b: f64| assert!((a - b).abs() < 1e-9 * b, "{a} was {b}");
    near(found.resolved.gross_head.clone().unwrap().m(), 68.3);
    // Of the day the file was frozen, before the survey's own turns were made
    // by bends; since then those of this line lose a little more.
    let bends: f64 = found
        .steady
        .bends
        .iter()
        .map(|(station, _)| {
            let working = found.working(FigureKey::BendLoss(*station));
            working.unwrap().result.value
        })
        .sum();
    assert_eq!(found.steady.bends.len(), 7);
    let loss = found.steady.loss.clone().unwrap().m();
    near(loss - bends, 3.900_627_623_956_33);
    near(loss, 3.925_039_065_677_48);
    // 24 956.260 883 802 W of that day: at a flow given, power goes with the
    // net head.
    near(
        found.steady.solved.clone().unwrap().jet_power.value,
        24_956.260_883_802 * (68.3 - loss) / (68.3 - loss + bends),
    );
    // Typed with a decimal comma, as a fraction of an inch, with its own unit.
    near(
        book.value(Field::Own(1, workbook::field::OwnField::OutsideDiameter))
            .unwrap()
            .unwrap(),
        0.2191,
    );
    near(
        book.value(Field::Own(1, workbook::field::OwnField::Wall))
            .unwrap()
            .unwrap(),
        0.00635,
    );
}

#[test]
fn a_line_surveyed_in_every_way_opens_with_its_figures() {
    let book = format::read(SURVEY).unwrap();
    let found = evaluate(&book);
    assert_eq!(found.troubles(), vec![]);
    // Typed as a slope in per cent, with a decimal comma, in feet.
    let sight = book.value(Field::StationForeSight(12)).unwrap().unwrap();
    assert!((sight + 14.305_552).abs() < 1e-6, "{sight}");
    assert_eq!(book.value(Field::StationStaffBack(13)), Ok(Some(0.412)));
    let near = |a: f64, b: f64| assert!((a - b).abs() < 1e-9 * b.abs(), "{a} was {b}");
    let closing = found.resolved.profile.closing.clone().unwrap().unwrap();
    near(closing.surveyed.m(), 67.394_403_350_785_27);
    near(closing.spread_over.unwrap().m(), 102.5);
    near(
        found.resolved.profile.pipe_length.clone().unwrap().m(),
        374.000_251_120_075_9,
    );
    near(found.steady.loss.clone().unwrap().m(), 3.913_611_034_652_72);
    let bends: Vec<u32> = found.steady.bends.iter().map(|(at, _)| *at).collect();
    assert_eq!(bends, [3, 5, 10]);
    let vents: Vec<u32> = found
        .relief
        .vents
        .clone()
        .unwrap()
        .iter()
        .map(|v| v.station)
        .collect();
    assert_eq!(vents, [3, 7, 8]);
    let intake = found.intake.submergence.unwrap();
    near(intake.needed.value, 0.331_014_203_227_964_8);
}

#[test]
fn what_is_written_again_is_what_was_read() {
    for file in [FORMAT_1, SURVEY] {
        let book = format::read(file).unwrap();
        let again = format::write(&book).unwrap();
        let before: serde_json::Value = serde_json::from_slice(file).unwrap();
        let after: serde_json::Value = serde_json::from_str(&again).unwrap();
        assert_eq!(before, after);
    }
}

#[test]
fn the_schema_knows_every_name_of_the_frozen_book() {
    let schema: serde_json::Value = serde_json::from_str(&format::schema()).unwrap();
    for file in [FORMAT_1, SURVEY] {
        let book: serde_json::Value = serde_json::from_slice(file).unwrap();
        check(&book, &schema, &schema, "book");
    }
}

/// Follows a value along its schema, as far as names go.
fn check(
    value: &serde_json::Value,
    schema: &serde_json::Value,
    root: &serde_json::Value,
    at: &str,
) {
    let schema = match schema.get("$ref").and_then(|r| r.as_str()) {
        Some(reference) => root
            .pointer(reference.trim_start_matches('#'))
            .unwrap_or_else(|| panic!("{at}: {reference} leads nowhere")),
        None => schema,
    };
    if let Some(object) = value.as_object()
        && let Some(properties) = schema.get("properties")
    {
        for (name, inner) in object {
            let property = properties
                .get(name)
                .unwrap_or_else(|| panic!("{at}.{name} is not in the schema"));
            check(inner, property, root, &format!("{at}.{name}"));
        }
    }
    if let Some(items) = value.as_array()
        && let Some(item_schema) = schema.get("items")
    {
        for (i, inner) in items.iter().enumerate() {
            check(inner, item_schema, root, &format!("{at}[{i}]"));
        }
    }
}
