//! What helps while an engagement is being filled in: the buttons of a number, a rate by what it takes, another unit.

use aftercount_tests::browser::{Browser, Key, Screen, changed, native};
use serde_json::json;

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&\
                    y.break=0.5&y.join=64@4,20@6&phase1.from=3&phase1.x.rate=0.05&v=1";

/// Gives a field the focus as a click does.
fn enter(browser: &Browser, id: &str) {
    browser.click(&format!("[id='{id}']"));
}

/// Which element has the focus.
fn focus(browser: &Browser) -> String {
    let id = browser.script("return document.activeElement.id;", vec![]);
    id.as_str().unwrap_or_default().to_owned()
}

/// Keeps where everything in the form stands, or says what stands elsewhere than it was kept.
fn moved(browser: &Browser, keep: bool) -> serde_json::Value {
    let script = "const places = Object.fromEntries([...document.querySelectorAll('form *:not(.hand, .hand *)')]
          .filter((e) => e.checkVisibility()).map((e, i) => { const r = e.getBoundingClientRect();
            return [i + e.tagName + e.id, [r.left, r.top + scrollY, r.width, r.height].map(Math.round).join(' ')]; }));
        if (arguments[0]) window.kept = places;
        return Object.keys(places).filter((k) => places[k] !== window.kept[k]).slice(0, 5);";
    browser.script(script, vec![json!(keep)])
}

#[test]
fn a_focused_number_has_two_buttons_and_nothing_moves() {
    let browser = Browser::opened(LINK);
    browser.script("document.getElementById('x.more').open = true;", vec![]);
    browser.click("#sentence");
    moved(&browser, true);
    let seen = "const b = document.getElementById('hand.ask'); return b !== null && b.checkVisibility();";
    assert_eq!(browser.script(seen, vec![]), false, "nothing has the focus");
    for id in [
        "x.start",
        "x.rate",
        "y.break",
        "x.wastage",
        "until",
        "y.join.1.size",
        "y.join.2.time",
        "phase1.from",
        "phase1.x.rate",
    ] {
        enter(&browser, id);
        assert_eq!(focus(&browser), id);
        let label = browser.script("return document.getElementById('hand.ask').ariaLabel;", vec![]);
        let label = label.as_str().expect("a label").to_owned();
        assert!(
            label.starts_with("ask: ") && label.contains("What must it be"),
            "{label}"
        );
        // Within the window, and on top of what it lies over.
        let on_top = "return [...document.querySelectorAll('.hand button')].every((b) => {
            const r = b.getBoundingClientRect(); const x = r.left + r.width / 2, y = r.top + r.height / 2;
            return r.left >= 0 && r.right <= innerWidth && document.elementFromPoint(x, y) === b; });";
        assert_eq!(browser.script(on_top, vec![]), true, "{id}");
        assert_eq!(moved(&browser, false), json!([]), "something moved for {id}");
    }
    for id in ["x.name", "note", "y.join.add", "y.fire"] {
        browser.script("document.getElementById(arguments[0]).focus();", vec![json!(id)]);
        assert_eq!(browser.script(seen, vec![]), false, "{id} is no number");
    }
    browser.assert_clean();
}

/// The label says what is being filled in, so its buttons cover nothing of it; nor do they stick out, or lie under anything.
#[test]
fn the_buttons_cover_no_label_of_their_own() {
    let link = "x.start=600&x.fire=search&x.half=30&x.rate=0.04&x.break=0.3&x.flow=5@2/8&y.start=464&y.fire=power&y.p=1&\
                y.q=0.5&y.rate=0.05&y.join=64@4,20@6&phase1.from=3&phase1.x.rate=0.05&v=1";
    let browser = Browser::start();
    for (screen, large) in [
        (Screen::DESK, false),
        (Screen::DESK, true),
        (Screen::SMALL, false),
    ] {
        browser.screen(screen);
        browser.open(link);
        browser.settle(link);
        if large {
            browser.text_size(2.0, false);
        }
        let script = "
            document.querySelectorAll('#engagement details').forEach((d) => { d.open = true; });
            const wrong = []; let seen = 0;
            for (const field of document.querySelectorAll('#engagement input')) {
              if (!field.checkVisibility()) continue;
              field.focus();
              const buttons = document.querySelector('.hand > span');
              if (!buttons) continue;
              seen += 1;
              const cell = field.closest('.rows:not(.changes) td');
              const label = document.querySelector(`label[for='${field.id}']`) ||
                (cell && cell.closest('table').querySelectorAll('th')[cell.cellIndex]);
              const a = buttons.getBoundingClientRect();
              if (a.left < 0 || a.right > innerWidth) wrong.push(`${field.id}: sticks out`);
              const b = label ? label.getBoundingClientRect() : {right: 0};
              if (a.left < b.right - 1 && b.left < a.right - 1 && a.top < b.bottom - 1 && b.top < a.bottom - 1)
                wrong.push(`${field.id}: its label is covered`);
              buttons.scrollIntoView({block: 'center'});
              for (const button of buttons.children) {
                const r = button.getBoundingClientRect();
                const top = document.elementFromPoint(r.left + r.width / 2, r.top + r.height / 2);
                if (top !== button) wrong.push(`${field.id}: ${button.innerText} lies under ${top && top.outerHTML.slice(0, 80)}`);
              }
            }
            return [seen, wrong];";
        let found = browser.script(script, vec![]);
        assert!(found[0].as_u64() > Some(25), "{screen:?}: {found}");
        assert_eq!(found[1], json!([]), "{screen:?}, large: {large}");
        browser.picture(&format!("buttons-{}-{large}", screen.width));
    }
    browser.assert_clean();
}

#[test]
fn ask_and_in_doubt_write_where_the_number_stands() {
    let browser = Browser::opened(LINK);
    for (id, button, key, text) in [
        ("x.start", "hand.ask", "x.start", "600?"),
        ("y.rate", "hand.in-doubt", "y.rate", "0.037..0.063"),
        ("x.break", "hand.in-doubt", "x.break", "0.22..0.38"),
        ("y.join.2.time", "hand.ask", "y.join", "64@4,20@6?"),
        ("y.join.1.size", "hand.in-doubt", "y.join", "48..80@4,20@6"),
        ("phase1.from", "hand.ask", "phase1.from", "3?"),
        ("until", "hand.ask", "until", "?"),
    ] {
        browser.open(LINK);
        browser.settle(LINK);
        enter(&browser, id);
        browser.click(&format!("[id='{button}']"));
        assert_eq!(browser.link(), changed(LINK, key, text), "{id}");
        assert_eq!(focus(&browser), id, "the focus is back in the field");
        browser.click("#undo");
        browser.settle(LINK);
        assert_eq!(browser.link(), LINK, "one step back undoes it");
    }
    browser.assert_clean();
}

/// With the keyboard alone: Tab from the field to the buttons, arrows between them, Escape back.
#[test]
fn the_buttons_are_reached_by_keys() {
    let browser = Browser::opened(LINK);
    browser.script("document.getElementById('x.start').focus();", vec![]);
    browser.leave();
    assert_eq!(focus(&browser), "hand.ask");
    let name = "return document.activeElement.getAttribute('aria-label');";
    let name = browser.script(name, vec![]);
    let name = name.as_str().expect("it has a name").to_owned();
    assert!(name.starts_with("ask: Ondrel: Strength at the start. "), "{name}");
    browser.press("[id='hand.ask']", Key::Right);
    assert_eq!(focus(&browser), "hand.in-doubt");
    browser.press("[id='hand.in-doubt']", Key::Left);
    browser.press("[id='hand.ask']", Key::Right);
    browser.press("[id='hand.in-doubt']", Key::Escape);
    assert_eq!(focus(&browser), "x.start");
    browser.leave();
    browser.leave();
    assert_eq!(focus(&browser), "x.fire", "on to the next field");
    browser.script("document.getElementById('x.rate').focus();", vec![]);
    browser.leave();
    browser.press("[id='hand.ask']", Key::Right);
    browser.press("[id='hand.in-doubt']", Key::Enter);
    assert_eq!(
        (browser.value("x.rate").as_str(), focus(&browser).as_str()),
        ("0.03..0.05", "x.rate")
    );
    browser.assert_clean();
}

#[test]
fn a_rate_is_written_from_what_it_takes_at_the_start() {
    let browser = Browser::opened(LINK);
    browser.click("[id='x.share.open']");
    assert_eq!(focus(&browser), "x.share");
    let value = || browser.script("return document.getElementById('x.share').value;", vec![]);
    // 0.04 of 600 on 464.
    assert_eq!(value(), "5.17241");
    assert!(
        browser
            .text("[id='x.share.label']")
            .starts_with("Per cent of Vessary lost per")
    );
    let script = "const e = document.getElementById('x.share'); e.value = arguments[0];
                  e.dispatchEvent(new Event('input', {bubbles: true}));";
    browser.script(script, vec![json!("7.5")]);
    let link = changed(LINK, "x.rate", "0.058");
    assert_eq!(browser.settle(&link), native(&link));
    assert_eq!(
        (browser.value("x.rate").as_str(), value()),
        ("0.058", json!("7.5"))
    );
    assert!(
        browser
            .text("[id='x.rate.echo']")
            .replace('\u{202f}', " ")
            .contains("7.5 % of Vessary")
    );
    browser.script(script, vec![json!("seven")]);
    browser.wait_text("[id='x.share.problem']", "write a number");
    assert_eq!(
        browser.value("x.rate"),
        "seven %",
        "no rate stands that was not meant"
    );
    assert_eq!(
        browser.text("[id='x.rate.problem']"),
        "seven %: write a number, such as 600 or 0.04."
    );
    browser.script(script, vec![json!("")]);
    assert_eq!(browser.value("x.rate"), "");
    browser.script(script, vec![json!("7.5")]);
    assert_eq!(browser.settle(&link), native(&link));
    browser.write("x.start", "");
    browser.script(script, vec![json!("7")]);
    browser.wait_text("[id='x.share.problem']", "x.start is missing");
    browser.click("[id='x.share.open']");
    assert_eq!(browser.text("[id='x.share.field']"), "");
    browser.assert_clean();
}

#[test]
fn another_unit_offers_to_restate_every_number() {
    let browser = Browser::opened(LINK);
    browser.choose("unit", "d");
    let kept = changed(LINK, "unit", "d");
    assert_eq!(browser.settle(&kept), native(&kept));
    browser.wait_text("[id='unit.changed']", "kept its number");
    browser.picture("unit-offer");
    browser.click("[id='unit.convert']");
    let restated = "x.name=Ondrel&x.start=600&x.rate=0.96&x.break=0.3&y.name=Vessary&y.start=464&y.rate=1.2&y.break=0.5&\
                    y.join=64@0.16666666666666666,20@0.25&phase1.from=0.125&phase1.x.rate=1.2&v=1&unit=d";
    let restated = restated.replace("&v=1&unit=d", "&unit=d&v=1");
    assert_eq!(browser.settle(&restated), native(&restated));
    assert_eq!(browser.link(), restated);
    assert_eq!(browser.value("x.rate"), "0.96");
    assert_eq!(
        (browser.text("[id='unit.changed']"), focus(&browser)),
        (String::new(), "unit".into())
    );
    let (hours, days) = (native(LINK), native(&restated));
    assert!((hours.time.unwrap_or(0.0) / days.time.unwrap_or(1.0) - 24.0).abs() < 1e-11);
    browser.click("#undo");
    browser.settle(&kept);
    browser.click("#undo");
    browser.settle(LINK);

    // A number that is written in between is in the new unit: the offer is over.
    browser.choose("unit", "min");
    browser.wait_text("[id='unit.changed']", "kept its number");
    browser.write("y.rate", "0.06");
    assert_eq!(browser.text("[id='unit.changed']"), "");
    browser.choose("unit", "wk");
    browser.click("[id='unit.keep']");
    assert_eq!(browser.text("[id='unit.offer']"), "");
    assert_eq!(browser.value("y.rate"), "0.06");
    // What cannot be read cannot be restated.
    browser.write("until", "0,5");
    browser.choose("unit", "h");
    browser.click("[id='unit.convert']");
    browser.wait_text("[id='unit.changed']", "Nothing was converted");
    assert!(browser.text("[id='unit.changed']").contains("until"));
    browser.assert_clean();
}

/// What has the focus is in sight, also where the sentence waits at the window's edge: nothing of it is covered.
#[test]
fn the_focus_is_never_under_the_sentence() {
    let browser = Browser::start();
    let long = changed(
        &changed(LINK, "x.name", &"Ondrel of the upper river ".repeat(2)),
        "title",
        "A long day",
    );
    for screen in [
        Screen {
            height: 600,
            ..Screen::DESK
        },
        Screen::SMALL,
    ] {
        browser.screen(screen);
        browser.open(&long);
        browser.settle(&long);
        let script = "const said = document.getElementById('said'); const covered = [];
            document.querySelectorAll('details').forEach((d) => { d.open = true; });
            for (const e of document.querySelectorAll('form :is(input, select, textarea, button, summary)')) {
              if (!e.checkVisibility()) continue;
              e.focus();
              const a = e.getBoundingClientRect(), b = said.getBoundingClientRect();
              if (a.bottom > b.top + 1 && a.top < b.bottom - 1 && a.right > b.left && a.left < b.right) covered.push(e.id + ' ' + a.top + ' ' + b.top);
            }
            return covered;";
        assert_eq!(browser.script(script, vec![]), json!([]), "at {screen:?}");
    }
    browser.assert_clean();
}

/// A rate of another law is another thing: what stands in the open entry is what was meant, so the rate is worked out for it.
#[test]
fn a_rate_that_was_entered_as_per_cent_follows_the_law() {
    let browser = Browser::opened(LINK);
    let share = || browser.script("return document.getElementById('x.share').value;", vec![]);
    let kept = || browser.text("[id='x.rate.kept']");
    let enter = "const e = document.getElementById('x.share'); e.value = arguments[0];
                 e.dispatchEvent(new Event('input', {bubbles: true}));";
    browser.click("[id='x.share.open']");
    browser.script(enter, vec![json!("6")]);
    let aimed = changed(LINK, "x.rate", "0.0464");
    assert_eq!(browser.settle(&aimed), native(&aimed));
    // 6 % of 464 by 0.0464 of each of 600; by area fire 0.06 of what is left by 600.
    browser.choose("x.fire", "area");
    let area = changed(&changed(&aimed, "x.fire", "area"), "x.rate", "0.0001");
    assert_eq!(browser.settle(&area), native(&area));
    assert_eq!(
        (share(), browser.value("x.rate").as_str()),
        (json!("6"), "0.0001")
    );
    assert_eq!(kept(), "", "it was written for this law");
    // What the law needs is missing: what was meant stands, and the number is still that of the other law.
    // At once, and not by the laws between.
    browser.choose_value("x.fire", "search");
    browser.wait_text("#problem-list", "x.half");
    assert_eq!(
        (share(), browser.value("x.rate").as_str()),
        (json!("6"), "0.0001")
    );
    assert!(kept().contains("its unit is not"));
    browser.write("x.half", "464");
    assert_eq!(
        (share(), browser.value("x.rate").as_str()),
        (json!("6"), "0.0928")
    );
    assert_eq!(kept(), "");
    let search = changed(&changed(&area, "x.fire", "search"), "x.rate", "0.0928");
    let search = changed(&search, "x.half", "464");
    assert_eq!(browser.settle(&search), native(&search));
    // One choice was one step.
    browser.click("#undo");
    browser.click("#undo");
    browser.settle(&area);

    // A number that was typed as a rate is kept, and the page says so, until another is written by whatever means.
    browser.write("x.rate", "0.05");
    browser.choose_value("x.fire", "aimed");
    assert_eq!(browser.value("x.rate"), "0.05");
    assert!(kept().contains("its unit is not"));
    let again = changed(&changed(&area, "x.fire", "aimed"), "x.rate", "0.05");
    assert_eq!(browser.settle(&again), native(&again));
    browser.choose("unit", "d");
    browser.click("[id='unit.convert']");
    assert_eq!(browser.value("x.rate"), "1.2");
    assert!(
        kept().contains("its unit is not"),
        "restated, and still of another law"
    );
    // Undo and Redo go over texts that were shown: what was true of each is true again.
    let daily = browser.link();
    for (button, text, is_kept) in [
        ("#undo", "d", true),
        ("#undo", "h", true),
        ("#undo", "area", false),
        ("#redo", "aimed", true),
        ("#redo", "d", true),
        ("#redo", "1.2", true),
    ] {
        let before = browser.link();
        browser.click(button);
        let moved = format!(
            "return document.getElementById('text').value !== {};",
            json!(before)
        );
        browser.wait(&format!("{button} to {text}"), &moved);
        let fields = ["unit", "x.fire", "x.rate"].map(|name| browser.value(name));
        assert!(fields.iter().any(|field| field == text), "{fields:?}");
        assert_eq!(kept().contains("its unit is not"), is_kept, "{button} to {text}");
    }
    assert_eq!(browser.link(), daily);
    browser.reload();
    browser.settle_on_any();
    assert!(kept().contains("its unit is not"), "a reload forgets nothing");
    // Who opens the same text has a whole from somebody who chose law and rate together.
    browser.open(&daily);
    browser.settle_on_any();
    assert_eq!(kept(), "");
    browser.click("[id='x.share.open']");
    browser.script(enter, vec![json!("6")]);
    assert_eq!(kept(), "");
    browser.assert_clean();
}
