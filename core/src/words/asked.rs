//! The answer to a question in words.

use super::goal::{goals, short};
use super::sentence::breaks;
use super::slot;
use crate::asked::{Asked, Boundary, End, Met, Reply, Segment, Story, Why};
use crate::outcome::{Breaks, Ended};
use crate::picture::Table;
use crate::sides::Side;
use crate::statement::Statement;

/// The answer in one sentence. It begins "In this model", so that it stays true when it is copied alone.
pub fn sentence(statement: &Statement, asked: &Asked) -> String {
    let answer = match &asked.met {
        Some(met) => wanted(statement, asked, met),
        None => story(statement, asked),
    };
    format!("In this model{answer}.")
}

/// The answer to one question or to two in one sentence.
pub fn reply(statement: &Statement, reply: &Reply) -> String {
    match reply {
        Reply::One(asked) => sentence(statement, asked),
        Reply::Two(map) => {
            let wanted = map.met_share.map(|share| (share, map.nearest));
            super::map::of_shares(statement, &map.slots, &map.shares, wanted.as_ref())
        }
    }
}

fn value(statement: &Statement, asked: &Asked, value: f64) -> String {
    slot::value(statement, asked.slot.unit, value)
}

/// "from 0 to 2,400".
fn looked(statement: &Statement, asked: &Asked) -> String {
    format!(
        "from {} to {}",
        value(statement, asked, asked.span.low),
        value(statement, asked, asked.span.high)
    )
}

/// Every place where the outcome changes: "with Ondrel's strength at the start in question, Ondrel breaks first up to 607.2,
/// Vessary from there on".
fn story(statement: &Statement, asked: &Asked) -> String {
    let name = slot::name(statement, &asked.slot);
    if let [only] = &asked.outcomes[..] {
        return format!(
            " {} whatever {name} is, {}",
            happens(statement, &only.story),
            looked(statement, asked)
        );
    }
    let last = asked.outcomes.len().saturating_sub(1);
    let part = |(place, segment): (usize, &Segment)| {
        let what = happens(statement, &segment.story);
        let to = value(statement, asked, segment.to.at());
        match place {
            0 => format!("{what} up to {to}"),
            _ if place == last => format!("{what} from there on"),
            _ => format!("{what} from there to {to}"),
        }
    };
    let parts: Vec<String> = asked.outcomes.iter().enumerate().map(part).collect();
    format!(", with {name} in question: {}", parts.join("; "))
}

/// What happens along a part of the story: "Ondrel breaks first".
pub fn happens(statement: &Statement, story: &Story) -> String {
    let names = &statement.names;
    let first = |side: Side| format!("{} {} first", names[side], breaks(statement, side));
    match (story.breaks, story.ended, story.prevails) {
        (Breaks::X, ..) => first(Side::X),
        (Breaks::Y, ..) => first(Side::Y),
        (Breaks::Both, ..) => "both sides break at the same moment".into(),
        (_, Ended::Clock, _) => "neither side breaks by the clock".into(),
        (_, Ended::Limit, Some(side)) => {
            format!(
                "{} fades without ever reaching 0 and {} is left",
                names[side.enemy()],
                names[side]
            )
        }
        (_, Ended::Growth, _) => "neither side breaks, and strength grows without bound".into(),
        (_, Ended::Withdrawn, _) => "neither side breaks, and one has nobody left there".into(),
        (_, Ended::Unfinished, _) => "neither side breaks as far as it was worked out".into(),
        (_, Ended::Equilibrium, _) => "neither side breaks, and all comes to balance".into(),
        _ => "neither side breaks".into(),
    }
}

/// Every interval on which all conditions hold.
fn wanted(statement: &Statement, asked: &Asked, met: &[Met]) -> String {
    let name = slot::name(statement, &asked.slot);
    let all = goals(statement, &asked.goals);
    let looked = looked(statement, asked);
    match met {
        [] => {
            let nearest = asked.nearest.as_ref().map(|nearest| {
                format!(
                    ": the nearest, {}, {}",
                    value(statement, asked, nearest.value),
                    short(statement, &asked.goals, &nearest.worst)
                )
            });
            format!(
                " no value of {name} {looked} does so that {all}{}",
                nearest.unwrap_or_default()
            )
        }
        [
            Met {
                from: End::Edge(_),
                to: End::Edge(_),
            },
        ] => format!(" every value of {name} {looked} does so that {all}"),
        _ => {
            let ranges: Vec<String> = met.iter().map(|met| range(statement, asked, met)).collect();
            format!(", so that {all}, {name} must be {}", ranges.join(", or "))
        }
    }
}

/// "at least 607.2", "from 102 to 340", "612 to the edge of what was asked, 2,400".
fn range(statement: &Statement, asked: &Asked, met: &Met) -> String {
    let number = |value: f64| self::value(statement, asked, value);
    let (from, to) = (met.from.at(), met.to.at());
    match (met.from, met.to) {
        _ if from == to => format!("{} and no other", number(from)),
        (End::Crossing(_), End::Edge(_)) => {
            format!("at least {} (looked for up to {})", number(from), number(to))
        }
        (End::Edge(_), End::Crossing(_)) => {
            format!("at most {} (looked for down to {})", number(to), number(from))
        }
        _ => format!("from {} to {}", number(from), number(to)),
    }
}

/// What a button that puts a value into the field says: "put 608 into the field", and without conditions what happens then.
pub fn putting(statement: &Statement, asked: &Asked, value: f64) -> String {
    let put = format!(
        "put {} into the field",
        slot::six_with_unit(statement, asked.slot.unit, value)
    );
    let holds = |segment: &&Segment| segment.from.at() <= value && value <= segment.to.at();
    match asked.outcomes.iter().find(holds).filter(|_| asked.met.is_none()) {
        Some(segment) => format!("{put}: {}", happens(statement, &segment.story)),
        None => put,
    }
}

/// Why it was looked for where it was.
pub(super) fn why(why: Why) -> &'static str {
    match why {
        Why::Asked => "as asked",
        Why::Whole => "all that it can be",
        Why::NoScale => "since nothing else stated says on what scale it counts",
        Why::LargerSide => "up to four times the larger side",
        Why::Now => "up to ten times what it is now",
        Why::EqualFire => {
            "up to ten times the rate at which both sides lose the same part of themselves at the start"
        }
        Why::LostAtStart => "up to ten times what fire takes at the start",
        Why::Targets => "up to ten times the enemy's strength at the start",
        Why::Clock => "up to the clock",
        Why::Lasting => "up to twice as long as the fight lasts",
        Why::Range => "up to four times the larger of range and reach",
    }
}

/// Where it was looked for, why there, and how closely.
pub fn where_looked(statement: &Statement, asked: &Asked) -> String {
    let why = why(asked.why);
    let step = (asked.span.high - asked.span.low) / f64::from(crate::asked::STEPS);
    let cut_short = if asked.cut_short {
        " Each of these fights takes much work, so looking was ended early: nothing beyond is known, and values may be off by a \
         step."
    } else {
        ""
    };
    format!(
        "Looked for {}, {why}; write `?low..high` behind the number to look elsewhere. Seen in even steps of {} and in even \
         ratios, {} fights in all: what changes and changes back between two steps may be missed.{cut_short}",
        looked(statement, asked),
        value(statement, asked, step),
        asked.fights
    )
}

/// The whole story as a table, a row for each stretch of values.
pub fn table(statement: &Statement, asked: &Asked) -> Table {
    let number = |value: f64| slot::six_with_unit(statement, asked.slot.unit, value);
    let rows = asked.outcomes.iter().map(|segment| {
        vec![
            number(segment.from.at()),
            number(segment.to.at()),
            happens(statement, &segment.story),
            what(&segment.to).into(),
        ]
    });
    Table {
        caption: format!("What happens, by {}", slot::name(statement, &asked.slot)),
        heads: ["from", "to", "what happens", "at the upper end"]
            .map(String::from)
            .to_vec(),
        rows: rows.collect(),
    }
}

/// Where all conditions hold as a table; `None` where there are no conditions.
pub fn met_table(statement: &Statement, asked: &Asked) -> Option<Table> {
    let number = |value: f64| slot::six_with_unit(statement, asked.slot.unit, value);
    let rows = asked.met.as_ref()?.iter().map(|met| {
        vec![
            number(met.from.at()),
            number(met.to.at()),
            what(&met.from).into(),
            what(&met.to).into(),
        ]
    });
    Some(Table {
        caption: format!(
            "Where {}, by {}",
            goals(statement, &asked.goals),
            slot::name(statement, &asked.slot)
        ),
        heads: ["from", "to", "at the lower end", "at the upper end"]
            .map(String::from)
            .to_vec(),
        rows: rows.collect(),
    })
}

/// What an end is.
fn what(end: &End) -> &'static str {
    match end {
        End::Edge(_) => "the edge of what was asked",
        End::Crossing(Boundary { by_formula: true, .. }) => "a crossing, by the state equation",
        End::Crossing(Boundary { jump: true, .. }) => "a crossing, at which what is left jumps",
        End::Crossing(_) => "a crossing",
    }
}
