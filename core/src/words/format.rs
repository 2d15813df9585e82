//! How numbers are written for people: three significant digits in sentences, six in tables.

use crate::number;
use crate::statement::TimeUnit;

/// The narrow space between thousands, which does not break a line.
pub const NARROW: char = '\u{202f}';

/// The space between a number and its unit, which does not break a line either.
pub const NO_BREAK: char = '\u{a0}';

/// The minus of numbers that people read, as wide as the plus. What programs read (tables, JSON, links) is written
/// elsewhere, with the hyphen.
pub const MINUS: &str = "−";

/// A number to so many significant digits, without zeros at the end, thousands set apart.
///
/// Beyond a billion billion and below a millionth it is written with a power of ten.
pub fn significant(value: f64, digits: usize) -> String {
    if value == 0.0 {
        return "0".into();
    }
    if !value.is_finite() {
        return "without bound".into();
    }
    if value < 0.0 {
        return format!("{MINUS}{}", significant(-value, digits));
    }
    let scientific = format!("{value:.*e}", digits - 1);
    let Some((mantissa, exponent)) = scientific.split_once('e') else {
        return scientific;
    };
    let exponent: i32 = exponent.parse().unwrap_or(0);
    if !(-6..18).contains(&exponent) {
        return format!(
            "{} × 10{}",
            without_trailing_zeros(mantissa),
            superscript(exponent)
        );
    }
    let decimals = usize::try_from(digits as i32 - 1 - exponent).unwrap_or(0);
    // Rounding to significant digits first: 12,345 to three is 12,300.
    let rounded = number::plain(&scientific).unwrap_or(value);
    grouped(without_trailing_zeros(&format!("{rounded:.decimals$}")))
}

/// A number to three significant digits.
pub fn three(value: f64) -> String {
    significant(value, 3)
}

/// A number to six significant digits.
pub fn six(value: f64) -> String {
    significant(value, 6)
}

/// A strength in a table: to six significant digits, and no less than whole, as the sentence has it.
pub fn amount(value: f64) -> String {
    if (1e6..1e18).contains(&value) {
        strength(value)
    } else {
        six(value)
    }
}

/// A strength in a sentence: whole from 10 up, else to three significant digits.
pub fn strength(value: f64) -> String {
    if (9.95..1e18).contains(&value) {
        grouped(&format!("{value:.0}"))
    } else {
        three(value)
    }
}

/// A fraction as per cent, to two significant digits and no less than whole per cents: `6.0 %`, `30 %`, `100 %`.
pub fn per_cent(fraction: f64) -> String {
    let value = fraction * 100.0;
    match value {
        0.0 => format!("0{NARROW}%"),
        _ if value < 0.0095 => format!("{}{NARROW}%", significant(value, 2)),
        _ if value < 0.095 => format!("{value:.3}{NARROW}%"),
        _ if value < 0.995 => format!("{value:.2}{NARROW}%"),
        _ if value < 9.95 => format!("{value:.1}{NARROW}%"),
        _ => format!("{}{NARROW}%", strength(value)),
    }
}

/// A time in a sentence, with its parts where it has a smaller unit: `8.81 h (8 h 49 min)`.
pub fn time(value: f64, unit: TimeUnit) -> String {
    let short = with_unit(value, unit);
    match in_parts(value, unit) {
        Some(parts) if parts != short => format!("{short} ({parts})"),
        _ => short,
    }
}

/// A time to three significant digits with its unit: `8.81 h`.
pub fn with_unit(value: f64, unit: TimeUnit) -> String {
    format!("{}{NO_BREAK}{}", three(value), unit.symbol())
}

/// `8 h 49 min`; `None` for seconds, and where the value has no use for a smaller unit.
fn in_parts(value: f64, unit: TimeUnit) -> Option<String> {
    let (smaller, count) = match unit {
        TimeUnit::Second => return None,
        TimeUnit::Minute => (TimeUnit::Second, 60.0),
        TimeUnit::Hour => (TimeUnit::Minute, 60.0),
        TimeUnit::Day => (TimeUnit::Hour, 24.0),
        TimeUnit::Week => (TimeUnit::Day, 7.0),
    };
    let parts = (value * count).round();
    if parts < 1.0 || value >= 100.0 || value.fract() == 0.0 {
        return None;
    }
    let whole = (parts / count).floor();
    let rest = parts - whole * count;
    let part = |number: f64, unit: TimeUnit| format!("{number}{NO_BREAK}{}", unit.symbol());
    Some(match (whole, rest) {
        (0.0, _) => part(rest, smaller),
        (_, 0.0) => part(whole, unit),
        _ => format!("{}{NO_BREAK}{}", part(whole, unit), part(rest, smaller)),
    })
}

/// A day as it stands on paper: `1 December 2026`; the month is counted from 1.
pub fn date(year: u32, month: u32, day: u32) -> String {
    const MONTHS: [&str; 12] = [
        "January",
        "February",
        "March",
        "April",
        "May",
        "June",
        "July",
        "August",
        "September",
        "October",
        "November",
        "December",
    ];
    let place = (month as usize).saturating_sub(1);
    format!("{day} {} {year}", MONTHS.get(place).copied().unwrap_or_default())
}

/// The same text with plain digits and plain blanks, as it is copied.
pub fn plain(text: &str) -> String {
    text.replace(NARROW, "").replace(NO_BREAK, " ")
}

fn without_trailing_zeros(digits: &str) -> &str {
    if digits.contains('.') {
        digits.trim_end_matches('0').trim_end_matches('.')
    } else {
        digits
    }
}

/// Thousands set apart by a narrow space, from five digits up.
fn grouped(digits: &str) -> String {
    let (whole, fraction) = digits
        .split_once('.')
        .map_or((digits, None), |(whole, rest)| (whole, Some(rest)));
    let mut text = String::new();
    for (place, digit) in whole.chars().enumerate() {
        let behind = whole.len() - place;
        if place > 0 && behind.is_multiple_of(3) && whole.len() > 4 {
            text.push(NARROW);
        }
        text.push(digit);
    }
    match fraction {
        Some(fraction) => format!("{text}.{fraction}"),
        None => text,
    }
}

fn superscript(exponent: i32) -> String {
    let raised = |letter: char| match letter {
        '-' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        other => char::from_u32('⁰' as u32 + other.to_digit(10).unwrap_or(0)).unwrap_or(other),
    };
    exponent.to_string().chars().map(raised).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_written_for_people() {
        assert_eq!(three(8.814), "8.81");
        assert_eq!(three(0.04), "0.04");
        assert_eq!(three(12345.0), "12\u{202f}300");
        assert_eq!(six(1234567.0), "1\u{202f}234\u{202f}570");
        assert_eq!(amount(1234567.0), "1\u{202f}234\u{202f}567");
        assert_eq!(amount(12345.678), "12\u{202f}345.7");
        assert_eq!(three(1.5e-9), "1.5 × 10⁻⁹");
        assert_eq!(three(0.0), "0");
        assert_eq!(three(-0.0), "0");
        assert_eq!(six(-216.6), "−216.6");
        assert_eq!(six(-200000.0), "−200\u{202f}000");
        assert_eq!(strength(-2000.0), "−2000");
        assert_eq!(three(-1.5e-9), "−1.5 × 10⁻⁹");
        assert_eq!(strength(9.951), "10");
        assert_eq!(strength(419.7), "420");
        assert_eq!(strength(9.5), "9.5");
        assert_eq!(strength(0.9996), "1");
    }

    #[test]
    fn per_cents_keep_two_digits() {
        for (fraction, text) in [
            (0.06, "6.0 %"),
            (0.3, "30 %"),
            (1.0, "100 %"),
            (0.00321, "0.32 %"),
            (0.000012, "0.0012 %"),
            (0.0, "0 %"),
        ] {
            assert_eq!(per_cent(fraction).replace(NARROW, " "), text);
        }
    }

    #[test]
    fn a_day_has_its_month_in_letters() {
        assert_eq!(date(2026, 12, 1), "1 December 2026");
        assert_eq!(date(2027, 1, 31), "31 January 2027");
    }

    #[test]
    fn times_have_parts() {
        let time = |value, unit| plain(&time(value, unit));
        assert_eq!(time(8.814, TimeUnit::Hour), "8.81 h (8 h 49 min)");
        assert_eq!(time(0.25, TimeUnit::Hour), "0.25 h (15 min)");
        assert_eq!(time(4.0, TimeUnit::Hour), "4 h");
        assert_eq!(time(1.999, TimeUnit::Hour), "2 h");
        assert_eq!(time(2.5, TimeUnit::Week), "2.5 wk (2 wk 4 d)");
        assert_eq!(time(30.2, TimeUnit::Second), "30.2 s");
        assert_eq!(time(1e-7, TimeUnit::Hour), "1 × 10⁻⁷ h");
    }
}
