//! Geodesics on WGS 84 against GeographicLib and a published line.

use super::sample;
use workbook::import::geodesic::{Position, leg};

#[test]
fn legs_agree_with_the_library() {
    let bytes = sample("gpx/geodesic.csv");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(bytes.as_slice());
    let mut count = 0;
    for record in reader.records() {
        let row: Vec<f64> = record.unwrap().iter().map(|x| x.parse().unwrap()).collect();
        let at = |i: usize| Position {
            latitude_deg: row[i],
            longitude_deg: row[i + 1],
        };
        let found = leg(at(0), at(2)).unwrap();
        // 0.1 mm: what the series is good to (Vincenty 1975), over 6000 km.
        let off = (found.distance_m - row[4]).abs();
        assert!(off < 1e-4, "{row:?}: {off}");
        // Across a metre, the last place of the positions turns a leg by more.
        let angle = 1e-6 + 1e-6 / row[4];
        assert!((found.from_deg - row[5]).abs() < angle, "{found:?} {row:?}");
        assert!((found.to_deg - row[6]).abs() < angle, "{found:?} {row:?}");
        count += 1;
    }
    assert_eq!(count, 40);
}

/// Flinders Peak to Buninyong: 54 972.271 m, azimuth 306°52'05.37" (Geocentric
/// Datum of Australia Technical Manual, chapter 4, on GRS 80, whose flattening
/// differs from that of WGS 84 in the tenth digit; from memory, and confirmed
/// by GeographicLib 2.1 as 54 972.27114 m).
#[test]
fn the_published_line_is_met() {
    let degrees = |d: f64, m: f64, s: f64| d + m / 60.0 + s / 3600.0;
    let flinders = Position {
        latitude_deg: -degrees(37.0, 57.0, 3.72030),
        longitude_deg: degrees(144.0, 25.0, 29.52440),
    };
    let buninyong = Position {
        latitude_deg: -degrees(37.0, 39.0, 10.15610),
        longitude_deg: degrees(143.0, 55.0, 35.38390),
    };
    let found = leg(flinders, buninyong).unwrap();
    assert!((found.distance_m - 54_972.271).abs() < 1e-3, "{found:?}");
    let azimuth = degrees(306.0, 52.0, 5.37) - 360.0;
    assert!(
        (found.from_deg - azimuth).abs() < 0.01 / 3600.0,
        "{found:?}"
    );
}
