//! What mailers do to lines: quoted-printable, and words of a message right behind the engagement.

use super::received::{begins_with_key, ends_in_key, is_key_letter};
use crate::keys::{Kind, find};
use std::borrow::Cow;

/// The longest beginning of a pair that is remembered from line to line.
const LONGEST: usize = 100;

/// A text that is quoted-printable (RFC 2045, 6.7) as it was before, and any other as it is.
///
/// It is, where the `=` behind each known key is written `=3D`, or is a line broken there: no number, word or list begins
/// so.
pub(super) fn without_quoting(text: &str) -> Cow<'_, str> {
    let mut quoted = false;
    for (equals, _) in text
        .match_indices('=')
        .filter(|(at, _)| ends_in_key(&text[..*at]))
    {
        let behind = &text[equals + 1..];
        if behind.starts_with("3D") || behind.starts_with("3d") {
            quoted = true;
        } else if !behind.starts_with(['\r', '\n']) {
            return text.into();
        }
    }
    if !quoted {
        return text.into();
    }
    let whole = text.replace("=\r\n", "").replace("=\n", "");
    // The same as in an address, but for the sign.
    let escaped = whole.replace('%', "%25").replace('=', "%");
    let decoded = percent_encoding::percent_decode_str(&escaped).decode_utf8_lossy();
    decoded.into_owned().into()
}

/// The lines without those of the message between and behind them: such a line has no sign of a pair, and cannot go on
/// with the pair before it. Where it can, as behind a free text, it stays: a mailer may have broken the pair there.
pub(super) fn without_message<'a>(lines: &[&'a str]) -> Vec<&'a str> {
    let (mut open, mut left_out) = (String::new(), false);
    let mut kept = Vec::new();
    for line in lines.iter().filter(|line| !line.is_empty()) {
        let begins = begins_with_key(line);
        left_out = !begins && (left_out || !(line.contains(['=', '&']) || goes_on(&open, line)));
        if left_out {
            continue;
        }
        kept.push(*line);
        match line.rsplit_once('&') {
            Some((_, last)) => open = last.into(),
            None if begins => open = (*line).into(),
            // A line broken within a key.
            None if !open.contains('=') && open.len() < LONGEST => open += line,
            None => {}
        }
    }
    kept
}

/// Whether a line may be more of the pair that begins with `open`.
fn goes_on(open: &str, line: &str) -> bool {
    let Some((head, _)) = open.split_once('=') else {
        return true;
    };
    let key = head.rsplit(|letter| !is_key_letter(letter)).next();
    let key = key.unwrap_or_default();
    let all = |fits: fn(char) -> bool| {
        line.chars()
            .all(|letter| fits(letter) || ".,:@/+-?% ".contains(letter))
    };
    match find(key).map(|row| row.kind) {
        Some(Kind::Choice(_)) => all(|letter| letter.is_ascii_lowercase()),
        Some(Kind::List) if key == "sothat" => {
            all(|letter| letter.is_ascii_lowercase() || letter.is_ascii_digit())
        }
        Some(Kind::Quantity { .. } | Kind::List) => {
            all(|letter| letter.is_ascii_hexdigit())
                && line.contains(|letter: char| letter == '?' || letter.is_ascii_digit())
        }
        _ => true,
    }
}

#[cfg(test)]
mod tests {
    use super::super::received::received;
    use super::*;

    #[track_caller]
    fn opens(text: &str, link: &str) {
        let pairs = received(text).unwrap_or_else(|why| panic!("{text:?}: {why}"));
        assert_eq!(pairs.link(), link, "{text:?}");
    }

    #[test]
    fn quoted_printable_is_undone() {
        let link = "x.name=Gr%C3%BCn&x.start=850&x.rate=0.04&y.name=Blue&y.start=400&y.rate=0.05&v=1";
        let quoted = link.replace('=', "=3D");
        for text in [
            quoted.clone(),
            quoted.replace("rate=3D0.04", "ra=\r\nte=3D0.04"),
            quoted.replace("start=3D8", "start=\n=3D8"),
            quoted.replace("%C3%BC", "=C3=BC"),
            format!("Subject: a turn=20\r\n\r\nHere it is:=\r\n https://wiki.example/a.html#{quoted}\r\n"),
        ] {
            opens(&text, link);
        }
        // A name that only looks so.
        let plain = "x.name=3DBlue&x.start=850&x.rate=0.04&y.start=40&y.rate=0.05&v=1";
        opens(plain, plain);
        assert_eq!(without_quoting("a =3D b"), "a =3D b");
    }

    #[test]
    fn words_of_the_message_are_no_part_of_a_number() {
        let link = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&x.join=120@3";
        let whole = format!("{link}&v=1");
        for end in [
            "Regards",
            "Regards\nA. Person",
            "Best wishes,\nA.\ntel. = 5",
            "--\nA. Person",
        ] {
            opens(&format!("{link}\n{end}"), &whole);
            // Also where a mailer has broken a line.
            opens(&format!("{}\n{end}", link.replace("x.rate", "x.ra\nte")), &whole);
        }
        opens(
            "x.start=600\nof Ondrel\ny.start=400\nof Vessary",
            "x.start=600&y.start=400&v=1",
        );
        opens("x.start=600&x.fire=area\nRegards", "x.start=600&x.fire=area&v=1");
        opens(
            "x.start=6?&sothat=y.breaks\nRegards",
            "x.start=6?&sothat=y.breaks&v=1",
        );
    }

    #[test]
    fn a_pair_that_a_mailer_broke_is_whole_again() {
        for (text, link) in [
            ("x.start=6&x.join=64@4,\n80@5", "x.start=6&x.join=64@4,80@5&v=1"),
            ("x.start=6&x.join=64%4\n04", "x.start=6&x.join=64@4&v=1"),
            ("x.start=6&y.rate=0.0\n5", "x.start=6&y.rate=0.05&v=1"),
            ("x.start=60\n0?", "x.start=600?&v=1"),
            (
                "x.start=6&x.fire=loga\nrithmic",
                "x.start=6&x.fire=logarithmic&v=1",
            ),
            ("x.start=6&sothat=y.br\neaks", "x.start=6&sothat=y.breaks&v=1"),
            ("x.start=6&y.ra\nte=0.\n05", "x.start=6&y.rate=0.05&v=1"),
            (
                "x.start=6&note=A%20\nlong%20note",
                "x.start=6&note=A%20long%20note&v=1",
            ),
        ] {
            opens(text, link);
        }
    }
}
