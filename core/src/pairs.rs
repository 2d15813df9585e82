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

/// One `key=text`, as it was written.
#[derive(Clone, Debug, PartialEq, Eq)]
struct Pair {
    /// The key, and behind it the text: in one string, since nearly all the time to read a short link is memory's.
    both: String,
    /// Where the text begins.
    cut: usize,
    /// Where the pair could not be decoded: it is kept, and written again, as it stood.
    raw: Option<Box<Undecoded>>,
}

#[derive(Clone, Debug, PartialEq, Eq)]
struct Undecoded {
    written: String,
    problem: &'static str,
}

/// A link's pairs: the state of the page.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Pairs {
    pairs: Vec<Pair>,
    /// The length of a text as it came in, where that is more than is worked out.
    too_long: Option<usize>,
    /// A text so long that it is not even taken apart, as it came in.
    untouched: Option<String>,
}

impl Pairs {
    /// Reads a link. It never fails: what is wrong is kept, and a problem of the [`Statement`](crate::statement::Statement).
    pub fn parse(link: &str) -> Pairs {
        let link = without_address(link.trim());
        let too_long = (link.len() > LONGEST_LINK).then_some(link.len());
        if link.len() > LONGEST_TAKEN_APART {
            return Pairs {
                pairs: Vec::new(),
                too_long,
                untouched: Some(link.into()),
            };
        }
        let mut pairs = Vec::with_capacity(USUAL_PAIRS);
        pairs.extend(
            link.split('&')
                .map(str::trim)
                .filter(|piece| !piece.is_empty())
                .map(Pair::parse),
        );
        Pairs {
            pairs,
            too_long,
            untouched: None,
        }
    }

    /// The text of `key`, decoded, as it was written; `None` where the key is absent.
    pub fn get(&self, key: &str) -> Option<&str> {
        self.pairs
            .iter()
            .find(|pair| pair.key() == key)
            .map(|pair| pair.text())
    }

    /// Gives `key` a text, in its place or at the end; an empty text takes the key away.
    pub fn set(&mut self, key: &str, text: &str) {
        self.too_long = None;
        self.untouched = None;
        if text.is_empty() {
            self.pairs.retain(|pair| pair.key() != key);
            return;
        }
        let new = Pair::new(key, text, None);
        match self.pairs.iter_mut().find(|pair| pair.key() == key) {
            Some(pair) => *pair = new,
            None => self.pairs.push(new),
        }
    }

    /// Takes away every pair of `key` but the first.
    pub fn keep_first(&mut self, key: &str) {
        let mut stood = false;
        self.pairs
            .retain(|pair| pair.key() != key || !std::mem::replace(&mut stood, true));
    }

    /// Whether more than one pair has this key.
    pub fn stands_twice(&self, key: &str) -> bool {
        self.pairs.iter().filter(|pair| pair.key() == key).count() > 1
    }

    /// The keys and their decoded texts, in order.
    pub fn iter(&self) -> impl Iterator<Item = (&str, &str)> {
        self.pairs.iter().map(|pair| (pair.key(), pair.text()))
    }

    /// The key and the decoded text at a place of [`Pairs::iter`].
    pub(crate) fn at(&self, place: usize) -> (&str, &str) {
        let pair = &self.pairs[place];
        (pair.key(), pair.text())
    }

    /// Whether no pair stands.
    pub fn is_empty(&self) -> bool {
        self.pairs.is_empty() && self.untouched.is_none()
    }

    /// The link, encoded, with `v=1` last so that it never ends in a mark that a mailer cuts off; a text that was not
    /// taken apart as it came in.
    pub fn link(&self) -> String {
        if let Some(text) = &self.untouched {
            return text.clone();
        }
        let written: Vec<String> = self
            .pairs
            .iter()
            .filter(|pair| pair.key() != "v")
            .map(Pair::written)
            .collect();
        let mut versions: Vec<String> = self
            .pairs
            .iter()
            .filter(|pair| pair.key() == "v")
            .map(Pair::written)
            .collect();
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
        // No byte takes more than the three of an escape, so that a short link need not be written to be measured.
        let at_most: usize = "&v=1".len() + self.pairs.iter().map(Pair::longest).sum::<usize>();
        if self.too_long.is_none() && self.untouched.is_none() && at_most <= LONGEST_LINK {
            return None;
        }
        Some(self.length()).filter(|length| *length > LONGEST_LINK)
    }

    /// What is wrong with the text as text: its escapes, pieces without `=`; by their place in the link.
    pub(crate) fn problems(&self) -> Vec<(usize, Problem)> {
        let undecoded = |(place, pair): (usize, &Pair)| {
            let raw = pair.raw.as_ref()?;
            let key = raw.written.contains('=').then(|| pair.key().into());
            let problem = raw.problem.into();
            Some((
                place,
                Problem {
                    key,
                    item: None,
                    found: Some(pair.text().into()),
                    problem,
                },
            ))
        };
        self.pairs.iter().enumerate().filter_map(undecoded).collect()
    }
}

impl Pair {
    fn new(key: &str, text: &str, raw: Option<Box<Undecoded>>) -> Pair {
        Pair {
            both: [key, text].concat(),
            cut: key.len(),
            raw,
        }
    }

    fn key(&self) -> &str {
        &self.both[..self.cut]
    }

    fn text(&self) -> &str {
        &self.both[self.cut..]
    }

    fn parse(piece: &str) -> Pair {
        let undecoded = |key: &str, text: &str, problem| {
            let written = piece.into();
            Pair::new(key, text, Some(Box::new(Undecoded { written, problem })))
        };
        let Some((key, text)) = piece.split_once('=') else {
            return undecoded("", piece, "write it as key=value");
        };
        match (decode(key), decode(text)) {
            (Ok(key), Ok(text)) => Pair::new(&key, &text, None),
            (Ok(key), Err(problem)) => undecoded(&key, text, problem),
            (Err(problem), _) => undecoded(key, text, problem),
        }
    }

    /// The most bytes that it is written with, and the `&` before it.
    fn longest(&self) -> usize {
        let raw = self.raw.as_ref().map_or(0, |raw| raw.written.len());
        3 * self.both.len() + "&=".len() + raw
    }

    fn written(&self) -> String {
        match &self.raw {
            Some(raw) => raw.written.clone(),
            None => format!("{}={}", encode(self.key()), encode(self.text())),
        }
    }
}

/// Escapes all but what the writer leaves as it is.
pub fn encode(text: &str) -> Cow<'_, str> {
    utf8_percent_encode(text, ESCAPED).into()
}

fn decode(written: &str) -> Result<Cow<'_, str>, &'static str> {
    if !written.bytes().any(|byte| byte == b'%' || byte == b'+') {
        return Ok(written.into());
    }
    let escapes_hold = written.split('%').skip(1).all(|rest| {
        let digits = rest.as_bytes().get(..2);
        digits.is_some_and(|digits| digits.iter().all(u8::is_ascii_hexdigit))
    });
    if !escapes_hold {
        return Err("a % must be followed by two hexadecimal digits: write %25 for the sign itself");
    }
    let blanks = written.replace('+', " ");
    match percent_decode_str(&blanks).decode_utf8() {
        Ok(text) => Ok(Cow::Owned(text.into_owned())),
        Err(_) => Err("the escapes are not UTF-8"),
    }
}

/// The part of `link` behind a leading address, `#` or `?`.
///
/// An address shows by a `#` or `?` before the first `=`; its fragment counts where that holds a key, else its query.
fn without_address(link: &str) -> &str {
    let head = link.split('=').next().unwrap_or(link);
    match head.find(['#', '?']) {
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
