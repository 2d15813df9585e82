//! The engagement that goes on from a time under the reading line, as the text of a link.

use crate::ledger::Ledger;
use crate::pairs::Pairs;
use crate::schedule::instants;
use crate::sides::{Both, Side};
use crate::statement::{Statement, Values};
use crate::terms::Engagement;
use crate::trajectory::Trajectory;

/// The pairs of the engagement that goes on from the time `t`: strengths, losses so far, reserves and flows still due,
/// phases, the rest of the clock, the range. Its outcome is that of the whole.
///
/// `pairs` are those that `statement` was read from, and `trajectory` is its fight's; `t` is from 0 to the end.
pub fn continued(pairs: &Pairs, statement: &Statement, trajectory: &Trajectory, t: f64) -> Pairs {
    let engagement = statement.engagement(&Values::new());
    let left = trajectory.strengths_at(t);
    let stretch = trajectory
        .stretches
        .iter()
        .rev()
        .find(|stretch| stretch.from <= t);
    let ledger = stretch.map_or(Both::default(), |stretch| stretch.ledger_at(t - stretch.from));
    let mut text = pairs.clone();
    for side in Side::BOTH {
        let key = |name: &str| format!("{}.{name}", side.letter());
        let Ledger {
            withdrawn,
            lost_before,
            losses,
            ..
        } = ledger[side];
        // What was withdrawn still counts as committed: it stands at the start again, and goes at once.
        text.set(&key("start"), &number(left[side] + withdrawn));
        let lost = lost_before + losses.all;
        text.set(
            &key("lost"),
            &if lost > 0.0 { number(lost) } else { String::new() },
        );
        text.set(&key("join"), &joins_due(&engagement, side, t, withdrawn));
        text.set(&key("flow"), &flows_due(&engagement, side, t));
    }
    phases(&mut text, pairs, &engagement, t);
    if let Some(until) = engagement.until {
        text.set("until", &number(until - t));
    }
    if let Some(closing) = engagement.closing {
        text.set(
            "range",
            &number((closing.range - closing.speed * t).max(closing.least.min(closing.range))),
        );
    }
    text
}

/// A number in the grammar of the link, which reads back the same.
fn number(value: f64) -> String {
    format!("{value}")
}

fn joins_due(engagement: &Engagement, side: Side, t: f64, withdrawn: f64) -> String {
    let back = (withdrawn > 0.0).then(|| format!("{}@0", number(-withdrawn)));
    let due = engagement.sides[side].joins.iter().filter(|join| join.time > t);
    let due = due.map(|join| format!("{}@{}", number(join.size), number(join.time - t)));
    back.into_iter().chain(due).collect::<Vec<_>>().join(",")
}

fn flows_due(engagement: &Engagement, side: Side, t: f64) -> String {
    let due = engagement.sides[side]
        .flows
        .iter()
        .filter(|flow| flow.to.is_none_or(|to| to > t));
    let due = due.map(|flow| {
        let to = flow.to.map_or(String::new(), |to| number(to - t));
        format!("{}@{}/{to}", number(flow.rate), number((flow.from - t).max(0.0)))
    });
    due.collect::<Vec<_>>().join(",")
}

/// Phases that have begun become the engagement's own keys; those to come keep their numbers.
fn phases(text: &mut Pairs, pairs: &Pairs, engagement: &Engagement, t: f64) {
    let begun = instants(engagement)
        .into_iter()
        .filter(|instant| instant.time <= t);
    for number in begun.flat_map(|instant| instant.phases) {
        let stem = format!("phase{number}.");
        let keys: Vec<(String, String)> = pairs
            .iter()
            .filter_map(|(key, value)| Some((key.strip_prefix(&stem)?.to_owned(), value.to_owned())))
            .collect();
        for (key, value) in keys {
            if key != "from" {
                text.set(&key, &value);
            }
            text.set(&format!("{stem}{key}"), "");
        }
    }
    for phase in engagement.phases.iter().filter(|phase| phase.from > t) {
        text.set(&format!("phase{}.from", phase.number), &number(phase.from - t));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::{Effort, fight};

    #[test]
    fn what_goes_on_ends_as_the_whole_does() {
        let links = [
            "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.06&y.break=0.4&y.join=64@4,-20@6&until=30",
            "x.start=300&x.fire=area&x.rate=0.0004&x.wastage=0.01&y.start=200&y.fire=search&y.half=40&y.rate=0.06\
             &y.flow=4@1/5&phase1.from=3&phase1.x.rate=0.0006&phase2.from=4&phase2.y.fire=aimed&phase2.y.rate=0.05",
            "x.start=300&x.rate=0.08&x.reach=800&y.start=200&y.rate=0.06&y.reach=600&y.reach.shape=0.5&range=1000\
             &range.closing=80&range.least=100&x.break=0.4&y.break=0.4",
        ];
        for link in links {
            let pairs = Pairs::parse(link);
            let statement = Statement::read(&pairs).expect(link);
            let whole = fight(&statement.engagement(&Values::new()), Effort::Trajectory);
            let trajectory = whole.trajectory.as_ref().expect("was asked for");
            for t in [0.0, 2.5, 3.0, 4.0, 4.5, 6.5] {
                let text = continued(&pairs, &statement, trajectory, t);
                let rest =
                    Statement::read(&text).unwrap_or_else(|problems| panic!("{link} at {t}: {problems:?}"));
                let rest = fight(&rest.engagement(&Values::new()), Effort::Outcome).outcome;
                assert_eq!(
                    rest.breaks,
                    whole.outcome.breaks,
                    "{link} at {t}: {}",
                    text.link()
                );
                let time = whole.outcome.time.unwrap_or(0.0);
                assert!(
                    (rest.time.unwrap_or(-t) + t - time).abs() <= 1e-11 * time,
                    "{link} at {t}"
                );
                for (part, all) in [(&rest.x, &whole.outcome.x), (&rest.y, &whole.outcome.y)] {
                    let (part, all) = (part.end.unwrap_or(-1.0), all.end.unwrap_or(-1.0));
                    assert!(
                        (part - all).abs() <= 1e-11 * all.max(1.0),
                        "{link} at {t}: {part} {all}"
                    );
                }
            }
        }
    }
}
