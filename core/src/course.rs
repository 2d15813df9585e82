//! The integrator: strength over time by Taylor series under any conditions, dense output between the steps.
//!
//! The rates are products of powers, whose series follow from that of the strengths by recurrence (R. E. Moore,
//! *Interval Analysis*, 1966, ch. 11; À. Jorba and M. Zou, "A software package for the numerical integration of ODEs by
//! means of high-order Taylor methods", Experimental Mathematics 14 (2005) 99–117, whose choice of the step is used
//! here). The series itself is the dense output, and events are located on it. Near a strength of 0 reached in finite
//! time the steps shrink with what is left of the time, in a geometric row.

use crate::conditions::{Conditions, Growth};
use crate::laws::Power;
use crate::linear_system::root;
use crate::outcome::Losses;
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// The order of the series: the best one for digits near 1e-16 is about −ln(1e-16)/2 + 1.
pub const ORDER: usize = 20;

/// Steps at most; a fight that needs more is one whose last moments are shorter than the digits of its time.
pub const MOST_STEPS: usize = 600;

/// With less left of a side than this, its powers have no digits to go on with.
const LEAST: f64 = 1e-280;

/// The longest step in its own unit: what is next to nothing has coefficients that no double holds, and would else be
/// taken to have a series without end.
const LONGEST_STEP: f64 = 6.0;

/// The accuracy of each step as a part of the strengths, unless another is asked for.
pub const TOLERANCE: f64 = f64::EPSILON;

/// A series in the time since the start of its step, in the unit of that step.
pub type Series = [f64; ORDER + 1];

const NOTHING: Series = [0.0; ORDER + 1];

/// The causes of loss, each with a series of its own, so that losses are summed and never taken as the remainder.
const CAUSES: usize = 3;

/// One step: a series for each side, and for each cause of its losses.
#[derive(Clone, Debug, PartialEq)]
struct Step {
    from: f64,
    /// The time in which the changes of its first moment would use a side up: the twentieth power of any other unit may
    /// be too large for a double, or too small.
    unit: f64,
    strength: Both<Series>,
    losses: Both<[Series; CAUSES]>,
    /// The losses by the start of the step.
    before: Both<[f64; CAUSES]>,
}

/// Strength over time from the start up to a horizon, to the rounding of doubles.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    steps: Vec<Step>,
    until: f64,
}

/// A line that a strength may come down to: its distance below the start, and how it rises.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    /// Where it stands at the start.
    pub at: f64,
    /// Its rise per unit of time.
    pub rising: f64,
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
            steps: Vec::new(),
            until: 0.0,
        };
        let (mut now, mut lost) = (start, Both::default());
        if let Some(kick) = kick(start, conditions, until) {
            course.until = kick.from;
            now = kick.strength;
            lost = kick.losses;
            course.steps.push(kick.into_step(start));
        }
        // A side to which nobody comes is gone once its powers have no digits left.
        let gone = |now: Both<f64>| {
            Side::BOTH
                .into_iter()
                .any(|side| now[side] <= if conditions.flow[side] > 0.0 { 0.0 } else { LEAST })
        };
        while course.steps.len() < MOST_STEPS && course.until < until {
            let at = course.until;
            let (unit, most) = unit_of(now, at, conditions);
            let (strength, losses) = expand(now, at, conditions, unit);
            let length = (unit * step_length(&strength, tolerance).min(most)).min(until - at);
            if at + length == at {
                break;
            }
            now = onto_orbit(Both::of(|side| sum(&strength[side], length / unit)));
            let before = lost;
            lost = Both::of(|side| {
                std::array::from_fn(|cause| before[side][cause] + sum(&losses[side][cause], length / unit))
            });
            course.steps.push(Step {
                from: at,
                unit,
                strength,
                losses,
                before,
            });
            course.until = if length == until - at { until } else { at + length };
            if !(now.x.is_finite() && now.y.is_finite()) || gone(now) || enough(&course) {
                break;
            }
        }
        course
    }

    /// How many steps it took.
    pub fn steps(&self) -> u32 {
        self.steps.len() as u32
    }

    /// The time up to which it was followed.
    pub fn until(&self) -> f64 {
        self.until
    }

    fn step_at(&self, t: f64) -> Option<&Step> {
        self.steps
            .get(self.steps.partition_point(|step| step.from <= t).max(1) - 1)
    }

    /// The strengths at the time `t`, from 0 to the horizon.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        let Some(step) = self.step_at(t) else {
            return Both::default();
        };
        Both::of(|side| sum(&step.strength[side], (t - step.from) / step.unit).max(0.0))
    }

    /// The losses by the time `t`, by their causes.
    pub fn losses_at(&self, t: f64) -> Both<Losses> {
        let Some(step) = self.step_at(t) else {
            return Both::default();
        };
        Both::of(|side| {
            let by = |cause: usize| {
                step.before[side][cause] + sum(&step.losses[side][cause], (t - step.from) / step.unit)
            };
            let (fire, support, wastage) = (by(0), by(1), by(2));
            Losses {
                fire,
                support,
                wastage,
                all: fire + support + wastage,
            }
        })
    }

    /// The highest strength of a side at the beginning of a step.
    pub fn highest(&self, side: Side) -> f64 {
        self.steps
            .iter()
            .map(|step| step.strength[side][0])
            .fold(0.0, f64::max)
    }

    /// The changes of the strengths per unit of time at the time `t`.
    pub fn slopes_at(&self, t: f64) -> Both<f64> {
        let Some(step) = self.step_at(t) else {
            return Both::default();
        };
        Both::of(|side| slope(&step.strength[side], (t - step.from) / step.unit) / step.unit)
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
    ///
    /// A step is no longer than its series' radius of convergence over e², so the first terms rule it: eight parts of
    /// it, and the low points in them, leave no root unseen.
    pub fn first_reach(&self, side: Side, line: Line) -> Option<f64> {
        const PARTS: u32 = 8;
        for (place, step) in self.steps.iter().enumerate() {
            let end = self.steps.get(place + 1).map_or(self.until, |next| next.from) - step.from;
            let series = &step.strength[side];
            let above = |t: f64| sum(series, t / step.unit) - line.at - line.rising * (step.from + t);
            let turn = |t: f64| slope(series, t / step.unit) / step.unit - line.rising;
            for part in 0..PARTS {
                let low = end * f64::from(part) / f64::from(PARTS);
                let high = if part + 1 == PARTS {
                    end
                } else {
                    end * f64::from(part + 1) / f64::from(PARTS)
                };
                let dip = if turn(low) < 0.0 && turn(high) > 0.0 {
                    root(low, high, &turn)
                } else {
                    None
                };
                for (from, to) in [(low, dip.unwrap_or(high)), (dip.unwrap_or(high), high)] {
                    if above(to) <= 0.0 {
                        return Some(step.from + root(from, to, &above).unwrap_or(to));
                    }
                }
            }
        }
        None
    }
}

/// The time in which the changes of the first moment would use a side up, and how many of them a step takes at most.
fn unit_of(now: Both<f64>, at: f64, conditions: &Conditions) -> (f64, f64) {
    let share = |side: Side| {
        let enemy = side.enemy();
        let growth = conditions.growth[enemy].map_or(1.0, |growth| growth.at(at));
        let fire = conditions.fire[enemy].share_per_time(now[enemy], now[side]) * growth;
        let steady = conditions.steadily_lost(side) + conditions.flow[side];
        fire + conditions.part_lost(side) + if steady > 0.0 { steady / now[side] } else { 0.0 }
    };
    let share = [share(Side::X), share(Side::Y)]
        .into_iter()
        .filter(|share| share.is_finite())
        .fold(0.0, f64::max);
    if share > 0.0 {
        (1.0 / share, LONGEST_STEP)
    } else {
        (1.0, f64::INFINITY)
    }
}

/// The series of both strengths from `now` on, at the time `at` of the stretch, and of the losses by their causes, in
/// time measured in `unit`.
fn expand(
    now: Both<f64>,
    at: f64,
    conditions: &Conditions,
    unit: f64,
) -> (Both<Series>, Both<[Series; CAUSES]>) {
    let mut strength = Both {
        x: NOTHING,
        y: NOTHING,
    };
    let mut losses = Both {
        x: [NOTHING; CAUSES],
        y: [NOTHING; CAUSES],
    };
    let mut fires = Both::of(|side: Side| {
        let enemy = side.enemy();
        FireSeries::new(
            &conditions.fire[enemy],
            conditions.growth[enemy].as_ref(),
            at,
            unit,
        )
    });
    for side in Side::BOTH {
        strength[side][0] = now[side];
    }
    for n in 0..ORDER {
        let by_cause = Both::of(|side: Side| {
            let enemy = side.enemy();
            let steady = if n == 0 {
                conditions.steadily_lost(side)
            } else {
                0.0
            };
            [
                fires[side].coefficient(n, &strength[enemy], &strength[side]),
                conditions.support[enemy].area * strength[side][n] + steady,
                conditions.wastage[side] * strength[side][n],
            ]
        });
        for side in Side::BOTH {
            let inflow = if n == 0 { conditions.flow[side] } else { 0.0 };
            let over = (n + 1) as f64 / unit;
            for (cause, value) in by_cause[side].iter().enumerate() {
                losses[side][cause][n + 1] = value / over;
            }
            strength[side][n + 1] = (inflow - by_cause[side].iter().sum::<f64>()) / over;
        }
    }
    (strength, losses)
}

/// The series of the losses by one side's fire: rate × growth × S(shooters) × T(targets).
struct FireSeries {
    rate: f64,
    growth: Option<Series>,
    shooters: (Power, Series),
    targets: Targets,
    /// growth × S.
    weight: Series,
}

/// The factor of the targets: a power of them, or 1 over a sum of two.
enum Targets {
    Power((Power, Series)),
    Quotient(Box<Quotient>),
}

/// 1 over a sum of two powers, times the weight of the shooters: nᵐ over the sum times nᵐ, with the least m that leaves no
/// power below 0, so that it has a series at 0 too.
struct Quotient {
    above: (Power, Series),
    below: [(Power, Series); 2],
    /// The weight times nᵐ.
    weighted: Series,
    quotient: Series,
}

impl Quotient {
    fn new(per_target: [Power; 2]) -> Quotient {
        let lift = per_target.iter().map(|power| -power.exponent).fold(0.0, f64::max);
        let below = per_target.map(|power| {
            (
                Power {
                    exponent: power.exponent + lift,
                    ..power
                },
                NOTHING,
            )
        });
        let above = (
            Power {
                coefficient: 1.0,
                exponent: lift,
            },
            NOTHING,
        );
        Quotient {
            above,
            below,
            weighted: NOTHING,
            quotient: NOTHING,
        }
    }

    fn coefficient(&mut self, n: usize, weight: &Series, targets: &Series) -> f64 {
        raise(&mut self.above, n, targets);
        for power in &mut self.below {
            raise(power, n, targets);
        }
        self.weighted[n] = product(weight, &self.above.1, n);
        let divisor = |order: usize| self.below[0].1[order] + self.below[1].1[order];
        let carried: f64 = (0..n).map(|k| self.quotient[k] * divisor(n - k)).sum();
        self.quotient[n] = (self.weighted[n] - carried) / divisor(0);
        self.quotient[n]
    }
}

impl FireSeries {
    fn new(fire: &Fire<f64>, growth: Option<&Growth>, at: f64, unit: f64) -> FireSeries {
        let rate = if fire.takes_effect() { fire.rate } else { 0.0 };
        let [first, second] = fire.per_target();
        let targets = if second.coefficient == 0.0 {
            let power = Power {
                coefficient: 1.0 / first.coefficient,
                exponent: -first.exponent,
            };
            Targets::Power((power, NOTHING))
        } else {
            Targets::Quotient(Box::new(Quotient::new(fire.per_target())))
        };
        FireSeries {
            rate,
            growth: growth.map(|growth| growth_series(growth, at, unit)),
            shooters: (fire.shooters(), NOTHING),
            targets,
            weight: NOTHING,
        }
    }

    /// The coefficient of order `n`, from the strengths up to that order; orders come one after another.
    fn coefficient(&mut self, n: usize, shooters: &Series, targets: &Series) -> f64 {
        if self.rate == 0.0 {
            return 0.0;
        }
        raise(&mut self.shooters, n, shooters);
        self.weight[n] = match &self.growth {
            Some(growth) => product(growth, &self.shooters.1, n),
            None => self.shooters.1[n],
        };
        self.rate
            * match &mut self.targets {
                Targets::Power(power) => {
                    raise(power, n, targets);
                    product(&self.weight, &power.1, n)
                }
                Targets::Quotient(quotient) => quotient.coefficient(n, &self.weight, targets),
            }
    }
}

/// The coefficient of order `n` of a product.
fn product(first: &Series, second: &Series, n: usize) -> f64 {
    (0..=n).map(|k| first[k] * second[n - k]).sum()
}

/// The series of a growing rate from the time `at` on.
fn growth_series(growth: &Growth, at: f64, unit: f64) -> Series {
    let mut base = NOTHING;
    (base[0], base[1]) = (growth.value + growth.slope * at, growth.slope * unit);
    let mut power = (
        Power {
            coefficient: 1.0,
            exponent: growth.power,
        },
        NOTHING,
    );
    for n in 0..=ORDER {
        raise(&mut power, n, &base);
    }
    power.1
}

/// The next coefficient of a power of `base`: with P = bᵉ, n·b₀·Pₙ = Σ (e·(n − k) − k)·Pₖ·bₙ₋ₖ; for a whole exponent
/// from products, which also hold where b₀ is 0.
fn raise((power, series): &mut (Power, Series), n: usize, base: &Series) {
    if power.coefficient == 0.0 {
        return;
    }
    series[n] = match (power.exponent, n) {
        (_, 0) => power.at(base[0]),
        (0.0, _) => 0.0,
        (1.0, _) => power.coefficient * base[n],
        (2.0, _) => power.coefficient * product(base, base, n),
        (exponent, _) => {
            let part = |k: usize| (exponent * (n - k) as f64 - k as f64) * series[k] * base[n - k];
            (0..n).map(part).sum::<f64>() / (n as f64 * base[0])
        }
    };
}

/// The longest step, in its own unit, whose last two terms are together about `tolerance` of the strengths.
fn step_length(series: &Both<Series>, tolerance: f64) -> f64 {
    let reach = |side: Side, order: usize| {
        let scale = series[side][0] * tolerance;
        let term = series[side][order].abs();
        if term == 0.0 || scale == 0.0 {
            f64::INFINITY
        } else {
            libm::pow(scale / term, 1.0 / order as f64)
        }
    };
    Side::BOTH
        .into_iter()
        .flat_map(|side| [reach(side, ORDER - 1), reach(side, ORDER)])
        .fold(f64::INFINITY, f64::min)
}

/// The first moment where a series does not exist: a strength of 0 or a growth of 0 under a broken exponent.
struct Kick {
    from: f64,
    strength: Both<f64>,
    losses: Both<[f64; CAUSES]>,
}

/// How far the first moment goes: what is left out is the square of this part of the strengths.
const KICK: f64 = 1e-9;

/// The first moment, to first order, where the conditions have no series at its start; `None` where they have.
fn kick(start: Both<f64>, conditions: &Conditions, until: f64) -> Option<Kick> {
    let broken = |exponent: f64| ![0.0, 1.0, 2.0].contains(&exponent);
    let awkward = Side::BOTH.into_iter().any(|side| {
        let fire = &conditions.fire[side];
        let growth =
            conditions.growth[side].is_some_and(|growth| growth.value <= 0.0 && broken(growth.power));
        let shooters = start[side] == 0.0 && broken(fire.shooters().exponent);
        let [first, second] = fire.per_target();
        let targets = start[side.enemy()] == 0.0 && (broken(-first.exponent) || second.coefficient > 0.0);
        fire.takes_effect() && (growth || shooters || targets)
    });
    if !awkward {
        return None;
    }
    // The losses per unit of time at the end of a short moment bound those along it.
    let mut length = until.min(1.0);
    loop {
        let grown = Both::of(|side: Side| start[side] + conditions.flow[side] * length);
        let rate = |side: Side| {
            let enemy = side.enemy();
            let growth = conditions.growth[enemy].map_or(1.0, |growth| growth.until(length) / length);
            let by_fire = conditions.fire[enemy].losses_per_time(grown[enemy], grown[side]) * growth;
            let lost = [
                by_fire,
                conditions.support[enemy].area * grown[side] + conditions.steadily_lost(side),
                conditions.wastage[side] * grown[side],
            ];
            lost.map(|lost| lost * length)
        };
        let losses = Both::of(rate);
        let small = Side::BOTH
            .iter()
            .all(|side| losses[*side].iter().sum::<f64>() <= KICK * grown[*side]);
        if small || length < 1e-250 {
            let strength = Both::of(|side| grown[side] - losses[side].iter().sum::<f64>());
            return Some(Kick {
                from: length,
                strength,
                losses,
            });
        }
        length *= 0.125;
    }
}

impl Kick {
    /// The first moment as a step: straight from its start to its end.
    fn into_step(self, start: Both<f64>) -> Step {
        let straight = |from: f64, to: f64| {
            let mut series = NOTHING;
            (series[0], series[1]) = (from, to - from);
            series
        };
        Step {
            from: 0.0,
            unit: self.from,
            strength: Both::of(|side| straight(start[side], self.strength[side])),
            losses: Both::of(|side| self.losses[side].map(|lost| straight(0.0, lost))),
            before: Both::default(),
        }
    }
}

/// The value of a series.
fn sum(series: &Series, t: f64) -> f64 {
    series
        .iter()
        .rev()
        .fold(0.0, |sum, coefficient| sum * t + coefficient)
}

/// The derivative of a series.
fn slope(series: &Series, t: f64) -> f64 {
    (1..=ORDER)
        .rev()
        .fold(0.0, |sum, order| sum * t + order as f64 * series[order])
}
