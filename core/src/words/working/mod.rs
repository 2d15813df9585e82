//! The working: what a second analyst needs to check an outcome by hand, line by line.

mod ending;
mod equation;

pub(super) use equation::area;

use super::format::plain;
use super::math::*;
use crate::fight::plain_piece;
use crate::motion::Motion;
use crate::outcome::{Breaks, Ended, Outcome};
use crate::piece::Piece;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::terms::Engagement;

/// One line of the working.
#[derive(Clone, Debug, PartialEq)]
pub struct WorkingLine {
    /// The name by which a figure refers to it.
    pub name: &'static str,
    /// What it is, in words.
    pub words: String,
    /// Its formula, and with the numbers put in.
    pub math: Option<Math>,
}

impl WorkingLine {
    /// The line as plain text.
    pub fn text(&self) -> String {
        match &self.math {
            Some(math) => plain(&format!("{}: {}", self.words, math.text)),
            None => plain(&format!("{}.", self.words)),
        }
    }
}

/// The letters of a side: its strength, its rate, and those of its enemy's rate.
struct Letters {
    strength: &'static str,
    rate: &'static str,
}

const LETTERS: Both<Letters> = Both {
    x: Letters {
        strength: "x",
        rate: "b",
    },
    y: Letters {
        strength: "y",
        rate: "a",
    },
};

/// The working of `outcome`, which is that of `statement`.
pub fn working(statement: &Statement, outcome: &Outcome) -> Vec<WorkingLine> {
    let engagement = statement.engagement();
    match Writer::new(statement, engagement, outcome) {
        Some(writer) => writer.lines(),
        None => super::working_pieces::lines(statement, outcome),
    }
}

struct Writer<'a> {
    statement: &'a Statement,
    engagement: Engagement,
    outcome: &'a Outcome,
    piece: Box<Piece>,
    lines: Vec<WorkingLine>,
}

impl<'a> Writer<'a> {
    fn new(statement: &'a Statement, mut engagement: Engagement, outcome: &'a Outcome) -> Option<Writer<'a>> {
        let piece = plain_piece(&engagement)?;
        // A phase from the beginning may have another fire.
        for side in Side::BOTH {
            engagement.sides[side].fire = piece.fire()[side];
        }
        Some(Writer {
            statement,
            engagement,
            outcome,
            piece,
            lines: Vec::new(),
        })
    }

    fn line(&mut self, name: &'static str, words: impl Into<String>, math: Option<Math>) {
        self.lines.push(WorkingLine {
            name,
            words: words.into(),
            math,
        });
    }

    fn lines(mut self) -> Vec<WorkingLine> {
        self.letters();
        for side in Side::BOTH {
            self.losses_of(side);
        }
        if self.begins_broken() {
            Both::of(|side| self.break_line(side));
            self.broken_at_start();
            return self.lines;
        }
        if self.piece.motion == Motion::Still {
            self.still();
            return self.lines;
        }
        self.state_equation();
        let lines = Both::of(|side| self.break_line(side));
        let costs = Both::of(|side| self.cost_line(side, lines[side]));
        self.verdict(costs);
        self.last_line();
        self.ratios();
        self.lines
    }

    /// Whether a side had reached its line before the start.
    fn begins_broken(&self) -> bool {
        let unharmed = Side::BOTH
            .iter()
            .all(|side| self.outcome.sides()[*side].losses.all == 0.0);
        self.outcome.ended == Ended::Break && self.outcome.time == Some(0.0) && unharmed
    }

    fn broken_at_start(&mut self) {
        let names = &self.statement.names;
        let who = match self.outcome.breaks {
            Breaks::X => format!("{} has", names.x),
            Breaks::Y => format!("{} has", names.y),
            Breaks::Both | Breaks::Neither => "Both sides have".into(),
        };
        let words = format!("{who} lost so much before the start that the line is reached at once");
        self.line("breaks", words, None);
        self.line(
            "left",
            "Nothing is lost after that, so each side has what it started with",
            None,
        );
        self.line("time", "The time of it is 0", None);
    }

    fn still(&mut self) {
        self.line("breaks", "Neither fire has any effect, so nothing changes", None);
        if self.outcome.ended == Ended::Clock {
            self.line("clock", "At the clock each side has what it started with", None);
        }
    }

    fn letters(&mut self) {
        let names = &self.statement.names;
        let unit = self.statement.unit.symbol();
        let counted = &self.statement.counted;
        let words = format!(
            "x is the strength of {} and y that of {}, in {counted}; t is the time in {unit}; b is the rate of {}'s \
             fire and a that of {}'s; numbers to six significant digits, worked out in full: by hand the last may differ",
            names.x, names.y, names.x, names.y
        );
        self.line("letters", words, None);
    }
}
