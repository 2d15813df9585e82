//! A stretch of time in which nothing arrives at once and no rate jumps, solved by the best of the methods it allows.

mod integrated;
mod linear;
mod separated;

use crate::conditions::{Conditions, Growth};
use crate::double::Double;
use crate::ledger::Ledger;
use crate::linear_system::LinearSystem;
use crate::outcome::{Breaks, Ended, Losses, Method};
use crate::piece::Piece;
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation, TIE};
use crate::work::Work;
use integrated::Integrated;

/// How a stretch is solved.
#[derive(Clone, Debug)]
enum How {
    /// By its state equation, in a time that runs as both fires grow, where they do.
    Piece(Box<Piece>, Option<Growth>),
    /// As a linear system.
    Linear(Box<LinearSystem>),
    /// By the integrator.
    Integrated(Box<Integrated>),
}

/// What comes after a stretch.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum After {
    /// Something comes.
    More,
    /// Nothing comes: a tie to the last stays one.
    Nothing,
    /// Nothing comes, and nothing is asked but who is left in the end.
    Verdict,
}

/// What becomes of a stretch that never ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TheEnd {
    /// How it ends.
    pub ended: Ended,
    /// What each side tends to; `None` without bound.
    pub end: Both<Option<f64>>,
    /// What each side loses.
    pub losses: Both<Losses>,
}

impl TheEnd {
    /// The end under steady `conditions`: what flows in for ever is lost for ever by whatever still causes losses then.
    fn of(conditions: &Conditions, ended: Ended, end: Both<Option<f64>>, losses: Both<Losses>) -> TheEnd {
        let left = Both::of(|side| end[side].unwrap_or(f64::INFINITY));
        let losses = Both::of(|side: Side| {
            if conditions.flow[side] == 0.0 {
                return losses[side];
            }
            let by = &losses[side];
            let unbounded = |lost: f64, pace: f64| if pace > 0.0 { f64::INFINITY } else { lost };
            let pace = conditions.losses_per_time(side, left);
            Losses::of(
                unbounded(by.fire, pace.fire),
                unbounded(by.support, pace.support),
                unbounded(by.wastage, pace.wastage),
            )
        });
        TheEnd { ended, end, losses }
    }
}

/// A stretch of a fight.
#[derive(Clone, Debug)]
pub struct Stretch {
    /// When it begins.
    pub from: f64,
    /// When it ends; `None` where it does not.
    pub to: Option<f64>,
    /// The strengths at its beginning.
    pub start: Both<f64>,
    /// What holds along it.
    pub conditions: Conditions,
    /// The way down to each side's break line at its beginning.
    pub ways: Both<WayDown>,
    /// What each side has put in and lost by its beginning.
    pub ledger: Both<Ledger>,
    /// What is lost per unit of time of a side with nobody there, as fast as it comes.
    pub(crate) lost_as_it_comes: Both<Losses>,
    how: How,
}

/// How many times the rounding of a strength its way down may be out by, at most: of a shorter way nothing is certain.
const MOST_ROUNDING: f64 = 1e6;

/// The way down to the break line of a side, which rises while reinforcement flows in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WayDown {
    /// The way at the beginning of the stretch.
    pub descent: Descent,
    /// The rise of the line per unit of time.
    pub rising: f64,
    /// How far the line itself is below 0, since some were withdrawn: at 0 the side is gone then, and not broken.
    pub sunk: f64,
}

/// Where a stretch is, or ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Standing {
    /// What is left of each side.
    pub left: Both<f64>,
    /// What each has lost since the beginning of the stretch.
    pub losses: Both<Losses>,
}

/// The first break along a stretch.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FirstBreak {
    /// Who breaks.
    pub breaks: Breaks,
    /// When, from the beginning of the stretch.
    pub time: f64,
    /// How matters stand then.
    pub standing: Standing,
}

impl Stretch {
    /// The stretch from the time `from`, no longer than `length`, where both sides' ways down are `ways`; where it must be
    /// integrated, each step keeps its error to the part `tolerance` of the strengths.
    pub fn new(
        from: f64,
        length: f64,
        start: Both<f64>,
        conditions: Conditions,
        ways: &Both<WayDown>,
        after: After,
        tolerance: f64,
    ) -> Stretch {
        let absent = Side::BOTH
            .into_iter()
            .any(|side| start[side] == 0.0 && conditions.flow[side] == 0.0);
        let conditions = if absent {
            conditions.without_fire()
        } else {
            conditions
        };
        let to_the_last = after != After::More && Side::BOTH.iter().all(|side| ways[*side].descent.to == 0.0);
        let parity = |cost: Both<Double>| to_the_last && StateEquation::tie(cost);
        let growth = conditions.shared_growth();
        let both_there = start.x > 0.0 && start.y > 0.0;
        let piece = || {
            let growth = growth?;
            // Losses besides the fires do not grow with the range.
            let fits = both_there && (conditions.are_plain() || growth.is_none());
            if !fits {
                return None;
            }
            let piece = Piece::new(start, &conditions, parity)?;
            Some(How::Piece(piece, growth))
        };
        let linear = || {
            let system = conditions.linear(start).filter(|_| growth == Some(None))?;
            let system = if to_the_last {
                system.at_parity_within(rounding(from, start, ways))
            } else {
                system
            };
            Some(How::Linear(Box::new(system)))
        };
        let solved = if conditions.are_plain() {
            piece().or_else(linear)
        } else {
            linear().or_else(piece)
        };
        let how = solved.unwrap_or_else(|| {
            let integrated = Integrated::new(start, &conditions, length, ways, after, tolerance);
            How::Integrated(Box::new(integrated))
        });
        Stretch {
            from,
            to: None,
            start,
            conditions,
            ways: *ways,
            ledger: Both::default(),
            lost_as_it_comes: Both::default(),
            how,
        }
    }

    /// The same, solved by the integrator.
    pub(crate) fn integrated(self, length: f64, after: After, tolerance: f64) -> Stretch {
        let (start, ways) = (self.start, &self.ways);
        let integrated = Integrated::new(start, &self.conditions, length, ways, after, tolerance);
        Stretch {
            how: How::Integrated(Box::new(integrated)),
            ..self
        }
    }

    /// The linear system, where it is solved as one.
    pub fn linear(&self) -> Option<&LinearSystem> {
        match &self.how {
            How::Linear(system) => Some(system),
            _ => None,
        }
    }

    /// The break line of `side` at the time `t` from the beginning; `None` where there is none above 0.
    pub fn break_line(&self, side: Side, t: f64) -> Option<f64> {
        let way = &self.ways[side];
        let line = f64::from(way.descent.to) + way.rising * t;
        (way.sunk == 0.0 && line > 0.0).then_some(line)
    }

    /// What each side has put in and lost by the time `t` from the beginning.
    pub fn ledger_at(&self, t: f64) -> Both<Ledger> {
        let losses = self.at(t).losses;
        Both::of(|side| {
            let mut ledger = self.ledger[side];
            ledger.join(self.conditions.flow[side] * t);
            ledger.add(&losses[side]);
            ledger.pass(&self.lost_as_it_comes[side].over(t));
            ledger
        })
    }

    /// How it was solved.
    pub fn method(&self) -> Method {
        match &self.how {
            How::Piece(piece, _) => piece.motion.method(),
            How::Linear(_) => Method::ClosedForm,
            How::Integrated(_) => Method::Integration,
        }
    }

    /// The piece with its state equation, where it is solved by one.
    pub fn piece(&self) -> Option<&Piece> {
        match &self.how {
            How::Piece(piece, _) => Some(piece),
            _ => None,
        }
    }

    /// The side that is sure to be brought to nothing, where nothing else was asked.
    pub(crate) fn doomed(&self) -> Option<Side> {
        match &self.how {
            How::Integrated(integrated) => integrated.doomed(),
            _ => None,
        }
    }

    /// Where the integrator went no further although more of `length` is left, from the beginning of the stretch.
    pub(crate) fn cut_short(&self, length: f64) -> Option<f64> {
        match &self.how {
            How::Integrated(integrated) => integrated.cut_short(length),
            _ => None,
        }
    }

    /// What it took so far.
    pub fn work(&self) -> Work {
        match &self.how {
            How::Piece(piece, _) => piece.work(),
            How::Linear(system) => Work {
                evaluations: system.evaluations(),
                steps: 0,
            },
            How::Integrated(integrated) => Work {
                evaluations: 0,
                steps: integrated.course().steps(),
            },
        }
    }

    /// Prepares strengths at any time up to `until` from its beginning.
    pub(crate) fn prepare(&mut self, until: f64) {
        if let How::Piece(piece, growth) = &mut self.how {
            piece.prepare(growth.map_or(until, |growth| growth.until(until)));
        }
    }

    /// The first break before `length` is over, from the beginning of the stretch; both sides have some way to go.
    pub fn first_break(&self, ways: &Both<WayDown>, length: f64) -> Option<FirstBreak> {
        // What is at the end to rounding is at the end.
        let nearly = length + (self.from + length) * TIE;
        match &self.how {
            How::Piece(piece, growth) => {
                separated::first_break(piece, growth.as_ref(), ways, nearly, self.rounding(ways))
            }
            // Both fade for ever.
            How::Linear(system) if system.is_at_parity() => None,
            How::Linear(system) => self.earlier(
                ways,
                linear::first_reaches(system, ways, nearly, self.rounding(ways)),
            ),
            How::Integrated(integrated) => {
                let reach = |side: Side| integrated.first_reach(side, &ways[side], length);
                self.earlier(ways, Both::of(reach))
            }
        }
    }

    fn rounding(&self, ways: &Both<WayDown>) -> f64 {
        rounding(self.from, self.start, ways)
    }

    /// The earlier of two breaks, or both where they are the same to rounding.
    fn earlier(&self, ways: &Both<WayDown>, times: Both<Option<f64>>) -> Option<FirstBreak> {
        let time = match (times.x, times.y) {
            (None, None) => return None,
            (x, y) => x.unwrap_or(f64::INFINITY).min(y.unwrap_or(f64::INFINITY)),
        };
        let mut standing = self.at(time);
        let rounding = self.rounding(ways);
        let broken = Both::of(|side| times[side].is_some_and(|at| at <= time * (1.0 + rounding)));
        for side in Side::BOTH.into_iter().filter(|side| broken[*side]) {
            standing.left[side] = f64::from(ways[side].descent.to) + ways[side].rising * time;
        }
        let breaks = Breaks::of(broken)?;
        Some(FirstBreak {
            breaks,
            time,
            standing,
        })
    }

    /// How matters stand at the time `t` from the beginning, no later than the end.
    pub fn at(&self, t: f64) -> Standing {
        match &self.how {
            How::Piece(piece, growth) => {
                let t = growth.map_or(t, |growth| growth.until(t));
                let point = piece.point_at(t);
                Standing {
                    left: point.left,
                    losses: piece.losses(&point, t),
                }
            }
            How::Linear(system) => linear::standing(&self.conditions, self.start, system, t),
            How::Integrated(integrated) => integrated.at(t),
        }
    }

    /// The strengths alone at the time `t`, as pictures need them.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        let left = match &self.how {
            How::Piece(piece, growth) => piece.strengths_at(growth.map_or(t, |growth| growth.until(t))),
            How::Linear(system) => system.strengths(t),
            How::Integrated(integrated) if t > integrated.course().until() => integrated.at(t).left,
            How::Integrated(integrated) => integrated.course().strengths_at(t),
        };
        Both::of(|side| left[side].max(0.0))
    }

    /// What each side loses per unit of time at the time `t`.
    pub fn losses_per_time(&self, t: f64) -> Both<f64> {
        let left = self.strengths_at(t);
        let conditions = &self.conditions;
        Both::of(|side: Side| {
            let fire = conditions.fire_on(side, left, t);
            let steady = if left[side] > 0.0 {
                conditions.steadily_lost(side)
            } else {
                0.0
            };
            fire + conditions.part_lost(side) * left[side] + steady + self.lost_as_it_comes[side].all
        })
    }

    /// The first time from the beginning at which `side` is down to `strength`; `None` where it never is.
    pub fn time_to_strength(&self, side: Side, strength: f64) -> Option<f64> {
        if strength > self.start[side] {
            return None;
        }
        let time = match &self.how {
            How::Piece(piece, growth) => {
                let strength = Double::from(strength);
                if !piece.lasts_until(side, strength) {
                    return None;
                }
                let full = piece.time_to(&piece.point_with(side, strength));
                growth.map_or(full, |growth| growth.when(full))
            }
            How::Linear(system) => {
                let above = Double::difference(self.start[side], strength);
                system.first_reach(side, above, 0.0, f64::INFINITY)?
            }
            How::Integrated(integrated) => integrated.course().time_to(side, strength)?,
        };
        time.is_finite().then_some(time)
    }

    /// What happens in the end where nobody breaks and nothing comes after.
    pub fn endless(&self) -> TheEnd {
        match &self.how {
            How::Piece(piece, _) => separated::endless(piece),
            How::Linear(system) => linear::endless(&self.conditions, self.start, system),
            How::Integrated(integrated) => integrated.endless(),
        }
    }

    /// The time from the beginning after which next to nothing moves any more; 0 where that is not known.
    pub(crate) fn settling(&self) -> f64 {
        match &self.how {
            How::Piece(..) => 0.0,
            // Five of the slowest time constants.
            How::Linear(system) => system.settled() / 12.0,
            How::Integrated(integrated) => integrated.course().until(),
        }
    }

    /// Whether `side` tends to 0 and never reaches it.
    pub(crate) fn fades(&self, side: Side) -> bool {
        let zero = Double::from(0.0);
        match &self.how {
            How::Piece(piece, _) => {
                let loses = !piece.equation.active(side.enemy()).is_empty();
                let down = || piece.point_with(side, zero).left;
                loses && piece.lasts_until(side, zero) && !piece.equation.is_reached(down())
            }
            _ => {
                let TheEnd { ended, end, .. } = self.endless();
                let gone = end[side].is_some_and(|end| end <= 1e-9 * self.start[side]);
                ended == Ended::Limit && gone && self.start[side] > 0.0
            }
        }
    }
}

/// The part by which two breaks along a stretch from the time `from` may differ and still be at one moment: the rounding of
/// what is stated, and behind the first stretch also that of the strengths which were handed over, which is more of a short
/// way down.
fn rounding(from: f64, start: Both<f64>, ways: &Both<WayDown>) -> f64 {
    if from == 0.0 {
        return TIE;
    }
    let of_way = |side: Side| start[side] / f64::from(ways[side].descent.by);
    TIE * (1.0 + 2.0 * of_way(Side::X).max(of_way(Side::Y))).min(MOST_ROUNDING)
}
