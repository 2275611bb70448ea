//! Tables.

use super::sample;
use words::{Language, Words};
use workbook::book::{Book, DistanceKind, Reckoning, SurveyWay};
use workbook::evaluate;
use workbook::import::table::{Choices, Faulty, Ground, Preview, Separator, Table, open};
use workbook::import::{Encoding, Fault, Given, ImportedLine, Meaning, Note, Obstacle, Refusal};
use workbook::reading::DecimalMark;
use workbook::units::{Kind, UnitSystem};

const GIVEN: Given = Given {
    mark: DecimalMark::Point,
    units: UnitSystem::Metric,
    distance_kind: DistanceKind::Slope,
};

/// The invented line that the samples hold: distance along the slope, level.
const LINE: [(f64, f64); 6] = [
    (0.0, 1412.50),
    (31.2, 1409.85),
    (68.75, 1398.40),
    (104.1, 1383.95),
    (151.6, 1362.20),
    (182.4, 1351.05),
];

fn table(name: &str) -> Table {
    open(&sample(name), GIVEN).unwrap_or_else(|why| panic!("{name}: {why:?}"))
}

fn take(name: &str) -> (Preview, ImportedLine) {
    let table = table(name);
    let preview = table.preview(&Choices::default());
    assert_eq!(preview.faults, [], "{name}");
    let line = table.take(&Choices::default(), Faulty::Keep);
    (
        preview,
        line.unwrap_or_else(|why| panic!("{name}: {why:?}")),
    )
}

/// The stations as the book resolves them, which is what counts.
fn resolved(line: &ImportedLine) -> Vec<(f64, f64)> {
    let mut book = Book::new("import");
    book.line.distance_kind = line.distance_kind;
    book.line.reckoning = line.reckoning;
    book.line.stations = line.stations(1);
    let found = evaluate(&book);
    let profile = &found.resolved.profile;
    assert_eq!(profile.broken, None);
    profile
        .usable
        .iter()
        .map(|s| (s.chainage.m(), s.level.m()))
        .collect()
}

#[test]
fn each_writer_gives_the_line() {
    for (name, separator, encoding, mark) in [
        (
            "comma_point.csv",
            Separator::Comma,
            Encoding::Utf8,
            DecimalMark::Point,
        ),
        (
            "semicolon_comma_bom_crlf.csv",
            Separator::Semicolon,
            Encoding::Utf8,
            DecimalMark::Comma,
        ),
        (
            "tab_utf16.txt",
            Separator::Tab,
            Encoding::Utf16,
            DecimalMark::Comma,
        ),
        (
            "latin1_units_row.csv",
            Separator::Semicolon,
            Encoding::Western,
            DecimalMark::Comma,
        ),
        (
            "quoted_thousands.csv",
            Separator::Comma,
            Encoding::Utf8,
            DecimalMark::Point,
        ),
        (
            "no_heading_pasted.txt",
            Separator::Tab,
            Encoding::Utf8,
            DecimalMark::Point,
        ),
        (
            "blanks.txt",
            Separator::Blanks,
            Encoding::Utf8,
            DecimalMark::Point,
        ),
        (
            "chainage_plus.csv",
            Separator::Semicolon,
            Encoding::Utf8,
            DecimalMark::Comma,
        ),
        (
            "legs_old_line_ends.csv",
            Separator::Comma,
            Encoding::Utf8,
            DecimalMark::Point,
        ),
    ] {
        let (preview, line) = take(&format!("csv/{name}"));
        assert_eq!(preview.separator, separator, "{name}");
        assert_eq!(preview.encoding, encoding, "{name}");
        assert_eq!(preview.mark, (mark, Ground::Cells), "{name}");
        assert_eq!(preview.rows, LINE.len(), "{name}");
        let found = resolved(&line);
        assert_eq!(found.len(), LINE.len(), "{name}");
        // The sample in feet is rounded to a hundredth of one.
        let near = if name == "quoted_thousands.csv" {
            0.0016
        } else {
            1e-9
        };
        for (a, b) in found.iter().zip(LINE) {
            assert!(
                (a.0 - b.0).abs() < near && (a.1 - b.1).abs() < near,
                "{name}: {found:?}"
            );
        }
    }
}

#[test]
fn what_a_file_says_of_itself_is_believed() {
    let (preview, line) = take("csv/semicolon_comma_bom_crlf.csv");
    assert_eq!(
        preview.distance_kind,
        (DistanceKind::Slope, Ground::Heading)
    );
    assert_eq!(preview.reckoning, (Reckoning::FromStart, Ground::Heading));
    assert_eq!(preview.notes, []);
    assert_eq!(line.rows[5].name, "Nozzle");
    // Texts stay as typed.
    assert_eq!(line.stations(1)[2].distance_m.text, "68,75");
    let (preview, _) = take("csv/latin1_units_row.csv");
    assert_eq!(preview.columns[1].unit_from, Ground::UnitsRow);
    assert_eq!(preview.heading_row, Some(3));
    assert_eq!(preview.first[0].row, 5);
    for note in [
        Note::WesternText,
        Note::Above { rows: 1 },
        Note::EmptyRows { rows: 5 },
        Note::DistanceKindTaken(DistanceKind::Slope),
    ] {
        assert!(preview.notes.contains(&note), "{note:?}");
    }
    let (preview, line) = take("csv/no_heading_pasted.txt");
    assert!(preview.notes.contains(&Note::GuessedColumns));
    assert_eq!(preview.reckoning.1, Ground::Guess);
    assert_eq!(line.reckoning, Reckoning::FromStart);
    let (_, line) = take("csv/legs_old_line_ends.csv");
    assert_eq!(line.reckoning, Reckoning::FromPrevious);
}

#[test]
fn clinometer_readings_level_their_stations() {
    let (_, line) = take("csv/clinometer.csv");
    let stations = line.stations(1);
    assert!(stations.iter().skip(1).all(|s| s.way == SurveyWay::Angle));
    let fore = stations[2].fore_sight_deg.usable(Kind::Angle).unwrap();
    assert_eq!(fore, Some(-17.8));
    let turn = stations[2].plan_turn_deg.usable(Kind::Angle).unwrap();
    assert_eq!(turn, Some(-12.5));
    let fore = line.rows[2].fore_sight.as_ref().unwrap();
    assert_eq!((fore.text.as_str(), fore.unit), ("-17,8", "°"));
    assert!((fore.value.unwrap() + 17.8).abs() < 1e-12);
    assert_eq!(line.rows[2].plan_turn.as_ref().unwrap().value, Some(-12.5));
}

#[test]
fn broken_rows_are_named_with_reason_and_text() {
    let table = table("csv/broken_rows.csv");
    let preview = table.preview(&Choices::default());
    let told: Vec<(usize, Option<usize>, &str)> = preview
        .faults
        .iter()
        .map(|f| (f.row, f.column, f.text.as_str()))
        .collect();
    assert_eq!(
        told,
        [
            (4, Some(1), "n/a"),
            (6, Some(2), ""),
            (7, Some(1), "95.0"),
            (8, Some(1), ""),
            (8, Some(2), ""),
            (9, Some(2), "1351.05 yd"),
        ]
    );
    assert_eq!(preview.faults[1].fault, Fault::Missing);
    let words = Words::new(Language::English, UnitSystem::Metric);
    assert_eq!(
        words.import_fault(&preview.faults[2], &preview.columns),
        "Row 7, column 2 (Distance (m)), “95.0”: The distance is 9.1\u{202f}m less than the one before, though distances run from the start. Correct it, or choose distances from the station before."
    );
    let line = table.take(&Choices::default(), Faulty::LeaveOut).unwrap();
    assert_eq!(line.left_out, [4, 6, 7, 8, 9]);
    assert_eq!(line.rows.len(), 2);
    // Taken as they stand, the book names the first that cannot be used.
    let line = table.take(&Choices::default(), Faulty::Keep).unwrap();
    let mut book = Book::new("import");
    book.line.stations = line.stations(1);
    let found = evaluate(&book);
    assert!(found.resolved.profile.broken.is_some());
    assert_eq!(found.resolved.profile.usable.len(), 2);
}

#[test]
fn an_open_quote_is_named_by_its_row() {
    assert_eq!(
        open(&sample("csv/broken_quote.csv"), GIVEN),
        Err(Refusal::QuoteOpen { row: 3 })
    );
}

#[test]
fn every_meaning_can_be_chosen_against_the_file() {
    let table = table("csv/comma_point.csv");
    let mut choices = Choices {
        distance_kind: Some(DistanceKind::Horizontal),
        reckoning: Some(Reckoning::FromPrevious),
        ..Choices::default()
    };
    choices.meanings.insert(2, Meaning::LeftOut);
    assert_eq!(
        table.take(&choices, Faulty::Keep),
        Err(vec![Obstacle::NoHeights])
    );
    choices.meanings.insert(2, Meaning::Level);
    choices.units.insert(2, "ft");
    let line = table.take(&choices, Faulty::Keep).unwrap();
    let level = line.rows[0].level.as_ref().unwrap();
    assert!((level.value.unwrap() - 1412.50 * 0.3048).abs() < 1e-9);
    assert_eq!(line.distance_kind, DistanceKind::Horizontal);
    assert_eq!(line.reckoning, Reckoning::FromPrevious);
}
