//! Tracks, routes and waypoints.

use super::sample;
use workbook::book::{Book, DistanceKind};
use workbook::evaluate;
use workbook::import::gpx::{Gpx, LineKind, Settings, open};
use workbook::import::{Fault, ImportedLine, Note, Refusal};

const EVERY_FIX: Settings = Settings {
    tolerance_m: 0.0,
    leave_out_faulty: false,
    reversed: false,
};

fn read(name: &str) -> Gpx {
    open(&sample(name)).unwrap_or_else(|why| panic!("{name}: {why:?}"))
}

fn lengths(line: &ImportedLine) -> Vec<f64> {
    line.rows
        .iter()
        .filter_map(|r| r.distance.as_ref()?.value)
        .collect()
}

/// The plan length and the gross fall as the book resolves them.
fn resolved(line: &ImportedLine) -> (f64, f64) {
    let mut book = Book::new("import");
    book.line.distance_kind = line.distance_kind;
    book.line.reckoning = line.reckoning;
    book.line.stations = line.stations(1);
    let found = evaluate(&book);
    let profile = &found.resolved.profile;
    assert_eq!(profile.broken, None);
    let fall = profile.first_level.clone().unwrap().m() - profile.last_level.clone().unwrap().m();
    (profile.plan_length.clone().unwrap().m(), fall)
}

#[test]
fn a_receivers_track_gives_the_line() {
    let gpx = read("gpx/default_namespace_crlf.gpx");
    let summary = &gpx.summaries()[0];
    assert_eq!(
        (
            summary.kind,
            summary.name.as_str(),
            summary.fixes,
            summary.segments,
            summary.faulty
        ),
        (LineKind::Track, "Line <down>", 60, 1, 0)
    );
    let line = gpx.survey(0, &EVERY_FIX).unwrap();
    assert_eq!(line.distance_kind, DistanceKind::Horizontal);
    assert_eq!(line.rows.len(), 60);
    // Heights of extensions are not the fix's.
    assert_eq!(line.rows[0].level.as_ref().unwrap().typed, "3412.50");
    assert_eq!(line.rows[30].name, "Rock step");
    // Sum of 59 geodesics by GeographicLib for Python 2.1 over the same fixes
    // to seven decimals of a degree; running distances are kept to 0.01 m.
    let (plan, fall) = resolved(&line);
    assert!((plan - 228.0755).abs() < 0.006, "{plan}");
    assert!((fall - 60.91).abs() < 0.01, "{fall}");
    assert!(line.notes.contains(&Note::SatelliteHeights));
}

#[test]
fn thinning_says_what_it_dropped_and_keeps_the_shape() {
    let gpx = read("gpx/default_namespace_crlf.gpx");
    let line = gpx.survey(0, &Settings::default()).unwrap();
    let thinned = line.notes.iter().find_map(|n| match n {
        Note::Thinned {
            from,
            kept,
            length_before_m,
            length_after_m,
            ..
        } => Some((*from, *kept, *length_before_m, *length_after_m)),
        _ => None,
    });
    let (from, kept, before, after) = thinned.unwrap();
    assert_eq!((from, kept), (60, line.rows.len()));
    assert!(kept < 10, "{kept}");
    assert!(after <= before && before - after < 2.0, "{before} {after}");
    assert!(line.rows.iter().any(|r| r.name == "Rock step"));
}

#[test]
fn segments_are_joined_in_order_and_the_gaps_said() {
    let gpx = read("gpx/prefixed_segments.gpx");
    let summary = &gpx.summaries()[0];
    assert_eq!(
        (summary.segments, summary.name.as_str()),
        (3, "Morning & noon")
    );
    let line = gpx.survey(0, &EVERY_FIX).unwrap();
    let joined = |line: &ImportedLine| {
        line.notes.iter().find_map(|n| match n {
            Note::Joined { count, fix, gap_m } => Some((*count, *fix, *gap_m)),
            _ => None,
        })
    };
    let (count, fix, gap_m) = joined(&line).unwrap();
    assert_eq!((count, fix), (2, 22));
    // GeographicLib for Python 2.1; the gap before fix 21 is 4.150 m.
    assert!((gap_m - 4.253_049_5).abs() < 1e-6);
    assert!((lengths(&line).last().unwrap() - 228.0755).abs() < 0.006);
    let back = gpx
        .survey(
            0,
            &Settings {
                reversed: true,
                ..EVERY_FIX
            },
        )
        .unwrap();
    assert!((lengths(&back).last().unwrap() - 228.0755).abs() < 0.006);
    assert!(back.notes.iter().any(|n| matches!(n, Note::Uphill { .. })));
    let (count, fix, _) = joined(&back).unwrap();
    assert_eq!((count, fix), (2, 22));
}

#[test]
fn a_fix_without_height_is_named_or_left_out() {
    let gpx = read("gpx/version_1_0_missing_ele.gpx");
    match gpx.survey(0, &EVERY_FIX) {
        Err(Refusal::Fix { fault, count }) => {
            assert_eq!((fault.row, fault.fault, count), (8, Fault::NoElevation, 3));
        }
        other => panic!("{other:?}"),
    }
    let line = gpx
        .survey(
            0,
            &Settings {
                leave_out_faulty: true,
                ..EVERY_FIX
            },
        )
        .unwrap();
    assert_eq!(line.left_out, [8, 9, 41]);
    assert_eq!(line.rows.len(), 57);
    // The empty segment before is no gap.
    assert!(!line.notes.iter().any(|n| matches!(n, Note::Joined { .. })));
}

/// Distances and turns by GeographicLib for Python 2.1 (`Inverse`, azi1 less
/// azi2 of the leg before).
#[test]
fn a_route_gives_distances_and_turns() {
    let gpx = read("gpx/route_only.gpx");
    assert_eq!(gpx.lines[0].kind, LineKind::Route);
    let line = gpx.survey(0, &EVERY_FIX).unwrap();
    for (found, expected) in lengths(&line)
        .iter()
        .zip([0.0, 37.0262, 84.6069, 142.5655, 192.3517])
    {
        assert!((found - expected).abs() <= 0.005_001, "{found} {expected}");
    }
    let turns: Vec<f64> = line
        .rows
        .iter()
        .filter_map(|r| r.plan_turn.as_ref()?.value)
        .collect();
    assert_eq!(turns.len(), 3);
    for (found, expected) in turns.iter().zip([24.115, 10.528, -7.784]) {
        assert!((found - expected).abs() <= 0.051, "{found} {expected}");
    }
    assert_eq!(line.rows[1].name, "P12");
}

#[test]
fn waypoints_alone_are_a_line_in_their_order() {
    let gpx = read("gpx/waypoints_only.gpx");
    assert_eq!(gpx.lines[0].kind, LineKind::Waypoints);
    let line = gpx.survey(0, &Settings::default()).unwrap();
    let names: Vec<&str> = line.rows.iter().map(|r| r.name.as_str()).collect();
    assert_eq!(names, ["Peg 0", "Peg 15", "Peg 30", "Peg 45"]);
}

#[test]
fn entities_are_named_and_never_opened() {
    let gpx = read("gpx/broken_entities.gpx");
    assert!(gpx.doctype);
    assert_eq!(gpx.lines[0].name, "&b;&f;");
    match gpx.survey(0, &EVERY_FIX) {
        Err(Refusal::Fix { fault, count: 1 }) => {
            assert_eq!((fault.row, fault.text.as_str()), (2, "&a;"));
        }
        other => panic!("{other:?}"),
    }
}

#[test]
fn a_file_cut_short_is_refused() {
    assert!(matches!(
        open(&sample("gpx/broken_cut_short.gpx")),
        Err(Refusal::Cut { line: 1 })
    ));
}
