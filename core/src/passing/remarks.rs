//! What is said beside what was opened, or in place of it.

use super::mailed::without_quoting;
use super::received::{LONGEST, begins_with_key, received, version_end, without_entities};
use super::{saved, taken_in};
use crate::mark::{is_mark, text_mark};
use crate::pairs::Pairs;
use crate::statement::Statement;

/// The most places of a message at which another engagement is looked for.
const MOST: usize = 8;

/// What is said where another engagement stands beside the one that was opened.
const ANOTHER: &str = "Another engagement stands there too: the first was opened.";

/// What has to be said of `opened`, the engagement that was found in `text`.
pub fn beside(text: &str, opened: &Pairs) -> Option<String> {
    let text = without_quoting(text);
    let mark = text_mark(opened);
    let named = saved::named_mark(&text).filter(|named| *named != mark);
    let named = named.map(|named| {
        format!(
            "The file names the text mark {named}, and the text in it has {mark}: one of them was changed."
        )
    });
    let another = holds_another(&text, &mark).then(|| ANOTHER.to_owned());
    let taken_in = taken_in::taken_in(&text, opened);
    let remarks: Vec<String> = named.into_iter().chain(another).chain(taken_in).collect();
    (!remarks.is_empty()).then(|| remarks.join(" "))
}

/// What is said of a text that holds no engagement, where it is what Aftercount itself makes of one: a finding, a table, a
/// picture.
pub fn in_place_of(text: &str) -> Option<String> {
    let place = text.find("ext mark").filter(|_| text.len() <= LONGEST)?;
    let apart = |letter: char| !(letter.is_ascii_alphanumeric() || letter == '-');
    let mark = text[place..].split(apart).find(|word| is_mark(word))?;
    Some(format!(
        "This is a finding of the text with the mark {mark}, and not that text: ask the sender for it. Nothing was opened."
    ))
}

/// Whether an address in `text`, or what stands behind the end of an engagement, holds another than the one with this
/// mark, and one that is sound.
fn holds_another(text: &str, mark: &str) -> bool {
    let text = without_entities(text);
    let places = text.match_indices('#').take(MOST);
    let addresses = places
        .map(|(at, _)| &text[at..])
        .filter(|tail| begins_with_key(tail));
    let mut rest = text.as_str();
    let ends = std::iter::from_fn(|| {
        rest = &rest[version_end(rest)?..];
        Some(rest)
    });
    addresses.chain(ends.take(MOST)).any(|tail| {
        let tail = tail.split(['"', '<', '“', '”']).next().unwrap_or_default();
        received(tail).is_ok_and(|other| text_mark(&other) != mark && Statement::read(&other).is_ok())
    })
}

#[cfg(test)]
mod tests {
    use super::super::finding::Finding;
    use super::super::finding::tests::worked_out;
    use super::super::saved::saved;
    use super::*;

    const LINK: &str = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&v=1";
    const OTHER: &str = "x.start=700&x.rate=0.04&y.start=400&y.rate=0.05&v=1";

    fn said(text: &str) -> Option<String> {
        beside(text, &received(text).expect("it holds one"))
    }

    fn finding(pairs: &Pairs, make: impl Fn(&Finding<'_>) -> String) -> String {
        let (_, statement, fight) = worked_out(&pairs.link());
        make(&Finding {
            pairs,
            statement: &statement,
            outcome: &fight.outcome,
            asked: None,
            reversal: None,
            version: "0.1.0",
        })
    }

    #[test]
    fn a_saved_file_that_was_edited_is_told() {
        let pairs = Pairs::parse(LINK);
        let file = saved(&pairs, None, "0.1.0", "2026-12-01");
        assert_eq!(said(&file), None);
        let edited = file.replace("x.start=600", "x.start=650");
        let marks = [
            text_mark(&pairs),
            text_mark(&received(&edited).expect("it opens")),
        ];
        let words = said(&edited).expect("it is told");
        let [names, has] = marks;
        assert!(
            words.contains(&format!(
                "names the text mark {names}, and the text in it has {has}"
            )),
            "{words}"
        );
        assert_eq!(said(&edited.replace('=', "=3D")), Some(words));
        // A text that only speaks of a mark is no such file.
        assert_eq!(said(&format!("Text mark: {names}\n\n{OTHER}")), None);
    }

    #[test]
    fn another_text_in_the_message_is_told() {
        for both in [
            format!("Old one:\n{OTHER}\n\nNew one:\n{LINK}"),
            format!("first {LINK} and second {OTHER}."),
            format!("> {LINK}\n\n{LINK}\n{LINK}\n{OTHER}"),
        ] {
            assert_eq!(said(&both).as_deref(), Some(ANOTHER), "{both}");
        }
        for alone in [
            format!("{LINK}\n\n{LINK} again, and x.start=5"),
            LINK.replace("x.start=600", "v=1&x.start=600"),
        ] {
            assert_eq!(said(&alone), None, "{alone}");
        }
    }

    #[test]
    fn another_address_in_the_message_is_told() {
        let pairs = Pairs::parse(LINK);
        let wiki = finding(&pairs, |finding| finding.wiki("aftercount.html"));
        let wrapped = LINK.replace("x.rate", "x.ra\n> te");
        for alone in [
            LINK.to_owned(),
            wiki.clone(),
            format!("> a.html#{wrapped}\n\na.html#{LINK}"),
            format!(
                "a.html#{LINK} and again <a href=\"b.html#{}\">",
                LINK.replace("&v=1", "&view=frame")
            ),
            format!("a.html#{LINK}\n\nSee b.html#top and c.html#x.start=5"),
        ] {
            assert_eq!(said(&alone), None, "{alone}");
        }
        for two in [
            format!("a.html#{LINK}\n\na.html#{OTHER}"),
            format!("> a.html#{wrapped}\n>\n> or a.html#{OTHER}."),
            format!("{wiki}<p>a.html#{}</p>", OTHER.replace('&', "&amp;")),
        ] {
            assert_eq!(said(&two).as_deref(), Some(ANOTHER), "{two}");
            assert_eq!(
                received(&two).map(|first| text_mark(&first)),
                Ok(text_mark(&pairs))
            );
        }
    }

    #[test]
    fn a_finding_is_known_by_its_mark() {
        let pairs = Pairs::parse(LINK);
        let mark = text_mark(&pairs);
        let lines = finding(&pairs, |finding| finding.lines());
        let table = format!("time (h),marking,text mark,version\r\n0,EXERCISE,{mark},0.1.0\r\n");
        let picture =
            format!("<svg width=\"9\"><text x=\"5\">\nText mark {mark}, Aftercount 0.1.0\n</text></svg>");
        for text in [lines, table, picture] {
            assert!(received(&text).is_err(), "{text}");
            let words = in_place_of(&text).expect("it has a mark");
            assert!(
                words.contains(&format!("the text with the mark {mark}, and not that text")),
                "{words}"
            );
        }
        for text in [
            "",
            "Good morning",
            "Text mark unknown",
            "ABCD-1234",
            "Text mark abcd-1234",
        ] {
            assert_eq!(in_place_of(text), None, "{text}");
        }
    }

    #[test]
    fn long_and_strange_texts_end() {
        for piece in [
            "#",
            "#x.start=6&",
            "# =",
            "ext mark ",
            "Text mark: ",
            "=3D",
            "x.start=3D",
            "x.start=6&v=1 ",
            "#x.start=6&v=1\n",
        ] {
            let text = piece.repeat(LONGEST / 8 / piece.len());
            // Whatever it says, it says it.
            let _ = (beside(&text, &Pairs::parse(LINK)), in_place_of(&text));
        }
    }
}
