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

use crate::double::Double;
use crate::laws::{Power, growth};
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// Two sums are the same where they differ by at most this part of the larger: the rounding of the inputs themselves.
pub const TIE: f64 = 4.0 * f64::EPSILON / 2.0;

/// The least strength that a root-find goes down to: double-double arithmetic divides by no less.
pub(crate) const LEAST: f64 = 1e-290;

/// Steps at most in plain doubles; where they do not do, halving takes over.
const MOST_STEPS: usize = 50;

/// A term c·n^(k−1) of what a side costs, by the order k of its integral c·nᵏ/k.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Term {
    /// c, with the rate in it; 0 where there is no term.
    pub weight: Double,
    /// k, exact in double-double: 0 is the logarithm.
    pub order: Double,
}

impl Term {
    /// The value at `strength`.
    fn at(&self, strength: f64) -> f64 {
        Power {
            coefficient: self.weight.into(),
            exponent: f64::from(self.order - 1.0),
        }
        .at(strength)
    }
}

/// The way of a side down to a strength: where to, and by how much, each with all its digits. Next to the start the
/// difference of the strengths would have lost those of the second, next to 0 those of the first.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Descent {
    /// The strength that is left.
    pub to: Double,
    /// What has fallen.
    pub by: Double,
}

impl Descent {
    /// From one strength to another.
    pub fn between(from: f64, to: Double) -> Descent {
        Descent {
            to,
            by: Double::from(from) - to,
        }
    }
}

/// The most terms of a side: two powers in 1/T, each for the fire and for what is lost besides.
pub const MOST_TERMS: usize = 4;

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

    /// What it takes to bring `side` from one strength to another: rate × ∫ S/T, 0 or more, infinite where the enemy
    /// would pay without bound.
    ///
    /// A side whose own fire has no effect takes nothing: its enemy loses none in bringing it down.
    pub fn cost(&self, side: Side, from: Double, to: Double) -> Double {
        self.cost_of(side, from, Descent { to, by: from - to })
    }

    /// The same for a descent whose height is known with all its digits.
    pub fn cost_of(&self, side: Side, from: Double, down: Descent) -> Double {
        let mut sum = Double::from(0.0);
        for term in self.active(side) {
            let area = integral(term.order, from, down);
            if is_endless(area) {
                return area;
            }
            sum += area * term.weight;
        }
        sum
    }

    /// What is left of `side`, brought down from `from` at the cost `cost`; 0 where that is more than all of it.
    pub fn left(&self, side: Side, from: Double, cost: Double) -> Double {
        let zero = Double::from(0.0);
        if cost == zero {
            return from;
        }
        if is_endless(cost) {
            return zero;
        }
        let left = match self.active(side) {
            [] => from,
            [one] => left_of_one(one, from, cost),
            [first, second] if first.order == 2.0 && second.order == 1.0 => {
                left_of_quadratic(first, second, from, cost)
            }
            terms => left_of_many(terms, from, cost),
        };
        if left > 0.0 { left } else { zero }
    }

    /// Whether what is left of `side` at a cost has no formula, and is found by a search for the root.
    pub fn needs_root(&self, side: Side) -> bool {
        match self.active(side) {
            [] | [_] => false,
            [first, second] => !(first.order == 2.0 && second.order == 1.0),
            _ => true,
        }
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
        let larger = if cost.x > cost.y { cost.x } else { cost.y };
        !is_endless(larger) && (cost.x - cost.y).abs() <= larger * TIE
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

/// Whether a cost is without bound.
pub fn is_endless(cost: Double) -> bool {
    cost.is_infinite()
}

/// ∫ n^(order − 1) along a descent, in full.
///
/// Written with what has fallen, which keeps the digits that a difference of powers loses: for orders other than 1 and 2
/// as the larger power times (1 − e^(−|k|·ln(from/to)))/|k|, which also holds where k is next to 0.
fn integral(order: Double, from: Double, down: Descent) -> Double {
    let Descent { to, by } = down;
    if order == 1.0 || by == 0.0 {
        return by;
    }
    if order == 2.0 {
        return by * (from + to) * 0.5;
    }
    if to > 0.0 {
        let part = by / from;
        let span = if part < 0.25 {
            -(-part).ln_1p()
        } else {
            (from / to).ln()
        };
        if order == 0.0 {
            span
        } else if order > 0.0 {
            from.pow(order) * -(-(span * order)).exp_m1() / order
        } else {
            to.pow(order) * (span * order).exp_m1() / order
        }
    } else if order > 0.0 {
        from.pow(order) / order
    } else {
        Double::from(f64::INFINITY)
    }
}

/// What is left where S/T is a single power and ∫ S/T is `area`.
fn left_of_one(term: &Term, from: Double, area: Double) -> Double {
    let area = area / term.weight;
    if term.order == 1.0 {
        return from - area;
    }
    if term.order == 2.0 {
        let square = from * from - area * 2.0;
        return if square > 0.0 {
            square.sqrt()
        } else {
            Double::from(0.0)
        };
    }
    if term.order == 0.0 {
        return from * (-area).exp();
    }
    // leftᵏ = fromᵏ·(1 − part), so left = from·(1 − part)^(1/k).
    let part = area * term.order / from.pow(term.order);
    if part >= 1.0 {
        return Double::from(0.0);
    }
    let span = if part.abs() < 0.25 {
        (-part).ln_1p()
    } else {
        (-part + 1.0).ln()
    };
    from * (span / term.order).exp()
}

/// What is left where S/T is c·n + d: the positive root of c·n²/2 + d·n = rest, written so that nothing cancels.
fn left_of_quadratic(first: &Term, second: &Term, from: Double, area: Double) -> Double {
    let (c, d) = (first.weight, second.weight);
    let rest = from * (from * c * 0.5 + d) - area;
    if rest > 0.0 {
        rest * 2.0 / ((rest * c * 2.0 + d * d).sqrt() + d)
    } else {
        rest
    }
}

/// What is left where S/T is a sum of powers: one root-find.
///
/// The sum grows with λ; Newton's steps are kept within a bracket, then one from a residual in double-double carries the
/// root to all digits.
fn left_of_many(terms: &[Term], from: Double, area: Double) -> Double {
    let down = |left: f64| Descent {
        to: left.into(),
        by: from - left,
    };
    let short = |left: f64| {
        let spent = terms
            .iter()
            .map(|term| integral(term.order, from, down(left)) * term.weight);
        spent.fold(-area, |sum, one| sum + one)
    };
    let slope = |left: f64| -> f64 { terms.iter().map(|term| term.at(left)).sum() };
    let start = f64::from(from);
    let (mut low, mut high) = (0.0, libm::log(start / LEAST));
    let mut span = span_of_many(terms, start, f64::from(area));
    if !(0.0..20.0).contains(&span) {
        if short(LEAST) <= 0.0 {
            return Double::from(0.0);
        }
        span = span.clamp(0.0, high);
    }
    let mut left = start * libm::exp(-span);
    for _ in 0..200 {
        let off = short(left);
        let step = f64::from(off) / (slope(left) * left);
        if step.abs() <= 1e-14 * (1.0 + span) {
            // One step more, in full, from so near the root doubles its digits.
            return Double::sum(left, f64::from(off) / slope(left));
        }
        if step > 0.0 {
            high = span
        } else {
            low = span
        }
        let next = span - step;
        span = if next > low && next < high {
            next
        } else {
            0.5 * (low + high)
        };
        left = start * libm::exp(-span);
    }
    left.into()
}

/// The same λ in plain doubles, which next to the end lose its last digits: where the search begins.
fn span_of_many(terms: &[Term], start: f64, area: f64) -> f64 {
    let scaled: Vec<(f64, f64)> = terms
        .iter()
        .map(|term| {
            let order = f64::from(term.order);
            (f64::from(term.weight) * libm::pow(start, order), order)
        })
        .collect();
    // The sum is concave in λ, as its orders are 0 or more: Newton's steps from 0 never go past the root.
    let mut span = 0.0;
    for _ in 0..MOST_STEPS {
        let spent: f64 = scaled
            .iter()
            .map(|(scale, order)| scale * growth(-order, span))
            .sum();
        let slope: f64 = scaled
            .iter()
            .map(|(scale, order)| scale * libm::exp(-order * span))
            .sum();
        let step = (area - spent) / slope;
        if !step.is_finite() {
            break;
        }
        span += step;
        if step.abs() <= 1e-15 * span {
            break;
        }
    }
    span
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
