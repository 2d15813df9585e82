//! The outcome against a number in question: what is left of both sides, and where the outcome changes.

use super::{Axis, Line, Picture, Role, STEPS, Table, steps};
use crate::asked::{Asked, End, Sample, Why};
use crate::family::Span;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::words::asked::happens;
use crate::words::format::{six, strength};
use crate::words::slot;

/// What is left of both sides at the end against the number in question; `None` before anything was looked at.
pub fn asked(statement: &Statement, asked: &Asked) -> Option<Picture> {
    let shown = shown(asked);
    let seen: Vec<&Sample> = asked
        .samples
        .iter()
        .filter(|sample| shown.low <= sample.value && sample.value <= shown.high)
        .collect();
    let finite = |sample: &&Sample| sample.end.x.max(sample.end.y);
    let highest = seen
        .iter()
        .map(finite)
        .filter(|end| end.is_finite())
        .fold(0.0, f64::max);
    seen.first()?;
    let name = slot::name(statement, &asked.slot);
    let named = slot::name_with_unit(statement, &asked.slot);
    let across = Axis::between(named, shown.low, shown.high, 6);
    let up = Axis::new(
        format!("{} left at the end", statement.counted),
        if highest > 0.0 { highest * 1.08 } else { 1.0 },
        5,
    );
    let mut lines = uprights(statement, asked, shown, up.to);
    for side in Side::BOTH {
        lines.extend(curves(statement, &seen, side));
    }
    lines.extend(met(asked, shown));
    Some(Picture {
        across,
        up,
        lines,
        spots: Vec::new(),
        summary: summary(statement, asked, &name),
        table: table(statement, asked, shown),
        names: statement.names.clone(),
        ground: None,
    })
}

/// What is shown of the span: as asked, else no more than twice as far as anything happens.
fn shown(asked: &Asked) -> Span {
    let last = asked.outcomes.iter().map(|segment| segment.to);
    let ends = asked.met.iter().flatten().flat_map(|met| [met.from, met.to]);
    let crossings = last.chain(ends).filter_map(|end| match end {
        End::Crossing(boundary) => Some(boundary.at),
        End::Edge(_) => None,
    });
    let far = crossings.chain(asked.slot.value()).fold(0.0, f64::max);
    if asked.why == Why::Asked || far <= 0.0 || asked.span.low < 0.0 {
        return asked.span;
    }
    Span {
        high: asked.span.high.min(2.0 * far),
        ..asked.span
    }
}

/// Upright lines where the outcome changes, and at the number as it is now.
fn uprights(statement: &Statement, asked: &Asked, shown: Span, top: f64) -> Vec<Line> {
    let upright = |role: Role, at: f64, label: String| Line {
        role,
        points: vec![(at, 0.0), (at, top)],
        label,
    };
    let value = |at: f64| slot::value(statement, asked.slot.unit, at);
    let mut lines: Vec<Line> = asked
        .outcomes
        .iter()
        .filter_map(|segment| match segment.to {
            End::Crossing(boundary) => Some(upright(Role::Change, boundary.at, value(boundary.at))),
            End::Edge(_) => None,
        })
        .collect();
    let now = asked
        .slot
        .value()
        .filter(|now| shown.low <= *now && *now <= shown.high);
    lines.extend(now.map(|now| upright(Role::Now, now, format!("now {}", value(now)))));
    lines
}

/// What is left of a side, broken off where the outcome changes.
fn curves(statement: &Statement, seen: &[&Sample], side: Side) -> Vec<Line> {
    let mut lines: Vec<Line> = Vec::new();
    let mut before = None;
    for sample in seen.iter().filter(|sample| sample.end[side].is_finite()) {
        let story = Some(sample.story);
        let point = (sample.value, sample.end[side]);
        match lines.last_mut() {
            Some(line) if story == before => line.points.push(point),
            _ => lines.push(Line {
                role: Role::Strength(side),
                points: vec![point],
                label: String::new(),
            }),
        }
        before = story;
    }
    // A single value, as at parity, stands alone between two curves.
    lines.retain(|line| line.points.len() > 1);
    let width = |line: &Line| line.points[line.points.len() - 1].0 - line.points[0].0;
    let widest = (0..lines.len()).max_by(|a, b| width(&lines[*a]).total_cmp(&width(&lines[*b])));
    if let Some(widest) = widest {
        lines[widest].label = statement.names[side].to_string();
    }
    lines
}

/// Along the foot, where all conditions hold.
fn met(asked: &Asked, shown: Span) -> Vec<Line> {
    let within = |value: f64| value.clamp(shown.low, shown.high);
    let all = asked.met.iter().flatten();
    all.map(|met| Line {
        role: Role::Met,
        points: vec![(within(met.from.at()), 0.0), (within(met.to.at()), 0.0)],
        label: String::new(),
    })
    .filter(|line| line.points[0].0 < line.points[1].0)
    .collect()
}

fn summary(statement: &Statement, asked: &Asked, name: &str) -> String {
    let changes = asked.outcomes.iter().filter_map(|segment| match segment.to {
        End::Crossing(boundary) => Some(slot::value(statement, asked.slot.unit, boundary.at)),
        End::Edge(_) => None,
    });
    let changes: Vec<String> = changes.collect();
    let what = match changes.split_last() {
        None => "the outcome is the same all along".into(),
        Some((last, [])) => format!("the outcome changes at {last}"),
        Some((last, first)) => format!("the outcome changes at {} and {last}", first.join(", ")),
    };
    format!("{}: {what}.", against(name))
}

fn against(name: &str) -> String {
    format!("What is left of both sides at the end, against {name}")
}

fn table(statement: &Statement, asked: &Asked, shown: Span) -> Table {
    let names = &statement.names;
    let counted = &statement.counted;
    let near = |value: f64| {
        let off = |sample: &&Sample| (sample.value - value).abs();
        asked.samples.iter().min_by(|a, b| off(a).total_cmp(&off(b)))
    };
    let row = |sample: &Sample| {
        let left = Both::of(|side| {
            let end = sample.end[side];
            if end.is_finite() { six(end) } else { strength(end) }
        });
        vec![
            slot::six_with_unit(statement, asked.slot.unit, sample.value),
            left.x,
            left.y,
            happens(statement, &sample.story),
        ]
    };
    let at = |part: f64| shown.low + (shown.high - shown.low) * part;
    let mut samples: Vec<&Sample> = steps(STEPS).filter_map(|part| near(at(part))).collect();
    samples.dedup_by(|a, b| a.value == b.value);
    let name = slot::name(statement, &asked.slot);
    Table {
        caption: against(&name),
        heads: vec![
            name,
            format!("{} ({counted})", names.x),
            format!("{} ({counted})", names.y),
            "what happens".into(),
        ],
        rows: samples.into_iter().map(row).collect(),
    }
}
