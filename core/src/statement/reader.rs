//! Collects what the pairs say, key by key, and their problems by place.

use super::name::Name;
use super::wrong::{key_problem, of_separator, read_quantity, within_limits, without_escape};
use crate::keys::{self, Kind};
use crate::order::sort_by;
use crate::pairs::{Pairs, trimmed};
use crate::problem::{Problem, is_hidden};
use crate::quantity::Quantity;
use std::borrow::Cow;

/// Collects what the pairs say, and their problems by place.
pub(super) struct Reader<'a> {
    pub(super) pairs: &'a Pairs,
    /// Where each key without a phase stands first, by its slot.
    places: [u16; keys::SLOTS],
    /// Where keys that begin with `phase` stand.
    pub(super) phased: Vec<usize>,
    /// Problems with their place in the link; missing keys come behind them all.
    pub(super) problems: Vec<(usize, Problem)>,
    /// Numbers in question, by their place, each with what is said where it is one too many.
    questions: Vec<(usize, Problem)>,
}

/// Numbers that can be in question at the same time.
const MOST_QUESTIONS: usize = 2;

/// The place of what does not stand in the link.
pub(super) const MISSING: usize = usize::MAX;

/// The same in so few bytes as hold the place of any pair of a text that is read.
const NOWHERE: u16 = u16::MAX;

impl<'a> Reader<'a> {
    pub(super) fn new(pairs: &'a Pairs) -> Reader<'a> {
        Reader {
            pairs,
            places: [NOWHERE; keys::SLOTS],
            phased: Vec::new(),
            problems: pairs.problems().into_iter().map(without_escape).collect(),
            questions: Vec::new(),
        }
    }

    pub(super) fn into_problems(mut self) -> Vec<Problem> {
        if self.problems.is_empty() && self.questions.len() <= MOST_QUESTIONS {
            return Vec::new();
        }
        sort_by(&mut self.questions, |a, b| a.0.cmp(&b.0));
        self.problems
            .extend(self.questions.into_iter().skip(MOST_QUESTIONS));
        sort_by(&mut self.problems, |a, b| a.0.cmp(&b.0));
        self.problems.into_iter().map(|(_, problem)| problem).collect()
    }

    /// Whether the text as text is right at `place`.
    pub(super) fn is_decoded(&self, place: usize) -> bool {
        !self.problems.iter().any(|(at, _)| *at == place)
    }

    /// Finds where each key stands: it is known, worked out, and stands once.
    pub(super) fn check_keys(&mut self) {
        let pairs = self.pairs;
        for (place, (key, text)) in pairs.iter().enumerate() {
            let slot = keys::slot(key);
            let twice = self.stands_before(place, key, slot);
            if !self.is_decoded(place) {
                continue;
            }
            if let Some(problem) = key_problem(slot.map(keys::row), key, text) {
                self.problems.push((place, problem));
            } else if twice {
                self.problems.push((
                    place,
                    Problem::at(key, text, format!("`{key}` stands twice: keep one")),
                ));
            }
        }
    }

    /// Whether the key at `place` already stands before it; notes the place. An unknown key is in trouble anyway.
    fn stands_before(&mut self, place: usize, key: &str, slot: Option<usize>) -> bool {
        if let Some(slot) = slot {
            let before = self.places[slot] != NOWHERE;
            if !before {
                self.places[slot] = place as u16;
            }
            return before;
        }
        let phased = key.starts_with("phase");
        let before = phased && self.phased.iter().any(|at| self.pairs.at(*at).0 == key);
        if phased {
            self.phased.push(place);
        }
        before
    }

    /// Where a key stands first.
    #[inline]
    pub(super) fn place(&self, name: Name) -> Option<usize> {
        match name.phase {
            None => {
                let place = self.places[name.slot()];
                (place != NOWHERE).then_some(usize::from(place))
            }
            Some(number) => self.place_in_phase(number, name),
        }
    }

    fn place_in_phase(&self, number: u8, name: Name) -> Option<usize> {
        let is_it = |place: &usize| name.is_in_phase(number, self.pairs.at(*place).0);
        self.phased.iter().copied().find(is_it)
    }

    /// Whether a key is absent or its text empty.
    pub(super) fn is_blank(&self, name: Name) -> bool {
        self.place(name)
            .is_none_or(|place| trimmed(self.pairs.text_at(place)).is_empty())
    }

    /// The text of a key with its outer blanks gone, and its place; `None` where it is empty, absent, or already in
    /// trouble.
    // Most keys are absent, which is to be seen at once; in the page its size counts more.
    #[cfg_attr(not(target_family = "wasm"), inline(always))]
    pub(super) fn text(&self, name: Name) -> Option<(usize, &'a str)> {
        self.place(name).and_then(|place| self.text_at(place))
    }

    fn text_at(&self, place: usize) -> Option<(usize, &'a str)> {
        let text = trimmed(self.pairs.text_at(place));
        (!text.is_empty() && self.is_decoded(place)).then_some((place, text))
    }

    /// A problem at `key`, in its place.
    pub(super) fn report(&mut self, key: Name, problem: impl Into<String>) {
        if let Some((place, text)) = self.text(key) {
            self.problems
                .push((place, Problem::at(&key.to_string(), text, problem)));
        }
    }

    pub(super) fn free_text(&mut self, key: Name) -> String {
        let Some((_, text)) = self.text(key) else {
            return String::new();
        };
        let Kind::Text(most) = key.row().kind else {
            return String::new();
        };
        if let Some(hidden) = text.chars().find(|letter| is_hidden(*letter)) {
            let code = u32::from(hidden);
            self.report(
                key,
                format!("holds a control or direction character (U+{code:04X}): leave it out"),
            );
        }
        let length = text.chars().count();
        if length > most {
            self.report(key, format!("is {length} characters long; write at most {most}"));
        }
        text.into()
    }

    /// A free text, or `default` where none is given.
    pub(super) fn text_or(&mut self, key: Name, default: &'static str) -> Cow<'static, str> {
        match self.free_text(key) {
            text if text.is_empty() => default.into(),
            text => text.into(),
        }
    }

    pub(super) fn choice(&mut self, key: Name) -> Option<&'static str> {
        let (_, text) = self.text(key)?;
        let Kind::Choice(words) = key.row().kind else {
            return None;
        };
        let word = words.iter().find(|word| **word == text).copied();
        if word.is_none() {
            let problem = of_separator(text).unwrap_or_else(|| match key.row().name {
                "v" => "this copy reads version 1 of the link only: write 1".into(),
                _ => format!("write one of {}", words.join(", ")),
            });
            self.report(key, problem);
        }
        word
    }

    /// A quantity within its key's limits; `None` where it is absent or in trouble.
    #[inline]
    pub(super) fn quantity(&mut self, key: Name) -> Option<Quantity> {
        let (_, text) = self.text(key)?;
        self.quantity_of(key, text)
    }

    fn quantity_of(&mut self, key: Name, text: &str) -> Option<Quantity> {
        match read_quantity(text).and_then(|quantity| within_limits(key.row(), quantity)) {
            Ok(quantity @ Quantity::Number(_)) => Some(quantity),
            Ok(quantity @ Quantity::Question { .. }) => {
                self.note_question(key, None, text);
                Some(quantity)
            }
            Ok(Quantity::Interval { .. }) => {
                self.report(
                    key,
                    "an interval is known, but not yet worked out by this copy: write one number",
                );
                None
            }
            Err(problem) => {
                self.report(key, of_separator(text).unwrap_or(problem));
                None
            }
        }
    }

    /// Notes that a number is in question: the third is one too many.
    pub(super) fn note_question(&mut self, key: Name, item: Option<u32>, found: &str) {
        let Some(place) = self.place(key) else { return };
        let problem = "is one number in question too many: one makes a list of values, two make a map, and more cannot be asked for at a time";
        let problem = Problem {
            item,
            ..Problem::at(&key.to_string(), found, problem)
        };
        self.questions.push((place, problem));
    }

    /// Whether any number that has an effect is in question.
    pub(super) fn asks(&self) -> bool {
        !self.questions.is_empty()
    }

    /// Reads by `read` what is checked and then has no effect: numbers in question there are not asked for.
    pub(super) fn without_effect(&mut self, read: impl FnOnce(&mut Self)) {
        let count = self.questions.len();
        read(self);
        self.questions.truncate(count);
    }

    pub(super) fn required(&mut self, key: Name, what: &str) -> Option<Quantity> {
        let quantity = self.quantity(key);
        if quantity.is_none() && self.is_blank(key) {
            self.problems.push((
                MISSING,
                Problem::missing(&key.to_string(), format!("`{key}` is missing: give {what}")),
            ));
        }
        quantity
    }
}
