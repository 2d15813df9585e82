//! Reference tables held against the answers, with a budget of error for each group of its rows.

use crate::tables::{self, Errors, Row, number, outcome, relative_error};
use serde_json::Value;
use std::collections::BTreeMap;

/// A group of rows, and the largest and the mean relative error that it may show, in parts of 1e-16.
pub type Budget = (&'static str, f64, f64);

/// A table, and what of its rows is held against the answers.
pub struct Table {
    /// Its file in `reference`.
    pub name: &'static str,
    /// The column that says of which group a row is.
    pub group: &'static str,
    /// The columns of words, which stand in the answer by the same names.
    pub words: &'static [&'static str],
    /// The columns of numbers, and where they stand in an answer.
    pub numbers: &'static [(&'static str, &'static str)],
    /// Of so many of them, the first, it counts too whether there is a number at all.
    pub whole: usize,
}

/// No row may be off by more, whatever its group's budget: a closed form by 1e-12, what is summed or integrated by 1e-11.
fn hard_limit(answer: &Value) -> f64 {
    if answer["method"] == "closed form" {
        1e-12
    } else {
        1e-11
    }
}

/// Holds every row of a table against its answer, and every group against its budget; prints the worst row of each.
///
/// # Panics
/// Where an answer has other words than its row, or a group is over its budget.
pub fn hold(table: &Table, budgets: &[Budget]) {
    let mut groups: BTreeMap<String, Errors> = BTreeMap::new();
    let mut wrong = Vec::new();
    for row in tables::read(table.name) {
        let answer = outcome(row.text("link"));
        wrong.extend(wrong_words(table, &row, &answer));
        let (error, column) = error_of(&row, &answer, table.numbers);
        let words = || format!("line {}, {column}: {}", row.line, row.text("link"));
        if error > hard_limit(&answer) || error.is_nan() {
            wrong.push(format!("off by {error:.2e}, {}", words()));
        }
        let group = groups.entry(row.text(table.group).to_owned()).or_default();
        group.add(error, words);
    }
    for (group, errors) in &groups {
        let (largest, mean) = (errors.largest() * 1e16, errors.mean() * 1e16);
        println!(
            "{group:24} {:3} rows, largest {largest:7.2}, mean {mean:6.2} e-16; {}",
            errors.count(),
            errors.worst()
        );
    }
    assert!(wrong.is_empty(), "{} wrong:\n{}", wrong.len(), wrong.join("\n"));
    let over: Vec<&String> = groups
        .iter()
        .filter(|(name, errors)| !keeps_budget(name, errors, budgets))
        .map(|group| group.0)
        .collect();
    assert!(
        over.is_empty(),
        "over their budget (see the rows above): {over:?}"
    );
    assert_eq!(
        groups.len(),
        budgets.len(),
        "a budget for a group that the table no longer has"
    );
}

fn keeps_budget(name: &str, errors: &Errors, budgets: &[Budget]) -> bool {
    let budget = budgets.iter().find(|budget| budget.0 == name);
    let (_, largest, mean) = *budget.unwrap_or_else(|| panic!("no budget for {name}"));
    errors.largest() <= largest * 1e-16 && errors.mean() <= mean * 1e-16
}

/// Who breaks, how it ended and who would be left are no matter of error, nor is whether there is a number at all.
fn wrong_words(table: &Table, row: &Row, answer: &Value) -> Vec<String> {
    let said = |column: &str, found: String| {
        format!(
            "line {}, {column} is {found} and not {:?}: {}",
            row.line,
            row.word(column),
            row.text("link")
        )
    };
    let words = table
        .words
        .iter()
        .filter(|column| answer[*column].as_str() != row.word(column))
        .map(|column| said(column, answer[*column].to_string()));
    let numbers = table.numbers[..table.whole]
        .iter()
        .filter(|(column, path)| number(answer, path).is_some() != row.number(column).is_some())
        .map(|(column, path)| said(column, format!("{:?}", number(answer, path))));
    words.chain(numbers).collect()
}

/// The largest relative error of a row over these columns and their places in the answer, and the column that has it.
fn error_of(row: &Row, answer: &Value, columns: &[(&'static str, &'static str)]) -> (f64, &'static str) {
    let mut worst = (0.0, "time");
    for &(column, path) in columns {
        let (Some(found), Some(known)) = (number(answer, path), row.number(column)) else {
            continue;
        };
        let error = relative_error(found, known);
        if error > worst.0 || error.is_nan() {
            worst = (error, column);
        }
    }
    worst
}
