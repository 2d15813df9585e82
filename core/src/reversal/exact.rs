//! What a small change of a number does by exact derivatives: of what is left by the state equation, of the time by the
//! closed forms, where a fight is one piece under its two fires.
//!
//! Along such a fight what it costs to bring each side from its start to where it is left is the same, C_w(s_w, w) =
//! C_l(s_l, n), with the loser at its line n. So a change of a number moves what is left of the winner by
//! dw = (dC_w at w − dC_l)/g_w(w), where g = ∂C/∂s is the integrand of the cost. The time of each motion that has a closed
//! form is derived from the invariant that gives it.

use crate::fight::plain_piece;
use crate::laws::{FireLaw, Power};
use crate::motion::Motion;
use crate::outcome::{Breaks, Outcome};
use crate::piece::Piece;
use crate::sides::{Both, Side};
use crate::slots::{Part, Place};
use crate::state::Descent;
use crate::terms::Engagement;

/// A difference of this part of its terms or less has lost too many digits.
const CANCELS: f64 = 1e-3;

/// How everything changes with one number.
struct Slopes<'a> {
    engagement: &'a Engagement,
    piece: Box<Piece>,
    loser: Side,
    side: Side,
    part: Part,
    left: Both<f64>,
    time: f64,
}

/// The derivatives of what is left of x, of y, and of the time at which a side breaks, by the number at `place`; `None` for
/// those that have no formula here. `outcome` is that of `engagement`.
pub(super) fn derivatives(
    engagement: &Engagement,
    outcome: &Outcome,
    place: Place,
) -> Option<[Option<f64>; 3]> {
    let Place::Side(side, part) = place else {
        return None;
    };
    let loser = match outcome.breaks {
        Breaks::X => Side::X,
        Breaks::Y => Side::Y,
        _ => return None,
    };
    let fire = &engagement.sides[side].fire;
    let counts = match part {
        Part::Start | Part::Lost | Part::Break => true,
        Part::Rate => fire.takes_effect(),
        Part::Half => fire.takes_effect() && fire.law == FireLaw::Search,
        _ => false,
    };
    if !counts {
        return None;
    }
    let slopes = Slopes {
        engagement,
        piece: plain_piece(engagement)?,
        loser,
        side,
        part,
        left: Both::of(|side| outcome.sides()[side].end.unwrap_or(f64::NAN)),
        time: outcome.time.filter(|time| *time > 0.0)?,
    };
    let left = slopes.left();
    let time = slopes.time(&left);
    Some([Some(left.x), Some(left.y), time].map(|slope| slope.filter(|slope| slope.is_finite())))
}

impl Slopes<'_> {
    fn start(&self) -> Both<f64> {
        Both::of(|side| f64::from(u8::from(side == self.side && self.part == Part::Start)))
    }

    fn rate(&self) -> Both<f64> {
        Both::of(|side| f64::from(u8::from(side == self.side && self.part == Part::Rate)))
    }

    /// Of the strength at which the loser breaks: (1 − break point) of what it has committed.
    fn line(&self) -> f64 {
        let terms = &self.engagement.sides[self.loser];
        match self.part {
            _ if self.side != self.loser => 0.0,
            Part::Start | Part::Lost => 1.0 - terms.break_point,
            Part::Break => -(terms.start + terms.lost),
            _ => 0.0,
        }
    }

    /// Of what it costs to bring `on` down, between the same strengths.
    fn cost(&self, on: Side) -> f64 {
        let (from, to) = (self.piece.start[on], self.left[on]);
        let rate = self.piece.equation.rate[on];
        match self.part {
            Part::Rate if on == self.side => {
                f64::from(self.piece.cost_of(on, Descent::between(from, to.into()))) / rate
            }
            // 1/T of the side that is searched for is 1 + half/n.
            Part::Half if on != self.side => {
                let exponent = self.piece.fire()[on].shooters().exponent - 1.0;
                let shooters = Power {
                    coefficient: rate,
                    exponent,
                };
                shooters.integral(to, from - to)
            }
            _ => 0.0,
        }
    }

    fn left(&self) -> Both<f64> {
        let (loser, winner) = (self.loser, self.loser.enemy());
        let piece = &self.piece;
        // A side that nothing moves counts for nothing, also where the integrand has no bound.
        let moved = |side: Side, strength: f64, slope: f64| {
            let integrand = || piece.equation.active(side).iter().map(|term| term.at(strength));
            if slope == 0.0 {
                0.0
            } else {
                slope * integrand().sum::<f64>()
            }
        };
        let start = self.start();
        let costs = Both::of(|side| self.cost(side) + moved(side, piece.start[side], start[side]));
        let line = self.line();
        let rest = costs[winner] - costs[loser] + moved(loser, self.left[loser], line);
        let mut left = Both::of(|_| line);
        left[winner] = rest / moved(winner, self.left[winner], 1.0);
        left
    }

    /// Of the time, where those of what is left are `left`.
    fn time(&self, left: &Both<f64>) -> Option<f64> {
        let rate = &self.piece.equation.rate;
        match &self.piece.motion {
            Motion::Square(_) => self.square(left, rate),
            Motion::Linear(_) => self.linear(left, rate),
            Motion::Ambush(_) => self.ambush(left, rate),
            Motion::Alone(motion) if self.part != Part::Half => Some(self.alone(motion.target, left, rate)),
            _ => None,
        }
    }

    /// √b·x + √a·y falls as e^(−√(ab)·t).
    fn square(&self, left: &Both<f64>, rate: &Both<f64>) -> Option<f64> {
        let aimed = |side: Side| self.piece.fire()[side].shooters().exponent == 1.0;
        let root = Both::of(|side| libm::sqrt(rate[side]));
        let grows = self.rate();
        let part = Both::of(|side| grows[side] / (2.0 * rate[side]));
        let share = |at: &Both<f64>, slope: &Both<f64>| {
            let sum = |each: &dyn Fn(Side) -> f64| each(Side::X) + each(Side::Y);
            let whole = sum(&|side| root[side] * at[side]);
            sum(&|side| root[side] * (slope[side] + at[side] * part[side])) / whole
        };
        let span = share(&self.piece.start, &self.start()) - share(&self.left, left);
        (aimed(Side::X) && aimed(Side::Y)).then(|| span / (root.x * root.y) - self.time * (part.x + part.y))
    }

    /// x/y grows as e^((b·x − a·y)·t), in which the exponent's factor is constant.
    fn linear(&self, left: &Both<f64>, rate: &Both<f64>) -> Option<f64> {
        let (start, grows, from) = (self.start(), self.rate(), &self.piece.start);
        let ahead = rate.x * from.x - rate.y * from.y;
        let part = |side: Side| left[side] / self.left[side] - start[side] / from[side];
        let slope = |side: Side| grows[side] * from[side] + rate[side] * start[side];
        let span = part(Side::X) - part(Side::Y) - self.time * (slope(Side::X) - slope(Side::Y));
        let holds = ahead.abs() * self.time > CANCELS;
        holds.then(|| span / ahead)
    }

    /// With aimed fire on u and area fire on v: a·v = k + c·u² with c = b/2, and the time is ∫du/(k + c·u²).
    fn ambush(&self, left: &Both<f64>, rate: &Both<f64>) -> Option<f64> {
        let aimed_at_x = self.piece.per_target.x[0].exponent == 0.0;
        let u = if aimed_at_x { Side::X } else { Side::Y };
        let v = u.enemy();
        let (start, grows, from) = (self.start(), self.rate(), &self.piece.start);
        let (c, loss) = (
            0.5 * rate[u],
            Both {
                x: rate[v] * from[v],
                y: rate[v] * self.left[v],
            },
        );
        let k = loss.x - c * from[u] * from[u];
        // ∫du/(k + c·u²)², by parts.
        let square = (from[u] / loss.x - self.left[u] / loss.y + self.time) / (2.0 * k);
        let c_grows = 0.5 * grows[u];
        let k_grows =
            grows[v] * from[v] + rate[v] * start[v] - from[u] * (c_grows * from[u] + 2.0 * c * start[u]);
        let slope =
            start[u] / loss.x - left[u] / loss.y - square * k_grows - (self.time - k * square) / c * c_grows;
        (k.abs() > CANCELS * loss.x).then_some(slope)
    }

    /// The time is ∫dn/T(n) over a steady fire.
    fn alone(&self, target: Side, left: &Both<f64>, rate: &Both<f64>) -> f64 {
        let (start, grows, from) = (self.start(), self.rate(), &self.piece.start);
        let enemy = target.enemy();
        let shooters = self.piece.fire()[enemy].shooters();
        let steady = rate[enemy] * shooters.at(from[enemy]);
        let moved = |strength: f64, slope: f64| {
            let powers = self.piece.per_target[target].iter();
            let per_target = || powers.map(|power| power.at(strength)).sum::<f64>();
            if slope == 0.0 { 0.0 } else { slope * per_target() }
        };
        let span = moved(from[target], start[target]) - moved(self.left[target], left[target]);
        let part = grows[enemy] / rate[enemy] + shooters.exponent * start[enemy] / from[enemy];
        span / steady - self.time * part
    }
}
