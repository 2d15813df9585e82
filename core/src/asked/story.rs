//! What is read of each outcome along a number in question.

use serde::ser::SerializeStruct;

use crate::goals::{Goal, Short, distances, prevails};
use crate::outcome::{Breaks, Ended, Outcome};
use crate::sides::{Both, Side};
use crate::terms::Engagement;

/// How an engagement comes out, in the main: where it changes, the story changes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Story {
    /// Who breaks first.
    pub breaks: Breaks,
    /// How it ends.
    pub ended: Ended,
    /// Who prevails: see [`prevails`].
    pub prevails: Option<Side>,
}

impl Story {
    /// The story of an outcome.
    pub fn of(outcome: &Outcome) -> Story {
        Story {
            breaks: outcome.breaks,
            ended: outcome.ended,
            prevails: prevails(outcome),
        }
    }
}

/// What is told apart along a number: the story, and whether all conditions are met.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Class {
    pub(super) story: Story,
    pub(super) met: bool,
}

/// The worst of the conditions that an outcome does not meet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Worst {
    /// Its place among the conditions.
    pub goal: usize,
    /// By how much it is not met.
    pub short: Short,
}

impl Worst {
    /// How many fields it has.
    pub(super) fn count(&self) -> usize {
        2 + usize::from(self.short.unbroken.is_some())
    }

    /// Its fields, in the answer that says what comes nearest.
    pub(super) fn write<S: SerializeStruct>(&self, nearest: &mut S) -> Result<(), S::Error> {
        nearest.serialize_field("condition", &(self.goal + 1))?;
        nearest.serialize_field("short", &self.short.by)?;
        if let Some(side) = self.short.unbroken {
            nearest.serialize_field("unbroken", &side.letter())?;
        }
        Ok(())
    }
}

/// An outcome with a value of the number in question.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sample {
    /// The value.
    pub value: f64,
    /// How it comes out.
    pub story: Story,
    /// Whether all conditions are met; so where there are none.
    pub met: bool,
    /// What is left of each side at the end; infinite where it grows without bound.
    pub end: Both<f64>,
    /// When a side breaks.
    pub time: Option<f64>,
    /// What is missing, where conditions are not met.
    pub worst: Option<Worst>,
    /// How far the outcome is from another story: the part of what it has committed by which the side that is left is
    /// above its line, or the nearer where both are.
    pub(super) near: f64,
    /// All that the larger side has committed.
    committed: f64,
}

impl Sample {
    pub(super) fn of(value: f64, engagement: &Engagement, outcome: &Outcome, goals: &[Goal]) -> Sample {
        let sides = outcome.sides();
        let above = distances(engagement, outcome);
        let parts = Side::BOTH.map(|side| above[side] / sides[side].committed.max(f64::MIN_POSITIVE));
        let unbroken = Side::BOTH
            .into_iter()
            .zip(parts)
            .filter(|(side, _)| !outcome.breaks.includes(*side));
        Sample {
            value,
            story: Story::of(outcome),
            met: goals.iter().all(|goal| goal.holds(outcome)),
            end: Both::of(|side| sides[side].end.unwrap_or(f64::INFINITY)),
            time: outcome.time,
            worst: worst(engagement, outcome, goals),
            near: unbroken.map(|(_, part)| part).fold(f64::INFINITY, f64::min),
            committed: sides.x.committed.max(sides.y.committed),
        }
    }

    /// How far it misses its conditions, the worst of them; infinite where there are none that it misses.
    pub(super) fn missed(&self) -> f64 {
        self.worst.map_or(f64::INFINITY, |worst| worst.short.part)
    }

    /// How far it is from another class: from another story, or from meeting its conditions.
    pub(super) fn depth(&self) -> f64 {
        self.near.min(self.missed())
    }

    pub(super) fn class(&self) -> Class {
        Class {
            story: self.story,
            met: self.met,
        }
    }

    /// Whether the outcome goes over into another without a jump: what is left is nearly the same in both.
    pub(super) fn goes_over_into(&self, other: &Sample) -> bool {
        // Next to a crossing what is left falls as a root of the way to it, whose last 1e-13 are not seen.
        let same = |a: f64, b: f64| a == b || (a - b).abs() <= 1e-4 * self.committed.max(other.committed);
        Side::BOTH
            .into_iter()
            .all(|side| same(self.end[side], other.end[side]))
    }
}

/// The condition that is missed most; `None` where all are met.
pub(super) fn worst(engagement: &Engagement, outcome: &Outcome, goals: &[Goal]) -> Option<Worst> {
    let missed = || {
        goals.iter().enumerate().filter_map(|(goal, one)| {
            let short = one.short(engagement, outcome)?;
            Some(Worst { goal, short })
        })
    };
    let by_part = |a: &Worst, b: &Worst| a.short.part.total_cmp(&b.short.part);
    let worst = missed().max_by(by_part)?;
    // Who is to break within a time may be said by another condition.
    let named = |worst: &Worst| matches!(goals[worst.goal], Goal::Breaks(_) | Goal::Prevails(_));
    match missed().filter(named).max_by(by_part) {
        Some(named) if worst.short.unbroken.is_some() => Some(Worst {
            short: named.short.never(),
            ..named
        }),
        _ => Some(worst),
    }
}
