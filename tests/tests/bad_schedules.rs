//! What is wrong with a schedule's text: a table, read line by line; items of lists are named by their numbers.

use aftercount_tests::tables::{self, answer};
use serde_json::Value;

/// A good engagement without its schedule.
const BASE: &str = "x.start=400&x.rate=0.05&y.start=300&y.rate=0.05";

/// The link of a row, its marks filled in.
fn link(text: &str) -> String {
    let mut link = text.replace("{BASE}", BASE);
    for item in ["1@1", "1@1/"] {
        link = link.replace(&format!("{{21 of {item}}}"), &vec![item; 21].join(","));
    }
    link
}

/// The problems of a text, as the table writes them.
fn problems(link: &str) -> String {
    let answer = answer(link);
    assert_eq!(answer["ok"], false, "{link} is worked out");
    let line = |problem: &Value| {
        let words = problem["problem"].as_str().expect("words");
        let key = problem["key"].as_str().unwrap_or("the text");
        match problem["item"].as_u64() {
            Some(item) => format!("{key}, {item}: {words}"),
            None => format!("{key}: {words}"),
        }
    };
    let list = answer["problems"].as_array().expect("a list");
    list.iter().map(line).collect::<Vec<_>>().join(" | ")
}

#[test]
fn every_bad_schedule_gives_its_problems() {
    let mut rows = tables::read("bad_schedules.tsv");
    assert!(rows.len() >= 55, "{} rows", rows.len());
    rows.extend(tables::read("bad_cells.tsv"));
    let mut wrong = Vec::new();
    for row in &rows {
        let found = problems(&link(row.text("link")));
        if found != row.text("problems") {
            wrong.push(format!("{}\t{found}", row.text("link")));
        }
    }
    assert!(
        wrong.is_empty(),
        "{} other than the table has:\n{}",
        wrong.len(),
        wrong.join("\n")
    );
}

/// What a list says of an item that is found wrong is the text of that item alone.
#[test]
fn the_item_is_shown_as_it_stands() {
    let answer = answer(&format!("{BASE}&x.join=64@4,5.@6,7@x&y.flow=2@3/1"));
    let found: Vec<(u64, &str)> = answer["problems"]
        .as_array()
        .expect("a list")
        .iter()
        .map(|problem| {
            (
                problem["item"].as_u64().unwrap_or(0),
                problem["found"].as_str().unwrap_or(""),
            )
        })
        .collect();
    assert_eq!(found, [(2, "5.@6"), (3, "7@x"), (1, "2@3/1")]);
}
