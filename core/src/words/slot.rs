//! The numbers of an engagement in words: what each is, and its values with their unit.

use super::format::{NO_BREAK, per_cent, significant, time};
use crate::keys::Unit;
use crate::sides::Side;
use crate::slots::{Part, Place, Slot};
use crate::statement::Statement;

/// What a number is: "Ondrel's strength at the start", "the size of Vessary's reserve 2", "the clock".
pub fn name(statement: &Statement, slot: &Slot) -> String {
    let of = |side: Side, what: &str| format!("{}'s {what}", statement.names[side]);
    let one_of = |side: Side, what: &str, item: usize, count: usize| {
        let number = if count > 1 {
            format!(" {}", item + 1)
        } else {
            String::new()
        };
        of(side, &format!("{what}{number}"))
    };
    let reserve = |side: Side, item: usize| {
        let joins = &statement.terms.sides[side].joins;
        one_of(side, "reserve", item, joins.len())
    };
    let flow = |side: Side, item: usize| {
        let flows = &statement.terms.sides[side].flows;
        one_of(side, "reinforcement", item, flows.len())
    };
    let phase = |at: usize| statement.terms.phases.get(at).map_or(0, |phase| phase.number);
    match slot.place {
        Place::Side(side, part) => of(side, part_in_words(part)),
        Place::JoinSize(side, item) => format!("the size of {}", reserve(side, item)),
        Place::JoinTime(side, item) => format!("the time at which {} joins", reserve(side, item)),
        Place::FlowRate(side, item) => format!("the rate of {}", flow(side, item)),
        Place::FlowFrom(side, item) => format!("the time at which {} begins", flow(side, item)),
        Place::FlowTo(side, item) => format!("the time at which {} ends", flow(side, item)),
        Place::PhaseFrom(at) => format!("the time at which phase {} begins", phase(at)),
        Place::PhaseChange(at, side, part) => {
            format!("{} from phase {} on", of(side, part_in_words(part)), phase(at))
        }
        Place::Range => "the range at the start".into(),
        Place::RangeClosing => "the closing speed".into(),
        Place::RangeLeast => "the least range".into(),
        Place::Until => "the clock".into(),
    }
}

/// The same with its unit where that is short, for what is measured along an axis.
pub fn name_with_unit(statement: &Statement, slot: &Slot) -> String {
    let (name, unit) = (name(statement, slot), unit(statement, slot.unit));
    if unit.is_empty() {
        name
    } else {
        format!("{name} ({unit})")
    }
}

fn part_in_words(part: Part) -> &'static str {
    match part {
        Part::Start => "strength at the start",
        Part::Lost => "loss before the start",
        Part::Rate => "rate",
        Part::Half => "number of targets at half the search",
        Part::P => "exponent on the shooters",
        Part::Q => "exponent on the targets",
        Part::Break => "break point",
        Part::Wastage => "wastage",
        Part::SupportArea => "supporting arms at an area",
        Part::SupportAimed => "supporting arms, aimed",
        Part::Reach => "reach",
        Part::ReachShape => "shape of the reach",
    }
}

/// A value of a number to four significant digits with its unit: "607.2", "4.219 h (4 h 13 min)", "0.374 (37 % lost)".
pub fn value(statement: &Statement, unit: Unit, value: f64) -> String {
    let number = significant(value, 4);
    let symbol = statement.unit.symbol();
    match unit {
        Unit::Time => match time(value, statement.unit).split_once(" (") {
            Some((_, parts)) => format!("{number}{NO_BREAK}{symbol} ({parts}"),
            None => format!("{number}{NO_BREAK}{symbol}"),
        },
        Unit::StrengthPerTime
        | Unit::EnemyPerTime
        | Unit::FractionPerTime
        | Unit::EnemyFractionPerTime
        | Unit::LengthPerTime => format!("{number} per{NO_BREAK}{symbol}"),
        Unit::Fraction => format!("{number} ({} lost)", per_cent(value)),
        _ => number,
    }
}

/// The unit of a number where it is short: "h", "per h"; else empty.
pub fn unit(statement: &Statement, unit: Unit) -> String {
    let symbol = statement.unit.symbol();
    match unit {
        Unit::Time => symbol.into(),
        Unit::Strength | Unit::EnemyStrength => statement.counted.to_string(),
        Unit::StrengthPerTime
        | Unit::EnemyPerTime
        | Unit::FractionPerTime
        | Unit::EnemyFractionPerTime
        | Unit::LengthPerTime => format!("per{NO_BREAK}{symbol}"),
        _ => String::new(),
    }
}

/// A value to six significant digits with its unit, for tables.
pub fn six_with_unit(statement: &Statement, unit: Unit, value: f64) -> String {
    let number = significant(value, 6);
    let symbol = statement.unit.symbol();
    match unit {
        Unit::Time => format!("{number}{NO_BREAK}{symbol}"),
        Unit::StrengthPerTime
        | Unit::EnemyPerTime
        | Unit::FractionPerTime
        | Unit::EnemyFractionPerTime
        | Unit::LengthPerTime => format!("{number} per{NO_BREAK}{symbol}"),
        _ => number,
    }
}
