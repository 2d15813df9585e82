//! Everyone can use the page: axe-core finds nothing in it, on any paper, at any width, whatever it shows.

use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, Screen, changed};

/// All that an engagement may hold, so that every part of the sheet is filled.
const FULL: &str = "title=The%20northern%20crossing&note=Rates%20as%20agreed&marking=EXERCISE&until=12&\
    x.name=Ondrel&x.start=600&x.lost=20&x.fire=search&x.rate=0.04&x.half=200&x.break=0.3&x.wastage=0.001&\
    x.join=40@2,-10@3&x.flow=5@1/4&y.name=Vessary&y.start=464&y.fire=power&y.rate=0.05&y.p=1&y.q=0.1&y.break=0.5&\
    y.support.area=0.001&y.support.aimed=0.5&x.reach=900&range=1000&range.closing=200&range.least=100&\
    phase1.from=4&phase1.x.rate=0.05&v=1";

/// A text with a problem of each kind: in a field, in a row of a table, in a phase, without any field, and twice.
const WRONG: &str = "x.start=1,000&x.rate=-3&x.join=40@2,x@3&y.start=464&y.rate=0,05&y.break=2&range=far&\
    phase1.from=soon&phase1.x.rate=5%20%&y.speed=3&x.start=5&bare&v=1";

/// Opens all that can be opened.
const UNFOLD: &str = "for (const panel of document.querySelectorAll('details')) panel.open = true;";

fn screens() -> [Screen; 2] {
    [Screen::SMALL, Screen::DESK]
}

#[test]
fn axe_finds_nothing_in_the_sheet() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in screens() {
        browser.screen(screen);
        for paper in ["light", "dark"] {
            for (name, link) in [("demo", DEMO), ("full", FULL)] {
                let link = changed(link, "paper", paper);
                browser.open(&link);
                browser.settle(&link);
                found.extend(browser.axe(&format!("{name}, {paper}, {} px", screen.width)));
                browser.script(UNFOLD, vec![]);
                found.extend(browser.axe(&format!("{name}, {paper}, {} px, unfolded", screen.width)));
            }
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}

#[test]
fn axe_finds_nothing_where_problems_show() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in screens() {
        browser.screen(screen);
        for paper in ["light", "dark"] {
            let link = changed(WRONG, "paper", paper);
            browser.open(&link);
            browser.wait_state("empty");
            browser.script(UNFOLD, vec![]);
            found.extend(browser.axe(&format!("problems, {paper}, {} px", screen.width)));
            browser.picture(&format!("problems-{}-{paper}", screen.width));

            let link = changed(FULL, "paper", paper);
            browser.open(&link);
            browser.settle(&link);
            browser.write("x.start", "1,000");
            browser.leave();
            browser.wait_state("stale");
            found.extend(browser.axe(&format!("old figures, {paper}, {} px", screen.width)));
            browser.picture(&format!("old-figures-{}-{paper}", screen.width));
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}

#[test]
fn axe_finds_nothing_in_a_blank_form() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in screens() {
        browser.screen(screen);
        browser.open("v=1");
        browser.wait_state("empty");
        found.extend(browser.axe(&format!("blank, {} px", screen.width)));
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}

#[test]
fn axe_finds_nothing_in_a_frame() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in [Screen::FRAME_UPRIGHT, Screen::FRAME_LYING] {
        browser.screen(screen);
        for paper in ["light", "dark"] {
            for text in [DEMO, FULL] {
                let link = changed(&changed(text, "view", "frame"), "paper", paper);
                browser.open(&link);
                browser.settle(&link);
                found.extend(browser.axe(&format!("frame, {paper}, {} px", screen.width)));
            }
            browser.open(&changed(&changed(WRONG, "view", "frame"), "paper", paper));
            browser.wait_state("empty");
            found.extend(browser.axe(&format!("frame with problems, {paper}, {} px", screen.width)));
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}

#[test]
fn no_text_runs_over_other_text() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in [
        Screen::SMALL,
        Screen {
            width: 768,
            ..Screen::DESK
        },
        Screen::DESK,
    ] {
        browser.screen(screen);
        for (name, link) in [("demo", DEMO), ("full", FULL)] {
            browser.open(link);
            browser.settle(link);
            browser.script(UNFOLD, vec![]);
            found.extend(browser.text_that_lies_badly(&format!("{name}, {} px", screen.width)));
        }
        browser.open(WRONG);
        browser.wait_state("empty");
        browser.script(UNFOLD, vec![]);
        found.extend(browser.text_that_lies_badly(&format!("problems, {} px", screen.width)));
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
    browser.assert_clean();
}

#[test]
fn text_twice_as_large_has_room() {
    let mut found = Vec::new();
    for for_every_page in [true, false] {
        let browser = Browser::start();
        for screen in [Screen::SMALL, Screen::DESK] {
            browser.screen(screen);
            for (name, link) in [("demo", DEMO), ("full", FULL)] {
                if for_every_page {
                    browser.text_size(2.0, true);
                }
                browser.open(link);
                browser.settle(link);
                if !for_every_page {
                    browser.text_size(2.0, false);
                }
                let what = format!(
                    "large-{name}-{}-{}",
                    screen.width,
                    if for_every_page { "set" } else { "zoomed" }
                );
                browser.script(UNFOLD, vec![]);
                found.extend(browser.text_that_lies_badly(&what));
                let size = browser.script(
                    "return getComputedStyle(document.documentElement).fontSize;",
                    vec![],
                );
                assert_eq!(size, "32px", "{what}");
            }
        }
        browser.assert_clean();
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
}
