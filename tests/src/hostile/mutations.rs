//! Changes to a text: its bytes, its pairs, its numbers and lists.

use fastrand::Rng;

use super::corpus::Corpus;
use super::numbers::{near, number, pick};
use super::scratch::{flows, joins};

/// Texts that mean something to a browser, a parser or a printer somewhere.
const ODD: [&str; 40] = [
    "&",
    "=",
    "%",
    "+",
    "#",
    "?",
    "@",
    "/",
    ",",
    "..",
    "...",
    "-",
    ".",
    "e",
    "\0",
    "\n",
    "\r\n",
    "\t",
    "\u{1b}",
    "\u{7f}",
    "\u{202e}",
    "\u{2066}",
    "\u{200b}",
    "\u{feff}",
    "\u{a0}",
    "\u{fffd}",
    "\u{10ffff}",
    "\u{301}\u{301}",
    "💣",
    "é",
    "<b>",
    "</script>",
    "\"'",
    "&amp;",
    "%FF",
    "%ZZ",
    "%E2%80%AE",
    "%00",
    "__proto__",
    "{{x}}",
];

/// What an address may have in front.
const FRONTS: [&str; 7] = [
    "#",
    "?",
    "file:///a/b.html#",
    "https://a.example/?q=1#",
    "b.html?",
    "#?",
    " \n",
];

/// One change.
pub(super) fn mutate(rng: &mut Rng, corpus: &Corpus, text: String) -> String {
    match rng.u8(..24) {
        0..=7 => change_value(rng, corpus, &text),
        8..=10 => add_pair(rng, corpus, text),
        11 => on_pairs(&text, |pairs| drop_one(rng, pairs)),
        12 => on_pairs(&text, |pairs| repeat_one(rng, pairs)),
        13 => on_pairs(&text, |pairs| rng.shuffle(pairs)),
        14 => rename(rng, corpus, &text),
        15 => splice(rng, &text, corpus),
        16..=17 => insert(rng, text),
        18 => cut(rng, text),
        19 => repeat_slice(rng, text),
        20 => escape(rng, &text),
        21 => format!("{}{text}", pick(rng, &FRONTS)),
        22 => exchange_letter(rng, &text),
        _ => lengthen(rng, text),
    }
}

fn on_pairs<'a>(text: &'a str, change: impl FnOnce(&mut Vec<&'a str>)) -> String {
    let mut pairs: Vec<&str> = text.split('&').collect();
    change(&mut pairs);
    pairs.join("&")
}

fn drop_one(rng: &mut Rng, pairs: &mut Vec<&str>) {
    pairs.remove(rng.usize(..pairs.len()));
}

fn repeat_one(rng: &mut Rng, pairs: &mut Vec<&str>) {
    let again = pairs[rng.usize(..pairs.len())];
    for _ in 0..rng.usize(1..4) {
        pairs.insert(rng.usize(..=pairs.len()), again);
    }
}

/// Another value behind a key that stands.
fn change_value(rng: &mut Rng, corpus: &Corpus, text: &str) -> String {
    let mut pairs: Vec<String> = text.split('&').map(str::to_owned).collect();
    let place = rng.usize(..pairs.len());
    let (key, value) = pairs[place].split_once('=').unwrap_or((&pairs[place], ""));
    let value = match rng.u8(..12) {
        0..=3 => near(rng, value),
        4 => {
            // A part of a list.
            let mut items: Vec<String> = value.split([',', '@', '/']).map(str::to_owned).collect();
            let item = rng.usize(..items.len());
            items[item] = near(rng, &items[item]);
            items.join(pick(rng, &["@", ",", "/"]))
        }
        _ => value_for(rng, corpus, key),
    };
    pairs[place] = format!("{key}={value}");
    pairs.join("&")
}

/// A value of the kind that a key takes, or of another.
fn value_for(rng: &mut Rng, corpus: &Corpus, key: &str) -> String {
    let kind = if rng.u8(..10) == 0 {
        rng.u8(..4)
    } else if key.ends_with(".join") {
        0
    } else if key.ends_with(".flow") {
        1
    } else if ["fire", "unit", "view", "paper"]
        .iter()
        .any(|name| key.ends_with(name))
    {
        2
    } else {
        3
    };
    match kind {
        0 => joins(rng),
        1 => flows(rng),
        2 => pick(rng, &corpus.words).to_owned(),
        _ => number(rng),
    }
}

fn add_pair(rng: &mut Rng, corpus: &Corpus, text: String) -> String {
    let key = rng.choice(&corpus.keys).cloned().unwrap_or_default();
    let value = value_for(rng, corpus, &key);
    if rng.bool() {
        format!("{text}&{key}={value}")
    } else {
        format!("{key}={value}&{text}")
    }
}

/// Another key in front of a value.
fn rename(rng: &mut Rng, corpus: &Corpus, text: &str) -> String {
    let mut pairs: Vec<String> = text.split('&').map(str::to_owned).collect();
    let place = rng.usize(..pairs.len());
    let value = pairs[place].split_once('=').map_or("", |pair| pair.1).to_owned();
    let key = rng.choice(&corpus.keys).cloned().unwrap_or_default();
    pairs[place] = format!("{key}={value}");
    pairs.join("&")
}

/// The head of one text and the tail of another.
fn splice(rng: &mut Rng, text: &str, corpus: &Corpus) -> String {
    let other = rng.choice(&corpus.links).map_or("", String::as_str);
    let (head, tail) = (place_in(rng, text), place_in(rng, other));
    format!("{}{}", &text[..head], &other[tail..])
}

/// A place between two characters.
fn place_in(rng: &mut Rng, text: &str) -> usize {
    let mut place = rng.usize(..=text.len());
    while !text.is_char_boundary(place) {
        place -= 1;
    }
    place
}

/// Two places between characters, in order.
fn span_in(rng: &mut Rng, text: &str) -> (usize, usize) {
    let (one, other) = (place_in(rng, text), place_in(rng, text));
    (one.min(other), one.max(other))
}

fn insert(rng: &mut Rng, mut text: String) -> String {
    let place = place_in(rng, &text);
    text.insert_str(place, pick(rng, &ODD));
    text
}

fn cut(rng: &mut Rng, mut text: String) -> String {
    let from = place_in(rng, &text);
    let gone = text[from..]
        .chars()
        .take(rng.usize(1..9))
        .map(char::len_utf8)
        .sum::<usize>();
    text.replace_range(from..from + gone, "");
    text
}

fn repeat_slice(rng: &mut Rng, mut text: String) -> String {
    let (from, to) = span_in(rng, &text);
    // Seldom so often that the text is too long.
    let most = if rng.u8(..20) == 0 { 60 } else { 3 };
    let again = text[from..to].repeat(rng.usize(1..most));
    text.insert_str(to, &again);
    text
}

/// Some characters as escapes, or as escapes that are none.
fn escape(rng: &mut Rng, text: &str) -> String {
    let mut escaped = String::new();
    for byte in text.bytes() {
        match rng.u8(..40) {
            0 => escaped.push_str(&format!("%{:02X}", byte ^ (rng.u8(..2) * 0x80))),
            _ if byte.is_ascii() => escaped.push(char::from(byte)),
            _ => escaped.push_str(&format!("%{byte:02x}")),
        }
    }
    escaped
}

fn exchange_letter(rng: &mut Rng, text: &str) -> String {
    let mut letters: Vec<char> = text.chars().collect();
    if !letters.is_empty() {
        let place = rng.usize(..letters.len());
        letters[place] = char::from(rng.u8(32..127));
    }
    letters.into_iter().collect()
}

/// A text of a free key at its limit, over it, or over that of the whole text.
fn lengthen(rng: &mut Rng, text: String) -> String {
    let key = pick(rng, &["title", "note", "marking", "counted", "x.name", "y.name"]);
    let length = match rng.u8(..12) {
        0 => rng.usize(15_000..20_000),
        1..=3 => rng.usize(190..1_100),
        _ => rng.usize(1..70),
    };
    let letter = pick(rng, &["a", "é", "+", "💣", "%41", "\u{301}", "w "]);
    format!("{text}&{key}={}", letter.repeat(length / letter.len()))
}
