//! Strength over time.

use super::{Axis, Line, POINTS, Picture, Role, STEPS, Spot, Table, steps};
use crate::fight::{Fight, break_line};
use crate::outcome::{Breaks, Ended};
use crate::sides::{Both, Side};
use crate::statement::{Statement, Values};
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, three, time};

/// An endless fight is shown until the side that fades is down to this part of its start.
const SHOWN_DOWN_TO: f64 = 0.02;

/// Strength over time: both curves, the break lines, the time of defeat and the clock.
///
/// `None` where the fight was worked out without its trajectory.
pub fn strength(statement: &Statement, fight: &Fight) -> Option<Picture> {
    let trajectory = fight.trajectory.as_ref()?;
    let engagement = statement.engagement(&Values::new());
    let shown = shown_until(trajectory);
    let across = Axis::new(format!("time ({})", statement.unit.symbol()), shown * 1.06, 6);
    let highest = trajectory.strengths_at(0.0);
    let up = Axis::new(statement.counted.clone(), highest.x.max(highest.y) * 1.08, 5);

    let mut lines = Vec::new();
    for side in Side::BOTH {
        let line = f64::from(break_line(&engagement, side));
        // A side that had lost more than that before the start has its line above the picture.
        if line > 0.0 && line <= up.to {
            let label = format!("{} breaks at {}", statement.names[side], in_words(line));
            lines.push(Line {
                role: Role::BreakLine(side),
                points: vec![(0.0, line), (across.to, line)],
                label,
            });
        }
    }
    lines.extend(moment(statement, fight, up.to));
    for side in Side::BOTH {
        let points = steps(POINTS)
            .map(|part| (shown * part, trajectory.strengths_at(shown * part)[side]))
            .collect();
        lines.push(Line {
            role: Role::Strength(side),
            points,
            label: statement.names[side].clone(),
        });
    }
    let spots = match trajectory.end {
        Some(end) => Side::BOTH
            .into_iter()
            .map(|side| Spot {
                side: Some(side),
                at: (shown, end[side]),
                label: in_words(end[side]),
            })
            .collect(),
        None => Vec::new(),
    };
    let table = table(statement, trajectory, shown);
    let summary = summary(statement, fight, shown);
    Some(Picture {
        across,
        up,
        lines,
        spots,
        summary,
        table,
        names: statement.names.clone(),
    })
}

/// The time up to which the curves are shown: the end, or long enough to see where an endless fight tends.
fn shown_until(trajectory: &Trajectory) -> f64 {
    let faded = |side: Side| {
        let start = trajectory.strengths_at(0.0)[side];
        trajectory.time_to_strength(side, start * SHOWN_DOWN_TO)
    };
    match trajectory.ends() {
        Some(end) if end > 0.0 => end,
        // An engagement that is over at the start, or in which nothing moves, is shown for one unit of time.
        Some(_) => 1.0,
        None => Side::BOTH
            .into_iter()
            .filter_map(faded)
            .reduce(f64::min)
            .filter(|time| *time > 0.0)
            .unwrap_or(1.0),
    }
}

/// The upright line at the end.
fn moment(statement: &Statement, fight: &Fight, top: f64) -> Option<Line> {
    let at = fight.outcome.pieces.last()?.to?;
    let (role, what) = match (fight.outcome.breaks, fight.outcome.ended) {
        (Breaks::X, _) => (Role::Defeat, format!("{} breaks", statement.names.x)),
        (Breaks::Y, _) => (Role::Defeat, format!("{} breaks", statement.names.y)),
        (Breaks::Both, _) => (Role::Defeat, "both break".into()),
        (Breaks::Neither, Ended::Clock) => (Role::Clock, "clock".into()),
        (Breaks::Neither, _) => return None,
    };
    let label = format!("{what}, {} {}", three(at), statement.unit.symbol());
    Some(Line {
        role,
        points: vec![(at, 0.0), (at, top)],
        label,
    })
}

fn table(statement: &Statement, trajectory: &Trajectory, shown: f64) -> Table {
    let names = &statement.names;
    let heads = vec![
        format!("time ({})", statement.unit.symbol()),
        names.x.clone(),
        names.y.clone(),
    ];
    let row = |part: f64| {
        let at = trajectory.strengths_at(shown * part);
        vec![six(shown * part), six(at.x), six(at.y)]
    };
    Table {
        heads,
        rows: steps(STEPS).map(row).collect(),
    }
}

fn summary(statement: &Statement, fight: &Fight, shown: f64) -> String {
    let sides = fight.outcome.sides();
    let part = |side: Side| {
        let end = sides[side].end.map_or("without bound".into(), in_words);
        format!(
            "{} from {} to {}",
            statement.names[side],
            in_words(sides[side].start),
            end
        )
    };
    let parts = Both::of(part);
    let span = match fight.outcome.ended {
        Ended::Break | Ended::Clock => format!("in {}", time(shown, statement.unit)),
        Ended::Limit => "in the limit of endless time".into(),
        Ended::Equilibrium => "at all times".into(),
    };
    format!("Strength over time: {} and {}, {span}.", parts.x, parts.y)
}
