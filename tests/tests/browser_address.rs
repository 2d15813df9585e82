//! The address holds the engagement: it is kept, walked and moved out of the query.

use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, Key, changed, native, page_url};

const LINK: &str = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&v=1";

#[test]
fn reload_keeps_what_was_typed() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "650");
    browser.write("x.name", "Tarn & <Sons>, 100 %");
    let link = changed(&changed(LINK, "x.start", "650"), "x.name", "Tarn & <Sons>, 100 %");
    let before = browser.settle(&link);
    // The field is not left: the last of the writes that keystrokes bring on has to come by itself.
    browser.wait(
        "the last write",
        &format!(
            "return location.hash === {};",
            serde_json::json!(format!("#{link}"))
        ),
    );
    browser.reload();
    assert_eq!(browser.settle(&link), before);
    assert_eq!(before, native(&link));
    assert_eq!(browser.value("x.start"), "650");
    assert_eq!(browser.value("x.name"), "Tarn & <Sons>, 100 %");
    browser.assert_clean();
}

#[test]
fn back_forward_undo_and_redo_walk_from_field_to_field() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "700");
    browser.leave();
    let first = changed(LINK, "x.start", "700");
    browser.settle(&first);
    browser.write("y.start", "500");
    browser.leave();
    let second = changed(&first, "y.start", "500");
    browser.settle(&second);

    browser.back();
    assert_eq!(browser.settle(&first), native(&first));
    assert_eq!(browser.value("y.start"), "400");
    browser.back();
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.forward();
    browser.settle(&first);
    browser.forward();
    assert_eq!(browser.settle(&second), native(&second));

    browser.click("#undo");
    browser.settle(&first);
    browser.click("#undo");
    browser.settle(LINK);
    assert_eq!(browser.value("x.start"), "600");
    browser.click("#redo");
    browser.settle(&first);
    browser.click("#redo");
    assert_eq!(browser.settle(&second), native(&second));
    browser.assert_clean();
}

#[test]
fn a_step_back_undoes_a_blank_form() {
    let browser = Browser::opened(LINK);
    browser.click("#blank");
    browser.wait_state("empty");
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn a_query_with_its_version_is_moved_to_the_fragment() {
    let browser = Browser::start();
    let mut url = page_url();
    url.set_query(Some(LINK));
    browser.open_address(url.as_str());
    assert_eq!(browser.settle(LINK), native(LINK));
    let address = browser.address();
    assert!(address.ends_with(&format!("aftercount.html#{LINK}")), "{address}");
    browser.assert_clean();
}

#[test]
fn a_query_of_somebody_else_s_is_left_alone() {
    let browser = Browser::start();
    let mut url = page_url();
    url.set_query(Some("x.start=5&page=2"));
    browser.open_address(url.as_str());
    browser.settle(DEMO);
    assert!(
        browser.address().contains("?x.start=5&page=2"),
        "{}",
        browser.address()
    );
    // A fragment with a key goes before a query.
    url.set_query(Some("x.start=5&v=1"));
    url.set_fragment(Some(LINK));
    browser.open_address(url.as_str());
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn another_fragment_is_another_engagement() {
    let browser = Browser::opened(LINK);
    let other = changed(LINK, "x.start", "123");
    browser.script("location.hash = arguments[0];", vec![other.clone().into()]);
    assert_eq!(browser.settle(&other), native(&other));
    assert_eq!(browser.value("x.start"), "123");
    browser.back();
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn nothing_is_stored() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "700");
    browser.settle(&changed(LINK, "x.start", "700"));
    let stored = browser.script(
        "return [localStorage.length, sessionStorage.length, document.cookie];",
        vec![],
    );
    assert_eq!(stored, serde_json::json!([0, 0, ""]));
    browser.assert_clean();
}

#[test]
fn a_reloaded_blank_form_is_blank_and_undo_keeps_the_focus() {
    let browser = Browser::opened(LINK);
    browser.click("#blank");
    browser.wait_state("empty");
    let blank = "return document.getElementById('problems').hidden
        && document.getElementById('empty-words').checkVisibility();";
    browser.wait(
        "the blank form in the address",
        "return location.hash === '#v=1';",
    );
    browser.reload();
    browser.wait_state("empty");
    assert_eq!(browser.script(blank, vec![]), true, "after a reload");
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    let focused = "return document.activeElement.id + ' ' + document.activeElement.ariaDisabled;";
    assert_eq!(browser.script(focused, vec![]), "undo true");
    browser.click("#redo");
    browser.wait_state("empty");
    assert_eq!(browser.script(blank, vec![]), true, "after Redo");
    browser.assert_clean();
}

#[test]
fn pieces_without_a_key_and_second_texts_can_be_taken_out() {
    let browser = Browser::start();
    browser.open(&format!("bare&{LINK}&x.start=5"));
    browser.wait_state("empty");
    browser.press("[data-take-out='']", Key::Enter);
    browser.press("[data-keep-first='x.start']", Key::Enter);
    assert_eq!(browser.settle(LINK), native(LINK));
    let focused = "return document.activeElement.id;";
    assert_eq!(browser.script(focused, vec![]), "x.start");
    browser.assert_clean();
}

#[test]
fn a_refused_write_of_the_address_is_tried_again() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "65");
    browser.settle(&changed(LINK, "x.start", "65"));
    let refuse = "window.refused = 0;
        history.replaceState = function (...all) {
          if (window.refused < 2) { window.refused += 1; throw new DOMException('too often', 'SecurityError'); }
          return History.prototype.replaceState.apply(this, all);
        };";
    browser.script(refuse, vec![]);
    browser.write("x.start", "650");
    let link = changed(LINK, "x.start", "650");
    browser.wait(
        "the write after two refusals",
        &format!(
            "return window.refused === 2 && location.hash === {};",
            serde_json::json!(format!("#{link}"))
        ),
    );
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}
