//! The fields that only some laws of fire need: shown where the chosen one needs them, or where they hold what is to be
//! put right. What a field holds stays in the text while it is out of sight. And the law's own words once more, for where
//! the list has no room for them.

use crate::dom::Dom;
use aftercount_core::laws::FireLaw;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::Problem;
use aftercount_core::sides::Side;

/// The most letters of a law's words that a list on a small screen has room for.
const ROOM: usize = 36;

/// The fields, and which of them have a problem.
pub(crate) struct LawFields {
    dom: Dom,
    troubled: Vec<String>,
}

impl LawFields {
    pub(crate) fn new(dom: &Dom) -> LawFields {
        LawFields {
            dom: dom.clone(),
            troubled: Vec::new(),
        }
    }

    /// Shows what the laws of `pairs` need, whose problems are these.
    pub(crate) fn show(&mut self, pairs: &Pairs, problems: &[Problem]) {
        self.troubled = problems
            .iter()
            .filter_map(|problem| problem.key.clone())
            .collect();
        self.show_again(pairs);
    }

    /// The same, once a field has been left: one that was put right stays as long as somebody is in it.
    pub(crate) fn show_again(&self, pairs: &Pairs) {
        let focused = self.dom.document.active_element().map(|element| element.id());
        for side in Side::BOTH {
            let law = law_of(pairs, side);
            let words = law.map_or("", |law| law.law().label);
            let chosen = format!("{}.fire.chosen", side.letter());
            self.dom.set_text(&chosen, words);
            self.dom.set_attribute(
                &chosen,
                "data-long",
                if words.chars().count() > ROOM {
                    "true"
                } else {
                    "false"
                },
            );
            for name in names() {
                let key = format!("{}.{name}", side.letter());
                let needed = law.is_some_and(|law| law.law().needs.contains(&name));
                let shown = needed || self.troubled.contains(&key) || focused.as_ref() == Some(&key);
                self.dom.set_shown(&format!("{key}.field"), shown);
            }
        }
    }
}

/// The law of fire that the text gives a side; `None` where its word is not known.
pub(crate) fn law_of(pairs: &Pairs, side: Side) -> Option<FireLaw> {
    let word = pairs
        .get(&format!("{}.fire", side.letter()))
        .map(str::trim)
        .filter(|word| !word.is_empty());
    FireLaw::of_word(word.unwrap_or("aimed"))
}

/// What any law needs beside its rate.
pub(crate) fn names() -> impl Iterator<Item = &'static str> {
    FireLaw::ALL
        .into_iter()
        .flat_map(|law| law.law().needs.iter().copied())
}
