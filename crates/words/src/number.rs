//! The number formatter: one for the screen, the print and files.
//!
//! Its own and not the browser's, so that the same figure is the same text
//! everywhere. Digits are grouped by thin spaces from five on, the unit stands
//! after a thin space, minus is the true minus sign. What it prints,
//! [`workbook::reading::read`] reads back.

use crate::Words;
use workbook::measure::Measure;
use workbook::reading::DecimalMark;
use workbook::units::{Kind, UnitSystem};

/// Narrow no-break space: between groups of digits, and before the unit.
const THIN: char = '\u{202f}';
/// Minus sign.
const MINUS: char = '\u{2212}';
/// Stands where no finite number is.
const NONE: &str = "\u{2014}";
/// From here on a number is printed with an exponent, and is none that a
/// penstock has.
const HUGE: f64 = 1e15;

/// How many digits a kind is shown with, in the unit it is shown in.
#[derive(Debug, Clone, Copy)]
struct Rule {
    /// Decimals for magnitudes below a bound, bounds rising.
    steps: &'static [(f64, i32)],
    /// Decimals from the last bound on.
    above: i32,
    /// Significant figures shown at least, so that small values do not vanish.
    least: i32,
    /// Significant figures shown at most, so that large values do not claim
    /// what nobody knows.
    most: i32,
    /// Whether zeros at the end of the decimals go.
    trim: bool,
}

const RULE: Rule = Rule {
    steps: &[],
    above: 0,
    least: 0,
    most: 99,
    trim: false,
};

/// The one table of how figures are shown.
fn rule(kind: Kind, system: UnitSystem) -> Rule {
    let us = system == UnitSystem::UsCustomary;
    match kind {
        // m, ft: chainage and lengths along the line.
        Kind::Distance => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // m, ft.
        Kind::Level => Rule { above: 1, ..RULE },
        // m, ft: net head and losses; a small loss keeps two figures.
        Kind::Head => Rule {
            steps: &[(10.0, 2), (1000.0, 1)],
            least: 2,
            ..RULE
        },
        // in: bores, walls, roughness.
        Kind::Bore if us => Rule {
            steps: &[(1.0, 3)],
            above: 2,
            least: 2,
            ..RULE
        },
        // mm: the same.
        Kind::Bore => Rule {
            steps: &[(100.0, 1)],
            least: 2,
            ..RULE
        },
        // L/s, gpm.
        Kind::Flow => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // psi.
        Kind::Pressure if us => Rule {
            steps: &[(10.0, 1)],
            least: 2,
            ..RULE
        },
        // bar.
        Kind::Pressure => Rule {
            steps: &[(10.0, 2)],
            above: 1,
            least: 2,
            ..RULE
        },
        // MPa, psi.
        Kind::Stress => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            most: 4,
            ..RULE
        },
        // °C, °F.
        Kind::Temperature => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // m/s, ft/s: water, jets and waves.
        Kind::Velocity => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // kW.
        Kind::Power => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 3,
            ..RULE
        },
        // s.
        Kind::Time => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // °.
        Kind::Angle => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // %: a decimal up to just beyond the whole, so that a share just over
        // its limit does not read as the limit.
        Kind::Share => Rule {
            steps: &[(110.0, 1)],
            least: 2,
            ..RULE
        },
        // Counts and coefficients.
        Kind::Number => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 3,
            trim: true,
            ..RULE
        },
        // kg, lb.
        Kind::Mass => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // kg/m, lb/ft.
        Kind::MassPerLength => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // Money goes by hundredths.
        Kind::PricePerLength => Rule { above: 2, ..RULE },
    }
}

/// Decimals that still mean something of a kind, in the unit it is shown in:
/// beyond them stands noise of the change of units.
fn most_decimals(kind: Kind) -> i32 {
    match kind {
        // A survey does not reach below the centimetre.
        Kind::Distance | Kind::Level | Kind::Temperature | Kind::Angle => 2,
        Kind::Head | Kind::Mass => 3,
        Kind::Share | Kind::PricePerLength => 4,
        Kind::Pressure | Kind::Velocity | Kind::Time | Kind::MassPerLength => 5,
        Kind::Flow | Kind::Power | Kind::Stress => 6,
        // Roughness of smooth pipe, in inches.
        Kind::Bore => 7,
        Kind::Number => 9,
    }
}

/// Significant figures when all are asked for: past these it is noise of the
/// change of units.
const FULL_FIGURES: i32 = 7;

impl Rule {
    /// Decimals for this value; below zero, digits before the mark that are
    /// rounded away.
    fn decimals(&self, x: f64, most_decimals: i32) -> i32 {
        let size = x.abs();
        let wanted = self
            .steps
            .iter()
            .find(|(bound, _)| size < *bound)
            .map_or(self.above, |(_, decimals)| *decimals);
        let Some(leading) = leading_place(size) else {
            return wanted;
        };
        wanted
            .max(self.least - 1 - leading)
            .min(self.most - 1 - leading)
            .min(most_decimals)
    }
}

/// The power of ten of the first significant digit; none for zero.
fn leading_place(size: f64) -> Option<i32> {
    let text = format!("{size:e}");
    let (mantissa, exponent) = text.split_once('e')?;
    if mantissa == "0" {
        return None;
    }
    exponent.parse().ok()
}

/// `x` rounded to so many decimals, which may be below zero, with a point.
fn fixed(x: f64, decimals: i32) -> String {
    if x.abs() >= HUGE {
        return format!("{x:.6e}");
    }
    match usize::try_from(decimals) {
        Ok(decimals) => format!("{x:.decimals$}"),
        Err(_) => {
            // Rounded by the printer, which is exact: no division of ours.
            let figures = leading_place(x).map_or(0, |leading| leading + decimals);
            let figures = usize::try_from(figures).unwrap_or(0);
            let rounded: f64 = format!("{x:.figures$e}").parse().unwrap_or(x);
            format!("{rounded:.0}")
        }
    }
}

/// Digits with marks, groups and sign as we print them.
fn dress(plain: &str, mark: DecimalMark) -> String {
    let (negative, digits) = match plain.strip_prefix('-') {
        Some(rest) => (rest.contains(|c: char| ('1'..='9').contains(&c)), rest),
        None => (false, plain),
    };
    let (digits, exponent) = match digits.split_once('e') {
        Some((digits, exponent)) => (digits, Some(exponent)),
        None => (digits, None),
    };
    let (whole, decimals) = match digits.split_once('.') {
        Some((whole, decimals)) => (whole, Some(decimals)),
        None => (digits, None),
    };
    let mut out = String::with_capacity(plain.len() + 8);
    if negative {
        out.push(MINUS);
    }
    for (i, digit) in whole.chars().enumerate() {
        let left = whole.len() - i;
        if i > 0 && left % 3 == 0 && whole.len() > 4 {
            out.push(THIN);
        }
        out.push(digit);
    }
    if let Some(decimals) = decimals {
        out.push(match mark {
            DecimalMark::Point => '.',
            DecimalMark::Comma => ',',
        });
        out.push_str(decimals);
    }
    if let Some(exponent) = exponent {
        out.push('e');
        out.push_str(exponent);
    }
    out
}

fn trimmed(plain: &str) -> &str {
    if plain.contains('.') {
        plain.trim_end_matches('0').trim_end_matches('.')
    } else {
        plain
    }
}

impl Words {
    /// A figure with its unit, to the digits its kind is shown with:
    /// "4.80 bar", "20 °C", "305.5 m".
    ///
    /// A value that is no finite number prints as a dash; there must be none,
    /// and a debug build stops at it.
    #[must_use]
    pub fn figure(self, measure: impl Into<Measure>) -> String {
        let measure = measure.into();
        self.with_unit(self.value(measure), measure.kind)
    }

    /// The same without unit, for a column whose head names it.
    #[must_use]
    pub fn value(self, measure: impl Into<Measure>) -> String {
        let measure = measure.into();
        let Some(x) = self.shown(measure) else {
            return NONE.to_owned();
        };
        let rule = rule(measure.kind, self.units);
        let most = most_decimals(measure.kind);
        let mut plain = fixed(x, rule.decimals(x, most));
        // What rounds up over a bound takes the digits from beyond it.
        if let Ok(rounded) = plain.parse::<f64>() {
            plain = fixed(x, rule.decimals(rounded, most));
        }
        dress(if rule.trim { trimmed(&plain) } else { &plain }, self.mark)
    }

    /// A figure with its unit and every digit that means something.
    #[must_use]
    pub fn full(self, measure: impl Into<Measure>) -> String {
        let measure = measure.into();
        let Some(x) = self.shown(measure) else {
            return NONE.to_owned();
        };
        let decimals = leading_place(x).map_or(0, |leading| {
            (FULL_FIGURES - 1 - leading).clamp(0, most_decimals(measure.kind))
        });
        let plain = fixed(x, decimals);
        self.with_unit(dress(trimmed(&plain), self.mark), measure.kind)
    }

    /// A value that was set by a person, such as a limit or a preset: the
    /// shorter of [`Words::figure`] and [`Words::full`], "3 m/s" and not
    /// "3.00 m/s", "9.84 ft/s" and not "9.84252 ft/s".
    #[must_use]
    pub fn brief(self, measure: impl Into<Measure>) -> String {
        let measure = measure.into();
        let (figure, full) = (self.figure(measure), self.full(measure));
        if full.len() < figure.len() {
            full
        } else {
            figure
        }
    }

    /// [`Words::full`] for a value that an error carries, which may be no number.
    pub(crate) fn full_or_dash(self, measure: Measure) -> String {
        if measure.value.is_finite() {
            self.full(measure)
        } else {
            NONE.to_owned()
        }
    }

    /// The symbol of the unit a kind is shown in; empty for a plain number.
    #[must_use]
    pub fn unit(self, kind: Kind) -> &'static str {
        kind.default_unit(self.units).symbol
    }

    /// A price per length with the book's currency: "12.50 USD/m".
    #[must_use]
    pub fn price(self, measure: impl Into<Measure>, currency: &str) -> String {
        let measure = measure.into();
        let unit = self.unit(measure.kind);
        let currency = currency.trim();
        if currency.is_empty() {
            return self.figure(measure);
        }
        format!("{}{THIN}{currency}{unit}", self.value(measure))
    }

    /// A count, grouped.
    #[must_use]
    pub fn count(self, count: usize) -> String {
        dress(&count.to_string(), self.mark)
    }

    /// A plain number with so many decimals, for the ticks of an axis, which
    /// must all have the same; a dash for what is no number.
    #[must_use]
    pub fn axis(self, x: f64, decimals: usize) -> String {
        if x.is_finite() {
            dress(&format!("{x:.decimals$}"), self.mark)
        } else {
            NONE.to_owned()
        }
    }

    /// A plain number as a person would type it.
    pub(crate) fn ungrouped(self, x: f64) -> String {
        dress(&format!("{x}"), self.mark).replace(THIN, "")
    }

    fn with_unit(self, mut text: String, kind: Kind) -> String {
        let unit = self.unit(kind);
        if !(unit.is_empty() || text == NONE) {
            // "90°", "12.50/m", but "20 °C", "10 %".
            if unit != "°" && !unit.starts_with('/') {
                text.push(THIN);
            }
            text.push_str(unit);
        }
        text
    }

    /// The value in the unit shown, if it is a number.
    fn shown(self, measure: Measure) -> Option<f64> {
        let x = measure
            .kind
            .default_unit(self.units)
            .from_base(measure.value);
        debug_assert!(x.is_finite(), "{measure:?} is no number");
        x.is_finite().then_some(x)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Language;
    use proptest::prelude::*;
    use workbook::reading::read;

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
        ] {
            let measure = Measure::new(value, kind);
            assert_eq!(easy(&words.figure(measure)), short);
            assert_eq!(easy(&words.full(measure)), full);
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
                    let base = read(&text, kind, unit, words.mark).unwrap().unwrap().value;
                    // Half of the last decimal that means something.
                    let last = format!("0.5e-{}", most_decimals(kind)).parse().unwrap();
                    (base, unit.to_base(last) - unit.to_base(0.0))
                };
                let (metric, a) = back(UnitSystem::Metric);
                let (us, b) = back(UnitSystem::UsCustomary);
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
                        read(&text, kind, unit, words.mark).unwrap().unwrap().value
                    };
                    prop_assert!(printed(low) <= printed(high), "{kind:?}");
                }
            }
        }
    }
}
