//! What would reverse the outcome, on the page; and the pictures' handles, by which it is tried by hand.

use aftercount_core::demo::DEMO;
use aftercount_core::pairs::Pairs;
use aftercount_core::reversal::Reversal;
use aftercount_core::statement::Statement;
use aftercount_core::words::reversal::nearest;
use aftercount_tests::browser::{Browser, Key, Screen, changed, native};
use serde_json::{Value, json};

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39\
&y.join=64@4&v=1";

/// Nothing keeps the page from its other work for longer, in milliseconds.
const STALL: f64 = 50.0;

fn found(link: &str) -> (Statement, Reversal) {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).expect(link);
    let reversal = Reversal::new(&pairs, &statement).finished();
    (statement, reversal)
}

fn line(link: &str) -> String {
    let (statement, reversal) = found(link);
    nearest(&statement, &reversal)
}

fn wait_for_reversal(browser: &Browser) {
    let done = "return document.documentElement.dataset.reversal === 'done';";
    browser.wait("all reversals are found", done);
}

fn words(value: &Value) -> Vec<String> {
    let all = value.as_array().into_iter().flatten();
    all.map(|text| text.as_str().unwrap_or_default().to_owned())
        .collect()
}

#[test]
fn the_line_and_the_table_say_what_the_core_finds() {
    let browser = Browser::start();
    browser.open("");
    browser.settle(DEMO);
    wait_for_reversal(&browser);
    let (_, reversal) = found(DEMO);
    assert_eq!(browser.text("#nearest"), line(DEMO));
    let script =
        "return [...document.querySelectorAll('#reversal-table tbody tr')].map((row) => row.dataset.slot);";
    let expected: Vec<String> = reversal
        .entries()
        .iter()
        .map(|entry| entry.slot.name.clone())
        .collect();
    assert_eq!(words(&browser.script(script, vec![])), expected);

    // Typing takes what was found off at once; what belongs to the new text comes of itself.
    let other = changed(DEMO, "x.start", "640");
    browser.write("x.start", "640");
    browser.settle(&other);
    wait_for_reversal(&browser);
    assert_eq!(browser.text("#nearest"), line(&other));
    browser.write("x.start", "x");
    browser.leave();
    browser.wait_state("stale");
    let marked = browser.script(
        "return document.documentElement.dataset.reversal ?? 'none';",
        vec![],
    );
    assert_eq!(marked, "none");
    browser.assert_clean();
}

#[test]
fn a_value_is_put_into_its_field_as_one_step() {
    let browser = Browser::opened(LINK);
    wait_for_reversal(&browser);
    let (_, reversal) = found(LINK);
    let before = native(LINK);
    let written = |slot: &str| {
        let entries = reversal.entries();
        let entry = entries.iter().find(|entry| entry.slot.name == slot).expect(slot);
        entry.change.clone().expect("it reverses").written
    };
    for (slot, key, text) in [
        ("x.start", "x.start", written("x.start")),
        (
            "y.join.1.time",
            "y.join",
            format!("64@{}", written("y.join.1.time")),
        ),
    ] {
        wait_for_reversal(&browser);
        browser.click(&format!("tr[data-slot='{slot}'] button"));
        let link = changed(LINK, key, &text);
        let after = browser.settle(&link);
        assert_eq!(after, native(&link));
        assert_ne!(after.breaks, before.breaks, "{slot}");
        let focused = browser.script("return document.activeElement.id;", vec![]);
        assert_eq!(focused, slot);
        browser.click("#undo");
        assert_eq!(browser.settle(LINK), before);
    }
    browser.assert_clean();
}

/// What takes long: search against a power law with wastage and reserves, where every look is integrated.
const SLOW: &str = "x.start=600&x.fire=search&x.half=100&x.rate=0.04&x.wastage=0.01&y.start=400&y.fire=power&y.p=0.9&y.q=0.3&y.rate=0.05&\
     y.join=30@2,20@4,10@5&v=1";

/// Once nothing can be worked out any more, the line went on to say that it was being worked out.
#[test]
fn a_search_that_is_left_off_is_not_said_to_go_on() {
    let browser = Browser::opened(SLOW);
    browser.write("x.start", "610");
    browser.settle(&changed(SLOW, "x.start", "610"));
    browser.write("x.start", "x");
    browser.wait_state("stale");
    let left = "return [...document.querySelectorAll('#nearest, #reversal, #reversal-working')]
                  .every((part) => part.ariaBusy !== 'true' && !part.textContent.includes('eing worked out'));";
    assert_eq!(browser.script(left, vec![]), true);
    browser.assert_clean();
}

/// Where the search had only begun when the text became wrong, the table was of an older text than the figures.
#[test]
fn no_table_is_of_another_text_than_the_figures() {
    let browser = Browser::opened(LINK);
    wait_for_reversal(&browser);
    let rows = || {
        browser.script(
            "return document.querySelectorAll('#reversal-table tbody tr').length;",
            vec![],
        )
    };
    assert!(rows().as_u64() > Some(8));
    let at_once = "const e = document.getElementsByName('x.start')[0];
        for (const text of arguments[0]) { e.value = text; e.dispatchEvent(new Event('input', {bubbles: true})); }";
    browser.script(at_once, vec![json!(["60x"])]);
    assert!(rows().as_u64() > Some(8), "it is that of the figures still");
    browser.script(at_once, vec![json!(["610", "610x"])]);
    assert_eq!(rows(), 0);
    browser.assert_clean();
}

/// By the page's own stopwatch: the search in slices, and the rest of a keystroke beside it.
#[test]
fn the_search_never_holds_the_page_up() {
    let browser = Browser::start();
    browser.before_each_page(
        "window.slices = []; new PerformanceObserver((list) => list.getEntries().forEach((entry) => {
           if (entry.name === 'aftercount.reversal') window.slices.push(entry.duration);
         })).observe({entryTypes: ['measure']});",
    );
    browser.open(SLOW);
    browser.settle(SLOW);
    browser.write("x.start", "610");
    browser.settle(&changed(SLOW, "x.start", "610"));
    wait_for_reversal(&browser);
    let slices = browser.script("return window.slices;", vec![]);
    let slices: Vec<f64> = slices
        .as_array()
        .into_iter()
        .flatten()
        .filter_map(Value::as_f64)
        .collect();
    let long: Vec<&f64> = slices.iter().filter(|slice| **slice > STALL).collect();
    // A machine that is busy with other things may take the clock itself away, now and then.
    assert!(slices.len() > 20, "{} slices were measured", slices.len());
    assert!(
        long.len() * 10 <= slices.len(),
        "of {} slices these were long: {long:?}",
        slices.len()
    );
    browser.assert_clean();
}

#[test]
fn the_line_stands_in_a_frame_and_nothing_is_dragged_there() {
    let browser = Browser::opened(LINK);
    wait_for_reversal(&browser);
    let framed = changed(LINK, "view", "frame");
    for (width, height) in [(360, 480), (800, 420)] {
        let ratio = 1.0;
        browser.screen(Screen { width, height, ratio });
        browser.open(&framed);
        browser.settle(&framed);
        wait_for_reversal(&browser);
        assert_eq!(browser.text("#nearest"), line(LINK));
        let fits = "return document.documentElement.scrollHeight <= innerHeight;";
        assert_eq!(browser.script(fits, vec![]), true, "{width} by {height}");
        let handles = browser.script("return document.querySelectorAll('.handle').length;", vec![]);
        assert_eq!(handles, 0);
    }
    browser.assert_clean();
}

/// The number in a field.
fn number(browser: &Browser, name: &str) -> f64 {
    browser
        .value(name)
        .parse()
        .unwrap_or_else(|_| panic!("{name}: {}", browser.value(name)))
}

#[test]
fn the_start_is_dragged_and_the_outcome_follows() {
    let browser = Browser::opened(LINK);
    // More of Ondrel, less of Vessary: in one go, through places where the text is another each time.
    browser.drag("[id='handle.start']", &[(4.0, 2.0), (9.0, 6.0), (14.0, 30.0)]);
    let link = browser.link();
    let after = browser.settle(&link);
    assert_eq!(after, native(&link));
    assert!(
        number(&browser, "x.start") > 605.0 && number(&browser, "y.start") < 395.0,
        "{link}"
    );
    assert_eq!(
        number(&browser, "x.start").fract(),
        0.0,
        "whole ones at this scale"
    );
    assert_ne!(after.breaks, native(LINK).breaks, "the start has gone over");
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn a_reserve_and_a_break_line_are_dragged() {
    let browser = Browser::opened(LINK);
    browser.drag("[id='handle.y.join.1']", &[(10.0, -4.0), (30.0, -10.0)]);
    let link = browser.link();
    assert_eq!(browser.settle(&link), native(&link));
    let join = browser.value("y.join");
    let (size, time) = join.split_once('@').expect("size@time");
    let number_of = |text: &str| text.parse::<f64>().expect("a number");
    assert!(number_of(size) > 64.0 && number_of(time) > 4.0, "{join}");
    browser.click("#undo");
    browser.settle(LINK);

    browser.drag("[id='handle.x.break']", &[(0.0, 8.0), (3.0, 20.0)]);
    let link = browser.link();
    assert_eq!(browser.settle(&link), native(&link));
    assert!(number(&browser, "x.break") > 0.3, "further down is more lost");
    browser.click("#undo");
    browser.settle(LINK);
    browser.assert_clean();
}

#[test]
fn the_keys_of_a_handle_do_the_same_as_one_step() {
    let browser = Browser::opened(LINK);
    let said = |handle: &str| {
        let script = "return document.getElementById(arguments[0]).getAttribute('aria-valuetext');";
        browser
            .script(script, vec![handle.into()])
            .as_str()
            .unwrap_or_default()
            .to_owned()
    };
    assert_eq!(said("handle.start"), "Ondrel 600, Vessary 400");
    for _ in 0..3 {
        browser.press("[id='handle.start']", Key::Right);
    }
    browser.press("[id='handle.start']", Key::Down);
    let link = changed(&changed(LINK, "x.start", "603"), "y.start", "399");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(said("handle.start"), "Ondrel 603, Vessary 399");
    browser.press("[id='handle.y.join.1']", Key::Right);
    let moved = changed(&link, "y.join", "64@4.01");
    assert_eq!(browser.settle(&moved), native(&moved));
    browser.press("[id='handle.y.break']", Key::Up);
    let raised = changed(&moved, "y.break", "0.389");
    assert_eq!(browser.settle(&raised), native(&raised));
    // Each handle was one entry.
    for before in [&moved, &link, LINK] {
        browser.click("#undo");
        browser.settle(before);
    }
    browser.assert_clean();
}

#[test]
fn handles_are_large_enough_for_a_finger() {
    let browser = Browser::start();
    browser.screen(Screen {
        width: 360,
        height: 740,
        ratio: 2.0,
    });
    browser.open(LINK);
    browser.settle(LINK);
    let script = "return [...document.querySelectorAll('.handle')].map((h) => h.getBoundingClientRect())
                    .map((r) => Math.min(r.width, r.height));";
    let sizes = browser.script(script, vec![]);
    let sizes = sizes.as_array().expect("a list");
    assert_eq!(sizes.len(), 4);
    assert!(
        sizes
            .iter()
            .all(|size| size.as_f64().is_some_and(|size| size >= 44.0)),
        "{sizes:?}"
    );
    browser.assert_clean();
}
