//! The sheet on paper: printed by the browser itself, and read back from the document.

use aftercount_core::caution;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::reversal::Reversal;
use aftercount_core::statement::Statement;
use aftercount_core::words::format::plain;
use aftercount_core::words::reversal::{ON_PAPER, rows};
use aftercount_tests::browser::{Browser, Engine, Paper, changed, native_sentence, wiki_url};
use serde_json::json;

const LINK: &str = "title=The%20northern%20crossing&marking=EXERCISE%20ONLY&x.name=Ondrel&x.start=600&x.rate=0.04&\
                    x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5&y.join=64@4,20@6&phase1.from=3&\
                    phase1.x.rate=0.05&v=1";

const SIZES: [(&str, Paper); 2] = [("a4", Paper::A4), ("letter", Paper::LETTER)];

/// Without blanks, since a line may be broken anywhere in a long word.
fn bare(text: &str) -> String {
    text.split_whitespace().collect()
}

#[track_caller]
fn assert_has(text: &str, part: &str) {
    assert!(
        bare(text).contains(&bare(part)),
        "{part:?} is not on the paper:\n{text}"
    );
}

/// What stands on every page, and that it is numbered. Firefox leaves the numbers to its own way of printing: it has no
/// boxes in the margins of `@page`.
fn assert_every_page(pages: &[String], link: &str) {
    let mark = format!("Text mark {}", text_mark(&Pairs::parse(link)));
    for (number, page) in (1..).zip(pages) {
        let at = |part: &str| bare(page).matches(&bare(part)).count();
        assert!(
            at("EXERCISE ONLY") >= 2,
            "page {number} is marked at its top and its foot:\n{page}"
        );
        assert_eq!(at(&mark), 1, "page {number}:\n{page}");
        assert!(at("Aftercount 0.") >= 1, "page {number}:\n{page}");
        assert!(at(caution::SHORT) >= 1, "page {number}:\n{page}");
        let numbered = usize::from(Engine::chosen() == Engine::Chromium);
        assert_eq!(
            at(&format!("page {number} of {}", pages.len())),
            numbered,
            "page {number}:\n{page}"
        );
    }
}

#[test]
fn the_sheet_is_on_paper_whole() {
    let browser = Browser::start();
    let dark = changed(LINK, "paper", "dark");
    for (name, size) in SIZES {
        browser.open(&dark);
        browser.settle(&dark);
        let pages = browser.print(&format!("paper-{name}"), size);
        assert!((4..=6).contains(&pages.len()), "{} pages on {name}", pages.len());
        assert_every_page(&pages, &dark);
        let feet = browser.heights_of(&format!("paper-{name}"), "Text");
        assert_eq!(feet.len(), pages.len());
        let foot = (size.height - 2.5) / 2.54 * 72.0;
        assert!(
            feet.iter().all(|height| *height == feet[0] && *height > foot),
            "also on the last page it stands at the foot: {feet:?}"
        );
        let today = browser.script(
            "return new Date().toLocaleDateString('en-GB', {day: 'numeric', month: 'long', year: 'numeric'});",
            vec![],
        );
        assert_has(&pages[0], today.as_str().expect("a day"));
        let all = pages.join(" ");
        for part in [
            "The northern crossing",
            // The assumptions, in words.
            "What is assumed",
            "Strength at the start start 600 combatants 464 combatants",
            "0.04: number of Vessary lost, per one of",
            "0.3: breaks at 30 % lost: 420 left of 600",
            "none 64 join at 4 h; 20 join at 6 h",
            "Phase 1, from 3 h phase1 rate 0.05 as before",
            // The outcome.
            &native_sentence(LINK),
            "For study, teaching and exercises. The umpire, doctrine and the law decide.",
            "Loss exchange ratio",
            // Words of both pictures, which stand in them.
            "time (h)",
            "Vessary (combatants)",
            "274: Vessary breaks",
            "64 join Vessary",
            // What would reverse it.
            "What would reverse it",
            // The working, and the caution in full.
            "It is solved by the state equation",
            "The organisation's doctrine, the law and qualified judgement decide.",
        ] {
            assert_has(&all, part);
        }
        for part in [
            "Start from blank",
            "Pass it on",
            "line by line",
            "Undo",
            "add a reserve",
            "Continue from",
            "put in",
            "Write ? behind a number",
        ] {
            assert!(!bare(&all).contains(&bare(part)), "{part} is of no use on paper");
        }
    }
    // Afterwards the page is as it was.
    browser.settle(&dark);
    let state = browser.script(
        "const d = document; return [d.getElementById('working-details').open, d.documentElement.hasAttribute('data-on-paper'),
           d.querySelectorAll('.on-paper').length > 0 && [...d.querySelectorAll('.on-paper')].some((e) => e.checkVisibility())];",
        vec![],
    );
    assert_eq!(state, json!([false, false, false]));
    browser.assert_clean();
}

/// The nearest reversals, whether anything is asked or not, and how many stand behind them.
#[test]
fn what_would_reverse_it_is_always_on_paper() {
    let browser = Browser::start();
    for asked in ["464", "464?400..900"] {
        let link = changed(LINK, "y.start", asked);
        let pairs = Pairs::parse(&link);
        let statement = Statement::read(&pairs).expect("it is an engagement");
        let all = rows(&statement, &Reversal::new(&pairs, &statement).finished());
        let (near, behind) = all.split_at(ON_PAPER);
        browser.open(&link);
        browser.settle(&link);
        let paper = browser.print("reversals-a4", Paper::A4).join(" ");
        for row in near {
            let (value, change) = (plain(&row.value), plain(&row.change));
            let line = format!(
                "{} {} {} {value} {change} {}",
                row.name,
                row.slot.name,
                plain(&row.now),
                row.then
            );
            assert_has(&plain(&paper), &line);
        }
        let left = behind.iter().filter(|row| row.put.is_some()).count();
        assert!(left > 1 && left < behind.len(), "{left}");
        assert_has(
            &paper,
            &format!("{left} more numbers that do it stand on the sheet"),
        );
        for row in behind {
            assert!(!bare(&paper).contains(&bare(&format!("{} {}", row.name, row.slot.name))));
        }
    }
    browser.assert_clean();
}

/// The most that a text may hold: names without a blank, a long note, twenty reserves, nine phases.
#[test]
fn a_long_engagement_loses_nothing() {
    let reserves: Vec<String> = (1..=20).map(|number| format!("{number}@0.{number:02}")).collect();
    let mut link = format!(
        "title={}&marking=EXERCISE%20ONLY&note={}&x.name={}&x.start=600&x.fire=search&x.half=80&x.rate=0.04&y.name={}&\
         y.start=464&y.fire=power&y.p=0.5&y.q=0.5&y.rate=0.05&y.join={}",
        "Long%20".repeat(28),
        "sources%20".repeat(124),
        "Unbreakable".repeat(5),
        "Ondrel%20of%20the%20upper%20river%20and%20all%20its%20reserves%20there",
        reserves.join(","),
    );
    for phase in 1..=9 {
        link += &format!(
            "&phase{phase}.from={phase}.5&phase{phase}.x.rate=0.0{phase}&phase{phase}.y.wastage=0.00{phase}"
        );
    }
    link += "&v=1";
    let browser = Browser::start();
    for (name, size) in SIZES {
        browser.open(&link);
        browser.settle(&link);
        let pages = browser.print(&format!("long-{name}"), size);
        assert_every_page(&pages, &link);
        let all = bare(&pages.join(" "));
        assert_eq!(all.matches("sources").count(), 124, "the note is whole");
        assert!(all.contains(&"Unbreakable".repeat(5)), "the name is whole");
        for reserve in 1..=20 {
            assert!(
                all.contains(&format!("{reserve}joinat0.{reserve:02}")) || reserve % 10 == 0,
                "reserve {reserve}"
            );
        }
        for phase in 1..=9 {
            assert!(
                all.contains(&format!("Phase{phase},from{phase}.5h")),
                "phase {phase}"
            );
        }
        let lines = browser.script(
            "return document.getElementById('working-lines').childElementCount;",
            vec![],
        );
        assert!(
            all.contains(&format!("{lines}.")),
            "all {lines} lines of the working"
        );
        browser.assert_within_margins(&format!("long-{name}"), size);
    }
    browser.assert_clean();
}

#[test]
fn a_frame_is_one_page() {
    let browser = Browser::start();
    let link = changed(LINK, "view", "frame");
    browser.open(&link);
    browser.settle(&link);
    let pages = browser.print("frame-a4", Paper::A4);
    assert_eq!(pages.len(), 1);
    for part in [
        "The northern crossing",
        "EXERCISE ONLY",
        &native_sentence(LINK),
        "The umpire, doctrine and the law decide.",
        "time (h)",
        &text_mark(&Pairs::parse(&link)),
    ] {
        assert_has(&pages[0], part);
    }
    for part in ["Lost before the start", "open the whole sheet"] {
        assert!(!bare(&pages[0]).contains(&bare(part)), "{part}");
    }
    // Within the wiki's own page the frames are on its paper too.
    browser.open_address(wiki_url().as_str());
    browser.enter_frame();
    browser.settle_on_any();
    browser.leave_frame();
    let pages = browser.print("wiki-a4", Paper::A4);
    assert_has(&pages.join(" "), "In this model");
    browser.assert_clean();
}

/// Beside a problem the last complete figures are printed, and said to be that; before any there is the caution alone.
#[test]
fn what_cannot_be_worked_out_is_printed_as_such() {
    let browser = Browser::opened(LINK);
    browser.write("x.rate", "0,05");
    browser.leave();
    browser.wait_state("stale");
    let all = browser.print("stale-a4", Paper::A4).join(" ");
    assert_has(&all, "For the last complete figures, not for what is typed now.");
    assert_has(&all, "write 0.05, with a point");
    // On the way to `0,05` stood `0`.
    assert_has(&all, "0: number of Vessary lost, per one of");
    let last = changed(LINK, "x.rate", "0");
    assert_has(&all, &native_sentence(&last));
    assert_has(&all, &text_mark(&Pairs::parse(&last)));
    browser.click("#blank");
    browser.wait_state("empty");
    let pages = browser.print("blank-a4", Paper::A4);
    assert_eq!(pages.len(), 1);
    assert_has(&pages[0], "Two sides, two strengths, two rates");
    assert_has(&pages[0], "qualified judgement decide");
    assert!(!bare(&pages[0]).contains("Whatisassumed"));
    browser.assert_clean();
}

/// A question has its answer and its picture on paper, with what it asks among the assumptions.
#[test]
fn a_question_is_printed_with_its_answer() {
    let browser = Browser::start();
    for (name, text) in [("alone", "?400..900"), ("beside", "600?400..900")] {
        let link = changed(&changed(LINK, "x.start", text), "sothat", "x.prevails");
        browser.open(&link);
        browser.settle(&link);
        let pages = browser.print(&format!("question-{name}-a4"), Paper::A4);
        assert_every_page(&pages, &link);
        let all = pages.join(" ");
        assert_has(&all, "in question, sought from 400 to 900");
        assert_has(&all, "So that sothat Ondrel prevails");
        assert_has(&all, "What it would take");
        assert_has(&all, &browser.text("#asked-sentence"));
        // An axis of its picture.
        assert_has(&all, "Ondrel's strength at the start");
        assert!(!bare(&all).contains("addtowhatiswanted"));
        let reversed = bare(&all).contains("Nearestreversal:Vessarybreaksfirstif");
        assert_eq!(reversed, name == "beside", "{all}");
    }
    browser.assert_clean();
}

/// The map of two questions too, with its sentence; drawn for paper, and not as it stands on a dark screen.
#[test]
fn a_map_is_printed_with_its_sentence() {
    let browser = Browser::start();
    let link = changed(
        &changed(LINK, "x.start", "600?400..900"),
        "x.break",
        "0.3?0.1..0.6",
    );
    let link = changed(&changed(&link, "sothat", "x.prevails"), "paper", "dark");
    browser.open(&link);
    browser.settle(&link);
    let pages = browser.print("map-a4", Paper::A4);
    assert_every_page(&pages, &link);
    let all = pages.join(" ");
    assert_has(&all, &browser.text("#map-sentence"));
    assert_has(
        &all,
        "all that is wanted holds, on the dotted side of the double line",
    );
    // Its axes.
    assert_has(&all, "Ondrel's break point");
    for left_out in ["addtowhatiswanted", "Contoursof", "Moveoverthemap"] {
        assert!(!bare(&all).contains(left_out), "{left_out}: {all}");
    }
    let drawn = "const canvas = document.getElementById('map');
        dispatchEvent(new Event('beforeprint'));
        const svg = canvas.parentElement.querySelector('.drawn > svg');
        const size = svg && [svg.querySelectorAll('rect').length, svg.outerHTML.length];
        dispatchEvent(new Event('afterprint')); return size;";
    let size = browser.script(drawn, vec![]);
    let (dots, letters) = (size[0].as_u64().unwrap_or(0), size[1].as_u64().unwrap_or(0));
    assert!(dots > 50 && letters < 1_000_000, "{dots} dots, {letters} letters");
    browser.assert_clean();
}

/// Who prints at once after a change prints all of it: what decided it, the map, and what is wrong. No moment lies between the
/// change and the printer's look here.
#[test]
fn what_is_printed_at_once_is_up_to_date() {
    let browser = Browser::opened(LINK);
    let at_once = |key: &str, text: &str, read: &str| {
        let script = format!(
            "const field = document.getElementById(arguments[0]); field.value = arguments[1];
             field.dispatchEvent(new Event('input', {{bubbles: true}})); dispatchEvent(new Event('beforeprint'));
             const read = {read}; dispatchEvent(new Event('afterprint')); return read;"
        );
        browser.script(&script, vec![key.into(), text.into()])
    };
    let of = |id: &str| format!("document.getElementById('{id}').innerText");
    let decided = at_once("x.rate", "0.042", &of("decided"));
    browser.settle(&changed(LINK, "x.rate", "0.042"));
    browser.wait(
        "what decided it",
        "return document.getElementById('decided').innerText;",
    );
    assert_eq!(decided, browser.text("#decided"));
    let asked = changed(&changed(LINK, "x.rate", "0.042"), "x.start", "600?400..900");
    let asked = changed(&asked, "y.start", "464?400..900");
    browser.open(&changed(&asked, "y.rate", "0.06"));
    browser.settle_on_any();
    let sentence = at_once("y.rate", "0.05", &of("map-sentence"));
    browser.settle(&asked);
    assert_eq!(sentence, browser.text("#map-sentence"));
    let state = at_once("y.rate", "0,05", "document.documentElement.dataset.state");
    assert_eq!(state, "stale");
    browser.assert_clean();
}

/// The program has not begun yet, or never does: the paper says that it holds nothing.
#[test]
fn a_page_without_its_program_is_printed_as_such() {
    const NOTHING: &str = "Nothing was worked out.";
    let browser = Browser::start();
    browser.before_each_page("WebAssembly.compile = () => new Promise(() => {});");
    browser.open(LINK);
    let seen = "return document.getElementById('unbegun').checkVisibility();";
    assert_eq!(
        browser.script(seen, vec![]),
        false,
        "on the screen it is still to come"
    );
    let pages = browser.print("begun-a4", Paper::A4);
    assert_eq!(pages.len(), 1);
    assert_has(&pages[0], NOTHING);
    assert_has(&pages[0], "qualified judgement decide");
    let browser = Browser::opened(LINK);
    browser.settle(LINK);
    let all = browser.print("not-begun-a4", Paper::A4).join(" ");
    assert!(!bare(&all).contains(&bare(NOTHING)));
    browser.assert_clean();
}

/// Long sums of exponentials are set as small as the paper wants: Chromium would shrink all pages for one that is not.
#[test]
fn a_formula_that_is_wider_than_the_paper_is_fitted() {
    let link = "x.start=850&x.rate=0.03&y.start=620&y.rate=0.01&x.wastage=0.01&y.support.aimed=3&x.break=0.3&y.break=0.3&\
                y.flow=3@2/9&until=20&v=1";
    let browser = Browser::opened(link);
    browser.settle(link);
    let widths = browser.script(
        "dispatchEvent(new Event('beforeprint'));
         const widths = [...document.querySelectorAll('.formula')].map((holder) =>
           [parseFloat(holder.style.getPropertyValue('--letters')) * parseFloat(getComputedStyle(holder.firstChild).fontSize),
            holder.firstChild.getBoundingClientRect().width, holder.scrollWidth, holder.clientWidth]);
         dispatchEvent(new Event('afterprint')); return widths;",
        vec![],
    );
    let widths: Vec<[f64; 4]> = serde_json::from_value(widths).expect("four widths a formula");
    let rolled = widths.iter().filter(|[_, _, whole, strip]| whole > strip).count();
    assert!(rolled >= 2, "{widths:?}");
    for [told, shown, whole, strip] in widths {
        let wide = if whole > strip { whole } else { shown };
        assert!((told - wide).abs() < 1.0, "{told} told, {wide} wide");
    }
    browser.assert_clean();
}

/// Also in a font that is not made for mathematics: a foot stands lower than its letter, and a bar keeps off its digits.
#[test]
fn formulas_are_set_apart() {
    let link = "x.start=600&x.rate=0.08&y.start=464&y.rate=0.03&v=1";
    let browser = Browser::opened(link);
    browser.settle(link);
    let off = browser.script(
        "document.getElementById('working-details').open = true;
         const box = (part) => { const range = document.createRange(); range.selectNodeContents(part); return range.getBoundingClientRect(); };
         const all = (name) => [...document.querySelectorAll(name)];
         return [all('msub').map(({children: [letter, foot]}) => box(foot).bottom - box(letter).bottom),
                 all('msqrt').map((root) => box(root.firstChild).top - root.getBoundingClientRect().top)];",
        vec![],
    );
    let [feet, bars]: [Vec<f64>; 2] = serde_json::from_value(off).expect("two lists of lengths");
    assert!(feet.len() > 5 && feet.iter().all(|off| *off > 0.5), "{feet:?}");
    assert!(bars.len() > 5 && bars.iter().all(|off| *off > 1.2), "{bars:?}");
    browser.assert_clean();
}

#[test]
fn the_button_opens_the_way_to_the_printer() {
    let browser = Browser::opened(LINK);
    browser.script(
        "window.asked = 0; window.print = () => { window.asked += 1; };",
        vec![],
    );
    browser.click("#print");
    assert_eq!(browser.script("return window.asked;", vec![]), 1);
    browser.assert_clean();
}
