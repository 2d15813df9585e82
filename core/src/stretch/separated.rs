//! A stretch that is solved by its state equation: its first break, and its end.

use super::integrated::Integrated;
use super::{FirstBreak, Standing, TheEnd, WayDown};
use crate::conditions::Growth;
use crate::double::Double;
use crate::motion::Motion;
use crate::orbit_point::OrbitPoint;
use crate::outcome::{Breaks, Ended};
use crate::piece::Piece;
use crate::sides::{Both, Side};
use crate::state::{StateEquation, is_endless};

/// Which side of a piece reaches its line first within `length`, by the state equation, and when; both where they differ by
/// less than the part `rounding`.
pub(super) fn first_break(
    piece: &Piece,
    growth: Option<&Growth>,
    ways: &Both<WayDown>,
    length: f64,
    rounding: f64,
) -> Option<FirstBreak> {
    if piece.motion == Motion::Still {
        return None;
    }
    let equation = &piece.equation;
    let cost = Both::of(|side| piece.cost_of(side, ways[side].descent));
    if is_endless(cost.x) && is_endless(cost.y) {
        return None;
    }
    let (breaks, loser) = if StateEquation::tie_within(cost, rounding) {
        (Breaks::Both, Side::X)
    } else if cost.x > cost.y {
        (Breaks::Y, Side::Y)
    } else {
        (Breaks::X, Side::X)
    };
    let mut point = piece.point_at_cost(loser, ways[loser].descent, cost[loser]);
    if breaks == Breaks::Both {
        point.left.y = ways.y.descent.to.into();
        point.fallen.y = ways.y.descent.by.into();
    }
    // What is left of the winner may be too little for a double, and is not nothing.
    let mut left = point.left;
    if breaks != Breaks::Both {
        left[loser.enemy()] = left[loser.enemy()].max(f64::MIN_POSITIVE);
    }
    let full = if equation.is_reached(left) {
        piece.time_to(&point)
    } else {
        f64::INFINITY
    };
    let time = growth.map_or(full, |growth| growth.when(full));
    (time.is_finite() && time <= length).then(|| FirstBreak {
        breaks,
        time,
        standing: Standing {
            left: point.left,
            losses: piece.losses(&point, full),
        },
    })
}

/// Where a piece tends that never ends.
pub(super) fn endless(piece: &Piece) -> TheEnd {
    if piece.motion == Motion::Still {
        return TheEnd {
            ended: Ended::Equilibrium,
            end: Both::of(|side| Some(piece.start[side])),
            losses: Both::default(),
        };
    }
    let point = limit(piece);
    let losses = if piece.besides.x == 0.0 && piece.besides.y == 0.0 {
        piece.losses(&point, 0.0)
    } else {
        // What is lost besides the fires is summed by the integrator.
        Integrated::fading(piece.start, piece.conditions(), point.left)
            .endless()
            .losses
    };
    TheEnd {
        ended: Ended::Limit,
        end: Both::of(|side| Some(point.left[side])),
        losses,
    }
}

/// The place on the orbit to which it tends.
fn limit(piece: &Piece) -> OrbitPoint {
    let cost = piece.cost;
    if is_endless(cost.x) && is_endless(cost.y) {
        return OrbitPoint {
            left: Both::default(),
            fallen: piece.start,
        };
    }
    let loser = if cost.x > cost.y { Side::Y } else { Side::X };
    piece.point_with(loser, Double::from(0.0))
}
