//! Nothing is lost: whatever fails, the text of the engagement is still there.

use aftercount_core::passing::words::NO_ROOM;
use aftercount_tests::browser::{Browser, Doing, Key, Screen, changed, native, native_sentence};
use serde_json::json;

const LINK: &str =
    "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&v=1";
const CAUTION: &str = "study, teaching and exercises";

/// A browser's word for a history that is written too often, or not at all.
const REFUSE_HISTORY: &str = "for (const name of ['pushState', 'replaceState'])
    history[name] = () => { throw new DOMException('refused', 'SecurityError'); };";

/// Waits until the address holds a text.
#[track_caller]
fn wait_address(browser: &Browser, link: &str) {
    let body = format!("return location.hash === {};", json!(format!("#{link}")));
    browser.wait(&format!("the address holds {link}"), &body);
}

#[test]
fn after_a_trap_a_fresh_program_goes_on_with_the_text() {
    for doing in [Doing::Working, Doing::Drawing, Doing::Speaking, Doing::Naming] {
        let browser = Browser::opened(LINK);
        browser.write("y.start", "450");
        browser.leave();
        let first = changed(LINK, "y.start", "450");
        browser.settle(&first);
        browser.wait_text_unseen("#live", &native_sentence(&first));
        browser.trap(doing);
        browser.write("x.start", "700");
        let link = changed(&first, "x.start", "700");
        browser.wait_for_trap();
        assert_eq!(
            browser.settle(&link),
            native(&link),
            "{doing:?}: the text is taken over"
        );
        wait_address(&browser, &link);
        browser.write("x.start", "800");
        let link = changed(&first, "x.start", "800");
        assert_eq!(browser.settle(&link), native(&link), "{doing:?}: it goes on");
        assert_eq!(browser.text("#stopped"), "");
        browser.leave();
        browser.click("#undo");
        browser.click("#undo");
        assert_eq!(
            browser.settle(&first),
            native(&first),
            "{doing:?}: Undo still walks"
        );
        assert_eq!(browser.complaints_but_traps(), Vec::<String>::new(), "{doing:?}");
    }
}

#[test]
fn what_was_typed_at_the_trap_is_in_the_address() {
    let browser = Browser::opened(LINK);
    browser.trap(Doing::Working);
    browser.write("x.rate", "0.05");
    browser.wait_for_trap();
    browser.reload();
    let link = changed(LINK, "x.rate", "0.05");
    assert_eq!(browser.settle(&link), native(&link));
    browser.complaints_but_traps();
}

#[test]
fn after_a_second_trap_the_text_can_be_copied() {
    let browser = Browser::opened(LINK);
    browser.trap(Doing::Drawing);
    browser.write("x.start", "700");
    let link = changed(LINK, "x.start", "700");
    browser.settle(&link);
    browser.trap(Doing::Working);
    browser.write_on("x.start", "0");
    let link = changed(LINK, "x.start", "7000");
    browser.wait_text("#stopped", "Copy the text");
    assert_eq!(text_to_copy(&browser), link);
    assert!(browser.text("#stopped").contains(CAUTION));
    assert_eq!(browser.shown().settled, None);
    let form = "return document.getElementById('engagement').inert;";
    assert_eq!(browser.script(form, vec![]), true, "nothing more is taken in");
    browser.picture("trapped");
    assert_eq!(browser.complaints_but_traps(), Vec::<String>::new());
}

fn text_to_copy(browser: &Browser) -> String {
    let script = "return document.querySelector('#stopped textarea').value;";
    let text = browser.script(script, vec![]);
    text.as_str().expect("a box has a text").to_owned()
}

#[test]
fn a_trap_at_the_start_loses_nothing_either() {
    let browser = Browser::start();
    browser.trap_from_the_start(Doing::Naming, 1);
    browser.open(LINK);
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.complaints_but_traps();

    let browser = Browser::start();
    browser.trap_from_the_start(Doing::Naming, 2);
    browser.open(LINK);
    browser.wait_text("#stopped", "Copy the text");
    assert_eq!(text_to_copy(&browser), LINK);
    browser.complaints_but_traps();
}

#[test]
fn a_wrong_number_outlives_a_reload_in_the_middle_of_typing() {
    let browser = Browser::opened(LINK);
    browser.write("x.rate", "0,04");
    browser.reload();
    let link = changed(LINK, "x.rate", "0,04");
    browser.wait_state("empty");
    assert_eq!(browser.link(), link);
    assert_eq!(browser.value("x.rate"), "0,04");
    browser.wait_text("[id='x.rate.problem']", "0,04");
    browser.write("x.rate", "0.04");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn a_history_that_refuses_everything_leaves_the_page_its_own() {
    let browser = Browser::opened(LINK);
    browser.script(REFUSE_HISTORY, vec![]);
    browser.write("x.start", "700");
    browser.leave();
    let first = changed(LINK, "x.start", "700");
    assert_eq!(browser.settle(&first), native(&first));
    browser.write("y.start", "500");
    browser.leave();
    let second = changed(&first, "y.start", "500");
    assert_eq!(browser.settle(&second), native(&second));
    assert_eq!(browser.link(), second);

    browser.click("#undo");
    assert_eq!(browser.settle(&first), native(&first));
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    assert_eq!(browser.value("x.start"), "600");
    browser.click("#redo");
    browser.click("#redo");
    assert_eq!(browser.settle(&second), native(&second));
    assert!(
        asks_before_it_goes(&browser),
        "a reload would lose what was typed"
    );
    browser.assert_clean();
}

/// Whether the browser would ask before it leaves the page. The driver answers such a question by itself.
fn asks_before_it_goes(browser: &Browser) -> bool {
    let script = "return !dispatchEvent(new Event('beforeunload', {cancelable: true}));";
    browser.script(script, vec![]) == true
}

#[test]
fn a_history_that_refuses_without_a_word_is_written_later() {
    let browser = Browser::opened(LINK);
    let deaf = "window.deaf = true;
        for (const name of ['pushState', 'replaceState'])
          history[name] = function (...all) { if (!window.deaf) History.prototype[name].apply(this, all); };";
    browser.script(deaf, vec![]);
    browser.write("x.start", "700");
    let link = changed(LINK, "x.start", "700");
    browser.settle(&link);
    assert!(asks_before_it_goes(&browser));
    browser.script("window.deaf = false;", vec![]);
    wait_address(&browser, &link);
    assert!(!asks_before_it_goes(&browser));
    browser.reload();
    assert_eq!(browser.settle(&link), native(&link));
    browser.assert_clean();
}

#[test]
fn a_page_that_wrote_its_address_lets_itself_be_closed() {
    let browser = Browser::opened(LINK);
    assert!(!asks_before_it_goes(&browser));
    browser.write("x.start", "700");
    browser.settle(&changed(LINK, "x.start", "700"));
    assert!(!asks_before_it_goes(&browser));
    browser.assert_clean();
}

#[test]
fn a_clipboard_that_refuses_leaves_the_text_selected() {
    let refusals = [
        "navigator.clipboard.writeText = () => Promise.reject(new DOMException('refused', 'NotAllowedError'));",
        "Object.defineProperty(navigator, 'clipboard', {value: undefined});",
    ];
    for refusal in refusals {
        let browser = Browser::opened(LINK);
        browser.script(refusal, vec![]);
        browser.click("#copy");
        browser.wait_text("#copied", "copy it with the keyboard");
        let chosen = "const box = document.activeElement;
            return box.value.slice(box.selectionStart, box.selectionEnd);";
        assert_eq!(browser.script(chosen, vec![]), LINK);
        browser.assert_clean();
    }
}

#[test]
fn two_tabs_keep_their_texts_apart() {
    let browser = Browser::opened(LINK);
    let (first, second) = browser.new_tab();
    browser.open(LINK);
    browser.settle(LINK);
    browser.write("x.start", "700");
    let here = changed(LINK, "x.start", "700");
    browser.settle(&here);

    browser.go_to_tab(&first);
    browser.write("y.start", "500");
    let there = changed(LINK, "y.start", "500");
    browser.settle(&there);
    browser.reload();
    assert_eq!(browser.settle(&there), native(&there));

    browser.go_to_tab(&second);
    assert_eq!(browser.link(), here);
    browser.reload();
    assert_eq!(browser.settle(&here), native(&here));
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn two_tabs_keep_what_both_were_asked_to_keep() {
    let browser = Browser::opened(LINK);
    let (first, _) = browser.new_tab();
    let other = changed(LINK, "x.start", "700");
    browser.open(&other);
    browser.settle(&other);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "Kept");
    browser.go_to_tab(&first);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "Kept");
    let count = "return document.querySelectorAll('#kept li').length;";
    assert_eq!(browser.script(count, vec![]), 2);
    browser.press("#kept li:nth-child(2) [data-take-up]", Key::Enter);
    assert_eq!(browser.settle(&other), native(&other));
    browser.assert_clean();
}

#[test]
fn storage_that_is_full_keeps_what_it_has() {
    let browser = Browser::opened(LINK);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "Kept");
    // Truly full: as much as the browser takes, halving what is tried.
    let fill = "for (let size = 8e6; size >= 1; size = Math.floor(size / 2))
          for (let more = true; more;) try { localStorage.filler = (localStorage.filler || '') + 'x'.repeat(size); } catch { more = false; }";
    browser.script(fill, vec![]);
    browser.write("x.start", "700");
    let link = changed(LINK, "x.start", "700");
    browser.settle(&link);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", NO_ROOM);
    browser.reload();
    assert_eq!(browser.settle(&link), native(&link), "the text is in the address");
    browser.press("#kept [data-take-up]", Key::Enter);
    assert_eq!(
        browser.settle(LINK),
        native(LINK),
        "and what was kept before is kept"
    );
    browser.assert_clean();
}

#[test]
fn a_trap_behind_an_open_dialog_is_not_hidden_by_it() {
    let browser = Browser::opened(LINK);
    browser.trap(Doing::Drawing);
    browser.write("x.start", "700");
    let link = changed(LINK, "x.start", "700");
    browser.settle(&link);
    browser.click(".top [data-pass=copy-as]");
    browser.wait(
        "the dialog",
        "return document.getElementById('copy-dialog').open;",
    );
    browser.trap(Doing::Drawing);
    browser.screen(Screen::SMALL);
    browser.wait_text("#stopped", "Copy the text");
    let on_top = "const box = document.getElementById('stopped-text'); box.scrollIntoView({block: 'center'});
        const place = box.getBoundingClientRect();
        return document.elementFromPoint(place.left + 5, place.top + 5) === box;";
    assert_eq!(browser.script(on_top, vec![]), true);
    assert_eq!(text_to_copy(&browser), link);
    assert_eq!(browser.complaints_but_traps(), Vec::<String>::new());
}
