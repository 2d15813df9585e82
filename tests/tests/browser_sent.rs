//! What is said of what was opened, of what was saved where the browser may refuse it, and until when.

use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::received::received;
use aftercount_core::passing::words::{FRAMED, OFFERED};
use aftercount_tests::browser::{Browser, Key, changed, native, native_sentence, serve};
use serde_json::json;

const LINK: &str = "title=Turn%203&x.name=Ondrel&x.start=850&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400\
                    &y.rate=0.06&y.break=0.4&v=1";

#[track_caller]
fn paste(browser: &Browser, text: &str) {
    browser.script(
        "if (!document.getElementById('open-dialog').open) document.querySelector('[data-pass=open]').click();
         document.getElementById('open-text').value = arguments[0];",
        vec![json!(text)],
    );
    browser.press("[data-pass=take-up]", Key::Enter);
}

#[track_caller]
fn saved(browser: &Browser, press: &str, ending: &str) -> String {
    browser.press(&format!("[data-pass='{press}']"), Key::Enter);
    String::from_utf8(browser.downloaded(ending)).expect("UTF-8")
}

/// A message with these addresses in it, a sentence to each.
fn message(addresses: &[&str]) -> String {
    let sentences = addresses
        .iter()
        .map(|link| format!("Look at wiki/a.html#{link}\n"));
    format!("Good morning,\n{}", sentences.collect::<String>())
}

/// The mark of a text, as the page says it.
fn mark(link: &str) -> String {
    text_mark(&Pairs::parse(link))
}

#[test]
fn what_is_odd_about_what_was_opened_is_said() {
    let browser = Browser::opened(LINK);
    browser.allow_downloads();
    let file = saved(&browser, "save", ".txt");
    let other = changed(LINK, "x.start", "870");
    paste(&browser, &file.replace("x.start=850", "x.start=870"));
    assert_eq!(browser.settle(&other), native(&other));
    let [names, has] = [LINK, &other].map(mark);
    browser.wait_text(
        "#opened-said",
        &format!("names the text mark {names}, and the text in it has {has}"),
    );
    browser.picture("opened-edited");
    paste(&browser, &file);
    browser.settle(LINK);
    assert_eq!(browser.text("#opened-said"), "", "nothing is odd about it");
    paste(&browser, &message(&[LINK, &other]));
    browser.wait_text("#opened-said", "Another engagement stands there too");
    browser.write("x.start", "860");
    assert_eq!(browser.text("#opened-said"), "", "that was of another text");
    // Without its end a text goes on into the message.
    let cut = LINK
        .replace("&v=1", "&y.name=Vessary")
        .replace("&y.name=Vessary&", "&");
    paste(&browser, &message(&[&format!("{cut} Regards, A. Person")]));
    browser.wait_text(
        "#opened-said",
        "No v=1 ends this text, so y.name took in all that followed: “Vessary Regards, A. Person”.",
    );
    assert_eq!(browser.value("y.name"), "Vessary Regards, A. Person");
    // By mail.
    paste(
        &browser,
        &other.replace('=', "=3D").replace("x.rate", "x.=\r\nrate"),
    );
    assert_eq!(browser.settle(&other), native(&other));
    browser.assert_clean();
}

#[test]
fn a_finding_without_its_text_is_known_by_the_mark() {
    let browser = Browser::opened(LINK);
    browser.allow_downloads();
    let table = saved(&browser, "csv", ".csv");
    let picture = saved(&browser, "strength.svg", ".svg");
    browser.click(".top [data-pass=copy-as]");
    browser.press("[data-pass=copy-finding]", Key::Enter);
    let finding = browser.script("return document.getElementById('copy-text').value;", vec![]);
    browser.press("#copy-dialog [data-pass=close]", Key::Enter);
    let words = format!(
        "a finding of the text with the mark {}, and not that text",
        mark(LINK)
    );
    for text in [finding.as_str().expect("a text"), &table, &picture] {
        paste(&browser, "");
        browser.wait_text("#open-said", "There is no engagement in this");
        paste(&browser, text);
        browser.wait_text("#open-said", &words);
    }
    browser.picture("open-finding");
    browser.assert_clean();
}

#[test]
fn what_was_said_of_one_engagement_is_not_said_of_the_next() {
    let browser = Browser::opened(LINK);
    browser.allow_downloads();
    let lines = saved(&browser, "json", ".json");
    assert!(lines.lines().count() > 1);
    saved(&browser, "json-line", "-line.json");
    browser.wait_text("#file-said", OFFERED);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "Kept: ");
    browser.wait_text("#kept li", &native_sentence(LINK));
    let other = changed(LINK, "y.rate", "0,06");
    paste(&browser, &other);
    browser.wait_text("#problem-list", "write 0.06");
    assert_eq!([browser.text("#file-said"), browser.text("#kept-said")], ["", ""]);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept li:first-child", "y.rate: 0,06: write 0.06, with a point.");
    browser.picture("kept-outcomes");
    browser.assert_clean();
}

/// A window that such a frame opens is in the same sandbox, and no frame itself.
#[test]
fn a_window_from_a_sandboxed_frame_gives_the_text_to_copy() {
    let browser = Browser::start();
    browser.allow_downloads();
    let address = serve(
        "<!DOCTYPE html><title>A wiki</title><iframe title=\"frame\" width=\"800\" height=\"420\" \
         sandbox=\"allow-scripts allow-popups\"></iframe>",
    );
    browser.open_address(&address.replace("aftercount", "around"));
    browser.script(
        "document.querySelector('iframe').src = arguments[0];",
        vec![json!(format!("{address}#{}", changed(LINK, "view", "frame")))],
    );
    browser.enter_frame();
    browser.settle(LINK);
    browser.click("#open-sheet");
    browser.go_to_opened_window();
    browser.settle(LINK);
    assert_eq!(browser.script("return self === top;", vec![]), true);
    let text_in_box = |part: &str| {
        let body = format!(
            "const box = document.getElementById('file-text');
             return box.checkVisibility() && box.value.includes({}) && box.value;",
            json!(part)
        );
        let text = browser.wait("the text to copy", &body);
        text.as_str().unwrap_or_default().to_owned()
    };
    browser.press("[data-pass=save]", Key::Enter);
    browser.wait_text("#file-said", FRAMED);
    assert_eq!(received(&text_in_box("---- end ----")), Ok(Pairs::parse(LINK)));
    browser.press("[data-pass=csv]", Key::Enter);
    text_in_box("time (h)");
    browser.picture("sandboxed-window");
    assert_eq!(browser.downloaded_names(), Vec::<String>::new());
}
