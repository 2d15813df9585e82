//! The state equation: what stays constant along a fight, for every pairing of laws.
//!
//! With x' = −a·S(y)·T(x) and y' = −b·S(x)·T(y) (each law's factors of the shooters S and of the targets T) time drops
//! out of dy/dx, and b·∫S(x)/T(x)dx − a·∫S(y)/T(y)dy is constant. S/T is a sum of powers, so its integrals are
//! elementary. It says who is brought down first, and what is left, without any step in time.
//!
//! All of it is worked out in double-double arithmetic from the numbers as they were read, taken as exact: near parity
//! the terms agree in all digits of a double.

use crate::laws::Power;
use crate::sides::{Both, Side};
use crate::terms::Fire;
use twofloat::TwoFloat;

/// Two sums are the same where they differ by at most this part of the larger: the rounding of the inputs themselves.
pub const TIE: f64 = 4.0 * f64::EPSILON / 2.0;

/// The state equation of a pairing.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StateEquation {
    rate: Both<f64>,
    /// S/T of each side, as powers of its own strength.
    integrand: Both<[Power; 2]>,
}

impl StateEquation {
    /// The state equation of `fire`, the fire of each side.
    pub fn of(fire: &Both<Fire<f64>>) -> StateEquation {
        let integrand = Both::of(|side| {
            let shooters = (fire[side].law.law().shooters)(&fire[side]);
            // The factor T of this side as target belongs to the enemy's law.
            let enemy = &fire[side.enemy()];
            (enemy.law.law().per_target)(enemy).map(|power| Power {
                exponent: power.exponent + shooters,
                ..power
            })
        });
        let rate = Both::of(|side| {
            if fire[side].takes_effect() {
                fire[side].rate
            } else {
                0.0
            }
        });
        StateEquation { rate, integrand }
    }

    /// What it takes to bring `side` from one strength to another: rate × ∫ S/T, 0 or more.
    ///
    /// A side whose own fire has no effect takes nothing: its enemy loses none in bringing it down.
    pub fn cost(&self, side: Side, from: TwoFloat, to: TwoFloat) -> TwoFloat {
        let sum = self.integrand[side]
            .iter()
            .filter(|power| power.coefficient != 0.0)
            .fold(TwoFloat::from(0.0), |sum, power| sum + integral(*power, from, to));
        sum * self.rate[side]
    }

    /// What is left of `side`, brought down from `from` at the cost `cost`; 0 where that is more than all of it.
    pub fn left(&self, side: Side, from: TwoFloat, cost: TwoFloat) -> TwoFloat {
        let power = self.integrand[side][0];
        // By plain numbers, one after the other: twofloat 0.8.4 divides by a TwoFloat to the digits of a double only.
        let area = cost / self.rate[side] / power.coefficient;
        let left = if power.exponent == 0.0 {
            from - area
        } else {
            let square = from * from - area * 2.0;
            if square > 0.0 {
                square.sqrt()
            } else {
                TwoFloat::from(0.0)
            }
        };
        if left > 0.0 { left } else { TwoFloat::from(0.0) }
    }

    /// What has fallen of `side`, brought down from `from` to `left` at the cost `cost`: also where that is so little of
    /// `from` that the difference of the strengths would have no digits.
    pub fn fallen(&self, side: Side, from: TwoFloat, left: TwoFloat, cost: TwoFloat) -> TwoFloat {
        if left <= 0.0 {
            return from;
        }
        let power = self.integrand[side][0];
        let area = cost / self.rate[side] / power.coefficient;
        if power.exponent == 0.0 {
            area
        } else {
            area * 2.0 / (from + left)
        }
    }

    /// The strength of `side` that it would cost `cost` to bring down to the last.
    pub fn worth(&self, side: Side, cost: TwoFloat) -> TwoFloat {
        let power = self.integrand[side][0];
        let area = cost / self.rate[side] / power.coefficient;
        if power.exponent == 0.0 {
            area
        } else {
            (area * 2.0).sqrt()
        }
    }

    /// Whether two costs are the same to the rounding of the inputs.
    pub fn tie(cost: Both<TwoFloat>) -> bool {
        let larger = if cost.x > cost.y { cost.x } else { cost.y };
        (cost.x - cost.y).abs() <= larger * TIE
    }
}

/// ∫ of `power` between two strengths, in full.
///
/// The difference of the strengths is taken first: exact, it keeps the digits that the difference of squares loses.
fn integral(power: Power, from: TwoFloat, to: TwoFloat) -> TwoFloat {
    let fallen = from - to;
    let area = if power.exponent == 0.0 {
        fallen
    } else {
        fallen * (from + to) * 0.5
    };
    area * power.coefficient
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::laws::FireLaw;

    fn equation(x: (FireLaw, f64), y: (FireLaw, f64)) -> StateEquation {
        let fire = |(law, rate)| Fire { law, rate };
        StateEquation::of(&Both {
            x: fire(x),
            y: fire(y),
        })
    }

    /// Lanchester, *Aircraft in Warfare* (1916), p. 65: 32² + 8² against 23² + 23² is near parity; √30 is left.
    #[test]
    fn what_is_left_closes_the_square_law() {
        let law = equation((FireLaw::Aimed, 1.0), (FireLaw::Aimed, 1.0));
        let (zero, y) = (TwoFloat::from(0.0), TwoFloat::from(1058.0).sqrt());
        let x = TwoFloat::from(1088.0).sqrt();
        let left = law.left(Side::X, x, law.cost(Side::Y, y, zero));
        assert!((left * left - 30.0).abs() < 1e-25);
    }

    #[test]
    fn decimals_that_balance_are_a_tie() {
        let law = equation((FireLaw::Aimed, 0.04), (FireLaw::Aimed, 0.09));
        let zero = TwoFloat::from(0.0);
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
}
