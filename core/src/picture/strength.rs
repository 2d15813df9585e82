//! Strength over time.

use super::{Axis, Line, POINTS, Picture, Role, STEPS, Spot, Table, steps};
use crate::fight::{Fight, break_line};
use crate::outcome::{Breaks, Ended};
use crate::sides::{Both, Side};
use crate::statement::{Statement, Values};
use crate::trajectory::Trajectory;
use crate::words::format::{six, strength as in_words, time, with_unit};
use crate::words::sentence::breaks;

/// Strength over time: both curves, the break lines, the time of defeat and the clock.
///
/// `None` where the fight was worked out without its trajectory.
pub fn strength(statement: &Statement, fight: &Fight) -> Option<Picture> {
    let trajectory = fight.trajectory.as_ref()?;
    let engagement = statement.engagement(&Values::new());
    let shown = trajectory.shown;
    let across = Axis::new(format!("time ({})", statement.unit.symbol()), shown * 1.06, 6);
    let highest = trajectory.strengths_at(0.0);
    let up = Axis::new(statement.counted.clone(), highest.x.max(highest.y) * 1.08, 5);

    let mut lines = Vec::new();
    for side in Side::BOTH {
        let line = f64::from(break_line(&engagement, side));
        // A side that had lost more than that before the start has its line above the picture.
        if line > 0.0 && line <= up.to {
            let label = format!("{}: {} breaks", in_words(line), statement.names[side]);
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
