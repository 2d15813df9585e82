//! Undo and Redo walk over everything that changes the engagement, whatever button or field did it.

use aftercount_tests::browser::{Browser, Key};

const LINK: &str =
    "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&v=1";
const OTHER: &str = "x.start=300&x.rate=0.02&y.start=200&y.rate=0.03&v=1";

/// What somebody does, in words, and how.
type Act = (&'static str, fn(&Browser));

/// Everything that changes the text, each as one step, in an order in which each has something to do.
const ACTS: [Act; 17] = [
    ("typing in a field", |browser| {
        type_and_leave(browser, "x.start", "650")
    }),
    ("typing in another", |browser| {
        type_and_leave(browser, "y.start", "500")
    }),
    ("one change taken back", |browser| {
        browser.press("[data-back='x.start']", Key::Enter);
    }),
    ("all changes taken back", |browser| {
        browser.press("[data-pass=all-back]", Key::Enter)
    }),
    ("continuing from the reading", |browser| {
        browser.press("#continue", Key::Enter)
    }),
    ("a law of fire", |browser| {
        browser.choose("x.fire", "area");
        browser.leave();
    }),
    ("a new reserve", |browser| {
        browser.press("[id='x.join.add']", Key::Enter)
    }),
    ("a part of a reserve", |browser| {
        browser.type_at("[id='x.join.1.size']", "9");
        browser.leave();
    }),
    ("a reserve removed", |browser| {
        browser.press("[id='x.join.1.remove']", Key::Enter)
    }),
    ("a new phase", |browser| browser.press("#add-phase", Key::Enter)),
    ("a change of a phase", |browser| {
        browser.press("[id='phase1.add']", Key::Enter)
    }),
    ("a phase removed", |browser| {
        browser.press("[id='phase1.remove']", Key::Enter)
    }),
    ("another unit of time", |browser| {
        browser.choose("unit", "d");
        browser.leave();
    }),
    ("numbers restated in it", |browser| {
        browser.press("[id='unit.convert']", Key::Enter)
    }),
    ("a question", |browser| {
        browser.click("[name='y.rate']");
        browser.click("[id='hand.ask']");
    }),
    ("another engagement opened", |browser| {
        browser.press(".top [data-pass=open]", Key::Enter);
        browser.type_at("#open-text", OTHER);
        browser.press("[data-pass=take-up]", Key::Enter);
    }),
    ("a blank form", |browser| browser.press("#blank", Key::Enter)),
];

fn type_and_leave(browser: &Browser, name: &str, text: &str) {
    browser.write(name, text);
    browser.leave();
}

/// Waits until the text is, or is not, this one.
#[track_caller]
fn wait_text(browser: &Browser, what: &str, text: &str, same: bool) {
    let sign = if same { "===" } else { "!==" };
    let text = serde_json::json!(text);
    let body = format!("return document.getElementById('text').value {sign} {text};");
    browser.wait(what, &body);
}

#[test]
fn every_act_is_one_step() {
    let browser = Browser::opened(LINK);
    let mut texts = vec![browser.link()];
    for (name, act) in ACTS {
        let before = texts.last().cloned().unwrap_or_default();
        act(&browser);
        wait_text(&browser, name, &before, false);
        texts.push(browser.link());
    }
    for (at, (name, _)) in ACTS.iter().enumerate().rev() {
        browser.click("#undo");
        wait_text(&browser, &format!("Undo of {name}"), &texts[at], true);
    }
    let nothing_left = "return document.getElementById('undo').ariaDisabled;";
    assert_eq!(browser.script(nothing_left, vec![]), "true", "each was one step");
    for (at, (name, _)) in ACTS.iter().enumerate() {
        browser.click("#redo");
        wait_text(&browser, &format!("Redo of {name}"), &texts[at + 1], true);
    }
    // The browser's own ways are the same.
    browser.back();
    wait_text(&browser, "back", &texts[ACTS.len() - 1], true);
    browser.forward();
    wait_text(&browser, "forward", &texts[ACTS.len()], true);
    browser.assert_clean();
}

/// What does not change the engagement is no step: opened panels, the reading, what is kept, what is copied.
#[test]
fn what_changes_no_text_is_no_step() {
    let browser = Browser::opened(LINK);
    browser.click(".more > summary");
    browser.press("#reading", Key::End);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "Kept");
    browser.click(".top [data-pass=copy-as]");
    browser.press("#copy-dialog [data-pass=close]", Key::Enter);
    browser.click("#copy");
    browser.press("[data-pass=forget-all]", Key::Enter);
    assert_eq!(browser.link(), LINK);
    let off = "return [document.getElementById('undo').ariaDisabled, history.length];";
    let length = browser.script(off, vec![]);
    assert_eq!(length[0], "true");
    assert_eq!(browser.address().split_once('#').map(|parts| parts.1), Some(LINK));
    browser.assert_clean();
}
