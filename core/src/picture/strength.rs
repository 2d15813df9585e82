//! Strength over time.

use super::{Axes, Axis, Line, POINTS, Picture, Role, STEPS, Spot, Table, steps};
use crate::fight::{Fight, break_line as break_line_at_start};
use crate::order::sort_by;
use crate::outcome::{Breaks, Ended};
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, time, with_unit};
use crate::words::sentence::breaks;
use crate::words::timeline::{Moment, timeline};

/// Strength over time: both curves, the break lines, the time of defeat and the clock.
///
/// `None` where the fight was worked out without its trajectory.
pub fn strength(statement: &Statement, fight: &Fight) -> Option<Picture> {
    on_axes(statement, fight, None)
}

/// The same on the axes of another, what leaves them being cut off.
pub fn strength_on(statement: &Statement, fight: &Fight, axes: &Axes) -> Option<Picture> {
    on_axes(statement, fight, Some(axes)).map(|picture| picture.held_to(axes))
}

fn on_axes(statement: &Statement, fight: &Fight, axes: Option<&Axes>) -> Option<Picture> {
    let trajectory = fight.trajectory.as_ref()?;
    let shown = trajectory.shown;
    let own = || Axes {
        across: Axis::new(format!("time ({})", statement.unit.symbol()), shown * 1.06, 6),
        up: Axis::new(statement.counted.to_string(), highest(trajectory) * 1.08, 5),
    };
    let Axes { across, up } = axes.cloned().unwrap_or_else(own);

    let mut lines: Vec<Line> = Side::BOTH
        .into_iter()
        .flat_map(|side| break_lines(statement, trajectory, side, across.to, up.to))
        .collect();
    lines.extend(instants(statement, fight, up.to));
    lines.extend(moment(statement, fight, up.to));
    for side in Side::BOTH {
        let points = curve(trajectory, |at| at[side]);
        lines.push(Line {
            role: Role::Strength(side),
            points,
            label: statement.names[side].to_string(),
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
        ground: None,
    })
}

/// The highest strength of either side; never 0.
fn highest(trajectory: &Trajectory) -> f64 {
    let strengths = curve(trajectory, |at| at.x.max(at.y));
    let highest = strengths.into_iter().map(|point| point.1).fold(0.0, f64::max);
    if highest > 0.0 { highest } else { 1.0 }
}

/// A strength over the time that is shown, with a step at each instant where something arrives or leaves.
fn curve(trajectory: &Trajectory, of: impl Fn(Both<f64>) -> f64) -> Vec<(f64, f64)> {
    let shown = trajectory.shown;
    let mut points = Vec::new();
    for stretch in trajectory.stretches.iter().filter(|stretch| stretch.from < shown) {
        let length = stretch.to.unwrap_or(shown).min(shown) - stretch.from;
        // A short stretch needs fewer points than a long one, and is still a curve.
        let count = ((POINTS as f64 * length / shown) as usize).max(12);
        let point = |part: f64| {
            (
                stretch.from + length * part,
                of(stretch.strengths_at(length * part)),
            )
        };
        points.extend(steps(count).map(point));
    }
    if points.is_empty() {
        let at = of(trajectory.strengths_at(0.0));
        points.extend([(0.0, at), (shown, at)]);
    }
    if let (Some(end), Some(last)) = (trajectory.end, points.last_mut()) {
        // A break line is exact.
        last.1 = of(end);
    }
    points
}

/// The break line of a side, a line for each level to which arrivals move it; none where not all of it is in the picture.
///
/// The last is named in words, those before it by their number.
fn break_lines(
    statement: &Statement,
    trajectory: &Trajectory,
    side: Side,
    right: f64,
    top: f64,
) -> Vec<Line> {
    let mut points: Vec<(f64, f64)> = Vec::new();
    for stretch in &trajectory.stretches {
        let to = stretch.to.unwrap_or(right).min(right);
        for t in [stretch.from, to] {
            points.extend(stretch.break_line(side, t - stretch.from).map(|line| (t, line)));
        }
    }
    if points.is_empty() {
        let line = f64::from(break_line_at_start(&statement.engagement(), side));
        points.extend((line > 0.0).then_some((0.0, line)));
    }
    points.extend(points.last().map(|last| (right, last.1)));
    // A side that had lost more than that before the start has its line above the picture.
    if points.iter().any(|point| point.1 > top) {
        return Vec::new();
    }
    let levels = levels(points);
    let count = levels.len();
    let line = |(place, points): (usize, Vec<(f64, f64)>)| {
        let level = points.last().map_or(0.0, |last| last.1);
        let named = match place + 1 == count {
            true => format!("{}: {} breaks", in_words(level), statement.names[side]),
            // One that moves all the while has no number.
            false if points.iter().rev().nth(1).is_some_and(|before| before.1 == level) => in_words(level),
            false => String::new(),
        };
        Line {
            role: Role::BreakLine(side),
            points,
            label: named,
        }
    };
    levels.into_iter().enumerate().map(line).collect()
}

/// A line over time cut where it steps at one moment; each part but the first begins with the step. What lasts for a moment
/// only is no part.
fn levels(points: Vec<(f64, f64)>) -> Vec<Vec<(f64, f64)>> {
    let mut levels: Vec<Vec<(f64, f64)>> = Vec::new();
    let mut before: Option<(f64, f64)> = None;
    for point in points {
        let steps = before.is_some_and(|before| before.0 == point.0 && before.1 != point.1);
        match levels.last_mut() {
            Some(level) if !steps => level.push(point),
            _ => levels.push(before.into_iter().chain([point]).collect()),
        }
        before = Some(point);
    }
    levels.retain(|level| level.len() > 1);
    levels
}

/// Upright lines where something joins, leaves or changes.
fn instants(statement: &Statement, fight: &Fight, top: f64) -> Vec<Line> {
    let moments = timeline(statement, fight)
        .into_iter()
        .filter(|moment| !moment.mark.is_empty());
    let line = |moment: Moment| Line {
        role: Role::Instant,
        points: vec![(moment.time, 0.0), (moment.time, top)],
        label: moment.mark,
    };
    moments.map(line).collect()
}

/// The upright line at the end.
fn moment(statement: &Statement, fight: &Fight, top: f64) -> Option<Line> {
    let at = fight.outcome.pieces.last()?.to?;
    let broken = |side: Side| format!("{} {}", statement.names[side], breaks(statement, side));
    let (role, what) = match (fight.outcome.breaks, fight.outcome.ended) {
        (Breaks::X, _) => (Role::Defeat, broken(Side::X)),
        (Breaks::Y, _) => (Role::Defeat, broken(Side::Y)),
        (Breaks::Both, _) => (Role::Defeat, "both break".into()),
        (Breaks::Neither, Ended::Clock) => (Role::Clock, "clock".into()),
        (Breaks::Neither, _) => return None,
    };
    let label = format!("{what}, {}", with_unit(at, statement.unit));
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
        format!("{} ({})", names.x, statement.counted),
        format!("{} ({})", names.y, statement.counted),
    ];
    // A jump has two rows, its former end first.
    let mut rows: Vec<(f64, bool, Both<f64>)> = Vec::new();
    for (place, stretch) in trajectory.stretches.iter().enumerate().skip(1) {
        let (time, before) = (stretch.from, trajectory.strengths_before(place));
        let after = trajectory.strengths_at(time);
        if before != after && time <= shown {
            rows.extend([(time, false, before), (time, true, after)]);
        }
    }
    let even = steps(STEPS).map(|part| shown * part);
    rows.extend(even.map(|time| (time, true, trajectory.strengths_at(time))));
    sort_by(&mut rows, |a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)));
    rows.dedup_by_key(|row| (row.0, row.1));
    let row = |(time, behind, at): (f64, bool, Both<f64>)| {
        let when = if behind {
            six(time)
        } else {
            format!("just before {}", six(time))
        };
        vec![when, six(at.x), six(at.y)]
    };
    Table {
        caption: "Strength over time".into(),
        heads,
        rows: rows.into_iter().map(row).collect(),
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
        Ended::Break | Ended::Clock | Ended::Withdrawn | Ended::Unfinished => {
            format!("in {}", time(shown, statement.unit))
        }
        Ended::Limit | Ended::Growth => "in the limit of endless time".into(),
        Ended::Equilibrium => "at all times".into(),
    };
    format!("Strength over time: {} and {}, {span}.", parts.x, parts.y)
}
