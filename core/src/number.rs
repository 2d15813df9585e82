//! Numbers as the link writes them, and how to write what is not one.
//!
//! `number = [ "-" ] digits [ "." digits ] [ ( "e" | "E" ) [ "-" ] digits ]`

use crate::nearest_double::nearest;

/// Reads a number of the link's grammar; the error says how to write it instead.
///
/// # Errors
/// A hint in words, without a full stop, for texts outside the grammar and for numbers beyond the range of a double.
pub fn read(text: &str) -> Result<f64, String> {
    match nearest(text) {
        None => Err(hint(text)),
        Some(value) if value.is_infinite() => Err("is too large".into()),
        Some(0.0) if !is_zero(text) => Err("is too small to be told from 0".into()),
        // A zero has one sign only, or two links of the same meaning would differ.
        Some(value) => Ok(value + 0.0),
    }
}

/// The number of a text of the grammar within the range of a double; `None` for any other.
pub fn plain(text: &str) -> Option<f64> {
    let value = nearest(text)?;
    let is_within = value.is_finite() && (value != 0.0 || is_zero(text));
    is_within.then_some(value + 0.0)
}

/// `value` rounded to so many significant digits.
pub(crate) fn rounded(value: f64, digits: usize) -> f64 {
    let decimals = digits.saturating_sub(1);
    plain(&format!("{value:.decimals$e}")).unwrap_or(value)
}

/// Whether a number of the grammar is 0 as it is written.
fn is_zero(text: &str) -> bool {
    let mantissa = text.split(['e', 'E']).next().unwrap_or(text);
    !mantissa.contains(|digit| ('1'..='9').contains(&digit))
}

/// Whether `text` is a number of the grammar.
fn is_number(text: &str) -> bool {
    nearest(text).is_some()
}

/// How to write what `text` seems to mean.
fn hint(text: &str) -> String {
    let instead = |written: String, why: &str| {
        if is_number(&written) {
            Some(format!("write {written}, {why}"))
        } else {
            None
        }
    };
    let plainly = "without marks for thousands";
    let with_point = "with a point and without marks for thousands";
    [(None, plainly), (Some('.'), plainly), (Some(','), with_point)]
        .into_iter()
        .find_map(|(point, why)| instead(thousands(text, point)?, why))
        .or_else(|| {
            one(text, ',')
                .then(|| instead(text.replace(',', "."), "with a point"))
                .flatten()
        })
        .or_else(|| {
            text.strip_suffix('.')
                .and_then(|whole| instead(whole.into(), "without the point at the end"))
        })
        .or_else(|| {
            let (sign, rest) = text.strip_prefix('-').map_or(("", text), |rest| ("-", rest));
            rest.starts_with('.')
                .then(|| instead(format!("{sign}0{rest}"), "with a 0 before the point"))
                .flatten()
        })
        .or_else(|| {
            text.contains('+')
                .then(|| instead(text.replace('+', ""), "without the plus sign"))
                .flatten()
        })
        .or_else(|| {
            instead(
                text.replace(['\u{2212}', '\u{2013}', '\u{2010}', '\u{2011}'], "-"),
                "with a plain hyphen for the minus",
            )
        })
        .or_else(|| instead(text.replace(char::is_whitespace, ""), "without blanks"))
        .or_else(|| per_cent(text))
        .or_else(|| instead(without_letters(text)?, "without letters among its digits"))
        .or_else(|| without_power(text))
        .or_else(|| with_unit(text))
        .unwrap_or_else(|| "write a number, such as 600 or 0.04".into())
}

fn one(text: &str, mark: char) -> bool {
    text.matches(mark).count() == 1
}

/// `1,000` and `1'000` without their marks, where every group but the first has three digits, with the decimals behind
/// `point`.
fn thousands(text: &str, point: Option<char>) -> Option<String> {
    let (body, decimals) = match point {
        Some(point) => {
            let (body, digits) = text.split_once(point)?;
            (body, format!(".{digits}"))
        }
        None => (text, String::new()),
    };
    for mark in [',', '.', '\'', '\u{2019}', '_', ' ', '\u{a0}', '\u{202f}'] {
        let groups: Vec<&str> = body.trim_start_matches('-').split(mark).collect();
        let first = groups[0];
        let grouped = groups.len() > 1
            && (1..=3).contains(&first.len())
            && !first.starts_with('0')
            && groups[1..].iter().all(|group| group.len() == 3);
        if grouped {
            return Some(body.replace(mark, "") + &decimals);
        }
    }
    None
}

/// How the hint for a per-cent sign ends.
pub(crate) const WITHOUT_PER_CENT: &str = ", without the per-cent sign";

fn per_cent(text: &str) -> Option<String> {
    let number = text.strip_suffix('%')?.trim_end();
    let value = plain(number)?;
    Some(format!("write {}{WITHOUT_PER_CENT}", hundredth(number, value)))
}

/// A hundredth of `value`, which is written `text`, in the digits that a hundredth of the text has: 0.7 gives 0.007.
pub(crate) fn hundredth(text: &str, value: f64) -> f64 {
    plain(&format!("{text}e-2")).unwrap_or(value / 100.0)
}

/// `6oo` and `1l0` with the digits that their letters look like; none where no digit stands among them.
fn without_letters(text: &str) -> Option<String> {
    let digits = text.replace(['o', 'O'], "0").replace(['l', 'I'], "1");
    text.contains(|letter: char| letter.is_ascii_digit())
        .then_some(digits)
}

/// `4e`, `4e-` and `4e+`, before their power of ten.
fn without_power(text: &str) -> Option<String> {
    let number = text.trim_end_matches(['-', '+']).strip_suffix(['e', 'E'])?;
    is_number(&format!("{number}e3"))
        .then(|| format!("write {number} alone, or a power of ten behind the e, as in {number}e3"))
}

/// A number with letters behind it, `4h`.
fn with_unit(text: &str) -> Option<String> {
    let end = text.trim_end_matches(char::is_alphabetic).trim_end();
    (end.len() < text.len() && is_number(end)).then(|| format!("write {end} alone, without a unit"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_of_the_grammar_are_read() {
        for (text, value) in [
            ("0", 0.0),
            ("-3", -3.0),
            ("0.04", 0.04),
            ("1e-9", 1e-9),
            ("1E9", 1e9),
            ("007", 7.0),
        ] {
            assert_eq!(read(text), Ok(value), "{text}");
        }
        assert!(read("-0").is_ok_and(|zero| zero.is_sign_positive()));
    }

    #[test]
    fn a_value_is_rounded_as_it_is_written() {
        for (value, digits, nearest) in [
            (607.204_915, 3, 607.0),
            (0.057_131_2, 4, 0.057_13),
            (-999.99, 4, -1000.0),
            (0.0, 2, 0.0),
            (4.9, 0, 5.0),
        ] {
            assert_eq!(rounded(value, digits), nearest, "{value} to {digits}");
        }
        assert_eq!(rounded(f64::INFINITY, 3), f64::INFINITY);
        assert_eq!(rounded(f64::MAX, 2), f64::MAX, "1.8e308 is none");
    }

    #[test]
    fn a_hint_says_how_to_write_it() {
        for (text, part) in [
            ("1,000", "write 1000, without marks for thousands"),
            ("1,000.5", "write 1000.5, without marks for thousands"),
            ("1.000.000", "write 1000000, without marks for thousands"),
            ("1 000", "write 1000, without marks for thousands"),
            (
                "1.200,5",
                "write 1200.5, with a point and without marks for thousands",
            ),
            (
                "-1 000 000,25",
                "write -1000000.25, with a point and without marks",
            ),
            ("1.000.000,5", "write 1000000.5, with a point and without marks"),
            ("1,000,000", "write 1000000, without marks for thousands"),
            ("1.20,5", "write a number"),
            ("12,000.5,5", "write a number"),
            ("0,04", "write 0.04, with a point"),
            ("5.", "write 5, without the point at the end"),
            (".5", "write 0.5, with a 0 before the point"),
            ("1e+5", "write 1e5, without the plus sign"),
            ("\u{2212}3", "write -3, with a plain hyphen for the minus"),
            ("1 2", "write 12, without blanks"),
            ("30 %", "write 0.3, without the per-cent sign"),
            ("0.7%", "write 0.007, without the per-cent sign"),
            ("1e999%", "write a number"),
            ("6oo", "write 600, without letters among its digits"),
            ("6O0", "write 600, without letters"),
            ("l00", "write 100, without letters"),
            ("-1I.o4", "write -11.04, without letters"),
            ("lo", "write a number"),
            ("6oz", "write 6 alone, without a unit"),
            ("4 l", "write 4 alone, without a unit"),
            ("4e", "write 4 alone, or a power of ten behind the e, as in 4e3"),
            ("4e+", "write 4 alone, or a power of ten behind the e"),
            ("0.04E-", "write 0.04 alone, or a power of ten behind the e"),
            ("1e5e", "write 1e5 alone, without a unit"),
            ("4 h", "write 4 alone, without a unit"),
            ("NaN", "write a number"),
            ("inf", "write a number"),
            ("1e999", "too large"),
            ("1e-999", "too small"),
        ] {
            let hint = read(text).expect_err(text);
            assert!(hint.contains(part), "{text}: {hint}");
        }
    }
}
