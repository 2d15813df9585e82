//! A number, a number in doubt, or a number in question.
//!
//! `quantity = number | number ".." number [ ".." number ] | [ number ] "?" [ number ".." number ]`

use crate::number;

const RANGE_HINT: &str = "write low..high or low..likely..high";

/// What may stand wherever the link has a number.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Quantity {
    /// A plain number.
    Number(f64),
    /// A number known to lie between two values, with a likeliest one where three are written.
    Interval {
        /// The least value.
        low: f64,
        /// The likeliest value, for a triangular distribution.
        likely: Option<f64>,
        /// The greatest value.
        high: f64,
    },
    /// A number that is asked for.
    Question {
        /// The number it has now.
        now: Option<f64>,
        /// Where to look.
        between: Option<(f64, f64)>,
    },
}

impl Quantity {
    /// Reads a quantity; outer blanks are ignored.
    ///
    /// # Errors
    /// A hint in words, without a full stop.
    pub fn read(text: &str) -> Result<Quantity, String> {
        let text = text.trim();
        Quantity::strictly(text).map_err(|hint| {
            let close = text.replace(char::is_whitespace, "");
            match Quantity::strictly(&close) {
                Ok(Quantity::Question { .. } | Quantity::Interval { .. }) => {
                    format!("write {close}, without blanks")
                }
                _ => hint,
            }
        })
    }

    fn strictly(text: &str) -> Result<Quantity, String> {
        if let Some((now, between)) = text.split_once('?') {
            let now = if now.is_empty() {
                None
            } else {
                Some(number::read(now)?)
            };
            let between = if between.is_empty() {
                None
            } else {
                Some(range(between)?)
            };
            return Ok(Quantity::Question { now, between });
        }
        if text.contains("...") {
            return Err(RANGE_HINT.into());
        }
        match text.split("..").collect::<Vec<_>>()[..] {
            [one] => number::read(one).map(Quantity::Number),
            [low, high] => ordered(&[number::read(low)?, number::read(high)?], None),
            [low, likely, high] => {
                let likely = number::read(likely)?;
                ordered(&[number::read(low)?, likely, number::read(high)?], Some(likely))
            }
            _ => Err(RANGE_HINT.into()),
        }
    }

    /// The number that holds now: of an interval its likeliest or middle value, of a question the one before the mark;
    /// `None` where it has none.
    pub fn now(&self) -> Option<f64> {
        match *self {
            Quantity::Number(value) => Some(value),
            Quantity::Interval { low, likely, high } => Some(likely.unwrap_or(low / 2.0 + high / 2.0)),
            Quantity::Question { now, .. } => now,
        }
    }

    /// The same, 0 where it has none.
    // Not once for every number of an engagement: so much code is not at hand when it is needed.
    #[inline(never)]
    pub(crate) fn now_or_zero(&self) -> f64 {
        self.now().unwrap_or(0.0)
    }

    /// Whether it is asked for.
    pub fn is_question(&self) -> bool {
        matches!(self, Quantity::Question { .. })
    }

    /// Whether it may be above 0, as written.
    pub(crate) fn may_exceed_zero(&self) -> bool {
        let open = matches!(self, Quantity::Question { between: None, .. });
        open || self.numbers().any(|value| value > 0.0)
    }

    /// The numbers that the quantity is written with, each of which must keep the key's limits.
    pub fn numbers(&self) -> impl Iterator<Item = f64> {
        let written = match *self {
            Quantity::Number(value) => [Some(value), None, None],
            Quantity::Interval { low, likely, high } => [Some(low), likely, Some(high)],
            Quantity::Question { now, between } => [now, between.map(|b| b.0), between.map(|b| b.1)],
        };
        written.into_iter().flatten()
    }
}

fn range(text: &str) -> Result<(f64, f64), String> {
    let ends = text
        .split_once("..")
        .filter(|(low, high)| !low.is_empty() && !high.is_empty());
    let Some((low, high)) = ends else {
        return Err("write the range of a question as low..high".into());
    };
    let (low, high) = (number::read(low)?, number::read(high)?);
    if low < high {
        Ok((low, high))
    } else {
        Err("write the smaller end first".into())
    }
}

fn ordered(values: &[f64], likely: Option<f64>) -> Result<Quantity, String> {
    let (low, high) = (values[0], values[values.len() - 1]);
    if low == high || values.is_sorted() {
        if low < high {
            return Ok(Quantity::Interval { low, likely, high });
        }
        return Err("the two ends are the same: write one number".into());
    }
    Err("write the smallest value first".into())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hints_keep_the_mark() {
        let hint = |text: &str| Quantity::read(text).expect_err(text);
        assert_eq!(hint("850 ?"), "write 850?, without blanks");
        assert_eq!(hint("850? 700 .. 900"), "write 850?700..900, without blanks");
        assert_eq!(hint("4 .. 6"), "write 4..6, without blanks");
        assert_eq!(hint("850?700.."), "write the range of a question as low..high");
        assert_eq!(hint("8 50"), "write 850, without blanks");
    }

    #[test]
    fn the_three_kinds_are_told_apart() {
        assert_eq!(Quantity::read(" 0.04 "), Ok(Quantity::Number(0.04)));
        assert_eq!(
            Quantity::read("1..2"),
            Ok(Quantity::Interval {
                low: 1.0,
                likely: None,
                high: 2.0
            })
        );
        assert_eq!(
            Quantity::read("1..1..2"),
            Ok(Quantity::Interval {
                low: 1.0,
                likely: Some(1.0),
                high: 2.0
            })
        );
        assert_eq!(
            Quantity::read("?"),
            Ok(Quantity::Question {
                now: None,
                between: None
            })
        );
        assert_eq!(
            Quantity::read("6?4..9"),
            Ok(Quantity::Question {
                now: Some(6.0),
                between: Some((4.0, 9.0))
            })
        );
    }

    #[test]
    fn disorder_is_a_problem() {
        for text in [
            "2..1",
            "1..3..2",
            "1..1",
            "1...2",
            "1..2..3..4",
            "?5",
            "?5..4",
            "6??",
            "2..1..1",
        ] {
            assert!(Quantity::read(text).is_err(), "{text}");
        }
    }
}
