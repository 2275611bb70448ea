//! Reading a typed number.
//!
//! A field on the page takes a number alone, read in the unit shown at the end
//! of the field, or a number with its own unit ("4 in", "120 gpm", "1 1/2\"",
//! "12' 6\"", "3,5 bar ± 0,1"). [`read`] turns such text into a [`Reading`]
//! in the kind's base unit, or a [`Unreadable`] that says why it cannot.

use crate::units::{INCH, Kind, Unit};

/// Which mark parts the whole from the decimals where a text leaves it open.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub enum DecimalMark {
    /// 1,234.5
    #[default]
    Point,
    /// 1.234,5
    Comma,
}

/// A number as read from a text.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Reading {
    /// In the kind's base unit.
    pub value: f64,
    /// The ± typed with it, as a standard uncertainty in the base unit.
    pub plus_minus: Option<f64>,
    /// Whether the text could also be read otherwise ("1,234"), so that the
    /// reading should be shown beside the field.
    pub ambiguous: bool,
    /// Whether the text carried its own unit.
    pub own_unit: bool,
}

/// Why a text is not a number of its kind.
#[derive(Debug, Clone, PartialEq, Eq)]
#[non_exhaustive]
pub enum Unreadable {
    /// Not a number at all.
    NotANumber,
    /// A number, followed by something that is no unit of this kind.
    UnknownUnit {
        /// What stood after the number.
        unit: String,
    },
    /// More than one decimal mark, or digit groups not of three.
    Marks,
    /// Too large or too small to be kept.
    OutOfRange,
    /// Below zero where that has no meaning.
    Negative,
    /// A ± that is no number, or is below zero.
    PlusMinus,
}

/// Reads `text` as a number of `kind`, in `unit` unless it names its own.
///
/// An empty or blank text reads as `Ok(None)`: nothing was entered.
///
/// # Errors
/// [`Unreadable`], naming what stands in the way.
///
/// # Example
/// ```
/// use workbook::reading::{read, DecimalMark};
/// use workbook::units::Kind;
/// let unit = Kind::Bore.unit("mm").unwrap();
/// let reading = read("4 in", Kind::Bore, unit, DecimalMark::Point).unwrap().unwrap();
/// assert!((reading.value - 0.1016).abs() < 1e-15);
/// ```
pub fn read(
    text: &str,
    kind: Kind,
    unit: Unit,
    mark: DecimalMark,
) -> Result<Option<Reading>, Unreadable> {
    let text = text.trim();
    if text.is_empty() {
        return Ok(None);
    }
    let (main, doubt) = split_plus_minus(text);
    let (value, own, ambiguous) = read_amount(main.trim(), kind, unit, mark)?;
    if !value.is_finite() || value.abs() > 1e15 {
        return Err(Unreadable::OutOfRange);
    }
    if value < 0.0 && !kind.may_be_negative() {
        return Err(Unreadable::Negative);
    }
    let plus_minus = match doubt {
        None => None,
        Some(d) => {
            let d = d.trim();
            let typed_unit = own.unwrap_or(unit);
            let (number, rest, _) = read_number(d, mark).map_err(|_| Unreadable::PlusMinus)?;
            let doubt_unit = match rest.trim() {
                "" => typed_unit,
                // "38 ± 5 %": a share of the value itself.
                "%" if kind != Kind::Share && typed_unit.symbol != "%" => {
                    let share = value.abs() * number / 100.0;
                    return finish(value, Some(share), ambiguous, own.is_some());
                }
                name => kind.unit(name).ok_or(Unreadable::PlusMinus)?,
            };
            // "3.5 ± 0.1 bar": the unit at the end serves both.
            if own.is_none() && !rest.trim().is_empty() {
                let (v, _, amb) = read_amount(main.trim(), kind, doubt_unit, mark)?;
                return finish(v, Some((doubt_unit.span)(number)), amb, true);
            }
            Some((doubt_unit.span)(number))
        }
    };
    finish(value, plus_minus, ambiguous, own.is_some())
}

fn finish(
    value: f64,
    plus_minus: Option<f64>,
    ambiguous: bool,
    own_unit: bool,
) -> Result<Option<Reading>, Unreadable> {
    if plus_minus.is_some_and(|d| !d.is_finite() || d < 0.0) {
        return Err(Unreadable::PlusMinus);
    }
    Ok(Some(Reading {
        value,
        plus_minus,
        ambiguous,
        own_unit,
    }))
}

fn split_plus_minus(text: &str) -> (&str, Option<&str>) {
    for sign in ["±", "+/-", "+-"] {
        if let Some((main, doubt)) = text.split_once(sign) {
            return (main, Some(doubt));
        }
    }
    (text, None)
}

/// A number with its unit; feet and inches together count as one amount.
fn read_amount(
    text: &str,
    kind: Kind,
    unit: Unit,
    mark: DecimalMark,
) -> Result<(f64, Option<Unit>, bool), Unreadable> {
    let (number, rest, ambiguous) = read_number(text, mark)?;
    let rest = rest.trim();
    if rest.is_empty() {
        return Ok((unit.to_base(number), None, ambiguous));
    }
    if let Some(own) = kind.unit(rest) {
        return Ok((own.to_base(number), Some(own), ambiguous));
    }
    // 12' 6"
    if let Some((feet_mark, inches)) = split_feet(rest)
        && let Some(foot) = kind.unit(feet_mark)
    {
        let (more, tail, _) = read_number(inches.trim(), mark)?;
        let tail = tail.trim();
        // A foot has twelve inches: 1'234.5 is a grouped number, and no length.
        if (tail.is_empty() || INCH.spelled(tail)) && (0.0..12.0).contains(&more) {
            let sign = if number < 0.0 || text.starts_with(['-', '−']) {
                -1.0
            } else {
                1.0
            };
            return Ok((
                foot.to_base(number) + sign * INCH.to_base(more),
                Some(foot),
                ambiguous,
            ));
        }
    }
    Err(Unreadable::UnknownUnit {
        unit: rest.to_owned(),
    })
}

fn split_feet(rest: &str) -> Option<(&str, &str)> {
    for mark in ["'", "′", "ft"] {
        if let Some(tail) = rest.strip_prefix(mark)
            && tail.trim_start().starts_with(|c: char| c.is_ascii_digit())
        {
            return Some((mark, tail));
        }
    }
    None
}

/// The number at the start of `text`, and what follows it.
fn read_number(text: &str, mark: DecimalMark) -> Result<(f64, &str, bool), Unreadable> {
    let (sign, body) = match text.strip_prefix(['-', '−']) {
        Some(rest) => (-1.0, rest.trim_start()),
        None => (1.0, text.strip_prefix('+').unwrap_or(text).trim_start()),
    };
    let end = number_end(body);
    let digits = body[..end].trim_end();
    let rest = &body[digits.len()..];
    if !digits.contains(|c: char| c.is_ascii_digit()) {
        return Err(Unreadable::NotANumber);
    }
    let (value, rest) = if let Some((value, used)) = read_fraction(body) {
        (value, &body[used..])
    } else {
        let (plain, _) = plain_decimal(digits, mark)?;
        let value = plain.parse::<f64>().map_err(|_| Unreadable::NotANumber)?;
        let (scale, used) = exponent(rest);
        (
            format!("{plain}{scale}").parse::<f64>().unwrap_or(value),
            &rest[used..],
        )
    };
    let ambiguous = plain_decimal(digits, mark).is_ok_and(|(_, a)| a);
    Ok((sign * value, rest, ambiguous))
}

/// Where digits, marks and grouping spaces end.
fn number_end(body: &str) -> usize {
    let mut end = 0;
    let mut chars = body.char_indices().peekable();
    while let Some((i, c)) = chars.next() {
        let part = c.is_ascii_digit()
            || matches!(c, '.' | ',')
            || (matches!(c, ' ' | '\u{a0}' | '\u{2009}' | '\u{202f}')
                && i > 0
                && chars.peek().is_some_and(|(_, n)| n.is_ascii_digit()));
        if !part {
            break;
        }
        end = i + c.len_utf8();
    }
    end
}

/// "1/2", "1 1/2" or "1-1/2" at the start: its value and its length.
fn read_fraction(body: &str) -> Option<(f64, usize)> {
    let slash = body.find('/')?;
    let before = &body[..slash];
    let after: String = body[slash + 1..]
        .chars()
        .take_while(char::is_ascii_digit)
        .collect();
    if after.is_empty() || !before.ends_with(|c: char| c.is_ascii_digit()) {
        return None;
    }
    let (whole, top) = match before.rsplit_once([' ', '-']) {
        Some((w, t)) => (w.trim().parse::<u32>().ok()?, t),
        None => (0, before),
    };
    let top = top.parse::<u32>().ok()?;
    let bottom = after.parse::<u32>().ok().filter(|b| *b > 0)?;
    let value = f64::from(whole) + f64::from(top) / f64::from(bottom);
    Some((value, slash + 1 + after.len()))
}

/// The text with a point for the decimals and no grouping, and whether it
/// could be read otherwise.
fn plain_decimal(digits: &str, mark: DecimalMark) -> Result<(String, bool), Unreadable> {
    let compact: String = digits
        .chars()
        .filter(|c| c.is_ascii_digit() || ".,".contains(*c))
        .collect();
    let grouped_by_space = compact.len() < digits.len();
    let points = compact.matches('.').count();
    let commas = compact.matches(',').count();
    let decimal = match (points, commas) {
        (0, 0) => None,
        // Both: the last one is the decimal mark, the other parts groups.
        (p, c) if p > 0 && c > 0 => {
            let last = compact
                .rfind(['.', ','])
                .and_then(|i| compact[i..].chars().next());
            match last {
                Some('.') if p == 1 => Some('.'),
                Some(',') if c == 1 => Some(','),
                _ => return Err(Unreadable::Marks),
            }
        }
        (p, c) if p > 1 || c > 1 => None, // 1,234,567
        _ => {
            let only = if points == 1 { '.' } else { ',' };
            let tail = compact.rsplit(only).next().map_or(0, str::len);
            let head = compact.split(only).next().unwrap_or("");
            let may_group = tail == 3
                && !head.is_empty()
                && head.len() <= 3
                && !head.starts_with('0')
                && !grouped_by_space;
            let decimal_here = match mark {
                DecimalMark::Point => '.',
                DecimalMark::Comma => ',',
            };
            if may_group && only != decimal_here {
                let joined: String = compact.chars().filter(char::is_ascii_digit).collect();
                return Ok((joined, true));
            }
            let plain = compact.replace(',', ".");
            return Ok((plain, may_group && only == ','));
        }
    };
    let (whole, fraction) = match decimal {
        Some(d) => compact
            .split_once(d)
            .map(|(w, f)| (w, Some(f)))
            .unwrap_or((&compact, None)),
        None => (compact.as_str(), None),
    };
    let groups: Vec<&str> = whole.split(['.', ',']).collect();
    let grouped_well = groups.len() == 1
        || (!groups[0].is_empty()
            && groups[0].len() <= 3
            && groups[1..].iter().all(|g| g.len() == 3));
    if !grouped_well {
        return Err(Unreadable::Marks);
    }
    let mut plain: String = groups.concat();
    if let Some(f) = fraction {
        plain.push('.');
        plain.push_str(f);
    }
    Ok((plain, false))
}

/// "e3", "E-2" right after the digits.
fn exponent(rest: &str) -> (&str, usize) {
    let bytes = rest.as_bytes();
    if !matches!(bytes.first(), Some(b'e' | b'E')) {
        return ("", 0);
    }
    let mut i = 1;
    if matches!(bytes.get(1), Some(b'+' | b'-')) {
        i = 2;
    }
    let start = i;
    while bytes.get(i).is_some_and(u8::is_ascii_digit) {
        i += 1;
    }
    if i == start { ("", 0) } else { (&rest[..i], i) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::{ALL_KINDS, UnitSystem};
    use proptest::prelude::*;

    fn value(text: &str, kind: Kind) -> f64 {
        value_marked(text, kind, DecimalMark::Point)
    }

    fn value_marked(text: &str, kind: Kind, mark: DecimalMark) -> f64 {
        let unit = kind.default_unit(UnitSystem::Metric);
        read(text, kind, unit, mark).unwrap().unwrap().value
    }

    fn near(a: f64, b: f64) -> bool {
        (a - b).abs() <= 1e-12 * b.abs().max(1e-9)
    }

    #[test]
    fn what_people_type_is_read() {
        for (text, kind, expected) in [
            ("38", Kind::Flow, 0.038),
            ("10L/s", Kind::Flow, 0.010),
            ("10 l/S", Kind::Flow, 0.010),
            (
                "160 gpm",
                Kind::Flow,
                160.0 * 231.0 * 0.0254 * 0.0254 * 0.0254 / 60.0,
            ),
            ("0,12 m3/s", Kind::Flow, 0.12),
            ("4\"", Kind::Bore, 0.1016),
            ("4 in", Kind::Bore, 0.1016),
            ("1 1/2\"", Kind::Bore, 0.0381),
            ("1-1/2 in", Kind::Bore, 0.0381),
            ("3/4 in", Kind::Bore, 0.01905),
            ("1,5 m", Kind::Level, 1.5),
            ("-2.5", Kind::Level, -2.5),
            ("−2.5", Kind::Level, -2.5),
            ("12' 6\"", Kind::Distance, 3.81),
            ("12ft 6in", Kind::Distance, 3.81),
            ("-12' 6\"", Kind::Level, -3.81),
            ("1 250 m", Kind::Distance, 1250.0),
            ("1,250", Kind::Distance, 1250.0),
            ("1,250.5", Kind::Distance, 1250.5),
            ("1.250,5", Kind::Distance, 1250.5),
            ("1e3", Kind::Distance, 1000.0),
            ("3.5 bar", Kind::Pressure, 350_000.0),
            ("68 °F", Kind::Temperature, 20.0),
            ("10", Kind::Share, 0.1),
            (".5", Kind::Distance, 0.5),
            ("5.", Kind::Distance, 5.0),
        ] {
            let got = value(text, kind);
            assert!(near(got, expected), "{text}: {got} is not {expected}");
        }
    }

    #[test]
    fn a_grouped_number_is_no_length_in_feet_and_inches() {
        let unit = Kind::Distance.default_unit(UnitSystem::Metric);
        for text in ["1'234.5", "12' 12\""] {
            let got = read(text, Kind::Distance, unit, DecimalMark::Point);
            assert!(
                matches!(got, Err(Unreadable::UnknownUnit { .. })),
                "{text}: {got:?}"
            );
        }
    }

    #[test]
    fn the_language_decides_what_is_ambiguous() {
        let unit = Kind::Distance.default_unit(UnitSystem::Metric);
        for (text, mark, expected) in [
            ("1,234", DecimalMark::Point, 1234.0),
            ("1,234", DecimalMark::Comma, 1.234),
            ("1.234", DecimalMark::Point, 1.234),
            ("1.234", DecimalMark::Comma, 1234.0),
        ] {
            let reading = read(text, Kind::Distance, unit, mark).unwrap().unwrap();
            assert!(
                near(reading.value, expected),
                "{text} {mark:?}: {reading:?}"
            );
        }
        let plain = read("0,234", Kind::Distance, unit, DecimalMark::Point)
            .unwrap()
            .unwrap();
        assert!(near(plain.value, 0.234) && !plain.ambiguous);
        let shown = read("1,234", Kind::Distance, unit, DecimalMark::Point)
            .unwrap()
            .unwrap();
        assert!(shown.ambiguous);
    }

    #[test]
    fn plus_minus_is_read_in_the_same_unit() {
        let unit = Kind::Flow.default_unit(UnitSystem::Metric);
        for (text, value, doubt) in [
            ("38 ± 2", 0.038, 0.002),
            ("38 +- 2 L/s", 0.038, 0.002),
            ("38 L/s +/- 5 %", 0.038, 0.0019),
            ("2 ± 1 m3/s", 2.0, 1.0),
        ] {
            let r = read(text, Kind::Flow, unit, DecimalMark::Point)
                .unwrap()
                .unwrap();
            assert!(near(r.value, value), "{text}: {r:?}");
            assert!(near(r.plus_minus.unwrap(), doubt), "{text}: {r:?}");
        }
        let f = Kind::Temperature.unit("°F").unwrap();
        let r = read("68 ± 9", Kind::Temperature, f, DecimalMark::Point)
            .unwrap()
            .unwrap();
        assert!(near(r.value, 20.0) && near(r.plus_minus.unwrap(), 5.0));
    }

    #[test]
    fn what_cannot_be_read_says_why() {
        let unit = Kind::Flow.default_unit(UnitSystem::Metric);
        let trouble = |t: &str| read(t, Kind::Flow, unit, DecimalMark::Point).unwrap_err();
        assert_eq!(trouble("abc"), Unreadable::NotANumber);
        assert_eq!(
            trouble("3 furlong"),
            Unreadable::UnknownUnit {
                unit: "furlong".into()
            }
        );
        assert_eq!(
            trouble("3 psi"),
            Unreadable::UnknownUnit { unit: "psi".into() }
        );
        assert_eq!(trouble("1.2.3,4,5"), Unreadable::Marks);
        assert_eq!(trouble("-3"), Unreadable::Negative);
        assert_eq!(trouble("1e400"), Unreadable::OutOfRange);
        assert_eq!(trouble("3 ± x"), Unreadable::PlusMinus);
        assert_eq!(read("  ", Kind::Flow, unit, DecimalMark::Point), Ok(None));
    }

    proptest! {
        #[test]
        fn any_text_is_read_or_refused_without_panic(text in ".{0,24}", comma: bool) {
            let mark = if comma { DecimalMark::Comma } else { DecimalMark::Point };
            for kind in ALL_KINDS {
                let unit = kind.default_unit(UnitSystem::UsCustomary);
                if let Ok(Some(r)) = read(&text, kind, unit, mark) {
                    prop_assert!(r.value.is_finite());
                }
            }
        }

        #[test]
        fn a_printed_number_is_read_back(x in -1e6..1e6f64) {
            let unit = Kind::Level.default_unit(UnitSystem::Metric);
            let r = read(&format!("{x:.3}"), Kind::Level, unit, DecimalMark::Point).unwrap().unwrap();
            prop_assert!((r.value - x).abs() <= 0.000_500_1);
        }
    }
}
