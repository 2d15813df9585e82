//! The outcomes against a table of 45 digits, with a budget of error for each group of its rows.
//!
//! `reference/pure_fights.py` made the table, by arithmetic of its own.

use aftercount_tests::tables::{self, Errors, Row, number, outcome, relative_error};
use serde_json::Value;
use std::collections::BTreeMap;

/// No row may be off by more, whatever its group's budget.
const HARD_LIMIT: f64 = 1e-12;

/// The columns of numbers, and where they stand in an answer.
const COLUMNS: [(&str, &str); 6] = [
    ("time", "time"),
    ("x_end", "x.end"),
    ("y_end", "y.end"),
    ("below_one", "below_one"),
    ("x_lost", "x.losses.all"),
    ("y_lost", "y.losses.all"),
];

/// The largest and the mean relative error that a group may show, in parts of 1e-16; behind them what was measured.
const BUDGETS: &[(&str, f64, f64)] = &[
    ("aimed/aimed clock", 52.0, 6.0), // 20.56, 2.96
    ("aimed/aimed last", 6.0, 3.0),   // 2.15, 1.27
    ("aimed/aimed lines", 14.0, 3.0), // 5.47, 1.34
    ("aimed/aimed near", 9.0, 3.0),   // 3.52, 1.29
    ("aimed/aimed parity", 6.0, 2.0), // 2.11, 1.00
    ("aimed/aimed tie", 8.0, 2.5),    // 2.98, 1.14
    ("aimed/area clock", 23.0, 6.0),  // 9.18, 2.94
    ("aimed/area last", 7.0, 2.5),    // 2.78, 1.05
    ("aimed/area lines", 9.0, 2.0),   // 3.41, 0.97
    ("aimed/area near", 10.0, 3.0),   // 3.70, 1.28
    ("aimed/area parity", 11.0, 2.0), // 4.06, 0.99
    ("aimed/area tie", 9.0, 2.0),     // 3.23, 1.00
    ("aimed/none clock", 3.0, 1.0),   // 0.00, 0.00
    ("aimed/none last", 5.0, 1.0),    // 1.67, 0.42
    ("aimed/none lines", 4.0, 1.0),   // 1.49, 0.46
    ("area/aimed clock", 10.0, 4.5),  // 3.93, 2.11
    ("area/aimed last", 6.0, 2.0),    // 2.21, 0.90
    ("area/aimed lines", 9.0, 2.5),   // 3.36, 1.14
    ("area/aimed near", 11.0, 2.5),   // 4.24, 1.12
    ("area/aimed parity", 6.0, 2.5),  // 2.22, 1.10
    ("area/aimed tie", 8.0, 3.5),     // 3.03, 1.67
    ("area/area clock", 10.0, 3.5),   // 3.73, 1.63
    ("area/area last", 5.0, 2.0),     // 1.89, 0.80
    ("area/area lines", 6.0, 2.0),    // 2.08, 0.77
    ("area/area near", 10.0, 2.0),    // 3.79, 0.95
    ("area/area parity", 6.0, 2.0),   // 2.08, 0.82
    ("area/area tie", 5.0, 2.0),      // 1.72, 0.81
    ("area/none clock", 8.0, 2.0),    // 3.15, 0.99
    ("area/none last", 3.0, 1.0),     // 0.00, 0.00
    ("area/none lines", 6.0, 3.0),    // 2.20, 1.38
    ("none/aimed clock", 24.0, 5.0),  // 9.56, 2.27
    ("none/aimed last", 3.0, 1.0),    // 1.16, 0.29
    ("none/aimed lines", 6.0, 1.0),   // 2.14, 0.36
    ("none/area clock", 7.0, 3.5),    // 2.53, 1.55
    ("none/area last", 5.0, 2.0),     // 1.71, 0.85
    ("none/area lines", 6.0, 2.0),    // 2.04, 0.82
];

#[test]
fn every_group_keeps_its_budget() {
    let mut groups: BTreeMap<String, Errors> = BTreeMap::new();
    let mut wrong = Vec::new();
    for row in tables::read("pure_fights.tsv") {
        let answer = outcome(row.text("link"));
        wrong.extend(wrong_words(&row, &answer));
        let (error, column) = error_of(&row, &answer);
        let words = || format!("line {}, {column}: {}", row.line, row.text("link"));
        groups
            .entry(row.text("group").to_owned())
            .or_default()
            .add(error, words);
    }
    for (group, errors) in &groups {
        let (largest, mean) = (errors.largest() * 1e16, errors.mean() * 1e16);
        println!(
            "{group:18} {:3} rows, largest {largest:6.2}, mean {mean:5.2} e-16; {}",
            errors.count(),
            errors.worst()
        );
    }
    assert_eq!(wrong, Vec::<String>::new());
    let broken: Vec<&String> = groups
        .iter()
        .filter(|(name, errors)| !keeps_budget(name, errors))
        .map(|group| group.0)
        .collect();
    assert!(
        broken.is_empty(),
        "over their budget (see the rows above): {broken:?}"
    );
    assert_eq!(
        groups.len(),
        BUDGETS.len(),
        "a budget for a group that the table no longer has"
    );
}

fn keeps_budget(name: &str, errors: &Errors) -> bool {
    let budget = BUDGETS.iter().find(|budget| budget.0 == name);
    let (_, largest, mean) = *budget.unwrap_or_else(|| panic!("no budget for {name}"));
    errors.largest() <= HARD_LIMIT && errors.largest() <= largest * 1e-16 && errors.mean() <= mean * 1e-16
}

/// Who breaks, how it ended and who would be left are no matter of error, nor is whether there is a number at all.
fn wrong_words(row: &Row, answer: &Value) -> Vec<String> {
    let words = ["breaks", "ended", "to_the_last"]
        .into_iter()
        .filter(|column| answer[*column].as_str() != row.word(column))
        .map(|column| {
            format!(
                "line {}, {column} is {}: {}",
                row.line,
                answer[column],
                row.text("link")
            )
        });
    let numbers = COLUMNS
        .into_iter()
        .filter(|(column, path)| number(answer, path).is_some() != row.number(column).is_some())
        .map(|(column, path)| {
            format!(
                "line {}, {column} is {:?}: {}",
                row.line,
                number(answer, path),
                row.text("link")
            )
        });
    words.chain(numbers).collect()
}

/// The largest relative error of a row, and the column that has it.
fn error_of(row: &Row, answer: &Value) -> (f64, &'static str) {
    let mut worst = (0.0, "time");
    for (column, path) in COLUMNS {
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

#[test]
fn the_table_is_as_large_and_as_hard_as_it_should_be() {
    let rows = tables::read("pure_fights.tsv");
    let hard = rows.iter().filter(|row| {
        ["near", "parity", "tie"]
            .iter()
            .any(|kind| row.text("group").ends_with(kind))
    });
    assert!(rows.len() >= 400, "{} rows", rows.len());
    assert!(
        hard.count() * 3 >= rows.len(),
        "a third of the rows lie near a tie"
    );
}
