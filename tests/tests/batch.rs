//! The door for batches, as a user opens it: one link a line in, one object of JSON a line out.

use aftercount_core::answer::{Besides, answer_with};
use aftercount_core::golden;
use aftercount_tests::tables::{self, project};
use serde_json::Value;
use std::io::Write;
use std::process::{Command, Output, Stdio};
use std::thread;

/// Every key of an outcome, the inner ones behind a point.
const KEYS: &[&str] = &[
    "ok",
    "breaks",
    "time",
    "ended",
    "to_the_last",
    "below_one",
    "x",
    "y",
    "x.start",
    "x.joined",
    "x.withdrawn",
    "x.committed",
    "x.end",
    "x.losses.fire",
    "x.losses.support",
    "x.losses.wastage",
    "x.losses.all",
    "y.start",
    "y.joined",
    "y.withdrawn",
    "y.committed",
    "y.end",
    "y.losses.fire",
    "y.losses.support",
    "y.losses.wastage",
    "y.losses.all",
    "loss_exchange_ratio",
    "fractional_exchange_ratio",
    "method",
    "pieces",
    "caution",
];

/// The batch door with these options, these bytes on its standard input.
fn door(options: &[&str], input: &[u8]) -> Output {
    let mut door = Command::new(env!("CARGO"))
        .args(["run", "-q", "-p", "aftercount-core", "--example", "outcome", "--"])
        .args(options)
        .current_dir(project())
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("cargo runs");
    let mut pipe = door.stdin.take().expect("a pipe");
    let bytes = input.to_owned();
    // From a thread of its own: many answers fill the other pipe before all is written. A door that refuses reads none.
    let writer = thread::spawn(move || pipe.write_all(&bytes));
    let output = door.wait_with_output().expect("the door ends");
    let written = writer.join().expect("the writer ends");
    assert!(written.is_ok() || !output.status.success(), "{written:?}");
    output
}

/// What the batch door prints, line by line.
fn answers(options: &[&str], input: &[u8]) -> Vec<Value> {
    let output = door(options, input);
    assert!(output.status.success(), "{}", output.status);
    let text = String::from_utf8(output.stdout).expect("the door writes UTF-8");
    assert!(
        text.is_empty() || text.ends_with('\n'),
        "the last line ends as the others do"
    );
    text.lines()
        .map(|line| serde_json::from_str(line).expect(line))
        .collect()
}

/// What the batch door prints for these bytes.
fn batch(input: &[u8]) -> Vec<Value> {
    answers(&[], input)
}

const GOOD: &str = "x.start=600&y.start=400&x.rate=0.04&y.rate=0.05";

#[test]
fn every_line_is_answered_in_its_place() {
    let long = format!("title={}", "a".repeat(20_000));
    let input = format!("{GOOD}\n\nx.start=1,000\n \r\n{GOOD}&until=3\r\n{long}\nnonsense\n{GOOD}");
    let answers = batch(input.as_bytes());
    let good: Vec<bool> = answers
        .iter()
        .map(|answer| answer["ok"].as_bool().expect("ok"))
        .collect();
    assert_eq!(good, [true, false, false, false, true, false, false, true]);
    assert_eq!(answers[4]["ended"], "clock");
    assert_eq!(answers[0], answers[7], "a last line needs no line break");
    for bad in answers.iter().filter(|answer| answer["ok"] == false) {
        let problems = bad["problems"].as_array().expect("problems");
        assert!(!problems.is_empty(), "{bad}");
        for problem in problems {
            let keys: Vec<&String> = problem.as_object().expect("an object").keys().collect();
            assert_eq!(keys.len(), 4, "key, item, found, problem: {problem}");
            assert!(
                problem["problem"].as_str().is_some_and(|words| !words.is_empty()),
                "{problem}"
            );
        }
    }
}

#[test]
fn nothing_in_nothing_out_and_no_line_stops_it() {
    assert_eq!(batch(b""), Vec::<Value>::new());
    let answers = batch(&[b"x.start=\xff\xfe&y.start=1\n", GOOD.as_bytes()].concat());
    assert_eq!(answers.len(), 2);
    assert_eq!(answers[0]["ok"], false);
    assert_eq!(answers[1]["ok"], true);
}

#[test]
fn an_outcome_has_every_key_and_no_other() {
    let answer = &batch(GOOD.as_bytes())[0];
    for key in KEYS {
        let found = key.split('.').try_fold(answer, |value, part| value.get(part));
        assert!(found.is_some(), "{key} is missing");
    }
    let outer = KEYS.iter().filter(|key| !key.contains('.')).count();
    assert_eq!(answer.as_object().expect("an object").len(), outer, "{answer}");
    let inner = KEYS
        .iter()
        .filter(|key| key.starts_with("x.") && !key.contains("losses"))
        .count()
        + 1;
    assert_eq!(
        answer["x"].as_object().expect("an object").len(),
        inner,
        "{answer}"
    );
    assert_eq!(
        answer["pieces"][0].as_object().expect("a piece").len(),
        3,
        "{answer}"
    );
    assert!(
        answer["caution"]
            .as_str()
            .is_some_and(|words| words.contains("study")),
        "{answer}"
    );
}

#[test]
fn the_door_says_what_the_library_says() {
    for (link, answer) in [GOOD, "x.start=NaN"]
        .iter()
        .zip(batch(format!("{GOOD}\nx.start=NaN\n").as_bytes()))
    {
        assert_eq!(answer, tables::answer(link));
    }
}

#[test]
fn losses_and_ratios_add_up() {
    let answer = tables::outcome(&format!("{GOOD}&x.lost=50&y.break=0.5"));
    let number = |path: &str| tables::number(&answer, path).unwrap_or_else(|| panic!("{path} is null"));
    for side in ["x", "y"] {
        let of = |path: &str| number(&format!("{side}.{path}"));
        let lost = of("start") - of("end");
        tables::assert_close(
            of("losses.fire"),
            lost,
            1e-14,
            "losses are what is no longer there",
        );
        assert_eq!(of("losses.fire"), of("losses.all"));
        assert_eq!(
            of("losses.support") + of("losses.wastage") + of("joined") + of("withdrawn"),
            0.0
        );
    }
    assert_eq!(
        number("x.committed"),
        650.0,
        "committed counts what was lost before"
    );
    let exchange = number("y.losses.fire") / number("x.losses.fire");
    tables::assert_close(
        number("loss_exchange_ratio"),
        exchange,
        1e-14,
        "y's losses for one of x's",
    );
    let fractional = exchange * number("x.committed") / number("y.committed");
    tables::assert_close(
        number("fractional_exchange_ratio"),
        fractional,
        1e-14,
        "each over its committed",
    );
}

/// All cores work on the lines, and yet the answers come in their order: more lines than any block of them holds, of
/// every law, with a bad one now and then.
#[test]
fn many_lines_are_answered_in_order() {
    let link = |index: u32| match index % 97 {
        0 => format!("x.start=nonsense{index}"),
        _ => format!("{}&title={index}", golden::link(index)),
    };
    let links: Vec<String> = (0..5000).map(link).collect();
    let found = batch(links.join("\n").as_bytes());
    assert_eq!(found.len(), links.len());
    for (link, answer) in links.iter().zip(&found) {
        assert_eq!(answer, &tables::answer(link), "{link}");
    }
}

/// With `--working` an outcome has one key more: the lines that the page shows, as plain text. Problems have none.
#[test]
fn working_is_shown_where_it_is_asked_for() {
    let brackney =
        "x.start=120&x.fire=search&x.rate=0.05&x.half=40&y.start=90&y.fire=search&y.rate=0.08&y.half=15";
    let found = answers(
        &["--working"],
        format!("{GOOD}\nx.start=NaN\n{brackney}\n").as_bytes(),
    );
    let plain = batch(GOOD.as_bytes());
    assert_eq!(found.len(), 3);
    for (answer, link) in [(&found[0], GOOD), (&found[2], brackney)] {
        let lines = answer["working"].as_array().expect("lines");
        assert!(lines.len() >= 4, "{lines:?}");
        assert!(
            lines.iter().all(|line| line
                .as_str()
                .is_some_and(|line| !line.trim().is_empty() && !line.contains('<'))),
            "{lines:?}"
        );
        let known: Value = {
            let besides = Besides {
                working: true,
                ..Besides::default()
            };
            serde_json::from_str(&answer_with(link, besides).to_json()).expect("JSON")
        };
        assert_eq!(answer, &known);
    }
    assert!(found[1].get("working").is_none(), "{}", found[1]);
    let mut without = found[0].clone();
    without.as_object_mut().expect("an object").remove("working");
    assert_eq!(without, plain[0], "and all else is the same");
}

#[test]
fn what_would_reverse_it_is_given_in_the_order_of_the_lines() {
    let other = "x.start=300&x.rate=0.05&y.start=500&y.rate=0.02&y.join=40@2";
    let lines = format!("{GOOD}\nx.start=NaN\n{other}\n{GOOD}\n");
    let found = answers(&["--reversal"], lines.as_bytes());
    let plain = batch(lines.as_bytes());
    for (answer, link) in [(&found[0], GOOD), (&found[2], other), (&found[3], GOOD)] {
        let besides = Besides {
            reversal: true,
            ..Besides::default()
        };
        let known: Value = serde_json::from_str(&answer_with(link, besides).to_json()).expect("JSON");
        assert_eq!(answer, &known);
        for entry in answer["reversal"].as_array().expect("a list") {
            let keys: Vec<&str> = entry
                .as_object()
                .expect("an object")
                .keys()
                .map(String::as_str)
                .collect();
            let known = ["breaks", "change", "elasticity", "kind", "now", "slot", "value"];
            assert_eq!(keys, known, "{entry}");
            assert_eq!(entry["value"].is_null(), entry["change"].is_null());
            assert!(entry["kind"] == "reversed" || entry["kind"] == "undecided");
        }
    }
    assert!(found[1].get("reversal").is_none());
    let mut without = found[0].clone();
    without.as_object_mut().expect("an object").remove("reversal");
    assert_eq!(without, plain[0], "and all else is the same");
}

#[test]
fn an_option_it_does_not_know_is_refused() {
    for options in [
        &["--workings"][..],
        &["--working", "--working"],
        &["--reversal", "--reversal"],
        &["links.txt"],
    ] {
        let output = door(options, GOOD.as_bytes());
        assert_eq!(output.status.code(), Some(2), "{options:?}");
        assert!(output.stdout.is_empty(), "{options:?}");
        let said = String::from_utf8_lossy(&output.stderr);
        assert!(said.contains("--working"), "{said}");
    }
}
