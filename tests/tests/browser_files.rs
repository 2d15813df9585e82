//! Files for other programs: what is offered, under which name, and what stands inside.

use std::collections::BTreeSet;

use aftercount_core::answer::answer;
use aftercount_core::caution;
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::passing::received::received;
use aftercount_core::passing::words::{FRAMED, FRAMED_PICTURE, NO_OUTCOME};
use aftercount_core::words::format::plain;
use aftercount_tests::browser::{Browser, Key, changed, native, native_sentence, page_url};
use serde_json::{Value, json};

const LINK: &str = "title=Turn%203&marking=EXERCISE%20%E2%80%93%20invented&x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3\
                    &y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39&y.join=64@4&v=1";

fn opened() -> Browser {
    let browser = Browser::opened(LINK);
    browser.allow_downloads();
    browser
}

#[track_caller]
fn text_of(browser: &Browser, ending: &str) -> String {
    String::from_utf8(browser.downloaded(ending)).expect("UTF-8")
}

#[test]
fn a_saved_file_opens_again() {
    let browser = opened();
    browser.press("[data-pass=save]", Key::Enter);
    let text = text_of(&browser, ".txt");
    assert_eq!(received(&text), Ok(Pairs::parse(LINK)), "{text}");
    for part in [
        "Marking: EXERCISE – invented",
        &plain(&native_sentence(LINK)),
        caution::FULL,
        &browser.text("#version"),
    ] {
        assert!(text.contains(part), "{part} in {text}");
    }
    let name = format!("aftercount-{}.txt", text_mark(&Pairs::parse(LINK)));
    assert_eq!(
        browser.downloaded_names(),
        std::slice::from_ref(&name),
        "the name tells nothing but the text mark"
    );
    browser.wait_text("#file-said", &name);
    browser.click("#blank");
    browser.wait_state("empty");
    let file = browser.folder().join("downloads").join(name);
    browser.click("[data-pass=open]");
    browser.type_at("#open-file", &file.to_string_lossy());
    assert_eq!(browser.settle(LINK), native(LINK));
    browser.assert_clean();
}

#[test]
fn a_text_with_a_problem_can_be_saved_and_its_outcome_cannot() {
    let browser = opened();
    browser.write("x.start", "6,0");
    browser.press("[data-pass=save]", Key::Enter);
    let link = changed(LINK, "x.start", "6,0");
    assert_eq!(received(&text_of(&browser, ".txt")), Ok(Pairs::parse(&link)));
    browser.press("[data-pass=csv]", Key::Enter);
    browser.wait_text("#table-problem", NO_OUTCOME);
    browser.press("[data-pass='orbit.svg']", Key::Enter);
    browser.wait_text("#file-said", NO_OUTCOME);
    browser.assert_clean();
}

#[test]
fn json_is_the_batch_door_s_object() {
    let browser = opened();
    browser.press("[data-pass=json-line]", Key::Enter);
    let line = text_of(&browser, "-line.json");
    assert_eq!(line.lines().count(), 1);
    assert!(
        line.starts_with(answer(LINK).to_json().trim_end_matches('}')),
        "{line}"
    );
    let read: Value = serde_json::from_str(&line).expect("JSON");
    assert_eq!(
        [&read["link"], &read["marking"]],
        [&json!(LINK), &json!("EXERCISE – invented")]
    );
    browser.write("x.start", "700");
    browser.press("[data-pass=json]", Key::Enter);
    let mark = text_mark(&Pairs::parse(&changed(LINK, "x.start", "700")));
    let lines = text_of(&browser, &format!("{mark}.json"));
    assert!(lines.lines().count() > 20, "{lines}");
    assert_eq!(
        serde_json::from_str::<Value>(&lines).expect("JSON")["text_mark"],
        mark
    );
    browser.assert_clean();
}

/// The rows of a table without quoted cells.
fn rows(text: &str, delimiter: char) -> Vec<Vec<String>> {
    let lines = text.trim_start_matches('\u{feff}').trim_end().split("\r\n");
    lines
        .map(|line| line.split(delimiter).map(str::to_owned).collect())
        .collect()
}

#[test]
fn the_table_has_the_rows_that_were_asked_for() {
    let browser = opened();
    browser.press("[data-pass=csv]", Key::Enter);
    let usual = text_of(&browser, ".csv");
    let usual = rows(&usual, ',');
    assert_eq!(usual[0][0], "time (h)");
    assert_eq!(usual[3][0], "0.4", "a step of its own");
    // The caution has a comma in it.
    let carried = |row: &Vec<String>| {
        row[8] == "EXERCISE – invented" && row[11..].join(",") == format!("\"{}\"", caution::SHORT)
    };
    assert!(usual[1..].iter().all(carried));
    let end = native(LINK);
    let last = usual.last().expect("rows");
    assert_eq!(
        [last[0].parse(), last[2].parse()],
        [Ok(end.time.unwrap_or(0.0)), Ok(end.y_end.unwrap_or(0.0))]
    );

    for (field, text, problem) in [
        ("table-step", "0,5", "write 0.5"),
        ("table-step", "1e-9", "more than 10000 rows"),
        ("table-list", "", "with a comma between"),
    ] {
        let radio = if field == "table-step" {
            "table-every"
        } else {
            "table-at"
        };
        browser.click(&format!("#{radio}"));
        browser.script(
            "document.getElementById(arguments[0]).value = arguments[1];",
            vec![json!(field), json!(text)],
        );
        browser.press("[data-pass=csv]", Key::Enter);
        browser.wait_text("#table-problem", problem);
    }
    browser.click("#table-every");
    // Whoever writes times means them.
    browser.type_at("#table-list", "1, 4, 2.5");
    browser.click("#table-events");
    browser.click("#table-commas");
    let names = browser.downloaded_names();
    assert_eq!(names.len(), 1, "none came for what was wrong: {names:?}");
    std::fs::remove_file(browser.folder().join("downloads").join(&names[0])).expect("it was there");
    browser.press("[data-pass=csv]", Key::Enter);
    let text = text_of(&browser, ".csv");
    let times: Vec<String> = rows(&text, ';')[1..].iter().map(|row| row[0].clone()).collect();
    assert_eq!(times, ["1", "2,5", "4"]);
    assert_eq!(browser.text("#table-problem"), "");
    browser.assert_clean();
}

/// The picture of what is asked, and the map, also where there is no outcome beside it.
#[test]
fn the_answer_to_a_question_is_passed_on_as_a_picture() {
    let browser = opened();
    let one = changed(LINK, "x.start", "?400..900");
    let two = changed(
        &changed(LINK, "x.start", "600?400..900"),
        "y.start",
        "400?200..600",
    );
    assert!(
        !browser
            .script(
                "return document.getElementById('asked-files').checkVisibility();",
                vec![]
            )
            .as_bool()
            .unwrap_or(true)
    );
    for (link, axis) in [
        (&one, "combatants left at the end"),
        (&two, "Vessary's strength at the start"),
    ] {
        let link = changed(link, "sothat", "x.prevails");
        browser.open(&link);
        browser.settle(&link);
        browser.press("[data-pass='asked.svg']", Key::Enter);
        let mark = text_mark(&Pairs::parse(&link));
        let svg = text_of(&browser, &format!("{mark}-asked.svg"));
        let document = roxmltree::Document::parse(&svg).expect("SVG");
        let texts: String = document.descendants().filter_map(|node| node.text()).collect();
        for part in [
            "EXERCISE – invented",
            caution::SHORT,
            &mark,
            axis,
            "In this model",
        ] {
            assert!(texts.contains(part), "{part}: {texts}");
        }
        browser.press("[data-pass='asked.png']", Key::Enter);
        let png = browser.downloaded(&format!("{mark}-asked.png"));
        assert_eq!(&png[..8], b"\x89PNG\r\n\x1a\n");
        keep(&format!("passed-asked-{mark}.png"), &png);
        keep(&format!("passed-asked-{mark}.svg"), svg.as_bytes());
    }
    browser.assert_clean();
}

#[test]
fn pictures_carry_marking_caution_and_mark() {
    let browser = opened();
    for name in ["strength", "orbit"] {
        browser.press(&format!("[data-pass='{name}.svg']"), Key::Enter);
        let svg = text_of(&browser, &format!("{name}.svg"));
        let document = roxmltree::Document::parse(&svg).expect("SVG");
        let texts: Vec<&str> = document
            .descendants()
            .filter(|node| node.has_tag_name(("http://www.w3.org/2000/svg", "text")))
            .filter_map(|node| node.text())
            .map(str::trim)
            .collect();
        let mark = format!(
            "Text mark {}, Aftercount {}",
            text_mark(&Pairs::parse(LINK)),
            browser.text("#version")
        );
        for part in ["Turn 3", caution::SHORT, &mark] {
            assert!(texts.contains(&part), "{part}: {texts:?}");
        }
        assert_eq!(
            texts
                .iter()
                .filter(|text| **text == "EXERCISE – invented")
                .count(),
            2,
            "{texts:?}"
        );
        assert!(texts.concat().contains("In this model Ondrel breaks first"));

        browser.press(&format!("[data-pass='{name}.png']"), Key::Enter);
        let png = browser.downloaded(&format!("{name}.png"));
        assert_eq!(&png[..8], b"\x89PNG\r\n\x1a\n");
        let size = |at: usize| u32::from_be_bytes([png[at], png[at + 1], png[at + 2], png[at + 3]]);
        assert_eq!((size(16), size(20)), (1600, 1520));
        assert_eq!(
            colours(&browser, &png),
            json!([true, true, true]),
            "paper, ink and a side's colour"
        );
        keep(&format!("passed-{name}.png"), &png);
        keep(&format!("passed-{name}.svg"), svg.as_bytes());
    }
    browser.assert_clean();
}

/// Whether a picture shows white paper, dark letters under the field, and the colour of a side or of the fight.
fn colours(browser: &Browser, png: &[u8]) -> Value {
    use base64::Engine as _;
    let encoded = base64::engine::general_purpose::STANDARD.encode(png);
    let script = "return (async (encoded) => {
        const picture = new Image(); picture.src = 'data:image/png;base64,' + encoded;
        await picture.decode();
        const canvas = document.createElement('canvas'); canvas.width = picture.width; canvas.height = picture.height;
        const context = canvas.getContext('2d'); context.drawImage(picture, 0, 0);
        const some = (top, foot, which) => {
          const data = context.getImageData(0, top, picture.width, foot - top).data;
          for (let i = 0; i < data.length; i += 4) if (which(data[i], data[i + 1], data[i + 2], data[i + 3])) return true;
          return false;
        };
        return [!some(0, picture.height, (r, g, b, a) => a < 255) && some(0, 20, (r, g, b) => r > 250 && g > 250),
          some(picture.height - 170, picture.height - 20, (r, g, b) => r < 60 && g < 60 && b < 70),
          some(200, 1200, (r, g, b) => Math.abs(r - 0x7a) < 6 && Math.abs(g - 0x24) < 6 && Math.abs(b - 0x58) < 6)];
        })(arguments[0]);";
    browser.script(script, vec![json!(encoded)])
}

/// Leaves a file for a person to look at.
fn keep(name: &str, bytes: &[u8]) {
    let program = std::env::current_exe().expect("a test knows its own path");
    let folder = program.ancestors().nth(3).expect("it lies deep").join("screens");
    std::fs::create_dir_all(&folder).expect("a folder");
    std::fs::write(folder.join(name), bytes).expect("a file");
}

/// A frame that may run scripts and nothing else.
#[test]
fn a_frame_without_downloads_gives_the_text_to_copy() {
    let browser = Browser::start();
    browser.allow_downloads();
    let around = "<!DOCTYPE html><title>A wiki</title><iframe title=\"frame\" width=\"1000\" height=\"800\" \
                  sandbox=\"allow-scripts\"></iframe>";
    let file = browser.folder().join("around.html");
    std::fs::write(&file, around).expect("a page with a frame");
    browser.open_address(url::Url::from_file_path(&file).expect("a full path").as_str());
    browser.script(
        "document.querySelector('iframe').src = arguments[0];",
        vec![json!(format!("{}#{LINK}", page_url()))],
    );
    browser.enter_frame();
    browser.settle(LINK);
    browser.press("[data-pass=save]", Key::Enter);
    browser.wait_text("#file-said", FRAMED);
    let text = browser.script("return document.getElementById('file-text').value;", vec![]);
    assert_eq!(
        received(text.as_str().unwrap_or_default()),
        Ok(Pairs::parse(LINK))
    );
    browser.press("#keep", Key::Enter);
    browser.wait_text("#kept-said", "does not let the page keep anything");
    browser.press("[data-pass='strength.png']", Key::Enter);
    browser.wait_text("#file-said", FRAMED_PICTURE);
    browser.press("[data-pass=csv]", Key::Enter);
    browser.wait(
        "the table",
        "return document.getElementById('file-text').value.includes('time (h)');",
    );
    browser.leave_frame();
    assert_eq!(
        browser.downloaded_names(),
        Vec::<String>::new(),
        "the frame allows none"
    );
    let complaints: BTreeSet<String> = browser.complaints().into_iter().collect();
    let about_downloads = |complaint: &&String| complaint.contains("ownload");
    assert_eq!(
        complaints
            .iter()
            .filter(|complaint| !about_downloads(complaint))
            .count(),
        0,
        "{complaints:?}"
    );
}
