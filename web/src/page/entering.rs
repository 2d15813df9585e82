//! What is typed into the fields, and what the buttons beside them write.

use super::{Cause, Page};
use crate::form;
use crate::hand::Writes;
use crate::listen::After;
use crate::lists::{Act, Cell};
use crate::phases::Ask;
use crate::problems::PATIENCE;
use aftercount_core::sides::Side;
use aftercount_core::words::format::three;
use web_sys::Element;

impl Page {
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
        self.rework_shares(key);
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

    /// Another key was chosen for a change of a phase.
    pub(crate) fn exchange_change(&mut self, old: &str, change: &str) -> After {
        let mut pairs = self.pairs.clone();
        let next = self.phases.exchange(&mut pairs, old, change);
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
        After::GoTo(field)
    }

    /// The button beside a rate that discloses its entry as per cent.
    pub(crate) fn toggle_share(&mut self, side: Side) -> After {
        let good = self.good.as_ref().filter(|_| self.current);
        After::GoTo(
            self.shares
                .toggle(&self.pairs, side, good.map(|good| &good.statement)),
        )
    }

    /// The per cent that a rate is to take at the start was typed: it writes the rate.
    pub(crate) fn share_typed(&mut self, side: Side, text: &str) {
        let key = format!("{}.rate", side.letter());
        let rate = self.shares.typed(&self.pairs, side, text);
        self.typed(&key, &rate);
        form::fill(&self.dom, &self.pairs);
        self.show_share.start(PATIENCE);
    }

    /// A rate that was entered as per cent is worked out anew where the law that it is for has changed.
    fn rework_shares(&mut self, key: &str) {
        for side in Side::BOTH {
            if let Some(rate) = self.shares.anew(&self.pairs, side, key) {
                self.pairs.set(&format!("{}.rate", side.letter()), &rate);
                self.kept_rates.written(&self.pairs, side);
                form::fill(&self.dom, &self.pairs);
            }
        }
    }

    pub(super) fn show_share(&mut self) {
        self.show_share.stop();
        self.shares.show_waiting();
    }

    /// Restates every rate and time in the unit that was chosen.
    pub(crate) fn convert_unit(&mut self) -> After {
        if let Some(restated) = self.unit_change.convert(&self.pairs) {
            self.kept_rates.restated(&restated);
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

    /// A field was left: its entry in the history is complete, and its problem no longer waits.
    pub(crate) fn field_left(&mut self) {
        self.close_entry();
        self.law_fields.show_again(&self.pairs);
        self.phases.left(&self.pairs);
        self.show_share();
        if self.waiting.is_empty() {
            self.points.show(&self.pairs);
        } else {
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
}
