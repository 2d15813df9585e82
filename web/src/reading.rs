//! The moment that is read in both pictures: the page's own state, outside the text and outside undo.

use crate::draw::Layout;
use crate::outcome::Good;
use aftercount_core::order::sort_by;
use aftercount_core::picture::Role;

/// How many small steps one tick of the time axis has.
const STEPS_A_TICK: f64 = 20.0;
/// How many points of the path the pointer is compared with.
const POINTS: u32 = 400;

/// The chosen moment; half-way until one is chosen.
#[derive(Default)]
pub(crate) struct Reading {
    chosen: Option<f64>,
}

/// The pointer over a picture, in CSS pixels from its top left.
pub(crate) struct Pointer {
    pub(crate) on_strength: bool,
    pub(crate) x: f64,
    pub(crate) y: f64,
}

impl Reading {
    /// The last moment that can be read: where the curves end.
    pub(crate) fn last(good: &Good) -> f64 {
        let curves = good.strength.iter().flat_map(|picture| &picture.lines);
        let ends = curves.filter(|line| matches!(line.role, Role::Strength(_)));
        ends.filter_map(|line| line.points.last())
            .map(|point| point.0)
            .fold(0.0, f64::max)
    }

    /// The moment that is read.
    pub(crate) fn time(&self, good: &Good) -> f64 {
        let last = Reading::last(good);
        let half = || (last / 2.0 / step(good)).round() * step(good);
        self.chosen.unwrap_or_else(half).clamp(0.0, last)
    }

    /// Forgets the chosen moment: another engagement has another course.
    pub(crate) fn forget(&mut self) {
        self.chosen = None;
    }

    /// After a change of the engagement the chosen moment stays, where the engagement still has it.
    pub(crate) fn keep_within(&mut self, good: &Good) {
        if self.chosen.is_some() {
            self.chosen = Some(self.time(good));
        }
    }

    /// Reads at a time; whether that is another than before.
    pub(crate) fn point_at_time(&mut self, good: &Good, t: f64) -> bool {
        let before = self.chosen.replace(t.clamp(0.0, Reading::last(good)));
        before != self.chosen
    }

    /// Reads where the path passes nearest to a pixel.
    pub(crate) fn point_at_orbit(&mut self, good: &Good, field: &Layout, (x, y): (f64, f64)) -> bool {
        let last = Reading::last(good);
        let times = (0..=POINTS).map(|point| last * f64::from(point) / f64::from(POINTS));
        let distance = |t: f64| {
            let at = good.strengths_at(t).unwrap_or_default();
            let (across, up) = field.place((at.x, at.y));
            (across - x).hypot(up - y)
        };
        let nearest = times.min_by(|a, b| distance(*a).total_cmp(&distance(*b)));
        nearest.is_some_and(|t| self.point_at_time(good, t))
    }

    /// A key on the slider; whether it was one of its keys.
    pub(crate) fn key(&mut self, good: &Good, key: &str) -> bool {
        let (t, step, last) = (self.time(good), step(good), Reading::last(good));
        // Steps go by round moments, whatever was pointed at before.
        let to = match key {
            "ArrowRight" | "ArrowUp" => ((t / step + 1e-6).floor() + 1.0) * step,
            "ArrowLeft" | "ArrowDown" => ((t / step - 1e-6).ceil() - 1.0) * step,
            "Home" => 0.0,
            "End" => last,
            "PageUp" => events(good).into_iter().find(|event| *event > t).unwrap_or(last),
            "PageDown" => events(good)
                .into_iter()
                .rev()
                .find(|event| *event < t)
                .unwrap_or(0.0),
            _ => return false,
        };
        self.point_at_time(good, to);
        true
    }
}

/// A small round step of the time axis.
fn step(good: &Good) -> f64 {
    let ticks = good.strength.as_ref().map(|picture| &picture.across.ticks);
    match ticks.and_then(|ticks| ticks.get(1)) {
        Some(tick) => tick.at / STEPS_A_TICK,
        None => (Reading::last(good) / 100.0).max(f64::MIN_POSITIVE),
    }
}

/// The moments at which something happens, in order.
fn events(good: &Good) -> Vec<f64> {
    let outcome = &good.fight.outcome;
    let last = Reading::last(good);
    let ends = outcome.pieces.iter().filter_map(|piece| piece.to);
    let mut events: Vec<f64> = [0.0, last]
        .into_iter()
        .chain(outcome.time)
        .chain(outcome.below_one)
        .chain(ends)
        .collect();
    events.retain(|event| *event <= last);
    sort_by(&mut events, f64::total_cmp);
    events
}
