//! What a run leaves: its outcome, and who would be left if no side broke and no clock ran.

use crate::caution;
use crate::fight::Effort;
use crate::linear_system::LinearSystem;
use crate::outcome::{Breaks, Ended, Method, Outcome, PieceOutcome, SideOutcome, ToTheLast};
use crate::run::Run;
use crate::sides::{Both, Side};
use crate::stretch::Stretch;
use crate::terms::Engagement;
use crate::work::Work;

impl Run {
    /// What it leaves, and the work that it took to find out who would be left in the end.
    pub(crate) fn outcome(&self, engagement: &Engagement, effort: Effort) -> (Outcome, Work) {
        let whole = effort != Effort::Ending;
        let is_asked = whole || self.breaks == Breaks::Neither && self.ended.is_never();
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
        let (to_the_last, work) = if is_asked {
            self.to_the_last()
        } else {
            Default::default()
        };
        let outcome = Outcome {
            breaks: self.breaks,
            time: if self.ended == Ended::Break {
                self.time
            } else {
                None
            },
            ended: self.ended,
            to_the_last,
            below_one: whole.then(|| self.below_one()).flatten(),
            x: sides.x,
            y: sides.y,
            loss_exchange_ratio,
            fractional_exchange_ratio,
            method: pieces
                .iter()
                .map(|piece| piece.method)
                .max()
                .unwrap_or(Method::ClosedForm),
            pieces,
            caution: caution::SHORT,
        };
        (outcome, work)
    }

    /// When a side that fades without ever reaching 0 falls below one, if it does before the end.
    fn below_one(&self) -> Option<f64> {
        if self.ended == Ended::Break {
            return None;
        }
        let last = self.stretches.last()?;
        let fading = Side::BOTH.into_iter().filter(|side| last.fades(*side));
        let time = fading
            .filter_map(|side| self.comes_below_one(side))
            .reduce(f64::min)?;
        self.time.is_none_or(|end| time <= end).then_some(time)
    }

    /// When `side`, which fades in the last stretch, falls below one for good: there, or in one before.
    fn comes_below_one(&self, side: Side) -> Option<f64> {
        let Some(place) = self
            .stretches
            .iter()
            .rposition(|stretch| stretch.start[side] > 1.0)
        else {
            return Some(0.0);
        };
        let stretch = &self.stretches[place];
        let time = stretch
            .time_to_strength(side, 1.0)
            .map(|time| stretch.from + time);
        // Some may have been withdrawn at its end.
        match self.stretches.get(place + 1) {
            Some(next) => Some(time.map_or(next.from, |time| time.min(next.from))),
            None => time,
        }
    }

    /// Who would be left if no side broke and no clock ran, and the work that it took to find out.
    fn to_the_last(&self) -> (Option<ToTheLast>, Work) {
        // Where nothing else happens the costs say it, without another fight.
        if let ([_], Some(piece)) = (
            &self.instants[..],
            self.stretches.first().and_then(Stretch::piece),
        ) {
            return (piece.to_the_last(), Work::default());
        }
        let unbroken = |side: Side| self.break_point[side] == 1.0;
        let cut = if unbroken(Side::X) && unbroken(Side::Y) && self.ended != Ended::Clock {
            None
        } else {
            self.time
        };
        match cut {
            Some(time) => {
                let further = self.fought_on(time);
                (further.left_in_the_end(), further.work())
            }
            None => (self.left_in_the_end(), Work::default()),
        }
    }

    fn left_in_the_end(&self) -> Option<ToTheLast> {
        let some = |side: Side| self.end[side].is_none_or(|end| end > 0.0);
        match (self.breaks, self.ended) {
            (Breaks::X, _) => Some(ToTheLast::Y),
            (Breaks::Y, _) => Some(ToTheLast::X),
            (Breaks::Both, _) => Some(ToTheLast::Parity),
            (Breaks::Neither, Ended::Unfinished) => None,
            (Breaks::Neither, ended) => match (some(Side::X), some(Side::Y)) {
                (true, false) => Some(ToTheLast::X),
                (false, true) => Some(ToTheLast::Y),
                (false, false) if ended == Ended::Limit && self.ends_at_parity() => Some(ToTheLast::Parity),
                _ => None,
            },
        }
    }

    /// Whether both fade together because they are at parity, and not whatever their strengths.
    fn ends_at_parity(&self) -> bool {
        self.stretches.last().is_some_and(|last| {
            let of_piece = last.piece().is_some_and(|piece| !piece.cost.x.is_infinite());
            of_piece || last.linear().is_some_and(LinearSystem::is_at_parity)
        })
    }
}
