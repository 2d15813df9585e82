//! The conditions of a question in words, and by how much one is not met.

use super::format::{significant, time};
use crate::asked::Worst;
use crate::decimal::written;
use crate::goals::{Bounds, Goal};
use crate::sides::Side;
use crate::statement::Statement;

/// A condition to choose: in words, and as it is written.
#[derive(Clone, Debug, PartialEq)]
pub struct Choice {
    /// "Ondrel prevails".
    pub words: String,
    /// "x.prevails".
    pub text: String,
}

/// The conditions that can be chosen, with numbers from the engagement where they need one: half of a side left, a quarter
/// of it lost, the clock or a day.
pub fn choices(statement: &Statement) -> Vec<Choice> {
    let start = |side: Side| {
        let start = statement.terms.sides[side].start.now();
        start.filter(|start| *start > 0.0).unwrap_or(100.0)
    };
    let clock = statement.terms.until.and_then(|until| until.now());
    let day = clock.unwrap_or(statement.unit.in_a_day());
    let of_side = |side: Side| {
        let letter = side.letter();
        [
            format!("{letter}.prevails"),
            format!("{letter}.holds"),
            format!("{letter}.breaks"),
            format!("{letter}.end:{}..", written(two_digits(start(side) / 2.0))),
            format!("{letter}.lost:..{}", written(two_digits(start(side) / 4.0))),
        ]
    };
    let texts = Side::BOTH.into_iter().flat_map(of_side);
    let texts = texts.chain([format!("time:..{}", written(two_digits(day)))]);
    texts
        .filter_map(|text| {
            let words = goal(statement, &Goal::read(&text).ok()?);
            Some(Choice { words, text })
        })
        .collect()
}

fn two_digits(value: f64) -> f64 {
    crate::number::rounded(value, 2)
}

/// A condition as a clause: "Ondrel prevails", "at least 80 of Ondrel are left".
pub fn goal(statement: &Statement, goal: &Goal) -> String {
    let name = |side: Side| &statement.names[side];
    match *goal {
        Goal::Breaks(side) => format!("{} breaks", name(side)),
        Goal::Holds(side) => format!("{} holds", name(side)),
        Goal::Prevails(side) => format!("{} prevails", name(side)),
        Goal::End(side, bounds) => format!("{} of {} are left", within(bounds), name(side)),
        Goal::Lost(side, bounds) => format!("{} loses {}", name(side), within(bounds)),
        Goal::Time(bounds) => {
            let at = |value: f64| time(value, statement.unit);
            match (bounds.low, bounds.high) {
                (Some(low), Some(high)) => format!("it is over after {} to {}", at(low), at(high)),
                (Some(low), None) => format!("it lasts at least {}", at(low)),
                (None, Some(high)) => format!("it is over within {}", at(high)),
                (None, None) => "it ends at any time".into(),
            }
        }
    }
}

/// All conditions: "Ondrel prevails and at least 80 of Ondrel are left".
pub fn goals(statement: &Statement, all: &[Goal]) -> String {
    let clauses: Vec<String> = all.iter().map(|one| goal(statement, one)).collect();
    match clauses.split_last() {
        Some((last, first)) if !first.is_empty() => format!("{} and {last}", first.join(", ")),
        Some((last, _)) => last.clone(),
        None => String::new(),
    }
}

fn within(bounds: Bounds) -> String {
    let number = |value: f64| significant(value, 6);
    match (bounds.low, bounds.high) {
        (Some(low), Some(high)) => format!("{} to {}", number(low), number(high)),
        (Some(low), None) => format!("at least {}", number(low)),
        (None, Some(high)) => format!("at most {}", number(high)),
        (None, None) => "any number".into(),
    }
}

/// By how much the worst condition is not met: "leaves Ondrel 12 short", "leaves Vessary 31 above its break line".
pub fn short(statement: &Statement, all: &[Goal], worst: &Worst) -> String {
    let by = significant(worst.short.by, 3);
    let name = |side: Side| &statement.names[side];
    let above = |side: Side| match worst.short.by {
        0.0 => format!("brings {} to its break line and no further", name(side)),
        _ => format!("leaves {} {by} above its break line", name(side)),
    };
    let missing = |bounds: Bounds, under: String, over: String| match (bounds.low, bounds.high) {
        (None, _) => over,
        (_, None) => under,
        _ => format!("is {by} away"),
    };
    if let Some(side) = worst.short.unbroken {
        return above(side);
    }
    match all.get(worst.goal) {
        Some(Goal::Breaks(side)) => above(*side),
        Some(Goal::Holds(side) | Goal::Prevails(side)) => above(side.enemy()),
        Some(Goal::End(side, bounds)) => missing(
            *bounds,
            format!("leaves {} {by} short", name(*side)),
            format!("leaves {by} of {} too many", name(*side)),
        ),
        Some(Goal::Lost(side, bounds)) => missing(
            *bounds,
            format!("costs {} {by} too few", name(*side)),
            format!("costs {} {by} too many", name(*side)),
        ),
        Some(Goal::Time(bounds)) => {
            let by = time(worst.short.by, statement.unit);
            missing(
                *bounds,
                format!("is over {by} too soon"),
                format!("is over {by} too late"),
            )
        }
        None => String::new(),
    }
}
