//! In a wiki's frame, without scripts, and without WebAssembly.

use aftercount_tests::browser::{
    Browser, Screen, changed, is_skipped, native, native_sentence, page_url, wiki_url,
};
use serde_json::json;

const LINK: &str =
    "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&v=1";
const CAUTION: &str = "study, teaching and exercises";

/// The engagement that a frame shows, as its address has it.
fn framed_link(browser: &Browser) -> String {
    let fragment = browser.script("return location.hash;", vec![]);
    fragment.as_str().expect("an address has a fragment").to_owned()
}

/// What can be seen and does nothing without the program. What is folded up needs none.
const NEEDS_THE_PROGRAM: &str =
    "return [...document.querySelectorAll('button, input, select, textarea, a, #text-mark')]
    .filter((part) => part.checkVisibility()).map((part) => part.tagName + '#' + part.id);";

/// The frames of the example.
const FRAMES: u16 = 3;

#[test]
fn a_wiki_s_frames_work_with_an_opaque_origin() {
    for screen in [Screen::DESK, Screen::FRAME_UPRIGHT] {
        let browser = Browser::start();
        browser.screen(screen);
        browser.open_address(wiki_url().as_str());
        let entries = browser.script("return history.length;", vec![]);
        let mut links = Vec::new();
        for frame in 0..FRAMES {
            let said = browser.text(&format!("#said-{}", frame + 1));
            browser.enter_frame_number(frame);
            let link = framed_link(&browser);
            assert_eq!(browser.settle(&link), native(&link));
            assert_eq!(browser.text("#sentence"), native_sentence(&link));
            assert_eq!(
                said,
                native_sentence(&link),
                "the wiki's own words, for print and search"
            );
            is_a_frame(&browser);
            let length = browser.script("return history.length;", vec![]);
            assert_eq!(length, entries, "a frame adds nothing to the history");
            links.push(link);
            browser.leave_frame();
        }
        links.dedup();
        assert_eq!(links.len(), usize::from(FRAMES), "each shows another engagement");
        browser.picture(&format!("wiki-{}", screen.width));

        // The page around it may change the frame's fragment; a frame of no origin may not, not even its own.
        let other = changed(&links[0], "x.start", "900");
        let script = "const frame = document.querySelector('iframe');
            frame.src = frame.src.split('#')[0] + '#' + arguments[0];";
        browser.script(script, vec![other.clone().into()]);
        browser.enter_frame();
        assert_eq!(browser.settle(&other), native(&other));
        browser.assert_clean();
    }
}

/// What every frame is: whole, of no origin, quiet, without a form and without anything that could be dragged.
fn is_a_frame(browser: &Browser) {
    let origin = browser.script("return self.origin;", vec![]);
    assert_eq!(origin, "null", "the sandbox gives no origin");
    assert!(browser.text("#short-caution").contains(CAUTION));
    assert!(!browser.text("#text-mark").is_empty());
    assert!(!browser.text("#open-sheet").is_empty());
    assert_eq!(browser.text("[name='x.start']"), "", "a frame has no form");
    let focus = browser.script("return document.activeElement === document.body;", vec![]);
    assert_eq!(focus, true, "it takes no focus");
    let spoken = browser.script("return document.getElementById('live').textContent;", vec![]);
    assert_eq!(spoken, "", "it announces nothing");
    let touch = browser.script(
        "return getComputedStyle(document.getElementById('strength').closest('.print')).touchAction;",
        vec![],
    );
    assert_eq!(touch, "pan-y", "a finger scrolls the page around it");
}

#[test]
fn a_frame_is_whole_without_scrolling() {
    let browser = Browser::start();
    let link = format!("{}&view=frame", LINK.trim_end_matches("&v=1"));
    for screen in [Screen::FRAME_UPRIGHT, Screen::FRAME_LYING] {
        for paper in ["light", "dark"] {
            browser.screen(screen);
            let link = changed(&link, "paper", paper);
            browser.open(&link);
            assert_eq!(browser.settle(&link), native(&link));
            let script = "const r = document.documentElement; return [r.scrollWidth, r.scrollHeight];";
            let size = browser.script(script, vec![]);
            browser.picture(&format!("frame-{}-{paper}", screen.width));
            assert_eq!(size, json!([screen.width, screen.height]), "content and frame");
            for part in [
                "#sentence",
                "#short-caution",
                "#strength",
                "#text-mark",
                "#open-sheet",
            ] {
                let script = "const r = document.querySelector(arguments[0]).getBoundingClientRect();
                    return r.width > 0 && r.top >= 0 && r.left >= 0 && r.right <= innerWidth && r.bottom <= innerHeight;";
                assert_eq!(
                    browser.script(script, vec![part.into()]),
                    true,
                    "{part} is not whole at {screen:?}"
                );
            }
        }
    }
    browser.assert_clean();
}

/// Where text is larger than a frame has room for, the frame rolls as a whole, and nothing lies over anything else.
#[test]
fn large_text_and_long_names_roll_a_frame_and_cover_nothing() {
    let browser = Browser::start();
    let link = format!("{}&view=frame", LINK.trim_end_matches("&v=1"));
    let name = |word: &str| [word; 10].join(" ")[..60].to_owned();
    let long = changed(
        &changed(&link, "x.name", &name("Ondrel")),
        "y.name",
        &name("Vessary"),
    );
    for screen in [Screen::FRAME_UPRIGHT, Screen::FRAME_LYING] {
        for (link, times) in [(&long, 1.0), (&link, 2.0), (&long, 2.0)] {
            browser.screen(screen);
            browser.open(link);
            browser.settle(link);
            browser.text_size(times, false);
            browser.picture(&format!("frame-rolled-{}-{times}", screen.width));
            let script = "
                const parts = ['.top', '#said', '#nearest', '.read', '#strength', '#foot']
                    .map((part) => [part, document.querySelector(part).getBoundingClientRect()]);
                return parts.slice(1).map(([part, box], above) => [part, box.height > 0 && box.top >= parts[above][1].bottom - 1])
                    .filter(([, below]) => !below);";
            let what = format!("at {screen:?}, text {times} times as large");
            assert_eq!(browser.script(script, vec![]), json!([]), "{what}");
            let tall = browser.script(
                "return document.getElementById('strength').clientHeight >= 100;",
                vec![],
            );
            assert_eq!(tall, true, "the picture {what}");
        }
    }
    browser.assert_clean();
}

#[test]
fn without_scripts_the_page_says_so_with_the_caution() {
    if is_skipped("only Chromium switches scripts off for one page") {
        return;
    }
    let browser = Browser::start();
    browser.devtools("Emulation.setScriptExecutionDisabled", json!({"value": true}));
    browser.open(LINK);
    browser.picture("no-scripts");
    let shown = browser.script("return document.body.innerText;", vec![]);
    let shown = shown.as_str().expect("a page has text");
    assert!(shown.contains("Scripts are switched off"), "{shown}");
    assert!(shown.contains(CAUTION), "{shown}");
    assert_eq!(browser.shown().settled, None);
    assert_eq!(browser.script(NEEDS_THE_PROGRAM, vec![]), json!([]));
    browser.assert_clean();
}

#[test]
fn a_frame_that_allows_no_scripts_says_so_with_the_caution() {
    let browser = Browser::start();
    // An address of the same kind as the page's, since nothing else may frame a file.
    browser.open_address(wiki_url().as_str());
    let script =
        "const frame = document.querySelector('iframe'); const fresh = document.createElement('iframe');
        fresh.setAttribute('sandbox', ''); fresh.src = arguments[0]; fresh.width = 360; fresh.height = 480;
        fresh.onload = () => { window.framed = true; }; frame.replaceWith(fresh);
        // Each browser numbers frames in an order of its own.
        for (const other of document.querySelectorAll('iframe')) if (other !== fresh) other.remove();";
    browser.script(script, vec![format!("{}#{LINK}", page_url()).into()]);
    browser.wait("the frame", "return window.framed;");
    browser.enter_frame();
    let shown = browser.script("return document.body.innerText;", vec![]);
    let shown = shown.as_str().expect("a page has text");
    assert!(
        shown.contains("Scripts are switched off") && shown.contains(CAUTION),
        "{shown}"
    );
    let dead = browser.script(NEEDS_THE_PROGRAM, vec![]);
    assert_eq!(dead, json!([]), "nothing is there to press in vain");
    browser.picture("frame-no-scripts");
}

#[test]
fn without_webassembly_the_page_says_so_with_the_caution() {
    let browser = Browser::start();
    browser.before_each_page("delete window.WebAssembly;");
    browser.open(LINK);
    browser.wait_text("#no-engine", "cannot run WebAssembly");
    assert!(browser.text("#no-engine").contains(CAUTION));
    assert_eq!(browser.script(NEEDS_THE_PROGRAM, vec![]), json!([]));
    browser.picture("no-engine");
}

const ASKED: &str = "x.name=Ondrel&x.start=600?400..900&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&\
                     y.break=0.5&view=frame&v=1";

/// A frame has no room for what is asked: it says the answer, or that there is a map, and where all of it is.
#[test]
fn a_frame_says_what_is_asked_and_where_it_is() {
    let one = ASKED.to_owned();
    let two = changed(ASKED, "y.start", "464?300..600");
    let open = changed(&two, "x.start", "?400..900");
    let map = "A map of Ondrel's strength at the start and Vessary's strength at the start is asked for: it is on the whole sheet.";
    let browser = Browser::start();
    for screen in [Screen::FRAME_UPRIGHT, Screen::FRAME_LYING] {
        browser.screen(screen);
        for (name, link, words, other) in [
            ("one", &one, "#asked-brief", "#asked-map"),
            ("two", &two, "#asked-map", "#asked-brief"),
            ("open", &open, "#asked-map", "#asked-brief"),
        ] {
            browser.open(link);
            browser.settle(link);
            browser.picture(&format!("frame-asked-{name}-{}", screen.width));
            let said = browser.text(words);
            if name == "one" {
                assert!(
                    said.starts_with("In this model") && said.contains("strength at the start"),
                    "{said}"
                );
            } else {
                assert_eq!(said, map);
            }
            assert_eq!(browser.text(other), "");
            let script = "const a = document.querySelector(arguments[0] + ' a');
                return [a.target, decodeURIComponent(a.hash).includes('x.start=') && !a.hash.includes('view=')];";
            assert_eq!(
                browser.script(script, vec![words.into()]),
                json!(["_blank", true])
            );
            let size = "const r = document.documentElement; return [r.scrollWidth, r.scrollHeight];";
            assert_eq!(
                browser.script(size, vec![]),
                json!([screen.width, screen.height]),
                "{name} at {screen:?}"
            );
            let caution = "const c = document.getElementById('short-caution').getBoundingClientRect();
                return document.elementFromPoint(c.left + 5, c.bottom - 5).id;";
            assert_eq!(
                browser.script(caution, vec![]),
                "short-caution",
                "{name} at {screen:?}"
            );
        }
    }
    // On the sheet the answer leads to all of it, and the map stands there.
    let sheet = changed(&two, "view", "");
    browser.screen(Screen::DESK);
    browser.open(&sheet);
    browser.settle(&sheet);
    assert_eq!(browser.text("#asked-map"), "");
    browser.click("#asked-brief-words");
    assert_eq!(
        browser.script("return document.activeElement.id;", vec![]),
        "takes-head"
    );
    browser.assert_clean();
}
