//! The line as surveyed, against numpy and scipy: geometry of 500 stations
//! measured in every way there is, and the angle between legs in space.
#![allow(clippy::panic, reason = "a helper of tests fails as a test does")]

use workbook::book::{BendKind, DistanceKind, Reckoning, Station, SurveyWay};
use workbook::reading::DecimalMark;
use workbook::resolve::resolve;
use workbook::{Book, Entry, Field, evaluate};

const LINE: &str = include_str!("../data/survey/line_500.csv");
const DEFLECTIONS: &str = include_str!("../data/survey/deflections.csv");

fn rows(text: &str) -> Vec<Vec<&str>> {
    text.lines()
        .filter(|line| !line.starts_with('#'))
        .skip(1)
        .map(|line| line.split(',').collect())
        .collect()
}

fn number(text: &str) -> f64 {
    text.parse()
        .unwrap_or_else(|_| panic!("{text} is no number"))
}

fn typed(field: Field, text: &str) -> Entry {
    if text.is_empty() {
        return Entry::default();
    }
    let unit = field.kind().units()[0].symbol;
    Entry::typed(text, unit, field.kind(), DecimalMark::Point)
}

/// The line of the file as a person would enter it.
fn book() -> Book {
    let mut book = Book::new("reference");
    book.line.reckoning = Reckoning::FromPrevious;
    book.line.bend = BendKind::Smooth;
    book.line.stations = rows(LINE)
        .into_iter()
        .map(|row| {
            let id: u32 = row[0].parse().unwrap_or_else(|_| panic!("{row:?}"));
            Station {
                id,
                way: match row[1] {
                    "level" => SurveyWay::Level,
                    "angle" => SurveyWay::Angle,
                    "staff" => SurveyWay::Staff,
                    other => panic!("{other}"),
                },
                distance_kind: match row[2] {
                    "slope" => None,
                    "horizontal" => Some(DistanceKind::Horizontal),
                    other => panic!("{other}"),
                },
                distance_m: typed(Field::StationDistance(id), row[3]),
                level_m: typed(Field::StationLevel(id), row[4]),
                fore_sight_deg: typed(Field::StationForeSight(id), row[5]),
                back_sight_deg: typed(Field::StationBackSight(id), row[6]),
                staff_back_m: typed(Field::StationStaffBack(id), row[7]),
                staff_fore_m: typed(Field::StationStaffFore(id), row[8]),
                plan_turn_deg: typed(Field::StationTurn(id), row[9]),
                ..Station::default()
            }
        })
        .collect();
    book.line.stretches[0].from_station = 1;
    book
}

// Tolerance: the file keeps twelve digits of some kilometres.
#[test]
fn five_hundred_stations_lie_where_numpy_puts_them() {
    let found = resolve(&book());
    assert_eq!(found.troubles, vec![]);
    let stations = found.profile.whole().unwrap();
    assert_eq!(stations.len(), 500);
    let near = |what: &str, id: u32, ours: f64, theirs: f64| {
        assert!((ours - theirs).abs() < 1e-7, "{what} {id}: {ours} {theirs}");
    };
    let (mut reverse, mut upright) = (0, 0);
    let mut before: Option<(f64, f64)> = None;
    for (row, station) in rows(LINE).iter().zip(stations) {
        let (along, plan, level) = (number(row[10]), number(row[11]), number(row[12]));
        near("chainage", station.id, station.chainage.m(), along);
        near("horizontal", station.id, station.horizontal.m(), plan);
        near("level", station.id, station.level.m(), level);
        if let Some((last_plan, last_level)) = before {
            reverse += usize::from(level > last_level);
            upright += usize::from((plan - last_plan).abs() < 1e-9);
        }
        before = Some((plan, level));
    }
    assert!(reverse > 50 && upright > 3, "{reverse} {upright}");
    assert_eq!(found.turns.len(), 498);
    for turn in &found.turns {
        let row = &rows(LINE)[turn.station as usize - 1];
        let ours = turn.deflection_deg.clone().unwrap();
        // Where the legs are long and the turn is small, the last digits of
        // the levels show in it.
        assert!(
            (ours - number(row[13])).abs() < 1e-6,
            "{}: {ours} {}",
            turn.station,
            row[13]
        );
    }
}

// The same angles as typed turns of a line of two legs.
#[test]
fn deflections_are_scipys() {
    let mut checked = 0;
    for row in rows(DEFLECTIONS) {
        let mut book = Book::new("two legs");
        book.line.reckoning = Reckoning::FromPrevious;
        book.line.stations = (1..=3)
            .map(|id| Station {
                id,
                way: SurveyWay::Angle,
                distance_m: typed(Field::StationDistance(id), if id == 1 { "" } else { "10" }),
                level_m: typed(Field::StationLevel(id), if id == 1 { "100" } else { "" }),
                ..Station::default()
            })
            .collect();
        for (i, slope) in [(1, row[0]), (2, row[1])] {
            let sight = format!("{}", -number(slope));
            let id = book.line.stations[i].id;
            book.line.stations[i].fore_sight_deg = typed(Field::StationForeSight(id), &sight);
        }
        book.line.stations[1].plan_turn_deg = typed(Field::StationTurn(2), row[2]);
        let found = resolve(&book);
        let ours = found.turns[0].deflection_deg.clone().unwrap();
        let theirs = number(row[3]);
        assert!((ours - theirs).abs() < 1e-9, "{row:?}: {ours}");
        checked += 1;
    }
    assert_eq!(checked, 800);
}

/// The whole evaluation of a long line answers at every station.
#[test]
fn five_hundred_stations_have_their_findings() {
    let mut book = book();
    for (field, text) in [
        (Field::DesignFlow, "42"),
        (Field::ForebayHighest, "2002"),
        (Field::ForebayNormal, "2001.5"),
        (Field::ForebayLowest, "2001"),
        (Field::JetCount, "2"),
        (Field::WarmestWall, "20"),
    ] {
        *book.entry_mut(field).unwrap() = typed(field, text);
    }
    let widest = pipes::catalogue()
        .pipes
        .iter()
        .filter(|p| p.material == pipes::Material::Steel)
        .max_by(|a, b| a.bore().value.total_cmp(&b.bore().value))
        .unwrap();
    assert!(workbook::edit::keep_copy(&mut book, &widest.id));
    book.line.stretches[0].pipe = Some(book.pipes[0].id.clone());
    let found = evaluate(&book);
    assert_eq!(found.stations.len(), 500);
    let highest = 2002.0;
    for s in &found.stations {
        let head = s.static_head.clone().unwrap().m();
        assert!((head - (highest - s.level.m())).abs() < 1e-9);
        assert!(s.running.is_ok() && s.sets.clone().unwrap().len() == 2);
        assert!(s.share.is_ok());
    }
    let loss: f64 = found
        .steady
        .bends
        .iter()
        .map(|(_, l)| l.clone().unwrap().k)
        .sum();
    assert!(loss > 1.0);
    assert!(!found.relief.vents.unwrap().is_empty());
    assert!(!found.relief.drains.unwrap().is_empty());
}
