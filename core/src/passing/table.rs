//! The trajectory as a table for spreadsheets: comma-separated values (RFC 4180), at full precision.
//!
//! The first line is the head and every line has all columns, so that nothing has to be skipped or told apart. The
//! marking, the text mark and the caution stand in columns of their own, on every row: a row that is copied carries
//! them along.

use super::finding::Finding;
use super::times::Times;
use crate::caution;
use crate::mark::text_mark;
use crate::order::sort_by;
use crate::problem::seen;
use crate::sides::{Both, Side};
use crate::stretch::Stretch;
use crate::trajectory::Trajectory;
use crate::words::format::plain;
use crate::words::timeline::Moment;

/// Which signs part the columns and a number's decimals.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Signs {
    /// `0.5,1.5`
    Points,
    /// `0,5;1,5`, as spreadsheets of many countries read it.
    Commas,
}

/// What is written.
#[derive(Clone, Debug, PartialEq)]
pub struct Request {
    /// The times.
    pub times: Times,
    /// Whether there is a row for whatever happens between them, and before it where a strength jumps.
    pub events: bool,
    /// How it is written.
    pub signs: Signs,
}

/// A row.
struct Row {
    time: f64,
    strengths: Both<f64>,
    lost: Both<f64>,
    break_line: Both<Option<f64>>,
    what: String,
}

/// The table of a trajectory, the finding of whose fight is `finding`, with a mark at its beginning by which spreadsheets
/// know that it is UTF-8. `moments` are those of the timeline.
pub fn table(
    finding: &Finding<'_>,
    trajectory: &Trajectory,
    moments: &[Moment],
    request: &Request,
) -> String {
    let lines = written(finding, &rows(trajectory, moments, request), request.signs);
    format!("\u{feff}{lines}")
}

fn rows(trajectory: &Trajectory, moments: &[Moment], request: &Request) -> Vec<Row> {
    let mut times = request.times.of(trajectory);
    if request.events || request.times == Times::Events {
        times.extend(moments.iter().map(|moment| moment.time));
    }
    if matches!(request.times, Times::Every(_)) {
        // Where it ends is what most want to know.
        times.extend(trajectory.ends());
    }
    sort_by(&mut times, f64::total_cmp);
    times.dedup();
    let mut rows = Vec::new();
    for time in times {
        if request.events || request.times == Times::Events {
            rows.extend(row_before(trajectory, time));
        }
        rows.push(row_at(trajectory, moments, time));
    }
    rows
}

/// The row just before a time at which a strength jumps.
fn row_before(trajectory: &Trajectory, time: f64) -> Option<Row> {
    let next = trajectory
        .stretches
        .iter()
        .position(|stretch| stretch.from == time)?;
    let before = trajectory.stretches[..next].last()?;
    let strengths = trajectory.strengths_before(next);
    let jumps = strengths != trajectory.strengths_at(time);
    jumps.then(|| Row {
        strengths,
        what: "just before".into(),
        ..row_of(before, time)
    })
}

fn row_at(trajectory: &Trajectory, moments: &[Moment], time: f64) -> Row {
    let end = trajectory.ends().unwrap_or(f64::INFINITY);
    let within = time.min(end);
    let stretch = trajectory
        .stretches
        .iter()
        .rev()
        .find(|stretch| stretch.from <= within);
    let happens = moments.iter().filter(|moment| moment.time == time);
    let what: Vec<String> = happens.map(|moment| plain(&moment.what)).collect();
    let nothing = Row {
        time,
        strengths: Both::default(),
        lost: Both::default(),
        break_line: Both::default(),
        what: String::new(),
    };
    Row {
        time,
        strengths: trajectory.strengths_at(time),
        what: if time > end {
            "after the end".into()
        } else {
            what.join("; ")
        },
        ..stretch.map_or(nothing, |stretch| row_of(stretch, within))
    }
}

/// What is lost so far and where the break lines are.
fn row_of(stretch: &Stretch, time: f64) -> Row {
    let since = time - stretch.from;
    let ledger = stretch.ledger_at(since);
    Row {
        time,
        strengths: Both::default(),
        lost: Both::of(|side| ledger[side].losses.all),
        break_line: Both::of(|side| stretch.break_line(side, since)),
        what: String::new(),
    }
}

fn written(finding: &Finding<'_>, rows: &[Row], signs: Signs) -> String {
    let number = |value: f64| match signs {
        Signs::Points => number(value),
        Signs::Commas => number(value).replace('.', ","),
    };
    let behind = [
        cell(&finding.statement.marking),
        text_mark(finding.pairs),
        format!("Aftercount {}", finding.version),
        caution::SHORT.to_owned(),
    ];
    let mut lines = line(&heads(finding), signs);
    for row in rows {
        let mut cells = vec![number(row.time)];
        cells.extend(Side::BOTH.map(|side| number(row.strengths[side])));
        cells.extend(Side::BOTH.map(|side| number(row.lost[side])));
        cells.extend(Side::BOTH.map(|side| row.break_line[side].map(number).unwrap_or_default()));
        cells.push(cell(&row.what));
        cells.extend(behind.iter().cloned());
        lines += &line(&cells, signs);
    }
    lines
}

/// A line, quoted where it must be. By hand: the crate for it brings a printer of numbers that weighs more than the rest.
fn line(cells: &[String], signs: Signs) -> String {
    let part = if signs == Signs::Commas { ";" } else { "," };
    let quoted = cells.iter().map(|cell| {
        if cell.contains(part) || cell.contains(['"', '\r', '\n']) {
            format!("\"{}\"", cell.replace('"', "\"\""))
        } else {
            cell.clone()
        }
    });
    let quoted: Vec<String> = quoted.collect();
    let mut line = quoted.join(part);
    line += "\r\n";
    line
}

/// The heads, with units. Each begins with words of our own.
fn heads(finding: &Finding<'_>) -> Vec<String> {
    let statement = finding.statement;
    let counted = seen(&statement.counted);
    let of_sides = |what: &str, behind: &str| {
        Side::BOTH.map(|side| format!("{what} {}{behind} ({counted})", seen(&statement.names[side])))
    };
    let mut heads = vec![format!("time ({})", statement.unit.symbol())];
    heads.extend(of_sides("strength of", ""));
    heads.extend(of_sides("lost so far by", ""));
    heads.extend(of_sides("strength at which", " breaks"));
    heads.extend(["what happens", "marking", "text mark", "made by", "caution"].map(str::to_owned));
    heads
}

/// The shortest digits that read back the same.
fn number(value: f64) -> String {
    if value != 0.0 && !(1e-5..1e16).contains(&value.abs()) {
        format!("{value:e}")
    } else {
        format!("{value}")
    }
}

/// A text that no spreadsheet takes for a formula, whatever somebody has called a side.
fn cell(text: &str) -> String {
    let text = seen(text);
    if text.starts_with(['=', '+', '-', '@']) {
        format!("'{text}")
    } else {
        text
    }
}

#[cfg(test)]
mod tests {
    use super::super::finding::tests::worked_out;
    use super::*;
    use crate::words::timeline::timeline;

    const LINK: &str = "title=T&marking==SUM(A1)&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=-Ve, \"s\"\
                        &y.start=400&y.rate=0.06&y.break=0.39&y.join=64@4";

    fn table_of(link: &str, request: &Request) -> Vec<Vec<String>> {
        let (pairs, statement, fight) = worked_out(link);
        let finding = Finding {
            pairs: &pairs,
            statement: &statement,
            outcome: &fight.outcome,
            asked: None,
            reversal: None,
            version: "0.1.0",
        };
        let moments = timeline(&statement, &fight);
        let trajectory = fight.trajectory.as_ref().expect("was asked for");
        let text = table(&finding, trajectory, &moments, request);
        let text = text.strip_prefix('\u{feff}').expect("the mark of UTF-8");
        assert!(text.ends_with("\r\n"));
        let part = if request.signs == Signs::Commas { ';' } else { ',' };
        let rows: Vec<Vec<String>> = text.lines().map(|line| cells(line, part)).collect();
        assert!(rows.iter().all(|row| row.len() == rows[0].len()), "{text}");
        rows
    }

    /// The cells of a line, read as RFC 4180 says, letter by letter.
    fn cells(line: &str, part: char) -> Vec<String> {
        let mut cells = vec![String::new()];
        let mut quoted = false;
        let mut letters = line.chars().peekable();
        while let Some(letter) = letters.next() {
            let cell = cells.last_mut().expect("there is one");
            match letter {
                '"' if !quoted => quoted = true,
                '"' if letters.next_if_eq(&'"').is_some() => cell.push('"'),
                '"' => quoted = false,
                _ if letter == part && !quoted => cells.push(String::new()),
                _ => cell.push(letter),
            }
        }
        cells
    }

    fn request(times: Times, events: bool) -> Request {
        Request {
            times,
            events,
            signs: Signs::Points,
        }
    }

    #[test]
    fn a_step_and_what_happens_on_the_way() {
        let rows = table_of(LINK, &request(Times::Every(2.0), true));
        assert_eq!(rows[0][..2], ["time (h)", "strength of Ondrel (combatants)"]);
        assert_eq!(rows[0][2], "strength of -Ve, \"s\" (combatants)");
        let times: Vec<&str> = rows[1..].iter().map(|row| row[0].as_str()).collect();
        assert_eq!(times[..5], ["0", "2", "4", "4", "6"]);
        assert_eq!([&rows[1][7], &rows[3][7]], ["the start", "just before"]);
        assert_eq!(rows[4][7], "64 join -Ve, \"s\"");
        assert_eq!(rows[1][8], "'=SUM(A1)", "no formula");
        let value = |row: usize, column: usize| rows[row][column].parse::<f64>().expect("a number");
        assert!((value(4, 2) - value(3, 2) - 64.0).abs() < 1e-9);
        assert_eq!(value(1, 5), 420.0);
        let last = rows.last().expect("rows");
        assert_eq!(last[7], "Ondrel breaks");
        assert_eq!(last[1], "420", "the line is exact");
        // What is left and what is lost are what came.
        for (place, row) in rows.iter().enumerate().skip(1) {
            let came = if place >= 4 { 464.0 } else { 400.0 };
            let (left, lost) = (value(place, 2), value(place, 4));
            assert!((left + lost - came).abs() < 1e-9 * came, "{row:?}");
        }
        assert!(
            rows[1..]
                .iter()
                .all(|row| row[11] == caution::SHORT && row[9].len() == 9)
        );
    }

    #[test]
    fn a_list_or_the_events_alone() {
        let rows = table_of(LINK, &request(Times::At(vec![4.0, 0.5, 100.0, 4.0]), false));
        let times: Vec<&str> = rows[1..].iter().map(|row| row[0].as_str()).collect();
        assert_eq!(times, ["0.5", "4", "100"]);
        assert_eq!(rows[3][7], "after the end");
        let rows = table_of(LINK, &request(Times::Events, false));
        let what: Vec<&str> = rows[1..].iter().map(|row| row[7].as_str()).collect();
        assert_eq!(
            what,
            ["the start", "just before", "64 join -Ve, \"s\"", "Ondrel breaks"]
        );
    }

    #[test]
    fn with_decimal_commas_semicolons_part_the_columns() {
        let commas = Request {
            signs: Signs::Commas,
            ..request(Times::At(vec![0.5]), false)
        };
        let (points, commas) = (
            table_of(LINK, &request(commas.times.clone(), false)),
            table_of(LINK, &commas),
        );
        assert_eq!(commas[1][0], "0,5");
        assert_eq!(commas[1][1].replace(',', "."), points[1][1]);
    }

    #[test]
    fn what_is_over_at_the_start_or_never_has_rows_too() {
        let over = "x.start=600&x.lost=400&x.break=0.3&x.rate=0.04&y.start=400&y.rate=0.06";
        let rows = table_of(over, &request(Times::Every(1.0), true));
        assert_eq!(rows[1][..3], ["0", "600", "400"]);
        let endless = "x.start=600&x.fire=area&x.rate=0.0004&y.start=400&y.fire=area&y.rate=0.0004";
        let rows = table_of(endless, &request(Times::Every(1.0), true));
        assert!(rows.len() > 10);
        assert_eq!(number(3e-7), "3e-7");
    }
}
