//! What would reverse an outcome: every entry is looked at from outside, over thousands of random engagements.

use aftercount_core::fight::{Effort, fight};
use aftercount_core::keys::Unit;
use aftercount_core::outcome::{Breaks, Ended, Outcome, ToTheLast};
use aftercount_core::reversal::{Kind, Reversal};
use aftercount_tests::shown::{outcome_with, read};
use std::fmt::Write;
use std::thread;

/// So many random engagements.
const COUNT: u64 = 2000;

/// A hair: this part of a value, or of the change to it where that is more.
const HAIR: f64 = 1e-9;

/// Who gives way, in the words of the link: breaks first, or fades in a fight that nothing ends.
fn gives_way(outcome: &Outcome) -> &'static str {
    let endless = matches!(outcome.ended, Ended::Limit | Ended::Equilibrium | Ended::Growth);
    match (outcome.breaks, outcome.to_the_last) {
        (Breaks::X, _) => "x",
        (Breaks::Y, _) => "y",
        (Breaks::Neither, Some(ToTheLast::Y)) if endless => "x",
        (Breaks::Neither, Some(ToTheLast::X)) if endless => "y",
        _ => "none",
    }
}

/// Whether an outcome is what an entry of this kind promises, where `base` is the outcome as it is.
fn keeps(kind: Kind, base: &Outcome, outcome: &Outcome) -> bool {
    if outcome.ended == Ended::Unfinished {
        return false;
    }
    let decided = |outcome: &Outcome| matches!(outcome.breaks, Breaks::X | Breaks::Y);
    match (decided(base), kind) {
        (true, Kind::Reversed) => decided(outcome) && outcome.breaks != base.breaks,
        (true, Kind::Undecided) => !decided(outcome),
        (false, Kind::Reversed) => gives_way(outcome) != "none" && gives_way(outcome) != gives_way(base),
        (false, Kind::Undecided) => gives_way(outcome) == "none",
    }
}

/// Numbers that look thrown, the same on every machine.
struct Dice(u64);

impl Dice {
    fn part(&mut self) -> f64 {
        // Marsaglia, Xorshift RNGs, Journal of Statistical Software 8 (2003): the triple 13, 7, 17.
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) as f64 / (1_u64 << 53) as f64
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        let value = low + (high - low) * self.part();
        format!("{value:.3e}").parse().expect("digits")
    }

    fn chance(&mut self, part: f64) -> bool {
        self.part() < part
    }
}

/// The law of a side's fire with its rate, such that the enemy loses about a twentieth of itself per unit of time.
fn fire(dice: &mut Dice, letter: &str, own: f64, enemy: f64, linear: bool) -> String {
    let pace = dice.between(0.02, 0.09);
    let kind = if linear { dice.part() * 0.6 } else { dice.part() };
    match kind {
        kind if kind < 0.45 => format!("&{letter}.rate={:.4e}", pace * enemy / own),
        kind if kind < 0.6 => format!("&{letter}.fire=logarithmic&{letter}.rate={pace:.4e}"),
        kind if kind < 0.82 => format!("&{letter}.fire=area&{letter}.rate={:.4e}", pace / own),
        kind if kind < 0.91 => format!(
            "&{letter}.fire=search&{letter}.half={:.3e}&{letter}.rate={:.4e}",
            dice.between(10.0, 400.0),
            1.5 * pace * enemy / own
        ),
        _ => {
            let (p, q) = (dice.between(0.3, 1.2), dice.between(0.0, 0.9));
            let rate = pace * enemy / own.powf(p) / enemy.powf(q);
            format!("&{letter}.fire=power&{letter}.p={p}&{letter}.q={q}&{letter}.rate={rate:.4e}")
        }
    }
}

/// A random engagement: two in three of two fires alone, the rest with reserves, flows, phases, wastage, support or a clock,
/// most of those linear, since the others take long.
fn engagement(number: u64) -> String {
    let mut dice = Dice(0x9e37_79b9_7f4a_7c15 ^ (number + 1).wrapping_mul(0x2545_f491_4f6c_dd1d));
    for _ in 0..8 {
        dice.part();
    }
    let start = [dice.between(100.0, 900.0), dice.between(100.0, 900.0)];
    let scheduled = number % 3 == 2;
    let mut link = String::new();
    for (at, letter) in ["x", "y"].into_iter().enumerate() {
        let _ = write!(link, "&{letter}.start={}", start[at]);
        link += &fire(
            &mut dice,
            letter,
            start[at],
            start[1 - at],
            scheduled && number % 30 != 2,
        );
        if dice.chance(0.7) {
            let _ = write!(link, "&{letter}.break={}", dice.between(0.1, 0.9));
        }
        if dice.chance(0.15) {
            let _ = write!(link, "&{letter}.lost={}", dice.between(1.0, 0.05 * start[at]));
        }
        if scheduled {
            link += &besides(&mut dice, letter, start[at]);
        }
    }
    if dice.chance(if scheduled { 0.3 } else { 0.1 }) {
        let _ = write!(link, "&until={}", dice.between(2.0, 20.0));
    }
    link[1..].to_owned()
}

fn besides(dice: &mut Dice, letter: &str, start: f64) -> String {
    let mut link = String::new();
    if dice.chance(0.7) {
        let _ = write!(
            link,
            "&{letter}.join={}@{}",
            dice.between(0.05, 0.4) * start,
            dice.between(0.0, 9.0)
        );
        if dice.chance(0.4) {
            let _ = write!(
                link,
                ",{}@{}",
                dice.between(-0.2, 0.3) * start,
                dice.between(0.0, 9.0)
            );
        }
    }
    if dice.chance(0.3) {
        let from = dice.between(0.0, 4.0);
        let _ = write!(
            link,
            "&{letter}.flow={}@{from}/{}",
            0.03 * start,
            from + dice.between(1.0, 8.0)
        );
    }
    if dice.chance(0.3) {
        let _ = write!(link, "&{letter}.wastage={}", dice.between(0.001, 0.02));
    }
    if dice.chance(0.3) {
        let _ = write!(link, "&{letter}.support.aimed={}", dice.between(0.5, 6.0));
    }
    if dice.chance(0.25) {
        let number = if letter == "x" { 1 } else { 2 };
        let _ = write!(link, "&phase{number}.from={}", dice.between(0.5, 6.0));
        let _ = write!(
            link,
            "&phase{number}.{letter}.support.area={}",
            dice.between(0.001, 0.05)
        );
    }
    link
}

/// What was found of one engagement.
#[derive(Clone, Debug, Default)]
struct Tally {
    entries: u32,
    reversed: u32,
    undecided: u32,
    /// Looks between the present value and the change that are no longer as it is: windows that the search missed.
    missed: u32,
    looks: u32,
    /// What an entry promises and does not keep.
    broken: Vec<String>,
}

/// Looks at every entry of an engagement; of most of them at those of the numbers that are written, since what a number
/// that is 0 must be is as often found by the integrator.
fn check(number: u64, tally: &mut Tally) {
    let link = &engagement(number)[..];
    let (pairs, statement) = read(link);
    let search = Reversal::new(&pairs, &statement).only(|slot| slot.written || number.is_multiple_of(8));
    let base = fight(&statement.engagement(), Effort::Outcome).outcome;
    let mut dice = Dice(0x1234_5678_9abc_def1);
    for entry in search.finished().into_entries() {
        tally.entries += 1;
        let slot = &entry.slot.name;
        let holds = |kind: Kind, value: f64| keeps(kind, &base, &outcome_with(&statement, slot, value));
        let change = entry.change.as_ref();
        let distance = match change {
            Some(change) => {
                let outwards = (change.value - entry.now).signum();
                let hair = HAIR * change.value.abs().max((change.value - entry.now).abs()) * outwards;
                let context = || format!("{slot} {} in {link}", change.value);
                // At single values where both sides come to nothing together the integrator may see a tie: a hair is one
                // of two.
                let behind = [1.0, 3.0].map(|hairs| change.value + hairs * hair);
                let behind = behind.map(|value| !entry.slot.limits.hold(value) || holds(change.kind, value));
                // Where the least change does it, the present value is the hair before.
                let before = if entry.is_least() {
                    entry.now
                } else {
                    change.value - hair
                };
                let written: f64 = change.written.parse().expect("a number");
                let promises = [
                    (holds(change.kind, change.value), "at the value"),
                    (behind[0] || behind[1], "a hair behind"),
                    (!holds(change.kind, before), "a hair before"),
                    (holds(change.kind, written), "as written"),
                    ((written - change.value) * outwards >= 0.0, "where it is written"),
                ];
                let broken = promises.iter().filter(|(kept, _)| !kept);
                tally
                    .broken
                    .extend(broken.map(|(_, what)| format!("{what}: {}", context())));
                match change.kind {
                    Kind::Reversed => tally.reversed += 1,
                    Kind::Undecided => tally.undecided += 1,
                }
                (change.value - entry.now).abs() * (1.0 - 1e-6)
            }
            None => f64::INFINITY,
        };
        // Nothing nearer on either side, and where no value does, nothing anywhere.
        for _ in 0..6 {
            let whole = if entry.now == 0.0 { 1.0 } else { entry.now.abs() };
            let most = match entry.slot.unit {
                Unit::Time => 1.0,
                // A loss that takes a side at once can take no more.
                Unit::FractionPerTime | Unit::EnemyFractionPerTime => 0.3,
                _ => 4.0,
            };
            let span = distance.min(10f64.powf(dice.between(-3.0, most)) * whole);
            let value = entry.now + span * dice.between(-1.0, 1.0);
            if entry.slot.limits.hold(value) && !entry.is_least() {
                tally.looks += 1;
                // Where nobody gives way as it is, that nobody does is no change.
                let undecided = keeps(Kind::Undecided, &base, &base);
                let reverses = change.is_some_and(|change| change.kind == Kind::Reversed);
                let kinds: &[Kind] = if undecided || reverses {
                    &[Kind::Reversed]
                } else {
                    &[Kind::Reversed, Kind::Undecided]
                };
                if kinds.iter().any(|kind| holds(*kind, value)) {
                    tally.missed += 1;
                    eprintln!("{slot}: {value} before {change:?} in {link}");
                }
            }
        }
    }
}

#[test]
fn every_entry_reverses_and_nothing_nearer_does() {
    let workers = thread::available_parallelism().map_or(1, |count| count.get() as u64);
    let tallies: Vec<Tally> = thread::scope(|scope| {
        let share = |worker: u64| {
            move || {
                let mut tally = Tally::default();
                for number in (worker..COUNT).step_by(workers as usize) {
                    check(number, &mut tally);
                }
                tally
            }
        };
        let started: Vec<_> = (0..workers).map(|worker| scope.spawn(share(worker))).collect();
        started
            .into_iter()
            .map(|worker| worker.join().expect("a tally"))
            .collect()
    });
    let broken: Vec<&String> = tallies.iter().flat_map(|tally| &tally.broken).collect();
    let sum = |of: fn(&Tally) -> u32| tallies.iter().map(of).sum::<u32>();
    let (entries, reversed, undecided) = (sum(|t| t.entries), sum(|t| t.reversed), sum(|t| t.undecided));
    let (missed, looks) = (sum(|t| t.missed), sum(|t| t.looks));
    println!(
        "{entries} entries, {reversed} reversed, {undecided} undecided, {missed} of {looks} looks nearer"
    );
    assert!(broken.is_empty(), "{broken:#?}");
    assert!(
        reversed > 10_000 && undecided > 100,
        "{reversed} reversed, {undecided} undecided"
    );
    assert!(
        f64::from(missed) < 2e-4 * f64::from(looks),
        "{missed} of {looks} looks are nearer"
    );
}
