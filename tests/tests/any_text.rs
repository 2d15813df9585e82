//! What must hold for every text, tried on thousands.

use aftercount_core::pairs::Pairs;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngSeed};

/// Texts as users and their programs mangle them: plain, with marks of the grammar, with control and direction
/// characters, with escapes that are none.
fn any_text() -> impl Strategy<Value = String> {
    prop_oneof![
        "[a-z.]{1,8}",
        "[-=&%+#? @,:/;'\"<>|~0-9A-Fa-f.\u{0}\u{1b}\u{7f}\u{202e}\u{2212}\u{feff}]{0,12}",
        any::<String>(),
    ]
}

/// A link built of keys, texts and marks without regard to the grammar.
fn any_link() -> impl Strategy<Value = String> {
    let escape = prop_oneof![
        "%[0-9A-Fa-f]{2}",
        "%[0-9A-Za-z]?",
        Just("%FF".to_owned()),
        Just("%E2%88%92".to_owned())
    ];
    let mark = prop_oneof![
        Just("&"),
        Just("="),
        Just("#"),
        Just("?"),
        Just("+"),
        Just("v=1"),
        Just("x.start")
    ];
    let piece = prop_oneof![2 => any_text(), 2 => mark.prop_map(str::to_owned), 1 => escape];
    prop::collection::vec(piece, 0..14).prop_map(|pieces| pieces.concat())
}

/// The pairs with the version last, as the writer puts them.
fn in_written_order(pairs: &Pairs) -> Vec<(String, String)> {
    let mut all: Vec<(String, String)> = pairs
        .iter()
        .map(|(key, text)| (key.to_owned(), text.to_owned()))
        .collect();
    if !all.iter().any(|(key, _)| key == "v") {
        all.push(("v".into(), "1".into()));
    }
    all.sort_by_key(|(key, _)| key == "v");
    all
}

proptest! {
    #![proptest_config(Config {
        cases: 3000,
        rng_seed: RngSeed::Fixed(1916),
        failure_persistence: None,
        ..Config::default()
    })]

    #[test]
    fn what_is_set_is_read_again(key in any_text(), text in any_text(), other in any_text()) {
        prop_assume!(!text.is_empty() && key != "v" && key != "note");
        let mut pairs = Pairs::parse("");
        pairs.set(&key, &text);
        if !other.is_empty() {
            pairs.set("note", &other);
        }
        let link = pairs.link();
        prop_assert!(link.ends_with("&v=1") || key.contains('?'), "{link}");
        let plain = |c: char| c.is_ascii_alphanumeric() || "-._,:@?/=&%".contains(c);
        prop_assert!(link.chars().all(plain), "{link}");
        let again = Pairs::parse(&link);
        prop_assert_eq!(again.get(&key), Some(text.as_str()), "{}", link);
        prop_assert_eq!(again.get("note").unwrap_or_default(), other, "{}", link);
    }

    #[test]
    fn any_link_is_written_as_it_reads(link in any_link()) {
        let pairs = Pairs::parse(&link);
        let written = pairs.link();
        let again = Pairs::parse(&written);
        prop_assert_eq!(in_written_order(&again), in_written_order(&pairs), "written {}", written);
        prop_assert_eq!(again.link(), written);
    }

    #[test]
    fn any_link_is_answered(link in any_link()) {
        let full = format!("x.start=600&y.start=400&x.rate=0.04&y.rate=0.05&{link}");
        for link in [link, full] {
            let json = aftercount_core::answer::answer(&link).to_json();
            prop_assert!(!json.contains('\n'), "one line: {json}");
            prop_assert!(serde_json::from_str::<serde_json::Value>(&json).is_ok(), "{json}");
        }
    }
}
