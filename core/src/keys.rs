//! The one table of keys: the parser, the form's labels, the README's table and the tests all come from it.

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
        ABOVE_ZERO,
        Unit::Strength,
        "strength at time 0",
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
    .or("0")
    .later(),
    side(
        "support.area",
        "Supporting arms, at an area",
        UP_TO_LARGEST,
        Unit::EnemyFractionPerTime,
        "losses on the enemy by supporting arms that are not attrited, firing at an area",
    )
    .or("0")
    .later(),
    side(
        "support.aimed",
        "Supporting arms, aimed",
        UP_TO_LARGEST,
        Unit::EnemyPerTime,
        "the same, at targets they can pick",
    )
    .or("0")
    .later(),
    side(
        "join",
        "Reserves",
        Kind::List,
        Unit::Strength,
        "reserves that join: size@time, with a comma between; a size below zero withdraws",
    )
    .later(),
    side(
        "flow",
        "Steady reinforcement",
        Kind::List,
        Unit::Strength,
        "so many for each unit of time: rate@from/to, with a comma between",
    )
    .later(),
    whole(
        "until",
        "Clock",
        ABOVE_ZERO,
        "the time at which the engagement is cut off",
    )
    .measured_in(Unit::Time),
    whole("sothat", "So that", Kind::List, "what a question is asked for").later(),
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

/// The row of a key of the link without number, `x.start` or `until`.
pub fn find(name: &str) -> Option<&'static Key> {
    let (place, bare) = match name.strip_prefix("x.").or_else(|| name.strip_prefix("y.")) {
        Some(bare) => (Place::Side, bare),
        None => (Place::Whole, name),
    };
    KEYS.iter().find(|key| key.place == place && key.name == bare)
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

/// The known key that is spelt most like `name`, if any is near.
pub fn nearest(name: &str) -> Option<String> {
    let lower = name.to_lowercase();
    KEYS.iter()
        .flat_map(|key| match key.place {
            Place::Whole => vec![key.on("")],
            Place::Side => vec![key.on("x"), key.on("y")],
        })
        .map(|known| (strsim::osa_distance(&lower, &known), known))
        .filter(|(distance, known)| *distance < known.len() && *distance <= 1 + known.len() / 3)
        // Of two that are as near, the one that begins as `name` does.
        .min_by_key(|(distance, known)| (*distance, Reverse(alike_at_first(&lower, known))))
        .map(|(_, known)| known)
}

/// How many letters two names begin with in common.
fn alike_at_first(one: &str, other: &str) -> usize {
    one.bytes()
        .zip(other.bytes())
        .take_while(|(one, other)| one == other)
        .count()
}
