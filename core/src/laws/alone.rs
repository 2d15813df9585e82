//! A side that fades by itself: it is shot at by a steady fire, and the other side follows by the state equation.
//!
//! y' = −s·T(y), where s = b·S(x) does not change: because x is not shot at, or because the number of shooters does not
//! count (logarithmic fire, a power law with p = 0). The time is then s·t = ∫dy/T(y), a sum of powers.

use super::Power;
use super::span::span_of;
use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::sides::Side;

/// A side that fades by itself, in time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Alone {
    /// The side that fades.
    pub target: Side,
    start: f64,
    /// s, above 0.
    steady: f64,
    per_target: [Power; 2],
}

impl Alone {
    /// The motion of `target` from the strength `start`, losing `steady` over the sum `per_target` per unit of time.
    pub fn new(target: Side, start: f64, steady: f64, per_target: [Power; 2]) -> Alone {
        Alone {
            target,
            start,
            steady,
            per_target,
        }
    }

    /// The time at which the fight is at `point`; endless where the last target would take for ever.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        let (left, fallen) = (point.left[self.target], point.fallen[self.target]);
        self.per_target
            .iter()
            .map(|power| power.integral(left, fallen))
            .sum::<f64>()
            / self.steady
    }

    /// The strength of the target at the time `t` after the start, which is no later than its end.
    pub fn left_at(&self, t: f64) -> Double {
        let spent = self.steady * t;
        let [first, second] = self.per_target;
        if first.exponent == 0.0 && second.coefficient == 0.0 {
            return Double::difference(self.start, spent / first.coefficient);
        }
        let span = if second.coefficient == 0.0 {
            self.span_of_one(first, spent)
        } else {
            self.span_of_two(spent)
        };
        if span < 0.5 {
            return Double::sum(self.start, self.start * libm::expm1(-span));
        }
        (self.start * libm::exp(-span)).into()
    }

    /// λ = ln(start/left) for a single power: `spent` is c·startᵏ·(1 − e^(−kλ))/k with k the exponent + 1.
    fn span_of_one(&self, power: Power, spent: f64) -> f64 {
        let order = power.exponent + 1.0;
        if order == 0.0 {
            return spent / power.coefficient;
        }
        let part = order * spent / (power.coefficient * libm::pow(self.start, order));
        -libm::log1p((-part).max(-1.0)) / order
    }

    /// The same for two powers.
    fn span_of_two(&self, spent: f64) -> f64 {
        let scaled = self.per_target.map(|power| {
            let order = power.exponent + 1.0;
            (power.coefficient * libm::pow(self.start, order), -order)
        });
        span_of(&scaled, spent, 0.0)
    }
}
