//! What happens when, in words: the timeline under the picture of strength over time.

use super::assumptions::changes;
use super::format::{MINUS, strength, three, with_unit};
use crate::fight::Fight;
use crate::outcome::{Breaks, Ended};
use crate::schedule::Instant;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::trajectory::Trajectory;

/// A moment of a fight.
#[derive(Clone, Debug, PartialEq)]
pub struct Moment {
    /// When.
    pub time: f64,
    /// When, in words.
    pub at: String,
    /// What happens.
    pub what: String,
    /// A few letters for a mark in the picture: "+64", "phase 2".
    pub mark: String,
    /// How matters stand after it: the force ratio, and what each side loses per unit of time.
    pub standing: String,
}

/// The moments of `fight` from its start to its end, in order.
pub fn timeline(statement: &Statement, fight: &Fight) -> Vec<Moment> {
    let Some(trajectory) = &fight.trajectory else {
        return Vec::new();
    };
    let mut moments = vec![moment(
        statement,
        trajectory,
        0.0,
        "the start".into(),
        String::new(),
    )];
    let end = trajectory.ends().unwrap_or(f64::INFINITY);
    for (place, instant) in trajectory
        .instants
        .iter()
        .enumerate()
        .filter(|(_, instant)| instant.time <= end)
    {
        let before = place.checked_sub(1).map(|before| &trajectory.instants[before]);
        let parts = happenings(statement, instant, before);
        if !parts.is_empty() {
            let what = parts
                .iter()
                .map(|part| part.0.as_str())
                .collect::<Vec<_>>()
                .join("; ");
            let mark = parts
                .iter()
                .map(|part| part.1.as_str())
                .filter(|mark| !mark.is_empty());
            let mark = mark.collect::<Vec<_>>().join(" ");
            moments.push(moment(statement, trajectory, instant.time, what, mark));
        }
    }
    if let Some(what) = ending(statement, fight) {
        moments.push(moment(statement, trajectory, end, what, String::new()));
    }
    moments
}

fn moment(statement: &Statement, trajectory: &Trajectory, time: f64, what: String, mark: String) -> Moment {
    let at = with_unit(time, statement.unit);
    Moment {
        time,
        at,
        what,
        mark,
        standing: standing(statement, trajectory, time),
    }
}

/// Each thing that happens at an instant, in words and as a mark.
fn happenings(statement: &Statement, instant: &Instant, before: Option<&Instant>) -> Vec<(String, String)> {
    let mut parts = Vec::new();
    let flow_before = before.map_or(Both::default(), |before| before.conditions.flow);
    for side in Side::BOTH {
        let name = &statement.names[side];
        let unit = statement.unit.symbol();
        if instant.arrivals[side] > 0.0 {
            let size = strength(instant.arrivals[side]);
            parts.push((format!("{size} join {name}"), format!("+{size}")));
        }
        let flow = instant.conditions.flow[side];
        if flow != flow_before[side] {
            let what = match flow {
                0.0 => format!("nothing more flows to {name}"),
                _ => format!("from now on {} per\u{a0}{unit} flow to {name}", three(flow)),
            };
            parts.push((what, String::new()));
        }
    }
    parts.extend(instant.phases.iter().map(|number| phase(statement, *number)));
    parts.extend(
        before
            .into_iter()
            .flat_map(|before| of_range(statement, instant, before)),
    );
    for side in Side::BOTH {
        let asked = instant.withdrawals[side];
        if asked > 0.0 {
            let name = &statement.names[side];
            let there = instant.went[side];
            let short = if there < asked * (1.0 - 1e-12) {
                format!(", of {} that were to go: no more were there", strength(asked))
            } else {
                String::new()
            };
            parts.push((
                format!("{} leave {name}{short}", strength(there)),
                format!("{MINUS}{}", strength(there)),
            ));
        }
    }
    parts
}

/// A phase that begins, and what changes with it.
fn phase(statement: &Statement, number: u8) -> (String, String) {
    let mut what = format!("phase {number} begins");
    let phase = statement.terms.phases.iter().find(|phase| phase.number == number);
    for side in Side::BOTH {
        let words = phase.map(|phase| changes(phase, side)).unwrap_or_default();
        if !words.is_empty() {
            what += &format!(", {}: {words}", statement.names[side]);
        }
    }
    (what, format!("phase {number}"))
}

/// What the closing of the range does at an instant: a side's fire begins to reach, or the range closes no further.
fn of_range(statement: &Statement, instant: &Instant, before: &Instant) -> Vec<(String, String)> {
    let mut parts = Vec::new();
    let mut closes = true;
    for side in Side::BOTH {
        let grows = |instant: &Instant| {
            instant.conditions.growth[side].is_some() && instant.conditions.fire[side].takes_effect()
        };
        match (grows(before), grows(instant)) {
            (false, true) => {
                let what = format!("the range is down to the reach of {}", statement.names[side]);
                parts.push((what, String::new()));
            }
            (true, false) => closes = false,
            _ => {}
        }
    }
    if !closes {
        parts.push(("the range closes no further".into(), String::new()));
    }
    parts
}

/// The force ratio, and what each side loses per unit of time.
fn standing(statement: &Statement, trajectory: &Trajectory, time: f64) -> String {
    let names = &statement.names;
    let unit = statement.unit.symbol();
    let at = trajectory.strengths_at(time);
    let there = format!("{} {}, {} {}", names.x, strength(at.x), names.y, strength(at.y));
    let ratio = if at.x > 0.0 && at.y > 0.0 {
        format!(", {} to 1", three(at.x / at.y))
    } else {
        String::new()
    };
    let losing = trajectory.losses_per_time(time);
    let loss = |side: Side| format!("{} loses {} per\u{a0}{unit}", names[side], three(losing[side]));
    format!("{there}{ratio}; {}, {}", loss(Side::X), loss(Side::Y))
}

fn ending(statement: &Statement, fight: &Fight) -> Option<String> {
    let breaks = |side: Side| {
        format!(
            "{} {}",
            statement.names[side],
            super::sentence::breaks(statement, side)
        )
    };
    Some(match (fight.outcome.breaks, fight.outcome.ended) {
        (Breaks::X, _) => breaks(Side::X),
        (Breaks::Y, _) => breaks(Side::Y),
        (Breaks::Both, _) => "both break".into(),
        (Breaks::Neither, Ended::Clock) => "the clock".into(),
        (Breaks::Neither, Ended::Withdrawn) => "a side has nobody left, some of them withdrawn".into(),
        (Breaks::Neither, Ended::Unfinished) => "not worked out further".into(),
        (Breaks::Neither, _) => return None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::{Effort, fight};
    use crate::pairs::Pairs;

    /// The moments of `link` after its start, each with what happens.
    fn moments(link: &str) -> Vec<(f64, String)> {
        let statement = Statement::read(&Pairs::parse(link)).expect("it is one");
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        let moments = timeline(&statement, &fight).into_iter().skip(1);
        moments.map(|moment| (moment.time, moment.what)).collect()
    }

    /// The range met a reach, and a phase began, without a word of what that changed.
    #[test]
    fn what_changes_with_the_range_and_with_a_phase_is_told() {
        let link = "x.name=Tarn&x.start=400&x.rate=0.02&x.reach=900&y.name=Osk&y.start=300&y.rate=0.01&range=1000&\
                    range.closing=100&range.least=400&phase1.from=3&phase1.y.rate=0.02&phase1.y.wastage=0.01&until=8";
        let found = moments(link);
        let told = [
            (1.0, "the range is down to the reach of Tarn"),
            (3.0, "phase 1 begins, Osk: rate 0.02; wastage 0.01"),
            (6.0, "the range closes no further"),
            (8.0, "the clock"),
        ];
        assert_eq!(found, told.map(|(time, what)| (time, what.to_owned())));
    }

    /// A withdrawal at which the fight ends begins no stretch: it was said that nobody had gone.
    #[test]
    fn who_leaves_at_the_end_is_counted() {
        let sides = "x.start=400&x.fire=none&y.start=100&y.fire=none&x.name=Tarn&y.name=Osk";
        for (later, words) in [
            ("y.join=-30@5&until=5", "30 leave Osk"),
            (
                "y.join=-150@5",
                "100 leave Osk, of 150 that were to go: no more were there",
            ),
            ("y.join=-30@0,-30@5&until=9", "30 leave Osk"),
        ] {
            let link = format!("{sides}&{later}");
            let statement = Statement::read(&Pairs::parse(&link)).expect("it is one");
            let fight = fight(&statement.engagement(), Effort::Trajectory);
            let moments = timeline(&statement, &fight);
            let at_five = moments.iter().find(|moment| moment.time == 5.0);
            assert_eq!(at_five.map(|moment| moment.what.as_str()), Some(words), "{link}");
        }
    }
}
