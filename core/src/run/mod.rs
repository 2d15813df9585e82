//! A fight in the making: through the instants one after another, and along the stretches between them.

mod comes;
mod pinned;

use crate::conditions::Conditions;
use crate::ledger::Ledger;
use crate::outcome::{Breaks, Ended, Method};
use crate::schedule::{Instant, instants};
use crate::sides::{Both, Side};
use crate::state::TIE;
use crate::stretch::{After, FirstBreak, Standing, Stretch, TheEnd, WayDown};
use crate::terms::Engagement;
use crate::trajectory::Trajectory;
use crate::work::Work;
use comes::Comes;
use pinned::Next;

/// How often between two instants a side is found gone, at most; each side can be so once, and once more with what flows in.
const MOST_ROUNDS: u32 = 4;

/// How often in a fight an integration that is not at its end is taken up again.
const MOST_CUTS: u32 = 16;

/// With more evaluations behind it no further stretch is begun. With a look and a stretch more of some 27,000 each, and the
/// whole once more to see who is left in the end, a fight keeps to [`crate::fight::MOST_EVALUATIONS`].
const MOST_BEFORE_A_STRETCH: u32 = 220_000;

/// The time between two instants, or from the last one on.
#[derive(Clone, Copy)]
struct Span {
    until: f64,
    /// Whether something arrives at its end.
    arrivals: bool,
    after: After,
}

impl Span {
    /// Whether a line reached at `time` is reached within the span: a reserve that comes at the very moment is in time, a
    /// line reached at the clock is reached.
    fn is_on_time(&self, time: f64) -> bool {
        if self.arrivals {
            time < self.until * (1.0 - TIE)
        } else {
            time <= self.until * (1.0 + TIE)
        }
    }
}

/// The part by which losses must outweigh reinforcement for a side to be pinned at nothing.
const PINNED: f64 = 1e-12;

/// When the first line that is below 0 has risen above it, a hair later; `None` where none does.
fn surfaces(at: f64, ways: &Both<WayDown>) -> Option<f64> {
    Side::BOTH
        .into_iter()
        .filter(|side| ways[*side].sunk > 0.0 && ways[*side].rising > 0.0)
        .map(|side| (at + ways[side].sunk / ways[side].rising * (1.0 + PINNED)) * (1.0 + TIE))
        .reduce(f64::min)
}

/// A fight in the making.
pub(crate) struct Run {
    pub(crate) stretches: Vec<Stretch>,
    pub(crate) instants: Vec<Instant>,
    /// The fraction lost at which each side breaks.
    pub(crate) break_point: Both<f64>,
    /// When the engagement is cut off; infinite where it is not.
    clock: f64,
    /// What is left of each side so far.
    pub(crate) left: Both<f64>,
    /// What is left in the end; `None` without bound.
    pub(crate) end: Both<Option<f64>>,
    pub(crate) ledger: Both<Ledger>,
    /// The sides that reach their lines at the next instant, to rounding, unless something arrives then.
    due: Both<bool>,
    pub(crate) breaks: Breaks,
    pub(crate) ended: Ended,
    /// When it ended; `None` where it never does.
    pub(crate) time: Option<f64>,
    /// Whether nothing is asked but who is left in the end.
    verdict: bool,
    /// How many stretches were cut short.
    cuts: u32,
    /// What looks took whose stretches are not kept.
    looks: Work,
    /// The part of the strengths to which each step of an integration keeps its error.
    tolerance: f64,
}

impl Run {
    /// The fight of `engagement`, integrated to that tolerance where it must be.
    pub(crate) fn of(engagement: &Engagement, tolerance: f64) -> Run {
        let sides = &engagement.sides;
        let mut run = Run {
            break_point: Both::of(|side| sides[side].break_point),
            clock: engagement.until.unwrap_or(f64::INFINITY),
            // Losses before time 0 may have reached a line already.
            due: Both { x: true, y: true },
            ..Run::beginning(
                instants(engagement),
                Both::of(|side| sides[side].start),
                Both::of(|side| Ledger::at_start(&sides[side])),
                tolerance,
            )
        };
        run.stretches.reserve_exact(run.instants.len());
        run.go(0);
        run
    }

    /// This fight going on from the time `time` where it was cut short, to the last and without a clock: to see who is
    /// left.
    pub(crate) fn fought_on(&self, time: f64) -> Run {
        let place = self
            .instants
            .iter()
            .rposition(|instant| instant.time <= time)
            .unwrap_or(0);
        let instants = self.instants[place..].to_vec();
        let next = instants.get(1).map(|instant| instant.time);
        let mut run = Run {
            verdict: true,
            ..Run::beginning(instants, self.left, self.ledger, self.tolerance)
        };
        if run.gone_with(0) {
            run.finish(Breaks::Neither, Ended::Withdrawn, time);
        } else if !run.run_stretch(0, time, next) {
            run.go(1);
        }
        run
    }

    /// A fight at its beginning, to the last and without a clock: the sides have `left`, and have put in and lost what
    /// `ledger` says.
    fn beginning(instants: Vec<Instant>, left: Both<f64>, ledger: Both<Ledger>, tolerance: f64) -> Run {
        Run {
            stretches: Vec::new(),
            instants,
            break_point: Both { x: 1.0, y: 1.0 },
            clock: f64::INFINITY,
            left,
            end: Both::default(),
            ledger,
            due: Both::default(),
            breaks: Breaks::Neither,
            ended: Ended::Limit,
            time: None,
            verdict: false,
            cuts: 0,
            looks: Work::default(),
            tolerance,
        }
    }

    /// What it took so far.
    pub(crate) fn work(&self) -> Work {
        self.stretches
            .iter()
            .map(Stretch::work)
            .fold(self.looks, Work::and)
    }

    /// Goes through the instants from the one at `first` on.
    fn go(&mut self, first: usize) {
        let clock = self.clock;
        for place in first..self.instants.len() {
            let at = self.instants[place].time;
            if at > clock {
                break;
            }
            self.arrive(place);
            if self.break_at_instant(at) {
                return;
            }
            let next = self.instants.get(place + 1).map(|instant| instant.time);
            if at == clock || self.gone_with(place) {
                let ended = if at == clock {
                    Ended::Clock
                } else {
                    Ended::Withdrawn
                };
                return self.finish(Breaks::Neither, ended, at);
            }
            if self.run_stretch(place, at, next) {
                return;
            }
        }
        // The clock stands between two instants, or behind the last.
        if self.time.is_none() && clock.is_finite() {
            self.finish(Breaks::Neither, Ended::Clock, clock);
        }
    }

    /// What happens at an instant, arrivals first.
    fn arrive(&mut self, place: usize) {
        let instant = &mut self.instants[place];
        for side in Side::BOTH {
            let ledger = &mut self.ledger[side];
            self.left[side] += instant.arrivals[side];
            ledger.join(instant.arrivals[side]);
            // No more can go than are there.
            let going = instant.withdrawals[side].min(self.left[side]);
            self.left[side] -= going;
            ledger.withdrawn += going;
            instant.went[side] = going;
        }
    }

    fn break_at_instant(&mut self, at: f64) -> bool {
        let broken = Both::of(|side| {
            let break_point = self.break_point[side];
            // To the last it has done so only where the stretch before came to it: one that fades has lost all but for a
            // rest that the sum of the losses has no digits for.
            let may = break_point < 1.0 || self.due[side];
            may && self.ledger[side].has_broken(break_point, self.due[side])
        });
        let breaks = Breaks::of(broken);
        if let Some(breaks) = breaks {
            self.finish(breaks, Ended::Break, at);
        }
        breaks.is_some()
    }

    /// Whether a side has been withdrawn to the last, with nobody to come.
    fn gone_with(&self, place: usize) -> bool {
        let rest = &self.instants[place..];
        Side::BOTH.into_iter().any(|side| {
            let comes = rest[1..].iter().any(|instant| instant.arrivals[side] > 0.0)
                || rest.iter().any(|instant| instant.conditions.flow[side] > 0.0);
            self.left[side] == 0.0 && !comes && self.ledger[side].withdrawn > 0.0
        })
    }

    fn finish(&mut self, breaks: Breaks, ended: Ended, time: f64) {
        self.breaks = breaks;
        self.ended = ended;
        self.time = Some(time);
        self.end = Both::of(|side| Some(self.left[side]));
    }

    /// Solves from the time `from`, at an instant or behind it, to the next, the clock or the end; says whether the fight is over.
    fn run_stretch(&mut self, place: usize, from: f64, next: Option<f64>) -> bool {
        let span = self.span(next);
        let since = self.instants[place].time;
        let (mut at, mut rounds) = (from, 0);
        loop {
            if self.work().evaluations() > MOST_BEFORE_A_STRETCH {
                self.finish(Breaks::Neither, Ended::Unfinished, at);
                return true;
            }
            let conditions = self.instants[place].conditions.later(at - since);
            let ways = Both::of(|side| {
                self.ledger[side].way_down(self.left[side], self.break_point[side], conditions.flow[side])
            });
            if let Some(next) = self.pinned(&span, at, &conditions, &ways) {
                match next {
                    Next::At(time) if rounds < MOST_ROUNDS => {
                        rounds += 1;
                        at = time;
                        continue;
                    }
                    Next::At(_) | Next::Instant => return false,
                    Next::Over => return true,
                }
            }
            let surfaces = surfaces(at, &ways).filter(|time| *time < span.until);
            let here = match surfaces {
                Some(until) => Span {
                    until,
                    arrivals: false,
                    after: After::More,
                },
                None => span,
            };
            let (due, comes) = self.solve(&here, at, conditions, &ways);
            if let Some(side) = self.stretches.last().and_then(Stretch::doomed) {
                self.finish(Breaks::only(side), Ended::Break, at);
                return true;
            }
            let breaks = |breaks: Option<Breaks>, side: Side| {
                breaks.is_some_and(|breaks| breaks.includes(side)) && ways[side].sunk == 0.0
            };
            self.due = Both::of(|side| breaks(due, side));
            let first = match comes {
                Comes::Break(first) if rounds < MOST_ROUNDS => first,
                // A side with nobody left may have somebody the next moment, and none the one after: it is not asked for
                // ever whether it is gone.
                Comes::Break(_) => {
                    let stretch = self.stretches.last();
                    let through = stretch.map(|stretch| Comes::through(stretch, span.until - at));
                    return through.is_none_or(|comes| self.run_out(&conditions, comes, at, span.until));
                }
                Comes::Through(length, standing) if surfaces.is_some() => {
                    at += length;
                    self.close(&conditions, &standing, length, at);
                    continue;
                }
                Comes::Cut(length, standing) => {
                    // The integrator goes on in a stretch of its own, as long as it gets anywhere.
                    self.cuts += 1;
                    at += length;
                    self.close(&conditions, &standing, length, at);
                    if length == 0.0 || self.cuts > MOST_CUTS {
                        self.finish(Breaks::Neither, Ended::Unfinished, at);
                        return true;
                    }
                    continue;
                }
                comes => return self.run_out(&conditions, comes, at, span.until),
            };
            rounds += 1;
            at += first.time;
            self.close(&conditions, &first.standing, first.time, at);
            let broken = Both::of(|side| breaks(Some(first.breaks), side));
            if let Some(breaks) = Breaks::of(broken) {
                self.finish(breaks, Ended::Break, at);
                return true;
            }
            if self.gone_with(place) {
                self.finish(Breaks::Neither, Ended::Withdrawn, at);
                return true;
            }
        }
    }

    /// The time up to the next instant, at `next`, or the clock.
    fn span(&self, next: Option<f64>) -> Span {
        let arrivals = next.is_some_and(|next| next <= self.clock);
        Span {
            until: next.unwrap_or(f64::INFINITY).min(self.clock),
            arrivals,
            after: match next {
                Some(_) => After::More,
                None if self.verdict => After::Verdict,
                None => After::Nothing,
            },
        }
    }

    /// Enters the stretch from the time `at` on; says who is due to break in it, on time or a hair later, and what comes of it.
    ///
    /// Where extremes have cost a formula its digits, which the books tell, the stretch is integrated.
    fn solve(
        &mut self,
        span: &Span,
        at: f64,
        conditions: Conditions,
        ways: &Both<WayDown>,
    ) -> (Option<Breaks>, Comes) {
        let length = span.until - at;
        // Below 0 a line does not count: the way there is to nothing.
        let level = Both::of(|side| {
            let way = ways[side];
            if way.sunk > 0.0 {
                WayDown { rising: 0.0, ..way }
            } else {
                way
            }
        });
        let what_comes = |stretch: &Stretch| {
            let first = stretch.first_break(&level, length);
            let due = first.as_ref().map(|first| first.breaks);
            let comes = match first.filter(|first| span.is_on_time(at + first.time)) {
                Some(first) => Comes::Break(first),
                // What is due at its end comes to it, though the integrator may have ended a hair before.
                None if due.is_some() && length.is_finite() => Comes::Through(length, stretch.at(length)),
                None => Comes::through(stretch, length),
            };
            (due, comes)
        };
        let (after, tolerance) = (span.after, self.tolerance);
        let mut stretch = Stretch::new(at, length, self.left, conditions, &level, after, tolerance);
        stretch.ledger = self.ledger;
        let mut found = what_comes(&stretch);
        if stretch.method() != Method::Integration && !found.1.keeps_books(&stretch) {
            stretch = stretch.integrated(length, after, tolerance);
            found = what_comes(&stretch);
        }
        self.stretches.push(stretch);
        found
    }

    /// Ends the last stretch, which begins at `from` and in which nobody breaks, at `until` or never; says whether the fight is
    /// over.
    fn run_out(&mut self, conditions: &Conditions, comes: Comes, from: f64, until: f64) -> bool {
        match comes {
            Comes::Forever(TheEnd { ended, end, losses }) => {
                for side in Side::BOTH {
                    self.ledger[side].add(&losses[side]);
                    if conditions.flow[side] > 0.0 {
                        self.ledger[side].join(f64::INFINITY);
                    }
                }
                (self.ended, self.end) = (ended, end);
                true
            }
            Comes::Break(FirstBreak { standing, .. })
            | Comes::Cut(_, standing)
            | Comes::Through(_, standing) => {
                self.close(conditions, &standing, until - from, until);
                false
            }
        }
    }

    /// Ends the last stretch after `length`, at the time `to`, and enters what it has done into the ledgers.
    fn close(&mut self, conditions: &Conditions, standing: &Standing, length: f64, to: f64) {
        self.book(conditions, length, standing);
        if let Some(stretch) = self.stretches.last_mut() {
            stretch.to = Some(to);
        }
    }

    /// Enters what a stretch has done into the ledgers.
    fn book(&mut self, conditions: &Conditions, length: f64, standing: &Standing) {
        for side in Side::BOTH {
            let ledger = &mut self.ledger[side];
            ledger.join(conditions.flow[side] * length);
            ledger.add(&standing.losses[side]);
            self.left[side] = standing.left[side].max(0.0);
        }
    }

    /// Strength over time.
    pub(crate) fn into_trajectory(self) -> Trajectory {
        let end = self.time.map(|_| self.left);
        Trajectory::of(self.stretches, self.instants, self.time, end, self.left)
    }
}
