//! Taking up what somebody was sent, in whatever shape it comes: an address, a fragment, a bare text, a saved file, the
//! lines of a wiki, each perhaps wrapped, quoted or dressed up by a mailer.
//!
//! [`Pairs`] reads strictly what is written; all forgiving is here, and ends in a text that `Pairs` reads.

use super::{mailed, saved};
use crate::keys;
use crate::pairs::Pairs;

/// The most bytes that are looked through.
pub const LONGEST: usize = 1024 * 1024;

/// What is said where there is too much to look through.
pub const TOO_LONG: &str = "This is far longer than any engagement: nothing was opened.";

/// What is said where no pair is found.
pub const NOTHING: &str =
    "There is no engagement in this: it has no `key=value`, such as `x.start=600`. Nothing was opened.";

/// The longest key, and the most pairs, of which it is asked whether they are nearly a known one.
const LONGEST_KEY: usize = 40;
const MOST_PAIRS: usize = 100;

/// Marks that open and close what is quoted, also those that programs put in place of plain ones.
const OPENING: &[char] = &[
    '"', '\'', '“', '”', '„', '‘', '’', '‚', '«', '»', '‹', '›', '<', '(', '[', '{', '`', '|',
];
const CLOSING: &[char] = &[
    '"', '\'', '“', '”', '‘', '’', '«', '»', '‹', '›', '>', ')', ']', '}', '`', '|',
];
/// Marks of a sentence that an engagement may stand at the end of.
const STOPS: &[char] = &['.', ',', ';', ':', '!'];
/// Letters that are not seen, which some programs put into long words so that they can break.
const UNSEEN: &[char] = &['\u{200b}', '\u{2060}', '\u{feff}', '\u{ad}'];
/// Keys whose text may end in any mark.
pub(super) const FREE: &[&str] = &["title", "note", "marking", "counted", "x.name", "y.name"];

/// The engagement in `text`.
///
/// # Errors
/// [`NOTHING`] where no pair is found, [`TOO_LONG`] beyond [`LONGEST`] bytes. A pair that is wrong is none of them: it
/// is a problem of the statement.
pub fn received(text: &str) -> Result<Pairs, &'static str> {
    if text.len() > LONGEST {
        return Err(TOO_LONG);
    }
    // No text has it, and most pictures do.
    if text.contains('\0') {
        return Err(NOTHING);
    }
    let text = mailed::without_quoting(text);
    let text: String = text.chars().filter(|letter| !UNSEEN.contains(letter)).collect();
    let mut lines: Vec<&str> = text.lines().map(unquoted).collect();
    lines.dedup_by(|line, before| line.is_empty() && before.is_empty());
    let lines = saved::engagement(&lines).unwrap_or(&lines);
    let joined = joined(&mailed::without_message(with_keys(lines)));
    let plain = without_entities(in_markup(&joined).unwrap_or(&joined));
    let decoded = decoded_whole(&plain);
    let pairs = Pairs::parse(without_words(decoded.as_deref().unwrap_or(&plain)));
    if has_key(&pairs) { Ok(pairs) } else { Err(NOTHING) }
}

/// Whether a key is known, or nearly.
fn has_key(pairs: &Pairs) -> bool {
    let near = |key: &str| key.len() <= LONGEST_KEY && keys::nearest(key).is_some();
    let known = pairs.iter().any(|(key, _)| is_known(key));
    known || pairs.iter().take(MOST_PAIRS).any(|(key, _)| near(key))
}

/// A line without the marks by which mailers show that it is quoted.
pub(super) fn unquoted(line: &str) -> &str {
    line.trim_start_matches(['>', ' ', '\t']).trim_end()
}

/// The lines that hold the engagement: from the first with a key in the block of lines that has a known one, to the
/// version, or to a gap behind which no known key follows.
fn with_keys<'a, 'b>(lines: &'b [&'a str]) -> &'b [&'a str] {
    let Some(known) = lines.iter().position(|line| known_key(line).is_some()) else {
        return lines;
    };
    let block = lines[..known].iter().rposition(|line| line.is_empty());
    let block = block.map_or(0, |gap| gap + 1);
    let first = lines[block..known].iter().position(|line| line.contains('='));
    let first = first.map_or(known, |place| block + place);
    let ends = |place: &usize| {
        let next = || lines[*place..].iter().find(|line| !line.is_empty());
        lines[*place].is_empty() && !next().is_some_and(|line| begins_with_key(line))
    };
    let last = (known..lines.len())
        .find(|place| ends(place))
        .unwrap_or(lines.len());
    let version = (known..last).find(|place| version_end(lines[*place]).is_some());
    &lines[first..version.map_or(last, |place| place + 1)]
}

/// Lines as one: a pair that begins a line is a pair of its own, and any other break was put in by a program.
///
/// Encoded texts have no blanks, so that nothing stood at the break; where blanks stand between the first key and the
/// last, one did.
fn joined(lines: &[&str]) -> String {
    let inside = |(place, line): (usize, &&str)| {
        let from = if place == 0 {
            line.find('=').unwrap_or(0)
        } else {
            0
        };
        let to = version_end(line).unwrap_or(line.len());
        line[from..to.max(from)].contains([' ', '\t'])
    };
    let has_blanks = lines.iter().enumerate().any(inside);
    let mut whole = String::new();
    for line in lines {
        if begins_with_key(line) && whole.contains('=') && !whole.ends_with(['&', '#', '?']) {
            whole.push('&');
        } else if has_blanks && !whole.is_empty() && !whole.ends_with('&') && !line.starts_with('&') {
            whole.push(' ');
        }
        match line.split_once('=') {
            // A list written by hand has blanks around the sign.
            Some((key, text)) if key != key.trim_end() && is_known(key.trim()) => {
                whole += key.trim();
                whole.push('=');
                whole += text.trim_start();
            }
            _ => whole += line,
        }
    }
    whole
}

/// What an attribute `src` or `href` holds, where it holds a pair.
fn in_markup(text: &str) -> Option<&str> {
    let quotes: &[char] = &['"', '\'', '“', '”', '„', '″'];
    ["src=", "href="].iter().find_map(|name| {
        text.match_indices(name).find_map(|(at, _)| {
            let rest = &text[at + name.len()..];
            let rest = rest.strip_prefix(quotes)?;
            let value = rest.split(quotes).next()?;
            value.contains('=').then_some(value)
        })
    })
}

/// Each `&` that a program has written out as an entity, put back; also where two programs did, one after the other.
pub(super) fn without_entities(text: &str) -> String {
    let mut plain = text.to_owned();
    for _ in 0..3 {
        for entity in ["&amp;", "&#38;", "&#x26;", "&AMP;"] {
            if plain.contains(entity) {
                plain = plain.replace(entity, "&");
            }
        }
    }
    plain
}

/// The text decoded once, where a program has escaped it as a whole.
fn decoded_whole(text: &str) -> Option<String> {
    let escaped = !text.contains('=') && (text.contains("%3D") || text.contains("%3d"));
    let decoded = || percent_encoding::percent_decode_str(text).decode_utf8().ok();
    escaped.then(decoded).flatten().map(|text| text.into_owned())
}

/// The engagement with its address, without the words before and behind it.
fn without_words(text: &str) -> &str {
    let text = text.trim();
    let unwrapped = text.trim_start_matches(OPENING).trim_start();
    let quoted = unwrapped.len() < text.len();
    let from = if begins_with_key(unwrapped) {
        unwrapped
    } else {
        &unwrapped[beginning(unwrapped)..]
    };
    without_end(without_escaped_hash(from), quoted)
}

/// Where the first known key, or the address before it, begins.
fn beginning(text: &str) -> usize {
    let Some(key) = known_key(text) else { return 0 };
    let outside = |letter: char| letter.is_whitespace() || OPENING.contains(&letter);
    let run = text[..key]
        .char_indices()
        .rev()
        .find(|(_, letter)| outside(*letter))
        .map_or(0, |(at, letter)| at + letter.len_utf8());
    // Words that only stand against the key, as in "link:x.start=600", are no part of it.
    if text[run..key].contains(['#', '?', '&', '%']) {
        run
    } else {
        key
    }
}

/// Where the first known key with its `=` stands.
fn known_key(text: &str) -> Option<usize> {
    text.match_indices('=').find_map(|(equals, _)| {
        let head = text[..equals].trim_end_matches(' ');
        let key = head.rsplit(|letter| !is_key_letter(letter)).next()?;
        is_known(key).then_some(head.len() - key.len())
    })
}

/// An address whose `#` was escaped, from there on.
fn without_escaped_hash(text: &str) -> &str {
    let head = text.split('=').next().unwrap_or(text);
    match head.rfind("%23") {
        Some(at) if !head.contains(['#', '&']) => &text[at + "%23".len()..],
        _ => text,
    }
}

/// Where the version ends, if it is the last of the pairs, as the writer puts it.
pub(super) fn version_end(text: &str) -> Option<usize> {
    text.match_indices("v=1").find_map(|(at, version)| {
        let end = at + version.len();
        let begins = at == 0 || text[..at].ends_with(['&', '#', '?', ';']);
        let mut behind = text[end..].chars();
        let goes_on = match behind.next() {
            Some('.') => behind.next().is_some_and(|letter| letter.is_ascii_digit()),
            Some(letter) => matches!(letter, '&' | '#' | '%') || letter.is_alphanumeric(),
            None => false,
        };
        (begins && !goes_on).then_some(end)
    })
}

/// The text up to its end: behind the version, or without the marks of a sentence.
fn without_end(text: &str, quoted: bool) -> &str {
    if let Some(end) = version_end(text) {
        return &text[..end];
    }
    let last = text.rsplit('&').next().unwrap_or(text);
    let key = last.split('=').next().unwrap_or(last);
    let key = key.rsplit(['#', '?']).next().unwrap_or(key);
    if !FREE.contains(&key) {
        return text.trim_end_matches(|letter: char| {
            letter.is_whitespace() || STOPS.contains(&letter) || CLOSING.contains(&letter)
        });
    }
    match text.strip_suffix(CLOSING) {
        Some(inside) if quoted => inside,
        _ => text,
    }
}

/// Whether a text begins with a known key and its `=`, or `#` and such.
pub(super) fn begins_with_key(text: &str) -> bool {
    let text = text.trim_start_matches(['#', '?', '&']);
    text.split_once('=')
        .is_some_and(|(key, _)| is_known(key.trim_end()))
}

/// Whether a text ends in a known key.
pub(super) fn ends_in_key(text: &str) -> bool {
    let key = text.rsplit(|letter| !is_key_letter(letter)).next();
    key.is_some_and(is_known)
}

fn is_known(key: &str) -> bool {
    keys::find(key).is_some() || keys::is_numbered(key)
}

pub(super) fn is_key_letter(letter: char) -> bool {
    letter.is_ascii_alphanumeric() || letter == '.'
}

#[cfg(test)]
mod tests {
    use super::*;

    const LINK: &str = "title=Turn%203&x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&v=1";

    /// What comes in, and the engagement in it.
    #[test]
    fn whatever_shape_it_comes_in() {
        let same = [
            LINK.to_owned(),
            format!("#{LINK}"),
            format!("?{LINK}"),
            format!("  \r\n{LINK}\r\n\r\n"),
            format!("file:///D:/My%20Files/aftercount.html#{LINK}"),
            format!("file:///D:/My Files/aftercount.html#{LINK}"),
            format!("https://wiki.example/page?{LINK}#top"),
            format!("https://wiki.example/page?v=1#{LINK}"),
            LINK.replace('&', "&amp;"),
            LINK.replace('&', "&amp;amp;"),
            LINK.replace('&', "&#38;"),
            LINK.replace("x.rate", "x.ra\nte").replace("&v=1", "&\nv=1"),
            LINK.replace("&x.rate", "\n&x.rate")
                .replace("&y.rate=", "&\n  y.rate="),
            LINK.replace("=0.04&", "=0.04\r\n&"),
            format!("> {}", LINK.replace("x.rate", "x.ra\n> te")),
            format!("“{LINK}”"),
            format!("„{LINK}“"),
            format!("'{LINK}'"),
            format!("«{LINK}»"),
            format!("<{LINK}>"),
            format!("<https://wiki.example/a.html#{LINK}>."),
            format!("({LINK})."),
            format!("[the turn](a.html#{LINK})"),
            format!("[[a.html#{LINK}|the turn]]"),
            format!("`{LINK}`"),
            format!("{LINK}."),
            format!("{LINK}, as agreed."),
            format!("Here it is: https://wiki.example/a.html#{LINK}. Please look at x.rate=0.04 in it."),
            format!(
                "Good morning,\nhere is a turn:\n\n<a.html#{}>\n\nRegards\nA.",
                LINK.replace("x.rate", "x.ra\nte")
            ),
            format!("The link:{LINK}"),
            format!("a.html%23{LINK}"),
            format!(
                "a.html%23{}",
                LINK.replace('=', "%3D")
                    .replace('&', "%26")
                    .replace("%20", "%2520")
            ),
            format!(
                "<iframe title=\"Aftercount: turn 3\" width=\"800\"\n src=\"a.html#{}\"></iframe>",
                LINK.replace('&', "&amp;")
            ),
            format!("<a href=“a.html#{LINK}”>turn 3</a>"),
            LINK.replace("x.start", "x.\u{200b}start")
                .replace("0.04", "0.\u{ad}04"),
            format!("\u{feff}{LINK}"),
            LINK.replace('&', "\n"),
            LINK.replace('&', "\n").replace('=', " = "),
            LINK.replace("&y.start", "\n\ny.start"),
        ];
        for text in same {
            let pairs = received(&text).unwrap_or_else(|why| panic!("{text:?}: {why}"));
            assert_eq!(pairs.link(), LINK, "{text:?}");
        }
    }

    /// Texts without the version at their end, of which less can be known.
    #[test]
    fn what_is_not_certain_is_left_alone() {
        for (text, link) in [
            ("x.start=600&y.rate=0.05.", "x.start=600&y.rate=0.05&v=1"),
            ("x.start=600&y.rate=0.05»,", "x.start=600&y.rate=0.05&v=1"),
            (
                "x.start=6&title=Who%20goes%3F (a draft).",
                "x.start=6&title=Who%20goes?%20%28a%20draft%29.&v=1",
            ),
            ("“x.start=6&title=No end.”", "x.start=6&title=No%20end.&v=1"),
            (
                "title=He said \"go\"&x.start=6",
                "title=He%20said%20%22go%22&x.start=6&v=1",
            ),
            (
                "title=A long\nname&x.start=6",
                "title=A%20long%20name&x.start=6&v=1",
            ),
            ("v=1&x.start=6&y.start=4", "x.start=6&y.start=4&v=1"),
            ("x.start=1,000&y.start=6..", "x.start=1,000&y.start=6&v=1"),
            ("x.start=6&v=1.5", "x.start=6&v=1.5"),
        ] {
            assert_eq!(
                received(text).map(|pairs| pairs.link()),
                Ok(link.to_owned()),
                "{text:?}"
            );
        }
    }

    #[test]
    fn a_key_of_a_newer_copy_is_not_lost() {
        for text in [
            "reach2=5&x.start=600&v=1",
            "#reach2=5&x.start=600&v=1",
            "See reach2=5&x.start=600&v=1.",
        ] {
            let pairs = received(text).expect(text);
            assert_eq!(pairs.link(), "reach2=5&x.start=600&v=1", "{text}");
        }
        let far_off = received("X.Start=6").expect("its key is nearly right");
        assert_eq!(far_off.get("X.Start"), Some("6"));
    }

    #[test]
    fn what_holds_no_engagement_is_said_to() {
        for text in [
            "",
            " \n ",
            "Good morning",
            "a = b",
            "https://wiki.example/a.html",
            "<p>title</p>",
            "%3D",
            "=",
            // What a browser makes of a picture.
            "\u{fffd}PNG\r\n\u{1a}\n\0\0\0\rIHDR\u{fffd}&x.start=\u{fffd}G&v=\u{fffd}",
        ] {
            assert_eq!(received(text), Err(NOTHING), "{text:?}");
        }
        assert_eq!(received(&"x".repeat(LONGEST + 1)), Err(TOO_LONG));
    }

    /// However long and strange the text is, it takes a time in proportion.
    #[test]
    fn long_and_strange_texts_end() {
        for piece in [
            "=", "&amp;", "v=1", "x.start=", "\n", "> \n=", "<src=\"", "%3D", "“", "v=1&\n\n",
        ] {
            // Whatever it says, it says it.
            let _ = received(&piece.repeat(LONGEST / 8 / piece.len()));
        }
    }
}
