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
            Some(found) if !found.is_empty() => format!("`{}`: {}.", seen(found), seen(&self.problem)),
            _ => format!("{}.", seen(&self.problem)),
        }
    }

    /// The line away from the field, with its key where the words do not name it: "`x.start`: `1,000`: write 1000, …".
    pub fn line_with_key(&self) -> String {
        match &self.key {
            Some(key) if self.found.is_some() => format!("`{}`: {}", seen(key), self.line()),
            _ => self.line(),
        }
    }
}

/// A text with every control and direction character written out as ‹U+202E›: shown as it is, it would turn the words
/// around it, or not be seen at all.
pub fn seen(text: &str) -> String {
    let mut shown = String::with_capacity(text.len());
    for letter in text.chars() {
        if is_hidden(letter) {
            shown.push_str(&format!("‹U+{:04X}›", u32::from(letter)));
        } else {
            shown.push(letter);
        }
    }
    shown
}

/// Control characters, and those that change the direction of a line or are not seen.
pub fn is_hidden(letter: char) -> bool {
    letter.is_control()
        || matches!(letter, '\u{61c}' | '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2060}'..='\u{2069}' | '\u{feff}')
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_hidden_is_written_out() {
        let problem = Problem::at("x.name", "On\u{202e}drel\n", "holds what it should not");
        assert_eq!(
            problem.line(),
            "`On‹U+202E›drel‹U+000A›`: holds what it should not."
        );
    }
}
