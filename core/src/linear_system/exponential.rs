//! An exponential and its integrals, from which all functions of a linear system's matrix are made.

/// e^(λt), its integral from 0, and the integral of that: at an eigenvalue, or their divided differences.
#[derive(Clone, Copy, Debug)]
pub(super) struct Exponential {
    pub(super) none: f64,
    pub(super) once: f64,
    /// Over the time, since it may be beyond a double.
    pub(super) twice_by_t: f64,
}

/// 1 over each whole number.
pub(super) const ONE_OVER: [f64; 24] = {
    let mut parts = [0.0; 24];
    let mut n = 1;
    while n < 24 {
        parts[n] = 1.0 / n as f64;
        n += 1;
    }
    parts
};

impl Exponential {
    /// That of an eigenvalue.
    pub(super) fn new(eigenvalue: f64, t: f64) -> Exponential {
        let angle = eigenvalue * t;
        // e^z − 1 keeps its digits near 0, e^z far below.
        let (none, less_one) = if angle < -0.5 {
            let none = libm::exp(angle);
            (none, none - 1.0)
        } else {
            let less_one = libm::expm1(angle);
            (1.0 + less_one, less_one)
        };
        let once = if angle == 0.0 { t } else { less_one / eigenvalue };
        let twice_by_t = if angle.abs() < 0.5 {
            // t·(1/2 + z/6 + z²/24 …), which (e^z − 1)/z − 1 would lose.
            let series = ONE_OVER[3..16]
                .iter()
                .rev()
                .fold(0.0, |sum, part| (sum * angle + 1.0) * part);
            t * 0.5 * (1.0 + angle * series)
        } else {
            (less_one / angle - 1.0) / eigenvalue
        };
        Exponential {
            none,
            once,
            twice_by_t,
        }
    }
}
