//! Passing an engagement on by hand: opening what comes, copying what goes, and what the browser keeps.

use std::fs;

use aftercount_core::caution;
use aftercount_core::demo::DEMO;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::received::NOTHING;
use aftercount_core::passing::words::{NO_ADDRESS, NO_ROOM, NO_STORAGE};
use aftercount_core::words::format::plain;
use aftercount_tests::browser::{Browser, Key, Screen, changed, native, native_sentence, serve};
use serde_json::json;

const LINK: &str = "title=Turn%203&x.name=Ondrel&x.start=60000&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=40000\
                    &y.rate=0.06&y.break=0.4&v=1";
const OTHER: &str = "x.start=500&x.rate=0.05&y.start=450&y.rate=0.04&v=1";

/// A clipboard that only remembers what it was given.
const CLIPBOARD: &str = "Object.defineProperty(navigator, 'clipboard', {value: {
    writeText: (text) => { window.copied = text; return Promise.resolve(); }}});";

/// What is chosen in the box that has the focus.
const CHOSEN: &str = "const box = document.activeElement;
    return [box.id, box.value.slice(box.selectionStart, box.selectionEnd)];";

#[track_caller]
fn paste(browser: &Browser, text: &str) {
    browser.click("[data-pass=open]");
    browser.wait("the dialog", "return document.activeElement.id === 'open-text';");
    // As a paste brings it, lines and all.
    browser.script(
        "document.getElementById('open-text').value = arguments[0];",
        vec![json!(text)],
    );
    browser.press("[data-pass=take-up]", Key::Enter);
}

#[test]
fn whatever_was_sent_is_opened_as_one_step() {
    let browser = Browser::opened(LINK);
    let wrapped = format!(
        "Here:\n> <https://wiki.example/a.html#{}>.",
        OTHER.replace("x.rate", "x.ra\n> te")
    );
    let dressed = [
        OTHER.replace('&', "&amp;"),
        wrapped,
        format!("“{OTHER}&view=frame”"),
    ];
    for text in dressed {
        paste(&browser, &text);
        assert_eq!(browser.settle(OTHER), native(OTHER), "{text}");
        assert_eq!(browser.value("x.start"), "500");
        assert_eq!(browser.text("#open-dialog"), "", "the dialog is gone");
        assert_eq!(
            browser.script("return document.activeElement.id;", vec![]),
            "leaves-head"
        );
        assert_eq!(
            browser.script("return document.documentElement.dataset.view;", vec![]),
            "sheet"
        );
        browser.click("#undo");
        assert_eq!(browser.settle(LINK), native(LINK), "what was there is not lost");
    }
    browser.assert_clean();
}

#[test]
fn what_holds_no_engagement_leaves_the_page_as_it_is() {
    let browser = Browser::opened(LINK);
    paste(&browser, "Good morning");
    browser.wait_text("#open-said", &NOTHING.replace('`', ""));
    browser.picture("open-nothing");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.press("#open-dialog [data-pass=close]", Key::Enter);
    browser.wait("closed", "return !document.getElementById('open-dialog').open;");
    let focused = "return document.activeElement.dataset.pass;";
    assert_eq!(
        browser.script(focused, vec![]),
        "open",
        "the focus is back where it was"
    );
    browser.assert_clean();
}

#[test]
fn a_file_is_opened_by_choice_or_where_it_is_dropped() {
    let browser = Browser::opened(LINK);
    let file = browser.folder().join("sent.txt");
    fs::write(&file, format!("Some words\r\n\r\n{OTHER}\r\n")).expect("a file to open");
    browser.click("[data-pass=open]");
    browser.type_at("#open-file", &file.to_string_lossy());
    assert_eq!(browser.settle(OTHER), native(OTHER));

    let drop = "const transfer = new DataTransfer();
        transfer.items.add(new File([arguments[0]], 'sent.txt', {type: 'text/plain'}));
        const event = (kind) => new DragEvent(kind, {dataTransfer: transfer, bubbles: true, cancelable: true});
        const place = document.getElementById('figures');
        return [place.dispatchEvent(event('dragover')), place.dispatchEvent(event('drop'))];";
    let dropped = browser.script(drop, vec![json!(LINK)]);
    assert_eq!(
        dropped,
        json!([false, false]),
        "the browser does not leave the page for it"
    );
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.script(drop, vec![json!("no engagement")]);
    browser.wait_text("#open-said", "Nothing was opened");
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn each_form_is_copied_and_stands_chosen_in_a_box() {
    let browser = Browser::start();
    browser.before_each_page(CLIPBOARD);
    browser.open(LINK);
    browser.settle(LINK);
    browser.click(".top [data-pass=copy-as]");
    browser.wait("the dialog", "return document.activeElement.id === 'copy-text';");
    assert_eq!(
        browser.script(CHOSEN, vec![]),
        json!(["copy-text", LINK]),
        "chosen before any button is pressed"
    );
    let sentence = plain(&native_sentence(LINK));
    assert!(sentence.contains("of 60000"), "{sentence}");
    let mark = text_mark(&Pairs::parse(LINK));
    let version = browser.text("#version");
    for (form, parts) in [
        ("copy-link", vec![LINK.to_owned()]),
        (
            "copy-finding",
            vec![
                sentence.clone(),
                format!("Text mark {mark}, Aftercount {version}"),
                caution::SHORT.into(),
            ],
        ),
        (
            "copy-wiki",
            vec![
                "<iframe title=\"Aftercount: Turn 3\" width=\"800\" height=\"420\"".into(),
                sentence.clone(),
            ],
        ),
    ] {
        browser.press(&format!("[data-pass={form}]"), Key::Enter);
        browser.wait_text("#copy-said", "Copied.");
        let chosen = browser.script(CHOSEN, vec![]);
        let text = chosen[1].as_str().expect("a text").to_owned();
        assert_eq!(browser.script("return window.copied;", vec![]), text.as_str());
        for part in parts {
            assert!(text.contains(&part), "{form}: {part} in {text}");
        }
        assert!(!text.contains('\u{202f}'), "plain digits: {text}");
    }
    browser.picture("copy-wiki");
    let off = "return document.querySelector('[data-pass=copy-address]').ariaDisabled;";
    assert_eq!(browser.script(off, vec![]), "true");
    assert_eq!(browser.text("#copy-address-why"), NO_ADDRESS);
    assert!(
        browser
            .text("#copy-care")
            .contains("Handle it like the document itself")
    );
    browser.press("#copy-dialog [data-pass=close]", Key::Enter);
    browser.assert_clean();
}

#[test]
fn without_an_outcome_only_the_text_is_copied() {
    let browser = Browser::start();
    browser.before_each_page("Object.defineProperty(navigator, 'clipboard', {value: undefined});");
    browser.open(LINK);
    browser.settle(LINK);
    browser.write("x.start", "6,0");
    browser.click("[data-pass=copy-as]");
    browser.wait_text("#copy-finding-why", "There is no outcome");
    browser.press("[data-pass=copy-finding]", Key::Enter);
    browser.press("[data-pass=copy-link]", Key::Enter);
    browser.wait_text("#copy-said", "with the keyboard");
    let link = changed(LINK, "x.start", "6,0");
    assert_eq!(browser.script(CHOSEN, vec![]), json!(["copy-text", link]));
    browser.assert_clean();
}

#[test]
fn the_answer_to_a_question_is_part_of_the_finding() {
    let link = changed(LINK, "x.start", "60000?");
    let browser = Browser::opened(&link);
    browser.wait(
        "the answer",
        "return document.getElementById('asked').getAttribute('aria-busy') !== 'true' &&
            document.getElementById('reversal').getAttribute('aria-busy') !== 'true';",
    );
    browser.click("[data-pass=copy-as]");
    browser.press("[data-pass=copy-finding]", Key::Enter);
    let finding = browser.script(
        "return document.getElementById('copy-text').value.split('\\n');",
        vec![],
    );
    let lines: Vec<String> = serde_json::from_value(finding).expect("lines");
    assert_eq!(lines.len(), 5, "{lines:?}");
    assert!(
        lines[0].starts_with("In this model Vessary breaks first"),
        "{lines:?}"
    );
    assert!(lines[1].contains("Ondrel"), "{lines:?}");
    assert!(lines[2].starts_with("Nearest reversal: "), "{lines:?}");
    browser.assert_clean();
}

#[test]
fn a_page_from_a_server_passes_its_address_on() {
    let address = serve("");
    let browser = Browser::start();
    browser.before_each_page(CLIPBOARD);
    browser.open_address(&format!("{address}?from=wiki#{LINK}"));
    browser.settle(LINK);
    browser.click("[data-pass=copy-as]");
    browser.press("[data-pass=copy-address]", Key::Enter);
    browser.wait_text("#copy-said", "Copied.");
    assert_eq!(
        browser.script("return window.copied;", vec![]),
        format!("{address}#{LINK}")
    );
    browser.press("[data-pass=copy-wiki]", Key::Enter);
    browser.wait("the wiki's lines", "return window.copied.includes('<iframe');");
    let copied = browser.script("return window.copied;", vec![]);
    assert!(
        copied
            .as_str()
            .is_some_and(|text| text.contains(&format!("src=\"{address}#title"))),
        "{copied}"
    );
}

#[test]
fn what_is_kept_is_listed_opened_and_forgotten() {
    let browser = Browser::opened(LINK);
    let stored = "return localStorage.length;";
    assert_eq!(
        browser.script(stored, vec![]),
        0,
        "nothing before it is asked for"
    );
    browser.press("#keep", Key::Enter);
    browser.wait_text(
        "#kept",
        &format!("Turn 3, text mark {}", text_mark(&Pairs::parse(LINK))),
    );
    browser.open(OTHER);
    browser.settle(OTHER);
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept li:first-child", "without a title");
    browser.press("#keep", Key::Enter);
    let count = "return document.querySelectorAll('#kept li').length;";
    assert_eq!(browser.script(count, vec![]), 2, "the same text is kept once");
    browser.picture("kept");
    browser.press("#kept li:nth-child(2) [data-take-up]", Key::Enter);
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.click("#undo");
    assert_eq!(browser.settle(OTHER), native(OTHER));
    browser.press("#kept li:first-child [data-forget]", Key::Enter);
    browser.wait(
        "one is left",
        "return document.querySelectorAll('#kept li').length === 1;",
    );
    assert!(browser.text("#kept").contains("Turn 3"));
    browser.press("[data-pass=forget-all]", Key::Enter);
    browser.wait_text("#kept-said", "Everything kept here is forgotten.");
    assert_eq!(browser.script(stored, vec![]), 0);
    assert_eq!(browser.text("#kept-part"), "");
    browser.assert_clean();
}

#[test]
fn what_another_page_keeps_is_seen_here_and_is_no_markup() {
    let browser = Browser::opened(LINK);
    let (first, _) = browser.new_tab();
    browser.open(OTHER);
    browser.settle(OTHER);
    browser.write("title", "<img src=x onerror=alert(1)>");
    browser.leave();
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept", "<img src=x");
    browser.go_to_tab(&first);
    browser.wait_text("#kept", "<img src=x");
    browser.script("localStorage.setItem('aftercount.kept', '{\"a\": [1]}');", vec![]);
    browser.open(DEMO);
    browser.settle(DEMO);
    assert_eq!(browser.text("#kept-part"), "", "nonsense is no list");
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept", "the reserve");
    browser.script("localStorage.clear();", vec![]);
    browser.assert_clean();
}

#[test]
fn a_browser_that_keeps_nothing_says_so() {
    for (harm, words) in [
        (
            "Object.defineProperty(window, 'localStorage', {get() { throw new DOMException('no', 'SecurityError'); }});",
            NO_STORAGE,
        ),
        (
            "Object.defineProperty(window, 'localStorage', {value: null});",
            NO_STORAGE,
        ),
        (
            "Storage.prototype.setItem = () => { throw new DOMException('full', 'QuotaExceededError'); };",
            NO_ROOM,
        ),
    ] {
        let browser = Browser::start();
        browser.before_each_page(harm);
        browser.open(LINK);
        browser.settle(LINK);
        browser.press("#keep", Key::Enter);
        browser.wait_text("#kept-said", words);
        assert_eq!(browser.text("#kept-part"), "");
        assert_eq!(browser.settle(LINK), native(LINK));
        browser.assert_clean();
    }
}

#[test]
fn axe_finds_nothing_where_something_is_passed_on() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in [Screen::SMALL, Screen::DESK] {
        browser.screen(screen);
        for paper in ["light", "dark"] {
            let name = format!("{}-{paper}", screen.width);
            let link = changed(LINK, "paper", paper);
            browser.open(&link);
            browser.settle(&link);
            browser.press("#keep", Key::Enter);
            browser.wait_text("#kept", "Turn 3");
            browser.write("x.rate", "0.05");
            browser.leave();
            browser.wait_text("#changed", "0.04 → 0.05");
            browser.script("document.getElementById('table-list').value = '1;2';", vec![]);
            browser.click("#table-at");
            browser.press("[data-pass=csv]", Key::Enter);
            browser.wait_text("#table-problem", "1;2");
            found.extend(browser.axe(&format!("changed, kept, {name}")));
            browser.picture(&format!("passing-{name}"));
            for (opens, dialog) in [("open", "open-dialog"), ("copy-as", "copy-dialog")] {
                browser.press(&format!(".top [data-pass={opens}]"), Key::Enter);
                browser.wait(
                    "the dialog",
                    &format!("return document.getElementById('{dialog}').open;"),
                );
                found.extend(browser.axe(&format!("{dialog}, {name}")));
                browser.picture(&format!("{dialog}-{name}"));
                let wide = "return document.documentElement.scrollWidth <= innerWidth;";
                assert_eq!(
                    browser.script(wide, vec![]),
                    true,
                    "{dialog} rolls sideways, {name}"
                );
                browser.press(&format!("#{dialog} [data-pass=close]"), Key::Enter);
            }
            browser.press("[data-pass=forget-all]", Key::Enter);
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}
