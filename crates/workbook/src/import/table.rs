//! Tables of a survey: CSV, TSV, semicolons, or pasted from a spreadsheet.
//!
//! [`open`] or [`paste`] reads the text into a [`Table`]; [`Table::preview`]
//! says how each column is read, with what unit and on what ground, and which
//! rows have a fault; [`Table::take`] gives the rows. Both take the user's
//! [`Choices`], which override everything that was told from the file.

mod cells;
mod columns;
mod records;
#[cfg(test)]
mod tests;

pub use records::Separator;

use super::decode::{decode, plain_lines};
use super::{
    Encoding, Given, ImportedLine, ImportedRow, LONGEST, Meaning, Note, Obstacle, Refusal, RowFault,
};
use crate::book::{DistanceKind, Reckoning};
use crate::reading::DecimalMark;
use crate::resolve::profile::MOST_STATIONS;
use cells::{Marks, Reader};
use columns::{Found, Layout};
use records::{Record, Records};
use std::borrow::Cow;
use std::collections::BTreeMap;

/// Rows shown of a preview.
const SHOWN: usize = 5;

/// On what ground something is read as it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Ground {
    /// The heading says so.
    Heading,
    /// The row of units under the headings says so.
    UnitsRow,
    /// The cells themselves say so.
    Cells,
    /// By its place, or by the run of the figures: a guess.
    Guess,
    /// The file says nothing: as the book has it.
    Given,
    /// The user chose it.
    Chosen,
}

/// A table as read, before it is taken.
#[derive(Debug, Clone, PartialEq)]
pub struct Table {
    encoding: Encoding,
    separator: Separator,
    rows: Vec<Record>,
    layout: Layout,
    marks: Marks,
    empty_rows: usize,
    given: Given,
}

/// What the user chose against the file; empty by default.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Choices {
    /// The decimal mark.
    pub mark: Option<DecimalMark>,
    /// Along the slope or horizontal.
    pub distance_kind: Option<DistanceKind>,
    /// Running or leg by leg.
    pub reckoning: Option<Reckoning>,
    /// Columns, from 0: what each means.
    pub meanings: BTreeMap<usize, Meaning>,
    /// Columns, from 0: the unit of each, one of [`Meaning::units`].
    pub units: BTreeMap<usize, &'static str>,
}

/// What to do with rows that have a fault.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Faulty {
    /// Take them as they stand: the line names what cannot be used.
    #[default]
    Keep,
    /// Leave them out, and say which.
    LeaveOut,
}

/// A column as it is read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Column {
    /// Its heading as it stands; empty where there is none.
    pub heading: String,
    /// What it is read as.
    pub meaning: Meaning,
    /// On what ground.
    pub meaning_from: Ground,
    /// The unit of its bare numbers, as printed; empty for a text.
    pub unit: &'static str,
    /// On what ground.
    pub unit_from: Ground,
}

/// A row of a preview: cells as they stand in the file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ShownRow {
    /// Its row in the file, from 1, empty rows counted.
    pub row: usize,
    /// Its cells, one a column.
    pub cells: Vec<String>,
}

/// How a table will be taken.
#[derive(Debug, Clone, PartialEq)]
pub struct Preview {
    /// How the text was encoded.
    pub encoding: Encoding,
    /// What parts the columns.
    pub separator: Separator,
    /// The decimal mark, and on what ground.
    pub mark: (DecimalMark, Ground),
    /// Row of the headings, if there are any.
    pub heading_row: Option<usize>,
    /// The columns, in the order of the file.
    pub columns: Vec<Column>,
    /// How distances are measured, and on what ground.
    pub distance_kind: (DistanceKind, Ground),
    /// How distances are counted, and on what ground.
    pub reckoning: (Reckoning, Ground),
    /// How many rows of figures there are.
    pub rows: usize,
    /// The first of them.
    pub first: Vec<ShownRow>,
    /// What must be chosen before the table can be taken.
    pub obstacles: Vec<Obstacle>,
    /// Cells that cannot be used, in the order of the rows.
    pub faults: Vec<RowFault>,
    /// What was taken for granted.
    pub notes: Vec<Note>,
}

/// Reads the bytes of a file.
///
/// # Errors
/// [`Refusal`]; never panics, whatever the bytes.
pub fn open(bytes: &[u8], given: Given) -> Result<Table, Refusal> {
    let (text, encoding) = decode(bytes)?;
    read(&text, encoding, given)
}

/// Reads pasted text.
///
/// # Errors
/// [`Refusal`]; never panics, whatever the text.
pub fn paste(text: &str, given: Given) -> Result<Table, Refusal> {
    if text.len() > LONGEST {
        return Err(Refusal::TooLong { bytes: text.len() });
    }
    if text.contains('\0') {
        return Err(Refusal::NotText);
    }
    if text.trim().is_empty() {
        return Err(Refusal::Empty);
    }
    read(&plain_lines(Cow::Borrowed(text)), Encoding::Utf8, given)
}

fn read(text: &str, encoding: Encoding, given: Given) -> Result<Table, Refusal> {
    let Records {
        separator,
        rows,
        count,
    } = records::read(text)?;
    let layout = columns::layout(&rows);
    let figures = rows.get(layout.data..).unwrap_or_default();
    let (Some(first), Some(last)) = (figures.first(), figures.last()) else {
        return Err(Refusal::NoRows);
    };
    // Rows beyond the most are counted, but not kept.
    let beyond = count - rows.len();
    if figures.len() + beyond > MOST_STATIONS {
        return Err(Refusal::TooManyRows {
            rows: figures.len() + beyond,
        });
    }
    let empty_rows = (last.row + 1 - first.row).saturating_sub(figures.len());
    let marks = Marks::of(figures, separator, &layout);
    Ok(Table {
        encoding,
        separator,
        layout,
        marks,
        empty_rows,
        given,
        rows,
    })
}

/// Columns and conventions once the choices are in.
struct Settled {
    columns: Vec<Column>,
    mark: (DecimalMark, Ground),
    distance_kind: (DistanceKind, Ground),
    reckoning: (Reckoning, Ground),
    obstacles: Vec<Obstacle>,
    notes: Vec<Note>,
}

/// Whether staff readings stand as in a levelling book: the first point is
/// only sighted back to, the last only forward.
fn booked(rows: &[ImportedRow]) -> bool {
    let (Some(first), Some(last)) = (rows.first(), rows.last()) else {
        return false;
    };
    first.staff_back.is_some()
        && first.staff_fore.is_none()
        && last.staff_back.is_none()
        && last.staff_fore.is_some()
}

/// Moves each back reading to the row of the point levelled with it.
fn read_down(rows: &mut [ImportedRow]) {
    for i in (1..rows.len()).rev() {
        rows[i].staff_back = rows[i - 1].staff_back.take();
    }
}

impl Table {
    fn figures(&self) -> &[Record] {
        self.rows.get(self.layout.data..).unwrap_or_default()
    }

    /// How the table will be taken under these choices.
    #[must_use]
    pub fn preview(&self, choices: &Choices) -> Preview {
        let settled = self.settle(choices);
        let (_, faults) = self.read_rows(&settled, Faulty::Keep);
        let figures = self.figures();
        let first = figures
            .iter()
            .take(SHOWN)
            .map(|r| ShownRow {
                row: r.row,
                cells: (0..settled.columns.len())
                    .map(|i| r.cell(i).to_owned())
                    .collect(),
            })
            .collect();
        Preview {
            encoding: self.encoding,
            separator: self.separator,
            mark: settled.mark,
            heading_row: self
                .layout
                .heading
                .and_then(|i| self.rows.get(i))
                .map(|r| r.row),
            columns: settled.columns,
            distance_kind: settled.distance_kind,
            reckoning: settled.reckoning,
            rows: figures.len(),
            first,
            obstacles: settled.obstacles,
            faults,
            notes: settled.notes,
        }
    }

    /// The rows under these choices.
    ///
    /// # Errors
    /// The obstacles that must be cleared first; never empty.
    pub fn take(&self, choices: &Choices, faulty: Faulty) -> Result<ImportedLine, Vec<Obstacle>> {
        let settled = self.settle(choices);
        if !settled.obstacles.is_empty() {
            return Err(settled.obstacles);
        }
        let (rows, faults) = self.read_rows(&settled, faulty);
        let mut left_out: Vec<usize> = Vec::new();
        if faulty == Faulty::LeaveOut {
            left_out = faults.iter().map(|f| f.row).collect();
            left_out.dedup();
        }
        let mut notes = settled.notes;
        let mut rows = rows;
        if booked(&rows) {
            read_down(&mut rows);
            notes.push(Note::StaffBooked);
        }
        let (reckoning, _) = settled.reckoning;
        if reckoning == Reckoning::FromPrevious && !left_out.is_empty() {
            notes.push(Note::LegsLost {
                rows: left_out.len(),
            });
        }
        Ok(ImportedLine {
            distance_kind: settled.distance_kind.0,
            reckoning,
            rows,
            left_out,
            notes,
        })
    }

    /// The rows, and every fault; rows with a fault are not among them where
    /// they are to be left out.
    fn read_rows(&self, settled: &Settled, faulty: Faulty) -> (Vec<ImportedRow>, Vec<RowFault>) {
        let mut reader = Reader::new(&settled.columns, settled.mark.0, settled.reckoning.0);
        let mut rows = Vec::new();
        let mut faults = Vec::new();
        for record in self.figures() {
            let before = faults.len();
            let row = reader.row(record, &mut faults);
            if faulty == Faulty::Keep || faults.len() == before {
                rows.push(row);
            }
        }
        (rows, faults)
    }

    fn settle(&self, choices: &Choices) -> Settled {
        let mut notes = self.first_notes();
        let mut obstacles = Vec::new();
        let columns: Vec<Column> = self
            .layout
            .columns
            .iter()
            .enumerate()
            .map(|(i, found)| self.column(i, found, choices, &mut obstacles))
            .collect();
        for (i, found) in self.layout.columns.iter().enumerate() {
            if let (Some(meaning), false) = (found.second, choices.meanings.contains_key(&i)) {
                notes.push(Note::Second { column: i, meaning });
            }
        }
        check(&columns, &mut obstacles);
        if self.layout.guessed && choices.meanings.is_empty() {
            notes.push(Note::GuessedColumns);
        }
        let mark = match choices.mark {
            Some(mark) => (mark, Ground::Chosen),
            None => self.marks.decide(self.given.mark),
        };
        if choices.mark.is_none() {
            notes.extend(self.marks.note(mark));
        }
        let said = columns
            .iter()
            .position(|c| c.meaning == Meaning::Distance)
            .and_then(|i| self.layout.columns.get(i));
        let distance_kind = match (choices.distance_kind, said.and_then(|s| s.distance_kind)) {
            (Some(kind), _) => (kind, Ground::Chosen),
            (None, Some(kind)) => (kind, Ground::Heading),
            (None, None) => {
                notes.push(Note::DistanceKindTaken(self.given.distance_kind));
                (self.given.distance_kind, Ground::Given)
            }
        };
        let reckoning = match (choices.reckoning, said.and_then(|s| s.reckoning)) {
            (Some(reckoning), _) => (reckoning, Ground::Chosen),
            (None, Some(reckoning)) => (reckoning, Ground::Heading),
            (None, None) => {
                let guess = cells::reckoning(self.figures(), &columns, mark.0);
                notes.push(Note::ReckoningGuessed(guess));
                (guess, Ground::Guess)
            }
        };
        Settled {
            columns,
            mark,
            distance_kind,
            reckoning,
            obstacles,
            notes,
        }
    }

    fn first_notes(&self) -> Vec<Note> {
        let mut notes = Vec::new();
        if self.encoding == Encoding::Western {
            notes.push(Note::WesternText);
        }
        let heads = usize::from(self.layout.heading.is_some())
            + usize::from(self.layout.units_row.is_some());
        let above = self.layout.data - heads;
        if above > 0 {
            notes.push(Note::Above { rows: above });
        }
        if self.empty_rows > 0 {
            notes.push(Note::EmptyRows {
                rows: self.empty_rows,
            });
        }
        notes
    }

    fn column(
        &self,
        index: usize,
        found: &Found,
        choices: &Choices,
        obstacles: &mut Vec<Obstacle>,
    ) -> Column {
        let (meaning, meaning_from) = match choices.meanings.get(&index) {
            Some(meaning) => (*meaning, Ground::Chosen),
            None => (found.meaning, found.meaning_from),
        };
        let usual = meaning.usual_unit(self.given.units);
        let chosen = choices
            .units
            .get(&index)
            .and_then(|u| meaning.units().iter().find(|known| *known == u));
        let (unit, unit_from) = if let Some(unit) = chosen {
            (*unit, Ground::Chosen)
        } else if usual.is_empty() {
            ("", meaning_from)
        } else {
            match &found.unit {
                columns::ColumnUnit::Known(unit, from) if meaning.units().contains(unit) => {
                    (*unit, *from)
                }
                columns::ColumnUnit::Known(unit, _) => {
                    obstacles.push(Obstacle::Unit {
                        column: index,
                        unit: (*unit).to_owned(),
                    });
                    (usual, Ground::Given)
                }
                columns::ColumnUnit::Unknown(unit) => {
                    obstacles.push(Obstacle::Unit {
                        column: index,
                        unit: unit.clone(),
                    });
                    (usual, Ground::Given)
                }
                columns::ColumnUnit::No => {
                    let sight = matches!(meaning, Meaning::ForeSight | Meaning::BackSight);
                    if found.slope && sight {
                        obstacles.push(Obstacle::SlopeUnit { column: index });
                    }
                    (usual, Ground::Given)
                }
            }
        };
        Column {
            heading: found.heading.clone(),
            meaning,
            meaning_from,
            unit,
            unit_from,
        }
    }
}

/// Whether the columns make a line.
fn check(columns: &[Column], obstacles: &mut Vec<Obstacle>) {
    for (second, column) in columns.iter().enumerate() {
        let first = columns.iter().position(|c| c.meaning == column.meaning);
        if let Some(first) = first.filter(|f| *f < second && column.meaning != Meaning::LeftOut) {
            obstacles.push(Obstacle::Twice {
                meaning: column.meaning,
                first,
                second,
            });
        }
    }
    let has = |m: Meaning| columns.iter().any(|c| c.meaning == m);
    if !has(Meaning::Distance) {
        obstacles.push(Obstacle::NoColumn(Meaning::Distance));
    }
    match (has(Meaning::StaffBack), has(Meaning::StaffFore)) {
        (true, false) => obstacles.push(Obstacle::NoColumn(Meaning::StaffFore)),
        (false, true) => obstacles.push(Obstacle::NoColumn(Meaning::StaffBack)),
        (true, true) => {}
        (false, false) => {
            if !(has(Meaning::Level) || has(Meaning::ForeSight) || has(Meaning::BackSight)) {
                obstacles.push(Obstacle::NoHeights);
            }
        }
    }
}
