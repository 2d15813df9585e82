//! Closing in on where a line crosses an edge of the lattice.

use super::lattice::FINEST;
use super::line::{Edge, ends};
use super::{Chart, Kind, Point, parts};

/// How near, as a part of the axis, a flip is closed in on.
const PRECISION: f64 = 1e-12;

/// How near an outcome must come to another, as a part of what is committed, to be taken as where it flips.
const TOUCHES: f64 = 1e-12;

impl Chart {
    /// The part of an edge at which the outcome flips, or conditions begin to be met.
    ///
    /// How near the outcome is to the other falls smoothly to 0 on either side, with a bend between them: so the next guess
    /// is by the secant through the last two points of one side, and every fourth a halving, which is all that helps at a
    /// jump. What is missing of a condition is known on one side alone: a guess from there that went too far is tried again a
    /// hair less far.
    pub(super) fn close_in(&mut self, kind: Kind, edge: Edge) -> f64 {
        let [begin, end] = ends(edge);
        let (from, to) = (parts(begin), parts(end));
        let (Some(first), Some(last)) = (self.lattice.get(begin), self.lattice.get(end)) else {
            return 0.5;
        };
        let along = |part: f64| {
            [
                from[0] + (to[0] - from[0]) * part,
                from[1] + (to[1] - from[1]) * part,
            ]
        };
        // Where the story changes too, conditions mostly do because of it.
        let one_sided = kind == Kind::Met && first.class == last.class;
        let near = |point: &Point| match point.worst {
            _ if !one_sided => point.near,
            Some(worst) => worst.short.part,
            None => f64::NAN,
        };
        let (mut low, mut high) = (Nearing::from(0.0, near(&first)), Nearing::from(1.0, near(&last)));
        let narrow = PRECISION * FINEST as f64;
        let mut on_low = false;
        for round in 0..90 {
            let (from, to) = (low.now.0, high.now.0);
            if to - from <= narrow {
                break;
            }
            let from_low = if one_sided { first.worst.is_some() } else { on_low };
            let side = if from_low { &low } else { &high };
            let guess = side.meets().map(|guess| match guess {
                _ if one_sided && from_low && guess == to => to - narrow,
                _ if one_sided && !from_low && guess == from => from + narrow,
                _ => guess,
            });
            let guess = guess.filter(|guess| round % 4 != 3 && from < *guess && *guess < to);
            let part = guess.unwrap_or(from + (to - from) / 2.0);
            let point = self.point(along(part));
            if near(&point) < TOUCHES && guess.is_some() {
                return part;
            }
            on_low = match kind {
                Kind::Flip => point.class == first.class,
                Kind::Met => point.worst.is_none() == first.worst.is_none(),
            };
            let moved = if on_low { &mut low } else { &mut high };
            moved.come_to(part, near(&point));
        }
        low.now.0 + (high.now.0 - low.now.0) / 2.0
    }
}

/// The last two points on one side of a flip: where, and how near the outcome is to the other.
struct Nearing {
    before: Option<(f64, f64)>,
    now: (f64, f64),
}

impl Nearing {
    fn from(part: f64, near: f64) -> Nearing {
        Nearing {
            before: None,
            now: (part, near),
        }
    }

    fn come_to(&mut self, part: f64, near: f64) {
        self.before = Some(self.now);
        self.now = (part, near);
    }

    /// Where the line through both comes to 0.
    fn meets(&self) -> Option<f64> {
        let before = self.before?;
        let slope = (before.1 - self.now.1) / (before.0 - self.now.0);
        Some(self.now.0 - self.now.1 / slope).filter(|meets| meets.is_finite())
    }
}
