//! What is written for a number that stands in a field when it is put in question or in doubt.

use crate::decimal::written as written_number;
use crate::keys::{self, Kind, LARGEST};
use crate::number;
use crate::quantity::Quantity;

/// The limits of a number: the least, whether that itself is excluded, and the greatest.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limits {
    low: f64,
    above: bool,
    high: f64,
}

/// How far a number in doubt reaches to either side.
const DOUBT: f64 = 0.25;

/// The step that its ends are rounded to is at most this part of the number.
const STEP: f64 = 0.05;

/// What stands for a number that is asked for, in place of `text`: `600` becomes `600?`, nothing `?`, and an interval the
/// range to look in, `0.04?0.03..0.05`.
///
/// `None` where a question stands already, or what stands cannot be read.
pub fn asked(text: &str) -> Option<String> {
    let text = text.trim();
    if text.is_empty() {
        return Some("?".into());
    }
    match Quantity::read(text).ok()? {
        Quantity::Number(_) => Some(format!("{text}?")),
        Quantity::Interval { .. } => {
            // In the digits that were written.
            let ends: Vec<&str> = text.split("..").collect();
            let likely = if ends.len() == 3 { ends[1] } else { "" };
            Some(format!("{likely}?{}..{}", ends[0], ends[ends.len() - 1]))
        }
        Quantity::Question { .. } => None,
    }
}

/// What stands for a number in doubt, in place of `text`, which is `default` where it is empty: `0.04` becomes
/// `0.03..0.05`, a quarter to either side in round numbers and within the limits of the number; a question becomes the
/// range that it looks in.
///
/// `None` where an interval stands already, what stands cannot be read, or it is 0, of which a quarter is nothing.
pub fn doubted(text: &str, default: Option<&str>, limits: Limits) -> Option<String> {
    let text = match text.trim() {
        "" => default?,
        text => text,
    };
    match Quantity::read(text).ok()? {
        Quantity::Number(value) => around(value, limits),
        Quantity::Interval { .. } => None,
        Quantity::Question { between: Some(_), .. } => {
            text.split_once('?').map(|(_, between)| between.to_owned())
        }
        Quantity::Question { now, .. } => around(now?, limits),
    }
}

impl Limits {
    /// Those of a key of the link, also of a phase's; `None` for a key that is no number.
    pub fn of_key(key: &str) -> Option<Limits> {
        let key = match key.split_once('.') {
            Some((_, change)) if key.starts_with("phase") && keys::is_numbered(key) => change,
            _ => key,
        };
        if key == "from" {
            return Some(Limits::of_part("from"));
        }
        match keys::find(key)?.kind {
            Kind::Quantity { low, above, high } => Some(Limits { low, above, high }),
            _ => None,
        }
    }

    /// Those of a part of an item of a list: a size may be below 0, a rate and a time may not.
    pub fn of_part(part: &str) -> Limits {
        Limits {
            low: if part == "size" { -LARGEST } else { 0.0 },
            above: false,
            high: LARGEST,
        }
    }

    /// Whether a number is within them.
    pub(crate) fn hold(self, value: f64) -> bool {
        value >= self.low && value <= self.high && !(self.above && value == self.low)
    }
}

/// A quarter to either side of a number, outwards to a round one; `None` where nothing is left of that.
fn around(value: f64, limits: Limits) -> Option<String> {
    let size = value.abs();
    // The number is a decimal: so are its ends, counted in steps of 1 or 5 times a power of ten.
    let decade = format!("{:e}", size * STEP)
        .split_once('e')?
        .1
        .parse::<i32>()
        .ok()?;
    let whole = number::plain(&format!("{size}e{}", -decade))?;
    let step = if whole * STEP >= 5.0 { 5.0 } else { 1.0 };
    let reach = |part: f64| whole * part / step;
    // What is a whole number of steps but for rounding is that number.
    let near = reach(1.0) * 1e-12;
    let least = libm::floor(reach(1.0 - DOUBT) + near) * step;
    let most = libm::ceil(reach(1.0 + DOUBT) - near) * step;
    let written = |count: f64| number::plain(&format!("{count}e{decade}"));
    let (small, large) = (written(least)?, written(most)?);
    let (low, high) = if value < 0.0 {
        (-large, -small)
    } else {
        (small, large)
    };
    let (low, high) = (low.max(limits.low), high.min(limits.high));
    let inside = low < high && !(limits.above && low <= limits.low);
    inside.then(|| format!("{}..{}", written_number(low), written_number(high)))
}

#[cfg(test)]
mod tests {
    use super::*;

    const ANY: Limits = Limits {
        low: 0.0,
        above: false,
        high: LARGEST,
    };

    #[test]
    fn a_number_is_asked_for_where_it_stands() {
        for (text, asked_for) in [
            ("600", Some("600?")),
            (" 0.04 ", Some("0.04?")),
            ("", Some("?")),
            ("0.03..0.05", Some("?0.03..0.05")),
            ("0.03..0.040..0.05", Some("0.040?0.03..0.05")),
            ("600?", None),
            ("?4..9", None),
            ("1,000", None),
        ] {
            assert_eq!(asked(text).as_deref(), asked_for, "{text}");
            if let Some(question) = asked_for {
                assert!(
                    matches!(Quantity::read(question), Ok(Quantity::Question { .. })),
                    "{question}"
                );
            }
        }
    }

    #[test]
    fn doubt_is_a_quarter_to_either_side_in_round_numbers() {
        for (text, doubt) in [
            ("0.04", "0.03..0.05"),
            ("600", "450..750"),
            ("464", "340..580"),
            ("400", "300..500"),
            ("64", "48..80"),
            ("1", "0.75..1.25"),
            ("100", "75..125"),
            ("8", "6..10"),
            ("5", "3.7..6.3"),
            ("0.3", "0.22..0.38"),
            ("0.06", "0.045..0.075"),
            ("1e-9", "7.5e-10..1.25e-9"),
            ("1000000", "750000..1250000"),
            ("-20", "-25..-15"),
            ("0.0612345", "0.045..0.077"),
            ("600?", "450..750"),
            ("600?400..900", "400..900"),
        ] {
            let limits = Limits::of_part("size");
            assert_eq!(doubted(text, None, limits).as_deref(), Some(doubt), "{text}");
        }
    }

    #[test]
    fn doubt_keeps_the_limits_of_its_key() {
        let of = |key: &str, text: &str| {
            let default = keys::find(key).and_then(|row| row.default);
            doubted(text, default, Limits::of_key(key).expect(key))
        };
        for (key, text, doubt) in [
            ("x.break", "0.9", Some("0.67..1")),
            ("x.break", "", Some("0.75..1")),
            ("x.break", "0.3", Some("0.22..0.38")),
            ("y.p", "2.8", Some("2.1..3")),
            ("x.start", "1e9", Some("750000000..1000000000")),
            ("x.start", "", None),
            ("x.wastage", "", None),
            ("x.wastage", "0", None),
            ("x.rate", "0,04", None),
            ("x.rate", "0.03..0.05", None),
            ("x.rate", "?", None),
            ("until", "1e-300", Some("7.5e-301..1.25e-300")),
        ] {
            assert_eq!(of(key, text).as_deref(), doubt, "{key}={text}");
        }
        assert_eq!(Limits::of_key("phase2.from"), Some(ANY));
        assert_eq!(Limits::of_key("phase1.x.p"), Limits::of_key("x.p"));
        assert_eq!(Limits::of_key("x.join"), None);
        assert_eq!(Limits::of_key("title"), None);
    }

    /// Whatever stands, what is written reads back as an interval around it.
    #[test]
    fn what_is_written_can_be_read() {
        let mut state = 7u64;
        for _ in 0..20_000 {
            state ^= state << 13;
            state ^= state >> 7;
            state ^= state << 17;
            let text = format!("{}e-{}", state % 100_000, (state >> 40) % 12);
            let value = number::read(&text).expect(&text);
            let Some(doubt) = doubted(&text, None, ANY) else {
                assert_eq!(value, 0.0, "{text}");
                continue;
            };
            let Ok(Quantity::Interval { low, high, .. }) = Quantity::read(&doubt) else {
                panic!("{text} became {doubt}");
            };
            assert!(
                low <= 0.7501 * value && high >= 1.2499 * value,
                "{text} became {doubt}"
            );
            assert!(
                low >= 0.69 * value && high <= 1.31 * value,
                "{text} became {doubt}"
            );
        }
    }
}
