//! What a small change of a number does: per cent of what is left, and of the time, per per cent of it.

use crate::fight::{Effort, fight};
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

/// Central differences with one extrapolation, an evaluation at a time; one-sided where a limit forbids the other side.
#[derive(Clone, Debug, Default)]
pub(crate) struct Search {
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
    ) -> bool {
        let here = logs(outcome);
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
            let other = fight(engagement, Effort::Ending).outcome;
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

fn logs(outcome: &Outcome) -> Logs {
    let left = Both::of(|side: Side| outcome.sides()[side].end.map_or(f64::NAN, libm::log));
    [left.x, left.y, outcome.time.map_or(f64::NAN, libm::log)]
}

/// Whether two engagements go the same way, so that a difference of theirs is one along a smooth curve.
fn is_alike(one: &Outcome, other: &Outcome) -> bool {
    one.breaks == other.breaks && one.ended == other.ended && one.pieces.len() == other.pieces.len()
}
