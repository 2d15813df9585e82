//! The page's state: the pairs, the last good figures, and what waits.

mod asked;
mod by_hand;
mod entering;
mod pictures;
mod received;
mod reversal;
mod steps;
mod told;

use crate::address::Address;
use crate::asking::Asking;
use crate::dom::Dom;
use crate::form;
use crate::hand::Hand;
use crate::handles::Handles;
use crate::kept_rates::KeptRates;
use crate::law_fields::LawFields;
use crate::listen::After;
use crate::lists;
use crate::live::{Live, QUIET};
use crate::outcome::{self, Good};
use crate::paper::Paper;
use crate::passing::Passing;
use crate::phases::Phases;
use crate::plates::Plates;
use crate::points::Points;
use crate::problems::{PATIENCE, Problems};
use crate::reversal::Reversals;
use crate::share::Shares;
use crate::stopwatch::{Stopwatch, WORK};
use crate::timeline;
use crate::timer::{NextFrame, Timer};
use crate::unit_change::UnitChange;
use crate::working;
use aftercount_core::demo::DEMO;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::Problem;
use aftercount_core::statement::Statement;
use std::cell::RefCell;
use std::rc::Rc;
use web_sys::AbortSignal;

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
    /// The question of the text, where it has one.
    asking: Asking,
    /// The text that `good` is of.
    good_pairs: Option<Pairs>,
    reversals: Reversals,
    /// Problems that are not shown yet.
    waiting: Vec<Problem>,
    /// Whether `good` is of the text as it stands.
    current: bool,
    problems: Problems,
    points: Points,
    kept_rates: KeptRates,
    hand: Hand,
    shares: Shares,
    unit_change: UnitChange,
    law_fields: LawFields,
    phases: Phases,
    address: Address,
    live: Live,
    plates: Plates,
    handles: Handles,
    passing: Passing,
    show_problems: Timer,
    write: Timer,
    show_share: Timer,
    speak: Timer,
    decide: Timer,
    ask_on: Timer,
    reverse_on: Timer,
    frame: NextFrame,
    paper: Paper,
}

/// How long the page is at rest before it works out what decided an engagement, in milliseconds: that takes many fights.
const SETTLED: i32 = 250;

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
                asking: Asking::new(dom),
                good_pairs: None,
                reversals: Reversals::new(dom),
                waiting: Vec::new(),
                current: false,
                problems: Problems::new(dom),
                points: Points::new(dom),
                kept_rates: KeptRates::new(dom),
                hand: Hand::new(dom),
                shares: Shares::new(dom),
                unit_change: UnitChange::new(dom),
                law_fields: LawFields::new(dom),
                phases: Phases::new(dom),
                address: Address::new(dom),
                live: Live::new(dom),
                plates: Plates::new(dom),
                handles: Handles::new(dom),
                passing: Passing::new(dom),
                show_problems: Timer::new(&dom.window, page, Page::show_waiting),
                write: Timer::new(&dom.window, page, Page::write_address),
                show_share: Timer::new(&dom.window, page, Page::show_share),
                speak: Timer::new(&dom.window, page, Page::speak_now),
                decide: Timer::new(&dom.window, page, Page::decide_now),
                ask_on: Timer::new(&dom.window, page, Page::ask_on),
                reverse_on: Timer::new(&dom.window, page, Page::reverse_on),
                frame: NextFrame::new(&dom.window, page, Page::draw_now),
                paper: Paper::new(dom),
            })
        });
        let mut borrowed = page.borrow_mut();
        // An instance before this one may have shown the demo: then it is the demo still.
        let kept = kept.filter(|text| *text != Pairs::parse(DEMO).link());
        let taken_over = kept.is_some();
        let text = kept.or_else(|| borrowed.address.received());
        borrowed
            .address
            .begin(text.clone().unwrap_or_default(), taken_over);
        borrowed.show(text);
        borrowed.write_later();
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

    /// Makes the engagement that goes on from the moment that is read.
    pub(crate) fn continue_from_here(&mut self) -> After {
        let good = self.good.as_ref().filter(|_| self.current);
        let rest = good.and_then(|good| good.continued(&self.pairs, self.plates.time(good)));
        if let Some(rest) = rest {
            self.plates.forget_reading();
            self.kept_rates.start(&rest);
            self.change_at_once(|pairs| *pairs = rest);
            form::fill(&self.dom, &self.pairs);
            self.open_what_holds_values();
            self.goes_back_to(None);
        }
        After::Nothing
    }

    /// A change that is complete as it is made: one entry of the history.
    fn change_at_once(&mut self, change: impl FnOnce(&mut Pairs)) {
        self.address.close();
        self.demo = false;
        self.unit_change.withdraw();
        change(&mut self.pairs);
        self.changed(Cause::Whole);
        self.close_entry();
    }

    /// Clears everything.
    pub(crate) fn start_from_blank(&mut self) {
        self.address.close();
        let mut blank = Pairs::default();
        for key in ["view", "paper"] {
            blank.set(key, self.pairs.get(key).unwrap_or_default());
        }
        self.pairs = blank;
        self.good_pairs = None;
        self.demo = false;
        self.unit_change.withdraw();
        self.good = None;
        self.asking.clear();
        self.filling = true;
        form::fill(&self.dom, &self.pairs);
        self.kept_rates.start(&self.pairs);
        self.changed(Cause::Whole);
        self.goes_back_to(None);
        self.close_entry();
    }

    /// Shows a whole text in place of the one before; the demo where there is none.
    fn show(&mut self, text: Option<String>) {
        self.demo = text.is_none();
        self.good = None;
        self.good_pairs = None;
        self.unit_change.withdraw();
        self.asking.clear();
        self.pairs = Pairs::parse(text.as_deref().unwrap_or(DEMO));
        // Before all that may stop the program: a fresh start goes on from here.
        crate::copy::keep(&self.dom, &self.pairs.link());
        self.filling = is_blank(&self.pairs);
        form::fill(&self.dom, &self.pairs);
        self.open_what_holds_values();
        match *self.address.written_as() {
            Some(written_as) => self.kept_rates.come_back(&self.pairs, written_as),
            None => self.kept_rates.start(&self.pairs),
        }
        self.work_out(Cause::Whole);
        *self.address.written_as() = Some(self.kept_rates.written_as());
    }

    fn changed(&mut self, cause: Cause) {
        let link = self.pairs.link();
        // Before all that may stop the program: a fresh start goes on from here.
        crate::copy::keep(&self.dom, &link);
        // Before the entry is written: beside it stands what the rates were written as.
        self.kept_rates.follow(&self.pairs);
        self.address.edited(link, self.kept_rates.written_as());
        self.write_later();
        self.work_out(cause);
        self.speak.start(QUIET);
    }

    /// From the pairs to everything that follows from them.
    fn work_out(&mut self, cause: Cause) {
        let _watch = Stopwatch::start(&self.dom, WORK);
        self.show_steps();
        self.show_text();
        self.show_changes();
        lists::show(&self.dom, &self.pairs);
        self.phases.show(&self.pairs);
        self.hand.again(&self.pairs);
        self.decide.stop();
        self.dom.set_text("decided", "");
        self.dom.set_shown("decided", false);
        self.dom.mark_root("data-settled", None);
        self.show_problems.stop();
        self.waiting.clear();
        self.points.changed(&self.pairs);
        self.current = false;
        self.reverse_on.stop();
        let left_off = self.reversals.stop();
        match Statement::read(&self.pairs) {
            Ok(statement) => {
                self.asking.begin(&self.pairs, &statement);
                self.show_where_the_map_is(Some(&statement));
                if statement.has_base() {
                    self.work_out_good(statement);
                } else {
                    self.work_out_question();
                }
                self.ask_on();
            }
            Err(problems) => {
                self.work_out_bad(problems);
                if left_off {
                    // It is of an older text than the figures.
                    self.dom.set_text("reversal-table", "");
                }
            }
        }
        let good = self.good.as_ref().filter(|_| self.current);
        self.shares.show(&self.pairs, good.map(|good| &good.statement));
        match cause {
            Cause::Typed => self.show_problems.start(PATIENCE),
            Cause::Whole => self.show_waiting(),
        }
    }

    fn work_out_good(&mut self, statement: Statement) {
        self.problems.clear();
        self.law_fields.show(&self.pairs, &[]);
        self.filling = false;
        self.reversals.begin(&self.pairs, &statement);
        let good = Good::new(statement, self.handles.held());
        outcome::show(&self.dom, &good);
        timeline::show(&self.dom, &good);
        working::show(&self.dom, &good, &text_mark(&self.pairs));
        self.good = Some(good);
        self.good_pairs = Some(self.pairs.clone());
        self.current = true;
        self.dom.mark_root("data-state", Some("good"));
        self.frame.ask();
    }

    /// A number is asked for and has no value now: the sheet says the answer alone.
    fn work_out_question(&mut self) {
        self.problems.clear();
        self.law_fields.show(&self.pairs, &[]);
        self.filling = false;
        self.good = None;
        self.clear_outcome();
        self.current = true;
        self.dom.mark_root("data-state", Some("good"));
    }

    fn clear_outcome(&mut self) {
        self.reversals.clear();
        self.handles.clear();
        outcome::clear(&self.dom);
        timeline::clear(&self.dom);
        working::clear(&self.dom);
    }

    fn work_out_bad(&mut self, mut problems: Vec<Problem>) {
        if self.filling {
            problems.retain(|problem| problem.found.is_some());
        }
        self.law_fields.show(&self.pairs, &problems);
        self.waiting = problems;
        self.asking.stop();
        self.show_where_the_map_is(None);
        if self.good.is_none() && self.asking.sentence().is_none() {
            self.asking.clear();
            self.clear_outcome();
            self.dom.mark_root("data-state", Some("empty"));
        }
    }

    /// Shows what waits until typing has stopped.
    fn show_waiting(&mut self) {
        self.show_problems.stop();
        self.points.show(&self.pairs);
        if self.current {
            return;
        }
        let waiting = std::mem::take(&mut self.waiting);
        self.problems.show(&self.pairs, &waiting);
        if self.good.is_some() || self.asking.sentence().is_some() {
            self.dom.mark_root("data-state", Some("stale"));
        }
        self.mark_what_rolls();
    }

    fn sentence(&self) -> String {
        let asked = || self.asking.sentence().unwrap_or_default();
        self.good.as_ref().map_or_else(asked, Good::sentence)
    }

    fn speak_now(&mut self) {
        // In a frame the page around it has the word.
        if self.address.is_framed() {
            return;
        }
        let words = if self.current {
            self.sentence()
        } else {
            self.problems.aloud().to_owned()
        };
        // Where there is nothing to say, nothing that was wrong before stays said.
        self.live.speak(&words);
    }

    /// Says what decided the engagement, once nobody is waiting for the pictures.
    fn decide_now(&mut self) {
        self.decide.stop();
        let decided = self
            .good
            .as_ref()
            .filter(|_| self.current)
            .and_then(Good::decided);
        self.dom
            .set_text("decided", decided.as_deref().unwrap_or_default());
        self.dom.set_shown("decided", decided.is_some());
    }
}

/// Whether a text is that of a blank form, which "Start from blank" leaves: only keys that say how it is shown.
fn is_blank(pairs: &Pairs) -> bool {
    let mut keys = pairs.iter().map(|(key, _)| key).peekable();
    keys.peek().is_some() && keys.all(|key| matches!(key, "v" | "view" | "paper"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_form_is_blank_until_it_says_something_of_an_engagement() {
        for blank in ["v=1", "view=frame&paper=dark&v=1"] {
            assert!(is_blank(&Pairs::parse(blank)), "{blank}");
        }
        let longer_than_is_taken_apart = "x".repeat(300_000);
        for other in ["x.start=6&v=1", "bare&v=1", "", &longer_than_is_taken_apart] {
            assert!(!is_blank(&Pairs::parse(other)));
        }
    }
}
