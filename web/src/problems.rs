//! What is wrong with the text, shown beside the fields and as a list.

use crate::dom::{Dom, append, append_words, set};
use crate::form;
use aftercount_core::keys;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::{Problem, seen};
use std::collections::BTreeSet;
use web_sys::Element;

/// How long a problem waits while somebody is typing, in milliseconds: `0.` on the way to `0.04` is none.
pub(crate) const PATIENCE: i32 = 600;

/// The problems on the page.
pub(crate) struct Problems {
    dom: Dom,
    /// The keys whose fields are marked.
    marked: BTreeSet<String>,
}

impl Problems {
    pub(crate) fn new(dom: &Dom) -> Problems {
        Problems {
            dom: dom.clone(),
            marked: BTreeSet::new(),
        }
    }

    /// Takes every problem off the page.
    pub(crate) fn clear(&mut self) {
        for key in std::mem::take(&mut self.marked) {
            self.dom.set_text(&format!("{key}.problem"), "");
            self.dom.set_shown(&format!("{key}.problem"), false);
            if let Some(field) = self.dom.element(&key) {
                // Taking an attribute away cannot fail.
                let _ = field.remove_attribute("aria-invalid");
            }
        }
        self.dom.set_shown("problems", false);
        self.dom.set_shown("nothing", false);
        self.dom.set_shown("empty-words", true);
        self.dom.set_text("problem-list", "");
    }

    /// Shows these problems in place of those before.
    pub(crate) fn show(&mut self, pairs: &Pairs, problems: &[Problem]) {
        self.clear();
        for problem in problems {
            if let Some(key) = problem.key.as_deref().filter(|key| self.has_field(key)) {
                self.mark(key, problem);
            }
            self.list(pairs, problem);
        }
        self.dom.set_shown("problems", !problems.is_empty());
        self.dom.set_shown("nothing", !problems.is_empty());
        self.dom.set_shown("empty-words", problems.is_empty());
    }

    /// Whether `key` has a field in which it can be put right.
    fn has_field(&self, key: &str) -> bool {
        keys::find(key).is_some() && self.dom.element(&format!("{key}.problem")).is_some()
    }

    fn mark(&mut self, key: &str, problem: &Problem) {
        let id = format!("{key}.problem");
        if let Some(beside) = self.dom.element(&id) {
            // A field may have two problems, as where its key stands twice.
            if beside.has_child_nodes() {
                self.say(&beside, " ");
            }
            self.tell(&beside, problem);
        }
        self.dom.set_shown(&id, true);
        self.dom.set_attribute(key, "aria-invalid", "true");
        self.dom.set_text(&format!("{key}.echo"), "");
        self.marked.insert(key.to_owned());
    }

    /// A line of the list: a link to the field where there is one, else a way to take the key out of the text.
    fn list(&self, pairs: &Pairs, problem: &Problem) {
        let (Some(list), Some(line)) = (self.dom.element("problem-list"), self.dom.make("li", "")) else {
            return;
        };
        if let Some(key) = problem.key.as_deref() {
            if self.has_field(key) {
                if let Some(link) = self.dom.make("a", &label(pairs, key)) {
                    set(&link, "href", &format!("#{key}"));
                    append(&line, &link);
                }
            } else if let Some(code) = self.dom.make("code", &seen(key)) {
                append(&line, &code);
            }
            self.say(&line, ": ");
        }
        self.tell(&line, problem);
        if let Some(key) = problem
            .key
            .as_deref()
            .filter(|key| !self.has_field(key) && pairs.get(key).is_some())
            && let Some(button) = self.dom.make("button", "take it out")
        {
            set(&button, "type", "button");
            set(&button, "data-take-out", key);
            self.say(&line, " ");
            append(&line, &button);
        }
        append(&list, &line);
    }

    /// The words of [`Problem::line`], with what was found, and every key, set as code.
    fn tell(&self, parent: &Element, problem: &Problem) {
        // What was found may hold any sign, so it is never searched for marks.
        if let Some(found) = problem.found.as_deref().filter(|found| !found.is_empty())
            && let Some(code) = self.dom.make("code", &seen(found))
        {
            append(parent, &code);
            self.say(parent, ": ");
        }
        append_words(&self.dom, parent, &format!("{}.", seen(&problem.problem)));
    }

    fn say(&self, line: &Element, text: &str) {
        // Text can always be appended to an element of our own.
        let _ = line.append_with_str_1(text);
    }
}

/// The name of a field as it is spoken: "Ondrel: strength at the start".
fn label(pairs: &Pairs, key: &str) -> String {
    let label = keys::find(key).map_or(key, |row| row.label);
    match key.split_once('.') {
        Some((letter @ ("x" | "y"), _)) => {
            format!("{}: {}", form::name_of(pairs, letter), label.to_lowercase())
        }
        _ => label.to_owned(),
    }
}
