//! What the user has asked the browser to keep: a list of texts with the times at which they were kept.

use crate::mark::text_mark;
use crate::pairs::Pairs;
use crate::problem::seen;
use serde::{Deserialize, Serialize};

/// An engagement that is kept.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
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

/// Reads the list. Other pages may write where it lies, so that whatever is no such list is none.
pub fn read(stored: &str) -> Vec<Kept> {
    serde_json::from_str(stored).unwrap_or_default()
}

/// The list as it is stored.
pub fn written(kept: &[Kept]) -> String {
    // A list of texts can always be written.
    serde_json::to_string(kept).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_list_reads_back_and_nonsense_is_none() {
        let kept = vec![Kept {
            when: "2026-12-01 14:05".into(),
            text: "title=Turn \"3\"&x.start=6".into(),
        }];
        assert_eq!(read(&written(&kept)), kept);
        assert!(
            kept[0]
                .words()
                .starts_with("2026-12-01 14:05: Turn \"3\", text mark "),
            "{}",
            kept[0].words()
        );
        for nonsense in ["", "null", "{}", "[1]", "[{\"when\":1}]", "<b>"] {
            assert_eq!(read(nonsense), [], "{nonsense}");
        }
    }
}
