//! The figures under the sentence, to six significant digits, and no less than whole combatants.

use super::format::{amount, per_cent, six, three};
use crate::double::Double;
use crate::fight::{break_line, plain_piece};
use crate::outcome::{Breaks, Ended, Method, Outcome, ToTheLast};
use crate::schedule::any_fire;
use crate::sides::{Both, Side};
use crate::statement::{Names, Statement, TimeUnit};
use crate::terms::Engagement;

/// A figure of each side.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// What it is, with its unit.
    pub label: String,
    /// Its text for each side.
    pub values: Both<String>,
    /// The name of the line of the working that each comes from.
    pub lines: Both<Option<&'static str>>,
}

/// A figure of both sides.
#[derive(Clone, Debug, PartialEq)]
pub struct Figure {
    /// What it is.
    pub label: String,
    /// Its text.
    pub value: String,
    /// The name of the line of the working that it comes from.
    pub line: Option<&'static str>,
}

/// The figures of an outcome.
#[derive(Clone, Debug, PartialEq)]
pub struct Figures {
    /// The names of the sides, which head the columns.
    pub names: Names,
    /// A figure of each side a row.
    pub rows: Vec<Row>,
    /// What concerns both.
    pub both: Vec<Figure>,
}

/// The figures of `outcome`.
pub fn figures(statement: &Statement, outcome: &Outcome) -> Figures {
    let sides = outcome.sides();
    let counted = &statement.counted;
    let engagement = statement.engagement();
    let row = |label: String, value: &dyn Fn(Side) -> String| Row {
        label,
        values: Both::of(value),
        lines: Both::default(),
    };
    let mut rows = vec![row(format!("At the start ({counted})"), &|side| {
        amount(sides[side].start)
    })];
    let still = is_still(&engagement, outcome);
    let line = Both::of(|side| (!still).then_some(line_of_break(side)));
    let end = Both::of(|side| line_of_end(outcome, still, side));
    rows.extend(brought_in(&engagement, outcome, counted));
    rows.push(
        row(
            format!("Breaks at ({counted} left)"),
            &|side| match line_in_the_end(&engagement, outcome, side) {
                line if line > 0.0 && line.is_finite() => amount(line),
                line if line > 0.0 => "rises for ever".into(),
                _ => "to the last".into(),
            },
        )
        .from(line),
    );
    let left = if outcome.ended == Ended::Limit {
        "Tends to"
    } else {
        "Left at the end"
    };
    let ends = [
        row(format!("{left} ({counted})"), &|side| {
            sides[side].end.map_or("without bound".into(), amount)
        }),
        row(format!("Losses ({counted})"), &|side| {
            amount(sides[side].losses.all)
        }),
        row("Lost, of all committed".into(), &|side| {
            let lost = sides[side].losses.all + engagement.sides[side].lost;
            if sides[side].committed.is_finite() {
                format!("{}\u{202f}%", six(100.0 * fraction(lost, sides[side].committed)))
            } else {
                "no part of what has no bound".into()
            }
        }),
    ];
    rows.extend(ends.map(|row| row.from(end)));
    rows.extend(losses_by_cause(outcome, counted));
    rows.extend(pace(statement, outcome));
    let mut both = both(statement, outcome, still);
    if plain_piece(&engagement).is_none() {
        lead_to_pieces(outcome, &mut rows, &mut both);
    }
    Figures {
        names: statement.names.clone(),
        rows,
        both,
    }
}

/// The working of an engagement of several pieces has other lines: what the last one hands over, the time, the ratios.
fn lead_to_pieces(outcome: &Outcome, rows: &mut [Row], both: &mut [Figure]) {
    let hands_over = !outcome.pieces.is_empty() && outcome.time != Some(0.0);
    for row in rows {
        let ends = !row.label.starts_with("Breaks at") && hands_over;
        row.lines = Both::of(|side| row.lines[side].filter(|_| ends).map(|_| "left"));
    }
    for figure in both {
        figure.line = match figure.line {
            Some("breaks") => outcome.time.map(|_| "time"),
            Some("last") => None,
            line => line,
        };
    }
}

/// What came and went besides the strengths at the start, where anything did.
fn brought_in(engagement: &Engagement, outcome: &Outcome, counted: &str) -> Vec<Row> {
    let sides = outcome.sides();
    let parts = [
        ("Lost before", Both::of(|side| engagement.sides[side].lost)),
        ("Joined", Both::of(|side| sides[side].joined)),
        ("Withdrawn", Both::of(|side| sides[side].withdrawn)),
        ("Committed in all", Both::of(|side| sides[side].committed)),
    ];
    let more = |side: Side| engagement.sides[side].lost > 0.0 || sides[side].joined > 0.0;
    let shown = |label: &str, values: &Both<f64>| match label {
        "Committed in all" => more(Side::X) || more(Side::Y),
        _ => values.x > 0.0 || values.y > 0.0,
    };
    let rows = parts.into_iter().filter(|(label, values)| shown(label, values));
    rows.map(|(label, values)| Row {
        label: format!("{label} ({counted})"),
        values: Both::of(|side| amount(values[side])),
        lines: Both::default(),
    })
    .collect()
}

/// The strength at which `side` breaks once all that came and went is counted: (1 − break) × committed − withdrawn.
fn line_in_the_end(engagement: &Engagement, outcome: &Outcome, side: Side) -> f64 {
    let totals = outcome.sides()[side];
    if totals.committed == engagement.committed_at_start(side) && totals.withdrawn == 0.0 {
        return break_line(engagement, side).into();
    }
    let held = Double::difference(1.0, engagement.sides[side].break_point);
    if held > 0.0 && totals.committed.is_infinite() {
        return totals.committed;
    }
    let held = held * totals.committed.min(f64::MAX);
    (held - totals.withdrawn).into()
}

/// Losses by what caused them, where more than fire did.
fn losses_by_cause(outcome: &Outcome, counted: &str) -> Vec<Row> {
    let losses = Both::of(|side| outcome.sides()[side].losses);
    let parts = [
        ("by fire", Both::of(|side| losses[side].fire)),
        ("by supporting arms", Both::of(|side| losses[side].support)),
        ("by wastage", Both::of(|side| losses[side].wastage)),
    ];
    let any = |values: &Both<f64>| values.x != 0.0 || values.y != 0.0;
    if !any(&parts[1].1) && !any(&parts[2].1) {
        return Vec::new();
    }
    let rows = parts.into_iter().filter(|(_, values)| any(values));
    rows.map(|(label, values)| Row {
        label: format!("Losses {label} ({counted})"),
        values: Both::of(|side| amount(values[side])),
        lines: Both::default(),
    })
    .collect()
}

/// What part of all it committed a side loses per unit of time, on the average from the start to the end; and per day,
/// where it lasts that long.
fn pace(statement: &Statement, outcome: &Outcome) -> Vec<Row> {
    let end = outcome.pieces.last().and_then(|piece| piece.to);
    let Some(end) = end.filter(|end| *end > 0.0) else {
        return Vec::new();
    };
    let sides = outcome.sides();
    let row = |unit: &str, units: f64| Row {
        label: format!("Lost on the average, of all committed, per\u{a0}{unit}"),
        values: Both::of(|side| {
            per_cent(fraction(
                sides[side].losses.all / end * units,
                sides[side].committed,
            ))
        }),
        lines: Both::default(),
    };
    let unit = statement.unit;
    let mut rows = vec![row(unit.symbol(), 1.0)];
    if unit != TimeUnit::Day && end >= unit.in_a_day() {
        rows.push(row("d", unit.in_a_day()));
    }
    rows
}

/// A part of a whole; nothing of nothing is nothing.
fn fraction(part: f64, whole: f64) -> f64 {
    if whole > 0.0 { part / whole } else { 0.0 }
}

impl Row {
    fn from(mut self, lines: Both<Option<&'static str>>) -> Row {
        self.lines = lines;
        self
    }
}

/// The line of the working with the strength at which `side` breaks.
fn line_of_break(side: Side) -> &'static str {
    match side {
        Side::X => "line.x",
        Side::Y => "line.y",
    }
}

/// The line of the working with what is left of `side`.
fn line_of_end(outcome: &Outcome, still: bool, side: Side) -> Option<&'static str> {
    let sides = outcome.sides();
    let broken = match outcome.breaks {
        Breaks::X => side == Side::X,
        Breaks::Y => side == Side::Y,
        Breaks::Both => true,
        Breaks::Neither => sides[side].end == Some(0.0),
    };
    Some(match outcome.ended {
        Ended::Clock => "clock",
        _ if still => "breaks",
        // Both fade to nothing: that is said where it is said that nobody breaks.
        Ended::Limit if sides.x.end == sides.y.end => "breaks",
        // A side that had broken before the start keeps what it has, which is less than its line.
        _ if broken && sides[side].losses.all > 0.0 => line_of_break(side),
        _ => "left",
    })
}

/// Whether nothing changes, so that nobody comes to a line and the working has none.
fn is_still(engagement: &Engagement, outcome: &Outcome) -> bool {
    outcome.ended != Ended::Break && !any_fire(engagement)
}

fn both(statement: &Statement, outcome: &Outcome, still: bool) -> Vec<Figure> {
    let fires = any_fire(&statement.engagement());
    let unit = statement.unit.symbol();
    let names = &statement.names;
    let mut lines = Vec::new();
    let mut figure = |label: &str, value: String, line: Option<&'static str>| {
        lines.push(Figure {
            label: label.to_owned(),
            value,
            line,
        });
    };
    let first = match outcome.breaks {
        Breaks::X => names.x.clone(),
        Breaks::Y => names.y.clone(),
        Breaks::Both => "both, at the same moment".into(),
        Breaks::Neither => "neither".into(),
    };
    figure("Breaks first", first.into_owned(), Some("breaks"));
    if let Some(time) = outcome.time {
        figure("Time of the break", format!("{} {unit}", six(time)), Some("time"));
    } else if let Some(clock) = outcome.pieces.last().and_then(|piece| piece.to) {
        let at = format!("{} {unit}", six(clock));
        let (label, line) = match outcome.ended {
            Ended::Unfinished => ("Worked out up to", None),
            Ended::Withdrawn => ("Nobody of a side left from", None),
            _ => ("Cut off by the clock at", Some("clock")),
        };
        figure(label, at, line);
    }
    if let Some(below) = outcome.below_one {
        let who = match outcome.to_the_last {
            Some(ToTheLast::X) => &names.y,
            Some(ToTheLast::Y) => &names.x,
            _ => "The first of both",
        };
        let label = format!("{who} falls below one at");
        figure(&label, format!("{} {unit}", six(below)), None);
    }
    if let Some(ratio) = outcome.loss_exchange_ratio {
        figure(
            "Loss exchange ratio, by fire and support",
            exchange(names, ratio, ""),
            Some("exchange"),
        );
    }
    if let Some(ratio) = outcome.fractional_exchange_ratio {
        let words = exchange(names, ratio, "\u{202f}%");
        figure(
            "Fractional exchange ratio, likewise",
            words,
            Some("exchange.fraction"),
        );
    }
    let last = match outcome.to_the_last {
        Some(ToTheLast::X) => format!("{} would be left", names.x),
        Some(ToTheLast::Y) => format!("{} would be left", names.y),
        Some(ToTheLast::Parity) => "neither: the two are at parity".into(),
        // Where any fire takes effect and nobody would be left, both fade.
        None if fires => "neither: both fade to nothing".into(),
        None => "both: no fire takes effect".into(),
    };
    // A fight that is over before it begins, or in which nothing changes, has no such line.
    let fought = !still && outcome.time != Some(0.0);
    figure("If both fought to the last", last, fought.then_some("last"));
    figure("Solved by", method(outcome.method).into(), None);
    lines
}

/// A ratio of Y's losses to X's in words, the larger side first: "Ondrel loses 1.01 for each 1 of Vessary".
fn exchange(names: &Names, ratio: f64, unit: &str) -> String {
    if ratio > 1.0 {
        format!(
            "{} loses {}{unit} for each 1{unit} of {}",
            names.y,
            three(ratio),
            names.x
        )
    } else if ratio > 0.0 {
        format!(
            "{} loses {}{unit} for each 1{unit} of {}",
            names.x,
            three(1.0 / ratio),
            names.y
        )
    } else {
        format!("{} loses none", names.y)
    }
}

fn method(method: Method) -> &'static str {
    match method {
        Method::ClosedForm => "closed form",
        Method::Integration => "integration, step by step",
        Method::Quadrature => "state equation, and a quadrature for the time",
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::{Effort, fight};
    use crate::golden;
    use crate::pairs::Pairs;
    use crate::words::working::working;

    /// Every figure that names a line of the working names one that is there.
    #[test]
    fn figures_come_from_lines_that_are_there() {
        let special = [
            "x.start=600&x.fire=none&y.start=400&y.fire=none",
            "x.start=600&x.fire=none&y.start=400&y.fire=none&until=3",
            "x.start=600&x.fire=none&y.start=400&y.fire=area&y.rate=0.001",
            "x.start=60&x.lost=40&x.break=0.3&x.rate=1&y.start=400&y.rate=0.1",
            "x.start=60&x.lost=40&x.break=0.3&x.fire=none&y.start=400&y.fire=none",
            "x.start=600&x.fire=logarithmic&x.rate=0.1&y.start=400&y.fire=logarithmic&y.rate=0.1&until=2",
            "x.start=600&x.fire=logarithmic&x.rate=0.1&y.start=400&y.fire=logarithmic&y.rate=0.1",
            "x.start=600&x.rate=0.04&y.start=400&y.rate=0.09",
            "x.start=600&x.fire=area&x.rate=0.001&y.start=400&y.fire=area&y.rate=0.001",
            "x.start=600&x.rate=0.04&y.start=400&y.rate=0.06&y.join=64@4,-20@5&until=3",
            "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.06&y.break=0.4&y.join=64@4,-20@5",
            "x.start=60&x.lost=40&x.break=0.3&x.rate=1&x.wastage=0.1&y.start=400&y.rate=0.1&phase1.from=2",
            "x.start=600&x.fire=none&x.flow=5@1/&y.start=400&y.fire=none&y.wastage=0.1",
            "x.start=100&x.fire=power&x.p=0.5&x.q=0&x.rate=1&y.start=100&y.fire=power&y.p=0.5&y.q=0&y.rate=1",
        ];
        let drawn = (0..500).map(golden::link);
        for link in special.into_iter().map(str::to_owned).chain(drawn) {
            let Ok(statement) = Statement::read(&Pairs::parse(&link)) else {
                panic!("{link}");
            };
            let outcome = fight(&statement.engagement(), Effort::Outcome).outcome;
            let lines = working(&statement, &outcome);
            let found = figures(&statement, &outcome);
            let rows = found.rows.iter().flat_map(|row| [row.lines.x, row.lines.y]);
            for name in rows.chain(found.both.iter().map(|figure| figure.line)).flatten() {
                assert!(lines.iter().any(|line| line.name == name), "{link}: {name}");
            }
        }
    }
}
