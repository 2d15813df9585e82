//! The page's static text against the core's tables: what is written twice must say the same.

use aftercount_core::fight::{Effort, fight};
use aftercount_core::golden;
use aftercount_core::keys::{KEYS, Kind, Place};
use aftercount_core::laws::FireLaw;
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words::math::Math;
use aftercount_core::words::working::working;
use aftercount_core::{caution, words};
use aftercount_web::draw::Ink;
use std::sync::LazyLock;

#[path = "../../www/src/sides.rs"]
mod sides;

/// The sheet as the builder makes it, before the program is put into it.
static SHEET: LazyLock<String> = LazyLock::new(|| {
    sides::with_sides(
        include_str!("../../www/page/index.html"),
        include_str!("../../www/page/side.html"),
    )
});
const STYLE: &str = include_str!("../../www/page/style/colours.css");

/// Keys that the page reads and that have no field: the frame is asked for by a link, losses have one choice as yet, and
/// the version is written for one.
const WITHOUT_FIELD: [&str; 3] = ["view", "losses", "v"];

/// The text of the first element whose opening tag begins so.
fn text_of(opening: &str) -> Option<&'static str> {
    let rest = &SHEET[SHEET.find(opening)? + opening.len()..];
    let (_, inside) = rest.split_once('>')?;
    inside.split('<').next()
}

/// Every key that has a field, with the label of its row.
fn fields() -> Vec<(String, &'static str, Kind)> {
    let rows = KEYS
        .iter()
        .filter(|key| key.worked_out && !WITHOUT_FIELD.contains(&key.name));
    rows.flat_map(|key| {
        let letters: &[&str] = if key.place == Place::Side {
            &["x", "y"]
        } else {
            &[""]
        };
        letters.iter().map(|letter| (key.on(letter), key.label, key.kind))
    })
    .collect()
}

#[test]
fn every_field_has_the_label_of_its_key_and_the_key_beside_it() {
    for (key, label, _) in fields() {
        assert_eq!(text_of(&format!("<label for=\"{key}\"")), Some(label), "{key}");
        assert!(
            SHEET.contains(&format!("</label> <code>{key}</code>")),
            "{key} stands beside its label"
        );
        assert!(
            SHEET.contains(&format!("id=\"{key}\" name=\"{key}\"")),
            "{key} has a control"
        );
        assert!(
            SHEET.contains(&format!("id=\"{key}.problem\"")),
            "{key} has a place for its problems"
        );
    }
}

#[test]
fn every_choice_of_a_key_is_offered_once() {
    for (key, _, kind) in fields() {
        let Kind::Choice(words) = kind else { continue };
        let select = SHEET.split_once(&format!("<select id=\"{key}\"")).expect(&key).1;
        let select = select.split_once("</select>").expect("it ends").0;
        for word in words {
            let count = select.matches(&format!("<option value=\"{word}\">")).count();
            assert_eq!(count, 1, "{key}={word}");
        }
    }
}

#[test]
fn the_laws_of_fire_have_the_labels_of_the_core() {
    for law in FireLaw::ALL.map(FireLaw::law) {
        let option = format!("<option value=\"{}\">{}</option>", law.word, law.label);
        assert_eq!(SHEET.matches(&option).count(), 2, "{option}");
    }
}

/// What a law needs beside its rate has a field that the page shows and hides as a whole, with its unit in words.
#[test]
fn what_a_law_needs_has_a_field_that_can_be_hidden() {
    for key in FireLaw::ALL.iter().flat_map(|law| law.law().needs) {
        for letter in ["x", "y"] {
            let key = format!("{letter}.{key}");
            assert!(
                SHEET.contains(&format!("<div class=\"law\" id=\"{key}.field\" hidden>")),
                "{key}"
            );
            for part in ["unit", "problem"] {
                assert!(SHEET.contains(&format!("id=\"{key}.{part}\"")), "{key}.{part}");
            }
        }
    }
}

/// The markup of a formula is set as it is: so it holds known elements, and letters, signs and numbers of the core's own,
/// whatever the names are.
#[test]
fn formulas_are_markup_of_the_core_alone() {
    const ELEMENTS: [&str; 12] = [
        "math", "mrow", "mi", "mn", "mo", "mfrac", "msub", "msup", "msubsup", "msqrt", "mspace", "mtext",
    ];
    let hostile = "<img src=q onerror=alert(1)>";
    for number in 0..300 {
        let mut pairs = Pairs::parse(&golden::link(number));
        for key in ["x.name", "y.name", "counted", "title", "note", "marking"] {
            pairs.set(key, hostile);
        }
        let statement = Statement::read(&pairs).unwrap_or_else(|why| panic!("{number}: {why:?}"));
        let outcome = fight(&statement.engagement(), Effort::Outcome).outcome;
        let lines = working(&statement, &outcome);
        assert!(lines.iter().any(|line| line.words.contains(hostile)));
        for mathml in lines
            .iter()
            .filter_map(|line| line.math.as_ref())
            .map(Math::to_mathml)
        {
            for piece in mathml.split('<').skip(1) {
                let (tag, text) = piece.split_once('>').unwrap_or_else(|| panic!("{mathml}"));
                let name = tag.trim_start_matches('/').trim_end_matches('/');
                let attributes = [
                    "mspace width=\"1em\"",
                    "mi mathvariant=\"normal\"",
                    "mo lspace=\"0.2em\"",
                ];
                let known = ELEMENTS.contains(&name) || attributes.contains(&name);
                assert!(known, "{tag} in {mathml}");
                let text = text.replace("&#x2061;", "");
                assert!(!text.contains(['&', '"', '\'']), "{text} in {mathml}");
            }
        }
    }
}

#[test]
fn fixed_words_are_those_of_the_core() {
    for (id, text) in [
        ("short-caution", caution::SHORT),
        ("stale", words::STALE),
        ("empty-words", words::BLANK),
        ("text-care", words::HANDLE),
        ("working-care", words::HANDLE),
        ("x.break.aside", words::BREAK_POINT_DOUBT),
        ("y.break.aside", words::BREAK_POINT_DOUBT),
        ("continuous", words::CONTINUOUS),
    ] {
        assert!(SHEET.contains(&format!("id=\"{id}\">{text}</p>")), "{id}: {text}");
    }
    assert!(SHEET.contains(&format!("<p class=\"caution\">{}</p>", caution::FULL)));
    let foot = SHEET.split_once("id=\"paper-foot\"").expect("a foot for paper").1;
    assert!(
        foot.split_once("</div>")
            .expect("its end")
            .0
            .contains(caution::SHORT)
    );
}

#[test]
fn the_caution_stands_where_nothing_runs() {
    for (from, to) in [("<noscript>", "</noscript>"), ("id=\"no-engine\"", "</section>")] {
        let notice = SHEET.split_once(from).expect(from).1.split_once(to).expect(to).0;
        assert!(
            notice.contains("The umpire, doctrine and the law decide."),
            "{from}"
        );
    }
}

#[test]
fn the_light_ink_is_that_of_the_style_sheet() {
    let root = STYLE
        .split_once(":root {")
        .expect("colours")
        .1
        .split_once('}')
        .expect("it ends")
        .0;
    let ink = Ink::light();
    for (name, colour) in [
        ("paper", ink.paper),
        ("ink", ink.ink),
        ("faint", ink.faint),
        ("x", ink.x),
        ("y", ink.y),
    ] {
        let written = format!("--{name}: #{:02x}{:02x}{:02x};", colour.0, colour.1, colour.2);
        assert!(root.contains(&written), "{written}");
    }
}

#[test]
fn both_dark_themes_are_the_same() {
    let block = |head: &str| {
        let body = STYLE
            .split_once(head)
            .expect(head)
            .1
            .split_once('}')
            .expect("it ends")
            .0;
        body.split_whitespace().collect::<Vec<_>>().join(" ")
    };
    assert_eq!(
        block(":root[data-paper=\"auto\"] {"),
        block("\n:root[data-paper=\"dark\"] {")
    );
}
