//! A number in question, and two, asked and answered on the page.

use aftercount_core::asked::{Chart, Inquiry};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words;
use aftercount_tests::browser::{Browser, Key, changed, native, native_sentence};

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39&y.join=64@4&v=1";

/// The answer of the core in one sentence.
fn answered(link: &str) -> String {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).expect(link);
    let mut inquiry = Inquiry::new(&pairs, &statement).expect("one number is in question");
    while !inquiry.go_on(100) {}
    words::asked::sentence(&statement, &inquiry.answer())
}

fn mapped(link: &str) -> String {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).expect(link);
    let mut chart = Chart::new(&pairs, &statement).expect("two numbers are in question");
    while !chart.go_on(100) {}
    words::map::sentence(&statement, &chart)
}

fn is_shown(browser: &Browser, id: &str) -> bool {
    let script = "return document.getElementById(arguments[0]).checkVisibility();";
    browser.script(script, vec![id.into()]) == true
}

/// Chooses a value of a list that is no part of the text.
fn choose(browser: &Browser, id: &str, value: &str) {
    let script = "const list = document.getElementById(arguments[0]);
        list.value = arguments[1]; list.dispatchEvent(new Event('change', {bubbles: true})); return list.value;";
    let chosen = browser.script(script, vec![id.into(), value.into()]);
    assert_eq!(chosen, value, "the list {id}");
}

/// Whether anything is drawn on a canvas.
fn is_drawn(browser: &Browser, id: &str) -> bool {
    let script = "const c = document.getElementById(arguments[0]);
        return c.width > 0 && c.getContext('2d').getImageData(0, 0, c.width, c.height).data.some(part => part > 0);";
    browser.script(script, vec![id.into()]) == true
}

#[test]
fn a_number_is_asked_for_and_its_outcome_stays() {
    let browser = Browser::opened(LINK);
    browser.settle(LINK);
    assert!(!is_shown(&browser, "asked"));
    browser.write("x.start", "600?");
    let link = changed(LINK, "x.start", "600?");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(browser.text("#sentence"), native_sentence(&link));
    assert_eq!(browser.text("#asked-sentence"), answered(&link));
    // Whoever asks at a field sees the answer beside the outcome, and goes to all of it from there.
    assert_eq!(browser.text("#asked-brief"), answered(&link));
    browser.click("#asked-brief-words");
    let focus = browser.script("return document.activeElement.id;", vec![]);
    assert_eq!(focus, "takes-head");
    assert_eq!(browser.link(), link, "to go there is no change of the text");
    assert!(
        is_shown(&browser, "figures")
            && is_shown(&browser, "pictures")
            && is_drawn(&browser, "asked-picture")
    );
    assert!(browser.text("#asked-story").contains("a crossing"));
    assert!(
        browser
            .text("#asked-where")
            .contains("four times the larger side")
    );
    browser.write("x.start", "600");
    browser.settle(LINK);
    assert!(!is_shown(&browser, "asked"));
    browser.assert_clean();
}

#[test]
fn without_a_number_now_the_sheet_says_the_answer_alone() {
    let link = changed(LINK, "y.join", "?@4");
    let browser = Browser::opened(&link);
    let shown = browser.settle(&link);
    assert_eq!((shown.breaks.as_str(), shown.time), ("", None));
    assert_eq!(browser.text("#sentence"), answered(&link));
    for id in ["figures", "pictures", "working"] {
        assert!(!is_shown(&browser, id), "{id}");
    }
    assert!(is_drawn(&browser, "asked-picture"));
    // Whole again once there is a number.
    browser.write("y.join", "64?@4");
    let link = changed(LINK, "y.join", "64?@4");
    assert_eq!(browser.settle(&link), native(&link));
    assert!(is_shown(&browser, "figures") && is_drawn(&browser, "strength"));
    browser.assert_clean();
}

#[test]
fn what_is_wanted_is_chosen_in_words_and_an_answer_is_put_into_the_field() {
    let link = changed(LINK, "x.start", "600?");
    let browser = Browser::opened(&link);
    browser.settle(&link);
    choose(&browser, "sothat.choice", "x.prevails");
    browser.click("[id='sothat.add']");
    let link = changed(&link, "sothat", "x.prevails");
    browser.settle(&link);
    assert_eq!(browser.value("sothat"), "x.prevails");
    assert_eq!(browser.text("[id='sothat.echo']"), "So that Ondrel prevails.");
    assert_eq!(browser.text("#asked-sentence"), answered(&link));
    assert_eq!(browser.shown().breaks, "x");
    browser.click("#asked-put button");
    let put = changed(&link, "x.start", "604?");
    let shown = browser.settle(&put);
    assert_eq!(
        (browser.value("x.start").as_str(), shown.breaks.as_str()),
        ("604?", "y")
    );
    // One step back.
    browser.click("#undo");
    assert_eq!(browser.settle(&link).breaks, "x");
    browser.write("sothat", "x.prevails,x.wins");
    browser.wait_text("[id='sothat.problem']", "Condition 2: x.wins: is no condition");
    browser.assert_clean();
}

/// What was asked is read back from an opened text, also where nothing meets it.
#[test]
fn questions_are_read_back_from_an_opened_text() {
    let browser = Browser::opened(LINK);
    for (key, text, sothat) in [
        ("x.start", "600?500..700", ""),
        ("y.rate", "0.06?", "y.prevails,y.end:300.."),
        ("y.join", "64@4?", "y.prevails"),
        ("x.start", "?100..400", "x.end:350.."),
    ] {
        let link = changed(&changed(LINK, key, text), "sothat", sothat);
        browser.open(&link);
        let shown = browser.settle(&link);
        assert_eq!(shown, native(&link), "{link}");
        assert_eq!(browser.text("#asked-sentence"), answered(&link), "{link}");
        assert_eq!(browser.value(key), text);
        assert_eq!(browser.value("sothat"), sothat);
        assert_eq!(browser.link(), link);
    }
    assert!(browser.text("#asked-sentence").contains("the nearest, 400,"));
    browser.assert_clean();
}

#[test]
fn two_questions_make_a_map_that_is_read_and_put() {
    let link = changed(&changed(LINK, "x.start", "600?"), "y.start", "400?");
    let browser = Browser::opened(&link);
    browser.settle(&link);
    assert_eq!(browser.text("#map-sentence"), mapped(&link));
    assert!(!is_shown(&browser, "asked") && is_drawn(&browser, "map") && is_drawn(&browser, "map-over"));
    assert!(
        browser
            .text("#map-reading")
            .starts_with("Ondrel's strength at the start 600,")
    );
    // Keys move the place; Home brings the numbers as they are.
    for _ in 0..3 {
        browser.press("#map-at", Key::Right);
    }
    let reading = browser.text("#map-reading");
    assert!(
        reading.starts_with("Ondrel's strength at the start 672,"),
        "{reading}"
    );
    browser.press("#map-at", Key::Home);
    assert!(
        browser
            .text("#map-reading")
            .starts_with("Ondrel's strength at the start 600,")
    );
    // The pointer too; a click puts the place into both fields.
    browser.hover("#map-at", 0.7, 0.6);
    let reading = browser.text("#map-reading");
    assert!(
        !reading.starts_with("Ondrel's strength at the start 600,"),
        "{reading}"
    );
    browser.click("#map-at");
    let shown = browser.settle_on_any();
    let (x, y) = (browser.value("x.start"), browser.value("y.start"));
    assert!(
        x.ends_with('?') && y.ends_with('?') && x != "600?" && y != "400?",
        "{x} {y}"
    );
    let put = changed(&changed(&link, "x.start", &x), "y.start", &y);
    assert_eq!(shown.breaks, native(&put).breaks);
    // Enter does the same.
    browser.press("#map-at", Key::Left);
    browser.press("#map-at", Key::Enter);
    browser.settle_on_any();
    assert_ne!(browser.value("x.start"), x);
    // A second reading is chosen, and drawn.
    choose(&browser, "map-second", "what is left of Ondrel");
    assert!(is_drawn(&browser, "map"));
    browser.assert_clean();
}

/// Of two questions with what is wanted: the field for it is there, the map says where all of it holds, and whether it does at
/// the place that is read; the sentence and the pictures go on paper and into a file.
#[test]
fn what_is_wanted_of_two_numbers_is_marked_and_read() {
    let link = changed(&changed(LINK, "x.start", "600?"), "y.start", "400?");
    let browser = Browser::opened(&link);
    browser.settle(&link);
    assert!(is_shown(&browser, "sothat") && !is_shown(&browser, "map-key-met"));
    choose(&browser, "sothat.choice", "x.prevails");
    browser.click("[id='sothat.add']");
    let link = changed(&link, "sothat", "x.prevails");
    browser.settle(&link);
    assert_eq!(browser.text("#map-sentence"), mapped(&link));
    assert!(
        browser
            .text("#map-sentence")
            .contains("what is wanted, that Ondrel prevails, holds on ")
    );
    assert!(is_shown(&browser, "map-key-met"));
    assert!(
        browser
            .text("#map-reading")
            .contains("Not all that is wanted holds here: it leaves Vessary ")
    );
    for _ in 0..20 {
        browser.press("#map-at", Key::Right);
    }
    let reading = browser.text("#map-reading");
    assert!(reading.ends_with("All that is wanted holds here."), "{reading}");
    let table = browser.script(
        "return document.getElementById('map-table').textContent;",
        Vec::new(),
    );
    assert!(
        table
            .as_str()
            .is_some_and(|table| table.contains("Vessary breaks first, as wanted")),
        "{table}"
    );
    let put = "dispatchEvent(new Event('beforeprint')); return document.querySelector('#map ~ .drawn svg title')?.textContent;";
    let printed = browser.script(put, Vec::new());
    assert_eq!(printed, browser.text("#map-words").as_str());
    browser.script("dispatchEvent(new Event('afterprint'));", Vec::new());
    browser.write("sothat", "x.wins");
    browser.wait_text("[id='sothat.problem']", "is no condition");
    browser.assert_clean();
}

/// A legend names what is in its picture, and no more.
#[test]
fn a_legend_names_what_is_there() {
    let one = changed(LINK, "x.start", "600?400..900");
    let two = changed(&one, "y.start", "400?300..500");
    let browser = Browser::start();
    for (asked, wanted, key, shown) in [
        (&one, "x.prevails", "met-key", true),
        (&one, "x.end:2000..", "met-key", false),
        (&two, "x.prevails", "map-key-met", true),
        (&two, "x.end:2000..", "map-key-met", false),
        (&two, "x.prevails", "map-key-flip", true),
        (&changed(&two, "y.rate", "9"), "x.prevails", "map-key-flip", false),
    ] {
        let link = changed(asked, "sothat", wanted);
        browser.open(&link);
        browser.settle(&link);
        assert_eq!(is_shown(&browser, key), shown, "{key} of {link}");
    }
    browser.assert_clean();
}

/// Three questions are a problem beside the last of them.
#[test]
fn a_third_question_is_refused_in_place() {
    let link = changed(&changed(LINK, "x.start", "600?"), "y.start", "400?");
    let browser = Browser::opened(&link);
    browser.settle(&link);
    browser.write("y.rate", "0.06?");
    browser.wait_text("[id='y.rate.problem']", "one number in question too many");
    browser.wait_state("stale");
    browser.assert_clean();
}
