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

/// Every part of the answer to a question, under the name of its type.
fn parts_of(asked: &Value) -> Vec<(&'static str, Value)> {
    let is_map = asked.get("slots").is_some();
    let [whole, line, met, nearest] = if is_map {
        [
            "AftercountMap",
            "AftercountFlip",
            "AftercountEdge",
            "AftercountNearestPlace",
        ]
    } else {
        [
            "AftercountAsked",
            "AftercountStretch",
            "AftercountInterval",
            "AftercountNearest",
        ]
    };
    let list = |field: &str| asked[field].as_array().cloned().unwrap_or_default();
    let lines = list("outcomes").into_iter().chain(list("flips"));
    let mut parts = vec![(whole, asked.clone())];
    parts.extend(lines.map(|part| (line, part)));
    parts.extend(list("met").into_iter().map(|part| (met, part)));
    parts.extend(asked.get("nearest").map(|part| (nearest, part.clone())));
    parts
}

/// Whether a value is one of a type; of those that are taken together by names of their own, that is looked at part by part.
fn is_of(kind: &str, value: &Value) -> bool {
    match kind {
        "string" => value.is_string(),
        "number" => value.is_number(),
        "true" => *value == true,
        "[string, string]" => value
            .as_array()
            .is_some_and(|all| all.len() == 2 && all.iter().all(Value::is_string)),
        "[number, number]" => value
            .as_array()
            .is_some_and(|all| all.len() == 2 && all.iter().all(Value::is_number)),
        "[number, number][]" => value
            .as_array()
            .is_some_and(|all| all.iter().all(|pair| is_of("[number, number]", pair))),
        "[AftercountBreaks, AftercountBreaks]" => value
            .as_array()
            .is_some_and(|all| all.len() == 2 && all.iter().all(|one| is_of("AftercountBreaks", one))),
        "AftercountBreaks" => ["x", "y", "both", "neither"].iter().any(|word| value == word),
        "AftercountEnded" => value.is_string(),
        words if words.contains('"') => words
            .split(" | ")
            .any(|word| *value == serde_json::from_str::<Value>(word).expect("a word")),
        list if list.ends_with("[]") => value.is_array(),
        _ => value.is_object(),
    }
}

#[test]
fn the_types_name_every_part_of_the_answer_to_a_question() {
    let types = project_text("www/interface/aftercount.d.ts");
    let one = "x.rate=0.04&y.start=464&y.rate=0.05&x.start=600?";
    let two = "x.rate=0.04&y.rate=0.05&x.start=600?&y.start=464?";
    let wanted = "&sothat=x.prevails,x.end:300..";
    let unmet = "&sothat=x.breaks,x.holds";
    let unbroken = "&until=1e-4&sothat=time:..1e-5";
    let mut seen = BTreeSet::new();
    for text in [one, two] {
        for sothat in ["", wanted, unmet, unbroken] {
            // Of nobody the break would come in any time.
            let text = if sothat == unbroken {
                text.replace('?', "?400..700")
            } else {
                text.into()
            };
            let text = format!("{text}{sothat}");
            for (name, part) in parts_of(&object(&text)["asked"][0]) {
                let fields = fields(&types, name);
                let object = part.as_object().unwrap_or_else(|| panic!("{name}: {part}"));
                for (field, kind) in &fields {
                    let found = object.get(field.trim_end_matches('?'));
                    assert!(
                        found.map_or(field.ends_with('?'), |found| is_of(kind, found)),
                        "{name} promises {field} to be {kind}: {found:?}"
                    );
                }
                for key in object.keys() {
                    let named = fields.iter().any(|(field, _)| field.trim_end_matches('?') == key);
                    assert!(named, "{name} does not name {key}");
                    seen.insert((name, key.clone()));
                }
            }
        }
    }
    // Nothing is named that is not there; what ends early takes too long for this test.
    for name in seen.iter().map(|(name, _)| *name).collect::<BTreeSet<_>>() {
        for (field, _) in fields(&types, name) {
            let key = field.trim_end_matches('?');
            assert!(
                key == "cut_short" || seen.contains(&(name, key.to_owned())),
                "{name} names {key}"
            );
        }
    }
    assert_eq!(
        seen.iter().map(|(name, _)| name).collect::<BTreeSet<_>>().len(),
        8
    );
}

#[test]
fn the_types_know_every_end() {
    let types = project_text("www/interface/aftercount.d.ts");
    let (_, kinds) = types.split_once("type AftercountEnded = ").expect("it has one");
    let (kinds, _) = kinds.split_once(';').expect("it ends");
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
