//! The outcome as JSON for other programs: the object of the batch door, and what it is of.

use crate::answer::Answer;
use crate::mark::text_mark;
use crate::pairs::Pairs;
use serde::Serialize;

/// An answer with the text that it is of.
#[derive(Serialize)]
struct Passed<'a> {
    #[serde(flatten)]
    answer: &'a Answer,
    marking: Option<&'a str>,
    link: String,
    text_mark: String,
    version: &'a str,
}

/// The object of the batch door with `marking`, `link`, `text_mark` and `version` behind it, on one line or with a line
/// for each figure; numbers in the shortest digits that read back the same.
pub fn json(answer: &Answer, pairs: &Pairs, version: &str, pretty: bool) -> String {
    let passed = Passed {
        answer,
        marking: pairs
            .get("marking")
            .map(str::trim)
            .filter(|text| !text.is_empty()),
        link: pairs.link(),
        text_mark: text_mark(pairs),
        version,
    };
    // Nothing in it can fail to be written: no maps with other keys than texts, no numbers but finite ones.
    let written = if pretty {
        serde_json::to_string_pretty(&passed)
    } else {
        serde_json::to_string(&passed)
    };
    written.map(|text| text + "\n").unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::answer::answer;

    #[test]
    fn it_begins_as_the_batch_door_answers() {
        for link in [
            "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&marking=M",
            "x.start=1,000",
        ] {
            let (pairs, answer) = (Pairs::parse(link), answer(link));
            let line = json(&answer, &pairs, "0.1.0", false);
            let batch = answer.to_json();
            assert!(line.starts_with(batch.trim_end_matches('}')), "{line}");
            assert_eq!(line.lines().count(), 1);
            let pretty = json(&answer, &pairs, "0.1.0", true);
            let read = |text: &str| serde_json::from_str::<serde_json::Value>(text).expect("JSON");
            assert_eq!(read(&line), read(&pretty));
            assert!(pretty.lines().count() > 5);
            assert_eq!(read(&line)["link"], pairs.link());
            assert_eq!(read(&line)["text_mark"], text_mark(&pairs));
        }
    }
}
