//! What the user has asked the browser to keep: a list of texts with the times at which they were kept.

use crate::mark::text_mark;
use crate::pairs::Pairs;
use crate::problem::seen;

/// An engagement that is kept.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Kept {
    /// When it was kept, as it is shown.
    pub when: String,
    /// Its text.
    pub text: String,
}

impl Kept {
    /// "2026-12-01 14:05: Turn 3, text mark 6Z3K-X0PW".
    pub fn words(&self) -> String {
        let pairs = Pairs::parse(&self.text);
        let title = seen(pairs.get("title").unwrap_or_default().trim());
        let title = if title.is_empty() {
            "without a title"
        } else {
            &title
        };
        format!("{}: {title}, text mark {}", seen(&self.when), text_mark(&pairs))
    }
}

/// Reads the list, a line each. Other pages may write where it lies: whatever is no such line is left out.
pub fn read(stored: &str) -> Vec<Kept> {
    let line = |line: &str| {
        let (when, text) = line.split_once('\t')?;
        text.contains('=').then(|| Kept {
            when: when.into(),
            text: text.into(),
        })
    };
    stored.lines().filter_map(line).collect()
}

/// The list as it is stored.
pub fn written(kept: &[Kept]) -> String {
    let line = |kept: &Kept| {
        // A text that could not be decoded is kept as it stood, and may hold such signs.
        let text = kept.text.replace('\n', "%0A").replace('\r', "%0D");
        format!("{}\t{text}\n", kept.when)
    };
    kept.iter().map(line).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_list_reads_back_and_nonsense_is_none() {
        let entry = |text: &str| Kept {
            when: "2026-12-01 14:05".into(),
            text: text.into(),
        };
        let kept = vec![entry("title=Turn%203&x.start=6&v=1"), entry("x.start=6&bare&v=1")];
        assert_eq!(read(&written(&kept)), kept);
        let broken = entry("title=%ZZ\r\nb&v=1");
        assert_eq!(read(&written(&[broken])), [entry("title=%ZZ%0D%0Ab&v=1")]);
        let words = kept[0].words();
        assert!(
            words.starts_with("2026-12-01 14:05: Turn 3, text mark "),
            "{words}"
        );
        for nonsense in ["", "null", "{\"when\":1}", "<b>\t</b>\n\n"] {
            assert_eq!(read(nonsense), [], "{nonsense}");
        }
    }
}
