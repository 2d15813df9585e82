//! What holds along a stretch of time: fire, wastage, support, flows, and how fire grows as the range closes.

use crate::laws::{NO_POWER, Power};
use crate::linear_system::LinearSystem;
use crate::outcome::Losses;
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// Supporting arms of a side, which are not attrited.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Support<N> {
    /// The fraction of the enemy lost per unit of time by fire at an area.
    pub area: N,
    /// What the enemy loses per unit of time by aimed fire.
    pub aimed: N,
}

/// How the rate of a side's fire grows as the range closes, from the start of a stretch on: (value + slope·t)^power.
///
/// S. Bonder; J. G. Taylor, *Lanchester Models of Warfare* (1983): a(r) = a₀·(1 − r/r_max)^μ, with the range closing at a
/// steady speed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Growth {
    /// 1 − r/r_max at the start of the stretch, 0 or more.
    pub value: f64,
    /// Its change per unit of time.
    pub slope: f64,
    /// μ.
    pub power: f64,
}

impl Growth {
    /// The factor on the rate at the time `t`.
    pub fn at(&self, t: f64) -> f64 {
        raised((self.value + self.slope * t).max(0.0), self.power)
    }

    /// The factor summed over time up to `t`: the time in which the fight would be as far at the full rate.
    pub fn until(&self, t: f64) -> f64 {
        if self.slope == 0.0 {
            return t * self.at(0.0);
        }
        let order = self.power + 1.0;
        let (from, to) = (self.value, self.value + self.slope * t);
        if from > 0.0 {
            let span = libm::log1p(self.slope * t / from);
            libm::pow(from, order) * libm::expm1(order * span) / (order * self.slope)
        } else {
            libm::pow(to, order) / (order * self.slope)
        }
    }

    /// The time at which [`Growth::until`] comes to `full`.
    pub fn when(&self, full: f64) -> f64 {
        if self.slope == 0.0 {
            return full / self.at(0.0);
        }
        let order = self.power + 1.0;
        let grown = full * order * self.slope;
        if self.value > 0.0 {
            let part = grown / libm::pow(self.value, order);
            self.value * libm::expm1(libm::log1p(part) / order) / self.slope
        } else {
            libm::pow(grown, 1.0 / order) / self.slope
        }
    }
}

/// A part of a number; no part of a number without bound is nothing.
pub(crate) fn part_of(part: f64, number: f64) -> f64 {
    if part == 0.0 { 0.0 } else { part * number }
}

fn raised(number: f64, power: f64) -> f64 {
    match power {
        0.0 => 1.0,
        1.0 => number,
        _ => libm::pow(number, power),
    }
}

/// What holds along a stretch.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conditions {
    /// The fire of each side, at the full rate.
    pub fire: Both<Fire<f64>>,
    /// The part of itself that each side loses per unit of time without the enemy.
    pub wastage: Both<f64>,
    /// The supporting arms of each side.
    pub support: Both<Support<f64>>,
    /// What flows in to each side per unit of time.
    pub flow: Both<f64>,
    /// How each side's fire grows; `None` where it stays at the full rate.
    pub growth: Both<Option<Growth>>,
}

impl Conditions {
    /// The part of `side` that it loses per unit of time besides the enemy's fire: wastage and fire at its area.
    pub fn part_lost(&self, side: Side) -> f64 {
        self.wastage[side] + self.support[side.enemy()].area
    }

    /// What `side` loses per unit of time besides, whatever its strength.
    pub fn steadily_lost(&self, side: Side) -> f64 {
        self.support[side.enemy()].aimed
    }

    /// What `side` loses per unit of time at the strengths `left`, by its causes, with every fire at its full rate.
    pub fn losses_per_time(&self, side: Side, left: Both<f64>) -> Losses {
        let enemy = side.enemy();
        let support = self.support[enemy];
        let steady = if left[side] > 0.0 { support.aimed } else { 0.0 };
        Losses::of(
            self.fire[enemy].losses_per_time(left[enemy], left[side]),
            part_of(support.area, left[side]) + steady,
            part_of(self.wastage[side], left[side]),
        )
    }

    /// The same from a time `by` later on: growing fire has grown by then.
    pub fn later(&self, by: f64) -> Conditions {
        let growth = |side: Side| {
            self.growth[side].map(|growth| Growth {
                value: growth.value + growth.slope * by,
                ..growth
            })
        };
        Conditions {
            growth: Both::of(growth),
            ..*self
        }
    }

    /// The factor on the rate of a side's fire at the time `t`.
    pub fn growth_at(&self, side: Side, t: f64) -> f64 {
        self.growth[side].map_or(1.0, |growth| growth.at(t))
    }

    /// What `side` loses per unit of time by the enemy's fire, at the strengths `left` and the time `t`.
    pub fn fire_on(&self, side: Side, left: Both<f64>, t: f64) -> f64 {
        let enemy = side.enemy();
        self.fire[enemy].losses_per_time(left[enemy], left[side]) * self.growth_at(enemy, t)
    }

    /// Whether nothing but the two fires changes any strength.
    pub fn are_plain(&self) -> bool {
        Side::BOTH.into_iter().all(|side| {
            self.part_lost(side) == 0.0 && self.steadily_lost(side) == 0.0 && self.flow[side] == 0.0
        })
    }

    /// The growth that both fires share, where they do; a fire without effect shares any.
    pub fn shared_growth(&self) -> Option<Option<Growth>> {
        let firing = |side: Side| self.fire[side].takes_effect();
        match (firing(Side::X), firing(Side::Y)) {
            (true, true) => (self.growth.x == self.growth.y).then_some(self.growth.x),
            (true, false) => Some(self.growth.x),
            (false, true) => Some(self.growth.y),
            (false, false) => Some(None),
        }
    }

    /// Without any fire between the sides, as where one of them has nobody there.
    pub fn without_fire(mut self) -> Conditions {
        self.fire.x.rate = 0.0;
        self.fire.y.rate = 0.0;
        self
    }

    /// 1 over the factor of each side as targets, and what each side loses besides the enemy's fire by the same factor;
    /// `None` where losses do not separate so, or something flows in.
    pub fn separated(&self) -> Option<(Both<[Power; 2]>, Both<f64>)> {
        let mut per_target = Both::default();
        let mut besides = Both::default();
        for side in Side::BOTH {
            let fire = &self.fire[side.enemy()];
            let (part, steady) = (self.part_lost(side), self.steadily_lost(side));
            let powers = if fire.takes_effect() || part == 0.0 && steady == 0.0 {
                fire.per_target()
            } else if part > 0.0 {
                [
                    Power {
                        coefficient: 1.0,
                        exponent: -1.0,
                    },
                    NO_POWER,
                ]
            } else {
                [
                    Power {
                        coefficient: 1.0,
                        exponent: 0.0,
                    },
                    NO_POWER,
                ]
            };
            let single = powers[1].coefficient == 0.0;
            let fits = match (part > 0.0, steady > 0.0) {
                (false, false) => true,
                (true, false) => single && powers[0].exponent == -1.0,
                (false, true) => single && powers[0].exponent == 0.0,
                (true, true) => false,
            };
            if !fits || self.flow[side] != 0.0 {
                return None;
            }
            per_target[side] = powers;
            besides[side] = part + steady;
        }
        Some((per_target, besides))
    }

    /// The linear system of these conditions from `start` on; `None` where they are not linear. A side of which nobody
    /// is there, and to which nobody comes, stays so.
    pub fn linear(&self, start: Both<f64>) -> Option<LinearSystem> {
        let (mut inflow, mut own, mut by_enemy) = (Both::default(), Both::default(), Both::default());
        for side in Side::BOTH {
            if start[side] == 0.0 && self.flow[side] == 0.0 {
                continue;
            }
            inflow[side] = self.flow[side] - self.steadily_lost(side);
            own[side] = self.part_lost(side);
            let fire = &self.fire[side.enemy()];
            if fire.takes_effect() {
                let [first, second] = fire.per_target();
                match (fire.shooters().exponent, first.exponent) {
                    _ if second.coefficient > 0.0 => return None,
                    (1.0, 0.0) => by_enemy[side] = fire.rate,
                    (0.0, -1.0) => own[side] += fire.rate,
                    (0.0, 0.0) => inflow[side] -= fire.rate,
                    _ => return None,
                }
            }
        }
        Some(LinearSystem::new(start, inflow, own, by_enemy))
    }
}
