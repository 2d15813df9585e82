//! Curves of one side against the other by the state equation: the fight itself, its neighbours, and parity.

use super::{Line, Role, steps};
use crate::double::Double;
use crate::sides::{Both, Side};
use crate::state::{StateEquation, is_endless};

/// Where on the two far edges of the picture neighbouring engagements begin, as parts of the edge.
const NEIGHBOURS: [f64; 4] = [0.2, 0.4, 0.6, 0.8];

/// Points of a curve. Each takes double-double powers or a root, and these curves are smooth: more would not be seen.
pub(super) const POINTS: usize = 160;

/// Points of a neighbouring engagement, which is drawn thin and for comparison.
const NEIGHBOUR_POINTS: usize = 40;

/// What each side costs to bring down from `from` to `to`.
pub(super) fn costs(equation: &StateEquation, from: Both<f64>, to: Both<f64>) -> Both<Double> {
    Both::of(|side| equation.cost(side, from[side].into(), to[side].into()))
}

/// The engagement from `start` until one side is down to the last.
pub(super) fn to_the_last(equation: &StateEquation, start: Both<f64>, count: usize) -> Vec<(f64, f64)> {
    let cost = costs(equation, start, Both::default());
    if cost.x == 0.0 && cost.y == 0.0 {
        // No fire takes effect: it stays where it is.
        return vec![(start.x, start.y)];
    }
    let loser = if cost.x > cost.y { Side::Y } else { Side::X };
    let mut end = Both::default();
    if !StateEquation::tie(cost) && !is_endless(cost[loser]) {
        let enemy = loser.enemy();
        end[enemy] = equation.left(enemy, start[enemy].into(), cost[loser]).into();
    }
    path(equation, start, end, count)
}

/// A part lost that is known well enough to follow a side by it.
const LEAST_FOLLOWED: f64 = 1e-9;

/// The orbit between two of its points as a curve, through `count` + 1 points that are closer together at both ends:
/// there it may come in along an axis.
///
/// A side whose strength would need a root-find at each point is the one that is followed, where it falls at all.
pub(super) fn path(
    equation: &StateEquation,
    start: Both<f64>,
    end: Both<f64>,
    count: usize,
) -> Vec<(f64, f64)> {
    let lost = lost(start, end);
    let costly = Side::BOTH
        .into_iter()
        .find(|side| equation.needs_root(*side) && lost[*side] > LEAST_FOLLOWED);
    let along = costly.unwrap_or(larger(lost));
    let eased = |part: f64| part * part * (3.0 - 2.0 * part);
    along_orbit(equation, start, end, along, steps(count).map(eased))
}

/// The parts of both sides that are lost.
pub(super) fn lost(start: Both<f64>, end: Both<f64>) -> Both<f64> {
    Both::of(|side| {
        if start[side] > 0.0 {
            1.0 - end[side] / start[side]
        } else {
            0.0
        }
    })
}

pub(super) fn larger(lost: Both<f64>) -> Side {
    if lost.x >= lost.y { Side::X } else { Side::Y }
}

/// Points of the orbit from `start` to `end`, at these parts of the way of the side `along`.
pub(super) fn along_orbit(
    equation: &StateEquation,
    start: Both<f64>,
    end: Both<f64>,
    along: Side,
    parts: impl Iterator<Item = f64>,
) -> Vec<(f64, f64)> {
    let other = along.enemy();
    if start[along] == end[along] {
        return vec![(start.x, start.y)];
    }
    let point = |part: f64| {
        let strength = start[along] + (end[along] - start[along]) * part;
        let cost = equation.cost(along, start[along].into(), strength.into());
        let mut at = end;
        at[along] = strength;
        if part < 1.0 {
            // A side whose fire has no effect never makes the other pay.
            at[other] = equation.left(other, start[other].into(), cost).into();
        }
        (at.x, at.y)
    };
    parts.map(point).collect()
}

/// Engagements that begin on the two far edges of the picture.
pub(super) fn neighbours(equation: &StateEquation, corner: Both<f64>) -> Vec<Line> {
    let on_top = NEIGHBOURS.iter().map(|part| Both {
        x: corner.x * part,
        ..corner
    });
    let at_right = NEIGHBOURS.iter().map(|part| Both {
        y: corner.y * part,
        ..corner
    });
    on_top
        .chain([corner])
        .chain(at_right)
        .filter(|start| {
            let cost = costs(equation, *start, Both::default());
            cost.x > 0.0 || cost.y > 0.0
        })
        .map(|start| Line {
            role: Role::Neighbour,
            points: to_the_last(equation, start, NEIGHBOUR_POINTS),
            label: String::new(),
        })
        .collect()
}

/// Where both sides cost the same to bring down to the last; `None` where no strengths do: where one of them never pays,
/// and where one cannot be brought down at any cost.
pub(super) fn parity(equation: &StateEquation, corner: Both<f64>) -> Option<Vec<(f64, f64)>> {
    let cost = costs(equation, corner, Both::default());
    if !(cost.x > 0.0 && cost.y > 0.0) || is_endless(cost.x) || is_endless(cost.y) {
        return None;
    }
    // It leaves the picture through the edge of the side that is worth less there.
    let over = if cost.x > cost.y { Side::X } else { Side::Y };
    let mut edge = corner;
    edge[over] = equation
        .left(over, corner[over].into(), cost[over] - cost[over.enemy()])
        .into();
    Some(path(equation, edge, Both::default(), POINTS))
}
