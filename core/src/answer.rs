//! From the text of a link to its answer: an outcome, or every problem of the text.

use crate::fight::{Effort, fight};
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::statement::{Statement, Values};
use serde::Serialize;

/// The answer to one link.
#[derive(Clone, Debug, PartialEq)]
pub enum Answer {
    /// It was worked out.
    Outcome(Box<Outcome>),
    /// It was not, for these reasons.
    Problems(Vec<Problem>),
}

#[derive(Serialize)]
#[serde(untagged)]
enum Written<'a> {
    Outcome {
        ok: bool,
        #[serde(flatten)]
        outcome: &'a Outcome,
    },
    Problems {
        ok: bool,
        problems: &'a [Problem],
    },
}

/// Works out what `link` states.
pub fn answer(link: &str) -> Answer {
    match Statement::read(&Pairs::parse(link)) {
        Ok(statement) => Answer::Outcome(Box::new(
            fight(&statement.engagement(&Values::new()), Effort::Outcome).outcome,
        )),
        Err(problems) => Answer::Problems(problems),
    }
}

impl Serialize for Answer {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self {
            Answer::Outcome(outcome) => Written::Outcome { ok: true, outcome }.serialize(serializer),
            Answer::Problems(problems) => Written::Problems { ok: false, problems }.serialize(serializer),
        }
    }
}

impl Answer {
    /// The answer as one line of JSON, numbers in the shortest digits that read back the same.
    pub fn to_json(&self) -> String {
        // Nothing in it can fail to be written: no maps with other keys than texts, no numbers but finite ones.
        serde_json::to_string(self).unwrap_or_default()
    }
}
