//! Outcomes of schedules against a table of 30 digits, with a budget of error for each kind of its rows.
//!
//! `reference/schedules.py` made the table, by Taylor series in decimal arithmetic.

use aftercount_tests::budgets::{self, Budget, Table};
use aftercount_tests::tables;

const TABLE: Table = Table {
    name: "schedules.tsv",
    group: "kind",
    words: &["breaks", "ended"],
    numbers: &[
        ("time", "time"),
        ("x_end", "x.end"),
        ("y_end", "y.end"),
        ("x_fire", "x.losses.fire"),
        ("x_support", "x.losses.support"),
        ("x_wastage", "x.losses.wastage"),
        ("y_fire", "y.losses.fire"),
        ("y_support", "y.losses.support"),
        ("y_wastage", "y.losses.wastage"),
    ],
    whole: 3,
};

/// The largest and the mean relative error that a kind of rows may show, in parts of 1e-16; behind them what was
/// measured.
const BUDGETS: &[Budget] = &[
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

#[test]
fn every_kind_keeps_its_budget() {
    budgets::hold(&TABLE, BUDGETS);
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
