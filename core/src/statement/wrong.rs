//! What is wrong with a text, a key or a number, in words.

use super::name::row_of;
use crate::keys::{self, Key, Kind, Unit};
use crate::number;
use crate::pairs::{LONGEST_LINK, Pairs, trimmed};
use crate::problem::Problem;
use crate::quantity::Quantity;

/// What keeps the text from being read at all: its length, or that nothing stands in it.
pub(super) fn whole_problem(pairs: &Pairs) -> Option<Problem> {
    if let Some(length) = pairs.too_long() {
        return Some(Problem::whole(format!(
            "the text is {length} bytes long; at most {LONGEST_LINK} are read"
        )));
    }
    let nothing = pairs
        .iter()
        .all(|(key, text)| key == "v" || trimmed(text).is_empty());
    let required = "x.start, x.rate, y.start and y.rate";
    nothing.then(|| {
        Problem::whole(format!(
            "there is no engagement in this text: give at least {required}"
        ))
    })
}

/// What is wrong with a key itself: unknown, or known and not yet worked out.
pub(super) fn key_problem(row: Option<&Key>, key: &str, text: &str) -> Option<Problem> {
    let not_yet = || {
        Problem::at(
            key,
            text,
            format!("`{key}` is known, but not yet worked out by this copy"),
        )
    };
    match row {
        Some(row) => {
            let used = row.worked_out || text.trim().is_empty() || row.default == Some(text.trim());
            (!used).then(not_yet)
        }
        None if key.starts_with("phase") && keys::is_numbered(key) => None,
        None if keys::is_numbered(key) => Some(not_yet()),
        None => Some(Problem::at(key, text, of_unknown(key))),
    }
}

fn of_unknown(key: &str) -> String {
    // A link that went through the source of a page.
    if let Some(meant) = key.strip_prefix("amp;") {
        return format!("write `&` alone for `&amp;` before `{meant}`");
    }
    let near = keys::nearest(key)
        .map(|near| format!(". The nearest it knows is `{near}`"))
        .unwrap_or_default();
    format!("this copy does not know `{key}`; a newer one may{near}")
}

/// What to write where `text`, which is no value of its key, goes on with the next pair behind a wrong mark.
pub(super) fn of_separator(text: &str) -> Option<String> {
    let (_, rest) = text.split_once(';')?;
    let (next, _) = rest.split_once('=')?;
    Some(format!("write `&` for the `;` before `{}`", next.trim()))
}

/// The problem of a text that could not be decoded, said better where it is a number with a per-cent sign.
pub(super) fn without_escape((place, problem): (usize, Problem)) -> (usize, Problem) {
    let hint = || {
        let (key, found) = (problem.key.as_deref()?, problem.found.as_deref()?);
        let is_number = matches!(row_of(key)?.kind, Kind::Quantity { .. });
        let hint = read_quantity(found).err().filter(|_| is_number)?;
        hint.ends_with(number::WITHOUT_PER_CENT).then_some(hint)
    };
    match hint() {
        Some(hint) => (
            place,
            Problem {
                problem: hint,
                ..problem
            },
        ),
        None => (place, problem),
    }
}

/// A quantity; nearly all are plain numbers, which are read at once.
pub(super) fn read_quantity(text: &str) -> Result<Quantity, String> {
    let text = trimmed(text);
    match number::plain(text) {
        Some(value) => Ok(Quantity::Number(value)),
        None => Quantity::read(text),
    }
}

pub(super) fn within_limits(row: &Key, quantity: Quantity) -> Result<Quantity, String> {
    let Kind::Quantity { low, above, high } = row.kind else {
        return Ok(quantity);
    };
    let fits = |value: f64| value >= low && value <= high && !(above && value == low);
    if let Quantity::Number(value) = quantity
        && fits(value)
    {
        return Ok(quantity);
    }
    for value in quantity.numbers() {
        if above && value <= low {
            return Err(format!("must be more than {low}"));
        }
        if value < low {
            return Err(format!("must be {low} or more"));
        }
        if value > high {
            let fraction = row.unit == Unit::Fraction && value <= 100.0;
            let hint = if fraction {
                format!(
                    ": for {value} % write {}",
                    number::hundredth(&value.to_string(), value)
                )
            } else {
                String::new()
            };
            return Err(format!("must be at most {}{hint}", plain(high)));
        }
    }
    Ok(quantity)
}

pub(super) fn plain(limit: f64) -> String {
    if limit >= 1e6 {
        format!("{limit:e}")
    } else {
        format!("{limit}")
    }
}
