//! A changed unit of time: every number stands as it was and means something else, so the page offers to restate them.

use crate::dom::Dom;
use aftercount_core::converted::{carry_time, converted};
use aftercount_core::keys::{Kind, find};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::TimeUnit;
use aftercount_core::words::entry;

/// The offer, while it stands.
pub(crate) struct UnitChange {
    dom: Dom,
    /// The unit that the numbers were written in.
    from: Option<TimeUnit>,
}

impl UnitChange {
    pub(crate) fn new(dom: &Dom) -> UnitChange {
        UnitChange {
            dom: dom.clone(),
            from: None,
        }
    }

    /// The unit is about to become another than that of `before`, or did: from which to which is read from both.
    pub(crate) fn changed(&mut self, before: &Pairs, now: &Pairs) {
        let (Some(old), Some(new)) = (self.from.or(unit(before)), unit(now)) else {
            self.withdraw();
            return;
        };
        if old == new || !carry_time(now) {
            self.withdraw();
            return;
        }
        self.from = Some(old);
        self.say(&entry::unit_changed(old, new));
        self.dom.set_text("unit.convert", &entry::convert(new));
        self.dom.set_shown("unit.acts", true);
    }

    /// The pairs with every rate and time restated; `None` where that cannot be done, which is then said.
    pub(crate) fn convert(&mut self, pairs: &Pairs) -> Option<Pairs> {
        let (old, new) = self.from.zip(unit(pairs))?;
        match converted(pairs, old, new) {
            Ok(restated) => {
                self.withdraw();
                Some(restated)
            }
            Err(keys) => {
                self.say(&entry::not_converted(&keys));
                None
            }
        }
    }

    /// A field was typed in: a number that is written now is in the new unit.
    pub(crate) fn typed(&mut self, key: &str) {
        if !find(key).is_some_and(|row| matches!(row.kind, Kind::Text(_))) {
            self.withdraw();
        }
    }

    /// Takes the offer back.
    pub(crate) fn withdraw(&mut self) {
        if self.from.take().is_some() {
            self.say("");
            self.dom.set_shown("unit.acts", false);
        }
    }

    fn say(&self, words: &str) {
        self.dom.set_words("unit.changed", words);
    }
}

/// The unit of time that a text names; `None` where it names none that is known.
pub(crate) fn unit(pairs: &Pairs) -> Option<TimeUnit> {
    let word = pairs.get("unit").map(str::trim).filter(|word| !word.is_empty());
    TimeUnit::of_word(word.unwrap_or("h"))
}
