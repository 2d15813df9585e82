//! From the text of a link to its answer: an outcome, or every problem of the text.

use crate::fight::{Effort, fight};
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::statement::{Statement, Values};
use crate::words::working::{WorkingLine, working};
use serde::Serialize;

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
        #[serde(skip_serializing_if = "Option::is_none")]
        working: Option<&'a [String]>,
    },
    Problems {
        ok: bool,
        problems: &'a [Problem],
    },
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
    match Statement::read(&Pairs::parse(link)) {
        Ok(statement) => {
            let outcome = fight(&statement.engagement(&Values::new()), Effort::Outcome).outcome;
            let lines = || {
                working(&statement, &outcome)
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
        Err(problems) => Answer::Problems(problems),
    }
}

impl Serialize for Answer {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self {
            Answer::Outcome { outcome, working } => Written::Outcome {
                ok: true,
                outcome,
                working: working.as_deref(),
            }
            .serialize(serializer),
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
