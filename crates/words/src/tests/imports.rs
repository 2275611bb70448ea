//! Everything an import can say, and the schedule as a file.

use super::{book, said, sentences};
use crate::{Language, Words, csv};
use workbook::book::{DistanceKind, Reckoning};
use workbook::demo::demo;
use workbook::evaluate::evaluate;
use workbook::export::Cell;
use workbook::import::gpx::{LineKind, Summary};
use workbook::import::table::{Column, Ground, Separator};
use workbook::import::{Fault, Meaning, Note, Obstacle, Refusal, RowFault};
use workbook::reading::{DecimalMark, Unreadable};
use workbook::schedule::schedule;
use workbook::units::{Kind, UnitSystem};

fn columns() -> Vec<Column> {
    ["", "Dist."]
        .map(|heading| Column {
            heading: heading.to_owned(),
            meaning: Meaning::Distance,
            meaning_from: Ground::Heading,
            unit: "m",
            unit_from: Ground::Given,
        })
        .to_vec()
}

fn faults() -> Vec<RowFault> {
    let reasons = [
        Fault::Unreadable(Kind::Distance, Unreadable::NotANumber),
        Fault::OutOfRange {
            value: 1e5,
            least: 0.0,
            most: 5e4,
            kind: Kind::Distance,
        },
        Fault::Missing,
        Fault::TooLong { characters: 1000 },
        Fault::Behind { back_m: 10.0 },
        Fault::NoElevation,
        Fault::NoPosition,
    ];
    let mut all = Vec::new();
    for fault in reasons {
        for (column, text) in [(Some(0), "abc"), (Some(1), ""), (Some(9), "x"), (None, "")] {
            all.push(RowFault {
                row: 12,
                column,
                meaning: Meaning::Distance,
                text: text.to_owned(),
                fault: fault.clone(),
            });
        }
    }
    all
}

#[test]
fn every_refusal_says_what_to_do() {
    let book = book();
    let fix = faults().pop().unwrap();
    for refusal in [
        Refusal::TooLong { bytes: 11_000_000 },
        Refusal::Empty,
        Refusal::Packed,
        Refusal::NotText,
        Refusal::TooManyRows { rows: 1200 },
        Refusal::TooManyColumns {
            row: 3,
            columns: 99,
        },
        Refusal::QuoteOpen { row: 3 },
        Refusal::NoRows,
        Refusal::NotXml {
            line: 4,
            why: "expected".into(),
        },
        Refusal::NotGpx { root: "kml".into() },
        Refusal::Cut { line: 7 },
        Refusal::TooDeep { line: 7 },
        Refusal::NoTrack,
        Refusal::TooManyFixes,
        Refusal::TooManyWaypoints,
        Refusal::NoSuchLine,
        Refusal::TooFewFixes { fixes: 1 },
        Refusal::Fix {
            fault: fix.clone(),
            count: 1,
        },
        Refusal::Fix {
            fault: fix,
            count: 3,
        },
        Refusal::Jump {
            fix: 9,
            distance_m: 2e4,
        },
        Refusal::TooManyStations { tolerance_m: 5.0 },
        Refusal::Tolerance {
            tolerance_m: f64::NAN,
        },
    ] {
        let what = format!("{refusal:?}");
        // What the XML reader said stands last, and is its own.
        if matches!(refusal, Refusal::NotXml { .. }) {
            said(&book, &what, |w| w.words.import_refusal(&refusal));
        } else {
            sentences(&book, &what, |w| w.words.import_refusal(&refusal));
        }
    }
}

#[test]
fn every_obstacle_fault_and_note_is_a_sentence() {
    let book = book();
    let columns = columns();
    for obstacle in [
        Obstacle::NoColumn(Meaning::Distance),
        Obstacle::NoHeights,
        Obstacle::Twice {
            meaning: Meaning::Level,
            first: 0,
            second: 1,
        },
        Obstacle::Unit {
            column: 1,
            unit: "chains".into(),
        },
        Obstacle::SlopeUnit { column: 1 },
    ] {
        sentences(&book, &format!("{obstacle:?}"), |w| {
            w.words.import_obstacle(&obstacle, &columns)
        });
    }
    for fault in faults() {
        sentences(&book, &format!("{fault:?}"), |w| {
            w.words.import_fault(&fault, &columns)
        });
    }
    for note in notes() {
        sentences(&book, &format!("{note:?}"), |w| {
            w.words.import_note(&note, &columns)
        });
    }
}

fn notes() -> Vec<Note> {
    let mut notes = vec![
        Note::WesternText,
        Note::GuessedColumns,
        Note::Second {
            column: 1,
            meaning: Meaning::Level,
        },
        Note::MixedMarks {
            point: "1.5".into(),
            comma: "2,5".into(),
        },
        Note::DistanceKindTaken(DistanceKind::Slope),
        Note::DistanceKindTaken(DistanceKind::Horizontal),
        Note::ReckoningGuessed(Reckoning::FromStart),
        Note::ReckoningGuessed(Reckoning::FromPrevious),
        Note::SatelliteHeights,
        Note::Thinned {
            from: 800,
            kept: 20,
            tolerance_m: 5.0,
            length_before_m: 900.0,
            length_after_m: 850.0,
        },
        Note::Uphill { rise_m: 20.0 },
        Note::Flat,
        Note::Doctype,
    ];
    for count in [1, 3] {
        notes.extend([
            Note::Above { rows: count },
            Note::EmptyRows { rows: count },
            Note::StaffBooked,
            Note::LegsLost { rows: count },
            Note::Joined {
                count,
                fix: 12,
                gap_m: 30.0,
            },
            Note::Astray {
                count,
                name: "Camp".into(),
                distance_m: 300.0,
            },
            Note::FixesLeftOut {
                first: faults().pop().unwrap(),
                count,
            },
        ]);
        for mark in [DecimalMark::Point, DecimalMark::Comma] {
            notes.push(Note::Ambiguous {
                text: "1,234".into(),
                mark,
                count,
            });
        }
    }
    notes
}

#[test]
fn meanings_grounds_and_tracks_have_names() {
    let book = book();
    for meaning in Meaning::ALL {
        said(&book, "meaning", |w| w.words.name(meaning).to_owned());
    }
    for ground in [
        Ground::Heading,
        Ground::UnitsRow,
        Ground::Cells,
        Ground::Guess,
        Ground::Given,
        Ground::Chosen,
    ] {
        said(&book, "ground", |w| w.words.name(ground).to_owned());
    }
    for separator in [
        Separator::Tab,
        Separator::Semicolon,
        Separator::Comma,
        Separator::Bar,
        Separator::Blanks,
    ] {
        said(&book, "separator", |w| w.words.name(separator).to_owned());
    }
    for (kind, name, ends_m) in [
        (LineKind::Track, "Walk", Some((3400.0, 3350.0))),
        (LineKind::Route, "", None),
        (LineKind::Waypoints, "", None),
    ] {
        let summary = Summary {
            kind,
            name: name.to_owned(),
            fixes: 120,
            segments: 2,
            faulty: 1,
            first_fault: None,
            ends_m,
        };
        said(&book, "summary", |w| w.words.import_summary(&summary));
    }
    let en = Words::new(Language::English, UnitSystem::Metric);
    assert_eq!(en.import_column(1, &columns()), "column 2 (Dist.)");
}

#[test]
fn the_schedule_as_a_file_holds_every_stretch_and_its_verdict() {
    let book = demo("demo");
    let found = schedule(&book, &evaluate(&book));
    for language in Language::ALL {
        for units in [UnitSystem::Metric, UnitSystem::UsCustomary] {
            let words = Words::new(language, units);
            let table = csv::schedule(words, &book, &found);
            // Stretches, the sums, that the site is invented, and not to build.
            assert_eq!(table.rows.len(), found.lines.len() + 3);
            let stretches = table.rows.iter().take(found.lines.len());
            for (row, (_, line)) in stretches.zip(&found.lines) {
                assert_eq!(row.len(), table.headings.len());
                let line = line.as_ref().unwrap();
                let Cell::Number { value, .. } = row[3] else {
                    panic!("{row:?}")
                };
                let unit = Kind::Distance.default_unit(units);
                assert!((unit.to_base(value) - line.length.m()).abs() < 0.06);
                let verdict = line.verdict.as_ref().unwrap().verdict;
                assert_eq!(row[19], Cell::text(words.verdict(verdict)));
            }
            let file = csv::file(words, &table);
            assert!(file.starts_with('\u{feff}'));
            let decimal = if language == Language::English {
                "0,"
            } else {
                "0;"
            };
            assert!(file.contains(decimal));
            for heading in &table.headings {
                assert!(file.contains(&heading.name));
            }
        }
    }
}

#[test]
fn a_stretch_without_a_pipe_has_its_reason_in_the_file() {
    let mut book = demo("demo");
    book.line.stretches[1].pipe = None;
    let found = schedule(&book, &evaluate(&book));
    let words = Words::new(Language::English, UnitSystem::Metric);
    let table = csv::schedule(words, &book, &found);
    let Some(Cell::Text(reason)) = table.rows[1].last() else {
        panic!("{:?}", table.rows[1])
    };
    assert!(reason.contains("stretch 2"), "{reason}");
}
