//! The page on every screen: nothing sticks out, nothing is unreadable. Leaves pictures for a person to judge.

use aftercount_tests::browser::{Browser, Screen, changed};
use serde_json::json;

const LINK: &str = "title=The%20northern%20crossing&marking=EXERCISE&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&\
                    y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5&until=12&v=1";

const SCREENS: [Screen; 4] = [
    Screen::SMALL,
    Screen {
        width: 768,
        height: 1024,
        ratio: 1.0,
    },
    Screen::DESK,
    Screen {
        width: 1920,
        height: 1080,
        ratio: 2.0,
    },
];

#[test]
fn nothing_sticks_out_sideways() {
    let browser = Browser::start();
    let bare = changed(LINK, "marking", "");
    let long = changed(LINK, "x.name", &"Unbreakable".repeat(5));
    let long = changed(&long, "marking", &"EXERCISE – invented figures; ".repeat(2));
    for screen in SCREENS {
        browser.screen(screen);
        for (paper, link) in [("light", LINK), ("dark", bare.as_str()), ("light", long.as_str())] {
            let link = changed(link, "paper", paper);
            browser.open(&link);
            browser.settle(&link);
            let name = if link.contains("Unbreakable") {
                "long"
            } else {
                paper
            };
            browser.picture(&format!("sheet-{}-{name}", screen.width));
            // A long formula rolls in a strip of its own.
            browser.script("document.getElementById('working-details').open = true;", vec![]);
            let script = "const over = [...document.querySelectorAll('body *')].filter((e) => e.checkVisibility()
                && !e.closest('.unseen, .skip, .roll, .formula > *') && e.getBoundingClientRect().right > innerWidth + 1);
                return [Math.max(0, document.documentElement.scrollWidth - innerWidth), ...over.slice(0, 5).map((e) => e.tagName + '#' + e.id + '.' + e.className)];";
            let width = browser.script(script, vec![]);
            assert_eq!(width, json!([0]), "at {screen:?} with {name}");
            let lines =
                "return new Set([...document.querySelectorAll('.top button')].map((e) => e.offsetTop)).size;";
            let lines = browser.script(lines, vec![]);
            assert!(
                screen.width < 1280 || lines == 1,
                "the buttons at the top stand in {lines} lines at {screen:?}"
            );
        }
    }
    browser.assert_clean();
}

#[test]
fn text_stands_out_from_its_ground() {
    let browser = Browser::start();
    for paper in ["light", "dark"] {
        let link = changed(LINK, "paper", paper);
        browser.open(&link);
        browser.settle(&link);
        // Contrast as the Web Content Accessibility Guidelines 2.2 define it; 4.5 is their level AA for body text.
        let script = "
            const channel = (c) => { c /= 255; return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4; };
            const pen = document.createElement('canvas').getContext('2d', {willReadFrequently: true});
            const rgba = (colour) => { pen.clearRect(0, 0, 1, 1); pen.fillStyle = colour; pen.fillRect(0, 0, 1, 1);
              return pen.getImageData(0, 0, 1, 1).data; };
            const light = (c) => 0.2126 * channel(c[0]) + 0.7152 * channel(c[1]) + 0.0722 * channel(c[2]);
            const ground = (e) => { for (; e; e = e.parentElement) { const c = rgba(getComputedStyle(e).backgroundColor);
              if (c[3] === 255) return c; } return [255, 255, 255, 255]; };
            const weak = [];
            for (const e of document.querySelectorAll('body *')) {
              const own = [...e.childNodes].some((n) => n.nodeType === 3 && n.data.trim());
              if (!own || !e.checkVisibility() || e.closest('svg, canvas, button:disabled, button[aria-disabled=true], .unseen, .skip')) continue;
              const a = light(rgba(getComputedStyle(e).color)), b = light(ground(e));
              const contrast = (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
              if (contrast < 4.5) weak.push(e.tagName + '#' + e.id + '.' + e.className + ' ' + contrast.toFixed(2));
            }
            return weak;";
        assert_eq!(browser.script(script, vec![]), json!([]), "on {paper} paper");
    }
    browser.assert_clean();
}

#[test]
fn paper_follows_the_system_unless_the_link_says_otherwise() {
    let browser = Browser::start();
    let ground = || browser.script("return getComputedStyle(document.body).backgroundColor;", vec![]);
    let shown = |paper: &str, system: &str| {
        browser.prefers("prefers-color-scheme", system);
        let link = changed(LINK, "paper", paper);
        browser.open(&link);
        browser.settle(&link);
        ground()
    };
    let (light, dark) = (shown("light", "light"), shown("dark", "dark"));
    assert_ne!(light, dark);
    assert_eq!(shown("light", "dark"), light);
    assert_eq!(shown("dark", "light"), dark);
    assert_eq!(shown("", "light"), light);
    assert_eq!(shown("", "dark"), dark);
    browser.assert_clean();
}

#[test]
fn forced_colours_keep_everything_in_sight() {
    let browser = Browser::start();
    browser.prefers("forced-colors", "active");
    browser.open(LINK);
    browser.settle(LINK);
    for part in ["#sentence", "#figures", "#strength", "#orbit", "[name='x.start']"] {
        let script = "const r = document.querySelector(arguments[0]).getBoundingClientRect(); return r.width > 0 && r.height > 0;";
        assert_eq!(browser.script(script, vec![part.into()]), true, "{part}");
    }
    browser.picture("forced-colours");
    browser.assert_clean();
}
