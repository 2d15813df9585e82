//! The outcome as JSON for other programs: the object of the batch door, and what it is of.

use crate::answer::Answer;
use crate::mark::text_mark;
use crate::pairs::Pairs;

/// The object of the batch door with `marking`, `link`, `text_mark` and `version` behind it, on one line or with a line
/// for each figure; numbers in the shortest digits that read back the same.
pub fn json(answer: &Answer, pairs: &Pairs, version: &str, pretty: bool) -> String {
    let marking = pairs
        .get("marking")
        .map(str::trim)
        .filter(|text| !text.is_empty());
    let line = format!(
        "{},\"marking\":{},\"link\":{},\"text_mark\":{},\"version\":{}}}",
        answer.to_json().strip_suffix('}').unwrap_or_default(),
        marking.map_or("null".into(), quoted),
        quoted(&pairs.link()),
        quoted(&text_mark(pairs)),
        quoted(version)
    );
    if pretty { in_lines(&line) } else { line + "\n" }
}

fn quoted(text: &str) -> String {
    // A text can always be written.
    serde_json::to_string(text).unwrap_or_default()
}

/// A JSON text with a line for each value, those within another indented by two more blanks.
fn in_lines(json: &str) -> String {
    let mut text = String::with_capacity(2 * json.len());
    let (mut depth, mut within, mut escaped) = (0_usize, false, false);
    let mut letters = json.chars().peekable();
    let line = |text: &mut String, depth: usize| {
        text.push('\n');
        text.extend(std::iter::repeat_n(' ', 2 * depth));
    };
    while let Some(letter) = letters.next() {
        if within {
            within = escaped || letter != '"';
            escaped = !escaped && letter == '\\';
            text.push(letter);
            continue;
        }
        match letter {
            '{' | '[' => {
                text.push(letter);
                let empty = matches!(letters.peek(), Some('}' | ']'));
                depth += 1;
                if !empty {
                    line(&mut text, depth);
                }
            }
            '}' | ']' => {
                depth = depth.saturating_sub(1);
                if !text.ends_with(['{', '[']) {
                    line(&mut text, depth);
                }
                text.push(letter);
            }
            ',' => {
                text.push(letter);
                line(&mut text, depth);
            }
            ':' => text += ": ",
            other => {
                within = other == '"';
                text.push(other);
            }
        }
    }
    text + "\n"
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::answer::answer;

    #[test]
    fn it_begins_as_the_batch_door_answers() {
        for link in [
            "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&marking=M%20%22%7B%5B:,%5C",
            "x.start=1,000",
        ] {
            let (pairs, answer) = (Pairs::parse(link), answer(link));
            let line = json(&answer, &pairs, "0.1.0", false);
            let batch = answer.to_json();
            assert!(
                line.starts_with(batch.strip_suffix('}').expect("an object")),
                "{line}"
            );
            assert_eq!(line.lines().count(), 1);
            let pretty = json(&answer, &pairs, "0.1.0", true);
            let read = |text: &str| serde_json::from_str::<serde_json::Value>(text).expect("JSON");
            assert_eq!(read(&line), read(&pretty));
            assert!(pretty.lines().count() > 5);
            let usual = serde_json::to_string_pretty(&read(&line)).expect("JSON");
            assert_eq!(pretty.lines().count(), usual.lines().count());
            assert_eq!(read(&line)["link"], pairs.link());
            assert_eq!(read(&line)["text_mark"], text_mark(&pairs));
        }
    }
}
