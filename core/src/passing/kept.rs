//! What the user has asked the browser to keep: a list of texts with the times at which they were kept.

use crate::fight::{Effort, fight};
use crate::mark::text_mark;
use crate::pairs::Pairs;
use crate::problem::{Problem, seen};
use crate::statement::Statement;
use crate::words::sentence::sentence;

/// What is said in place of an outcome where a number in question has no value now.
const NO_VALUE: &str = "It asks for a number that has no value now.";

/// An engagement that is kept.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Kept {
    /// When it was kept, as it is shown.
    pub when: String,
    /// Its text.
    pub text: String,
}

impl Kept {
    /// "2026-12-01 14:05: Turn 3, text mark 6Z3K-X0PW".
    pub fn words(&self) -> String {
        let pairs = Pairs::parse(&self.text);
        let title = seen(pairs.get("title").unwrap_or_default().trim());
        let title = if title.is_empty() {
            "without a title"
        } else {
            &title
        };
        format!("{}: {title}, text mark {}", seen(&self.when), text_mark(&pairs))
    }

    /// What it leaves, in the sentence; where it cannot be worked out, the first reason.
    pub fn outcome(&self) -> String {
        match Statement::read(&Pairs::parse(&self.text)) {
            Ok(statement) if statement.has_base() => {
                let fight = fight(&statement.engagement(), Effort::Outcome);
                sentence(&statement, &fight.outcome)
            }
            Ok(_) => NO_VALUE.into(),
            Err(problems) => problems.first().map_or(String::new(), Problem::line_with_key),
        }
    }
}

/// Reads the list, a line each. Other pages may write where it lies: whatever is no such line is left out.
pub fn read(stored: &str) -> Vec<Kept> {
    let line = |line: &str| {
        let (when, text) = line.split_once('\t')?;
        text.contains('=').then(|| Kept {
            when: when.into(),
            text: text.into(),
        })
    };
    stored.lines().filter_map(line).collect()
}

/// The list as it is stored.
pub fn written(kept: &[Kept]) -> String {
    let line = |kept: &Kept| {
        // A text that could not be decoded is kept as it stood, and may hold such signs.
        let text = kept.text.replace('\n', "%0A").replace('\r', "%0D");
        format!("{}\t{text}\n", kept.when)
    };
    kept.iter().map(line).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn two_that_are_kept_can_be_compared() {
        for (text, words) in [
            (
                "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05",
                "In this model Side Y is brought to 0 first, after ",
            ),
            (
                "x.start=600?&x.rate=0.04&y.start=400&y.rate=0.05",
                "In this model Side Y is brought to 0 first, after ",
            ),
            ("x.start=?&x.rate=0.04&y.start=400&y.rate=0.05", NO_VALUE),
            (
                "x.start=6,0&x.rate=0.04&y.start=400&y.rate=0.05",
                "`x.start`: `6,0`: write 6.0",
            ),
            ("x.start=600&x.rate=0.04&y.start=400", "`y.rate` is missing"),
        ] {
            let kept = Kept {
                when: String::new(),
                text: text.into(),
            };
            let outcome = kept.outcome();
            assert!(outcome.starts_with(words), "{text}: {outcome}");
        }
    }

    #[test]
    fn the_list_reads_back_and_nonsense_is_none() {
        let entry = |text: &str| Kept {
            when: "2026-12-01 14:05".into(),
            text: text.into(),
        };
        let kept = vec![entry("title=Turn%203&x.start=6&v=1"), entry("x.start=6&bare&v=1")];
        assert_eq!(read(&written(&kept)), kept);
        let broken = entry("title=%ZZ\r\nb&v=1");
        assert_eq!(read(&written(&[broken])), [entry("title=%ZZ%0D%0Ab&v=1")]);
        let words = kept[0].words();
        assert!(
            words.starts_with("2026-12-01 14:05: Turn 3, text mark "),
            "{words}"
        );
        for nonsense in ["", "null", "{\"when\":1}", "<b>\t</b>\n\n"] {
            assert_eq!(read(nonsense), [], "{nonsense}");
        }
    }
}
