//! The page says what the core says.

use aftercount_core::answer::answer;
use aftercount_core::demo::DEMO;
use aftercount_core::golden;
use aftercount_tests::browser::{Browser, Screen, native, native_sentence};
use serde_json::{Value, json};

/// Texts that tell the laws, the ends and the names apart.
const LINKS: [&str; 22] = [
    "x.start=600&y.start=400&x.rate=0.04&y.rate=0.05",
    "x.start=600&y.start=400&x.rate=0.04&y.rate=0.09",
    "x.start=400&y.start=600&x.rate=0.09&y.rate=0.04&x.break=0.5&y.break=0.5",
    "x.start=600&y.start=464&x.rate=0.04&y.rate=0.05&x.break=0.3&y.break=0.5",
    "x.start=100&y.start=40&x.rate=0.0002&x.fire=area&y.rate=0.1",
    "x.start=260&y.start=40&x.rate=0.0002&x.fire=area&y.rate=0.1&until=20",
    "x.start=40&y.start=100&x.rate=0.1&y.fire=area&y.rate=0.0002&unit=d",
    "x.fire=area&y.fire=area&x.start=120&y.start=100&x.rate=0.0015&y.rate=0.001",
    "x.fire=area&y.fire=area&x.start=120&y.start=100&x.rate=0.0015&y.rate=0.001&until=10",
    "x.fire=area&y.fire=area&x.start=100&y.start=100&x.rate=0.001&y.rate=0.001&x.break=0.4",
    "x.fire=none&x.start=50&y.start=10&y.rate=0.3",
    "x.fire=none&x.start=50&y.start=10&y.rate=0.3&y.fire=area&x.break=0.9",
    "x.fire=none&y.fire=none&x.start=5&y.start=7",
    "x.fire=none&y.fire=none&x.start=5&y.start=7&until=3",
    "x.start=600&x.lost=150&x.break=0.3&y.start=400&x.rate=0.04&y.rate=0.05",
    "x.start=600&x.lost=300&x.break=0.3&y.start=400&x.rate=0.04&y.rate=0.05",
    "x.start=1e9&y.start=1e9&x.rate=1e-9&y.rate=1.0000001e-9",
    "x.start=1&y.start=1e9&x.rate=1e9&y.rate=1e-9&unit=s",
    "x.start=600&y.start=400&x.rate=0&y.rate=0.05&y.break=0.1",
    "x.name=%C3%98stre%20kolonne&y.name=%E5%8D%97&x.start=12&y.start=9&x.rate=0.3&y.rate=0.2&counted=boats",
    "title=A%20title&note=A%20note&marking=EXERCISE&x.start=32&y.start=23&x.rate=1&y.rate=1&unit=min&paper=dark",
    "#x.start=600&y.start=400&x.rate=0.04&y.rate=0.05&until=2&v=1",
];

#[test]
fn the_file_shows_the_demo_at_first_sight() {
    let browser = Browser::start();
    browser.open("");
    assert_eq!(browser.settle(DEMO), native(DEMO));
    assert_eq!(browser.text("#sentence"), native_sentence(DEMO));
    assert_eq!(browser.text("#demo"), "demo");
    assert!(
        browser
            .text("#short-caution")
            .contains("study, teaching and exercises")
    );
    assert!(
        browser
            .text("#foot")
            .contains("not for directing live operations")
    );
    browser.assert_clean();
    browser.picture("demo");
}

#[test]
fn the_page_states_what_the_core_answers() {
    let browser = Browser::start();
    let golden = (0..10).map(golden::link);
    for link in LINKS.map(str::to_owned).into_iter().chain(golden) {
        browser.open(link.trim_start_matches('#'));
        assert_eq!(browser.settle(&link), native(&link), "{link}");
        assert_eq!(browser.text("#sentence"), native_sentence(&link), "{link}");
        assert!(browser.text("#figures").lines().count() > 3, "{link}");
        browser.assert_clean();
    }
}

#[test]
fn golden_bits_are_the_same_in_the_page() {
    let browser = Browser::start();
    browser.open("");
    browser.settle_on_any();
    let links: Vec<String> = (0..golden::COUNT).map(golden::link).collect();
    // As text: a driver may round numbers.
    let answers = browser.script(
        "return JSON.stringify(arguments[0].map((link) => wasm_bindgen.outcome(link)));",
        vec![json!(links)],
    );
    let answers: Vec<Value> = serde_json::from_str(answers.as_str().expect("a text")).expect("JSON");
    assert_eq!(answers.len(), links.len());
    for (link, inside) in links.iter().zip(&answers) {
        let outside = serde_json::from_str(&answer(link).to_json()).expect("JSON");
        assert_same(&outside, inside, link);
    }
    browser.assert_clean();
}

/// What the core says is in the page too, to the last bit of each number; there are words besides.
#[track_caller]
fn assert_same(outside: &Value, inside: &Value, link: &str) {
    match (outside, inside) {
        // JavaScript writes 600.0 as 600.
        (Value::Number(one), Value::Number(other)) => assert_eq!(one.as_f64(), other.as_f64(), "{link}"),
        (Value::Array(one), Value::Array(other)) => {
            assert_eq!(one.len(), other.len(), "{link}");
            for (one, other) in one.iter().zip(other) {
                assert_same(one, other, link);
            }
        }
        (Value::Object(one), Value::Object(other)) => {
            for (name, part) in one {
                assert_same(part, &other[name], link);
            }
        }
        _ => assert_eq!(outside, inside, "{link}"),
    }
}

#[test]
fn both_pictures_are_drawn_sharp() {
    let browser = Browser::start();
    for ratio in [1.0, 2.0] {
        browser.screen(Screen {
            ratio,
            ..Screen::DESK
        });
        browser.open(LINKS[3]);
        browser.settle(LINKS[3]);
        for id in ["strength", "orbit"] {
            let script = "const c = document.getElementById(arguments[0]), r = c.getBoundingClientRect();
                const d = c.getContext('2d').getImageData(0, 0, c.width, c.height).data;
                const inks = new Set(); let inked = 0;
                for (let i = 0; i < d.length; i += 4) if (d[i + 3] > 0) { inked += 1; inks.add(d[i] + ' ' + d[i + 1] + ' ' + d[i + 2]); }
                return {over: c.width / r.width, inked: inked / (c.width * c.height), inks: inks.size};";
            let drawn = browser.script(script, vec![id.into()]);
            let over = drawn["over"].as_f64().expect("a number");
            assert!(
                over >= 1.99 && over >= ratio - 0.01,
                "{id} has {over} pixels for one of CSS at ratio {ratio}"
            );
            assert!(
                drawn["inked"].as_f64().is_some_and(|part| part > 0.005),
                "{id} is bare: {drawn}"
            );
            assert!(
                drawn["inks"].as_u64().is_some_and(|inks| inks > 3),
                "{id} has too few inks: {drawn}"
            );
        }
        browser.assert_clean();
    }
}

/// Every figure that is a link leads to its line of the working, which opens and takes the focus; the address stays.
#[test]
fn figures_lead_to_their_lines_of_the_working() {
    let browser = Browser::start();
    for link in LINKS.into_iter().chain([DEMO]) {
        browser.open(link);
        browser.settle_on_any();
        let script = "const before = location.href, led = [];
            for (const a of document.querySelectorAll('#figures a')) {
              document.getElementById('working-details').open = false;
              a.click();
              led.push(document.activeElement.id === a.getAttribute('href').slice(1)
                && document.activeElement.checkVisibility() && location.href === before);
            }
            return [led.length, led.every(Boolean)];";
        let led = browser.script(script, vec![]);
        assert!(led[0].as_u64().is_some_and(|count| count >= 3), "{link}: {led}");
        assert_eq!(led[1], true, "{link}: {led}");
        let text = browser.script("return document.getElementById('working-text').value;", vec![]);
        assert!(
            text.as_str()
                .is_some_and(|text| text.contains("loses by") || text.contains("hands over")),
            "{link}: {text}"
        );
    }
    browser.assert_clean();
}

/// Where more of a side can hurt it, that stands beside its strength; elsewhere nothing does.
#[test]
fn more_that_hurts_is_said_beside_the_strength() {
    let browser = Browser::start();
    let power = "x.start=200&x.fire=power&x.p=0.5&x.q=0&x.rate=25&y.start=100&y.fire=power&y.p=1&y.q=2&y.rate=0.0005&v=1";
    for (link, shown) in [(power, [true, false]), (LINKS[0], [false, false])] {
        browser.open(link);
        browser.settle_on_any();
        for (letter, shown) in ["x", "y"].into_iter().zip(shown) {
            let script = "return document.getElementById(arguments[0]).checkVisibility();";
            let id = format!("{letter}.more-hurts");
            assert_eq!(browser.script(script, vec![id.into()]), shown, "{link}: {letter}");
        }
    }
    browser.assert_clean();
}
