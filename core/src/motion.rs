//! How strengths move along a piece: the closed forms in time, chosen by the exponents.

use crate::double::Double;
use crate::laws::Power;
use crate::laws::aimed::Square;
use crate::laws::alone::Alone;
use crate::laws::ambush::Ambush;
use crate::laws::area::Linear;
use crate::outcome::Method;
use crate::sides::{Both, Side};
use crate::state::StateEquation;
use crate::terms::Fire;

/// How strengths move from the start of a piece on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Motion {
    /// Neither side's fire has any effect.
    Still,
    /// One side fades by itself.
    Alone(Alone),
    /// Aimed against aimed, or powers that come to it.
    Square(Square),
    /// Area against area.
    Linear(Linear),
    /// Aimed against area.
    Ambush(Ambush),
    /// Any other pairing.
    AlongOrbit,
}

impl Motion {
    /// The motion of a piece that starts at `start`.
    ///
    /// `ahead` is the difference of the costs of bringing each side down to the last: X's less Y's.
    pub(crate) fn new(
        start: Both<f64>,
        fire: &Both<Fire<f64>>,
        equation: &StateEquation,
        ahead: Double,
    ) -> Motion {
        let rate = equation.rate;
        let shooters = Both::of(|side| fire[side].shooters().exponent);
        // A target fades by itself where its enemy is not shot at, or does not count.
        let alone = |target: Side| {
            let enemy = target.enemy();
            rate[enemy] > 0.0 && (rate[target] == 0.0 || shooters[enemy] == 0.0)
        };
        if rate.x == 0.0 && rate.y == 0.0 {
            return Motion::Still;
        }
        // Of two that fade by themselves: one that is gone in finite time ends the fight, and of two that never are the
        // slower still has digits when the other has none.
        let share = |side: Side| fire[side.enemy()].share_per_time(start[side.enemy()], start[side]);
        let to_follow = |one: Side, other: Side| {
            let lasts = |side: Side| {
                if equation.is_last_reached(side) {
                    f64::INFINITY
                } else {
                    equation.vanishing(side)
                }
            };
            let slower =
                lasts(other) > lasts(one) || (lasts(other) == lasts(one) && share(other) < share(one));
            if slower { other } else { one }
        };
        if let Some(target) = [Side::Y, Side::X]
            .into_iter()
            .filter(|side| alone(*side))
            .reduce(to_follow)
        {
            let fire = &fire[target.enemy()];
            let steady = fire.rate * fire.shooters().at(start[target.enemy()]);
            return Motion::Alone(Alone::new(target, start[target], steady, fire.per_target()));
        }
        // The exponent of a side as targets, where that is a single power.
        let single = |side: Side| {
            let [first, second]: [Power; 2] = fire[side.enemy()].per_target();
            (second.coefficient == 0.0).then_some(-first.exponent)
        };
        let (Some(x), Some(y)) = (single(Side::X), single(Side::Y)) else {
            return Motion::AlongOrbit;
        };
        let linear = shooters.x == 1.0 && shooters.y == 1.0;
        if shooters.x == 1.0 - x && shooters.y == 1.0 - y {
            Motion::Square(Square::new(start, shooters, rate, ahead))
        } else if linear && x == 1.0 && y == 1.0 {
            Motion::Linear(Linear::new(start, rate, ahead))
        } else if linear && x == 1.0 && y == 0.0 {
            Motion::Ambush(Ambush::new(Side::X, start, rate, ahead))
        } else if linear && x == 0.0 && y == 1.0 {
            Motion::Ambush(Ambush::new(Side::Y, start, rate, -ahead))
        } else {
            Motion::AlongOrbit
        }
    }

    /// How it is solved.
    pub fn method(&self) -> Method {
        match self {
            Motion::AlongOrbit => Method::Quadrature,
            _ => Method::ClosedForm,
        }
    }
}
