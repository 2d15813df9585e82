//! The saved file: a text that people can read, with the engagement between two lines that only it has.

use super::finding::Finding;
use super::received::unquoted;
use super::words::HANDLE;
use crate::caution;
use crate::mark::{is_mark, text_mark};
use crate::pairs::Pairs;
use crate::problem::seen;
use crate::words::format::plain;
use crate::words::sentence::sentence;

/// Stands before the engagement. Every line of a user's own stands behind a label, so that none can look like it.
const BEGINS: &str = "---- engagement ----";
/// Stands behind it.
const ENDS: &str = "---- end ----";

/// What the mark is labelled with.
const MARK: &str = "Text mark";

/// The file's text. `finding` is there where the text was worked out, and `when` says when the file was made.
pub fn saved(pairs: &Pairs, finding: Option<&Finding<'_>>, version: &str, when: &str) -> String {
    let text = |key: &str| seen(pairs.get(key).unwrap_or_default().trim());
    let labelled = |label: &str, text: &str| match text {
        "" => String::new(),
        text => format!("{label}: {text}\n"),
    };
    let marking = labelled("Marking", &text("marking"));
    let outcome = match finding {
        Some(finding) => plain(&sentence(finding.statement, finding.outcome)),
        None => "Nothing was worked out for this text.".into(),
    };
    let line = |line: Option<&str>| line.map(plain).unwrap_or_default();
    [
        "An engagement, for Aftercount\n",
        &marking,
        &labelled("Title", &text("title")),
        &labelled("Note", &text("note")),
        &labelled("Outcome", &outcome),
        &labelled("Asked", &line(finding.and_then(|finding| finding.asked))),
        &labelled("Also", &line(finding.and_then(|finding| finding.reversal))),
        &labelled(MARK, &text_mark(pairs)),
        &labelled("Saved", &seen(when)),
        &labelled("By", &format!("Aftercount {}", seen(version))),
        "\n",
        caution::FULL,
        "\n",
        HANDLE,
        "\n\nTo go on with it: choose \"Open…\" in Aftercount and give it this file, or copy the line below into it.\n\n",
        BEGINS,
        "\n",
        &pairs.link(),
        "\n",
        ENDS,
        "\n",
        &marking,
    ]
    .concat()
}

/// The lines of the engagement among the lines of a saved file; `None` where they are none.
pub(super) fn engagement<'a, 'b>(lines: &'b [&'a str]) -> Option<&'b [&'a str]> {
    let begins = lines.iter().position(|line| *line == BEGINS)? + 1;
    let length = lines[begins..].iter().position(|line| *line == ENDS);
    Some(&lines[begins..begins + length.unwrap_or(lines.len() - begins)])
}

/// The text mark that a saved file names before its engagement.
pub(super) fn named_mark(text: &str) -> Option<&str> {
    let lines = || text.lines().map(unquoted);
    let begins = lines().position(|line| line == BEGINS)?;
    let mark = lines()
        .take(begins)
        .find_map(|line| line.strip_prefix(MARK)?.strip_prefix(": "));
    mark.filter(|mark| is_mark(mark))
}

#[cfg(test)]
mod tests {
    use super::super::finding::tests::worked_out;
    use super::super::received::received;
    use super::*;

    #[test]
    fn a_saved_file_reads_back_whatever_its_texts_say() {
        for hostile in [
            BEGINS,
            ENDS,
            "x.start=5&v=1",
            "src=\"x.start=5\"",
            "Title: a\n---- engagement ----\nx.start=5",
        ] {
            let mut pairs = Pairs::parse("x.start=600&x.rate=0.04&y.start=400&y.rate=0.06&view=frame");
            for key in ["title", "note", "marking", "x.name", "counted"] {
                pairs.set(key, hostile);
            }
            let text = saved(&pairs, None, "0.1.0", "2026-12-01");
            assert_eq!(received(&text), Ok(Pairs::parse(&pairs.link())), "{text}");
            assert_eq!(
                received(&text.replace('\n', "\r\n")),
                Ok(Pairs::parse(&pairs.link()))
            );
        }
    }

    #[test]
    fn the_head_can_be_read_by_people() {
        let link =
            "title=Turn 3&marking=EXERCISE&x.start=60000&x.rate=0.04&y.start=40000&y.rate=0.06&y.break=0.4";
        let (pairs, statement, fight) = worked_out(link);
        let finding = Finding {
            pairs: &pairs,
            statement: &statement,
            outcome: &fight.outcome,
            asked: Some("A number must be 12\u{202f}000."),
            reversal: None,
            version: "0.1.0",
        };
        let text = saved(&pairs, Some(&finding), "0.1.0", "2026-12-01 14:05");
        for part in [
            "Marking: EXERCISE\nTitle: Turn 3\nOutcome: In this model Side Y breaks first",
            "of 60000",
            "Asked: A number must be 12000.\n",
            "Saved: 2026-12-01 14:05\nBy: Aftercount 0.1.0\n",
            caution::FULL,
            "---- end ----\nMarking: EXERCISE\n",
        ] {
            assert!(text.contains(part), "{part:?} in {text}");
        }
    }
}
