//! The saved file: JSON, format 1.
//!
//! A file is read in three steps, each with its own named trouble: is it JSON,
//! is it a book of a format this edition knows, does it hold what a book must.
//! Nothing of a file is used before all of it was understood. Unknown names
//! are refused by name: a book this edition does not understand whole must
//! not be saved over by it.

use crate::book::{Book, Id};
use std::collections::HashSet;
use std::fmt;

/// The format this edition writes.
pub const FORMAT: u32 = 1;

/// Longest file taken, in bytes.
pub const LONGEST: usize = 8 * 1024 * 1024;

/// Most stations, stretches, fittings, or pipes taken.
pub const MOST_ROWS: usize = 2000;

/// This edition, as written into files.
#[must_use]
pub fn program() -> String {
    format!("fallwright {}", env!("CARGO_PKG_VERSION"))
}

/// Why a file is not a book.
#[derive(Debug, Clone, PartialEq, Eq)]
#[non_exhaustive]
pub enum FileTrouble {
    /// Too long to be one.
    TooLong {
        /// Its length, bytes.
        bytes: usize,
    },
    /// Not text in UTF-8.
    NotText,
    /// Not JSON, or cut short.
    NotJson {
        /// Line of the trouble.
        line: usize,
        /// Column of the trouble.
        column: usize,
        /// The reader's word for it.
        why: String,
    },
    /// JSON, but no book: it has no format number.
    NotABook,
    /// A book of a format this edition does not know.
    NewerFormat {
        /// Its format.
        found: u64,
    },
    /// A book, but something in it is missing, unknown or of the wrong kind.
    Content {
        /// The reader's word for it, naming the field.
        why: String,
        /// Line of the trouble.
        line: usize,
    },
    /// The same number twice in one list.
    RepeatedNumber {
        /// Which list.
        list: &'static str,
        /// The number.
        id: Id,
    },
    /// More rows than any line needs.
    TooManyRows {
        /// Which list.
        list: &'static str,
        /// How many.
        count: usize,
    },
    /// The book has no key.
    NoKey,
}

impl fmt::Display for FileTrouble {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            FileTrouble::TooLong { bytes } => {
                write!(
                    f,
                    "the file is {bytes} bytes long; a book is at most {LONGEST}"
                )
            }
            FileTrouble::NotText => write!(f, "the file is not text in UTF-8"),
            FileTrouble::NotJson { line, column, why } => {
                write!(
                    f,
                    "the file is not whole JSON at line {line}, column {column}: {why}"
                )
            }
            FileTrouble::NotABook => write!(f, "the file is JSON, but has no book format number"),
            FileTrouble::NewerFormat { found } => write!(
                f,
                "the book is of format {found}; this edition reads format {FORMAT}: open it with a newer edition"
            ),
            FileTrouble::Content { why, line } => write!(f, "line {line}: {why}"),
            FileTrouble::RepeatedNumber { list, id } => {
                write!(f, "the number {id} stands twice among the {list}")
            }
            FileTrouble::TooManyRows { list, count } => {
                write!(f, "{count} {list}; at most {MOST_ROWS} are taken")
            }
            FileTrouble::NoKey => write!(f, "the book has no key (id)"),
        }
    }
}

impl std::error::Error for FileTrouble {}

/// Reads a book from the bytes of a file.
///
/// # Errors
/// [`FileTrouble`]; never panics, whatever the bytes.
pub fn read(bytes: &[u8]) -> Result<Book, FileTrouble> {
    if bytes.len() > LONGEST {
        return Err(FileTrouble::TooLong { bytes: bytes.len() });
    }
    let text = std::str::from_utf8(bytes).map_err(|_| FileTrouble::NotText)?;
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    let value: serde_json::Value =
        serde_json::from_str(text).map_err(|e| FileTrouble::NotJson {
            line: e.line(),
            column: e.column(),
            why: e.to_string(),
        })?;
    match value.get("format").and_then(serde_json::Value::as_u64) {
        Some(found) if found == u64::from(FORMAT) => {}
        Some(found) if found > u64::from(FORMAT) => {
            return Err(FileTrouble::NewerFormat { found });
        }
        _ => return Err(FileTrouble::NotABook),
    }
    // From the text, not from the value, so that the line is known.
    let book: Book = serde_json::from_str(text).map_err(|e| FileTrouble::Content {
        why: e.to_string(),
        line: e.line(),
    })?;
    check(&book)?;
    Ok(book)
}

/// The text of a book's file.
///
/// # Errors
/// The serializer's error, if a value is not to be written; no book that was
/// read or typed has one.
pub fn write(book: &Book) -> Result<String, serde_json::Error> {
    let mut text = serde_json::to_string_pretty(book)?;
    text.push('\n');
    Ok(text)
}

/// The JSON Schema of the file, as shipped.
#[must_use]
pub fn schema() -> String {
    let schema = schemars::schema_for!(Book);
    let mut text = serde_json::to_string_pretty(&schema).unwrap_or_default();
    text.push('\n');
    text
}

fn check(book: &Book) -> Result<(), FileTrouble> {
    if book.id.trim().is_empty() {
        return Err(FileTrouble::NoKey);
    }
    let lists: [(&'static str, Vec<Id>); 4] = [
        (
            "stations",
            book.line.stations.iter().map(|s| s.id).collect(),
        ),
        (
            "stretches",
            book.line.stretches.iter().map(|s| s.id).collect(),
        ),
        (
            "fittings",
            book.line.fittings.iter().map(|f| f.id).collect(),
        ),
        (
            "pipes of one's own",
            book.own_pipes.iter().map(|p| p.id).collect(),
        ),
    ];
    for (list, ids) in lists {
        if ids.len() > MOST_ROWS {
            return Err(FileTrouble::TooManyRows {
                list,
                count: ids.len(),
            });
        }
        let mut met = HashSet::new();
        if let Some(id) = ids.iter().find(|id| !met.insert(**id)) {
            return Err(FileTrouble::RepeatedNumber { list, id: *id });
        }
    }
    for (list, count) in [
        ("pipes", book.pipes.len()),
        ("prices", book.prices.pipes.len()),
    ] {
        if count > MOST_ROWS {
            return Err(FileTrouble::TooManyRows { list, count });
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::entry::Entry;
    use crate::field::Field;
    use crate::reading::DecimalMark;
    use proptest::prelude::*;

    fn sample() -> Book {
        let mut book = Book::new("a-key");
        for (field, text) in [
            (Field::DesignFlow, "38 ± 2 L/s"),
            (Field::ForebayNormal, "not a level"),
            (Field::StationDistance(1), "0"),
            (Field::StationLevel(1), "1,234"),
        ] {
            *book.entry_mut(field).unwrap() = Entry::typed(
                text,
                field.kind().units()[0].symbol,
                field.kind(),
                DecimalMark::Comma,
            );
        }
        book
    }

    #[test]
    fn a_book_comes_back_as_written() {
        let book = sample();
        assert_eq!(read(write(&book).unwrap().as_bytes()).unwrap(), book);
        let with_bom = format!("\u{feff}{}", write(&book).unwrap());
        assert_eq!(read(with_bom.as_bytes()).unwrap(), book);
    }

    #[test]
    fn each_trouble_is_named() {
        let text = write(&sample()).unwrap();
        let trouble = |t: &str| read(t.as_bytes()).unwrap_err();
        assert!(matches!(
            trouble(&text[..text.len() / 2]),
            FileTrouble::NotJson { .. }
        ));
        assert_eq!(trouble("{}"), FileTrouble::NotABook);
        assert_eq!(trouble("[1,2]"), FileTrouble::NotABook);
        assert_eq!(
            trouble(&text.replace("\"format\": 1", "\"format\": 7")),
            FileTrouble::NewerFormat { found: 7 }
        );
        let unknown = text.replace("\"revision\"", "\"revisionn\"");
        let FileTrouble::Content { why, line } = trouble(&unknown) else {
            panic!()
        };
        assert!(why.contains("revisionn") && line > 1, "{why}");
        assert!(matches!(
            trouble(&text.replace("\"id\": 2", "\"id\": 1")),
            FileTrouble::RepeatedNumber {
                list: "stations",
                id: 1
            }
        ));
        assert_eq!(trouble(&text.replace("a-key", " ")), FileTrouble::NoKey);
        assert_eq!(read(&[0xff, 0xfe]), Err(FileTrouble::NotText));
        assert!(matches!(
            read(&vec![b' '; LONGEST + 1]),
            Err(FileTrouble::TooLong { .. })
        ));
        let deep = format!("{{\"format\":1,\"a\":{}", "[".repeat(100_000));
        assert!(matches!(trouble(&deep), FileTrouble::NotJson { .. }));
    }

    proptest! {
        #[test]
        fn any_bytes_are_refused_without_panic(bytes in proptest::collection::vec(any::<u8>(), 0..200)) {
            prop_assert!(read(&bytes).is_err());
        }

        #[test]
        fn a_damaged_file_never_panics(at in 0usize..4000, byte in any::<u8>(), cut in 0usize..4000) {
            let mut bytes = write(&sample()).unwrap().into_bytes();
            let n = bytes.len();
            bytes[at % n] = byte;
            let _ = read(&bytes);
            bytes.truncate(cut % n);
            let damaged = read(&bytes);
            prop_assert!(damaged.is_err());
        }

        #[test]
        fn any_entry_text_survives(text in ".{0,30}") {
            let mut book = sample();
            book.stream.design_flow_m3_s = Entry::typed(&text, "L/s", Field::DesignFlow.kind(), DecimalMark::Point);
            book.site.name = text;
            prop_assert_eq!(&read(write(&book).unwrap().as_bytes()).unwrap(), &book);
        }
    }
}
