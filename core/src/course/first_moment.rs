//! The first moment of a course where a series does not exist: a strength of 0 or a growth of 0 under a broken exponent.

use super::LEAST;
use crate::conditions::Conditions;
use crate::quadrature::integrate;
use crate::sides::{Both, Side};

/// A first moment: what is lost, integrated along what comes in without those losses.
pub(crate) struct FirstMoment {
    /// How long it is.
    pub(crate) length: f64,
    /// The strengths at its end.
    pub(crate) strength: Both<f64>,
    /// What each side has lost by fire by then.
    pub(crate) fire: Both<f64>,
}

/// How far it goes: what is left out is the square of this part of the strengths.
const PART: f64 = 1e-9;

/// No shorter moment is tried.
const SHORTEST: f64 = 1e-250;

impl FirstMoment {
    /// The first moment from the strengths `start` on, no longer than `until`; `None` where the conditions have a series
    /// there.
    pub(crate) fn new(start: Both<f64>, conditions: &Conditions, until: f64) -> Option<FirstMoment> {
        if Side::BOTH
            .into_iter()
            .all(|side| has_series(side, start, conditions))
        {
            return None;
        }
        let mut length = until.min(1.0);
        while length >= SHORTEST && !is_short(length, start, conditions) {
            length *= 0.125;
        }
        let along = |side: Side| {
            let pace = |t: f64, _| conditions.fire_on(side, grown(t, start, conditions), t);
            integrate(length, pace).value
        };
        let fire = Both::of(along);
        let grown = grown(length, start, conditions);
        let lost = lost(length, start, conditions, fire);
        Some(FirstMoment {
            length,
            strength: Both::of(|side| grown[side] - lost[side]),
            fire,
        })
    }
}

/// The strengths at the time `t` without any losses.
fn grown(t: f64, start: Both<f64>, conditions: &Conditions) -> Both<f64> {
    Both::of(|side| start[side] + conditions.flow[side] * t)
}

/// What each side has lost by the time `t`, of which so much by fire.
fn lost(t: f64, start: Both<f64>, conditions: &Conditions, fire: Both<f64>) -> Both<f64> {
    let grown = grown(t, start, conditions);
    Both::of(|side: Side| {
        let exposure = 0.5 * (start[side] + grown[side]) * t;
        fire[side] + conditions.part_lost(side) * exposure + conditions.steadily_lost(side) * t
    })
}

/// Whether next to nothing is lost by the time `t`: the losses per unit of time at its end bound those along it.
fn is_short(t: f64, start: Both<f64>, conditions: &Conditions) -> bool {
    let grown = grown(t, start, conditions);
    let fire = Both::of(|side: Side| {
        let enemy = side.enemy();
        let growth = conditions.growth[enemy].map_or(t, |growth| growth.until(t));
        conditions.fire[enemy].losses_per_time(grown[enemy], grown[side]) * growth
    });
    let lost = lost(t, start, conditions, fire);
    Side::BOTH.iter().all(|side| lost[*side] <= PART * grown[*side])
}

/// Whether the fire of `side` has a series at the start.
fn has_series(side: Side, start: Both<f64>, conditions: &Conditions) -> bool {
    let broken = |exponent: f64| ![0.0, 1.0, 2.0].contains(&exponent);
    let fire = &conditions.fire[side];
    let growth = conditions.growth[side].is_some_and(|growth| growth.value <= 0.0 && broken(growth.power));
    // Of next to nobody a broken power has no digits, and the first who come are far more.
    let none = |side: Side| start[side] == 0.0 || start[side] <= LEAST && conditions.flow[side] > 0.0;
    let shooters = none(side) && broken(fire.shooters().exponent);
    let [first, second] = fire.per_target();
    let targets = none(side.enemy()) && (broken(-first.exponent) || second.coefficient > 0.0);
    !fire.takes_effect() || !(growth || shooters || targets)
}
