//! Phases: from a time on, some keys have other values.

use super::name::{Name, behind_phase};
use super::reader::{MISSING, Reader};
use crate::laws::FireLaw;
use crate::problem::Problem;
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::terms::{Changes, Phase};

impl Reader<'_> {
    /// The phases, by number; `None` where a problem keeps one from being read.
    pub(super) fn phases(&mut self) -> Option<Vec<Phase<Quantity>>> {
        let mut phases = Vec::new();
        let mut whole = true;
        for number in 1..=9_u8 {
            let stands = |place: &usize| {
                let (key, text) = self.pairs.at(*place);
                behind_phase(number, key).is_some() && !text.trim().is_empty()
            };
            if !self.phased.iter().any(stands) {
                continue;
            }
            let from = Name::whole("from").in_phase(number);
            let from = self.required(from, "the time from which it holds");
            let changes = Both::of(|side: Side| self.changes(number, side));
            match from {
                Some(from) => phases.push(Phase {
                    number,
                    from,
                    changes,
                }),
                None => whole = false,
            }
        }
        whole.then_some(phases)
    }

    fn changes(&mut self, number: u8, side: Side) -> Changes<Quantity> {
        let key = |name: &'static str| Name::of_side(side, name).in_phase(number);
        let law = if self.text(key("fire")).is_some() {
            self.choice(key("fire")).and_then(FireLaw::of_word)
        } else {
            None
        };
        let changes = Changes {
            law,
            rate: self.quantity(key("rate")),
            half: self.quantity(key("half")),
            p: self.quantity(key("p")),
            q: self.quantity(key("q")),
            wastage: self.quantity(key("wastage")),
            support_area: self.quantity(key("support.area")),
            support_aimed: self.quantity(key("support.aimed")),
        };
        // A new law brings a new unit for its rate, and needs its own keys.
        if let Some(law) = law.filter(|law| *law != FireLaw::None) {
            let needed = law.law().needs.iter().copied().chain(["rate"]);
            for name in needed {
                self.required_again(key(name));
            }
        }
        changes
    }

    /// A key that a phase with a new law of fire must give.
    fn required_again(&mut self, key: Name) {
        if self.is_blank(key) {
            let problem = format!("`{key}` is missing: a new law of fire needs its own");
            self.problems
                .push((MISSING, Problem::missing(&key.to_string(), problem)));
        }
    }
}
