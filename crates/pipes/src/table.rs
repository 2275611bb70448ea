//! A strict reader for the small tables of this crate.
//!
//! A file is: lines `# remark`, lines `! key = value`, one header line, then
//! rows. Cells are separated by commas and never quoted; the last column takes
//! the rest of its line, commas and all. Blank lines are not allowed, so that
//! nothing is passed over in silence.

use std::fmt;

/// A file of the crate, by name, with its text.
#[derive(Debug, Clone, Copy)]
pub(crate) struct File {
    pub(crate) name: &'static str,
    pub(crate) text: &'static str,
}

/// One file, taken apart.
#[derive(Debug)]
pub(crate) struct Table<'a> {
    file: &'a str,
    remarks: Vec<&'a str>,
    keys: Vec<(&'a str, &'a str)>,
    rows: Vec<Row<'a>>,
}

/// One row with its line number.
#[derive(Debug)]
pub(crate) struct Row<'a> {
    file: &'a str,
    line: usize,
    cells: Vec<(&'a str, &'a str)>,
}

/// What is wrong with a data file, with the line (from 1).
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct DataError {
    pub(crate) file: String,
    pub(crate) line: usize,
    pub(crate) trouble: String,
}

impl fmt::Display for DataError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}, line {}: {}", self.file, self.line, self.trouble)
    }
}

impl<'a> Table<'a> {
    /// Takes a file apart; its header must be exactly `columns`.
    pub(crate) fn read(
        file: &'a str,
        text: &'a str,
        columns: &[&'a str],
    ) -> Result<Self, DataError> {
        let fail = |line: usize, trouble: String| DataError {
            file: file.to_owned(),
            line,
            trouble,
        };
        let mut table = Self {
            file,
            remarks: Vec::new(),
            keys: Vec::new(),
            rows: Vec::new(),
        };
        let mut headed = false;
        for (index, line) in text.lines().enumerate() {
            let number = index + 1;
            if let Some(remark) = line.strip_prefix("# ") {
                table.remarks.push(remark);
            } else if let Some(entry) = line.strip_prefix("! ") {
                let pair = entry.split_once(" = ");
                let (key, value) =
                    pair.ok_or_else(|| fail(number, "no ` = ` in a `!` line".to_owned()))?;
                if table.keys.iter().any(|(known, _)| *known == key) {
                    return Err(fail(number, format!("key `{key}` is given twice")));
                }
                table.keys.push((key, value));
            } else if !headed {
                if line.split(',').ne(columns.iter().copied()) {
                    return Err(fail(
                        number,
                        format!("header is not `{}`", columns.join(",")),
                    ));
                }
                headed = true;
            } else {
                let cells: Vec<&str> = line.splitn(columns.len(), ',').map(str::trim).collect();
                if cells.len() != columns.len() {
                    let (want, have) = (columns.len(), cells.len());
                    return Err(fail(number, format!("{have} cells where {want} are due")));
                }
                let cells = columns.iter().copied().zip(cells).collect();
                table.rows.push(Row {
                    file,
                    line: number,
                    cells,
                });
            }
        }
        if !headed {
            return Err(fail(text.lines().count(), "no header".to_owned()));
        }
        Ok(table)
    }

    pub(crate) fn rows(&self) -> &[Row<'a>] {
        &self.rows
    }

    /// The remarks at the head.
    #[cfg(test)]
    pub(crate) fn remarks(&self) -> &[&'a str] {
        &self.remarks
    }

    /// The value of a `!` key that must be there.
    pub(crate) fn key(&self, key: &str) -> Result<&'a str, DataError> {
        self.keys
            .iter()
            .find(|(known, _)| *known == key)
            .map(|(_, value)| *value)
            .ok_or_else(|| DataError {
                file: self.file.to_owned(),
                line: 1,
                trouble: format!("key `{key}` is missing"),
            })
    }
}

impl<'a> Row<'a> {
    /// The text of a cell; the column is one of those the table was read with.
    pub(crate) fn text(&self, column: &str) -> Result<&'a str, DataError> {
        self.cells
            .iter()
            .find(|(name, _)| *name == column)
            .map(|(_, cell)| *cell)
            .ok_or_else(|| self.fail(format!("no column `{column}`")))
    }

    /// The text of a cell that may not be blank.
    pub(crate) fn given(&self, column: &str) -> Result<&'a str, DataError> {
        match self.text(column)? {
            "" => Err(self.fail(format!("`{column}` is blank"))),
            text => Ok(text),
        }
    }

    /// A finite number above zero.
    pub(crate) fn positive(&self, column: &str) -> Result<f64, DataError> {
        let text = self.given(column)?;
        match text.parse::<f64>() {
            Ok(value) if value.is_finite() && value > 0.0 => Ok(value),
            _ => Err(self.fail(format!("`{column}` is `{text}`, not a number above zero"))),
        }
    }

    /// A finite number above zero, or none where the cell is blank.
    pub(crate) fn maybe(&self, column: &str) -> Result<Option<f64>, DataError> {
        match self.text(column)? {
            "" => Ok(None),
            _ => self.positive(column).map(Some),
        }
    }

    /// An error on this row.
    pub(crate) fn fail(&self, trouble: String) -> DataError {
        DataError {
            file: self.file.to_owned(),
            line: self.line,
            trouble,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const COLUMNS: [&str; 3] = ["a", "b", "source"];

    #[test]
    fn reads_remarks_keys_and_rows() {
        let text = "# from a book\n! unit = mm\na,b,source\n1,,x, y\n2.5,3,z\n";
        let table = Table::read("t.csv", text, &COLUMNS).unwrap();
        assert_eq!(table.remarks(), ["from a book"]);
        assert_eq!(table.key("unit").unwrap(), "mm");
        assert_eq!(table.rows().len(), 2);
        assert_eq!(table.rows()[0].text("source").unwrap(), "x, y");
        assert_eq!(table.rows()[0].maybe("b").unwrap(), None);
        assert_eq!(table.rows()[1].maybe("b").unwrap(), Some(3.0));
    }

    #[test]
    fn names_the_malformed_line() {
        let cases = [
            ("a,b\n", 1, "header"),
            ("a,b,source\n1,2\n", 2, "2 cells where 3"),
            ("a,b,source\n1,2,x\n\n", 3, "1 cells where 3"),
            ("! unit mm\na,b,source\n", 1, "no ` = `"),
            ("! u = a\n! u = b\na,b,source\n", 2, "twice"),
            ("# only a remark\n", 1, "no header"),
        ];
        for (text, line, trouble) in cases {
            let error = Table::read("t.csv", text, &COLUMNS).unwrap_err();
            assert_eq!(error.line, line, "{error}");
            assert!(error.trouble.contains(trouble), "{error}");
            assert!(error.to_string().starts_with("t.csv, line"));
        }
    }

    #[test]
    fn names_the_malformed_number() {
        let text = "a,b,source\n1,2,x\n-4,NaN,x\n";
        let table = Table::read("t.csv", text, &COLUMNS).unwrap();
        let row = &table.rows()[1];
        assert_eq!(row.positive("a").unwrap_err().line, 3);
        assert!(row.positive("b").unwrap_err().trouble.contains("NaN"));
        assert!(row.positive("c").unwrap_err().trouble.contains("no column"));
    }
}
