//! A map of two numbers in question in words.

use super::asked::happens;
use super::format::{per_cent, strength, three, time};
use super::slot;
use crate::asked::{Chart, FINEST, Second, Story};
use crate::outcome::Outcome;
use crate::picture::Table;
use crate::sides::Side;
use crate::slots::Slot;
use crate::statement::Statement;

/// What the map shows in one sentence. It begins "In this model", so that it stays true when it is copied alone.
pub fn sentence(statement: &Statement, chart: &Chart) -> String {
    of_shares(statement, chart.slots(), &chart.shares())
}

/// The same of a map as the batch door has it.
pub fn of_shares(statement: &Statement, slots: &[Slot; 2], shares: &[(Story, f64)]) -> String {
    let [one, other] = slots;
    let (one, other) = (slot::name(statement, one), slot::name(statement, other));
    let part = |(story, share): &(Story, f64)| {
        format!("{} on {} of the map", happens(statement, story), per_cent(*share))
    };
    let parts: Vec<String> = shares.iter().map(part).collect();
    if parts.is_empty() {
        return format!(
            "In this model, with {one} and {other} in question, each fight takes too much work for a map: ask for one of them, or \
             in a smaller range."
        );
    }
    format!(
        "In this model, with {one} and {other} in question: {}.",
        parts.join("; ")
    )
}

/// The place on the map and how it comes out there: "Ondrel's strength at the start 620, Vessary's strength at the start 410:
/// Vessary breaks first, after 8.2 h; left: Ondrel 455, Vessary 246; …".
pub fn reading(statement: &Statement, chart: &Chart, values: [f64; 2], outcome: &Outcome) -> String {
    let place = chart.slots().iter().zip(values).map(|(one, value)| {
        format!(
            "{} {}",
            slot::name(statement, one),
            slot::value(statement, one.unit, value)
        )
    });
    let place: Vec<String> = place.collect();
    let story = Story::of(outcome);
    let when = outcome
        .time
        .map(|at| format!(", after {}", time(at, statement.unit)));
    let left = |side: Side| {
        let end = outcome.sides()[side].end.unwrap_or(f64::INFINITY);
        format!("{} {}", statement.names[side], strength(end))
    };
    let ratio = outcome.loss_exchange_ratio.map(|ratio| {
        format!(
            "; {} loses {} for each 1 of {}",
            statement.names.y,
            three(ratio),
            statement.names.x
        )
    });
    format!(
        "{}: {}{}; left: {}, {}{}.",
        place.join(", "),
        happens(statement, &story),
        when.unwrap_or_default(),
        left(Side::X),
        left(Side::Y),
        ratio.unwrap_or_default()
    )
}

/// What a second reading is called.
pub fn second(statement: &Statement, second: Second) -> String {
    match second {
        Second::Time => format!("the time of the break ({})", statement.unit.symbol()),
        Second::LeftX => format!("what is left of {}", statement.names.x),
        Second::LeftY => format!("what is left of {}", statement.names.y),
        Second::ExchangeRatio => format!("{} lost for each 1 of {}", statement.names.y, statement.names.x),
    }
}

/// Where it was looked at, and how closely.
pub fn where_looked(statement: &Statement, chart: &Chart) -> String {
    let looked = chart
        .slots()
        .iter()
        .zip(chart.spans())
        .zip(chart.whys())
        .map(|((one, span), why)| {
            format!(
                "{} from {} to {}, {}",
                slot::name(statement, one),
                slot::value(statement, one.unit, span.low),
                slot::value(statement, one.unit, span.high),
                super::asked::why(why)
            )
        });
    let looked: Vec<String> = looked.collect();
    let cut_short = if chart.is_cut_short() {
        " Each of these fights takes much work, so looking was ended early: parts of the lines may be missing, or off by a \
         three-hundredth of the map."
    } else {
        ""
    };
    format!(
        "Looked at: {}; write `?low..high` behind a number to look elsewhere. {FINEST} × {FINEST} places where the outcome flips, \
         fewer elsewhere, {} fights in all: an island smaller than a fortieth of the map may be missed.{cut_short}",
        looked.join("; "),
        chart.fights()
    )
}

/// How it comes out at some places: a row for each value of the second number, the largest first, a column for each of the
/// first.
pub fn table(statement: &Statement, chart: &Chart) -> Table {
    const STEPS: usize = 6;
    let [one, other] = chart.slots();
    let place = |step: usize| step * FINEST / STEPS;
    let part = |step: usize| step as f64 / STEPS as f64;
    let values = |step: usize| chart.values([part(step), part(step)]);
    let mut heads = vec![format!(
        "{} ↓, {} →",
        slot::name(statement, other),
        slot::name(statement, one)
    )];
    heads.extend((0..=STEPS).map(|step| slot::six_with_unit(statement, one.unit, values(step)[0])));
    let row = |up: usize| {
        let cells = (0..=STEPS).map(|across| {
            let story = chart.story_at(place(across), place(up));
            let story = story.and_then(|story| chart.stories().get(story));
            story.map_or(String::new(), |story| happens(statement, story))
        });
        let first = slot::six_with_unit(statement, other.unit, values(up)[1]);
        std::iter::once(first).chain(cells).collect()
    };
    Table {
        heads,
        rows: (0..=STEPS).rev().map(row).collect(),
    }
}
