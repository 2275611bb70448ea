//! Whatever is typed into a field: a usable number of its kind or a named
//! trouble.
#![no_main]

use libfuzzer_sys::fuzz_target;
use workbook::reading::{DecimalMark, read};
use workbook::units::Kind;

const KINDS: [Kind; 17] = [
    Kind::Distance,
    Kind::Level,
    Kind::Head,
    Kind::Bore,
    Kind::Flow,
    Kind::Pressure,
    Kind::Stress,
    Kind::Temperature,
    Kind::Velocity,
    Kind::Power,
    Kind::Time,
    Kind::Angle,
    Kind::Share,
    Kind::Number,
    Kind::Mass,
    Kind::MassPerLength,
    Kind::PricePerLength,
];

fuzz_target!(|typed: (u8, u8, bool, &str)| {
    let (kind, unit, comma, text) = typed;
    let kind = KINDS[usize::from(kind) % KINDS.len()];
    let units = kind.units();
    let unit = units[usize::from(unit) % units.len()];
    let mark = if comma {
        DecimalMark::Comma
    } else {
        DecimalMark::Point
    };
    let Ok(Some(reading)) = read(text, kind, unit, mark) else {
        return;
    };
    assert!(reading.value.is_finite());
    assert!(reading.value >= 0.0 || kind.may_be_negative(), "{reading:?}");
    assert!(
        reading
            .plus_minus
            .is_none_or(|doubt| doubt.is_finite() && doubt >= 0.0),
        "{reading:?}"
    );
    // Blanks around it mean nothing.
    assert_eq!(read(&format!(" {text}\t"), kind, unit, mark), Ok(Some(reading)));
});
