//! Texts that come from outside: taken up as one step, and the way back to them.

use super::{Cause, Page};
use crate::form;
use crate::listen::After;
use crate::outcome::Good;
use crate::passing::{self, Passing};
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::changes::changes;

impl Page {
    pub(crate) fn pairs(&self) -> &Pairs {
        &self.pairs
    }

    /// What the text as it stands leaves; `None` where it could not be worked out.
    pub(crate) fn outcome(&self) -> Option<&Good> {
        self.good.as_ref().filter(|_| self.current)
    }

    /// What a number in question must be, where that is known.
    pub(crate) fn asked(&self) -> Option<String> {
        self.asking
            .sentence()
            .filter(|_| self.current && self.asking.is_done())
    }

    pub(crate) fn passing(&mut self) -> &mut Passing {
        &mut self.passing
    }

    /// Takes up a text that was received, in the view and on the paper that the reader has. Undo brings back what stood
    /// there.
    pub(crate) fn take_up(&mut self, received: &Pairs) {
        let mut pairs = received.clone();
        for key in ["view", "paper"] {
            pairs.set(key, self.pairs.get(key).unwrap_or_default());
        }
        let link = pairs.link();
        self.good = None;
        self.kept_rates.start(&pairs);
        self.put_in_place(pairs);
        self.goes_back_to(Some(&link));
        self.close_entry();
        self.show_changes();
    }

    /// Brings a key back to as it was received, or the whole text.
    pub(crate) fn bring_back(&mut self, key: Option<&str>) -> After {
        let Some(received) = self.address.received_text().map(Pairs::parse) else {
            return After::Nothing;
        };
        let mut pairs = self.pairs.clone();
        match key {
            Some(key) => pairs.set(key, received.get(key).unwrap_or_default()),
            None => {
                pairs = received;
                for key in ["view", "paper"] {
                    pairs.set(key, self.pairs.get(key).unwrap_or_default());
                }
                self.kept_rates.start(&pairs);
            }
        }
        self.put_in_place(pairs);
        After::GoTo(key.unwrap_or("leaves-head").to_owned())
    }

    /// Another text in place of the one that stands there, as one step.
    fn put_in_place(&mut self, pairs: Pairs) {
        self.plates.forget_reading();
        self.address.close();
        self.demo = false;
        self.pairs = pairs;
        form::fill(&self.dom, &self.pairs);
        self.open_what_holds_values();
        self.changed(Cause::Whole);
        self.close_entry();
    }

    /// The text that is shown goes back to another one that was received, or to none.
    pub(super) fn goes_back_to(&mut self, received: Option<&str>) {
        self.address.goes_back_to(received);
        self.write_later();
        self.show_changes();
    }

    /// Shows what was changed since the text was received.
    pub(super) fn show_changes(&self) {
        let received = self.address.received_text().map(Pairs::parse);
        let changes = received.map_or(Vec::new(), |received| changes(&received, &self.pairs));
        passing::changed::show(&self.dom, &changes);
    }
}
