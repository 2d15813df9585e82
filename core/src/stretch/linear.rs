//! A stretch that is a linear system: its losses and its end.

use super::{Standing, TheEnd, WayDown};
use crate::conditions::Conditions;
use crate::linear_system::{LinearSystem, Moment};
use crate::outcome::{Ended, Losses};
use crate::sides::{Both, Side};

/// When each side comes to its line within `length`, where it is not later than the other.
///
/// The side that would be there first at the pace of the start is asked first: beyond its time, and the part `rounding`
/// more, the other is of no account.
pub(super) fn first_reaches(
    system: &LinearSystem,
    ways: &Both<WayDown>,
    length: f64,
    rounding: f64,
) -> Both<Option<f64>> {
    let reach = |side: Side, length: f64| {
        let way = &ways[side];
        system.first_reach(side, way.descent.by, way.rising, length)
    };
    let within = |side: Side| {
        let pace = ways[side].rising - system.first_derivative()[side];
        if pace > 0.0 {
            f64::from(ways[side].descent.by) / pace
        } else {
            f64::INFINITY
        }
    };
    let likely = if within(Side::X) <= within(Side::Y) {
        Side::X
    } else {
        Side::Y
    };
    let mut times = Both::default();
    times[likely] = reach(likely, length);
    let length = times[likely].map_or(length, |time| time * (1.0 + 4.0 * rounding));
    times[likely.enemy()] = reach(likely.enemy(), length);
    times
}

/// How matters stand after the time `t`.
pub(super) fn standing(conditions: &Conditions, start: Both<f64>, system: &LinearSystem, t: f64) -> Standing {
    let moment = system.at(t);
    Standing {
        left: Both::of(|side| moment.strengths[side].max(0.0)),
        losses: losses(conditions, start, &moment, t),
    }
}

/// The losses of a linear system by their causes, from the mean strengths.
fn losses(conditions: &Conditions, start: Both<f64>, moment: &Moment, t: f64) -> Both<Losses> {
    let mean = moment.means;
    Both::of(|side: Side| {
        if is_absent(conditions, start, side) {
            return Losses::default();
        }
        let enemy = side.enemy();
        let fire = &conditions.fire[enemy];
        let by_fire = match (fire.shooters().exponent, fire.per_target()[0].exponent) {
            _ if !fire.takes_effect() => 0.0,
            (1.0, _) => fire.rate * mean[enemy] * t,
            (_, 0.0) => fire.rate * t,
            _ => fire.rate * mean[side] * t,
        };
        let support = conditions.support[enemy];
        let support = support.area * mean[side] * t + support.aimed * t;
        Losses::of(by_fire, support, conditions.wastage[side] * mean[side] * t)
    })
}

/// Nobody of `side` is there, and nobody comes.
fn is_absent(conditions: &Conditions, start: Both<f64>, side: Side) -> bool {
    start[side] == 0.0 && conditions.flow[side] == 0.0
}

/// Where a linear system tends that never ends.
pub(super) fn endless(conditions: &Conditions, start: Both<f64>, system: &LinearSystem) -> TheEnd {
    let settled = system.settled();
    let late = if settled > 0.0 { settled } else { 1.0 };
    let moment = system.at(late);
    let (left, slopes) = (moment.strengths, moment.slopes);
    let moves = settled > 0.0 || slopes != Both::default();
    let grows = |side: Side| {
        // Without an eigenvalue that is not 0 a pace is steady, or itself rises.
        let pace = if settled > 0.0 {
            1e-9 * left[side].abs().max(start[side]) / late
        } else {
            0.0
        };
        slopes[side] > pace
    };
    let end = Both::of(|side| {
        if grows(side) {
            None
        } else if left[side] <= 1e-15 * start[side] {
            // What is that little has not come to rest: it fades.
            Some(0.0)
        } else {
            Some(left[side])
        }
    });
    let flows = Side::BOTH.iter().any(|side| conditions.flow[*side] > 0.0);
    let ended = if end.x.is_none() || end.y.is_none() {
        Ended::Growth
    } else if flows || !moves {
        Ended::Equilibrium
    } else {
        Ended::Limit
    };
    TheEnd::of(conditions, ended, end, losses(conditions, start, &moment, late))
}
