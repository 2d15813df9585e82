//! Two numbers in question: the lines along which the outcome flips, held to the thresholds of one number and to formulas.

use aftercount_core::answer::answer;
use aftercount_core::asked::{Chart, FINEST, Second};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words;
use serde_json::Value;

fn json(link: &str) -> Value {
    let answer: Value = serde_json::from_str(&answer(link).to_json()).expect("JSON");
    assert_eq!(answer["ok"], true, "{link}: {answer}");
    answer
}

fn chart(link: &str) -> (Statement, Chart) {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).unwrap_or_else(|problems| panic!("{link}: {problems:?}"));
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
