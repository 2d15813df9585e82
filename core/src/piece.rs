//! A stretch of a fight under the two fires alone, or with losses that go by the same factors: its state equation, and
//! its motion in time.

use crate::conditions::Conditions;
use crate::course::{Course, TOLERANCE};
use crate::double::Double;
use crate::laws::Power;
use crate::laws::alone::Alone;
use crate::laws::along_orbit::AlongOrbit;
use crate::motion::Motion;
use crate::orbit_point::OrbitPoint;
use crate::outcome::{Losses, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::{Descent, Origin, StateEquation};
use crate::terms::Fire;
use crate::work::Work;
use std::cell::Cell;

/// How nearly the integrator finds strengths that are polished afterwards.
const GUESS: f64 = 1e-9;

/// The part of its start at which a side has faded, for pictures.
const FADED: f64 = 1e-200;

/// The part of a strength whose change a picture does not show, nor a table to six digits.
const RESTS: f64 = 1e-12;

/// A stretch of time in which nothing is added and no rate changes.
#[derive(Clone, Debug)]
pub struct Piece {
    /// The strengths at its beginning.
    pub start: Both<f64>,
    /// What holds along it.
    conditions: Conditions,
    /// What stays constant along it.
    pub equation: StateEquation,
    /// How the strengths move.
    pub motion: Motion,
    /// 1 over the factor of each side as targets.
    pub(crate) per_target: Both<[Power; 2]>,
    /// What each side loses besides the enemy's fire, per unit of time and of its factor as targets.
    pub(crate) besides: Both<f64>,
    /// The strengths at its beginning as the equation needs them.
    origin: Both<Origin>,
    /// What it costs to bring each side down to the last.
    pub cost: Both<Double>,
    /// Whether the sides stand at parity to the rounding of the inputs, and so wear each other out together.
    parity: bool,
    /// Strength over time by the integrator, where the motion has no formula and the trajectory was asked for.
    course: Option<Box<Course>>,
    work: Cell<Work>,
}

impl Piece {
    /// The piece that begins with the strengths `start`; `None` where the losses under `conditions` do not separate.
    ///
    /// Fire is taken at its full rate; a growth that both sides share is a change of the time, and the caller's.
    /// `parity` says of the costs of bringing X and Y down to the last whether they are the same to the rounding of the
    /// inputs, and stay so.
    pub fn new(
        start: Both<f64>,
        conditions: &Conditions,
        parity: impl Fn(Both<Double>) -> bool,
    ) -> Option<Box<Piece>> {
        let conditions = Conditions {
            growth: Both::default(),
            ..*conditions
        };
        let fire = &conditions.fire;
        let (per_target, besides) = conditions.separated()?;
        let equation = StateEquation::with(fire, &per_target, &besides);
        let origin = Both::of(|side| equation.origin(side, start[side].into()));
        let to_nothing = |side: Side| Descent::between(start[side], Double::from(0.0));
        let cost = Both::of(|side| equation.cost_from(side, &origin[side], to_nothing(side)));
        let parity = parity(cost);
        let ahead = if parity || cost.x.is_infinite() || cost.y.is_infinite() {
            Double::from(0.0)
        } else {
            cost.x - cost.y
        };
        let motion = if besides.x > 0.0 || besides.y > 0.0 {
            Motion::AlongOrbit
        } else {
            Motion::new(start, fire, &equation, ahead)
        };
        let work = Cell::default();
        Some(Box::new(Piece {
            start,
            conditions,
            equation,
            motion,
            per_target,
            besides,
            origin,
            cost,
            parity,
            course: None,
            work,
        }))
    }

    /// The fire of each side along it.
    pub fn fire(&self) -> &Both<Fire<f64>> {
        &self.conditions.fire
    }

    /// The place on the orbit of this piece where `side` is left with `strength`, of what it had at the beginning.
    ///
    /// Where the other side would be gone before, it stands at 0 there.
    pub fn point_with(&self, side: Side, strength: Double) -> OrbitPoint {
        self.point_down(side, Descent::between(self.start[side], strength))
    }

    /// The same for a descent whose height is known with all its digits.
    pub fn point_down(&self, side: Side, down: Descent) -> OrbitPoint {
        self.point_at_cost(side, down, self.cost_of(side, down))
    }

    /// What it costs to bring `side` down so far from the beginning.
    pub fn cost_of(&self, side: Side, down: Descent) -> Double {
        if down.to == 0.0 && down.by == self.start[side] {
            return self.cost[side];
        }
        self.equation.cost_from(side, &self.origin[side], down)
    }

    /// The place where `side` has come down so far at the cost `cost`.
    pub(crate) fn point_at_cost(&self, side: Side, down: Descent, cost: Double) -> OrbitPoint {
        let enemy = side.enemy();
        let from = Double::from(self.start[enemy]);
        let (left, fallen) = if self.parity {
            let rest = self.equation.cost(side, down.to, Double::from(0.0));
            let left = self.equation.worth(enemy, rest, from);
            (left, from - left)
        } else {
            let left = self.equation.left_from(enemy, &self.origin[enemy], cost);
            (left, self.equation.fallen(enemy, from, left, cost))
        };
        let of = |on: Side, own: Double, others: Double| f64::from(if on == side { own } else { others });
        OrbitPoint {
            left: Both::of(|on| of(on, down.to, left)),
            fallen: Both::of(|on| of(on, down.by, fallen)),
        }
    }

    /// Whether the other side lasts until `side` is down to `strength`.
    pub fn lasts_until(&self, side: Side, strength: Double) -> bool {
        let enemy = side.enemy();
        let cost = self.cost_of(side, Descent::between(self.start[side], strength));
        let of_enemy = self.cost[enemy];
        cost <= of_enemy || StateEquation::tie(Both { x: cost, y: of_enemy })
    }

    /// The time since the beginning of the piece at which it is at `point`, which lies on its orbit; infinite where
    /// never.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        match &self.motion {
            Motion::Still => f64::INFINITY,
            Motion::Alone(motion) => motion.time_to(point),
            Motion::Square(motion) => motion.time_to(point),
            Motion::Linear(motion) => motion.time_to(point),
            Motion::Ambush(motion) => motion.time_to(point),
            Motion::AlongOrbit => {
                let time = AlongOrbit { piece: self }.time_to(point);
                self.count(Work {
                    evaluations: time.evaluations,
                    steps: 0,
                });
                time.value
            }
        }
    }

    /// Where the piece is at the time `t` after its beginning, no later than its end.
    ///
    /// Where there is no formula: the inverse of the integral of the time. It starts from the integrator's strengths,
    /// which next to a tie lose digits as a fight goes on, and ends with those of the state equation.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        let start = OrbitPoint {
            left: self.start,
            fallen: Both::default(),
        };
        // To the digit, also at parity to a rounding, which is followed as parity.
        if t == 0.0 {
            return start;
        }
        match &self.motion {
            Motion::Still => start,
            Motion::Alone(motion) => self.point_with(motion.target, motion.left_at(t)),
            Motion::Square(motion) => motion.point_at(t),
            Motion::Linear(motion) => motion.point_at(t),
            Motion::Ambush(motion) => motion.point_at(t),
            Motion::AlongOrbit => {
                let near = match &self.course {
                    Some(course) => course.strengths_at(t.min(course.until())),
                    None => self.guess(t),
                };
                AlongOrbit { piece: self }.point_at(t, near)
            }
        }
    }

    /// Strengths near those at the time `t`.
    fn guess(&self, t: f64) -> Both<f64> {
        let course = Course::under(self.start, &self.conditions, t, GUESS, |_| false);
        self.count(Work {
            evaluations: 0,
            steps: course.steps(),
        });
        course.strengths_at(t.min(course.until()))
    }

    fn follow(&self, until: f64) -> Course {
        let onto_orbit = |now: Both<f64>| {
            let side = if now.x / self.start.x < now.y / self.start.y {
                Side::X
            } else {
                Side::Y
            };
            if now[side] > 0.0 {
                self.point_with(side, now[side].into()).left
            } else {
                now
            }
        };
        let course = Course::along(
            self.start,
            &self.conditions,
            until,
            TOLERANCE,
            |_| false,
            onto_orbit,
        );
        self.count(Work {
            evaluations: 0,
            steps: course.steps(),
        });
        course
    }

    /// The part of `side` lost per unit of time at these strengths.
    pub(crate) fn share_per_time(&self, side: Side, left: Both<f64>) -> f64 {
        let enemy = side.enemy();
        let steady = self.conditions.steadily_lost(side);
        let besides = self.conditions.part_lost(side) + if steady > 0.0 { steady / left[side] } else { 0.0 };
        self.fire()[enemy].share_per_time(left[enemy], left[side]) + besides
    }

    /// The losses by the time `t`, when the piece is at `point`, by their causes; each summed on its own.
    pub fn losses(&self, point: &OrbitPoint, t: f64) -> Both<Losses> {
        let orbit = AlongOrbit { piece: self };
        Both::of(|side: Side| {
            let enemy = side.enemy();
            if self.besides[side] == 0.0 {
                return Losses::of(point.fallen[side], 0.0, 0.0);
            }
            if t == 0.0 {
                return Losses::default();
            }
            let summed = |rate: &dyn Fn(Both<f64>) -> f64| {
                let integral = orbit.summed(point, rate);
                self.count(Work {
                    evaluations: integral.evaluations,
                    steps: 0,
                });
                integral.value
            };
            let fire = &self.fire()[enemy];
            let by_fire = if fire.takes_effect() {
                summed(&|at| fire.losses_per_time(at[enemy], at[side]))
            } else {
                0.0
            };
            let part = self.conditions.part_lost(side);
            let exposure = if part > 0.0 { summed(&|at| at[side]) } else { 0.0 };
            let support = self.conditions.support[enemy];
            let support = support.area * exposure + support.aimed * t;
            let wastage = self.conditions.wastage[side] * exposure;
            let losses = Losses::of(by_fire, support, wastage);
            if losses.all.is_finite() {
                losses
            } else {
                self.losses_in_proportion(side, point.fallen[side])
            }
        })
    }

    /// What `side` lost, shared among the causes as at the start: for where its sums over time have more decades than a
    /// double holds.
    fn losses_in_proportion(&self, side: Side, all: f64) -> Losses {
        let enemy = side.enemy();
        let (start, support) = (self.start[side], self.conditions.support[enemy]);
        let by_fire = self.fire()[enemy].losses_per_time(self.start[enemy], start);
        let support = support.area * start + support.aimed;
        let wastage = self.conditions.wastage[side] * start;
        let part = |rate: f64| all * (rate / (by_fire + support + wastage));
        Losses {
            fire: part(by_fire),
            support: part(support),
            wastage: part(wastage),
            all,
        }
    }

    /// Prepares strengths at any time up to `until`, counted from the beginning of the piece.
    pub(crate) fn prepare(&mut self, until: f64) {
        let sought = match &self.motion {
            Motion::AlongOrbit => true,
            // The side that fades by itself has a formula; the other may take a root-find each time.
            Motion::Alone(motion) => self.equation.needs_root(motion.target.enemy()),
            _ => false,
        };
        if sought {
            self.course = Some(Box::new(self.follow(until)));
        }
    }

    /// The strengths at the time `t` after its beginning, to a part of 1e-11: from the integrator's dense output where
    /// there is no formula, since a picture asks for hundreds of them and each inverse takes several integrals.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        match &self.course {
            Some(course) if t <= course.until() => course.strengths_at(t),
            Some(course) => self.after(course, t).unwrap_or_else(|| self.point_at(t).left),
            None => self.point_at(t).left,
        }
    }

    /// The strengths at the time `t` after the end of `course`, where one side has faded and the other goes on by itself, or
    /// hardly at all; `None` where the fire still counts.
    fn after(&self, course: &Course, t: f64) -> Option<Both<f64>> {
        let (end, mut left) = (course.until(), course.strengths_at(course.until()));
        let faded = Side::BOTH
            .into_iter()
            .find(|side| left[*side] <= FADED * self.start[*side])?;
        let other = faded.enemy();
        let moves = course.slopes_at(end)[other].abs() * (t - end);
        if moves > RESTS * left[other] {
            let fire = &self.fire()[faded];
            let counts = fire.takes_effect() && fire.shooters().exponent != 0.0;
            let steady = if fire.takes_effect() { fire.rate } else { 0.0 } + self.besides[other];
            (!counts).then_some(())?;
            let motion = Alone::new(other, left[other], steady, self.per_target[other]);
            left[other] = f64::from(motion.left_at(t - end)).max(0.0);
        }
        Some(left)
    }

    /// Who is left when both fight to the last: whoever costs more to bring down. `None` where nothing has any effect,
    /// and where both sides fade to nothing whatever their strengths.
    pub fn to_the_last(&self) -> Option<ToTheLast> {
        let cost = self.cost;
        match (cost.x.is_infinite(), cost.y.is_infinite()) {
            (true, true) => None,
            (true, false) => Some(ToTheLast::X),
            (false, true) => Some(ToTheLast::Y),
            _ if cost.x == 0.0 && cost.y == 0.0 => None,
            _ if StateEquation::tie(cost) => Some(ToTheLast::Parity),
            _ => Some(if cost.x > cost.y {
                ToTheLast::X
            } else {
                ToTheLast::Y
            }),
        }
    }

    /// What holds along it, with every fire at its full rate.
    pub fn conditions(&self) -> &Conditions {
        &self.conditions
    }

    /// What it took so far.
    pub fn work(&self) -> Work {
        self.work.get()
    }

    fn count(&self, more: Work) {
        let work = self.work.get();
        self.work.set(Work {
            evaluations: work.evaluations + more.evaluations,
            steps: work.steps + more.steps,
        });
    }
}
