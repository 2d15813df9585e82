//! Whatever the numbers: bounded work, no outcome that is no number, nobody lost or made.

use aftercount_core::fight::{Effort, Fight, MOST_EVALUATIONS, fight};
use aftercount_core::outcome::{Ended, Outcome, SideOutcome};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_tests::ugly;

/// How many ugly schedules are drawn; some of them are refused.
const DRAWN: u32 = 2500;

/// The hostile links that are no problem, each with what it comes to.
fn fights() -> impl Iterator<Item = (String, Fight)> {
    let links = ugly::extremes().into_iter().chain((0..DRAWN).map(ugly::link));
    links.filter_map(|link| {
        let statement = Statement::read(&Pairs::parse(&link)).ok()?;
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        Some((link, fight))
    })
}

#[test]
fn no_fight_takes_more_than_the_bound() {
    let (mut most, mut worked_out) = ((0, String::new()), 0);
    for (link, fight) in fights() {
        let took = fight.work.evaluations();
        worked_out += 1;
        if took > most.0 {
            most = (took, link);
        }
    }
    println!("{worked_out} links, most: {most:?}");
    assert!(worked_out > DRAWN / 2, "{worked_out}");
    assert!(most.0 <= MOST_EVALUATIONS, "{most:?}");
}

/// Two sides that each come in and are lost at the same pace as the range closes next to never: neither is in a balance with the
/// other slow, and each of 130 stretches takes as many steps as its length has units. All of them took 1,117,020 evaluations.
#[test]
fn many_long_stretches_keep_the_bound_together() {
    let at = |n: usize| 2000 * n;
    let flows = |first: usize| {
        let items = (0..19).map(|n| format!("0.01@{}/{}", at(first + 4 * n), at(first + 4 * n + 1)));
        format!("200@0/,{}", items.collect::<Vec<_>>().join(","))
    };
    let joins = |first: usize| {
        let items = (0..20).map(|n| format!("0.001@{}", at(first + 2 * n)));
        items.collect::<Vec<_>>().join(",")
    };
    let side = |k: &str, reach: &str, first: usize, second: usize| {
        format!(
            "{k}.start=100&{k}.fire=search&{k}.half=50&{k}.rate=1&{k}.wastage=1&{k}.reach={reach}&{k}.flow={}&{k}.join={}&",
            flows(first),
            joins(second)
        )
    };
    let phases: String = (1..=9)
        .map(|n| format!("&phase{n}.from={}&phase{n}.x.wastage=1.{n}", at(116 + n)))
        .collect();
    let link = format!(
        "{}{}range=1e6&range.closing=0.001{phases}",
        side("x", "2e6", 1, 77),
        side("y", "3e6", 3, 78)
    );
    let statement = Statement::read(&Pairs::parse(&link)).expect("no problem");
    let Fight { outcome, work, .. } = fight(&statement.engagement(), Effort::Trajectory);
    println!("{work:?}, {} pieces", outcome.pieces.len());
    assert_eq!(outcome.ended, Ended::Unfinished);
    assert!(outcome.pieces.len() > 10);
    assert!(work.evaluations() <= MOST_EVALUATIONS, "{work:?}");
    assert_eq!(wrong_with_all(&outcome), None);
}

/// What is wrong with the books of a side, if anything is.
fn wrong_with(side: &SideOutcome) -> Option<String> {
    let SideOutcome {
        start,
        joined,
        withdrawn,
        committed,
        end,
        losses,
    } = *side;
    let numbers = [
        start,
        joined,
        withdrawn,
        committed,
        end.unwrap_or(0.0),
        losses.fire,
        losses.support,
        losses.wastage,
        losses.all,
    ];
    if !numbers.iter().all(|number| *number >= 0.0) {
        return Some(format!("no number, or below 0: {side:?}"));
    }
    let there = start + joined;
    let gone = withdrawn + end? + losses.all;
    let off = (there - gone).abs();
    // Of less than 1e-280 the powers have no digits: it is gone at once.
    (there.is_finite() && off > 1e-9 * there.max(1e-270)).then(|| format!("off by {off:e}: {side:?}"))
}

fn wrong_with_all(outcome: &Outcome) -> Option<String> {
    let times = outcome
        .pieces
        .iter()
        .flat_map(|piece| [Some(piece.from), piece.to]);
    let times = times.flatten().chain(outcome.time).chain(outcome.below_one);
    let times_fine = times.into_iter().all(|time| time >= 0.0 && time.is_finite());
    let joined = outcome
        .pieces
        .windows(2)
        .all(|pair| pair[0].to == Some(pair[1].from));
    let has_time = outcome.time.is_some() == (outcome.ended == Ended::Break);
    wrong_with(&outcome.x)
        .or(wrong_with(&outcome.y))
        .or((!times_fine).then(|| format!("times: {:?} {:?}", outcome.time, outcome.pieces)))
        .or((!joined).then(|| format!("pieces: {:?}", outcome.pieces)))
        .or((!has_time).then(|| format!("{:?} at {:?}", outcome.ended, outcome.time)))
}

/// Nothing of a hostile outcome is NaN or below 0; nobody appears or vanishes, a hair of rounding over many steps left aside.
#[test]
fn hostile_numbers_give_numbers() {
    let wrong: Vec<String> = fights()
        .filter_map(|(link, fight)| Some(format!("{link}\n    {}", wrong_with_all(&fight.outcome)?)))
        .collect();
    assert!(wrong.is_empty(), "{} of them:\n{}", wrong.len(), wrong.join("\n"));
}
