//! What is heard: names, and what is spoken by itself.

use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, Key, Screen, changed, is_skipped, native_sentence, wiki_url};
use serde_json::{Value, json};
use std::collections::BTreeSet;

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&\
                    y.break=0.5&x.join=40@2&phase1.from=3&phase1.x.rate=0.05&v=1";

/// Writes down what the live region says, and when something was last typed.
const LISTEN: &str = "window.heard = [];
    addEventListener('input', () => { window.typedAt = performance.now(); }, true);
    const live = document.getElementById('live');
    new MutationObserver(() => heard.push([live.textContent, performance.now() - (window.typedAt || 0)]))
      .observe(live, {childList: true, characterData: true, subtree: true});";

/// Waits until so much time has passed since something was typed that all would have been said.
fn wait_for_quiet(browser: &Browser) {
    browser.wait(
        "quiet",
        "return performance.now() - (window.typedAt || 0) > 1500;",
    );
}

/// What was said, each with how long after the last keystroke.
fn heard(browser: &Browser) -> Vec<(String, f64)> {
    serde_json::from_value(browser.script("return heard.splice(0);", vec![])).expect("texts and times")
}

#[test]
fn the_sentence_is_spoken_once_when_typing_has_stopped() {
    let browser = Browser::opened(LINK);
    browser.script(LISTEN, vec![]);
    browser.write("x.start", "650");
    let link = changed(LINK, "x.start", "650");
    browser.wait_text_unseen("#live", &native_sentence(&link));
    wait_for_quiet(&browser);
    let said = heard(&browser);
    assert_eq!(said.len(), 1, "three keystrokes, one sentence: {said:?}");
    assert!(said[0].1 >= 790.0, "spoken after {} ms", said[0].1);
    // What changes no sentence is not spoken of.
    browser.write("note", "Rates as agreed");
    browser.settle(&changed(&link, "note", "Rates as agreed"));
    wait_for_quiet(&browser);
    assert_eq!(heard(&browser), []);
    browser.assert_clean();
}

#[test]
fn a_problem_is_spoken_by_the_name_of_its_field_and_then_the_sentence_again() {
    let browser = Browser::opened(LINK);
    browser.script(LISTEN, vec![]);
    browser.write("x.rate", "0,04");
    let words = "Ondrel: rate: 0,04: write 0.04, with a point.";
    browser.wait_text_unseen("#live", words);
    browser.write("x.rate", "0.04");
    browser.wait_text_unseen("#live", &native_sentence(LINK));
    let said: Vec<String> = heard(&browser).into_iter().map(|said| said.0).collect();
    assert_eq!(said, [words.to_owned(), native_sentence(LINK)]);
    browser.assert_clean();
}

#[test]
fn nothing_is_spoken_on_load() {
    let browser = Browser::start();
    browser.before_each_page(&format!(
        "addEventListener('DOMContentLoaded', () => {{ if (document.getElementById('live')) {{ {LISTEN} }} }});"
    ));
    for link in [LINK, DEMO] {
        browser.open(link);
        browser.settle(link);
        wait_for_quiet(&browser);
        assert_eq!(heard(&browser), []);
    }
    browser.assert_clean();
}

/// In a frame the page around it has the word, also where its fragment changes.
#[test]
fn a_frame_is_silent() {
    let browser = Browser::start();
    browser.open_address(wiki_url().as_str());
    browser.enter_frame();
    browser.settle_on_any();
    browser.script(LISTEN, vec![]);
    browser.leave_frame();
    let script = "const frame = document.querySelector('iframe'); frame.src = frame.src.split('#')[0] + '#' + arguments[0];";
    let other = changed(LINK, "view", "frame");
    browser.script(script, vec![json!(other)]);
    browser.enter_frame();
    browser.settle(&other);
    browser.script("window.typedAt = performance.now();", vec![]);
    wait_for_quiet(&browser);
    assert_eq!(heard(&browser), []);
    browser.assert_clean();
}

/// The state of a field, and all that describes it, as a screen reader has them.
fn described(browser: &Browser, id: &str) -> (Value, String) {
    let script = "const field = document.getElementById(arguments[0]);
        const said = (field.getAttribute('aria-describedby') || '').split(' ').map((id) => document.getElementById(id));
        return [field.getAttribute('aria-invalid'), said.filter((part) => part && !part.hidden).map((part) => part.textContent).join(' ')];";
    let found = browser.script(script, vec![json!(id)]);
    (found[0].clone(), found[1].as_str().unwrap_or_default().to_owned())
}

#[test]
fn a_field_with_a_problem_says_so_and_the_list_leads_to_it() {
    let browser = Browser::opened(LINK);
    for (field, part) in [
        ("x.start", "x.start"),
        ("x.join.1.time", "x.join.1.size"),
        ("phase1.from", "phase1.from"),
    ] {
        let before = described(&browser, field);
        assert_eq!(before.0, Value::Null);
        browser.write_at(&format!("[id='{field}']"), "4x");
        browser.leave();
        browser.wait_text("#problems", "4x");
        let (invalid, words) = described(&browser, field);
        assert_eq!(invalid, "true", "{field}");
        assert!(words.contains("4x"), "{field}: {words}");
        browser.press("#problem-list a", Key::Enter);
        let focus = browser.script("return document.activeElement.id;", vec![]);
        assert_eq!(focus, part, "the list leads to it");
        browser.click("#undo");
        browser.wait("no problem", "return document.getElementById('problems').hidden;");
        assert_eq!(described(&browser, field).0, Value::Null);
    }
    browser.assert_clean();
}

/// The names of everything that can be used, as the browser tells them to a screen reader.
fn names(browser: &Browser) -> Vec<(String, String)> {
    let tree = browser.devtools("Accessibility.getFullAXTree", json!({}));
    let nodes = tree["nodes"].as_array().expect("nodes").iter();
    let used = [
        "textbox",
        "combobox",
        "button",
        "slider",
        "checkbox",
        "radio",
        "link",
        "DisclosureTriangle",
    ];
    nodes
        .filter(|node| node["ignored"] != true)
        .filter_map(|node| {
            let role = node["role"]["value"]
                .as_str()
                .filter(|role| used.contains(role))?;
            Some((
                role.to_owned(),
                node["name"]["value"].as_str().unwrap_or_default().to_owned(),
            ))
        })
        .collect()
}

#[test]
fn everything_that_can_be_used_has_a_name_of_its_own() {
    if is_skipped("only Chromium shows what a screen reader is told") {
        return;
    }
    let browser = Browser::start();
    for screen in [Screen::DESK, Screen::SMALL] {
        browser.screen(screen);
        browser.open(LINK);
        browser.settle(LINK);
        browser.script(
            "for (const panel of document.querySelectorAll('details')) panel.open = true;",
            vec![],
        );
        let names = names(&browser);
        assert!(names.len() > 60, "only {} names", names.len());
        let mut seen = BTreeSet::new();
        let doubtful: Vec<_> = names
            .iter()
            // A figure's link is named by its figure, which may well stand there twice; its row and column tell them apart.
            .filter(|(role, name)| name.is_empty() || (role != "link" && !seen.insert((role, name))))
            .collect();
        assert!(doubtful.is_empty(), "without a name of their own: {doubtful:?}");
        let spoken: BTreeSet<&str> = names.iter().map(|(_, name)| name.as_str()).collect();
        for name in [
            "Ondrel: Strength at the start",
            "Vessary: Break point",
            "Ondrel: reserve 1, size",
            "Ondrel: add a reserve",
            "Phase 1, Ondrel: rate",
            "Time read in both pictures",
        ] {
            assert!(spoken.contains(name), "{name:?} is not among {spoken:?}");
        }
    }
    browser.assert_clean();
}
