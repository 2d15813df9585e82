//! The types that go with the interface for scripts say what an answer has.

use std::collections::BTreeSet;

use aftercount_core::answer::answer;
use aftercount_core::outcome::Ended;
use aftercount_tests::tables::project_text;
use serde_json::{Map, Value, to_value};

/// What the interface adds to the object of the command line.
const WORDS: [&str; 4] = ["sentence", "marking", "link", "text_mark"];

/// The fields of an interface with their types, and those that it takes over from another.
fn fields(types: &str, name: &str) -> Vec<(String, String)> {
    let head = format!("interface {name} ");
    let (_, rest) = types.split_once(&head).unwrap_or_else(|| panic!("no {name}"));
    let (extends, rest) = rest.split_once("{\n").expect("it has fields");
    let inherited = extends
        .trim()
        .strip_prefix("extends ")
        .map_or(vec![], |base| fields(types, base));
    let (own, _) = rest.split_once("\n}").expect("it ends");
    let own = own.lines().filter_map(|line| {
        let (field, kind) = line.strip_prefix("  ")?.split_once(": ")?;
        let named = field.starts_with(|letter: char| letter.is_ascii_lowercase());
        named.then(|| (field.to_owned(), kind.trim_end_matches(';').to_owned()))
    });
    inherited.into_iter().chain(own).collect()
}

fn object(text: &str) -> Map<String, Value> {
    let Value::Object(mut object) = serde_json::from_str(&answer(text).to_json()).expect("JSON") else {
        panic!("an answer is an object");
    };
    for word in WORDS {
        object.insert(word.into(), Value::Null);
    }
    object
}

#[test]
fn the_types_name_what_an_answer_has_and_nothing_that_may_be_missing() {
    let types = project_text("www/interface/aftercount.d.ts");
    let sides = "x.rate=0.04&y.start=464&y.rate=0.05";
    for (name, text) in [
        ("AftercountOutcome", format!("x.start=600&{sides}")),
        ("AftercountOutcome", format!("x.start=600?&{sides}")),
        ("AftercountQuestion", format!("x.start=?&{sides}")),
        ("AftercountQuestion", format!("x.start=?&y.break=?&{sides}")),
    ] {
        let has: BTreeSet<String> = object(&text).keys().cloned().collect();
        let fields = fields(&types, name);
        for (field, _) in fields.iter().filter(|(field, _)| !field.ends_with('?')) {
            assert!(has.contains(field), "{name} promises {field}: {text}");
        }
        let named: BTreeSet<String> = fields
            .iter()
            .filter(|(_, kind)| kind != "undefined")
            .map(|(field, _)| field.trim_end_matches('?').to_owned())
            .collect();
        assert!(has.is_subset(&named), "{name} does not name all of {has:?}");
    }
    assert!(types.contains("): AftercountOutcome | AftercountQuestion | AftercountProblems;"));
}

#[test]
fn the_types_know_every_end() {
    let types = project_text("www/interface/aftercount.d.ts");
    let fields = fields(&types, "AftercountOutcome");
    let (_, kinds) = fields
        .iter()
        .find(|(field, _)| field == "ended")
        .expect("it has one");
    let kinds: BTreeSet<&str> = kinds.split(" | ").map(|kind| kind.trim_matches('"')).collect();
    let ends = [
        Ended::Break,
        Ended::Clock,
        Ended::Limit,
        Ended::Equilibrium,
        Ended::Growth,
        Ended::Withdrawn,
        Ended::Unfinished,
    ];
    let ends = ends.map(|end| to_value(end).expect("a word"));
    let ends: BTreeSet<&str> = ends.iter().filter_map(Value::as_str).collect();
    assert_eq!(kinds, ends);
}
