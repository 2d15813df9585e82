//! One side against the other: the parametric curve of the engagement among its neighbours.

use super::{Axis, Line, Picture, Role, STEPS, Spot, Table, steps};
use crate::double::Double;
use crate::fight::{Fight, break_line};
use crate::outcome::{Breaks, Ended, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::{StateEquation, is_endless};
use crate::statement::{Statement, Values};
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, with_unit};
use crate::words::sentence::breaks;

/// Where on the two far edges of the picture neighbouring engagements begin, as parts of the edge.
const NEIGHBOURS: [f64; 4] = [0.2, 0.4, 0.6, 0.8];

/// Points of a curve. Each takes double-double powers or a root, and these curves are smooth: more would not be seen.
const POINTS: usize = 160;

/// Points of a neighbouring engagement, which is drawn thin and for comparison.
const NEIGHBOUR_POINTS: usize = 40;

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
    let parity = parity(equation, corner);
    let has_parity = parity.is_some();
    if let Some(points) = parity {
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
            let label = format!("{}: {} breaks", in_words(line), names[side]);
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
        points: to_the_last(equation, end, POINTS),
        label: String::new(),
    });
    let path = path(equation, start, end, POINTS);
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
    let summary = summary(statement, fight, has_parity, start, end);
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
fn costs(equation: &StateEquation, from: Both<f64>, to: Both<f64>) -> Both<Double> {
    Both::of(|side| equation.cost(side, from[side].into(), to[side].into()))
}

/// The engagement from `start` until one side is down to the last.
fn to_the_last(equation: &StateEquation, start: Both<f64>, count: usize) -> Vec<(f64, f64)> {
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
fn path(equation: &StateEquation, start: Both<f64>, end: Both<f64>, count: usize) -> Vec<(f64, f64)> {
    let lost = lost(start, end);
    let costly = Side::BOTH
        .into_iter()
        .find(|side| equation.needs_root(*side) && lost[*side] > LEAST_FOLLOWED);
    let along = costly.unwrap_or(larger(lost));
    let eased = |part: f64| part * part * (3.0 - 2.0 * part);
    along_orbit(equation, start, end, along, steps(count).map(eased))
}

/// The parts of both sides that are lost.
fn lost(start: Both<f64>, end: Both<f64>) -> Both<f64> {
    Both::of(|side| {
        if start[side] > 0.0 {
            1.0 - end[side] / start[side]
        } else {
            0.0
        }
    })
}

fn larger(lost: Both<f64>) -> Side {
    if lost.x >= lost.y { Side::X } else { Side::Y }
}

/// Points of the orbit from `start` to `end`, at these parts of the way of the side `along`.
fn along_orbit(
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
            points: to_the_last(equation, start, NEIGHBOUR_POINTS),
            label: String::new(),
        })
        .collect()
}

/// Where both sides cost the same to bring down to the last; `None` where no strengths do: where one of them never pays,
/// and where one cannot be brought down at any cost.
fn parity(equation: &StateEquation, corner: Both<f64>) -> Option<Vec<(f64, f64)>> {
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

fn end_label(statement: &Statement, fight: &Fight) -> String {
    let at = |time: f64| with_unit(time, statement.unit);
    let broken = |side: Side, time: f64| {
        format!(
            "{} {}, {}",
            statement.names[side],
            breaks(statement, side),
            at(time)
        )
    };
    let clock = fight.outcome.pieces.last().and_then(|piece| piece.to);
    match (fight.outcome.breaks, fight.outcome.time, clock) {
        (Breaks::X, Some(time), _) => broken(Side::X, time),
        (Breaks::Y, Some(time), _) => broken(Side::Y, time),
        (Breaks::Both, Some(time), _) => format!("both break, {}", at(time)),
        (_, _, Some(clock)) => format!("clock, {}", at(clock)),
        _ if fight.outcome.ended == Ended::Equilibrium => "stays".into(),
        _ => "limit".into(),
    }
}

fn table(statement: &Statement, trajectory: &Trajectory, equation: &StateEquation, end: Both<f64>) -> Table {
    let names = &statement.names;
    let start = trajectory.strengths_at(0.0);
    // Even steps of the side that loses the larger part.
    let points = along_orbit(equation, start, end, larger(lost(start, end)), steps(STEPS));
    let row = |at: &(f64, f64)| vec![six(at.0), six(at.1)];
    let rows = points.iter().map(row).collect();
    Table {
        heads: vec![
            format!("{} ({})", names.x, statement.counted),
            format!("{} ({})", names.y, statement.counted),
        ],
        rows,
    }
}

fn summary(
    statement: &Statement,
    fight: &Fight,
    has_parity: bool,
    start: Both<f64>,
    end: Both<f64>,
) -> String {
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
    let engagement = statement.engagement(&Values::new());
    let fires = Side::BOTH
        .iter()
        .any(|side| engagement.sides[*side].fire.takes_effect());
    let last = if has_parity {
        match fight.outcome.to_the_last {
            Some(ToTheLast::X) => format!(
                "the start lies on the side of the parity line where {} is left",
                names.x
            ),
            Some(ToTheLast::Y) => format!(
                "the start lies on the side of the parity line where {} is left",
                names.y
            ),
            Some(ToTheLast::Parity) | None => "the start lies on the parity line".into(),
        }
    } else {
        match fight.outcome.to_the_last {
            Some(ToTheLast::X) => format!(
                "there is no parity line: {} is left whatever the strengths,",
                names.x
            ),
            Some(ToTheLast::Y) => format!(
                "there is no parity line: {} is left whatever the strengths,",
                names.y
            ),
            _ if !fires => "no fire takes effect, not even".into(),
            _ => "there is no parity line: both fade to nothing whatever their strengths,".into(),
        }
    };
    format!(
        "One side against the other: from {} to {}; {last} if both fight to the last.",
        pair(start),
        pair(end)
    )
}
