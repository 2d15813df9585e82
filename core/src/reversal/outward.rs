//! The values at which a number is looked at, from its present value outwards.

use super::measure::Measure;
use crate::keys::{LARGEST, Unit};
use crate::order::sort_by;
use crate::schedule::instants;
use crate::slots::Slot;
use crate::terms::Engagement;

/// The smallest change looked at, in parts of a whole.
const SMALLEST: f64 = 1e-4;
/// The same of a number that is 0: nothing says on what scale it counts.
const SMALLEST_OF_NOTHING: f64 = 1e-7;
/// Up to so many wholes the looks are close to each other,
const CLOSE: f64 = 10.0;
/// beyond it two to a power of ten,
const FAR_A_DECADE: f64 = 2.0;
/// and beyond so many one.
const FAR: f64 = 1e3;
/// Even steps over the length of an engagement, for a time.
const STEPS_OF_TIME: u32 = 64;
/// Of how much more than that length they are.
const TIME_BEYOND: f64 = 1.25;
/// Even steps over 1, for a fraction or an exponent.
const STEPS_OF_ONE: u32 = 40;

/// The values of `slot` beyond its present `value`, within its limits, the nearest first: those above, those below.
///
/// They go by even ratios of the change, `a_decade` to a power of ten; a time also goes by even steps over the length of
/// the engagement and to every instant of its schedule, a fraction or an exponent by even steps, and what can come down to 0
/// by even ratios of the value too.
pub(crate) fn outward(
    slot: &Slot,
    value: f64,
    engagement: &Engagement,
    measure: &Measure,
    a_decade: f64,
) -> [Vec<f64>; 2] {
    let mut all = even_ratios(slot, value, measure.whole(slot, value), a_decade);
    match slot.unit {
        Unit::Time => {
            let step = TIME_BEYOND * measure.duration / f64::from(STEPS_OF_TIME);
            all.extend((0..=STEPS_OF_TIME).map(|steps| step * f64::from(steps)));
            let moments = instants(engagement).into_iter().map(|instant| instant.time);
            all.extend(moments.chain([measure.duration]).flat_map(around));
        }
        Unit::Fraction | Unit::Exponent => {
            let steps = (slot.limits.high * f64::from(STEPS_OF_ONE)) as u32;
            all.extend((0..=steps).map(|step| f64::from(step) / f64::from(STEPS_OF_ONE)));
        }
        _ => {}
    }
    all.extend([slot.limits.low, slot.limits.high]);
    let furthest = measure.furthest(slot, value);
    all.push(furthest);
    all.retain(|other| slot.limits.hold(*other) && *other <= furthest);
    let part = |keep: fn(f64, f64) -> bool| {
        let mut part: Vec<f64> = all.iter().copied().filter(|other| keep(*other, value)).collect();
        sort_by(&mut part, |a, b| (a - value).abs().total_cmp(&(b - value).abs()));
        part.dedup();
        part
    };
    [
        part(|other, value| other > value),
        part(|other, value| other < value),
    ]
}

fn even_ratios(slot: &Slot, value: f64, whole: f64, a_decade: f64) -> Vec<f64> {
    let mut all = Vec::new();
    let mut part = if value == 0.0 {
        SMALLEST_OF_NOTHING
    } else {
        SMALLEST
    };
    let furthest = 2.0 * LARGEST / whole;
    while part < furthest {
        all.extend([value + part * whole, value - part * whole]);
        let decade = match part {
            part if part < CLOSE => a_decade,
            part if part < FAR => FAR_A_DECADE,
            _ => 1.0,
        };
        part *= libm::exp10(1.0 / decade);
    }
    if value > 0.0 && slot.limits.low == 0.0 {
        // Down to a billionth, by even ratios of the value itself: 3, 10, 30 … times less.
        all.extend((1..=18).map(|half| value * libm::exp10(-0.5 * f64::from(half))));
    }
    all
}

/// A moment, a hair before and a hair behind it: what happens at one moment happens in an order.
fn around(moment: f64) -> [f64; 3] {
    [moment * (1.0 - 1e-9), moment, moment * (1.0 + 1e-9)]
}
