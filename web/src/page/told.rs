//! The text and what is read straight from it, whether it can be worked out or not.

use super::Page;
use crate::dom::set;
use crate::outcome;
use aftercount_core::mark::text_mark;
use aftercount_core::passing::words::room;
use aftercount_core::problem::seen;
use aftercount_core::statement::Statement;
use aftercount_core::words::map::elsewhere;

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
        let sheet = format!("#{}", whole.link());
        for link in ["open-sheet", "asked-map-words"] {
            self.dom.set_attribute(link, "href", &sheet);
        }
        // A frame has the answer to a question, and the sheet all that belongs to it.
        if let Some(link) = self.dom.element("asked-brief-words") {
            if trimmed("view") == "frame" {
                set(&link, "href", &sheet);
                set(&link, "target", "_blank");
            } else {
                set(&link, "href", "#takes-head");
                // Taking an attribute away cannot fail.
                let _ = link.remove_attribute("target");
            }
        }
    }

    /// In a frame there is no room for a map: there it is said that one is asked for, and where it is.
    pub(super) fn show_where_the_map_is(&self, statement: Option<&Statement>) {
        let words = statement.and_then(|statement| elsewhere(&self.pairs, statement));
        self.dom
            .set_text("asked-map-words", words.as_deref().unwrap_or_default());
        self.dom.set_shown("asked-map", words.is_some());
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
