//! What a rate and a break point mean with the numbers of this engagement.

use super::format::{per_cent, strength, three};
use crate::fight::break_line;
use crate::laws::{FireLaw, RateMeaning};
use crate::share::AtStart;
use crate::sides::{Both, Side};
use crate::state::StateEquation;
use crate::statement::{Statement, TimeUnit};

/// What `side`'s rate means: "Each of Ondrel's combatants puts 0.04 of Vessary's out of the fight per h, one every 25 h.
/// At the start: 24 per h, 6.0 % of Vessary."
pub fn rate(statement: &Statement, side: Side) -> String {
    let engagement = statement.engagement();
    let (name, enemy) = (&statement.names[side], &statement.names[side.enemy()]);
    let (counted, unit) = (&statement.counted, statement.unit.symbol());
    let fire = engagement.sides[side].fire;
    if !fire.takes_effect() {
        return format!("{name}'s fire has no effect on {enemy}.");
    }
    let each = format!("Each of {name}'s {counted} puts");
    let number = three(fire.rate);
    let what = match fire.law.law().rate {
        RateMeaning::FractionPerShooter => {
            let part = per_cent(fire.rate);
            format!("{each} {part} of what is left of {enemy} out of the fight per\u{a0}{unit}")
        }
        RateMeaning::Fraction => {
            let part = per_cent(fire.rate);
            format!("{enemy} loses {part} of what is left of it per\u{a0}{unit}, however many of {name} fire")
        }
        RateMeaning::TargetsPerShooterInPlenty => {
            let half = three(fire.half.unwrap_or(0.0));
            format!(
                "{each} {number} of {enemy}'s out of the fight per\u{a0}{unit} while targets are in plenty, and half as \
                 many once {half} are left"
            )
        }
        RateMeaning::PerPowers => {
            let (p, q) = (three(fire.p.unwrap_or(0.0)), three(fire.q.unwrap_or(0.0)));
            format!(
                "{enemy} loses {number} per\u{a0}{unit}, times {name} to the power {p}, times {enemy} to the power {q}"
            )
        }
        RateMeaning::TargetsPerShooter | RateMeaning::NoRate => {
            let one_every = three(1.0 / fire.rate);
            format!(
                "{each} {number} of {enemy}'s out of the fight per\u{a0}{unit}, one every {one_every}\u{a0}{unit}"
            )
        }
    };
    let reaches = engagement.closing.is_some() && engagement.sides[side].reach.is_some();
    let near = if reaches { ", at range 0" } else { "" };
    format!("{what}{near}. {}", at_start(statement, side))
}

/// What `side`'s fire does at the start: "At the start: 24 per h, 6.0 % of Vessary."
fn at_start(statement: &Statement, side: Side) -> String {
    let start = AtStart::of(&statement.engagement(), side);
    let (unit, enemy) = (statement.unit.symbol(), &statement.names[side.enemy()]);
    let absent = [side, side.enemy()]
        .into_iter()
        .find(|of| start.strengths[*of] == 0.0);
    if let Some(absent) = absent {
        return format!(
            "At the start nothing, since {} has nobody there.",
            statement.names[absent]
        );
    }
    format!(
        "At the start: {} per\u{a0}{unit}, {} of {enemy}.",
        three(start.losses),
        per_cent(start.losses / start.strengths[side.enemy()])
    )
}

/// What `side`'s break point means: "Breaks at 30 % lost: 420 left of 600."
pub fn break_point(statement: &Statement, side: Side) -> String {
    let engagement = statement.engagement();
    let point = engagement.sides[side].break_point;
    if point == 1.0 {
        return "Fights to the last.".into();
    }
    let moves = !engagement.sides[side].joins.is_empty() || !engagement.sides[side].flows.is_empty();
    format!(
        "Breaks at {} lost: {} left of {}{}.",
        per_cent(point),
        strength(break_line(&engagement, side).into()),
        strength(engagement.committed_at_start(side)),
        if moves { ", until somebody joins" } else { "" }
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
            format!("number of {target} lost, per one of {shooter}, per\u{a0}{unit}")
        }
        RateMeaning::FractionPerShooter => {
            format!("fraction of {target} lost, per one of {shooter}, per\u{a0}{unit}")
        }
        RateMeaning::Fraction => format!("fraction of {target} lost, per\u{a0}{unit}"),
        RateMeaning::TargetsPerShooterInPlenty => {
            format!("number of {target} lost, per one of {shooter}, per\u{a0}{unit}, with targets in plenty")
        }
        RateMeaning::PerPowers => {
            format!(
                "number of {target} lost per\u{a0}{unit}, for {shooter} and {target} raised to their exponents"
            )
        }
        RateMeaning::NoRate => String::new(),
    }
}

/// What `key` of a side is measured in, without its letter: "number of Vessary" for `half`, "fraction of Ondrel lost, per
/// h" for `wastage`; empty for a key whose unit is said elsewhere, or that has none.
pub fn parameter_unit(key: &str, name: &str, enemy: &str, unit: TimeUnit) -> String {
    let unit = unit.symbol();
    match key {
        "half" => format!("number of {enemy}"),
        "p" => format!("power of {name}'s strength"),
        "q" => format!("power of {enemy}'s strength"),
        "wastage" => format!("fraction of {name} lost, per\u{a0}{unit}"),
        "support.area" => format!("fraction of {enemy} lost, per\u{a0}{unit}"),
        "support.aimed" => format!("number of {enemy} lost, per\u{a0}{unit}"),
        "reach" => "in the unit of the range".into(),
        "reach.shape" => "exponent".into(),
        _ => String::new(),
    }
}

/// A warning where more of `side` makes it easier to break, since the enemy's fire feeds on its number; `None` elsewhere.
pub fn more_hurts(statement: &Statement, side: Side) -> Option<String> {
    let engagement = statement.engagement();
    let equation = StateEquation::of(&Both::of(|side| engagement.sides[side].fire));
    equation.more_hurts(side).then(|| {
        let (name, enemy) = (&statement.names[side], &statement.names[side.enemy()]);
        format!(
            "More of {name} can hurt it here: {enemy}'s fire feeds on {name}'s number more than {name}'s own fire gains \
             by it."
        )
    })
}
