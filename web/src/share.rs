//! A rate entered as the per cent of the enemy that it takes per unit of time at the start.

use crate::dom::Dom;
use crate::form;
use crate::unit_change::unit;
use aftercount_core::pairs::Pairs;
use aftercount_core::share::{per_cent_of_rate, rate_of_per_cent};
use aftercount_core::sides::{Both, Side};
use aftercount_core::statement::Statement;
use aftercount_core::words::entry;
use web_sys::HtmlInputElement;

/// What the rate of a law is worked out from beside the strengths, without the side's letter.
const OF_THE_LAW: [&str; 4] = ["fire", "half", "p", "q"];

/// The small entries beside both rates.
pub(crate) struct Shares {
    dom: Dom,
    open: Both<bool>,
    /// The number that was typed into an entry, and the rate that was written for it.
    meant: Both<Option<(String, String)>>,
    /// What is wrong with an entry, and not shown yet.
    waiting: Option<(Side, String)>,
}

impl Shares {
    pub(crate) fn new(dom: &Dom) -> Shares {
        Shares {
            dom: dom.clone(),
            open: Both::default(),
            meant: Both::default(),
            waiting: None,
        }
    }

    /// The button beside a rate: discloses the entry, or closes it. The id of what then has the focus.
    pub(crate) fn toggle(&mut self, pairs: &Pairs, side: Side, good: Option<&Statement>) -> String {
        self.open[side] = !self.open[side];
        let open = self.open[side];
        let id = |part: &str| format!("{}.share{part}", side.letter());
        self.dom.set_shown(&id(".field"), open);
        self.dom
            .set_attribute(&id(".open"), "aria-expanded", if open { "true" } else { "false" });
        self.settle(side);
        self.fill(pairs, side, good);
        if open { id("") } else { id(".open") }
    }

    /// What is to stand as the rate for an entry: the rate, as it is written; of an entry that is no number its own text as
    /// per cent, which no rate is, and of one that cannot be turned into a rate nothing, and why waits to be shown: so no
    /// rate stands that was not meant. Where none could be turned into a rate, that which stands is kept.
    pub(crate) fn typed(&mut self, pairs: &Pairs, side: Side, text: &str) -> String {
        self.settle(side);
        self.meant[side] = None;
        let plain = text.trim().trim_end_matches('%').trim_end();
        if plain.is_empty() {
            return String::new();
        }
        let rate = match rate_of_per_cent(pairs, side, text) {
            Ok(rate) => rate,
            Err(problem) => {
                self.waiting = Some((side, problem));
                let stands = pairs.get(&format!("{}.rate", side.letter())).unwrap_or_default();
                if !stands.is_empty() && rate_of_per_cent(pairs, side, "1").is_err() {
                    return stands.to_owned();
                }
                String::new()
            }
        };
        if aftercount_core::number::read(plain).is_err() {
            return format!("{plain} %");
        }
        self.meant[side] = Some((text.to_owned(), rate.clone()));
        rate
    }

    /// The rate for what stands in an open entry, once the text of `key` has changed: where the law of fire did, since its
    /// rate means something else then, or where no rate could be worked out before. `None` where the rate stays, also
    /// because it was written by other means since.
    pub(crate) fn anew(&mut self, pairs: &Pairs, side: Side, key: &str) -> Option<String> {
        let of_the_law = key
            .strip_prefix(side.letter())
            .and_then(|rest| rest.strip_prefix('.'))
            .is_some_and(|name| OF_THE_LAW.contains(&name));
        let (text, old) = self.meant(pairs, side).filter(|_| self.open[side])?;
        if !(of_the_law || old.is_empty()) {
            return None;
        }
        let (text, rate) = (text.to_owned(), rate_of_per_cent(pairs, side, text).ok()?);
        self.meant[side] = Some((text, rate.clone()));
        self.settle(side);
        Some(rate)
    }

    /// What was typed into an entry, and its rate, as long as that stands.
    fn meant<'a>(&'a self, pairs: &Pairs, side: Side) -> Option<(&'a str, &'a str)> {
        let rate = pairs.get(&format!("{}.rate", side.letter())).unwrap_or_default();
        let (text, written) = self.meant[side].as_ref()?;
        (written == rate).then_some((text.as_str(), written.as_str()))
    }

    /// Shows what waits.
    pub(crate) fn show_waiting(&mut self) {
        if let Some((side, problem)) = self.waiting.take() {
            let id = format!("{}.share", side.letter());
            self.dom
                .set_words(&format!("{id}.problem"), &format!("{problem}."));
            self.dom.set_shown(&format!("{id}.problem"), true);
            self.dom.set_attribute(&id, "aria-invalid", "true");
        }
    }

    /// The labels, and in the entries what the rates of the text as it stands take, where there is one.
    pub(crate) fn show(&self, pairs: &Pairs, good: Option<&Statement>) {
        let unit = unit(pairs).unwrap_or_default();
        for side in Side::BOTH {
            let enemy = form::name_of(pairs, side.enemy().letter());
            let label = format!("{}.share.label", side.letter());
            self.dom.set_text(&label, &entry::per_cent(&enemy, unit));
            let focused = self.dom.document.active_element().map(|element| element.id());
            if focused.as_deref() != Some(&format!("{}.share", side.letter())) {
                self.fill(pairs, side, good);
            }
        }
    }

    /// What the rate takes; where that cannot be worked out now, what was typed and is still to be.
    fn fill(&self, pairs: &Pairs, side: Side, good: Option<&Statement>) {
        let id = format!("{}.share", side.letter());
        let words = good.map(|statement| per_cent_of_rate(statement, side).unwrap_or_default());
        let typed = || self.meant(pairs, side).map(|(text, _)| text.to_owned());
        let words = words.or_else(typed).filter(|_| self.open[side]);
        if let Some(input) = self.dom.typed::<HtmlInputElement>(&id) {
            input.set_value(words.as_deref().unwrap_or_default());
        }
    }

    /// Takes away what was said of an entry.
    fn settle(&mut self, side: Side) {
        self.waiting = None;
        let id = format!("{}.share", side.letter());
        self.dom.set_text(&format!("{id}.problem"), "");
        self.dom.set_shown(&format!("{id}.problem"), false);
        if let Some(input) = self.dom.element(&id) {
            // Taking an attribute away cannot fail.
            let _ = input.remove_attribute("aria-invalid");
        }
    }
}
