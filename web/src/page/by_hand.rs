//! By hand: handles on the pictures that write the text.

use super::{Cause, Page};
use crate::form;
use crate::listen::After;
use aftercount_core::pairs::Pairs;

impl Page {
    /// A pointer is down on a handle; whether it is held now.
    pub(crate) fn take_handle(&mut self, name: &str) -> bool {
        let Some(good) = self.good.as_ref().filter(|_| self.current) else {
            return false;
        };
        let (strength, orbit) = self.plates.fields();
        let held = self.handles.take(name, good, strength, orbit);
        if held {
            // What was typed before is an entry of its own.
            self.close_entry();
        }
        held
    }

    /// The id of the picture on which something is dragged.
    pub(crate) fn dragged_on(&self) -> Option<&'static str> {
        self.handles.dragged_on()
    }

    /// The pointer that holds a handle is at a pixel of the picture.
    pub(crate) fn drag_to(&mut self, at: (f64, f64)) {
        let good = self.good.as_ref().filter(|_| self.current);
        if let Some(changed) = good.and_then(|good| self.handles.dragged(&self.pairs, good, at)) {
            self.take_by_hand(changed);
        }
    }

    /// The handle is let go: one entry of the history, and pictures on axes of their own again.
    pub(crate) fn let_handle_go(&mut self) {
        if self.handles.let_go() {
            self.work_out(Cause::Whole);
            self.close_entry();
        }
    }

    /// A key on a handle; whether it was one of its keys.
    pub(crate) fn handle_key(&mut self, name: &str, key: &str) -> bool {
        let good = self.good.as_ref().filter(|_| self.current);
        let changed = good.and_then(|good| self.handles.key(&self.pairs, good, name, key));
        let moved = changed.is_some();
        if let Some(changed) = changed {
            self.take_by_hand(changed);
        }
        moved
    }

    /// A handle is left with the focus: its keys were one entry.
    pub(crate) fn handle_left(&mut self) -> After {
        self.close_entry();
        After::Nothing
    }

    fn take_by_hand(&mut self, changed: Pairs) {
        self.demo = false;
        self.unit_change.withdraw();
        self.pairs = changed;
        form::fill(&self.dom, &self.pairs);
        self.changed(Cause::Typed);
    }
}
