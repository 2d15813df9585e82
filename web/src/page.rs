//! The page's state: the pairs, the last good figures, and what waits.

mod by_hand;
mod received;
mod reversal;

use crate::address::{Address, Step};
use crate::asking::Asking;
use crate::canvas;
use crate::dom::Dom;
use crate::form;
use crate::hand::{Hand, Writes};
use crate::handles::Handles;
use crate::kept_rates::KeptRates;
use crate::law_fields::LawFields;
use crate::listen::After;
use crate::lists::{self, Act, Cell};
use crate::live::{Live, QUIET};
use crate::outcome::{self, Good};
use crate::paper::Paper;
use crate::passing::Passing;
use crate::phases::{Ask, Phases};
use crate::plates::Plates;
use crate::problems::{PATIENCE, Problems};
use crate::reading::Pointer;
use crate::reversal::Reversals;
use crate::rolling;
use crate::share::Shares;
use crate::stopwatch::{DRAW, Stopwatch, WORK};
use crate::timeline;
use crate::timer::{NextFrame, Timer};
use crate::unit_change::UnitChange;
use crate::working;
use aftercount_core::demo::DEMO;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::words::room;
use aftercount_core::picture::Picture;
use aftercount_core::problem::{Problem, seen};
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::words::format::three;
use std::cell::RefCell;
use std::rc::Rc;
use web_sys::{AbortSignal, Element};

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

    /// A field was typed in.
    pub(crate) fn typed(&mut self, key: &str, text: &str) {
        if self.pairs.get(key).unwrap_or_default() == text {
            return;
        }
        self.demo = false;
        let before = (key == "unit").then(|| self.pairs.clone());
        self.pairs.set(key, text);
        match before {
            Some(before) => self.unit_change.changed(&before, &self.pairs),
            None => self.unit_change.typed(key),
        }
        self.kept_rates.typed(&self.pairs, key);
        self.phases.typed(key, text);
        self.changed(Cause::Typed);
    }

    /// A cell of a table of reserves or flows was typed in.
    pub(crate) fn cell_typed(&mut self, cell: &Cell, text: &str) {
        if let Some(list) = cell.rewritten(&self.pairs, text) {
            self.typed(&cell.key, &list);
        }
    }

    /// A button of such a table, or the arrows in a row, which then stay in it.
    pub(crate) fn act_on_list(&mut self, cell: &Cell, act: Act, stays: Option<Act>) -> After {
        let Some((list, next)) = cell.acted(&self.pairs, act) else {
            return After::Nothing;
        };
        self.change_at_once(|pairs| pairs.set(&cell.key, &list));
        let row = match stays {
            Some(Act::Up) => cell.row.checked_sub(1),
            Some(Act::Down) => Some(cell.row + 1),
            _ => None,
        };
        After::GoTo(row.and_then(|row| cell.id_in(row)).unwrap_or(next))
    }

    /// A button of the phases. A new phase begins at the moment that is read.
    pub(crate) fn ask_of_phases(&mut self, ask: &Ask) -> After {
        let now = self.good.as_ref().map_or(1.0, |good| self.plates.time(good));
        let now = if now > 0.0 { three(now) } else { "1".into() };
        let mut pairs = self.pairs.clone();
        let next = self.phases.ask(&mut pairs, ask, &now);
        self.change_at_once(|old| *old = pairs);
        next.map_or(After::Nothing, After::GoTo)
    }

    /// Something has the focus.
    pub(crate) fn focused(&mut self, element: &Element) {
        self.hand.focused(element, &self.pairs);
    }

    /// The focus has left for `next`.
    pub(crate) fn focus_left(&mut self, next: Option<&Element>) {
        self.hand.left(next);
    }

    /// The id of what a key on the buttons of a number moves the focus to.
    pub(crate) fn hand_key(&self, element: &Element, key: &str) -> Option<String> {
        self.hand.key(element, key)
    }

    /// One of the buttons of a number. The focus goes back to the number.
    pub(crate) fn hand_pressed(&mut self, writes: Writes) -> After {
        let Some((field, key, text)) = self.hand.press(&self.pairs, writes) else {
            return After::Nothing;
        };
        self.change_at_once(|pairs| pairs.set(&key, &text));
        form::fill(&self.dom, &self.pairs);
        self.kept_rates.typed(&self.pairs, &key);
        After::GoTo(field)
    }

    /// The button beside a rate that discloses its entry as per cent.
    pub(crate) fn toggle_share(&mut self, side: Side) -> After {
        let good = self.good.as_ref().filter(|_| self.current);
        After::GoTo(self.shares.toggle(side, good.map(|good| &good.statement)))
    }

    /// The per cent that a rate is to take at the start was typed: it writes the rate.
    pub(crate) fn share_typed(&mut self, side: Side, text: &str) {
        let key = format!("{}.rate", side.letter());
        let rate = self.shares.typed(&self.pairs, side, text);
        self.typed(&key, &rate);
        form::fill(&self.dom, &self.pairs);
        self.show_share.start(PATIENCE);
    }

    fn show_share(&mut self) {
        self.show_share.stop();
        self.shares.show_waiting();
    }

    /// Restates every rate and time in the unit that was chosen.
    pub(crate) fn convert_unit(&mut self) -> After {
        if let Some(restated) = self.unit_change.convert(&self.pairs) {
            self.change_at_once(|pairs| *pairs = restated);
            form::fill(&self.dom, &self.pairs);
            return After::GoTo("unit".into());
        }
        After::Nothing
    }

    /// Leaves every number as it is.
    pub(crate) fn keep_numbers(&mut self) -> After {
        self.unit_change.withdraw();
        After::GoTo("unit".into())
    }

    /// Another key was chosen for a change of a phase.
    pub(crate) fn exchange_change(&mut self, old: &str, change: &str) -> After {
        let mut pairs = self.pairs.clone();
        let next = self.phases.exchange(&mut pairs, old, change);
        self.change_at_once(|old| *old = pairs);
        next.map_or(After::Nothing, After::GoTo)
    }

    /// Makes the engagement that goes on from the moment that is read.
    pub(crate) fn continue_from_here(&mut self) -> After {
        let good = self.good.as_ref().filter(|_| self.current);
        let rest = good.and_then(|good| good.continued(&self.pairs, self.plates.time(good)));
        if let Some(rest) = rest {
            self.plates.forget_reading();
            self.change_at_once(|pairs| *pairs = rest);
            form::fill(&self.dom, &self.pairs);
            self.kept_rates.start(&self.pairs);
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

    fn close_entry(&mut self) {
        self.address.close();
        self.write_later();
    }

    /// Waits until the address may be written, where it is behind.
    fn write_later(&mut self) {
        self.write.stop();
        if let Some(wait) = self.address.due() {
            self.write.start(wait);
        }
    }

    /// A field was left: its entry in the history is complete, and its problem no longer waits.
    pub(crate) fn field_left(&mut self) {
        self.close_entry();
        self.law_fields.show_again(&self.pairs);
        self.phases.left(&self.pairs);
        self.show_share();
        if !self.waiting.is_empty() {
            self.show_waiting();
        }
    }

    /// Takes a key out of the text that no field can put right.
    pub(crate) fn take_out(&mut self, key: &str) {
        self.change_at_once(|pairs| pairs.set(key, ""));
    }

    /// Takes out of the text all that stands of a key beside its first text, which is what its field shows.
    pub(crate) fn keep_first(&mut self, key: &str) {
        self.change_at_once(|pairs| pairs.keep_first(key));
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

    /// Undo or Redo.
    pub(crate) fn step(&mut self, forward: bool) -> After {
        match self.address.step(forward) {
            Step::Show(text) => {
                self.show(Some(text).filter(|text| !text.is_empty()));
                self.speak.start(QUIET);
            }
            Step::Browser | Step::Nowhere => {}
        }
        self.write_later();
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
            self.speak.start(QUIET);
        }
    }

    /// Writes the address where a write waits.
    pub(crate) fn write_address(&mut self) {
        self.address.write();
        self.write_later();
    }

    /// The page is about to go: whether it would take with it what could not be written.
    pub(crate) fn would_lose(&mut self) -> bool {
        self.write_address();
        // In a frame the text is that of the page around it.
        self.address.is_behind() && !self.address.is_framed()
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

    /// The printer is about to look.
    pub(crate) fn put_on_paper(&mut self) {
        // What would reverse the outcome belongs on it, where it can be found while the printer waits.
        for _ in 0..SLICES_ON_PAPER {
            if !self.reversals.go_on() {
                break;
            }
        }
        // Beside a problem it is the last text that could be worked out, as on the screen.
        let stated = [Some(&self.pairs), self.good_pairs.as_ref()]
            .into_iter()
            .flatten()
            .find_map(|pairs| Some((pairs, Statement::read(pairs).ok()?)));
        let good = self.good.as_ref();
        let asked = self.asking.picture();
        let asked = asked.map(|(id, picture, _)| (id, Some(picture)));
        let pictures = [
            ("strength", good.and_then(|good| good.strength.as_ref())),
            ("orbit", good.and_then(|good| good.orbit.as_ref())),
            asked.unwrap_or_default(),
        ];
        let stated = stated.as_ref().map(|(pairs, statement)| (*pairs, statement));
        self.paper.fill(&self.pairs, stated, &pictures);
    }

    /// The printer has looked.
    pub(crate) fn printed(&mut self) {
        self.paper.put_away();
        self.frame.ask();
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
        self.kept_rates.start(&self.pairs);
        self.work_out(Cause::Whole);
    }

    fn changed(&mut self, cause: Cause) {
        let link = self.pairs.link();
        // Before all that may stop the program: a fresh start goes on from here.
        crate::copy::keep(&self.dom, &link);
        self.address.edited(link);
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
        self.current = false;
        self.reverse_on.stop();
        self.reversals.stop();
        match Statement::read(&self.pairs) {
            Ok(statement) => {
                self.asking.begin(&self.pairs, &statement);
                if statement.has_base() {
                    self.work_out_good(statement);
                } else {
                    self.work_out_question();
                }
                self.ask_on();
            }
            Err(problems) => self.work_out_bad(problems, cause),
        }
        let good = self.good.as_ref().filter(|_| self.current);
        self.shares.show(&self.pairs, good.map(|good| &good.statement));
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

    /// Goes on with the question for a slice.
    fn ask_on(&mut self) {
        self.ask_on.stop();
        let news = self.asking.go_on(&self.pairs);
        if !self.asking.is_done() {
            self.ask_on.start(0);
        }
        if self.good.is_none() {
            let sentence = self.sentence();
            self.dom.set_text("sentence", &sentence);
        }
        if news || self.asking.is_done() {
            self.frame.ask();
        }
    }

    /// The picture of the answer with what was stated, where the text as it stands has one.
    pub(crate) fn asked_picture(&self) -> Option<(&Picture, &Statement)> {
        let asked = self.asking.picture().filter(|_| self.current);
        asked.map(|(_, picture, statement)| (picture, statement))
    }

    /// The pointer is over the map.
    pub(crate) fn pointed_on_map(&mut self, at: (f64, f64)) {
        let ink = canvas::ink(&self.dom);
        self.asking.mapping().pointed(at, &ink);
    }

    /// A key on the map; whether it was one of its keys.
    pub(crate) fn map_key(&mut self, key: &str, far: bool) -> bool {
        let ink = canvas::ink(&self.dom);
        self.asking.mapping().key(key, far, &ink)
    }

    /// Puts the place on the map into its two fields.
    pub(crate) fn put_place(&mut self) -> After {
        if let Some(changed) = self.asking.mapping().putting(&self.pairs) {
            self.change_at_once(|pairs| *pairs = changed);
            form::fill(&self.dom, &self.pairs);
        }
        After::Nothing
    }

    /// Another second reading of the map was chosen.
    pub(crate) fn choose_second(&mut self) {
        self.asking.mapping().choose_second();
        self.frame.ask();
    }

    /// Puts an answer into its field.
    pub(crate) fn put_answer(&mut self, place: usize) -> After {
        let Some((key, changed)) = self.asking.putting(&self.pairs, place) else {
            return After::Nothing;
        };
        self.change_at_once(|pairs| *pairs = changed);
        form::fill(&self.dom, &self.pairs);
        After::GoTo(key)
    }

    /// Adds the condition that was chosen to what is wanted.
    pub(crate) fn add_condition(&mut self) -> After {
        if let Some(conditions) = self.asking.with_choice(&self.pairs) {
            self.change_at_once(|pairs| pairs.set("sothat", &conditions));
            form::fill(&self.dom, &self.pairs);
        }
        After::GoTo("sothat".into())
    }

    fn clear_outcome(&mut self) {
        self.reversals.clear();
        self.handles.clear();
        outcome::clear(&self.dom);
        timeline::clear(&self.dom);
        working::clear(&self.dom);
    }

    fn work_out_bad(&mut self, mut problems: Vec<Problem>, cause: Cause) {
        if self.filling {
            problems.retain(|problem| problem.found.is_some());
        }
        self.law_fields.show(&self.pairs, &problems);
        self.waiting = problems;
        self.asking.stop();
        if self.good.is_none() && self.asking.sentence().is_none() {
            self.asking.clear();
            self.clear_outcome();
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
        if self.good.is_some() || self.asking.sentence().is_some() {
            self.dom.mark_root("data-state", Some("stale"));
        }
        self.mark_what_rolls();
    }

    /// The text and what is read straight from it, whether it can be worked out or not.
    fn show_text(&mut self) {
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

    fn show_steps(&self) {
        let (back, on) = self.address.can_step();
        for (id, can) in [("undo", back), ("redo", on)] {
            // A disabled button would throw the focus away that its own press gave it.
            self.dom
                .set_attribute(id, "aria-disabled", if can { "false" } else { "true" });
        }
    }

    /// A value behind a closed panel would be one that nobody sees.
    fn open_what_holds_values(&self) {
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
        let decided = self
            .good
            .as_ref()
            .filter(|_| self.current)
            .and_then(Good::decided);
        self.dom
            .set_text("decided", decided.as_deref().unwrap_or_default());
        self.dom.set_shown("decided", decided.is_some());
    }

    /// Lets the keyboard into what is larger than its place.
    pub(crate) fn mark_what_rolls(&self) {
        rolling::leave_room(&self.dom);
        rolling::mark(&self.dom);
    }

    /// Draws both pictures, and says that they match the text where they do.
    fn draw_now(&mut self) {
        self.frame.came();
        let _watch = Stopwatch::start(&self.dom, DRAW);
        let plates = self.good.as_ref().map_or(Ok(()), |good| self.plates.draw(good));
        if let Err(error) = plates.and_then(|()| self.asking.draw(&canvas::ink(&self.dom))) {
            web_sys::console::error_1(&error.into());
            return;
        }
        if let Some(good) = &self.good {
            let (strength, orbit) = self.plates.fields();
            self.handles.show(good, strength, orbit);
        }
        self.mark_what_rolls();
        if self.current && self.asking.is_done() {
            self.dom.mark_root("data-settled", Some(&text_mark(&self.pairs)));
            self.decide.start(SETTLED);
            self.reverse_on.start(0);
        }
    }
}

/// So many slices of the search for what reverses the outcome a printer waits for.
const SLICES_ON_PAPER: u32 = 60;

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
