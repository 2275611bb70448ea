//! The formatter: golden figures, and what it prints reads back.

use super::rule::{most_decimals, rule};
use super::*;
use crate::Language;
use proptest::prelude::*;
use workbook::reading::read;
use workbook::units::UnitSystem;

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

fn every_words() -> impl Iterator<Item = Words> {
    Language::ALL.into_iter().flat_map(|language| {
        [UnitSystem::Metric, UnitSystem::UsCustomary].map(|units| Words::new(language, units))
    })
}

/// The text with common spaces, so that a test can be read.
fn easy(text: &str) -> String {
    text.replace(THIN, " ").replace(MINUS, "-")
}

#[test]
fn figures_as_printed() {
    let en = Words::new(Language::English, UnitSystem::Metric);
    let us = Words::new(Language::English, UnitSystem::UsCustomary);
    let es = Words::new(Language::Spanish, UnitSystem::Metric);
    for (words, value, kind, short, full) in [
        (en, 151.0, Kind::Distance, "151 m", "151 m"),
        (en, 305.456, Kind::Distance, "305.5 m", "305.46 m"),
        (en, 12_345.6, Kind::Distance, "12 345.6 m", "12 345.6 m"),
        (es, 12_345.6, Kind::Distance, "12 345,6 m", "12 345,6 m"),
        (en, 2950.0, Kind::Level, "2950.0 m", "2950 m"),
        (en, -3.25, Kind::Level, "-3.2 m", "-3.25 m"),
        (en, -0.001, Kind::Level, "0.0 m", "0 m"),
        (en, 0.0431, Kind::Head, "0.043 m", "0.043 m"),
        (en, 47.34, Kind::Head, "47.3 m", "47.34 m"),
        (en, 0.1762, Kind::Bore, "176 mm", "176.2 mm"),
        (en, 0.0118, Kind::Bore, "11.8 mm", "11.8 mm"),
        (en, 1.5e-6, Kind::Bore, "0.0015 mm", "0.0015 mm"),
        (us, 0.1524, Kind::Bore, "6.00 in", "6 in"),
        (us, 0.003_911_6, Kind::Bore, "0.154 in", "0.154 in"),
        (en, 0.038, Kind::Flow, "38.0 L/s", "38 L/s"),
        (us, 0.038, Kind::Flow, "602 gpm", "602.3123 gpm"),
        (en, 4.8e5, Kind::Pressure, "4.80 bar", "4.8 bar"),
        (es, 4.8e5, Kind::Pressure, "4,80 bar", "4,8 bar"),
        (en, 16e5, Kind::Pressure, "16.0 bar", "16 bar"),
        (en, 9.997e5, Kind::Pressure, "10.0 bar", "9.997 bar"),
        (us, 4.8e5, Kind::Pressure, "70 psi", "69.61811 psi"),
        (en, -0.31e5, Kind::Pressure, "-0.31 bar", "-0.31 bar"),
        (en, 207e9, Kind::Stress, "207 000 MPa", "207 000 MPa"),
        (us, 207e9, Kind::Stress, "30 020 000 psi", "30 022 812 psi"),
        (en, 20.0, Kind::Temperature, "20 °C", "20 °C"),
        (us, 20.0, Kind::Temperature, "68 °F", "68 °F"),
        (en, 1.536, Kind::Velocity, "1.54 m/s", "1.536 m/s"),
        (en, 12_340.0, Kind::Power, "12.3 kW", "12.34 kW"),
        (us, 12_340.0, Kind::Power, "12.3 kW", "12.34 kW"),
        (en, 90.0, Kind::Angle, "90°", "90°"),
        (en, 0.483, Kind::Share, "48.3 %", "48.3 %"),
        (en, 1.004, Kind::Share, "100.4 %", "100.4 %"),
        (en, 2.5, Kind::Share, "250 %", "250 %"),
        (en, 2.0, Kind::Number, "2", "2"),
        (en, 0.97, Kind::Number, "0.97", "0.97"),
        (en, 0.018_43, Kind::Number, "0.0184", "0.01843"),
        (en, 183_402.0, Kind::Number, "183 402", "183 402"),
        (en, 14.567, Kind::MassPerLength, "14.6 kg/m", "14.567 kg/m"),
        (es, 12.5, Kind::PricePerLength, "12,50/m", "12,5/m"),
        (en, 0.0, Kind::Pressure, "0.00 bar", "0 bar"),
        (en, 0.0003, Kind::Head, "below 0.001 m", "below 0.001 m"),
        (
            es,
            0.0003,
            Kind::Head,
            "menos de 0,001 m",
            "menos de 0,001 m",
        ),
        (en, 0.0, Kind::Head, "0.00 m", "0 m"),
    ] {
        let measure = Measure::new(value, kind);
        assert_eq!(easy(&words.figure(measure)), short);
        assert_eq!(easy(&words.full(measure)), full);
    }
    for (words, value, doubt, kind, shown) in [
        (en, 0.042, 0.002, Kind::Flow, "42 ± 2 L/s"),
        (es, 0.0425, 0.0015, Kind::Flow, "42,5 ± 1,5 L/s"),
        (us, 0.042, 0.002, Kind::Flow, "666 ± 32 gpm"),
        (en, 0.042, 0.0, Kind::Flow, "42.0 L/s"),
        (en, 0.12, 0.0123, Kind::Flow, "120 ± 12 L/s"),
        (us, 20.0, 1.0, Kind::Temperature, "68.0 ± 1.8 °F"),
    ] {
        assert_eq!(
            easy(&words.doubtful(Measure::new(value, kind), doubt)),
            shown
        );
    }
    let limit = Measure::new(3.0, Kind::Velocity);
    assert_eq!(easy(&en.brief(limit)), "3 m/s");
    assert_eq!(easy(&us.brief(limit)), "9.84 ft/s");
    assert_eq!(easy(&en.brief(Measure::share(0.125))), "12.5 %");
    let price = Measure::new(12.5, Kind::PricePerLength);
    assert_eq!(easy(&es.price(price, "USD")), "12,50 USD/m");
    assert_eq!(
        en.figure(Measure::new(16e5, Kind::Pressure)),
        "16.0\u{202f}bar"
    );
    assert_eq!(easy(&es.axis(-0.04, 1)), "0,0");
    assert_eq!(easy(&es.axis(-12_345.0, 0)), "-12 345");
    assert_eq!(en.axis(f64::NAN, 1), NONE);
    assert_eq!(en.count(12_000), "12\u{202f}000");
}

#[test]
fn zero_and_the_smallest_never_print_a_minus() {
    for words in every_words() {
        for kind in KINDS {
            let unit = kind.default_unit(words.units);
            for x in [0.0, -0.0, -1e-30, f64::MIN_POSITIVE, -f64::MIN_POSITIVE] {
                let measure = Measure::new(unit.to_base(x), kind);
                for text in [words.figure(measure), words.full(measure)] {
                    assert!(!text.starts_with([MINUS, '-']), "{kind:?} {x}: {text}");
                }
            }
        }
    }
}

#[test]
#[cfg(not(debug_assertions))]
fn what_is_no_number_prints_as_a_dash() {
    for words in every_words() {
        for x in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert_eq!(words.figure(Measure::new(x, Kind::Pressure)), NONE);
        }
    }
}

#[test]
#[cfg(debug_assertions)]
#[should_panic(expected = "is no number")]
fn what_is_no_number_stops_a_debug_build() {
    let words = Words::new(Language::English, UnitSystem::Metric);
    let _ = words.figure(Measure::new(f64::NAN, Kind::Pressure));
}

/// The bound of "below 0.001 m".
fn below(words: Words, text: &str) -> Option<&str> {
    let said = text::figure_below(words, "");
    text.strip_prefix(&said)
}

/// Half of the last digit printed, in the unit shown.
fn half_digit(text: &str) -> f64 {
    let number = text.split(['e', '/', '%', '°']).next().unwrap_or("");
    let decimals = number
        .split([',', '.'])
        .nth(1)
        .map_or(0, |d| d.chars().take_while(char::is_ascii_digit).count());
    format!("0.5e-{decimals}").parse().unwrap()
}

proptest! {
    /// What is printed reads back as the same quantity, in both languages
    /// and both families of units, to within the digits shown.
    #[test]
    fn a_printed_figure_reads_back(
        mantissa in 1.0..10.0f64,
        exponent in -5i32..9,
        negative in any::<bool>(),
    ) {
        let size: f64 = format!("{mantissa}e{exponent}").parse().unwrap();
        for kind in KINDS {
            let x = if negative && kind.may_be_negative() { -size } else { size };
            for words in every_words() {
                let unit = kind.default_unit(words.units);
                let measure = Measure::new(unit.to_base(x), kind);
                let rule = rule(kind, words.units);
                // Trimmed zeros hide the last digit: of a coefficient it
                // is the third figure, of the others the first decimal.
                let trimmed = match (rule.trim, kind) {
                    (true, Kind::Number) => 0.5e-2 * size,
                    (true, _) => 0.05,
                    (false, _) => 0.0,
                };
                for (text, most, trimmed) in [
                    (words.figure(measure), rule.most, trimmed),
                    (words.full(measure), FULL_FIGURES, 0.0),
                ] {
                    if let Some(bound) = below(words, &text) {
                        // Less than the last digit that means something.
                        let bound = read(bound, kind, unit, words.mark).unwrap().unwrap();
                        prop_assert!(x > 0.0 && x < unit.from_base(bound.value), "{kind:?} {x}: {text}");
                        continue;
                    }
                    let back = read(&text, kind, unit, words.mark).unwrap().unwrap();
                    prop_assert_eq!(back.own_unit, !unit.symbol.is_empty());
                    let digit = half_digit(&text)
                        // Digits that the rule itself takes away.
                        .max(0.5 * size * format!("1e{}", 1 - most.min(17)).parse::<f64>().unwrap())
                        .max(trimmed)
                        .max(format!("0.5e-{}", most_decimals(kind)).parse().unwrap());
                    let off = (unit.from_base(back.value) - x).abs();
                    prop_assert!(
                        off <= digit * (1.0 + 1e-9) + 1e-12 * size,
                        "{kind:?} {x} printed {text}, off by {off}"
                    );
                }
            }
        }
    }

    /// The two families of units print the same quantity.
    #[test]
    fn both_families_denote_one_quantity(mantissa in 1.0..10.0f64, exponent in -4i32..6) {
        let value: f64 = format!("{mantissa}e{exponent}").parse().unwrap();
        for kind in KINDS {
            let measure = Measure::new(value, kind);
            let back = |system| {
                let words = Words::new(Language::Spanish, system);
                let text = words.full(measure);
                let unit = kind.default_unit(system);
                if let Some(bound) = below(words, &text) {
                    let bound = read(bound, kind, unit, words.mark).unwrap().unwrap().value;
                    assert!(value < bound, "{kind:?} {value}: {text}");
                    return None;
                }
                let base = read(&text, kind, unit, words.mark).unwrap().unwrap().value;
                // Half of the last decimal that means something.
                let last = format!("0.5e-{}", most_decimals(kind)).parse().unwrap();
                Some((base, unit.to_base(last) - unit.to_base(0.0)))
            };
            let (Some((metric, a)), Some((us, b))) =
                (back(UnitSystem::Metric), back(UnitSystem::UsCustomary))
            else {
                continue;
            };
            // And half a digit at seven figures, of each.
            let off = (a + b) * (1.0 + 1e-9) + 1e-6 * value;
            prop_assert!((metric - us).abs() <= off, "{kind:?} {value}: {metric} {us}");
        }
    }

    /// Two to four figures, one comes after the other: a greater value
    /// never prints as a smaller one.
    #[test]
    fn printing_keeps_the_order(a in 0.0..2000.0f64, b in 0.0..2000.0f64) {
        let (low, high) = if a <= b { (a, b) } else { (b, a) };
        for kind in KINDS {
            for words in every_words() {
                let unit = kind.default_unit(words.units);
                let printed = |x: f64| {
                    let text = words.value(Measure::new(unit.to_base(x), kind));
                    let text = below(words, &text).unwrap_or(&text);
                    read(text, kind, unit, words.mark).unwrap().unwrap().value
                };
                prop_assert!(printed(low) <= printed(high), "{kind:?}");
            }
        }
    }
}
