//! What the core, on this machine, says to the text that a page is given.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::fight::{Effort, fight};
use aftercount_core::mark::text_mark;
use aftercount_core::outcome::Outcome;
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words::sentence::sentence;

use super::Shown;

/// What a settled page must state for a text that can be worked out.
///
/// # Panics
/// Where the text has problems.
#[track_caller]
pub fn native(link: &str) -> Shown {
    let shown = Shown {
        state: "good".to_owned(),
        settled: Some(text_mark(&Pairs::parse(link))),
        ..Shown::default()
    };
    let Some(outcome) = outcome(answer(link), link) else {
        return shown;
    };
    let breaks = serde_json::to_value(outcome.breaks).expect("an outcome can be written");
    Shown {
        breaks: breaks.as_str().unwrap_or_default().to_owned(),
        time: outcome.time,
        x_end: outcome.x.end,
        y_end: outcome.y.end,
        ..shown
    }
}

/// The outcome of an answer; `None` where it answers a question alone.
#[track_caller]
fn outcome(answer: Answer, link: &str) -> Option<Box<Outcome>> {
    match answer {
        Answer::Outcome { outcome, .. } => Some(outcome),
        Answer::Asked {
            outcome: Some(beside),
            ..
        } => outcome(*beside, link),
        Answer::Asked { outcome: None, .. } => None,
        Answer::Problems(problems) => panic!("{link:?} cannot be worked out: {problems:?}"),
    }
}

/// The sentence for a text that can be worked out.
///
/// # Panics
/// Where the text has problems.
#[track_caller]
pub fn native_sentence(link: &str) -> String {
    let statement =
        Statement::read(&Pairs::parse(link)).unwrap_or_else(|problems| panic!("{link:?}: {problems:?}"));
    sentence(
        &statement,
        &fight(&statement.engagement(), Effort::Outcome).outcome,
    )
}

/// The text with one key changed.
pub fn changed(link: &str, key: &str, text: &str) -> String {
    let mut pairs = Pairs::parse(link);
    pairs.set(key, text);
    pairs.link()
}
