//! The integrator: strength over time by Taylor series, any pairing of laws, dense output between the steps.
//!
//! The rates are products of powers, whose series follow from that of the strengths by recurrence (R. E. Moore,
//! *Interval Analysis*, 1966, ch. 11; À. Jorba and M. Zou, "A software package for the numerical integration of ODEs by
//! means of high-order Taylor methods", Experimental Mathematics 14 (2005) 99–117, whose choice of the step is used
//! here). The series itself is the dense output. Near a strength of 0 reached in finite time the steps shrink with what
//! is left of the time, in a geometric row.

use crate::laws::Power;
use crate::sides::{Both, Side};
use crate::terms::Fire;

/// The order of the series: the best one for digits near 1e-16 is about −ln(1e-16)/2 + 1.
pub const ORDER: usize = 20;

/// Steps at most; a fight that needs more is one whose last moments are shorter than the digits of its time.
pub const MOST_STEPS: usize = 600;

/// With less left of a side than this, its powers have no digits to go on with.
const LEAST: f64 = 1e-280;

/// A series in the time since the start of its step, in the unit of that step.
type Series = [f64; ORDER + 1];

/// One step: a series for each side.
#[derive(Clone, Debug, PartialEq)]
struct Step {
    from: f64,
    /// The time in which the losses of its first moment would use a side up: the twentieth power of any other unit may
    /// be too large for a double, or too small.
    unit: f64,
    series: Both<Series>,
}

impl Step {
    /// The step that begins with the strengths `now`.
    fn new(from: f64, now: Both<f64>, fire: &Both<Fire<f64>>) -> Step {
        let share = |side: Side| fire[side.enemy()].share_per_time(now[side.enemy()], now[side]);
        let share = share(Side::X).max(share(Side::Y));
        let unit = if share > 0.0 && share.is_finite() {
            1.0 / share
        } else {
            1.0
        };
        Step {
            from,
            unit,
            series: expand(now, fire, unit),
        }
    }

    /// The strength of `side` at `t` after the start of the step.
    fn at(&self, side: Side, t: f64) -> f64 {
        sum(&self.series[side], t / self.unit)
    }
}

/// Strength over time from the start up to a horizon, to the rounding of doubles.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    steps: Vec<Step>,
    until: f64,
}

impl Course {
    /// Follows the fight from `start` up to the time `until`, with steps that keep the error of each to the part
    /// `tolerance` of the strengths.
    pub fn follow(start: Both<f64>, fire: &Both<Fire<f64>>, until: f64, tolerance: f64) -> Course {
        Course::follow_along(start, fire, until, tolerance, |now| now)
    }

    /// The same, each step ending where `onto_orbit` puts it: next to a tie a rounding off the orbit grows as the fight
    /// goes on, and one along it does not.
    pub fn follow_along(
        start: Both<f64>,
        fire: &Both<Fire<f64>>,
        until: f64,
        tolerance: f64,
        onto_orbit: impl Fn(Both<f64>) -> Both<f64>,
    ) -> Course {
        let mut steps: Vec<Step> = Vec::new();
        let (mut at, mut now) = (0.0, start);
        while steps.len() < MOST_STEPS && at < until && now.x > LEAST && now.y > LEAST {
            let step = Step::new(at, now, fire);
            let length = (step.unit * step_length(&step.series, tolerance)).min(until - at);
            now = onto_orbit(Both::of(|side| step.at(side, length)));
            steps.push(step);
            if at + length == at || !now.x.is_finite() || !now.y.is_finite() {
                break;
            }
            at += length;
        }
        Course {
            steps,
            until: at.max(0.0),
        }
    }

    /// How many steps it took.
    pub fn steps(&self) -> u32 {
        self.steps.len() as u32
    }

    /// The time up to which it was followed.
    pub fn until(&self) -> f64 {
        self.until
    }

    /// The strengths at the time `t`, from 0 to the horizon.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        let place = self.steps.partition_point(|step| step.from <= t).max(1) - 1;
        let Some(step) = self.steps.get(place) else {
            return Both::default();
        };
        Both::of(|side| step.at(side, t - step.from).max(0.0))
    }

    /// The first time at which `side` is down to `line`; `None` where it is not before the horizon.
    pub fn time_to(&self, side: Side, line: f64) -> Option<f64> {
        let ends = |place: usize| self.steps.get(place + 1).map_or(self.until, |next| next.from);
        let place = (0..self.steps.len()).find(|place| {
            let step = &self.steps[*place];
            step.at(side, ends(*place) - step.from) <= line
        })?;
        let step = &self.steps[place];
        // The strength only falls: Newton's steps, kept within the step by halving.
        let (mut low, mut high) = (0.0, ends(place) - step.from);
        let mut t = 0.5 * (low + high);
        for _ in 0..100 {
            let off = step.at(side, t) - line;
            if off > 0.0 {
                low = t
            } else {
                high = t
            }
            let next = t - off * step.unit / slope(&step.series[side], t / step.unit);
            let next = if next > low && next < high {
                next
            } else {
                0.5 * (low + high)
            };
            if (next - t).abs() <= f64::EPSILON * (step.from + t) {
                return Some(step.from + next);
            }
            t = next;
        }
        Some(step.from + t)
    }
}

/// The series of both strengths from `now` on, in time measured in `unit`.
fn expand(now: Both<f64>, fire: &Both<Fire<f64>>, unit: f64) -> Both<Series> {
    let mut series = Both {
        x: [0.0; ORDER + 1],
        y: [0.0; ORDER + 1],
    };
    let mut losses = Both::of(|side: Side| Losses::new(&fire[side.enemy()]));
    series.x[0] = now.x;
    series.y[0] = now.y;
    for n in 0..ORDER {
        let next = Both::of(|side: Side| losses[side].coefficient(n, &series[side.enemy()], &series[side]));
        for side in Side::BOTH {
            series[side][n + 1] = -next[side] * unit / (n + 1) as f64;
        }
    }
    series
}

/// The series of one side's losses: rate × S(shooters)/(Σ powers of the targets).
struct Losses {
    rate: f64,
    shooters: (Power, Series),
    per_target: [(Power, Series); 2],
    /// S over the sum.
    quotient: Series,
}

impl Losses {
    fn new(fire: &Fire<f64>) -> Losses {
        let none = [0.0; ORDER + 1];
        let rate = if fire.takes_effect() { fire.rate } else { 0.0 };
        let per_target = fire.per_target().map(|power| (power, none));
        Losses {
            rate,
            shooters: (fire.shooters(), none),
            per_target,
            quotient: none,
        }
    }

    /// The coefficient of order `n`, from the strengths up to that order; orders come one after another.
    fn coefficient(&mut self, n: usize, shooters: &Series, targets: &Series) -> f64 {
        if self.rate == 0.0 {
            return 0.0;
        }
        raise(&mut self.shooters, n, shooters);
        for power in &mut self.per_target {
            raise(power, n, targets);
        }
        let [first, second] = &self.per_target;
        let divisor = |order: usize| first.1[order] + second.1[order];
        let carried: f64 = (0..n).map(|k| self.quotient[k] * divisor(n - k)).sum();
        self.quotient[n] = (self.shooters.1[n] - carried) / divisor(0);
        self.rate * self.quotient[n]
    }
}

/// The next coefficient of a power of `base`: with P = bᵉ, n·b₀·Pₙ = Σ (e·(n − k) − k)·Pₖ·bₙ₋ₖ.
fn raise((power, series): &mut (Power, Series), n: usize, base: &Series) {
    if power.coefficient == 0.0 {
        return;
    }
    series[n] = match (power.exponent, n) {
        (_, 0) => power.at(base[0]),
        (0.0, _) => 0.0,
        (1.0, _) => power.coefficient * base[n],
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
        if term == 0.0 {
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
