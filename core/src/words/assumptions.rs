//! What an engagement assumes, as a table in words: for paper, where nobody can look into a field.

use super::format::{NO_BREAK, significant};
use super::goal::goals;
use super::meaning;
use crate::keys::{self, Kind, Place};
use crate::laws::FireLaw;
use crate::pairs::Pairs;
use crate::problem::seen;
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::statement::{Names, Statement, TimeUnit};
use crate::terms::{Changes, Flow, Join, Phase};

/// The digits that a number is written with: all that somebody types.
const DIGITS: usize = 15;

/// What holds of a key, in words.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Assumed {
    /// The words; empty where there is nothing to say.
    pub words: String,
    /// Whether nobody stated it, and it holds by default.
    pub default: bool,
}

/// A row: what it is of, and what holds.
#[derive(Clone, Debug, PartialEq)]
pub struct Row<T> {
    /// What it is of, as the form labels it.
    pub label: String,
    /// The key of the link, without the side's letter; empty where several make the row.
    pub key: String,
    /// What holds.
    pub holds: T,
}

/// All that an engagement assumes.
#[derive(Clone, Debug, PartialEq)]
pub struct Assumptions {
    /// What the sides are called, for the heads.
    pub names: Names,
    /// What is stated of each side.
    pub sides: Vec<Row<Both<Assumed>>>,
    /// What is stated of the whole.
    pub whole: Vec<Row<Assumed>>,
}

/// What `statement` assumes, which was read from `pairs`. Every key of the text is in it: what has no words of its own
/// stands as it was written.
pub fn assumptions(pairs: &Pairs, statement: &Statement) -> Assumptions {
    let mut table = Table {
        pairs,
        statement,
        told: Vec::new(),
        sides: Vec::new(),
        whole: Vec::new(),
    };
    table.about_sides();
    table.about_phases();
    table.about_the_whole();
    table.about_the_rest();
    Assumptions {
        names: statement.names.clone(),
        sides: table.sides,
        whole: table.whole,
    }
}

/// The table while it is made.
struct Table<'a> {
    pairs: &'a Pairs,
    statement: &'a Statement,
    /// The keys that have been told.
    told: Vec<String>,
    sides: Vec<Row<Both<Assumed>>>,
    whole: Vec<Row<Assumed>>,
}

impl Table<'_> {
    fn stands(&self, key: &str) -> bool {
        self.pairs.get(key).is_some_and(|text| !text.trim().is_empty())
    }

    /// A row of both sides, of the key of this name.
    fn both(&mut self, name: &str, words: impl Fn(Side) -> String) {
        let label = keys::find(&format!("x.{name}")).map_or(name, |row| row.label);
        let holds = Both::of(|side: Side| {
            let key = format!("{}.{name}", side.letter());
            let default = !self.stands(&key);
            self.told.push(key);
            Assumed {
                words: words(side),
                default,
            }
        });
        self.sides.push(Row {
            label: label.into(),
            key: name.into(),
            holds,
        });
    }

    /// The same, where the key of either side stands or its law of fire needs it.
    fn where_used(&mut self, name: &str, words: impl Fn(Side) -> String) {
        let needed = Side::BOTH
            .into_iter()
            .any(|side| self.law(side).law().needs.contains(&name));
        if needed
            || Side::BOTH
                .into_iter()
                .any(|side| self.stands(&format!("{}.{name}", side.letter())))
        {
            self.both(name, words);
        }
    }

    fn one(&mut self, name: &str, words: impl Into<String>) {
        let label = keys::find(name).map_or(name, |row| row.label);
        let default = !self.stands(name);
        self.told.push(name.into());
        self.whole.push(Row {
            label: label.into(),
            key: name.into(),
            holds: Assumed {
                words: words.into(),
                default,
            },
        });
    }

    fn law(&self, side: Side) -> FireLaw {
        self.statement.terms.sides[side].fire.law
    }

    fn about_sides(&mut self) {
        let statement = self.statement;
        let (names, unit) = (&statement.names, statement.unit);
        let of = |side: Side| &statement.terms.sides[side];
        let measured = |quantity: &Quantity, unit: &str| with(&number(quantity), unit);
        let parameter =
            |key: &str, side: Side| meaning::parameter_unit(key, &names[side], &names[side.enemy()], unit);
        self.told.extend(["x.name".into(), "y.name".into()]);
        self.both("start", |side| {
            let (start, counted) = (&of(side).start, &statement.counted);
            match is_number(start) {
                true => format!("{} {counted}", number(start)),
                false => format!("{} ({counted})", number(start)),
            }
        });
        self.both("lost", |side| number(&of(side).lost));
        self.both("fire", |side| of(side).fire.law.law().label.into());
        self.both("rate", |side| match of(side).fire.law {
            FireLaw::None => "none".into(),
            law => measured(
                &of(side).fire.rate,
                &meaning::rate_unit(law, &names[side], &names[side.enemy()], unit),
            ),
        });
        for (key, part) in [("half", 0), ("p", 1), ("q", 2)] {
            let texts = Both::of(|side: Side| self.pairs.get(&format!("{}.{key}", side.letter())).map(seen));
            self.where_used(key, |side| {
                let fire = &of(side).fire;
                match [&fire.half, &fire.p, &fire.q][part] {
                    Some(quantity) => measured(quantity, &parameter(key, side)),
                    None => not_used(texts[side].as_deref(), "this law of fire does not use it"),
                }
            });
        }
        self.both("break", |side| {
            let (point, rest) = (&of(side).break_point, [&of(side).start, &of(side).lost]);
            let known = [point].into_iter().chain(rest).all(is_number);
            let words = match known {
                true => decapitalised(&meaning::break_point(statement, side)),
                false => "the fraction lost at which it breaks".into(),
            };
            with(&number(point), &words)
        });
        self.both("wastage", |side| {
            measured(&of(side).wastage, &parameter("wastage", side))
        });
        self.both("support.area", |side| {
            measured(&of(side).support.area, &parameter("support.area", side))
        });
        self.both("support.aimed", |side| {
            measured(&of(side).support.aimed, &parameter("support.aimed", side))
        });
        self.both("join", |side| list(&of(side).joins, |item| join(item, unit)));
        self.both("flow", |side| list(&of(side).flows, |item| flow(item, unit)));
        let ranged = of(Side::X).reach.is_some() || of(Side::Y).reach.is_some();
        if ranged {
            let reach = |side: Side| of(side).reach.as_ref();
            self.both("reach", |side| {
                reach(side).map_or("no limit".into(), |reach| number(&reach.reach))
            });
            self.both("reach.shape", |side| {
                reach(side).map_or("1".into(), |reach| number(&reach.shape))
            });
        }
    }

    fn about_phases(&mut self) {
        for phase in &self.statement.terms.phases {
            let stem = format!("phase{}.", phase.number);
            let keys = self.pairs.iter().map(|(key, _)| key);
            self.told
                .extend(keys.filter(|key| key.starts_with(&stem)).map(String::from));
            let holds = Both::of(|side: Side| {
                let words = changes(phase, side);
                Assumed {
                    default: words.is_empty(),
                    words: if words.is_empty() {
                        "as before".into()
                    } else {
                        words
                    },
                }
            });
            self.sides.push(Row {
                label: format!(
                    "Phase {}, from {}",
                    phase.number,
                    time(&phase.from, self.statement.unit)
                ),
                key: format!("phase{}", phase.number),
                holds,
            });
        }
    }

    fn about_the_whole(&mut self) {
        let terms = &self.statement.terms;
        self.one("unit", self.statement.unit.symbol());
        self.one("counted", seen(&self.statement.counted));
        if let Some(closing) = &terms.closing {
            let per = format!("per{NO_BREAK}{}", self.statement.unit.symbol());
            self.one("range", number(&closing.range));
            self.one("range.closing", format!("{} {per}", number(&closing.speed)));
            self.one("range.least", number(&closing.least));
        }
        let clock = terms
            .until
            .as_ref()
            .map_or("none".into(), |until| time(until, self.statement.unit));
        self.one("until", clock);
        if !self.statement.so_that.is_empty() {
            self.one("sothat", goals(self.statement, &self.statement.so_that));
        }
        if !self.statement.note.is_empty() {
            self.one("note", seen(&self.statement.note));
        }
    }

    /// Keys that nothing was said of, as they were written.
    fn about_the_rest(&mut self) {
        let shown = ["title", "marking", "view", "paper", "v"];
        let rest: Vec<(String, String)> = self
            .pairs
            .iter()
            .filter(|(key, text)| {
                !text.trim().is_empty() && !shown.contains(key) && !self.told.iter().any(|told| told == key)
            })
            .map(|(key, text)| (key.to_owned(), seen(text.trim())))
            .collect();
        for (key, text) in rest {
            let unused = keys::find(&key).is_some_and(|row| matches!(row.kind, Kind::Quantity { .. }));
            let words = if unused {
                not_used(Some(&text), "nothing in this engagement uses it")
            } else {
                text
            };
            let label = keys::find(&key).map(|row| match (row.place, key.split_once('.')) {
                (Place::Side, Some((letter, _))) => {
                    let side = if letter == "x" { Side::X } else { Side::Y };
                    format!("{}: {}", self.statement.names[side], decapitalised(row.label))
                }
                _ => row.label.to_owned(),
            });
            self.whole.push(Row {
                label: label.unwrap_or_default(),
                key: key.clone(),
                holds: Assumed {
                    words,
                    default: false,
                },
            });
        }
    }
}

/// What changes of `side` as a phase begins, in words; empty where nothing does.
pub(super) fn changes(phase: &Phase<Quantity>, side: Side) -> String {
    let Changes {
        law,
        rate,
        half,
        p,
        q,
        wastage,
        support_area,
        support_aimed,
    } = &phase.changes[side];
    let fire = law.map(|law| format!("fire: {}", decapitalised(law.law().label)));
    let changed = |label: &str, quantity: &Option<Quantity>| {
        quantity
            .as_ref()
            .map(|quantity| format!("{label} {}", number(quantity)))
    };
    let all = [
        fire,
        changed("rate", rate),
        changed("targets at half the search", half),
        changed("exponent on the shooters", p),
        changed("exponent on the targets", q),
        changed("wastage", wastage),
        changed("supporting arms at an area", support_area),
        changed("supporting arms, aimed,", support_aimed),
    ];
    all.into_iter().flatten().collect::<Vec<_>>().join("; ")
}

/// A number, a number in doubt or a number in question, in words.
fn number(quantity: &Quantity) -> String {
    let one = |value: f64| significant(value, DIGITS);
    match *quantity {
        Quantity::Number(value) => one(value),
        Quantity::Interval { low, likely, high } => {
            let likely = likely.map_or(String::new(), |likely| format!(", likeliest {}", one(likely)));
            format!("between {} and {}{likely}", one(low), one(high))
        }
        Quantity::Question { now, between } => {
            let now = now.map_or(String::new(), |now| format!("{}, ", one(now)));
            let between = between.map_or(String::new(), |(low, high)| {
                format!(", sought from {} to {}", one(low), one(high))
            });
            format!("{now}in question{between}")
        }
    }
}

fn is_number(quantity: &Quantity) -> bool {
    matches!(quantity, Quantity::Number(_))
}

/// A number and what it is measured in.
fn with(number: &str, unit: &str) -> String {
    if unit.is_empty() {
        number.to_owned()
    } else {
        format!("{number}: {unit}")
    }
}

fn time(quantity: &Quantity, unit: TimeUnit) -> String {
    format!("{}{NO_BREAK}{}", number(quantity), unit.symbol())
}

fn join(join: &Join<Quantity>, unit: TimeUnit) -> String {
    let at = time(&join.time, unit);
    match join.size {
        Quantity::Number(size) if size < 0.0 => {
            format!("{} leave at {at}", number(&Quantity::Number(-size)))
        }
        _ => format!("{} join at {at}", number(&join.size)),
    }
}

fn flow(flow: &Flow<Quantity>, unit: TimeUnit) -> String {
    let rate = format!("{} per{NO_BREAK}{}", number(&flow.rate), unit.symbol());
    let end = flow.to.as_ref();
    let end = end.map_or("on".into(), |to| format!("to {}", time(to, unit)));
    format!("{rate} from {} {end}", time(&flow.from, unit))
}

fn list<T>(items: &[T], words: impl Fn(&T) -> String) -> String {
    if items.is_empty() {
        return "none".into();
    }
    items.iter().map(words).collect::<Vec<_>>().join("; ")
}

fn not_used(text: Option<&str>, why: &str) -> String {
    text.map_or("none".into(), |text| format!("{text} ({why})"))
}

/// Words of ours in the middle of a line.
fn decapitalised(words: &str) -> String {
    let mut words = words.trim_end_matches('.').to_owned();
    if let Some(first) = words.get_mut(..1) {
        first.make_ascii_lowercase();
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::format::plain;
    use std::collections::BTreeSet;

    fn of(link: &str) -> Assumptions {
        let pairs = Pairs::parse(link);
        let statement = Statement::read(&pairs).unwrap_or_else(|why| panic!("{link}: {why:?}"));
        assumptions(&pairs, &statement)
    }

    fn both(table: &Assumptions, key: &str) -> (String, bool, String, bool) {
        let row = table
            .sides
            .iter()
            .find(|row| row.key == key)
            .unwrap_or_else(|| panic!("no row {key}"));
        let Both { x, y } = &row.holds;
        (plain(&x.words), x.default, plain(&y.words), y.default)
    }

    const LINK: &str = "x.name=Ondrel&x.start=60000&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.fire=search&\
        y.rate=0.06&y.half=80&x.p=0.5&y.join=64@4,-20@6&x.flow=5@2/8,3@10/&until=12&phase2.from=6&phase2.x.rate=0.02&\
        phase2.x.fire=area&range=9&note=As agreed";

    #[test]
    fn every_row_says_what_holds_and_whether_anybody_said_so() {
        let table = of(LINK);
        for (key, x, x_default, y, y_default) in [
            ("start", "60000 combatants", false, "400 combatants", false),
            ("lost", "0", true, "0", true),
            (
                "fire",
                "Aimed: shooters pick their targets",
                true,
                "Search: aimed, once a target is found",
                false,
            ),
            (
                "rate",
                "0.04: number of Vessary lost, per one of Ondrel, per h",
                false,
                "0.06: number of Ondrel lost, per one of Vessary, per h, with targets in plenty",
                false,
            ),
            ("half", "none", true, "80: number of Ondrel", false),
            ("p", "0.5 (this law of fire does not use it)", false, "none", true),
            (
                "break",
                "0.3: breaks at 30% lost: 42000 left of 60000, until somebody joins",
                false,
                "1: fights to the last",
                true,
            ),
            ("join", "none", true, "64 join at 4 h; 20 leave at 6 h", false),
            (
                "flow",
                "5 per h from 2 h to 8 h; 3 per h from 10 h on",
                false,
                "none",
                true,
            ),
            (
                "phase2",
                "fire: area: fire covers the ground they are on; rate 0.02",
                false,
                "as before",
                true,
            ),
        ] {
            let found = both(&table, key);
            assert_eq!(found, (x.into(), x_default, y.into(), y_default), "{key}");
        }
        let whole: Vec<(&str, String, bool)> = table
            .whole
            .iter()
            .map(|row| (row.key.as_str(), plain(&row.holds.words), row.holds.default))
            .collect();
        assert_eq!(
            whole,
            [
                ("unit", "h".into(), true),
                ("counted", "combatants".into(), true),
                ("until", "12 h".into(), false),
                ("note", "As agreed".into(), false),
                ("range", "9 (nothing in this engagement uses it)".into(), false),
            ]
        );
    }

    #[test]
    fn what_rests_on_a_number_in_question_is_not_made_up() {
        let table = of("x.start=?&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.05");
        assert_eq!(both(&table, "start").0, "in question (combatants)");
        assert_eq!(
            both(&table, "break").0,
            "0.3: the fraction lost at which it breaks"
        );
    }

    /// Whatever stands in a text is on the paper.
    #[test]
    fn no_key_is_left_out() {
        for number in 0..crate::golden::COUNT {
            let link = crate::golden::link(number);
            let table = of(&link);
            let keys: BTreeSet<&str> = table
                .sides
                .iter()
                .map(|row| row.key.as_str())
                .chain(table.whole.iter().map(|row| row.key.as_str()))
                .collect();
            for (key, _) in Pairs::parse(&link).iter().filter(|(key, _)| *key != "v") {
                let bare = key.strip_prefix("x.").or(key.strip_prefix("y.")).unwrap_or(key);
                let bare = if bare.starts_with("phase") {
                    bare.split('.').next().unwrap_or(bare)
                } else {
                    bare
                };
                assert!(keys.contains(bare) || keys.contains(key), "{key} of {link}");
            }
        }
    }

    #[test]
    fn doubt_and_question_have_words() {
        for (text, words) in [
            ("0.04", "0.04"),
            ("0.03..0.05", "between 0.03 and 0.05"),
            ("1..2..4", "between 1 and 4, likeliest 2"),
            ("600?", "600, in question"),
            ("?", "in question"),
            ("6?4..9", "6, in question, sought from 4 to 9"),
        ] {
            assert_eq!(number(&Quantity::read(text).expect(text)), words);
        }
    }
}
