//! Roots of functions of one number between two ends.

/// Steps at most: halving alone takes some 1,100 from the largest double to the smallest, and a root here is never so
/// far from its bracket.
const MOST_STEPS: u32 = 300;

/// The root of a monotone function between two times, where it has one: by the Illinois variant of the secant rule kept
/// within its bracket, which needs no slope.
pub(crate) fn root(low: f64, high: f64, function: &impl Fn(f64) -> f64) -> Option<f64> {
    let (mut a, mut b) = (low, high);
    let (mut fa, mut fb) = (function(a), function(b));
    if fa == 0.0 {
        return Some(a);
    }
    if fb == 0.0 {
        return Some(b);
    }
    if (fa > 0.0) == (fb > 0.0) || !(fa.is_finite() && fb.is_finite()) {
        return None;
    }
    for step in 0..MOST_STEPS {
        let middle = 0.5 * (a + b);
        let secant = b - fb * (b - a) / (fb - fa);
        // Every third step halves, whatever the secant says.
        let next = if step % 3 != 2 && secant > a.min(b) && secant < a.max(b) {
            secant
        } else {
            middle
        };
        let value = function(next);
        if value == 0.0 || next == a || next == b {
            return Some(next);
        }
        if (value > 0.0) == (fb > 0.0) {
            fa *= 0.5;
        } else {
            (a, fa) = (b, fb);
        }
        (b, fb) = (next, value);
        if (b - a).abs() <= f64::EPSILON * a.abs().max(b.abs()) {
            return Some(b);
        }
    }
    Some(b)
}

/// The root of a function that is above 0 at `low` and not above it at `high`, by Newton's steps kept within the bracket;
/// `function` gives its value and its slope. Where a step does not halve what is left it halves the bracket.
pub(crate) fn newton(low: f64, high: f64, first: f64, function: &impl Fn(f64) -> (f64, f64)) -> f64 {
    let (mut low, mut high) = (low, high);
    let mut at = if first > low && first < high {
        first
    } else {
        0.5 * (low + high)
    };
    let mut before = high - low;
    for _ in 0..MOST_STEPS {
        let (value, slope) = function(at);
        if value > 0.0 {
            low = at;
        } else {
            high = at;
        }
        let step = value / slope;
        let next = at - step;
        if value == 0.0 || (step.abs() <= f64::EPSILON * at.abs() && slope < 0.0) {
            return at;
        }
        let next = if next >= low && next <= high && step.abs() < 0.5 * before {
            next
        } else {
            0.5 * (low + high)
        };
        if next == at || high - low <= f64::EPSILON * high.abs() {
            return next;
        }
        before = (next - at).abs();
        at = next;
    }
    at
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_root_is_found_with_and_without_slope() {
        let off = |found: f64| (found - libm::log(7.0)).abs();
        let above = |t: f64| 7.0 - libm::exp(t);
        assert!(off(root(0.0, 5.0, &above).expect("it changes sign")) < 1e-15);
        for first in [-1.0, 0.0, 0.1, 2.0, 4.9, f64::NAN] {
            let found = newton(0.0, 5.0, first, &|t| (above(t), -libm::exp(t)));
            assert!(off(found) < 1e-15, "{first}: {found}");
        }
        assert_eq!(root(2.0, 5.0, &above), None);
    }

    /// A slope that vanishes at the root, or is wrong, still leaves the bracket to halve.
    #[test]
    fn a_bad_slope_is_halved_away() {
        let flat = newton(0.0, 2.0, 1.9, &|t| {
            (-(t - 1.0) * (t - 1.0) * (t - 1.0), -3.0 * (t - 1.0) * (t - 1.0))
        });
        assert!((flat - 1.0).abs() < 1e-5, "{flat}");
        let wrong = newton(0.0, 2.0, 0.5, &|t| (1.5 - t, 1e-9));
        assert!((wrong - 1.5).abs() < 1e-15, "{wrong}");
    }
}
