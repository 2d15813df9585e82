//! For how long the page keeps the browser from its other work while it catches up with what was typed: with what would
//! reverse the outcome, with a question, and with a map; by the page's own measures.
//!
//! `cargo bench -p aftercount-tests --features browser --bench catching_up`, once the page is built. It asserts nothing of
//! time: a busy machine is no fault of the page.

use aftercount_tests::browser::Browser;
use serde_json::Value;

const CLOSED: &str = "x.start=600{}&y.start=400[]&x.rate=0.04&y.rate=0.09&x.break=0.3&y.break=0.4&v=1";
const TEN_EVENTS: &str = "x.start=600&y.start=400&x.rate=0.04{}&y.rate=0.06[]&x.break=0.3&y.break=0.39&x.wastage=0.01\
&x.join=9@1,9@2,9@3,9@4,9@5&y.join=9@1.5,9@2.5,9@3.5,64@4.5,9@5.5&v=1";
const INTEGRATED: &str = "x.start=600{}&y.start=400[]&x.fire=search&x.half=80&x.rate=0.06&x.break=0.3&x.wastage=0.01\
&y.fire=power&y.p=0.9&y.q=0.2&y.rate=0.02&y.break=0.5&v=1";

/// Keeps every measure that the page makes.
const NOTE: &str = "window.measures = [];
new PerformanceObserver((list) => window.measures.push(...list.getEntries().map((one) => [one.name, one.duration])))
  .observe({entryTypes: ['measure']});";

/// So often each is done.
const ROUNDS: usize = 5;

fn main() {
    let browser = Browser::start();
    browser.before_each_page(NOTE);
    println!(
        "stretches of the page's thread, in milliseconds: the longest; in brackets all of them together"
    );
    for (name, link) in [
        ("closed", CLOSED),
        ("ten events", TEN_EVENTS),
        ("integrated", INTEGRATED),
    ] {
        for (what, marks) in [
            ("reversal", ["", ""]),
            ("question", ["?", ""]),
            ("map", ["?", "?"]),
        ] {
            let link = link.replace("{}", marks[0]).replace("[]", marks[1]);
            let rounds: Vec<Value> = (0..ROUNDS).map(|_| measured(&browser, &link)).collect();
            println!("{name}, {what}: {}", told(&rounds));
        }
    }
    browser.assert_clean();
}

/// All measures of one text, until everything of it is there.
fn measured(browser: &Browser, link: &str) -> Value {
    browser.open(link);
    browser.wait(
        "everything is worked out",
        "return document.documentElement.dataset.settled && document.documentElement.dataset.reversal === 'done';",
    );
    browser.script("return window.measures;", vec![])
}

/// By name, of the round that took the least.
fn told(rounds: &[Value]) -> String {
    let of = |round: &Value, name: &str| -> (f64, f64) {
        let all = round.as_array().into_iter().flatten();
        let named = all.filter(|one| one[0] == format!("aftercount.{name}"));
        let lengths = named.filter_map(|one| one[1].as_f64());
        lengths.fold((0.0, 0.0), |(most, sum), length| (length.max(most), sum + length))
    };
    let parts = ["work", "asking", "draw", "reversal"].map(|name| {
        let least = rounds
            .iter()
            .map(|round| of(round, name))
            .min_by(|a, b| a.1.total_cmp(&b.1));
        let (most, sum) = least.unwrap_or_default();
        format!("{name} {most:.1} ({sum:.0})")
    });
    parts.join(", ")
}
