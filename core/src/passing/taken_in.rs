//! What a free text at the end of what was opened took in of the message around it.
//!
//! Every text that the writer makes ends in `v=1`, so that its end is known. Where somebody has cut that off, a name or a
//! note goes on until the message has a gap: it could be meant so, and it is said.

use super::received::{FREE, unquoted};
use crate::pairs::Pairs;
use crate::problem::seen;

/// The most letters of the text that are said: its beginning, and its end.
const SAID: (usize, usize) = (60, 40);

/// The most lines behind it that are looked at.
const MOST: usize = 20;

/// What is said where the last free text of `opened`, which was found in `text`, may hold words of the message: it went on
/// behind a line break, or has marks of a sentence before blanks, which a link never has.
pub(super) fn taken_in(text: &str, opened: &Pairs) -> Option<String> {
    let (key, value) = opened.iter().last().filter(|(key, _)| FREE.contains(key))?;
    let value = value.trim();
    let (at, behind) = text.rmatch_indices(key).find_map(|(at, _)| {
        let behind = text[at + key.len()..].trim_start_matches(' ').strip_prefix('=')?;
        Some((at, behind))
    })?;
    let mut lines = behind.lines().map(unquoted);
    let first = lines.next().unwrap_or_default();
    let mut more = lines.take_while(|line| !line.is_empty()).take(MOST);
    let broken = more.any(|line| !is_encoded(line) && value.contains(line.trim()));
    // A list written by hand has a note as it is, on a line of its own.
    let in_line = !text[..at].trim_end_matches([' ', '>']).ends_with('\n') && at > 0;
    (broken || (in_line && is_prose(value, first))).then(|| {
        format!(
            "No v=1 ends this text, so {key} took in all that followed: “{}”. Take out what is not its own.",
            shortened(&seen(value))
        )
    })
}

/// Whether a line is more of an encoded text, which a program has broken.
fn is_encoded(line: &str) -> bool {
    line.contains('%') && !line.contains(' ')
}

/// Whether `value` has a mark of a sentence before a blank or at its end, and its last word stands behind a blank in
/// `line`, where an encoded text has none.
fn is_prose(value: &str, line: &str) -> bool {
    let marked = |word: &str| word.ends_with(['.', ',', ';', ':', '!', '?']);
    let last = value.rfind(' ').map(|blank| &value[blank..]);
    last.is_some_and(|last| line.contains(last)) && value.split(' ').any(marked)
}

fn shortened(value: &str) -> String {
    let letters: Vec<char> = value.chars().collect();
    let (first, last) = SAID;
    if letters.len() <= first + last {
        return value.to_owned();
    }
    let part = |letters: &[char]| letters.iter().collect::<String>();
    format!(
        "{} … {}",
        part(&letters[..first]),
        part(&letters[letters.len() - last..])
    )
}

#[cfg(test)]
mod tests {
    use super::super::received::received;
    use super::*;

    fn said(text: &str) -> Option<String> {
        taken_in(text, &received(text).expect("it holds one"))
    }

    const LINK: &str = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&y.name=Vessary";

    #[test]
    fn words_of_the_message_in_a_free_text_are_told() {
        for (end, taken) in [
            (" Regards, A. Person", "Vessary Regards, A. Person"),
            (". Best wishes", "Vessary. Best wishes"),
            ("\nRegards", "VessaryRegards"),
            ("\n> Regards,\n> A. Person", "Vessary Regards, A. Person"),
            ("%20East\nRegards\n\nA. Person", "Vessary EastRegards"),
        ] {
            let words = said(&format!("Here it is: a.html#{LINK}{end}")).unwrap_or_else(|| panic!("{end}"));
            assert!(
                words.contains(&format!("y.name took in all that followed: “{taken}”")),
                "{words}"
            );
        }
        let long = said(&format!("{LINK}\n{}", "on and on ".repeat(90))).expect("it is long");
        assert!(long.contains(" … ") && long.chars().count() < 220, "{long}");
    }

    #[test]
    fn what_can_only_be_the_text_itself_is_not_told() {
        for text in [
            format!("{LINK}&v=1\nRegards,\nA. Person"),
            format!("{LINK}&v=1 Regards, A."),
            LINK.to_owned(),
            format!("{LINK}\n\nRegards, A."),
            format!("{LINK}%2C%20and%20others."),
            format!("{LINK} of the hills"),
            // A mailer broke it.
            format!("{LINK}%20of%20\nthe%20hills."),
            format!("<a href=\"a.html#{LINK}\">turn 3, as agreed.</a>"),
            // By hand.
            "x.start = 600\ny.start = 400\nnote = Assumed, see annex.".to_owned(),
            "x.name=Ondrel, and others.&x.start=600".to_owned(),
        ] {
            assert_eq!(said(&text), None, "{text}");
        }
    }

    #[test]
    fn long_and_strange_texts_end() {
        for piece in ["note=", "note\n", "\n", " ,", "%\n"] {
            let text = format!("x.start=6&note=a{}", piece.repeat(100_000));
            // Whatever it says, it says it.
            let _ = received(&text).map(|opened| taken_in(&text, &opened));
        }
    }
}
