//! Outcomes of schedules against a table of 30 digits, with a budget of error for each kind of its rows.
//!
//! `reference/schedules.py` made the table, by Taylor series in decimal arithmetic.

use aftercount_tests::budgets::error_of;
use aftercount_tests::tables::{self, Errors, Row, number, outcome};
use serde_json::Value;
use std::collections::{BTreeMap, BTreeSet};

/// The columns of numbers, and where they stand in an answer.
const COLUMNS: [(&str, &str); 9] = [
    ("time", "time"),
    ("x_end", "x.end"),
    ("y_end", "y.end"),
    ("x_fire", "x.losses.fire"),
    ("x_support", "x.losses.support"),
    ("x_wastage", "x.losses.wastage"),
    ("y_fire", "y.losses.fire"),
    ("y_support", "y.losses.support"),
    ("y_wastage", "y.losses.wastage"),
];

/// The largest and the mean relative error that a kind of rows may show, in parts of 1e-16; behind them what was
/// measured.
const BUDGETS: &[(&str, f64, f64)] = &[
    ("clock", 50_000.0, 1800.0),  // 16621.77, 606.37
    ("closing", 5000.0, 430.0),   // 1606.12, 142.60
    ("closing same", 13.0, 6.0),  // 4.12, 1.99
    ("endless", 4200.0, 560.0),   // 1378.61, 185.99
    ("from nothing", 37.0, 10.0), // 12.37, 3.32
    ("general", 34.0, 12.0),      // 11.19, 3.83
    ("hair", 470.0, 100.0),       // 155.19, 33.29
    ("hair closed", 12.0, 6.0),   // 3.77, 1.83
    ("linear", 44.0, 8.0),        // 14.59, 2.51
    ("moment", 7.0, 2.5),         // 2.16, 0.75
    ("moving lines", 80.0, 10.0), // 26.70, 3.14
    ("plain", 24.0, 7.0),         // 7.99, 2.17
    ("separable", 16.0, 8.0),     // 5.33, 2.53
    ("withdrawn", 12.0, 6.0),     // 3.83, 1.84
];

/// No row may be off by more, whatever its kind's budget: a closed form by 1e-12, what is integrated by 1e-11.
fn hard_limit(answer: &Value) -> f64 {
    if answer["method"] == "closed form" {
        1e-12
    } else {
        1e-11
    }
}

#[test]
fn every_kind_keeps_its_budget() {
    let mut kinds: BTreeMap<String, Errors> = BTreeMap::new();
    let mut wrong = Vec::new();
    for row in tables::read("schedules.tsv") {
        let answer = outcome(row.text("link"));
        wrong.extend(wrong_words(&row, &answer));
        let (error, column) = error_of(&row, &answer, &COLUMNS);
        let words = || format!("line {}, {column}: {}", row.line, row.text("link"));
        if error > hard_limit(&answer) || error.is_nan() {
            wrong.push(format!("off by {error:.2e}, {}", words()));
        }
        kinds
            .entry(row.text("kind").to_owned())
            .or_default()
            .add(error, words);
    }
    for (kind, errors) in &kinds {
        let (largest, mean) = (errors.largest() * 1e16, errors.mean() * 1e16);
        println!(
            "{kind:14} {:3} rows, largest {largest:8.2}, mean {mean:7.2} e-16; {}",
            errors.count(),
            errors.worst()
        );
    }
    assert!(wrong.is_empty(), "{} wrong:\n{}", wrong.len(), wrong.join("\n"));
    let over: Vec<&String> = kinds
        .iter()
        .filter(|(kind, errors)| !keeps_budget(kind, errors))
        .map(|kind| kind.0)
        .collect();
    assert!(
        over.is_empty(),
        "over their budget (see the rows above): {over:?}"
    );
    let budgeted: BTreeSet<&str> = BUDGETS.iter().map(|budget| budget.0).collect();
    let there: BTreeSet<&str> = kinds.keys().map(String::as_str).collect();
    assert_eq!(budgeted, there, "a budget for each kind, and no other");
}

fn keeps_budget(kind: &str, errors: &Errors) -> bool {
    let budget = BUDGETS.iter().find(|budget| budget.0 == kind);
    let (_, largest, mean) = *budget.unwrap_or_else(|| panic!("no budget for {kind}"));
    errors.largest() <= largest * 1e-16 && errors.mean() <= mean * 1e-16
}

/// Who breaks and how it ended are no matter of error, nor is whether there is a time.
fn wrong_words(row: &Row, answer: &Value) -> Vec<String> {
    let said = |column: &str, found: String| {
        format!(
            "line {}, {column} is {found} and not {:?}: {}",
            row.line,
            row.word(column),
            row.text("link")
        )
    };
    let words = ["breaks", "ended"]
        .into_iter()
        .filter(|column| answer[*column].as_str() != row.word(column))
        .map(|column| said(column, answer[column].to_string()));
    let numbers = COLUMNS[..3]
        .iter()
        .filter(|(column, path)| number(answer, path).is_some() != row.number(column).is_some())
        .map(|(column, path)| said(column, format!("{:?}", number(answer, path))));
    words.chain(numbers).collect()
}

#[test]
fn the_table_is_as_large_and_as_varied_as_it_should_be() {
    let rows = tables::read("schedules.tsv");
    assert!(rows.len() >= 450, "{} rows", rows.len());
    let with = |part: &str| rows.iter().filter(|row| row.text("link").contains(part)).count();
    for part in [
        ".join=",
        ".flow=",
        ".wastage=",
        "support.area=",
        "support.aimed=",
        "phase1.",
        ".reach=",
        "until=",
        ".start=0&",
        "=search&",
        "=power&",
        "=logarithmic&",
        "=area&",
        "=none&",
    ] {
        assert!(with(part) >= 15, "{} rows with {part}", with(part));
    }
    let clock = rows.iter().filter(|row| row.text("ended") == "clock").count();
    assert!(clock >= 30, "{clock} rows end at the clock");
}
