use super::*;
use crate::book::SurveyWay;
use crate::import::{Displaced, Fault};
use crate::reading::Unreadable;
use crate::units::{Kind, UnitSystem};
use proptest::prelude::*;

fn given() -> Given {
    Given {
        mark: DecimalMark::Point,
        units: UnitSystem::Metric,
        distance_kind: DistanceKind::Slope,
    }
}

fn preview(text: &str) -> Preview {
    paste(text, given()).unwrap().preview(&Choices::default())
}

fn take(text: &str) -> ImportedLine {
    paste(text, given())
        .unwrap()
        .take(&Choices::default(), Faulty::Keep)
        .unwrap()
}

fn pairs(line: &ImportedLine) -> Vec<(f64, f64)> {
    let value = |a: &Option<crate::import::Amount>| a.as_ref().unwrap().value.unwrap();
    line.rows
        .iter()
        .map(|r| (value(&r.distance), value(&r.level)))
        .collect()
}

fn near(found: &[(f64, f64)], expected: &[(f64, f64)]) {
    assert_eq!(found.len(), expected.len(), "{found:?}");
    for (a, b) in found.iter().zip(expected) {
        assert!(
            (a.0 - b.0).abs() < 1e-9 && (a.1 - b.1).abs() < 1e-9,
            "{found:?}"
        );
    }
}

#[test]
fn each_separator_gives_the_same_line() {
    let expected = [(0.0, 412.5), (48.25, 400.0), (97.5, 391.75)];
    for text in [
        "Distance (m),Level (m)\n0,412.5\n48.25,400\n97.5,391.75\n",
        "Distance (m);Level (m)\n0;412,5\n48,25;400\n97,5;391,75\n",
        "Distance (m)\tLevel (m)\n0\t412,5\n48,25\t400\n97,5\t391,75",
        "Distance (m)|Level (m)\r\n0|412.5\r\n48.25|400\r\n97.5|391.75\r\n",
        "sep=;\nDistance (m);Level (m)\n0;412.5\n48.25;400\n97.5;391.75\n",
        "\"Distance (m)\",\"Level (m)\"\n\"0\",\"412,5\"\n\"48,25\",\"400\"\n\"97,5\",\"391,75\"\n",
        "0 412.5\n48.25   400\n 97.5 391.75\n",
        "dist\telev\r0\t412.5\r48.25\t400\r97.5\t391.75\r",
    ] {
        near(&pairs(&take(text)), &expected);
    }
}

#[test]
fn units_come_from_heading_row_below_or_cell() {
    let foot = 0.3048;
    for (text, from) in [
        ("dist [ft];level (ft)\n0;100\n50;90\n", Ground::Heading),
        ("dist;level\nft;ft\n0;100\n50;90\n", Ground::UnitsRow),
        ("dist;level\n0 ft;100 ft\n50 ft;90 ft\n", Ground::Given),
    ] {
        let shown = preview(text);
        assert_eq!(shown.columns[0].unit_from, from, "{text}");
        near(
            &pairs(&take(text)),
            &[(0.0, 100.0 * foot), (50.0 * foot, 90.0 * foot)],
        );
    }
    let text = "dist (chains);level (m)\n0;100\n2;90\n";
    let table = paste(text, given()).unwrap();
    let blocked = table.take(&Choices::default(), Faulty::Keep).unwrap_err();
    assert_eq!(
        blocked,
        [Obstacle::Unit {
            column: 0,
            unit: "chains".into()
        }]
    );
    let mut choices = Choices::default();
    choices.units.insert(0, "m");
    assert!(table.take(&choices, Faulty::Keep).is_ok());
}

#[test]
fn the_file_decides_the_decimal_mark_and_the_given_one_what_is_left() {
    assert_eq!(
        preview("d;cota\n0,5;100\n1,234;90\n").mark,
        (DecimalMark::Comma, Ground::Cells)
    );
    let open = preview("d;cota\n1;100\n1,234;90\n");
    assert_eq!(open.mark, (DecimalMark::Point, Ground::Given));
    assert!(open.notes.contains(&Note::Ambiguous {
        text: "1,234".into(),
        mark: DecimalMark::Point,
        count: 1
    }));
    let mixed = preview("d;cota\n0,5;100\n2.25;90\n");
    assert!(
        mixed
            .notes
            .iter()
            .any(|n| matches!(n, Note::MixedMarks { .. }))
    );
    // Columns parted by commas: the point is the decimals'.
    let comma_given = Given {
        mark: DecimalMark::Comma,
        ..given()
    };
    let table = paste("d,level\n12.345,100.125\n25.500,98.250\n", comma_given).unwrap();
    assert_eq!(
        table.preview(&Choices::default()).mark,
        (DecimalMark::Point, Ground::Cells)
    );
    let chosen = Choices {
        mark: Some(DecimalMark::Comma),
        ..Choices::default()
    };
    let line = paste("d;cota\n1;100\n1,234;90\n", given())
        .unwrap()
        .take(&chosen, Faulty::Keep)
        .unwrap();
    near(&pairs(&line), &[(1.0, 100.0), (1.234, 90.0)]);
}

#[test]
fn without_headings_the_guess_is_said() {
    for (text, meanings) in [
        ("0;100\n50;90\n", vec![Meaning::Distance, Meaning::Level]),
        (
            "1;0;100\n2;50;90\n",
            vec![Meaning::Name, Meaning::Distance, Meaning::Level],
        ),
        (
            "A;0;100\nB;50;90\n",
            vec![Meaning::Name, Meaning::Distance, Meaning::Level],
        ),
        (
            "0;100;5\n50;90;7\n",
            vec![Meaning::Distance, Meaning::Level, Meaning::LeftOut],
        ),
    ] {
        let shown = preview(text);
        let read: Vec<Meaning> = shown.columns.iter().map(|c| c.meaning).collect();
        assert_eq!(read, meanings, "{text}");
        assert!(shown.notes.contains(&Note::GuessedColumns));
        assert_eq!(shown.rows, 2);
    }
    assert_eq!(
        preview("0;1;2;3\n5;6;7;8\n").obstacles,
        [Obstacle::NoColumn(Meaning::Distance), Obstacle::NoHeights]
    );
}

#[test]
fn a_title_above_and_empty_rows_are_passed_over_and_said() {
    let text = "Survey of the upper line;;\n\nNo.;Distance;Level\n;m;m\n1;0;100\n;;\n\n2;50;90\n";
    let shown = preview(text);
    assert_eq!(shown.heading_row, Some(3));
    assert!(shown.notes.contains(&Note::Above { rows: 1 }));
    assert!(shown.notes.contains(&Note::EmptyRows { rows: 2 }));
    let rows: Vec<usize> = shown.first.iter().map(|r| r.row).collect();
    assert_eq!(rows, [5, 8]);
}

#[test]
fn each_fault_names_row_column_and_text() {
    let text = "Dist (m);Level (m)\n0;100\nabc;90\n20;\n\n10;80\n30;95000\n25 furlong;70\n40;60\n";
    let faults = preview(text).faults;
    let told: Vec<(usize, Option<usize>, &str)> = faults
        .iter()
        .map(|f| (f.row, f.column, f.text.as_str()))
        .collect();
    assert_eq!(
        told,
        [
            (3, Some(0), "abc"),
            (4, Some(1), ""),
            (6, Some(0), "10"),
            (7, Some(1), "95000"),
            (8, Some(0), "25 furlong"),
        ]
    );
    assert!(matches!(
        faults[0].fault,
        Fault::Unreadable(Kind::Distance, Unreadable::NotANumber)
    ));
    assert_eq!(faults[1].fault, Fault::Missing);
    assert!(matches!(faults[2].fault, Fault::Behind { back_m } if (back_m - 10.0).abs() < 1e-9));
    assert!(matches!(faults[3].fault, Fault::OutOfRange { .. }));
    let table = paste(text, given()).unwrap();
    let kept = table.take(&Choices::default(), Faulty::Keep).unwrap();
    assert_eq!((kept.rows.len(), kept.left_out.len()), (7, 0));
    // Kept as typed, so that the line names it.
    assert_eq!(kept.stations(1)[1].distance_m.text, "abc");
    let less = table.take(&Choices::default(), Faulty::LeaveOut).unwrap();
    assert_eq!(less.left_out, [3, 4, 6, 7, 8]);
    assert_eq!(less.rows.len(), 2);
}

#[test]
fn rows_are_counted_as_a_spreadsheet_counts_them() {
    // A cell of three lines is in one row; empty lines are rows.
    let text = "d;z;note\n0;100;\"a\nb\nc\"\n\n\n5;x;\n\n9;y;\n";
    let rows: Vec<usize> = preview(text).faults.iter().map(|f| f.row).collect();
    assert_eq!(rows, [5, 7]);
}

#[test]
fn hostile_files_of_ten_megabytes_are_refused_or_read() {
    for piece in [",", "a\n", "\"\n", "1;"] {
        for begin in ["", "d;z\n0;1\n\"\n"] {
            let mut text = begin.to_owned();
            text += &piece.repeat((LONGEST - text.len()) / piece.len());
            if let Ok(table) = open(text.as_bytes(), given()) {
                exercise(&table);
            }
        }
    }
}

#[test]
fn legs_that_are_left_out_are_missed() {
    let text = "leg (m);level\n;100\n20;90\nx;80\n20;70\n";
    let table = paste(text, given()).unwrap();
    let line = table.take(&Choices::default(), Faulty::LeaveOut).unwrap();
    assert!(line.notes.contains(&Note::LegsLost { rows: 1 }));
    assert_eq!(line.reckoning, Reckoning::FromPrevious);
}

#[test]
fn how_distances_are_counted_is_told_by_their_run() {
    let of = |text: &str| preview(text).reckoning;
    assert_eq!(
        of("d;z\n0;9\n5;8\n12;7\n11;6\n20;5\n"),
        (Reckoning::FromStart, Ground::Guess)
    );
    assert_eq!(
        of("d;z\n0;9\n20;8\n20;7\n20;6\n"),
        (Reckoning::FromPrevious, Ground::Guess)
    );
    assert_eq!(
        of("Progresiva;z\n0;9\n20;8\n"),
        (Reckoning::FromStart, Ground::Heading)
    );
}

#[test]
fn chainages_with_a_plus_are_read() {
    let line = take("Station;Elev (m)\n0+000;100\n0+048.25;90\n1+102.5;80\n");
    near(
        &pairs(&line),
        &[(0.0, 100.0), (48.25, 90.0), (1102.5, 80.0)],
    );
    let stations = line.stations(1);
    assert_eq!(
        stations[1].distance_m.usable(Kind::Distance),
        Ok(Some(48.25))
    );
    assert_eq!(line.rows[1].distance.as_ref().unwrap().typed, "0+048.25");
    let feet = take("Sta (ft),Elev (ft)\n0+00,100\n1+50.5,90\n");
    near(&pairs(&feet), &[(0.0, 30.48), (150.5 * 0.3048, 27.432)]);
}

#[test]
fn angles_staff_and_turns_become_stations() {
    let line = take(
        "Peg;Slope distance (m);Fore sight (%);Back sight (deg);Deflection (deg)\n\
         A;;;;\nB;20;-12;6,9;\nC;25;-10 %;5,5°;-15\n",
    );
    let stations = line.stations(1);
    // The first of a line has a level, whatever the row holds.
    assert_eq!(stations[0].way, SurveyWay::Level);
    assert_eq!(stations[1].way, SurveyWay::Angle);
    let fore = stations[1]
        .fore_sight_deg
        .usable(Kind::Angle)
        .unwrap()
        .unwrap();
    assert!((fore + 6.842_773).abs() < 1e-6);
    assert_eq!(stations[1].fore_sight_deg.text, "-12");
    assert_eq!(
        stations[2].plan_turn_deg.usable(Kind::Angle),
        Ok(Some(-15.0))
    );
    assert_eq!(line.distance_kind, DistanceKind::Slope);
    let row = &line.rows[1];
    let fore = row.fore_sight.as_ref().unwrap();
    // atan 0.12 = 6.842773 degrees (hand reckoned).
    assert!((fore.value.unwrap() + 6.842_773).abs() < 1e-6);
    assert_eq!((fore.text.as_str(), fore.unit), ("-12", "%"));
    let entry = line.rows[2].back_sight.as_ref().unwrap().entry(Kind::Angle);
    assert_eq!(entry.usable(Kind::Angle), Ok(Some(5.5)));
    let staff = take("Dist (m);BS (m);FS (m)\n0;;\n20;1,25;3,40\n");
    let stations = staff.stations(1);
    assert_eq!(stations[1].way, SurveyWay::Staff);
    assert_eq!(
        stations[1].staff_back_m.usable(Kind::Distance),
        Ok(Some(1.25))
    );
    assert_eq!(
        stations[1].staff_fore_m.usable(Kind::Distance),
        Ok(Some(3.4))
    );
    let slope = preview("Dist (m);slope\n0;5\n20;4\n");
    assert_eq!(slope.obstacles, [Obstacle::SlopeUnit { column: 1 }]);
}

#[test]
fn a_levelling_book_is_read_down() {
    let booked = take("Dist (m);BS (m);FS (m)\n0;1,25;\n20;0,90;3,40\n30;;2,10\n");
    assert!(booked.notes.contains(&Note::StaffBooked));
    let readings: Vec<_> = booked
        .stations(1)
        .iter()
        .map(|s| (s.staff_back_m.text.clone(), s.staff_fore_m.text.clone()))
        .collect();
    let expected = [("", ""), ("1,25", "3,40"), ("0,90", "2,10")];
    for ((back, fore), (want_back, want_fore)) in readings.iter().zip(expected) {
        assert_eq!((back.as_str(), fore.as_str()), (want_back, want_fore));
    }
}

#[test]
fn a_survey_takes_the_place_of_the_stations() {
    let line = take("Distance (m),Level (m)\n0,100\n50,80\n90,60\n");
    let mut book = crate::demo::demo("demo");
    let before = Displaced::of(&book);
    assert!(before.stations > 2 && before.stretches > 0);
    let displaced = line.put_into(&mut book).unwrap();
    assert_eq!(displaced, before);
    assert_eq!(book.line.stations.len(), 3);
    assert_eq!(book.line.stretches.len(), 1);
    let ids: Vec<_> = book.line.stations.iter().map(|s| s.id).collect();
    assert!(
        book.line
            .fittings
            .iter()
            .all(|f| ids.contains(&f.at_station))
    );
    assert!(book.line.stretches[0].pipe.is_some());
    assert_eq!(crate::evaluate(&book).resolved.profile.usable.len(), 3);
    // One row is no line.
    let short = ImportedLine {
        rows: line.rows[..1].to_vec(),
        ..line
    };
    let untouched = book.clone();
    assert_eq!(short.put_into(&mut book), None);
    assert_eq!(book, untouched);
}

#[test]
fn a_second_column_of_the_same_is_left_out_and_said() {
    let shown = preview("Dist (m);Level (m);Elevation (ft)\n0;100;328\n20;90;295\n");
    assert_eq!(shown.columns[2].meaning, Meaning::LeftOut);
    assert!(shown.notes.contains(&Note::Second {
        column: 2,
        meaning: Meaning::Level
    }));
    let mut choices = Choices::default();
    choices.meanings.insert(2, Meaning::Level);
    let table = paste(
        "Dist (m);Level (m);Elevation (ft)\n0;100;328\n20;90;295\n",
        given(),
    );
    assert_eq!(
        table.unwrap().take(&choices, Faulty::Keep),
        Err(vec![Obstacle::Twice {
            meaning: Meaning::Level,
            first: 1,
            second: 2
        }])
    );
}

#[test]
fn coordinates_are_not_taken_for_lengths() {
    let shown = preview("Name;Lat;Long;Alt\nA;-13,51;-72,01;3400\nB;-13,52;-72,02;3390\n");
    let read: Vec<Meaning> = shown.columns.iter().map(|c| c.meaning).collect();
    assert_eq!(
        read,
        [
            Meaning::Name,
            Meaning::LeftOut,
            Meaning::LeftOut,
            Meaning::Level
        ]
    );
}

#[test]
fn thousands_by_apostrophe_are_no_feet() {
    let shown = preview("Dist (m);Level (m)\n0;1'234.5\n20;1'230.0\n");
    assert_eq!(shown.faults.len(), 2);
}

#[test]
fn whole_files_are_refused_by_name() {
    let refused = |text: &str| paste(text, given()).unwrap_err();
    assert_eq!(refused(" \n\n"), Refusal::Empty);
    assert_eq!(refused("Dist;Level\n"), Refusal::NoRows);
    let many: String = (0..1001).map(|i| format!("{i};{}\n", 2000 - i)).collect();
    assert_eq!(refused(&many), Refusal::TooManyRows { rows: 1001 });
    let headed = format!("title\nDist (m);Level (m)\n{many}");
    assert_eq!(refused(&headed), Refusal::TooManyRows { rows: 1001 });
    let wide = format!("{}\n", "1;".repeat(100));
    assert!(matches!(
        refused(&wide),
        Refusal::TooManyColumns { row: 1, .. }
    ));
    assert_eq!(
        refused("a;d;z\nA;0;100\n\"B;10;90\nC;20;80\n"),
        Refusal::QuoteOpen { row: 3 }
    );
}

#[test]
fn a_thousand_rows_and_ten_megabytes_are_read() {
    let thousand: String = (0..1000).map(|i| format!("{i};{}\n", 2000 - i)).collect();
    assert_eq!(take(&thousand).rows.len(), 1000);
    // The same, each row with a remark that fills the file to ten megabytes.
    let remark = "x".repeat(10_450);
    let large: String = (0..1000)
        .map(|i| format!("{i};{};{remark}\n", 2000 - i))
        .collect();
    assert!(large.len() > 10_400_000 && large.len() <= LONGEST);
    let shown = open(large.as_bytes(), given())
        .unwrap()
        .preview(&Choices::default());
    assert_eq!((shown.rows, shown.faults.len()), (1000, 1000));
    assert!(matches!(
        shown.faults[0].fault,
        Fault::TooLong { characters: 10_450 }
    ));
    let rows: String = "12.5;400.25\n".repeat(870_000);
    assert!(rows.len() > 10_400_000 && rows.len() <= LONGEST);
    assert_eq!(
        open(rows.as_bytes(), given()),
        Err(Refusal::TooManyRows { rows: 870_000 })
    );
}

/// Everything a table can be asked, for hostile input.
fn exercise(table: &Table) {
    let shown = table.preview(&Choices::default());
    assert!(shown.rows <= MOST_STATIONS);
    let mut choices = Choices {
        mark: Some(DecimalMark::Comma),
        reckoning: Some(Reckoning::FromPrevious),
        ..Choices::default()
    };
    for (i, column) in shown.columns.iter().enumerate() {
        let meaning = Meaning::ALL[(i + 1) % Meaning::ALL.len()];
        choices.meanings.insert(i, meaning);
        choices
            .units
            .insert(i, meaning.usual_unit(UnitSystem::UsCustomary));
        assert!(column.unit.is_empty() == (column.meaning.kind().is_none()));
    }
    for choices in [Choices::default(), choices] {
        for faulty in [Faulty::Keep, Faulty::LeaveOut] {
            if let Ok(line) = table.take(&choices, faulty) {
                assert!(line.rows.len() + line.left_out.len() >= shown.rows.min(1));
                for station in line.stations(7) {
                    let _ = station.level_m.usable(Kind::Level);
                }
            }
        }
    }
}

proptest! {
    #[test]
    fn any_bytes_are_a_table_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        if let Ok(table) = open(&bytes, given()) {
            exercise(&table);
        }
    }

    #[test]
    fn text_like_a_table_is_read_or_refused(
        text in "(sep=;\n)?([DdLlk0-9.,;+%°'\"\t\n\r |()m-]|ist|level|ft|0\\+1){0,160}"
    ) {
        if let Ok(table) = paste(&text, given()) {
            exercise(&table);
        }
    }

    #[test]
    fn a_table_cut_short_is_read_or_refused(cut in 0usize..200) {
        let whole = "Estación;\"Distancia (m)\";Cota (m);Ángulo (°)\r\nA;0;\"412,50\";\r\nB;48,25;400;-14,5\r\nC;97,5;391,75;-9\r\n";
        let bytes = &whole.as_bytes()[..cut.min(whole.len())];
        if let Ok(table) = open(bytes, given()) {
            exercise(&table);
        }
    }

    #[test]
    fn what_is_written_is_read_back(
        rows in proptest::collection::vec((0u32..5_000_000, 0u32..900_000), 1..60),
        comma: bool, semicolon: bool,
    ) {
        let mut running: Vec<u32> = rows.iter().map(|r| r.0).collect();
        running.sort_unstable();
        let mark = if comma { "," } else { "." };
        let separator = if semicolon { ";" } else { "\t" };
        let number = |x: u32| format!("{}{mark}{:02}", x / 100, x % 100);
        let mut text = format!("Distance (m){separator}Level (m)\n");
        for (d, (_, z)) in running.iter().zip(&rows) {
            text += &format!("{}{separator}{}\n", number(*d), number(*z));
        }
        let line = take(&text);
        for ((row, d), (_, z)) in line.rows.iter().zip(&running).zip(&rows) {
            let value = |a: &Option<crate::import::Amount>| a.as_ref().unwrap().value.unwrap();
            prop_assert!((value(&row.distance) - f64::from(*d) / 100.0).abs() < 1e-6);
            prop_assert!((value(&row.level) - f64::from(*z) / 100.0).abs() < 1e-6);
        }
    }
}
