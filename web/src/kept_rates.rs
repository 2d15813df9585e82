//! Rates that were kept when the law of fire changed: their unit is another one now, and the page says so.

use crate::dom::Dom;
use crate::law_fields::law_of;
use aftercount_core::laws::RateMeaning;
use aftercount_core::pairs::Pairs;
use aftercount_core::sides::{Both, Side};

const KEPT: &str = "Kept from another law of fire: the number is the same, its unit is not.";

/// What the rate of each side was measured in when it was written.
pub(crate) type WrittenAs = Both<Option<RateMeaning>>;

/// What rates are measured in, in the order in which a number stands for them.
const MEANINGS: [RateMeaning; 5] = [
    RateMeaning::TargetsPerShooter,
    RateMeaning::FractionPerShooter,
    RateMeaning::Fraction,
    RateMeaning::TargetsPerShooterInPlenty,
    RateMeaning::PerPowers,
];

/// The number of what both rates were written as, for the browser's history; 0 for none in particular.
pub(crate) fn number(written_as: WrittenAs) -> usize {
    let place = |side: Side| {
        let meaning = written_as[side];
        let place = MEANINGS.iter().position(|known| Some(*known) == meaning);
        place.map_or(0, |place| place + 1)
    };
    place(Side::X) * (MEANINGS.len() + 1) + place(Side::Y)
}

/// What a [`number`] stands for, whoever wrote it.
pub(crate) fn of_number(number: usize) -> WrittenAs {
    let meaning = |number: usize| MEANINGS.get(number.wrapping_sub(1)).copied();
    let all = MEANINGS.len() + 1;
    Both {
        x: meaning(number / all),
        y: meaning(number % all),
    }
}

/// For each side the text of its rate, and what it was written as.
pub(crate) struct KeptRates {
    dom: Dom,
    texts: Both<String>,
    written_as: WrittenAs,
}

impl KeptRates {
    pub(crate) fn new(dom: &Dom) -> KeptRates {
        KeptRates {
            dom: dom.clone(),
            texts: Both::default(),
            written_as: Both::default(),
        }
    }

    /// A whole text came in: whoever wrote it chose law and rate together.
    pub(crate) fn start(&mut self, pairs: &Pairs) {
        for side in Side::BOTH {
            self.written(pairs, side);
        }
        self.follow(pairs);
    }

    /// A text comes back that was shown before: its rates are what they were then.
    pub(crate) fn come_back(&mut self, pairs: &Pairs, written_as: WrittenAs) {
        self.restated(pairs);
        self.written_as = written_as;
        self.follow(pairs);
    }

    /// What the rates were written as.
    pub(crate) fn written_as(&self) -> WrittenAs {
        self.written_as
    }

    /// The rate of a side was written for the law that it has now, also where its text is the same as before.
    pub(crate) fn written(&mut self, pairs: &Pairs, side: Side) {
        self.texts[side] = text(pairs, side).to_owned();
        self.written_as[side] = meaning(pairs, side);
    }

    /// Both rates are about to be restated in another unit of time: a rate that was kept still is.
    pub(crate) fn restated(&mut self, pairs: &Pairs) {
        self.texts = Both::of(|side| text(pairs, side).to_owned());
    }

    /// Shows what was kept. Whoever wrote another rate, by whatever means, wrote it for the law as it stands.
    pub(crate) fn follow(&mut self, pairs: &Pairs) {
        for side in Side::BOTH {
            if self.texts[side] != text(pairs, side) {
                self.written(pairs, side);
            }
            self.show(pairs, side);
        }
    }

    fn show(&self, pairs: &Pairs, side: Side) {
        let (now, then) = (meaning(pairs, side), self.written_as[side]);
        let written = !self.texts[side].is_empty();
        let changed = written && now.is_some() && then.is_some() && now != then;
        let id = format!("{}.rate.kept", side.letter());
        // The field's description names this element, and would be read out with its words also while it is hidden.
        self.dom.set_text(&id, if changed { KEPT } else { "" });
        self.dom.set_shown(&id, changed);
    }
}

fn text(pairs: &Pairs, side: Side) -> &str {
    pairs.get(&format!("{}.rate", side.letter())).unwrap_or_default()
}

/// What the side's rate is measured in; `None` where its law has none, or is not known.
fn meaning(pairs: &Pairs, side: Side) -> Option<RateMeaning> {
    let rate = law_of(pairs, side)?.law().rate;
    (rate != RateMeaning::NoRate).then_some(rate)
}

#[cfg(test)]
mod tests {
    use super::*;
    use aftercount_core::laws::FireLaw;

    #[test]
    fn a_number_stands_for_every_pair_of_meanings() {
        let meanings =
            FireLaw::ALL.map(|law| Some(law.law().rate).filter(|rate| *rate != RateMeaning::NoRate));
        for x in meanings {
            for y in meanings {
                let written_as = Both { x, y };
                assert_eq!(of_number(number(written_as)), written_as);
            }
        }
        // Another page may have written any.
        assert_eq!(of_number(9_999).x, None);
    }
}
