//! What decided an engagement, said only where a computation shows it.

use super::format::{strength, three};
use crate::fight::{Effort, fight};
use crate::outcome::{Breaks, Ended, Outcome};
use crate::sides::Side;
use crate::statement::Statement;
use crate::terms::{Engagement, Join};

/// What a reserve did or failed to do: "Vessary's reserve of 64 came 0.4 h too late" where 0.4 h earlier the outcome is
/// another; `None` where no reserve is shown to have decided.
pub fn decided(statement: &Statement, outcome: &Outcome) -> Option<String> {
    let loser = match outcome.breaks {
        Breaks::X => Side::X,
        Breaks::Y => Side::Y,
        Breaks::Both | Breaks::Neither => return None,
    };
    let engagement = &statement.engagement();
    let reserves = |side: Side| {
        let joins = engagement.sides[side].joins.iter().enumerate();
        joins
            .filter(|(_, join)| join.size > 0.0)
            .map(move |(place, join)| Reserve {
                engagement,
                outcome,
                side,
                place,
                join: *join,
            })
    };
    reserves(loser)
        .find_map(|reserve| too_late(statement, &reserve))
        .or_else(|| reserves(loser.enemy()).find_map(|reserve| in_time(statement, &reserve)))
}

/// A reserve of an engagement that came out so.
struct Reserve<'a> {
    engagement: &'a Engagement,
    outcome: &'a Outcome,
    side: Side,
    place: usize,
    join: Join<f64>,
}

impl Reserve<'_> {
    /// What comes of it with another reserve in its place.
    fn with(&self, join: Join<f64>) -> Outcome {
        let mut other = self.engagement.clone();
        other.sides[self.side].joins[self.place] = join;
        fight(&other, Effort::Ending).outcome
    }

    fn at(&self, time: f64) -> Outcome {
        self.with(Join { time, ..self.join })
    }

    /// Whether an outcome is another than that of the engagement, as far as it is known.
    fn is_turned(&self, other: &Outcome) -> bool {
        other.breaks != self.outcome.breaks && other.ended != Ended::Unfinished
    }

    /// Where between two times the outcome comes to differ, from the side of `low`, to four digits of the way from there to
    /// when it came.
    fn flip(&self, low: f64, high: f64) -> f64 {
        let (mut low, mut high) = (low, high);
        let turned = self.is_turned(&self.at(low));
        for _ in 0..MOST_HALVINGS {
            if high - low <= 1e-4 * (0.5 * (low + high) - self.join.time).abs() {
                break;
            }
            let middle = 0.5 * (low + high);
            if self.is_turned(&self.at(middle)) == turned {
                low = middle
            } else {
                high = middle
            }
        }
        low
    }
}

/// Halvings at most: the digits of a time.
const MOST_HALVINGS: u32 = 44;

/// So many times are looked at besides, since what comes sooner need not be better.
const LOOKS: u32 = 8;

/// Times from one to another, without both.
fn between(from: f64, to: f64) -> impl DoubleEndedIterator<Item = f64> {
    (1..LOOKS).map(move |part| from + (to - from) * f64::from(part) / f64::from(LOOKS))
}

/// What is said of a reserve of the side that broke which would have turned the outcome, had it come sooner.
fn too_late(statement: &Statement, reserve: &Reserve) -> Option<String> {
    let at = reserve.join.time;
    let turns = |time: f64| reserve.is_turned(&reserve.at(time));
    if at == 0.0 || !turns(0.0) {
        return None;
    }
    let looks: Vec<(f64, bool)> = between(0.0, at).map(|time| (time, turns(time))).collect();
    let place = looks.iter().rposition(|look| look.1);
    let low = place.map_or(0.0, |place| looks[place].0);
    let high = looks
        .get(place.map_or(0, |place| place + 1))
        .map_or(at, |look| look.0);
    let last = reserve.flip(low, high);
    let always = looks.iter().all(|look| look.1 || look.0 > last);
    let unit = statement.unit.symbol();
    Some(format!(
        "{}'s reserve of {} came {}\u{a0}{unit} too late: {} {}\u{a0}{unit} it would have turned the outcome.",
        statement.names[reserve.side],
        strength(reserve.join.size),
        three(at - last),
        if always { "up to" } else { "at" },
        three(last),
    ))
}

/// What is said of a reserve of the other side without which it would itself have broken.
fn in_time(statement: &Statement, reserve: &Reserve) -> Option<String> {
    let without = reserve.with(Join {
        size: 0.0,
        ..reserve.join
    });
    if !reserve.is_turned(&without) {
        return None;
    }
    let spare = spare(reserve, &without).map_or(String::new(), |spare| {
        format!(
            "; it could have come up to {}\u{a0}{} later",
            three(spare),
            statement.unit.symbol()
        )
    });
    Some(format!(
        "{}'s reserve of {} decided it: without it the outcome is another{spare}.",
        statement.names[reserve.side],
        strength(reserve.join.size),
    ))
}

/// By how much later the reserve could have come; `None` where no time is known at which it is too late, or one that is
/// earlier than another at which it is not.
fn spare(reserve: &Reserve, without: &Outcome) -> Option<f64> {
    let holds = |time: f64| !reserve.is_turned(&reserve.at(time));
    // Behind the end that the fight has without it nobody comes to it any more.
    let over = without.time.or(reserve.engagement.until)? * (1.0 + 1e-9) + f64::MIN_POSITIVE;
    let at = reserve.join.time;
    if over <= at || holds(over) {
        return None;
    }
    let looks: Vec<(f64, bool)> = between(at, over).map(|time| (time, holds(time))).collect();
    let place = looks.iter().position(|look| !look.1).unwrap_or(looks.len());
    if looks[place..].iter().any(|look| look.1) {
        return None;
    }
    let low = place.checked_sub(1).map_or(at, |before| looks[before].0);
    let high = looks.get(place).map_or(over, |look| look.0);
    Some(reserve.flip(low, high) - at)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pairs::Pairs;

    fn said(link: &str) -> String {
        let statement = Statement::read(&Pairs::parse(link)).expect(link);
        let outcome = fight(&statement.engagement(), Effort::Outcome).outcome;
        let text = decided(&statement, &outcome).expect("a reserve decided");
        text.replace('\u{a0}', " ")
    }

    /// Y loses 10 an hour: it is gone at 10 h, and with 40 more at 14. X has wasted away to its line at 12.04 h.
    #[test]
    fn a_reserve_that_came_too_late_has_its_time() {
        let link = "x.start=400&x.fire=none&x.support.aimed=10&x.wastage=0.1&x.break=0.7&y.start=100&y.fire=none\
                    &y.join=40@11&y.name=Osk";
        assert_eq!(
            said(link),
            "Osk's reserve of 40 came 1 h too late: up to 10 h it would have turned the outcome."
        );
    }

    /// With Y's reserve X breaks after some 3 h; without it Y is gone at 10 h: that it could have come up to 6 h later was no
    /// more than where the search had ended.
    #[test]
    fn how_much_later_a_reserve_could_have_come_is_looked_for_to_the_end() {
        let link = "x.start=400&x.fire=none&x.support.aimed=10&x.break=0.05&y.start=100&y.rate=0.01&y.join=900@1&y.name=Osk";
        assert_eq!(
            said(link),
            "Osk's reserve of 900 decided it: without it the outcome is another; it could have come up to 9 h later."
        );
    }
}
