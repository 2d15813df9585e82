//! The state equation: what stays constant along a fight, for every pairing of laws.
//!
//! With x' = −a·S(y)·T(x) and y' = −b·S(x)·T(y) (each law's factors of the shooters S and of the targets T) time drops
//! out of dy/dx, and b·∫S(x)/T(x)dx − a·∫S(y)/T(y)dy is constant. S/T is a sum of powers, so its integrals are
//! elementary: powers and logarithms. It says who is brought down first, and what is left, without any step in time.
//!
//! Losses that do not depend on the enemy's number keep this form where they go by the same factor T: with wastage, or
//! supporting arms firing at an area, beside fire at an area, or with aimed support beside aimed fire,
//! x' = −(a·S(y) + w)·T(x), and each side of the equation has a second sum of powers.
//!
//! All of it is worked out in double-double arithmetic from the numbers as they were read, taken as exact: near parity
//! the terms agree in all digits of a double.

mod left;
mod term;

pub(crate) use left::{LEAST, powers};
pub use term::{Descent, MOST_TERMS, Origin, Term, is_endless};

use crate::double::Double;
use crate::laws::Power;
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// Two sums are the same where they differ by at most this part of the larger: the rounding of the inputs themselves.
pub const TIE: f64 = 4.0 * f64::EPSILON / 2.0;

/// The state equation of a pairing.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StateEquation {
    /// The rate of each side's fire; 0 where it has no effect.
    pub rate: Both<f64>,
    /// What each side costs its enemy as it is brought down, over its own strength; the terms that count come first.
    pub terms: Both<[Term; MOST_TERMS]>,
    /// The exponent of what each side does to its enemy, next to 0.
    shooters: Both<f64>,
    /// The largest exponent of each side's own factor as targets next to 0: T(n) falls as n to that power.
    vanishing: Both<f64>,
}

impl StateEquation {
    /// The state equation of `fire`, the fire of each side, and nothing else.
    pub fn of(fire: &Both<Fire<f64>>) -> StateEquation {
        let per_target = Both::of(|side: Side| fire[side.enemy()].per_target());
        StateEquation::with(fire, &per_target, &Both::default())
    }

    /// The state equation of `fire` where each side also loses `besides`·T(n) whatever the enemy's number; `per_target`
    /// is 1/T of each side.
    pub fn with(fire: &Both<Fire<f64>>, per_target: &Both<[Power; 2]>, besides: &Both<f64>) -> StateEquation {
        let rate = Both::of(|side| {
            if fire[side].takes_effect() {
                fire[side].rate
            } else {
                0.0
            }
        });
        let terms = Both::of(|side: Side| {
            let shooters = fire[side].shooters().exponent;
            let mut terms = [Term::default(); MOST_TERMS];
            let mut count = 0;
            for (weight, exponent) in [(rate[side], shooters), (besides[side.enemy()], 0.0)] {
                for power in per_target[side]
                    .iter()
                    .filter(|power| weight > 0.0 && power.coefficient > 0.0)
                {
                    terms[count] = Term {
                        weight: Double::product(weight, power.coefficient),
                        order: Double::sum(exponent, power.exponent) + 1.0,
                    };
                    count += 1;
                }
            }
            terms
        });
        let shooters = Both::of(|side: Side| {
            if besides[side.enemy()] > 0.0 {
                0.0
            } else {
                fire[side].shooters().exponent
            }
        });
        let vanishing = Both::of(|side: Side| {
            let powers = per_target[side].iter().filter(|power| power.coefficient > 0.0);
            powers.map(|power| -power.exponent).fold(0.0, f64::max)
        });
        StateEquation {
            rate,
            terms,
            shooters,
            vanishing,
        }
    }

    /// The terms of a side that count.
    pub fn active(&self, side: Side) -> &[Term] {
        let count = self.terms[side]
            .iter()
            .take_while(|term| term.weight > 0.0)
            .count();
        &self.terms[side][..count]
    }

    /// `strength` as a strength from which `side` is brought down.
    pub fn origin(&self, side: Side, strength: Double) -> Origin {
        Origin::new(strength, self.active(side))
    }

    /// What it takes to bring `side` from one strength to another: rate × ∫ S/T, 0 or more, infinite where the enemy
    /// would pay without bound.
    ///
    /// A side whose own fire has no effect takes nothing: its enemy loses none in bringing it down.
    pub fn cost(&self, side: Side, from: Double, to: Double) -> Double {
        self.cost_from(side, &self.origin(side, from), Descent { to, by: from - to })
    }

    /// The same for a descent whose height is known with all its digits.
    pub fn cost_from(&self, side: Side, origin: &Origin, down: Descent) -> Double {
        term::cost(self.active(side), origin, down)
    }

    /// What is left of `side`, brought down from `from` at the cost `cost`; 0 where that is more than all of it.
    pub fn left(&self, side: Side, from: Double, cost: Double) -> Double {
        self.left_from(side, &self.origin(side, from), cost)
    }

    /// The same from an origin.
    pub fn left_from(&self, side: Side, origin: &Origin, cost: Double) -> Double {
        let zero = Double::from(0.0);
        if cost == zero {
            return origin.strength;
        }
        if is_endless(cost) {
            return zero;
        }
        let left = left::left(self.active(side), origin, cost);
        if left > 0.0 { left } else { zero }
    }

    /// Whether what is left of `side` at a cost has no formula, and is found by a search for the root.
    pub fn needs_root(&self, side: Side) -> bool {
        left::needs_root(self.active(side))
    }

    /// What has fallen of `side`, brought down from `from` to `left` at the cost `cost`: also where that is so little of
    /// `from` that the difference of the strengths would have no digits.
    pub fn fallen(&self, side: Side, from: Double, left: Double, cost: Double) -> Double {
        let difference = from - left;
        if is_endless(cost) || difference > from * 1e-10 {
            return difference;
        }
        // The integrand in the middle of so short a stretch is its mean to a part of 1e-20.
        let middle = f64::from(from + left) * 0.5;
        let mean: f64 = self.active(side).iter().map(|term| term.at(middle)).sum();
        if mean > 0.0 { cost / mean } else { difference }
    }

    /// The strength of `side` that it costs `cost` to bring down to the last, where that cost is finite; it is no more
    /// than `most`.
    pub fn worth(&self, side: Side, cost: Double, most: Double) -> Double {
        if cost <= 0.0 {
            return Double::from(0.0);
        }
        let [one] = self.active(side) else {
            return self.left(side, most, self.cost(side, most, Double::from(0.0)) - cost);
        };
        let area = cost / one.weight * one.order;
        if one.order == 1.0 {
            area
        } else if one.order == 2.0 {
            area.sqrt()
        } else {
            area.pow(Double::from(1.0) / one.order)
        }
    }

    /// Whether two costs are the same to the rounding of the inputs.
    pub fn tie(cost: Both<Double>) -> bool {
        StateEquation::tie_within(cost, TIE)
    }

    /// Whether two costs are the same to so small a part.
    pub fn tie_within(cost: Both<Double>, part: f64) -> bool {
        let larger = if cost.x > cost.y { cost.x } else { cost.y };
        !is_endless(larger) && (cost.x - cost.y).abs() <= larger * part
    }

    /// Whether a fight gets to the strengths `left` on its orbit in finite time, by the exponents alone.
    ///
    /// Next to 0 the time is ∫ dy/(b·S(x)·T(y)). With x left it is finite where T(y) vanishes more slowly than y. With
    /// nothing left of either, the orbit there is xᵏ ∝ y^m with the orders k and m of the state equation, and the
    /// integrand y to the power −q − p·m/k, with q and p the exponents of T(y) and S(x).
    pub fn is_reached(&self, left: Both<f64>) -> bool {
        match (left.x > 0.0, left.y > 0.0) {
            (true, true) => true,
            (false, true) => self.is_last_reached(Side::X),
            (true, false) => self.is_last_reached(Side::Y),
            (false, false) => {
                let order = Both::of(|side| self.lowest_order(side));
                if order.x <= 0.0 || order.y <= 0.0 {
                    return false;
                }
                let exponent = self.vanishing.y + self.shooters.x * order.y / order.x;
                exponent < 1.0 - 1e-14
            }
        }
    }

    /// The exponent to which the losses of `side` vanish with its own number, next to 0.
    pub fn vanishing(&self, side: Side) -> f64 {
        self.vanishing[side]
    }

    /// Whether the last of `side` is reached in finite time by an enemy who still has some left.
    pub fn is_last_reached(&self, side: Side) -> bool {
        self.vanishing[side] < 1.0
    }

    /// Whether more of `side` makes it easier to bring down: the enemy's fire feeds on its number more than its own
    /// fire gains by it.
    pub fn more_hurts(&self, side: Side) -> bool {
        self.rate[side.enemy()] > 0.0 && self.lowest_order(side) < 0.0
    }

    /// The order that decides next to 0.
    fn lowest_order(&self, side: Side) -> f64 {
        self.active(side)
            .iter()
            .map(|term| f64::from(term.order))
            .fold(f64::INFINITY, f64::min)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::laws::FireLaw;

    fn equation(x: (FireLaw, f64), y: (FireLaw, f64)) -> StateEquation {
        let fire = |(law, rate)| Fire {
            law,
            rate,
            half: None,
            p: None,
            q: None,
        };
        StateEquation::of(&Both {
            x: fire(x),
            y: fire(y),
        })
    }

    /// Lanchester, *Aircraft in Warfare* (1916), p. 65: 32² + 8² against 23² + 23² is near parity; √30 is left.
    #[test]
    fn what_is_left_closes_the_square_law() {
        let law = equation((FireLaw::Aimed, 1.0), (FireLaw::Aimed, 1.0));
        let (zero, y) = (Double::from(0.0), Double::from(1058.0).sqrt());
        let x = Double::from(1088.0).sqrt();
        let left = law.left(Side::X, x, law.cost(Side::Y, y, zero));
        assert!((left * left - 30.0).abs() < 1e-25);
    }

    #[test]
    fn decimals_that_balance_are_a_tie() {
        let law = equation((FireLaw::Aimed, 0.04), (FireLaw::Aimed, 0.09));
        let zero = Double::from(0.0);
        let cost = |x: f64, y: f64| Both {
            x: law.cost(Side::X, x.into(), zero),
            y: law.cost(Side::Y, y.into(), zero),
        };
        assert!(StateEquation::tie(cost(600.0, 400.0)));
        assert!(!StateEquation::tie(cost(
            600.0,
            400.0_f64.next_up().next_up().next_up()
        )));
    }

    /// What is left closes the cost for every pairing, to more digits than a double has, also where
    /// next to nothing is left.
    #[test]
    fn left_and_cost_close_for_every_pairing() {
        let fires = FireLaw::ALL.map(|law| Fire {
            law,
            rate: 0.03,
            half: Some(17.0),
            p: Some(0.3),
            q: Some(1.6),
        });
        for x in fires {
            for y in fires {
                let law = StateEquation::of(&Both { x, y });
                if law.rate.x == 0.0 {
                    continue;
                }
                let from = Double::from(600.0);
                for part in [1e-6, 0.3, 0.999_999] {
                    let to = from * part;
                    let left = law.left(Side::X, from, law.cost(Side::X, from, to));
                    let off = f64::from((left - to) / to).abs();
                    assert!(off < 1e-18, "{:?} {:?} {part}: {off:e}", x.law, y.law);
                }
            }
        }
    }
}
