//! A part of an item of a list, typed into a field of its own.
//!
//! A mark typed there that parts lists and items would make two of one, and what is wrong with it would be said of others.
//! So it is written as an escape of two hexadecimal digits, as in an address. No number has one, so that such a part is a
//! problem in every copy, and a list means what it always did.

use std::borrow::Cow;

/// The marks that part lists and items, the mark of an escape, and how each is written.
const ESCAPES: [(char, &str); 4] = [(',', "%2C"), ('@', "%40"), ('/', "%2F"), ('%', "%25")];

/// What is written into a list for a part that was typed; [`typed`] gives the same again.
pub fn written(typed: &str) -> Cow<'_, str> {
    if !typed.contains(ESCAPES.map(|(mark, _)| mark)) {
        return typed.into();
    }
    let mut written = String::with_capacity(typed.len() + 2);
    for (at, letter) in typed.char_indices() {
        let escape = ESCAPES.iter().find(|(mark, _)| *mark == letter);
        // A per-cent sign that begins no escape is read back as it is.
        match escape.filter(|_| letter != '%' || escape_at(&typed[at..]).is_some()) {
            Some((_, escape)) => written += escape,
            None => written.push(letter),
        }
    }
    written.into()
}

/// A part, or an item, of a list as it was typed.
pub fn typed(written: &str) -> Cow<'_, str> {
    if !written.contains('%') {
        return written.into();
    }
    let mut typed = String::with_capacity(written.len());
    let mut rest = written;
    while let Some(letter) = rest.chars().next() {
        let (letter, length) = match escape_at(rest) {
            Some((mark, escape)) => (*mark, escape.len()),
            None => (letter, letter.len_utf8()),
        };
        typed.push(letter);
        rest = &rest[length..];
    }
    typed.into()
}

/// The escape that a text begins with.
fn escape_at(text: &str) -> Option<&'static (char, &'static str)> {
    ESCAPES.iter().find(|(_, escape)| text.starts_with(escape))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_typed_is_one_part_and_comes_back() {
        for (text, in_list) in [
            ("64", "64"),
            ("1,000", "1%2C000"),
            ("64@4, 20@6/", "64%404%2C 20%406%2F"),
            ("30 %", "30 %"),
            ("%2C", "%252C"),
            ("%%25,%", "%%2525%2C%"),
            ("%2", "%2"),
            ("größe, 5", "größe%2C 5"),
        ] {
            assert_eq!(written(text), in_list);
            assert_eq!(typed(in_list), text);
            assert!(!in_list.contains([',', '@', '/']));
        }
    }
}
