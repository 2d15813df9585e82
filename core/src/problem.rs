//! What is wrong with a text, in words that name its key.

use serde::Serialize;

/// One thing that keeps a link from being worked out.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Problem {
    /// The key concerned; `None` where the whole text is.
    pub key: Option<String>,
    /// Which item of a list, counted from 1.
    pub item: Option<u32>,
    /// The text found there, decoded, as it was written.
    pub found: Option<String>,
    /// What is wrong, and how to write it instead.
    pub problem: String,
}

impl Problem {
    /// A problem of the text `found` at `key`.
    pub fn at(key: &str, found: &str, problem: impl Into<String>) -> Problem {
        Problem {
            key: Some(key.into()),
            item: None,
            found: Some(found.into()),
            problem: problem.into(),
        }
    }

    /// A key that is missing.
    pub fn missing(key: &str, problem: impl Into<String>) -> Problem {
        Problem {
            key: Some(key.into()),
            item: None,
            found: None,
            problem: problem.into(),
        }
    }

    /// A problem of the text as a whole.
    pub fn whole(problem: impl Into<String>) -> Problem {
        Problem {
            key: None,
            item: None,
            found: None,
            problem: problem.into(),
        }
    }

    /// The line that stands beside the field: "`1,000`: write 1000, without marks for thousands."
    pub fn line(&self) -> String {
        match &self.found {
            Some(found) if !found.is_empty() => format!("`{found}`: {}.", self.problem),
            _ => format!("{}.", self.problem),
        }
    }
}
