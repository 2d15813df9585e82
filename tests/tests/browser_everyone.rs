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

/// A number in question, which has a value now, one that has none, and two at once, which make a map.
const ASKED: [&str; 3] = [
    "x.name=Ondrel&x.start=600?400..900&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5&v=1",
    "x.name=Ondrel&x.start=600&x.rate=?&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5&v=1",
    "x.name=Ondrel&x.start=600?400..900&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464?300..600&y.rate=0.05&y.break=0.5&v=1",
];

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
fn axe_finds_nothing_where_a_number_is_asked_for() {
    let browser = Browser::start();
    let mut found = Vec::new();
    for screen in screens() {
        browser.screen(screen);
        for paper in ["light", "dark"] {
            for (at, asked) in ASKED.iter().enumerate() {
                let link = changed(asked, "paper", paper);
                browser.open(&link);
                browser.settle(&link);
                browser.script(UNFOLD, vec![]);
                let name = format!("asked-{at}-{paper}-{}", screen.width);
                found.extend(browser.axe(&name));
                found.extend(browser.text_that_lies_badly(&name));
                browser.picture(&name);
            }
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
    // The longest that may be written, without a place to break.
    let long = [
        ("x.name", 60),
        ("y.name", 60),
        ("title", 200),
        ("marking", 60),
        ("counted", 30),
        ("note", 1000),
    ];
    let long = long.iter().fold(FULL.to_owned(), |link, (key, most)| {
        changed(&link, key, &"Unbreakable".repeat(100)[..*most])
    });
    for screen in [
        Screen::SMALL,
        Screen {
            width: 768,
            ..Screen::DESK
        },
        Screen::DESK,
    ] {
        browser.screen(screen);
        for (name, link) in [("demo", DEMO), ("full", FULL), ("long", long.as_str())] {
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

/// Where somebody has set letters so large that sentence and caution would fill the screen, neither hides the other.
#[test]
fn letters_set_twice_as_large_leave_the_sentence_whole() {
    let browser = Browser::start();
    let framed = changed(DEMO, "view", "frame");
    for (screen, link) in [
        (Screen::SMALL, DEMO),
        (Screen::FRAME_UPRIGHT, &framed),
        (Screen::FRAME_LYING, &framed),
    ] {
        browser.screen(screen);
        browser.text_size(2.0, true);
        browser.open(link);
        browser.settle(link);
        let script = "const said = document.getElementById('said');
            const caution = document.getElementById('short-caution').getBoundingClientRect();
            const sentence = document.getElementById('sentence').getBoundingClientRect();
            return [getComputedStyle(document.documentElement).fontSize, said.scrollHeight <= said.clientHeight,
                    sentence.bottom <= caution.top + 1];";
        let whole = browser.script(script, vec![]);
        assert_eq!(whole, serde_json::json!(["32px", true, true]), "at {screen:?}");
    }
    browser.assert_clean();
}

/// The words of the chosen law are read whole, in the list or under it, whatever the size of the screen and the text.
#[test]
fn the_words_of_a_law_have_room() {
    let browser = Browser::start();
    // What some of them need.
    let needs = [("x.half", "30"), ("x.p", "1"), ("x.q", "0.5")];
    let demo = needs
        .iter()
        .fold(DEMO.to_owned(), |link, (key, text)| changed(&link, key, text));
    for (screen, times) in [
        (Screen::SMALL, 1.0),
        (Screen::SMALL, 2.0),
        (Screen::DESK, 1.0),
        (Screen::DESK, 2.0),
    ] {
        browser.screen(screen);
        for law in ["aimed", "area", "logarithmic", "search", "power", "none"] {
            let link = changed(&demo, "x.fire", law);
            browser.open(&link);
            browser.settle(&link);
            browser.text_size(times, false);
            let script = "
                const list = document.getElementById('x.fire'), under = document.getElementById('x.fire.chosen');
                const words = list.selectedOptions[0].text, style = getComputedStyle(list);
                const pen = document.createElement('canvas').getContext('2d');
                pen.font = `${style.fontSize} ${style.fontFamily}`;
                // The list's own mark takes room too.
                const room = list.clientWidth - parseFloat(style.paddingLeft) - parseFloat(style.paddingRight) - 18;
                return [words, pen.measureText(words).width <= room || (under.checkVisibility() && under.innerText === words)];";
            let found = browser.script(script, vec![]);
            assert_eq!(
                found[1], true,
                "{} at {screen:?}, text {times} times as large",
                found[0]
            );
        }
    }
    browser.assert_clean();
}

/// What is pressed, dragged or typed in on a small screen is large enough for a finger.
#[test]
fn a_finger_hits_what_it_means() {
    let browser = Browser::start();
    browser.screen(Screen::SMALL);
    for link in [DEMO, FULL] {
        browser.open(link);
        browser.settle(link);
        browser.script(UNFOLD, vec![]);
        let script = "
            const small = [];
            for (const part of document.querySelectorAll('button, input, select, textarea, summary, [role=slider]')) {
              const by_label = ['radio', 'checkbox'].includes(part.type);
              const box = (by_label ? part.labels[0] : part).getBoundingClientRect();
              if (part.checkVisibility() && (box.height < 44 || (box.width < 32 && !by_label)))
                small.push(`${part.tagName}#${part.id} ${part.innerText} ${box.width} x ${box.height}`);
            }
            return small;";
        assert_eq!(browser.script(script, vec![]), serde_json::json!([]));
        // Where the letters of a field are smaller, a telephone enlarges the page for whoever comes to it.
        let script = "return [...document.querySelectorAll('input:not([type=file]), select, textarea')]
            .filter((field) => parseFloat(getComputedStyle(field).fontSize) < 16).map((field) => field.id);";
        assert_eq!(browser.script(script, vec![]), serde_json::json!([]));
    }
    browser.assert_clean();
}

/// The sentence stays in sight wherever one is in the form, and a row of the figures is a card.
#[test]
fn on_a_small_screen_the_sentence_stays_and_tables_are_cards() {
    let browser = Browser::start();
    browser.screen(Screen::SMALL);
    browser.open(DEMO);
    browser.settle(DEMO);
    for field in ["x.start", "y.break", "note"] {
        let script = "document.getElementById(arguments[0]).scrollIntoView();
            const said = document.getElementById('sentence').getBoundingClientRect();
            return said.top >= 0 && said.bottom < innerHeight / 2;";
        assert_eq!(browser.script(script, vec![field.into()]), true, "at {field}");
    }
    let cards = "const rows = [...document.querySelectorAll('#figures tbody tr')];
        return rows.length > 5 && rows.every((row) => {
          const parts = [...row.children].map((part) => part.getBoundingClientRect());
          return parts.every((part, at) => at === 0 || (part.top >= parts[at - 1].bottom - 1 && part.left === parts[0].left));
        });";
    assert_eq!(browser.script(cards, vec![]), true);
    let spoken =
        "return getComputedStyle(document.querySelector('#figures td[data-side]'), '::before').content;";
    // Firefox hands the rule itself out.
    let spoken = browser.script(spoken, vec![]);
    let name = browser.script(
        "return document.querySelector('#figures td[data-side]').dataset.side;",
        vec![],
    );
    assert_eq!(name, "Ondrel");
    assert!(
        spoken == "\"Ondrel: \"" || spoken == "attr(data-side) \": \"",
        "{spoken}"
    );
    browser.assert_clean();
}

/// The tables of what it would take rolled sideways there, without any hint that more stood beside.
#[test]
fn on_a_small_screen_the_tables_of_answers_are_cards() {
    let browser = Browser::start();
    browser.screen(Screen::SMALL);
    let one = changed(&changed(DEMO, "x.start", "600?"), "sothat", "x.prevails");
    let two = changed(&one, "y.start", "400?");
    for link in [&one, &two] {
        browser.open(link);
        browser.settle(link);
        browser.wait(
            "all reversals are found",
            "return document.documentElement.dataset.reversal === 'done';",
        );
        let rolls = "document.querySelectorAll('#takes details').forEach((part) => part.open = true);
            const shown = [...document.querySelectorAll('#takes .roll')].filter((part) => part.checkVisibility());
            return [shown.length, ...shown.filter((part) => part.scrollWidth > part.clientWidth)
              .map((part) => part.firstChild.id)];";
        let count = if link == &one { 4 } else { 2 };
        assert_eq!(
            browser.script(rolls, vec![]),
            serde_json::json!([count]),
            "{link}"
        );
        let head = "const cell = document.querySelector('#reversal-table td[data-head]');
            return getComputedStyle(cell, '::before').content !== 'none' && cell.dataset.head;";
        assert_eq!(browser.script(head, vec![]), "now");
    }
    browser.assert_clean();
}

/// However long the sentence and large the text, its caution is read with it: the sentence rolls behind it.
#[test]
fn the_caution_is_never_covered_or_rolled_away() {
    let browser = Browser::start();
    let long = |link: &str| {
        let link = changed(
            link,
            "x.name",
            "Ondrel of the upper river and the northern crossing, east",
        );
        changed(
            &link,
            "y.name",
            "Vessary and all that came with it over the hills, in time",
        )
    };
    for (screen, height) in [
        (Screen::SMALL, 640),
        (Screen::SMALL, 480),
        (Screen::DESK, 700),
        (Screen::FRAME_UPRIGHT, 480),
    ] {
        let screen = Screen { height, ..screen };
        browser.screen(screen);
        let frame = screen.width == Screen::FRAME_UPRIGHT.width;
        for (name, link) in [
            ("demo", DEMO.to_owned()),
            ("long", long(DEMO)),
            ("asked", long(ASKED[0])),
        ] {
            let link = if frame {
                changed(&link, "view", "frame")
            } else {
                link
            };
            browser.open(&link);
            browser.settle(&link);
            browser.text_size(2.0, false);
            if !frame {
                browser.script(
                    "document.getElementById('y.break').scrollIntoView({block: 'center'});",
                    vec![],
                );
            }
            let script = "const caution = document.getElementById('short-caution'), said = document.getElementById('said');
                const box = caution.getBoundingClientRect(), wrong = [];
                if (box.top < 0 || box.bottom > innerHeight) wrong.push(`from ${box.top} to ${box.bottom} of ${innerHeight}`);
                for (const part of [0.02, 0.5, 0.98]) for (const roll of [0, 40, 1e6]) {
                  said.scrollTop = roll;
                  const at = document.elementFromPoint(box.left + 8, box.top + part * box.height);
                  if (at !== caution) wrong.push(`${part} of it under ${at && at.id} at ${roll}`);
                }
                said.scrollTop = 0;
                const room = box.top - said.getBoundingClientRect().top;
                if (room < parseFloat(getComputedStyle(document.getElementById('sentence')).lineHeight)) wrong.push(`${room} px for the sentence`);
                return wrong;";
            let name = format!("caution-{name}-{}-{height}", screen.width);
            browser.picture(&name);
            assert_eq!(browser.script(script, vec![]), serde_json::json!([]), "{name}");
        }
    }
    browser.assert_clean();
}

/// Nothing moves by itself, so there is nothing to take out where a reader wants no movement.
#[test]
fn nothing_moves_by_itself() {
    let browser = Browser::start();
    for wish in ["no-preference", "reduce"] {
        browser.prefers("prefers-reduced-motion", wish);
        browser.open(DEMO);
        browser.settle(DEMO);
        browser.write("x.start", "700");
        browser.click(".more > summary");
        let script = "const moves = (style) => [style.transitionDuration, style.animationDuration].some((time) => parseFloat(time) > 0)
              || style.scrollBehavior === 'smooth';
            const parts = [...document.querySelectorAll('*')].filter((part) => moves(getComputedStyle(part)));
            return [document.getAnimations().length, ...parts.map((part) => part.tagName + '#' + part.id)];";
        assert_eq!(browser.script(script, vec![]), serde_json::json!([0]), "{wish}");
    }
    browser.assert_clean();
}

/// With the system's own few colours, states differ by more than colour: by a dash, a rule or a word.
#[test]
fn forced_colours_tell_states_apart() {
    let browser = Browser::start();
    for scheme in ["light", "dark"] {
        browser.prefers_all(&[("forced-colors", "active"), ("prefers-color-scheme", scheme)]);
        browser.open(DEMO);
        browser.settle(DEMO);
        let drawn = browser.script(INK_IN_PICTURES, vec![]);
        for picture in drawn.as_array().expect("two pictures") {
            let (ground, strokes) = (&picture[0], picture[1].as_u64().unwrap_or_default());
            assert_eq!(*ground, true, "{scheme}: the ground is the system's");
            assert!(
                strokes > 2000,
                "{scheme}: only {strokes} dots in the colour of text"
            );
        }
        let off = "const look = (id) => getComputedStyle(document.getElementById(id));
            return look('undo').color !== look('blank').color && look('undo').borderBottomStyle === 'dotted';";
        assert_eq!(
            browser.script(off, vec![]),
            true,
            "{scheme}: what cannot be pressed"
        );
        browser.picture(&format!("forced-colours-{scheme}"));

        browser.write("x.start", "1,000");
        browser.leave();
        browser.wait_state("stale");
        let wrong = "const field = getComputedStyle(document.getElementById('x.start')), well = getComputedStyle(document.getElementById('y.start'));
            const old = getComputedStyle(document.querySelector('.plates'), '::before');
            return [field.borderBottomStyle, well.borderBottomStyle, old.borderLeftStyle, old.borderLeftWidth];";
        assert_eq!(
            browser.script(wrong, vec![]),
            serde_json::json!(["dashed", "solid", "dashed", "2px"]),
            "{scheme}: a field with a problem, one without, and old figures"
        );
        browser.picture(&format!("forced-colours-{scheme}-problem"));
    }
    browser.assert_clean();
}

/// Of each picture: whether its ground shows the page's, and how many of its dots have the colour of the page's text.
const INK_IN_PICTURES: &str = "
    const pen = document.createElement('canvas').getContext('2d', {willReadFrequently: true});
    const dots = (colour) => { pen.fillStyle = colour; pen.fillRect(0, 0, 1, 1); return [...pen.getImageData(0, 0, 1, 1).data]; };
    const body = getComputedStyle(document.body), ground = dots(body.backgroundColor), text = dots(body.color);
    return ['strength', 'orbit'].map((id) => {
      const canvas = document.getElementById(id);
      const data = canvas.getContext('2d').getImageData(0, 0, canvas.width, canvas.height).data;
      let strokes = 0;
      for (let at = 0; at < data.length; at += 4)
        if (data[at + 3] > 200 && [0, 1, 2].every((part) => Math.abs(data[at + part] - text[part]) < 24)) strokes += 1;
      const corner = [0, 1, 2, 3].map((part) => data[part]);
      return [corner[3] === 0 || corner.every((part, at) => Math.abs(part - ground[at]) < 4), strokes];
    });";
