//! What is wrong with the text, shown beside the fields and as a list.

use crate::dom::{Dom, append, append_words, set};
use crate::form;
use crate::lists;
use crate::phases::is_phase_key;
use aftercount_core::keys;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::{Problem, seen};
use aftercount_core::words::entry;
use web_sys::Element;

/// How long a problem waits while somebody is typing, in milliseconds: `0.` on the way to `0.04` is none.
pub(crate) const PATIENCE: i32 = 600;

/// The problems on the page.
pub(crate) struct Problems {
    dom: Dom,
    /// The keys whose fields are marked.
    marked: Vec<String>,
    /// The cells of tables that are marked.
    marked_cells: Vec<String>,
    /// What a screen reader is told of them.
    aloud: String,
}

impl Problems {
    pub(crate) fn new(dom: &Dom) -> Problems {
        Problems {
            dom: dom.clone(),
            marked: Vec::new(),
            marked_cells: Vec::new(),
            aloud: String::new(),
        }
    }

    /// What a screen reader is told of those that are shown; nothing where none is.
    pub(crate) fn aloud(&self) -> &str {
        &self.aloud
    }

    /// Takes every problem off the page.
    pub(crate) fn clear(&mut self) {
        for key in std::mem::take(&mut self.marked) {
            self.dom.set_text(&format!("{key}.problem"), "");
            self.dom.set_shown(&format!("{key}.problem"), false);
            self.unmark(&key);
        }
        for field in std::mem::take(&mut self.marked_cells) {
            self.unmark(&field);
        }
        self.dom.set_shown("problems", false);
        self.dom.set_shown("nothing", false);
        self.dom.set_shown("empty-words", true);
        self.dom.set_text("problem-list", "");
        self.aloud.clear();
    }

    fn unmark(&self, field: &str) {
        if let Some(field) = self.dom.element(field) {
            // Taking an attribute away cannot fail.
            let _ = field.remove_attribute("aria-invalid");
        }
    }

    /// Shows these problems in place of those before.
    pub(crate) fn show(&mut self, pairs: &Pairs, problems: &[Problem]) {
        self.clear();
        for (place, problem) in problems.iter().enumerate() {
            if let Some(key) = problem.key.as_deref().filter(|key| self.has_field(key)) {
                self.mark(key, problem);
            }
            // That a key stands twice comes after what is wrong with its first text.
            let last_of_key = problems[place + 1..].iter().all(|later| later.key != problem.key);
            self.list(pairs, problem, last_of_key);
        }
        if let Some(first) = problems.first() {
            if let Some(why) = self.dom.element("nothing-why") {
                why.set_text_content(None);
                append_words(&self.dom, &why, &first.line_with_key());
            }
            let field = first.key.as_deref().filter(|key| self.has_field(key));
            let field = field.map(|key| whereabouts(pairs, key, first.item).0);
            self.aloud = entry::problems_aloud(&field.unwrap_or_default(), &first.line(), problems.len() - 1);
        }
        self.dom.set_shown("problems", !problems.is_empty());
        self.dom.set_shown("nothing", !problems.is_empty());
        self.dom.set_shown("empty-words", problems.is_empty());
    }

    /// Whether `key` has a field in which it can be put right.
    fn has_field(&self, key: &str) -> bool {
        (keys::find(key).is_some() || is_phase_key(key))
            && self.dom.element(&format!("{key}.problem")).is_some()
    }

    fn mark(&mut self, key: &str, problem: &Problem) {
        let id = format!("{key}.problem");
        if let Some(beside) = self.dom.element(&id) {
            // A field may have two problems, as where its key stands twice.
            if beside.has_child_nodes() {
                self.say(&beside, " ");
            }
            if let Some(item) = problem.item {
                self.say(&beside, &format!("{} {item}: ", item_of(key)));
            }
            self.tell(&beside, problem);
        }
        for field in problem.item.iter().flat_map(|item| lists::fields_of(key, *item)) {
            self.dom.set_attribute(&field, "aria-invalid", "true");
            self.marked_cells.push(field);
        }
        self.dom.set_shown(&id, true);
        self.dom.set_attribute(key, "aria-invalid", "true");
        self.dom.set_text(&format!("{key}.echo"), "");
        self.marked.push(key.to_owned());
    }

    /// A line of the list: a link to the field where there is one, and a way to put right what no field can.
    fn list(&self, pairs: &Pairs, problem: &Problem, last_of_key: bool) {
        let (Some(list), Some(line)) = (self.dom.element("problem-list"), self.dom.make("li", "")) else {
            return;
        };
        if let Some(key) = problem.key.as_deref() {
            if self.has_field(key) {
                let (words, field) = whereabouts(pairs, key, problem.item);
                if let Some(link) = self.dom.make("a", &words) {
                    set(&link, "href", &format!("#{field}"));
                    append(&line, &link);
                }
            } else if let Some(code) = self.dom.make("code", &seen(key)) {
                append(&line, &code);
            }
            self.say(&line, ": ");
        }
        self.tell(&line, problem);
        if let Some(key) = self.to_take_out(pairs, problem) {
            self.offer(&line, "take it out", "data-take-out", key);
        }
        if let Some(key) = problem
            .key
            .as_deref()
            .filter(|key| last_of_key && pairs.stands_twice(key))
            .filter(|key| self.has_field(key) || keys::find(key).is_some())
        {
            self.offer(&line, "keep the first", "data-keep-first", key);
        }
        append(&list, &line);
    }

    /// The key that can be taken out of the text, where no field can put it right; a piece without `=` has the empty key.
    fn to_take_out<'a>(&self, pairs: &Pairs, problem: &'a Problem) -> Option<&'a str> {
        match (problem.key.as_deref(), problem.found.as_deref()) {
            (Some(key), _) => Some(key).filter(|key| !self.has_field(key) && pairs.get(key).is_some()),
            (None, Some(found)) => pairs
                .iter()
                .any(|(key, text)| key.is_empty() && text == found)
                .then_some(""),
            (None, None) => None,
        }
    }

    fn offer(&self, line: &Element, words: &str, name: &str, key: &str) {
        if let Some(button) = self.dom.make("button", words) {
            set(&button, "type", "button");
            set(&button, name, key);
            self.say(line, " ");
            append(line, &button);
        }
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

/// What an item of a key is: the conditions of `sothat` stand in one line.
fn item_of(key: &str) -> &'static str {
    if key == "sothat" { "Condition" } else { "Row" }
}

/// What a problem is of, in words, and the id of the field where it is put right.
fn whereabouts(pairs: &Pairs, key: &str, item: Option<u32>) -> (String, String) {
    let cell = item.and_then(|item| Some((item, lists::fields_of(key, item).into_iter().next()?)));
    match cell {
        Some((item, field)) => (format!("{}, row {item}", label(pairs, key)), field),
        None => (label(pairs, key), key.to_owned()),
    }
}

/// The name of a field as it is spoken: "Ondrel: strength at the start", "Phase 1, from".
fn label(pairs: &Pairs, key: &str) -> String {
    if let Some((phase, change)) = key.split_once('.').filter(|_| is_phase_key(key)) {
        let number = phase.trim_start_matches("phase");
        let what = if change == "from" {
            change.to_owned()
        } else {
            label(pairs, change)
        };
        return format!("Phase {number}, {what}");
    }
    let label = keys::find(key).map_or(key, |row| row.label);
    match key.split_once('.') {
        Some((letter @ ("x" | "y"), _)) => {
            format!("{}: {}", form::name_of(pairs, letter), label.to_ascii_lowercase())
        }
        _ => label.to_owned(),
    }
}
