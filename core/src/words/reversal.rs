//! What would reverse the outcome, in words: the line under the sentence, and the table.

use super::format::{MINUS, NARROW, NO_BREAK, per_cent, significant, three};
use super::{sentence::breaks, slot};
use crate::keys::Unit;
use crate::number;
use crate::outcome::Breaks;
use crate::reversal::{A_DECADE, A_DECADE_INTEGRATED, Change, Entry, Kind, Reversal, Told};
use crate::sides::{Both, Side};
use crate::slots::{Part, Place, Slot};
use crate::statement::Statement;

/// The line while the search goes on.
pub const WORKING: &str = "Nearest reversal: being worked out.";

/// What the table is.
pub const MEANING: &str = "Each number changed alone, all others as they are: the nearest value at which another side breaks \
first. The smallest change stands first: strengths, rates and lengths by per cent, times as a part of how long it lasts, \
fractions and exponents by themselves; what is 0 now has no per cent, and comes behind them. The columns at the right say by \
how many per cent what is left, and the time, change for 1 per cent of the number.";

/// A row of the table.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// The number, as a slot.
    pub slot: Slot,
    /// What it is.
    pub name: String,
    /// Its present value.
    pub now: String,
    /// The value that reverses, or that no value does.
    pub value: String,
    /// By how much it differs.
    pub change: String,
    /// What happens there.
    pub then: String,
    /// Per cent of what is left of each side, for one per cent of the number.
    pub left: Both<String>,
    /// Per cent of the time.
    pub time: String,
    /// What a button that puts the value in says, and what it writes.
    pub put: Option<(String, String)>,
}

/// The heads of the columns of a row, in the order of its fields.
pub fn heads(statement: &Statement) -> [String; 8] {
    let left = |side: Side| format!("{} left, % for 1{NARROW}%", statement.names[side]);
    [
        "number changed alone".into(),
        "now".into(),
        "reversed at".into(),
        "change".into(),
        "then".into(),
        left(Side::X),
        left(Side::Y),
        format!("time, % for 1{NARROW}%"),
    ]
}

/// The line under the sentence: "Nearest reversal: Vessary breaks first if Ondrel's break point is 0.3042 instead of 0.3
/// (+0.00419)."
pub fn nearest(statement: &Statement, reversal: &Reversal) -> String {
    if !reversal.is_done() {
        return WORKING.into();
    }
    let entries = reversal.entries();
    let first = entries
        .first()
        .and_then(|entry| Some((*entry, entry.change.as_ref()?)));
    let Some((entry, change)) = first else {
        return "Nearest reversal: no number, changed alone, makes the outcome another.".into();
    };
    let name = slot::name(statement, &entry.slot);
    let then = then(statement, entry, change);
    if entry.is_least() {
        return format!("Nearest reversal: the least change of {name} will do; then {then}.");
    }
    let with = format!(
        "{name} is {} instead of {} ({})",
        value(statement, &entry.slot, &change.written),
        value(statement, &entry.slot, &entry.now.to_string()),
        by(statement, entry, change)
    );
    match change.kind {
        Kind::Reversed => format!("Nearest reversal: {then} if {with}."),
        Kind::Undecided => format!(
            "Nearest reversal: no number, changed alone, makes the other side break first; but {then} if {with}."
        ),
    }
}

/// The rows of the table, of what has been found so far.
pub fn rows(statement: &Statement, reversal: &Reversal) -> Vec<Row> {
    let entries = reversal.entries().into_iter();
    entries.map(|entry| row(statement, entry)).collect()
}

/// So many rows stand on paper.
pub const ON_PAPER: usize = 8;

/// Below the rows on paper: what stands behind them.
pub fn behind(rows: &[Row]) -> String {
    let reverse = rows.iter().filter(|row| row.put.is_some()).count();
    let others = match reverse.saturating_sub(ON_PAPER) {
        0 => "no value of any other number was found to do it".into(),
        1 => "1 more number that does it stands on the sheet".into(),
        more => format!("{more} more numbers that do it stand on the sheet"),
    };
    format!("The smallest change stands first; {others}.")
}

/// How closely was looked.
pub fn looked(reversal: &Reversal) -> String {
    let left_out = match reversal.left_out() {
        0 => String::new(),
        left => format!(
            " Each of these fights takes much work, so looking was ended early: {left} more numbers were not looked at, and one \
             of them may be nearer."
        ),
    };
    format!(
        "Looked for outwards from each present value, {A_DECADE} steps to a power of ten of change and {A_DECADE_INTEGRATED} where \
         the fight must be integrated, as far as the number may go; {} fights in all. What changes and changes back between two \
         steps may be missed.{left_out}",
        reversal.fights()
    )
}

fn row(statement: &Statement, entry: &Entry) -> Row {
    let change = entry.change.as_ref();
    let percent =
        |elasticity: Option<f64>| elasticity.map_or("–".into(), |value| signed(&three(value.abs()), value));
    let shown = |change: &Change| match entry.is_least() {
        true => "the least change".into(),
        false => value(statement, &entry.slot, &change.written),
    };
    Row {
        name: capitalised(&slot::name(statement, &entry.slot)),
        now: value(statement, &entry.slot, &entry.now.to_string()),
        value: change.map_or("no value does".into(), shown),
        change: change.map_or(String::new(), |change| match entry.is_least() {
            true => String::new(),
            false => by(statement, entry, change),
        }),
        then: change.map_or(String::new(), |change| then(statement, entry, change)),
        left: Both {
            x: percent(entry.elasticity.x),
            y: percent(entry.elasticity.y),
        },
        time: percent(entry.elasticity.time),
        put: change.map(|change| {
            let shown = value(statement, &entry.slot, &change.written);
            (format!("put in {shown}"), change.written.clone())
        }),
        slot: entry.slot.clone(),
    }
}

/// A value as it is written, with the short unit that it needs to be understood.
fn value(statement: &Statement, slot: &Slot, written: &str) -> String {
    let number = number::plain(written).map_or(written.into(), |number| significant(number, 12));
    with_unit(statement, slot, number)
}

fn with_unit(statement: &Statement, slot: &Slot, number: String) -> String {
    match (slot.unit, slot::unit(statement, slot.unit)) {
        (Unit::Strength | Unit::EnemyStrength, _) => number,
        (_, unit) if unit.is_empty() => number,
        (_, unit) => format!("{number}{NO_BREAK}{unit}"),
    }
}

/// By how much: "+0.55 %", "−0.4 h".
fn by(statement: &Statement, entry: &Entry, change: &Change) -> String {
    let amount = match entry.told {
        Told::Relative => per_cent(change.by.abs()),
        Told::Absolute => with_unit(statement, &entry.slot, three(change.by.abs())),
    };
    signed(&amount, change.by)
}

fn signed(amount: &str, value: f64) -> String {
    let sign = match value {
        value if value > 0.0 => "+",
        value if value < 0.0 => MINUS,
        _ => "",
    };
    format!("{sign}{amount}")
}

/// What happens at the value: "Vessary breaks first".
fn then(statement: &Statement, entry: &Entry, change: &Change) -> String {
    let names = &statement.names;
    let breaks = |side: Side| match entry.slot.place {
        // Its line is no longer that of the statement.
        Place::Side(other, Part::Break) if other == side => "breaks",
        _ => breaks(statement, side),
    };
    match (change.breaks, change.gives_way) {
        (Breaks::X, _) => format!("{} {} first", names.x, breaks(Side::X)),
        (Breaks::Y, _) => format!("{} {} first", names.y, breaks(Side::Y)),
        (Breaks::Both, _) => "both sides break at the same moment".into(),
        (Breaks::Neither, Some(side)) if change.kind == Kind::Reversed => {
            format!("{} fades, and {} is left", names[side], names[side.enemy()])
        }
        (Breaks::Neither, _) => "neither side breaks".into(),
    }
}

fn capitalised(text: &str) -> String {
    let mut letters = text.chars();
    match letters.next() {
        Some(first) => first.to_uppercase().chain(letters).collect(),
        None => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::DEMO;
    use crate::pairs::Pairs;
    use crate::words::format::plain;

    fn found(link: &str) -> (Statement, Reversal) {
        let pairs = Pairs::parse(link);
        let statement = Statement::read(&pairs).expect(link);
        let reversal = Reversal::new(&pairs, &statement);
        assert_eq!(nearest(&statement, &reversal), WORKING);
        (statement, reversal.finished())
    }

    fn line(link: &str) -> String {
        let (statement, reversal) = found(link);
        plain(&nearest(&statement, &reversal))
    }

    #[test]
    fn the_line_says_what_turns_it_round_and_by_how_much() {
        assert_eq!(
            line(DEMO),
            "Nearest reversal: Vessary breaks first if Ondrel's break point is 0.3042 instead of 0.3 (+0.00419)."
        );
        assert_eq!(
            line("x.start=600&x.rate=0.04&y.start=400&y.fire=none&y.break=0.5&until=9"),
            "Nearest reversal: Side X is brought to 0 first if Side Y's supporting arms, aimed is 66.67 per h instead of 0 per h \
             (+66.7 per h)."
        );
        assert_eq!(
            line("x.start=600&x.fire=none&y.start=400&y.fire=none"),
            "Nearest reversal: the least change of Side X's wastage will do; then Side X fades, and Side Y is left."
        );
        assert_eq!(
            line("x.start=600&x.rate=0.04&y.start=400&y.rate=0.09"),
            "Nearest reversal: the least change of Side X's strength at the start will do; then Side X is brought to 0 first."
        );
    }

    #[test]
    fn a_row_says_what_a_small_change_does_and_what_a_button_writes() {
        let (statement, reversal) = found("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05");
        let rows = rows(&statement, &reversal);
        let first = &rows[0];
        assert_eq!(first.name, "Side X's strength at the start");
        assert_eq!((&first.now[..], &first.value[..]), ("600", "447.2"));
        assert_eq!(plain(&first.change), "−25%");
        assert_eq!(first.then, "Side X is brought to 0 first");
        // √(x² − 1.25·y²): x²/(x² − 1.25·y²) per cent for one.
        assert_eq!((&first.left.x[..], &first.left.y[..]), ("+2.25", "–"));
        let (_, text) = first.put.clone().expect("it can be put in");
        assert_eq!(text, "447.2");
        let last = rows.last().expect("rows");
        assert_eq!((&last.value[..], &last.put), ("no value does", &None));
    }

    #[test]
    fn paper_says_what_stands_behind_its_rows() {
        let (statement, reversal) = found(DEMO);
        let mut rows = rows(&statement, &reversal);
        let reverse = rows.iter().filter(|row| row.put.is_some()).count();
        assert_eq!(reverse, ON_PAPER + 4);
        for (rows_left, said) in [
            (reverse + 3, "4 more numbers that do it stand on the sheet"),
            (ON_PAPER + 1, "1 more number that does it stands on the sheet"),
            (ON_PAPER, "no value of any other number was found to do it"),
        ] {
            rows.truncate(rows_left);
            assert_eq!(
                behind(&rows),
                format!("The smallest change stands first; {said}.")
            );
        }
    }
}
