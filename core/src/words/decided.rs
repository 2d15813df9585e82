//! What decided an engagement, said only where a computation shows it.

use super::format::{strength, three};
use crate::fight::{Effort, fight};
use crate::outcome::{Breaks, Outcome};
use crate::sides::Side;
use crate::statement::{Statement, Values};
use crate::terms::Engagement;

/// What a reserve did or failed to do: "Vessary's reserve of 64 came 0.4 h too late" where at any time more than 0.4 h
/// earlier the outcome is another; `None` where no reserve is shown to have decided.
pub fn decided(statement: &Statement, outcome: &Outcome) -> Option<String> {
    let loser = match outcome.breaks {
        Breaks::X => Side::X,
        Breaks::Y => Side::Y,
        Breaks::Both | Breaks::Neither => return None,
    };
    let engagement = statement.engagement(&Values::new());
    too_late(statement, &engagement, outcome, loser)
        .or_else(|| in_time(statement, &engagement, outcome, loser.enemy()))
}

fn breaks_with(
    engagement: &Engagement,
    side: Side,
    join: usize,
    change: impl Fn(&mut f64, &mut f64),
) -> Breaks {
    let mut other = engagement.clone();
    let join = &mut other.sides[side].joins[join];
    change(&mut join.size, &mut join.time);
    fight(&other, Effort::Outcome).outcome.breaks
}

/// A reserve of the side that broke which would have turned the outcome, had it come sooner.
fn too_late(
    statement: &Statement,
    engagement: &Engagement,
    outcome: &Outcome,
    loser: Side,
) -> Option<String> {
    let joins = &engagement.sides[loser].joins;
    let place = (0..joins.len()).find(|place| {
        let join = &joins[*place];
        let sooner = |_: &mut f64, time: &mut f64| *time = 0.0;
        join.size > 0.0 && join.time > 0.0 && breaks_with(engagement, loser, *place, sooner) != outcome.breaks
    })?;
    let at = joins[place].time;
    let turns = |time: f64| breaks_with(engagement, loser, place, |_, at| *at = time) != outcome.breaks;
    let last = last_that(turns, 0.0, at);
    Some(format!(
        "{}'s reserve of {} came {}\u{a0}{} too late: up to {}\u{a0}{} it would have turned the outcome.",
        statement.names[loser],
        strength(joins[place].size),
        three(at - last),
        statement.unit.symbol(),
        three(last),
        statement.unit.symbol()
    ))
}

/// A reserve of the other side without which it would itself have broken.
fn in_time(
    statement: &Statement,
    engagement: &Engagement,
    outcome: &Outcome,
    winner: Side,
) -> Option<String> {
    let joins = &engagement.sides[winner].joins;
    let place = (0..joins.len()).find(|place| {
        let gone = |size: &mut f64, _: &mut f64| *size = 0.0;
        joins[*place].size > 0.0 && breaks_with(engagement, winner, *place, gone) != outcome.breaks
    })?;
    let at = joins[place].time;
    let holds = |time: f64| breaks_with(engagement, winner, place, |_, at| *at = time) == outcome.breaks;
    let end = outcome.time.unwrap_or(at).max(at) * 2.0 + 1.0;
    let spare = last_that(holds, at, end) - at;
    Some(format!(
        "{}'s reserve of {} decided it: without it the outcome is another; it could have come up to {}\u{a0}{} later.",
        statement.names[winner],
        strength(joins[place].size),
        three(spare),
        statement.unit.symbol()
    ))
}

/// The last time from `low` on at which `holds`, by halving: it holds at `low` and not at `high`.
fn last_that(holds: impl Fn(f64) -> bool, low: f64, high: f64) -> f64 {
    let (mut low, mut high) = (low, high);
    for _ in 0..44 {
        let middle = 0.5 * (low + high);
        if holds(middle) {
            low = middle
        } else {
            high = middle
        }
    }
    low
}
