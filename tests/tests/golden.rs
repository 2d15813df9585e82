//! The golden bits: 500 answers, to their last digit, on every machine.
//!
//! That the page gives the same 500 is a browser test. A change that is meant changes `reference/golden.txt`, and says why.

use aftercount_core::answer::answer;
use aftercount_core::golden;
use aftercount_tests::tables::project_text;
use serde_json::Value;
use std::collections::BTreeMap;

#[test]
fn the_golden_bits_are_those_committed() {
    let committed = project_text("tests/reference/golden.txt");
    assert_eq!(
        golden::digest(),
        committed.trim(),
        "reference/golden.txt holds the other"
    );
}

/// A hash of problems, or of one kind of outcome alone, would hold nothing.
#[test]
fn the_golden_links_are_good_and_of_every_kind() {
    let mut kinds: BTreeMap<String, u32> = BTreeMap::new();
    for index in 0..golden::COUNT {
        let link = golden::link(index);
        let answer: Value = serde_json::from_str(&answer(&link).to_json()).expect("JSON");
        assert_eq!(answer["ok"], true, "{link}: {answer}");
        for kind in ["ended", "breaks", "to_the_last", "method"] {
            *kinds.entry(format!("{kind} {}", answer[kind])).or_default() += 1;
        }
        for pair in link.split('&').filter(|pair| pair.contains(".fire=")) {
            *kinds.entry(pair.to_owned()).or_default() += 1;
        }
    }
    for kind in [
        "ended \"break\"",
        "ended \"clock\"",
        "ended \"limit\"",
        "breaks \"x\"",
        "breaks \"y\"",
        "method \"closed form\"",
        "method \"quadrature\"",
        "x.fire=aimed",
        "x.fire=area",
        "x.fire=logarithmic",
        "x.fire=search",
        "x.fire=power",
        "x.fire=none",
    ] {
        assert!(
            kinds.get(kind).is_some_and(|count| *count >= 20),
            "{kind}: {kinds:?}"
        );
    }
}
