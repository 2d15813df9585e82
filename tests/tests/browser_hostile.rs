//! Texts that mean harm, or are only absurd: they neither run, nor hang the page, nor blank it.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::demo::DEMO;
use aftercount_tests::browser::{Browser, changed, native};

const BASE: &str = "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05";

/// What would show that a text ran.
const TRAP: &str = "window.ran = 0; window.alert = window.print = window.open = () => { window.ran += 1; };";

fn hostile() -> Vec<String> {
    let encoded = |text: &str| url::form_urlencoded::byte_serialize(text.as_bytes()).collect::<String>();
    let scripts = [
        "<script>alert(1)</script>",
        "\"><img src=x onerror=alert(1)>",
        "<svg/onload=alert(1)>",
        "javascript:alert(1)",
        "</title><script>alert(1)</script>",
        "<iframe srcdoc='<script>parent.alert(1)</script>'>",
        "{{constructor.constructor('alert(1)')()}}",
        "<style>*{display:none}</style><base href=//x>",
        "&lt;b&gt;",
    ];
    let mut links = Vec::new();
    for script in scripts.map(encoded) {
        links.push(format!("x.name={script}&y.name={script}&{BASE}"));
        links.push(format!("title={script}&{BASE}"));
        links.push(format!("note={script}&counted=b&marking=m&{BASE}"));
        links.push(format!("{script}=1&{BASE}"));
        links.push(format!("x.start={script}&y.start=1&x.rate=1&y.rate=1"));
        links.push(format!("view={script}&paper={script}&unit={script}&{BASE}"));
    }
    links.extend([
        format!("title={}&{BASE}", "a".repeat(17_000)),
        format!("{BASE}&note={}", "%C3%A9".repeat(1000)),
        format!("{BASE}{}", "&a=1".repeat(4000)),
        "&".repeat(16_000),
        "=".repeat(16_000),
        "%".repeat(3000) + "=1",
        format!("x.start={}", "9".repeat(10_000)),
    ]);
    let broken = [
        "x.start=1e308&y.start=1e308&x.rate=1e308&y.rate=1e308",
        "x.start=1e-308&y.start=1e9&x.rate=1e-308&y.rate=1e9",
        "x.start=1e9&y.start=1e-300&x.rate=1e9&y.rate=1e9",
        "x.start=5e-324&y.start=5e-324&x.rate=5e-324&y.rate=5e-324",
        "x.start=1e-300&y.start=1e-300&x.rate=1e-300&y.rate=1e-300&until=1e-300",
        "x.start=1e9&y.start=1e9&x.rate=1e9&y.rate=1e9&x.fire=area&y.fire=area",
        "x.start=1&y.start=1&x.rate=1e-300&y.rate=1e-300",
        "x.start=1&y.start=1&x.rate=1&y.rate=1&until=1e300",
        "x.start=1&y.start=1&x.rate=1&y.rate=1&x.break=1e-300&y.break=1e-17",
        "x.start=-0&y.start=0&x.rate=-1&y.rate=NaN",
        "x.start=Infinity&y.start=1e999&x.rate=0x10&y.rate=1_000",
        "x.start=%FF%FE&y.start=%&x.rate=%zz&y.rate=%c3",
        "x.name=%00%01%1b%7f&y.name=%E2%80%AE%E2%81%A6abc&x.start=6&y.start=4&x.rate=1&y.rate=1",
        "title=%F0%9F%92%A3%EF%BF%BF%F4%8F%BF%BF&x.start=6&y.start=4&x.rate=1&y.rate=1",
        "x.name=%CC%81%CC%81%CC%81%CC%81%CC%81%CC%81%CC%81&x.start=6&y.start=4&x.rate=1&y.rate=1",
        "x.start=1&x.start=2&x.start=3&y.start=1&x.rate=1&y.rate=1",
        "__proto__=1&constructor=2&toString=3&x.start=1",
        "x.start=1..2&y.start=?&x.rate=1..2..3&y.rate=5?1..9&losses=whole&also1.x.start=9&sothat=x.prevails",
        "v=2&x.start=1",
        "x.start=",
        "=",
        "=&=&==",
        "#?#?=",
    ];
    links.extend(broken.map(str::to_owned));
    links
}

#[test]
fn addresses_that_mean_harm_are_shown_as_what_they_are() {
    let browser = Browser::start();
    browser.before_each_page(TRAP);
    for link in hostile() {
        let name: String = link.chars().take(200).collect();
        browser.open(&link);
        // The browser itself escapes some of what it is given: what counts is what the page received.
        let received = browser.script("return location.hash.slice(1);", vec![]);
        let received = received.as_str().expect("an address").to_owned();
        match answer(&received) {
            // No key stands: the demo.
            _ if !received.contains('=') => {
                assert_eq!(browser.settle(DEMO), native(DEMO), "{name}")
            }
            Answer::Outcome { .. } | Answer::Asked { .. } => {
                assert_eq!(browser.settle(&received), native(&received), "{name}")
            }
            Answer::Problems(problems) => {
                browser.wait_state("empty");
                let listed = browser.script(
                    "return document.querySelectorAll('#problem-list > li').length;",
                    vec![],
                );
                assert_eq!(listed, problems.len(), "{name}");
                assert!(!browser.text("#problems").is_empty(), "{name}");
            }
        }
        whole(&browser, &name);
    }
}

/// The page still stands, nothing ran, and nothing was said that should not be.
#[track_caller]
fn whole(browser: &Browser, name: &str) {
    assert_eq!(browser.script("return window.ran;", vec![]), 0, "it ran: {name}");
    let strange = browser.script(
        "return document.querySelectorAll('iframe, img, base, object, embed, main script, main style').length;",
        vec![],
    );
    assert_eq!(strange, 0, "elements came out of the text: {name}");
    assert!(browser.text("#foot").contains("doctrine"), "{name}");
    assert!(!browser.text("#short-caution").is_empty(), "{name}");
    let complaints = browser.complaints();
    assert!(complaints.is_empty(), "{name}: {complaints:?}");
}

#[test]
fn typing_harm_is_only_typing() {
    let browser = Browser::start();
    browser.before_each_page(TRAP);
    let base = format!("{BASE}&v=1");
    browser.open(&base);
    browser.settle(&base);
    let harm = "<img src=x onerror=alert(1)>";
    let mut link = base;
    for name in ["x.name", "y.name", "title", "counted", "note", "marking"] {
        browser.write(name, harm);
        link = changed(&link, name, harm);
        assert_eq!(browser.settle(&link), native(&link), "{name}");
        assert_eq!(browser.value(name), harm);
    }
    assert!(
        browser.text("#sentence").contains(harm),
        "a name is shown as it was typed"
    );
    whole(&browser, "typed");
    browser.picture("typed-harm");

    // More than a text may hold, as a paste brings it.
    browser.script(
        "const note = document.getElementById('note'); note.value = 'long '.repeat(5000);
         note.dispatchEvent(new Event('input', {bubbles: true})); note.dispatchEvent(new Event('change', {bubbles: true}));",
        vec![],
    );
    browser.wait_state("stale");
    whole(&browser, "pasted");
    browser.write("note", "short");
    link = changed(&link, "note", "short");
    assert_eq!(browser.settle(&link), native(&link));
    browser.assert_clean();
}
