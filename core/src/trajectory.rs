//! Strength over time: a list of stretches, with the instants between them.

use crate::schedule::Instant;
use crate::sides::{Both, Side};
use crate::stretch::Stretch;
use crate::work::Work;

/// A whole fight in time.
#[derive(Clone, Debug)]
pub struct Trajectory {
    /// The stretches, in order; each begins where the one before ends.
    pub stretches: Vec<Stretch>,
    /// What happens at the beginning of each, and at later instants that it did not come to.
    pub instants: Vec<Instant>,
    /// When the fight ends; `None` where it never does.
    ends: Option<f64>,
    /// The strengths at the very end, `None` where it has none; they may differ from the last stretch's own in the last
    /// digit, since a break line is exact.
    pub end: Option<Both<f64>>,
    /// The time up to which it is worth looking at: the end, or long enough to see where an endless fight tends.
    pub shown: f64,
    /// The strengths of a fight that is over at the start.
    start: Both<f64>,
}

/// An endless fight is shown until the side that fades is down to this part of its strength,
const SHOWN_DOWN_TO: f64 = 0.02;

/// or for so many times as long as it takes to be down to half: what fades ever more slowly would else be an upright and
/// a level line.
const HALVES_SHOWN: f64 = 8.0;

impl Trajectory {
    /// The trajectory of these stretches, which ends at the time `ends` with the strengths `end`, if it ends.
    pub(crate) fn of(
        mut stretches: Vec<Stretch>,
        instants: Vec<Instant>,
        ends: Option<f64>,
        end: Option<Both<f64>>,
        start: Both<f64>,
    ) -> Trajectory {
        let start = stretches.first().map_or(start, |stretch| stretch.start);
        let shown = match ends {
            Some(ends) => ends,
            None => stretches.last().map_or(0.0, shown_of_endless),
        };
        // What is over at the start, or does not move, is shown for one unit of time.
        let shown = if shown > 0.0 && shown.is_finite() {
            shown
        } else {
            1.0
        };
        for stretch in &mut stretches {
            let until = stretch.to.unwrap_or(shown.max(stretch.from)) - stretch.from;
            stretch.prepare(until);
        }
        Trajectory {
            stretches,
            instants,
            ends,
            end,
            shown,
            start,
        }
    }

    /// What it took to work it out so far.
    pub fn work(&self) -> Work {
        self.stretches
            .iter()
            .map(Stretch::work)
            .fold(Work::default(), Work::and)
    }

    /// When the fight ends; `None` where it never does.
    pub fn ends(&self) -> Option<f64> {
        self.ends
    }

    /// The strengths at the time `t`, which is 0 or more; from the end on, those at the end. At an instant, those after
    /// what happens there.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        if let (Some(ends), Some(end)) = (self.ends, self.end)
            && t >= ends
        {
            return end;
        }
        match self.stretches.iter().rev().find(|stretch| stretch.from <= t) {
            Some(stretch) => stretch.strengths_at(t - stretch.from),
            None => self.start,
        }
    }

    /// The strengths just before what happens at the beginning of a stretch.
    pub fn strengths_before(&self, stretch: usize) -> Both<f64> {
        match stretch
            .checked_sub(1)
            .and_then(|before| self.stretches.get(before))
        {
            Some(before) => before.strengths_at(before.to.unwrap_or(before.from) - before.from),
            None => self.start,
        }
    }

    /// What each side loses per unit of time at the time `t`; at the end, what it lost until then.
    pub fn losses_per_time(&self, t: f64) -> Both<f64> {
        let at = |stretch: &&Stretch| stretch.from <= t;
        match self.stretches.iter().rev().find(at) {
            Some(stretch) => stretch.losses_per_time(t - stretch.from),
            None => Both::default(),
        }
    }

    /// The first time at which `side` is down to `strength`; `None` where it never is before the end.
    pub fn time_to_strength(&self, side: Side, strength: f64) -> Option<f64> {
        self.stretches.iter().find_map(|stretch| {
            let time = stretch.from + stretch.time_to_strength(side, strength)?;
            stretch.to.is_none_or(|to| time <= to).then_some(time)
        })
    }
}

/// Long enough to see where the last stretch tends.
fn shown_of_endless(stretch: &Stretch) -> f64 {
    let faded = |side: Side| {
        let faded = stretch.time_to_strength(side, stretch.start[side] * SHOWN_DOWN_TO)?;
        let half = stretch.time_to_strength(side, stretch.start[side] * 0.5)?;
        Some(faded.min(HALVES_SHOWN * half))
    };
    let fades = Side::BOTH
        .into_iter()
        .filter_map(faded)
        .fold(f64::INFINITY, f64::min);
    let tends = if fades.is_finite() {
        fades
    } else {
        stretch.settling()
    };
    let before = stretch.from;
    stretch.from + if tends > 0.0 { tends } else { before.max(1.0) }
}
