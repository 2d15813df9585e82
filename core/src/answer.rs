//! From the text of a link to its answer: an outcome, or every problem of the text.

use crate::asked::{Chart, Inquiry, Reply};
use crate::caution;
use crate::fight::{Effort, fight};
use crate::json::to_json;
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::reversal::{Entry, Reversal};
use crate::statement::Statement;
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
        /// What would reverse it, where that was asked for.
        reversal: Option<Vec<Entry>>,
    },
    /// Numbers in question were worked out.
    Asked {
        /// What each must be.
        asked: Vec<Reply>,
        /// The outcome with the values they have now; `None` where one has none.
        outcome: Option<Box<Answer>>,
    },
    /// It was not, for these reasons.
    Problems(Vec<Problem>),
}

/// What is wanted beside the outcome.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Besides {
    /// How it was worked out.
    pub working: bool,
    /// What would reverse it, which takes hundreds of fights.
    pub reversal: bool,
}

/// Works out what `link` states.
pub fn answer(link: &str) -> Answer {
    answer_with(link, Besides::default())
}

/// Works out what `link` states, and what is wanted beside it.
pub fn answer_with(link: &str, besides: Besides) -> Answer {
    let pairs = Pairs::parse(link);
    match &Statement::read(&pairs) {
        Ok(statement) if statement.asks() => Answer::Asked {
            asked: ask(&pairs, statement),
            outcome: statement
                .has_base()
                .then(|| Box::new(worked_out(&pairs, statement, besides))),
        },
        Ok(statement) => worked_out(&pairs, statement, besides),
        Err(problems) => Answer::Problems(problems.clone()),
    }
}

/// The outcome with the numbers as they are now.
fn worked_out(pairs: &Pairs, statement: &Statement, besides: Besides) -> Answer {
    let outcome = fight(&statement.engagement(), Effort::Outcome).outcome;
    let lines = || {
        working(statement, &outcome)
            .iter()
            .map(WorkingLine::text)
            .collect()
    };
    let working = besides.working.then(lines);
    let entries = || Reversal::new(pairs, statement).finished().into_entries();
    let reversal = besides.reversal.then(entries);
    Answer::Outcome {
        outcome: Box::new(outcome),
        working,
        reversal,
    }
}

/// The answers to the questions of a statement.
fn ask(pairs: &Pairs, statement: &Statement) -> Vec<Reply> {
    let one = Inquiry::new(pairs, statement).map(|mut inquiry| {
        while !inquiry.go_on(u32::MAX) {}
        Reply::One(Box::new(inquiry.answer()))
    });
    let two = Chart::new(pairs, statement).map(|mut chart| {
        while !chart.go_on(u32::MAX) {}
        Reply::Two(Box::new(chart.answer()))
    });
    one.or(two).into_iter().collect()
}

impl Serialize for Answer {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self {
            Answer::Outcome { .. } => write_outcome(None, self, serializer),
            Answer::Asked { asked, outcome } => match outcome.as_deref() {
                Some(outcome @ Answer::Outcome { .. }) => write_outcome(Some(asked), outcome, serializer),
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

/// The fields of an outcome between `ok` and what was asked for besides: by name, as serde's `flatten` is slower.
fn write_outcome<S: Serializer>(
    asked: Option<&[Reply]>,
    answer: &Answer,
    serializer: S,
) -> Result<S::Ok, S::Error> {
    let Answer::Outcome {
        outcome,
        working,
        reversal,
    } = answer
    else {
        return serializer.serialize_none();
    };
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
    } = &**outcome;
    let besides = [asked.is_some(), working.is_some(), reversal.is_some()];
    let besides: usize = besides.into_iter().map(usize::from).sum();
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
    if let Some(reversal) = reversal {
        answer.serialize_field("reversal", reversal)?;
    }
    answer.end()
}

impl Answer {
    /// The answer as one line of JSON, numbers in the shortest digits that read back the same.
    pub fn to_json(&self) -> String {
        to_json(self)
    }
}
