//! Strength over time: a list of pieces, each with its own motion.

use crate::laws::FireLaw;
use crate::laws::aimed::Square;
use crate::laws::ambush::Ambush;
use crate::laws::area::Linear;
use crate::laws::one_sided::OneSided;
use crate::orbit_point::OrbitPoint;
use crate::outcome::Method;
use crate::sides::{Both, Side};
use crate::state::StateEquation;
use crate::terms::Fire;
use twofloat::TwoFloat;

/// How strengths move from the start of a piece on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Motion {
    /// Neither side's fire has any effect.
    Still(Both<f64>),
    /// One side's fire has.
    OneSided(OneSided),
    /// Aimed against aimed.
    Square(Square),
    /// Area against area.
    Linear(Linear),
    /// Aimed against area.
    Ambush(Ambush),
}

impl Motion {
    /// The motion of a piece that starts at `start`.
    ///
    /// `ahead` is X's lead, the difference of the costs of bringing each side down to the last: X's less Y's.
    pub fn new(start: Both<f64>, fire: &Both<Fire<f64>>, ahead: TwoFloat) -> Motion {
        let effective = Both::of(|side| fire[side].takes_effect());
        let rate = Both::of(|side| fire[side].rate);
        let shooter = match (effective.x, effective.y) {
            (false, false) => return Motion::Still(start),
            (true, false) => Some(Side::X),
            (false, true) => Some(Side::Y),
            (true, true) => None,
        };
        if let Some(shooter) = shooter {
            let (fire, target) = (&fire[shooter], shooter.enemy());
            // Both laws take shooters in proportion.
            let steady = fire.rate * start[shooter];
            return Motion::OneSided(OneSided::new(
                target,
                start,
                steady,
                (fire.law.law().per_target)(fire)[0],
            ));
        }
        match (fire.x.law, fire.y.law) {
            (FireLaw::Area, FireLaw::Area) => Motion::Linear(Linear::new(start, rate, ahead)),
            (FireLaw::Aimed, FireLaw::Area) => Motion::Ambush(Ambush::new(Side::X, start, rate, ahead)),
            (FireLaw::Area, FireLaw::Aimed) => Motion::Ambush(Ambush::new(Side::Y, start, rate, -ahead)),
            _ => Motion::Square(Square::new(start, rate, ahead * 2.0)),
        }
    }

    /// The time after the start of the piece at which it is at `point`, which lies on its orbit; infinite where never.
    pub fn time_to(&self, point: &OrbitPoint) -> f64 {
        match self {
            Motion::Still(_) => f64::INFINITY,
            Motion::OneSided(motion) => motion.time_to(point),
            Motion::Square(motion) => motion.time_to(point),
            Motion::Linear(motion) => motion.time_to(point),
            Motion::Ambush(motion) => motion.time_to(point),
        }
    }

    /// Where the piece is at the time `t` after its start.
    pub fn point_at(&self, t: f64) -> OrbitPoint {
        match self {
            Motion::Still(start) => OrbitPoint {
                left: *start,
                fallen: Both::default(),
            },
            Motion::OneSided(motion) => motion.point_at(t),
            Motion::Square(motion) => motion.point_at(t),
            Motion::Linear(motion) => motion.point_at(t),
            Motion::Ambush(motion) => motion.point_at(t),
        }
    }

    /// How it is solved.
    pub fn method(&self) -> Method {
        Method::ClosedForm
    }
}

/// A stretch of time in which nothing is added and no rate changes.
#[derive(Clone, Debug, PartialEq)]
pub struct Piece {
    /// When it begins.
    pub from: f64,
    /// When it ends; `None` where it does not.
    pub to: Option<f64>,
    /// The strengths at its beginning.
    pub start: Both<f64>,
    /// What stays constant along it.
    pub equation: StateEquation,
    /// How the strengths move.
    pub motion: Motion,
    /// Whether the sides stand at parity to the rounding of the inputs, and so wear each other out together.
    pub parity: bool,
}

impl Piece {
    /// The place on the orbit of this piece where `side` is left with `strength`, of what it had at the beginning.
    ///
    /// Where the other side would be gone before, it stands at 0 there.
    pub fn point_with(&self, side: Side, strength: TwoFloat) -> OrbitPoint {
        let enemy = side.enemy();
        let cost = self.equation.cost(side, self.start[side].into(), strength);
        let from = Both::of(|side| TwoFloat::from(self.start[side]));
        let mut left = Both {
            x: strength,
            y: strength,
        };
        let mut fallen = Both::of(|side| from[side] - strength);
        if self.parity {
            let rest = self.equation.cost(side, strength, TwoFloat::from(0.0));
            left[enemy] = self.equation.worth(enemy, rest);
            fallen[enemy] = from[enemy] - left[enemy];
        } else {
            left[enemy] = self.equation.left(enemy, from[enemy], cost);
            fallen[enemy] = self.equation.fallen(enemy, from[enemy], left[enemy], cost);
        }
        OrbitPoint {
            left: Both::of(|side| left[side].into()),
            fallen: Both::of(|side| fallen[side].into()),
        }
    }

    /// Whether the other side lasts until `side` is down to `strength`.
    pub fn lasts_until(&self, side: Side, strength: TwoFloat) -> bool {
        let enemy = side.enemy();
        let cost = self.equation.cost(side, self.start[side].into(), strength);
        let of_enemy = self
            .equation
            .cost(enemy, self.start[enemy].into(), TwoFloat::from(0.0));
        cost <= of_enemy || StateEquation::tie(Both { x: cost, y: of_enemy })
    }
}

/// A whole fight in time.
#[derive(Clone, Debug, PartialEq)]
pub struct Trajectory {
    /// The pieces, in order; each begins where the one before ends.
    pub pieces: Vec<Piece>,
    /// The strengths at the very end, `None` where it has none; they may differ from the last piece's own in the last
    /// digit, since a break line is exact.
    pub end: Option<Both<f64>>,
}

impl Trajectory {
    /// When the fight ends; `None` where it never does.
    pub fn ends(&self) -> Option<f64> {
        self.pieces.last().and_then(|piece| piece.to)
    }

    /// The strengths at the time `t`, which is 0 or more; from the end on, those at the end.
    pub fn strengths_at(&self, t: f64) -> Both<f64> {
        if let (Some(ends), Some(end)) = (self.ends(), self.end)
            && t >= ends
        {
            return end;
        }
        let piece = self
            .pieces
            .iter()
            .rev()
            .find(|piece| piece.from <= t)
            .unwrap_or(&self.pieces[0]);
        let left = piece.motion.point_at((t - piece.from).max(0.0)).left;
        Both::of(|side| left[side].max(0.0))
    }

    /// The first time at which `side` is down to `strength`; `None` where it never is before the end.
    pub fn time_to_strength(&self, side: Side, strength: f64) -> Option<f64> {
        self.pieces.iter().find_map(|piece| {
            if strength > piece.start[side] || !piece.lasts_until(side, strength.into()) {
                return None;
            }
            let time = piece.from + piece.motion.time_to(&piece.point_with(side, strength.into()));
            (time.is_finite() && piece.to.is_none_or(|to| time <= to)).then_some(time)
        })
    }
}
