//! Two strengths under losses and reinforcement that are linear in them: x' = f − A·x − B·y, y' = g − C·y − D·x.
//!
//! Aimed and logarithmic fire, wastage, both kinds of support and steady flows are of this form. The eigenvalues are
//! μ ± δ with μ = −(A + C)/2 and δ = √((A − C)²/4 + B·D), real since no rate is below 0; functions of the matrix follow
//! from their values at the eigenvalues (N. J. Higham, *Functions of Matrices*, 2008, ch. 1).

mod crossing;
mod exponential;
mod solution;

use crate::double::Double;
use crate::sides::{Both, Side};
use exponential::{Exponential, ONE_OVER};
pub use solution::Part;
use std::cell::{Cell, OnceCell};

/// A linear system, from the strengths at its start.
#[derive(Clone, Debug, PartialEq)]
pub struct LinearSystem {
    start: Both<f64>,
    /// f and g: what comes in, less losses that do not depend on strength.
    inflow: Both<f64>,
    /// A and C: the part of its own strength that a side loses.
    own: Both<f64>,
    /// B and D: what a side loses for each of the enemy.
    by_enemy: Both<f64>,
    /// The eigenvalues, the greater first, and in full.
    eigenvalues: [f64; 2],
    exact: [Double; 2],
    delta: f64,
    /// The first derivative at the start.
    first: Both<f64>,
    /// It, the start and the inflow, taken apart along the eigenvectors; most stretches are too short to need them.
    first_parts: OnceCell<[Both<f64>; 2]>,
    start_parts: OnceCell<[Both<f64>; 2]>,
    inflow_parts: OnceCell<[Both<f64>; 2]>,
    /// How often it was asked how matters stand.
    evaluations: Cell<u32>,
    /// Whether both sides wear each other out, and fade along the eigenvector of the smaller eigenvalue.
    parity: bool,
}

/// How matters stand at one time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Moment {
    /// The strengths.
    pub strengths: Both<f64>,
    /// Their changes per unit of time.
    pub slopes: Both<f64>,
    /// What has been added to the strengths since the start, below 0 for what has been lost.
    pub change: Both<f64>,
    /// The mean of the strengths over the time so far.
    pub means: Both<f64>,
}

/// How functions of the matrix are taken at a time.
enum Shape {
    /// By their series, so many terms of it.
    Series { terms: usize },
    /// By the value at the greater eigenvalue and the divided difference, since the eigenvectors nearly agree.
    Near(Exponential, Exponential),
    /// By the values at both eigenvalues.
    Apart([Exponential; 2]),
}

/// Where the greater eigenvalue times the time is below this, a series is taken: whatever the eigenvectors.
const SHORT: f64 = 1.0 / 16.0;

/// Where the eigenvalues are nearer to each other than this part of the greater, the eigenvectors nearly agree.
const NEAR: f64 = 1.0 / 8.0;

impl LinearSystem {
    /// The system with these rates, none of `own` and `by_enemy` below 0.
    pub fn new(start: Both<f64>, inflow: Both<f64>, own: Both<f64>, by_enemy: Both<f64>) -> LinearSystem {
        let [high, low, delta] = eigenvalues(own, by_enemy);
        let system = LinearSystem {
            start,
            inflow,
            own,
            by_enemy,
            eigenvalues: [high.into(), low.into()],
            exact: [high, low],
            delta: delta.into(),
            first: Both::default(),
            first_parts: OnceCell::new(),
            start_parts: OnceCell::new(),
            inflow_parts: OnceCell::new(),
            evaluations: Cell::default(),
            parity: false,
        };
        let first = system.exact_first();
        LinearSystem {
            first: Both::of(|side| first[side].into()),
            ..system
        }
    }

    /// The same system, where its sides stand at parity to the part `part`: of what else there is of them, which is rounding,
    /// nothing is followed.
    ///
    /// Along the eigenvector of the smaller eigenvalue λ the strengths keep their ratio, (−A − λ)·x = B·y.
    pub(crate) fn at_parity_within(mut self, part: f64) -> LinearSystem {
        let both_fire = self.by_enemy.x > 0.0 && self.by_enemy.y > 0.0;
        if !both_fire || self.inflow != Both::default() {
            return self;
        }
        let own = -(self.exact[1] + self.own.x) * self.start.x;
        let enemys = Double::product(self.by_enemy.x, self.start.y);
        // The margin is that of the strengths; of their squares, by which a tie is told, it is twice as much.
        if (own - enemys).abs() * 2.0 <= enemys * part {
            self.parity = true;
            self.start_parts = OnceCell::from([Both::default(), self.start]);
            self.first_parts = OnceCell::from([Both::default(), self.first]);
        }
        self
    }

    /// Whether both sides wear each other out.
    pub(crate) fn is_at_parity(&self) -> bool {
        self.parity
    }

    /// The first derivative at the start, in full.
    fn exact_first(&self) -> Both<Double> {
        Both::of(|side: Side| {
            Double::from(self.inflow[side])
                - Double::product(self.own[side], self.start[side])
                - Double::product(self.by_enemy[side], self.start[side.enemy()])
        })
    }

    fn first_parts(&self) -> &[Both<f64>; 2] {
        self.first_parts.get_or_init(|| {
            if scale_for(self.own, self.by_enemy) == 1.0 {
                return self.taken_apart(self.exact_first());
            }
            let (start, inflow) = (self.start_parts(), self.inflow_parts());
            [0, 1].map(|place| {
                Both::of(|side| self.eigenvalues[place] * start[place][side] + inflow[place][side])
            })
        })
    }

    fn start_parts(&self) -> &[Both<f64>; 2] {
        self.start_parts
            .get_or_init(|| self.taken_apart(Both::of(|side| Double::from(self.start[side]))))
    }

    fn inflow_parts(&self) -> &[Both<f64>; 2] {
        self.inflow_parts.get_or_init(|| {
            if self.inflow == Both::default() {
                Default::default()
            } else {
                self.taken_apart(Both::of(|side| Double::from(self.inflow[side])))
            }
        })
    }

    /// The system in which nothing moves.
    pub fn still(start: Both<f64>) -> LinearSystem {
        LinearSystem::new(start, Both::default(), Both::default(), Both::default())
    }

    /// The parts of `vector` along the eigenvectors of the two eigenvalues: (M − λ₂)v/(λ₁ − λ₂) and (λ₁ − M)v/(λ₁ − λ₂).
    fn taken_apart(&self, vector: Both<Double>) -> [Both<f64>; 2] {
        let scale = scale_for(self.own, self.by_enemy);
        let [high, low] = self.exact.map(|value| value * scale);
        let spread = f64::from(high - low);
        let moved = Both::of(|side: Side| {
            -(vector[side] * (self.own[side] * scale)) - vector[side.enemy()] * (self.by_enemy[side] * scale)
        });
        let part = |eigenvalue: Double, spread: f64| {
            Both::of(|side| f64::from(moved[side] - vector[side] * eigenvalue) / spread)
        };
        [part(low, spread), part(high, -spread)]
    }

    /// Its parts, for the working: what comes in, what each side loses of itself, what each loses for each of the enemy.
    pub fn parts(&self) -> (Both<f64>, Both<f64>, Both<f64>) {
        (self.inflow, self.own, self.by_enemy)
    }

    /// Its eigenvalues, the greater first.
    pub fn eigenvalues(&self) -> [f64; 2] {
        self.eigenvalues
    }

    /// The changes of the strengths per unit of time at the start.
    pub fn first_derivative(&self) -> Both<f64> {
        self.first
    }

    /// How often it was asked how matters stand.
    pub fn evaluations(&self) -> u32 {
        self.evaluations.get()
    }

    fn times(&self, vector: Both<f64>) -> Both<f64> {
        Both::of(|side: Side| -self.own[side] * vector[side] - self.by_enemy[side] * vector[side.enemy()])
    }

    /// How functions of the matrix are best taken at the time `t`.
    fn shape(&self, t: f64) -> Shape {
        let [high, low] = self.eigenvalues;
        let greater = high.abs().max(low.abs());
        let near = self.delta < NEAR * greater || self.delta == 0.0;
        let angle = greater * t;
        if angle < SHORT || (near && angle < 1.0) {
            return Shape::Series {
                terms: terms_for(angle),
            };
        }
        let of_high = Exponential::new(high, t);
        if near && self.delta * t < 1.0 {
            let difference = self.divided_difference(t, &of_high);
            return Shape::Near(of_high, difference);
        }
        Shape::Apart([of_high, Exponential::new(low, t)])
    }

    /// A function of the matrix, given by its values in the two eigenvalues or their neighbourhood, times a vector.
    fn times_vector(
        &self,
        vector: Both<f64>,
        parts: impl Fn() -> [Both<f64>; 2],
        shape: &Shape,
        which: impl Fn(&Exponential) -> f64,
    ) -> Both<f64> {
        match shape {
            // Newton's form at the eigenvalues, whose divided difference does not cancel.
            Shape::Near(of_high, difference) => {
                let (value, difference) = (which(of_high), which(difference));
                let moved = self.times(vector);
                let high = self.eigenvalues[0];
                Both::of(|side| value * vector[side] + difference * (moved[side] - high * vector[side]))
            }
            Shape::Apart([of_high, of_low]) => {
                let (high, low, [first, second]) = (which(of_high), which(of_low), parts());
                Both::of(|side| high * first[side] + low * second[side])
            }
            Shape::Series { .. } => Both::default(),
        }
    }

    /// Σ tⁿ⁺²·Mⁿ·v/(n + 2)! from the last term that counts on, so that the smallest come first; the matrix times that, and
    /// t·v, is Σ tⁿ⁺¹·Mⁿ·v/(n + 1)!, and so again e^(Mt)·v.
    fn by_series(&self, t: f64, terms: usize, vector: Both<f64>) -> [Both<f64>; 3] {
        let mut sum = vector;
        for part in ONE_OVER[3..terms + 3].iter().rev() {
            let moved = self.times(sum);
            let by = t * part;
            sum = Both::of(|side| vector[side] + moved[side] * by);
        }
        let twice_by_t = Both::of(|side| 0.5 * t * sum[side]);
        let moved = self.times(twice_by_t);
        let once = Both::of(|side| t * (vector[side] + moved[side]));
        let moved = self.times(once);
        let none = Both::of(|side| vector[side] + moved[side]);
        [none, once, twice_by_t]
    }

    /// (h(λ₂) − h(λ₁))/(λ₂ − λ₁), where δ·t is below 1 and |λ₂|·t above: from λ·h₁(λ) = h₀(λ) − 1 and λ·h₂(λ) = h₁(λ) − t.
    fn divided_difference(&self, t: f64, of_high: &Exponential) -> Exponential {
        let [high, low] = self.eigenvalues;
        let angle = self.delta * t;
        let shape = if angle == 0.0 {
            1.0
        } else {
            libm::sinh(angle) / angle
        };
        let none = libm::exp(0.5 * (high + low) * t) * t * shape;
        let once = (none - of_high.once) / low;
        Exponential {
            none,
            once,
            twice_by_t: (once / t - of_high.twice_by_t) / low,
        }
    }

    /// How matters stand at the time `t`.
    pub fn at(&self, t: f64) -> Moment {
        self.evaluations.set(self.evaluations.get().saturating_add(1));
        let shape = self.shape(t);
        let [slopes, change, twice_by_t] = match shape {
            Shape::Series { terms } => self.by_series(t, terms, self.first),
            _ => {
                let of = |which: fn(&Exponential) -> f64| {
                    self.times_vector(self.first, || *self.first_parts(), &shape, which)
                };
                [of(|of| of.none), of(|of| of.once), of(|of| of.twice_by_t)]
            }
        };
        let mut moment = Moment {
            strengths: Both::of(|side| self.start[side] + change[side]),
            slopes,
            change,
            means: Both::of(|side| self.start[side] + twice_by_t[side]),
        };
        match shape {
            Shape::Series { .. } => {}
            Shape::Near(..) => self.keep_digits_near(&mut moment, t, &shape),
            Shape::Apart(exponentials) => self.keep_digits_apart(&mut moment, t, &exponentials),
        }
        for side in Side::BOTH.into_iter().filter(|side| self.fades_alone(*side)) {
            moment.strengths[side] = self.start[side] * libm::exp(-self.own[side] * t);
        }
        moment
    }

    /// After a long time the start less what has fallen has lost its digits, and so has its sum. With the start s, the
    /// inflow f and the first derivative v = λ·s + f along an eigenvector, s + v·(e^z − 1)/λ is (v·e^z − f)/λ.
    fn keep_digits_apart(&self, moment: &mut Moment, t: f64, exponentials: &[Exponential; 2]) {
        let is_long = |eigenvalue: f64| (eigenvalue * t).abs() > 0.5;
        if !self.eigenvalues.into_iter().any(is_long) {
            return;
        }
        let (starts, firsts, inflows) = (self.start_parts(), self.first_parts(), self.inflow_parts());
        let sum = |side: Side,
                   long: fn(f64, f64, &Exponential, f64) -> f64,
                   short: fn(f64, f64, &Exponential, f64) -> f64|
         -> f64 {
            (0..2)
                .map(|place| {
                    let (eigenvalue, of) = (self.eigenvalues[place], &exponentials[place]);
                    let first = firsts[place][side];
                    if is_long(eigenvalue) {
                        long(first, inflows[place][side], of, t) / eigenvalue
                    } else {
                        short(first, starts[place][side], of, t)
                    }
                })
                .sum()
        };
        moment.strengths = Both::of(|side| {
            sum(
                side,
                |first, inflow, of, _| first * of.none - inflow,
                |first, start, of, _| start + first * of.once,
            )
        });
        moment.means = Both::of(|side| {
            sum(
                side,
                |first, inflow, of, t| first * (of.once / t) - inflow,
                |first, start, of, _| start + first * of.twice_by_t,
            )
        });
    }

    /// The same where the eigenvectors nearly agree: e^(Mt) times the start and (e^(Mt) − 1)/M times the inflow, and for the
    /// sum M·∫u = u − s − f·t.
    fn keep_digits_near(&self, moment: &mut Moment, t: f64, shape: &Shape) {
        let none = self.times_vector(self.start, Default::default, shape, |of| of.none);
        let once = self.times_vector(self.inflow, Default::default, shape, |of| of.once);
        moment.strengths = Both::of(|side| none[side] + once[side]);
        let determinant = self.eigenvalues[0] * self.eigenvalues[1];
        let right = Both::of(|side| moment.change[side] / t - self.inflow[side]);
        moment.means = Both::of(|side: Side| {
            let enemy = side.enemy();
            (self.by_enemy[side] * right[enemy] - self.own[enemy] * right[side]) / determinant
        });
    }

    /// The strengths at the time `t`.
    pub fn strengths(&self, t: f64) -> Both<f64> {
        self.at(t).strengths
    }

    /// Whether a strength is one exponential, whatever the enemy and what flows in to him: it never comes to 0.
    fn fades_alone(&self, side: Side) -> bool {
        self.inflow[side] == 0.0 && self.by_enemy[side] == 0.0
    }

    /// The derivatives of the strengths at the time `t`.
    pub fn slopes(&self, t: f64) -> Both<f64> {
        self.at(t).slopes
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
}

/// The eigenvalues, the greater first, and half of their distance.
fn eigenvalues(own: Both<f64>, by_enemy: Both<f64>) -> [Double; 3] {
    let scale = scale_for(own, by_enemy);
    if scale > 1.0 {
        let scaled = |rates: Both<f64>| Both::of(|side| rates[side] * scale);
        return eigenvalues(scaled(own), scaled(by_enemy)).map(|value| value * (1.0 / scale));
    }
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
    [high, low, delta]
}

/// A power of two that brings rates so low that their squares would be below the smallest double into its reach.
fn scale_for(own: Both<f64>, by_enemy: Both<f64>) -> f64 {
    const TINY: f64 = f64::from_bits((1023 - 400) << 52);
    let greatest = own.x.max(own.y).max(by_enemy.x).max(by_enemy.y);
    match greatest {
        0.0 => 1.0,
        _ if greatest < TINY * TINY => 1.0 / (TINY * TINY),
        _ if greatest < TINY => 1.0 / TINY,
        _ => 1.0,
    }
}

/// How many terms of a series count for this greatest angle: they fall at least as angleⁿ·n/n!, and the first that is left
/// out is below 1e-18 of the first.
fn terms_for(angle: f64) -> usize {
    match angle {
        _ if angle < 1.0 / 256.0 => 7,
        _ if angle < SHORT => 11,
        _ => 21,
    }
}
