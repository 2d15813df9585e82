//! A stretch that is integrated: the integrator's course, its lines, and what comes after its end.

use super::{After, Standing, TheEnd, WayDown, linear};
use crate::conditions::Conditions;
use crate::course::{Course, LEAST, Line, Stopped, TOLERANCE};
use crate::double::Double;
use crate::linear_system::LinearSystem;
use crate::outcome::{Ended, Losses};
use crate::sides::{Both, Side};

/// The part of its start at which a side to which nobody comes is gone.
const GONE: f64 = 1e-200;

/// The part of its start to which a side that is on its way to nothing is followed.
const FADED: f64 = 1e-13;

/// The part of the time so far in which a side is gone that has come to its last moment.
const LAST_MOMENT: f64 = 1e-13;

/// The part of what comes in and what is lost up to which the rest of the two is their rounding.
const BALANCED: f64 = 1e-13;

/// Where fewer than so many come per unit of time, and whoever comes is lost, a double has no digits of those who are there.
const FEWEST: f64 = 1e-240;

/// An integrated stretch.
#[derive(Clone, Debug)]
pub(super) struct Integrated {
    start: Both<f64>,
    conditions: Conditions,
    course: Course,
    /// The side that is sure to be brought to nothing, where that alone was asked.
    doomed: Option<Side>,
}

impl Integrated {
    /// The integrator's course up to `length`, or until a side is at its line, or nothing moves any more, or, where only
    /// that is asked, it is sure who will be gone in the end.
    pub(super) fn new(
        start: Both<f64>,
        conditions: &Conditions,
        length: f64,
        ways: &Both<WayDown>,
        after: After,
        tolerance: f64,
    ) -> Integrated {
        let conditions = &kept_alive(conditions, ways);
        let enough = |course: &Course| {
            let t = course.until();
            let now = course.end();
            let down = |side: Side| now[side] <= f64::from(ways[side].descent.to) + ways[side].rising * t;
            let decided = after == After::Verdict && doomed(conditions, now, t).is_some();
            decided || down(Side::X) || down(Side::Y) || has_settled(course, start, conditions, length)
        };
        let course = Course::under(start, conditions, length, tolerance, enough);
        let doomed = match after {
            After::Verdict => doomed(conditions, course.end(), course.until()),
            _ => None,
        };
        Integrated {
            start,
            conditions: *conditions,
            course,
            doomed,
        }
    }

    /// The course of two sides that tend to `limit` for ever, until they are next to it.
    pub(super) fn fading(start: Both<f64>, conditions: &Conditions, limit: Both<f64>) -> Integrated {
        let faded = |course: &Course| {
            let now = course.end();
            let near = |side: Side| now[side] <= limit[side] + 1e-15 * start[side];
            near(Side::X) && near(Side::Y)
        };
        Integrated {
            start,
            conditions: *conditions,
            course: Course::under(start, conditions, f64::INFINITY, TOLERANCE, faded),
            doomed: None,
        }
    }

    /// The integrator's course.
    pub(super) fn course(&self) -> &Course {
        &self.course
    }

    /// The side that is sure to be brought to nothing, where that alone was asked.
    pub(super) fn doomed(&self) -> Option<Side> {
        self.doomed
    }

    /// Where it went no further although more of `length` was left, and how matters go on is not known.
    pub(super) fn cut_short(&self, length: f64) -> Option<f64> {
        let end = self.course.until();
        // Who is down to less than a double holds, and is kept alive, is not gone.
        let rounded = |side: Side| self.course.end()[side] == 0.0 && is_kept_alive(side, &self.conditions);
        let is_cut = match self.course.stopped() {
            Stopped::Short => true,
            Stopped::Gone => rounded(Side::X) || rounded(Side::Y),
            _ => false,
        };
        (is_cut && end < length && self.alone().is_none()).then_some(end)
    }

    /// The first time up to `length` at which `side` is at its line; `None` of a side with nobody there, and nobody to come,
    /// and of one that is kept alive.
    pub(super) fn first_reach(&self, side: Side, way: &WayDown, length: f64) -> Option<f64> {
        let line = Line {
            at: f64::from(way.descent.to),
            rising: way.rising,
        };
        let nobody = self.start[side] == 0.0 && self.conditions.flow[side] == 0.0;
        let to_the_last = line.at == 0.0 && line.rising == 0.0;
        if nobody || to_the_last && is_kept_alive(side, &self.conditions) {
            return None;
        }
        let time = self
            .course
            .first_reach(side, line)
            .or_else(|| self.last_moment(side, line, length))
            .or_else(|| self.line_met_later(side, line, length));
        time.filter(|time| *time <= length)
    }

    /// The moment at which a side comes to 0 where its losses do not vanish with it: the integrator's steps shrink with
    /// what is left of the time, and end a hair before; with so few, the enemy no longer changes.
    fn last_moment(&self, side: Side, line: Line, length: f64) -> Option<f64> {
        let (end, left) = (self.course.until(), self.course.end()[side]);
        let rest = self.rest(side)?;
        // Of so few the powers have no digits: whatever they lose is all of them.
        let few = self.start[side] <= LEAST;
        if few && line.at > 0.0 {
            return Some(end);
        }
        if end >= length || line.at != 0.0 || line.rising != 0.0 || !comes_to_nothing(side, &self.conditions)
        {
            return None;
        }
        let flow = self.conditions.flow[side];
        let is_gone = flow == 0.0 && left <= LEAST.max(GONE * self.start[side]);
        let time = if few || flow > 0.0 { end } else { end + rest };
        let is_next = is_gone || left <= LEAST || rest <= LAST_MOMENT * end;
        (is_next && time <= length + end * LAST_MOMENT).then_some(time.min(length))
    }

    /// How long what is left of `side` at the end of the course lasts; `None` where it does not come to nothing.
    ///
    /// With n left, n' = −c·n^q − w·n: u = n^(1−q) has u' = −(1−q)·(c + w·u), and comes to 0 after
    /// ln(1 + w·u/c)/((1−q)·w), or u/((1−q)·c) where nothing wastes away. That is no hair where q is next to 1: a hundredth
    /// power of the last digits is a good part of the whole. Losses that do not depend on n are those with q = 0.
    fn rest(&self, side: Side) -> Option<f64> {
        let enemy = side.enemy();
        let (end, left) = (self.course.until(), self.course.end());
        let fire = self.conditions.fire_on(side, left, end);
        let [first, _] = self.conditions.fire[enemy].per_target();
        let steady = self.conditions.steadily_lost(side);
        let flow = self.conditions.flow[side];
        // What comes in keeps a side alive, however few, unless as much is lost with nobody there.
        let to_the_last = if first.exponent == 0.0 {
            steady + fire
        } else {
            steady
        };
        if flow > 0.0 && to_the_last <= flow {
            return None;
        }
        let falls = steady + fire - flow;
        let order = if steady > 0.0 { 1.0 } else { 1.0 + first.exponent };
        let part = self.conditions.part_lost(side);
        let constant = left[side] / falls;
        let rest = if part > 0.0 {
            libm::log1p(part * constant) / part
        } else {
            constant
        } / order;
        (falls > 0.0 && rest.is_finite()).then_some(rest)
    }

    /// When a side comes to its line after the end of the integrator's course: alone, or since the line rises to it.
    fn line_met_later(&self, side: Side, line: Line, length: f64) -> Option<f64> {
        let end = self.course.until();
        if end >= length || self.cut_short(length).is_some() {
            return None;
        }
        if let Some((start, system)) = self.alone() {
            let above = Double::from(start[side] - line.at - line.rising * end);
            let later =
                (start[side] > 0.0).then(|| system.first_reach(side, above, line.rising, length - end))?;
            return later.map(|later| end + later);
        }
        // What still grows has not come to rest: how it goes on is not known.
        if line.rising == 0.0 || self.grows(Side::X) || self.grows(Side::Y) {
            return None;
        }
        let time = (self.course.end()[side] - line.at) / line.rising;
        (time >= end).then_some(time)
    }

    /// How matters stand at the time `t`.
    ///
    /// After the end of the course, where one side is gone the other goes on alone; else nothing moves any more, and
    /// losses go on at their pace.
    pub(super) fn at(&self, t: f64) -> Standing {
        let course = &self.course;
        if t <= course.until() {
            return Standing {
                left: course.strengths_at(t),
                losses: course.losses_at(t),
            };
        }
        let losses = course.losses_at(course.until());
        let on = t - course.until();
        let later = match self.alone() {
            Some((start, system)) => linear::standing(&self.conditions.without_fire(), start, &system, on),
            None => Standing {
                left: course.end(),
                // What comes in is lost; a side to which nobody comes loses nothing that counts.
                losses: Both::of(|side| match self.conditions.flow[side] {
                    0.0 => Losses::default(),
                    _ => steady_losses(&self.conditions, course.end(), on)[side],
                }),
            },
        };
        Standing {
            left: later.left,
            losses: Both::of(|side| losses[side].and(&later.losses[side])),
        }
    }

    /// Where the integrator's course ends with one side gone: the strengths then, and how the other goes on.
    fn alone(&self) -> Option<(Both<f64>, LinearSystem)> {
        let left = self.course.end();
        self.without(|side: Side| {
            left[side] <= LEAST.max(GONE * self.start[side]) && self.conditions.flow[side] == 0.0
        })
    }

    /// Where a side fades for ever and its fire with it: what comes in of the other tends to what it tends to alone. A broken
    /// power of the last few may hold it off that for longer than any course.
    fn alone_in_the_end(&self) -> Option<(Both<f64>, LinearSystem)> {
        self.without(|side: Side| {
            let fire = &self.conditions.fire[side];
            let fire_fades = !fire.takes_effect() || fire.shooters().exponent > 0.0;
            self.has_faded(side) && fire_fades && self.conditions.flow[side.enemy()] > 0.0
        })
    }

    /// Whether what is left of `side` at the end of the course is so little that it has not come to rest.
    fn has_faded(&self, side: Side) -> bool {
        self.conditions.flow[side] == 0.0 && self.course.end()[side] <= FADED * self.start[side]
    }

    /// The strengths at the end of the course without a side that is `gone`, and how the other goes on.
    fn without(&self, gone: impl Fn(Side) -> bool) -> Option<(Both<f64>, LinearSystem)> {
        let left = self.course.end();
        Side::BOTH.into_iter().any(&gone).then_some(())?;
        let start = Both::of(|side| if gone(side) { 0.0 } else { left[side] });
        let system = self.conditions.without_fire().linear(start)?;
        Some((start, system))
    }

    /// Whether `side` still grows at the end of the course.
    fn grows(&self, side: Side) -> bool {
        let (late, left) = (self.course.until(), self.course.end());
        let slope = self.course.slopes_at(late)[side];
        let rests = balances(&self.conditions, side, left, slope);
        slope > 0.0 && !rests && slope * late > 1e-6 * left[side]
    }

    /// Where it tends where it never ends.
    pub(super) fn endless(&self) -> TheEnd {
        let course = &self.course;
        if let Some((start, system)) = self.alone().or_else(|| self.alone_in_the_end()) {
            let later = linear::endless(&self.conditions.without_fire(), start, &system);
            let losses = course.losses_at(course.until());
            return TheEnd {
                losses: Both::of(|side| losses[side].and(&later.losses[side])),
                ..later
            };
        }
        let late = course.until();
        let left = course.end();
        let end = Both::of(|side| {
            if self.grows(side) {
                None
            } else if self.has_faded(side) {
                Some(0.0)
            } else {
                Some(left[side])
            }
        });
        let flows = Side::BOTH.iter().any(|side| self.conditions.flow[*side] > 0.0);
        let ended = match (end.x.is_none() || end.y.is_none(), flows) {
            (true, _) => Ended::Growth,
            (false, true) => Ended::Equilibrium,
            (false, false) => Ended::Limit,
        };
        TheEnd::of(&self.conditions, ended, end, course.losses_at(late))
    }
}

/// Whether nothing moves any more at the end of `course`, so that what comes after is known.
///
/// A side is at rest where what comes in and what is lost balance, where no more than a rounding of it is lost up to the
/// end, where it has faded, or where it loses less and less since the enemy has.
fn has_settled(course: &Course, start: Both<f64>, conditions: &Conditions, length: f64) -> bool {
    let steady = conditions.growth.x.is_none() && conditions.growth.y.is_none();
    let endless = length.is_infinite();
    if !steady && !endless {
        return false;
    }
    let (t, now) = (course.until(), course.end());
    let huge = |side: Side| now[side] > 1e15 * (1.0 + start.x + start.y);
    if endless && (huge(Side::X) || huge(Side::Y)) {
        return true;
    }
    let slopes = course.slopes_at(t);
    let part = if endless { FADED } else { 1e-40 };
    let faded = |side: Side| {
        conditions.flow[side] == 0.0 && now[side] <= part * start[side] && !comes_to_nothing(side, conditions)
    };
    let rests = |side: Side| {
        let slope = slopes[side].abs();
        let fades_out = endless && faded(side.enemy()) && slope * t <= 1e-13 * now[side];
        let still = slope == 0.0 || slope * length <= 1e-13 * now[side];
        balances(conditions, side, now, slope) || still || faded(side) || fades_out
    };
    rests(Side::X) && rests(Side::Y)
}

/// Whether what comes in of `side` and what it loses with the strengths `now` balance to rounding, where it changes by
/// `slope` per unit of time.
fn balances(conditions: &Conditions, side: Side, now: Both<f64>, slope: f64) -> bool {
    let lost = conditions.losses_per_time(side, now).all;
    slope <= BALANCED * (lost + conditions.flow[side])
}

/// Whether the losses of `side` do not vanish with it, so that it may be gone in finite time.
fn comes_to_nothing(side: Side, conditions: &Conditions) -> bool {
    let fire = &conditions.fire[side.enemy()];
    let [first, second] = fire.per_target();
    let vanishes = second.coefficient > 0.0 || first.exponent <= -1.0 || !fire.takes_effect();
    !vanishes || conditions.steadily_lost(side) > 0.0
}

/// Whether what comes in of `side` keeps it alive, however few: its losses vanish with it, but for less than comes in.
fn is_kept_alive(side: Side, conditions: &Conditions) -> bool {
    let fire = &conditions.fire[side.enemy()];
    let [first, second] = fire.per_target();
    let vanishes = !fire.takes_effect() || second.coefficient > 0.0 || first.exponent < 0.0;
    vanishes && conditions.flow[side] > conditions.steadily_lost(side)
}

/// The conditions, but that of a side which has to be lost to the last, and to which some come, no fewer than [`FEWEST`] come:
/// they keep it alive however few they are, and make no difference else.
fn kept_alive(conditions: &Conditions, ways: &Both<WayDown>) -> Conditions {
    let flow = Both::of(|side| {
        let flow = conditions.flow[side];
        let to_the_last = ways[side].descent.to == 0.0 && ways[side].rising == 0.0;
        if flow > 0.0 && to_the_last {
            flow.max(FEWEST)
        } else {
            flow
        }
    });
    Conditions { flow, ..*conditions }
}

/// What is lost in the time `t` at steady strengths and full rates.
fn steady_losses(conditions: &Conditions, left: Both<f64>, t: f64) -> Both<Losses> {
    Both::of(|side: Side| conditions.losses_per_time(side, left).over(t))
}

/// The side that is sure to be brought to nothing in finite time while the other stands, from the strengths `now` at the
/// time `at` on; `None` where that is not known yet.
///
/// With `n` left of a side under the fire of `m`, it is gone within τ = ∫ dn/(rate·S(m/2)·T(n)) while its enemy keeps half of
/// what he has; and he does where all that he can lose in that time, by n at its number now, is no more than half.
fn doomed(conditions: &Conditions, now: Both<f64>, at: f64) -> Option<Side> {
    Side::BOTH.into_iter().find(|side| {
        let enemy = side.enemy();
        if conditions.flow[*side] > 0.0 || now[enemy] <= 0.0 {
            return false;
        }
        let fire = &conditions.fire[enemy];
        let pace = if fire.takes_effect() {
            fire.rate * fire.shooters().at(0.5 * now[enemy]) * conditions.growth_at(enemy, at)
        } else {
            0.0
        };
        let by_fire: f64 = fire
            .per_target()
            .iter()
            .map(|power| power.integral(0.0, now[*side]))
            .sum();
        let by_fire = if pace > 0.0 { by_fire / pace } else { f64::INFINITY };
        let within = by_fire.min(now[*side] / conditions.steadily_lost(*side));
        if !within.is_finite() {
            return false;
        }
        let most = now[enemy] + conditions.flow[enemy] * within;
        let lost = conditions.fire[*side].losses_per_time(now[*side], most)
            * conditions.growth_at(*side, at + within)
            + conditions.part_lost(enemy) * most
            + conditions.steadily_lost(enemy);
        lost * within <= 0.5 * now[enemy]
    })
}
