//! The terms of what it costs to bring a side down: powers of its strength, and their integrals along its way down.

use crate::double::Double;
use crate::laws::Power;

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
    pub(crate) fn at(&self, strength: f64) -> f64 {
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

/// The order of the three-halves law, whose integrals are as cheap as those of a square.
pub(super) const THREE_HALVES: f64 = 1.5;

/// The most terms of a side: two powers in 1/T, each for the fire and for what is lost besides.
pub const MOST_TERMS: usize = 4;

/// A strength from which a side is brought down, raised to the orders of its terms once for all that begins there.
#[derive(Clone, Copy, Debug)]
pub struct Origin {
    pub(super) strength: Double,
    /// One for each term; 0 where it is not needed.
    powers: [Double; MOST_TERMS],
}

impl Origin {
    pub(super) fn new(strength: Double, terms: &[Term]) -> Origin {
        let mut powers = [Double::default(); MOST_TERMS];
        for (power, term) in powers.iter_mut().zip(terms) {
            if term.order == THREE_HALVES {
                *power = strength * strength.sqrt();
            } else if !term.is_simple() {
                *power = strength.pow(term.order);
            }
        }
        Origin { strength, powers }
    }

    /// The strength raised to the order of the first term, where that is neither 0, 1 nor 2.
    pub(super) fn power(&self) -> Double {
        self.powers[0]
    }
}

/// Whether a cost is without bound.
pub fn is_endless(cost: Double) -> bool {
    cost.is_infinite()
}

impl Term {
    /// Whether its integral is a logarithm, a difference, or a difference of squares or of cubes of roots.
    fn is_simple(&self) -> bool {
        [0.0, 1.0, 2.0, THREE_HALVES]
            .iter()
            .any(|order| self.order == *order)
    }

    /// ∫ n^(k − 1) along a way down, whose beginning is `power` when raised to the order k, in full.
    ///
    /// Written with what has fallen, which keeps the digits that a difference of powers loses: for orders other than 1
    /// and 2 as the larger power times (1 − e^(−|k|·ln(from/to)))/|k|, which also holds where k is next to 0.
    fn integral(&self, way: &Way, power: Double) -> Double {
        let (order, Descent { to, by }) = (self.order, way.down);
        if order == 1.0 || by == 0.0 {
            by
        } else if order == 2.0 {
            by * (way.from + to) * 0.5
        } else if order == THREE_HALVES {
            // The difference of two cubes over that of their squares.
            let roots = (way.from.sqrt(), to.sqrt());
            by * (way.from + roots.0 * roots.1 + to) / ((roots.0 + roots.1) * THREE_HALVES)
        } else if to > 0.0 {
            let span = way.span;
            if order == 0.0 {
                span
            } else if order > 0.0 {
                power * -(-(span * order)).exp_m1() / order
            } else {
                to.pow(order) * (span * order).exp_m1() / order
            }
        } else if order > 0.0 {
            power / order
        } else {
            Double::from(f64::INFINITY)
        }
    }
}

/// A way down from a strength.
struct Way {
    from: Double,
    down: Descent,
    /// ln(from/to), where it is needed.
    span: Double,
}

impl Way {
    fn new(from: Double, down: Descent, terms: &[Term]) -> Way {
        let is_needed = down.to > 0.0 && terms.iter().any(|term| term.order == 0.0 || !term.is_simple());
        let part = down.by / from;
        let span = if !is_needed {
            Double::default()
        } else if part < 0.25 {
            -(-part).ln_1p()
        } else {
            (from / down.to).ln()
        };
        Way { from, down, span }
    }
}

/// What it costs to come down from `origin`: the sum of the integrals, each times the weight of its term; infinite where
/// it is without bound.
pub(super) fn cost(terms: &[Term], origin: &Origin, down: Descent) -> Double {
    let way = Way::new(origin.strength, down, terms);
    let mut sum = None;
    for (term, power) in terms.iter().zip(origin.powers) {
        let area = term.integral(&way, power);
        if is_endless(area) {
            return area;
        }
        let cost = area * term.weight;
        sum = Some(sum.map_or(cost, |sum| sum + cost));
    }
    sum.unwrap_or_default()
}
