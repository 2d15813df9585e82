//! What would reverse an outcome: values in closed form; windows; the demo's table as it was read by hand.

use aftercount_core::demo::DEMO;
use aftercount_core::outcome::Breaks;
use aftercount_core::reversal::{Change, Entry, Kind, Reversal};
use aftercount_tests::shown::{outcome_with, read};

fn reversal(link: &str) -> Vec<Entry> {
    let (pairs, statement) = read(link);
    Reversal::new(&pairs, &statement).finished().into_entries()
}

fn entry<'a>(entries: &'a [Entry], slot: &str) -> &'a Entry {
    entries
        .iter()
        .find(|entry| entry.slot.name == slot)
        .unwrap_or_else(|| panic!("no {slot}"))
}

fn change(link: &str, slot: &str) -> Change {
    let entries = reversal(link);
    entry(&entries, slot)
        .change
        .clone()
        .unwrap_or_else(|| panic!("{slot} does not reverse {link}"))
}

/// Parity in closed form: strengths and rates at which neither side would be left, or both would break together.
#[test]
fn closed_forms_of_parity_are_met() {
    let root = |value: f64| value.sqrt();
    // Lanchester's square law: b·x² = a·y²; x breaks as y comes to nothing where b·(x² − x₁²) = a·y².
    let square = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05";
    let of_square = [
        ("x.start", 400.0 * root(0.05 / 0.04)),
        ("y.start", 600.0 * root(0.04 / 0.05)),
        ("x.rate", 0.05 * 400.0 * 400.0 / (600.0 * 600.0)),
        ("y.rate", 0.04 * 600.0 * 600.0 / (400.0 * 400.0)),
        (
            "x.break",
            1.0 - root(600.0 * 600.0 - 0.05 / 0.04 * 400.0 * 400.0) / 600.0,
        ),
    ];
    // The linear law: b·(x − x₁) = a·(y − y₁), y down to its half.
    let area = "x.start=600&x.fire=area&x.rate=0.0004&y.start=400&y.fire=area&y.rate=0.0005&y.break=0.5";
    let of_area = [("x.break", 0.0005 * 200.0 / 0.0004 / 600.0)];
    // Deitchman's ambush (1962), x hidden: the open side y comes to nothing where B·x is more than D·y²/2.
    let ambush = "x.start=40&x.rate=0.1&y.start=100&y.fire=area&y.rate=0.0002";
    // Powers: b·x^k/k = a·y^m/m with k = 1 + x.p − y.q and m = 1 + y.p − x.q.
    let power = "x.start=300&x.fire=power&x.p=1.2&x.q=0.3&x.rate=0.01&\
                 y.start=250&y.fire=power&y.p=0.9&y.q=0.4&y.rate=0.05";
    let (k, m) = (1.0 + 1.2 - 0.4, 1.0 + 0.9 - 0.3);
    let cost = [0.01 * 300_f64.powf(k) / k, 0.05 * 250_f64.powf(m) / m];
    let of_power = [
        ("x.start", 300.0 * (cost[1] / cost[0]).powf(1.0 / k)),
        ("y.start", 250.0 * (cost[0] / cost[1]).powf(1.0 / m)),
        ("x.rate", 0.01 * cost[1] / cost[0]),
        ("y.rate", 0.05 * cost[0] / cost[1]),
    ];
    let cases: [(&str, &[(&str, f64)]); 3] = [(square, &of_square), (area, &of_area), (power, &of_power)];
    for (link, expected) in cases {
        for (slot, value) in expected {
            let found = change(link, slot).value;
            assert!(
                (found - value).abs() <= 1e-10 * value,
                "{slot} is {found}, not {value}, in {link}"
            );
        }
    }
    // The hidden side itself only fades: what reverses it is found, and is that nobody breaks.
    for (slot, value) in [
        ("x.start", 0.0002 * 100.0 * 100.0 / 2.0 / 0.1),
        ("x.rate", 0.0002 * 100.0 * 100.0 / 2.0 / 40.0),
        ("y.start", root(2.0 * 0.1 * 40.0 / 0.0002)),
        ("y.rate", 2.0 * 0.1 * 40.0 / (100.0 * 100.0)),
    ] {
        let found = change(ambush, slot);
        assert!(
            (found.value - value).abs() <= 1e-10 * value,
            "{slot} is {}, not {value}",
            found.value
        );
    }
    // Lanchester's 50,000 against 70,000 (Aircraft in Warfare, 1916, from memory): as 25 to 49.
    let rate = change("x.start=50000&x.rate=1&y.start=70000&y.rate=1", "x.rate").value;
    assert!((rate - 1.96).abs() < 1e-10, "{rate}");
}

/// What small changes do, by formulas written out by hand: the square law to the last, b·x² − a·y² = b·w², and
/// √b·x + √a·y falls as e^(−√(ab)·t); the linear law, b·(x − w) = a·(y − n).
#[test]
fn small_changes_are_as_the_formulas_say() {
    let near = |found: Option<f64>, value: f64| {
        let found = found.expect("it has one");
        assert!(
            (found - value).abs() <= 1e-11 * value.abs().max(1.0),
            "{found}, not {value}"
        );
    };
    let (x, y, b, a) = (600.0_f64, 400.0_f64, 0.04_f64, 0.05_f64);
    let entries = reversal("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05");
    let left = (x * x - a / b * y * y).sqrt();
    let pace = (a * b).sqrt();
    let sum = b.sqrt() * x + a.sqrt() * y;
    let time = (sum / (b.sqrt() * left)).ln() / pace;
    for (slot, of_left, of_time) in [
        (
            "x.start",
            x * x / (left * left),
            (b.sqrt() * x / sum - x * x / (left * left)) / (pace * time),
        ),
        (
            "y.start",
            -a / b * y * y / (left * left),
            (a.sqrt() * y / sum + a / b * y * y / (left * left)) / (pace * time),
        ),
        (
            "x.rate",
            a / b * y * y / (2.0 * left * left),
            (0.5 * b.sqrt() * x / sum - 0.5 - a / b * y * y / (2.0 * left * left)) / (pace * time) - 0.5,
        ),
        (
            "y.rate",
            -a / b * y * y / (2.0 * left * left),
            (0.5 * a.sqrt() * y / sum + a / b * y * y / (2.0 * left * left)) / (pace * time) - 0.5,
        ),
    ] {
        let small = entry(&entries, slot).elasticity;
        near(small.x, of_left);
        near(small.time, of_time);
        assert_eq!(small.y, None, "nothing is left of y");
    }
    // y breaks at half: of 100 lost by fire at an area, x has lost 0.0015/0.001 as many.
    let entries =
        reversal("x.start=600&x.fire=area&x.rate=0.001&y.start=200&y.fire=area&y.rate=0.0015&y.break=0.5");
    let left = 600.0 - 150.0;
    for (slot, of_left) in [
        ("x.start", 600.0 / left),
        ("y.start", -150.0 / left),
        ("x.rate", 150.0 / left),
        ("y.rate", -150.0 / left),
        ("y.break", -150.0 / left),
    ] {
        near(entry(&entries, slot).elasticity.x, of_left);
    }
    near(entry(&entries, "y.break").elasticity.y, -1.0);
    near(entry(&entries, "y.start").elasticity.y, 1.0);
}

/// The moments and strengths of the demo by the square law: from the start to the reserve, and from there.
struct Demo;

impl Demo {
    const Y_RATE: f64 = 0.06;
    const X_RATE: f64 = 0.04;

    /// Both strengths at a time, nothing having joined.
    fn at(time: f64, x: f64) -> (f64, f64) {
        let pace = (Self::X_RATE * Self::Y_RATE).sqrt();
        let (cosh, sinh) = ((pace * time).cosh(), (pace * time).sinh());
        (
            x * cosh - Self::Y_RATE / pace * 400.0 * sinh,
            400.0 * cosh - Self::X_RATE / pace * x * sinh,
        )
    }

    /// 0 where both would come to their lines at one moment: along an orbit b·x² − a·y² stays.
    fn tie(x: f64, time: f64, size: f64, broken: (f64, f64)) -> f64 {
        let (left, enemy) = Self::at(time, x);
        let enemy = enemy + size;
        let (line, enemy_line) = ((1.0 - broken.0) * x, (1.0 - broken.1) * (400.0 + size));
        Self::X_RATE * (left * left - line * line) - Self::Y_RATE * (enemy * enemy - enemy_line * enemy_line)
    }

    fn root(of: &dyn Fn(f64) -> f64, mut low: f64, mut high: f64) -> f64 {
        assert!(of(low) * of(high) < 0.0, "no root");
        for _ in 0..100 {
            let middle = 0.5 * (low + high);
            if (of(middle) > 0.0) == (of(low) > 0.0) {
                low = middle
            } else {
                high = middle
            }
        }
        0.5 * (low + high)
    }
}

#[test]
fn the_demos_table_is_as_it_was_read_by_hand() {
    let entries = reversal(DEMO);
    let names: Vec<&str> = entries.iter().map(|entry| entry.slot.name.as_str()).collect();
    let written = [
        "x.break",
        "y.break",
        "x.start",
        "y.start",
        "x.rate",
        "y.rate",
        "y.join.1.size",
        "y.join.1.time",
    ];
    assert_eq!(&names[..8], written, "{names:?}");
    let (tie, root) = (Demo::tie, Demo::root);
    for (slot, value) in [
        (
            "x.break",
            root(&|broken| tie(600.0, 4.0, 64.0, (broken, 0.39)), 0.29, 0.33),
        ),
        (
            "y.break",
            root(&|broken| tie(600.0, 4.0, 64.0, (0.3, broken)), 0.37, 0.39),
        ),
        (
            "x.start",
            root(&|start| tie(start, 4.0, 64.0, (0.3, 0.39)), 590.0, 620.0),
        ),
        (
            "y.join.1.size",
            root(&|size| tie(600.0, 4.0, size, (0.3, 0.39)), 40.0, 64.0),
        ),
        (
            "y.join.1.time",
            root(&|time| tie(600.0, time, 64.0, (0.3, 0.39)), 3.9, 5.0),
        ),
    ] {
        let found = entry(&entries, slot).change.as_ref().expect("it reverses");
        assert!(
            (found.value - value).abs() <= 1e-10 * value,
            "{slot} is {}, not {value}",
            found.value
        );
        assert_eq!((found.kind, found.breaks), (Kind::Reversed, Breaks::Y), "{slot}");
    }
}

/// A reserve that is useful only in a window, by its time and by its size: the nearer end of the window is found from both
/// sides of it and from within, and on both sides of each value it comes out as it should.
#[test]
fn the_nearer_end_of_a_window_is_found_from_everywhere() {
    // The ends by time are those of a search from outside (`reference/questions.tsv`): too early, and fire at an area
    // finds them; too late, and x has broken.
    let by_time = "x.start=799&x.break=0.5&x.rate=0.0208&y.start=343&y.fire=area&y.break=0.5&y.rate=0.001109&\
                   phase1.from=1.401&phase1.y.rate=0.0001309&x.join=572.6@{}";
    // Too few, and y's support wears x down; too many, and y's fire, by the square of its targets, does.
    let by_size = "x.start=20&x.fire=power&x.p=0.5&x.q=0&x.rate=25&x.break=0.5&x.join={}@0&\
                   y.start=100&y.fire=power&y.p=1&y.q=2&y.rate=0.0005&y.break=0.5&y.support.aimed=20";
    let time = (
        "x.join.1.time",
        by_time,
        [0.611_834_677_468_914_5, 5.807_340_542_039_189],
    );
    let (_, statement) = read(&by_size.replace("{}", "40"));
    let end = |low: f64, high: f64| {
        let wins = |size: f64| match outcome_with(&statement, "x.join.1.size", size).breaks {
            Breaks::Y => 1.0,
            _ => -1.0,
        };
        Demo::root(&wins, low, high)
    };
    let size = ("x.join.1.size", by_size, [end(10.0, 40.0), end(40.0, 200.0)]);
    for ((slot, link, ends), nows) in [
        (time, [(0.3, 0), (3.0, 0), (5.4, 1), (7.0, 1)]),
        (size, [(10.0, 0), (40.0, 0), (60.0, 1), (90.0, 1)]),
    ] {
        for (now, nearer) in nows {
            let link = link.replace("{}", &now.to_string());
            let (_, statement) = read(&link);
            let (found, expected) = (change(&link, slot), ends[nearer]);
            assert!(
                (found.value - expected).abs() <= 1e-9 * expected,
                "{slot} from {now} is {}, not {expected}",
                found.value
            );
            let within = ends[0] < now && now < ends[1];
            let (as_it_is, reversed) = if within {
                (Breaks::Y, Breaks::X)
            } else {
                (Breaks::X, Breaks::Y)
            };
            assert_eq!(
                (found.kind, found.breaks),
                (Kind::Reversed, reversed),
                "{slot} from {now}"
            );
            let hair = 1e-8 * expected * (expected - now).signum();
            let beyond = outcome_with(&statement, slot, expected + hair).breaks;
            let before = outcome_with(&statement, slot, expected - hair).breaks;
            assert_eq!((before, beyond), (as_it_is, reversed), "{slot} from {now}");
            let written: f64 = found.written.parse().expect("a number");
            assert_eq!(
                outcome_with(&statement, slot, written).breaks,
                reversed,
                "{slot} = {written}"
            );
        }
    }
}

/// Where nothing makes the other side break, that nobody does; where neither breaks, what makes one.
#[test]
fn what_only_leaves_it_undecided_says_so() {
    // x never loses, so only y can break, and only a clock keeps it from that: 24 a unit of time take 200.
    let link = "x.start=600&x.rate=0.04&y.start=400&y.fire=none&y.break=0.5&until=";
    let moment = 200.0 / 24.0;
    for (until, kind, breaks) in [
        (9, Kind::Undecided, Breaks::Neither),
        (8, Kind::Reversed, Breaks::Y),
    ] {
        let found = change(&format!("{link}{until}"), "until");
        assert_eq!((found.kind, found.breaks), (kind, breaks));
        assert!((found.value - moment).abs() < 1e-10, "{found:?}");
        assert!(
            (found.by - (moment - f64::from(until))).abs() < 1e-10,
            "{found:?}"
        );
    }
    let entries = reversal(&format!("{link}9"));
    assert!(
        entry(&entries, "x.lost").change.is_none(),
        "to the last, what was lost before has no say"
    );
    // At a tie the least change decides.
    let entries = reversal("x.start=600&x.rate=0.04&y.start=400&y.rate=0.09");
    for name in ["x.start", "x.rate", "y.start", "y.rate"] {
        assert!(entry(&entries, name).is_least(), "{name}");
    }
}
