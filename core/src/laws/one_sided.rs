//! A side that fires at one which does not: its own strength stays, and the other's alone changes.
//!
//! y' = −s·T(y) with the steady s = b·S(x₀); 1/T is a single power y^e, so s·t = ∫ y^e dy.

use super::Power;
use crate::orbit_point::OrbitPoint;
use crate::sides::{Both, Side};

/// Fire from one side alone, in time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OneSided {
    target: Side,
    start: Both<f64>,
    /// s, above 0.
    steady: f64,
    /// The power in 1/T.
    per_target: Power,
}

impl OneSided {
    /// The motion from the strengths `start`, of which `target` loses `steady`·T(target) per unit of time.
    pub fn new(target: Side, start: Both<f64>, steady: f64, per_target: Power) -> OneSided {
        OneSided {
            target,
            start,
            steady,
            per_target,
        }
    }

    /// The time at which the fight is at `point`; endless where the last target would take for ever.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        let (left, fallen) = (point.left[self.target], point.fallen[self.target]);
        let integral = match self.per_target.exponent {
            0.0 => fallen,
            _ => libm::log1p(fallen / left),
        };
        self.per_target.coefficient * integral / self.steady
    }

    /// Where the fight is at the time `t` after the start.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        let start = self.start[self.target];
        let spent = self.steady * t / self.per_target.coefficient;
        let (left, fallen) = match self.per_target.exponent {
            0.0 => (start - spent, spent),
            _ => (start * libm::exp(-spent), -start * libm::expm1(-spent)),
        };
        let mut point = OrbitPoint {
            left: self.start,
            fallen: Both::default(),
        };
        point.left[self.target] = left;
        point.fallen[self.target] = fallen;
        point
    }
}
