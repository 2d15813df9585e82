//! Two numbers in question: a map of how it comes out, and the lines along which that flips.
//!
//! Points of a lattice are fought coarsely first. A cell whose corners come out alike is taken to be alike within; where they
//! differ it is halved three times, so that next to a flip the map is as fine as 304 × 304 points at a few per cent of their
//! work. The middles of the coarse cells are looked at too, for islands. Every flip is then closed in on along the edge of the
//! lattice that it crosses, and the crossings are chained to lines.

mod closing;
mod contour;
mod lattice;
mod line;
mod point;
mod wanted;

pub use lattice::FINEST;
pub use point::Second;
pub use wanted::Miss;

use super::MOST_EVALUATIONS;
use super::span::{Why, span};
use super::story::{Sample, Story};
use crate::family::{Family, Span, Tally};
use crate::fight::Effort;
use crate::goals::Goal;
use crate::order::sort_by;
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::slots::{Slot, slots};
use crate::statement::Statement;
use lattice::{At, BASE, Lattice};
use line::{Edge, Traced, ends};
use point::{ASIDE, Point, is_tie};

/// A line along which the outcome flips.
#[derive(Clone, Debug, PartialEq)]
pub struct Flip {
    /// How it comes out on its two sides.
    pub between: [Story; 2],
    /// Its points, in the values of the two numbers.
    pub points: Vec<(f64, f64)>,
}

/// What is done next: places to fight at, or edges to close in on, the last first.
#[derive(Clone, Debug)]
enum Stage {
    Fighting {
        places: Vec<At>,
        /// Then the cells of so many steps are halved where they differ, and finer ones.
        step: usize,
        /// Whether islands are looked for behind that.
        islands: bool,
    },
    /// Looking at the middles of coarse cells; with what is to be looked at around those that come out otherwise.
    Islands {
        middles: Vec<At>,
        around: Vec<At>,
    },
    Closing(Vec<(Kind, Edge)>),
    Done,
}

/// What a line is between.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Kind {
    /// Two stories.
    Flip,
    /// Where all conditions are met, and where they are not.
    Met,
}

/// The search for the map of two numbers.
#[derive(Clone, Debug)]
pub struct Chart {
    slots: [Slot; 2],
    spans: [Span; 2],
    whys: [Why; 2],
    family: Family<2>,
    lattice: Lattice<Point>,
    stories: Vec<Story>,
    goals: Vec<Goal>,
    stage: Stage,
    flips: Traced,
    met: Traced,
    tally: Tally,
    most: u64,
    cut_short: bool,
}

impl Chart {
    /// The map of the numbers of `statement` that are in question; `None` unless two are.
    ///
    /// `pairs` are those that `statement` was read from.
    pub fn new(pairs: &Pairs, statement: &Statement) -> Option<Chart> {
        let asked: Vec<Slot> = slots(pairs, statement)
            .into_iter()
            .filter(|slot| slot.quantity.is_question())
            .collect();
        let slots: [Slot; 2] = asked.try_into().ok()?;
        let engagement = statement.engagement();
        let looked = [span(&slots[0], &engagement), span(&slots[1], &engagement)];
        let mut places = lattice::coarsest();
        places.reverse();
        Some(Chart {
            family: Family::new(engagement, [slots[0].place, slots[1].place]),
            spans: looked.map(|looked| looked.0),
            whys: looked.map(|looked| looked.1),
            slots,
            lattice: Lattice::new(),
            stories: Vec::new(),
            stage: Stage::Fighting {
                places,
                step: FINEST / BASE,
                islands: true,
            },
            goals: statement.so_that.clone(),
            flips: Traced::default(),
            met: Traced::default(),
            tally: Tally::default(),
            most: MOST_EVALUATIONS,
            cut_short: false,
        })
    }

    /// The two numbers.
    pub fn slots(&self) -> &[Slot; 2] {
        &self.slots
    }

    /// Where they are looked at.
    pub fn spans(&self) -> [Span; 2] {
        self.spans
    }

    /// Why there.
    pub fn whys(&self) -> [Why; 2] {
        self.whys
    }

    /// How many fights it took so far.
    pub fn fights(&self) -> u32 {
        self.tally.fights
    }

    /// Whether it was ended before all was looked at, since the fights are so dear.
    pub fn is_cut_short(&self) -> bool {
        self.cut_short
    }

    /// The same search, to end when its fights have taken so many evaluations instead of [`MOST_EVALUATIONS`].
    pub fn with_at_most(mut self, evaluations: u64) -> Chart {
        self.most = evaluations;
        self
    }

    /// Ends the search with what is known: a flip that is not closed in on yet is put half-way.
    fn cut_short(&mut self) {
        if matches!(self.stage, Stage::Fighting { .. } | Stage::Islands { .. }) {
            self.trace();
        }
        self.cut_short = true;
        self.stage = Stage::Done;
    }

    /// Whether the coarsest lattice is filled, so that there is something to show.
    pub fn has_ground(&self) -> bool {
        self.lattice.get((FINEST, FINEST)).is_some()
    }

    /// The part of the work that is surely behind, 0 to 1.
    pub fn progress(&self) -> f64 {
        (f64::from(self.tally.fights) / 9000.0).min(0.99)
    }

    /// Goes on with about `most` fights; says whether all is there.
    pub fn go_on(&mut self, most: u32) -> bool {
        let until = self.tally.fights.saturating_add(most);
        while self.tally.fights < until && !matches!(self.stage, Stage::Done) {
            self.step();
            if self.tally.evaluations > self.most && !matches!(self.stage, Stage::Done) {
                self.cut_short();
            }
        }
        matches!(self.stage, Stage::Done)
    }

    fn step(&mut self) {
        match &mut self.stage {
            Stage::Fighting {
                places,
                step,
                islands,
            } => match places.pop() {
                Some(at) => self.fight_at(at),
                None => {
                    let (step, islands) = (*step, *islands);
                    self.stage = self.finer(step, islands);
                }
            },
            Stage::Islands { middles, around } => match middles.pop() {
                Some(at) => self.look_for_island(at),
                None => {
                    self.stage = Stage::Fighting {
                        places: std::mem::take(around),
                        step: FINEST / BASE / 2,
                        islands: false,
                    }
                }
            },
            Stage::Closing(edges) => match edges.pop() {
                Some((kind, edge)) => {
                    let part = self.close_in(kind, edge);
                    let traced = match kind {
                        Kind::Flip => &mut self.flips,
                        Kind::Met => &mut self.met,
                    };
                    traced.put(edge, part);
                }
                None => self.stage = Stage::Done,
            },
            Stage::Done => {}
        }
    }

    fn fight_at(&mut self, at: At) {
        if self.lattice.get(at).is_none() {
            let point = self.point(parts(at));
            self.lattice.put(at, point);
        }
    }

    fn finer(&mut self, step: usize, islands: bool) -> Stage {
        if step > 1 {
            return Stage::Fighting {
                places: lattice::halving(&self.lattice, step, |a, b| a.told() == b.told()),
                step: step / 2,
                islands,
            };
        }
        if islands {
            return Stage::Islands {
                middles: lattice::middles(),
                around: Vec::new(),
            };
        }
        self.trace();
        let flips = self.flips.edges().map(|edge| (Kind::Flip, edge));
        let met = self.met.edges().map(|edge| (Kind::Met, edge));
        Stage::Closing(flips.chain(met).collect())
    }

    /// The lines, as far as the lattice is known.
    fn trace(&mut self) {
        self.flips = Traced::of(&self.lattice, |point| point.class);
        self.met = Traced::of(&self.lattice, |point| u8::from(point.worst.is_none()));
    }

    /// Looks at the middle of a coarse cell that was not halved; where it comes out otherwise than around it, the cell is
    /// looked at as closely as the others.
    fn look_for_island(&mut self, at: At) {
        if self.lattice.get(at).is_some() {
            return;
        }
        let half = FINEST / BASE / 2;
        let (across, up) = (at.0 - half, at.1 - half);
        let outside = self.lattice.get((across, up)).map(|point| point.told());
        let middle = self.point(parts(at));
        if Some(middle.told()) == outside {
            // Not put into the lattice: a middle without its edges would make a cell that is known in part.
            return;
        }
        self.lattice.put(at, middle);
        if let Stage::Islands { around, .. } = &mut self.stage {
            around.extend([
                (across + half, up),
                (across, up + half),
                (across + 2 * half, up + half),
                (across + half, up + 2 * half),
            ]);
        }
    }

    /// The values at parts of both axes.
    pub fn values(&self, parts: [f64; 2]) -> [f64; 2] {
        let value = |axis: usize| {
            let Span { low, high } = self.spans[axis];
            let value = low + (high - low) * parts[axis];
            // An end that the number cannot be is looked at from next to it.
            if self.slots[axis].limits.hold(value) {
                value
            } else if parts[axis] < 0.5 {
                low + (high - low) * 1e-9
            } else {
                high - (high - low) * 1e-9
            }
        };
        [value(0), value(1)]
    }

    /// The outcome with two values.
    pub fn outcome(&mut self, values: [f64; 2]) -> Outcome {
        self.tally.fight(self.family.member(values), Effort::Outcome)
    }

    fn point(&mut self, parts: [f64; 2]) -> Point {
        let values = self.values(parts);
        let mut outcome = self.outcome(values);
        if is_tie(&outcome) {
            // A tie is a line without width: a place on it counts to one of its sides.
            let Span { low, high } = self.spans[0];
            let step = (high - low) * ASIDE;
            let beside = if values[0] + step <= high { step } else { -step };
            let aside = self.outcome([values[0] + beside, values[1]]);
            if !is_tie(&aside) {
                outcome = aside;
            }
        }
        let sample = Sample::of(values[0], self.family.member(values), &outcome, &self.goals);
        Point {
            class: self.class(sample.story),
            near: sample.near,
            worst: sample.worst,
            time: sample.time,
            end: sample.end,
            ratio: outcome.loss_exchange_ratio,
        }
    }

    fn class(&mut self, story: Story) -> u8 {
        let known = self.stories.iter().position(|known| *known == story);
        let place = known.unwrap_or_else(|| {
            self.stories.push(story);
            self.stories.len() - 1
        });
        u8::try_from(place).unwrap_or(u8::MAX)
    }

    /// How it comes out in a cell of the finest lattice; `None` before the coarsest is filled.
    pub fn story_at(&self, across: usize, up: usize) -> Option<usize> {
        self.nearest_to((across, up))
            .map(|point| usize::from(point.class))
    }

    fn nearest_to(&self, at: At) -> Option<Point> {
        let (cell, _) = self.lattice.cell_around(at)?;
        self.lattice.get(at).or(self.lattice.get(cell))
    }

    /// How much of the map comes out in each way, the most first; empty before there is something to show.
    pub fn shares(&self) -> Vec<(Story, f64)> {
        if !self.has_ground() {
            return Vec::new();
        }
        let mut counts = vec![0_u32; self.stories.len()];
        for (across, up) in lattice::cells(2) {
            if let Some(count) = self.story_at(across, up).and_then(|story| counts.get_mut(story)) {
                *count += 1;
            }
        }
        let all: u32 = counts.iter().sum();
        let share = |count: u32| f64::from(count) / f64::from(all.max(1));
        let stories = self.stories.iter().copied().zip(counts);
        let mut shares: Vec<(Story, f64)> = stories
            .filter(|(_, count)| *count > 0)
            .map(|(story, count)| (story, share(count)))
            .collect();
        sort_by(&mut shares, |a, b| b.1.total_cmp(&a.1));
        shares
    }

    /// The stories that were met, in the order in which they were.
    pub fn stories(&self) -> &[Story] {
        &self.stories
    }

    /// The lines along which the outcome flips.
    pub fn flips(&self) -> Vec<Flip> {
        let chains = self.flips.chains().into_iter();
        let story = |at: At| {
            self.stories
                .get(usize::from(self.lattice.get(at)?.class))
                .copied()
        };
        chains
            .filter_map(|chain| {
                let [begin, end] = ends(*chain.first()?);
                let points = chain
                    .iter()
                    .map(|edge| self.crossing(&self.flips, *edge))
                    .collect();
                Some(Flip {
                    between: [story(begin)?, story(end)?],
                    points,
                })
            })
            .collect()
    }

    fn crossing(&self, traced: &Traced, edge: Edge) -> (f64, f64) {
        let values = self.values(traced.place(edge).into());
        (values[0], values[1])
    }

    /// The least and the greatest value of a second reading; `None` where it has none.
    pub fn range(&self, second: Second) -> Option<(f64, f64)> {
        let points = lattice::coarsest()
            .into_iter()
            .filter_map(|at| self.lattice.get(at));
        let values = points.filter_map(|point| point.second(second));
        values.fold(None, |range, value| {
            let (low, high) = range.unwrap_or((value, value));
            Some((low.min(value), high.max(value)))
        })
    }

    /// Lines along which a second reading has the value `level`, in the values of the two numbers.
    pub fn contour(&self, second: Second, level: f64) -> Vec<Vec<(f64, f64)>> {
        let pieces = contour::contour(
            &self.lattice,
            |a, b| a.class == b.class,
            |point| point.second(second),
            level,
        );
        let value = |(across, up): (f64, f64)| {
            let values = self.values([across / FINEST as f64, up / FINEST as f64]);
            (values[0], values[1])
        };
        let chains = contour::chained(&pieces).into_iter();
        chains
            .map(|chain| chain.into_iter().map(value).collect())
            .collect()
    }
}

fn parts(at: At) -> [f64; 2] {
    [line::part(at.0), line::part(at.1)]
}
