//! From an engagement to its outcome: the one function through which all questions go.

use crate::caution;
use crate::orbit_point::OrbitPoint;
use crate::outcome::{Breaks, Ended, Losses, Outcome, PieceOutcome, SideOutcome, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::{StateEquation, TIE};
use crate::terms::Engagement;
use crate::trajectory::{Motion, Piece, Trajectory};
use twofloat::TwoFloat;

/// How much is asked of a fight.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Effort {
    /// The outcome alone.
    Outcome,
    /// The outcome, and strength over time.
    Trajectory,
}

/// A fight worked out.
#[derive(Clone, Debug, PartialEq)]
pub struct Fight {
    /// What it leaves.
    pub outcome: Outcome,
    /// Strength over time, where it was asked for.
    pub trajectory: Option<Trajectory>,
}

/// Where a fight ends.
struct End {
    breaks: Breaks,
    ended: Ended,
    /// `None` where it never ends.
    time: Option<f64>,
    point: OrbitPoint,
}

/// Works out what `engagement` leaves.
///
/// Its numbers keep the limits of their keys: `Statement::read` sees to that.
pub fn fight(engagement: &Engagement, effort: Effort) -> Fight {
    let start = Both::of(|side| engagement.sides[side].start);
    let lines = Both::of(|side| break_line(engagement, side));
    let fire = Both::of(|side| engagement.sides[side].fire);
    let equation = StateEquation::of(&fire);
    let ahead = Lead::of(&equation, &start);
    let settled = lines.x == 0.0 && lines.y == 0.0 && ahead.tie;
    let margin = if settled {
        TwoFloat::from(0.0)
    } else {
        ahead.margin
    };
    let mut piece = Piece {
        from: 0.0,
        to: None,
        start,
        equation,
        motion: Motion::new(start, &fire, margin),
        parity: settled,
    };

    let end = broken_at_start(engagement, &lines)
        .unwrap_or_else(|| first_break(&piece, &lines))
        .cut_by(engagement.until, &piece);
    piece.to = end.time;
    let outcome = outcome(engagement, &piece, &end, &ahead);
    let trajectory = (effort == Effort::Trajectory).then(|| Trajectory {
        pieces: vec![piece],
        end: end.time.map(|_| end.point.left),
    });
    Fight { outcome, trajectory }
}

/// The strength at which `side` breaks: (1 − break point) of what it has committed.
pub fn break_line(engagement: &Engagement, side: Side) -> TwoFloat {
    let terms = &engagement.sides[side];
    TwoFloat::new_add(terms.start, terms.lost) * TwoFloat::new_sub(1.0, terms.break_point)
}

/// Who is ahead when both fight to the last.
struct Lead {
    /// The cost of bringing X down to the last, less that of bringing Y down.
    margin: TwoFloat,
    tie: bool,
    /// Whether any fire takes effect.
    decided: bool,
}

impl Lead {
    fn of(equation: &StateEquation, start: &Both<f64>) -> Lead {
        let cost = Both::of(|side| equation.cost(side, start[side].into(), TwoFloat::from(0.0)));
        Lead {
            margin: cost.x - cost.y,
            tie: StateEquation::tie(cost),
            decided: cost.x > 0.0 || cost.y > 0.0,
        }
    }

    fn to_the_last(&self) -> Option<ToTheLast> {
        let prevails = if self.margin > 0.0 {
            ToTheLast::X
        } else {
            ToTheLast::Y
        };
        self.decided
            .then_some(if self.tie { ToTheLast::Parity } else { prevails })
    }
}

/// The end of an engagement whose losses before time 0 have already reached a break line.
fn broken_at_start(engagement: &Engagement, lines: &Both<TwoFloat>) -> Option<End> {
    let broken = Both::of(|side| {
        let rounding = engagement.committed_at_start(side) * TIE;
        TwoFloat::from(engagement.sides[side].start) - lines[side] <= rounding
    });
    let breaks = match (broken.x, broken.y) {
        (false, false) => return None,
        (true, false) => Breaks::X,
        (false, true) => Breaks::Y,
        (true, true) => Breaks::Both,
    };
    let left = Both::of(|side| engagement.sides[side].start);
    let point = OrbitPoint {
        left,
        fallen: Both::default(),
    };
    Some(End {
        breaks,
        ended: Ended::Break,
        time: Some(0.0),
        point,
    })
}

/// Which side of `piece` reaches its line first, by the state equation, and when.
fn first_break(piece: &Piece, lines: &Both<TwoFloat>) -> End {
    let endless = |point| End {
        breaks: Breaks::Neither,
        ended: Ended::Limit,
        time: None,
        point,
    };
    let cost = Both::of(|side| piece.equation.cost(side, piece.start[side].into(), lines[side]));
    if let Motion::Still(start) = piece.motion {
        let point = OrbitPoint {
            left: start,
            fallen: Both::default(),
        };
        return End {
            ended: Ended::Equilibrium,
            ..endless(point)
        };
    }
    let (breaks, loser) = if StateEquation::tie(cost) {
        (Breaks::Both, Side::X)
    } else if cost.x > cost.y {
        (Breaks::Y, Side::Y)
    } else {
        (Breaks::X, Side::X)
    };
    let mut point = piece.point_with(loser, lines[loser]);
    if breaks == Breaks::Both {
        point.left.y = lines.y.into();
        point.fallen.y = (TwoFloat::from(piece.start.y) - lines.y).into();
    }
    match piece.motion.time_to(&point) {
        time if time.is_finite() => End {
            breaks,
            ended: Ended::Break,
            time: Some(time),
            point,
        },
        _ => endless(point),
    }
}

impl End {
    /// The same, or the clock where that comes first; a line reached at the clock is reached.
    fn cut_by(self, until: Option<f64>, piece: &Piece) -> End {
        match until {
            Some(until) if self.time.is_none_or(|time| time > until * (1.0 + TIE)) => {
                let point = piece.motion.point_at(until);
                End {
                    breaks: Breaks::Neither,
                    ended: Ended::Clock,
                    time: Some(until),
                    point,
                }
            }
            _ => self,
        }
    }
}

fn outcome(engagement: &Engagement, piece: &Piece, end: &End, ahead: &Lead) -> Outcome {
    let sides = Both::of(|side| {
        let fallen = end.point.fallen[side];
        SideOutcome {
            start: engagement.sides[side].start,
            joined: 0.0,
            withdrawn: 0.0,
            committed: engagement.committed_at_start(side),
            end: Some(end.point.left[side].max(0.0)),
            losses: Losses {
                fire: fallen,
                support: 0.0,
                wastage: 0.0,
                all: fallen,
            },
        }
    });
    let (loss_exchange_ratio, fractional_exchange_ratio) = Outcome::exchange_ratios(&sides);
    let method = piece.motion.method();
    Outcome {
        breaks: end.breaks,
        time: if end.ended == Ended::Break { end.time } else { None },
        ended: end.ended,
        to_the_last: ahead.to_the_last(),
        below_one: below_one(piece, end),
        x: sides.x,
        y: sides.y,
        loss_exchange_ratio,
        fractional_exchange_ratio,
        method,
        pieces: vec![PieceOutcome {
            from: piece.from,
            to: piece.to,
            method,
        }],
        caution: caution::SHORT,
    }
}

/// When a side that fades without ever reaching 0 falls below one, if it does before the end.
fn below_one(piece: &Piece, end: &End) -> Option<f64> {
    let fades = |side: Side| {
        let zero = TwoFloat::from(0.0);
        if !piece.lasts_until(side, zero) || piece.motion.time_to(&piece.point_with(side, zero)).is_finite() {
            return None;
        }
        if piece.start[side] <= 1.0 {
            return Some(0.0);
        }
        let time = piece.motion.time_to(&piece.point_with(side, TwoFloat::from(1.0)));
        (time.is_finite() && end.time.is_none_or(|end| time <= end)).then_some(time)
    };
    if end.ended == Ended::Break {
        return None;
    }
    Side::BOTH.into_iter().filter_map(fades).reduce(f64::min)
}
