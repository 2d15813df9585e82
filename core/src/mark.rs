//! The text mark: a short fingerprint of the engagement's text, so that two papers can be matched.

use crate::order::sort_by;
use crate::pairs::{Pairs, encode};

/// Letters and digits that are not mistaken for one another in print (Crockford's base 32).
const LETTERS: &[u8; 32] = b"0123456789ABCDEFGHJKMNPQRSTVWXYZ";

/// The fingerprint of the pairs in the order of their keys, without those that only say how the page looks.
///
/// Eight letters of a 64-bit FNV-1a hash: it tells two papers apart, and is no seal against forgery.
pub fn text_mark(pairs: &Pairs) -> String {
    let mut lines: Vec<String> = pairs
        .iter()
        .map(|(key, text)| (key, text.trim()))
        .filter(|(key, text)| !matches!(*key, "v" | "view" | "paper") && !text.is_empty())
        .map(|(key, text)| format!("{}={}", encode(key), encode(text)))
        .collect();
    sort_by(&mut lines, String::cmp);
    let hash = fnv1a(lines.join("&").as_bytes());
    // The high bits are the best mixed.
    let letters = (0..8).map(|place| LETTERS[(hash >> (59 - 5 * place)) as usize & 31] as char);
    let mark: String = letters.collect();
    format!("{}-{}", &mark[..4], &mark[4..])
}

/// Whether a word could be a text mark.
pub fn is_mark(word: &str) -> bool {
    let of_mark = |(place, letter)| {
        if place == 4 {
            letter == b'-'
        } else {
            LETTERS.contains(&letter)
        }
    };
    word.len() == 9 && word.bytes().enumerate().all(of_mark)
}

/// The 64-bit FNV-1a hash (Fowler, Noll and Vo).
pub(crate) fn fnv1a(bytes: &[u8]) -> u64 {
    bytes.iter().fold(0xcbf2_9ce4_8422_2325, |hash, byte| {
        (hash ^ u64::from(*byte)).wrapping_mul(0x0100_0000_01b3)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_published_vectors_of_fnv_1a() {
        assert_eq!(fnv1a(b""), 0xcbf2_9ce4_8422_2325);
        assert_eq!(fnv1a(b"a"), 0xaf63_dc4c_8601_ec8c);
        assert_eq!(fnv1a(b"foobar"), 0x8594_4171_f739_67e8);
    }

    #[test]
    fn order_and_looks_do_not_count() {
        let mark = |link| text_mark(&Pairs::parse(link));
        assert_eq!(
            mark("x.start=6&y.start=4"),
            mark("y.start=+4&view=frame&x.start=6&v=1")
        );
        assert_ne!(mark("x.start=6&y.start=4"), mark("x.start=4&y.start=6"));
    }
}
