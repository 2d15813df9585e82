//! The reference tables, the outcome as the command line gives it, and errors held to a budget.

use serde_json::Value;
use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

/// The folder of the whole project.
pub fn project() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR"))
        .parent()
        .expect("the tests lie in the project")
        .to_path_buf()
}

/// The text of a file of the project, by its path from the project's folder.
pub fn project_text(path: &str) -> String {
    std::fs::read_to_string(project().join(path)).unwrap_or_else(|why| panic!("{path}: {why}"))
}

/// A row of a table: its cells by the names of their columns.
#[derive(Clone, Debug)]
pub struct Row {
    /// The line of the file, counted from 1.
    pub line: usize,
    cells: BTreeMap<String, String>,
}

impl Row {
    /// The text of a cell.
    ///
    /// # Panics
    /// Where the table has no such column.
    pub fn text(&self, column: &str) -> &str {
        self.cells
            .get(column)
            .unwrap_or_else(|| panic!("line {}: no column {column}", self.line))
    }

    /// The text of a cell; `None` where the cell is empty.
    pub fn word(&self, column: &str) -> Option<&str> {
        Some(self.text(column)).filter(|text| !text.is_empty())
    }

    /// The double nearest to the digits of a cell; `None` where the cell is empty.
    ///
    /// # Panics
    /// Where the cell holds anything else.
    pub fn number(&self, column: &str) -> Option<f64> {
        let parse = |text: &str| {
            text.parse()
                .unwrap_or_else(|_| panic!("line {}: {column}", self.line))
        };
        self.word(column).map(parse)
    }
}

/// The rows of `reference/NAME`: cells between tabs, the names of the columns first, lines that begin with `# ` left out.
///
/// # Panics
/// Where the table is missing or ragged.
pub fn read(name: &str) -> Vec<Row> {
    let text = project_text(&format!("tests/reference/{name}"));
    let mut lines = text
        .lines()
        .enumerate()
        .filter(|(_, line)| !line.is_empty() && !line.starts_with("# "));
    let columns: Vec<&str> = lines
        .next()
        .map(|(_, line)| line.split('\t').collect())
        .unwrap_or_default();
    let row = |(at, line): (usize, &str)| {
        let cells: Vec<&str> = line.split('\t').collect();
        assert_eq!(cells.len(), columns.len(), "{name}, line {}: cells", at + 1);
        let named = columns
            .iter()
            .zip(cells)
            .map(|(column, cell)| (column.to_string(), cell.to_string()));
        Row {
            line: at + 1,
            cells: named.collect(),
        }
    };
    lines.map(row).collect()
}

/// The answer to a link, as the command line prints it.
///
/// # Panics
/// Where that is no JSON.
pub fn answer(link: &str) -> Value {
    let json = aftercount_core::answer::answer(link).to_json();
    serde_json::from_str(&json).unwrap_or_else(|why| panic!("{link}: {why}"))
}

/// The answer to a good link.
///
/// # Panics
/// Where the answer is a list of problems.
pub fn outcome(link: &str) -> Value {
    let answer = answer(link);
    assert_eq!(answer["ok"], Value::Bool(true), "{link}: {answer}");
    answer
}

/// The number at a path such as `x.losses.fire`; `None` for null.
///
/// # Panics
/// Where nothing stands there, or something that is no number.
pub fn number(answer: &Value, path: &str) -> Option<f64> {
    let found = path.split('.').fold(answer, |value, key| {
        value.get(key).unwrap_or_else(|| panic!("no {path} in {answer}"))
    });
    if found.is_null() {
        None
    } else {
        Some(found.as_f64().unwrap_or_else(|| panic!("{path}: {found}")))
    }
}

/// How far `found` is from `known`, in parts of `known`; what should be 0 must be 0.
pub fn relative_error(found: f64, known: f64) -> f64 {
    if found == known {
        0.0
    } else {
        (found - known).abs() / known.abs()
    }
}

/// Asserts that two numbers agree within so many parts of the second.
///
/// # Panics
/// Where they do not.
pub fn assert_close(found: f64, known: f64, within: f64, what: &str) {
    let error = relative_error(found, known);
    assert!(
        error <= within,
        "{what}: {found:e} for {known:e}, off by {error:.2e} of it"
    );
}

/// The errors of one group of rows.
#[derive(Clone, Debug, Default)]
pub struct Errors {
    count: usize,
    sum: f64,
    largest: f64,
    worst: String,
}

impl Errors {
    /// Adds the error of a row, with words that name it.
    pub fn add(&mut self, error: f64, row: impl FnOnce() -> String) {
        self.count += 1;
        self.sum += error;
        // A NaN counts as the worst of all.
        if self.worst.is_empty() || error > self.largest || error.is_nan() {
            self.largest = error;
            self.worst = row();
        }
    }

    /// The mean error.
    pub fn mean(&self) -> f64 {
        self.sum / self.count.max(1) as f64
    }

    /// The largest error.
    pub fn largest(&self) -> f64 {
        self.largest
    }

    /// How many rows there were.
    pub fn count(&self) -> usize {
        self.count
    }

    /// The row of the largest error.
    pub fn worst(&self) -> &str {
        &self.worst
    }
}
