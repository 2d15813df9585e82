//! What would reverse the outcome, beside all else that the page does.

use super::Page;
use crate::form;
use crate::listen::After;

impl Page {
    /// Goes on with the search for a slice.
    pub(super) fn reverse_on(&mut self) {
        self.reverse_on.stop();
        if self.reversals.go_on() {
            self.reverse_on.start(0);
        } else {
            self.mark_what_rolls();
        }
    }

    /// The line "Nearest reversal: …", once it is known of the text as it stands.
    pub(crate) fn nearest_reversal(&self) -> Option<&str> {
        self.reversals.line().filter(|_| self.current)
    }

    /// Puts the value of a row of the table into its field.
    pub(crate) fn put_reversal(&mut self, row: usize) -> After {
        let Some((field, changed)) = self.reversals.putting(&self.pairs, row) else {
            return After::Nothing;
        };
        self.change_at_once(|pairs| *pairs = changed);
        form::fill(&self.dom, &self.pairs);
        self.open_what_holds_values();
        After::GoTo(field)
    }
}
