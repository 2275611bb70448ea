//! `cargo task evaluate FILE`: the findings of a saved book.

use crate::say;
use crate::trouble::Trouble;
use std::fs;
use std::process::ExitCode;
use words::{Language, Words};
use workbook::book::Book;
use workbook::format::{self, FileTrouble};
use workbook::report::{self, Sayings};
use workbook::units::UnitSystem;

/// Prints the report as JSON; the exit code is the verdict's.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    let [path] = arguments else {
        return Err(Trouble::new(
            "One file is evaluated at a time.",
            "`cargo task evaluate FILE`, with a book saved from the page.",
        ));
    };
    let bytes = fs::read(path).map_err(|error| {
        Trouble::new(
            format!("Could not read {path}: {error}."),
            "Give the path of a book saved from the page.",
        )
    })?;
    let (json, code) = evaluated(&bytes).map_err(|trouble| {
        Trouble::new(
            format!("{path}: {}", words().file_trouble(&trouble)),
            "Save the book from the page again, or take an earlier copy.",
        )
    })?;
    say::line(&json);
    Ok(ExitCode::from(code))
}

fn words() -> Words {
    Words::new(Language::English, UnitSystem::Metric)
}

/// The report of the book in a file, as JSON, and the exit code.
fn evaluated(bytes: &[u8]) -> Result<(String, u8), FileTrouble> {
    let book = format::read(bytes)?;
    let found = workbook::evaluate(&book);
    let code = report::exit_code(found.judged.verdict);
    Ok((report_text(&book, &found), code))
}

fn report_text(book: &Book, found: &workbook::Findings) -> String {
    let about = words().about(book);
    let report = report::report(
        book,
        found,
        Sayings {
            gap: &|gap| about.gap(gap),
            assumption: &|assumption| about.assumption(assumption),
            caution: &|caution| {
                let text = about.caution(caution);
                format!("{}: {}", text.title, text.body)
            },
        },
    );
    // Numbers that are known are finite, and nothing else can fail.
    serde_json::to_string_pretty(&report).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;
    use workbook::demo::demo;

    #[test]
    fn the_demo_is_evaluated_and_unsettled_without_a_closing_time() {
        let mut book = demo("demo");
        let text = format::write(&book).unwrap();
        let (json, code) = evaluated(text.as_bytes()).unwrap();
        let report: serde_json::Value = serde_json::from_str(&json).unwrap();
        assert_eq!(report["invented"], true);
        assert_eq!(code, 0);
        book.surge.closing_time_s = workbook::Entry::default();
        let text = format::write(&book).unwrap();
        assert_eq!(evaluated(text.as_bytes()).unwrap().1, 3);
        assert!(report["flow_m3_s"].as_f64().is_some_and(|flow| flow > 0.0));
        assert!(
            report["cautions"]
                .as_array()
                .is_some_and(|all| !all.is_empty())
        );
    }

    #[test]
    fn what_is_no_book_ends_with_2_and_its_reason() {
        let file = std::env::temp_dir().join(format!("fallwright-no-book-{}", std::process::id()));
        fs::write(&file, "{\"format\": 1,").unwrap();
        let path = file.to_string_lossy().into_owned();
        let code = crate::run(&["evaluate".to_owned(), path.clone()]);
        assert_eq!(format!("{code:?}"), format!("{:?}", ExitCode::from(2)));
        assert!(run(&[path]).is_err());
        fs::remove_file(&file).unwrap();
        assert!(
            run(&["no such file".to_owned()])
                .unwrap_err()
                .to_string()
                .contains("no such file")
        );
        assert!(run(&[]).is_err());
    }
}
