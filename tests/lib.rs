//! What the test targets share: reading `tests/reference`.

use std::collections::BTreeMap;

use serde::Deserialize;
use toml::Value;

/// The README, so that its Rust is run with the doc tests.
#[cfg(doctest)]
#[doc = include_str!("../README.md")]
pub struct Readme;

/// The cases and tables of one reference file, by their id.
pub struct Reference {
    /// Worked examples.
    pub cases: BTreeMap<String, Case>,
    /// Published tables.
    pub tables: BTreeMap<String, Table>,
}

/// One worked example.
#[derive(Deserialize)]
pub struct Case {
    /// Its name in the file.
    pub id: String,
    /// Who published it.
    pub source: String,
    /// `page`, `memory` or `computed`.
    pub confidence: String,
    inputs: toml::Table,
    expected: toml::Table,
    /// How far a result may differ, and why.
    pub tolerance: String,
}

/// One published table.
#[derive(Deserialize)]
pub struct Table {
    /// Its name in the file.
    pub id: String,
    /// Who published it.
    pub source: String,
    /// `page`, `memory` or `computed`.
    pub confidence: String,
    /// Column names, with units.
    pub columns: Vec<String>,
    /// Rows as they stand.
    pub rows: Vec<Vec<Value>>,
}

#[derive(Deserialize)]
struct File {
    #[serde(default)]
    case: Vec<Case>,
    #[serde(default)]
    table: Vec<Table>,
}

impl Reference {
    /// Reads `tests/reference/NAME`.
    ///
    /// # Panics
    /// Where the file is missing, is no TOML, or an id stands twice: the tests rest on it.
    pub fn read(name: &str) -> Self {
        let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("reference").join(name);
        let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{name}: {e}"));
        let file: File = toml::from_str(&text).unwrap_or_else(|e| panic!("{name}: {e}"));
        let (case_count, table_count) = (file.case.len(), file.table.len());
        let cases: BTreeMap<_, _> = file.case.into_iter().map(|case| (case.id.clone(), case)).collect();
        let tables: BTreeMap<_, _> = file.table.into_iter().map(|table| (table.id.clone(), table)).collect();
        assert_eq!((cases.len(), tables.len()), (case_count, table_count), "{name}: an id stands twice");
        Self { cases, tables }
    }
}

impl Case {
    /// A number among the inputs.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn input(&self, key: &str) -> f64 {
        self.number(&self.inputs, key)
    }

    /// A list of numbers among the inputs.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn inputs(&self, key: &str) -> Vec<f64> {
        self.numbers(&self.inputs, key)
    }

    /// A list of texts among the inputs.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn input_texts(&self, key: &str) -> Vec<String> {
        let texts = self.inputs.get(key).and_then(Value::as_array);
        let texts = texts.map(|list| list.iter().filter_map(|v| v.as_str().map(str::to_owned)).collect());
        texts.unwrap_or_else(|| panic!("{}: no list '{key}'", self.id))
    }

    /// A number among the published results.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn expected(&self, key: &str) -> f64 {
        self.number(&self.expected, key)
    }

    /// A list of numbers among the published results.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn expected_list(&self, key: &str) -> Vec<f64> {
        self.numbers(&self.expected, key)
    }

    /// A text among the published results.
    ///
    /// # Panics
    /// Where there is none of that name.
    pub fn expected_text(&self, key: &str) -> &str {
        self.expected
            .get(key)
            .and_then(Value::as_str)
            .unwrap_or_else(|| panic!("{}: no text '{key}'", self.id))
    }

    /// Fails where a result differs from the published one by more than the tolerance.
    ///
    /// # Panics
    /// With source, both figures and the tolerance's reason.
    pub fn check(&self, key: &str, result: f64, tolerance: f64) {
        self.close(key, result, self.expected(key), tolerance);
    }

    /// As [`Case::check`], for a figure that is part of a list.
    ///
    /// # Panics
    /// With source, both figures and the tolerance's reason.
    pub fn close(&self, what: &str, result: f64, published: f64, tolerance: f64) {
        assert!(
            (result - published).abs() <= tolerance,
            "{}, {what}: {result}, published {published} ({}, {}; {})",
            self.id,
            self.source,
            self.confidence,
            self.tolerance
        );
    }

    fn number(&self, table: &toml::Table, key: &str) -> f64 {
        table.get(key).and_then(number).unwrap_or_else(|| panic!("{}: no number '{key}'", self.id))
    }

    fn numbers(&self, table: &toml::Table, key: &str) -> Vec<f64> {
        let list = table.get(key).and_then(Value::as_array);
        let list = list.and_then(|list| list.iter().map(number).collect());
        list.unwrap_or_else(|| panic!("{}: no list '{key}'", self.id))
    }
}

/// A whole or decimal number.
pub fn number(value: &Value) -> Option<f64> {
    // Whole figures in the reference are far below 2^53.
    #[allow(clippy::cast_precision_loss)]
    value.as_float().or_else(|| value.as_integer().map(|whole| whole as f64))
}
