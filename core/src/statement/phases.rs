//! Phases: from a time on, some keys have other values.

use super::name::{Name, behind_phase};
use super::reader::{MISSING, Reader};
use crate::keys::rows;
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
        if self.phased.is_empty() {
            return Some(phases);
        }
        for number in 1..=9_u8 {
            let stands = |place: &usize| {
                let (key, text) = self.pairs.at(*place);
                behind_phase(number, key).is_some() && !text.trim().is_empty()
            };
            if !self.phased.iter().any(stands) {
                continue;
            }
            let from = Name::from_of_phase(number);
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
        let key = |row: usize| Name::of_side(side, row).in_phase(number);
        let law = if self.text(key(rows::FIRE)).is_some() {
            self.choice(key(rows::FIRE)).and_then(FireLaw::of_word)
        } else {
            None
        };
        let changes = Changes {
            law,
            rate: self.quantity(key(rows::RATE)),
            half: self.quantity(key(rows::HALF)),
            p: self.quantity(key(rows::P)),
            q: self.quantity(key(rows::Q)),
            wastage: self.quantity(key(rows::WASTAGE)),
            support_area: self.quantity(key(rows::SUPPORT_AREA)),
            support_aimed: self.quantity(key(rows::SUPPORT_AIMED)),
        };
        // A new law brings a new unit for its rate, and needs its own keys.
        if let Some(law) = law.filter(|law| *law != FireLaw::None) {
            let is_needed = |name: &str| name == "rate" || law.law().needs.contains(&name);
            for row in [rows::HALF, rows::P, rows::Q, rows::RATE] {
                if is_needed(key(row).row().name) {
                    self.required_again(key(row));
                }
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
