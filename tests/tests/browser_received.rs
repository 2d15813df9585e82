//! A text that came from outside: what was changed since, the way back, and what this copy does not know.

use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, Key, changed, native};
use serde_json::json;

const LINK: &str = "title=Turn%203&x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&v=1";

/// The lines of what was changed, as they are read.
fn changes(browser: &Browser) -> Vec<String> {
    let lines = browser.script(
        "return [...document.querySelectorAll('#changed-list li')].map((line) => line.innerText.trim());",
        vec![],
    );
    serde_json::from_value(lines).expect("a list of texts")
}

#[test]
fn each_change_is_named_and_goes_back_alone_or_with_all() {
    let browser = Browser::opened(LINK);
    assert_eq!(browser.text("#changed"), "", "nothing was changed yet");
    browser.write("x.rate", "0.05");
    browser.write("x.break", "0.3");
    browser.write("title", "");
    let mut link = changed(LINK, "x.rate", "0.05");
    link = changed(&link, "x.break", "0.3");
    link = changed(&link, "title", "");
    browser.settle(&link);
    let back = "· back to as received";
    assert_eq!(
        changes(&browser),
        [
            format!("title Turn 3 → nothing {back}"),
            format!("x.rate 0.04 → 0.05 {back}"),
            format!("x.break 1 (as usual) → 0.3 {back}"),
        ]
    );
    browser.picture("changed");
    browser.press("[data-back='x.rate']", Key::Enter);
    link = changed(&link, "x.rate", "0.04");
    browser.settle(&link);
    assert_eq!(browser.value("x.rate"), "0.04");
    assert_eq!(
        browser.script("return document.activeElement.id;", vec![]),
        "x.rate"
    );
    assert_eq!(changes(&browser).len(), 2);
    browser.press("[data-pass=all-back]", Key::Enter);
    assert_eq!(browser.settle(LINK), native(LINK));
    assert_eq!(browser.link(), LINK);
    assert_eq!(browser.text("#changed"), "");
    browser.click("#undo");
    browser.settle(&link);
    assert_eq!(changes(&browser).len(), 2, "Undo brings the changes back");
    browser.assert_clean();
}

#[test]
fn it_is_known_after_a_reload_and_a_step_back() {
    let browser = Browser::opened(LINK);
    browser.write("x.rate", "0.05");
    browser.leave();
    let link = changed(LINK, "x.rate", "0.05");
    browser.settle(&link);
    browser.wait(
        "the address",
        &format!("return location.hash === {};", json!(format!("#{link}"))),
    );
    browser.reload();
    browser.settle(&link);
    assert_eq!(changes(&browser).len(), 1, "{:?}", changes(&browser));
    browser.back();
    browser.settle(LINK);
    assert_eq!(changes(&browser), Vec::<String>::new());
    // Another text in the address is another one received, and the step back leads to the first again.
    let other = changed(LINK, "y.start", "450");
    browser.script("location.hash = arguments[0];", vec![json!(other)]);
    browser.settle(&other);
    assert_eq!(changes(&browser), Vec::<String>::new());
    browser.write("y.start", "460");
    browser.settle(&changed(LINK, "y.start", "460"));
    assert_eq!(changes(&browser), ["y.start 450 → 460 · back to as received"]);
    browser.assert_clean();
}

#[test]
fn the_demo_and_a_blank_form_came_from_nobody() {
    let browser = Browser::start();
    browser.open("");
    browser.settle(DEMO);
    browser.write("x.start", "700");
    browser.settle(&changed(DEMO, "x.start", "700"));
    assert_eq!(browser.text("#changed"), "");
    browser.open(LINK);
    browser.settle(LINK);
    browser.click("#blank");
    browser.wait_state("empty");
    assert_eq!(browser.text("#changed"), "");
    browser.write("x.start", "5");
    assert_eq!(browser.text("#changed"), "");
    browser.click("#undo");
    browser.assert_clean();
}

#[test]
fn a_key_of_a_newer_copy_is_named_and_nothing_is_worked_out() {
    let browser = Browser::start();
    browser.open(&format!("{LINK}&x.reach2=5"));
    browser.wait_state("empty");
    let line = browser.text("#problem-list");
    assert!(
        line.contains("this copy does not know x.reach2; a newer one may"),
        "{line}"
    );
    let nothing = browser.text("#nothing");
    assert!(
        nothing.contains("this copy does not know x.reach2; a newer one may."),
        "{nothing}"
    );
    assert!(nothing.ends_with(" Nothing was worked out."), "{nothing}");
    assert_eq!(browser.text("#sentence"), "");
    browser.press("[data-take-out='x.reach2']", Key::Enter);
    assert_eq!(browser.settle(LINK), native(LINK));
    assert_eq!(changes(&browser), ["x.reach2 5 → nothing · back to as received"]);
    browser.assert_clean();
}

#[test]
fn the_room_of_a_note_is_shown() {
    let browser = Browser::opened(LINK);
    assert_eq!(browser.text("[id='note.room']"), "0 of 1000 characters");
    browser.write("note", "größer");
    browser.wait_text("[id='note.room']", "6 of 1000 characters");
    browser.assert_clean();
}
