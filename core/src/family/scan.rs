//! Every change of a class along one number: scanned at given points, then halved down to the change itself.

use crate::number;
use crate::order::sort_by;

/// Where the class changes between two values that are as near to each other as was asked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Change<C> {
    /// The last value found before it.
    pub below: f64,
    /// The first value found behind it.
    pub above: f64,
    /// The class up to there.
    pub from: C,
    /// The class from there on.
    pub to: C,
}

impl<C> Change<C> {
    /// The value of the fewest digits between the two.
    pub fn at(&self) -> f64 {
        shortest_between(self.below, self.above)
    }
}

/// A bracket around one change or more.
#[derive(Clone, Copy, Debug)]
struct Bracket<C> {
    low: f64,
    high: f64,
    from: C,
    to: C,
}

impl<C> Bracket<C> {
    /// A change that is closed in on no further.
    fn change(self) -> Change<C> {
        Change {
            below: self.low,
            above: self.high,
            from: self.from,
            to: self.to,
        }
    }
}

/// A search for every change of a class, in slices.
///
/// A change and its undoing between two neighbouring points are not seen: that is the resolution.
#[derive(Clone, Debug)]
pub struct Scan<C> {
    points: Vec<f64>,
    classes: Vec<C>,
    brackets: Vec<Bracket<C>>,
    changes: Vec<Change<C>>,
    precision: f64,
    evaluations: u32,
}

/// With so many changes one is not told from the rounding any more: brackets are no longer taken apart.
const MOST_CHANGES: usize = 200;

/// Next to 0, where no value is near another in relative terms, values this part of the largest are the same.
const NOTHING: f64 = 1e-15;

impl<C: Copy + PartialEq> Scan<C> {
    /// A search over `points`, which are in order, each once; changes are closed in on to `precision`, relative.
    pub fn new(points: Vec<f64>, precision: f64) -> Scan<C> {
        Scan {
            classes: Vec::with_capacity(points.len()),
            points,
            brackets: Vec::new(),
            changes: Vec::new(),
            precision,
            evaluations: 0,
        }
    }

    /// Goes on with at most `most` evaluations of `class`; says whether all is found.
    pub fn go_on(&mut self, most: u32, mut class: impl FnMut(f64) -> C) -> bool {
        for _ in 0..most {
            if !self.step(&mut class) {
                break;
            }
        }
        self.is_done()
    }

    /// Ends the search with what is known: changes that are not closed in on yet are as wide as their brackets.
    pub fn end(&mut self) {
        self.points.truncate(self.classes.len());
        self.changes.extend(self.brackets.drain(..).map(Bracket::change));
    }

    /// Takes in that between `low` and `high`, two points of the same class with no change between them so far, there is
    /// another class at `middle`.
    pub fn found(&mut self, low: f64, middle: f64, high: f64, there: C) {
        let Some(around) = self.class_at(low) else { return };
        for (low, high, from, to) in [(low, middle, around, there), (middle, high, there, around)] {
            self.brackets.push(Bracket { low, high, from, to });
        }
    }

    /// The class at the last point seen up to `value`.
    fn class_at(&self, value: f64) -> Option<C> {
        let place = self.points.partition_point(|point| *point <= value);
        self.classes.get(place.checked_sub(1)?).copied()
    }

    /// Whether every change is found.
    pub fn is_done(&self) -> bool {
        self.classes.len() == self.points.len() && self.brackets.is_empty()
    }

    /// How often a class was asked for.
    pub fn evaluations(&self) -> u32 {
        self.evaluations
    }

    /// The points that have been looked at, with their classes.
    pub fn seen(&self) -> impl Iterator<Item = (f64, C)> {
        self.points.iter().copied().zip(self.classes.iter().copied())
    }

    /// The changes found so far, in order.
    pub fn changes(&self) -> Vec<Change<C>> {
        let mut changes = self.changes.clone();
        sort_by(&mut changes, |a, b| a.below.total_cmp(&b.below));
        changes
    }

    /// One evaluation at most; whether there was anything to do.
    fn step(&mut self, class: &mut impl FnMut(f64) -> C) -> bool {
        if let Some(bracket) = self.next_bracket() {
            let middle = middle(bracket.low, bracket.high, self.nothing());
            self.evaluations += 1;
            let between = class(middle);
            for half in [
                Bracket {
                    low: middle,
                    from: between,
                    ..bracket
                },
                Bracket {
                    high: middle,
                    to: between,
                    ..bracket
                },
            ] {
                if half.from != half.to {
                    self.brackets.push(half);
                }
            }
            return true;
        }
        let Some(point) = self.points.get(self.classes.len()).copied() else {
            return false;
        };
        self.evaluations += 1;
        let here = class(point);
        if let Some(before) = self.classes.last().copied().filter(|before| *before != here) {
            let low = self.points[self.classes.len() - 1];
            self.brackets.push(Bracket {
                low,
                high: point,
                from: before,
                to: here,
            });
        }
        self.classes.push(here);
        true
    }

    /// The next bracket that is not yet narrow enough; those that are become changes.
    fn next_bracket(&mut self) -> Option<Bracket<C>> {
        while let Some(bracket) = self.brackets.pop() {
            let Bracket { low, high, .. } = bracket;
            let near = (high - low) <= self.precision * low.abs().max(high.abs());
            let is_one_of_many = self.changes.len() + self.brackets.len() >= MOST_CHANGES;
            if !near && !is_one_of_many && high - low > self.nothing() && low.next_up() < high {
                return Some(bracket);
            }
            self.changes.push(bracket.change());
        }
        None
    }

    fn nothing(&self) -> f64 {
        let end = |point: Option<&f64>| point.map_or(0.0, |point| point.abs());
        NOTHING * end(self.points.first()).max(end(self.points.last()))
    }
}

/// Halves the ratio where the ends are far apart on one side of 0, else the difference.
fn middle(low: f64, high: f64, nothing: f64) -> f64 {
    let far = |near: f64, far: f64| far > 4.0 * near;
    if low >= 0.0 && far(low.max(nothing), high) {
        libm::sqrt(low.max(nothing)) * libm::sqrt(high)
    } else if high <= 0.0 && far(-high.min(-nothing), -low) {
        -libm::sqrt(-high.min(-nothing)) * libm::sqrt(-low)
    } else {
        0.5 * low + 0.5 * high
    }
}

/// The number of the fewest decimal digits from `low` to `high`, which are in order.
pub(crate) fn shortest_between(low: f64, high: f64) -> f64 {
    let middle = 0.5 * low + 0.5 * high;
    let written = (1..=17).map(|digits| number::rounded(middle, digits));
    let mut inside = written.filter(|value| low <= *value && *value <= high);
    inside.next().unwrap_or(middle)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::{Span, points};

    fn all(low: f64, high: f64, mut class: impl FnMut(f64) -> u8) -> (Vec<Change<u8>>, u32) {
        let mut scan = Scan::new(points(Span { low, high }, 200, &[]), 1e-12);
        let mut slices = 0;
        while !scan.go_on(7, &mut class) {
            slices += 1;
            assert!(slices < 1000);
        }
        (scan.changes(), scan.evaluations())
    }

    #[test]
    fn every_change_is_found_and_closed_in_on() {
        let bounds = [1e-6, 0.3, std::f64::consts::PI, 4.0, 607.204_915];
        let class = |value: f64| bounds.iter().filter(|bound| value >= **bound).count() as u8;
        let (changes, work) = all(0.0, 1000.0, class);
        assert_eq!(changes.len(), bounds.len());
        for (change, bound) in changes.iter().zip(bounds) {
            assert!((change.at() - bound).abs() <= 1e-12 * bound, "{bound}");
            assert!(change.below < bound && change.above >= bound);
        }
        assert_eq!(changes[3].at(), 4.0);
        assert!(work < 700, "{work}");
    }

    /// What changes with every last digit is told by some of its changes.
    #[test]
    fn noise_comes_to_an_end() {
        let class = |value: f64| (value.to_bits().wrapping_mul(0x9e37_79b9_7f4a_7c15) >> 62) as u8;
        let (changes, work) = all(0.0, 1000.0, class);
        assert!(
            changes.len() >= MOST_CHANGES && changes.len() < 1000,
            "{}",
            changes.len()
        );
        assert!(work < 2000, "{work}");
    }

    /// Two changes between the same two points, and a class of a single value between two others.
    #[test]
    fn changes_next_to_each_other_are_told_apart() {
        let (changes, _) = all(0.0, 1000.0, |value| {
            u8::from(value >= 500.1) + u8::from(value >= 500.2)
        });
        assert_eq!(changes.len(), 2);
        let (changes, _) = all(-5.0, 5.0, |value| match value {
            _ if value < 0.0 => 0,
            0.0 => 1,
            _ => 2,
        });
        assert_eq!(changes[0].from, 0);
        assert_eq!(changes[changes.len() - 1].to, 2);
        assert!(changes.iter().all(|change| change.at().abs() < 1e-11));
    }
}
