//! Pictures that are passed on: what must stand inside them does, and they are SVG that a browser reads.

use aftercount_core::caution;
use aftercount_core::fight::{Effort, fight};
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture};
use aftercount_core::statement::Statement;
use aftercount_web::draw::{Around, Ink, UsualWidths, svg};

fn pictures(link: &str) -> [Picture; 2] {
    let statement = Statement::read(&Pairs::parse(link)).unwrap_or_else(|why| panic!("{link}: {why:?}"));
    let fight = fight(&statement.engagement(), Effort::Trajectory);
    let of = |picture: Option<Picture>| picture.expect("the trajectory was asked for");
    [
        of(picture::strength(&statement, &fight)),
        of(picture::orbit(&statement, &fight)),
    ]
}

const LINK: &str = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39\
                    &y.join=64@4";

/// The texts of an SVG, in order.
fn texts(svg: &str) -> Vec<String> {
    let elements = svg.split("<text ").skip(1);
    let inside = elements.map(|element| element.split_once('>').expect("a tag ends").1);
    inside
        .map(|text| text.split("</text>").next().unwrap_or_default().trim().to_owned())
        .collect()
}

#[test]
fn marking_caution_and_mark_stand_inside() {
    let around = Around {
        marking: "EXERCISE <&>".into(),
        title: "A long title ".repeat(20),
        sentence: "In this model …".into(),
        mark: "Text mark 1234-5678, Aftercount 0.1.0".into(),
        caution: caution::SHORT.into(),
    };
    for picture in pictures(LINK) {
        let drawn =
            svg(&picture, &Ink::light(), (800, 760), UsualWidths, Some(&around)).expect("it is drawn");
        let texts = texts(&drawn);
        assert_eq!(
            texts
                .iter()
                .filter(|text| *text == "EXERCISE &lt;&amp;&gt;")
                .count(),
            2,
            "{texts:?}"
        );
        for part in [&around.sentence, &around.mark, &around.caution] {
            assert!(texts.contains(part), "{part}: {texts:?}");
        }
        assert!(texts.iter().filter(|text| text.contains("long title")).count() > 1);
        let head = "<svg width=\"800\" height=\"760\" role=\"img\" viewBox=\"0 0 6400 6080\" xmlns=";
        assert!(drawn.starts_with(head), "{}", &drawn[..200]);
        assert!(drawn.contains(&format!("<title>{}</title>", picture.summary)));
    }
}

#[test]
fn a_picture_alone_has_its_own_words_only() {
    let [strength, _] = pictures(LINK);
    let drawn = svg(&strength, &Ink::light(), (640, 512), UsualWidths, None).expect("it is drawn");
    assert!(texts(&drawn).iter().any(|text| text == "Ondrel"));
    // Letters as large as they are measured: 13 units at 8 pixels each, over what plotters divides by.
    assert!(drawn.contains("font-size=\"104"), "{drawn}");
}
