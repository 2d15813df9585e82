//! A stretch of time in which nothing arrives at once and no rate jumps, solved by the best of the methods it allows.

use crate::conditions::{Conditions, Growth};
use crate::course::{Course, Line, TOLERANCE};
use crate::double::Double;
use crate::ledger::Ledger;
use crate::linear_system::LinearSystem;
use crate::orbit_point::OrbitPoint;
use crate::outcome::{Breaks, Ended, Losses, Method};
use crate::piece::{Motion, Piece, Work};
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation, TIE, is_endless};

/// The part of its start at which a side to which nobody comes is gone.
const GONE: f64 = 1e-200;

/// A strength below which the integrator does not go on: what is left is nobody.
const NOBODY: f64 = 1e-279;

/// How a stretch is solved.
#[derive(Clone, Debug)]
enum How {
    /// By its state equation, in a time that runs as both fires grow, where they do.
    Piece(Box<Piece>, Option<Growth>),
    /// As a linear system.
    Linear(LinearSystem),
    /// By the integrator.
    Integrated(Course),
}

/// A stretch of a fight.
#[derive(Clone, Debug)]
pub struct Stretch {
    /// When it begins.
    pub from: f64,
    /// When it ends; `None` where it does not.
    pub to: Option<f64>,
    /// The strengths at its beginning.
    pub start: Both<f64>,
    /// What holds along it.
    pub conditions: Conditions,
    /// The way down to each side's break line at its beginning.
    pub ways: Both<WayDown>,
    /// What each side has put in and lost by its beginning.
    pub ledger: Both<Ledger>,
    how: How,
    steps: u32,
}

/// The way down to the break line of a side, which rises while reinforcement flows in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WayDown {
    /// The way at the beginning of the stretch.
    pub descent: Descent,
    /// The rise of the line per unit of time.
    pub rising: f64,
    /// How far the line itself is below 0, since some were withdrawn: at 0 the side is gone then, and not broken.
    pub sunk: f64,
}

/// Where a stretch is, or ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Standing {
    /// What is left of each side.
    pub left: Both<f64>,
    /// What each has lost since the beginning of the stretch.
    pub losses: Both<Losses>,
}

/// The first break along a stretch.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FirstBreak {
    /// Who breaks.
    pub breaks: Breaks,
    /// When, from the beginning of the stretch.
    pub time: f64,
    /// How matters stand then.
    pub standing: Standing,
}

impl Stretch {
    /// The stretch from the time `from`, no longer than `length`, where both sides' ways down are `ways`.
    ///
    /// `settled` says that nothing comes after it, so that a tie to the last stays one.
    pub fn new(
        from: f64,
        length: f64,
        start: Both<f64>,
        conditions: Conditions,
        ways: &Both<WayDown>,
        settled: bool,
    ) -> Stretch {
        let absent = Side::BOTH
            .into_iter()
            .any(|side| start[side] == 0.0 && conditions.flow[side] == 0.0);
        let conditions = if absent {
            conditions.without_fire()
        } else {
            conditions
        };
        let to_the_last = settled && Side::BOTH.iter().all(|side| ways[*side].descent.to == 0.0);
        let parity = |cost: Both<Double>| to_the_last && StateEquation::tie(cost);
        let growth = conditions.shared_growth();
        let both_there = start.x > 0.0 && start.y > 0.0;
        let piece = || {
            let growth = growth?;
            // Losses besides the fires do not grow with the range.
            let fits = both_there && (conditions.are_plain() || growth.is_none());
            let piece = if fits {
                Piece::new(start, &conditions, parity)
            } else {
                None
            };
            piece.map(|piece| How::Piece(Box::new(piece), growth))
        };
        let linear = || match growth {
            Some(None) => conditions.linear(start).map(How::Linear),
            _ => None,
        };
        let solved = if conditions.are_plain() {
            piece().or_else(linear)
        } else {
            linear().or_else(piece)
        };
        let mut stretch = Stretch {
            from,
            to: None,
            start,
            conditions,
            ways: *ways,
            ledger: Both::default(),
            how: How::Linear(LinearSystem::still(start)),
            steps: 0,
        };
        stretch.how = solved.unwrap_or_else(|| How::Integrated(integrated(start, &conditions, length, ways)));
        if let How::Integrated(course) = &stretch.how {
            stretch.steps = course.steps();
        }
        stretch
    }

    /// The linear system, where it is solved as one.
    pub fn linear(&self) -> Option<&LinearSystem> {
        match &self.how {
            How::Linear(system) => Some(system),
            _ => None,
        }
    }

    /// The break line of `side` at the time `t` from the beginning; `None` where there is none above 0.
    pub fn break_line(&self, side: Side, t: f64) -> Option<f64> {
        let way = &self.ways[side];
        let line = f64::from(way.descent.to) + way.rising * t;
        (way.sunk == 0.0 && line > 0.0).then_some(line)
    }

    /// What each side has put in and lost by the time `t` from the beginning.
    pub fn ledger_at(&self, t: f64) -> Both<Ledger> {
        let losses = self.at(t).losses;
        Both::of(|side| {
            let mut ledger = self.ledger[side];
            let came = self.conditions.flow[side] * t;
            ledger.committed += Double::from(came);
            ledger.joined += came;
            ledger.add(&losses[side]);
            ledger
        })
    }

    /// How it was solved.
    pub fn method(&self) -> Method {
        match &self.how {
            How::Piece(piece, _) => piece.motion.method(),
            How::Linear(_) => Method::ClosedForm,
            How::Integrated(_) => Method::Integration,
        }
    }

    /// The piece with its state equation, where it is solved by one.
    pub fn piece(&self) -> Option<&Piece> {
        match &self.how {
            How::Piece(piece, _) => Some(piece),
            _ => None,
        }
    }

    /// What it took so far.
    pub fn work(&self) -> Work {
        let work = self.piece().map(Piece::work).unwrap_or_default();
        Work {
            steps: work.steps + self.steps,
            ..work
        }
    }

    /// Prepares strengths at any time up to `until` from its beginning.
    pub(crate) fn prepare(&mut self, until: f64) {
        if let How::Piece(piece, growth) = &mut self.how {
            piece.prepare(growth.map_or(until, |growth| growth.until(until)));
        }
    }

    /// The first break before `length` is over, from the beginning of the stretch; both sides have some way to go.
    pub fn first_break(&self, ways: &Both<WayDown>, length: f64) -> Option<FirstBreak> {
        match &self.how {
            How::Piece(piece, growth) => piece_break(piece, growth.as_ref(), ways, length),
            How::Linear(system) => {
                // What is at the end to rounding is at the end.
                let length = length + (self.from + length) * TIE;
                let reach =
                    |side: Side| system.first_reach(side, ways[side].descent.by, ways[side].rising, length);
                self.earlier(ways, Both::of(reach))
            }
            How::Integrated(course) => {
                let reach = |side: Side| {
                    let way = &ways[side];
                    let at = f64::from(way.descent.to);
                    {
                        let line = Line {
                            at,
                            rising: way.rising,
                        };
                        let time = course
                            .first_reach(side, line)
                            .or_else(|| self.last_moment(course, side, line, length))
                            .or_else(|| self.line_met_later(course, side, line, length));
                        time.filter(|time| *time <= length)
                    }
                };
                self.earlier(ways, Both::of(reach))
            }
        }
    }

    /// The moment at which a side comes to 0 where its losses do not vanish with it: the integrator's steps shrink with
    /// what is left of the time, and end a hair before.
    fn last_moment(&self, course: &Course, side: Side, line: Line, length: f64) -> Option<f64> {
        let end = course.until();
        let fire = &self.conditions.fire[side.enemy()];
        let [first, second] = fire.per_target();
        let vanishes = second.coefficient > 0.0 || first.exponent <= -1.0 || !fire.takes_effect();
        let comes = !vanishes || self.conditions.steadily_lost(side) > 0.0;
        let next_to_nothing = course.strengths_at(end)[side] <= 1e-9 * course.highest(side);
        let falls = course.slopes_at(end)[side] < 0.0;
        (end < length && line.at == 0.0 && line.rising == 0.0 && comes && falls && next_to_nothing)
            .then_some(end)
    }

    /// When a side comes to its line after the end of the integrator's course: alone, or since the line rises to it.
    fn line_met_later(&self, course: &Course, side: Side, line: Line, length: f64) -> Option<f64> {
        let end = course.until();
        if end >= length {
            return None;
        }
        if let Some((start, system)) = self.alone(course) {
            let above = Double::from(start[side] - line.at - line.rising * end);
            let later =
                (start[side] > 0.0).then(|| system.first_reach(side, above, line.rising, length - end))?;
            return later.map(|later| end + later);
        }
        let time = (course.strengths_at(end)[side] - line.at) / line.rising;
        (line.rising > 0.0 && time >= end).then_some(time)
    }

    /// The earlier of two breaks, or both where they are the same to rounding.
    fn earlier(&self, ways: &Both<WayDown>, times: Both<Option<f64>>) -> Option<FirstBreak> {
        let time = match (times.x, times.y) {
            (None, None) => return None,
            (x, y) => x.unwrap_or(f64::INFINITY).min(y.unwrap_or(f64::INFINITY)),
        };
        let mut standing = self.at(time);
        let broken = Both::of(|side| times[side].is_some_and(|at| at <= time * (1.0 + TIE)));
        for side in Side::BOTH.into_iter().filter(|side| broken[*side]) {
            standing.left[side] = f64::from(ways[side].descent.to) + ways[side].rising * time;
        }
        let breaks = Breaks::of(broken)?;
        Some(FirstBreak {
            breaks,
            time,
            standing,
        })
    }

    /// How matters stand at the time `t` from the beginning, no later than the end.
    pub fn at(&self, t: f64) -> Standing {
        match &self.how {
            How::Piece(piece, growth) => {
                let t = growth.map_or(t, |growth| growth.until(t));
                let point = piece.point_at(t);
                Standing {
                    left: point.left,
                    losses: piece.losses(&point, t),
                }
            }
            How::Linear(system) => {
                let losses = linear_losses(&self.conditions, self.start, system, t);
                Standing {
                    left: Both::of(|side| system.strengths(t)[side].max(0.0)),
                    losses,
                }
            }
            How::Integrated(course) => {
                if t <= course.until() {
                    return Standing {
                        left: course.strengths_at(t),
                        losses: course.losses_at(t),
                    };
                }
                let losses = course.losses_at(course.until());
                let (left, later) = self.after(course, t - course.until());
                Standing {
                    left,
                    losses: Both::of(|side| sum_of(&losses[side], &later[side])),
                }
            }
        }
    }

    /// The strengths so long after the end of the integrator's course, and what is lost in that time.
    ///
    /// Where one side is gone the other goes on alone; else nothing moves any more, and losses go on at their pace.
    fn after(&self, course: &Course, t: f64) -> (Both<f64>, Both<Losses>) {
        let left = course.strengths_at(course.until());
        match self.alone(course) {
            Some((start, system)) => {
                let losses = linear_losses(&self.conditions.without_fire(), start, &system, t);
                (Both::of(|side| system.strengths(t)[side].max(0.0)), losses)
            }
            None => (left, steady_losses(&self.conditions, left, t)),
        }
    }

    /// Where the integrator's course ends with one side gone: the strengths then, and how the other goes on.
    fn alone(&self, course: &Course) -> Option<(Both<f64>, LinearSystem)> {
        let left = course.strengths_at(course.until());
        let gone = |side: Side| {
            left[side] <= (GONE * self.start[side]).max(NOBODY) && self.conditions.flow[side] == 0.0
        };
        Side::BOTH.into_iter().any(gone).then_some(())?;
        let start = Both::of(|side| if gone(side) { 0.0 } else { left[side] });
        let system = self.conditions.without_fire().linear(start)?;
        Some((start, system))
    }

    /// The strengths alone at the time `t`, as pictures need them.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        let left = match &self.how {
            How::Piece(piece, growth) => piece.strengths_at(growth.map_or(t, |growth| growth.until(t))),
            How::Linear(system) => system.strengths(t),
            How::Integrated(course) if t > course.until() => self.after(course, t - course.until()).0,
            How::Integrated(course) => course.strengths_at(t),
        };
        Both::of(|side| left[side].max(0.0))
    }

    /// What each side loses per unit of time at the time `t`.
    pub fn losses_per_time(&self, t: f64) -> Both<f64> {
        let left = self.strengths_at(t);
        let conditions = &self.conditions;
        Both::of(|side: Side| {
            let enemy = side.enemy();
            let growth = conditions.growth[enemy].map_or(1.0, |growth| growth.at(t));
            let fire = conditions.fire[enemy].losses_per_time(left[enemy], left[side]) * growth;
            let steady = if left[side] > 0.0 {
                conditions.steadily_lost(side)
            } else {
                0.0
            };
            fire + conditions.part_lost(side) * left[side] + steady
        })
    }

    /// The first time from the beginning at which `side` is down to `strength`; `None` where it never is.
    pub fn time_to_strength(&self, side: Side, strength: f64) -> Option<f64> {
        if strength > self.start[side] {
            return None;
        }
        let time = match &self.how {
            How::Piece(piece, growth) => {
                let strength = Double::from(strength);
                if !piece.lasts_until(side, strength) {
                    return None;
                }
                let full = piece.time_to(&piece.point_with(side, strength));
                growth.map_or(full, |growth| growth.when(full))
            }
            How::Linear(system) => {
                let above = Double::difference(self.start[side], strength);
                system.first_reach(side, above, 0.0, f64::INFINITY)?
            }
            How::Integrated(course) => course.time_to(side, strength)?,
        };
        time.is_finite().then_some(time)
    }

    /// What happens in the end where nobody breaks and nothing comes after: how it ends, and what each side tends to,
    /// `None` without bound.
    pub fn endless(&self) -> (Ended, Both<Option<f64>>, Both<Losses>) {
        match &self.how {
            How::Piece(piece, _) => piece_limit(piece),
            How::Linear(system) => linear_limit(&self.conditions, self.start, system),
            How::Integrated(course) => course_limit(&self.conditions, course),
        }
    }

    /// The time from the beginning after which next to nothing moves any more; 0 where that is not known.
    pub(crate) fn settling(&self) -> f64 {
        match &self.how {
            How::Piece(..) => 0.0,
            // Five of the slowest time constants.
            How::Linear(system) => system.settled() / 12.0,
            How::Integrated(course) => course.until(),
        }
    }

    /// When a side that fades without ever reaching 0 falls below one, from the beginning of the stretch.
    pub fn below_one(&self) -> Option<f64> {
        let fades = |side: Side| {
            if !self.fades(side) {
                return None;
            }
            if self.start[side] <= 1.0 {
                return Some(0.0);
            }
            self.time_to_strength(side, 1.0)
        };
        Side::BOTH.into_iter().filter_map(fades).reduce(f64::min)
    }

    /// Whether `side` tends to 0 and never reaches it.
    fn fades(&self, side: Side) -> bool {
        let zero = Double::from(0.0);
        match &self.how {
            How::Piece(piece, _) => {
                let loses = !piece.equation.active(side.enemy()).is_empty();
                let down = || piece.point_with(side, zero).left;
                loses && piece.lasts_until(side, zero) && !piece.equation.is_reached(down())
            }
            _ => {
                let (ended, end, _) = self.endless();
                let gone = end[side].is_some_and(|end| end <= 1e-9 * self.start[side]);
                ended == Ended::Limit && gone && self.start[side] > 0.0
            }
        }
    }
}

fn sum_of(one: &Losses, other: &Losses) -> Losses {
    Losses {
        fire: one.fire + other.fire,
        support: one.support + other.support,
        wastage: one.wastage + other.wastage,
        all: one.all + other.all,
    }
}

/// What is lost in the time `t` at steady strengths and full rates.
fn steady_losses(conditions: &Conditions, left: Both<f64>, t: f64) -> Both<Losses> {
    Both::of(|side: Side| {
        let enemy = side.enemy();
        let fire = conditions.fire[enemy].losses_per_time(left[enemy], left[side]) * t;
        let support = conditions.support[enemy];
        let steady = if left[side] > 0.0 { support.aimed } else { 0.0 };
        let support = (support.area * left[side] + steady) * t;
        let wastage = conditions.wastage[side] * left[side] * t;
        Losses {
            fire,
            support,
            wastage,
            all: fire + support + wastage,
        }
    })
}

/// The integrator's course up to `length`, or until a side is at its line, or nothing moves any more.
fn integrated(start: Both<f64>, conditions: &Conditions, length: f64, ways: &Both<WayDown>) -> Course {
    let enough = |course: &Course| {
        let t = course.until();
        let now = course.strengths_at(t);
        let down = |side: Side| now[side] <= f64::from(ways[side].descent.to) + ways[side].rising * t;
        let slopes = course.slopes_at(t);
        let still =
            |side: Side| (slopes[side] * t).abs() <= 1e-13 * now[side] || now[side] <= 1e-13 * start[side];
        let huge = |side: Side| now[side] > 1e15 * (1.0 + start.x + start.y);
        let steady = conditions.growth.x.is_none() && conditions.growth.y.is_none();
        // Up to a clock or an instant only what has come to rest is left alone: what comes in and what is lost balance.
        let rests = |side: Side| {
            let lost = steady_losses(conditions, now, 1.0)[side].all;
            let slope = slopes[side].abs();
            let small =
                slope <= 1e-13 * (lost + conditions.flow[side]) || slope * length <= 1e-13 * now[side];
            still(side) && (small || now[side] <= 1e-40 * start[side])
        };
        let settled = (length.is_infinite() && Side::BOTH.into_iter().all(still))
            || (steady && Side::BOTH.into_iter().all(rests))
            || length.is_infinite() && Side::BOTH.into_iter().any(huge);
        Side::BOTH.into_iter().any(down) || settled
    };
    Course::under(start, conditions, length, TOLERANCE, enough)
}

/// Which side of a piece reaches its line first, by the state equation, and when.
fn piece_break(
    piece: &Piece,
    growth: Option<&Growth>,
    ways: &Both<WayDown>,
    length: f64,
) -> Option<FirstBreak> {
    if piece.motion == Motion::Still {
        return None;
    }
    let equation = &piece.equation;
    let cost = Both::of(|side| piece.cost_of(side, ways[side].descent));
    if is_endless(cost.x) && is_endless(cost.y) {
        return None;
    }
    let (breaks, loser) = if StateEquation::tie(cost) {
        (Breaks::Both, Side::X)
    } else if cost.x > cost.y {
        (Breaks::Y, Side::Y)
    } else {
        (Breaks::X, Side::X)
    };
    let mut point = piece.point_at_cost(loser, ways[loser].descent, cost[loser]);
    if breaks == Breaks::Both {
        point.left.y = ways.y.descent.to.into();
        point.fallen.y = ways.y.descent.by.into();
    }
    // What is left of the winner may be too little for a double, and is not nothing.
    let mut left = point.left;
    if breaks != Breaks::Both {
        left[loser.enemy()] = left[loser.enemy()].max(f64::MIN_POSITIVE);
    }
    let full = if equation.is_reached(left) {
        piece.time_to(&point)
    } else {
        f64::INFINITY
    };
    let time = growth.map_or(full, |growth| growth.when(full));
    (time.is_finite() && time <= length * (1.0 + TIE)).then(|| FirstBreak {
        breaks,
        time,
        standing: Standing {
            left: point.left,
            losses: piece.losses(&point, full),
        },
    })
}

/// Where a piece tends that never ends.
fn piece_limit(piece: &Piece) -> (Ended, Both<Option<f64>>, Both<Losses>) {
    if piece.motion == Motion::Still {
        return (
            Ended::Equilibrium,
            Both::of(|side| Some(piece.start[side])),
            Both::default(),
        );
    }
    let cost = piece.cost;
    let point = if is_endless(cost.x) && is_endless(cost.y) {
        OrbitPoint {
            left: Both::default(),
            fallen: piece.start,
        }
    } else {
        let loser = if cost.x > cost.y { Side::Y } else { Side::X };
        piece.point_with(loser, Double::from(0.0))
    };
    if piece.besides.x == 0.0 && piece.besides.y == 0.0 {
        let losses = piece.losses(&point, 0.0);
        return (Ended::Limit, Both::of(|side| Some(point.left[side])), losses);
    }
    // What is lost besides the fires is summed by the integrator, until next to nothing is left of those that fade.
    let faded = |course: &Course| {
        let now = course.strengths_at(course.until());
        Side::BOTH
            .into_iter()
            .all(|side| now[side] <= point.left[side] + 1e-15 * piece.start[side])
    };
    let course = Course::under(piece.start, piece.conditions(), f64::INFINITY, TOLERANCE, faded);
    let (left, so_far) = (
        course.strengths_at(course.until()),
        course.losses_at(course.until()),
    );
    let losses = Both::of(|side| {
        let rest = (left[side] - point.left[side]).max(0.0);
        sum_of(&so_far[side], &besides_the_fire(piece.conditions(), side, rest))
    });
    (Ended::Limit, Both::of(|side| Some(point.left[side])), losses)
}

/// What a side loses of itself without the enemy, who is gone, by the causes.
fn besides_the_fire(conditions: &Conditions, side: Side, lost: f64) -> Losses {
    let part = conditions.part_lost(side);
    let wastage = if part > 0.0 {
        lost * (conditions.wastage[side] / part)
    } else {
        0.0
    };
    let support = if part > 0.0 || conditions.steadily_lost(side) > 0.0 {
        lost - wastage
    } else {
        0.0
    };
    Losses {
        fire: 0.0,
        support,
        wastage,
        all: support + wastage,
    }
}

/// The losses of a linear system by their causes, from the strengths summed over time.
fn linear_losses(conditions: &Conditions, start: Both<f64>, system: &LinearSystem, t: f64) -> Both<Losses> {
    let summed = system.integrals(t);
    Both::of(|side: Side| {
        if start[side] == 0.0 && conditions.flow[side] == 0.0 {
            return Losses::default();
        }
        let enemy = side.enemy();
        let fire = &conditions.fire[enemy];
        let by_fire = match (fire.shooters().exponent, fire.per_target()[0].exponent) {
            _ if !fire.takes_effect() => 0.0,
            (1.0, _) => fire.rate * summed[enemy],
            (_, 0.0) => fire.rate * t,
            _ => fire.rate * summed[side],
        };
        let support = conditions.support[enemy];
        let support = support.area * summed[side] + support.aimed * t;
        let wastage = conditions.wastage[side] * summed[side];
        Losses {
            fire: by_fire,
            support,
            wastage,
            all: by_fire + support + wastage,
        }
    })
}

/// Where a linear system tends that never ends.
fn linear_limit(
    conditions: &Conditions,
    start: Both<f64>,
    system: &LinearSystem,
) -> (Ended, Both<Option<f64>>, Both<Losses>) {
    let late = system.settled();
    let (late, moves) = if late > 0.0 {
        (late, true)
    } else {
        (1.0, system.slopes(0.0) != Both::default())
    };
    let (left, slopes) = (system.strengths(late), system.slopes(late));
    let grows = |side: Side| slopes[side] * late > 1e-9 * left[side].abs().max(start[side]);
    let end = Both::of(|side| {
        if grows(side) {
            None
        } else if left[side] <= 1e-15 * start[side] {
            // What is that little has not come to rest: it fades.
            Some(0.0)
        } else {
            Some(left[side])
        }
    });
    let losses = linear_losses(conditions, start, system, late);
    let flows = Side::BOTH.iter().any(|side| conditions.flow[*side] > 0.0);
    let ended = if end.x.is_none() || end.y.is_none() {
        Ended::Growth
    } else if flows || !moves {
        Ended::Equilibrium
    } else {
        Ended::Limit
    };
    (ended, end, losses)
}

/// Where an integrated stretch tends that never ends.
fn course_limit(conditions: &Conditions, course: &Course) -> (Ended, Both<Option<f64>>, Both<Losses>) {
    let late = course.until();
    let (left, slopes) = (course.strengths_at(late), course.slopes_at(late));
    let grows = |side: Side| slopes[side] > 0.0 && slopes[side] * late > 1e-6 * left[side];
    let end = Both::of(|side| if grows(side) { None } else { Some(left[side]) });
    let flows = Side::BOTH.iter().any(|side| conditions.flow[*side] > 0.0);
    let ended = match (end.x.is_none() || end.y.is_none(), flows) {
        (true, _) => Ended::Growth,
        (false, true) => Ended::Equilibrium,
        (false, false) => Ended::Limit,
    };
    (ended, end, course.losses_at(late))
}
