//! The same engagement in another unit of time, as the text of a link.

use crate::decimal::multiplied;
use crate::keys::{self, Unit};
use crate::order::sort_by;
use crate::pairs::Pairs;
use crate::statement::{Statement, TimeUnit};

/// What of a key's text changes with the unit of time.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Carries {
    Nothing,
    /// It is a time.
    Time,
    /// It is so much for each unit of time.
    Rate,
    /// Items of size@time.
    Joins,
    /// Items of rate@from/to.
    Flows,
    /// Conditions, some of which are on the time.
    Conditions,
}

/// From one unit of time to another: what a rate is multiplied by, as a quotient.
#[derive(Clone, Copy)]
struct Change {
    by: u32,
    over: u32,
}

/// The pairs with `unit` set to `to`, and every rate and time of them restated from `from` in it: also in lists, phases,
/// variants, intervals and questions. What is no rate or time stays as it was written.
///
/// In decimals where it comes out even, else to the nearest double.
///
/// # Errors
/// The keys that keep it from being done: their text cannot be read, their number would be beyond its limits, or they give
/// a variant a unit of its own. Never an empty list.
pub fn converted(pairs: &Pairs, from: TimeUnit, to: TimeUnit) -> Result<Pairs, Vec<String>> {
    let change = Change::between(from, to);
    let mut result = pairs.clone();
    let mut refused = Vec::new();
    for (key, text) in pairs.iter().filter(|(_, text)| !text.trim().is_empty()) {
        if has_own_unit(key) {
            refused.push(key.to_owned());
        }
        match change.of(carries(key), text) {
            Some(new) if new != text => result.set(key, &new),
            Some(_) => {}
            None => {
                refused.push(key.to_owned());
            }
        }
    }
    result.set("unit", to.symbol());
    refused.extend(new_troubles(pairs, &result));
    if refused.is_empty() {
        Ok(result)
    } else {
        sort_by(&mut refused, String::cmp);
        refused.dedup();
        Err(refused)
    }
}

/// Whether any text of the pairs would be another one in another unit of time.
pub fn carry_time(pairs: &Pairs) -> bool {
    let change = Change::between(TimeUnit::Hour, TimeUnit::Day);
    pairs
        .iter()
        .any(|(key, text)| change.of(carries(key), text).is_none_or(|new| new != text))
}

/// Keys that are in trouble after a change and were not before.
fn new_troubles(before: &Pairs, after: &Pairs) -> Vec<String> {
    let troubles = |pairs: &Pairs| -> Vec<String> {
        let problems = Statement::read(pairs).err().unwrap_or_default();
        problems.into_iter().filter_map(|problem| problem.key).collect()
    };
    let (old, mut new) = (troubles(before), troubles(after));
    new.retain(|key| !old.contains(key));
    new
}

/// Whether a key gives a variant a unit of its own: what the variant leaves as it is would change its meaning.
fn has_own_unit(key: &str) -> bool {
    key.starts_with("also") && key.ends_with(".unit")
}

/// What a key's text carries of time.
fn carries(key: &str) -> Carries {
    let key = match key.split_once('.') {
        Some((stem, rest)) if stem.starts_with("also") && keys::is_numbered(key) => rest,
        _ => key,
    };
    let key = match key.split_once('.') {
        Some((stem, rest)) if stem.starts_with("phase") && keys::is_numbered(key) => rest,
        _ => key,
    };
    if key == "from" {
        return Carries::Time;
    }
    let Some(row) = keys::find(key) else {
        return Carries::Nothing;
    };
    match (row.name, row.unit) {
        ("join", _) => Carries::Joins,
        ("flow", _) => Carries::Flows,
        ("sothat", _) => Carries::Conditions,
        (_, Unit::Time) => Carries::Time,
        (
            _,
            Unit::FractionPerTime
            | Unit::StrengthPerTime
            | Unit::EnemyPerTime
            | Unit::EnemyFractionPerTime
            | Unit::LengthPerTime
            | Unit::PerLaw,
        ) => Carries::Rate,
        (
            _,
            Unit::None
            | Unit::Strength
            | Unit::EnemyStrength
            | Unit::Fraction
            | Unit::Exponent
            | Unit::Length,
        ) => Carries::Nothing,
    }
}

/// How long a unit of time is.
fn seconds(unit: TimeUnit) -> u32 {
    match unit {
        TimeUnit::Second => 1,
        TimeUnit::Minute => 60,
        TimeUnit::Hour => 3600,
        TimeUnit::Day => 86_400,
        TimeUnit::Week => 604_800,
    }
}

impl Change {
    fn between(from: TimeUnit, to: TimeUnit) -> Change {
        Change {
            by: seconds(to),
            over: seconds(from),
        }
    }

    /// The text restated; `None` where it cannot be read.
    fn of(self, carries: Carries, text: &str) -> Option<String> {
        match carries {
            Carries::Nothing => Some(text.to_owned()),
            Carries::Time => self.time(text),
            Carries::Rate => self.rate(text),
            Carries::Joins => each(text, |item| {
                let (size, time) = item.split_once('@')?;
                Some(format!("{size}@{}", self.time(time)?))
            }),
            Carries::Flows => each(text, |item| {
                let (rate, when) = item.split_once('@')?;
                let (from, to) = when.split_once('/')?;
                let to = if to.trim().is_empty() {
                    to.to_owned()
                } else {
                    self.time(to)?
                };
                Some(format!("{}@{}/{to}", self.rate(rate)?, self.time(from)?))
            }),
            Carries::Conditions => each(text, |item| match item.split_once(':') {
                Some((what, when)) if what.trim() == "time" => Some(format!("{what}:{}", self.time(when)?)),
                _ => Some(item.to_owned()),
            }),
        }
    }

    fn time(self, text: &str) -> Option<String> {
        quantity(text, (self.over, self.by))
    }

    fn rate(self, text: &str) -> Option<String> {
        quantity(text, (self.by, self.over))
    }
}

/// A list with each of its items restated.
fn each(text: &str, of: impl Fn(&str) -> Option<String>) -> Option<String> {
    let items: Option<Vec<String>> = text.split(',').map(of).collect();
    Some(items?.join(","))
}

/// Each number of a quantity multiplied, and all between them left as it was written: a question's mark, two points, outer
/// blanks.
fn quantity(text: &str, by: (u32, u32)) -> Option<String> {
    let inner = text.trim();
    let lead = text.len() - text.trim_start().len();
    let numbers = |part: &str| -> Option<String> {
        let number = |number: &str| match number {
            "" => Some(String::new()),
            _ => multiplied(number, by),
        };
        let all: Option<Vec<String>> = part.split("..").map(number).collect();
        Some(all?.join(".."))
    };
    let restated = match inner.split_once('?') {
        Some((now, between)) => format!("{}?{}", numbers(now)?, numbers(between)?),
        None => numbers(inner)?,
    };
    Some([&text[..lead], &restated, &text[lead + inner.len()..]].concat())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn to_days(link: &str) -> Result<String, Vec<String>> {
        converted(&Pairs::parse(link), TimeUnit::Hour, TimeUnit::Day).map(|pairs| pairs.link())
    }

    #[test]
    fn rates_and_times_are_restated_and_nothing_else() {
        let sides = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.06";
        for (before, after) in [
            ("until=48", "until=2"),
            ("x.wastage=0.01", "x.wastage=0.24"),
            ("x.support.area=1e-3", "x.support.area=0.024"),
            ("x.support.aimed=2", "x.support.aimed=48"),
            ("x.join=64@12,-20@ 36", "x.join=64@0.5,-20@%201.5"),
            ("y.flow=5@12/24,3@0/", "y.flow=120@0.5/1,72@0/"),
            (
                "phase1.from=6&phase1.x.rate=0.02",
                "phase1.from=0.25&phase1.x.rate=0.48",
            ),
            (
                "range.closing=3&range=9&x.reach=5",
                "range.closing=72&range=9&x.reach=5",
            ),
            ("x.break=0.3&x.lost=24&y.half=3", "x.break=0.3&x.lost=24&y.half=3"),
            ("x.wastage=0.01..0.02..0.03", "x.wastage=0.24..0.48..0.72"),
            ("until=48?24..72", "until=2?1..3"),
            ("y.join=64?40..90@?12..24", "y.join=64?40..90@?0.5..1"),
            (
                "also1.phase1.y.rate=0.5&also1.until=12",
                "also1.phase1.y.rate=12&also1.until=0.5",
            ),
            ("sothat=x.end:24..,time:..6", "sothat=x.end:24..,time:..0.25"),
            ("note=24 h", "note=24%20h"),
        ] {
            let all = to_days(&format!("{sides}&{before}"));
            let expected = format!("x.start=600&x.rate=0.96&y.start=400&y.rate=1.44&{after}&unit=d&v=1");
            assert_eq!(all, Ok(expected), "{before}");
        }
    }

    #[test]
    fn what_cannot_be_read_keeps_all_as_it_was() {
        let sides = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.06";
        for (wrong, keys) in [
            ("until=0,5", vec!["until"]),
            ("x.join=64&y.flow=5@2", vec!["x.join", "y.flow"]),
            ("x.wastage=9e8", vec!["x.wastage"]),
            ("also1.unit=wk", vec!["also1.unit"]),
            ("until=%ZZ", vec!["until"]),
        ] {
            assert_eq!(
                to_days(&format!("{sides}&{wrong}")),
                Err(keys.into_iter().map(String::from).collect()),
                "{wrong}"
            );
        }
    }

    #[test]
    fn an_engagement_without_times_has_nothing_to_convert() {
        assert!(!carry_time(&Pairs::parse(
            "x.start=600&x.break=0.3&title=0.04&until=&v=1"
        )));
        assert!(carry_time(&Pairs::parse("x.rate=0.04")));
        assert!(carry_time(&Pairs::parse("x.rate=0,04")), "it may carry one");
    }
}
