//! From an engagement to its outcome: the one function through which all questions go.

use crate::caution;
use crate::conditions::Conditions;
use crate::double::Double;
use crate::ledger::Ledger;
use crate::outcome::{Breaks, Ended, Losses, Outcome, PieceOutcome, SideOutcome, ToTheLast};
use crate::piece::{Piece, Work};
use crate::schedule::{Instant, instants};
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation, TIE};
use crate::stretch::{FirstBreak, Standing, Stretch, WayDown};
use crate::terms::Engagement;
use crate::trajectory::Trajectory;

/// How much is asked of a fight.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Effort {
    /// Who breaks, when, and what is left; of a fight without end also who fades. What it would have come to had it gone on
    /// is left out: to work that out takes as long again.
    Ending,
    /// The outcome alone.
    Outcome,
    /// The outcome, and strength over time.
    Trajectory,
}

/// A fight worked out.
#[derive(Clone, Debug)]
pub struct Fight {
    /// What it leaves.
    pub outcome: Outcome,
    /// Strength over time, where it was asked for.
    pub trajectory: Option<Trajectory>,
    /// What it took.
    pub work: Work,
}

/// Works out what `engagement` leaves.
///
/// Its numbers keep the limits of their keys: `Statement::read` sees to that.
pub fn fight(engagement: &Engagement, effort: Effort) -> Fight {
    let run = Run::of(engagement);
    let outcome = run.outcome(engagement, effort);
    let work = run
        .stretches
        .iter()
        .map(Stretch::work)
        .fold(Work::default(), Work::and);
    let trajectory = (effort == Effort::Trajectory).then(|| run.into_trajectory());
    Fight {
        outcome,
        trajectory,
        work,
    }
}

/// How often between two instants a side is found gone, at most; each side can be so once, and once more with what flows in.
const MOST_ROUNDS: u32 = 4;

/// A fight in the making.
struct Run {
    stretches: Vec<Stretch>,
    instants: Vec<Instant>,
    left: Both<f64>,
    end: Both<Option<f64>>,
    ledger: Both<Ledger>,
    /// The sides that reach their lines at the next instant, to rounding, unless something arrives then.
    due: Both<bool>,
    breaks: Breaks,
    ended: Ended,
    /// When it ended; `None` where it never does.
    time: Option<f64>,
}

impl Run {
    fn of(engagement: &Engagement) -> Run {
        let left = Both::of(|side| engagement.sides[side].start);
        let ledger = Both::of(|side| Ledger {
            committed: Double::sum(engagement.sides[side].start, engagement.sides[side].lost),
            lost_before: engagement.sides[side].lost,
            ..Ledger::default()
        });
        let mut run = Run {
            stretches: Vec::new(),
            instants: instants(engagement),
            left,
            end: Both::default(),
            ledger,
            // Losses before time 0 may have reached a line already.
            due: Both { x: true, y: true },
            breaks: Breaks::Neither,
            ended: Ended::Limit,
            time: None,
        };
        run.go(engagement, 0);
        run
    }

    /// Goes through the instants from the one at `first` on.
    fn go(&mut self, engagement: &Engagement, first: usize) {
        let clock = engagement.until.unwrap_or(f64::INFINITY);
        for place in first..self.instants.len() {
            let at = self.instants[place].time;
            if at > clock {
                break;
            }
            self.arrive(place);
            if self.break_at_instant(engagement, at) {
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
            if self.run_stretch(engagement, place, at, next, clock) {
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
        let instant = &self.instants[place];
        for side in Side::BOTH {
            let ledger = &mut self.ledger[side];
            self.left[side] += instant.arrivals[side];
            ledger.committed += Double::from(instant.arrivals[side]);
            ledger.joined += instant.arrivals[side];
            // No more can go than are there.
            let going = instant.withdrawals[side].min(self.left[side]);
            self.left[side] -= going;
            ledger.withdrawn += going;
        }
    }

    fn break_at_instant(&mut self, engagement: &Engagement, at: f64) -> bool {
        let broken = Both::of(|side| {
            let break_point = engagement.sides[side].break_point;
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
    fn run_stretch(
        &mut self,
        engagement: &Engagement,
        place: usize,
        from: f64,
        next: Option<f64>,
        clock: f64,
    ) -> bool {
        let conditions = self.instants[place].conditions;
        let mut at = from;
        let until = next.unwrap_or(f64::INFINITY).min(clock);
        // A reserve that comes at the very moment is in time; a line reached at the clock is reached.
        let before_arrivals = next.is_some_and(|next| next <= clock);
        let limit = if before_arrivals {
            until * (1.0 - TIE)
        } else {
            until * (1.0 + TIE)
        };
        let mut rounds = 0;
        loop {
            let ways = Both::of(|side| {
                let break_point = engagement.sides[side].break_point;
                self.ledger[side].way_down(self.left[side], break_point, conditions.flow[side])
            });
            if let Some(over) = self.pinned(place, &ways, at, until) {
                return over;
            }
            let length = until - at;
            // Below 0 a line does not count: the way there is to nothing.
            let level = Both::of(|side| {
                let way = ways[side];
                if way.sunk > 0.0 {
                    WayDown { rising: 0.0, ..way }
                } else {
                    way
                }
            });
            let mut stretch = Stretch::new(at, length, self.left, conditions, &level, next.is_none());
            stretch.ledger = self.ledger;
            let first = stretch.first_break(&level, length);
            let on_time = |first: &FirstBreak| {
                if before_arrivals {
                    at + first.time < limit
                } else {
                    at + first.time <= limit
                }
            };
            let reaches = |side: Side| first.as_ref().is_some_and(|first| first.breaks.includes(side));
            self.due = Both::of(|side| reaches(side) && ways[side].sunk == 0.0);
            let first = first.filter(on_time);
            let Some(first) = first else {
                return self.run_out(stretch, &conditions, until);
            };
            let broken = Both::of(|side| first.breaks.includes(side) && ways[side].sunk == 0.0);
            if Breaks::of(broken).is_none() {
                // A side with nobody left may have somebody the next moment, and none the one after: it is not asked for
                // ever whether it is gone.
                rounds += 1;
                if rounds > MOST_ROUNDS {
                    return self.run_out(stretch, &conditions, until);
                }
            }
            self.book(&conditions, first.time, &first.standing);
            at += first.time;
            stretch.to = Some(at);
            self.stretches.push(stretch);
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

    /// A side with nobody left, unbroken since some were withdrawn, whose reinforcement is lost as fast as it comes:
    /// says whether the fight is over then, `None` where no side is so.
    fn pinned(&mut self, place: usize, ways: &Both<WayDown>, at: f64, until: f64) -> Option<bool> {
        let conditions = self.instants[place].conditions;
        let lost = |side: Side| {
            let enemy = side.enemy();
            conditions.fire[enemy].losses_per_time(self.left[enemy], 0.0) + conditions.steadily_lost(side)
        };
        let side = Side::BOTH.into_iter().find(|side| {
            let flow = conditions.flow[*side];
            self.left[*side] == 0.0 && flow > 0.0 && ways[*side].sunk > 0.0 && lost(*side) >= flow
        })?;
        // It breaks once what it has lost so has brought its line up to 0.
        let breaks = at + ways[side].sunk / ways[side].rising;
        let end = breaks.min(until);
        let mut alone = conditions;
        alone.flow[side] = 0.0;
        let mut stretch = Stretch::new(at, end - at, self.left, alone, ways, false);
        stretch.ledger = self.ledger;
        if !end.is_finite() {
            self.run_out(stretch, &alone, end);
            return Some(true);
        }
        self.run_out(stretch, &alone, end);
        let came = conditions.flow[side] * (end - at);
        let ledger = &mut self.ledger[side];
        ledger.committed += Double::from(came);
        ledger.joined += came;
        ledger.add(&Losses {
            fire: came,
            all: came,
            ..Losses::default()
        });
        if breaks <= until {
            self.finish(
                if side == Side::X { Breaks::X } else { Breaks::Y },
                Ended::Break,
                end,
            );
        }
        Some(breaks <= until)
    }

    /// Follows a stretch in which nobody breaks, up to `until` or for ever; says whether the fight is over.
    fn run_out(&mut self, mut stretch: Stretch, conditions: &Conditions, until: f64) -> bool {
        if until.is_finite() {
            let length = until - stretch.from;
            let standing = stretch.at(length);
            self.book(conditions, length, &standing);
            stretch.to = Some(until);
            self.stretches.push(stretch);
            return false;
        }
        let (ended, end, losses) = stretch.endless();
        for side in Side::BOTH {
            self.ledger[side].add(&losses[side]);
        }
        self.stretches.push(stretch);
        (self.ended, self.end) = (ended, end);
        true
    }

    /// Enters what a stretch has done into the ledgers.
    fn book(&mut self, conditions: &Conditions, length: f64, standing: &Standing) {
        for side in Side::BOTH {
            let came = conditions.flow[side] * length;
            let ledger = &mut self.ledger[side];
            ledger.committed += Double::from(came);
            ledger.joined += came;
            ledger.add(&standing.losses[side]);
            self.left[side] = standing.left[side].max(0.0);
        }
    }

    fn outcome(&self, engagement: &Engagement, effort: Effort) -> Outcome {
        let whole = effort != Effort::Ending;
        let is_asked = whole || self.breaks == Breaks::Neither && self.ended == Ended::Limit;
        let sides = Both::of(|side| {
            let ledger = &self.ledger[side];
            SideOutcome {
                start: engagement.sides[side].start,
                joined: ledger.joined,
                withdrawn: ledger.withdrawn,
                committed: ledger.committed.into(),
                end: self.end[side],
                losses: ledger.losses,
            }
        });
        let (loss_exchange_ratio, fractional_exchange_ratio) = Outcome::exchange_ratios(&sides);
        let pieces: Vec<PieceOutcome> = self
            .stretches
            .iter()
            .map(|stretch| PieceOutcome {
                from: stretch.from,
                to: stretch.to,
                method: stretch.method(),
            })
            .collect();
        Outcome {
            breaks: self.breaks,
            time: if self.ended == Ended::Break {
                self.time
            } else {
                None
            },
            ended: self.ended,
            to_the_last: is_asked.then(|| self.to_the_last(engagement)).flatten(),
            below_one: whole.then(|| self.below_one()).flatten(),
            x: sides.x,
            y: sides.y,
            loss_exchange_ratio,
            fractional_exchange_ratio,
            method: pieces
                .iter()
                .map(|piece| piece.method)
                .max()
                .unwrap_or(crate::outcome::Method::ClosedForm),
            pieces,
            caution: caution::SHORT,
        }
    }

    /// When a side that fades without ever reaching 0 falls below one, if it does before the end.
    fn below_one(&self) -> Option<f64> {
        if self.ended == Ended::Break {
            return None;
        }
        let last = self.stretches.last()?;
        let time = last.from + last.below_one()?;
        self.time.is_none_or(|end| time <= end).then_some(time)
    }

    /// Who would be left if no side broke and no clock ran.
    fn to_the_last(&self, engagement: &Engagement) -> Option<ToTheLast> {
        // Where nothing else happens the costs say it, without another fight.
        if let ([_], Some(piece)) = (
            &self.instants[..],
            self.stretches.first().and_then(Stretch::piece),
        ) {
            return piece.to_the_last();
        }
        let unbroken = |side: Side| engagement.sides[side].break_point == 1.0;
        let cut = if unbroken(Side::X) && unbroken(Side::Y) && self.ended != Ended::Clock {
            None
        } else {
            self.time
        };
        match cut {
            Some(time) => self.fought_on(engagement, time).left_in_the_end(),
            None => self.left_in_the_end(),
        }
    }

    /// The same fight going on from the time `time` where it was cut short, to the last and without a clock.
    fn fought_on(&self, engagement: &Engagement, time: f64) -> Run {
        let mut engagement = engagement.clone();
        engagement.until = None;
        for side in Side::BOTH {
            engagement.sides[side].break_point = 1.0;
        }
        let mut run = Run {
            stretches: Vec::new(),
            instants: self.instants.clone(),
            left: self.left,
            end: Both::default(),
            ledger: self.ledger,
            due: Both::default(),
            breaks: Breaks::Neither,
            ended: Ended::Limit,
            time: None,
        };
        let place = run
            .instants
            .iter()
            .rposition(|instant| instant.time <= time)
            .unwrap_or(0);
        let next = run.instants.get(place + 1).map(|instant| instant.time);
        let over = run.gone_with(place) || run.run_stretch(&engagement, place, time, next, f64::INFINITY);
        if !over {
            run.go(&engagement, place + 1);
        }
        run
    }

    fn left_in_the_end(&self) -> Option<ToTheLast> {
        let some = |side: Side| self.end[side].is_none_or(|end| end > 0.0);
        match (self.breaks, self.ended) {
            (Breaks::X, _) => Some(ToTheLast::Y),
            (Breaks::Y, _) => Some(ToTheLast::X),
            (Breaks::Both, _) => Some(ToTheLast::Parity),
            (Breaks::Neither, Ended::Limit) => match (some(Side::X), some(Side::Y)) {
                (true, false) => Some(ToTheLast::X),
                (false, true) => Some(ToTheLast::Y),
                (false, false) if self.ends_at_parity() => Some(ToTheLast::Parity),
                _ => None,
            },
            _ => None,
        }
    }

    /// Whether both fade together because they are at parity, and not whatever their strengths.
    fn ends_at_parity(&self) -> bool {
        self.stretches
            .last()
            .and_then(Stretch::piece)
            .is_some_and(|piece| !piece.cost.x.is_infinite())
    }

    fn into_trajectory(self) -> Trajectory {
        let end = self.time.map(|_| self.left);
        Trajectory::of(self.stretches, self.instants, self.time, end, self.left)
    }
}

/// The engagement as a single piece under its two fires; `None` where it is more: where something arrives or changes, or
/// something besides the fires is lost, or the range counts.
pub fn plain_piece(engagement: &Engagement) -> Option<Piece> {
    let instants = instants(engagement);
    let conditions = instants[0].conditions;
    if instants.len() > 1 || !conditions.are_plain() || conditions.shared_growth() != Some(None) {
        return None;
    }
    let start = Both::of(|side| engagement.sides[side].start);
    let to_the_last = Side::BOTH.iter().all(|side| descent(engagement, *side).to == 0.0);
    Piece::new(start, &conditions, |cost| to_the_last && StateEquation::tie(cost))
}

/// The way of `side` from its start down to the strength at which it breaks; a descent of 0 or less is behind it.
pub fn descent(engagement: &Engagement, side: Side) -> Descent {
    let ledger = Ledger {
        committed: Double::sum(engagement.sides[side].start, engagement.sides[side].lost),
        lost_before: engagement.sides[side].lost,
        ..Ledger::default()
    };
    ledger
        .way_down(
            engagement.sides[side].start,
            engagement.sides[side].break_point,
            0.0,
        )
        .descent
}

/// The strength at which `side` breaks at the start: (1 − break point) of what it has committed.
pub fn break_line(engagement: &Engagement, side: Side) -> Double {
    descent(engagement, side).to
}

#[cfg(test)]
mod tests {
    use crate::answer::{Answer, answer};
    use crate::outcome::Breaks;

    /// A side of which next to nothing was left when the enemy's reserve came: its losses were rounded to all it had.
    #[test]
    fn a_side_that_fades_to_the_last_is_not_broken_by_rounding() {
        for wastage in [9, 90, 900] {
            let link = format!(
                "x.start=135&x.rate=0.23&x.join=30@1.9&x.wastage={wastage}&y.start=412&y.fire=logarithmic&y.rate=0.067&\
                 y.break=0.1&y.join=116@6.5"
            );
            let Answer::Outcome { outcome, .. } = answer(&link) else {
                panic!("it is worked out")
            };
            assert_eq!(outcome.breaks, Breaks::Neither, "{wastage}");
        }
    }

    /// A side that was withdrawn to the last while a flow kept bringing some: it was found gone again and again, without
    /// end.
    #[test]
    fn a_side_that_only_its_flow_keeps_alive_is_not_asked_for_ever() {
        let link = "x.start=493&x.fire=none&x.break=0.5&y.start=142&y.fire=area&y.rate=9216e-3&y.lost=9&x.join=65@0,-11@5\
                    &x.flow=7@0/7&y.join=42@1,-15@4&phase1.from=2&phase1.x.support.area=0.06";
        let Answer::Outcome { outcome, .. } = answer(link) else {
            panic!("it is worked out")
        };
        assert!(outcome.pieces.len() < 40, "{} pieces", outcome.pieces.len());
    }
}
