//! Steps along a balance: a side that comes in and is lost far faster than its enemy changes.
//!
//! A series from where it stands is held to the pace of that balance, though the strengths hardly change. Once it has
//! come to the balance it stays with it, and what is left is the solution that changes no faster than the enemy does
//! (E. Hairer and G. Wanner, *Solving Ordinary Differential Equations II*, 2nd ed. 1996, VI.3: the smooth solution of a
//! singularly perturbed problem). That has a series of its own, held to the pace of the enemy: each coefficient of the
//! balanced side is what makes its losses equal to what comes in less its own change, which the sweep before has given.

use super::series::{Expansion, FireSeries, ORDER, Series};
use super::unit::MOST_UNITS;
use crate::conditions::Conditions;
use crate::sides::{Both, Side};

/// Sweeps at most: each leaves a small part of the error of the one before, or there is no balance.
const MOST_SWEEPS: usize = 24;

/// A step shorter than this, in the time of the balance, is as well taken by the series from where the sides stand.
const SHORTEST: f64 = 40.0;

/// The part of a strength by which it may be off its balance at the start of a step.
const OFF: f64 = 1e-13;

/// The same in parts of the tolerance, where that is looser: so far off the steps before may have left it.
const OFF_BY_STEPS: f64 = 100.0;

/// The loosest tolerance that sets the length of a step along a balance: sweeps over a longer one do not come to rest.
const LOOSEST: f64 = 1e-11;

/// What a side that is in a balance gains or loses in all is no more than this part of what comes in.
const NEAR: f64 = 0.01;

/// What the last sweep may still move, as a part of the strength.
const MOVES: f64 = 1e-14;

/// A step along a balance.
pub(super) struct Balanced {
    pub(super) unit: f64,
    pub(super) series: Expansion,
    /// Its length in the unit.
    pub(super) length: f64,
}

impl Balanced {
    /// The step from the strengths `now` on, at the time `at`, no longer than `left`; `None` where neither side is in a
    /// balance.
    pub(super) fn step(
        now: Both<f64>,
        at: f64,
        conditions: &Conditions,
        left: f64,
        tolerance: f64,
    ) -> Option<Balanced> {
        Side::BOTH
            .into_iter()
            .filter(|side| {
                now[*side] > 0.0 && net(conditions, *side, now, at).abs() <= NEAR * conditions.flow[*side]
            })
            .find_map(|side| {
                let pace = pace(conditions, side, now, at);
                let unit =
                    1.0 / (change(conditions, side.enemy(), now, at) + 1.0 / left + f64::MIN_POSITIVE * pace);
                let balanced = (pace * unit > SHORTEST)
                    .then(|| Balanced::of(side, now, at, conditions, unit, tolerance))??;
                let length = balanced.length.min(left / unit);
                (length * unit * pace > SHORTEST).then_some(Balanced { length, ..balanced })
            })
    }

    /// The step in that unit, where `side` is in a balance.
    fn of(
        side: Side,
        now: Both<f64>,
        at: f64,
        conditions: &Conditions,
        unit: f64,
        tolerance: f64,
    ) -> Option<Balanced> {
        // What the rounding of its gains and losses makes of a strength counts with it.
        let scale = now[side] + conditions.flow[side] / pace(conditions, side, now, at);
        let mut series = Expansion::constant(now);
        let mut before = f64::INFINITY;
        for _ in 0..MOST_SWEEPS {
            let moved = sweep(&mut series, side, at, conditions, unit);
            let start = series.strength[side][0];
            let is_near = (start - now[side]).abs() <= 0.5 * now[side];
            if !is_near {
                return None;
            }
            let length = series.step_length(tolerance.min(LOOSEST)).min(MOST_UNITS);
            let moves = moved
                .iter()
                .rev()
                .fold(0.0, |sum, term| sum * length + term.abs())
                / scale;
            if moves <= f64::EPSILON || (moves <= MOVES && moves >= 0.5 * before) {
                let is_there = (start - now[side]).abs() <= OFF.max(OFF_BY_STEPS * tolerance) * scale;
                return is_there.then_some(Balanced { unit, series, length });
            }
            before = moves;
        }
        None
    }
}

/// One sweep through the coefficients, which takes the changes of the balanced `side` from the sweep before; says by how
/// much each of its coefficients has moved.
fn sweep(series: &mut Expansion, side: Side, at: f64, conditions: &Conditions, unit: f64) -> Series {
    let enemy = side.enemy();
    let now = Both::of(|side| series.strength[side][0]);
    let pace = pace(conditions, side, now, at);
    let mut fires = Both::of(|side: Side| FireSeries::new(conditions, side.enemy(), at, unit));
    let mut moved = Series::default();
    for (n, moves) in moved.iter_mut().enumerate() {
        let inflow = |side: Side| {
            if n == 0 {
                conditions.flow[side] - conditions.steadily_lost(side)
            } else {
                0.0
            }
        };
        let next = (n + 1) as f64;
        let change = series.strength[side]
            .get(n + 1)
            .map_or(0.0, |term| term * next / unit);
        let mut fire_on = |series: &Expansion, on: Side| {
            fires[on].coefficient(n, &series.strength[on.enemy()], &series.strength[on])
        };
        let gains =
            inflow(side) - fire_on(series, side) - conditions.part_lost(side) * series.strength[side][n];
        *moves = (gains - change) / pace;
        series.strength[side][n] += *moves;
        let by_fire = Both::of(|on| fire_on(series, on));
        if n < ORDER {
            for on in Side::BOTH {
                series.fire[on][n + 1] = by_fire[on] * unit / next;
            }
            let lost = by_fire[enemy] + conditions.part_lost(enemy) * series.strength[enemy][n];
            series.strength[enemy][n + 1] = (inflow(enemy) - lost) * unit / next;
        }
    }
    moved
}

/// How fast `side` comes back to its balance: the slope of its losses over its own strength.
fn pace(conditions: &Conditions, side: Side, now: Both<f64>, at: f64) -> f64 {
    let fire = &conditions.fire[side.enemy()];
    let lost = conditions.fire_on(side, now, at);
    let (mut sum, mut slope) = (0.0, 0.0);
    for power in fire.per_target().iter().filter(|power| power.coefficient > 0.0) {
        let value = power.at(now[side]);
        sum += value;
        slope -= value * power.exponent;
    }
    let by_fire = if lost > 0.0 {
        lost * slope / (sum * now[side])
    } else {
        0.0
    };
    by_fire + conditions.part_lost(side)
}

/// What comes in of `side` less what it loses, per unit of time.
fn net(conditions: &Conditions, side: Side, now: Both<f64>, at: f64) -> f64 {
    let fire = conditions.fire_on(side, now, at);
    conditions.flow[side] - fire - conditions.part_lost(side) * now[side] - conditions.steadily_lost(side)
}

/// The part of `side`, or of what either side is shot at with, that changes per unit of time.
fn change(conditions: &Conditions, side: Side, now: Both<f64>, at: f64) -> f64 {
    let grows = |side: Side| match conditions.growth[side] {
        Some(growth) if conditions.fire[side].takes_effect() => {
            growth.slope / (growth.value + growth.slope * at)
        }
        _ => 0.0,
    };
    net(conditions, side, now, at).abs() / now[side] + grows(Side::X).max(grows(Side::Y))
}
