//! How far a strength falls, or rises, in the logarithm, while a sum of powers of it makes up an area.

use super::growth;

/// Newton's steps at most; a start nine decades from the root needs some forty.
const MOST_STEPS: usize = 100;

/// λ with Σ scale·(e^(order·λ) − 1)/order = `area`, over the pairs of a scale and an order, by Newton's steps from
/// `first` on: as near as a double comes to it.
///
/// They never go past the root where the sum is concave in λ (no order above 0) and they begin below it, or convex (no
/// order below 0) and they begin above.
pub(crate) fn span_of(scaled: &[(f64, f64)], area: f64, first: f64) -> f64 {
    let mut span = first;
    for _ in 0..MOST_STEPS {
        let (mut made_up, mut slope) = (0.0, 0.0);
        for (scale, order) in scaled {
            made_up += scale * growth(*order, span);
            slope += scale * libm::exp(order * span);
        }
        let step = (area - made_up) / slope;
        if !step.is_finite() {
            break;
        }
        span += step;
        if step.abs() <= 2.0 * f64::EPSILON * span {
            break;
        }
    }
    span
}
