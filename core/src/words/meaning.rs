//! What a rate and a break point mean with the numbers of this engagement.

use super::format::{per_cent, strength, three};
use crate::fight::break_line;
use crate::laws::{FireLaw, RateMeaning};
use crate::sides::Side;
use crate::statement::{Statement, TimeUnit, Values};

/// What `side`'s rate means: "Each of Ondrel's combatants puts 0.04 of Vessary's out of the fight per h, one every 25 h.
/// At the start: 24 per h, 6.0 % of Vessary."
pub fn rate(statement: &Statement, side: Side) -> String {
    let engagement = statement.engagement(&Values::new());
    let (name, enemy) = (&statement.names[side], &statement.names[side.enemy()]);
    let (counted, unit) = (&statement.counted, statement.unit.symbol());
    let fire = engagement.sides[side].fire;
    if !fire.takes_effect() {
        return format!("{name}'s fire has no effect on {enemy}.");
    }
    let each = format!("Each of {name}'s {counted} puts");
    let what = match fire.law.law().rate {
        RateMeaning::FractionPerShooter => {
            format!(
                "{each} {} of what is left of {enemy} out of the fight per {unit}",
                per_cent(fire.rate)
            )
        }
        _ => format!(
            "{each} {} of {enemy}'s out of the fight per {unit}, one every {} {unit}",
            three(fire.rate),
            three(1.0 / fire.rate)
        ),
    };
    let targets = engagement.sides[side.enemy()].start;
    let at_start = fire.losses_per_time(engagement.sides[side].start, targets);
    format!(
        "{what}. At the start: {} per {unit}, {} of {enemy}.",
        three(at_start),
        per_cent(at_start / targets)
    )
}

/// What `side`'s break point means: "Breaks at 30 % lost: 420 left of 600."
pub fn break_point(statement: &Statement, side: Side) -> String {
    let engagement = statement.engagement(&Values::new());
    let point = engagement.sides[side].break_point;
    if point == 1.0 {
        return "Fights to the last.".into();
    }
    format!(
        "Breaks at {} lost: {} left of {}.",
        per_cent(point),
        strength(break_line(&engagement, side).into()),
        strength(engagement.committed_at_start(side))
    )
}

/// The direction of a side's fire: "Ondrel's fire: what it does to Vessary". By names alone, since a legend also stands
/// over figures that cannot be worked out.
pub fn direction(shooter: &str, target: &str) -> String {
    format!("{shooter}'s fire: what it does to {target}")
}

/// What the rate of a law is measured in: "number of Vessary lost, per one of Ondrel, per h"; empty where it has none.
pub fn rate_unit(law: FireLaw, shooter: &str, target: &str, unit: TimeUnit) -> String {
    let unit = unit.symbol();
    match law.law().rate {
        RateMeaning::TargetsPerShooter => {
            format!("number of {target} lost, per one of {shooter}, per {unit}")
        }
        RateMeaning::FractionPerShooter => {
            format!("fraction of {target} lost, per one of {shooter}, per {unit}")
        }
        RateMeaning::NoRate => String::new(),
    }
}
