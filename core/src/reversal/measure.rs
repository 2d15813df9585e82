//! By what a change of a number is measured, so that changes of different numbers can be set in order.

use crate::keys::Unit;
use crate::outcome::Outcome;
use crate::schedule::instants;
use crate::sides::{Both, Side};
use crate::slots::{Part, Place, Slot};
use crate::terms::{Engagement, Fire};

/// How a change is told.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Told {
    /// As a part of the present value: strengths, rates and lengths other than 0.
    Relative,
    /// In the number's own unit: times, fractions, exponents, and what is 0 now.
    Absolute,
}

/// See [`Measure::furthest`].
const SATURATED: f64 = 1e2;
const NEVER: f64 = 1e2;

/// What changes of an engagement's numbers are measured by.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Measure {
    /// How long it lasts.
    pub(crate) duration: f64,
    committed: Both<f64>,
    start: Both<f64>,
    /// What the fire of each side takes per unit of time at the start, at a rate of 1.
    fire: Both<f64>,
    range: f64,
}

impl Measure {
    /// That of `engagement` with its outcome.
    pub(crate) fn of(engagement: &Engagement, outcome: &Outcome) -> Measure {
        let somebody = |strength: f64| if strength > 0.0 { strength } else { 1.0 };
        let committed = Both::of(|side| somebody(outcome.sides()[side].committed));
        let at_start = |side: Side| somebody(engagement.sides[side].start.max(0.0));
        let start = Both::of(|side| {
            if engagement.sides[side].start > 0.0 {
                at_start(side)
            } else {
                committed[side]
            }
        });
        let fire = Both::of(|side: Side| {
            let unit = Fire {
                rate: 1.0,
                ..engagement.sides[side].fire
            };
            somebody(unit.losses_per_time(start[side], start[side.enemy()]))
        });
        Measure {
            duration: duration(engagement, outcome),
            committed,
            start,
            fire,
            range: somebody(engagement.closing.map_or(0.0, |closing| closing.range)),
        }
    }

    /// How a change of `slot` from its value is told.
    pub(crate) fn told(slot: &Slot, value: f64) -> Told {
        match slot.unit {
            Unit::Time | Unit::Fraction | Unit::Exponent => Told::Absolute,
            _ if value == 0.0 => Told::Absolute,
            _ => Told::Relative,
        }
    }

    /// The change of `slot` that counts as one whole, 1: as much as its value; of a time, as long as the engagement lasts;
    /// of a fraction or an exponent, 1; of a number that is 0, as much of a side, of its losses or of the range as there is.
    pub(crate) fn whole(&self, slot: &Slot, value: f64) -> f64 {
        match (slot.unit, Measure::told(slot, value)) {
            (Unit::Time, _) => self.duration,
            (Unit::Fraction | Unit::Exponent, _) => 1.0,
            (_, Told::Relative) => value.abs(),
            (_, Told::Absolute) => self.whole_of_nothing(slot),
        }
    }

    /// The furthest value of `slot` that is worth a look: a loss per unit of time beyond that which takes a side within a
    /// hundredth of the engagement does hardly more than that one, and a time a hundred times as far as its end is never.
    pub(crate) fn furthest(&self, slot: &Slot, value: f64) -> f64 {
        match slot.unit {
            Unit::FractionPerTime | Unit::EnemyFractionPerTime | Unit::EnemyPerTime => {
                (SATURATED * self.whole_of_nothing(slot)).max(2.0 * value)
            }
            Unit::Time => (NEVER * self.duration).max(2.0 * value),
            _ => f64::INFINITY,
        }
    }

    fn whole_of_nothing(&self, slot: &Slot) -> f64 {
        let (committed, time) = (self.committed, self.duration);
        match (slot.place, slot.unit) {
            (Place::Side(side, Part::Rate) | Place::PhaseChange(_, side, Part::Rate), _) => {
                committed[side.enemy()] / time / self.fire[side]
            }
            (Place::Side(side, _) | Place::PhaseChange(_, side, _), Unit::EnemyStrength) => {
                self.start[side.enemy()]
            }
            (Place::Side(side, _) | Place::PhaseChange(_, side, _), Unit::EnemyPerTime) => {
                committed[side.enemy()] / time
            }
            (_, Unit::FractionPerTime | Unit::EnemyFractionPerTime) => 1.0 / time,
            (Place::FlowRate(side, _), _) => committed[side] / time,
            (Place::Side(side, _) | Place::JoinSize(side, _), _) => committed[side],
            (_, Unit::LengthPerTime) => self.range / time,
            (_, Unit::Length) => self.range,
            _ => 1.0,
        }
    }
}

/// How long an engagement lasts: to its end; where it has none, until its last instant, and as long again as the faster
/// of the two would take to lose all at the pace of the start.
fn duration(engagement: &Engagement, outcome: &Outcome) -> f64 {
    let end = outcome
        .time
        .or_else(|| outcome.pieces.last().and_then(|piece| piece.to));
    if let Some(end) = end.filter(|end| *end > 0.0) {
        return end;
    }
    let last = instants(engagement).last().map_or(0.0, |instant| instant.time);
    let pace = |side: Side| {
        let enemy = side.enemy();
        let (shooters, targets) = (engagement.sides[enemy].start, engagement.sides[side].start);
        engagement.sides[enemy].fire.share_per_time(shooters, targets)
    };
    let pace = Side::BOTH
        .map(pace)
        .into_iter()
        .filter(|pace| pace.is_finite())
        .fold(0.0, f64::max);
    let paced = if pace > 0.0 { 1.0 / pace } else { 0.0 };
    let whole = last + paced;
    if whole > 0.0 && whole.is_finite() {
        whole
    } else {
        1.0
    }
}
