//! Reading the copied tables, for the checks of the pipe catalogue.
#![allow(
    dead_code,
    clippy::expect_used,
    clippy::panic,
    reason = "only tests use it, and each of them its own part"
)]

use std::collections::HashMap;
use std::path::Path;

use pipes::{Pipe, Rating, catalogue};
use uom::si::pressure::bar;

/// One row of a table, by column.
pub(crate) type Record = HashMap<String, String>;

/// The rows of a table in `data/pipes`; its head must name the source.
pub(crate) fn rows(name: &str) -> Vec<Record> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("data/pipes")
        .join(name);
    let text = std::fs::read_to_string(&path).expect(name);
    assert!(text.starts_with("# "), "{name} must name its source");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    let all: Vec<Record> = reader.deserialize().collect::<Result<_, _>>().expect(name);
    assert!(!all.is_empty(), "{name} is empty");
    all
}

/// A cell as a number.
pub(crate) fn number(row: &Record, column: &str) -> f64 {
    row[column]
        .parse()
        .unwrap_or_else(|_| panic!("{column} is `{}`", row[column]))
}

/// The pipe of an id that must be there.
pub(crate) fn pipe(id: &str) -> &'static Pipe {
    catalogue()
        .find(id)
        .unwrap_or_else(|| panic!("the catalogue has no {id}"))
}

/// Symbol, number as printed, and pressure in bar of a pipe rated by class.
pub(crate) fn class(pipe: &Pipe) -> (String, String, f64) {
    match &pipe.rating {
        Rating::Class(class) => (
            class.symbol.clone(),
            class.number.clone(),
            class.pressure.get::<bar>(),
        ),
        Rating::Stress(_) => panic!("{} has no class", pipe.id),
    }
}

/// Asserts that two figures agree.
pub(crate) fn close(what: &str, have: f64, want: f64, tolerance: f64) {
    assert!(
        (have - want).abs() <= tolerance,
        "{what}: {have} against {want}"
    );
}
