//! One side against the other: the parametric curve of the engagement among its neighbours.

use super::paths::{POINTS, along_orbit, larger, lost, neighbours, parity, path, to_the_last};
use super::{Axes, Axis, Line, Picture, Role, STEPS, Spot, Table, steps};
use crate::fight::{Fight, break_line};
use crate::outcome::{Breaks, Ended, ToTheLast};
use crate::piece::Piece;
use crate::schedule::any_fire;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::stretch::Stretch;
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, with_unit};
use crate::words::sentence::breaks;
use crate::words::timeline::{Moment, timeline};

/// One side against the other: the engagement from start to end, how it would go on to the last, the break lines, and by
/// the state equation of its last stretch, where that has one, the parity line and neighbouring engagements.
///
/// `None` where the fight was worked out without its trajectory.
pub fn orbit(statement: &Statement, fight: &Fight) -> Option<Picture> {
    on_axes(statement, fight, None)
}

/// The same on the axes of another, what leaves them being cut off.
pub fn orbit_on(statement: &Statement, fight: &Fight, axes: &Axes) -> Option<Picture> {
    on_axes(statement, fight, Some(axes)).map(|picture| picture.held_to(axes))
}

fn on_axes(statement: &Statement, fight: &Fight, axes: Option<&Axes>) -> Option<Picture> {
    let trajectory = fight.trajectory.as_ref()?;
    let counted = &statement.counted;
    let names = &statement.names;
    let end = Both::of(|side| fight.outcome.sides()[side].end.unwrap_or(0.0));
    let fight_line = fight_path(trajectory, end, POINTS);
    let highest = |of: fn(&(f64, f64)) -> f64| {
        let highest = fight_line.iter().map(of).fold(0.0, f64::max);
        if highest > 0.0 { highest } else { 1.0 }
    };
    let own = || Axes {
        across: Axis::new(format!("{} ({counted})", names.x), highest(|at| at.0) * 1.12, 5),
        up: Axis::new(format!("{} ({counted})", names.y), highest(|at| at.1) * 1.12, 5),
    };
    let Axes { across, up } = axes.cloned().unwrap_or_else(own);
    let corner = Both {
        x: across.to,
        y: up.to,
    };

    let last = trajectory.stretches.last().and_then(Stretch::piece);
    let mut lines = last.map_or(Vec::new(), |piece| neighbours(&piece.equation, corner));
    let parity = last.and_then(|piece| parity(&piece.equation, corner));
    let has_parity = parity.is_some();
    let later = trajectory.stretches.last().map(|stretch| stretch.from);
    let later = later.filter(|from| last.is_some() && *from > 0.0);
    let later = later.map(|from| with_unit(from, statement.unit));
    lines.extend(parity.map(|points| Line {
        role: Role::Parity,
        points,
        label: match &later {
            Some(from) => format!("parity from {from} on"),
            None => "parity".into(),
        },
    }));
    lines.extend(break_lines(statement, trajectory, corner));
    let to_nothing = |piece: &Piece| to_the_last(&piece.equation, end, POINTS);
    lines.extend(last.map(|piece| Line {
        role: Role::ToTheLast,
        points: to_nothing(piece),
        label: String::new(),
    }));
    lines.push(Line {
        role: Role::Fight,
        points: fight_line,
        label: String::new(),
    });

    let start = trajectory.strengths_before(0);
    let mut spots = vec![Spot {
        side: None,
        at: (start.x, start.y),
        label: "start".into(),
    }];
    spots.extend(instants(statement, fight, trajectory));
    spots.push(Spot {
        side: breaker(fight.outcome.breaks),
        at: (end.x, end.y),
        label: end_label(statement, fight),
    });
    let table = table(statement, trajectory, end);
    let scheduled = (trajectory.instants.len() > 1).then_some(later.as_deref());
    let summary = summary(statement, fight, has_parity, scheduled, start, end);
    Some(Picture {
        across,
        up,
        lines,
        spots,
        summary,
        table,
        names: names.clone(),
        ground: None,
    })
}

fn breaker(breaks: Breaks) -> Option<Side> {
    match breaks {
        Breaks::X => Some(Side::X),
        Breaks::Y => Some(Side::Y),
        Breaks::Both | Breaks::Neither => None,
    }
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

/// The engagement itself: by the state equation where it is one stretch, else as the trajectory has it, with a straight
/// step where something arrives or leaves.
fn fight_path(trajectory: &Trajectory, end: Both<f64>, points: usize) -> Vec<(f64, f64)> {
    if let [stretch] = &trajectory.stretches[..]
        && let Some(piece) = stretch.piece()
    {
        return path(&piece.equation, piece.start, end, points);
    }
    let mut curve = Vec::new();
    for stretch in &trajectory.stretches {
        let length = stretch.to.unwrap_or(trajectory.shown.max(stretch.from)) - stretch.from;
        let point = |part: f64| {
            let at = stretch.strengths_at(length * part);
            (at.x, at.y)
        };
        curve.extend(steps(points / trajectory.stretches.len() + 8).map(point));
    }
    curve.push((end.x, end.y));
    curve
}

/// Upright and level lines at the strengths at which the sides break in the end, which is said where they have moved.
fn break_lines(statement: &Statement, trajectory: &Trajectory, corner: Both<f64>) -> Vec<Line> {
    let engagement = statement.engagement();
    let line = |side: Side| {
        let at_end = |stretch: &Stretch| {
            let end = stretch.to.unwrap_or(trajectory.shown.max(stretch.from));
            stretch.break_line(side, end - stretch.from)
        };
        let line = match trajectory.stretches.last() {
            Some(stretch) => at_end(stretch)?,
            None => f64::from(break_line(&engagement, side)),
        };
        // A side that had lost more than that before the start has its line outside the picture.
        if line <= 0.0 || line > corner[side] {
            return None;
        }
        let points = match side {
            Side::X => vec![(line, 0.0), (line, corner.y)],
            Side::Y => vec![(0.0, line), (corner.x, line)],
        };
        let at_start = trajectory
            .stretches
            .first()
            .and_then(|stretch| stretch.break_line(side, 0.0));
        let moved = if at_start.is_none_or(|start| start == line) {
            ""
        } else {
            " in the end"
        };
        let label = format!("{}{moved}: {} breaks", in_words(line), statement.names[side]);
        Some(Line {
            role: Role::BreakLine(side),
            points,
            label,
        })
    };
    Side::BOTH.into_iter().filter_map(line).collect()
}

/// Where something arrives, leaves or changes on the way.
fn instants(statement: &Statement, fight: &Fight, trajectory: &Trajectory) -> Vec<Spot> {
    let moments = timeline(statement, fight)
        .into_iter()
        .filter(|moment| !moment.mark.is_empty());
    let spot = |moment: Moment| {
        let at = trajectory.strengths_at(moment.time);
        Spot {
            side: None,
            at: (at.x, at.y),
            label: moment.mark,
        }
    };
    moments.map(spot).collect()
}

fn table(statement: &Statement, trajectory: &Trajectory, end: Both<f64>) -> Table {
    let names = &statement.names;
    let start = trajectory.strengths_at(0.0);
    let points = match &trajectory.stretches[..] {
        [stretch] if stretch.piece().is_some() => {
            let equation = &stretch.piece().map(|piece| piece.equation);
            // Even steps of the side that loses the larger part.
            let along = larger(lost(start, end));
            equation
                .map(|equation| along_orbit(&equation, start, end, along, steps(STEPS)))
                .unwrap_or_default()
        }
        _ => {
            let at = |part: f64| trajectory.strengths_at(trajectory.shown * part);
            steps(STEPS).map(at).map(|at| (at.x, at.y)).collect()
        }
    };
    let row = |at: &(f64, f64)| vec![six(at.0), six(at.1)];
    let rows = points.iter().map(row).collect();
    Table {
        caption: "One side against the other".into(),
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
    scheduled: Option<Option<&str>>,
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
    let fires = any_fire(&statement.engagement());
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
    let last = match scheduled {
        None => format!("{last} if both fight to the last"),
        Some(later) => {
            let lines = if has_parity {
                "the parity line and the fights nearby are"
            } else {
                "the fights nearby are"
            };
            let later = later.map_or(String::new(), |from| {
                format!("; {lines} those of what holds from {from} on")
            });
            format!("with what arrives, leaves and changes on the way{later}")
        }
    };
    format!(
        "One side against the other: from {} to {}; {last}.",
        pair(start),
        pair(end)
    )
}
