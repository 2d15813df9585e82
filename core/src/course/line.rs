//! When a strength comes down to a line, on the series of a step.

use super::series::Expansion;
use crate::root::{newton, root};
use crate::sides::Side;

/// A line that a strength may come down to: its distance below the start, and how it rises.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    /// Where it stands at the start.
    pub at: f64,
    /// Its rise per unit of time.
    pub rising: f64,
}

/// The first time up to `end` at which a strength is down to a line from `at` on, all in the unit of the series.
///
/// A step is no longer than its series' radius of convergence over e², so the first terms rule it. Where the sum of all
/// terms that fall does not come to the line nothing does; where no slope is above 0 there is one root at most; else eight
/// parts of the step, and the low points in them, leave none unseen.
pub(super) fn reach_in(series: &Expansion, side: Side, at: f64, rising: f64, end: f64) -> Option<f64> {
    const PARTS: u32 = 8;
    let start = series.strength[side][0];
    if series.least_above(side, at, rising, end) > 1e-14 * start {
        return None;
    }
    let above = |t: f64| series.above(side, at, rising, t);
    // A side that begins with nobody, or at its line, may be on its way up.
    if start <= at && series.strength[side][1] <= rising {
        return Some(0.0);
    }
    if series.greatest_slope(side, rising, end) < 0.0 {
        if above(end).0 > 0.0 {
            return None;
        }
        let first = (at - start) / (series.strength[side][1] - rising);
        return Some(newton(0.0, end, first, &above));
    }
    for part in 0..PARTS {
        let low = end * f64::from(part) / f64::from(PARTS);
        let high = if part + 1 == PARTS {
            end
        } else {
            end * f64::from(part + 1) / f64::from(PARTS)
        };
        let dip = if above(low).1 < 0.0 && above(high).1 > 0.0 {
            root(low, high, &|t| above(t).1)
        } else {
            None
        };
        for (from, to) in [(low, dip.unwrap_or(high)), (dip.unwrap_or(high), high)] {
            if above(to).0 <= 0.0 {
                return Some(root(from, to, &|t| above(t).0).unwrap_or(from));
            }
        }
    }
    None
}
