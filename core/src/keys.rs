//! The one table of keys: the parser, the form's labels, the README's table and the tests all come from it.

use crate::sides::Side;
use std::cmp::Reverse;

/// Where a key may stand.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// Once for the whole engagement.
    Whole,
    /// Once for each side, behind `x.` or `y.`.
    Side,
}

/// What a value is measured in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Unit {
    /// A word or a free text.
    None,
    /// What strength counts.
    Strength,
    /// The enemy's strength.
    EnemyStrength,
    /// Strength for each unit of time.
    StrengthPerTime,
    /// The link's unit of time.
    Time,
    /// A fraction of the side's strength for each unit of time.
    FractionPerTime,
    /// Enemy strength for each unit of time.
    EnemyPerTime,
    /// A fraction of the enemy's strength for each unit of time.
    EnemyFractionPerTime,
    /// A fraction of a whole.
    Fraction,
    /// An exponent.
    Exponent,
    /// A length, in a unit of the user's own.
    Length,
    /// A length for each unit of time.
    LengthPerTime,
    /// As the law of fire says.
    PerLaw,
}

/// What values a key takes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Kind {
    /// Free text of at most so many characters.
    Text(usize),
    /// One of these words.
    Choice(&'static [&'static str]),
    /// A quantity from `low` to `high`; `low` itself is allowed unless `above`.
    Quantity {
        /// The least value.
        low: f64,
        /// Whether the least value itself is excluded.
        above: bool,
        /// The greatest value.
        high: f64,
    },
    /// Reserves or flows, or conditions.
    List,
}

/// A row of the table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Key {
    /// The name, without the side's letter.
    pub name: &'static str,
    /// Where it stands.
    pub place: Place,
    /// The label of its field.
    pub label: &'static str,
    /// The values it takes.
    pub kind: Kind,
    /// What they are measured in.
    pub unit: Unit,
    /// The value where the key is absent, as it would be written; `None` where there is none.
    pub default: Option<&'static str>,
    /// What it means, for the README and for hints.
    pub meaning: &'static str,
    /// Whether this version works it out, or only knows its name.
    pub worked_out: bool,
}

/// The greatest strength, rate or time that is worked out.
pub const LARGEST: f64 = 1e9;

const UP_TO_LARGEST: Kind = Kind::Quantity {
    low: 0.0,
    above: false,
    high: LARGEST,
};
const ABOVE_ZERO: Kind = Kind::Quantity {
    low: 0.0,
    above: true,
    high: LARGEST,
};

const fn whole(name: &'static str, label: &'static str, kind: Kind, meaning: &'static str) -> Key {
    Key {
        name,
        place: Place::Whole,
        label,
        kind,
        unit: Unit::None,
        default: None,
        meaning,
        worked_out: true,
    }
}

const fn side(name: &'static str, label: &'static str, kind: Kind, unit: Unit, meaning: &'static str) -> Key {
    Key {
        name,
        place: Place::Side,
        label,
        kind,
        unit,
        default: None,
        meaning,
        worked_out: true,
    }
}

impl Key {
    const fn or(mut self, default: &'static str) -> Key {
        self.default = Some(default);
        self
    }

    const fn measured_in(mut self, unit: Unit) -> Key {
        self.unit = unit;
        self
    }

    const fn later(mut self) -> Key {
        self.worked_out = false;
        self
    }

    /// The key as it stands in a link: `x.start` for side X, `until` for the whole.
    pub fn on(&self, letter: &str) -> String {
        match self.place {
            Place::Whole => self.name.to_owned(),
            Place::Side => format!("{letter}.{}", self.name),
        }
    }
}

/// The words for the laws of fire, in the order of the form.
pub const FIRES: &[&str] = &["aimed", "area", "logarithmic", "search", "power", "none"];

/// Every key of the link, in the order of the page.
pub const KEYS: &[Key] = &[
    whole("title", "Title", Kind::Text(200), "a name for the engagement"),
    whole("note", "Note", Kind::Text(1000), "assumptions and sources"),
    whole(
        "marking",
        "Marking",
        Kind::Text(60),
        "a handling marking, shown at top and foot",
    ),
    whole(
        "unit",
        "Unit of time",
        Kind::Choice(&["s", "min", "h", "d", "wk"]),
        "the unit of every time and rate",
    )
    .or("h"),
    whole(
        "counted",
        "What strength counts",
        Kind::Text(30),
        "what strength counts, in the plural",
    )
    .or("combatants"),
    side(
        "name",
        "Name",
        Kind::Text(60),
        Unit::None,
        "what the side is called",
    )
    .or("Side X"),
    side(
        "start",
        "Strength at the start",
        UP_TO_LARGEST,
        Unit::Strength,
        "strength at time 0; 0 only where reserves or a flow bring strength later",
    ),
    side(
        "lost",
        "Lost before the start",
        UP_TO_LARGEST,
        Unit::Strength,
        "lost before time 0; counts towards the break point",
    )
    .or("0"),
    side(
        "fire",
        "Fire",
        Kind::Choice(FIRES),
        Unit::None,
        "how this side's fire takes effect on the enemy",
    )
    .or("aimed"),
    side(
        "rate",
        "Rate",
        UP_TO_LARGEST,
        Unit::PerLaw,
        "attrition-rate coefficient of this side's fire",
    ),
    side(
        "half",
        "Targets at half the search",
        UP_TO_LARGEST,
        Unit::EnemyStrength,
        "for `search`: the number of targets at which the shooters spend half their time searching",
    ),
    side(
        "p",
        "Exponent on the shooters",
        Kind::Quantity {
            low: 0.0,
            above: false,
            high: 3.0,
        },
        Unit::Exponent,
        "for `power`: exponent on the shooters",
    ),
    side(
        "q",
        "Exponent on the targets",
        Kind::Quantity {
            low: 0.0,
            above: false,
            high: 3.0,
        },
        Unit::Exponent,
        "for `power`: exponent on the targets",
    ),
    side(
        "break",
        "Break point",
        Kind::Quantity {
            low: 0.0,
            above: true,
            high: 1.0,
        },
        Unit::Fraction,
        "the fraction lost at which the side breaks: 0.3 is 30 % lost, 1 is to the last",
    )
    .or("1"),
    side(
        "wastage",
        "Wastage",
        UP_TO_LARGEST,
        Unit::FractionPerTime,
        "operational losses, those that the enemy does not cause",
    )
    .or("0"),
    side(
        "support.area",
        "Supporting arms, at an area",
        UP_TO_LARGEST,
        Unit::EnemyFractionPerTime,
        "losses on the enemy by supporting arms that are not attrited, firing at an area",
    )
    .or("0"),
    side(
        "support.aimed",
        "Supporting arms, aimed",
        UP_TO_LARGEST,
        Unit::EnemyPerTime,
        "the same, at targets they can pick",
    )
    .or("0"),
    side(
        "join",
        "Reserves",
        Kind::List,
        Unit::Strength,
        "reserves that join: size@time, with a comma between; a size below zero withdraws",
    ),
    side(
        "flow",
        "Steady reinforcement",
        Kind::List,
        Unit::Strength,
        "so many for each unit of time: rate@from/to, with a comma between",
    ),
    whole(
        "range",
        "Range at the start",
        UP_TO_LARGEST,
        "the range between the sides at time 0, in one unit of length for all; it counts where a side has a reach",
    )
    .measured_in(Unit::Length),
    whole(
        "range.closing",
        "Closing speed",
        UP_TO_LARGEST,
        "by how much the range closes per unit of time",
    )
    .measured_in(Unit::LengthPerTime)
    .or("0"),
    whole(
        "range.least",
        "Least range",
        UP_TO_LARGEST,
        "the range at which the closing stops",
    )
    .measured_in(Unit::Length)
    .or("0"),
    side(
        "reach",
        "Reach",
        ABOVE_ZERO,
        Unit::Length,
        "the range from which on this side's fire takes effect; nearer, its rate is multiplied by (1 − range/reach)^shape",
    ),
    side(
        "reach.shape",
        "Shape of the reach",
        Kind::Quantity {
            low: 0.0,
            above: false,
            high: 10.0,
        },
        Unit::Exponent,
        "the exponent of that factor",
    )
    .or("1"),
    whole(
        "until",
        "Clock",
        ABOVE_ZERO,
        "the time at which the engagement is cut off",
    )
    .measured_in(Unit::Time),
    whole(
        "sothat",
        "So that",
        Kind::List,
        "what a question is asked for: conditions with a comma between, all of which must hold",
    ),
    whole(
        "losses",
        "Losses",
        Kind::Choice(&["smooth", "whole"]),
        "`smooth`: losses flow evenly, chance left out; `whole`: one at a time, by chance",
    )
    .or("smooth")
    .later(),
    whole(
        "view",
        "View",
        Kind::Choice(&["sheet", "frame"]),
        "the whole sheet, or the part that fits a frame",
    )
    .or("sheet"),
    whole(
        "paper",
        "Paper",
        Kind::Choice(&["auto", "light", "dark"]),
        "light or dark; `auto` follows the system",
    )
    .or("auto"),
    whole(
        "v",
        "Version of the link",
        Kind::Choice(&["1"]),
        "the version of the link",
    )
    .or("1"),
];

/// `from`, behind `phaseN.`: the time from which a phase holds, which may be the beginning.
pub(crate) static PHASE_FROM: Key = whole(
    "from",
    "From",
    UP_TO_LARGEST,
    "the time from which the phase holds",
)
.measured_in(Unit::Time);

/// How many slots the keys have, those without side or phase too: two for each row.
pub(crate) const SLOTS: usize = 2 * KEYS.len();

/// No row.
const FREE: u8 = u8::MAX;

/// The rows that the reader asks for, found by their names as this is compiled.
pub(crate) mod rows {
    use super::row_named;

    pub(crate) const TITLE: usize = row_named("title");
    pub(crate) const SOTHAT: usize = row_named("sothat");
    pub(crate) const NOTE: usize = row_named("note");
    pub(crate) const MARKING: usize = row_named("marking");
    pub(crate) const UNIT: usize = row_named("unit");
    pub(crate) const COUNTED: usize = row_named("counted");
    pub(crate) const NAME: usize = row_named("name");
    pub(crate) const START: usize = row_named("start");
    pub(crate) const LOST: usize = row_named("lost");
    pub(crate) const FIRE: usize = row_named("fire");
    pub(crate) const RATE: usize = row_named("rate");
    pub(crate) const HALF: usize = row_named("half");
    pub(crate) const P: usize = row_named("p");
    pub(crate) const Q: usize = row_named("q");
    pub(crate) const BREAK: usize = row_named("break");
    pub(crate) const WASTAGE: usize = row_named("wastage");
    pub(crate) const SUPPORT_AREA: usize = row_named("support.area");
    pub(crate) const SUPPORT_AIMED: usize = row_named("support.aimed");
    pub(crate) const JOIN: usize = row_named("join");
    pub(crate) const FLOW: usize = row_named("flow");
    pub(crate) const RANGE: usize = row_named("range");
    pub(crate) const RANGE_CLOSING: usize = row_named("range.closing");
    pub(crate) const RANGE_LEAST: usize = row_named("range.least");
    pub(crate) const REACH: usize = row_named("reach");
    pub(crate) const REACH_SHAPE: usize = row_named("reach.shape");
    pub(crate) const UNTIL: usize = row_named("until");
    pub(crate) const VIEW: usize = row_named("view");
    pub(crate) const PAPER: usize = row_named("paper");
    pub(crate) const V: usize = row_named("v");
}

/// The row of a name; there is one.
const fn row_named(name: &str) -> usize {
    let mut row = 0;
    while !is_same(KEYS[row].name, name) {
        row += 1;
    }
    row
}

const fn is_same(one: &str, other: &str) -> bool {
    let (one, other) = (one.as_bytes(), other.as_bytes());
    let mut at = 0;
    while at < one.len() && at < other.len() && one[at] == other[at] {
        at += 1;
    }
    at == one.len() && at == other.len()
}

/// The rows by their names, so that one is found at once: each at its name's bucket, or at the next that was free.
static BUCKETS: [u8; 128] = {
    let mut buckets = [FREE; 128];
    let mut row = 0;
    while row < KEYS.len() {
        let mut at = bucket(KEYS[row].name);
        while buckets[at] != FREE {
            at = (at + 1) % buckets.len();
        }
        buckets[at] = row as u8;
        row += 1;
    }
    buckets
};

const fn bucket(name: &str) -> usize {
    let bytes = name.as_bytes();
    if bytes.is_empty() {
        return 0;
    }
    let (first, last) = (bytes[0] as usize, bytes[bytes.len() - 1] as usize);
    (first + 5 * last + 11 * bytes.len()) % 128
}

/// The slot of a key by its side and its name without the side's letter.
pub(crate) fn slot_of(side: Option<Side>, bare: &str) -> Option<usize> {
    let place = if side.is_some() { Place::Side } else { Place::Whole };
    let mut at = bucket(bare);
    loop {
        let row = usize::from(BUCKETS[at]);
        let key = KEYS.get(row)?;
        if key.place == place && key.name == bare {
            return Some(2 * row + usize::from(side == Some(Side::Y)));
        }
        at = (at + 1) % BUCKETS.len();
    }
}

/// The slot of a key of the link without number.
pub(crate) fn slot(name: &str) -> Option<usize> {
    match name.as_bytes() {
        [b'x', b'.', ..] => slot_of(Some(Side::X), &name[2..]),
        [b'y', b'.', ..] => slot_of(Some(Side::Y), &name[2..]),
        _ => slot_of(None, name),
    }
}

/// The row of a slot.
pub(crate) fn row(slot: usize) -> &'static Key {
    &KEYS[slot / 2]
}

/// The row of a key of the link without number, `x.start` or `until`.
pub fn find(name: &str) -> Option<&'static Key> {
    slot(name).map(row)
}

/// Whether `name` is `phaseN.KEY` or `alsoN.KEY` with a key that may stand there.
pub fn is_numbered(name: &str) -> bool {
    let numbered = |stem: &str, last: char| {
        let rest = name.strip_prefix(stem)?;
        let digit = rest.chars().next()?;
        (('1'..=last).contains(&digit))
            .then(|| rest[1..].strip_prefix('.'))
            .flatten()
    };
    if let Some(key) = numbered("phase", '9') {
        let changes = [
            "fire",
            "rate",
            "half",
            "p",
            "q",
            "wastage",
            "support.area",
            "support.aimed",
        ];
        return key == "from"
            || find(key).is_some_and(|key| key.place == Place::Side && changes.contains(&key.name));
    }
    match numbered("also", '8') {
        Some(key) => {
            let fixed = ["v", "view", "paper"];
            (find(key).is_some() && !fixed.contains(&key)) || (!key.starts_with("also") && is_numbered(key))
        }
        None => false,
    }
}

/// The known key that `name` most likely means, if any is near: the one whose label begins so, or is so without its
/// blanks, as `x.strength` and `y.breakpoint`; else the one that is spelt most like it.
pub fn nearest(name: &str) -> Option<String> {
    let lower = name.to_ascii_lowercase();
    labelled(&lower).or_else(|| spelt_alike(&lower))
}

fn labelled(lower: &str) -> Option<String> {
    let (letter, bare) = match lower.split_once('.') {
        Some((letter @ ("x" | "y"), bare)) => (letter, bare),
        _ => ("x", lower),
    };
    let means = |key: &&Key| {
        let label = key.label.to_ascii_lowercase();
        label.split([' ', ',']).next() == Some(bare) || label.replace(' ', "") == bare
    };
    KEYS.iter().find(means).map(|key| key.on(letter))
}

fn spelt_alike(lower: &str) -> Option<String> {
    KEYS.iter()
        .flat_map(|key| match key.place {
            Place::Whole => vec![key.on("")],
            Place::Side => vec![key.on("x"), key.on("y")],
        })
        .map(|known| (strsim::osa_distance(lower, &known), known))
        .filter(|(distance, known)| *distance < known.len() && *distance <= 1 + known.len() / 3)
        // Of two that are as near, the one that begins as `name` does.
        .min_by_key(|(distance, known)| (*distance, Reverse(alike_at_first(lower, known))))
        .map(|(_, known)| known)
}

/// How many letters two names begin with in common.
fn alike_at_first(one: &str, other: &str) -> usize {
    one.bytes()
        .zip(other.bytes())
        .take_while(|(one, other)| one == other)
        .count()
}
