//! What the browser keeps for the page, once the user asks for it, and how all of it is forgotten.

use crate::dom::{Dom, append, append_words, set};
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::kept::{self, Kept};
use aftercount_core::passing::words;
use js_sys::Date;
use web_sys::{Element, Storage};

/// Where the list lies.
const PLACE: &str = "aftercount.kept";

/// The list of what is kept, as it is shown.
pub(super) struct Keeping {
    dom: Dom,
    shown: Vec<Kept>,
}

impl Keeping {
    pub(super) fn new(dom: &Dom) -> Keeping {
        let mut keeping = Keeping {
            dom: dom.clone(),
            shown: Vec::new(),
        };
        keeping.show();
        keeping
    }

    /// The text of the entry that is shown at a place.
    pub(super) fn text(&self, place: usize) -> Option<Pairs> {
        self.shown.get(place).map(|kept| Pairs::parse(&kept.text))
    }

    /// Keeps a text, as the first of the list.
    pub(super) fn keep(&mut self, text: &str) {
        let Some(storage) = self.storage() else {
            return self.say(words::NO_STORAGE);
        };
        // Read anew: another page may have kept something since.
        let mut list = read(&storage);
        let new = Kept {
            when: now(),
            text: text.into(),
        };
        let words = format!("Kept: {}", new.words());
        // The same text is kept once, as of now.
        list.retain(|kept| kept.text != text);
        list.insert(0, new);
        match storage.set_item(PLACE, &kept::written(&list)) {
            Ok(()) => self.say(&words),
            Err(_) => self.say(words::NO_ROOM),
        }
        self.show();
    }

    /// Forgets the entry that is shown at a place.
    pub(super) fn forget(&mut self, place: usize) {
        let (Some(storage), Some(forgotten)) = (self.storage(), self.shown.get(place)) else {
            return;
        };
        let mut list = read(&storage);
        if let Some(at) = list.iter().position(|kept| kept == forgotten) {
            list.remove(at);
        }
        if list.is_empty() {
            return self.forget_all();
        }
        // A shorter list takes less room than the one before.
        let _ = storage.set_item(PLACE, &kept::written(&list));
        self.say("");
        self.show();
    }

    /// Forgets everything, also the place where it lay.
    pub(super) fn forget_all(&mut self) {
        if let Some(storage) = self.storage() {
            // It fails where there is no storage at all, and then there is nothing to forget.
            let _ = storage.remove_item(PLACE);
        }
        self.say(words::FORGOTTEN);
        self.show();
    }

    /// Shows the list as it is now.
    pub(super) fn show(&mut self) {
        self.shown = self.storage().map(|storage| read(&storage)).unwrap_or_default();
        self.dom.set_shown("kept-part", !self.shown.is_empty());
        let Some(list) = self.dom.element("kept") else {
            return;
        };
        list.set_text_content(None);
        for (place, kept) in self.shown.iter().enumerate() {
            if let Some(line) = self.line(place, kept) {
                append(&list, &line);
            }
        }
    }

    fn line(&self, place: usize, kept: &Kept) -> Option<Element> {
        let line = self.dom.make("li", "")?;
        let words = kept.words();
        append(&line, &self.dom.make("span", &words)?);
        for (name, action) in [("data-take-up", "open"), ("data-forget", "forget")] {
            let button = self.dom.make("button", action)?;
            set(&button, "type", "button");
            set(&button, name, &place.to_string());
            set(&button, "aria-label", &format!("{action}: {words}"));
            append(&line, &button);
        }
        let outcome = self.dom.make("p", "")?;
        append_words(&self.dom, &outcome, &kept.outcome());
        append(&line, &outcome);
        Some(line)
    }

    /// The browser's storage; `None` where it is refused.
    fn storage(&self) -> Option<Storage> {
        self.dom.window.local_storage().ok().flatten()
    }

    fn say(&self, words: &str) {
        self.dom.set_text("kept-said", words);
    }
}

fn read(storage: &Storage) -> Vec<Kept> {
    let stored = storage.get_item(PLACE).ok().flatten();
    stored.map(|stored| kept::read(&stored)).unwrap_or_default()
}

/// The time on the user's clock, to the minute.
pub(super) fn now() -> String {
    let now = Date::new_0();
    format!(
        "{}-{:02}-{:02} {:02}:{:02}",
        now.get_full_year(),
        now.get_month() + 1,
        now.get_date(),
        now.get_hours(),
        now.get_minutes()
    )
}
