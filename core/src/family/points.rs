//! The values at which a number is first looked at: even steps, and even ratios, so that small and large scales are seen.

use crate::order::sort_by;

/// A stretch of values, both ends included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Span {
    /// The least.
    pub low: f64,
    /// The greatest.
    pub high: f64,
}

/// The smallest values of the even ratios, as a part of the larger end, where the span holds 0.
const SMALLEST: f64 = 1e-9;

impl Span {
    /// Its larger end by magnitude.
    pub fn scale(&self) -> f64 {
        self.low.abs().max(self.high.abs())
    }

    fn has(&self, value: f64) -> bool {
        self.low <= value && value <= self.high
    }
}

/// `even` steps and `even` ratios over `span` with both its ends, and those of `besides` that lie in it; in order, each
/// once.
///
/// The ratios run from a billionth of the larger end, or from the end next to 0 where that is larger, on either side of 0.
pub fn points(span: Span, even: u32, besides: &[f64]) -> Vec<f64> {
    let width = span.high - span.low;
    let part = |step: u32| f64::from(step) / f64::from(even.max(1));
    let mut points = vec![span.low, span.high];
    points.extend((1..even).map(|step| span.low + width * part(step)));
    for (sign, to) in [(1.0, span.high), (-1.0, -span.low)] {
        if to > 0.0 {
            let from = (to * SMALLEST).max(if sign > 0.0 { span.low } else { -span.high });
            let ratio = libm::log(to / from);
            points.extend((0..even).map(|step| sign * from * libm::exp(ratio * part(step))));
        }
    }
    points.extend_from_slice(besides);
    points.retain(|point| span.has(*point));
    sort_by(&mut points, f64::total_cmp);
    points.dedup();
    points
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn small_and_large_scales_are_seen() {
        let span = Span {
            low: -10.0,
            high: 1000.0,
        };
        let all = points(span, 100, &[777.0, 2000.0]);
        assert_eq!((all[0], all[all.len() - 1]), (-10.0, 1000.0));
        assert!(all.contains(&777.0) && !all.contains(&2000.0));
        assert!(
            all.windows(2)
                .all(|pair| pair[0] < pair[1] && pair[1] - pair[0] <= 10.2)
        );
        for decade in [1e-5, 1e-3, 0.1] {
            let near = all.iter().filter(|point| (decade..2.0 * decade).contains(*point));
            assert!(near.count() >= 2, "{decade}");
        }
        assert!(all.iter().any(|point| (-1e-3..0.0).contains(point)));
    }
}
