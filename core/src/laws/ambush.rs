//! Aimed fire against area fire: one side sees its targets, the other only the area they are in.
//!
//! Deitchman, "A Lanchester model of guerrilla warfare", Operations Research 10 (1962) 818–827. With the hidden side h
//! and the open side o, h' = −a·h·o (the open side fires at an area), o' = −b·h (the hidden side aims), the
//! difference b·h − a·o²/2 = K is constant, so o' = −(K + a·o²/2): a tangent, a hyperbolic tangent, or at K = 0 a
//! fraction.

use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::sides::{Both, Side};

/// Aimed fire against area fire, in time. Both rates are above 0.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ambush {
    /// The side whose fire is aimed.
    pub hidden: Side,
    start: Both<f64>,
    /// a: the rate of the area fire on the hidden side.
    area_rate: f64,
    /// b: the rate of the aimed fire on the open side.
    aimed_rate: f64,
    /// c² = 2K/a, with its sign: below 0 the open side is left with c, above 0 it falls to the last.
    square: f64,
    c: f64,
}

impl Ambush {
    /// The motion from the strengths `start`; `hidden` is the side whose fire is aimed.
    ///
    /// `margin` is K at the start, which near parity has more digits than its terms.
    pub fn new(hidden: Side, start: Both<f64>, rate: Both<f64>, margin: Double) -> Ambush {
        let area_rate = rate[hidden.enemy()];
        let square = 2.0 * f64::from(margin) / area_rate;
        Ambush {
            hidden,
            start,
            area_rate,
            aimed_rate: rate[hidden],
            square,
            c: libm::sqrt(square.abs()),
        }
    }

    /// c, and whether K is above 0, so that the open side falls to the last.
    pub fn constant(&self) -> (f64, bool) {
        (self.c, self.square > 0.0)
    }

    /// The time at which the fight is at `point`, which lies on its orbit.
    ///
    /// (2/(a·c))·atan(w) for K > 0 and ·atanh(w) for K < 0, where w = c·(o₀ − o)/(o₀·o ± c²). As the hidden side
    /// fades, w nears 1, and its own strength, which is then known best, gives the rest.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        let open = self.hidden.enemy();
        let (first, last, fallen) = (self.start[open], point.left[open], point.fallen[open]);
        let hidden_left = point.left[self.hidden];
        if self.square <= 0.0 && hidden_left <= 0.0 {
            return f64::INFINITY;
        }
        // o₀·o ± c²; where c is near o₀ the same as 2·b·h₀/a − o₀·(o₀ − o), which then does not cancel.
        let across = if self.square < 0.0 && self.c > first / 2.0 {
            2.0 * self.aimed_rate * self.start[self.hidden] / self.area_rate - first * fallen
        } else {
            first * last + self.square
        };
        let straight = 2.0 / self.area_rate * (fallen / across);
        let w = self.c * fallen / across;
        if w == 0.0 {
            return straight;
        }
        if self.square > 0.0 {
            // atan2, since beyond a quarter turn the crosswise term is below 0.
            return 2.0 / (self.area_rate * self.c) * libm::atan2(self.c * fallen, across);
        }
        if w > 0.0 && w <= 0.5 {
            return straight * (libm::atanh(w) / w);
        }
        let hidden = (
            self.start[self.hidden] / point.left[self.hidden],
            (first + self.c) / (last + self.c),
        );
        (libm::log(hidden.0) - 2.0 * libm::log(hidden.1)) / (self.area_rate * self.c)
    }

    /// Where the fight is at the time `t` after the start.
    ///
    /// With φ = a·c·t/2 and τ = tan φ (K > 0) or tanh φ (K < 0): o = (o₀ ∓ c·τ)/(1 + o₀·τ/c) and
    /// h = h₀·(1 ± τ²)/(1 + o₀·τ/c)². What has fallen follows without cancelling: of the open side
    /// (c² ± o₀²)·(τ/c)/(1 + o₀·τ/c), where c² ± o₀² is 2·b·h₀/a, of the hidden one by the state equation.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        let (hidden, open) = (self.hidden, self.hidden.enemy());
        let (first, half) = (self.start[open], self.area_rate * t / 2.0);
        let phi = self.c * half;
        // τ/c, and the secant whose square is 1 ± τ², which for the hyperbolic one does not cancel.
        let (slope, secant) = if phi == 0.0 {
            (half, 1.0)
        } else if self.square > 0.0 {
            (libm::tan(phi) / self.c, 1.0 / libm::cos(phi))
        } else {
            (libm::tanh(phi) / self.c, 1.0 / libm::cosh(phi))
        };
        let divisor = 1.0 + first * slope;
        let (mut left, mut fallen) = (self.start, self.start);
        left[open] = (first - self.square * slope) / divisor;
        left[hidden] = self.start[hidden] * (secant / divisor) * (secant / divisor);
        fallen[open] = 2.0 * self.aimed_rate / self.area_rate * self.start[hidden] * slope / divisor;
        fallen[hidden] = fallen[open] * (first + left[open]) * self.area_rate / (2.0 * self.aimed_rate);
        OrbitPoint { left, fallen }
    }
}
