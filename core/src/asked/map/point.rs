//! What is read of one place of a map.

use crate::asked::story::Worst;
use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::sides::Both;

/// What is read of an outcome besides its story.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Second {
    /// When it ends in a break.
    Time,
    /// What is left of X.
    LeftX,
    /// What is left of Y.
    LeftY,
    /// Y's losses for each of X's.
    ExchangeRatio,
}

impl Second {
    /// All of them, in the order of the page.
    pub const ALL: [Second; 4] = [Second::Time, Second::LeftX, Second::LeftY, Second::ExchangeRatio];
}

/// What is known of one point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Point {
    pub(super) class: u8,
    pub(super) near: f64,
    /// What is missing, where conditions are not met.
    pub(super) worst: Option<Worst>,
    pub(super) time: Option<f64>,
    pub(super) end: Both<f64>,
    pub(super) ratio: Option<f64>,
}

impl Point {
    /// What is told apart: how it comes out, and whether all conditions are met.
    pub(super) fn told(&self) -> (u8, bool) {
        (self.class, self.worst.is_none())
    }

    pub(super) fn second(&self, second: Second) -> Option<f64> {
        let value = match second {
            Second::Time => self.time,
            Second::LeftX => Some(self.end.x),
            Second::LeftY => Some(self.end.y),
            Second::ExchangeRatio => self.ratio,
        };
        value.filter(|value| value.is_finite())
    }
}

/// How far, as a part of the axis, another place is looked at in place of one on a tie.
pub(super) const ASIDE: f64 = 1e-9;

/// Whether the sides are even, to rounding, and not past their lines from the beginning.
pub(super) fn is_tie(outcome: &Outcome) -> bool {
    let parity = outcome.ended == Ended::Limit && outcome.to_the_last == Some(ToTheLast::Parity);
    parity || outcome.breaks == Breaks::Both && outcome.time > Some(0.0)
}
