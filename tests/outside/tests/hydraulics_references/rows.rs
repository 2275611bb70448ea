//! Reads the data files and compares.

use serde_json::Value;
use std::path::PathBuf;

/// The records of a data file by column name.
pub(crate) fn records(name: &str) -> Vec<Record> {
    let path = PathBuf::from(env!("CARGO_MANIFEST_DIR"))
        .join("data/hydraulics")
        .join(name);
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_path(path)
        .unwrap();
    let names: Vec<String> = reader
        .headers()
        .unwrap()
        .iter()
        .map(str::to_owned)
        .collect();
    let records: Vec<Record> = reader
        .records()
        .map(|record| Record {
            names: names.clone(),
            fields: record.unwrap().iter().map(str::to_owned).collect(),
        })
        .collect();
    assert!(!records.is_empty(), "{name} is empty");
    records
}

/// One row.
#[derive(Debug)]
pub(crate) struct Record {
    names: Vec<String>,
    fields: Vec<String>,
}

impl Record {
    pub(crate) fn text(&self, column: &str) -> &str {
        let index = self.names.iter().position(|name| name == column);
        &self.fields[index.unwrap_or_else(|| panic!("no column {column}"))]
    }

    pub(crate) fn number(&self, column: &str) -> f64 {
        self.text(column).parse().unwrap()
    }

    pub(crate) fn id(&self) -> &str {
        self.text("id")
    }

    fn inputs(&self) -> Value {
        serde_json::from_str(self.text("inputs")).unwrap()
    }

    /// A number among the inputs of a fact.
    pub(crate) fn input(&self, key: &str) -> f64 {
        let inputs = self.inputs();
        inputs[key]
            .as_f64()
            .unwrap_or_else(|| panic!("{}: no input {key} in {inputs}", self.id()))
    }

    /// A word among the inputs of a fact.
    pub(crate) fn input_text(&self, key: &str) -> String {
        match &self.inputs()[key] {
            Value::String(text) => text.clone(),
            other => other.to_string(),
        }
    }

    /// Lowest and highest value the fact allows.
    fn range(&self) -> (f64, f64) {
        let expected: Value = serde_json::from_str(self.text("expected")).unwrap();
        if let Some(ends) = expected.as_array() {
            return (ends[0].as_f64().unwrap(), ends[1].as_f64().unwrap());
        }
        let value = expected.as_f64().unwrap();
        let tolerance = |column: &str| self.text(column).parse().unwrap_or(0.0);
        let slack = f64::max(tolerance("tol_abs"), tolerance("tol_rel") * value.abs());
        let slack = slack.max(1e-12 * value.abs());
        (value - slack, value + slack)
    }

    /// Compares with what the fact expects, in its unit.
    pub(crate) fn check(&self, found: f64) {
        let (low, high) = self.range();
        assert!(
            found >= low && found <= high,
            "{} ({}): {found} lies outside {low}..{high}; source: {}",
            self.id(),
            self.text("quantity"),
            self.text("source"),
        );
    }
}

/// Relative difference.
pub(crate) fn off(found: f64, expected: f64) -> f64 {
    (found / expected - 1.0).abs()
}
