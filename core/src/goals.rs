//! What a question is asked for: the conditions of `sothat`, all of which must hold.

use crate::keys::LARGEST;
use crate::number;
use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::sides::{Both, Side};
use crate::terms::Engagement;

/// A stretch of values, open where an end is not given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bounds {
    /// The least.
    pub low: Option<f64>,
    /// The greatest.
    pub high: Option<f64>,
}

/// One condition on an outcome.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Goal {
    /// `x.breaks`: the side breaks, alone or at the same moment as its enemy.
    Breaks(Side),
    /// `x.holds`: it does not.
    Holds(Side),
    /// `x.prevails`: see [`prevails`].
    Prevails(Side),
    /// `x.end:80..`: what is left of the side at the end.
    End(Side, Bounds),
    /// `x.lost:..60`: what it loses from time 0 to the end.
    Lost(Side, Bounds),
    /// `time:..6`: when a side breaks; later than any time where nobody does.
    Time(Bounds),
}

/// Who prevails: the side whose enemy alone breaks, or where nobody ever does, the one that is left in the limit.
pub fn prevails(outcome: &Outcome) -> Option<Side> {
    match (outcome.breaks, outcome.ended, outcome.to_the_last) {
        (Breaks::X, ..) => Some(Side::Y),
        (Breaks::Y, ..) => Some(Side::X),
        (Breaks::Neither, Ended::Limit, Some(ToTheLast::X)) => Some(Side::X),
        (Breaks::Neither, Ended::Limit, Some(ToTheLast::Y)) => Some(Side::Y),
        _ => None,
    }
}

/// How far each side is from its break line at the end; 0 for one that has reached it, infinite where it grows without
/// bound.
pub fn distances(engagement: &Engagement, outcome: &Outcome) -> Both<f64> {
    Both::of(|side| {
        let stood = outcome.sides()[side];
        if outcome.breaks.includes(side) {
            return 0.0;
        }
        let lost = engagement.sides[side].lost + stood.losses.all;
        match stood.end {
            None => f64::INFINITY,
            // To the last the way is all that is left.
            Some(end) if engagement.sides[side].break_point == 1.0 => end,
            Some(_) => (engagement.sides[side].break_point * stood.committed - lost).max(0.0),
        }
    })
}

/// By how much an outcome falls short of a condition.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Short {
    /// How much is missing, in the unit of the condition; above 0.
    pub by: f64,
    /// The same as a part of what is there, to compare with others.
    pub part: f64,
    /// Where somebody must break in time and nobody ever does: the side nearest to its line, and `by` how far it is above.
    pub unbroken: Option<Side>,
}

/// That nobody breaks misses a time by more than any break that comes too late.
const NEVER: f64 = 1e100;

impl Short {
    /// The same of a break that must come within some time and does not come at all.
    pub(crate) fn never(self) -> Short {
        Short {
            // What fades comes as near to its line as any.
            part: if self.by > 0.0 {
                NEVER * (1.0 + self.part)
            } else {
                f64::INFINITY
            },
            ..self
        }
    }
}

impl Bounds {
    fn hold(&self, value: f64) -> bool {
        self.low.is_none_or(|low| value >= low) && self.high.is_none_or(|high| value <= high)
    }

    /// How far a value is outside.
    fn off(&self, value: f64) -> f64 {
        let under = self.low.map_or(0.0, |low| low - value);
        let over = self.high.map_or(0.0, |high| value - high);
        under.max(over).max(0.0)
    }

    /// Reads `80..`, `..60` or `80..120`.
    fn read(text: &str) -> Result<Bounds, String> {
        let Some((low, high)) = text.split_once("..") else {
            return Err("write what is allowed as low.., ..high or low..high".into());
        };
        let end = |text: &str| -> Result<Option<f64>, String> {
            if text.is_empty() {
                return Ok(None);
            }
            let value = number::read(text)?;
            if value < 0.0 {
                return Err(format!("`{text}` must be 0 or more"));
            }
            if value > LARGEST {
                return Err(format!("`{text}` must be at most {LARGEST:e}"));
            }
            Ok(Some(value))
        };
        let bounds = Bounds {
            low: end(low.trim())?,
            high: end(high.trim())?,
        };
        match (bounds.low, bounds.high) {
            (None, None) => Err("write a number before or behind the two points".into()),
            (Some(low), Some(high)) if low > high => Err("write the smaller end first".into()),
            _ => Ok(bounds),
        }
    }
}

/// What may stand in `sothat`, for hints.
const KNOWN: &str = "x.breaks, x.holds, x.prevails, x.end:80.., x.lost:..60, the same with y, and time:..6";

impl Goal {
    /// Reads one condition; outer blanks are ignored.
    ///
    /// # Errors
    /// A hint in words, without a full stop.
    pub fn read(text: &str) -> Result<Goal, String> {
        let (what, allowed) = match text.split_once(':') {
            Some((what, allowed)) => (what.trim(), Some(allowed.trim())),
            None => (text.trim(), None),
        };
        let unknown = || format!("is no condition: write one of {KNOWN}");
        let (side, name) = match what.split_once('.') {
            Some(("x", name)) => (Some(Side::X), name),
            Some(("y", name)) => (Some(Side::Y), name),
            Some(_) => return Err(unknown()),
            None => (None, what),
        };
        let bounds = || match allowed {
            Some(allowed) => Bounds::read(allowed),
            None => Err(format!(
                "say what is allowed: `{what}:low..`, `{what}:..high` or `{what}:low..high`"
            )),
        };
        let goal = match (side, name) {
            (Some(side), "end") => Goal::End(side, bounds()?),
            (Some(side), "lost") => Goal::Lost(side, bounds()?),
            (None, "time") => Goal::Time(bounds()?),
            (Some(side), "breaks") => Goal::Breaks(side),
            (Some(side), "holds") => Goal::Holds(side),
            (Some(side), "prevails") => Goal::Prevails(side),
            _ => return Err(unknown()),
        };
        let plain = matches!(goal, Goal::Breaks(_) | Goal::Holds(_) | Goal::Prevails(_));
        if plain && allowed.is_some() {
            return Err(format!("write `{what}` alone, without what stands behind it"));
        }
        Ok(goal)
    }

    /// Whether `outcome` meets the condition.
    pub fn holds(&self, outcome: &Outcome) -> bool {
        match *self {
            Goal::Breaks(side) => outcome.breaks.includes(side),
            Goal::Holds(side) => !outcome.breaks.includes(side),
            Goal::Prevails(side) => prevails(outcome) == Some(side),
            Goal::End(side, bounds) => bounds.hold(outcome.sides()[side].end.unwrap_or(f64::INFINITY)),
            Goal::Lost(side, bounds) => bounds.hold(outcome.sides()[side].losses.all),
            Goal::Time(bounds) => bounds.hold(outcome.time.unwrap_or(f64::INFINITY)),
        }
    }

    /// By how much the outcome of `engagement` falls short; `None` where it meets the condition.
    ///
    /// Of a break it is how far the side that must break is from its line at the end: for a side that must hold or
    /// prevail, that is its enemy.
    pub fn short(&self, engagement: &Engagement, outcome: &Outcome) -> Option<Short> {
        if self.holds(outcome) {
            return None;
        }
        let strength = |side: Side, by: f64| Short {
            by,
            part: by / outcome.sides()[side].committed.max(f64::MIN_POSITIVE),
            unbroken: None,
        };
        Some(match *self {
            Goal::Breaks(side) => strength(side, distances(engagement, outcome)[side]),
            Goal::Holds(side) | Goal::Prevails(side) => {
                strength(side.enemy(), distances(engagement, outcome)[side.enemy()])
            }
            Goal::End(side, bounds) => strength(
                side,
                bounds.off(outcome.sides()[side].end.unwrap_or(f64::INFINITY)),
            ),
            Goal::Lost(side, bounds) => strength(side, bounds.off(outcome.sides()[side].losses.all)),
            Goal::Time(bounds) => match outcome.time {
                Some(time) => {
                    let by = bounds.off(time);
                    let scale = bounds.high.or(bounds.low).unwrap_or(1.0);
                    Short {
                        by,
                        part: by / scale.max(f64::MIN_POSITIVE),
                        unbroken: None,
                    }
                }
                None => {
                    let above = distances(engagement, outcome);
                    let [x, y] = Side::BOTH.map(|side| Short {
                        unbroken: Some(side),
                        ..strength(side, above[side])
                    });
                    let nearer = if x.part <= y.part { x } else { y };
                    nearer.never()
                }
            },
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn conditions_are_read() {
        let open = |low| Bounds { low, high: None };
        assert_eq!(Goal::read("x.breaks"), Ok(Goal::Breaks(Side::X)));
        assert_eq!(Goal::read(" y.prevails "), Ok(Goal::Prevails(Side::Y)));
        assert_eq!(Goal::read("x.end:80.."), Ok(Goal::End(Side::X, open(Some(80.0)))));
        let under = Bounds {
            low: None,
            high: Some(60.0),
        };
        assert_eq!(Goal::read("y.lost:..60"), Ok(Goal::Lost(Side::Y, under)));
        let between = Bounds {
            low: Some(2.0),
            high: Some(6.5),
        };
        assert_eq!(Goal::read("time : 2 .. 6.5"), Ok(Goal::Time(between)));
    }

    #[test]
    fn a_hint_says_how_to_write_it() {
        for (text, part) in [
            ("", "is no condition"),
            ("x", "is no condition"),
            ("x.wins", "is no condition"),
            ("z.breaks", "is no condition"),
            ("breaks", "is no condition"),
            ("time", "`time:low..`"),
            ("x.end", "`x.end:low..`"),
            ("x.end:80", "low.., ..high or low..high"),
            ("x.end:..", "before or behind the two points"),
            ("x.end:90..80", "the smaller end first"),
            ("x.lost:0,5..", "with a point"),
            ("x.lost:-3..", "0 or more"),
            ("x.lost:..2e9", "at most 1e9"),
            ("x.breaks:80..", "`x.breaks` alone"),
            ("x.time:..6", "is no condition"),
        ] {
            let hint = Goal::read(text).expect_err(text);
            assert!(hint.contains(part), "{text}: {hint}");
        }
    }
}
