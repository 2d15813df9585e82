//! The entries of the history, and the address that holds them.

use super::Page;
use crate::address::Step;
use crate::listen::After;
use crate::live::QUIET;
use aftercount_core::pairs::Pairs;

impl Page {
    pub(super) fn close_entry(&mut self) {
        self.address.close();
        self.write_later();
    }

    /// Waits until the address may be written, where it is behind.
    pub(super) fn write_later(&mut self) {
        self.write.stop();
        if let Some(wait) = self.address.due() {
            self.write.start(wait);
        }
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

    pub(super) fn show_steps(&self) {
        let (back, on) = self.address.can_step();
        for (id, can) in [("undo", back), ("redo", on)] {
            // A disabled button would throw the focus away that its own press gave it.
            self.dom
                .set_attribute(id, "aria-disabled", if can { "false" } else { "true" });
        }
    }
}
