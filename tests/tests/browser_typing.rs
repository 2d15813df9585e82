//! Everything follows what is typed.

use aftercount_tests::browser::{Browser, Key, changed, native, native_sentence};

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5&v=1";

#[test]
fn every_field_changes_the_answer() {
    let browser = Browser::opened(LINK);
    let mut link = LINK.to_owned();
    let fields = [
        ("x.start", "700"),
        ("y.start", "500"),
        ("x.rate", "0.05"),
        ("y.rate", "6e-2"),
        ("x.break", "0.25"),
        ("y.break", "0.4"),
        ("until", "6"),
        ("x.name", "Tarn"),
        ("y.name", "Corrow"),
        ("counted", "boats"),
        ("title", "A crossing"),
        ("marking", "EXERCISE"),
        ("note", "Rates as agreed"),
    ];
    for (name, text) in fields {
        browser.write(name, text);
        link = changed(&link, name, text);
        assert_eq!(browser.settle(&link), native(&link), "after {name}");
        assert_eq!(browser.text("#sentence"), native_sentence(&link), "after {name}");
        assert_eq!(browser.link(), link);
    }
    for (name, value) in [("x.fire", "area"), ("y.fire", "none"), ("unit", "d")] {
        browser.choose(name, value);
        link = changed(&link, name, value);
        assert_eq!(browser.settle(&link), native(&link), "after {name}");
        assert_eq!(browser.link(), link);
    }
    assert_eq!(browser.text("#shown-title"), "A crossing");
    assert_eq!(browser.text("#shown-marking"), "EXERCISE");
    browser.assert_clean();
}

#[test]
fn every_keystroke_counts() {
    let browser = Browser::opened(LINK);
    // 6, 60, 600, 6000: each is an engagement of its own, and the last one stands.
    browser.write("x.start", "6");
    let mut link = changed(LINK, "x.start", "6");
    assert_eq!(browser.settle(&link), native(&link));
    for digits in ["60", "600", "6000"] {
        browser.write_on("x.start", "0");
        link = changed(LINK, "x.start", digits);
        assert_eq!(browser.settle(&link), native(&link));
    }
    browser.press("[name='x.start']", Key::Backspace);
    link = changed(LINK, "x.start", "600");
    assert_eq!(browser.settle(&link), native(&link));
    browser.assert_clean();
}

#[test]
fn a_problem_stands_beside_its_field_and_the_last_figures_stay() {
    let browser = Browser::opened(LINK);
    // When it was typed, and when the problem was first seen.
    browser.script(
        "const seen = document.getElementById('y.rate.problem');
         addEventListener('input', () => { window.typedAt = performance.now(); }, true);
         new MutationObserver(() => { if (!seen.hidden && !window.seenAt) window.seenAt = performance.now(); })
           .observe(seen, {attributes: true});",
        vec![],
    );
    browser.write("y.rate", "0,04");
    browser.wait_text("[id='y.rate.problem']", "0,04");
    let waited = browser.script("return window.seenAt - window.typedAt;", vec![]);
    assert!(
        waited.as_f64().is_some_and(|waited| waited > 550.0),
        "it was shown after {waited} ms"
    );
    let problem = browser.text("[id='y.rate.problem']");
    assert!(
        problem.contains("write 0.04"),
        "{problem:?} does not say how to write it"
    );

    let stale = browser.wait_state("stale");
    assert_eq!(stale.settled, None, "the pictures do not match what is typed");
    // On the way to `0,04` stood `0`, which is a rate.
    let last = changed(LINK, "y.rate", "0");
    let good = native(&last);
    assert_eq!(
        (stale.breaks, stale.time, stale.x_end),
        (good.breaks, good.time, good.x_end)
    );
    assert_eq!(browser.text("#sentence"), native_sentence(&last));
    assert!(browser.text("#stale").contains("not for what is typed now"));
    assert_eq!(
        browser.script(
            "return document.getElementById('y.rate').getAttribute('aria-invalid');",
            vec![]
        ),
        "true"
    );
    assert!(browser.text("#problems").contains("write 0.04"));
    assert_eq!(browser.value("y.rate"), "0,04", "what was typed is left alone");
    browser.picture("problem");

    browser.write("y.rate", "0.06");
    let link = changed(LINK, "y.rate", "0.06");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(browser.text("[id='y.rate.problem']"), "");
    assert_eq!(browser.text("#problems"), "");
    assert_eq!(browser.text("#stale"), "");
    browser.assert_clean();
}

#[test]
fn leaving_a_field_shows_its_problem_at_once_and_enter_submits_nothing() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "1,000");
    browser.leave();
    browser.wait_text("[id='x.start.problem']", "write 1000");
    browser.write("x.start", "1000");
    browser.press("[name='x.start']", Key::Enter);
    let link = changed(LINK, "x.start", "1000");
    assert_eq!(browser.settle(&link), native(&link));
    assert!(
        browser.address().ends_with(&format!("#{link}")),
        "{}",
        browser.address()
    );
    browser.assert_clean();
}

#[test]
fn blank_form_asks_for_what_is_missing_and_nothing_more() {
    let browser = Browser::opened(LINK);
    browser.click("#blank");
    let empty = browser.wait_state("empty");
    assert_eq!((empty.settled, empty.time), (None, None));
    assert_eq!(browser.value("x.start"), "");
    assert_eq!(
        browser.text("#empty-words"),
        "Two sides, two strengths, two rates: then the outcome appears here."
    );
    assert_eq!(
        browser.text("#problems"),
        "",
        "what is not yet filled in is no problem"
    );
    for (name, text) in [("x.start", "30"), ("y.start", "20"), ("x.rate", "0.1")] {
        browser.write(name, text);
    }
    assert_eq!(browser.shown().state, "empty");
    browser.write("y.rate", "0.2");
    let link = "x.start=30&y.start=20&x.rate=0.1&y.rate=0.2&v=1";
    assert_eq!(browser.settle(link), native(link));
    assert_eq!(browser.text("#sentence"), native_sentence(link));
    browser.assert_clean();
}

#[test]
fn the_reading_line_answers_keys_mouse_and_finger() {
    let browser = Browser::opened(LINK);
    let reading = || {
        let script = "const r = document.getElementById('reading');
            return [r.ariaValueNow, r.ariaValueMin, r.ariaValueMax, r.ariaValueText];";
        let read = browser.script(script, vec![]);
        let number = |index: usize| {
            read[index]
                .as_str()
                .and_then(|text| text.parse::<f64>().ok())
                .expect("a number")
        };
        (
            number(0),
            number(1),
            number(2),
            read[3].as_str().expect("a spoken value").to_owned(),
        )
    };
    browser.press("#reading", Key::Home);
    let (now, least, most, words) = reading();
    assert!(now == least && least == 0.0 && most > 8.0, "{now} {least} {most}");
    assert!(
        words.contains("Ondrel 600") && words.contains("Vessary 464"),
        "{words}"
    );
    browser.press("#reading", Key::Right);
    let step = reading().0;
    assert!(step > least && step < most, "a step leads to {step}");
    browser.press("#reading", Key::Left);
    assert_eq!(reading().0, least);
    browser.press("#reading", Key::PageUp);
    let (event, _, _, words) = reading();
    let time = native(LINK).time.expect("a side breaks");
    assert!(
        (event - time).abs() < 1e-3 * time,
        "the first event is the break at {time}, not {event}"
    );
    assert!(words.contains("Ondrel 420"), "{words}");
    browser.press("#reading", Key::End);
    assert_eq!(reading().0, most);
    browser.press("#reading", Key::PageDown);
    browser.press("#reading", Key::PageDown);
    assert_eq!(reading().0, least);

    browser.hover("#strength", 0.5, 0.5);
    let middle = browser.wait(
        "the mouse",
        &format!("const n = +document.getElementById('reading').ariaValueNow; return n < {most} && n;"),
    );
    assert!(
        middle
            .as_f64()
            .is_some_and(|at| at > 0.3 * most && at < 0.7 * most),
        "the middle reads {middle} of {most}"
    );
    assert!(browser.text("#reading-words").contains("Ondrel"));

    browser.swipe("#strength", (0.5, 0.5), (0.3, 0.5));
    let earlier =
        format!("const n = +document.getElementById('reading').ariaValueNow; return n < {middle} && n;");
    browser.wait("the finger", &earlier);
    browser.assert_clean();
}

/// What only some laws need is in sight only then, or where it has a problem; the text keeps it all the while.
#[test]
fn fields_of_a_law_come_and_go_and_keep_their_text() {
    let browser = Browser::opened(LINK);
    let in_sight = |name: &str| {
        let script = "return document.getElementsByName(arguments[0])[0].checkVisibility();";
        browser.script(script, vec![name.into()]) == true
    };
    assert!(!in_sight("x.half") && !in_sight("x.p") && !in_sight("x.q"));
    browser.choose("x.fire", "search");
    assert!(in_sight("x.half") && !in_sight("x.p") && !in_sight("y.half"));
    browser.write("x.half", "80");
    let search = changed(&changed(LINK, "x.fire", "search"), "x.half", "80");
    assert_eq!(browser.settle(&search), native(&search));
    let kept = "return !document.getElementById('x.rate.kept').hidden;";
    assert_eq!(
        browser.script(kept, vec![]),
        true,
        "the rate was written for aimed fire"
    );
    browser.choose("x.fire", "power");
    assert!(!in_sight("x.half") && in_sight("x.p") && in_sight("x.q"));
    browser.write("x.p", "0.7");
    browser.write("x.q", "0.2");
    let power = changed(
        &changed(&changed(&search, "x.fire", "power"), "x.p", "0.7"),
        "x.q",
        "0.2",
    );
    assert_eq!(browser.settle(&power), native(&power));
    assert_eq!(browser.value("x.half"), "80");
    assert_eq!(browser.link(), power);
    browser.assert_clean();
}

#[test]
fn a_hidden_field_with_a_problem_comes_into_sight() {
    let browser = Browser::start();
    browser.open("x.start=600&x.rate=0.04&x.half=%ZZ&y.start=400&y.rate=0.05&v=1");
    browser.wait_text("[id='x.half.problem']", "%25");
    browser.assert_clean();
}

/// A point before three digits may have been meant to mark thousands: how it is read is said, and it is no problem.
#[test]
fn a_point_before_three_digits_is_said_to_be_a_decimal_one() {
    let browser = Browser::opened(LINK);
    browser.write("x.start", "12.500");
    let link = changed(LINK, "x.start", "12.500");
    assert_eq!(browser.settle(&link), native(&link));
    let words = "12.500 is read as 12.5: if 12500 is meant, write it without the point.";
    browser.wait_text("[id='x.start.points']", words);
    assert_eq!(browser.text("#problems"), "");
    let field = "const field = document.getElementById('x.start');
        return [field.getAttribute('aria-invalid'), field.getAttribute('aria-describedby').split(' ').includes('x.start.points')];";
    assert_eq!(
        browser.script(field, vec![]),
        serde_json::json!([null, true]),
        "it is told with the field"
    );
    browser.picture("point");
    // It goes at once, and on the way to another number it does not come.
    browser.write_on("x.start", "5");
    assert_eq!(browser.text("[id='x.start.points']"), "");
    // In a list by its row, in a phase beside its field; also as it was opened.
    let opened = changed(LINK, "y.join", "64@4,1.200@6");
    let opened = changed(&changed(&opened, "phase1.from", "2"), "phase1.x.rate", "1.025");
    browser.open(&opened);
    browser.settle(&opened);
    assert!(
        browser
            .text("[id='y.join.points']")
            .starts_with("Row 2: 1.200 is read as 1.2")
    );
    assert!(
        browser
            .text("[id='phase1.x.rate.points']")
            .starts_with("1.025 is read as 1.025")
    );
    // More than all cannot be lost, so nobody has meant that.
    browser.write("x.break", "1.000");
    browser.leave();
    assert_eq!(
        browser.script("return document.getElementById('x.break.points');", vec![]),
        serde_json::json!(null)
    );
    browser.assert_clean();
}
