//! What comes of a stretch, and whether its books close.

use crate::outcome::Losses;
use crate::sides::Side;
use crate::stretch::{FirstBreak, Standing, Stretch, TheEnd};

/// What comes of a stretch.
pub(super) enum Comes {
    /// A side reaches its line.
    Break(FirstBreak),
    /// The integrator went no further than this from its beginning.
    Cut(f64, Standing),
    /// It comes to its end, so far from its beginning.
    Through(f64, Standing),
    /// It never ends.
    Forever(TheEnd),
}

impl Comes {
    /// What comes of a stretch of so great a length in which nobody breaks.
    pub(super) fn through(stretch: &Stretch, length: f64) -> Comes {
        if let Some(cut) = stretch.cut_short(length) {
            Comes::Cut(cut, stretch.at(cut))
        } else if length.is_finite() {
            Comes::Through(length, stretch.at(length))
        } else {
            Comes::Forever(stretch.endless())
        }
    }

    /// Whether nobody has appeared or vanished, and no number is none.
    pub(super) fn keeps_books(&self, stretch: &Stretch) -> bool {
        let keeps = |side: Side, length: f64, end: f64, losses: &Losses| {
            let came = stretch.conditions.flow[side];
            let there = stretch.start[side] + if came > 0.0 { came * length } else { 0.0 };
            let off = (there - end - losses.all).abs();
            end >= 0.0 && losses.all >= 0.0 && (off <= 1e-9 * there || there.is_infinite())
        };
        Side::BOTH.into_iter().all(|side| match self {
            Comes::Break(FirstBreak { time, standing, .. }) => {
                keeps(side, *time, standing.left[side], &standing.losses[side])
            }
            Comes::Cut(length, standing) | Comes::Through(length, standing) => {
                keeps(side, *length, standing.left[side], &standing.losses[side])
            }
            Comes::Forever(TheEnd { end, losses, .. }) => {
                let end = end[side].unwrap_or(f64::INFINITY);
                keeps(side, f64::INFINITY, end, &losses[side])
            }
        })
    }
}
