//! Aimed fire: each shooter picks a target and shifts to the next when it is out of the fight.
//!
//! Losses of y: b·x (Lanchester, *Aircraft in Warfare*, 1916; Osipov 1915). Against aimed fire it gives the square law:
//! with x' = −a·y, y' = −b·x the difference b·x² − a·y² is constant.

use super::{Law, NO_POWER, Power, RateMeaning};
use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::sides::{Both, Side};

/// The law of aimed fire.
pub static AIMED: Law = Law {
    word: "aimed",
    label: "Aimed: shooters pick their targets",
    source: "Lanchester 1916; Osipov 1915",
    rate: RateMeaning::TargetsPerShooter,
    needs: &[],
    shooters: |_| 1.0,
    per_target: |_| {
        [
            Power {
                coefficient: 1.0,
                exponent: 0.0,
            },
            NO_POWER,
        ]
    },
};

/// Aimed fire against aimed fire, in time.
///
/// u = √b·x + √a·y decays as e^(−αt) and v = √b·x − √a·y grows as e^(αt), with α = √(ab). Both rates are above 0.
///
/// Fire with the exponents p on the shooters and 1 − p on the targets comes to the same: (xʰ)' = h·xʰ⁻¹·x', so where x
/// is shot at through x^(1−h) and shoots through xʰ, and y likewise, the powers xʰ and yᵏ obey the square law with the
/// rates b·k and a·h (Helmbold's form is h = k).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Square {
    /// The strengths at the start, raised to the exponents.
    start: Both<f64>,
    exponent: Both<f64>,
    alpha: f64,
    /// √b and √a: the square roots of the rates at which x and y fire.
    root: Both<f64>,
    u: f64,
    v: f64,
}

impl Square {
    /// The motion from the strengths `start`, where x fires at the rate `rate.x` and y at `rate.y`, each shooting
    /// through its strength raised to `exponent`.
    ///
    /// `ahead` is the difference of the costs of bringing X and Y down to the last, b·x²/2 − a·y²/2 at exponents 1; near
    /// parity it has more digits than its terms.
    pub fn new(start: Both<f64>, exponent: Both<f64>, rate: Both<f64>, ahead: Double) -> Square {
        let start = Both::of(|side| raised(start[side], exponent[side]));
        let root = Both::of(|side: Side| libm::sqrt(rate[side] * exponent[side.enemy()]));
        let u = root.x * start.x + root.y * start.y;
        let margin = ahead * (2.0 * exponent.x * exponent.y);
        Square {
            start,
            exponent,
            alpha: root.x * root.y,
            root,
            u,
            v: f64::from(margin) / u,
        }
    }

    /// The time at which the fight is at `point`, which lies on its orbit.
    ///
    /// t = ln(u₀/u)/α, written with the fallen so that a short fight keeps its digits; endless where nothing is left.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        let left = Both::of(|side| raised(point.left[side], self.exponent[side]));
        let fallen = Both::of(|side| self.fallen_of(side, point));
        let now = self.root.x * left.x + self.root.y * left.y;
        let gone = self.root.x * fallen.x + self.root.y * fallen.y;
        libm::log1p(gone / now) / self.alpha
    }

    /// By how much the raised strength of `side` has fallen at `point`: startʰ·(1 − (left/start)ʰ).
    fn fallen_of(&self, side: Side, point: &OrbitPoint) -> f64 {
        let (left, fallen, exponent) = (point.left[side], point.fallen[side], self.exponent[side]);
        if exponent == 1.0 {
            return fallen;
        }
        let start = left + fallen;
        let span = if fallen < 0.5 * start {
            -libm::log1p(-fallen / start)
        } else {
            libm::log(start / left)
        };
        self.start[side] * -libm::expm1(-exponent * span)
    }

    /// Where the fight is at the time `t` after the start.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        let angle = self.alpha * t;
        let decayed = self.u * libm::exp(-angle);
        // At parity v stays 0 however long it grows.
        let grown = if self.v == 0.0 {
            0.0
        } else {
            self.v * libm::exp(angle)
        };
        let (mut left, mut fallen) = (Both::default(), Both::default());
        for (side, sum) in [(Side::X, decayed + grown), (Side::Y, decayed - grown)] {
            let spread = (decayed + grown.abs()) / (2.0 * self.root[side]);
            left[side] = sum / (2.0 * self.root[side]);
            fallen[side] = self.start[side] - left[side];
            // Early on, and where the enemy is far the stronger, the two exponentials are large and nearly cancel.
            if angle <= 1.0 && self.start[side] <= 2.0 * spread {
                fallen[side] = self.fallen(side, angle);
                left[side] = self.start[side] - fallen[side];
            }
        }
        let strength = |side: Side| raised(left[side].max(0.0), 1.0 / self.exponent[side]);
        let lost = |side: Side| {
            if self.exponent[side] == 1.0 {
                return fallen[side];
            }
            let span = libm::log1p(-fallen[side] / self.start[side]) / self.exponent[side];
            -libm::expm1(span) * raised(self.start[side], 1.0 / self.exponent[side])
        };
        OrbitPoint {
            left: Both::of(strength),
            fallen: Both::of(lost),
        }
    }

    /// y₀·√(a/b)·sinh αt − x₀·(cosh αt − 1) for x: while little has fallen, it has more digits than x₀ − x.
    fn fallen(&self, side: Side, angle: f64) -> f64 {
        let start = self.start[side];
        let enemy = side.enemy();
        let sine = libm::sinh(angle / 2.0);
        let drawn = self.start[enemy] * self.root[enemy] / self.root[side];
        drawn * libm::sinh(angle) - start * 2.0 * sine * sine
    }
}

fn raised(number: f64, exponent: f64) -> f64 {
    match exponent {
        1.0 => number,
        0.75 => {
            let root = libm::sqrt(number);
            root * libm::sqrt(root)
        }
        0.5 => libm::sqrt(number),
        _ => libm::pow(number, exponent),
    }
}
