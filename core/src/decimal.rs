//! A number of the link multiplied by a quotient of whole numbers, in decimals as long as it comes out even.
//!
//! 0.04 times 24 is 0.96. As doubles it would be 0.9600000000000001, which nobody typed.

use crate::number;

/// The significant digits that are kept of a text; a double has fewer than 18.
const MOST_DIGITS: usize = 28;

/// The most significant digits that are written: what is longer is rounded to the nearest double.
const WRITTEN_DIGITS: usize = 17;

/// The significant digits that any double keeps of a decimal.
const ROUNDED_DIGITS: usize = 15;

/// Where the digits of a quotient are cut off: far beyond those of a double, and well within 128 bits.
const ENOUGH: u128 = 10u128.pow(33);

/// digits × 10^exponent, with its sign apart.
struct Decimal {
    negative: bool,
    digits: u128,
    exponent: i32,
}

/// `text` times `by.0` / `by.1`, both above 0 and below 2^20, as a number of the link. Exact where it comes out even within
/// 17 digits, else the nearest double.
///
/// `None` for a text that is no number of the link.
pub(crate) fn multiplied(text: &str, by: (u32, u32)) -> Option<String> {
    let value = number::read(text).ok()?;
    if value == 0.0 || by.0 == by.1 {
        return Some(text.to_owned());
    }
    let decimal = Decimal::of(text)?;
    let product = decimal.times(by)?;
    let short = product.rounded(ROUNDED_DIGITS);
    // A long number is one that did not come out even before: then it goes back to where it came from.
    let came_from = decimal.significant().0.len() >= ROUNDED_DIGITS
        && short.times((by.1, by.0))?.significant() == decimal.significant();
    Some(if came_from {
        short.written()
    } else {
        product.written()
    })
}

/// A finite number as the link writes it, in the fewest digits that read back the same.
pub(crate) fn written(value: f64) -> String {
    let shortest = format!("{value:e}");
    // Without digits there is nothing to be written, as for 0.
    let decimal = Decimal::of(&shortest).filter(|decimal| decimal.digits > 0);
    decimal.map_or_else(|| format!("{value}"), |decimal| decimal.written())
}

impl Decimal {
    /// The decimal of a number of the link; beyond 28 digits the rest is cut off and marked by a last 1, so that it is
    /// rounded to the right side.
    fn of(text: &str) -> Option<Decimal> {
        let (negative, text) = match text.strip_prefix('-') {
            Some(rest) => (true, rest),
            None => (false, text),
        };
        let (mantissa, exponent) = match text.split_once(['e', 'E']) {
            Some((mantissa, exponent)) => (mantissa, exponent.parse().ok()?),
            None => (text, 0i32),
        };
        let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
        let all = [whole, fraction].concat();
        let kept = all.trim_start_matches('0');
        let places = i32::try_from(fraction.len()).ok()?;
        let exponent = exponent.checked_sub(places)?;
        if kept.len() <= MOST_DIGITS {
            let digits = kept.parse().ok()?;
            return Some(Decimal {
                negative,
                digits,
                exponent,
            });
        }
        let cut = i32::try_from(kept.len() - MOST_DIGITS).ok()?;
        let digits = kept[..MOST_DIGITS].parse::<u128>().ok()?;
        Some(Decimal {
            negative,
            digits: digits * 10 + 1,
            exponent: exponent.checked_add(cut - 1)?,
        })
    }

    fn times(&self, (by, over): (u32, u32)) -> Option<Decimal> {
        let over = u128::from(over);
        let product = self.digits * u128::from(by);
        let (mut digits, mut rest) = (product / over, product % over);
        let mut exponent = self.exponent;
        while rest > 0 && digits < ENOUGH {
            digits = digits * 10 + rest * 10 / over;
            rest = rest * 10 % over;
            exponent = exponent.checked_sub(1)?;
        }
        let exact = Decimal {
            negative: self.negative,
            digits,
            exponent,
        };
        if rest == 0 && exact.significant().0.len() <= WRITTEN_DIGITS {
            return Some(exact);
        }
        // A last 1 for all that is cut off keeps a half from being taken for one.
        let nearest = number::plain(&format!("{digits}1e{}", exponent - 1))?;
        let nearest = Decimal::of(&format!("{nearest:e}"))?;
        Some(Decimal {
            negative: self.negative,
            ..nearest
        })
    }

    /// The same to at most so many significant digits.
    fn rounded(&self, most: usize) -> Decimal {
        let over = self.digits.to_string().len().saturating_sub(most) as u32;
        let step = 10u128.pow(over.min(38));
        Decimal {
            negative: self.negative,
            digits: (self.digits + step / 2) / step,
            exponent: self.exponent + over as i32,
        }
    }

    /// The digits without the zeros at their end, and the power of ten of the last one.
    fn significant(&self) -> (String, i32) {
        let all = self.digits.to_string();
        let kept = all.trim_end_matches('0');
        (kept.to_owned(), self.exponent + (all.len() - kept.len()) as i32)
    }

    /// In the grammar of the link: plain, and with a power of ten where that would be long.
    fn written(&self) -> String {
        let (digits, last) = self.significant();
        let first = last + digits.len() as i32 - 1;
        let number = match first {
            0..15 if last >= 0 => digits + &"0".repeat(last as usize),
            0..15 => {
                let (whole, fraction) = digits.split_at(first as usize + 1);
                format!("{whole}.{fraction}")
            }
            -5..0 => format!("0.{}{digits}", "0".repeat((-first - 1) as usize)),
            _ => {
                let (whole, fraction) = digits.split_at(1);
                let point = if fraction.is_empty() { "" } else { "." };
                format!("{whole}{point}{fraction}e{first}")
            }
        };
        if self.negative {
            format!("-{number}")
        } else {
            number
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_comes_out_even_is_exact() {
        for (text, by, product) in [
            ("0.04", (24, 1), "0.96"),
            ("0.96", (1, 24), "0.04"),
            ("0.1", (3, 1), "0.3"),
            ("1e-9", (60, 1), "6e-8"),
            ("2.50", (4, 1), "10"),
            ("3600", (1, 3600), "1"),
            ("-20", (1, 8), "-2.5"),
            ("0", (24, 1), "0"),
            ("0.00", (1, 7), "0.00"),
            ("1e9", (604_800, 1), "604800000000000"),
            ("4", (86_400, 3600), "96"),
            ("007", (1, 1), "007"),
            ("0.3333333333", (60, 1), "19.999999998"),
        ] {
            assert_eq!(multiplied(text, by).as_deref(), Some(product), "{text} {by:?}");
        }
    }

    #[test]
    fn the_rest_is_the_nearest_double() {
        for (text, by, quotient) in [
            ("1", (1, 24), 1.0 / 24.0),
            ("0.04", (1, 3600), 0.04 / 3600.0),
            ("5", (1, 7), 5.0 / 7.0),
        ] {
            let written = multiplied(text, by).expect(text);
            let read: f64 = written.parse().expect("a number");
            assert!((read - quotient).abs() <= quotient * f64::EPSILON, "{written}");
            assert!(written.len() <= 23, "{written}");
        }
        let long = format!("0.{}", "123456789".repeat(40));
        let product = multiplied(&long, (60, 1)).expect("a number");
        assert_eq!(product.parse(), Ok(7.407_407_347_407_407), "{product}");
    }

    #[test]
    fn there_and_back_is_where_it_was() {
        for text in ["0.04", "1", "17", "0.0123", "2.5e-6", "464", "8.81"] {
            for (by, over) in [(1, 24), (1, 3600), (1, 7), (7, 1), (1, 60), (1, 604_800)] {
                let there = multiplied(text, (by, over)).expect(text);
                let back = multiplied(&there, (over, by)).expect(text);
                assert_eq!(back.parse::<f64>(), text.parse::<f64>(), "{text} {there} {back}");
            }
        }
    }

    #[test]
    fn a_double_is_written_in_the_fewest_digits() {
        for (value, text) in [
            (0.04, "0.04"),
            (600.0, "600"),
            (-2.5, "-2.5"),
            (0.0, "0"),
            (1e-9, "1e-9"),
            (1.25e-300, "1.25e-300"),
            (1e9, "1000000000"),
            (1e20, "1e20"),
        ] {
            assert_eq!(written(value), text);
        }
    }

    #[test]
    fn what_is_no_number_of_the_link_has_no_product() {
        for text in ["", "0,04", ".5", "5.", "1e+5", "NaN", "1e999", " 1"] {
            assert_eq!(multiplied(text, (24, 1)), None, "{text}");
        }
    }
}
