//! The JSON of the core, read and written by serde_json.

use aftercount_core::answer::{Besides, answer, answer_with};
use aftercount_core::golden;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::json::json;
use serde_json::Value;

/// Every kind of answer: to links of all kinds, to questions, and to texts that are wrong in letters which must be escaped.
#[test]
fn an_answer_is_written_as_serde_json_writes_it() {
    let mut links: Vec<String> = (0..200).map(golden::link).collect();
    links.push("x.start=%22%5C%01%C3%A9%E2%80%A8%7F/&x.rate=-0&title=%0A".into());
    links.push("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&x.name=%22O%5C&x.join=-0.1@1".into());
    links.extend((0..0x80).map(|letter| format!("x.start=%{letter:02X}")));
    let rest = "&x.rate=0.04&y.start=400&y.rate=0.05";
    for asked in [
        "600?",
        "?",
        "600?400..900",
        "600?&sothat=y.breaks",
        "600?400..900&sothat=x.end:800..,time:..0.001",
        "600?&y.break=0.5?",
    ] {
        links.push(format!("x.start={asked}{rest}"));
    }
    for (place, link) in links.into_iter().enumerate() {
        let besides = Besides {
            working: true,
            reversal: place == 0,
        };
        for answer in [answer(&link), answer_with(&link, besides)] {
            let known = serde_json::to_string(&answer).expect("it can be written");
            assert_eq!(answer.to_json(), known, "{link}");
        }
    }
}

#[test]
fn what_other_programs_get_begins_as_the_batch_door_answers() {
    for link in [
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&marking=M%20%22%7B%5B:,%5C",
        "x.start=1,000",
    ] {
        let (pairs, answer) = (Pairs::parse(link), answer(link));
        let line = json(&answer, &pairs, "0.1.0", false);
        let batch = answer.to_json();
        assert!(
            line.starts_with(batch.strip_suffix('}').expect("an object")),
            "{line}"
        );
        assert_eq!(line.lines().count(), 1);
        let pretty = json(&answer, &pairs, "0.1.0", true);
        let read = |text: &str| serde_json::from_str::<Value>(text).expect("JSON");
        assert_eq!(read(&line), read(&pretty));
        assert!(pretty.lines().count() > 5);
        let usual = serde_json::to_string_pretty(&read(&line)).expect("JSON");
        assert_eq!(pretty.lines().count(), usual.lines().count());
        assert_eq!(read(&line)["link"], pairs.link());
        assert_eq!(read(&line)["text_mark"], text_mark(&pairs));
    }
}
