//! What a screen reader is told by itself: the sentence, or what is wrong, once typing has stopped, and only when it
//! changed.

use crate::dom::Dom;

/// How long typing must have stopped, in milliseconds.
pub(crate) const QUIET: i32 = 800;

/// The live region, and what it last said.
pub(crate) struct Live {
    dom: Dom,
    said: Option<String>,
}

impl Live {
    /// Nothing is said on load.
    pub(crate) fn new(dom: &Dom) -> Live {
        Live {
            dom: dom.clone(),
            said: None,
        }
    }

    /// Takes what stands on the page as read: it was there before anything was typed.
    pub(crate) fn take_as_said(&mut self, sentence: &str) {
        self.said = Some(sentence.to_owned());
    }

    /// Speaks the sentence where it changed.
    pub(crate) fn speak(&mut self, sentence: &str) {
        if self.said.as_deref() != Some(sentence) {
            self.dom.set_text("live", sentence);
            self.take_as_said(sentence);
        }
    }
}
