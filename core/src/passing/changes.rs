//! What was changed since an engagement was received.

use crate::keys::find;
use crate::pairs::Pairs;
use crate::problem::seen;

/// The most characters of a text that are shown.
const SHOWN: usize = 60;

/// A key whose text is another one now.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Change {
    /// The key.
    pub key: String,
    /// Its text as it was received; empty where the key was absent.
    pub before: String,
    /// Its text now; empty where it is absent.
    pub now: String,
}

/// The keys that differ, in the order of the text as received, then of the text now. How the page is shown does not count.
pub fn changes(received: &Pairs, now: &Pairs) -> Vec<Change> {
    let mut changes: Vec<Change> = Vec::new();
    for (key, _) in received.iter().chain(now.iter()) {
        let text = |pairs: &Pairs| pairs.get(key).map(str::trim).unwrap_or_default().to_owned();
        let (before, now) = (text(received), text(now));
        let counts = !matches!(key, "" | "v" | "view" | "paper") && before != now;
        if counts && changes.iter().all(|change| change.key != key) {
            let key = key.to_owned();
            changes.push(Change { key, before, now });
        }
    }
    changes
}

impl Change {
    /// "0.04 → 0.05"; where a text is absent, what holds instead: "1 (as usual) → 0.3", "nothing → 64@4".
    pub fn words(&self) -> String {
        format!("{} → {}", self.shown(&self.before), self.shown(&self.now))
    }

    fn shown(&self, text: &str) -> String {
        if text.is_empty() {
            let default = find(&self.key).and_then(|row| row.default);
            // What a side is called by default depends on the side.
            let default = default.filter(|_| !self.key.ends_with(".name"));
            return default.map_or("nothing".into(), |default| format!("{default} (as usual)"));
        }
        let text = seen(text);
        match text.char_indices().nth(SHOWN) {
            Some((end, _)) => format!("{}…", &text[..end]),
            None => text,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_key_that_differs_is_named_once() {
        let received = Pairs::parse("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&title=a&v=1");
        let now = Pairs::parse(
            "y.start=400&x.rate=+0.05&x.start=600+&y.rate=0.05&x.break=0.3&view=frame&paper=dark",
        );
        let changes = changes(&received, &now);
        let words: Vec<String> = changes
            .iter()
            .map(|change| format!("{} {}", change.key, change.words()))
            .collect();
        assert_eq!(
            words,
            [
                "x.rate 0.04 → 0.05",
                "title a → nothing",
                "x.break 1 (as usual) → 0.3"
            ]
        );
    }

    #[test]
    fn long_and_hidden_texts_are_shown_short_and_plain() {
        let change = Change {
            key: "x.name".into(),
            before: String::new(),
            now: format!("a\u{202e}{}", "é".repeat(100)),
        };
        assert_eq!(change.words(), format!("nothing → a‹U+202E›{}…", "é".repeat(51)));
    }
}
