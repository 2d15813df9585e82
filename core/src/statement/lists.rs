//! Lists of reserves and of flows.

use super::name::Name;
use super::reader::Reader;
use super::wrong::{of_separator, plain, read_quantity};
use crate::keys::LARGEST;
use crate::list_part::typed;
use crate::problem::Problem;
use crate::quantity::Quantity;
use crate::terms::{Flow, Join};

/// Items of a list that are worked out at most.
const LONGEST_LIST: usize = 20;

/// How an item of reserves, and one of flows, is written.
const JOIN: &str = "write it as size@time, such as 64@4";
const FLOW: &str = "write it as rate@from/to, such as 5@2/8, or 5@2/ without an end";

/// A number of an item.
struct Part {
    name: &'static str,
    form: &'static str,
    low: f64,
}

const SIZE: Part = Part {
    name: "size",
    form: JOIN,
    low: -LARGEST,
};
const TIME: Part = Part {
    name: "time",
    form: JOIN,
    low: 0.0,
};
const RATE: Part = Part {
    name: "rate",
    form: FLOW,
    low: 0.0,
};
const FROM: Part = Part {
    name: "time from which it flows",
    form: FLOW,
    low: 0.0,
};
const TO: Part = Part {
    name: "time at which it ends",
    form: FLOW,
    low: 0.0,
};

/// What to write where another mark than a comma stands behind an item.
fn of_mark(text: &str) -> Option<String> {
    let comma = || {
        text.contains(';')
            .then(|| "write a comma for the `;` between items".into())
    };
    of_separator(text).or_else(comma)
}

impl<'a> Reader<'a> {
    /// The items of a list, split after decoding, each with its number.
    pub(super) fn items(&self, key: Name) -> Vec<(u32, &'a str)> {
        let Some((_, text)) = self.text(key) else {
            return Vec::new();
        };
        (1..).zip(text.split(',').map(str::trim)).collect()
    }

    pub(super) fn report_item(&mut self, key: Name, item: u32, found: &str, problem: impl Into<String>) {
        // Not by its text: that is no longer to be had once an item before it is in trouble, and each is reported.
        if let Some(place) = self.place(key) {
            let problem = Problem {
                item: Some(item),
                ..Problem::at(&key.to_string(), &typed(found), problem)
            };
            self.problems.push((place, problem));
        }
    }

    /// A quantity of an item, a number or one in question.
    fn part(&mut self, key: Name, item: (u32, &str), text: &str, part: &Part) -> Option<Quantity> {
        let problem = match read_quantity(text) {
            Ok(Quantity::Interval { .. }) => {
                "an interval is known, but not yet worked out by this copy: write one number".into()
            }
            Ok(quantity) if quantity.numbers().any(|value| value < part.low) => {
                format!("`{}` must be {} or more", text.trim(), part.low)
            }
            Ok(quantity) if quantity.numbers().any(|value| value.abs() > LARGEST) => {
                format!("`{}` must be at most {}", text.trim(), plain(LARGEST))
            }
            Ok(quantity) => {
                if quantity.is_question() {
                    self.note_question(key, Some(item.0), item.1);
                }
                return Some(quantity);
            }
            Err(_) if text.trim().is_empty() => format!("has no {}: {}", part.name, part.form),
            Err(problem) => {
                let typed = typed(text.trim());
                // What is said of an escape would help nobody who has typed a comma.
                let problem = read_quantity(&typed).err().unwrap_or(problem);
                of_mark(text).unwrap_or_else(|| format!("`{typed}`: {problem}"))
            }
        };
        self.report_item(key, item.0, item.1, problem);
        None
    }

    /// Whether a list is short enough to be worked out.
    fn is_short(&mut self, key: Name, items: &[(u32, &str)]) -> bool {
        let short = items.len() <= LONGEST_LIST;
        if !short {
            self.report(
                key,
                format!("has {} items; at most {LONGEST_LIST} are worked out", items.len()),
            );
        }
        short
    }

    pub(super) fn joins(&mut self, key: Name) -> Vec<Join<Quantity>> {
        let items = self.items(key);
        if !self.is_short(key, &items) {
            return Vec::new();
        }
        let mut joins = Vec::new();
        for item in items {
            let Some((size, time)) = item.1.split_once('@') else {
                self.report_item(
                    key,
                    item.0,
                    item.1,
                    of_mark(item.1).unwrap_or_else(|| JOIN.into()),
                );
                continue;
            };
            let size = self.part(key, item, size, &SIZE);
            let time = self.part(key, item, time, &TIME);
            joins.extend(size.zip(time).map(|(size, time)| Join { size, time }));
        }
        joins
    }

    pub(super) fn flows(&mut self, key: Name) -> Vec<Flow<Quantity>> {
        let items = self.items(key);
        if !self.is_short(key, &items) {
            return Vec::new();
        }
        let mut flows = Vec::new();
        for item in items {
            let parts = item
                .1
                .split_once('@')
                .and_then(|(rate, when)| Some((rate, when.split_once('/')?)));
            let Some((rate, (from, to))) = parts else {
                self.report_item(
                    key,
                    item.0,
                    item.1,
                    of_mark(item.1).unwrap_or_else(|| FLOW.into()),
                );
                continue;
            };
            let rate = self.part(key, item, rate, &RATE);
            let from = self.part(key, item, from, &FROM);
            let endless = to.trim().is_empty();
            let to = if endless {
                None
            } else {
                self.part(key, item, to, &TO)
            };
            let (Some(rate), Some(from)) = (rate, from) else {
                continue;
            };
            let ends_first = |to: f64| from.numbers().any(|from| to <= from);
            if to.is_some_and(|to| to.numbers().any(ends_first)) {
                self.report_item(key, item.0, item.1, "must end after it begins");
                continue;
            }
            if endless || to.is_some() {
                flows.push(Flow { rate, from, to });
            }
        }
        flows
    }
}
