//! Two strengths under losses and reinforcement that are linear in them: x' = f − A·x − B·y, y' = g − C·y − D·x.
//!
//! Aimed and logarithmic fire, wastage, both kinds of support and steady flows are of this form. The eigenvalues are
//! μ ± δ with μ = −(A + C)/2 and δ = √((A − C)²/4 + B·D), real since no rate is below 0; functions of the matrix follow
//! from their values at the eigenvalues (N. J. Higham, *Functions of Matrices*, 2008, ch. 1).

use crate::double::Double;
use crate::sides::{Both, Side};

/// A linear system, from the strengths at its start.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LinearSystem {
    start: Both<f64>,
    /// f and g: what comes in, less losses that do not depend on strength.
    inflow: Both<f64>,
    /// A and C: the part of its own strength that a side loses.
    own: Both<f64>,
    /// B and D: what a side loses for each of the enemy.
    by_enemy: Both<f64>,
    /// The eigenvalues, the greater first.
    eigenvalues: [f64; 2],
    delta: f64,
    /// The start and its first derivative, taken apart along the eigenvectors; unused where they nearly agree.
    along: [Both<f64>; 2],
    first: [Both<f64>; 2],
    /// The same for what comes in.
    coming: [Both<f64>; 2],
}

/// Which integral of e^(λt) from 0: none, one, two.
#[derive(Clone, Copy, PartialEq)]
enum Order {
    None = 0,
    Once = 1,
    Twice = 2,
}

/// Terms of a series at most, for a matrix times t below 1;
const TERMS: usize = 23;

/// and what is no longer a digit of their sum.
const SMALL: f64 = 1e-19;

impl LinearSystem {
    /// The system with these rates, none of `own` and `by_enemy` below 0.
    pub fn new(start: Both<f64>, inflow: Both<f64>, own: Both<f64>, by_enemy: Both<f64>) -> LinearSystem {
        let half = Double::difference(own.x, own.y) * 0.5;
        let delta = (half * half + Double::product(by_enemy.x, by_enemy.y)).sqrt();
        let mu = -Double::sum(own.x, own.y) * 0.5;
        // The product of the eigenvalues is A·C − B·D: the smaller one is found from it, since its sum may cancel.
        let determinant = Double::product(own.x, own.y) - Double::product(by_enemy.x, by_enemy.y);
        let low = mu - delta;
        let high = if low == 0.0 {
            Double::from(0.0)
        } else {
            determinant / low
        };
        let mut system = LinearSystem {
            start,
            inflow,
            own,
            by_enemy,
            eigenvalues: [high.into(), low.into()],
            delta: delta.into(),
            along: Default::default(),
            first: Default::default(),
            coming: Default::default(),
        };
        if system.delta > 0.0 {
            system.along = system.taken_apart(Both::of(|side| Double::from(start[side])), [high, low]);
            let first = Both::of(|side: Side| {
                Double::from(inflow[side])
                    - Double::product(own[side], start[side])
                    - Double::product(by_enemy[side], start[side.enemy()])
            });
            system.first = system.taken_apart(first, [high, low]);
            system.coming = system.taken_apart(Both::of(|side| Double::from(inflow[side])), [high, low]);
        }
        system
    }

    /// The system in which nothing moves.
    pub fn still(start: Both<f64>) -> LinearSystem {
        LinearSystem::new(start, Both::default(), Both::default(), Both::default())
    }

    /// The parts of `vector` along the eigenvectors of the two eigenvalues: (M − λ₂)v/(λ₁ − λ₂) and (λ₁ − M)v/(λ₁ − λ₂).
    fn taken_apart(&self, vector: Both<Double>, eigenvalues: [Double; 2]) -> [Both<f64>; 2] {
        let spread = eigenvalues[0] - eigenvalues[1];
        let moved = Both::of(|side: Side| {
            -(vector[side] * self.own[side]) - vector[side.enemy()] * self.by_enemy[side]
        });
        let part = |sign: f64, eigenvalue: Double| {
            Both::of(|side| f64::from((moved[side] - vector[side] * eigenvalue) / spread * sign))
        };
        [part(1.0, eigenvalues[1]), part(-1.0, eigenvalues[0])]
    }

    /// Its parts, for the working: what comes in, what each side loses of itself, what each loses for each of the enemy.
    pub fn parts(&self) -> (Both<f64>, Both<f64>, Both<f64>) {
        (self.inflow, self.own, self.by_enemy)
    }

    /// Each strength as a steady part and one for each exponential, for the working; `None` where an eigenvalue is 0 or
    /// both agree, and the solution has other terms.
    pub fn exponentials(&self) -> Option<Both<[f64; 3]>> {
        let [high, low] = self.eigenvalues;
        if high == 0.0 || low == 0.0 || self.delta == 0.0 {
            return None;
        }
        // The first derivative is the sum of both parts, each over its eigenvalue a part of the strength.
        Some(Both::of(|side| {
            let (rising, falling) = (self.first[0][side] / high, self.first[1][side] / low);
            [self.start[side] - rising - falling, rising, falling]
        }))
    }

    /// Its eigenvalues, the greater first.
    pub fn eigenvalues(&self) -> [f64; 2] {
        self.eigenvalues
    }

    fn times(&self, vector: Both<f64>) -> Both<f64> {
        Both::of(|side: Side| -self.own[side] * vector[side] - self.by_enemy[side] * vector[side.enemy()])
    }

    /// The first derivative at the start.
    fn first_derivative(&self) -> Both<f64> {
        let moved = self.times(self.start);
        Both::of(|side| moved[side] + self.inflow[side])
    }

    /// A function of the matrix, e^(Mt) or its integrals from 0, times a vector whose parts along the eigenvectors are
    /// `parts`.
    fn function(&self, order: Order, t: f64, vector: Both<f64>, parts: &[Both<f64>; 2]) -> Both<f64> {
        let [high, low] = self.eigenvalues;
        if high.abs().max(low.abs()) * t < 1.0 {
            return self.by_series(order, t, vector);
        }
        if self.delta * t < 1.0 {
            // Newton's form at the eigenvalues, whose divided difference does not cancel.
            let difference = self.divided_difference(order, t);
            let moved = self.times(vector);
            return Both::of(|side| {
                scalar(order, high, t) * vector[side] + difference * (moved[side] - high * vector[side])
            });
        }
        Both::of(|side| scalar(order, high, t) * parts[0][side] + scalar(order, low, t) * parts[1][side])
    }

    /// Σ tⁿ⁺ᵏ·Mⁿ·v/(n + k)!, for a matrix times t below 1.
    fn by_series(&self, order: Order, t: f64, vector: Both<f64>) -> Both<f64> {
        let mut term = vector;
        for n in 1..=order as u32 {
            term = Both::of(|side| term[side] * t / f64::from(n));
        }
        let mut terms = [Both::default(); TERMS];
        let mut sum = Both::default();
        let mut count = 0;
        while count < TERMS {
            terms[count] = term;
            count += 1;
            sum = Both::of(|side| sum[side] + term[side]);
            let is_small = |side: Side| term[side].abs() <= SMALL * f64::abs(sum[side]);
            if Side::BOTH.into_iter().all(is_small) {
                break;
            }
            let moved = self.times(term);
            term = Both::of(|side| moved[side] * t / (count + order as usize) as f64);
        }
        // The smallest first.
        Both::of(|side| terms[..count].iter().rev().map(|term| term[side]).sum())
    }

    /// (h(λ₂) − h(λ₁))/(λ₂ − λ₁), where δ·t is below 1 and |λ₂|·t above: from λ·h₁(λ) = h₀(λ) − 1 and λ·h₂(λ) = h₁(λ) − t.
    fn divided_difference(&self, order: Order, t: f64) -> f64 {
        let [high, low] = self.eigenvalues;
        let angle = self.delta * t;
        let shape = if angle == 0.0 {
            1.0
        } else {
            libm::sinh(angle) / angle
        };
        let none = libm::exp(0.5 * (high + low) * t) * t * shape;
        match order {
            Order::None => none,
            Order::Once => (none - scalar(Order::Once, high, t)) / low,
            Order::Twice => {
                let once = (none - scalar(Order::Once, high, t)) / low;
                (once - scalar(Order::Twice, high, t)) / low
            }
        }
    }

    /// What has been added to the strengths since the start, below 0 for what has been lost.
    pub fn change(&self, t: f64) -> Both<f64> {
        self.function(Order::Once, t, self.first_derivative(), &self.first)
    }

    /// The strengths at the time `t`.
    pub fn strengths(&self, t: f64) -> Both<f64> {
        let change = self.change(t);
        let plain = self.inflow.x == 0.0 && self.inflow.y == 0.0;
        let faded = plain.then(|| self.function(Order::None, t, self.start, &self.along));
        Both::of(|side| match faded {
            _ if self.fades_alone(side) => self.start[side] * libm::exp(-self.own[side] * t),
            // What is left after a long fading has more digits than the start less what has fallen.
            Some(left) if left[side] < 0.5 * self.start[side] => left[side],
            _ => self.start[side] + change[side],
        })
    }

    /// Whether a strength is one exponential, whatever the enemy and what flows in to him: it never comes to 0.
    fn fades_alone(&self, side: Side) -> bool {
        self.inflow[side] == 0.0 && self.by_enemy[side] == 0.0
    }

    /// The strengths summed over time up to `t`: of the start, and of what comes in.
    ///
    /// Not the start times `t` and its change: long after a side has faded nothing would be left of their digits.
    pub fn integrals(&self, t: f64) -> Both<f64> {
        let once = self.function(Order::Once, t, self.start, &self.along);
        if self.inflow == Both::default() {
            return once;
        }
        let twice = self.function(Order::Twice, t, self.inflow, &self.coming);
        Both::of(|side| once[side] + twice[side])
    }

    /// The derivatives of the strengths at the time `t`.
    pub fn slopes(&self, t: f64) -> Both<f64> {
        self.function(Order::None, t, self.first_derivative(), &self.first)
    }

    /// The time after which what decays has decayed; 0 where nothing does.
    pub fn settled(&self) -> f64 {
        let moving = self
            .eigenvalues
            .iter()
            .map(|value| value.abs())
            .filter(|value| *value > 0.0);
        60.0 / moving.fold(f64::INFINITY, f64::min)
    }

    /// The first time up to `horizon` at which `side` is down to a line that starts `above` below it and rises by
    /// `rising` per unit of time; `None` where it never is.
    ///
    /// The second derivative of a strength has one zero at most, the first then two and the distance from the line
    /// three: between them all is monotone, and no root can be missed.
    pub fn first_reach(&self, side: Side, above: Double, rising: f64, horizon: f64) -> Option<f64> {
        if self.own[side] == 0.0 && self.by_enemy[side] == 0.0 {
            // At a steady pace.
            let pace = rising - self.inflow[side];
            let time = f64::from(above) / pace;
            return (pace > 0.0 && time <= horizon && time.is_finite()).then_some(time);
        }
        // No side is ever stronger than its start and all that flows in: at the pace of that most do not get near the line.
        let most = |side: Side| self.start[side] + self.inflow[side].max(0.0) * horizon;
        let pace = self.own[side] * most(side)
            + self.by_enemy[side] * most(side.enemy())
            + (-self.inflow[side]).max(0.0)
            + rising;
        if pace * horizon * (1.0 + 1e-9) < f64::from(above) {
            return None;
        }
        let start = self.start[side];
        let line = f64::from(Double::from(start) - above);
        if self.fades_alone(side) && rising == 0.0 {
            let part = f64::from(above) / start;
            let span = if part < 0.5 {
                -libm::log1p(-part)
            } else {
                libm::log(start / line)
            };
            let time = span / self.own[side];
            return (line > 0.0 && time <= horizon).then_some(time);
        }
        let distance = |t: f64| {
            let left = self.strengths(t)[side];
            if left < 0.5 * start && rising == 0.0 {
                left - line
            } else {
                f64::from(above) + self.change(t)[side] - rising * t
            }
        };
        let slope = |t: f64| self.slopes(t)[side] - rising;
        let mut turns = vec![0.0];
        let bend = self.inflection(side).filter(|t| *t < horizon);
        turns.extend(bend);
        let last = *turns.last().unwrap_or(&0.0);
        turns.push(self.far(side, last, horizon, distance, slope));
        let mut marks = vec![0.0];
        for pair in turns.windows(2) {
            marks.extend(root(pair[0], pair[1], &slope));
            marks.push(pair[1]);
        }
        // What has faded below the smallest double has not reached a line at 0.
        let is_down = |t: f64| distance(t) < 0.0 || (distance(t) == 0.0 && slope(t) < 0.0);
        marks.windows(2).find_map(|pair| {
            let down = is_down(pair[1]);
            down.then(|| root(pair[0], pair[1], &distance).unwrap_or(pair[1]))
        })
    }

    /// The time at which the second derivative of a strength is 0: tanh(δt)/δ = −c/s.
    fn inflection(&self, side: Side) -> Option<f64> {
        if self.by_enemy[side] == 0.0 {
            // It moves by itself, as one exponential.
            return None;
        }
        let second = self.times(self.first_derivative());
        let mu = 0.5 * (self.eigenvalues[0] + self.eigenvalues[1]);
        let third = self.times(second)[side] - mu * second[side];
        let ratio = -second[side] / third;
        let t = if self.delta == 0.0 {
            ratio
        } else {
            libm::atanh(self.delta * ratio) / self.delta
        };
        (t.is_finite() && t > 0.0).then_some(t)
    }

    /// The horizon, or where there is none a time by which a strength has come to its line, or never will.
    fn far(
        &self,
        side: Side,
        from: f64,
        horizon: f64,
        distance: impl Fn(f64) -> f64,
        slope: impl Fn(f64) -> f64,
    ) -> f64 {
        if horizon.is_finite() {
            // Long after all has decayed, or grown beyond any strength, a double holds nothing of it, not even which way
            // it went.
            let [high, low] = self.eigenvalues;
            return match high {
                _ if high > 0.0 => horizon.min(from + 600.0 / high),
                _ if high < 0.0 && low < 0.0 => horizon.min(from + 8.0 * self.settled()),
                _ => horizon,
            };
        }
        let first = self.first_derivative();
        let scales = Side::BOTH.map(|side| self.start[side] / first[side].abs());
        let mut t = scales
            .into_iter()
            .filter(|scale| scale.is_finite())
            .fold(from, f64::max)
            .max(1e-200);
        for _ in 0..400 {
            let grown = self.eigenvalues[0] * t > 600.0;
            // What decays has decayed: only a steady pace can still bring it down.
            let rests = t > from + self.settled() && slope(t) * t > -1e-9 * self.start[side];
            if grown || rests || t > 1e200 || distance(t) <= 0.0 {
                break;
            }
            t *= 2.0;
        }
        t
    }
}

/// e^(λt), its integral from 0 and the integral of that.
fn scalar(order: Order, eigenvalue: f64, t: f64) -> f64 {
    let angle = eigenvalue * t;
    match order {
        Order::None => libm::exp(angle),
        Order::Once if angle == 0.0 => t,
        Order::Once => libm::expm1(angle) / eigenvalue,
        // t²·(1/2 + z/6 + z²/24 …), which e^z − 1 − z would lose.
        Order::Twice if angle.abs() < 0.5 => {
            let series = (3..21)
                .rev()
                .fold(0.0, |sum, n| (sum * angle + 1.0) / f64::from(n));
            t * t * 0.5 * (1.0 + angle * series)
        }
        Order::Twice => (libm::expm1(angle) - angle) / (eigenvalue * eigenvalue),
    }
}

/// The root of a monotone function between two times, where it has one: Newton-free, by the Illinois variant of the
/// secant rule kept within its bracket.
pub(crate) fn root(low: f64, high: f64, function: &impl Fn(f64) -> f64) -> Option<f64> {
    let (mut a, mut b) = (low, high);
    let (mut fa, mut fb) = (function(a), function(b));
    if fa == 0.0 {
        return Some(a);
    }
    if fb == 0.0 {
        return Some(b);
    }
    if (fa > 0.0) == (fb > 0.0) || !(fa.is_finite() && fb.is_finite()) {
        return None;
    }
    for step in 0..300 {
        let middle = 0.5 * (a + b);
        let secant = b - fb * (b - a) / (fb - fa);
        // Every third step halves, whatever the secant says.
        let next = if step % 3 != 2 && secant > a.min(b) && secant < a.max(b) {
            secant
        } else {
            middle
        };
        let value = function(next);
        if value == 0.0 || next == a || next == b {
            return Some(next);
        }
        if (value > 0.0) == (fb > 0.0) {
            fa *= 0.5;
        } else {
            (a, fa) = (b, fb);
        }
        (b, fb) = (next, value);
        if (b - a).abs() <= f64::EPSILON * a.abs().max(b.abs()) {
            return Some(b);
        }
    }
    Some(b)
}
