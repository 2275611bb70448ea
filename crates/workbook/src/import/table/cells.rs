//! Cells to amounts, and what the cells tell of the whole file: the decimal
//! mark, and whether distances run.

use super::super::{Amount, Fault, ImportedRow, Meaning, Note, RowFault};
use super::columns::Layout;
use super::records::{Record, Separator};
use super::{Column, Ground};
use crate::book::Reckoning;
use crate::reading::{DecimalMark, Unreadable, read};
use crate::units::{Kind, UnitSystem};
use hydraulics::math;

/// Characters of a too long cell that are shown.
const SHOWN: usize = 40;

/// Whether a cell is a number, with or without unit, under either mark.
pub(super) fn is_number(cell: &str) -> bool {
    let cell = cell.trim();
    if cell.len() > 64 || !cell.contains(|c: char| c.is_ascii_digit()) {
        return false;
    }
    let metre = Kind::Level.default_unit(UnitSystem::Metric);
    [DecimalMark::Point, DecimalMark::Comma]
        .into_iter()
        .any(|mark| {
            matches!(read(cell, Kind::Level, metre, mark), Ok(Some(_)))
                || matches!(angle(cell, "°", mark), Ok(Some(_)))
        })
        || plus(cell).is_some()
}

/// A vertical angle in degrees, of a text in degrees or per cent, and the unit
/// it turned out to be in with the text that goes with it.
fn angle(
    text: &str,
    unit: &'static str,
    mark: DecimalMark,
) -> Result<Option<(f64, &'static str, String)>, Unreadable> {
    let text = text.trim();
    let (number, per_cent) = match text.strip_suffix('%') {
        Some(number) => (number.trim_end(), true),
        None => (text, unit == "%"),
    };
    let degree = Kind::Angle.default_unit(UnitSystem::Metric);
    let Some(reading) = read(number, Kind::Angle, degree, mark)? else {
        return Ok(None);
    };
    Ok(Some(if per_cent && !reading.own_unit {
        let degrees = math::atan(reading.value / 100.0) * 180.0 / math::PI;
        (degrees, "%", number.to_owned())
    } else {
        (reading.value, "°", text.to_owned())
    }))
}

/// A chainage with a plus, such as 0+125.50 (kilometres and metres) or 1+25.5
/// (stations of a hundred), as the one number it stands for.
fn plus(text: &str) -> Option<String> {
    let text = text.trim();
    let digits = text.trim_start_matches(|c: char| c.is_alphabetic() || " .".contains(c));
    // "km 0+125", "PK 1+250.5", "K0+100".
    if text.len() - digits.len() > 6 {
        return None;
    }
    let (large, small) = digits.split_once('+')?;
    let (whole, decimals) = small.split_once(['.', ',']).unwrap_or((small, ""));
    let all_digits = |t: &str| t.bytes().all(|b| b.is_ascii_digit());
    let sound = (1..=4).contains(&large.len())
        && (2..=3).contains(&whole.len())
        && decimals.len() <= 6
        && [large, whole, decimals].iter().all(|t| all_digits(t));
    if !sound {
        return None;
    }
    let joined = format!("{large}{whole}");
    let mut plain = joined.trim_start_matches('0').to_owned();
    if plain.is_empty() {
        plain.push('0');
    }
    if !decimals.is_empty() {
        plain.push('.');
        plain.push_str(decimals);
    }
    Some(plain)
}

/// Thousands parted by an apostrophe (1'234.5), which would else be read as
/// feet and inches.
fn groups_by_apostrophe(text: &str) -> bool {
    text.match_indices(['\'', '’']).any(|(i, mark)| {
        let after = &text[i + mark.len()..];
        let digits = after.bytes().take_while(u8::is_ascii_digit).count();
        digits >= 3 && text[..i].ends_with(|c: char| c.is_ascii_digit())
    })
}

/// Reads a cell that is not empty as an amount of a meaning.
fn amount(
    text: &str,
    meaning: Meaning,
    kind: Kind,
    unit: &'static str,
    mark: DecimalMark,
) -> (Amount, Option<Unreadable>) {
    let mut amount = Amount {
        typed: text.to_owned(),
        text: text.to_owned(),
        unit,
        mark,
        value: None,
    };
    if groups_by_apostrophe(text) {
        return (amount, Some(Unreadable::Marks));
    }
    if kind == Kind::Angle {
        match angle(text, unit, mark) {
            Ok(Some((degrees, unit, text))) => {
                amount.value = Some(degrees);
                amount.unit = unit;
                amount.text = text;
            }
            Ok(None) => {}
            Err(why) => return (amount, Some(why)),
        }
        return (amount, None);
    }
    if meaning == Meaning::Distance
        && let Some(plain) = plus(text)
    {
        amount.text = plain;
        amount.mark = DecimalMark::Point;
        if unit == "km" {
            amount.unit = "m";
        }
    }
    let Some(known) = kind.unit(amount.unit) else {
        return (
            amount,
            Some(Unreadable::UnknownUnit {
                unit: unit.to_owned(),
            }),
        );
    };
    match read(&amount.text, kind, known, amount.mark) {
        Ok(reading) => {
            amount.value = reading.map(|r| r.value);
            (amount, None)
        }
        Err(why) => (amount, Some(why)),
    }
}

/// Reads rows one after another.
pub(super) struct Reader<'a> {
    columns: &'a [Column],
    mark: DecimalMark,
    reckoning: Reckoning,
    /// Whether a level must stand in every row: nothing else gives heights.
    levels_only: bool,
    first: bool,
    /// The last running distance that can be used, m.
    last: Option<f64>,
}

impl<'a> Reader<'a> {
    pub(super) fn new(
        columns: &'a [Column],
        mark: DecimalMark,
        reckoning: Reckoning,
    ) -> Reader<'a> {
        let has = |m: Meaning| columns.iter().any(|c| c.meaning == m);
        Reader {
            columns,
            mark,
            reckoning,
            levels_only: !(has(Meaning::ForeSight)
                || has(Meaning::BackSight)
                || has(Meaning::StaffBack)),
            first: true,
            last: None,
        }
    }

    /// The row of a record; faults are added to `faults`.
    pub(super) fn row(&mut self, record: &Record, faults: &mut Vec<RowFault>) -> ImportedRow {
        let mut row = ImportedRow {
            row: record.row,
            ..ImportedRow::default()
        };
        for (i, column) in self.columns.iter().enumerate() {
            let meaning = column.meaning;
            if meaning == Meaning::LeftOut {
                continue;
            }
            let text = record.cell(i);
            let mut fault = |text: String, fault: Fault| {
                faults.push(RowFault {
                    row: record.row,
                    column: Some(i),
                    meaning,
                    text,
                    fault,
                });
            };
            if let Some((_, characters)) = record.cut.iter().find(|(at, _)| *at == i) {
                let shown: String = text.chars().take(SHOWN).collect();
                fault(
                    shown,
                    Fault::TooLong {
                        characters: *characters,
                    },
                );
                continue;
            }
            let Some(kind) = meaning.kind() else {
                row.name = text
                    .split(|c: char| c.is_whitespace() || c.is_control())
                    .filter(|w| !w.is_empty())
                    .collect::<Vec<_>>()
                    .join(" ");
                continue;
            };
            if text.is_empty() {
                if self.needs(meaning) {
                    fault(String::new(), Fault::Missing);
                }
                continue;
            }
            let (amount, unreadable) = amount(text, meaning, kind, column.unit, self.mark);
            if let Some(why) = unreadable {
                fault(text.to_owned(), Fault::Unreadable(kind, why));
            } else if let Some(value) = amount.value
                && let Some(why) = self.misfit(meaning, kind, value)
            {
                fault(text.to_owned(), why);
            }
            if let Some(place) = row.place(meaning) {
                *place = Some(amount);
            }
        }
        self.first = false;
        row
    }

    fn needs(&self, meaning: Meaning) -> bool {
        match meaning {
            Meaning::Distance => !self.first,
            Meaning::Level => self.levels_only,
            _ => false,
        }
    }

    fn misfit(&mut self, meaning: Meaning, kind: Kind, value: f64) -> Option<Fault> {
        let (least, most) = meaning.range();
        if !(least..=most).contains(&value) {
            return Some(Fault::OutOfRange {
                value,
                least,
                most,
                kind,
            });
        }
        if meaning == Meaning::Distance && self.reckoning == Reckoning::FromStart {
            let back_m = self.last.map_or(0.0, |last| last - value);
            if back_m > 1e-9 {
                return Some(Fault::Behind { back_m });
            }
            self.last = Some(value);
        }
        None
    }
}

/// Whether distances run from the start: most are greater than the one
/// before. Legs go up and down, or are all the same.
pub(super) fn reckoning(figures: &[Record], columns: &[Column], mark: DecimalMark) -> Reckoning {
    let Some((i, column)) = columns
        .iter()
        .enumerate()
        .find(|(_, c)| c.meaning == Meaning::Distance)
    else {
        return Reckoning::FromStart;
    };
    let values: Vec<f64> = figures
        .iter()
        .filter_map(|r| {
            let (amount, _) = amount(
                r.cell(i),
                Meaning::Distance,
                Kind::Distance,
                column.unit,
                mark,
            );
            amount.value
        })
        .collect();
    let pairs = values.len().saturating_sub(1);
    let rising = values.windows(2).filter(|w| w[1] > w[0]).count();
    if rising * 10 >= pairs * 6 {
        Reckoning::FromStart
    } else {
        Reckoning::FromPrevious
    }
}

/// What the numbers of a file tell about its decimal mark.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub(super) struct Marks {
    /// The first number that has a decimal point without doubt.
    point: Option<String>,
    /// The first that has a decimal comma without doubt.
    comma: Option<String>,
    /// The first that reads two ways, and how many do.
    ambiguous: Option<(String, usize)>,
}

/// What one number tells.
enum Tells {
    Nothing,
    Point,
    Comma,
    Either,
}

fn tells(cell: &str) -> Tells {
    if plus(cell).is_some() {
        return match cell {
            c if c.contains(',') => Tells::Comma,
            c if c.contains('.') => Tells::Point,
            _ => Tells::Nothing,
        };
    }
    let digits: String = cell
        .trim_start_matches(|c: char| !c.is_ascii_digit() && !".,".contains(c))
        .chars()
        .take_while(|c| c.is_ascii_digit() || ".,".contains(*c))
        .collect();
    let count = |mark: char| digits.matches(mark).count();
    let (points, commas) = (count('.'), count(','));
    let only = match (points, commas) {
        (0, 0) => return Tells::Nothing,
        (_, 0) => '.',
        (0, _) => ',',
        // Both: the last is the decimal mark.
        _ if digits.rfind('.') > digits.rfind(',') => return Tells::Point,
        _ => return Tells::Comma,
    };
    let (this, other) = match only {
        '.' => (Tells::Point, Tells::Comma),
        _ => (Tells::Comma, Tells::Point),
    };
    if points + commas > 1 {
        // Groups of thousands: the other mark is the decimals'.
        return other;
    }
    let (head, tail) = digits.split_once(only).unwrap_or((&digits, ""));
    let may_group = tail.len() == 3 && (1..=3).contains(&head.len()) && !head.starts_with('0');
    if may_group { Tells::Either } else { this }
}

impl Marks {
    pub(super) fn of(figures: &[Record], separator: Separator, layout: &Layout) -> Marks {
        let mut marks = Marks::default();
        let mut dotted = None;
        for record in figures {
            for (i, cell) in record.cells.iter().enumerate() {
                let named = layout
                    .columns
                    .get(i)
                    .is_none_or(|c| c.meaning == Meaning::Name);
                if named || !is_number(cell) {
                    continue;
                }
                match tells(cell) {
                    Tells::Nothing => {}
                    Tells::Point => {
                        marks.point.get_or_insert_with(|| cell.clone());
                    }
                    Tells::Comma => {
                        marks.comma.get_or_insert_with(|| cell.clone());
                    }
                    Tells::Either => {
                        marks.ambiguous.get_or_insert_with(|| (cell.clone(), 0)).1 += 1;
                        if cell.contains('.') {
                            dotted.get_or_insert_with(|| cell.clone());
                        }
                    }
                }
            }
        }
        // Who parts columns by commas writes decimals with a point.
        if separator == Separator::Comma && marks.comma.is_none() && marks.point.is_none() {
            marks.point = dotted;
        }
        marks
    }

    /// The mark of the file; the given one where it tells none or both.
    pub(super) fn decide(&self, given: DecimalMark) -> (DecimalMark, Ground) {
        match (&self.point, &self.comma) {
            (Some(_), None) => (DecimalMark::Point, Ground::Cells),
            (None, Some(_)) => (DecimalMark::Comma, Ground::Cells),
            _ => (given, Ground::Given),
        }
    }

    /// What must be said of it.
    pub(super) fn note(&self, (mark, from): (DecimalMark, Ground)) -> Vec<Note> {
        let mut notes = Vec::new();
        if let (Some(point), Some(comma)) = (&self.point, &self.comma) {
            notes.push(Note::MixedMarks {
                point: point.clone(),
                comma: comma.clone(),
            });
        }
        if let (Ground::Given, Some((text, count))) = (from, &self.ambiguous) {
            notes.push(Note::Ambiguous {
                text: text.clone(),
                mark,
                count: *count,
            });
        }
        notes
    }
}
