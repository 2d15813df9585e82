//! One side against the other: the parametric curve of the engagement among its neighbours.

use super::{Axis, Line, POINTS, Picture, Role, STEPS, Spot, Table, steps};
use crate::fight::{Fight, break_line};
use crate::outcome::{Breaks, Ended, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::StateEquation;
use crate::statement::{Statement, Values};
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, three};
use twofloat::TwoFloat;

/// Where on the two far edges of the picture neighbouring engagements begin, as parts of the edge.
const NEIGHBOURS: [f64; 4] = [0.2, 0.4, 0.6, 0.8];

/// One side against the other: the engagement from start to end, how it would go on to the last, the break lines, the
/// parity line and neighbouring engagements, all by the state equation.
///
/// `None` where the fight was worked out without its trajectory.
pub fn orbit(statement: &Statement, fight: &Fight) -> Option<Picture> {
    let trajectory = fight.trajectory.as_ref()?;
    let engagement = statement.engagement(&Values::new());
    let piece = trajectory.pieces.first()?;
    let (equation, start) = (&piece.equation, piece.start);
    let counted = &statement.counted;
    let names = &statement.names;
    let across = Axis::new(format!("{} ({counted})", names.x), start.x * 1.12, 5);
    let up = Axis::new(format!("{} ({counted})", names.y), start.y * 1.12, 5);
    let corner = Both {
        x: across.to,
        y: up.to,
    };

    let mut lines = neighbours(equation, corner);
    if let Some(points) = parity(equation, corner) {
        lines.push(Line {
            role: Role::Parity,
            points,
            label: "parity".into(),
        });
    }
    for side in Side::BOTH {
        let line = f64::from(break_line(&engagement, side));
        // A side that had lost more than that before the start has its line outside the picture.
        if line > 0.0 && line <= corner[side] {
            let points = match side {
                Side::X => vec![(line, 0.0), (line, up.to)],
                Side::Y => vec![(0.0, line), (across.to, line)],
            };
            let label = format!("{} breaks at {}", names[side], in_words(line));
            lines.push(Line {
                role: Role::BreakLine(side),
                points,
                label,
            });
        }
    }
    let end = Both::of(|side| fight.outcome.sides()[side].end.unwrap_or(0.0));
    lines.push(Line {
        role: Role::ToTheLast,
        points: to_the_last(equation, end),
        label: String::new(),
    });
    let path = path(equation, start, end);
    lines.push(Line {
        role: Role::Fight,
        points: path,
        label: String::new(),
    });
    let spots = vec![
        Spot {
            side: None,
            at: (start.x, start.y),
            label: "start".into(),
        },
        Spot {
            side: breaker(fight.outcome.breaks),
            at: (end.x, end.y),
            label: end_label(statement, fight),
        },
    ];
    let table = table(statement, trajectory, equation, end);
    let summary = summary(statement, fight, start, end);
    Some(Picture {
        across,
        up,
        lines,
        spots,
        summary,
        table,
        names: names.clone(),
    })
}

fn breaker(breaks: Breaks) -> Option<Side> {
    match breaks {
        Breaks::X => Some(Side::X),
        Breaks::Y => Some(Side::Y),
        Breaks::Both | Breaks::Neither => None,
    }
}

/// What each side costs to bring down from `from` to `to`.
fn costs(equation: &StateEquation, from: Both<f64>, to: Both<f64>) -> Both<TwoFloat> {
    Both::of(|side| equation.cost(side, from[side].into(), to[side].into()))
}

/// The engagement from `start` until one side is down to the last.
fn to_the_last(equation: &StateEquation, start: Both<f64>) -> Vec<(f64, f64)> {
    let cost = costs(equation, start, Both::default());
    let loser = if cost.x > cost.y { Side::Y } else { Side::X };
    let mut end = Both::default();
    if !StateEquation::tie(cost) {
        end[loser.enemy()] = equation
            .left(loser.enemy(), start[loser.enemy()].into(), cost[loser])
            .into();
    }
    path(equation, start, end)
}

/// The orbit between two of its points, followed along the side that loses the larger part.
fn path(equation: &StateEquation, start: Both<f64>, end: Both<f64>) -> Vec<(f64, f64)> {
    let lost = Both::of(|side| {
        if start[side] > 0.0 {
            1.0 - end[side] / start[side]
        } else {
            0.0
        }
    });
    let along = if lost.x >= lost.y { Side::X } else { Side::Y };
    let other = along.enemy();
    if lost[along] == 0.0 {
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
    steps(POINTS).map(point).collect()
}

/// Engagements that begin on the two far edges of the picture.
fn neighbours(equation: &StateEquation, corner: Both<f64>) -> Vec<Line> {
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
            points: to_the_last(equation, start),
            label: String::new(),
        })
        .collect()
}

/// Where both sides cost the same to bring down to the last; `None` where one of them never pays.
fn parity(equation: &StateEquation, corner: Both<f64>) -> Option<Vec<(f64, f64)>> {
    let cost = costs(equation, corner, Both::default());
    if !(cost.x > 0.0 && cost.y > 0.0) {
        return None;
    }
    // It leaves the picture through the edge of the side that is worth less there.
    let over = if cost.x > cost.y { Side::X } else { Side::Y };
    let mut edge = corner;
    edge[over] = equation
        .left(over, corner[over].into(), cost[over] - cost[over.enemy()])
        .into();
    Some(path(equation, edge, Both::default()))
}

fn end_label(statement: &Statement, fight: &Fight) -> String {
    let names = &statement.names;
    let at = |time: f64| format!("{} {}", three(time), statement.unit.symbol());
    let clock = fight.outcome.pieces.last().and_then(|piece| piece.to);
    match (fight.outcome.breaks, fight.outcome.time, clock) {
        (Breaks::X, Some(time), _) => format!("{} breaks, {}", names.x, at(time)),
        (Breaks::Y, Some(time), _) => format!("{} breaks, {}", names.y, at(time)),
        (Breaks::Both, Some(time), _) => format!("both break, {}", at(time)),
        (_, _, Some(clock)) => format!("clock, {}", at(clock)),
        _ if fight.outcome.ended == Ended::Equilibrium => "stays".into(),
        _ => "limit".into(),
    }
}

fn table(statement: &Statement, trajectory: &Trajectory, equation: &StateEquation, end: Both<f64>) -> Table {
    let names = &statement.names;
    let start = trajectory.strengths_at(0.0);
    let points = path(equation, start, end);
    let row = |at: &(f64, f64)| vec![six(at.0), six(at.1)];
    let rows = points.iter().step_by((POINTS / STEPS).max(1)).map(row).collect();
    Table {
        heads: vec![names.x.clone(), names.y.clone()],
        rows,
    }
}

fn summary(statement: &Statement, fight: &Fight, start: Both<f64>, end: Both<f64>) -> String {
    let names = &statement.names;
    let pair = |at: Both<f64>| {
        format!(
            "{} {} and {} {}",
            names.x,
            in_words(at.x),
            names.y,
            in_words(at.y)
        )
    };
    let last = match fight.outcome.to_the_last {
        Some(ToTheLast::X) => format!(
            "the start lies on the side of the parity line where {} is left",
            names.x
        ),
        Some(ToTheLast::Y) => format!(
            "the start lies on the side of the parity line where {} is left",
            names.y
        ),
        Some(ToTheLast::Parity) => "the start lies on the parity line".into(),
        None => "no fire takes effect".into(),
    };
    format!(
        "One side against the other: from {} to {}; {last} if both fight to the last.",
        pair(start),
        pair(end)
    )
}
