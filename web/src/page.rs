//! The page's state: the pairs, the last good figures, and what waits.

use crate::address::{Address, Step};
use crate::dom::Dom;
use crate::form;
use crate::kept_rates::KeptRates;
use crate::law_fields::LawFields;
use crate::listen::After;
use crate::live::{Live, QUIET};
use crate::outcome::{self, Good};
use crate::plates::Plates;
use crate::problems::{PATIENCE, Problems};
use crate::reading::Pointer;
use crate::timer::{NextFrame, Timer};
use crate::working;
use aftercount_core::demo::DEMO;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::{Problem, seen};
use aftercount_core::statement::Statement;
use std::cell::RefCell;
use std::rc::Rc;
use web_sys::{AbortSignal, HtmlDetailsElement};

/// The life of one instance of the program on the page.
pub(crate) struct Page {
    dom: Dom,
    signal: AbortSignal,
    pairs: Pairs,
    /// Whether the demo is shown because no key stands.
    demo: bool,
    /// Whether a blank form is being filled: then what is missing is no news.
    filling: bool,
    good: Option<Good>,
    /// Problems that are not shown yet.
    waiting: Vec<Problem>,
    /// Whether `good` is of the text as it stands.
    current: bool,
    problems: Problems,
    kept_rates: KeptRates,
    law_fields: LawFields,
    address: Address,
    live: Live,
    plates: Plates,
    show_problems: Timer,
    write: Timer,
    speak: Timer,
    frame: NextFrame,
    /// Whether the working was opened for the printer alone.
    opened_for_print: bool,
}

/// Why the text changed.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Cause {
    /// Somebody is typing.
    Typed,
    /// It came as a whole: from the address, a step back, a button.
    Whole,
}

impl Page {
    /// Takes up `kept`, the text of an instance before, or else the text in the address, or else the demo.
    pub(crate) fn begin(dom: &Dom, signal: &AbortSignal, kept: Option<String>) -> Rc<RefCell<Page>> {
        let page = Rc::new_cyclic(|page| {
            RefCell::new(Page {
                dom: dom.clone(),
                signal: signal.clone(),
                pairs: Pairs::default(),
                demo: false,
                filling: false,
                good: None,
                waiting: Vec::new(),
                current: false,
                problems: Problems::new(dom),
                kept_rates: KeptRates::new(dom),
                law_fields: LawFields::new(dom),
                address: Address::new(dom),
                live: Live::new(dom),
                plates: Plates::new(dom),
                show_problems: Timer::new(&dom.window, page, Page::show_waiting),
                write: Timer::new(&dom.window, page, Page::write_address),
                speak: Timer::new(&dom.window, page, Page::speak_now),
                frame: NextFrame::new(&dom.window, page, Page::draw_now),
                opened_for_print: false,
            })
        });
        let mut borrowed = page.borrow_mut();
        // An instance before this one may have shown the demo: then it is the demo still.
        let kept = kept.filter(|text| *text != Pairs::parse(DEMO).link());
        let text = kept.or_else(|| borrowed.address.received());
        borrowed.address.begin(text.clone().unwrap_or_default());
        borrowed.show(text);
        let sentence = borrowed.sentence();
        borrowed.live.take_as_said(&sentence);
        drop(borrowed);
        page
    }

    /// Whether the boot script has ended this instance.
    pub(crate) fn is_over(&self) -> bool {
        self.signal.aborted()
    }

    pub(crate) fn dom(&self) -> &Dom {
        &self.dom
    }

    /// A field was typed in.
    pub(crate) fn typed(&mut self, key: &str, text: &str) {
        if self.pairs.get(key).unwrap_or_default() == text {
            return;
        }
        self.demo = false;
        self.pairs.set(key, text);
        self.kept_rates.typed(&self.pairs, key);
        self.changed(Cause::Typed);
    }

    /// A field was left: its entry in the history is complete, and its problem no longer waits.
    pub(crate) fn field_left(&mut self) {
        self.write.stop();
        self.address.close();
        self.law_fields.show_again(&self.pairs);
        if !self.waiting.is_empty() {
            self.show_waiting();
        }
    }

    /// Takes a key out of the text that no field can put right.
    pub(crate) fn take_out(&mut self, key: &str) {
        self.address.close();
        self.demo = false;
        self.pairs.set(key, "");
        self.changed(Cause::Whole);
        self.address.close();
    }

    /// Clears everything.
    pub(crate) fn start_from_blank(&mut self) {
        self.address.close();
        let mut blank = Pairs::default();
        for key in ["view", "paper"] {
            blank.set(key, self.pairs.get(key).unwrap_or_default());
        }
        self.pairs = blank;
        self.demo = false;
        self.good = None;
        self.filling = true;
        form::fill(&self.dom, &self.pairs);
        self.kept_rates.start(&self.pairs);
        self.changed(Cause::Whole);
        self.address.close();
    }

    /// Undo or Redo.
    pub(crate) fn step(&mut self, forward: bool) -> After {
        match self.address.step(forward) {
            Step::Show(text) => self.show(Some(text).filter(|text| !text.is_empty())),
            Step::Browser | Step::Nowhere => {}
        }
        After::Nothing
    }

    /// The address holds another text than before.
    pub(crate) fn address_moved(&mut self) {
        let text = self.address.received();
        let same = text
            .as_deref()
            .map_or(self.demo, |text| !self.demo && Pairs::parse(text) == self.pairs);
        self.address.arrived(text.clone().unwrap_or_default());
        if same {
            self.show_steps();
        } else {
            self.show(text);
        }
    }

    /// Writes the address where a write waits.
    pub(crate) fn write_address(&mut self) {
        self.write.stop();
        self.address.write();
    }

    /// A key on the reading line; whether it was one of its keys.
    pub(crate) fn reading_key(&mut self, key: &str) -> bool {
        let Some(good) = &self.good else { return false };
        let moved = self.plates.reading_key(good, key);
        if moved {
            self.plates.show_reading(good);
        }
        moved
    }

    /// The pointer is over a picture.
    pub(crate) fn pointed(&mut self, pointer: &Pointer) {
        if let Some(good) = &self.good
            && self.plates.pointed(good, pointer)
        {
            self.plates.show_reading(good);
        }
    }

    /// Draws before the next paint, unless it is the printer's layout that gave a picture another size: what the printer
    /// gets was drawn before, and a canvas of another size would be cleared under it.
    pub(crate) fn draw_soon(&mut self) {
        if !self.dom.matches("print") {
            self.frame.ask();
        }
    }

    /// The printer is about to look: the working is opened, so that it is on the paper.
    pub(crate) fn draw_for_print(&mut self) {
        if let Some(details) = self.dom.typed::<HtmlDetailsElement>("working-details") {
            self.opened_for_print = !details.open();
            details.set_open(true);
        }
        if let Some(good) = &self.good
            && let Err(error) = self.plates.draw_for_print(good)
        {
            web_sys::console::error_1(&error.into());
        }
    }

    /// The printer has looked.
    pub(crate) fn printed(&mut self) {
        if let Some(details) = self.dom.typed::<HtmlDetailsElement>("working-details")
            && std::mem::take(&mut self.opened_for_print)
        {
            details.set_open(false);
        }
        self.frame.ask();
    }

    /// Shows a whole text in place of the one before; the demo where there is none.
    fn show(&mut self, text: Option<String>) {
        self.demo = text.is_none();
        self.filling = false;
        self.good = None;
        self.pairs = Pairs::parse(text.as_deref().unwrap_or(DEMO));
        form::fill(&self.dom, &self.pairs);
        self.open_what_holds_values();
        self.kept_rates.start(&self.pairs);
        self.work_out(Cause::Whole);
    }

    fn changed(&mut self, cause: Cause) {
        if let Some(wait) = self.address.edited(self.pairs.link()) {
            self.write.start(wait);
        }
        self.work_out(cause);
        self.speak.start(QUIET);
    }

    /// From the pairs to everything that follows from them.
    fn work_out(&mut self, cause: Cause) {
        self.show_steps();
        self.show_text();
        self.dom.mark_root("data-settled", None);
        self.show_problems.stop();
        self.waiting.clear();
        self.current = false;
        match Statement::read(&self.pairs) {
            Ok(statement) => self.work_out_good(statement),
            Err(problems) => self.work_out_bad(problems, cause),
        }
    }

    fn work_out_good(&mut self, statement: Statement) {
        self.problems.clear();
        self.law_fields.show(&self.pairs, &[]);
        self.filling = false;
        let good = Good::new(statement);
        outcome::show(&self.dom, &good);
        working::show(&self.dom, &good, &text_mark(&self.pairs));
        self.good = Some(good);
        self.current = true;
        self.dom.mark_root("data-state", Some("good"));
        self.frame.ask();
    }

    fn work_out_bad(&mut self, mut problems: Vec<Problem>, cause: Cause) {
        if self.filling {
            problems.retain(|problem| problem.found.is_some());
        }
        self.law_fields.show(&self.pairs, &problems);
        self.waiting = problems;
        if self.good.is_none() {
            outcome::clear(&self.dom);
            working::clear(&self.dom);
            self.dom.mark_root("data-state", Some("empty"));
        }
        match cause {
            Cause::Typed => self.show_problems.start(PATIENCE),
            Cause::Whole => self.show_waiting(),
        }
    }

    fn show_waiting(&mut self) {
        self.show_problems.stop();
        let waiting = std::mem::take(&mut self.waiting);
        self.problems.show(&self.pairs, &waiting);
        if self.good.is_some() {
            self.dom.mark_root("data-state", Some("stale"));
        }
    }

    /// The text and what is read straight from it, whether it can be worked out or not.
    fn show_text(&mut self) {
        let link = self.pairs.link();
        crate::copy::keep(&self.dom, &link);
        if let Some(area) = self.dom.typed::<web_sys::HtmlTextAreaElement>("text") {
            area.set_value(&link);
        }
        self.dom.set_text("copied", "");
        self.dom.set_text("working-copied", "");
        self.dom.set_text("text-mark", &text_mark(&self.pairs));
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

    fn show_steps(&self) {
        let (back, on) = self.address.can_step();
        for (id, can) in [("undo", back), ("redo", on)] {
            if let Some(button) = self.dom.typed::<web_sys::HtmlButtonElement>(id) {
                button.set_disabled(!can);
            }
        }
    }

    /// A value behind a closed panel would be one that nobody sees.
    fn open_what_holds_values(&self) {
        for letter in ["x", "y"] {
            if self.pairs.get(&format!("{letter}.lost")).is_some() {
                self.dom.set_attribute(&format!("{letter}.more"), "open", "");
            }
        }
    }

    fn sentence(&self) -> String {
        self.good.as_ref().map(Good::sentence).unwrap_or_default()
    }

    fn speak_now(&mut self) {
        // In a frame the page around it has the word, and a text with a problem has no new sentence.
        if self.current && !self.address.is_framed() {
            let sentence = self.sentence();
            self.live.speak(&sentence);
        }
    }

    /// Draws both pictures, and says that they match the text where they do.
    fn draw_now(&mut self) {
        self.frame.came();
        let Some(good) = &self.good else { return };
        if let Err(error) = self.plates.draw(good) {
            web_sys::console::error_1(&error.into());
            return;
        }
        if self.current {
            self.dom.mark_root("data-settled", Some(&text_mark(&self.pairs)));
        }
    }
}
