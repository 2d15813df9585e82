//! What is left of a side at a cost.

use super::term::{Descent, MOST_TERMS, Origin, THREE_HALVES, Term, cost as cost_of};
use crate::double::Double;
use crate::laws::span::span_of;

/// The least strength that a root-find goes down to: double-double arithmetic divides by no less.
pub(crate) const LEAST: f64 = 1e-290;

/// What is left where that has fallen from `origin` which costs `cost`; 0 or less where that is more than all of it.
pub(super) fn left(terms: &[Term], origin: &Origin, cost: Double) -> Double {
    if terms.first().is_some_and(|term| term.weight < TINY) {
        return left_of_tiny(terms, origin, cost);
    }
    match terms {
        [] => origin.strength,
        [one] => left_of_one(one, origin, cost),
        [first, second] if is_quadratic(first, second) => {
            left_of_quadratic(first, second, origin.strength, cost)
        }
        terms => left_of_many(terms, origin, cost),
    }
}

/// Weights below this have products below the smallest double.
const TINY: f64 = 1e-100;

/// The same with weights that low: a power of two before all of them and the cost changes no digit.
fn left_of_tiny(terms: &[Term], origin: &Origin, cost: Double) -> Double {
    let scale = f64::from_bits((1023 + 400) << 52);
    let mut scaled = [Term::default(); MOST_TERMS];
    for (to, term) in scaled.iter_mut().zip(terms) {
        *to = Term {
            weight: term.weight * scale,
            ..*term
        };
    }
    left(&scaled[..terms.len()], origin, cost * scale)
}

/// Whether what is left has no formula, and is found by a search for the root.
pub(super) fn needs_root(terms: &[Term]) -> bool {
    match terms {
        [] | [_] => false,
        [first, second] => !is_quadratic(first, second),
        _ => true,
    }
}

fn is_quadratic(first: &Term, second: &Term) -> bool {
    first.order == 2.0 && second.order == 1.0
}

/// What is left where S/T is a single power and ∫ S/T is `area`.
fn left_of_one(term: &Term, origin: &Origin, area: Double) -> Double {
    let (from, area) = (origin.strength, area / term.weight);
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
    if term.order == THREE_HALVES {
        let cube = origin.power() - area * THREE_HALVES;
        let root = if cube > 0.0 {
            cube.cbrt()
        } else {
            Double::from(0.0)
        };
        return root * root;
    }
    // leftᵏ = fromᵏ·(1 − part), so left = from·(1 − part)^(1/k).
    let part = area * term.order / origin.power();
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

/// Newton's steps before every other one halves the bracket.
const FAST: u32 = 12;

/// What is left where S/T is a sum of powers: one root-find.
///
/// The sum grows with λ; Newton's steps are kept within a bracket, then one from a residual in double-double carries the
/// root to all digits.
fn left_of_many(terms: &[Term], origin: &Origin, area: Double) -> Double {
    let from = origin.strength;
    let down = |left: f64| Descent {
        to: left.into(),
        by: from - left,
    };
    let short = |left: f64| cost_of(terms, origin, down(left)) - area;
    let slope = |left: f64| -> f64 { terms.iter().map(|term| term.at(left)).sum() };
    let start = f64::from(from);
    if start <= LEAST {
        return Double::from(0.0);
    }
    let (mut low, mut high) = (0.0, libm::log(start / LEAST));
    // In plain doubles, which next to the end lose their last digits: where the search begins.
    let falling = powers(terms, start).map(|(scale, order)| (scale, -order));
    let mut span = span_of(&falling[..terms.len()], f64::from(area), 0.0);
    if !(0.0..20.0).contains(&span) {
        if short(LEAST) <= 0.0 {
            return Double::from(0.0);
        }
        span = span.clamp(0.0, high);
    }
    let mut left = start * libm::exp(-span);
    for tried in 0..200 {
        let off = short(left);
        let pace = slope(left) * left;
        // Next to nothing the slope may be more than a double holds: then only the sign of what is missing counts.
        let step = if pace.is_finite() {
            f64::from(off) / pace
        } else {
            f64::from(off) * f64::INFINITY
        };
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
        // From far away, where the sum grows without bound towards nothing, each step goes only a little way.
        let is_slow = tried > FAST && tried % 2 == 0;
        span = if next > low && next < high && !is_slow {
            next
        } else {
            0.5 * (low + high)
        };
        left = start * libm::exp(-span);
    }
    left.into()
}

/// The terms as pairs of a scale and an order: what each costs from `strength` on, of which the order is in the
/// logarithm.
pub(crate) fn powers(terms: &[Term], strength: f64) -> [(f64, f64); MOST_TERMS] {
    let mut powers = [(0.0, 0.0); MOST_TERMS];
    for (power, term) in powers.iter_mut().zip(terms) {
        let order = f64::from(term.order);
        *power = (f64::from(term.weight) * libm::pow(strength, order), order);
    }
    powers
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A factor that grows without bound towards nothing, as where a side's fire feeds on its number: the search begins so
    /// far away that its slope is more than a double holds.
    #[test]
    fn what_is_left_is_found_where_the_cost_is_without_bound() {
        let terms = [(2.5, 77_234.0), (-0.5, 2.13)].map(|(order, weight)| Term {
            order: order.into(),
            weight: weight.into(),
        });
        for to in [2.23e-12, 1e-100, 3e-7] {
            let origin = Origin::new(Double::from(4.57e-7), &terms);
            let down = Descent::between(4.57e-7, to.into());
            let left = left_of_many(&terms, &origin, cost_of(&terms, &origin, down));
            assert!(f64::from((left - to) / to).abs() < 1e-15, "{to:e}: {left:?}");
        }
    }
}
