//! Strength over time: a list of pieces, each with its own motion.

use crate::course::Course;
use crate::double::Double;
use crate::laws::Power;
use crate::laws::aimed::Square;
use crate::laws::alone::Alone;
use crate::laws::along_orbit::AlongOrbit;
use crate::laws::ambush::Ambush;
use crate::laws::area::Linear;
use crate::orbit_point::OrbitPoint;
use crate::outcome::Method;
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation};
use crate::terms::Fire;
use std::cell::Cell;

/// How strengths move from the start of a piece on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Motion {
    /// Neither side's fire has any effect.
    Still,
    /// One side fades by itself.
    Alone(Alone),
    /// Aimed against aimed, or powers that come to it.
    Square(Square),
    /// Area against area.
    Linear(Linear),
    /// Aimed against area.
    Ambush(Ambush),
    /// Any other pairing.
    AlongOrbit,
}

impl Motion {
    /// The motion of a piece that starts at `start`.
    ///
    /// `ahead` is the difference of the costs of bringing each side down to the last: X's less Y's.
    fn new(start: Both<f64>, fire: &Both<Fire<f64>>, equation: &StateEquation, ahead: Double) -> Motion {
        let rate = equation.rate;
        let shooters = Both::of(|side| fire[side].shooters().exponent);
        // A target fades by itself where its enemy is not shot at, or does not count.
        let alone = |target: Side| {
            let enemy = target.enemy();
            rate[enemy] > 0.0 && (rate[target] == 0.0 || shooters[enemy] == 0.0)
        };
        if rate.x == 0.0 && rate.y == 0.0 {
            return Motion::Still;
        }
        // Of two that fade by themselves: one that is gone in finite time ends the fight, and of two that never are the
        // slower still has digits when the other has none.
        let share = |side: Side| fire[side.enemy()].share_per_time(start[side.enemy()], start[side]);
        let to_follow = |one: Side, other: Side| {
            let lasts = |side: Side| {
                if equation.is_last_reached(side) {
                    f64::INFINITY
                } else {
                    equation.vanishing(side)
                }
            };
            let slower =
                lasts(other) > lasts(one) || (lasts(other) == lasts(one) && share(other) < share(one));
            if slower { other } else { one }
        };
        if let Some(target) = [Side::Y, Side::X]
            .into_iter()
            .filter(|side| alone(*side))
            .reduce(to_follow)
        {
            let fire = &fire[target.enemy()];
            let steady = fire.rate * fire.shooters().at(start[target.enemy()]);
            return Motion::Alone(Alone::new(target, start[target], steady, fire.per_target()));
        }
        // The exponent of a side as targets, where that is a single power.
        let single = |side: Side| {
            let [first, second]: [Power; 2] = fire[side.enemy()].per_target();
            (second.coefficient == 0.0).then_some(-first.exponent)
        };
        let (Some(x), Some(y)) = (single(Side::X), single(Side::Y)) else {
            return Motion::AlongOrbit;
        };
        let linear = shooters.x == 1.0 && shooters.y == 1.0;
        if shooters.x == 1.0 - x && shooters.y == 1.0 - y {
            Motion::Square(Square::new(start, shooters, rate, ahead))
        } else if linear && x == 1.0 && y == 1.0 {
            Motion::Linear(Linear::new(start, rate, ahead))
        } else if linear && x == 1.0 && y == 0.0 {
            Motion::Ambush(Ambush::new(Side::X, start, rate, ahead))
        } else if linear && x == 0.0 && y == 1.0 {
            Motion::Ambush(Ambush::new(Side::Y, start, rate, -ahead))
        } else {
            Motion::AlongOrbit
        }
    }

    /// How it is solved.
    pub fn method(&self) -> Method {
        match self {
            Motion::AlongOrbit => Method::Quadrature,
            _ => Method::ClosedForm,
        }
    }
}

/// What it took to solve a piece: for tests that a change has not made it dearer, without a clock.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Work {
    /// Evaluations of integrands.
    pub evaluations: u32,
    /// Steps of the integrator.
    pub steps: u32,
}

/// How nearly the integrator finds strengths that are polished afterwards.
const GUESS: f64 = 1e-9;

/// A stretch of time in which nothing is added and no rate changes.
#[derive(Clone, Debug)]
pub struct Piece {
    /// When it begins.
    pub from: f64,
    /// When it ends; `None` where it does not.
    pub to: Option<f64>,
    /// The strengths at its beginning.
    pub start: Both<f64>,
    /// The fire of each side along it.
    pub fire: Both<Fire<f64>>,
    /// What stays constant along it.
    pub equation: StateEquation,
    /// How the strengths move.
    pub motion: Motion,
    /// Whether the sides stand at parity to the rounding of the inputs, and so wear each other out together.
    parity: bool,
    /// Strength over time by the integrator, where the motion has no formula and the trajectory was asked for.
    course: Option<Course>,
    work: Cell<Work>,
}

impl Piece {
    /// The piece that begins at the time `from` with the strengths `start`.
    ///
    /// `ahead` is the difference of the costs of bringing X and Y down to the last; `None` where they are at parity to
    /// the rounding of the inputs, and stay so.
    pub fn new(from: f64, start: Both<f64>, fire: Both<Fire<f64>>, ahead: Option<Double>) -> Piece {
        let equation = StateEquation::of(&fire);
        let parity = ahead.is_none();
        let motion = Motion::new(start, &fire, &equation, ahead.unwrap_or(Double::from(0.0)));
        Piece {
            from,
            to: None,
            start,
            fire,
            equation,
            motion,
            parity,
            course: None,
            work: Cell::default(),
        }
    }

    /// The place on the orbit of this piece where `side` is left with `strength`, of what it had at the beginning.
    ///
    /// Where the other side would be gone before, it stands at 0 there.
    pub fn point_with(&self, side: Side, strength: Double) -> OrbitPoint {
        self.point_down(side, Descent::between(self.start[side], strength))
    }

    /// The same for a descent whose height is known with all its digits.
    pub fn point_down(&self, side: Side, down: Descent) -> OrbitPoint {
        let enemy = side.enemy();
        let cost = self.equation.cost_of(side, self.start[side].into(), down);
        let from = Double::from(self.start[enemy]);
        let (left, fallen) = if self.parity {
            let rest = self.equation.cost(side, down.to, Double::from(0.0));
            let left = self.equation.worth(enemy, rest, from);
            (left, from - left)
        } else {
            let left = self.equation.left(enemy, from, cost);
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
        let cost = self.equation.cost(side, self.start[side].into(), strength);
        let of_enemy = self
            .equation
            .cost(enemy, self.start[enemy].into(), Double::from(0.0));
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
                let course = Course::follow(self.start, &self.fire, t, GUESS);
                self.count(Work {
                    evaluations: 0,
                    steps: course.steps(),
                });
                let near = course.strengths_at(t.min(course.until()));
                AlongOrbit { piece: self }.point_at(t, near)
            }
        }
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
        let course = Course::follow_along(self.start, &self.fire, until, f64::EPSILON, onto_orbit);
        self.count(Work {
            evaluations: 0,
            steps: course.steps(),
        });
        course
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
            self.course = Some(self.follow(until));
        }
    }

    /// The strengths at the time `t` after its beginning, to a part of 1e-11: from the integrator's dense output where
    /// there is no formula, since a picture asks for hundreds of them and each inverse takes several integrals.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        match &self.course {
            Some(course) if t <= course.until() => course.strengths_at(t),
            _ => self.point_at(t).left,
        }
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

/// A whole fight in time.
#[derive(Clone, Debug)]
pub struct Trajectory {
    /// The pieces, in order; each begins where the one before ends.
    pub pieces: Vec<Piece>,
    /// The strengths at the very end, `None` where it has none; they may differ from the last piece's own in the last
    /// digit, since a break line is exact.
    pub end: Option<Both<f64>>,
    /// The time up to which it is worth looking at: the end, or long enough to see where an endless fight tends.
    pub shown: f64,
}

/// An endless fight is shown until the side that fades is down to this part of its start,
const SHOWN_DOWN_TO: f64 = 0.02;

/// or for so many times as long as it takes to be down to half: what fades ever more slowly would else be an upright and
/// a level line.
const HALVES_SHOWN: f64 = 8.0;

impl Trajectory {
    /// The trajectory of one piece that ends with the strengths `end`, if it ends.
    pub(crate) fn of(mut piece: Piece, end: Option<Both<f64>>) -> Trajectory {
        let down_to = |side: Side, part: f64| {
            let strength = Double::from(piece.start[side] * part);
            piece
                .lasts_until(side, strength)
                .then(|| piece.time_to(&piece.point_with(side, strength)))
        };
        let faded = |side: Side| {
            let faded = down_to(side, SHOWN_DOWN_TO)?;
            let half = down_to(side, 0.5)?;
            Some(faded.min(HALVES_SHOWN * half))
        };
        let shown = match piece.to {
            Some(to) => to,
            None => Side::BOTH
                .into_iter()
                .filter_map(faded)
                .fold(f64::INFINITY, f64::min),
        };
        // What is over at the start, or does not move, is shown for one unit of time.
        let shown = if shown > 0.0 && shown.is_finite() {
            shown
        } else {
            1.0
        };
        piece.prepare(shown);
        Trajectory {
            pieces: vec![piece],
            end,
            shown,
        }
    }

    /// When the fight ends; `None` where it never does.
    pub fn ends(&self) -> Option<f64> {
        self.pieces.last().and_then(|piece| piece.to)
    }

    /// The strengths at the time `t`, which is 0 or more; from the end on, those at the end.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        if let (Some(ends), Some(end)) = (self.ends(), self.end)
            && t >= ends
        {
            return end;
        }
        let piece = self
            .pieces
            .iter()
            .rev()
            .find(|piece| piece.from <= t)
            .unwrap_or(&self.pieces[0]);
        let left = piece.strengths_at((t - piece.from).max(0.0));
        Both::of(|side| left[side].max(0.0))
    }

    /// The first time at which `side` is down to `strength`; `None` where it never is before the end.
    pub fn time_to_strength(&self, side: Side, strength: f64) -> Option<f64> {
        self.pieces.iter().find_map(|piece| {
            if strength > piece.start[side] || !piece.lasts_until(side, strength.into()) {
                return None;
            }
            let time = piece.from + piece.time_to(&piece.point_with(side, strength.into()));
            (time.is_finite() && piece.to.is_none_or(|to| time <= to)).then_some(time)
        })
    }

    /// What it took to work it out so far.
    pub fn work(&self) -> Work {
        self.pieces
            .iter()
            .map(Piece::work)
            .fold(Work::default(), |sum, work| Work {
                evaluations: sum.evaluations + work.evaluations,
                steps: sum.steps + work.steps,
            })
    }
}
