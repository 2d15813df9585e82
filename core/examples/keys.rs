//! Prints the table of keys as the README has it.

use aftercount_core::keys::{KEYS, Key, Kind, Place, Unit};

fn main() {
    println!("| key | meaning | values | default |\n|---|---|---|---|");
    for key in KEYS.iter().filter(|key| key.worked_out) {
        let name = match key.place {
            Place::Whole => format!("`{}`", key.name),
            Place::Side => format!("`x.{0}` `y.{0}`", key.name),
        };
        let default = key
            .default
            .map_or("none".into(), |default| format!("`{default}`"));
        println!("| {name} | {} | {} | {default} |", key.meaning, values(key));
    }
}

fn values(key: &Key) -> String {
    match key.kind {
        Kind::Text(most) => format!("up to {most} characters"),
        Kind::Choice(words) => words
            .iter()
            .map(|word| format!("`{word}`"))
            .collect::<Vec<_>>()
            .join(" "),
        Kind::List => "a list".into(),
        Kind::Quantity { low, above, high } => {
            let from = if above {
                format!("more than {low}")
            } else {
                format!("{low}")
            };
            let high = if high >= 1e6 {
                format!("{high:e}")
            } else {
                format!("{high}")
            };
            format!("{from} to {high}{}", unit(key.unit))
        }
    }
}

fn unit(unit: Unit) -> &'static str {
    match unit {
        Unit::None | Unit::Fraction | Unit::Exponent => "",
        Unit::Length => ", length",
        Unit::LengthPerTime => ", length per time",
        Unit::Strength => ", strength",
        Unit::StrengthPerTime => ", strength per time",
        Unit::EnemyStrength => ", the enemy's strength",
        Unit::Time => ", time",
        Unit::FractionPerTime => ", of the side per time",
        Unit::EnemyPerTime => ", enemy per time",
        Unit::EnemyFractionPerTime => ", of the enemy per time",
        Unit::PerLaw => ", see the laws",
    }
}
