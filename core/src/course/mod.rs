//! The integrator: strength over time by Taylor series under any conditions, dense output between the steps.
//!
//! The choice of the step is that of À. Jorba and M. Zou, "A software package for the numerical integration of ODEs by
//! means of high-order Taylor methods", Experimental Mathematics 14 (2005) 99–117. The series itself is the dense output,
//! and events are located on it. Near a strength of 0 reached in finite time the steps shrink with what is left of the
//! time, in a geometric row.

mod balance;
mod first_moment;
mod line;
mod series;
mod unit;

pub use line::Line;
pub use series::ORDER;

use crate::conditions::{Conditions, part_of};
use crate::outcome::Losses;
use crate::sides::{Both, Side};
use crate::terms::Fire;
use balance::Balanced;
use first_moment::FirstMoment;
use line::reach_in;
use series::Expansion;
use unit::unit_of;

/// Steps of one course at most; a fight that needs more goes on in another.
pub const MOST_STEPS: usize = 600;

/// With less left of a side than this, its powers have no digits to go on with.
pub(crate) const LEAST: f64 = 1e-280;

/// The part of a strength down to which a step goes that may else pass the moment at which it comes to nothing.
const NEXT_TO_NOTHING: f64 = 0.02;

/// A unit in which a series has no digits is made shorter by this.
const SHORTER_UNIT: f64 = 1e-20;

/// So many steps lie between one look for a balance and the next.
const BETWEEN_LOOKS: usize = 16;

/// The accuracy of each step as a part of the strengths, unless another is asked for ([`crate::fight::fight_to`]): far below
/// the 1e-11 that is asked of what is integrated. A series doubles its digits for little more work, and next to a tie, or
/// over many steps, 1e-11 a step is not 1e-11 at the end.
pub const TOLERANCE: f64 = f64::EPSILON;

/// What is summed along a course: losses are never taken as a remainder.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
struct Summed {
    /// What has been lost by fire.
    fire: f64,
    /// The strength summed over time, of which wastage and fire at an area take their parts.
    exposure: f64,
}

/// So many times the way to go a unit is long at most: of one without bound there is no series, and in one that is far longer
/// the powers of the time are lost.
const MOST_WAYS: f64 = 1e10;

/// One step: its series, and what had been summed when it began.
#[derive(Clone, Debug, PartialEq)]
struct Step {
    from: f64,
    /// The time in which the changes of its first moment would use a side up: the twentieth power of any other unit may
    /// be too large for a double, or too small.
    unit: f64,
    series: Expansion,
    before: Both<Summed>,
}

impl Step {
    /// What has been summed by the time `t` from the beginning of the step, in its unit.
    fn summed(&self, t: f64) -> Both<Summed> {
        let (fire, exposure) = (self.series.fire(t), self.series.exposures(t));
        Both::of(|side| Summed {
            // Of next to nothing the rounding may be below it.
            fire: self.before[side].fire + fire[side].max(0.0),
            exposure: self.before[side].exposure + exposure[side] * self.unit,
        })
    }
}

/// Why a course went no further.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Stopped {
    /// It came to its horizon.
    Horizon,
    /// Enough was known.
    Enough,
    /// A side was gone.
    Gone,
    /// It took as many steps as a course may, or its steps fell below the digits of its time or its strengths left those
    /// of a double.
    Short,
}

/// Strength over time from the start up to a horizon, to the rounding of doubles.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    conditions: Conditions,
    steps: Vec<Step>,
    until: f64,
    /// The strengths and what has been summed at the end.
    now: Both<f64>,
    summed: Both<Summed>,
    stopped: Stopped,
    /// The number of the step before which a balance is looked for again.
    look_at: usize,
}

impl Course {
    /// Follows a fight of the two fires alone from `start` up to the time `until`.
    pub fn follow(start: Both<f64>, fire: &Both<Fire<f64>>, until: f64, tolerance: f64) -> Course {
        let conditions = Conditions {
            fire: *fire,
            wastage: Both::default(),
            support: Both::default(),
            flow: Both::default(),
            growth: Both::default(),
        };
        Course::under(start, &conditions, until, tolerance, |_| false)
    }

    /// Follows a fight under `conditions` up to the time `until`, or to the end of the first step at which `enough`
    /// holds; each step keeps its error to the part `tolerance` of the strengths.
    pub fn under(
        start: Both<f64>,
        conditions: &Conditions,
        until: f64,
        tolerance: f64,
        enough: impl Fn(&Course) -> bool,
    ) -> Course {
        Course::along(start, conditions, until, tolerance, enough, |now| now)
    }

    /// The same, each step ending where `onto_orbit` puts it: next to a tie a rounding off the orbit grows as the fight
    /// goes on, and one along it does not.
    pub fn along(
        start: Both<f64>,
        conditions: &Conditions,
        until: f64,
        tolerance: f64,
        enough: impl Fn(&Course) -> bool,
        onto_orbit: impl Fn(Both<f64>) -> Both<f64>,
    ) -> Course {
        let mut course = Course {
            conditions: *conditions,
            steps: Vec::new(),
            until: 0.0,
            now: start,
            summed: Both::default(),
            stopped: Stopped::Horizon,
            look_at: BETWEEN_LOOKS,
        };
        if course.is_gone() {
            course.stopped = Stopped::Gone;
            return course;
        }
        if let Some(moment) = FirstMoment::new(start, conditions, until) {
            course.take(&moment);
        }
        while course.until < until {
            course.stopped =
                if course.steps.len() >= MOST_STEPS || !course.step(until, tolerance, &onto_orbit) {
                    Stopped::Short
                } else if course.is_gone() {
                    Stopped::Gone
                } else if enough(&course) {
                    Stopped::Enough
                } else {
                    continue;
                };
            break;
        }
        course
    }

    /// Begins with a first moment that has no series.
    fn take(&mut self, moment: &FirstMoment) {
        let step = Step {
            from: 0.0,
            unit: moment.length,
            series: Expansion::straight(
                Both::of(|side| [self.now[side], moment.strength[side]]),
                moment.fire,
            ),
            before: Both::default(),
        };
        self.until = moment.length;
        self.now = moment.strength;
        self.summed = step.summed(1.0);
        self.steps.push(step);
    }

    /// Takes one step towards `until`; says whether there was one to take.
    fn step(&mut self, until: f64, tolerance: f64, onto_orbit: &impl Fn(Both<f64>) -> Both<f64>) -> bool {
        let at = self.until;
        let (unit, series, length) = match self.balanced(until, tolerance) {
            Some(Balanced { unit, series, length }) => (unit, series, length),
            None => self.series(until, tolerance),
        };
        let comes_to = if length * unit >= until - at {
            until
        } else {
            at + length * unit
        };
        let now = onto_orbit(series.strengths(length));
        if comes_to == at || !(now.x.is_finite() && now.y.is_finite()) {
            return false;
        }
        let step = Step {
            from: at,
            unit,
            series,
            before: self.summed,
        };
        (self.until, self.now, self.summed) = (comes_to, now, step.summed(length));
        self.steps.push(step);
        true
    }

    /// The series from where the sides stand, its unit, and how many of it the next step takes.
    fn series(&self, until: f64, tolerance: f64) -> (f64, Expansion, f64) {
        let at = self.until;
        let (unit, most) = unit_of(self.now, at, &self.conditions);
        let mut unit = unit.min(MOST_WAYS * (until - at));
        loop {
            let short = ((until - at) / unit).min(most);
            let (series, is_short) = Expansion::new(self.now, at, &self.conditions, unit, short, tolerance);
            let length = if is_short {
                short
            } else {
                series.step_length(tolerance).min(short)
            };
            let length = self.before_nothing(&series, unit, length);
            let now = series.strengths(length);
            let holds = length > 0.0 && now.x.is_finite() && now.y.is_finite();
            if holds || unit < LEAST {
                return (unit, series, length);
            }
            // Where nothing happens at first the unit says little, and coefficients may outgrow a double.
            unit *= SHORTER_UNIT;
        }
    }

    /// The length of a step, or less where a side would pass the moment at which it comes to nothing.
    fn before_nothing(&self, series: &Expansion, unit: f64, length: f64) -> f64 {
        let mut length = length;
        for side in Side::BOTH
            .into_iter()
            .filter(|side| self.may_rise_from_nothing(*side))
        {
            while length > 0.0 && self.has_passed_nothing(side, series, unit, length) {
                length *= 0.5;
            }
        }
        length
    }

    /// Whether a side has come to next to nothing by so much of a step, or its series has left what its losses make of it.
    fn has_passed_nothing(&self, side: Side, series: &Expansion, unit: f64, length: f64) -> bool {
        let (left, slope) = series.above(side, 0.0, 0.0, length);
        let enemy = side.enemy();
        let conditions = &self.conditions;
        let growth = conditions.growth_at(enemy, self.until + length * unit);
        let enemies = series.strengths(length)[enemy];
        let fire = conditions.fire[enemy].losses_per_time(enemies, left) * growth;
        let lost = fire + conditions.part_lost(side) * left + conditions.steadily_lost(side);
        let flow = conditions.flow[side];
        let off = (slope - (flow - lost) * unit).abs() * length;
        left < NEXT_TO_NOTHING * series.strength[side][0] || off > 0.1 * left
    }

    /// Whether the series of a side goes on where its strength has come to nothing, and has it rise again: so it does where
    /// the strength falls as a whole power of the time that is left.
    fn may_rise_from_nothing(&self, side: Side) -> bool {
        let [first, second] = self.conditions.fire[side.enemy()].per_target();
        let falls = -1.0 < first.exponent && first.exponent < 0.0 && second.coefficient == 0.0;
        falls && self.now[side] > 0.0
    }

    /// A step along a balance, where there is one; looked for after some steps to get there.
    fn balanced(&mut self, until: f64, tolerance: f64) -> Option<Balanced> {
        if self.steps.len() < self.look_at {
            return None;
        }
        let balanced = Balanced::step(
            self.now,
            self.until,
            &self.conditions,
            until - self.until,
            tolerance,
        );
        if balanced.is_none() {
            self.look_at = self.steps.len() + BETWEEN_LOOKS;
        }
        balanced
    }

    /// Whether a side to which nobody comes has no digits left to go on with, or one that had somebody has nobody.
    fn is_gone(&self) -> bool {
        let gone = |side: Side| {
            if self.conditions.flow[side] > 0.0 {
                self.now[side] <= 0.0 && !self.steps.is_empty()
            } else {
                self.now[side] <= LEAST
            }
        };
        gone(Side::X) || gone(Side::Y)
    }

    /// How many steps it took.
    pub fn steps(&self) -> u32 {
        self.steps.len() as u32
    }

    /// The time up to which it was followed.
    pub fn until(&self) -> f64 {
        self.until
    }

    /// Why it was followed no further.
    pub fn stopped(&self) -> Stopped {
        self.stopped
    }

    /// The strengths at the end.
    pub fn end(&self) -> Both<f64> {
        Both::of(|side| self.now[side].max(0.0))
    }

    /// The step at the time `t`, and that time from its beginning in its unit.
    fn step_at(&self, t: f64) -> Option<(&Step, f64)> {
        let place = self.steps.partition_point(|step| step.from <= t).max(1) - 1;
        let step = self.steps.get(place)?;
        Some((step, (t - step.from) / step.unit))
    }

    /// The strengths at the time `t`, from 0 to the horizon.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        let (step, t) = match self.step_at(t) {
            // To the digit, which the difference of two times may not have.
            Some(found) if t != self.until => found,
            _ => return self.end(),
        };
        let left = step.series.strengths(t);
        Both::of(|side| left[side].max(0.0))
    }

    /// The losses by the time `t`, by their causes.
    pub fn losses_at(&self, t: f64) -> Both<Losses> {
        let summed = match self.step_at(t) {
            _ if t == self.until => self.summed,
            Some((step, t)) => step.summed(t),
            None => Both::default(),
        };
        Both::of(|side: Side| {
            let support = self.conditions.support[side.enemy()];
            let Summed { fire, exposure } = summed[side];
            let support = part_of(support.area, exposure) + support.aimed * t;
            Losses::of(fire, support, part_of(self.conditions.wastage[side], exposure))
        })
    }

    /// The changes of the strengths per unit of time at the time `t`.
    pub fn slopes_at(&self, t: f64) -> Both<f64> {
        let Some((step, t)) = self.step_at(t) else {
            return Both::default();
        };
        let slopes = step.series.slopes(t);
        Both::of(|side| slopes[side] / step.unit)
    }

    /// The first time at which `side` is down to a strength that does not move; `None` where it is not before the
    /// horizon.
    pub fn time_to(&self, side: Side, line: f64) -> Option<f64> {
        self.first_reach(
            side,
            Line {
                at: line,
                rising: 0.0,
            },
        )
    }

    /// The first time at which `side` is down to `line`; `None` where it is not before the horizon.
    pub fn first_reach(&self, side: Side, line: Line) -> Option<f64> {
        let ends = self
            .steps
            .iter()
            .skip(1)
            .map(|next| next.from)
            .chain([self.until]);
        self.steps.iter().zip(ends).find_map(|(step, end)| {
            let at = line.at + line.rising * step.from;
            let end = (end - step.from) / step.unit;
            let reached = reach_in(&step.series, side, at, line.rising * step.unit, end)?;
            Some(step.from + reached * step.unit)
        })
    }
}
