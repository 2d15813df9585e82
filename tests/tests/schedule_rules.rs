//! What every schedule must keep to: published fights, order at an instant, nobody lost or made, cuts that change nothing.

use aftercount_core::continued::continued;
use aftercount_core::fight::{Effort, Fight, fight};
use aftercount_core::outcome::{Breaks, Ended, Outcome, SideOutcome};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_tests::tables::{self, Row, assert_close, number, outcome};

fn statement(pairs: &Pairs) -> Statement {
    Statement::read(pairs).unwrap_or_else(|why| panic!("{}: {why:?}", pairs.link()))
}

fn solved(pairs: &Pairs) -> Fight {
    fight(&statement(pairs).engagement(), Effort::Trajectory)
}

fn ended(link: &str) -> Outcome {
    solved(&Pairs::parse(link)).outcome
}

/// The rows of the reference table whose fights end: schedules of every kind.
fn schedules() -> Vec<Row> {
    let rows = tables::read("schedules.tsv").into_iter();
    rows.filter(|row| row.text("kind") != "endless").collect()
}

/// The same without those that were made to reach a line at the very moment of a reserve: there the rounding of a strength
/// on the way is another fight.
fn schedules_without_ties() -> Vec<Row> {
    let rows = schedules().into_iter();
    rows.filter(|row| row.text("kind") != "moment").collect()
}

/// The greatest difference of two outcomes: times in parts of the time, strengths and losses in parts of what was
/// committed.
fn difference(one: &Outcome, other: &Outcome, later: f64) -> f64 {
    let (time, after) = (
        one.time.unwrap_or(0.0),
        other.time.map_or(0.0, |time| time + later),
    );
    let mut worst = if time == after {
        0.0
    } else {
        (time - after).abs() / time
    };
    for (one, other) in [(&one.x, &other.x), (&one.y, &other.y)] {
        let off = (one.end.unwrap_or(-1.0) - other.end.unwrap_or(-1.0)).abs() / one.committed;
        worst = worst.max(off);
    }
    worst
}

/// Numbers that look random and are the same every time (a linear congruential generator; D. E. Knuth, *The Art of
/// Computer Programming*, vol. 2, 3.3.4, the multiplier of MMIX).
struct Numbers(u64);

impl Numbers {
    /// The next one, from 0 to 1.
    fn next(&mut self) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1_u64 << 53) as f64
    }
}

/// J. H. Engel, "A verification of Lanchester's law", Operations Research 2 (1954) 163–171 (figures from memory, and as
/// re-worked in M. Braun, *Differential Equations and Their Applications*): the landings flow in during the days 1, 3 and
/// 6. Strengths by piecewise exact arithmetic of our own.
#[test]
fn engels_iwo_jima() {
    let link =
        "unit=d&x.start=0&x.rate=0.0106&x.flow=54000@0/1,6000@2/3,13000@5/6&y.start=21500&y.rate=0.0544";
    let known = [
        (1.0, 52_835.478, 21_219.985),
        (3.0, 56_587.378, 20_092.118),
        (6.0, 66_453.658, 18_274.339),
        (28.0, 53_042.403, 4_656.359),
        (36.0, 51_985.246, 216.832),
    ];
    let whole = solved(&Pairs::parse(link));
    let trajectory = whole.trajectory.expect("was asked for");
    for (day, x, y) in known {
        let left = trajectory.strengths_at(day);
        assert!(
            (left.x - x).abs() <= 5.1e-4 && (left.y - y).abs() <= 5.1e-4,
            "day {day}: {left:?}"
        );
        let clock = ended(&format!("{link}&until={day}"));
        assert_close(clock.x.end.expect("an end"), left.x, 1e-14, "x at the clock");
        assert_close(clock.y.end.expect("an end"), left.y, 1e-13, "y at the clock");
    }
    let outcome = whole.outcome;
    assert_eq!(outcome.breaks, Breaks::Y);
    assert!(
        (outcome.time.expect("a time") - 36.393_504_44).abs() <= 5.1e-9,
        "{:?}",
        outcome.time
    );
    assert!(
        (outcome.x.end.expect("an end") - 51_982.925_3).abs() <= 5.1e-5,
        "{:?}",
        outcome.x
    );
    assert_eq!((outcome.x.joined, outcome.y.end), (73_000.0, Some(0.0)));
}

/// The same landings as three impulses: the defender holds out for a day less.
#[test]
fn engels_landings_as_impulses() {
    let outcome = ended("x.start=54000&x.rate=0.0106&x.join=6000@2,13000@5&y.start=21500&y.rate=0.0544");
    assert!(
        (outcome.time.expect("a time") - 35.442_277_03).abs() <= 5.1e-9,
        "{:?}",
        outcome.time
    );
}

/// M. P. Osipov (1915), as described by R. L. Helmbold, European Journal of Operational Research 65: guns that are never
/// attrited. Rates 0.1, 1000 against 800; four guns worth a hundred each cost the enemy 40 per unit of time, three cost 30.
/// Strengths by arithmetic of our own.
#[test]
fn osipovs_guns() {
    let base = "x.start=1000&x.rate=0.1&y.start=800&y.rate=0.1&until=3";
    let plain = outcome(base);
    assert_close(
        number(&plain, "x.end").expect("an end"),
        801.722_279_371,
        1e-12,
        "x without guns",
    );
    assert_close(
        number(&plain, "y.end").expect("an end"),
        531.750_517_856,
        1e-12,
        "y without guns",
    );
    let guns = outcome(&format!("{base}&x.support.aimed=40&y.support.aimed=30"));
    assert_close(
        number(&guns, "x.end").expect("an end"),
        728.501_596_989,
        1e-12,
        "x with guns",
    );
    assert_close(
        number(&guns, "y.end").expect("an end"),
        423.543_954_716,
        1e-12,
        "y with guns",
    );
    assert_eq!(number(&guns, "x.losses.support"), Some(90.0));
    assert_eq!(number(&guns, "y.losses.support"), Some(120.0));
}

/// x' = f − A·x − B·y, y' = g − C·y − D·x with the eigenvalues 0.03 and −0.06; strengths by arithmetic of our own.
#[test]
fn wastage_and_flow() {
    let base = "x.start=100&x.rate=0.04&x.wastage=0.01&x.flow=3@0/&y.start=80&y.rate=0.05&y.wastage=0.02&y.flow=2@0/";
    for (until, x, y) in [
        (5, 92.315_965_97, 63.684_806_35),
        (10, 88.642_302_7, 49.983_166_3),
    ] {
        let found = outcome(&format!("{base}&until={until}"));
        let off = |path: &str, known: f64| (number(&found, path).expect("an end") - known).abs();
        assert!(off("x.end", x) <= 5.1e-8 && off("y.end", y) <= 5.1e-8, "{found}");
    }
}

/// Nobody appears or vanishes, and losses by their causes make up all of them.
#[test]
fn start_and_joined_less_withdrawn_are_end_and_losses() {
    let mut worst = (0.0, String::new());
    let rows = schedules();
    for row in &rows {
        let outcome = ended(row.text("link"));
        for side in [&outcome.x, &outcome.y] {
            let SideOutcome {
                start,
                joined,
                withdrawn,
                end,
                losses,
                ..
            } = *side;
            let there = start + joined;
            let balance = (there - withdrawn - end.expect("an end") - losses.all).abs();
            let causes = (losses.fire + losses.support + losses.wastage - losses.all).abs();
            let off = balance.max(causes) / there.max(1e-300);
            if off > worst.0 || off.is_nan() {
                worst = (off, row.text("link").to_owned());
            }
        }
    }
    println!("balance: {worst:?}");
    assert!(rows.len() > 450 && worst.0 <= 1e-12, "{worst:?}");
}

/// A phase that says what holds already, or nobody who joins, cuts a stretch in two and changes nothing.
#[test]
fn a_cut_changes_nothing() {
    let mut worst = [(0.0, String::new()), (0.0, String::new())];
    let mut numbers = Numbers(7);
    for row in schedules_without_ties() {
        let pairs = Pairs::parse(row.text("link"));
        let whole = solved(&pairs).outcome;
        let until = whole
            .time
            .or(pairs.get("until").and_then(|text| text.parse().ok()))
            .unwrap_or(1.0);
        let cut = format!("{}", until * (0.05 + 0.9 * numbers.next()));
        let mut with_phase = pairs.clone();
        with_phase.set("phase9.from", &cut);
        let mut with_join = pairs.clone();
        let joins = [pairs.get("y.join").unwrap_or_default(), &format!("0@{cut}")].join(",");
        with_join.set("y.join", joins.trim_start_matches(','));
        for text in [with_phase, with_join] {
            let other = solved(&text).outcome;
            assert_eq!(
                (other.breaks, other.ended),
                (whole.breaks, whole.ended),
                "{}",
                text.link()
            );
            let integrated = usize::from(whole.method != aftercount_core::outcome::Method::ClosedForm);
            let off = difference(&whole, &other, 0.0);
            if off > worst[integrated].0 || off.is_nan() {
                worst[integrated] = (off, text.link());
            }
        }
    }
    println!("cuts, closed and integrated: {worst:?}");
    assert!(worst[0].0 <= 1e-12 && worst[1].0 <= 1e-12, "{worst:?}");
}

/// The engagement that goes on from any time ends as the whole does.
#[test]
fn what_goes_on_ends_as_the_whole() {
    let mut worst = (0.0, String::new());
    let mut numbers = Numbers(11);
    let mut wrong = Vec::new();
    for row in schedules_without_ties() {
        let pairs = Pairs::parse(row.text("link"));
        let statement = statement(&pairs);
        let whole = fight(&statement.engagement(), Effort::Trajectory);
        let trajectory = whole.trajectory.expect("was asked for");
        let Some(ends) = trajectory.ends().filter(|ends| *ends > 0.0) else {
            continue;
        };
        for _ in 0..3 {
            // Near the end what is left of the time has few digits.
            let t = ends * 0.9 * numbers.next();
            let text = continued(&pairs, &statement, &trajectory, t);
            let rest = solved(&text).outcome;
            if (rest.breaks, rest.ended) != (whole.outcome.breaks, whole.outcome.ended) {
                wrong.push(format!(
                    "{:?} for {:?} at {t}: {}",
                    rest.breaks,
                    whole.outcome.breaks,
                    pairs.link()
                ));
                continue;
            }
            let off = difference(&whole.outcome, &rest, t);
            if off > worst.0 || off.is_nan() {
                worst = (off, format!("{} from {t}", pairs.link()));
            }
        }
    }
    println!("going on: {worst:?}");
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(worst.0 <= 1e-11, "{worst:?}");
}

/// Under aimed fire a reserve that comes earlier leaves its side no worse: it holds where it held, with no fewer left.
#[test]
fn an_earlier_reserve_never_hurts_under_aimed_fire() {
    let mut numbers = Numbers(3);
    for _ in 0..300 {
        let [x, y] = [(); 2].map(|()| 100.0 + 400.0 * numbers.next());
        let [a, b] = [(); 2].map(|()| 0.01 + 0.05 * numbers.next());
        let (size, late) = (x * (0.05 + 0.3 * numbers.next()), 1.0 + 8.0 * numbers.next());
        let [first, second] = [(); 2].map(|()| 0.2 + 0.8 * numbers.next());
        let link = |at: f64| {
            format!(
                "x.start={x}&x.rate={a}&x.break={first}&x.join={size}@{at}&y.start={y}&y.rate={b}&y.break={second}"
            )
        };
        let (late, early) = (ended(&link(late)), ended(&link(late * numbers.next())));
        match (late.breaks, early.breaks) {
            (Breaks::Y, Breaks::Y) => {
                let (late, early) = (late.x.end.expect("an end"), early.x.end.expect("an end"));
                assert!(early >= late * (1.0 - 1e-13) || late <= x, "{early} {late}");
            }
            (Breaks::Y, other) => panic!("earlier is worse: {other:?}, {}", link(0.0)),
            _ => {}
        }
    }
}

/// Side Y loses 10 per unit of time and breaks at half of 100: at 5.
const STEADY: &str = "x.start=400&x.fire=none&x.support.aimed=10&y.start=100&y.fire=none&y.break=0.5";

/// At one instant: arrivals, phases, withdrawals, break lines, the clock.
#[test]
fn order_at_one_instant() {
    let broken = ended(STEADY);
    assert_eq!((broken.breaks, broken.time), (Breaks::Y, Some(5.0)));
    // In time to the moment; one rounding beyond what is rounding, too late.
    for (at, time) in [("5", 7.0), ("4.999999999999", 7.0), ("5.00000000001", 5.0)] {
        assert_eq!(
            ended(&format!("{STEADY}&y.join=40@{at}")).time,
            Some(time),
            "{at}"
        );
    }
    // A phase at the moment does not undo what is reached; neither does a withdrawal, which is booked before.
    let phase = ended(&format!("{STEADY}&phase1.from=5&phase1.x.support.aimed=0"));
    assert_eq!((phase.breaks, phase.time), (Breaks::Y, Some(5.0)));
    let leaves = ended(&format!("{STEADY}&y.join=-30@5"));
    assert_eq!(
        (leaves.breaks, leaves.y.end, leaves.y.withdrawn),
        (Breaks::Y, Some(20.0), 30.0)
    );
    // Who arrives can be withdrawn at once.
    let passes = ended(&format!("{STEADY}&y.join=-150@2,100@2&until=3"));
    assert_eq!((passes.y.withdrawn, passes.y.committed), (150.0, 200.0));
    // A line reached at the clock is reached; a reserve at the clock is in time.
    assert_eq!(ended(&format!("{STEADY}&until=5")).breaks, Breaks::Y);
    let clock = ended(&format!("{STEADY}&until=5&y.join=40@5"));
    assert_eq!(
        (clock.breaks, clock.ended, clock.y.end),
        (Breaks::Neither, Ended::Clock, Some(90.0))
    );
    // A flow at the moment brings nobody yet.
    assert_eq!(ended(&format!("{STEADY}&y.flow=50@5/9")).time, Some(5.0));
    // Both lines at once; of two phases at once the later number holds.
    let both = ended(
        "x.start=100&x.rate=0.04&x.break=0.3&y.start=100&y.rate=0.04&y.break=0.3&x.join=20@1&y.join=20@1",
    );
    assert_eq!(both.breaks, Breaks::Both);
    let phases = "phase1.from=1&phase1.x.support.aimed=10&phase2.from=1&phase2.x.support.aimed=25";
    assert_eq!(ended(&format!("{STEADY}&{phases}")).time, Some(2.6));
    // A phase from the beginning is as if its values had been written without it.
    let fight = "x.start=400&x.rate=0.01&y.start=300&y.rate=0.01&y.break=0.5";
    let from_the_beginning = ended(&format!("{fight}&phase1.from=0&phase1.y.rate=0.02"));
    assert_eq!(
        from_the_beginning,
        ended(&fight.replace("y.rate=0.01", "y.rate=0.02"))
    );
}

/// A withdrawal takes at most what is there and never breaks a side by itself; arrivals count at time 0 as at any other.
#[test]
fn a_withdrawal_takes_what_is_there_and_breaks_nobody() {
    let gone = ended("x.start=400&x.rate=0.01&y.start=100&y.rate=0.01&y.break=0.5&y.join=-1000@1");
    assert_eq!(
        (gone.breaks, gone.ended, gone.y.end),
        (Breaks::Neither, Ended::Withdrawn, Some(0.0))
    );
    assert!(gone.y.withdrawn < 100.0 && gone.y.withdrawn > 90.0, "{gone:?}");
    let half = ended("x.start=400&x.fire=none&y.start=100&y.fire=none&y.break=0.1&y.join=-50@1&until=9");
    assert_eq!(
        (half.breaks, half.y.end, half.y.committed),
        (Breaks::Neither, Some(50.0), 100.0)
    );
    let joined = ended("x.start=400&x.rate=0.01&y.start=100&y.rate=0.01&y.join=30@0&until=1");
    assert_eq!(
        (joined.y.start, joined.y.joined, joined.y.committed),
        (100.0, 30.0, 130.0)
    );
    let alike = ended("x.start=400&x.rate=0.01&y.start=130&y.rate=0.01&until=1");
    assert_eq!(joined.y.end, alike.y.end);
}

/// A side that only fades never comes to 0, though reinforcement flows in to the enemy or the clock is far.
#[test]
fn what_fades_is_not_gone() {
    let link = "x.start=500&y.start=300&x.fire=none&y.fire=none&x.flow=5@0/&x.wastage=0.01&y.wastage=0.01";
    for text in [
        link.to_owned(),
        format!("{link}&until=1e6"),
        format!("{link}&y.flow=2@0/3&y.join=4@7"),
    ] {
        let outcome = ended(&text);
        assert_eq!(outcome.breaks, Breaks::Neither, "{text}: {outcome:?}");
        assert_close(outcome.x.end.expect("an end"), 500.0, 1e-12, &text);
    }
}

/// What each schedule took: a change that makes one dearer shows here, without a clock. To make the table again after a
/// change that is meant, run `cargo test --release -p aftercount-tests --test schedule_rules the_work -- --nocapture` and
/// copy the rows that it prints; `reference/schedule_work.py` picks other links.
#[test]
fn the_work_done_is_that_committed() {
    let rows = tables::read("schedule_work.tsv");
    assert!(rows.len() >= 40, "{} rows", rows.len());
    let took = |row: &Row| {
        let statement = statement(&Pairs::parse(row.text("link")));
        let work = fight(&statement.engagement(), Effort::Outcome).work;
        format!("{}\t{}\t{}", row.text("link"), work.evaluations, work.steps)
    };
    let found: Vec<String> = rows.iter().map(took).collect();
    let committed: Vec<String> = rows
        .iter()
        .map(|row| {
            ["link", "evaluations", "steps"]
                .map(|column| row.text(column))
                .join("\t")
        })
        .collect();
    println!("{}", found.join("\n"));
    assert!(
        found == committed,
        "reference/schedule_work.tsv holds others: see the rows above"
    );
}
