//! Where the headings are, and what each column is read as.

use super::super::Meaning;
use super::super::heading::{self, Heading, UnitSaid};
use super::Ground;
use super::cells::is_number;
use super::records::Record;
use crate::book::{DistanceKind, Reckoning};

/// Rows that may stand above the figures: title, headings, units.
pub(super) const MOST_ABOVE: usize = 30;

/// The unit a column names.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum ColumnUnit {
    /// None.
    No,
    /// One we know.
    Known(&'static str, Ground),
    /// Something else.
    Unknown(String),
}

/// What a column is read as.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Found {
    pub(super) heading: String,
    pub(super) meaning: Meaning,
    pub(super) meaning_from: Ground,
    /// What it would be, were there not a column of it already.
    pub(super) second: Option<Meaning>,
    pub(super) unit: ColumnUnit,
    pub(super) distance_kind: Option<DistanceKind>,
    pub(super) reckoning: Option<Reckoning>,
    /// A slope that may be per cent or degrees.
    pub(super) slope: bool,
}

/// Where things stand among the rows kept.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Layout {
    pub(super) heading: Option<usize>,
    pub(super) units_row: Option<usize>,
    /// The first row of figures.
    pub(super) data: usize,
    pub(super) columns: Vec<Found>,
    /// Whether columns are read by their place.
    pub(super) guessed: bool,
}

/// Finds headings, units and columns.
pub(super) fn layout(rows: &[Record]) -> Layout {
    match heading_row(rows) {
        Some(at) => headed(rows, at),
        None => bare(rows),
    }
}

/// The first row without numbers in which a heading is recognised that is
/// more than a name.
fn heading_row(rows: &[Record]) -> Option<usize> {
    rows.iter().take(MOST_ABOVE).position(|row| {
        let read: Vec<Heading> = row
            .cells
            .iter()
            .filter_map(|c| heading::recognise(c))
            .collect();
        let telling = read
            .iter()
            .any(|h| !matches!(h.meaning, Meaning::Name | Meaning::LeftOut));
        telling
            && row.cells.iter().filter(|c| !c.is_empty()).count() >= 2
            && !row.cells.iter().any(|c| is_number(c))
    })
}

fn is_units_row(row: &Record) -> bool {
    let mut filled = row.cells.iter().filter(|c| !c.is_empty()).peekable();
    filled.peek().is_some() && filled.all(|c| heading::unit(c).is_some() || c == "-")
}

fn width(rows: &[Record]) -> usize {
    rows.iter()
        .filter_map(|r| r.cells.iter().rposition(|c| !c.is_empty()))
        .max()
        .map_or(0, |last| last + 1)
}

fn headed(rows: &[Record], at: usize) -> Layout {
    let units_row = rows.get(at + 1).filter(|r| is_units_row(r));
    let data = at + 1 + usize::from(units_row.is_some());
    let texts = &rows[at];
    let figures = rows.get(data..).unwrap_or_default();
    let width = width(figures).max(width(std::slice::from_ref(texts)));
    let read: Vec<Option<Heading>> = (0..width)
        .map(|i| heading::recognise(texts.cell(i)))
        .collect();
    let geographic = read.iter().flatten().any(|h| h.latitude);
    let mut columns: Vec<Found> = (0..width)
        .zip(read)
        .map(|(i, read)| {
            let read = read.filter(|_| !(geographic && is_longitude(texts.cell(i))));
            found(texts.cell(i), read, units_row.map_or("", |r| r.cell(i)))
        })
        .collect();
    // A station by its chainage, where no column of distances stands.
    let has_distance = columns.iter().any(|c| c.meaning == Meaning::Distance);
    if !has_distance
        && let Some(i) = columns.iter().position(|c| c.meaning == Meaning::Name)
        && numeric(figures, i)
        && figures.iter().any(|r| r.cell(i).contains('+'))
    {
        columns[i].meaning = Meaning::Distance;
        columns[i].reckoning = Some(Reckoning::FromStart);
    }
    drop_seconds(&mut columns, figures);
    Layout {
        heading: Some(at),
        units_row: units_row.map(|_| at + 1),
        data,
        columns,
        guessed: false,
    }
}

fn is_longitude(text: &str) -> bool {
    let text = text.trim().to_lowercase();
    ["lon", "long", "lng", "longitude", "longitud"]
        .iter()
        .any(|w| text.split(|c: char| !c.is_alphabetic()).any(|t| t == *w))
}

fn found(text: &str, read: Option<Heading>, units_cell: &str) -> Found {
    let mut found = Found {
        heading: text.to_owned(),
        meaning: Meaning::LeftOut,
        meaning_from: Ground::Heading,
        second: None,
        unit: ColumnUnit::No,
        distance_kind: None,
        reckoning: None,
        slope: false,
    };
    if let Some(read) = read {
        found.meaning = read.meaning;
        found.distance_kind = read.distance_kind;
        found.reckoning = read.reckoning;
        found.slope = read.slope;
        found.unit = match read.unit {
            UnitSaid::No => ColumnUnit::No,
            UnitSaid::Known(unit) => ColumnUnit::Known(unit, Ground::Heading),
            UnitSaid::Unknown(unit) => ColumnUnit::Unknown(unit),
        };
    }
    if let (ColumnUnit::No, Some(unit)) = (&found.unit, heading::unit(units_cell)) {
        found.unit = ColumnUnit::Known(unit, Ground::UnitsRow);
    }
    // Sights in degrees or per cent are angles, though the heading alone
    // reads as a staff's.
    if let ColumnUnit::Known("°" | "%", _) = found.unit {
        found.meaning = match found.meaning {
            Meaning::StaffBack => Meaning::BackSight,
            Meaning::StaffFore => Meaning::ForeSight,
            other => other,
        };
    }
    found
}

/// Of several columns of one meaning the first stands that holds figures; one
/// before it, which holds texts, may be the names.
fn drop_seconds(columns: &mut [Found], figures: &[Record]) {
    for meaning in Meaning::ALL {
        if meaning == Meaning::LeftOut {
            continue;
        }
        let of: Vec<usize> = (0..columns.len())
            .filter(|i| columns[*i].meaning == meaning)
            .collect();
        let filled = |i: &&usize| match meaning {
            Meaning::Name => figures.iter().any(|r| !r.cell(**i).is_empty()),
            _ => numeric(figures, **i),
        };
        let Some(stands) = of.iter().find(filled).or(of.first()).copied() else {
            continue;
        };
        let mut named = columns.iter().any(|c| c.meaning == Meaning::Name);
        for i in of {
            if i != stands {
                // "Leg" above names, beside "Leg length" above distances.
                let texts = figures.iter().any(|r| !r.cell(i).is_empty());
                if !named && texts && meaning != Meaning::Name && i < stands {
                    named = true;
                    columns[i].meaning = Meaning::Name;
                    columns[i].unit = ColumnUnit::No;
                    continue;
                }
                columns[i].meaning = Meaning::LeftOut;
                // Remarks beside a name are no loss to speak of.
                if meaning != Meaning::Name {
                    columns[i].second = Some(meaning);
                }
            }
        }
    }
}

/// Whether most filled cells of a column are numbers.
fn numeric(figures: &[Record], column: usize) -> bool {
    let filled: Vec<&str> = figures
        .iter()
        .map(|r| r.cell(column))
        .filter(|c| !c.is_empty())
        .collect();
    let numbers = filled.iter().filter(|c| is_number(c)).count();
    !filled.is_empty() && numbers * 10 >= filled.len() * 6
}

/// Whether a column counts its rows: 1, 2, 3 or 0, 1, 2.
fn counts(figures: &[Record], column: usize) -> bool {
    let mut numbers = figures.iter().map(|r| r.cell(column).parse::<u32>().ok());
    let Some(Some(first)) = numbers.next() else {
        return false;
    };
    first <= 1
        && figures.len() > 1
        && numbers
            .zip(first + 1..)
            .all(|(n, expected)| n == Some(expected))
}

/// No heading that we know: columns by their place. Two columns of numbers
/// are distance and level; of three, the first may count the rows.
fn bare(rows: &[Record]) -> Layout {
    let data = rows
        .iter()
        .take(MOST_ABOVE)
        .position(|r| r.cells.iter().filter(|c| is_number(c)).count() >= 2)
        .unwrap_or(0);
    let figures = rows.get(data..).unwrap_or_default();
    let width = width(figures);
    let headings = data.checked_sub(1).and_then(|i| rows.get(i));
    let numbers: Vec<usize> = (0..width).filter(|i| numeric(figures, *i)).collect();
    let text = (0..width).find(|i| !numbers.contains(i));
    let (name, distance, level) = match numbers[..] {
        [distance, level] => (text, Some(distance), Some(level)),
        [count, distance, level] if text.is_none() && counts(figures, count) => {
            (Some(count), Some(distance), Some(level))
        }
        [distance, level, _] => (text, Some(distance), Some(level)),
        _ => (text, None, None),
    };
    let columns = (0..width)
        .map(|i| {
            let at = Some(i);
            let meaning = if at == distance {
                Meaning::Distance
            } else if at == level {
                Meaning::Level
            } else if at == name {
                Meaning::Name
            } else {
                Meaning::LeftOut
            };
            let heading = headings.map_or("", |r| r.cell(i)).to_owned();
            Found {
                meaning,
                meaning_from: Ground::Guess,
                ..found(&heading, None, "")
            }
        })
        .collect();
    Layout {
        heading: None,
        units_row: None,
        data,
        columns,
        guessed: true,
    }
}
