//! From the text of a link to its answer: an outcome, or every problem of the text.

use crate::asked::{Asked, Inquiry};
use crate::caution;
use crate::fight::{Effort, fight};
use crate::json::to_json;
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::statement::{Statement, Values};
use crate::words::working::{WorkingLine, working};
use serde::ser::{Serialize, SerializeStruct, Serializer};

/// The answer to one link.
#[derive(Clone, Debug, PartialEq)]
pub enum Answer {
    /// It was worked out.
    Outcome {
        /// What the fight leaves.
        outcome: Box<Outcome>,
        /// How, line by line, where that was asked for.
        working: Option<Vec<String>>,
    },
    /// Numbers in question were worked out.
    Asked {
        /// What each must be.
        asked: Vec<Asked>,
        /// The outcome with the values they have now; `None` where one has none.
        outcome: Option<Box<Answer>>,
    },
    /// It was not, for these reasons.
    Problems(Vec<Problem>),
}

/// Works out what `link` states.
pub fn answer(link: &str) -> Answer {
    read_and_fight(link, false)
}

/// Works out what `link` states, and shows how.
pub fn answer_with_working(link: &str) -> Answer {
    read_and_fight(link, true)
}

fn read_and_fight(link: &str, shown: bool) -> Answer {
    let pairs = Pairs::parse(link);
    let statement = match Statement::read(&pairs) {
        Ok(statement) => statement,
        Err(problems) => return Answer::Problems(problems),
    };
    if statement.asks() {
        return Answer::Asked {
            asked: ask(&pairs, &statement),
            outcome: statement
                .has_base()
                .then(|| Box::new(worked_out(&statement, shown))),
        };
    }
    worked_out(&statement, shown)
}

/// The outcome with the numbers as they are now.
fn worked_out(statement: &Statement, shown: bool) -> Answer {
    let outcome = fight(&statement.engagement(&Values::new()), Effort::Outcome).outcome;
    let lines = || {
        working(statement, &outcome)
            .iter()
            .map(WorkingLine::text)
            .collect()
    };
    let working = shown.then(lines);
    Answer::Outcome {
        outcome: Box::new(outcome),
        working,
    }
}

/// The answers to the questions of a statement.
fn ask(pairs: &Pairs, statement: &Statement) -> Vec<Asked> {
    let mut inquiry = Inquiry::new(pairs, statement);
    inquiry
        .iter_mut()
        .map(|inquiry| {
            while !inquiry.go_on(u32::MAX) {}
            inquiry.answer()
        })
        .collect()
}

impl Serialize for Answer {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self {
            Answer::Outcome { outcome, working } => {
                write_outcome(None, outcome, working.as_deref(), serializer)
            }
            Answer::Asked { asked, outcome } => match outcome.as_deref() {
                Some(Answer::Outcome { outcome, working }) => {
                    write_outcome(Some(asked), outcome, working.as_deref(), serializer)
                }
                _ => {
                    let mut answer = serializer.serialize_struct("Answer", 3)?;
                    answer.serialize_field("ok", &true)?;
                    answer.serialize_field("asked", asked)?;
                    answer.serialize_field("caution", caution::SHORT)?;
                    answer.end()
                }
            },
            Answer::Problems(problems) => {
                let mut answer = serializer.serialize_struct("Answer", 2)?;
                answer.serialize_field("ok", &false)?;
                answer.serialize_field("problems", problems)?;
                answer.end()
            }
        }
    }
}

/// The fields of an outcome between `ok` and its working: by name, as serde's `flatten` is slower.
fn write_outcome<S: Serializer>(
    asked: Option<&[Asked]>,
    outcome: &Outcome,
    working: Option<&[String]>,
    serializer: S,
) -> Result<S::Ok, S::Error> {
    // Taken apart in full, so that none can be forgotten.
    let Outcome {
        breaks,
        time,
        ended,
        to_the_last,
        below_one,
        x,
        y,
        loss_exchange_ratio,
        fractional_exchange_ratio,
        method,
        pieces,
        caution,
    } = outcome;
    let besides = usize::from(asked.is_some()) + usize::from(working.is_some());
    let mut answer = serializer.serialize_struct("Answer", 13 + besides)?;
    answer.serialize_field("ok", &true)?;
    if let Some(asked) = asked {
        answer.serialize_field("asked", asked)?;
    }
    answer.serialize_field("breaks", breaks)?;
    answer.serialize_field("time", time)?;
    answer.serialize_field("ended", ended)?;
    answer.serialize_field("to_the_last", to_the_last)?;
    answer.serialize_field("below_one", below_one)?;
    answer.serialize_field("x", x)?;
    answer.serialize_field("y", y)?;
    answer.serialize_field("loss_exchange_ratio", loss_exchange_ratio)?;
    answer.serialize_field("fractional_exchange_ratio", fractional_exchange_ratio)?;
    answer.serialize_field("method", method)?;
    answer.serialize_field("pieces", pieces)?;
    answer.serialize_field("caution", caution)?;
    if let Some(working) = working {
        answer.serialize_field("working", working)?;
    }
    answer.end()
}

impl Answer {
    /// The answer as one line of JSON, numbers in the shortest digits that read back the same.
    pub fn to_json(&self) -> String {
        to_json(self)
    }
}
