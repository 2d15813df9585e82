//! How often the address may be written.
//!
//! Browsers refuse a page that writes its history too often: the strictest known takes 100 writes in 30 seconds. What is
//! not yet written is what a reload loses, so a burst of keystrokes is written as it comes, and only who types on and on
//! is kept to the pace that every browser bears.

/// The least time between two writes in the long run, in milliseconds.
const APART: f64 = 350.0;

/// How many writes may follow one another at once, after a rest.
const BURST: f64 = 10.0;

/// How many refusals in a row are answered by another try without a change; the waits between them double. Browsers
/// that throttle forget within half a minute; a sandbox never gives way.
const MOST_REFUSALS: u32 = 8;

/// When the next write may come. Times are in milliseconds, on any one clock.
#[derive(Clone, Debug)]
pub(crate) struct Pace {
    /// The moment from which on a whole burst may follow again.
    rested_at: f64,
    /// When the last try was.
    tried_at: f64,
    /// How many tries were refused since the last that held.
    refusals: u32,
}

impl Pace {
    /// At rest.
    pub(crate) fn new() -> Pace {
        Pace {
            rested_at: f64::NEG_INFINITY,
            tried_at: f64::NEG_INFINITY,
            refusals: 0,
        }
    }

    /// How long to wait from `now` until the next write.
    pub(crate) fn wait(&self, now: f64) -> f64 {
        let rest = self.rested_at - (BURST - 1.0) * APART;
        let refused = match self.refusals {
            0 => f64::NEG_INFINITY,
            refusals => self.tried_at + APART * 2_f64.powi(refusals.min(MOST_REFUSALS) as i32),
        };
        (rest.max(refused) - now).max(0.0)
    }

    /// Whether trying again without a change is of no use.
    pub(crate) fn is_given_up(&self) -> bool {
        self.refusals > MOST_REFUSALS
    }

    /// A write was tried at `now`, and it held or did not.
    pub(crate) fn tried(&mut self, now: f64, held: bool) {
        self.rested_at = self.rested_at.max(now) + APART;
        self.tried_at = now;
        self.refusals = if held { 0 } else { self.refusals.saturating_add(1) };
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Writes whenever the pace allows it, from 0 to `end`; the moments at which it did.
    fn writes(pace: &mut Pace, end: f64) -> Vec<f64> {
        let mut moments = Vec::new();
        let mut now = 0.0;
        while now <= end {
            if pace.wait(now) <= 0.0 {
                pace.tried(now, true);
                moments.push(now);
            }
            now += 1.0;
        }
        moments
    }

    #[test]
    fn a_burst_is_written_as_it_comes() {
        let mut pace = Pace::new();
        for keystroke in 0..10 {
            let now = 1000.0 + f64::from(keystroke);
            assert_eq!(pace.wait(now), 0.0, "keystroke {keystroke}");
            pace.tried(now, true);
        }
        let wait = pace.wait(1010.0);
        assert!((300.0..=350.0).contains(&wait), "the eleventh waits {wait} ms");
        assert_eq!(pace.wait(1010.0 + 10.0 * APART), 0.0);
    }

    #[test]
    fn the_strictest_browser_bears_it() {
        let moments = writes(&mut Pace::new(), 120_000.0);
        for (first, from) in moments.iter().enumerate() {
            let within = moments[first..]
                .iter()
                .take_while(|moment| **moment < from + 30_000.0)
                .count();
            assert!(within < 100, "{within} writes within 30 s");
        }
    }

    #[test]
    fn refusals_are_answered_by_longer_and_longer_waits() {
        let mut pace = Pace::new();
        let mut last = 0.0;
        for _ in 0..MOST_REFUSALS {
            pace.tried(0.0, false);
            assert!(pace.wait(0.0) > last && !pace.is_given_up());
            last = pace.wait(0.0);
        }
        pace.tried(0.0, false);
        assert!(pace.is_given_up());
        pace.tried(1.0, true);
        assert!(!pace.is_given_up() && pace.wait(10_000.0) == 0.0);
    }
}
