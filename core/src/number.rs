//! Numbers as the link writes them, and how to write what is not one.
//!
//! `number = [ "-" ] digits [ "." digits ] [ ( "e" | "E" ) [ "-" ] digits ]`

/// Reads a number of the link's grammar; the error says how to write it instead.
///
/// # Errors
/// A hint in words, without a full stop, for texts outside the grammar and for numbers beyond the range of a double.
pub fn read(text: &str) -> Result<f64, String> {
    if let Some(value) = plain(text) {
        return Ok(value);
    }
    if !is_number(text) {
        return Err(hint(text));
    }
    Err(if text.parse() == Ok(0.0) {
        "is too small to be told from 0".into()
    } else {
        "is too large".into()
    })
}

/// The number of a text of the grammar within the range of a double; `None` for any other.
pub(crate) fn plain(text: &str) -> Option<f64> {
    short(text).or_else(|| any(text))
}

/// The tens that doubles hold, as far as a short number needs them.
const TENS: [f64; 16] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
];

/// A number of at most 15 digits without sign and exponent: the quotient of two whole numbers that doubles hold, and so
/// rounded once (W. D. Clinger, "How to read floating point numbers accurately", PLDI 1990, §4). Nearly all are.
fn short(text: &str) -> Option<f64> {
    let bytes = text.as_bytes();
    let (mut whole, mut point) = (0_u64, None);
    for (at, byte) in bytes.iter().enumerate().take(TENS.len()) {
        match byte {
            b'0'..=b'9' => whole = 10 * whole + u64::from(byte - b'0'),
            b'.' if at > 0 && point.is_none() => point = Some(at + 1),
            _ => return None,
        }
    }
    let places = bytes.len() - point.unwrap_or(bytes.len());
    let is_short = (1..=15 + usize::from(point.is_some())).contains(&bytes.len());
    (is_short && point != Some(bytes.len())).then(|| whole as f64 / TENS[places])
}

fn any(text: &str) -> Option<f64> {
    let value = text.parse::<f64>().ok().filter(|_| is_number(text))?;
    let is_zero = || !mantissa(text).contains(|digit| ('1'..='9').contains(&digit));
    // A zero has one sign only, or two links of the same meaning would differ.
    (value.is_finite() && (value != 0.0 || is_zero())).then_some(value + 0.0)
}

/// What stands before the exponent.
fn mantissa(text: &str) -> &str {
    text.split(['e', 'E']).next().unwrap_or(text)
}

/// Whether `text` is a number of the grammar.
fn is_number(text: &str) -> bool {
    let mut bytes = text.strip_prefix('-').unwrap_or(text).bytes();
    let mut next = digits(&mut bytes);
    if next == Some(Some(b'.')) {
        next = digits(&mut bytes);
    }
    if let Some(Some(b'e' | b'E')) = next {
        let mut sign = bytes.clone();
        if sign.next() == Some(b'-') {
            bytes = sign;
        }
        next = digits(&mut bytes);
    }
    next == Some(None)
}

/// Goes past digits, of which there must be some: what stands behind them, the inner `None` for nothing.
fn digits(bytes: &mut std::str::Bytes<'_>) -> Option<Option<u8>> {
    bytes.next().filter(u8::is_ascii_digit)?;
    Some(bytes.find(|byte| !byte.is_ascii_digit()))
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
    thousands(text)
        .and_then(|plain| instead(plain, "without marks for thousands"))
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
        .or_else(|| with_unit(text))
        .unwrap_or_else(|| "write a number, such as 600 or 0.04".into())
}

fn one(text: &str, mark: char) -> bool {
    text.matches(mark).count() == 1
}

/// `1,000` and `1'000` without their marks, where every group but the first has three digits.
fn thousands(text: &str) -> Option<String> {
    for mark in [',', '\'', '\u{2019}', '_', '.', ' ', '\u{a0}', '\u{202f}'] {
        let (body, fraction) = match text.split_once('.') {
            Some((body, fraction)) if mark != '.' => (body, Some(fraction)),
            _ => (text, None),
        };
        let groups: Vec<&str> = body.trim_start_matches('-').split(mark).collect();
        let first = groups[0];
        let grouped = groups.len() > 1 + usize::from(mark == '.')
            && (1..=3).contains(&first.len())
            && !first.starts_with('0')
            && groups[1..].iter().all(|group| group.len() == 3);
        if grouped {
            let plain = body.replace(mark, "");
            return Some(fraction.map_or(plain.clone(), |fraction| format!("{plain}.{fraction}")));
        }
    }
    None
}

/// How the hint for a per-cent sign ends.
pub(crate) const WITHOUT_PER_CENT: &str = ", without the per-cent sign";

fn per_cent(text: &str) -> Option<String> {
    let number = text.strip_suffix('%')?.trim_end();
    let value = number.parse::<f64>().ok().filter(|_| is_number(number))?;
    Some(format!("write {}{WITHOUT_PER_CENT}", hundredth(number, value)))
}

/// A hundredth of `value`, which is written `text`, in the digits that a hundredth of the text has: 0.7 gives 0.007.
pub(crate) fn hundredth(text: &str, value: f64) -> f64 {
    format!("{text}e-2").parse().unwrap_or(value / 100.0)
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

    /// Short numbers are read as all others.
    #[test]
    fn a_short_number_is_the_nearest_double() {
        let texts = [
            "0",
            "0.1",
            "00.30",
            "999999999999999",
            "99999999999999.9",
            "0.00000000000001",
            "3.14159265358979",
        ];
        let many = (0..2000_u64).map(|seed| {
            let digits = (seed + 1).wrapping_mul(0x9e37_79b9_7f4a_7c15) % 1_000_000_000_000_000;
            let text = format!("{digits:015}");
            let (whole, fraction) = text.split_at(1 + seed as usize % 14);
            format!("{whole}.{fraction}")
        });
        for text in texts.map(String::from).into_iter().chain(many) {
            assert_eq!(short(&text), text.parse().ok(), "{text}");
        }
        for text in [
            "",
            ".",
            "5.",
            ".5",
            "1.2.3",
            "-1",
            "1e5",
            "1 ",
            "1234567890123456",
            "12345678901234567",
        ] {
            assert_eq!(short(text), None, "{text}");
        }
    }

    #[test]
    fn a_hint_says_how_to_write_it() {
        for (text, part) in [
            ("1,000", "write 1000, without marks for thousands"),
            ("1,000.5", "write 1000.5, without marks for thousands"),
            ("1.000.000", "write 1000000, without marks for thousands"),
            ("1 000", "write 1000, without marks for thousands"),
            ("0,04", "write 0.04, with a point"),
            ("5.", "write 5, without the point at the end"),
            (".5", "write 0.5, with a 0 before the point"),
            ("1e+5", "write 1e5, without the plus sign"),
            ("\u{2212}3", "write -3, with a plain hyphen for the minus"),
            ("1 2", "write 12, without blanks"),
            ("30 %", "write 0.3, without the per-cent sign"),
            ("0.7%", "write 0.007, without the per-cent sign"),
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
