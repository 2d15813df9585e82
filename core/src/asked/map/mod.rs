//! Two numbers in question: a map of how it comes out, and the lines along which that flips.
//!
//! Points of a lattice are fought coarsely first. A cell whose corners come out alike is taken to be alike within; where they
//! differ it is halved three times, so that next to a flip the map is as fine as 304 × 304 points at a few per cent of their
//! work. The middles of the coarse cells are looked at too, for islands. Every flip is then closed in on along the edge of the
//! lattice that it crosses, and the crossings are chained to lines.

mod contour;
mod lattice;
mod line;
mod wanted;

pub use lattice::FINEST;
pub use wanted::Miss;

use super::MOST_EVALUATIONS;
use super::span::{Why, span};
use super::story::{Sample, Story, Worst};
use crate::family::{Family, Span, Tally};
use crate::fight::Effort;
use crate::goals::Goal;
use crate::order::sort_by;
use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::pairs::Pairs;
use crate::sides::Both;
use crate::slots::{Slot, slots};
use crate::statement::{Statement, Values};
use lattice::{At, BASE, Lattice};
use line::{Edge, Traced, ends};

/// How near, as a part of the axis, a flip is closed in on.
const PRECISION: f64 = 1e-12;

/// How near an outcome must come to another, as a part of what is committed, to be taken as where it flips.
const TOUCHES: f64 = 1e-12;

/// What is read of an outcome besides its story.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Second {
    /// When it ends in a break.
    Time,
    /// What is left of X.
    LeftX,
    /// What is left of Y.
    LeftY,
    /// Y's losses for each of X's.
    ExchangeRatio,
}

impl Second {
    /// All of them, in the order of the page.
    pub const ALL: [Second; 4] = [Second::Time, Second::LeftX, Second::LeftY, Second::ExchangeRatio];
}

/// What is known of one point.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Point {
    class: u8,
    near: f64,
    /// What is missing, where conditions are not met.
    worst: Option<Worst>,
    time: Option<f64>,
    end: Both<f64>,
    ratio: Option<f64>,
}

impl Point {
    /// What is told apart: how it comes out, and whether all conditions are met.
    fn told(&self) -> (u8, bool) {
        (self.class, self.worst.is_none())
    }

    fn second(&self, second: Second) -> Option<f64> {
        let value = match second {
            Second::Time => self.time,
            Second::LeftX => Some(self.end.x),
            Second::LeftY => Some(self.end.y),
            Second::ExchangeRatio => self.ratio,
        };
        value.filter(|value| value.is_finite())
    }
}

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
        let engagement = statement.engagement(&Values::new());
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
            let [width, _] = self.spans.map(|span| span.high - span.low);
            let aside = self.outcome([values[0] + width * ASIDE, values[1]]);
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

    /// The part of an edge at which the outcome flips, or conditions begin to be met.
    ///
    /// How near the outcome is to the other falls smoothly to 0 on either side, with a bend between them: so the next guess
    /// is by the secant through the last two points of one side, and every fourth a halving, which is all that helps at a
    /// jump. What is missing of a condition is known on one side alone: a guess from there that went too far is tried again a
    /// hair less far.
    fn close_in(&mut self, kind: Kind, edge: Edge) -> f64 {
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
            Some(worst) => worst.part,
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

/// How far, as a part of the axis, another place is looked at in place of one on a tie.
const ASIDE: f64 = 1e-9;

/// Whether the sides are even, to rounding, and not past their lines from the beginning.
fn is_tie(outcome: &Outcome) -> bool {
    let parity = outcome.ended == Ended::Limit && outcome.to_the_last == Some(ToTheLast::Parity);
    parity || outcome.breaks == Breaks::Both && outcome.time > Some(0.0)
}

fn parts(at: At) -> [f64; 2] {
    [line::part(at.0), line::part(at.1)]
}
