//! Area fire: the shooters cover an area and do not see what they hit.
//!
//! Losses of y: b·x·y (Lanchester 1916). Against area fire it gives the linear law: with x' = −a·x·y, y' = −b·x·y the
//! difference b·x − a·y is constant.

use super::{Law, NO_POWER, Power, RateMeaning};
use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::sides::Both;

/// The law of area fire.
pub static AREA: Law = Law {
    word: "area",
    label: "Area: fire covers the ground they are on",
    source: "Lanchester 1916",
    rate: RateMeaning::FractionPerShooter,
    needs: &[],
    shooters: |_| 1.0,
    per_target: |_| {
        [
            Power {
                coefficient: 1.0,
                exponent: -1.0,
            },
            NO_POWER,
        ]
    },
};

/// Area fire against area fire, in time: with K = b·x − a·y the ratio x/y grows as e^(Kt). Both rates are above 0.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Linear {
    start: Both<f64>,
    rate: Both<f64>,
    k: f64,
}

impl Linear {
    /// The motion from the strengths `start`, where x fires at the rate `rate.x` and y at `rate.y`.
    ///
    /// `margin` is K = b·x − a·y at the start, which near parity has more digits than its terms.
    pub fn new(start: Both<f64>, rate: Both<f64>, margin: Double) -> Linear {
        Linear {
            start,
            rate,
            k: f64::from(margin),
        }
    }

    /// The time at which the fight is at `point`, which lies on its orbit; endless where a side has nothing left.
    ///
    /// t = ln(y₀·x/(x₀·y))/K, where y₀·x/(x₀·y) − 1 = K·(y₀ − y)/(b·x₀·y): both ways of writing it, each where it keeps
    /// its digits. At K = 0 what is left is (y₀ − y)/(b·x₀·y).
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        let (left, start) = (point.left, self.start);
        if left.x <= 0.0 || left.y <= 0.0 {
            return f64::INFINITY;
        }
        let unhurried = point.fallen.y / (self.rate.x * start.x * left.y);
        let change = self.k * unhurried;
        if change == 0.0 {
            unhurried
        } else if change > -0.5 {
            unhurried * (libm::log1p(change) / change)
        } else {
            libm::log((start.y / left.y) * (left.x / start.x)) / self.k
        }
    }

    /// Where the fight is at the time `t` after the start.
    ///
    /// y = y₀/(1 + g) with g = b·x₀·t·E(Kt), and x = x₀/(1 + g) with g = a·y₀·t·E(−Kt), where E(z) = (e^z − 1)/z: no
    /// term is below 0.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        let mean_growth = |z: f64| if z == 0.0 { 1.0 } else { libm::expm1(z) / z };
        let (start, rate) = (self.start, self.rate);
        let thinned = Both {
            x: rate.y * start.y * t * mean_growth(-self.k * t),
            y: rate.x * start.x * t * mean_growth(self.k * t),
        };
        let left = Both::of(|side| start[side] / (1.0 + thinned[side]));
        // Where the growth has overflowed, all has fallen.
        let fallen = Both::of(|side| start[side] / (1.0 + 1.0 / thinned[side]));
        OrbitPoint { left, fallen }
    }
}
