//! The figures under the sentence, to six significant digits.

use super::format::{per_cent, six, three};
use crate::fight::break_line;
use crate::outcome::{Ended, Method, Outcome, ToTheLast};
use crate::sides::{Both, Side};
use crate::statement::{Statement, Values};

/// A figure of each side.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// What it is, with its unit.
    pub label: String,
    /// Its text for each side.
    pub values: Both<String>,
}

/// The figures of an outcome.
#[derive(Clone, Debug, PartialEq)]
pub struct Figures {
    /// The names of the sides, which head the columns.
    pub names: Both<String>,
    /// A figure of each side a row.
    pub rows: Vec<Row>,
    /// What concerns both, as label and text.
    pub both: Vec<(String, String)>,
}

/// The figures of `outcome`.
pub fn figures(statement: &Statement, outcome: &Outcome) -> Figures {
    let sides = outcome.sides();
    let counted = &statement.counted;
    let engagement = statement.engagement(&Values::new());
    let row = |label: String, value: &dyn Fn(Side) -> String| Row {
        label,
        values: Both::of(value),
    };
    let mut rows = vec![row(format!("At the start ({counted})"), &|side| {
        six(sides[side].start)
    })];
    if Side::BOTH.iter().any(|side| engagement.sides[*side].lost > 0.0) {
        rows.push(row(format!("Lost before ({counted})"), &|side| {
            six(engagement.sides[side].lost)
        }));
        rows.push(row(format!("Committed in all ({counted})"), &|side| {
            six(sides[side].committed)
        }));
    }
    rows.push(row(
        format!("Breaks at ({counted} left)"),
        &|side| match f64::from(break_line(&engagement, side)) {
            0.0 => "to the last".into(),
            line => six(line),
        },
    ));
    let end = if outcome.ended == Ended::Limit {
        "Tends to"
    } else {
        "Left at the end"
    };
    rows.push(row(format!("{end} ({counted})"), &|side| {
        sides[side].end.map_or("without bound".into(), six)
    }));
    rows.push(row(format!("Losses ({counted})"), &|side| {
        six(sides[side].losses.all)
    }));
    rows.push(row("Lost, of all committed".into(), &|side| {
        per_cent((sides[side].losses.all + engagement.sides[side].lost) / sides[side].committed)
    }));
    Figures {
        names: statement.names.clone(),
        rows,
        both: both(statement, outcome),
    }
}

fn both(statement: &Statement, outcome: &Outcome) -> Vec<(String, String)> {
    let unit = statement.unit.symbol();
    let names = &statement.names;
    let mut lines = Vec::new();
    let mut line = |label: &str, text: String| lines.push((label.to_owned(), text));
    if let Some(time) = outcome.time {
        line("Time of the break", format!("{} {unit}", six(time)));
    } else if let Some(clock) = outcome.pieces.last().and_then(|piece| piece.to) {
        line("Cut off by the clock at", format!("{} {unit}", six(clock)));
    }
    if let Some(below) = outcome.below_one {
        line("A side falls below one at", format!("{} {unit}", six(below)));
    }
    if let Some(ratio) = outcome.loss_exchange_ratio {
        line("Loss exchange ratio", exchange(names, ratio, ""));
    }
    if let Some(ratio) = outcome.fractional_exchange_ratio {
        line("Fractional exchange ratio", exchange(names, ratio, " %"));
    }
    let last = match outcome.to_the_last {
        Some(ToTheLast::X) => format!("{} would be left", names.x),
        Some(ToTheLast::Y) => format!("{} would be left", names.y),
        Some(ToTheLast::Parity) => "neither: the two are at parity".into(),
        None => "undecided: nothing takes effect".into(),
    };
    line("If both fought to the last", last);
    line("Solved by", method(outcome.method).into());
    lines
}

/// A ratio of Y's losses to X's in words, the larger side first: "Ondrel loses 1.01 for each 1 of Vessary".
fn exchange(names: &Both<String>, ratio: f64, unit: &str) -> String {
    if ratio > 1.0 {
        format!(
            "{} loses {}{unit} for each 1{unit} of {}",
            names.y,
            three(ratio),
            names.x
        )
    } else if ratio > 0.0 {
        format!(
            "{} loses {}{unit} for each 1{unit} of {}",
            names.x,
            three(1.0 / ratio),
            names.y
        )
    } else {
        format!("{} loses none", names.y)
    }
}

fn method(method: Method) -> &'static str {
    match method {
        Method::ClosedForm => "closed form",
    }
}
