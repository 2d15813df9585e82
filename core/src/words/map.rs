//! A map of two numbers in question in words.

use super::asked::happens;
use super::format::{per_cent, strength, three, time};
use super::goal::{goals, short};
use super::slot;
use crate::asked::{Chart, FINEST, Miss, Second, Story, Worst};
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::picture::Table;
use crate::sides::Side;
use crate::slots::{Slot, slots};
use crate::statement::Statement;

/// What the map shows in one sentence. It begins "In this model", so that it stays true when it is copied alone.
pub fn sentence(statement: &Statement, chart: &Chart) -> String {
    let wanted = chart.met_share().map(|share| (share, chart.miss()));
    of_shares(statement, chart.slots(), &chart.shares(), wanted.as_ref())
}

/// The same of a map as the batch door has it; `wanted` is on how much of it all conditions are met, and what comes nearest.
pub fn of_shares(
    statement: &Statement,
    slots: &[Slot; 2],
    shares: &[(Story, f64)],
    wanted: Option<&(f64, Option<Miss>)>,
) -> String {
    let [one, other] = slots.each_ref().map(|slot| slot::name(statement, slot));
    let part = |(story, share): &(Story, f64)| {
        format!("{} on {} of the map", happens(statement, story), per_cent(*share))
    };
    if shares.is_empty() {
        return format!(
            "In this model, with {one} and {other} in question, each fight takes too much work for a map: ask for one of them, or \
             in a smaller range."
        );
    }
    let wanted = wanted.map(|(share, miss)| self::wanted(statement, slots, *share, miss.as_ref()));
    let parts: Vec<String> = wanted.into_iter().chain(shares.iter().map(part)).collect();
    format!(
        "In this model, with {one} and {other} in question: {}.",
        parts.join("; ")
    )
}

/// What stands in place of the map where there is no room for one, as in a frame; `None` unless two numbers are in question.
///
/// `pairs` are those that `statement` was read from.
pub fn elsewhere(pairs: &Pairs, statement: &Statement) -> Option<String> {
    let all = slots(pairs, statement);
    let mut asked = all.iter().filter(|slot| slot.quantity.is_question());
    let (one, other) = (asked.next()?, asked.next()?);
    asked.next().is_none().then(|| {
        format!(
            "A map of {} and {} is asked for: it is on the whole sheet.",
            slot::name(statement, one),
            slot::name(statement, other)
        )
    })
}

/// "all that is wanted, that Ondrel prevails and at least 80 of Ondrel are left, holds on 31 % of the map".
fn wanted(statement: &Statement, slots: &[Slot; 2], share: f64, miss: Option<&Miss>) -> String {
    let all = goals(statement, &statement.so_that);
    let holds = match miss {
        Some(miss) => {
            let [one, other] =
                [0, 1].map(|which| slot::value(statement, slots[which].unit, miss.values[which]));
            let short = short(statement, &statement.so_that, &miss.worst);
            format!("nowhere on the map: the nearest place, {one} and {other}, {short}")
        }
        None if share >= 1.0 => "all over the map".into(),
        None => format!("on {} of the map", per_cent(share)),
    };
    format!("what is wanted, that {all}, holds {holds}")
}

/// The place on the map and how it comes out there: "Ondrel's strength at the start 620, Vessary's strength at the start 410:
/// Vessary breaks first, after 8.2 h; left: Ondrel 455, Vessary 246; …"; `missing` is what is missing of the conditions there.
pub fn reading(
    statement: &Statement,
    chart: &Chart,
    values: [f64; 2],
    outcome: &Outcome,
    missing: Option<&Worst>,
) -> String {
    let place = chart.slots().iter().zip(values).map(|(one, value)| {
        format!(
            "{} {}",
            slot::name(statement, one),
            slot::value(statement, one.unit, value)
        )
    });
    let place: Vec<String> = place.collect();
    let story = Story::of(outcome);
    let when = outcome
        .time
        .map(|at| format!(", after {}", time(at, statement.unit)));
    let left = |side: Side| {
        let end = outcome.sides()[side].end.unwrap_or(f64::INFINITY);
        format!("{} {}", statement.names[side], strength(end))
    };
    let ratio = outcome.loss_exchange_ratio.map(|ratio| {
        format!(
            "; {} loses {} for each 1 of {}",
            statement.names.y,
            three(ratio),
            statement.names.x
        )
    });
    let wanted = match missing {
        _ if statement.so_that.is_empty() => String::new(),
        None => ". All that is wanted holds here".into(),
        Some(worst) => format!(
            ". Not all that is wanted holds here: it {}",
            short(statement, &statement.so_that, worst)
        ),
    };
    format!(
        "{}: {}{}; left: {}, {}{}{wanted}.",
        place.join(", "),
        happens(statement, &story),
        when.unwrap_or_default(),
        left(Side::X),
        left(Side::Y),
        ratio.unwrap_or_default()
    )
}

/// What a second reading is called.
pub fn second(statement: &Statement, second: Second) -> String {
    match second {
        Second::Time => format!("the time of the break ({})", statement.unit.symbol()),
        Second::LeftX => format!("what is left of {}", statement.names.x),
        Second::LeftY => format!("what is left of {}", statement.names.y),
        Second::ExchangeRatio => format!("{} lost for each 1 of {}", statement.names.y, statement.names.x),
    }
}

/// Where it was looked at, and how closely.
pub fn where_looked(statement: &Statement, chart: &Chart) -> String {
    let looked = chart
        .slots()
        .iter()
        .zip(chart.spans())
        .zip(chart.whys())
        .map(|((one, span), why)| {
            format!(
                "{} from {} to {}, {}",
                slot::name(statement, one),
                slot::value(statement, one.unit, span.low),
                slot::value(statement, one.unit, span.high),
                super::asked::why(why)
            )
        });
    let looked: Vec<String> = looked.collect();
    let cut_short = if chart.is_cut_short() {
        " Each of these fights takes much work, so looking was ended early: parts of the lines may be missing, or off by a \
         three-hundredth of the map."
    } else {
        ""
    };
    format!(
        "Looked at: {}; write `?low..high` behind a number to look elsewhere. {FINEST} × {FINEST} places where the outcome \
         flips{}, fewer elsewhere, {} fights in all: an island smaller than a fortieth of the map may be missed.{cut_short}",
        looked.join("; "),
        if chart.goals().is_empty() {
            ""
        } else {
            " or what is wanted begins to hold"
        },
        chart.fights()
    )
}

/// How it comes out at some places: a row for each value of the second number, the largest first, a column for each of the
/// first.
pub fn table(statement: &Statement, chart: &Chart) -> Table {
    const STEPS: usize = 6;
    let [one, other] = chart.slots();
    let place = |step: usize| step * FINEST / STEPS;
    let part = |step: usize| step as f64 / STEPS as f64;
    let values = |step: usize| chart.values([part(step), part(step)]);
    let [across, up] = [one, other].map(|slot| slot::name(statement, slot));
    let mut heads = vec![format!("{up} ↓, {across} →")];
    heads.extend((0..=STEPS).map(|step| slot::six_with_unit(statement, one.unit, values(step)[0])));
    let row = |up: usize| {
        let cells = (0..=STEPS).map(|across| {
            let story = chart.story_at(place(across), place(up));
            let story = story.and_then(|story| chart.stories().get(story));
            let wanted = if chart.is_met_at(place(across), place(up)) {
                ", as wanted"
            } else {
                ""
            };
            story.map_or(String::new(), |story| happens(statement, story) + wanted)
        });
        let first = slot::six_with_unit(statement, other.unit, values(up)[1]);
        std::iter::once(first).chain(cells).collect()
    };
    Table {
        caption: format!("How it comes out, by {across} and {up}"),
        heads,
        rows: (0..=STEPS).rev().map(row).collect(),
    }
}
