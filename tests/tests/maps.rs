//! Two numbers in question: the lines along which the outcome flips, held to the thresholds of one number and to formulas.

use aftercount_core::answer::answer;
use aftercount_core::asked::{Chart, FINEST, Second};
use aftercount_core::picture::{self, Role};
use aftercount_core::statement::Statement;
use aftercount_core::words;
use aftercount_tests::shown::read;
use serde_json::Value;

fn json(link: &str) -> Value {
    let answer: Value = serde_json::from_str(&answer(link).to_json()).expect("JSON");
    assert_eq!(answer["ok"], true, "{link}: {answer}");
    answer
}

fn chart(link: &str) -> (Statement, Chart) {
    let (pairs, statement) = read(link);
    let mut chart = Chart::new(&pairs, &statement).expect("two numbers in question");
    while !chart.go_on(500) {}
    (statement, chart)
}

fn apart(one: f64, other: f64) -> f64 {
    (one - other).abs() / one.abs().max(other.abs())
}

/// A reserve, a clock, wastage: maps of linear schedules and of a pairing that is integrated.
const MAPS: &[(&str, &str, &str)] = &[
    (
        "x.start={}&y.start=[]&x.rate=0.04&x.break=0.3&y.rate=0.06&y.break=0.39&y.join=64@4",
        "600?100..900",
        "400?100..700",
    ),
    (
        "x.start=600&y.start=400&x.rate={}&x.break=0.3&y.rate=[]&y.break=0.39&y.join=64@4",
        "?0.01..0.08",
        "?0.02..0.1",
    ),
    (
        "x.start=600&y.start=400&x.rate=0.04&x.break=0.3&y.rate=0.06&y.break=0.39&y.join={}@[]",
        "64?1..120",
        "4?0.5..6",
    ),
    (
        "x.start={}&y.start=400&x.rate=0.04&x.break=0.3&y.rate=0.06&y.break=0.39&until=[]&x.wastage=0.01",
        "?300..900",
        "?2..12",
    ),
    (
        "x.start={}&x.fire=search&x.half=80&x.rate=0.06&x.break=0.3&y.start=[]&y.fire=power&y.p=0.9&y.q=0.2&y.rate=0.02&y.break=0.5",
        "?200..900",
        "?150..700",
    ),
];

/// What may be wanted on each of them.
const WANTED: &[&str] = &[
    "y.prevails,y.end:280..",
    "x.breaks,time:..8",
    "x.end:430..",
    "y.holds,x.lost:..150",
    "x.prevails,time:..10",
];

fn link(row: &(&str, &str, &str)) -> String {
    row.0.replace("{}", row.1).replace("[]", row.2)
}

/// Every point of a flip line is a threshold of either number with the other held.
#[test]
fn the_flip_line_agrees_with_the_thresholds_of_one_number() {
    for row in MAPS {
        let (across, up) = (
            row.1.split_once('?').expect("a question").1,
            row.2.split_once('?').expect("a question").1,
        );
        let map = json(&link(row))["asked"][0].clone();
        let flips = map["flips"].as_array().expect("a list");
        let points: Vec<(f64, f64)> = flips
            .iter()
            .flat_map(|flip| flip["points"].as_array().expect("a list"))
            .map(|point| {
                (
                    point[0].as_f64().expect("a number"),
                    point[1].as_f64().expect("a number"),
                )
            })
            .collect();
        assert!(points.len() > 100, "{row:?}: {}", points.len());
        for (a, b) in points.iter().step_by(points.len() / 12) {
            let along = row
                .0
                .replace("{}", &format!("?{across}"))
                .replace("[]", &b.to_string());
            let upwards = row
                .0
                .replace("{}", &a.to_string())
                .replace("[]", &format!("?{up}"));
            let nearest = |link: &str, value: f64| {
                let asked = json(link)["asked"][0].clone();
                let outcomes = asked["outcomes"].as_array().expect("a list").clone();
                let ends = outcomes
                    .iter()
                    .skip(1)
                    .filter_map(|outcome| outcome["from"].as_f64());
                ends.map(|end| apart(end, value)).fold(f64::INFINITY, f64::min)
            };
            // Along the line itself it may not flip in one of the two.
            let off = nearest(&along, *a).min(nearest(&upwards, *b));
            assert!(off < 1e-9, "{row:?} at {a}, {b}: {off:e}");
        }
    }
}

/// Square law to the last: the line is √(b/a) in a straight line; and no line is broken into pieces.
#[test]
fn parity_of_the_square_law_is_one_straight_line() {
    let map = json("x.start=600?0..2400&y.start=400?0..2400&x.rate=0.04&y.rate=0.09")["asked"][0].clone();
    let flips = map["flips"].as_array().expect("a list");
    assert_eq!(flips.len(), 1);
    for point in flips[0]["points"].as_array().expect("a list") {
        let (x, y) = (
            point[0].as_f64().expect("a number"),
            point[1].as_f64().expect("a number"),
        );
        assert!((y - x / 1.5).abs() <= 1e-9 * 2400.0, "{x} {y}");
    }
    assert_eq!(flips[0]["between"].as_array().map(Vec::len), Some(2));
}

fn points(line: &Value) -> Vec<(f64, f64)> {
    let points = line["points"].as_array().expect("a list").iter();
    points
        .map(|point| {
            let [x, y] = [0, 1].map(|at| point[at].as_f64().expect("a number"));
            (x, y)
        })
        .collect()
}

/// Every point of a line within which all conditions hold is an end of an interval of one number on which they do, and they
/// hold on its left hand and not on its right.
#[test]
fn the_line_of_what_is_wanted_agrees_with_the_intervals_of_one_number() {
    for (row, wanted) in MAPS.iter().zip(WANTED) {
        let question = |text: &str| text.split_once('?').expect("a question").1.to_owned();
        let (across, up) = (question(row.1), question(row.2));
        let whole = format!("{}&sothat={wanted}", link(row));
        let map = json(&whole)["asked"][0].clone();
        let lines: Vec<Vec<(f64, f64)>> = map["met"]
            .as_array()
            .expect("a list")
            .iter()
            .map(points)
            .collect();
        let count: usize = lines.iter().map(Vec::len).sum();
        assert!(count > 60 && map.get("nearest").is_none(), "{row:?}: {count}");
        let share = map["met_share"].as_f64().expect("a number");
        assert!(0.01 < share && share < 0.99, "{row:?}: {share}");
        let ends = |link: &str| -> Vec<f64> {
            let asked = json(link)["asked"][0].clone();
            let met = asked["met"].as_array().expect("a list").clone();
            let ends = met
                .iter()
                .flat_map(|met| [met["from"].as_f64(), met["to"].as_f64()]);
            ends.flatten().collect()
        };
        let off = |link: &str, value: f64| {
            ends(link)
                .iter()
                .map(|end| apart(*end, value))
                .fold(1.0, f64::min)
        };
        for (a, b) in lines.iter().flatten().step_by(count / 12) {
            let with = |x: String, y: String| {
                format!("{}&sothat={wanted}", row.0.replace("{}", &x).replace("[]", &y))
            };
            let along = off(&with(format!("?{across}"), b.to_string()), *a);
            let upwards = off(&with(a.to_string(), format!("?{up}")), *b);
            assert!(
                along.min(upwards) < 1e-9,
                "{whole} at {a}, {b}: {along:e}, {upwards:e}"
            );
        }
        let (_, mut chart) = chart(&whole);
        let [width, height] = chart.spans().map(|span| span.high - span.low);
        let mut holds = |x: f64, y: f64| {
            let outcome = chart.outcome([x, y]);
            chart.missing([x, y], &outcome).is_none()
        };
        let (mut wrong, mut seen) = (0, 0);
        for pair in lines.iter().flat_map(|line| line.windows(2)).step_by(count / 40) {
            let ((x, y), (to_x, to_y)) = (pair[0], pair[1]);
            let (dx, dy) = ((to_x - x) / width, (to_y - y) / height);
            let (half_x, half_y) = (x + (to_x - x) / 2.0, y + (to_y - y) / 2.0);
            let part = 0.1;
            let left = holds(half_x - part * dy * width, half_y + part * dx * height);
            let right = holds(half_x + part * dy * width, half_y - part * dx * height);
            seen += 1;
            wrong += u32::from(!left || right);
        }
        // Where two conditions meet the line has a corner, and no sides at it.
        assert!(seen > 30 && wrong <= 2, "{whole}: {wrong} of {seen}");
    }
}

/// The marked ground agrees with the conditions at every place that is looked at, but for those next to a line.
#[test]
fn what_is_wanted_holds_where_the_ground_says_so() {
    for (row, wanted) in MAPS.iter().zip(WANTED) {
        let (statement, mut chart) = chart(&format!("{}&sothat={wanted}", link(row)));
        let (mut wrong, mut met, mut count) = (0, 0, 0);
        for up in (3..FINEST).step_by(13) {
            for across in (5..FINEST).step_by(13) {
                let values = chart.values([across, up].map(|place| place as f64 / FINEST as f64));
                let outcome = chart.outcome(values);
                let holds = statement.so_that.iter().all(|goal| goal.holds(&outcome));
                assert_eq!(chart.missing(values, &outcome).is_none(), holds);
                count += 1;
                met += u32::from(holds);
                wrong += u32::from(holds != chart.is_met_at(across, up));
            }
        }
        assert!(wrong <= 4, "{row:?}: {wrong} of {count}");
        let share = chart.met_share().expect("there are conditions");
        let counted = f64::from(met) / f64::from(count);
        assert!((share - counted).abs() < 0.03, "{row:?}: {share} {counted}");
        assert!(chart.fights() < 60_000, "{row:?}: {}", chart.fights());
    }
}

/// Square law with conditions: at least 300 left of X is a hyperbola, 0.04·(x² − 300²) = 0.09·y².
#[test]
fn what_is_wanted_of_the_square_law_is_a_hyperbola() {
    let link = "x.start=600?0..2400&y.start=400?0..1200&x.rate=0.04&y.rate=0.09&sothat=x.end:300..";
    let map = json(link)["asked"][0].clone();
    let lines = map["met"].as_array().expect("a list");
    assert_eq!(lines.len(), 1);
    for (x, y) in points(&lines[0]) {
        let off = 0.04 * (x * x - 90_000.0) - 0.09 * y * y;
        assert!(off.abs() <= 1e-9 * 0.04 * 2400.0 * 2400.0, "{x} {y}: {off:e}");
    }
}

/// In words: on how much of the map, or nowhere and how near the best comes; and at the place that is read.
#[test]
fn what_is_wanted_is_said_in_words() {
    let base = "x.name=Ondrel&y.name=Vessary&x.start=600?100..400&y.start=?300..500&x.rate=0.05&y.rate=0.06&x.break=0.3&y.break=0.4";
    let say = |wanted: &str| {
        let (statement, chart) = chart(&format!("{base}&sothat={wanted}"));
        words::map::sentence(&statement, &chart)
    };
    assert!(say("x.end:1000..").contains(
        "what is wanted, that at least 1000 of Ondrel are left, holds nowhere on the map: the nearest place, 400 and"
    ), "{}", say("x.end:1000.."));
    assert!(say("x.end:0..").contains("at least 0 of Ondrel are left, holds all over the map; "));
    assert!(say("x.prevails").contains("that Ondrel prevails, holds on "));
    let none = json(&format!("{base}&sothat=x.end:1000.."))["asked"][0].clone();
    assert_eq!(
        (&none["met"], none["met_share"].as_f64()),
        (&Value::Array(Vec::new()), Some(0.0))
    );
    assert!(
        none["nearest"]["short"]
            .as_f64()
            .is_some_and(|short| short > 600.0)
    );
    assert_eq!(none["nearest"]["condition"], 1);
    // What the legend is made of.
    let marked = |wanted: &str| {
        let (statement, chart) = chart(&format!("{base}&sothat={wanted}"));
        let map = picture::map(&statement, &chart, None).expect("there is a map");
        (map.has(Role::Flip), map.has(Role::Wanted), chart.met_share())
    };
    assert_eq!(marked("x.end:1000.."), (true, false, Some(0.0)));
    assert_eq!(marked("x.end:0.."), (true, false, Some(1.0)));
    assert!(marked("x.prevails").1);
    let (statement, mut chart) = chart(&format!("{base}&sothat=x.end:250.."));
    let mut read = |values: [f64; 2]| {
        let outcome = chart.outcome(values);
        let missing = chart.missing(values, &outcome);
        words::map::reading(&statement, &chart, values, &outcome, missing.as_ref())
    };
    assert!(read([390.0, 310.0]).ends_with("All that is wanted holds here."));
    assert!(read([300.0, 450.0]).ends_with("Not all that is wanted holds here: it leaves Ondrel 40 short."));
}

/// The ground agrees with a fight at every place that is looked at, but for those next to a line.
#[test]
fn the_ground_is_what_the_fights_say() {
    for row in MAPS {
        let (_, mut chart) = chart(&link(row));
        let (mut wrong, mut count) = (0, 0);
        for up in (3..FINEST).step_by(13) {
            for across in (5..FINEST).step_by(13) {
                let parts = [across, up].map(|place| place as f64 / FINEST as f64);
                let outcome = chart.outcome(chart.values(parts));
                let story = chart.story_at(across, up).map(|story| chart.stories()[story]);
                count += 1;
                wrong += u32::from(story.map(|story| story.breaks) != Some(outcome.breaks));
            }
        }
        assert!(count > 500 && wrong <= 2, "{row:?}: {wrong} of {count}");
    }
}

/// The work of a map is known, and a small part of that of 300 × 300 fights.
#[test]
fn a_map_takes_a_part_of_the_fights_of_its_lattice() {
    for row in MAPS {
        let (statement, chart) = chart(&link(row));
        assert!(chart.fights() < 40_000, "{row:?}: {}", chart.fights());
        assert!(words::map::sentence(&statement, &chart).starts_with("In this model, with "));
        for second in Second::ALL {
            let (low, high) = chart.range(second).expect("it has values");
            let lines = chart.contour(second, 0.5 * (low + high));
            assert!(lines.iter().all(|line| line.len() > 1), "{row:?} {second:?}");
        }
    }
}

/// A number in question beside another, and a third.
#[test]
fn two_make_a_map_and_three_are_too_many() {
    let two = json("x.start=600?&y.start=400&x.rate=0.05&y.rate=0.06?");
    assert_eq!(two["asked"][0]["slots"], serde_json::json!(["x.start", "y.rate"]));
    assert_eq!(two["breaks"], "y");
    let alone = json("x.start=?&y.start=400&x.rate=0.05&y.rate=0.06?");
    assert!(alone.get("breaks").is_none() && alone.get("caution").is_some());
    let three: Value =
        serde_json::from_str(&answer("x.start=600?&y.start=400?&x.rate=0.05&y.rate=0.06?").to_json())
            .expect("JSON");
    assert_eq!(three["ok"], false);
    let problems = three["problems"].as_array().expect("a list");
    assert_eq!((problems.len(), &problems[0]["key"]), (1, &"y.rate".into()));
}
