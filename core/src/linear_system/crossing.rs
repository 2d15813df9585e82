//! When a strength of a linear system comes down to a line.

use super::LinearSystem;
use crate::double::Double;
use crate::root::{newton, root};
use crate::sides::Side;

impl LinearSystem {
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
        // How far above the line a strength is, and how that changes.
        let above_line = |t: f64| {
            let now = self.at(t);
            let left = now.strengths[side];
            let height = if left < 0.5 * start && rising == 0.0 {
                left - line
            } else {
                f64::from(above) + now.change[side] - rising * t
            };
            (height, now.slopes[side] - rising)
        };
        let mut from = Place {
            t: 0.0,
            height: above.into(),
            slope: self.first[side] - rising,
        };
        let bend = self.inflection(side).filter(|t| *t < horizon);
        let bend = bend.map(|t| Place::at(t, &above_line));
        let last = bend.map_or(0.0, |bend| bend.t);
        let far = if horizon.is_finite() {
            Place::at(horizon.min(self.beyond_digits(last, rising)), &above_line)
        } else {
            self.far(side, &from, last, &above_line)
        };
        for end in bend.into_iter().chain([far]) {
            // Between two bends the slope has one zero at most.
            let turn = (from.slope < 0.0) != (end.slope < 0.0);
            let turn = turn.then(|| root(from.t, end.t, &|t| above_line(t).1)).flatten();
            for mark in turn.map(|t| Place::at(t, &above_line)).into_iter().chain([end]) {
                if mark.is_down() {
                    return Some(from.reach(&mark, &above_line));
                }
                from = mark;
            }
        }
        None
    }

    /// The time at which the second derivative of a strength is 0: tanh(δt)/δ = −c/s.
    fn inflection(&self, side: Side) -> Option<f64> {
        if self.by_enemy[side] == 0.0 {
            // It moves by itself, as one exponential.
            return None;
        }
        let second = self.times(self.first);
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

    /// The time at which all has long decayed since the time `from`, or grown beyond any strength, so that a double holds
    /// nothing of it, not even which way it went; to a line that still rises what has decayed may come later.
    fn beyond_digits(&self, from: f64, rising: f64) -> f64 {
        match self.eigenvalues {
            [high, _] if high > 0.0 => from + 600.0 / high,
            [high, low] if high < 0.0 && low < 0.0 && rising == 0.0 => from + 8.0 * self.settled(),
            _ => f64::INFINITY,
        }
    }

    /// A place after `least` at which a strength has come to its line, or never will.
    fn far(&self, side: Side, start: &Place, least: f64, above_line: &impl Fn(f64) -> (f64, f64)) -> Place {
        // Beyond it what grows has no digits left.
        let most = if self.eigenvalues[0] > 0.0 {
            f64::min(600.0 / self.eigenvalues[0], FAR)
        } else {
            FAR
        };
        let scales = Side::BOTH.map(|side| self.start[side] / self.first[side].abs());
        let mut scales = [-2.0 * start.height / start.slope].into_iter().chain(scales);
        let scale = scales.find(|scale| *scale > 0.0 && *scale < FAR);
        let mut t = scale.unwrap_or(1.0).min(most).max(least).max(1e-200);
        let settled = least + self.settled();
        // With both eigenvalues 0 a slope may change for ever: nothing settles.
        let settles = self.delta > 0.0 || self.eigenvalues[0] < 0.0;
        let pace = self.first[side].abs().max(self.first[side.enemy()].abs()) * SETTLED;
        let mut factor = 2.0;
        loop {
            let place = Place::at(t, above_line);
            // What decays has decayed: only a steady pace can still bring it down.
            let rests = settles && t > settled && place.slope >= -pace;
            if rests || t >= most || place.height <= 0.0 || place.height.is_nan() {
                return place;
            }
            t = f64::min(t * factor, most);
            // It is a long way, or none.
            factor = f64::min(factor * 1.25, 1e6);
        }
    }
}

/// No time later than this is asked for.
const FAR: f64 = 1e300;

/// The part of the first pace below which nothing moves any more, once what decays has decayed.
const SETTLED: f64 = 1e-22;

/// A time, and how matters stand there.
#[derive(Clone, Copy)]
struct Place {
    t: f64,
    height: f64,
    slope: f64,
}

impl Place {
    fn at(t: f64, above_line: &impl Fn(f64) -> (f64, f64)) -> Place {
        let (height, slope) = above_line(t);
        Place { t, height, slope }
    }

    /// What has faded below the smallest double has not reached a line at 0.
    fn is_down(&self) -> bool {
        self.height < 0.0 || (self.height == 0.0 && self.slope < 0.0)
    }

    /// When the line is met between this place, above it, and `down`, with a monotone way between them: from where the
    /// cubic through both places, time over height, crosses it.
    fn reach(&self, down: &Place, above_line: &impl Fn(f64) -> (f64, f64)) -> f64 {
        if self.height <= 0.0 {
            return if down.height == 0.0 { down.t } else { self.t };
        }
        let part = self.height / (self.height - down.height);
        let rest = 1.0 - part;
        let span = down.height - self.height;
        let (start, end) = (span / self.slope, span / down.slope);
        let first = self.t * rest * rest * (1.0 + 2.0 * part)
            + down.t * part * part * (1.0 + 2.0 * rest)
            + start * part * rest * rest
            - end * part * part * rest;
        newton(self.t, down.t, first, above_line)
    }
}
