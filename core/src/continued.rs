//! The engagement that goes on from a time under the reading line, as the text of a link.

use crate::keys::{Kind, find};
use crate::ledger::Ledger;
use crate::mark::text_mark;
use crate::pairs::Pairs;
use crate::schedule::instants;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::terms::Engagement;
use crate::trajectory::Trajectory;
use crate::words::format::{plain, with_unit};

/// The pairs of the engagement that goes on from the time `t`: strengths, losses so far, reserves and flows still due,
/// phases, the rest of the clock, the range. Its outcome is that of the whole, and its note says which that is.
///
/// `pairs` are those that `statement` was read from, and `trajectory` is its fight's; `t` is from 0 to the end.
pub fn continued(pairs: &Pairs, statement: &Statement, trajectory: &Trajectory, t: f64) -> Pairs {
    let engagement = statement.engagement();
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
    let words = format!(
        "goes on from {} of the text with the mark {}.",
        plain(&with_unit(t, statement.unit)),
        text_mark(pairs)
    );
    trace(&mut text, &words);
    text
}

/// Adds where an engagement comes from to its note, or to its title where that has no room left; to neither where a word
/// of the user's own would be lost.
fn trace(text: &mut Pairs, words: &str) {
    for key in ["note", "title"] {
        let before = text.get(key).unwrap_or_default().trim();
        let gap = match before.chars().last() {
            None => "",
            Some('.' | '!' | '?') => " ",
            _ => ". ",
        };
        // One that went on itself has said so.
        let it = if before.contains("t goes on from ") {
            "Then it"
        } else {
            "It"
        };
        let traced = format!("{before}{gap}{it} {words}");
        if let Some(Kind::Text(most)) = find(key).map(|row| row.kind)
            && traced.chars().count() <= most
        {
            return text.set(key, &traced);
        }
    }
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
    fn what_goes_on_says_from_what() {
        let sides = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05";
        let on = |link: &str, t: f64| {
            let pairs = Pairs::parse(link);
            let statement = Statement::read(&pairs).expect(link);
            let whole = fight(&statement.engagement(), Effort::Trajectory);
            let text = continued(
                &pairs,
                &statement,
                whole.trajectory.as_ref().expect("was asked for"),
                t,
            );
            assert!(Statement::read(&text).is_ok(), "{}", text.link());
            (text, text_mark(&pairs))
        };
        let (text, mark) = on(sides, 4.1);
        let first = format!("It goes on from 4.1 h of the text with the mark {mark}.");
        assert_eq!(text.get("note"), Some(first.as_str()));
        let (text, mark) = on(&text.link(), 2.0);
        let then = format!("{first} Then it goes on from 2 h of the text with the mark {mark}.");
        assert_eq!(text.get("note"), Some(then.as_str()));
        for (note, gap) in [("A source", ". "), ("A source!", " ")] {
            let (text, mark) = on(&format!("{sides}&note={note}"), 1.5);
            let words = format!("{note}{gap}It goes on from 1.5 h of the text with the mark {mark}.");
            assert_eq!(text.get("note"), Some(words.as_str()));
        }
        // Nothing of the user's own is lost for it.
        let (note, title) = ("n".repeat(990), "t".repeat(190));
        let (text, mark) = on(&format!("{sides}&note={note}&title=Turn 3"), 1.5);
        let words = format!("Turn 3. It goes on from 1.5 h of the text with the mark {mark}.");
        assert_eq!(
            [text.get("note"), text.get("title")],
            [Some(note.as_str()), Some(words.as_str())]
        );
        let (text, _) = on(&format!("{sides}&note={note}&title={title}"), 1.5);
        assert_eq!(
            [text.get("note"), text.get("title")],
            [Some(note.as_str()), Some(title.as_str())]
        );
    }

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
            let whole = fight(&statement.engagement(), Effort::Trajectory);
            let trajectory = whole.trajectory.as_ref().expect("was asked for");
            for t in [0.0, 2.5, 3.0, 4.0, 4.5, 6.5] {
                let text = continued(&pairs, &statement, trajectory, t);
                let rest =
                    Statement::read(&text).unwrap_or_else(|problems| panic!("{link} at {t}: {problems:?}"));
                let rest = fight(&rest.engagement(), Effort::Outcome).outcome;
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

    /// What comes to a side that is pinned at nothing is lost at once, and counts: the engagement that went on had forgotten
    /// all that was so lost, and waited the whole time once more.
    #[test]
    fn what_is_lost_as_it_comes_is_carried_on() {
        // 100 gone at once; of the 10 an hour that come from 1 h on half brings the line up: it is at 0 at 11 h.
        let link = "x.start=100&x.break=0.5&x.fire=none&x.join=-100@0&x.flow=10@1/&y.start=300&y.rate=0.1";
        let pairs = Pairs::parse(link);
        let statement = Statement::read(&pairs).expect(link);
        let whole = fight(&statement.engagement(), Effort::Trajectory);
        let trajectory = whole.trajectory.as_ref().expect("was asked for");
        let ends = whole.outcome.time.expect("x breaks");
        assert!((ends - 11.0).abs() <= 1e-12 * ends, "{ends}");
        assert_eq!(trajectory.losses_per_time(6.0).x, 10.0);
        let text = continued(&pairs, &statement, trajectory, 6.0);
        let rest = Statement::read(&text).unwrap_or_else(|problems| panic!("{problems:?}"));
        let rest = fight(&rest.engagement(), Effort::Outcome).outcome;
        let time = rest.time.unwrap_or(f64::NAN) + 6.0;
        assert!(
            (time - ends).abs() <= 1e-12 * ends,
            "{time} {ends}: {}",
            text.link()
        );
        let committed = [rest.x.committed, whole.outcome.x.committed];
        assert!(
            (committed[0] - committed[1]).abs() <= 1e-12 * committed[1],
            "{committed:?}"
        );
    }
}
