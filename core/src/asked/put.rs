//! An answer as it is put into its field: with no more digits than it takes to be on the right side of the change.

use super::answer::{Asked, End};
use crate::decimal::written;
use crate::number;
use crate::quantity::Quantity;
use crate::slots::Slot;

/// An answer that can be put into the field of the number in question.
#[derive(Clone, Debug, PartialEq)]
pub struct Putting {
    /// The value.
    pub value: f64,
    /// What is written there: the value, still in question, and where it is looked for, if that was asked for.
    pub text: String,
}

impl Asked {
    /// What can be put into the field, in order: with conditions, a value of each interval that meets them; else one of each
    /// part of the story. Next to the change, on its right side, in few digits; nearest to the value now, or that value
    /// itself where it meets all conditions.
    pub fn puttings(&self) -> Vec<Putting> {
        let ends: Vec<(End, End)> = match &self.met {
            Some(met) => met.iter().map(|met| (met.from, met.to)).collect(),
            None => self
                .outcomes
                .iter()
                .map(|segment| (segment.from, segment.to))
                .collect(),
        };
        ends.into_iter()
            .filter_map(|(from, to)| self.within(from, to))
            .map(|value| self.putting(value))
            .collect()
    }

    /// What is written in the field for a value.
    pub fn putting(&self, value: f64) -> Putting {
        Putting {
            value,
            text: in_question(&self.slot, value),
        }
    }

    /// A value between two ends, next to the one that is a change and nearer to the value now.
    fn within(&self, from: End, to: End) -> Option<f64> {
        let (low, high) = (from.at(), to.at());
        if low == high {
            return Some(low);
        }
        let now = self.slot.value();
        let inside = now.filter(|now| low < *now && *now < high);
        if inside.is_some() && self.met.is_some() {
            return inside;
        }
        let is_change = |end: End| matches!(end, End::Crossing(_));
        let from_below = match (is_change(from), is_change(to)) {
            (true, true) => now.is_none_or(|now| now - low <= high - now),
            (from, _) => from,
        };
        let near = if from_below { low } else { high };
        let kept = |value: &f64| low < *value && *value < high && self.slot.limits.hold(*value);
        let digits = 2..15;
        let mut written = digits.map(|digits| rounded(near, digits, from_below));
        written.find(kept).or(Some(0.5 * low + 0.5 * high).filter(kept))
    }
}

/// A value as it is written for a number that stays in question, where it was looked for kept.
fn in_question(slot: &Slot, value: f64) -> String {
    let between = match slot.quantity {
        Quantity::Question {
            between: Some((low, high)),
            ..
        } => format!("{}..{}", written(low), written(high)),
        _ => String::new(),
    };
    format!("{}?{between}", written(value))
}

/// What is written for a number in question that a place on a map is put into: to three digits, within its limits.
pub fn near_text(slot: &Slot, value: f64) -> String {
    let rounded = number::rounded(value, 3);
    let kept = if slot.limits.hold(rounded) { rounded } else { value };
    in_question(slot, kept)
}

/// The number of so many digits behind the first next to `value`, above it or below it.
fn rounded(value: f64, digits: usize, up: bool) -> f64 {
    let near = number::rounded(value, digits + 1);
    let right = if up { near > value } else { near < value };
    if right {
        return near;
    }
    let unit = libm::pow(
        10.0,
        libm::floor(libm::log10(value.abs().max(f64::MIN_POSITIVE))) - digits as f64,
    );
    let next = if up { near + unit } else { near - unit };
    number::rounded(next, digits + 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn few_digits_are_on_the_right_side() {
        assert_eq!(rounded(607.204, 2, true), 608.0);
        assert_eq!(rounded(607.204, 2, false), 607.0);
        assert_eq!(rounded(0.031_249, 2, true), 0.0313);
        assert_eq!(rounded(0.031_249, 2, false), 0.0312);
        assert_eq!(rounded(4.0, 2, true), 4.01);
        assert_eq!(rounded(4.0, 2, false), 3.99);
        assert_eq!(rounded(99.999, 2, true), 100.0);
        assert_eq!(rounded(-3.456, 2, true), -3.45);
    }
}
