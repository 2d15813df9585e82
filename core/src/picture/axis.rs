//! An axis with its ticks at round numbers.

use crate::words::format::significant;

/// A round number on an axis.
#[derive(Clone, Debug, PartialEq)]
pub struct Tick {
    /// Where it stands.
    pub at: f64,
    /// How it is written.
    pub text: String,
}

/// An axis of a picture, from 0 unless it is said otherwise.
#[derive(Clone, Debug, PartialEq)]
pub struct Axis {
    /// What it measures, with its unit.
    pub label: String,
    /// Its beginning.
    pub from: f64,
    /// Its end.
    pub to: f64,
    /// Its round numbers.
    pub ticks: Vec<Tick>,
}

impl Axis {
    /// An axis from 0 to `to`, which is above 0, with about `count` ticks.
    pub fn new(label: String, to: f64, count: usize) -> Axis {
        Axis::between(label, 0.0, to, count)
    }

    /// An axis from `from` to `to`, which is above it, with about `count` ticks.
    pub fn between(label: String, from: f64, to: f64, count: usize) -> Axis {
        let step = round_step((to - from) / count as f64);
        let first = (from / step * (1.0 - 1e-12 * from.signum())).ceil();
        let last = (to / step * (1.0 + 1e-12 * to.signum())).floor();
        let tick = |number: usize| {
            let at = step * (first + number as f64);
            Tick {
                at,
                text: significant(at, 6),
            }
        };
        let steps = (last - first).max(0.0) as usize;
        Axis {
            label,
            from,
            to,
            ticks: (0..=steps.min(4 * count)).map(tick).collect(),
        }
    }
}

/// The least of 1, 2, 5 times a power of ten that is no less than `least`.
fn round_step(least: f64) -> f64 {
    let decade = libm::pow(10.0, libm::floor(libm::log10(least)));
    [1.0, 2.0, 5.0]
        .into_iter()
        .map(|digit| digit * decade)
        .find(|step| *step >= least)
        .unwrap_or(10.0 * decade)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_are_round_and_within() {
        for to in [1e-12, 0.3, 1.0, 7.7, 640.0, 1e9, 3e27] {
            let axis = Axis::new(String::new(), to, 5);
            assert!((3..=7).contains(&axis.ticks.len()), "{to}: {:?}", axis.ticks);
            assert!(axis.ticks.iter().all(|tick| tick.at <= to * (1.0 + 1e-12)));
        }
        let texts: Vec<String> = Axis::new(String::new(), 640.0, 5)
            .ticks
            .into_iter()
            .map(|tick| tick.text)
            .collect();
        assert_eq!(texts, ["0", "200", "400", "600"]);
    }
}
