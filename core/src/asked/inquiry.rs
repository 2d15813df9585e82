//! The way to the answer of one question, in slices as small as is wanted.

use super::MOST_EVALUATIONS;
use super::answer::{Asked, Boundary, Met, Nearest, Segment};
use super::golden::Lowest;
use super::outright::outright;
use super::span::{Why, span};
use super::story::{Class, Sample};
use crate::family::{Change, Family, Scan, Span, Tally, points};
use crate::fight::Effort;
use crate::goals::Goal;
use crate::order::sort_by;
use crate::pairs::Pairs;
use crate::slots::{Slot, slots};
use crate::statement::Statement;

/// Even steps, and as many even ratios, at which a number in question is looked at first.
pub const STEPS: u32 = 240;

/// How near, relative, a change is closed in on.
const PRECISION: f64 = 1e-13;

/// Places at which the outcome comes near to another, and is looked at more closely, at most.
const MOST_DIPS: usize = 12;

/// How near, as a part of what is committed, an outcome must come to another for that.
const NEAR: f64 = 0.25;

/// Evaluations of one look more closely.
const DIP: u32 = 30;

/// Evaluations for the value that comes nearest where none meets the conditions.
const NEAREST: u32 = 50;

/// What is done next.
#[derive(Clone, Debug)]
enum Stage {
    /// Looking along the number.
    Scanning,
    /// Looking more closely where the outcome comes near to another, the last first.
    Dipping(Vec<Lowest>),
    /// Looking at the very values at which it changes.
    Touching(Vec<f64>),
    /// Looking for the value that comes nearest.
    Nearing(Lowest),
    Done,
}

/// The search for the answer to the question of one number.
#[derive(Clone, Debug)]
pub struct Inquiry {
    slot: Slot,
    span: Span,
    why: Why,
    looks: Looks,
    scan: Scan<Class>,
    most: u64,
    cut_short: bool,
    stage: Stage,
}

impl Inquiry {
    /// The search for the number of `statement` that is in question; `None` unless one and only one is.
    ///
    /// `pairs` are those that `statement` was read from.
    pub fn new(pairs: &Pairs, statement: &Statement) -> Option<Inquiry> {
        let mut asked = slots(pairs, statement)
            .into_iter()
            .filter(|slot| slot.quantity.is_question());
        let (slot, None) = (asked.next()?, asked.next()) else {
            return None;
        };
        let engagement = statement.engagement();
        let (span, why) = span(&slot, &engagement);
        let mut besides: Vec<f64> = slot.value().into_iter().collect();
        if slot.is_time() {
            besides.extend(
                crate::schedule::instants(&engagement)
                    .iter()
                    .map(|instant| instant.time),
            );
        }
        let mut points = points(span, STEPS, &besides);
        points.retain(|point| slot.limits.hold(*point));
        Some(Inquiry {
            looks: Looks {
                family: Family::new(engagement, [slot.place]),
                goals: statement.so_that.clone(),
                samples: Vec::new(),
                tally: Tally::default(),
            },
            scan: Scan::new(points, PRECISION),
            most: MOST_EVALUATIONS,
            cut_short: false,
            stage: Stage::Scanning,
            slot,
            span,
            why,
        })
    }

    /// Goes on with about `most` fights; says whether the answer is there.
    pub fn go_on(&mut self, most: u32) -> bool {
        let mut left = most;
        while left > 0 && !matches!(self.stage, Stage::Done) {
            left -= 1;
            self.step();
            if self.looks.tally.evaluations > self.most && !matches!(self.stage, Stage::Done) {
                self.cut_short();
            }
        }
        matches!(self.stage, Stage::Done)
    }

    /// The same search, to end when its fights have taken so many evaluations instead of [`MOST_EVALUATIONS`].
    pub fn with_at_most(mut self, evaluations: u64) -> Inquiry {
        self.most = evaluations;
        self
    }

    /// Ends the search with what is known; what is not looked at yet is no part of what was asked any more.
    fn cut_short(&mut self) {
        self.scan.end();
        if matches!(self.stage, Stage::Scanning) {
            let last = self.scan.seen().last();
            self.span.high = last.map_or(self.span.high, |(value, _)| value);
        }
        self.cut_short = true;
        self.stage = Stage::Done;
    }

    /// How many fights it took so far.
    pub fn fights(&self) -> usize {
        self.looks.samples.len()
    }

    /// The part of the work that is surely behind, 0 to 1.
    pub fn progress(&self) -> f64 {
        let expected = f64::from(2 * STEPS) + 150.0;
        (self.looks.samples.len() as f64 / expected).min(0.99)
    }

    fn step(&mut self) {
        match &mut self.stage {
            Stage::Scanning => {
                if self.scan.go_on(1, |value| self.looks.at(value).class()) {
                    self.stage = Stage::Dipping(self.dips());
                }
            }
            Stage::Dipping(dips) => match dips.last().map(Lowest::next) {
                Some(Some(value)) => self.dip(value),
                Some(None) => drop(dips.pop()),
                None if !self.scan.is_done() => {
                    self.scan.go_on(1, |value| self.looks.at(value).class());
                }
                None => {
                    self.stage = Stage::Touching(self.boundaries().iter().map(|(_, at, _)| *at).collect())
                }
            },
            Stage::Touching(values) => match values.pop() {
                Some(value) => {
                    self.looks.at(value);
                }
                None => self.stage = self.nearing(),
            },
            Stage::Nearing(search) => match search.next() {
                Some(value) => {
                    let sample = self.looks.at(value);
                    search.take(value, sample.worst.map_or(0.0, |worst| worst.short.part));
                }
                None => self.stage = Stage::Done,
            },
            Stage::Done => {}
        }
    }

    /// Brackets in which the outcome comes near to another and away again, without getting there at the points seen.
    fn dips(&self) -> Vec<Lowest> {
        let sorted = self.sorted();
        let mut dips: Vec<(f64, Lowest)> = sorted
            .windows(3)
            .filter(|three| three[0].class() == three[1].class() && three[1].class() == three[2].class())
            .filter(|three| three[1].depth() < three[0].depth() && three[1].depth() <= three[2].depth())
            .filter(|three| three[1].depth() < NEAR)
            .map(|three| {
                let dip = Lowest::between(three[0].value, three[2].value, DIP);
                (three[1].depth(), dip)
            })
            .collect();
        sort_by(&mut dips, |a, b| a.0.total_cmp(&b.0));
        dips.truncate(MOST_DIPS);
        dips.into_iter().map(|(_, dip)| dip).collect()
    }

    /// One evaluation in the last dip; where another outcome is found the dip is over, and the scan has two changes more.
    fn dip(&mut self, value: f64) {
        let around = self
            .looks
            .samples
            .iter()
            .copied()
            .filter(|sample| sample.value < value)
            .max_by(|a, b| a.value.total_cmp(&b.value));
        let sample = self.looks.at(value);
        let Stage::Dipping(dips) = &mut self.stage else {
            return;
        };
        let Some(dip) = dips.last_mut() else { return };
        let other = around.is_some_and(|around| around.class() != sample.class());
        if other {
            let (low, high) = dip.ends();
            dips.pop();
            self.scan.found(low, value, high, sample.class());
        } else {
            dip.take(value, sample.depth());
        }
    }

    fn nearing(&self) -> Stage {
        if self.looks.goals.is_empty() || self.looks.samples.iter().any(|sample| sample.met) {
            return Stage::Done;
        }
        let sorted = self.sorted();
        let missed = |at: &usize| sorted[*at].missed();
        let Some(least) = (0..sorted.len()).min_by(|a, b| missed(a).total_cmp(&missed(b))) else {
            return Stage::Done;
        };
        let low = sorted[least.saturating_sub(1)].value;
        let high = sorted[(least + 1).min(sorted.len() - 1)].value;
        Stage::Nearing(Lowest::between(low, high, NEAREST))
    }

    fn sorted(&self) -> Vec<Sample> {
        let mut sorted = self.looks.samples.clone();
        sort_by(&mut sorted, |a, b| a.value.total_cmp(&b.value));
        sorted
    }

    /// Every change with the value at which it is said to be, and whether that is by formula.
    fn boundaries(&self) -> Vec<(Change<Class>, f64, bool)> {
        let changes = self.scan.changes().into_iter();
        changes
            .map(|change| {
                let by_formula = self.by_formula(&change);
                (change, by_formula.unwrap_or(change.at()), by_formula.is_some())
            })
            .collect()
    }

    /// The change by the state equation, where it is one from one side's break to the other's and has a formula.
    fn by_formula(&self, change: &Change<Class>) -> Option<f64> {
        let (from, to) = (change.from.story.prevails, change.to.story.prevails);
        if from == to {
            return None;
        }
        let mut family = self.looks.family.clone();
        let near = outright(family.member([change.at()]), self.slot.place)?;
        let slack = 1e-9 * near.abs();
        (change.below - slack <= near && near <= change.above + slack).then_some(near)
    }

    /// The answer, as far as it has come.
    pub fn answer(&self) -> Asked {
        let samples = self.sorted();
        let boundaries = self.boundaries();
        let crossing = |change: &Change<Class>| {
            let at = |value: f64| samples.iter().find(|sample| sample.value == value);
            match (at(change.below), at(change.above)) {
                (Some(below), Some(above)) => below.goes_over_into(above),
                _ => false,
            }
        };
        let boundary = |(change, at, by_formula): &(Change<Class>, f64, bool)| Boundary {
            at: *at,
            jump: !by_formula && !crossing(change),
            by_formula: *by_formula,
        };
        let first = samples.first().map(Sample::class);
        let told: Vec<(Class, Class, Boundary)> = boundaries
            .iter()
            .map(|one| (one.0.from, one.0.to, boundary(one)))
            .collect();
        let outcomes = first.map_or(Vec::new(), |first| Segment::all(self.span, first.story, &told));
        let met = (!self.looks.goals.is_empty()).then(|| {
            let first = first.is_some_and(|first| first.met);
            Met::all(self.span, first, &told, &samples)
        });
        let nearest = match &met {
            Some(met) if met.is_empty() => Nearest::of(&samples),
            _ => None,
        };
        Asked {
            slot: self.slot.clone(),
            goals: self.looks.goals.clone(),
            span: self.span,
            why: self.why,
            outcomes,
            met,
            nearest,
            fights: self.looks.samples.len(),
            cut_short: self.cut_short,
            samples,
        }
    }
}

/// The family along the number, and what was seen of it.
#[derive(Clone, Debug)]
struct Looks {
    family: Family<1>,
    goals: Vec<Goal>,
    samples: Vec<Sample>,
    tally: Tally,
}

impl Looks {
    fn at(&mut self, value: f64) -> Sample {
        let engagement = self.family.member([value]);
        let outcome = self.tally.fight(engagement, Effort::Outcome);
        let sample = Sample::of(value, engagement, &outcome, &self.goals);
        self.samples.push(sample);
        sample
    }
}
