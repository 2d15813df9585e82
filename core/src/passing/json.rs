//! The outcome as JSON for other programs: the object of the batch door, and what it is of.

use crate::answer::Answer;
use crate::json::to_json;
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
        to_json(&marking),
        to_json(&pairs.link()),
        to_json(&text_mark(pairs)),
        to_json(&version)
    );
    if pretty { in_lines(&line) } else { line + "\n" }
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
