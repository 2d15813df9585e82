//! The ordered keys and texts of a link, lossless also where they are wrong.
//!
//! `link = pair *( "&" pair )`, `pair = key "=" text`: split at the first `=`, then `%XX` decoded as UTF-8 and `+` a
//! blank. A leading address, `#` or `?` is dropped.

use crate::problem::Problem;
use percent_encoding::{AsciiSet, NON_ALPHANUMERIC, percent_decode_str, utf8_percent_encode};
use std::borrow::Cow;

/// The most bytes of encoded text that are worked out.
pub const LONGEST_LINK: usize = 16 * 1024;

/// The most bytes that are taken apart at all, so that a text that is only somewhat too long is not lost.
const LONGEST_TAKEN_APART: usize = 256 * 1024;

/// How many pairs a link usually has at most.
const USUAL_PAIRS: usize = 16;

/// What the writer leaves as it is beside letters and digits: all of it is plain text to mailers and wikis.
const ESCAPED: &AsciiSet = &NON_ALPHANUMERIC
    .remove(b'-')
    .remove(b'.')
    .remove(b'_')
    .remove(b',')
    .remove(b':')
    .remove(b'@')
    .remove(b'?')
    .remove(b'/');

/// One `key=text`: where it stands in the text of its [`Pairs`], decoded.
#[derive(Clone, Copy, Debug)]
struct Pair {
    start: u32,
    /// Where the `=` stands.
    cut: u32,
    end: u32,
    raw: Option<Undecoded>,
}

/// Where a pair could not be decoded: it is kept, and written again, as it stood there.
#[derive(Clone, Copy, Debug)]
struct Undecoded {
    start: u32,
    end: u32,
    why: Why,
}

/// Why a pair could not be decoded.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Why {
    NoKey,
    Escape,
    NotUtf8,
}

/// A link's pairs: the state of the page.
#[derive(Clone, Debug, Default)]
pub struct Pairs {
    /// The link, and behind it what had to be decoded: in one text, since nearly all the time to read a short link is
    /// memory's.
    text: String,
    pairs: Vec<Pair>,
    /// The length of a text as it came in, where that is more than is worked out.
    too_long: Option<usize>,
    /// Whether the text is so long that it is not even taken apart.
    untouched: bool,
}

impl Pairs {
    /// Reads a link. It never fails: what is wrong is kept, and a problem of the [`Statement`](crate::statement::Statement).
    pub fn parse(link: &str) -> Pairs {
        let link = without_address(trimmed(link));
        let mut pairs = Pairs {
            text: link.into(),
            pairs: Vec::new(),
            too_long: (link.len() > LONGEST_LINK).then_some(link.len()),
            untouched: link.len() > LONGEST_TAKEN_APART,
        };
        if !pairs.untouched {
            pairs.pairs.reserve(USUAL_PAIRS);
            pairs.take_apart(link);
        }
        pairs
    }

    /// Finds the pairs of `link`, with which the text begins, in one pass over its bytes.
    fn take_apart(&mut self, link: &str) {
        let (mut start, mut cut, mut is_plain) = (0, None, true);
        for (at, byte) in link.bytes().enumerate() {
            match byte {
                b'&' => {
                    self.take(link, (start, cut, at), is_plain);
                    (start, cut, is_plain) = (at + 1, None, true);
                }
                b'=' if cut.is_none() => cut = Some(at),
                b'%' | b'+' => is_plain = false,
                _ => {}
            }
        }
        self.take(link, (start, cut, link.len()), is_plain);
    }

    /// Adds the pair of a piece of `link`; a plain one stands there as it is.
    fn take(&mut self, link: &str, (start, cut, end): (usize, Option<usize>, usize), is_plain: bool) {
        let piece = &link[start..end];
        if let Some(cut) = cut
            && is_plain
            && is_trim(piece)
        {
            self.pairs.push(Pair {
                start: start as u32,
                cut: cut as u32,
                end: end as u32,
                raw: None,
            });
            return;
        }
        let written = piece.trim();
        let start = start + (piece.len() - piece.trim_start().len());
        let undecoded = |why| {
            Some(Undecoded {
                start: start as u32,
                end: (start + written.len()) as u32,
                why,
            })
        };
        if written.is_empty() {
            return;
        }
        let Some((key, text)) = written.split_once('=') else {
            return self.add("", written, undecoded(Why::NoKey));
        };
        match (decode(key), decode(text)) {
            (Ok(key), Ok(text)) => self.add(&key, &text, None),
            (Ok(key), Err(why)) => self.add(&key, text, undecoded(why)),
            (Err(why), _) => self.add(key, text, undecoded(why)),
        }
    }

    fn add(&mut self, key: &str, text: &str, raw: Option<Undecoded>) {
        let pair = self.write(key, text, raw);
        self.pairs.push(pair);
    }

    /// Writes a pair behind the text.
    fn write(&mut self, key: &str, text: &str, raw: Option<Undecoded>) -> Pair {
        let start = self.text.len();
        self.text.extend([key, "=", text]);
        Pair {
            start: start as u32,
            cut: (start + key.len()) as u32,
            end: self.text.len() as u32,
            raw,
        }
    }

    /// The text of `key`, decoded, as it was written; `None` where the key is absent.
    pub fn get(&self, key: &str) -> Option<&str> {
        self.iter().find(|(of, _)| *of == key).map(|(_, text)| text)
    }

    /// Gives `key` a text, in its place or at the end; an empty text takes the key away.
    pub fn set(&mut self, key: &str, text: &str) {
        let place = self.iter().position(|(of, _)| of == key);
        match place {
            _ if text.is_empty() => self.pairs.retain(|pair| pair.key(&self.text) != key),
            Some(place) => self.pairs[place] = self.write(key, text, None),
            None => self.add(key, text, None),
        }
        self.too_long = None;
        self.untouched = false;
        self.clear_away();
    }

    /// Writes the text anew, without what no pair stands in any more.
    fn clear_away(&mut self) {
        let old = std::mem::take(&mut *self);
        for pair in old.pairs {
            let raw = pair.raw.map(|raw| {
                let start = self.text.len() as u32;
                self.text.push_str(raw.written(&old.text));
                let end = self.text.len() as u32;
                Undecoded { start, end, ..raw }
            });
            self.add(pair.key(&old.text), pair.text(&old.text), raw);
        }
    }

    /// Takes away every pair of `key` but the first.
    pub fn keep_first(&mut self, key: &str) {
        let mut stood = false;
        self.pairs
            .retain(|pair| pair.key(&self.text) != key || !std::mem::replace(&mut stood, true));
    }

    /// Whether more than one pair has this key.
    pub fn stands_twice(&self, key: &str) -> bool {
        self.iter().filter(|(of, _)| *of == key).count() > 1
    }

    /// The keys and their decoded texts, in order.
    pub fn iter(&self) -> impl Iterator<Item = (&str, &str)> {
        self.pairs
            .iter()
            .map(|pair| (pair.key(&self.text), pair.text(&self.text)))
    }

    /// The key and the decoded text at a place of [`Pairs::iter`].
    pub(crate) fn at(&self, place: usize) -> (&str, &str) {
        let pair = &self.pairs[place];
        (pair.key(&self.text), pair.text(&self.text))
    }

    /// The decoded text at a place of [`Pairs::iter`].
    pub(crate) fn text_at(&self, place: usize) -> &str {
        self.pairs[place].text(&self.text)
    }

    /// Whether no pair stands.
    pub fn is_empty(&self) -> bool {
        self.pairs.is_empty() && !self.untouched
    }

    /// The link, encoded, with `v=1` last so that it never ends in a mark that a mailer cuts off; a text that was not
    /// taken apart as it came in.
    pub fn link(&self) -> String {
        if self.untouched {
            return self.text.clone();
        }
        let (versions, written): (Vec<_>, Vec<_>) =
            self.pairs.iter().partition(|pair| pair.key(&self.text) == "v");
        let written_of = |pairs: Vec<&Pair>| -> Vec<String> {
            pairs.into_iter().map(|pair| pair.written(&self.text)).collect()
        };
        let (mut versions, written) = (written_of(versions), written_of(written));
        if versions.is_empty() {
            versions.push("v=1".into());
        }
        let link = [&written[..], &versions].concat().join("&");
        // A stray mark of an address before the first `=` would cut off what stands before it.
        if without_address(&link) == link {
            link
        } else {
            [versions, written].concat().join("&")
        }
    }

    /// The length of the encoded text in bytes, also where it was too long to be read.
    pub fn length(&self) -> usize {
        self.too_long.unwrap_or_else(|| self.link().len())
    }

    /// The length where that is more than is worked out.
    pub(crate) fn too_long(&self) -> Option<usize> {
        // No byte takes more than the three of an escape, so that a short link need not be written to be measured; every
        // pair stands in the text, and its `=` and what it was written as.
        let at_most = 3 * self.text.len() + self.pairs.len() + "&v=1".len();
        if self.too_long.is_none() && !self.untouched && at_most <= LONGEST_LINK {
            return None;
        }
        Some(self.length()).filter(|length| *length > LONGEST_LINK)
    }

    /// What is wrong with the text as text: its escapes, pieces without `=`; by their place in the link.
    pub(crate) fn problems(&self) -> Vec<(usize, Problem)> {
        let undecoded = |(place, pair): (usize, &Pair)| {
            let raw = pair.raw.as_ref()?;
            let key = (raw.why != Why::NoKey).then(|| pair.key(&self.text).into());
            Some((
                place,
                Problem {
                    key,
                    item: None,
                    found: Some(pair.text(&self.text).into()),
                    problem: raw.why.words().into(),
                },
            ))
        };
        if self.pairs.iter().all(|pair| pair.raw.is_none()) {
            return Vec::new();
        }
        self.pairs.iter().enumerate().filter_map(undecoded).collect()
    }
}

impl PartialEq for Pairs {
    fn eq(&self, other: &Pairs) -> bool {
        let same = |(one, another): (&Pair, &Pair)| {
            let raw = |pair: &Pair, of| pair.raw.map(|raw| raw.written(of));
            one.key(&self.text) == another.key(&other.text)
                && one.text(&self.text) == another.text(&other.text)
                && raw(one, &self.text) == raw(another, &other.text)
        };
        self.too_long == other.too_long
            && self.untouched == other.untouched
            && (!self.untouched || self.text == other.text)
            && self.pairs.len() == other.pairs.len()
            && self.pairs.iter().zip(&other.pairs).all(same)
    }
}

impl Eq for Pairs {}

impl Pair {
    /// The key, where `of` is the text of its pairs.
    fn key<'a>(&self, of: &'a str) -> &'a str {
        &of[self.start as usize..self.cut as usize]
    }

    fn text<'a>(&self, of: &'a str) -> &'a str {
        &of[self.cut as usize + 1..self.end as usize]
    }

    fn written(&self, of: &str) -> String {
        match &self.raw {
            Some(raw) => raw.written(of).into(),
            None => format!("{}={}", encode(self.key(of)), encode(self.text(of))),
        }
    }
}

impl Undecoded {
    fn written<'a>(&self, of: &'a str) -> &'a str {
        &of[self.start as usize..self.end as usize]
    }
}

impl Why {
    fn words(self) -> &'static str {
        match self {
            Why::NoKey => "write it as key=value",
            Why::Escape => "a % must be followed by two hexadecimal digits: write %25 for the sign itself",
            Why::NotUtf8 => "the escapes are not UTF-8",
        }
    }
}

/// Escapes all but what the writer leaves as it is.
pub fn encode(text: &str) -> Cow<'_, str> {
    utf8_percent_encode(text, ESCAPED).into()
}

fn decode(written: &str) -> Result<Cow<'_, str>, Why> {
    if !written.bytes().any(|byte| byte == b'%' || byte == b'+') {
        return Ok(written.into());
    }
    let escapes_hold = written.split('%').skip(1).all(|rest| {
        let digits = rest.as_bytes().get(..2);
        digits.is_some_and(|digits| digits.iter().all(u8::is_ascii_hexdigit))
    });
    if !escapes_hold {
        return Err(Why::Escape);
    }
    let blanks = written.replace('+', " ");
    match percent_decode_str(&blanks).decode_utf8() {
        Ok(text) => Ok(Cow::Owned(text.into_owned())),
        Err(_) => Err(Why::NotUtf8),
    }
}

/// Whether nothing would be trimmed off `text`, as its first and last bytes show at once; not where it is not seen so.
fn is_trim(text: &str) -> bool {
    let visible = |byte: Option<&u8>| byte.is_some_and(u8::is_ascii_graphic);
    visible(text.as_bytes().first()) && visible(text.as_bytes().last())
}

/// `text` without its outer blanks; nearly always there are none.
pub(crate) fn trimmed(text: &str) -> &str {
    if is_trim(text) { text } else { text.trim() }
}

/// The part of `link` behind a leading address, `#` or `?`.
///
/// An address shows by a `#` or `?` before the first `=`; its fragment counts where that holds a key, else its query.
fn without_address(link: &str) -> &str {
    let head = head_of(link);
    match head.bytes().position(|byte| matches!(byte, b'#' | b'?')) {
        Some(at) if head.as_bytes()[at] == b'#' => &link[at + 1..],
        Some(at) => {
            let query = &link[at + 1..];
            match query.split_once('#') {
                Some((_, fragment)) if fragment.contains('=') => fragment,
                Some((query, _)) => query,
                None => query,
            }
        }
        None if head == link && link.contains("://") => "",
        None => link,
    }
}

/// What stands before the first `=`, or all.
fn head_of(link: &str) -> &str {
    let end = link.bytes().position(|byte| byte == b'=');
    &link[..end.unwrap_or(link.len())]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_address_is_dropped() {
        for link in [
            "x.start=6",
            "#x.start=6",
            "?x.start=6",
            "file:///a/b.html#x.start=6",
            "page.html?theme=1#x.start=6",
            "https://wiki.example/page?x.start=6#top",
        ] {
            assert_eq!(Pairs::parse(link).get("x.start"), Some("6"), "{link}");
        }
        assert!(Pairs::parse("file:///a/b.html").is_empty());
    }

    #[test]
    fn a_question_is_no_address() {
        let pairs = Pairs::parse("x.start=600?400..900&title=a#b");
        assert_eq!(pairs.get("x.start"), Some("600?400..900"));
        assert_eq!(pairs.get("title"), Some("a#b"));
    }

    #[test]
    fn what_is_wrong_is_kept_as_it_stood() {
        let link = "title=%ZZ&note=%FF&bare&x.start=1%2C000&v=1";
        let pairs = Pairs::parse(link);
        assert_eq!(pairs.link(), "title=%ZZ&note=%FF&bare&x.start=1,000&v=1");
        assert_eq!(pairs.problems().len(), 3);
        assert_eq!(Pairs::parse(&pairs.link()), pairs);
    }

    #[test]
    fn an_empty_text_takes_the_key_away() {
        let mut pairs = Pairs::parse("x.start=600&y.start=4");
        pairs.set("x.start", "");
        pairs.set("title", "a & b=c");
        assert_eq!(pairs.link(), "y.start=4&title=a%20%26%20b%3Dc&v=1");
    }

    #[test]
    fn of_a_key_that_stands_twice_the_first_is_kept() {
        let mut pairs = Pairs::parse("x.start=6&y.start=4&x.start=5&x.start=%ZZ");
        assert!(pairs.stands_twice("x.start") && !pairs.stands_twice("y.start"));
        pairs.keep_first("x.start");
        assert_eq!(pairs.link(), "x.start=6&y.start=4&v=1");
    }

    #[test]
    fn pieces_without_a_key_are_taken_away_by_the_empty_key() {
        let mut pairs = Pairs::parse("bare&x.start=6&another");
        pairs.set("", "");
        assert_eq!(pairs.link(), "x.start=6&v=1");
    }
}
