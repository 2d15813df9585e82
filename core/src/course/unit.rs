//! The unit of time in which a step has its series.

use crate::conditions::Conditions;
use crate::sides::{Both, Side};

/// The longest step in its own unit: what is next to nothing has coefficients that no double holds, and would else be
/// taken to have a series without end.
pub(super) const MOST_UNITS: f64 = 6.0;

/// So many times as far may it go where gains and losses balance: beyond that, coefficients would be too small for a double.
const MOST_BALANCED: f64 = 1e10;

/// The time in which the gains and losses of the first moment would each use a side up, and how many of it a step takes at
/// most: what nearly balances is held to what is left over.
pub(super) fn unit_of(now: Both<f64>, at: f64, conditions: &Conditions) -> (f64, f64) {
    // Of nobody the parts are no numbers.
    let number = |part: f64| if part.is_finite() { part } else { 0.0 };
    let shares = |side: Side| {
        let enemy = side.enemy();
        let growth = conditions.growth_at(enemy, at);
        let fire = conditions.fire[enemy].share_per_time(now[enemy], now[side]) * growth;
        let lost = number(fire) + conditions.part_lost(side);
        let steady = number((conditions.steadily_lost(side) - conditions.flow[side]) / now[side]);
        (lost + steady.abs(), (lost + steady).abs())
    };
    // A broken power of what grows has a series no longer than it takes to double.
    let doubles = |side: Side| match conditions.growth[side] {
        Some(growth) if growth.power.fract() != 0.0 && conditions.fire[side].takes_effect() => {
            growth.slope / (growth.value + growth.slope * at)
        }
        _ => 0.0,
    };
    let doubles = doubles(Side::X).max(doubles(Side::Y));
    let (x, y) = (shares(Side::X), shares(Side::Y));
    let (share, net) = (x.0.max(y.0).max(doubles), x.1.max(y.1).max(doubles));
    if (1.0 / share).is_finite() {
        (1.0 / share, MOST_UNITS * (share / net).min(MOST_BALANCED))
    } else {
        (1.0, f64::INFINITY)
    }
}
