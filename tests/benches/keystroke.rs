//! How long a keystroke keeps the page's main thread, from the field to finished pictures, by the page's own measures.
//!
//! `cargo bench -p aftercount-tests --features browser --bench keystroke`, once the page is built. It asserts nothing of
//! time: a busy machine is no fault of the page.

use aftercount_tests::browser::Browser;

/// Ten events on linear pieces: reserves of both sides, a withdrawal, a flow that begins and ends, and phases.
const TEN_EVENTS: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.9&x.join=40@1,-30@3,25@6&y.name=Vessary\
&y.start=400&y.rate=0.06&y.break=0.9&y.join=64@2,20@5&y.flow=5@1.5/7&phase1.from=4&phase1.x.rate=0.03&phase2.from=8\
&phase2.y.rate=0.05&phase3.from=9&phase3.x.wastage=0.002&v=1";

/// Keystrokes that count; those before them warm the page up.
const KEYSTROKES: usize = 60;
const BEFORE: usize = 20;

fn main() {
    let browser = Browser::start();
    browser.open(TEN_EVENTS);
    browser.settle(TEN_EVENTS);
    browser.script("document.getElementsByName('x.start')[0].focus();", vec![]);
    let mut taken = Vec::new();
    for keystroke in 0..BEFORE + KEYSTROKES {
        let digit = if keystroke % 2 == 0 { "600" } else { "601" };
        browser.write("x.start", digit);
        browser.settle_on_any();
        let script = "const of = (name) => performance.getEntriesByName(name, 'measure')[0].duration;
                      return [of('aftercount.work'), of('aftercount.draw')];";
        let measured = browser.script(script, vec![]);
        let part = |index: usize| measured[index].as_f64().expect("the page measures itself");
        if keystroke >= BEFORE {
            taken.push((part(0) + part(1), part(0), part(1)));
        }
    }
    taken.sort_by(|a, b| a.0.total_cmp(&b.0));
    let at = |part: f64| taken[(part * (taken.len() - 1) as f64) as usize];
    for (name, part) in [
        ("least", 0.0),
        ("median", 0.5),
        ("nine in ten", 0.9),
        ("most", 1.0),
    ] {
        let (all, work, draw) = at(part);
        println!("{name}: {all:.1} ms, of which {work:.1} to work out and show, {draw:.1} to draw");
    }
}
