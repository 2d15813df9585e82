//! The outcome in one sentence.

use super::format::{strength, time};
use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::sides::Side;
use crate::statement::Statement;

/// The outcome in words. It begins "In this model", so that it stays true when it is copied alone.
pub fn sentence(statement: &Statement, outcome: &Outcome) -> String {
    let names = &statement.names;
    let left = format!(
        "left: {}, {}",
        left(statement, outcome, Side::X),
        left(statement, outcome, Side::Y)
    );
    let what = match (outcome.breaks, outcome.ended) {
        (Breaks::X, _) => broken(statement, outcome, Side::X),
        (Breaks::Y, _) => broken(statement, outcome, Side::Y),
        (Breaks::Both, _) => both_broken(statement, outcome),
        (Breaks::Neither, Ended::Clock) => {
            let clock = outcome.pieces.last().and_then(|piece| piece.to).unwrap_or(0.0);
            format!(
                "neither side breaks by the clock, at {}",
                time(clock, statement.unit)
            )
        }
        (Breaks::Neither, Ended::Equilibrium) if loses(outcome) => {
            "neither side breaks: what comes in and what is lost come to balance".into()
        }
        (Breaks::Neither, Ended::Equilibrium) => {
            format!(
                "nothing is lost: neither {}'s fire nor {}'s has any effect",
                names.x, names.y
            )
        }
        (Breaks::Neither, Ended::Unfinished) => {
            let known = outcome.pieces.last().and_then(|piece| piece.to).unwrap_or(0.0);
            format!(
                "neither side breaks by {}; what comes after would take more steps than an answer may",
                time(known, statement.unit)
            )
        }
        (Breaks::Neither, Ended::Growth) => "neither side breaks, and strength grows without bound".into(),
        (Breaks::Neither, Ended::Withdrawn) => {
            let gone = if outcome.x.end == Some(0.0) {
                &names.x
            } else {
                &names.y
            };
            format!("neither side breaks: {gone} has nobody left there, some of them withdrawn")
        }
        (Breaks::Neither, _) => return endless(statement, outcome),
    };
    format!("In this model {what}; {left}.")
}

fn left(statement: &Statement, outcome: &Outcome, side: Side) -> String {
    let outcome = outcome.sides()[side];
    let end = strength(outcome.end.unwrap_or(f64::INFINITY));
    let name = &statement.names[side];
    if outcome.committed.is_finite() {
        let withdrawn = match outcome.withdrawn {
            0.0 => String::new(),
            withdrawn => format!(" ({} withdrawn)", strength(withdrawn)),
        };
        format!("{name} {end} of {}{withdrawn}", strength(outcome.committed))
    } else {
        format!("{name} {end}, reinforced without end")
    }
}

/// Whether anything was lost.
fn loses(outcome: &Outcome) -> bool {
    outcome.x.losses.all + outcome.y.losses.all > 0.0
}

/// Whether the side fights to the last: its break point is 1.
fn to_the_last(statement: &Statement, side: Side) -> bool {
    statement.engagement().sides[side].break_point == 1.0
}

fn broken(statement: &Statement, outcome: &Outcome, side: Side) -> String {
    let name = &statement.names[side];
    let at = outcome.time.unwrap_or(0.0);
    if at == 0.0 {
        return format!("{name} is past its break point at the start already");
    }
    let after = time(at, statement.unit);
    format!("{name} {} first, after {after}", breaks(statement, side))
}

/// What becomes of a side at its line: it "breaks", or fighting to the last "is brought to 0".
pub fn breaks(statement: &Statement, side: Side) -> &'static str {
    if to_the_last(statement, side) {
        "is brought to 0"
    } else {
        "breaks"
    }
}

fn both_broken(statement: &Statement, outcome: &Outcome) -> String {
    match outcome.time.unwrap_or(0.0) {
        0.0 => "both sides are past their break points at the start already".into(),
        at => format!(
            "both sides break at the same moment, after {}",
            time(at, statement.unit)
        ),
    }
}

/// Nobody breaks in finite time.
fn endless(statement: &Statement, outcome: &Outcome) -> String {
    let names = &statement.names;
    let below = |fading: &str| match outcome.below_one {
        Some(at) if at > 0.0 => format!(" {fading} falls below one at {}.", time(at, statement.unit)),
        _ => String::new(),
    };
    let loser = match outcome.to_the_last {
        Some(ToTheLast::X) => Side::Y,
        Some(ToTheLast::Y) => Side::X,
        Some(ToTheLast::Parity) => {
            return format!(
                "In this model neither side breaks: {} and {} are at parity and wear each other out without end.{}",
                names.x,
                names.y,
                below("The first of them")
            );
        }
        None => {
            return format!(
                "In this model neither side breaks: {} and {} both fade, and neither ever reaches 0.{}",
                names.x,
                names.y,
                below("The first of them")
            );
        }
    };
    format!(
        "In this model {} fades but never reaches 0; {} tends to {}.{}",
        names[loser],
        names[loser.enemy()],
        strength(outcome.sides()[loser.enemy()].end.unwrap_or(f64::INFINITY)),
        below(&names[loser])
    )
}

#[cfg(test)]
mod tests {
    use crate::answer::{Answer, answer};
    use crate::pairs::Pairs;
    use crate::statement::Statement;

    /// Where nothing is lost it is still said who came and who was withdrawn: it was said that nothing changes.
    #[test]
    fn who_comes_or_goes_without_losses_is_told() {
        let none = "neither Side X's fire nor Side Y's has any effect";
        let sides = "x.start=600&x.fire=none&y.start=400&y.fire=none";
        for (more, words) in [
            (
                "",
                format!("In this model nothing is lost: {none}; left: Side X 600 of 600, Side Y 400 of 400."),
            ),
            (
                "&y.join=-100@2",
                format!(
                    "In this model nothing is lost: {none}; left: Side X 600 of 600, Side Y 300 of 400 (100 withdrawn)."
                ),
            ),
            (
                "&x.join=64@2",
                format!("In this model nothing is lost: {none}; left: Side X 664 of 664, Side Y 400 of 400."),
            ),
        ] {
            let link = format!("{sides}{more}");
            let Answer::Outcome { outcome, .. } = answer(&link) else {
                panic!("{link}")
            };
            let statement = Statement::read(&Pairs::parse(&link)).expect("no problem");
            assert_eq!(
                super::sentence(&statement, &outcome).replace('\u{a0}', " "),
                words
            );
        }
    }
}
