//! The outcomes against tables of 45 digits, with a budget of error for each group of their rows.
//!
//! `reference/pure_fights.py` and `reference/every_law.py` made the tables, by arithmetic of their own.

use aftercount_tests::budgets::{self, Budget, Table};
use aftercount_tests::tables;

/// The largest and the mean relative error that a group may show, in parts of 1e-16; behind them what was measured.
const PURE_FIGHTS: &[Budget] = &[
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

/// The same for the pairings with logarithmic, search or power fire in them.
const EVERY_LAW: &[Budget] = &[
    ("aimed/logarithmic clock", 18.0, 6.0),      // 7.03, 2.04
    ("aimed/logarithmic ends", 6.0, 3.0),        // 2.15, 0.92
    ("aimed/logarithmic near", 8.0, 3.0),        // 3.03, 0.96
    ("aimed/power clock", 26.0, 6.0),            // 10.08, 2.25
    ("aimed/power ends", 23.0, 5.0),             // 8.82, 1.77
    ("aimed/power near", 15.0, 4.0),             // 5.62, 1.46
    ("aimed/search clock", 6.0, 3.0),            // 2.38, 1.18
    ("aimed/search ends", 15.0, 4.0),            // 5.79, 1.59
    ("aimed/search near", 20.0, 6.0),            // 7.74, 2.05
    ("area/logarithmic clock", 6.0, 4.0),        // 2.06, 1.22
    ("area/logarithmic ends", 6.0, 2.0),         // 1.95, 0.32
    ("area/logarithmic near", 6.0, 3.0),         // 2.03, 0.85
    ("area/power clock", 37.0, 9.0),             // 14.49, 3.35
    ("area/power ends", 17.0, 5.0),              // 6.59, 1.99
    ("area/power near", 11.0, 5.0),              // 4.26, 1.74
    ("area/search clock", 10.0, 6.0),            // 3.67, 2.19
    ("area/search ends", 10.0, 4.0),             // 3.70, 1.28
    ("area/search near", 8.0, 3.0),              // 2.98, 1.08
    ("logarithmic/aimed clock", 6.0, 3.0),       // 1.91, 1.10
    ("logarithmic/aimed ends", 7.0, 2.0),        // 2.50, 0.50
    ("logarithmic/aimed near", 6.0, 2.0),        // 1.73, 0.33
    ("logarithmic/area clock", 6.0, 3.0),        // 2.22, 1.15
    ("logarithmic/area ends", 6.0, 3.0),         // 1.91, 1.02
    ("logarithmic/area near", 7.0, 3.0),         // 2.49, 0.83
    ("logarithmic/logarithmic clock", 6.0, 3.0), // 2.17, 1.00
    ("logarithmic/logarithmic ends", 7.0, 2.0),  // 2.52, 0.54
    ("logarithmic/logarithmic near", 6.0, 2.0),  // 1.64, 0.69
    ("logarithmic/none clock", 6.0, 2.0),        // 1.65, 0.73
    ("logarithmic/none ends", 6.0, 2.0),         // 1.81, 0.34
    ("logarithmic/power clock", 19.0, 5.0),      // 7.38, 1.88
    ("logarithmic/power ends", 7.0, 3.0),        // 2.45, 0.92
    ("logarithmic/power near", 20.0, 2.0),       // 7.95, 0.76
    ("logarithmic/search clock", 6.0, 4.0),      // 2.22, 1.21
    ("logarithmic/search ends", 6.0, 2.0),       // 2.06, 0.68
    ("logarithmic/search near", 6.0, 2.0),       // 2.07, 0.71
    ("none/logarithmic clock", 6.0, 2.0),        // 1.75, 0.44
    ("none/logarithmic ends", 6.0, 2.0),         // 1.73, 0.69
    ("none/power clock", 7.0, 5.0),              // 2.76, 1.65
    ("none/power ends", 17.0, 6.0),              // 6.60, 2.17
    ("none/search clock", 6.0, 3.0),             // 1.67, 1.07
    ("none/search ends", 9.0, 4.0),              // 3.46, 1.22
    ("power/aimed clock", 20.0, 7.0),            // 7.83, 2.46
    ("power/aimed ends", 15.0, 5.0),             // 5.72, 1.83
    ("power/aimed near", 23.0, 6.0),             // 8.82, 2.12
    ("power/area clock", 13.0, 6.0),             // 4.81, 2.39
    ("power/area ends", 16.0, 5.0),              // 6.27, 1.72
    ("power/area near", 10.0, 3.0),              // 3.64, 1.19
    ("power/logarithmic clock", 6.0, 3.0),       // 2.11, 1.14
    ("power/logarithmic ends", 6.0, 2.0),        // 2.16, 0.20
    ("power/logarithmic near", 6.0, 2.0),        // 2.11, 0.25
    ("power/none clock", 6.0, 2.0),              // 1.28, 0.62
    ("power/none ends", 12.0, 3.0),              // 4.44, 0.82
    ("power/power clock", 189.0, 17.0),          // 75.43, 6.63
    ("power/power ends", 56.0, 6.0),             // 22.03, 2.32
    ("power/power near", 24.0, 7.0),             // 9.21, 2.48
    ("power/search clock", 25.0, 6.0),           // 9.77, 2.21
    ("power/search ends", 21.0, 5.0),            // 8.19, 1.84
    ("power/search near", 35.0, 7.0),            // 13.76, 2.59
    ("search/aimed clock", 27.0, 9.0),           // 10.54, 3.53
    ("search/aimed ends", 11.0, 4.0),            // 4.33, 1.43
    ("search/aimed near", 7.0, 2.0),             // 2.77, 0.78
    ("search/area clock", 6.0, 3.0),             // 1.93, 0.95
    ("search/area ends", 14.0, 6.0),             // 5.33, 2.09
    ("search/area near", 10.0, 4.0),             // 3.77, 1.24
    ("search/logarithmic clock", 6.0, 3.0),      // 2.15, 0.97
    ("search/logarithmic ends", 6.0, 2.0),       // 1.87, 0.54
    ("search/logarithmic near", 6.0, 3.0),       // 2.06, 0.86
    ("search/none clock", 21.0, 7.0),            // 8.23, 2.73
    ("search/none ends", 6.0, 3.0),              // 2.09, 0.81
    ("search/power clock", 33.0, 9.0),           // 12.88, 3.45
    ("search/power ends", 15.0, 6.0),            // 5.84, 2.30
    ("search/power near", 13.0, 6.0),            // 5.17, 2.15
    ("search/search clock", 10.0, 5.0),          // 3.62, 1.69
    ("search/search ends", 15.0, 4.0),           // 5.62, 1.22
    ("search/search near", 6.0, 2.0),            // 2.31, 0.60
];

/// Both tables have the same columns.
fn table(name: &'static str) -> Table {
    Table {
        name,
        group: "group",
        words: &["breaks", "ended", "to_the_last"],
        numbers: &[
            ("time", "time"),
            ("x_end", "x.end"),
            ("y_end", "y.end"),
            ("below_one", "below_one"),
            ("x_lost", "x.losses.all"),
            ("y_lost", "y.losses.all"),
        ],
        whole: 6,
    }
}

#[test]
fn pure_fights_keep_their_budgets() {
    budgets::hold(&table("pure_fights.tsv"), PURE_FIGHTS);
}

#[test]
fn every_law_keeps_its_budgets() {
    budgets::hold(&table("every_law.tsv"), EVERY_LAW);
}

/// Rows near a tie are the hard ones.
#[test]
fn the_tables_are_as_large_and_as_hard_as_they_should_be() {
    for (name, least) in [("pure_fights.tsv", 400), ("every_law.tsv", 700)] {
        let rows = tables::read(name);
        let hard = rows.iter().filter(|row| {
            ["near", "parity", "tie"]
                .iter()
                .any(|kind| row.text("group").ends_with(kind))
        });
        assert!(rows.len() >= least, "{name}: {} rows", rows.len());
        assert!(
            hard.count() * 3 >= rows.len(),
            "{name}: a third of the rows lie near a tie"
        );
    }
}
