//! What would reverse the outcome: worked out in slices while nobody is held up, and put on the page.

use crate::dom::{Dom, append, set};
use crate::stopwatch::{REVERSAL, Stopwatch};
use aftercount_core::pairs::Pairs;
use aftercount_core::put::put;
use aftercount_core::reversal::Reversal;
use aftercount_core::statement::Statement;
use aftercount_core::words::reversal::{self as words, Row};
use web_sys::Element;

/// How long the page works at a stretch, in milliseconds.
const SLICE: f64 = 8.0;

/// The search for what would reverse the outcome of the text, and what it found.
pub(crate) struct Reversals {
    dom: Dom,
    statement: Option<Statement>,
    search: Option<Reversal>,
    /// The line and the rows, once all is found.
    line: Option<String>,
    rows: Vec<Row>,
}

impl Reversals {
    pub(crate) fn new(dom: &Dom) -> Reversals {
        Reversals {
            dom: dom.clone(),
            statement: None,
            search: None,
            line: None,
            rows: Vec::new(),
        }
    }

    /// Begins anew for another text. What was found before stands there, marked, until the new is there.
    pub(crate) fn begin(&mut self, pairs: &Pairs, statement: &Statement) {
        self.search = Some(Reversal::new(pairs, statement));
        self.statement = Some(statement.clone());
        self.line = None;
        self.rows.clear();
        self.mark(true);
        self.dom.set_text("nearest", words::WORKING);
        self.dom.set_text("reversal-meaning", words::MEANING);
        self.dom.set_shown("nearest", true);
        self.dom.set_shown("reversal", true);
    }

    /// Leaves off, since the text has changed; whether something was being worked out, which does not come any more.
    pub(crate) fn stop(&mut self) -> bool {
        let left_off = self.search.take().is_some();
        if left_off {
            self.dom.set_text("nearest", "");
            self.dom.set_text("reversal-working", "");
        }
        self.rows.clear();
        self.line = None;
        self.mark_busy(false);
        self.dom.mark_root("data-reversal", None);
        left_off
    }

    /// Takes it off the page.
    pub(crate) fn clear(&mut self) {
        self.stop();
        for id in ["nearest", "reversal-looked"] {
            self.dom.set_text(id, "");
        }
        self.dom.set_shown("nearest", false);
        self.dom.set_shown("reversal", false);
    }

    /// Works for a slice, and shows what was found once all is. Whether anything is left to do.
    pub(crate) fn go_on(&mut self) -> bool {
        let Some(search) = &mut self.search else {
            return false;
        };
        let watch = Stopwatch::start(&self.dom, REVERSAL);
        // One fight at a time: some take as long as a slice.
        while watch.elapsed() < SLICE {
            if !search.step() {
                self.show();
                return false;
            }
        }
        let part = (search.progress() * 100.0).floor();
        self.dom
            .set_text("reversal-working", &format!("Being worked out: {part} % so far."));
        true
    }

    /// The line "Nearest reversal: …", once it is known.
    pub(crate) fn line(&self) -> Option<&str> {
        self.line.as_deref()
    }

    /// The text with the value of a row in its field, and the id of that field.
    pub(crate) fn putting(&self, pairs: &Pairs, row: usize) -> Option<(String, Pairs)> {
        let row = self.rows.get(row)?;
        let (_, text) = row.put.as_ref()?;
        let mut changed = pairs.clone();
        put(&mut changed, &row.slot, text);
        Some((row.slot.name.clone(), changed))
    }

    fn show(&mut self) {
        let (Some(search), Some(statement)) = (self.search.take(), self.statement.take()) else {
            return;
        };
        let line = words::nearest(&statement, &search);
        self.dom.set_text("nearest", &line);
        self.dom.set_text("reversal-looked", &words::looked(&search));
        self.dom.set_text("reversal-working", "");
        self.rows = words::rows(&statement, &search);
        self.line = Some(line);
        self.dom.set_text("reversal-behind", &words::behind(&self.rows));
        self.show_table(&words::heads(&statement));
        self.mark(false);
    }

    fn mark(&self, working: bool) {
        self.mark_busy(working);
        let state = if working { "working" } else { "done" };
        self.dom.mark_root("data-reversal", Some(state));
    }

    fn mark_busy(&self, working: bool) {
        let busy = if working { "true" } else { "false" };
        self.dom.set_attribute("reversal", "aria-busy", busy);
        self.dom.set_attribute("nearest", "aria-busy", busy);
    }

    fn show_table(&self, heads: &[String]) {
        let Some(table) = self.dom.element("reversal-table") else {
            return;
        };
        table.set_text_content(None);
        let part = |tag: &str| {
            let part = self.dom.make(tag, "")?;
            append(&table, &part);
            Some(part)
        };
        let (Some(head), Some(body)) = (part("thead"), part("tbody")) else {
            return;
        };
        if let Some(line) = self.dom.make("tr", "") {
            for text in heads {
                self.cell(&line, "th", text, "");
            }
            self.cell(&line, "td", "", "");
            append(&head, &line);
        }
        for (place, row) in self.rows.iter().enumerate() {
            if let Some(line) = self.row(heads, place, row) {
                append(&body, &line);
            }
        }
    }

    fn row(&self, heads: &[String], place: usize, row: &Row) -> Option<Element> {
        let line = self.dom.make("tr", "")?;
        set(&line, "data-slot", &row.slot.name);
        if row.put.is_some() && place < words::ON_PAPER {
            set(&line, "class", "near");
        }
        let name = self.cell(&line, "th", &row.name, "")?;
        set(&name, "scope", "row");
        if let Some(key) = self.dom.make("code", &row.slot.name) {
            append(&name, &key);
        }
        let texts = [
            &row.now,
            &row.value,
            &row.change,
            &row.then,
            &row.left.x,
            &row.left.y,
            &row.time,
        ];
        for (text, head) in texts.into_iter().zip(&heads[1..]) {
            self.cell(&line, "td", text, head);
        }
        let act = self.cell(&line, "td", "", "")?;
        set(&act, "class", "act");
        if let Some((words, _)) = &row.put {
            let button = self.dom.make("button", "put in")?;
            set(&button, "type", "button");
            set(&button, "data-reverse", &place.to_string());
            set(&button, "aria-label", &format!("{}: {words}", row.name));
            append(&act, &button);
        }
        Some(line)
    }

    /// A cell, which on a narrow page stands behind the head of its column.
    fn cell(&self, line: &Element, tag: &str, text: &str, head: &str) -> Option<Element> {
        let cell = self.dom.make(tag, text)?;
        if tag == "th" && head.is_empty() {
            set(&cell, "scope", "col");
        }
        if !head.is_empty() {
            set(&cell, "data-head", head);
        }
        append(line, &cell);
        Some(cell)
    }
}
