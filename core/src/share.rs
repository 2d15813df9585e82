//! A rate stated as the part of the enemy that the fire takes per unit of time at the start, and the other way round.
//!
//! Every law is rate × a factor of the shooters × a factor of the targets, so the part lost is the rate times what the same
//! fire takes at a rate of 1.

use crate::decimal;
use crate::keys::LARGEST;
use crate::laws::FireLaw;
use crate::number;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::schedule::instants;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::terms::Engagement;

/// The significant digits that a rate is written with: those of a per cent that somebody types, and some to spare.
const DIGITS: usize = 6;

/// What a side's fire meets at time 0, and does.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct AtStart {
    /// Both strengths, with what joins and leaves at time 0.
    pub strengths: Both<f64>,
    /// What the enemy loses by this fire per unit of time, at the range of the start.
    pub losses: f64,
}

impl AtStart {
    /// That of the fire of `side`.
    pub fn of(engagement: &Engagement, side: Side) -> AtStart {
        let first = instants(engagement).into_iter().next();
        let strengths = Both::of(|side: Side| {
            let moved = first
                .as_ref()
                .map_or(0.0, |first| first.arrivals[side] - first.withdrawals[side]);
            (engagement.sides[side].start + moved).max(0.0)
        });
        let both_there = strengths.x > 0.0 && strengths.y > 0.0;
        let losses = first.filter(|_| both_there).map_or(0.0, |first| {
            let growth = first.conditions.growth[side].map_or(1.0, |growth| growth.at(0.0));
            let fire = first.conditions.fire[side];
            growth * fire.losses_per_time(strengths[side], strengths[side.enemy()])
        });
        AtStart { strengths, losses }
    }
}

/// The per cent of the enemy that `side`'s fire takes per unit of time at the start, as it would be typed; `None` where
/// nobody is there, or nothing is lost.
pub fn per_cent_of_rate(statement: &Statement, side: Side) -> Option<String> {
    let engagement = statement.engagement();
    let start = AtStart::of(&engagement, side);
    let share = start.losses / start.strengths[side.enemy()];
    (share > 0.0 && share.is_finite()).then(|| rounded(100.0 * share))
}

/// The text of `side`'s rate at which the enemy loses `per_cent` of itself per unit of time at the start.
///
/// It needs the strengths and the law of this side, and neither side's rate; `pairs` may be wrong in all else.
///
/// # Errors
/// In words, without a full stop: where the per cent is no number, what it rests on is missing or wrong, or no rate takes
/// effect at the start.
pub fn rate_of_per_cent(pairs: &Pairs, side: Side, per_cent: &str) -> Result<String, String> {
    let text = per_cent.trim().trim_end_matches('%').trim_end();
    let share = number::hundredth(text, number::read(text)?);
    if share < 0.0 {
        return Err("must be 0 or more".into());
    }
    let statement = at_rate_one(pairs, side)?;
    if !statement.has_base() {
        return Err("it rests on a number in question that has no value now".into());
    }
    let engagement = statement.engagement();
    let (name, enemy) = (&statement.names[side], &statement.names[side.enemy()]);
    if engagement.sides[side].fire.law == FireLaw::None {
        return Err(format!("{name} has no fire, so there is no rate to write"));
    }
    let start = AtStart::of(&engagement, side);
    for (there, who) in [(side, name), (side.enemy(), enemy)] {
        if start.strengths[there] == 0.0 {
            return Err(format!(
                "{who} has nobody there at the start, so {enemy} loses nothing then at any rate"
            ));
        }
    }
    if start.losses == 0.0 {
        return Err(format!(
            "at the start the range is beyond {name}'s reach, so {enemy} loses nothing then at any rate"
        ));
    }
    let rate = share * start.strengths[side.enemy()] / start.losses;
    if rate.is_finite() && rate <= LARGEST {
        Ok(rounded(rate))
    } else {
        Err(format!("would take a rate of more than {LARGEST:e}"))
    }
}

/// The engagement with this side's rate at 1 and the enemy's fire left out.
fn at_rate_one(pairs: &Pairs, side: Side) -> Result<Statement, String> {
    let mut needed = Pairs::default();
    for key in ["range", "range.closing", "range.least"] {
        needed.set(key, pairs.get(key).unwrap_or_default());
    }
    for of in Side::BOTH {
        for name in [
            "name",
            "start",
            "join",
            "fire",
            "half",
            "p",
            "q",
            "reach",
            "reach.shape",
        ] {
            let key = format!("{}.{name}", of.letter());
            needed.set(&key, pairs.get(&key).unwrap_or_default());
        }
    }
    needed.set(&format!("{}.rate", side.letter()), "1");
    needed.set(&format!("{}.fire", side.enemy().letter()), "none");
    Statement::read(&needed).map_err(|problems| problems.first().map(first).unwrap_or_default())
}

/// What has to be put right before.
fn first(problem: &Problem) -> String {
    match (&problem.key, &problem.found) {
        (Some(key), Some(_)) => format!("it rests on `{key}`: {}", problem.line().trim_end_matches('.')),
        _ => problem.problem.clone(),
    }
}

fn rounded(value: f64) -> String {
    decimal::written(number::rounded(value, DIGITS))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The part that is lost at the start by the laws themselves, written out.
    #[test]
    fn the_rate_of_every_law_takes_what_was_asked() {
        let sides = "x.start=600&y.start=400";
        for (law, per_cent, rate) in [
            ("x.fire=aimed", "6", "0.04"),
            ("x.fire=area", "6", "0.0001"),
            ("x.fire=logarithmic", "6", "0.06"),
            ("x.fire=search&x.half=400", "6", "0.08"),
            ("x.fire=power&x.p=2&x.q=1", "9", "2.5e-7"),
            ("x.fire=power&x.p=0.5&x.q=0.5", "3", "0.0244949"),
            ("x.fire=aimed", "0", "0"),
            ("x.fire=aimed", "7.5 %", "0.05"),
            ("x.fire=aimed&x.join=200@0&y.join=-100@0", "8", "0.03"),
            ("x.fire=aimed&x.reach=800&range=400&range.closing=10", "6", "0.08"),
            ("x.fire=aimed&x.reach=800&x.reach.shape=2&range=400", "6", "0.16"),
        ] {
            let pairs = Pairs::parse(&format!("{sides}&{law}"));
            assert_eq!(
                rate_of_per_cent(&pairs, Side::X, per_cent).as_deref(),
                Ok(rate),
                "{law}"
            );
        }
    }

    #[test]
    fn there_and_back_is_the_same_per_cent() {
        for number in 0..crate::golden::COUNT {
            let pairs = Pairs::parse(&crate::golden::link(number));
            for side in Side::BOTH {
                let Ok(rate) = rate_of_per_cent(&pairs, side, "4.5") else {
                    continue;
                };
                let mut pairs = pairs.clone();
                pairs.set(&format!("{}.rate", side.letter()), &rate);
                let statement = Statement::read(&pairs).expect("it was one before");
                let back: f64 = per_cent_of_rate(&statement, side)
                    .and_then(|back| back.parse().ok())
                    .unwrap_or(0.0);
                assert!((back - 4.5).abs() <= 5e-5, "{number}: {back} by {}", pairs.link());
            }
        }
    }

    #[test]
    fn it_is_refused_where_it_makes_no_sense() {
        let sides = "x.start=600&y.start=400";
        for (link, per_cent, part) in [
            (sides, "six", "write a number"),
            (sides, "6,5", "write 6.5, with a point"),
            (sides, "-2", "must be 0 or more"),
            ("y.start=400", "6", "`x.start` is missing"),
            (
                "x.start=600&y.start=4,000",
                "6",
                "it rests on `y.start`: `4,000`: write 4000",
            ),
            ("x.start=600&y.start=?", "6", "it rests on a number in question"),
            ("x.start=600&y.start=2..400", "6", "it rests on `y.start`"),
            ("x.start=600&y.start=400&x.fire=none", "6", "Side X has no fire"),
            (
                "x.start=600&y.start=400&x.fire=search",
                "6",
                "`x.half` is missing",
            ),
            (
                "x.start=0&x.join=5@2&y.start=400",
                "6",
                "Side X has nobody there at the start",
            ),
            (
                "x.start=600&y.start=0&y.name=Vessary&y.join=5@2",
                "6",
                "Vessary has nobody there",
            ),
            (
                "x.start=600&y.start=400&x.reach=5&range=9",
                "6",
                "beyond Side X's reach",
            ),
            ("x.start=1e-9&y.start=1e9", "600", "a rate of more than 1e9"),
        ] {
            let refused = rate_of_per_cent(&Pairs::parse(link), Side::X, per_cent).expect_err(link);
            assert!(refused.contains(part), "{link}: {refused}");
        }
        // All else may be wrong.
        let pairs = Pairs::parse("x.start=600&y.start=400&y.rate=0,06&until=-1&nonsense=1");
        assert_eq!(rate_of_per_cent(&pairs, Side::X, "6").as_deref(), Ok("0.04"));
    }
}
