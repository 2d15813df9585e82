//! The text and what is read straight from it, whether it can be worked out or not.

use super::Page;
use crate::outcome;
use aftercount_core::mark::text_mark;
use aftercount_core::passing::words::room;
use aftercount_core::problem::seen;

impl Page {
    /// The text and what is read straight from it, whether it can be worked out or not.
    pub(super) fn show_text(&mut self) {
        let link = self.pairs.link();
        crate::copy::keep(&self.dom, &link);
        if let Some(area) = self.dom.typed::<web_sys::HtmlTextAreaElement>("text") {
            area.set_value(&link);
        }
        // What was said of the text before.
        for said in ["copied", "working-copied", "file-said", "kept-said"] {
            self.dom.set_text(said, "");
        }
        for part in ["file-copy", "opened-said"] {
            self.dom.set_shown(part, false);
        }
        self.dom.set_text("text-mark", &text_mark(&self.pairs));
        let note = self.pairs.get("note").unwrap_or_default();
        self.dom
            .set_text("note.room", &room("note", note).unwrap_or_default());
        let trimmed = |key| self.pairs.get(key).unwrap_or_default().trim();
        let title = seen(trimmed("title"));
        self.dom.set_text("shown-title", &title);
        self.dom
            .document
            .set_title(if title.is_empty() { "Aftercount" } else { &title });
        let marking = seen(trimmed("marking"));
        self.dom.set_text("shown-marking", &marking);
        self.dom.set_text("foot-marking", &marking);
        self.dom.set_shown("demo", self.demo);
        self.dom.mark_root(
            "data-view",
            Some(if trimmed("view") == "frame" {
                "frame"
            } else {
                "sheet"
            }),
        );
        let paper = trimmed("paper");
        self.dom.mark_root(
            "data-paper",
            Some(if matches!(paper, "light" | "dark") {
                paper
            } else {
                "auto"
            }),
        );
        outcome::show_names(&self.dom, &self.pairs);
        let mut whole = self.pairs.clone();
        whole.set("view", "");
        self.dom
            .set_attribute("open-sheet", "href", &format!("#{}", whole.link()));
    }

    /// A value behind a closed panel would be one that nobody sees.
    pub(super) fn open_what_holds_values(&self) {
        let stands = |key: &str| self.pairs.get(key).is_some();
        for letter in ["x", "y"] {
            let more = outcome::MORE.into_iter().chain(["lost", "flow"]);
            if more.map(|key| format!("{letter}.{key}")).any(|key| stands(&key)) {
                self.dom.set_attribute(&format!("{letter}.more"), "open", "");
            }
        }
        if ["range", "range.closing", "range.least"].into_iter().any(stands) {
            self.dom.set_attribute("range.more", "open", "");
        }
    }
}
