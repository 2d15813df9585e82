//! From an engagement to its outcome: the one function through which all questions go.

use crate::caution;
use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::outcome::{Breaks, Ended, Losses, Outcome, PieceOutcome, SideOutcome, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation, TIE, is_endless};
use crate::terms::Engagement;
use crate::trajectory::{Motion, Piece, Trajectory, Work};

/// How much is asked of a fight.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Effort {
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
    let descents = Both::of(|side| descent(engagement, side));
    let fire = Both::of(|side| engagement.sides[side].fire);
    let lead = Lead::of(engagement);
    let mut piece = Piece::new(0.0, start, fire, ahead_by(engagement, &lead));

    let end = broken_at_start(engagement, &descents)
        .unwrap_or_else(|| first_break(&piece, &descents))
        .cut_by(engagement.until, &piece);
    piece.to = end.time;
    let outcome = outcome(engagement, &piece, &end, &lead);
    let work = piece.work();
    let trajectory =
        (effort == Effort::Trajectory).then(|| Trajectory::of(piece, end.time.map(|_| end.point.left)));
    Fight {
        outcome,
        trajectory,
        work,
    }
}

/// The strength at which `side` breaks: (1 − break point) of what it has committed.
pub fn break_line(engagement: &Engagement, side: Side) -> Double {
    let terms = &engagement.sides[side];
    Double::sum(terms.start, terms.lost) * Double::difference(1.0, terms.break_point)
}

/// The way of `side` from its start down to the strength at which it breaks; a descent of 0 or less is behind it.
pub fn descent(engagement: &Engagement, side: Side) -> Descent {
    let terms = &engagement.sides[side];
    if terms.break_point == 1.0 {
        return Descent {
            to: Double::from(0.0),
            by: Double::from(terms.start),
        };
    }
    let by = Double::sum(terms.start, terms.lost) * terms.break_point - terms.lost;
    Descent {
        to: break_line(engagement, side),
        by,
    }
}

/// X's lead when both fight to the last: the cost of bringing it down less that of bringing Y down. `None` where both do
/// fight to the last and are at parity: a tie then stays one however long it goes on.
pub fn ahead(engagement: &Engagement) -> Option<Double> {
    ahead_by(engagement, &Lead::of(engagement))
}

fn ahead_by(engagement: &Engagement, lead: &Lead) -> Option<Double> {
    let to_the_last = Side::BOTH.iter().all(|side| break_line(engagement, *side) == 0.0);
    (!(to_the_last && lead.is_tie())).then(|| lead.margin())
}

/// Who is ahead when both fight to the last: what it costs to bring each side down.
struct Lead {
    cost: Both<Double>,
}

impl Lead {
    fn of(engagement: &Engagement) -> Lead {
        let equation = StateEquation::of(&Both::of(|side| engagement.sides[side].fire));
        let start = |side: Side| Double::from(engagement.sides[side].start);
        Lead {
            cost: Both::of(|side| equation.cost(side, start(side), Double::from(0.0))),
        }
    }

    fn is_tie(&self) -> bool {
        StateEquation::tie(self.cost)
    }

    /// X's cost less Y's; 0 where either is without bound, since no closed form needs it there.
    fn margin(&self) -> Double {
        let endless = is_endless(self.cost.x) || is_endless(self.cost.y);
        if endless {
            Double::from(0.0)
        } else {
            self.cost.x - self.cost.y
        }
    }

    /// `None` where no fire takes effect, and where both sides fade to nothing whatever their strengths.
    fn to_the_last(&self) -> Option<ToTheLast> {
        let cost = self.cost;
        match (is_endless(cost.x), is_endless(cost.y)) {
            (true, true) => None,
            (true, false) => Some(ToTheLast::X),
            (false, true) => Some(ToTheLast::Y),
            _ if cost.x == 0.0 && cost.y == 0.0 => None,
            _ if self.is_tie() => Some(ToTheLast::Parity),
            _ => Some(if cost.x > cost.y {
                ToTheLast::X
            } else {
                ToTheLast::Y
            }),
        }
    }
}

/// The end of an engagement whose losses before time 0 have already reached a break line.
fn broken_at_start(engagement: &Engagement, descents: &Both<Descent>) -> Option<End> {
    let broken = Both::of(|side| {
        let rounding = engagement.committed_at_start(side) * TIE;
        descents[side].by <= rounding
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
fn first_break(piece: &Piece, descents: &Both<Descent>) -> End {
    let endless = |point| End {
        breaks: Breaks::Neither,
        ended: Ended::Limit,
        time: None,
        point,
    };
    let cost = Both::of(|side| {
        piece
            .equation
            .cost_of(side, piece.start[side].into(), descents[side])
    });
    if piece.motion == Motion::Still {
        let point = OrbitPoint {
            left: piece.start,
            fallen: Both::default(),
        };
        return End {
            ended: Ended::Equilibrium,
            ..endless(point)
        };
    }
    if is_endless(cost.x) && is_endless(cost.y) {
        return endless(OrbitPoint {
            left: Both::default(),
            fallen: piece.start,
        });
    }
    let (breaks, loser) = if StateEquation::tie(cost) {
        (Breaks::Both, Side::X)
    } else if cost.x > cost.y {
        (Breaks::Y, Side::Y)
    } else {
        (Breaks::X, Side::X)
    };
    let mut point = piece.point_down(loser, descents[loser]);
    if breaks == Breaks::Both {
        point.left.y = descents.y.to.into();
        point.fallen.y = descents.y.by.into();
    }
    // What is left of the winner may be too little for a double, and is not nothing.
    let mut left = point.left;
    if breaks != Breaks::Both {
        left[loser.enemy()] = left[loser.enemy()].max(f64::MIN_POSITIVE);
    }
    let time = if piece.equation.is_reached(left) {
        piece.time_to(&point)
    } else {
        f64::INFINITY
    };
    if time.is_finite() {
        End {
            breaks,
            ended: Ended::Break,
            time: Some(time),
            point,
        }
    } else {
        endless(point)
    }
}

impl End {
    /// The same, or the clock where that comes first; a line reached at the clock is reached.
    fn cut_by(self, until: Option<f64>, piece: &Piece) -> End {
        match until {
            Some(until) if self.time.is_none_or(|time| time > until * (1.0 + TIE)) => {
                let point = piece.point_at(until);
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

fn outcome(engagement: &Engagement, piece: &Piece, end: &End, lead: &Lead) -> Outcome {
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
        to_the_last: lead.to_the_last(),
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
    let zero = Double::from(0.0);
    let fades = |side: Side| {
        let fades = piece.equation.rate[side.enemy()] > 0.0
            && piece.lasts_until(side, zero)
            && !piece.equation.is_reached(piece.point_with(side, zero).left);
        if !fades {
            return None;
        }
        if piece.start[side] <= 1.0 {
            return Some(0.0);
        }
        let time = piece.time_to(&piece.point_with(side, Double::from(1.0)));
        (time.is_finite() && end.time.is_none_or(|end| time <= end)).then_some(time)
    };
    if end.ended == Ended::Break {
        return None;
    }
    Side::BOTH.into_iter().filter_map(fades).reduce(f64::min)
}
