//! What the pairs say, or the list of what is wrong with them.

use crate::keys::{self, Key, Kind, LARGEST, Unit};
use crate::laws::FireLaw;
use crate::number;
use crate::pairs::{LONGEST_LINK, Pairs};
use crate::problem::{Problem, is_hidden};
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::terms::{Changes, Closing, Engagement, Fire, Flow, Join, Phase, Reach, SideTerms, Support, Terms};
use std::collections::BTreeMap;
use std::fmt;

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

    /// How many of it make a day.
    pub fn in_a_day(self) -> f64 {
        match self {
            TimeUnit::Second => 86_400.0,
            TimeUnit::Minute => 1440.0,
            TimeUnit::Hour => 24.0,
            TimeUnit::Day => 1.0,
            TimeUnit::Week => 1.0 / 7.0,
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
        let own = |quantity: &Quantity| match quantity {
            Quantity::Number(value) => *value,
            Quantity::Interval { low, likely, high } => likely.unwrap_or(low / 2.0 + high / 2.0),
            Quantity::Question { now, .. } => now.unwrap_or(0.0),
        };
        if values.is_empty() {
            return self.terms.map_unnamed(own);
        }
        self.terms
            .map(|slot, quantity| values.get(slot).copied().unwrap_or_else(|| own(quantity)))
    }
}

/// A key that is worked out, in its parts: put together only where a problem names it.
#[derive(Clone, Copy)]
struct Name {
    phase: Option<u8>,
    side: Option<Side>,
    key: &'static str,
}

impl Name {
    fn whole(key: &'static str) -> Name {
        Name {
            phase: None,
            side: None,
            key,
        }
    }

    fn of_side(side: Side, key: &'static str) -> Name {
        Name {
            side: Some(side),
            ..Name::whole(key)
        }
    }

    fn in_phase(self, number: u8) -> Name {
        Name {
            phase: Some(number),
            ..self
        }
    }

    /// The slot of the key behind `phaseN.`; `phaseN.from` is a time like `until`.
    fn slot(self) -> Option<usize> {
        let key = if self.key == "from" { "until" } else { self.key };
        keys::slot_of(self.side, key)
    }

    fn row(self) -> Option<&'static Key> {
        self.slot().map(keys::row)
    }

    /// Whether `key` is this key of the phase with `number`.
    fn is_in_phase(self, number: u8, key: &str) -> bool {
        let behind = |key| {
            let key = behind_phase(number, key)?;
            match self.side {
                Some(side) => key.strip_prefix(side.letter())?.strip_prefix('.'),
                None => Some(key),
            }
        };
        behind(key) == Some(self.key)
    }
}

/// What stands behind `phaseN.` in a key.
fn behind_phase(number: u8, key: &str) -> Option<&str> {
    key.strip_prefix("phase")?
        .strip_prefix(char::from(b'0' + number))?
        .strip_prefix('.')
}

impl fmt::Display for Name {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some(number) = self.phase {
            write!(f, "phase{number}.")?;
        }
        if let Some(side) = self.side {
            write!(f, "{}.", side.letter())?;
        }
        f.write_str(self.key)
    }
}

/// Collects what the pairs say, and their problems by place.
struct Reader<'a> {
    pairs: &'a Pairs,
    /// Where each key without a phase stands first, by its slot.
    places: [usize; keys::SLOTS],
    /// Where keys that begin with `phase` stand.
    phased: Vec<usize>,
    /// Problems with their place in the link; missing keys come behind them all.
    problems: Vec<(usize, Problem)>,
}

/// Items of a list that are worked out at most.
const LONGEST_LIST: usize = 20;

/// The place of what does not stand in the link.
const MISSING: usize = usize::MAX;

impl<'a> Reader<'a> {
    fn new(pairs: &'a Pairs) -> Reader<'a> {
        Reader {
            pairs,
            places: [MISSING; keys::SLOTS],
            phased: Vec::new(),
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

    /// Finds where each key stands: it is known, worked out, and stands once.
    fn check_keys(&mut self) {
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
            let before = self.places[slot] != MISSING;
            if !before {
                self.places[slot] = place;
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
    fn place(&self, name: Name) -> Option<usize> {
        let Some(number) = name.phase else {
            return Some(self.places[name.slot()?]).filter(|place| *place != MISSING);
        };
        let is_it = |place: &usize| name.is_in_phase(number, self.pairs.at(*place).0);
        self.phased.iter().copied().find(is_it)
    }

    /// Whether a key is absent or its text empty.
    fn is_blank(&self, name: Name) -> bool {
        self.place(name)
            .is_none_or(|place| self.pairs.at(place).1.trim().is_empty())
    }

    /// The text of a key with its outer blanks gone, and its place; `None` where it is empty, absent, or already in
    /// trouble.
    fn text(&self, name: Name) -> Option<(usize, &'a str)> {
        let place = self.place(name)?;
        let text = self.pairs.at(place).1.trim();
        (!text.is_empty() && self.is_decoded(place)).then_some((place, text))
    }

    fn statement(&mut self) -> Option<Statement> {
        let title = self.free_text(Name::whole("title"));
        let note = self.free_text(Name::whole("note"));
        let marking = self.free_text(Name::whole("marking"));
        let unit = self
            .choice(Name::whole("unit"))
            .and_then(TimeUnit::of_word)
            .unwrap_or_default();
        let counted = self.free_text(Name::whole("counted"));
        let counted = if counted.is_empty() {
            "combatants".into()
        } else {
            counted
        };
        let names = Both::of(|side| {
            let name = self.free_text(Name::of_side(side, "name"));
            if name.is_empty() {
                format!("Side {}", side.letter().to_uppercase())
            } else {
                name
            }
        });
        let until = self.quantity(Name::whole("until"));
        for key in ["view", "paper", "v"] {
            self.choice(Name::whole(key));
        }
        let x = self.side(Side::X);
        let y = self.side(Side::Y);
        let phases = self.phases();
        let sides = Both { x: x?, y: y? };
        let closing = self.closing(&sides)?;
        let terms = Terms {
            sides,
            phases: phases?,
            closing: Some(closing).flatten(),
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
        let key = |name: &'static str| Name::of_side(side, name);
        let start = self.required(key("start"), "a strength at the start");
        let law = self.fire_law(key("fire"));
        let rate = match law {
            Some(FireLaw::None) => Some(Quantity::Number(0.0)),
            _ => self.required(key("rate"), "a rate"),
        };
        let lost = self.quantity(key("lost")).unwrap_or(Quantity::Number(0.0));
        let break_point = self.quantity(key("break")).unwrap_or(Quantity::Number(1.0));
        let law = law?;
        let mut needed = |name: &'static str, what: &str| {
            if law.law().needs.contains(&name) {
                self.required(key(name), what).map(Some)
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
        let none = Quantity::Number(0.0);
        let wastage = self.quantity(key("wastage")).unwrap_or(none);
        let support = Support {
            area: self.quantity(key("support.area")).unwrap_or(none),
            aimed: self.quantity(key("support.aimed")).unwrap_or(none),
        };
        let shape = self.quantity(key("reach.shape")).unwrap_or(Quantity::Number(1.0));
        let reach = self.quantity(key("reach")).map(|reach| Reach { reach, shape });
        let joins = self.joins(key("join"));
        let flows = self.flows(key("flow"));
        let start = start?;
        let comes = joins
            .iter()
            .any(|join| join.size.numbers().any(|size| size > 0.0))
            || flows
                .iter()
                .any(|flow| flow.rate.numbers().any(|rate| rate > 0.0));
        if start == none && !comes {
            self.report(
                key("start"),
                "must be more than 0, unless reserves or a flow bring strength later",
            );
        }
        Some(SideTerms {
            start,
            lost,
            fire,
            break_point,
            wastage,
            support,
            reach,
            joins,
            flows,
        })
    }

    fn fire_law(&mut self, key: Name) -> Option<FireLaw> {
        let word = match self.text(key) {
            Some(_) => self.choice(key)?,
            None if !self.is_blank(key) => return None,
            None => "aimed",
        };
        FireLaw::of_word(word)
    }

    /// A problem at `key`, in its place.
    fn report(&mut self, key: Name, problem: impl Into<String>) {
        if let Some((place, text)) = self.text(key) {
            self.problems
                .push((place, Problem::at(&key.to_string(), text, problem)));
        }
    }

    fn free_text(&mut self, key: Name) -> String {
        let Some((_, text)) = self.text(key) else {
            return String::new();
        };
        let Some(Key {
            kind: Kind::Text(most),
            ..
        }) = key.row()
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

    fn choice(&mut self, key: Name) -> Option<&'static str> {
        let (_, text) = self.text(key)?;
        let Some(Key {
            kind: Kind::Choice(words),
            ..
        }) = key.row()
        else {
            return None;
        };
        let word = words.iter().find(|word| **word == text).copied();
        if word.is_none() {
            self.report(
                key,
                match key.key {
                    "v" => "this copy reads version 1 of the link only: write 1".into(),
                    _ => format!("write one of {}", words.join(", ")),
                },
            );
        }
        word
    }

    /// The items of a list, split after decoding, each with its number.
    fn items(&self, key: Name) -> Vec<(u32, &'a str)> {
        let Some((_, text)) = self.text(key) else {
            return Vec::new();
        };
        (1..).zip(text.split(',').map(str::trim)).collect()
    }

    fn report_item(&mut self, key: Name, item: u32, found: &str, problem: impl Into<String>) {
        // Not by its text: that is no longer to be had once an item before it is in trouble, and each is reported.
        if let Some(place) = self.place(key) {
            let problem = Problem {
                item: Some(item),
                ..Problem::at(&key.to_string(), found, problem)
            };
            self.problems.push((place, problem));
        }
    }

    /// A quantity of an item, which must be a number for now, from `low` to the largest.
    fn part(&mut self, key: Name, item: (u32, &str), text: &str, low: f64) -> Option<Quantity> {
        let problem = match read_quantity(text) {
            Ok(Quantity::Number(value)) if value < low => format!("`{}` must be {low} or more", text.trim()),
            Ok(Quantity::Number(value)) if value.abs() > LARGEST => {
                format!("`{}` must be at most {}", text.trim(), plain(LARGEST))
            }
            Ok(quantity @ Quantity::Number(_)) => return Some(quantity),
            Ok(_) => {
                "an interval or a question is known, but not yet worked out by this copy: write one number"
                    .into()
            }
            Err(problem) => format!("`{}`: {problem}", text.trim()),
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

    fn joins(&mut self, key: Name) -> Vec<Join<Quantity>> {
        let items = self.items(key);
        if !self.is_short(key, &items) {
            return Vec::new();
        }
        let mut joins = Vec::new();
        for item in items {
            let Some((size, time)) = item.1.split_once('@') else {
                self.report_item(key, item.0, item.1, "write it as size@time, such as 64@4");
                continue;
            };
            let size = self.part(key, item, size, -LARGEST);
            let time = self.part(key, item, time, 0.0);
            joins.extend(size.zip(time).map(|(size, time)| Join { size, time }));
        }
        joins
    }

    fn flows(&mut self, key: Name) -> Vec<Flow<Quantity>> {
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
                    "write it as rate@from/to, such as 5@2/8, or 5@2/ without an end",
                );
                continue;
            };
            let rate = self.part(key, item, rate, 0.0);
            let from = self.part(key, item, from, 0.0);
            let endless = to.trim().is_empty();
            let to = if endless {
                None
            } else {
                self.part(key, item, to, 0.0)
            };
            let (Some(rate), Some(from)) = (rate, from) else {
                continue;
            };
            if let (Quantity::Number(from), Some(Quantity::Number(to))) = (from, to)
                && to <= from
            {
                self.report_item(key, item.0, item.1, "must end after it begins");
                continue;
            }
            if endless || to.is_some() {
                flows.push(Flow { rate, from, to });
            }
        }
        flows
    }

    /// The phases, by number; `None` where a problem keeps one from being read.
    fn phases(&mut self) -> Option<Vec<Phase<Quantity>>> {
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

    /// The closing of the range; the outer `None` where a problem keeps it from being read.
    fn closing(&mut self, sides: &Both<SideTerms<Quantity>>) -> Option<Option<Closing<Quantity>>> {
        let none = Quantity::Number(0.0);
        let speed = self.quantity(Name::whole("range.closing")).unwrap_or(none);
        let least = self.quantity(Name::whole("range.least")).unwrap_or(none);
        if sides.x.reach.is_none() && sides.y.reach.is_none() {
            self.quantity(Name::whole("range"));
            return Some(None);
        }
        let range = self.required(
            Name::whole("range"),
            "the range at the start, which a reach is measured against",
        )?;
        Some(Some(Closing { range, speed, least }))
    }

    /// A quantity within its key's limits; `None` where it is absent or in trouble.
    fn quantity(&mut self, key: Name) -> Option<Quantity> {
        let (_, text) = self.text(key)?;
        let row = key.row()?;
        match read_quantity(text).and_then(|quantity| within_limits(row, quantity)) {
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

    fn required(&mut self, key: Name, what: &str) -> Option<Quantity> {
        if self.is_blank(key) {
            self.problems.push((
                MISSING,
                Problem::missing(&key.to_string(), format!("`{key}` is missing: give {what}")),
            ));
        }
        self.quantity(key)
    }
}

/// What keeps the text from being read at all: its length, or that nothing stands in it.
fn whole_problem(pairs: &Pairs) -> Option<Problem> {
    if let Some(length) = pairs.too_long() {
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
fn key_problem(row: Option<&Key>, key: &str, text: &str) -> Option<Problem> {
    let not_yet = || {
        Problem::at(
            key,
            text,
            format!("`{key}` is known, but not yet worked out by this copy"),
        )
    };
    match row {
        Some(row) => {
            let at_default = text.trim().is_empty() || row.default == Some(text.trim());
            let used = row.worked_out || at_default;
            (!used).then(not_yet)
        }
        None if key.starts_with("phase") && keys::is_numbered(key) => None,
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

/// A quantity; nearly all are plain numbers, which are read at once.
fn read_quantity(text: &str) -> Result<Quantity, String> {
    if text.contains('?') || text.contains("..") {
        return Quantity::read(text);
    }
    number::read(text.trim()).map(Quantity::Number)
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
