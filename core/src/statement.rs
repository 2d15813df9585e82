//! What the pairs say, or the list of what is wrong with them.

use crate::keys::{self, Key, Kind, Unit};
use crate::laws::FireLaw;
use crate::number;
use crate::pairs::{LONGEST_LINK, Pairs};
use crate::problem::{Problem, is_hidden};
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::terms::{Engagement, Fire, SideTerms, Terms};
use std::collections::BTreeMap;

/// The unit of every time and rate of a link.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum TimeUnit {
    /// `s`
    Second,
    /// `min`
    Minute,
    /// `h`
    #[default]
    Hour,
    /// `d`
    Day,
    /// `wk`
    Week,
}

/// Numbers for slots, in place of those of the statement.
pub type Values = BTreeMap<String, f64>;

/// What a link says, in order.
#[derive(Clone, Debug, PartialEq)]
pub struct Statement {
    /// A name for the engagement; empty where none is given, as the other free texts.
    pub title: String,
    /// Assumptions and sources.
    pub note: String,
    /// A handling marking.
    pub marking: String,
    /// The unit of time.
    pub unit: TimeUnit,
    /// What strength counts, in the plural.
    pub counted: String,
    /// What the sides are called.
    pub names: Both<String>,
    /// Its quantities.
    pub terms: Terms<Quantity>,
}

impl TimeUnit {
    /// The unit of a word of the link.
    pub fn of_word(word: &str) -> Option<TimeUnit> {
        match word {
            "s" => Some(TimeUnit::Second),
            "min" => Some(TimeUnit::Minute),
            "h" => Some(TimeUnit::Hour),
            "d" => Some(TimeUnit::Day),
            "wk" => Some(TimeUnit::Week),
            _ => None,
        }
    }

    /// The unit as it stands behind a number, and in the link.
    pub fn symbol(self) -> &'static str {
        match self {
            TimeUnit::Second => "s",
            TimeUnit::Minute => "min",
            TimeUnit::Hour => "h",
            TimeUnit::Day => "d",
            TimeUnit::Week => "wk",
        }
    }
}

impl Statement {
    /// Reads what `pairs` say.
    ///
    /// # Errors
    /// Every problem at once, in the order of the link, then the missing keys; never an empty list.
    pub fn read(pairs: &Pairs) -> Result<Statement, Vec<Problem>> {
        if let Some(problem) = whole_problem(pairs) {
            return Err(vec![problem]);
        }
        let mut reader = Reader::new(pairs);
        reader.check_keys();
        let statement = reader.statement();
        let problems = reader.into_problems();
        match statement {
            Some(statement) if problems.is_empty() => Ok(statement),
            _ => Err(problems),
        }
    }

    /// The engagement in plain numbers: those of `values` in their slots, the statement's own in the others.
    ///
    /// This version reads plain numbers only, so every slot has one; an interval counts as its likeliest or middle
    /// value and a question without a number as 0 until they are worked out.
    pub fn engagement(&self, values: &Values) -> Engagement {
        self.terms
            .map(|slot, quantity| match (values.get(slot), quantity) {
                (Some(value), _) | (None, Quantity::Number(value)) => *value,
                (None, Quantity::Interval { low, likely, high }) => likely.unwrap_or(low / 2.0 + high / 2.0),
                (None, Quantity::Question { now, .. }) => now.unwrap_or(0.0),
            })
    }
}

/// Collects what the pairs say, and their problems by place.
struct Reader<'a> {
    pairs: &'a Pairs,
    /// Problems with their place in the link; missing keys come behind them all.
    problems: Vec<(usize, Problem)>,
}

/// The place of what does not stand in the link.
const MISSING: usize = usize::MAX;

impl<'a> Reader<'a> {
    fn new(pairs: &'a Pairs) -> Reader<'a> {
        Reader {
            pairs,
            problems: pairs.problems(),
        }
    }

    fn into_problems(mut self) -> Vec<Problem> {
        self.problems.sort_by_key(|(place, _)| *place);
        self.problems.into_iter().map(|(_, problem)| problem).collect()
    }

    /// Whether the text as text is right at `place`.
    fn is_decoded(&self, place: usize) -> bool {
        !self.problems.iter().any(|(at, _)| *at == place)
    }

    /// Each key is known, worked out, and stands once.
    fn check_keys(&mut self) {
        let pairs: Vec<(&str, &str)> = self.pairs.iter().collect();
        for (place, (key, text)) in pairs.iter().enumerate() {
            if !self.is_decoded(place) {
                continue;
            }
            if let Some(problem) = key_problem(key, text) {
                self.problems.push((place, problem));
            } else if pairs[..place].iter().any(|(before, _)| before == key) {
                self.problems.push((
                    place,
                    Problem::at(key, text, format!("`{key}` stands twice: keep one")),
                ));
            }
        }
    }

    /// The text of a key with its outer blanks gone, and its place; `None` where it is empty, absent, or already in
    /// trouble.
    fn text(&self, key: &str) -> Option<(usize, &'a str)> {
        let (place, (_, text)) = self
            .pairs
            .iter()
            .enumerate()
            .find(|(_, (name, _))| *name == key)?;
        let text = text.trim();
        (!text.is_empty() && self.is_decoded(place)).then_some((place, text))
    }

    fn statement(&mut self) -> Option<Statement> {
        let title = self.free_text("title");
        let note = self.free_text("note");
        let marking = self.free_text("marking");
        let unit = self
            .choice("unit")
            .and_then(TimeUnit::of_word)
            .unwrap_or_default();
        let counted = self.free_text("counted");
        let counted = if counted.is_empty() {
            "combatants".into()
        } else {
            counted
        };
        let names = Both::of(|side| {
            let name = self.free_text(&format!("{}.name", side.letter()));
            if name.is_empty() {
                format!("Side {}", side.letter().to_uppercase())
            } else {
                name
            }
        });
        let until = self.quantity("until");
        for key in ["view", "paper", "v"] {
            self.choice(key);
        }
        let x = self.side(Side::X);
        let y = self.side(Side::Y);
        let terms = Terms {
            sides: Both { x: x?, y: y? },
            until,
        };
        Some(Statement {
            title,
            note,
            marking,
            unit,
            counted,
            names,
            terms,
        })
    }

    fn side(&mut self, side: Side) -> Option<SideTerms<Quantity>> {
        let letter = side.letter();
        let key = |name: &str| format!("{letter}.{name}");
        let start = self.required(&key("start"), "a strength at the start");
        let law = self.fire_law(&key("fire"));
        let rate = match law {
            Some(FireLaw::None) => Some(Quantity::Number(0.0)),
            _ => self.required(&key("rate"), "a rate"),
        };
        let lost = self.quantity(&key("lost")).unwrap_or(Quantity::Number(0.0));
        let break_point = self.quantity(&key("break")).unwrap_or(Quantity::Number(1.0));
        let law = law?;
        let mut needed = |name: &str, what: &str| {
            if law.law().needs.contains(&name) {
                self.required(&key(name), what).map(Some)
            } else {
                Some(None)
            }
        };
        let half = needed("half", "the number of targets at which half the time is search");
        let p = needed("p", "the exponent on the shooters");
        let q = needed("q", "the exponent on the targets");
        let fire = Fire {
            law,
            rate: rate?,
            half: half?,
            p: p?,
            q: q?,
        };
        Some(SideTerms {
            start: start?,
            lost,
            fire,
            break_point,
        })
    }

    fn fire_law(&mut self, key: &str) -> Option<FireLaw> {
        let word = match self.text(key) {
            Some(_) => self.choice(key)?,
            None if self.pairs.get(key).is_some_and(|text| !text.trim().is_empty()) => return None,
            None => "aimed",
        };
        FireLaw::of_word(word)
    }

    /// A problem at `key`, in its place.
    fn report(&mut self, key: &str, problem: impl Into<String>) {
        if let Some((place, text)) = self.text(key) {
            self.problems.push((place, Problem::at(key, text, problem)));
        }
    }

    fn free_text(&mut self, key: &str) -> String {
        let Some((_, text)) = self.text(key) else {
            return String::new();
        };
        let Some(Key {
            kind: Kind::Text(most),
            ..
        }) = keys::find(key)
        else {
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
        if length > *most {
            self.report(key, format!("is {length} characters long; write at most {most}"));
        }
        text.into()
    }

    fn choice(&mut self, key: &str) -> Option<&'static str> {
        let (_, text) = self.text(key)?;
        let Some(Key {
            kind: Kind::Choice(words),
            ..
        }) = keys::find(key)
        else {
            return None;
        };
        let word = words.iter().find(|word| **word == text).copied();
        if word.is_none() {
            self.report(
                key,
                match key {
                    "v" => "this copy reads version 1 of the link only: write 1".into(),
                    _ => format!("write one of {}", words.join(", ")),
                },
            );
        }
        word
    }

    /// A quantity within its key's limits; `None` where it is absent or in trouble.
    fn quantity(&mut self, key: &str) -> Option<Quantity> {
        let (_, text) = self.text(key)?;
        let row = keys::find(key)?;
        match Quantity::read(text).and_then(|quantity| within_limits(row, quantity)) {
            Ok(quantity @ Quantity::Number(_)) => Some(quantity),
            Ok(Quantity::Interval { .. }) => {
                self.report(
                    key,
                    "an interval is known, but not yet worked out by this copy: write one number",
                );
                None
            }
            Ok(Quantity::Question { .. }) => {
                self.report(
                    key,
                    "a question is known, but not yet worked out by this copy: write one number",
                );
                None
            }
            Err(problem) => {
                self.report(key, problem);
                None
            }
        }
    }

    fn required(&mut self, key: &str, what: &str) -> Option<Quantity> {
        if self.pairs.get(key).is_none_or(|text| text.trim().is_empty()) {
            self.problems.push((
                MISSING,
                Problem::missing(key, format!("`{key}` is missing: give {what}")),
            ));
        }
        self.quantity(key)
    }
}

/// What keeps the text from being read at all: its length, or that nothing stands in it.
fn whole_problem(pairs: &Pairs) -> Option<Problem> {
    let length = pairs.length();
    if length > LONGEST_LINK {
        return Some(Problem::whole(format!(
            "the text is {length} bytes long; at most {LONGEST_LINK} are read"
        )));
    }
    let nothing = pairs
        .iter()
        .all(|(key, text)| key == "v" || text.trim().is_empty());
    let required = "x.start, x.rate, y.start and y.rate";
    nothing.then(|| {
        Problem::whole(format!(
            "there is no engagement in this text: give at least {required}"
        ))
    })
}

/// What is wrong with a key itself: unknown, or known and not yet worked out.
fn key_problem(key: &str, text: &str) -> Option<Problem> {
    let not_yet = || {
        Problem::at(
            key,
            text,
            format!("`{key}` is known, but not yet worked out by this copy"),
        )
    };
    match keys::find(key) {
        Some(row) => {
            let at_default = text.trim().is_empty() || row.default == Some(text.trim());
            let used = row.worked_out || at_default;
            (!used).then(not_yet)
        }
        None if keys::is_numbered(key) => Some(not_yet()),
        None => {
            let near = keys::nearest(key)
                .map(|near| format!("; the nearest it knows is `{near}`"))
                .unwrap_or_default();
            Some(Problem::at(
                key,
                text,
                format!("this copy does not know `{key}`{near}"),
            ))
        }
    }
}

fn within_limits(row: &Key, quantity: Quantity) -> Result<Quantity, String> {
    let Kind::Quantity { low, above, high } = row.kind else {
        return Ok(quantity);
    };
    for value in quantity.numbers() {
        if above && value <= low {
            return Err(format!("must be more than {low}"));
        }
        if value < low {
            return Err(format!("must be {low} or more"));
        }
        if value > high {
            let fraction = row.unit == Unit::Fraction && value <= 100.0;
            let hint = if fraction {
                format!(
                    ": for {value} % write {}",
                    number::hundredth(&value.to_string(), value)
                )
            } else {
                String::new()
            };
            return Err(format!("must be at most {}{hint}", plain(high)));
        }
    }
    Ok(quantity)
}

fn plain(limit: f64) -> String {
    if limit >= 1e6 {
        format!("{limit:e}")
    } else {
        format!("{limit}")
    }
}
