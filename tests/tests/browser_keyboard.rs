//! The whole job with the keyboard alone: the focus is always in sight and in order, and never caught.

use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, Screen, Struck, changed, native, native_sentence};

/// What the job below states, before its phase.
const STATED: &str = "x.name=Tarn&x.start=600&x.fire=area&x.rate=0.0001&x.break=0.3&x.join=64@4&\
    y.name=Corrow&y.start=400&y.rate=0.02&y.break=0.4&v=1";

/// Walks on to a field and types into it.
#[track_caller]
fn fill(browser: &Browser, name: &str, text: &str) {
    browser.walk_to(&format!("[name='{name}']"), false);
    browser.type_here(text);
    assert_eq!(browser.value(name), text);
}

#[test]
fn the_whole_job_on_a_desk() {
    the_whole_job(Screen::DESK);
}

#[test]
fn the_whole_job_on_a_small_screen() {
    the_whole_job(Screen::SMALL);
}

fn the_whole_job(screen: Screen) {
    let browser = Browser::start();
    browser.screen(screen);
    browser.open("");
    browser.settle(DEMO);
    state(&browser);
    let texts = change_on_the_way(&browser);
    read(&browser);
    pass_on(&browser);
    step(&browser, &texts);
    browser.assert_clean();
}

/// From the demo to a blank form, and from there to an engagement with a reserve.
fn state(browser: &Browser) {
    browser.walk_to("#blank", false);
    browser.strike(Struck::Enter);
    browser.wait_state("empty");
    assert!(
        browser.has_focus("[name='x.name']"),
        "a blank form begins at its first field"
    );
    browser.type_here("Tarn");
    fill(browser, "x.start", "600");
    browser.walk_to("[name='x.fire']", false);
    browser.strike(Struck::Down);
    assert_eq!(browser.value("x.fire"), "area");
    fill(browser, "x.rate", "0.0001");
    fill(browser, "x.break", "0.3");
    browser.walk_to("[id='x.join.add']", false);
    browser.strike(Struck::Space);
    assert!(
        browser.has_focus("[id='x.join.1.size']"),
        "a new row takes the focus"
    );
    browser.type_here("64");
    browser.walk_to("[id='x.join.1.time']", false);
    browser.type_here("4");
    fill(browser, "y.name", "Corrow");
    fill(browser, "y.start", "400");
    fill(browser, "y.rate", "0.02");
    fill(browser, "y.break", "0.4");
    assert_eq!(browser.settle(STATED), native(STATED));
}

/// Adds a phase, step by step; the text after each.
fn change_on_the_way(browser: &Browser) -> [String; 5] {
    let stated = browser.link();
    browser.walk_to("#add-phase", false);
    browser.strike(Struck::Enter);
    assert!(
        browser.has_focus("[name='phase1.from']"),
        "a new phase begins at its time"
    );
    let with_phase = browser.link();
    browser.type_here("6");
    assert_eq!(
        browser.value("phase1.from"),
        "6",
        "what is typed takes the place of what stood there"
    );
    let at_six = changed(&with_phase, "phase1.from", "6");
    browser.walk_to("[id='phase1.add']", false);
    browser.strike(Struck::Enter);
    assert!(
        browser.has_focus("[id='phase1.x.rate.key']"),
        "a new change begins with what changes"
    );
    let with_change = browser.link();
    fill(browser, "phase1.x.rate", "0.0002");
    let whole = changed(&with_change, "phase1.x.rate", "0.0002");
    assert_eq!(browser.settle(&whole), native(&whole));
    [stated, with_phase, at_six, with_change, whole]
}

/// The reading line, event by event, and the working.
fn read(browser: &Browser) {
    browser.walk_to("#reading", false);
    let spoken = || {
        let script = "return document.activeElement.getAttribute('aria-valuetext');";
        let words = browser.script(script, vec![]);
        words.as_str().expect("a spoken value").to_owned()
    };
    let steps = [
        (Struck::Home, "at 0\u{a0}h: Tarn 600, Corrow 400"),
        (Struck::PageUp, "at 4\u{a0}h: "),
        (Struck::PageUp, "at 6\u{a0}h: "),
        (Struck::PageDown, "at 4\u{a0}h: "),
        (Struck::Right, "at 4.1\u{a0}h: "),
        (Struck::Left, "at 4\u{a0}h: "),
    ];
    for (key, words) in steps {
        browser.strike(key);
        assert!(
            spoken().starts_with(words),
            "{key:?}: {:?} and not {words:?}",
            spoken()
        );
    }
    browser.strike(Struck::End);
    browser.wait_text_unseen("#reading-words", &spoken());

    browser.walk_to("#working-details > summary", false);
    browser.strike(Struck::Enter);
    browser.wait_text("#working-lines", "Tarn");
}

/// The working and the text are copied. Whether the clipboard takes them or not, they are chosen.
fn pass_on(browser: &Browser) {
    for (button, area, said) in [
        ("#copy-working", "#working-text", "#working-copied"),
        ("#copy", "#text", "#copied"),
    ] {
        browser.walk_to(button, false);
        browser.strike(Struck::Enter);
        browser.wait_text(said, "Cop");
        let script = "const box = document.querySelector(arguments[0]);
            return box.value.slice(box.selectionStart, box.selectionEnd) === box.value;";
        assert_eq!(
            browser.script(script, vec![area.into()]),
            true,
            "{area} is chosen"
        );
    }
}

/// Undo takes the phase back step by step, Redo brings it again.
fn step(browser: &Browser, texts: &[String; 5]) {
    browser.walk_to("#undo", true);
    for text in texts.iter().rev().skip(1) {
        browser.strike(Struck::Enter);
        assert_eq!(browser.settle(text), native(text));
        assert!(browser.has_focus("#undo"), "the button keeps the focus");
    }
    browser.walk_to("#redo", false);
    for text in texts.iter().skip(1) {
        browser.strike(Struck::Enter);
        assert_eq!(browser.settle(text), native(text));
    }
    assert_eq!(browser.text("#sentence"), native_sentence(&texts[4]));
}

/// With every panel open the way leads through the whole page and out of it again, in both directions.
#[test]
fn the_focus_is_caught_nowhere() {
    let browser = Browser::start();
    for screen in [Screen::DESK, Screen::SMALL] {
        browser.screen(screen);
        browser.open(STATED);
        browser.settle(STATED);
        browser.script(
            "for (const panel of document.querySelectorAll('details')) panel.open = true;",
            vec![],
        );
        let fixed = |stops: Vec<String>| {
            stops
                .into_iter()
                .filter(|stop| !stop.starts_with("the buttons beside"))
                .collect::<Vec<_>>()
        };
        let on = fixed(walk_out(&browser, false));
        let back = fixed(walk_out(&browser, true));
        assert!(on.len() > 60, "only {} stops", on.len());
        assert_eq!(
            on,
            back.into_iter().rev().collect::<Vec<_>>(),
            "the same stops both ways"
        );
    }
    browser.assert_clean();
}

/// Walks from the page itself, from its beginning or its end, until the page itself has the focus again. Backwards, a window
/// without bars of its own leads from the first stop to the last at once, so there the first one is the end. Firefox hands
/// the focus on to its own bars, and goes on from where it was last: so the window takes it back, and a caret says where
/// the way begins.
#[track_caller]
fn walk_out(browser: &Browser, back: bool) -> Vec<String> {
    let begin = "window.focus(); document.activeElement.blur(); window.lastStop = null;
        getSelection().collapse(document.body, arguments[0] ? document.body.childNodes.length : 0);";
    browser.script(begin, vec![back.into()]);
    let mut stops = Vec::new();
    loop {
        browser.strike(if back { Struck::BackTab } else { Struck::Tab });
        let name = browser.look_at_focus(back);
        if name.is_empty() {
            return stops;
        }
        stops.push(name);
        if back && browser.has_focus(".skip") {
            return stops;
        }
    }
}

#[test]
fn the_skip_link_leads_to_the_outcome() {
    let browser = Browser::opened(STATED);
    browser.strike(Struck::Tab);
    assert!(browser.has_focus(".skip"), "it is the first stop");
    browser.look_at_focus(false);
    browser.strike(Struck::Enter);
    assert!(browser.has_focus("#leaves-head"));
    let address = browser.address();
    assert!(
        address.ends_with(STATED),
        "the text stays in the address: {address}"
    );
    browser.strike(Struck::Tab);
    assert!(
        browser.has_focus("#leaves *, #pictures *"),
        "the way goes on from there"
    );
    browser.assert_clean();
}

/// A dialog takes the focus in, holds it while it is open, and gives it back to the button that opened it.
#[test]
fn dialogs_take_the_focus_in_and_give_it_back() {
    let browser = Browser::opened(STATED);
    for (button, dialog) in [
        ("[data-pass=open]", "#open-dialog"),
        ("[data-pass=copy-as]", "#copy-dialog"),
    ] {
        browser.script("window.focus(); document.activeElement.blur();", vec![]);
        browser.walk_to(&format!(".top {button}"), false);
        browser.strike(Struck::Enter);
        browser.wait(
            "the dialog",
            &format!("return document.querySelector('{dialog}').open;"),
        );
        let inside = |browser: &Browser| {
            // The browser's own bars come between the last stop and the first. To Firefox what can be rolled is a stop.
            browser.has_focus(&format!("{dialog}, {dialog} *")) || browser.has_focus("body")
        };
        assert!(
            browser.has_focus(&format!("{dialog} *")),
            "{dialog} takes the focus"
        );
        for _ in 0..12 {
            browser.strike(Struck::Tab);
            assert!(inside(&browser), "{dialog} holds the focus");
        }
        browser.strike(Struck::Escape);
        browser.wait(
            "no dialog",
            &format!("return !document.querySelector('{dialog}').open;"),
        );
        assert!(
            browser.has_focus(&format!(".top {button}")),
            "{dialog} gives the focus back"
        );
    }
    assert_eq!(browser.link(), STATED);
    browser.assert_clean();
}

#[test]
fn an_engagement_is_opened_with_the_keyboard() {
    let browser = Browser::opened(DEMO);
    browser.walk_to(".top [data-pass=open]", false);
    browser.strike(Struck::Enter);
    browser.wait(
        "the dialog",
        "return document.querySelector('#open-dialog').open;",
    );
    assert!(
        browser.has_focus("#open-text"),
        "what is to be filled has the focus"
    );
    browser.type_here(STATED);
    browser.walk_to("[data-pass=take-up]", false);
    browser.strike(Struck::Enter);
    assert_eq!(browser.settle(STATED), native(STATED));
    assert!(browser.has_focus("#leaves-head"), "the outcome is next");
    browser.assert_clean();
}
