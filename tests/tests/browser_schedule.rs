//! Reserves, flows and phases in the page: tables that are the link's text, and what follows from it.

use aftercount_core::demo::DEMO;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_tests::browser::{Browser, Key, changed, native, native_sentence};

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.4\
&y.join=64@4,%2020@6&v=1";

/// The id of what has the focus.
fn focused(browser: &Browser) -> String {
    let id = browser.script("return document.activeElement.id;", vec![]);
    id.as_str().unwrap_or_default().to_owned()
}

/// What stands in a cell of a table.
fn cell(browser: &Browser, id: &str) -> String {
    let value = browser.script(
        "return document.getElementById(arguments[0])?.value ?? 'no cell';",
        vec![id.into()],
    );
    value.as_str().unwrap_or_default().to_owned()
}

/// Writes into a cell in place of what stands there.
fn write_cell(browser: &Browser, id: &str, text: &str) {
    let choose = "const e = document.getElementById(arguments[0]); e.focus(); e.select();";
    browser.script(choose, vec![id.into()]);
    browser.type_at(&format!("[id='{id}']"), text);
}

#[test]
fn rows_and_text_are_one() {
    let browser = Browser::opened(LINK);
    assert_eq!(browser.value("y.join"), "64@4, 20@6");
    assert_eq!(cell(&browser, "y.join.2.size"), "20");
    write_cell(&browser, "y.join.1.time", "3.5");
    // The other item keeps its blank: it was not touched.
    let link = changed(LINK, "y.join", "64@3.5, 20@6");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(focused(&browser), "y.join.1.time");
    assert_eq!(browser.value("y.join"), "64@3.5, 20@6");

    browser.write("y.join", "64@3.5,-10@5,30@7");
    let link = changed(LINK, "y.join", "64@3.5,-10@5,30@7");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(cell(&browser, "y.join.3.size"), "30");
    browser.write("y.join", "");
    let link = changed(LINK, "y.join", "");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(cell(&browser, "y.join.1.size"), "no cell");
    browser.assert_clean();
}

#[test]
fn rows_are_added_moved_and_removed_by_keyboard() {
    let browser = Browser::opened(LINK);
    let settled = |text: &str| {
        let link = changed(LINK, "y.join", text);
        assert_eq!(browser.settle(&link), native(&link), "{text}");
    };
    browser.press("[id='y.join.add']", Key::Enter);
    settled("64@4, 20@6,0@0");
    assert_eq!(focused(&browser), "y.join.3.size");
    // The new row's field is chosen whole, so that typing fills it.
    browser.type_at("[id='y.join.3.size']", "9");
    settled("64@4, 20@6,9@0");
    browser.press("[id='y.join.3.up']", Key::Enter);
    settled("64@4,9@0, 20@6");
    assert_eq!(focused(&browser), "y.join.2.up");
    browser.press("[id='y.join.2.up']", Key::Enter);
    settled("9@0,64@4, 20@6");
    assert_eq!(focused(&browser), "y.join.1.down", "up has come to its end");
    browser.press("[id='y.join.3.remove']", Key::Enter);
    settled("9@0,64@4");
    assert_eq!(focused(&browser), "y.join.2.remove");
    browser.press("[id='y.join.2.remove']", Key::Enter);
    browser.press("[id='y.join.1.remove']", Key::Enter);
    settled("");
    assert_eq!(focused(&browser), "y.join.add");
    // Each button was one entry.
    browser.click("#undo");
    settled("9@0");
    browser.assert_clean();
}

/// What is typed next takes the place of what a new row begins with.
#[test]
fn the_first_field_of_what_is_added_is_chosen_whole() {
    let browser = Browser::opened(LINK);
    browser.script("document.getElementById('y.more').open = true;", vec![]);
    for (button, field, begins) in [
        ("y.join.add", "y.join.3.size", "0"),
        ("y.flow.add", "y.flow.1.rate", "0"),
        ("add-phase", "phase1.from", "1"),
    ] {
        browser.press("#reading", Key::Home);
        browser.click(&format!("[id='{button}']"));
        browser.settle_on_any();
        assert_eq!(
            (focused(&browser).as_str(), cell(&browser, field).as_str()),
            (field, begins)
        );
        let chosen =
            "const e = document.activeElement; return e.value.slice(e.selectionStart, e.selectionEnd);";
        assert_eq!(browser.script(chosen, vec![]), begins);
        browser.type_at(&format!("[id='{field}']"), "7");
        assert_eq!(cell(&browser, field), "7");
    }
    browser.assert_clean();
}

#[test]
fn every_item_with_a_problem_is_marked_and_stays_as_typed() {
    let browser = Browser::start();
    browser.open(&changed(LINK, "y.join", "64@4,1000,@6"));
    browser.wait_text("[id='y.join.problem']", "Row 2");
    browser.wait_text("[id='y.join.problem']", "Row 3");
    let marked = |id: &str| {
        let script = "return document.getElementById(arguments[0]).getAttribute('aria-invalid') === 'true';";
        browser.script(script, vec![id.into()]) == true
    };
    assert!(
        !marked("y.join.1.size") && marked("y.join.2.size") && marked("y.join.3.time") && marked("y.join")
    );
    assert_eq!(cell(&browser, "y.join.2.size"), "1000");
    assert_eq!(browser.value("y.join"), "64@4,1000,@6");
    browser.press("#problem-list a", Key::Enter);
    assert_eq!(focused(&browser), "y.join.2.size");
    write_cell(&browser, "y.join.2.time", "5");
    write_cell(&browser, "y.join.3.size", "7");
    let link = changed(LINK, "y.join", "64@4,1000@5,7@6");
    assert_eq!(browser.settle(&link), native(&link));
    assert!(!marked("y.join.2.size") && !marked("y.join.3.time") && !marked("y.join"));
    browser.assert_clean();
}

#[test]
fn phases_are_edited_in_fields_that_bear_the_links_keys() {
    let browser = Browser::opened(LINK);
    browser.press("#reading", Key::Home);
    browser.press("#reading", Key::PageUp);
    browser.click("#add-phase");
    let mut link = changed(LINK, "phase1.from", "4");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(focused(&browser), "phase1.from");
    browser.write("phase1.from", "5");
    link = changed(LINK, "phase1.from", "5");
    browser.click("[id='phase1.add']");
    // A change begins with what holds without it, so it changes nothing yet.
    link = changed(&link, "phase1.x.rate", "0.04");
    let same = browser.settle(&link);
    assert_eq!((same.breaks, same.time), (native(LINK).breaks, native(LINK).time));
    browser.write("phase1.x.rate", "0.07");
    link = changed(&link, "phase1.x.rate", "0.07");
    assert_eq!(browser.settle(&link), native(&link));

    browser.script(
        "document.getElementById('phase1.x.rate.key').name = 'chosen';",
        vec![],
    );
    browser.choose_value("chosen", "y.wastage");
    link = changed(&changed(&link, "phase1.x.rate", ""), "phase1.y.wastage", "0");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(focused(&browser), "phase1.y.wastage.key");
    browser.write("phase1.y.wastage", "x");
    browser.leave();
    browser.wait_text("[id='phase1.y.wastage.problem']", "write a number");
    // Emptied, the line stays as long as somebody is in it.
    browser.write("phase1.y.wastage", "");
    assert_eq!(focused(&browser), "phase1.y.wastage");
    browser.write_on("phase1.y.wastage", "0.01");
    link = changed(
        &changed(&link, "phase1.y.wastage", ""),
        "phase1.y.wastage",
        "0.01",
    );
    assert_eq!(browser.settle(&link), native(&link));
    browser.click("[id='phase1.remove']");
    assert_eq!(browser.settle(LINK), native(LINK));
    assert_eq!(focused(&browser), "add-phase");
    browser.assert_clean();
}

#[test]
fn the_timeline_and_what_decided_it_are_said() {
    let browser = Browser::start();
    browser.open("");
    browser.settle(DEMO);
    assert_eq!(browser.text("#sentence"), native_sentence(DEMO));
    let timeline = browser.text("#timeline");
    for part in ["64 join Vessary", "Ondrel breaks", "loses"] {
        assert!(timeline.contains(part), "{part:?} in {timeline:?}");
    }
    browser.wait_text("#decided", "Vessary's reserve of 64 decided it");
    // While it is not known of the text that stands there, nothing is said.
    browser.write("y.join", "64@5");
    browser.settle(&changed(DEMO, "y.join", "64@5"));
    browser.wait_text("#decided", "too late");
    browser.write("y.join", "");
    browser.settle(&changed(DEMO, "y.join", ""));
    assert_eq!(
        browser.text("#timeline"),
        "",
        "a start and an end are no timeline"
    );
    browser.assert_clean();
}

#[test]
fn continue_from_here_is_one_step_that_undo_takes_back() {
    let browser = Browser::opened(LINK);
    let whole = native(LINK);
    browser.press("#reading", Key::Home);
    browser.press("#reading", Key::PageUp);
    browser.press("#reading", Key::Right);
    let from: f64 = browser
        .script("return document.getElementById('reading').ariaValueNow;", vec![])
        .as_str()
        .and_then(|text| text.parse().ok())
        .expect("a time is read");
    assert!(browser.text("#continue").starts_with("Continue from 4."));
    browser.click("#continue");
    browser.wait(
        "the rest",
        "return document.getElementsByName('y.join')[0].value.startsWith('20@');",
    );
    let rest = browser.settle_on_any();
    assert_eq!(rest.breaks, whole.breaks);
    let (time, all) = (rest.time.expect("it ends"), whole.time.expect("it ends"));
    assert!(
        (time + from - all).abs() <= 1e-11 * all,
        "{from} and {time} are not {all}"
    );
    assert_ne!(browser.value("x.lost"), "");
    let note = browser.value("note");
    let mark = text_mark(&Pairs::parse(LINK));
    assert!(
        note.starts_with("It goes on from 4.")
            && note.ends_with(&format!("of the text with the mark {mark}.")),
        "{note}"
    );
    browser.click("#undo");
    assert_eq!(browser.settle(LINK), whole);
    assert_eq!(browser.value("x.lost"), "");
    browser.assert_clean();
}

/// Whatever is typed into a cell stays in it: a mark that parts the list there is wrong in that cell alone.
#[test]
fn a_comma_in_a_cell_stays_in_the_cell() {
    let link = changed(LINK, "y.flow", "5@2/8");
    let browser = Browser::opened(&link);
    browser.script("document.getElementById('y.more').open = true;", vec![]);
    let rows = || {
        browser.script(
            "return document.querySelectorAll('[id=\"y.join.body\"] tr').length;",
            vec![],
        )
    };
    for (key, id, typed, before, says) in [
        (
            "y.join",
            "y.join.1.size",
            "1,000",
            "64",
            "Row 1: 1,000@4: 1,000: write 1000, without marks for thousands.",
        ),
        (
            "y.join",
            "y.join.2.time",
            "6,5",
            "6",
            "Row 2: 20@6,5: 6,5: write 6.5, with a point.",
        ),
        (
            "y.join",
            "y.join.1.size",
            "64@4, 80@5",
            "64",
            "Row 1: 64@4, 80@5@4: 64@4, 80@5: write a number",
        ),
        (
            "y.flow",
            "y.flow.1.from",
            "2/8",
            "2",
            "Row 1: 5@2/8/8: 2/8: write a number",
        ),
    ] {
        write_cell(&browser, id, typed);
        browser.leave();
        browser.wait_text(&format!("[id='{key}.problem']"), says);
        assert_eq!(cell(&browser, id), typed, "it stays as it was typed");
        assert_eq!(rows(), 2, "no row came");
        browser.wait_state("stale");
        assert_eq!(
            browser.text("#problem-list a"),
            format!(
                "Vessary: {}, row {}",
                if key == "y.join" {
                    "reserves"
                } else {
                    "steady reinforcement"
                },
                &id[7..8]
            )
        );
        // The text carries it: whoever opens it sees the same.
        let text = browser.link();
        browser.open(&text);
        browser.wait_text(&format!("[id='{key}.problem']"), says);
        assert_eq!((browser.link(), cell(&browser, id).as_str()), (text, typed));
        browser.script("document.getElementById('y.more').open = true;", vec![]);
        write_cell(&browser, id, before);
        assert_eq!(browser.settle(&link), native(&link));
    }
    browser.picture("comma-in-cell");
    browser.assert_clean();
}
