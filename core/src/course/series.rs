//! The Taylor series of both strengths and of the losses by fire, from one moment on.
//!
//! The rates are products of powers, whose series follow from that of the strengths by recurrence (R. E. Moore,
//! *Interval Analysis*, 1966, ch. 11). A coefficient takes as many products as its order: where little time is asked for,
//! the series stops as soon as its terms no longer count.

use super::LEAST;
use crate::conditions::{Conditions, Growth};
use crate::laws::Power;
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// The highest order of the series: the best one for digits near 1e-16 is about −ln(1e-16)/2 + 1 (À. Jorba and M. Zou,
/// "A software package for the numerical integration of ODEs by means of high-order Taylor methods", Experimental
/// Mathematics 14 (2005) 99–117).
pub const ORDER: usize = 20;

/// The least order: what begins slowly may have terms of nothing before those that count.
const LEAST_ORDER: usize = 4;

/// A series in the time since its start, in a unit of its own.
pub(crate) type Series = [f64; ORDER + 1];

/// The square of fewer than this may have no digits.
const FEW: f64 = 1e-100;

const NOTHING: Series = [0.0; ORDER + 1];

/// The numbers up to the order as doubles.
const NUMBER: Series = {
    let mut numbers = NOTHING;
    let mut n = 0;
    while n <= ORDER {
        numbers[n] = n as f64;
        n += 1;
    }
    numbers
};

/// What the integral of a power of each order has before it: 1/(n + 1).
const SUMMED: Series = {
    let mut parts = NOTHING;
    let mut n = 0;
    while n <= ORDER {
        parts[n] = 1.0 / (n + 1) as f64;
        n += 1;
    }
    parts
};

/// The series from one moment on.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Expansion {
    /// The last order that is there.
    pub(crate) order: usize,
    /// Of so many orders in a row one has a term that says how the series goes on.
    row: usize,
    /// The strengths.
    pub(crate) strength: Both<Series>,
    /// What each side has lost by fire.
    pub(crate) fire: Both<Series>,
}

impl Expansion {
    /// Straight lines from one value to another within a unit of time.
    pub(crate) fn straight(strength: Both<[f64; 2]>, fire: Both<f64>) -> Expansion {
        let line = |from: f64, to: f64| {
            let mut series = NOTHING;
            (series[0], series[1]) = (from, to - from);
            series
        };
        Expansion {
            order: 1,
            row: 1,
            strength: Both::of(|side| line(strength[side][0], strength[side][1])),
            fire: Both::of(|side| line(0.0, fire[side])),
        }
    }

    /// Strengths that do not change.
    pub(crate) fn constant(now: Both<f64>) -> Expansion {
        Expansion {
            order: ORDER,
            row: 2,
            strength: Both::of(|side| {
                let mut series = NOTHING;
                series[0] = now[side];
                series
            }),
            fire: Both::of(|_| NOTHING),
        }
    }

    /// The series from the strengths `now` on, at the time `at` of the stretch, in time measured in `unit`.
    ///
    /// It stops where a whole row of last terms is below the part `tolerance` of the strengths all through the time `short`,
    /// in that unit; says whether it did.
    pub(crate) fn new(
        now: Both<f64>,
        at: f64,
        conditions: &Conditions,
        unit: f64,
        short: f64,
        tolerance: f64,
    ) -> (Expansion, bool) {
        let mut found = Expansion {
            row: row_of(conditions),
            ..Expansion::constant(now)
        };
        let mut fires = Both::of(|side: Side| FireSeries::new(conditions, side.enemy(), at, unit));
        let part = Both::of(|side| conditions.part_lost(side));
        let steady = Both::of(|side| conditions.flow[side] - conditions.steadily_lost(side));
        let (mut reach, mut small) = (1.0, 0);
        for n in 0..ORDER {
            let by_fire = Both::of(|side: Side| {
                fires[side].coefficient(n, &found.strength[side.enemy()], &found.strength[side])
            });
            let over = unit / NUMBER[n + 1];
            for side in Side::BOTH {
                let inflow = if n == 0 { steady[side] } else { 0.0 };
                let series = &mut found.strength[side];
                found.fire[side][n + 1] = by_fire[side] * over;
                series[n + 1] = (inflow - by_fire[side] - part[side] * series[n]) * over;
            }
            reach *= short;
            let fades = |side: Side| {
                let series = &found.strength[side];
                let scale = series[0].abs().max((series[1] * short).abs());
                (series[n + 1] * reach).abs() <= tolerance * scale
            };
            small = if fades(Side::X) && fades(Side::Y) {
                small + 1
            } else {
                0
            };
            if small >= found.row && n + 1 >= LEAST_ORDER && short.is_finite() {
                found.order = n + 1;
                return (found, true);
            }
        }
        (found, false)
    }

    /// The longest step, in its own unit, whose last terms are together about `tolerance` of the strengths.
    ///
    /// A term above the last two tells how fast the series falls, and so how small the last ones are where they are not
    /// there.
    pub(crate) fn step_length(&self, tolerance: f64) -> f64 {
        let last = self.order;
        let row = (last + 1).saturating_sub(self.row).max(1)..last - 1;
        let falls = row.map(|order| self.reach(order, 1.0)).reduce(f64::min);
        let further = falls.map_or(f64::INFINITY, |falls| {
            falls * libm::pow(tolerance, 1.0 / NUMBER[last])
        });
        // A side that begins with nothing is measured by what it comes to.
        let from_nothing = |side: Side| {
            let series = &self.strength[side];
            let part = (series[last] / series[1]).abs();
            if series[0] == 0.0 && part.is_finite() && part > 0.0 {
                libm::pow(tolerance / part, 1.0 / NUMBER[last - 1])
            } else {
                f64::INFINITY
            }
        };
        self.reach(last - 1, tolerance)
            .min(self.reach(last, tolerance))
            .min(further)
            .min(from_nothing(Side::X))
            .min(from_nothing(Side::Y))
    }

    /// The time in which the term of that order comes to the part `small` of the strengths.
    fn reach(&self, order: usize, small: f64) -> f64 {
        let part = |side: Side| {
            let series = &self.strength[side];
            if series[0] == 0.0 || series[order] == 0.0 {
                0.0
            } else {
                (series[order] / series[0]).abs()
            }
        };
        let part = part(Side::X).max(part(Side::Y));
        if part > 0.0 {
            libm::pow(small / part, 1.0 / NUMBER[order])
        } else {
            f64::INFINITY
        }
    }

    /// The strengths at the time `t`.
    pub(crate) fn strengths(&self, t: f64) -> Both<f64> {
        self.sums(&self.strength, t)
    }

    /// The losses by fire by the time `t`.
    pub(crate) fn fire(&self, t: f64) -> Both<f64> {
        self.sums(&self.fire, t)
    }

    fn sums(&self, series: &Both<Series>, t: f64) -> Both<f64> {
        let (mut x, mut y) = (0.0, 0.0);
        let (of_x, of_y) = (&series.x[..=self.order], &series.y[..=self.order]);
        for (x_term, y_term) in of_x.iter().zip(of_y).rev() {
            x = x * t + x_term;
            y = y * t + y_term;
        }
        Both { x, y }
    }

    /// The strengths summed over the time up to `t`, in the unit.
    pub(crate) fn exposures(&self, t: f64) -> Both<f64> {
        let mut sum = Both { x: 0.0, y: 0.0 };
        for n in (0..=self.order).rev() {
            sum = Both::of(|side| sum[side] * t + self.strength[side][n] * SUMMED[n]);
        }
        Both::of(|side| sum[side] * t)
    }

    /// The changes of the strengths per unit at the time `t`.
    pub(crate) fn slopes(&self, t: f64) -> Both<f64> {
        let mut sum = Both { x: 0.0, y: 0.0 };
        for n in (1..=self.order).rev() {
            sum = Both::of(|side| sum[side] * t + NUMBER[n] * self.strength[side][n]);
        }
        sum
    }

    /// The height of a strength above a line that starts at `at` and rises by `rising` in a unit, and its slope.
    pub(crate) fn above(&self, side: Side, at: f64, rising: f64, t: f64) -> (f64, f64) {
        let (mut value, mut slope) = (0.0, 0.0);
        for term in self.strength[side][1..=self.order].iter().rev() {
            slope = slope * t + value;
            value = value * t + term;
        }
        // value is (strength − start)/t so far, slope its derivative.
        let start = self.strength[side][0] - at;
        (start + (value - rising) * t, slope * t + value - rising)
    }

    /// No value of the height above that line up to the time `end` is below this.
    pub(crate) fn least_above(&self, side: Side, at: f64, rising: f64, end: f64) -> f64 {
        let terms = &self.strength[side][2..=self.order];
        let falling = terms
            .iter()
            .rev()
            .fold(0.0, |sum, term| (sum + term.min(0.0)) * end);
        let first = (self.strength[side][1] - rising).min(0.0);
        (self.strength[side][0] - at) + (first + falling) * end
    }

    /// No slope of that height up to the time `end` is above this.
    pub(crate) fn greatest_slope(&self, side: Side, rising: f64, end: f64) -> f64 {
        let series = &self.strength[side];
        let mut sum = 0.0;
        for n in (2..=self.order).rev() {
            sum = (sum + (NUMBER[n] * series[n]).max(0.0)) * end;
        }
        series[1] - rising + sum
    }
}

/// Fire that begins with nothing has only one term in as many orders as its growth has, and one more.
fn row_of(conditions: &Conditions) -> usize {
    let row = |side: Side| {
        let power = conditions.growth[side].map_or(0.0, |growth| growth.power);
        1 + power.ceil() as usize
    };
    row(Side::X).max(row(Side::Y)).clamp(2, ORDER)
}

/// The series of the losses by one side's fire: rate × growth × S(shooters) × T(targets).
pub(crate) struct FireSeries {
    rate: f64,
    growth: Option<Series>,
    shooters: Raised,
    targets: Targets,
    /// growth × S.
    weight: Series,
}

/// The factor of the targets: all the same, a power of them, or 1 over a sum of two.
enum Targets {
    Any(f64),
    Power(Raised),
    Quotient(Box<Quotient>),
}

impl FireSeries {
    pub(crate) fn new(conditions: &Conditions, shooters: Side, at: f64, unit: f64) -> FireSeries {
        let fire: &Fire<f64> = &conditions.fire[shooters];
        let rate = if fire.takes_effect() { fire.rate } else { 0.0 };
        let per_target = fire.per_target();
        let [first, second] = per_target;
        let targets = if second.coefficient != 0.0 {
            Targets::Quotient(Box::new(Quotient::new(per_target)))
        } else if first.exponent == 0.0 {
            Targets::Any(1.0 / first.coefficient)
        } else {
            Targets::Power(Raised::new(Power {
                coefficient: 1.0 / first.coefficient,
                exponent: -first.exponent,
            }))
        };
        let growth = conditions.growth[shooters].filter(|_| rate > 0.0);
        FireSeries {
            rate,
            growth: growth.map(|growth| growth_series(&growth, at, unit)),
            shooters: Raised::new(fire.shooters()),
            targets,
            weight: NOTHING,
        }
    }

    /// The coefficient of order `n`, from the strengths up to that order; orders come one after another, each as often as
    /// the strengths of that order change.
    pub(crate) fn coefficient(&mut self, n: usize, shooters: &Series, targets: &Series) -> f64 {
        if self.rate == 0.0 {
            return 0.0;
        }
        let raised = self.shooters.coefficient(n, shooters);
        self.weight[n] = match &self.growth {
            Some(growth) => product(growth, &self.shooters.series, n),
            None => raised,
        };
        self.rate
            * match &mut self.targets {
                Targets::Any(factor) => self.weight[n] * *factor,
                Targets::Power(power) => {
                    power.coefficient(n, targets);
                    product(&self.weight, &power.series, n)
                }
                Targets::Quotient(quotient) => quotient.coefficient(n, &self.weight, targets),
            }
    }
}

/// 1 over a sum of two powers, times the weight of the shooters: nᵐ over the sum times nᵐ, with the least m that leaves no
/// power below 0, so that it has a series at 0 too.
struct Quotient {
    above: Raised,
    below: [Raised; 2],
    /// The sum of both below.
    divisor: Series,
    quotient: Series,
}

impl Quotient {
    fn new(per_target: [Power; 2]) -> Quotient {
        let lift = per_target.iter().map(|power| -power.exponent).fold(0.0, f64::max);
        let lifted = |power: Power| {
            Raised::new(Power {
                exponent: power.exponent + lift,
                ..power
            })
        };
        let one = Power {
            coefficient: 1.0,
            exponent: 0.0,
        };
        Quotient {
            above: lifted(one),
            below: per_target.map(lifted),
            divisor: NOTHING,
            quotient: NOTHING,
        }
    }

    fn coefficient(&mut self, n: usize, weight: &Series, targets: &Series) -> f64 {
        self.above.coefficient(n, targets);
        let [first, second] = &mut self.below;
        self.divisor[n] = first.coefficient(n, targets) + second.coefficient(n, targets);
        let weighted = product(weight, &self.above.series, n);
        // The coefficient sought is 0 so far, and so its product with the divisor's first.
        self.quotient[n] = 0.0;
        let carried = product(&self.quotient, &self.divisor, n);
        self.quotient[n] = (weighted - carried) / self.divisor[0];
        self.quotient[n]
    }
}

/// A power of a series.
struct Raised {
    power: Power,
    series: Series,
}

impl Raised {
    fn new(power: Power) -> Raised {
        Raised {
            power,
            series: NOTHING,
        }
    }

    /// The next coefficient: with P = bᵉ, n·b₀·Pₙ = Σ (e·(n − k) − k)·Pₖ·bₙ₋ₖ; for a whole exponent from products, which
    /// also hold where b₀ is 0.
    fn coefficient(&mut self, n: usize, base: &Series) -> f64 {
        let Power {
            coefficient,
            exponent,
        } = self.power;
        if coefficient == 0.0 {
            return 0.0;
        }
        self.series[n] = if n == 0 {
            self.power.at(base[0])
        } else if exponent == 0.0 {
            0.0
        } else if exponent == 1.0 {
            coefficient * base[n]
        } else if exponent == 2.0 {
            coefficient * product(base, base, n)
        } else {
            // The product of two of next to nothing is none: where they are that few, b₀ is divided by first.
            let over = if (LEAST..FEW).contains(&base[0]) {
                1.0 / base[0]
            } else {
                1.0
            };
            let (whole, each) = (exponent * NUMBER[n] * over, (exponent + 1.0) * over);
            let terms = NUMBER[..n].iter().zip(&self.series[..n]);
            let sum: f64 = terms
                .zip(base[1..=n].iter().rev())
                .map(|((k, term), base)| (whole - each * k) * term * base)
                .sum();
            sum / (NUMBER[n] * (base[0] * over))
        };
        self.series[n]
    }
}

/// The coefficient of order `n` of a product, summed in two rows that do not wait for each other.
fn product(first: &Series, second: &Series, n: usize) -> f64 {
    let (first, second) = (first[..=n].chunks_exact(2), second[..=n].rchunks_exact(2));
    let (mut even, mut odd) = match (first.remainder(), second.remainder()) {
        ([last], [beginning]) => (last * beginning, 0.0),
        _ => (0.0, 0.0),
    };
    for (one, other) in first.zip(second) {
        even += one[0] * other[1];
        odd += one[1] * other[0];
    }
    even + odd
}

/// The series of a growing rate from the time `at` on.
fn growth_series(growth: &Growth, at: f64, unit: f64) -> Series {
    let mut base = NOTHING;
    (base[0], base[1]) = (growth.value + growth.slope * at, growth.slope * unit);
    let mut power = Raised::new(Power {
        coefficient: 1.0,
        exponent: growth.power,
    });
    for n in 0..=ORDER {
        power.coefficient(n, &base);
    }
    power.series
}
