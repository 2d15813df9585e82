//! A side that is pinned at nothing: whoever comes is lost at once.

use super::comes::Comes;
use super::{PINNED, Run, Span};
use crate::conditions::Conditions;
use crate::outcome::{Breaks, Ended, Losses};
use crate::sides::{Both, Side};
use crate::stretch::{After, Stretch, WayDown};

/// What comes after a side was pinned at nothing.
pub(super) enum Next {
    /// The fight is over.
    Over,
    /// The next instant.
    Instant,
    /// It goes on from this time.
    At(f64),
}

impl Run {
    /// A side with nobody there whose reinforcement is lost as fast as it comes breaks with the first that comes, unless its
    /// line is below 0 since some were withdrawn: then its enemy goes on alone, until its losses have brought the line up
    /// to 0, or the enemy has become too weak. Says what comes after; `None` where no side is so.
    pub(super) fn pinned(
        &mut self,
        span: &Span,
        at: f64,
        conditions: &Conditions,
        ways: &Both<WayDown>,
    ) -> Option<Next> {
        let pace = |side: Side| {
            (
                conditions.fire_on(side, self.left, 0.0),
                conditions.steadily_lost(side),
            )
        };
        let pinned = Both::of(|side| {
            let (flow, (fire, steady)) = (conditions.flow[side], pace(side));
            self.left[side] == 0.0 && flow > 0.0 && fire + steady > flow * (1.0 + PINNED)
        });
        let side = Side::BOTH.into_iter().find(|side| pinned[*side])?;
        if let Some(breaks) = Breaks::of(Both::of(|side| pinned[side] && ways[side].sunk == 0.0)) {
            self.finish(breaks, Ended::Break, at);
            return Some(Next::Over);
        }
        let (fire, steady) = pace(side);
        let mut alone = *conditions;
        alone.flow[side] = 0.0;
        let breaks = at + ways[side].sunk / ways[side].rising;
        let weak = self.too_weak(span, side, &alone, ways, (conditions.flow[side] - steady) / fire);
        let until = breaks.min(span.until).min(at + weak);
        let until_then = Span { until, ..*span };
        let (_, comes) = self.solve(&until_then, at, alone, ways);
        let broken = match &comes {
            Comes::Break(first) => Some(first.breaks),
            _ => None,
        };
        let end = match &comes {
            Comes::Break(first) => at + first.time,
            _ => until,
        };
        let part = |pace: f64| conditions.flow[side] * (pace / (fire + steady));
        let lost = Losses::of(part(fire), part(steady), 0.0);
        if let Some(stretch) = self.stretches.last_mut() {
            stretch.lost_as_it_comes[side] = lost;
        }
        self.run_out(&alone, comes, at, end);
        self.ledger[side].pass(&lost.over(end - at));
        match broken {
            Some(broken) if ways[side.enemy()].sunk == 0.0 => self.finish(broken, Ended::Break, end),
            _ if end.is_infinite() => {}
            _ if end == breaks => self.finish(Breaks::only(side), Ended::Break, end),
            _ if end == span.until => return Some(Next::Instant),
            _ => return Some(Next::At(end)),
        }
        Some(Next::Over)
    }

    /// How long it takes until the enemy of `side`, going on alone, is down to where his fire is the part `part` of what it
    /// is now; infinite where he never is.
    fn too_weak(
        &mut self,
        span: &Span,
        side: Side,
        alone: &Conditions,
        ways: &Both<WayDown>,
        part: f64,
    ) -> f64 {
        let enemy = side.enemy();
        let exponent = alone.fire[enemy].shooters().exponent;
        if part <= 0.0 || exponent == 0.0 {
            return f64::INFINITY;
        }
        let strength = self.left[enemy] * libm::pow(part, 1.0 / exponent) * (1.0 - PINNED);
        let (until, after, tolerance) = (span.until, After::More, self.tolerance);
        let look = Stretch::new(0.0, until, self.left, *alone, ways, after, tolerance);
        let time = look.time_to_strength(enemy, strength);
        self.looks = self.looks.and(look.work());
        time.unwrap_or(f64::INFINITY)
    }
}
