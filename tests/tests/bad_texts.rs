//! What a text must mean, and what is wrong with one that means nothing: two tables, each read line by line.

use aftercount_core::pairs::Pairs;
use aftercount_core::quantity::Quantity;
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_tests::tables::{self, answer};
use serde_json::Value;

/// The problems of a text, as the table writes them.
fn problems(link: &str) -> String {
    let answer = answer(link);
    assert_eq!(answer["ok"], false, "{link} is worked out");
    let line = |problem: &Value| {
        let words = problem["problem"].as_str().expect("words");
        match problem["key"].as_str() {
            Some(key) => format!("{key}: {words}"),
            None => words.to_owned(),
        }
    };
    answer["problems"]
        .as_array()
        .expect("a list")
        .iter()
        .map(line)
        .collect::<Vec<_>>()
        .join(" | ")
}

#[test]
fn every_bad_text_gives_its_problems() {
    let rows = tables::read("bad_texts.tsv");
    assert!(rows.len() > 180, "{} rows", rows.len());
    let wrong: Vec<String> = rows
        .iter()
        .filter(|row| problems(row.text("link")) != row.text("problems"))
        .map(|row| {
            format!(
                "line {}: {}\n  gives {}",
                row.line,
                row.text("link"),
                problems(row.text("link"))
            )
        })
        .collect();
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

/// A hint shows a text to type instead: typed, it must be better. Where the number is then out of its limits, that is
/// the next problem, but never the same one again.
#[test]
fn a_hint_that_is_followed_helps() {
    let mut followed = 0;
    for row in tables::read("bad_texts.tsv") {
        let (key, words) = row.text("problems").split_once(": ").unwrap_or_default();
        let Some(instead) = words
            .strip_prefix("write ")
            .and_then(|words| words.split([',', ' ']).next())
        else {
            continue;
        };
        if !instead.starts_with(|c: char| c.is_ascii_digit() || c == '-') || words.contains(" | ") {
            continue;
        }
        let mut pairs = Pairs::parse(row.text("link"));
        pairs.set(key, instead);
        let read = Statement::read(&pairs);
        let still = read
            .err()
            .unwrap_or_default()
            .into_iter()
            .find(|problem| problem.problem.starts_with("write"));
        assert_eq!(still, None, "line {}: {} is no better", row.line, instead);
        followed += 1;
    }
    assert!(followed > 20, "{followed} hints");
}

#[test]
fn a_text_is_found_as_it_was_written() {
    let answer = answer("x.start=1,000&x.rate=%E2%88%920.1&y.start=400&y.rate=0.05&title=a%0Ab");
    let found: Vec<&str> = answer["problems"]
        .as_array()
        .expect("a list")
        .iter()
        .map(|p| p["found"].as_str().expect("text"))
        .collect();
    assert_eq!(found, ["1,000", "\u{2212}0.1", "a\nb"]);
}

const GOOD: &str = "v=1&x.start=600&y.start=400&x.rate=0.04&y.rate=0.05&title=";

/// 16 KiB are read, and not a byte more; the length is looked at before anything else. A text without its version
/// counts with it, since it is written so.
#[test]
fn a_long_text_is_a_problem_of_its_own() {
    let padded = |length: usize| format!("{GOOD}{}", "a".repeat(length - GOOD.len()));
    assert!(problems(&padded(16 * 1024)).starts_with("title: is 16326 characters long"));
    let said = "the text is 16385 bytes long; at most 16384 are read";
    assert_eq!(problems(&padded(16 * 1024 + 1)), said);
    assert!(problems(&"%".repeat(5_000_000)).starts_with("the text is 5000000 bytes long"));
    assert!(problems(&"x.start=1&".repeat(100_000)).starts_with("the text is"));
}

/// A text typed into a field can also make the link too long, though no link was read.
#[test]
fn a_link_grown_too_long_is_a_problem() {
    let mut pairs = Pairs::parse(GOOD);
    pairs.set("note", &"\u{e9}".repeat(3_000));
    let problems = Statement::read(&pairs).expect_err("18 kB of escapes");
    assert!(
        problems
            .iter()
            .any(|problem| problem.problem.starts_with("the text is")),
        "{problems:?}"
    );
}

/// Many pairs within the limit are answered at once, in time that grows with the text and not with its square.
#[test]
fn many_problems_are_all_reported() {
    let link = (0..1500)
        .map(|index| format!("k{index}=1"))
        .collect::<Vec<_>>()
        .join("&");
    assert!(link.len() < 16 * 1024);
    let answer = answer(&link);
    assert_eq!(answer["problems"].as_array().expect("a list").len(), 1500 + 4);
}

/// What a good link means: every text and number, as the table writes them.
fn meaning(statement: &Statement) -> Vec<(String, String)> {
    let mut found = vec![
        ("title".to_owned(), statement.title.clone()),
        ("note".to_owned(), statement.note.clone()),
        ("marking".to_owned(), statement.marking.clone()),
        ("unit".to_owned(), statement.unit.symbol().to_owned()),
        ("counted".to_owned(), statement.counted.to_string()),
    ];
    for side in Side::BOTH {
        found.push((
            format!("{}.name", side.letter()),
            statement.names[side].to_string(),
        ));
        let law = statement.terms.sides[side].fire.law.law();
        found.push((format!("{}.fire", side.letter()), law.word.to_owned()));
    }
    let mut numbers = Vec::new();
    statement.terms.map(|slot, quantity| match quantity {
        Quantity::Number(value) => numbers.push((slot.to_owned(), format!("{value:?}"))),
        other => panic!("{slot}: {other:?}"),
    });
    found.extend(numbers);
    found
}

#[test]
fn a_good_link_means_the_same_for_ever() {
    let rows = tables::read("links.tsv");
    assert!(rows.len() >= 47, "the list only grows: {} rows", rows.len());
    for row in rows {
        let link = row.text("link");
        for text in [link.to_owned(), Pairs::parse(link).link()] {
            let statement =
                Statement::read(&Pairs::parse(&text)).unwrap_or_else(|why| panic!("{text}: {why:?}"));
            let found = meaning(&statement);
            for known in row.text("means").split(" | ") {
                let (key, value) = known.split_once('=').expect("key=value");
                assert_eq!(
                    value_of(&found, key),
                    plain(key, value),
                    "line {}, {key}: {text}",
                    row.line
                );
            }
        }
    }
}

fn value_of(found: &[(String, String)], key: &str) -> String {
    found
        .iter()
        .find(|(name, _)| name == key)
        .map(|(_, value)| value.clone())
        .unwrap_or_default()
}

/// A value of the table in the shape of `meaning`: numbers as the double nearest to them.
fn plain(key: &str, value: &str) -> String {
    let number = [".start", ".lost", ".rate", ".half", ".p", ".q", ".break", "until"]
        .iter()
        .any(|name| key.ends_with(name));
    match value.parse::<f64>() {
        Ok(parsed) if number => format!("{parsed:?}"),
        _ => value.to_owned(),
    }
}
