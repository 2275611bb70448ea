//! The number formatter: one for the screen, the print and files.
//!
//! Its own and not the browser's, so that the same figure is the same text
//! everywhere. Digits are grouped by thin spaces from five on, the unit stands
//! after a thin space, minus is the true minus sign. What it prints,
//! [`workbook::reading::read`] reads back.

mod rule;
#[cfg(test)]
mod tests;

use crate::{Words, text};
use rule::{leading_place, most_decimals, rule};
use workbook::export::Cell;
use workbook::measure::Measure;
use workbook::reading::DecimalMark;
use workbook::units::Kind;

/// Narrow no-break space: between groups of digits, and before the unit.
const THIN: char = '\u{202f}';
/// Minus sign.
const MINUS: char = '\u{2212}';
/// Stands where no finite number is.
const NONE: &str = "\u{2014}";
/// From here on a number is printed with an exponent, and is none that a
/// penstock has.
const HUGE: f64 = 1e15;

/// Significant figures when all are asked for: past these it is noise of the
/// change of units.
const FULL_FIGURES: i32 = 7;

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
        let Some(plain) = self.plain(measure) else {
            return NONE.to_owned();
        };
        self.below(measure, &plain)
            .unwrap_or_else(|| dress(&plain, self.mark))
    }

    /// The same as a number for a spreadsheet, with the decimals it is shown
    /// with; empty where there is no finite number.
    #[must_use]
    pub fn cell(self, measure: Measure) -> Cell {
        let Some(plain) = self.plain(measure) else {
            return Cell::Empty;
        };
        let decimals = plain.split_once('.').map_or(0, |(_, d)| d.len());
        plain
            .parse()
            .map_or(Cell::Empty, |value| Cell::Number { value, decimals })
    }

    /// The value in its unit with the decimals of its kind, a point, and no
    /// grouping.
    fn plain(self, measure: Measure) -> Option<String> {
        let x = self.shown(measure)?;
        let rule = rule(measure.kind, self.units);
        let most = most_decimals(measure.kind);
        let mut plain = fixed(x, rule.decimals(x, most));
        // What rounds up over a bound takes the digits from beyond it.
        if let Ok(rounded) = plain.parse::<f64>() {
            plain = fixed(x, rule.decimals(rounded, most));
        }
        Some(if rule.trim {
            trimmed(&plain).to_owned()
        } else {
            plain
        })
    }

    /// "below 0.001" for what is there, but less than the last digit that
    /// means something: a loss of a hair is not printed as none.
    fn below(self, measure: Measure, plain: &str) -> Option<String> {
        let keeps_small = rule(measure.kind, self.units).least > 0;
        let nothing = plain
            .parse::<f64>()
            .is_ok_and(|x| x.total_cmp(&0.0).is_eq());
        let hidden = nothing && self.shown(measure)? > 0.0;
        let decimals = usize::try_from(most_decimals(measure.kind)).ok()?;
        (keeps_small && hidden).then(|| {
            let digit = format!("0.{:0>decimals$}", 1);
            text::figure_below(self, &dress(&digit, self.mark))
        })
    }

    /// A figure with the doubt about it, to the digits the doubt leaves:
    /// "42 ± 2 L/s". The doubt is a difference, in the base unit of the kind.
    #[must_use]
    pub fn doubtful(self, measure: impl Into<Measure>, doubt: f64) -> String {
        let measure = measure.into();
        let unit = measure.kind.default_unit(self.units);
        let Some(x) = self.shown(measure) else {
            return NONE.to_owned();
        };
        let doubt = (unit.from_base(doubt) - unit.from_base(0.0)).abs();
        // Two figures of the doubt at most, fewer where it was typed with fewer.
        let Some(leading) = leading_place(doubt).filter(|_| doubt.is_finite()) else {
            return self.figure(measure);
        };
        let decimals = (1 - leading).clamp(0, most_decimals(measure.kind));
        let plain = fixed(doubt, decimals);
        let short = trimmed(&plain);
        let kept = short.split_once('.').map_or(0, |(_, d)| d.len());
        let value = fixed(x, i32::try_from(kept).unwrap_or(0));
        let both =
            text::figure_plus_minus(self, &dress(&value, self.mark), &dress(short, self.mark));
        self.with_unit(both, measure.kind)
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
        if let Some(below) = self.below(measure, &plain) {
            return self.with_unit(below, measure.kind);
        }
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
