//! Beside each number whose point may have been meant to mark thousands, how it is read.

use crate::dom::{Dom, append_words, set};
use aftercount_core::pairs::Pairs;
use aftercount_core::words::points::remark;
use web_sys::Element;

/// The remarks that are shown, by their keys.
pub(crate) struct Points {
    dom: Dom,
    shown: Vec<(String, String)>,
}

impl Points {
    pub(crate) fn new(dom: &Dom) -> Points {
        Points {
            dom: dom.clone(),
            shown: Vec::new(),
        }
    }

    /// Takes off what is no longer so. What is new waits: `1.000` stands on the way to `1.0005`.
    pub(crate) fn changed(&mut self, pairs: &Pairs) {
        let now = remarks(pairs);
        let before = std::mem::take(&mut self.shown);
        for (key, words) in before {
            let remark = (key, words);
            if now.contains(&remark) {
                self.shown.push(remark);
            } else {
                self.say(&remark.0, "");
            }
        }
    }

    /// Shows all that is to be said.
    pub(crate) fn show(&mut self, pairs: &Pairs) {
        self.shown = remarks(pairs);
        for (key, words) in &self.shown {
            self.say(key, words);
        }
    }

    fn say(&self, key: &str, words: &str) {
        if let Some(place) = self.place(key) {
            place.set_text_content(None);
            append_words(&self.dom, &place, words);
            self.dom.set_shown(&id(key), !words.is_empty());
        }
    }

    /// Where it is said: before the field's problem, in an element that is made where there is none.
    fn place(&self, key: &str) -> Option<Element> {
        if let Some(place) = self.dom.element(&id(key)) {
            return Some(place);
        }
        let (problem, place) = (
            self.dom.element(&format!("{key}.problem"))?,
            self.dom.make("p", "")?,
        );
        set(&place, "id", &id(key));
        let under = problem.matches(".under").unwrap_or(false);
        set(&place, "class", if under { "flag under" } else { "flag" });
        // It fails on an element without a parent, and the problem has its field.
        let _ = problem.insert_adjacent_element("beforebegin", &place);
        // So that a screen reader tells it with the field.
        if let Some(field) = self.dom.element(key) {
            let before = field.get_attribute("aria-describedby").unwrap_or_default();
            set(&field, "aria-describedby", &format!("{before} {}", id(key)));
        }
        Some(place)
    }
}

fn id(key: &str) -> String {
    format!("{key}.points")
}

/// A list, and no map: to collect one the standard library sorts, by kilobytes of the page.
fn remarks(pairs: &Pairs) -> Vec<(String, String)> {
    let of = |(key, text)| Some((String::from(key), remark(key, text)?));
    pairs.iter().filter_map(of).collect()
}
