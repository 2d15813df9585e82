//! The interface for pages with scripts of their own, as such a page uses it: from a disc, by a script tag.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::caution;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words;
use aftercount_tests::browser::{Browser, interface_url, native_sentence};
use serde_json::{Value, json};

const LINK: &str = "marking=EXERCISE&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464\
&y.rate=0.05&y.break=0.5&x.join=64@4&v=1";

fn opened() -> Browser {
    let browser = Browser::start();
    browser.open_address(interface_url().as_str());
    browser.wait("ready", "return document.getElementById('sentence').textContent;");
    browser
}

fn outcome(browser: &Browser, text: impl Into<Value>) -> Value {
    read(&browser.script(
        "return JSON.stringify(aftercount.outcome(arguments[0]));",
        vec![text.into()],
    ))
}

/// What a page wrote as text: Firefox's driver would round its numbers.
fn read(json: &Value) -> Value {
    plain(serde_json::from_str(json.as_str().expect("a text")).expect("JSON"))
}

/// The same with every number as a double: a driver writes 600.0 as 600.
fn plain(value: Value) -> Value {
    match value {
        Value::Number(number) => json!(number.as_f64()),
        Value::Array(items) => items.into_iter().map(plain).collect(),
        Value::Object(object) => object
            .into_iter()
            .map(|(key, value)| (key, plain(value)))
            .collect(),
        other => other,
    }
}

/// The answer of the core on this machine, with the words that the interface adds.
fn native(text: &str) -> Value {
    let answer = answer(text);
    let mut object: Value = serde_json::from_str(&answer.to_json()).expect("JSON");
    if !matches!(answer, Answer::Problems(_)) {
        let pairs = Pairs::parse(text);
        object["sentence"] = json!(sentence_of(&answer, text));
        object["marking"] = json!(pairs.get("marking"));
        object["link"] = json!(pairs.link());
        object["text_mark"] = json!(text_mark(&pairs));
    }
    plain(object)
}

fn sentence_of(answer: &Answer, text: &str) -> String {
    let statement = Statement::read(&Pairs::parse(text)).expect("it was worked out");
    match answer {
        Answer::Asked { asked, outcome } => {
            let base = outcome.iter().map(|_| native_sentence(text));
            let asked = asked.iter().map(|reply| words::asked::reply(&statement, reply));
            base.chain(asked).collect::<Vec<_>>().join(" ")
        }
        _ => native_sentence(text),
    }
}

#[test]
fn a_text_in_and_an_outcome_out() {
    let browser = opened();
    for text in [
        LINK,
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.09",
        "x.start=600&x.fire=none&y.start=400&y.fire=none&x.flow=5@0/",
        // Numbers in question, with a value now and without.
        "x.start=600?&x.rate=0.04&y.start=464&y.rate=0.05&sothat=y.breaks",
        "x.start=?&x.rate=0.04&y.start=464&y.rate=0.05&sothat=y.breaks",
        // Wrong ones are values too.
        "x.start=1,000&x.jion=4&y.start=400&x.rate=0.04&y.rate=0.05&x.join=64@4,80",
        "no engagement",
        "",
    ] {
        assert_eq!(outcome(&browser, text), native(text), "{text}");
    }
    // What the driver could not hand on: numbers without bound.
    let script = "const { x } = aftercount.outcome(arguments[0]);
        return [x.joined, x.committed, x.losses.all, x.end].map(String);";
    let endless = browser.script(
        script,
        vec!["x.start=600&x.fire=none&y.start=400&y.fire=none&x.flow=5@0/".into()],
    );
    assert_eq!(endless, json!(["Infinity", "Infinity", "0", "null"]));
    let good = outcome(&browser, LINK);
    assert_eq!(good["caution"], caution::SHORT);
    assert_eq!(good["marking"], "EXERCISE");
    browser.assert_clean();
}

#[test]
fn what_is_no_text_is_a_problem_and_no_error() {
    let browser = opened();
    for thing in [
        Value::Null,
        json!(7),
        json!({"x.start": 600}),
        json!(["x.start=600"]),
    ] {
        let answer = outcome(&browser, thing);
        assert_eq!(answer["ok"], false);
        assert_eq!(answer["problems"][0]["key"], Value::Null);
        assert!(
            answer["problems"][0]["problem"]
                .as_str()
                .is_some_and(|words| words.contains("text"))
        );
    }
    // Asked before it is ready, it says so.
    let script = "const frame = document.createElement('iframe'); document.body.append(frame);
        const script = frame.contentDocument.createElement('script'); script.text = arguments[0];
        frame.contentDocument.body.append(script); return frame.contentWindow.aftercount.outcome('x.start=600');";
    let program = std::fs::read_to_string(
        interface_url()
            .to_file_path()
            .expect("a file")
            .with_file_name("aftercount.js"),
    );
    let early = browser.script(script, vec![program.expect("it is built").into()]);
    assert_eq!(early["ok"], false, "{early}");
    browser.assert_clean();
}

/// A program that stops is one answer lost, and no more.
#[test]
fn after_a_trap_the_next_text_is_worked_out() {
    let browser = opened();
    // Nothing of the program's own is in reach of the page: a text that cannot be handed over stands for a trap.
    let script = "const sound = TextEncoder.prototype.encodeInto;
        TextEncoder.prototype.encodeInto = () => {
          TextEncoder.prototype.encodeInto = sound; throw new WebAssembly.RuntimeError('unreachable'); };
        return aftercount.outcome(arguments[0] + '&note=\u{2013}');";
    let stopped = browser.script(script, vec![LINK.into()]);
    let words = stopped["problems"][0]["problem"].as_str().unwrap_or_default();
    assert!(words.contains("stopped on this text"), "{stopped}");
    assert_eq!(outcome(&browser, LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn the_example_shows_what_it_is_told() {
    let browser = opened();
    let text = browser.link();
    assert_eq!(browser.text("#sentence"), native_sentence(&text));
    assert_eq!(browser.text("#caution"), caution::SHORT);
    assert_eq!(browser.text("#marking"), "EXERCISE");
    let mark = text_mark(&Pairs::parse(&text));
    assert_eq!(browser.text("#mark"), format!("Text mark {mark}"));
    let script = "document.getElementById('text').value = arguments[0];";
    browser.script(script, vec!["x.start=1,000&x.rate=1&y.start=4&y.rate=<b>".into()]);
    browser.click("#work");
    let shown = browser.text("#problems");
    assert!(
        shown.contains("x.start: 1,000: write 1000, without marks for thousands"),
        "{shown}"
    );
    assert!(!shown.contains('`'), "{shown}");
    assert_eq!(browser.text("#figures"), "", "no figures of another text");
    assert_eq!(browser.text("#mark"), "");
    // A question about a number that has no value now has an answer and no figures.
    let question = "x.start=?&x.rate=0.04&y.start=464&y.rate=0.05";
    browser.script(script, vec![LINK.into()]);
    browser.click("#work");
    browser.wait_text("#figures", "600.0");
    browser.script(script, vec![question.into()]);
    browser.click("#work");
    assert_eq!(
        browser.text("#sentence"),
        sentence_of(&answer(question), question)
    );
    assert_eq!(browser.text("#figures"), "", "no figures of another text");
    assert_eq!(browser.text("#caution"), caution::SHORT);
    browser.picture("interface");
    browser.assert_clean();
}
