//! Text to rows of cells: which mark parts the columns, and where each row
//! stands in the file.

use super::super::{LONGEST_CELL, Refusal};
use crate::resolve::profile::MOST_STATIONS;
use std::borrow::Cow;
use std::collections::BTreeMap;

/// What parts the columns.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Separator {
    /// Tab: as pasted from a spreadsheet.
    Tab,
    /// Semicolon.
    Semicolon,
    /// Comma.
    Comma,
    /// Upright bar.
    Bar,
    /// Blanks, any number of them.
    Blanks,
}

impl Separator {
    /// The byte it is; blanks are made tabs before they are read.
    fn byte(self) -> u8 {
        match self {
            Separator::Tab | Separator::Blanks => b'\t',
            Separator::Semicolon => b';',
            Separator::Comma => b',',
            Separator::Bar => b'|',
        }
    }
}

/// In the order they are preferred where several serve as well.
const CANDIDATES: [Separator; 4] = [
    Separator::Tab,
    Separator::Semicolon,
    Separator::Comma,
    Separator::Bar,
];

/// Rows looked at to find the separator.
const SNIFFED: usize = 60;

/// Most columns of a row.
const MOST_COLUMNS: usize = 64;

/// Rows kept: the most a line takes, and as many as may stand above them.
const KEPT: usize = MOST_STATIONS + super::columns::MOST_ABOVE;

/// A row with at least one cell that is not blank.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Record {
    /// Its row in the file, from 1.
    pub(super) row: usize,
    /// Its cells, blanks at either end taken off; one that is too long is
    /// cut.
    pub(super) cells: Vec<String>,
    /// Cells that were cut, with the characters they had.
    pub(super) cut: Vec<(usize, usize)>,
}

impl Record {
    pub(super) fn cell(&self, column: usize) -> &str {
        self.cells.get(column).map_or("", String::as_str)
    }
}

/// The rows of a file.
#[derive(Debug)]
pub(super) struct Records {
    pub(super) separator: Separator,
    /// Rows that are not empty, up to [`KEPT`].
    pub(super) rows: Vec<Record>,
    /// All rows that are not empty.
    pub(super) count: usize,
}

/// Reads a text whose lines end with `\n` alone.
pub(super) fn read(text: &str) -> Result<Records, Refusal> {
    let (declared, text, skipped) = declared(text);
    let separator = declared.unwrap_or_else(|| sniff(text));
    let text = spread(text, separator);
    let mut rows = Vec::new();
    let mut count = 0;
    for record in Walk::new(&text, separator) {
        let (row, record) = record;
        let row = row + skipped;
        if record.len() > MOST_COLUMNS {
            return Err(Refusal::TooManyColumns {
                row,
                columns: record.len(),
            });
        }
        if record.iter().any(|c| swallows_rows(c, separator)) {
            return Err(Refusal::QuoteOpen { row });
        }
        if record.iter().all(|c| c.trim().is_empty()) {
            continue;
        }
        count += 1;
        if rows.len() < KEPT {
            rows.push(cells(row, &record));
        }
    }
    Ok(Records {
        separator,
        rows,
        count,
    })
}

/// Whether a cell holds rows of figures: a quotation mark was opened and not
/// closed, and what follows went into one cell.
fn swallows_rows(cell: &str, separator: Separator) -> bool {
    // The first lines tell; a cell may be the whole file.
    let mut lines = cell.split('\n').skip(1).take(1000);
    lines.any(|line| {
        let parts = line.split(char::from(separator.byte()));
        parts
            .filter(|p| super::cells::is_number(p))
            .nth(1)
            .is_some()
    })
}

fn cells(row: usize, record: &csv::StringRecord) -> Record {
    let mut cut = Vec::new();
    let cells = record
        .iter()
        .enumerate()
        .map(|(i, cell)| {
            let cell = cell.trim();
            // Fewer bytes than that are fewer characters.
            if cell.len() > LONGEST_CELL {
                let characters = cell.chars().count();
                if characters > LONGEST_CELL {
                    cut.push((i, characters));
                    return cell.chars().take(LONGEST_CELL).collect();
                }
            }
            cell.to_owned()
        })
        .collect();
    Record { row, cells, cut }
}

/// A first line such as `sep=;`, which names the separator; the text after it
/// and the rows it took.
fn declared(text: &str) -> (Option<Separator>, &str, usize) {
    let (line, rest) = text.split_once('\n').unwrap_or((text, ""));
    let named = line
        .trim_end_matches(' ')
        .strip_prefix("sep=")
        .and_then(|s| CANDIDATES.into_iter().find(|c| s.as_bytes() == [c.byte()]));
    match named {
        Some(separator) => (Some(separator), rest, 1),
        None => (None, text, 0),
    }
}

/// The text with runs of blanks made tabs, where blanks part the columns.
fn spread(text: &str, separator: Separator) -> Cow<'_, str> {
    if separator != Separator::Blanks {
        return Cow::Borrowed(text);
    }
    let mut out = String::with_capacity(text.len());
    for line in text.split('\n') {
        for (i, word) in line.split_whitespace().enumerate() {
            if i > 0 {
                out.push('\t');
            }
            out.push_str(word);
        }
        out.push('\n');
    }
    Cow::Owned(out)
}

/// The separator that makes the most regular table of the first rows: the one
/// with the most rows of one width of two or more, weighed by how many of
/// their cells are numbers.
fn sniff(text: &str) -> Separator {
    let head = head(text);
    let mut best = (0.0, Separator::Blanks);
    for candidate in CANDIDATES {
        let score = score(head, candidate);
        if score > best.0 {
            best = (score, candidate);
        }
    }
    let blanks = spread(head, Separator::Blanks);
    if best.0 == 0.0 && score(&blanks, Separator::Blanks) == 0.0 {
        // One column: no separator at all.
        return Separator::Tab;
    }
    best.1
}

/// The beginning of a text, which is all that is sniffed at: whole lines of
/// at most 64 KiB.
fn head(text: &str) -> &str {
    const MOST: usize = 64 * 1024;
    if text.len() <= MOST {
        return text;
    }
    let end = (0..=MOST)
        .rev()
        .find(|i| text.is_char_boundary(*i))
        .unwrap_or(0);
    let head = &text[..end];
    head.rfind('\n').map_or(head, |i| &head[..i])
}

fn score(text: &str, separator: Separator) -> f64 {
    let mut widths: BTreeMap<usize, (u32, u32, u32)> = BTreeMap::new();
    let mut seen = 0u32;
    for (_, record) in Walk::new(text, separator).take(SNIFFED) {
        if record.iter().all(|c| c.trim().is_empty()) {
            continue;
        }
        seen += 1;
        let filled = record.iter().filter(|c| !c.trim().is_empty());
        let (mut cells, mut numbers) = (0, 0);
        for cell in filled.take(MOST_COLUMNS) {
            cells += 1;
            numbers += u32::from(super::cells::is_number(cell));
        }
        let width = widths.entry(record.len()).or_default();
        width.0 += 1;
        width.1 += cells;
        width.2 += numbers;
    }
    widths
        .iter()
        .filter(|(width, _)| **width >= 2)
        .map(|(_, (rows, cells, numbers))| {
            let share = f64::from(*rows) / f64::from(seen.max(1));
            let plain = f64::from(*numbers) / f64::from((*cells).max(1));
            share * (0.1 + plain)
        })
        .fold(0.0, f64::max)
}

/// Walks the records of a text with the row each stands in: a row is a record
/// or an empty line, as a spreadsheet counts; a cell of several lines is in
/// one row.
struct Walk<'a> {
    text: &'a str,
    reader: csv::Reader<&'a [u8]>,
    /// How far lines are counted, bytes.
    counted: usize,
    /// Lines ended before there.
    lines: usize,
    /// Of these, lines ended within a cell.
    within: usize,
}

impl<'a> Walk<'a> {
    fn new(text: &'a str, separator: Separator) -> Walk<'a> {
        let reader = csv::ReaderBuilder::new()
            .has_headers(false)
            .flexible(true)
            .delimiter(separator.byte())
            .from_reader(text.as_bytes());
        Walk {
            text,
            reader,
            counted: 0,
            lines: 0,
            within: 0,
        }
    }
}

fn line_ends(bytes: &[u8]) -> usize {
    bytes.iter().filter(|b| **b == b'\n').count()
}

impl Iterator for Walk<'_> {
    type Item = (usize, csv::StringRecord);

    fn next(&mut self) -> Option<(usize, csv::StringRecord)> {
        let mut record = csv::StringRecord::new();
        // Cannot fail on text held in memory; if it did, the rows end here.
        if !self.reader.read_record(&mut record).unwrap_or(false) {
            return None;
        }
        let mut start = record
            .position()
            .and_then(|p| usize::try_from(p.byte()).ok())
            .unwrap_or(self.counted);
        // The position may lie before empty lines that were passed over.
        let bytes = self.text.as_bytes();
        while bytes.get(start) == Some(&b'\n') {
            start += 1;
        }
        self.lines += line_ends(bytes.get(self.counted..start).unwrap_or_default());
        self.counted = start;
        let row = 1 + self.lines.saturating_sub(self.within);
        self.within += line_ends(record.as_slice().as_bytes());
        Some((row, record))
    }
}
