//! The least of a function between two values, by the golden section, in slices.

/// A search for the least of a function that falls and then rises between two values.
#[derive(Clone, Copy, Debug)]
pub(super) struct Lowest {
    low: f64,
    high: f64,
    inner: [Option<(f64, f64)>; 2],
    left: u32,
}

/// The smaller part of the golden section.
const SMALLER: f64 = 0.381_966_011_250_105_1;

impl Lowest {
    /// A search between two values that takes at most `evaluations`.
    pub(super) fn between(low: f64, high: f64, evaluations: u32) -> Lowest {
        Lowest {
            low,
            high,
            inner: [None; 2],
            left: evaluations,
        }
    }

    /// The values between which the least is known to be.
    pub(super) fn ends(&self) -> (f64, f64) {
        (self.low, self.high)
    }

    /// The next value at which the function is wanted; `None` once it is found.
    pub(super) fn next(&self) -> Option<f64> {
        let width = self.high - self.low;
        let narrow = width <= 1e-12 * self.low.abs().max(self.high.abs());
        if self.left == 0 || narrow {
            return None;
        }
        match self.inner {
            [None, _] => Some(self.low + width * SMALLER),
            [_, None] => Some(self.high - width * SMALLER),
            _ => None,
        }
    }

    /// Takes in the value of the function at [`Lowest::next`].
    pub(super) fn take(&mut self, value: f64, function: f64) {
        self.left = self.left.saturating_sub(1);
        let free = usize::from(self.inner[0].is_some());
        self.inner[free] = Some((value, function));
        if let [Some(first), Some(second)] = self.inner {
            if first.1 <= second.1 {
                self.high = second.0;
                self.inner = [None, Some(first)];
            } else {
                self.low = first.0;
                self.inner = [Some(second), None];
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_least_is_found() {
        let mut search = Lowest::between(0.0, 10.0, 60);
        let mut nearest = f64::INFINITY;
        while let Some(value) = search.next() {
            search.take(value, (value - std::f64::consts::E).abs());
            nearest = nearest.min((value - std::f64::consts::E).abs());
        }
        assert!(nearest < 1e-9, "{nearest:e}");
    }
}
