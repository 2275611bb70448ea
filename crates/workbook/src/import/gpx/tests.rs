use super::*;
use crate::import::{ImportedLine, LONGEST, Note};
use proptest::prelude::*;
use std::fmt::Write;

/// A point of an invented line that runs down to the south-east.
fn point(tag: &str, i: u32, ele: &str) -> String {
    let (lat, lon) = (-13.5 - f64::from(i) * 0.0001, -72.0 + f64::from(i) * 0.0001);
    format!("<{tag} lat=\"{lat:.6}\" lon=\"{lon:.6}\">{ele}</{tag}>")
}

fn track(points: &str) -> String {
    format!("<gpx version=\"1.1\"><trk><trkseg>{points}</trkseg></trk></gpx>")
}

fn survey(text: &str, settings: Settings) -> Result<ImportedLine, Refusal> {
    open(text.as_bytes())?.survey(0, &settings)
}

fn fine() -> Settings {
    Settings {
        tolerance_m: 0.0,
        ..Settings::default()
    }
}

fn ele(x: f64) -> String {
    format!("<ele>{x}</ele>")
}

#[test]
fn a_fix_without_height_refuses_by_number_or_is_left_out() {
    let text = track(
        &[
            point("trkpt", 0, &ele(3400.0)),
            point("trkpt", 1, ""),
            point("trkpt", 2, "<ele>about 3390</ele>"),
            point("trkpt", 4, &ele(3380.0)),
        ]
        .concat(),
    );
    match survey(&text, fine()) {
        Err(Refusal::Fix { fault, count: 2 }) => {
            assert_eq!((fault.row, fault.fault), (2, Fault::NoElevation));
        }
        other => panic!("{other:?}"),
    }
    let line = survey(
        &text,
        Settings {
            leave_out_faulty: true,
            ..fine()
        },
    )
    .unwrap();
    assert_eq!((line.rows.len(), &line.left_out[..]), (2, &[2, 3][..]));
    assert!(line.notes.contains(&Note::SatelliteHeights));
}

#[test]
fn a_straight_track_thins_to_its_ends_and_says_how_many_went() {
    let points: String = (0..200)
        .map(|i| point("trkpt", i, &ele(3400.0 - f64::from(i))))
        .collect();
    let line = survey(&track(&points), Settings::default()).unwrap();
    assert_eq!(line.rows.len(), 2);
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
    assert_eq!((from, kept), (200, 2));
    assert!((before - after).abs() < 0.01);
    let stations = line.stations(1);
    assert_eq!(stations[0].distance_m.value, Some(0.0));
    assert_eq!(stations[1].level_m.text, "3201");
}

#[test]
fn a_corner_turns_to_the_right_or_left() {
    let at =
        |lat: f64, lon: f64| format!("<trkpt lat=\"{lat}\" lon=\"{lon}\"><ele>100</ele></trkpt>");
    // North, then east: a right angle to the right.
    let right = track(&[at(0.0, 0.0), at(0.001, 0.0), at(0.001, 0.001)].concat());
    let turn = |text: &str| {
        let line = survey(text, fine()).unwrap();
        assert!(line.notes.contains(&Note::Flat));
        line.rows[1].plan_turn.as_ref().unwrap().value.unwrap()
    };
    assert!((turn(&right) - 90.0).abs() < 0.05);
    let left = track(&[at(0.0, 0.0), at(0.001, 0.0), at(0.001, -0.001)].concat());
    assert!((turn(&left) + 90.0).abs() < 0.05);
}

#[test]
fn a_track_walked_up_is_said_and_turned_round() {
    let points: String = (0..3)
        .map(|i| point("trkpt", i, &ele(3300.0 + f64::from(i))))
        .collect();
    let up = survey(&track(&points), fine()).unwrap();
    assert!(
        up.notes
            .iter()
            .any(|n| matches!(n, Note::Uphill { rise_m } if (rise_m - 2.0).abs() < 1e-9))
    );
    let down = survey(
        &track(&points),
        Settings {
            reversed: true,
            ..fine()
        },
    )
    .unwrap();
    assert_eq!(down.rows[0].row, 3);
    assert!(!down.notes.iter().any(|n| matches!(n, Note::Uphill { .. })));
}

#[test]
fn waypoints_name_the_fix_nearest_and_keep_it() {
    let points: String = (0..20)
        .map(|i| point("trkpt", i, &ele(3400.0 - f64::from(i))))
        .collect();
    let near = point("wpt", 7, "<name>Rock &amp; tree</name>");
    let far = "<wpt lat=\"-13.6\" lon=\"-72.0\"><name>Camp</name></wpt>";
    let text = format!("<gpx>{near}{far}<trk><trkseg>{points}</trkseg></trk></gpx>");
    let line = survey(&text, Settings::default()).unwrap();
    assert_eq!(line.rows.len(), 3);
    assert_eq!(
        (line.rows[1].row, line.rows[1].name.as_str()),
        (8, "Rock & tree")
    );
    assert!(line.notes.iter().any(
        |n| matches!(n, Note::Astray { count: 1, name, distance_m } if name == "Camp" && *distance_m > 1e4)
    ));
}

#[test]
fn entities_are_not_expanded() {
    let text = format!(
        "<!DOCTYPE gpx [<!ENTITY a \"aaaaaaaaaa\"><!ENTITY b \"&a;&a;&a;&a;\">]><gpx><trk><name>&b;&#65;</name><trkseg>{}{}</trkseg></trk></gpx>",
        point("trkpt", 0, &ele(10.0)),
        point("trkpt", 1, "<ele>&b;</ele>"),
    );
    let gpx = open(text.as_bytes()).unwrap();
    assert!(gpx.doctype);
    assert_eq!(gpx.lines[0].name, "&b;A");
    assert_eq!(gpx.summaries()[0].faulty, 1);
}

#[test]
fn whole_files_are_refused_by_name() {
    let refused = |text: &str| open(text.as_bytes()).unwrap_err();
    assert!(matches!(refused("0;100\n"), Refusal::NotXml { .. }));
    assert_eq!(
        refused("<kml></kml>"),
        Refusal::NotGpx { root: "kml".into() }
    );
    assert_eq!(refused("<gpx></gpx>"), Refusal::NoTrack);
    assert_eq!(refused("<gpx>\n<trk><trkseg>\n"), Refusal::Cut { line: 3 });
    assert_eq!(
        refused("<gpx>\n<trk><trkseg><trkpt lat=\"1"),
        Refusal::Cut { line: 2 }
    );
    assert!(matches!(
        refused("<gpx>\n<trk></gpx>"),
        Refusal::NotXml { line: 2, .. }
    ));
    let deep = format!("<gpx>{}", "<a>".repeat(100_000));
    assert_eq!(refused(&deep), Refusal::TooDeep { line: 1 });
    let far = track(
        "<trkpt lat=\"0\" lon=\"0\"><ele>1</ele></trkpt><trkpt lat=\"0\" lon=\"179.9\"><ele>1</ele></trkpt>",
    );
    assert!(matches!(
        survey(&far, fine()),
        Err(Refusal::Jump { fix: 2, .. })
    ));
    let one = track(&point("trkpt", 0, &ele(1.0)));
    assert_eq!(survey(&one, fine()), Err(Refusal::TooFewFixes { fixes: 1 }));
    let same = track(&point("trkpt", 0, &ele(1.0)).repeat(3));
    assert_eq!(
        survey(&same, fine()),
        Err(Refusal::TooFewFixes { fixes: 1 })
    );
    for tolerance_m in [-1.0, 101.0, f64::NAN] {
        let settings = Settings {
            tolerance_m,
            ..Settings::default()
        };
        assert!(matches!(
            survey(&one, settings),
            Err(Refusal::Tolerance { .. })
        ));
    }
    assert_eq!(
        open(one.as_bytes()).unwrap().survey(5, &fine()),
        Err(Refusal::NoSuchLine)
    );
}

#[test]
fn ten_megabytes_of_fixes_are_thinned() {
    let mut points = String::new();
    for i in 0..99_000u32 {
        let t = f64::from(i);
        let north = if i % 2000 < 1000 {
            0.000_001
        } else {
            -0.000_001
        };
        let _ = writeln!(
            points,
            "<trkpt lat=\"{:.7}\" lon=\"{:.7}\"><ele>{:.1}</ele><time>2020-01-01T00:00:00Z</time></trkpt>",
            -13.5 + north * f64::from(i % 1000),
            -72.0 + t * 0.000_001,
            3400.0 - t * 0.01,
        );
    }
    let text = track(&points);
    assert!(
        text.len() > 9_000_000 && text.len() <= LONGEST,
        "{}",
        text.len()
    );
    let line = survey(&text, Settings::default()).unwrap();
    assert!(
        (100..1000).contains(&line.rows.len()),
        "{}",
        line.rows.len()
    );
    let more = track(&"<trkpt lat='0' lon='0'/>".repeat(MOST_FIXES + 1));
    assert!(matches!(open(more.as_bytes()), Err(Refusal::TooManyFixes)));
}

fn exercise(bytes: &[u8]) {
    let Ok(gpx) = open(bytes) else { return };
    for i in 0..gpx.summaries().len() {
        for leave_out_faulty in [false, true] {
            for reversed in [false, true] {
                let settings = Settings {
                    tolerance_m: 1.0,
                    leave_out_faulty,
                    reversed,
                };
                if let Ok(line) = gpx.survey(i, &settings) {
                    assert!(line.rows.len() >= 2);
                    for row in &line.rows {
                        assert!(row.distance.is_some() && row.level.is_some());
                    }
                }
            }
        }
    }
}

proptest! {
    #[test]
    fn any_bytes_are_a_track_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..300)) {
        exercise(&bytes);
    }

    #[test]
    fn text_like_gpx_is_read_or_refused(
        parts in proptest::collection::vec(
            "(<gpx>|<trk>|<trkseg>|<trkpt lat=\"[0-9.-]{0,5}\" lon='[0-9]{0,3}'/?>|<ele>[0-9]{0,4}|</ele>|</trkpt>|</trkseg>|</trk>|</gpx>|<wpt lat=\"1\" lon=\"2\">|</wpt>|&[a-z#0-9]{0,4};|<!\\[CDATA\\[|\\]\\]>|<!--|-->|<!DOCTYPE|xmlns:a=\"b\"|.){0,1}", 0..60)
    ) {
        exercise(parts.concat().as_bytes());
    }

    #[test]
    fn a_file_cut_short_is_refused_by_name(cut in 1usize..10_000) {
        let points: String = (0..5).map(|i| point("trkpt", i, &ele(100.0 - f64::from(i)))).collect();
        let whole = track(&points);
        let cut = cut % whole.len();
        if let Err(why) = open(&whole.as_bytes()[..cut.max(1)]) {
            let said = matches!(why, Refusal::Cut { .. } | Refusal::NotXml { .. } | Refusal::NotGpx { .. });
            prop_assert!(said, "{:?}", why);
        } else {
            prop_assert!(false, "taken though cut at {}", cut);
        }
    }

    #[test]
    fn any_walk_gives_a_line_no_longer_than_walked(
        steps in proptest::collection::vec((-0.001..0.001f64, -0.001..0.001f64, -20.0..20.0f64), 2..60),
        tolerance_m in 0.0..50.0f64,
    ) {
        let (mut lat, mut lon, mut ele) = (-13.5, -72.0, 3000.0);
        let mut points = String::new();
        for (n, e, z) in steps {
            (lat, lon, ele) = (lat + n, lon + e, ele + z);
            let _ = write!(points, "<trkpt lat=\"{lat}\" lon=\"{lon}\"><ele>{ele}</ele></trkpt>");
        }
        let line = survey(&track(&points), Settings { tolerance_m, ..Settings::default() }).unwrap();
        let values: Vec<f64> = line.rows.iter().map(|r| r.distance.as_ref().unwrap().value.unwrap()).collect();
        prop_assert!(values.windows(2).all(|w| w[1] >= w[0]));
        for note in &line.notes {
            if let Note::Thinned { length_before_m, length_after_m, .. } = note {
                prop_assert!(length_after_m <= &(length_before_m + 1e-6));
            }
        }
        let turns_fit = line.rows.iter().filter_map(|r| r.plan_turn.as_ref()?.value).all(|t| t.abs() <= 180.0);
        prop_assert!(turns_fit);
    }
}

#[test]
fn gpx_is_told_from_tables_by_its_first_character() {
    assert!(looks_like_gpx(b"\xef\xbb\xbf <?xml"));
    assert!(looks_like_gpx(b"\xff\xfe<\0g\0p\0x\0"));
    assert!(!looks_like_gpx(b"Dist;Level"));
    assert!(!looks_like_gpx(b""));
}
