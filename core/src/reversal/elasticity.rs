//! What a small change of a number does: per cent of what is left, and of the time, per per cent of it.
//!
//! By exact derivatives where there are formulas (`exact`), else by differences that are well-conditioned.

use super::exact::derivatives;
use crate::family::Tally;
use crate::fight::Effort;
use crate::outcome::Outcome;
use crate::sides::{Both, Side};
use crate::slots::Slot;
use crate::terms::Engagement;
use serde::Serialize;

/// Per cent per per cent of a number: the derivative of one logarithm by another. `None` where what changes, or the number
/// itself, is 0 or is not there.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct Elasticity {
    /// Of what is left of side X.
    pub x: Option<f64>,
    /// Of what is left of side Y.
    pub y: Option<f64>,
    /// Of the time at which a side breaks.
    pub time: Option<f64>,
}

/// The logarithms of what is left of each side and of the time; not finite where there is none.
type Logs = [f64; 3];

/// The steps of the differences, in the logarithm of the number: the first will do nearly always, and the others next to a
/// tie or to an instant of the schedule.
const STEPS: [f64; 4] = [1e-3, 1e-4, 1e-5, 1e-6];

/// Differences over a step and its half agree to this part, or to this amount, where they are well-conditioned.
const AGREEMENT: f64 = 1e-3;
const AMOUNT: f64 = 1e-9;

/// What has no derivative by a formula: by central differences with one extrapolation, an evaluation at a time; one-sided
/// where a limit forbids the other side.
#[derive(Clone, Debug, Default)]
pub(crate) struct Search {
    /// Whether the formulas have been asked.
    begun: bool,
    step: usize,
    looks: Vec<Logs>,
    found: [Option<f64>; 3],
}

impl Search {
    /// One fight more; says whether it goes on. `engagement` is left with its own number, `now`.
    pub(crate) fn step(
        &mut self,
        engagement: &mut Engagement,
        outcome: &Outcome,
        slot: &Slot,
        now: f64,
        tally: &mut Tally,
    ) -> bool {
        let here = logs(outcome);
        if !self.begun {
            self.begun = true;
            self.found = by_formula(engagement, outcome, slot, now);
        }
        let open = (0..3).any(|which| here[which].is_finite() && self.found[which].is_none());
        let Some(step) = STEPS.get(self.step).copied().filter(|_| open && now != 0.0) else {
            return false;
        };
        let both = slot.limits.hold(now * libm::exp(step)) && slot.limits.hold(now * libm::exp(-step));
        let upwards = slot.limits.hold(now * libm::exp(2.0 * step));
        let places = match (both, upwards) {
            (true, _) => [1.0, -1.0, 0.5, -0.5],
            (false, true) => [2.0, 1.0, 0.5, 0.5],
            (false, false) => [-2.0, -1.0, -0.5, -0.5],
        };
        let place = places[self.looks.len()] * step;
        let value = now * libm::exp(place);
        let look = if slot.limits.hold(value) {
            engagement.put(slot.place, value);
            let other = tally.fight(engagement, Effort::Ending);
            engagement.put(slot.place, now);
            is_alike(outcome, &other).then(|| logs(&other))
        } else {
            None
        };
        // What changes more than a little is no small change: a smaller step may be.
        let Some(look) = look else {
            self.next_step();
            return true;
        };
        self.looks.push(look);
        if self.looks.len() == places.len() {
            self.conclude(&here, step, both, places[0].signum());
            self.next_step();
        }
        true
    }

    /// What was found.
    pub(crate) fn elasticity(self) -> Elasticity {
        let [x, y, time] = self.found;
        Elasticity { x, y, time }
    }

    fn next_step(&mut self) {
        self.step += 1;
        self.looks.clear();
    }

    fn conclude(&mut self, here: &Logs, step: f64, both: bool, sign: f64) {
        for (which, own) in here.iter().enumerate() {
            let at = |place: usize| self.looks[place][which];
            let (coarse, fine, order) = if both {
                ((at(0) - at(1)) / (2.0 * step), (at(2) - at(3)) / step, 4.0)
            } else {
                // Three points on one side, by parabolas.
                let parabola =
                    |near: f64, far: f64, step: f64| sign * (4.0 * near - far - 3.0 * own) / (2.0 * step);
                (
                    parabola(at(1), at(0), step),
                    parabola(at(2), at(1), 0.5 * step),
                    4.0,
                )
            };
            let value = (order * fine - coarse) / (order - 1.0);
            let agree = (fine - coarse).abs() <= AGREEMENT * value.abs() + AMOUNT;
            if agree && value.is_finite() && self.found[which].is_none() {
                self.found[which] = Some(value);
            }
        }
    }
}

/// The derivatives of the logarithms, where there are formulas.
fn by_formula(engagement: &Engagement, outcome: &Outcome, slot: &Slot, now: f64) -> [Option<f64>; 3] {
    let found = derivatives(engagement, outcome, slot.place).unwrap_or_default();
    let ends = outcome.sides();
    let values = [ends.x.end, ends.y.end, outcome.time];
    let mut part = [None; 3];
    for (part, (slope, value)) in part.iter_mut().zip(found.into_iter().zip(values)) {
        *part = slope.zip(value).map(|(slope, value)| slope * now / value);
        *part = part.filter(|part| part.is_finite());
    }
    part
}

fn logs(outcome: &Outcome) -> Logs {
    let left = Both::of(|side: Side| outcome.sides()[side].end.map_or(f64::NAN, libm::log));
    [left.x, left.y, outcome.time.map_or(f64::NAN, libm::log)]
}

/// Whether two engagements go the same way, so that a difference of theirs is one along a smooth curve.
fn is_alike(one: &Outcome, other: &Outcome) -> bool {
    one.breaks == other.breaks && one.ended == other.ended && one.pieces.len() == other.pieces.len()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::fight;
    use crate::pairs::Pairs;
    use crate::slots::slots;
    use crate::statement::Statement;

    /// Numbers from 0 to 1, the same on every run (Knuth's linear congruential generator MMIX).
    struct Drawn(u64);

    impl Drawn {
        fn between(&mut self, low: f64, high: f64) -> f64 {
            self.0 = self
                .0
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            let part = (self.0 >> 11) as f64 / (1_u64 << 53) as f64;
            libm::exp(libm::log(low) + (libm::log(high) - libm::log(low)) * part)
        }

        fn fire(&mut self, side: &str, strength: f64) -> String {
            let rate = |drawn: &mut Drawn, per: f64| drawn.between(0.01, 0.2) / per;
            match self.between(1.0, 6.0) as u32 {
                1 => format!("{side}.fire=aimed&{side}.rate={}", rate(self, 1.0)),
                2 => format!("{side}.fire=area&{side}.rate={}", rate(self, strength)),
                3 => format!("{side}.fire=logarithmic&{side}.rate={}", rate(self, 1.0)),
                4 => format!(
                    "{side}.fire=search&{side}.rate={}&{side}.half={}",
                    rate(self, 1.0),
                    self.between(0.1, 2.0) * strength
                ),
                _ => format!(
                    "{side}.fire=power&{side}.rate={}&{side}.p=0.8&{side}.q={}",
                    rate(self, 1.0),
                    self.between(0.1, 0.4)
                ),
            }
        }

        fn link(&mut self) -> String {
            let (x, y) = (self.between(50.0, 5000.0), self.between(0.3, 3.0));
            let y = x * y;
            let mut link = format!(
                "x.start={x}&y.start={y}&{}&{}",
                self.fire("x", y),
                self.fire("y", x)
            );
            for side in ["x", "y"] {
                link += &format!("&{side}.break={}", self.between(0.1, 0.95));
                link += &format!("&{side}.lost={}", self.between(0.001, 0.05) * x.min(y));
            }
            link
        }
    }

    /// The one is checked against the other: exact derivatives and differences agree wherever both are known, over random
    /// pairings of all laws.
    #[test]
    fn exact_derivatives_agree_with_differences() {
        let mut drawn = Drawn(7);
        let (mut compared, mut by_time, mut worst) = (0, 0, 0.0_f64);
        for _ in 0..600 {
            let link = drawn.link();
            let pairs = Pairs::parse(&link);
            let statement = Statement::read(&pairs).expect(&link);
            let mut engagement = statement.engagement();
            let outcome = fight(&engagement, Effort::Ending).outcome;
            for slot in slots(&pairs, &statement) {
                let now = slot.value().unwrap_or(0.0);
                let exact = by_formula(&engagement, &outcome, &slot, now);
                let mut search = Search {
                    begun: true,
                    ..Search::default()
                };
                let mut tally = Tally::default();
                while search.step(&mut engagement, &outcome, &slot, now, &mut tally) {}
                for (which, (exact, near)) in exact.into_iter().zip(search.found).enumerate() {
                    let Some((exact, near)) = exact.zip(near) else {
                        continue;
                    };
                    let off = (exact - near).abs() / exact.abs().max(1.0);
                    assert!(off < 1e-7, "{link}: {} {which}: {exact} {near}", slot.name);
                    worst = worst.max(off);
                    compared += 1;
                    by_time += u32::from(which == 2);
                }
            }
        }
        assert!(
            compared > 8000 && by_time > 1000,
            "{compared}, {by_time} of the time, off by {worst:e}"
        );
    }
}
