//! What is said of a number whose point may have been meant to mark thousands: `12.500`.

use crate::decimal::written;
use crate::in_doubt::Limits;
use crate::keys::{self, Kind};
use crate::list_part::typed;
use crate::number;
use crate::quantity::Quantity;

/// What is said beside the field of `key` that holds `text`: "`12.500` is read as 12.5: if 12500 is meant, write it without
/// the point." `None` where no point can be misread.
///
/// It is no problem: the point is a decimal one everywhere in the link. Nor is it said where the other number is beyond the
/// limits of the key.
pub fn remark(key: &str, text: &str) -> Option<String> {
    let remarks: Vec<String> = match keys::find(key).map(|row| row.kind) {
        Some(Kind::List) if key != "sothat" => (1..)
            .zip(text.split(','))
            .filter_map(|(number, item)| Some(format!("Row {number}: {}", of_item(item)?)))
            .collect(),
        _ => Limits::of_key(key)
            .and_then(|limits| of_quantity(text, limits))
            .into_iter()
            .collect(),
    };
    (!remarks.is_empty()).then(|| remarks.join(" "))
}

/// The same of an item of reserves or flows.
fn of_item(item: &str) -> Option<String> {
    let parts = item.split(['@', '/']);
    // A size is the widest: it may be below 0.
    let remarks: Vec<String> = parts
        .filter_map(|part| of_quantity(&typed(part), Limits::of_part("size")))
        .collect();
    (!remarks.is_empty()).then(|| remarks.join(" "))
}

fn of_quantity(text: &str, limits: Limits) -> Option<String> {
    Quantity::read(text).ok()?;
    // What can be read has its numbers between these marks.
    let numbers = text.split('?').flat_map(|part| part.split(".."));
    let remarks: Vec<String> = numbers
        .filter_map(|number| of_number(number.trim(), limits))
        .collect();
    (!remarks.is_empty()).then(|| remarks.join(" "))
}

fn of_number(text: &str, limits: Limits) -> Option<String> {
    let meant = grouped(text)?;
    let value = number::plain(&meant).filter(|value| limits.hold(*value))?;
    Some(format!(
        "`{text}` is read as {}: if {} is meant, write it without the point.",
        written(number::plain(text)?),
        written(value)
    ))
}

/// The number without its point, where that stands as between thousands: behind one to three digits that begin with no 0,
/// before three.
fn grouped(text: &str) -> Option<String> {
    let (whole, group) = text.split_once('.')?;
    let digits = whole.strip_prefix('-').unwrap_or(whole);
    let all_digits = |text: &str| text.bytes().all(|letter| letter.is_ascii_digit());
    let thousands = (1..=3).contains(&digits.len()) && !digits.starts_with('0') && group.len() == 3;
    (thousands && all_digits(digits) && all_digits(group)).then(|| format!("{whole}{group}"))
}

#[cfg(test)]
mod tests {
    use super::remark;

    #[test]
    fn a_point_that_may_mark_thousands_is_said_to_be_a_decimal_one() {
        for (key, text, words) in [
            (
                "x.start",
                "1.000",
                "`1.000` is read as 1: if 1000 is meant, write it without the point.",
            ),
            (
                "y.lost",
                " 12.500 ",
                "`12.500` is read as 12.5: if 12500 is meant, write it without the point.",
            ),
            (
                "x.start",
                "1.250?1.000..2000",
                "`1.250` is read as 1.25: if 1250 is meant, write it without the point. \
                 `1.000` is read as 1: if 1000 is meant, write it without the point.",
            ),
            (
                "phase1.x.rate",
                "999.999",
                "`999.999` is read as 999.999: if 999999 is meant, write it without the point.",
            ),
            (
                "x.join",
                "64@4,-1.200@5",
                "Row 2: `-1.200` is read as -1.2: if -1200 is meant, write it without the point.",
            ),
            (
                "y.flow",
                "1.000@2/8",
                "Row 1: `1.000` is read as 1: if 1000 is meant, write it without the point.",
            ),
        ] {
            assert_eq!(remark(key, text).as_deref(), Some(words), "{key}={text}");
        }
    }

    #[test]
    fn of_any_other_number_nothing_is_said() {
        for (key, text) in [
            ("x.start", "1000"),
            ("x.start", "0.125"),
            ("x.start", "1.5"),
            ("x.start", "1.0000"),
            ("x.start", "1000.000"),
            ("x.start", "012.500"),
            ("x.start", "1.000e2"),
            // Its hint says how to write these.
            ("x.start", "1.000.000"),
            ("x.start", "1.000,5"),
            ("x.start", "1.000?x"),
            // Nobody can have meant 1000.
            ("x.break", "1.000"),
            ("x.p", "1.250"),
            ("x.name", "1.000"),
            ("sothat", "x.end:1.000.."),
            ("x.join", "64@4"),
            ("x.join", "1,000@4"),
        ] {
            assert_eq!(remark(key, text), None, "{key}={text}");
        }
    }
}
