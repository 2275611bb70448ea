//! `cargo task schema`: the schemas that are shipped with the page.

use crate::trouble::Trouble;
use crate::{places, say};
use std::fs;
use std::process::ExitCode;

/// The files in `www/` and what belongs into them.
fn files() -> [(&'static str, String); 2] {
    [
        ("book.schema.json", workbook::format::schema()),
        ("report.schema.json", workbook::report::schema()),
    ]
}

/// Writes the schema of the book's file and of the report into `www/`.
pub(crate) fn run(_: &[String]) -> Result<ExitCode, Trouble> {
    for (name, text) in files() {
        let path = places::root().join("www").join(name);
        fs::write(&path, text).map_err(|error| Trouble::file("write", &path, &error))?;
        say::note(&format!("www/{name}"));
    }
    Ok(ExitCode::SUCCESS)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_shipped_schemas_are_those_of_the_types() {
        for (name, text) in files() {
            let shipped = fs::read_to_string(places::root().join("www").join(name)).unwrap();
            assert!(
                shipped == text,
                "www/{name} is out of date: run `cargo task schema`"
            );
        }
    }
}
