//! The words beside the fields: of the small buttons, of the entry by per cent, and of a change of the unit of time.

use super::format::NO_BREAK;
use crate::statement::TimeUnit;

/// The button that puts a number in question.
pub const ASK: &str = "ask";

/// What that button does.
pub const ASK_MEANS: &str = "What must it be? Adds ? behind the number";

/// The button that puts a number in doubt.
pub const IN_DOUBT: &str = "in doubt";

/// What that button does.
pub const IN_DOUBT_MEANS: &str =
    "Known only to lie between two values. Writes low..high, a quarter to either side";

/// The button that discloses the entry of a rate by what it takes at the start.
pub const PER_CENT: &str = "as per cent";

/// The label of that entry: "Per cent of Vessary lost per h at the start".
pub fn per_cent(enemy: &str, unit: TimeUnit) -> String {
    format!(
        "Per cent of {enemy} lost per{NO_BREAK}{} at the start",
        unit.symbol()
    )
}

/// What stands beside a changed unit of time: "Rates and times kept their numbers, and are now per d and in d, not h."
pub fn unit_changed(from: TimeUnit, to: TimeUnit) -> String {
    format!(
        "Every rate and time kept its number: what was per{NO_BREAK}{from} is now per{NO_BREAK}{to}.",
        from = from.symbol(),
        to = to.symbol()
    )
}

/// The button that restates every rate and time in the new unit.
pub fn convert(to: TimeUnit) -> String {
    format!("convert them to {}", to.symbol())
}

/// The button that leaves the numbers as they are.
pub const KEEP_NUMBERS: &str = "keep the numbers";

/// What is spoken of problems: the first, by the name of its field, and how many more there are. "Ondrel: rate: 0,04: write
/// 0.04, with a point. 2 more to put right."
pub fn problems_aloud(field: &str, line: &str, more: usize) -> String {
    let line = line.replace('`', "");
    let first = if field.is_empty() {
        line
    } else {
        format!("{field}: {line}")
    };
    match more {
        0 => first,
        _ => format!("{first} {more} more to put right."),
    }
}

/// Why nothing was restated: "Nothing was converted. To be put right first: `x.rate`, `until`."
pub fn not_converted(keys: &[String]) -> String {
    let keys: Vec<String> = keys.iter().map(|key| format!("`{key}`")).collect();
    format!(
        "Nothing was converted, since not every number can be written in the new unit: see {}.",
        keys.join(", ")
    )
}
