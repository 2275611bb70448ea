//! The demo book: a site of our own invention, marked as invented wherever it
//! is shown. No figure in it was measured anywhere.

use crate::book::{
    Book, FittingEntry, FittingKind, Laying, NozzleKind, Price, Site, Station, StretchEntry,
};
use crate::entry::Entry;
use crate::field::Field;
use crate::pipe_copy::PipeCopy;
use crate::reading::DecimalMark;

/// Stations of the invented line: name, slope distance from the forebay, and
/// level.
const STATIONS: [(&str, &str, &str); 15] = [
    ("forebay", "0", "186.2"),
    ("", "24.5", "184.9"),
    ("path", "51", "181.6"),
    ("", "78", "176.0"),
    ("old wall", "104.5", "170.1"),
    ("", "131", "166.4"),
    ("saddle", "158", "165.2"),
    ("", "186.5", "159.8"),
    ("", "214", "152.3"),
    ("twin oaks", "243", "144.7"),
    ("", "271.5", "137.9"),
    ("", "298", "131.2"),
    ("lower bend", "326", "125.6"),
    ("", "352.5", "121.0"),
    ("powerhouse", "374", "118.6"),
];

/// Pipes of the invented line: from which station, and the catalogue's pipe.
const STRETCHES: [(u32, &str); 2] = [
    (1, "pe100-iso4427/225/sdr17"),
    (10, "pe100-iso4427/225/sdr11"),
];

/// Turns of the invented line on the plan, by station.
const TURNS: [(u32, &str); 4] = [(3, "12"), (7, "21"), (10, "-9"), (13, "30")];

/// The demo book under this key.
#[must_use]
pub fn demo(id: &str) -> Book {
    let mut book = Book::new(id);
    book.invented = true;
    book.site = Site {
        name: "Alder Notch".to_owned(),
        place: "an invented site".to_owned(),
        client: String::new(),
        prepared_by: String::new(),
        date: String::new(),
        note: "Every figure in this book is invented, to show what a filled-in book looks like. \
               Nothing may be built from it."
            .to_owned(),
    };
    book.line.stations = (1..)
        .zip(STATIONS)
        .map(|(id, (name, distance, level))| Station {
            id,
            name: name.to_owned(),
            distance_m: typed(Field::StationDistance(id), distance, "m"),
            level_m: typed(Field::StationLevel(id), level, "m"),
            plan_turn_deg: TURNS
                .iter()
                .find(|(at, _)| *at == id)
                .map_or_else(Entry::default, |(_, turn)| {
                    typed(Field::StationTurn(id), turn, "°")
                }),
            ..Station::default()
        })
        .collect();
    let catalogue = pipes::catalogue();
    book.line.stretches = (1..)
        .zip(STRETCHES)
        .map(|(id, (from_station, pipe))| StretchEntry {
            id,
            from_station,
            pipe: Some(pipe.to_owned()),
            laying: Laying::Buried,
            cover_m: typed(Field::StretchCover(id), "0.8", "m"),
            ..StretchEntry::default()
        })
        .collect();
    book.pipes = STRETCHES
        .iter()
        .filter_map(|(_, pipe)| catalogue.find(pipe))
        .map(PipeCopy::of)
        .collect();
    book.line.fittings = fittings();
    for (field, text, unit) in [
        (Field::DesignFlow, "42 ± 2", "L/s"),
        (Field::ForebayNormal, "187.4", "m"),
        (Field::ForebayHighest, "187.7", "m"),
        (Field::ForebayLowest, "187.0", "m"),
        (Field::JetAxis, "119.1", "m"),
        (Field::TailLevel, "117.3", "m"),
        (Field::GaugeLevel, "119.4", "m"),
        (Field::Altitude, "640", "m"),
        (Field::ColdestWater, "3", "°C"),
        (Field::WarmestWater, "16", "°C"),
        (Field::ColdestWall, "2", "°C"),
        (Field::WarmestWall, "20", "°C"),
        (Field::JetCount, "2", ""),
        (Field::JetVelocityCoefficient, "0.97", ""),
        (Field::BranchK, "0.35", ""),
        (Field::BranchBore, "110", "mm"),
        (Field::JetRating, "16", "bar"),
        (Field::ClosingTime, "15", "s"),
        (Field::OpeningTime, "30", "s"),
        (Field::KnownFall, "67.5", "m"),
        (Field::BendRadius, "3", ""),
        (Field::JointDeflection, "6", "°"),
    ] {
        if let Some(entry) = book.entry_mut(field) {
            *entry = typed(field, text, unit);
        }
    }
    book.jets.kind = NozzleKind::Needle;
    // The rack's gaps are far narrower than the jets.
    book.surge.jets_kept_clear = true;
    book.prices.currency = "invented".to_owned();
    book.prices.pipes = STRETCHES
        .iter()
        .zip(["31.50", "46.20"])
        .enumerate()
        .map(|(i, ((_, pipe), price))| Price {
            pipe: (*pipe).to_owned(),
            price_per_m: typed(Field::Price(i), price, "/m"),
        })
        .collect();
    book
}

fn fittings() -> Vec<FittingEntry> {
    let rating = |id| typed(Field::FittingRating(id), "16", "bar");
    vec![
        FittingEntry {
            id: 1,
            at_station: 1,
            kind: FittingKind::EntranceRounded,
            ..FittingEntry::default()
        },
        FittingEntry {
            id: 5,
            at_station: 1,
            kind: FittingKind::TrashRack,
            rack_width_m: typed(Field::RackWidth(5), "0.8", "m"),
            rack_length_m: typed(Field::RackLength(5), "0.9", "m"),
            bar_m: typed(Field::RackBar(5), "5", "mm"),
            gap_m: typed(Field::RackGap(5), "12", "mm"),
            angle_deg: typed(Field::FittingAngle(5), "60", "°"),
            ..FittingEntry::default()
        },
        FittingEntry {
            id: 2,
            at_station: 7,
            kind: FittingKind::Bend,
            angle_deg: typed(Field::FittingAngle(2), "22.5", "°"),
            radius_ratio_number: typed(Field::FittingRadius(2), "3", ""),
            rating_pa: rating(2),
            ..FittingEntry::default()
        },
        FittingEntry {
            id: 3,
            at_station: 13,
            kind: FittingKind::Bend,
            angle_deg: typed(Field::FittingAngle(3), "30", "°"),
            radius_ratio_number: typed(Field::FittingRadius(3), "3", ""),
            rating_pa: rating(3),
            ..FittingEntry::default()
        },
        FittingEntry {
            id: 4,
            at_station: 15,
            kind: FittingKind::GateValve,
            rating_pa: rating(4),
            note: "guard valve, DN 200".to_owned(),
            ..FittingEntry::default()
        },
    ]
}

fn typed(field: Field, text: &str, unit: &str) -> Entry {
    Entry::typed(text, unit, field.kind(), DecimalMark::Point)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::evaluate::evaluate;
    use crate::figure::Gap;
    use crate::verdict::{CheckKind, Verdict};

    #[test]
    fn the_demo_is_whole_and_holds() {
        let found = evaluate(&demo("demo"));
        assert_eq!(found.troubles(), vec![]);
        assert_eq!(found.next, None);
        assert!(found.judged.verdict <= Verdict::Tight);
        for stretch in &found.judged.stretches {
            for check in &stretch.checks {
                assert!(check.verdict <= Verdict::Tight, "{check:#?}");
            }
        }
    }

    #[test]
    fn without_a_closing_time_only_surge_is_unsettled() {
        let mut book = demo("demo");
        book.surge.closing_time_s = Entry::default();
        let found = evaluate(&book);
        assert_eq!(found.troubles(), vec![]);
        let lack = Gap::needs(Field::ClosingTime);
        let next = found.next.expect("the closing time is asked for");
        assert_eq!(next.why, lack);
        assert_eq!(next.sheet, crate::caution::Sheet::Surge);
        assert_eq!(found.judged.verdict, Verdict::Unsettled);
        for check in found.judged.stretches.iter().flat_map(|s| &s.checks) {
            match check.kind {
                CheckKind::SurgePressure | CheckKind::LowestPressure => {
                    assert_eq!(check.verdict, Verdict::Unsettled);
                    assert_eq!(check.gap, Some(lack.clone()));
                }
                _ => assert!(check.verdict <= Verdict::Tight, "{check:#?}"),
            }
        }
    }

    #[test]
    fn every_entry_of_the_demo_is_usable() {
        let book = demo("demo");
        for field in book.fields() {
            assert!(book.value(field).is_ok(), "{field:?}");
        }
        assert_eq!(book.pipes.len(), STRETCHES.len());
    }
}
