//! Pictures on the screen and on paper, and what is read in them.

use super::{Page, SETTLED};
use crate::canvas;
use crate::reading::Pointer;
use crate::rolling;
use crate::stopwatch::{DRAW, Stopwatch};
use aftercount_core::mark::text_mark;
use aftercount_core::statement::Statement;

/// The most slices of the search for what reverses the outcome that a printer waits for: half a second.
const REVERSAL_SLICES_ON_PAPER: u32 = 60;

/// The most slices of the work at a question that it waits for: three seconds.
const QUESTION_SLICES_ON_PAPER: u32 = 240;

impl Page {
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

    /// Draws both pictures, and says that they match the text where they do.
    pub(super) fn draw_now(&mut self) {
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

    /// The printer is about to look.
    pub(crate) fn put_on_paper(&mut self) {
        self.bring_up_to_date();
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

    /// What would come within the next moments belongs on paper, where it can be found while the printer waits.
    fn bring_up_to_date(&mut self) {
        if self.show_problems.is_running() {
            self.show_waiting();
        }
        for _ in 0..QUESTION_SLICES_ON_PAPER {
            if self.asking.is_done() {
                break;
            }
            self.ask_on();
        }
        for _ in 0..REVERSAL_SLICES_ON_PAPER {
            if !self.reversals.go_on() {
                break;
            }
        }
        self.decide_now();
    }

    /// The printer has looked.
    pub(crate) fn printed(&mut self) {
        self.paper.put_away();
        self.frame.ask();
    }

    /// Lets the keyboard into what is larger than its place.
    pub(crate) fn mark_what_rolls(&self) {
        rolling::leave_room(&self.dom);
        rolling::mark(&self.dom);
    }
}
