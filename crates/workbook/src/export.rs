//! Tables to CSV that a spreadsheet opens as it is meant, and that no cell of
//! which it can run as a formula.
//!
//! Form: RFC 4180, lines ended by CR LF, with the byte order mark that makes
//! spreadsheets read it as UTF-8. Texts stand in quotation marks; one that
//! begins as a formula does is led by an apostrophe, so that it stays text
//! (OWASP, CSV Injection: `=`, `+`, `-`, `@`, tab, carriage return). Control
//! characters within a text become blanks. Numbers stand bare, without
//! grouping, their minus an ASCII one.

use crate::reading::DecimalMark;

/// A cell.
#[derive(Debug, Clone, PartialEq)]
pub enum Cell {
    /// Nothing.
    Empty,
    /// A text.
    Text(String),
    /// A number in the unit of its column's heading. One that is not finite
    /// is written as nothing.
    Number {
        /// The number.
        value: f64,
        /// Decimals written.
        decimals: usize,
    },
}

impl Cell {
    /// A text.
    #[must_use]
    pub fn text(text: impl Into<String>) -> Cell {
        Cell::Text(text.into())
    }

    /// A whole number.
    #[must_use]
    pub fn count(count: u32) -> Cell {
        Cell::Number {
            value: f64::from(count),
            decimals: 0,
        }
    }
}

/// The heading of a column.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Heading {
    /// What it says.
    pub name: String,
    /// The unit of its numbers; empty for none.
    pub unit: String,
}

/// A table: headings, and rows of as many cells.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Table {
    /// The headings.
    pub headings: Vec<Heading>,
    /// The rows; one that is shorter than the headings is filled up, one that
    /// is longer keeps its cells.
    pub rows: Vec<Vec<Cell>>,
}

/// How a table is written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Csv {
    /// The decimal mark. With a comma the columns are parted by semicolons,
    /// as spreadsheets of those languages do; with a point, by commas.
    pub mark: DecimalMark,
}

impl Csv {
    /// The file's text.
    #[must_use]
    pub fn write(self, table: &Table) -> String {
        let mut out = String::from("\u{feff}");
        let heading = |h: &Heading| {
            Cell::Text(if h.unit.is_empty() {
                h.name.clone()
            } else {
                format!("{} ({})", h.name, h.unit)
            })
        };
        let width = table.headings.len();
        let headings: Vec<Cell> = table.headings.iter().map(heading).collect();
        self.row(&mut out, &headings, width);
        for row in &table.rows {
            self.row(&mut out, row, width);
        }
        out
    }

    fn row(self, out: &mut String, cells: &[Cell], width: usize) {
        let separator = match self.mark {
            DecimalMark::Point => ',',
            DecimalMark::Comma => ';',
        };
        for i in 0..width.max(cells.len()) {
            if i > 0 {
                out.push(separator);
            }
            match cells.get(i) {
                None | Some(Cell::Empty) => {}
                Some(Cell::Text(text)) => quote(out, text),
                Some(Cell::Number { value, decimals }) => self.number(out, *value, *decimals),
            }
        }
        out.push_str("\r\n");
    }

    fn number(self, out: &mut String, value: f64, decimals: usize) {
        if !value.is_finite() {
            return;
        }
        let plain = format!("{value:.decimals$}");
        // "-0.0" is no number anyone means.
        let plain = match plain.strip_prefix('-') {
            Some(rest) if !rest.contains(|c: char| ('1'..='9').contains(&c)) => rest,
            _ => &plain,
        };
        match self.mark {
            DecimalMark::Point => out.push_str(plain),
            DecimalMark::Comma => out.push_str(&plain.replace('.', ",")),
        }
    }
}

fn quote(out: &mut String, text: &str) {
    out.push('"');
    if begins_formula(text) {
        out.push('\'');
    }
    for c in text.chars() {
        match c {
            '"' => out.push_str("\"\""),
            c if c.is_control() => out.push(' '),
            c => out.push(c),
        }
    }
    out.push('"');
}

/// Whether a spreadsheet could take a text for a formula: by its first
/// character, or by the first after blanks, which some take off. Full-width
/// forms count as well.
fn begins_formula(text: &str) -> bool {
    if text.starts_with(['\t', '\r', '\n']) {
        return true;
    }
    text.trim_start_matches(|c: char| c.is_whitespace() || c.is_control() || c == '\u{feff}')
        .starts_with(['=', '+', '-', '@', '＝', '＋', '－', '＠', '\u{2212}'])
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn table(rows: Vec<Vec<Cell>>) -> Table {
        Table {
            headings: vec![
                Heading {
                    name: "Length".into(),
                    unit: "m".into(),
                },
                Heading {
                    name: "Note".into(),
                    unit: String::new(),
                },
            ],
            rows,
        }
    }

    #[test]
    fn numbers_take_the_mark_and_texts_their_quotes() {
        let rows = vec![
            vec![
                Cell::Number {
                    value: -1234.5,
                    decimals: 2,
                },
                Cell::text("PE 100, 4\"\nred"),
            ],
            vec![Cell::count(7)],
            vec![Cell::Number {
                value: -0.01,
                decimals: 1,
            }],
            vec![Cell::Number {
                value: f64::NAN,
                decimals: 1,
            }],
        ];
        let point = Csv {
            mark: DecimalMark::Point,
        };
        assert_eq!(
            point.write(&table(rows.clone())),
            "\u{feff}\"Length (m)\",\"Note\"\r\n-1234.50,\"PE 100, 4\"\" red\"\r\n7,\r\n0.0,\r\n,\r\n"
        );
        let comma = Csv {
            mark: DecimalMark::Comma,
        };
        assert!(
            comma
                .write(&table(rows))
                .contains("\r\n-1234,50;\"PE 100, 4\"\" red\"\r\n")
        );
    }

    #[test]
    fn what_would_run_is_led_by_an_apostrophe() {
        for text in [
            "=1+1",
            "+1",
            "-2",
            "@SUM(A1)",
            "\t=1",
            "\r=1",
            " =1",
            "\u{feff}=1",
            "＝1",
            "\u{2212}5",
        ] {
            let mut out = String::new();
            quote(&mut out, text);
            assert!(out.starts_with("\"'"), "{text:?} gives {out}");
        }
        let mut out = String::new();
        quote(&mut out, "PE 100 = good");
        assert_eq!(out, "\"PE 100 = good\"");
    }

    proptest! {
        #[test]
        fn whatever_stands_in_a_cell_stays_one_cell_and_inert(
            texts in proptest::collection::vec("[=+@\t\r\n\"',;a-]{0,8}|.{0,8}", 2..20), comma: bool,
        ) {
            let rows: Vec<Vec<Cell>> = texts
                .chunks_exact(2)
                .map(|w| w.iter().map(Cell::text).collect())
                .collect();
            let mark = if comma { DecimalMark::Comma } else { DecimalMark::Point };
            let written = Csv { mark }.write(&table(rows.clone()));
            let mut reader = csv::ReaderBuilder::new()
                .delimiter(if comma { b';' } else { b',' })
                .from_reader(written.trim_start_matches('\u{feff}').as_bytes());
            let mut read = 0;
            for record in reader.records() {
                let record = record.unwrap();
                prop_assert_eq!(record.len(), 2);
                for cell in &record {
                    prop_assert!(!begins_formula(cell), "{}", cell);
                }
                read += 1;
            }
            prop_assert_eq!(read, rows.len());
        }
    }
}
