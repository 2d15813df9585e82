//! The double nearest to a decimal of the link's grammar, of two as near the even one.
//!
//! What the standard library reads numbers with brings ten kilobytes of powers of five into the page, more than all the
//! keys and their meanings. None are needed here: short decimals, which nearly all are, take one rounding of two numbers
//! that doubles hold (W. D. Clinger, "How to read floating point numbers accurately", PLDI 1990, §4), those of up to 19
//! digits one of 128 bits, and the rest are divided by hand.

/// The tens that doubles hold.
const TENS: [f64; 23] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18,
    1e19, 1e20, 1e21, 1e22,
];

/// Whole numbers up to this one are doubles.
const MOST_WHOLE: u64 = 1 << 53;

/// Below this a number of 64 bits has room for one more digit.
const ROOM: u64 = 1_000_000_000_000_000_000;

/// The tens of 64 bits.
const MOST_TENS: i64 = 19;

/// The significant digits that can tell on which side of the middle between two doubles a decimal lies; of those
/// behind them it matters only whether there is another than 0.
const TELLING: usize = 768;

/// An exponent beyond any that the digits of a text could bring back.
const FAR: i64 = 1 << 50;

/// The double nearest to `text`: infinite beyond the range of doubles, 0 below it. `None` outside the grammar
/// `[ "-" ] digits [ "." digits ] [ ( "e" | "E" ) [ "-" ] digits ]`.
pub(crate) fn nearest(text: &str) -> Option<f64> {
    let unsigned = text.strip_prefix('-').unwrap_or(text);
    let decimal = Decimal::of(unsigned.as_bytes())?;
    let size = decimal.short().or_else(|| decimal.middling());
    let size = size.unwrap_or_else(|| decimal.long());
    Some(if unsigned.len() < text.len() { -size } else { size })
}

/// A decimal as it is written.
struct Decimal<'a> {
    /// What stands before the exponent.
    mantissa: &'a [u8],
    /// The first significant digits, as many as there is room for.
    first: u64,
    /// How many digits follow those.
    further: i64,
    /// The power of ten of the last digit of all.
    exponent: i64,
}

impl Decimal<'_> {
    fn of(text: &[u8]) -> Option<Decimal<'_>> {
        let end = text.iter().position(|byte| matches!(byte, b'e' | b'E'));
        let (mantissa, power) = text.split_at(end.unwrap_or(text.len()));
        let (mut first, mut further, mut point) = (0, 0, None);
        for (at, byte) in mantissa.iter().enumerate() {
            match byte {
                b'0'..=b'9' if first < ROOM => first = 10 * first + u64::from(byte - b'0'),
                b'0'..=b'9' => further += 1,
                b'.' if at > 0 && point.is_none() => point = Some(at + 1),
                _ => return None,
            }
        }
        // There are digits, and also behind a point.
        if point.unwrap_or(0) == mantissa.len() {
            return None;
        }
        let places = mantissa.len() - point.unwrap_or(mantissa.len());
        let exponent = match power {
            [] => 0,
            [_, b'-', digits @ ..] => -whole(digits)?,
            [_, digits @ ..] => whole(digits)?,
        };
        Some(Decimal {
            mantissa,
            first,
            further,
            exponent: exponent - places as i64,
        })
    }

    /// Where digits and power of ten are doubles: their product or quotient is rounded once.
    fn short(&self) -> Option<f64> {
        let tens = TENS.get(usize::try_from(self.exponent.unsigned_abs()).ok()?)?;
        let digits = self.first as f64;
        let size = if self.exponent < 0 {
            digits / tens
        } else {
            digits * tens
        };
        (self.first <= MOST_WHOLE && self.further == 0).then_some(size)
    }

    /// Where digits and power of ten have 64 bits each.
    fn middling(&self) -> Option<f64> {
        if self.further > 0 || self.exponent.abs() > MOST_TENS {
            return None;
        }
        let ten = u128::from(10_u64.pow(self.exponent.unsigned_abs() as u32));
        let digits = u128::from(self.first);
        if self.exponent >= 0 {
            return Some(rounded(digits * ten, 0));
        }
        // As far up as it goes, for a quotient of at least 64 bits.
        let up = digits.leading_zeros().min(127);
        let (quotient, rest) = ((digits << up) / ten, (digits << up) % ten);
        Some(rounded(quotient | u128::from(rest > 0), -i64::from(up)))
    }

    /// In whole numbers of any length.
    fn long(&self) -> f64 {
        let digits = self.mantissa.iter().filter(|byte| **byte != b'.');
        let mut digits = digits
            .map(|byte| u32::from(byte - b'0'))
            .skip_while(|digit| *digit == 0);
        let mut above = Whole::default();
        let mut count = 0;
        for digit in digits.by_ref().take(TELLING) {
            above.times(10, digit);
            count += 1;
        }
        let rest = digits.clone().count() as i64;
        let mut exponent = self.exponent + rest;
        // The decimal lies below this power of ten, and not below the one before it.
        let power = exponent + count;
        if count == 0 || power < -323 {
            return 0.0;
        }
        if power > 309 {
            return f64::INFINITY;
        }
        if digits.any(|digit| digit > 0) {
            above.times(10, 1);
            exponent -= 1;
        }
        // 10^e is 5^e × 2^e.
        let mut below = Whole(vec![1]);
        let by_five = if exponent < 0 { &mut below } else { &mut above };
        by_five.times_power(5, 13, exponent.unsigned_abs());
        quotient(above, below, exponent)
    }
}

/// The whole number of digits alone, of which there must be some; at least [`FAR`] where it is.
fn whole(digits: &[u8]) -> Option<i64> {
    let one = |value: i64, byte: &u8| {
        let digit = byte.is_ascii_digit().then(|| i64::from(byte - b'0'))?;
        Some(10 * value.min(FAR) + digit)
    };
    digits.first()?;
    digits.iter().try_fold(0, one)
}

/// The double nearest to `above` / `below` × 2^`exponent`; both are more than 0.
fn quotient(mut above: Whole, mut below: Whole, mut exponent: i64) -> f64 {
    // Of the same length their quotient lies between a half and 2.
    let further = above.length() as i64 - below.length() as i64;
    let shorter = if further < 0 { &mut above } else { &mut below };
    shorter.times_power(2, 31, further.unsigned_abs());
    exponent += further;
    let mut bits = 0_u64;
    for _ in 0..64 {
        bits <<= 1;
        if above.take(&below) {
            bits |= 1;
        }
        above.times(2, 0);
    }
    let rest = above.length() > 0;
    rounded(u128::from(bits | u64::from(rest)), exponent - 63)
}

/// The double nearest to `bits` × 2^`exponent`, of fewer than 128 bits. What was cut off behind the bits has set the last
/// one, and there are 55 or more where anything was.
fn rounded(bits: u128, exponent: i64) -> f64 {
    /// The power of two of the last bit of the least doubles.
    const LEAST: i64 = -1074;
    /// The bits of a double.
    const BITS: i64 = 53;
    if bits == 0 {
        return 0.0;
    }
    let length = 128 - i64::from(bits.leading_zeros());
    let last = (exponent + length - BITS).max(LEAST);
    let kept = match last - exponent {
        up @ ..=0 => bits << -up,
        128.. => 0,
        down => {
            let (kept, cut) = (bits >> down, bits << (128 - down));
            let half = 1 << 127;
            kept + u128::from(cut > half || cut == half && kept & 1 == 1)
        }
    };
    // The leading bit is left out of a double's bits: added to them, it makes the exponent one more, as it must be, and so
    // it does where rounding brought one more bit.
    let bits = ((last - LEAST) << (BITS - 1)) as u64 + kept as u64;
    f64::from_bits(bits.min(f64::INFINITY.to_bits()))
}

/// A whole number of any length, its lowest 32 bits first, without zeros at its end.
#[derive(Default)]
struct Whole(Vec<u32>);

impl Whole {
    /// Multiplies, and adds.
    fn times(&mut self, by: u32, plus: u32) {
        let mut carry = u64::from(plus);
        for part in &mut self.0 {
            carry += u64::from(*part) * u64::from(by);
            *part = carry as u32;
            carry >>= 32;
        }
        if carry > 0 {
            self.0.push(carry as u32);
        }
    }

    /// Multiplies by `base` so many times, `at_once` of which 32 bits hold.
    fn times_power(&mut self, base: u32, at_once: u32, mut times: u64) {
        while times > 0 {
            let now = times.min(u64::from(at_once));
            self.times(base.pow(now as u32), 0);
            times -= now;
        }
    }

    /// The number of its bits.
    fn length(&self) -> usize {
        let unused = self.0.last().map_or(0, |last| last.leading_zeros());
        32 * self.0.len() - unused as usize
    }

    /// Takes another away where it is no less, and says whether it was.
    fn take(&mut self, other: &Whole) -> bool {
        let by_length = self.0.len().cmp(&other.0.len());
        let order = by_length.then_with(|| self.0.iter().rev().cmp(other.0.iter().rev()));
        if order.is_lt() {
            return false;
        }
        let mut borrowed = false;
        for (at, part) in self.0.iter_mut().enumerate() {
            let (less, once) = part.overflowing_sub(other.0.get(at).copied().unwrap_or(0));
            let (less, twice) = less.overflowing_sub(u32::from(borrowed));
            (*part, borrowed) = (less, once || twice);
        }
        let used = self
            .0
            .iter()
            .rposition(|part| *part > 0)
            .map_or(0, |last| last + 1);
        self.0.truncate(used);
        true
    }
}

#[cfg(test)]
mod tests {
    use super::nearest;

    /// The standard library's reader as the judge.
    fn check(text: &str) {
        let (own, known): (_, f64) = (nearest(text), text.parse().expect("a number"));
        assert_eq!(
            own.map(f64::to_bits),
            Some(known.to_bits()),
            "{text}: {own:?}, {known:e}"
        );
    }

    #[test]
    fn edges_of_every_way_to_read() {
        let texts = [
            "0",
            "-0",
            "0.0",
            "007",
            "00.30",
            "0e999999999999999999999",
            "1e999999999999999999999",
            "-1e-999999999999999999999",
            "9007199254740992",
            "9007199254740993",
            "9007199254740993e1",
            "9007199254740993.0000000000000000000001",
            "1e22",
            "1e23",
            "8.5e22",
            "123e-22",
            "123e-23",
            "9999999999999999999",
            "18446744073709551615",
            "18446744073709551616",
            "99999999999999999999",
            "9999999999999999999e19",
            "9999999999999999999e-19",
            "1e-20",
            "2.4703282292062327e-324",
            "2.4703282292062328e-324",
            "4.9e-324",
            "9e-324",
            "1e-323",
            "1e-324",
            "2.2250738585072011e-308",
            "2.2250738585072014e-308",
            "1.7976931348623157e308",
            "1.7976931348623158e308",
            "1.7976931348623159e308",
            "179769313486231580793728971405301e277",
            "1e309",
            "0.1e309",
            "1e308",
        ];
        texts.into_iter().for_each(check);
        check(&format!("0.{}1e400", "0".repeat(400)));
        check(&format!("1{}e-400", "0".repeat(420)));
    }

    #[test]
    fn what_is_outside_the_grammar_is_none() {
        for text in [
            "",
            ".",
            "5.",
            ".5",
            "1.2.3",
            "-",
            "--1",
            "+1",
            "1e",
            "1e-",
            "1e+5",
            "e5",
            "1e5.",
            "1.e5",
            "1ee5",
            "1e--5",
            "1-",
            "1,0",
            " 1",
            "1 ",
            "inf",
            "NaN",
            "0x1",
            "\u{2212}1",
            "1\u{e9}",
        ] {
            assert_eq!(nearest(text), None, "{text}");
        }
    }

    /// The middle between a double and the next, in all its digits.
    fn middle(bits: u64) -> Option<String> {
        // Half of the last place is a whole number of 2^-1075, and 1075 doublings of the digits make it one of 10^-1075.
        let exponent = (bits >> 52).saturating_sub(1);
        let places = i64::try_from(exponent).ok()? - 1075;
        let fraction = bits & ((1 << 52) - 1) | u64::from(bits >> 52 > 0) << 52;
        let mut digits: Vec<u8> = format!("{}", 2 * fraction + 1).into_bytes();
        digits.iter_mut().for_each(|digit| *digit -= b'0');
        let by = if places < 0 { 5 } else { 2 };
        for _ in 0..places.abs() {
            let mut carry = 0;
            for digit in digits.iter_mut().rev() {
                carry += *digit * by;
                (*digit, carry) = (carry % 10, carry / 10);
            }
            if carry > 0 {
                digits.insert(0, carry);
            }
        }
        let text: String = digits.iter().map(|digit| char::from(b'0' + digit)).collect();
        Some(format!("{text}e{}", places.min(0)))
    }

    /// A middle goes to the even one of its two doubles, and the next decimal on either side to the nearer.
    #[test]
    fn middles_go_to_the_even_one() {
        let mut state = 1_u64;
        let mut random = || {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            state ^ state >> 29
        };
        let edges = [
            0,
            1,
            2,
            (1 << 52) - 1,
            1 << 52,
            (1 << 53) - 1,
            0x7fe0_0000_0000_0000,
            0x7fef_ffff_ffff_fffe,
        ];
        let some: Vec<u64> = (0..300)
            .map(|_| (random() >> 1) % 0x7ff0_0000_0000_0000)
            .collect();
        let usual = (0..300).map(|_| 0x3fe0_0000_0000_0000 + random() % (1 << 56));
        for bits in edges.into_iter().chain(some).chain(usual) {
            let text = middle(bits).expect("small");
            let even = f64::from_bits(bits + (bits & 1));
            assert_eq!(nearest(&text), Some(even), "{text}");
            let (digits, exponent) = text.split_once('e').expect("written so");
            let above = format!("{digits}.{}1e{exponent}", "0".repeat(30));
            assert_eq!(nearest(&above), Some(f64::from_bits(bits + 1)), "{above}");
            check(&above);
            // A last digit of 0, which only great whole numbers end in, would have to borrow.
            let (kept, last) = digits.split_at(digits.len() - 1);
            if let Some(last) = last.as_bytes()[0].checked_sub(b'1') {
                let below = format!("{kept}{last}.{}e{exponent}", "9".repeat(30));
                assert_eq!(nearest(&below), Some(f64::from_bits(bits)), "{below}");
                check(&below);
            }
            check(&text);
        }
    }
}
