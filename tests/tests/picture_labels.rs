//! What a picture of a schedule says of its own lines: from when on they hold, and where.

use aftercount_core::asked::Chart;
use aftercount_core::fight::{Effort, fight};
use aftercount_core::outcome::Breaks;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture, Role};
use aftercount_core::sides::Side;
use aftercount_core::statement::{Statement, Values};
use aftercount_core::words::format::plain;
use aftercount_web::draw::{Ink, Measure, Measured, UsualWidths, draw};
use plotters::prelude::SVGBackend;
use roxmltree::Document;

const PLAIN: &str =
    "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=464&y.rate=0.05&y.break=0.5";

fn pictures(link: &str) -> (Picture, Picture) {
    let statement = Statement::read(&Pairs::parse(link)).unwrap_or_else(|why| panic!("{link}: {why:?}"));
    let fight = fight(&statement.engagement(), Effort::Trajectory);
    let strength = picture::strength(&statement, &fight).expect("a trajectory was asked for");
    let orbit = picture::orbit(&statement, &fight).expect("a trajectory was asked for");
    (strength, orbit)
}

fn labels(picture: &Picture, role: Role) -> Vec<String> {
    let lines = picture.lines.iter().filter(|line| line.role == role);
    lines.map(|line| plain(&line.label)).collect()
}

/// The picture as SVG, at one unit a CSS pixel.
fn drawn(picture: &Picture) -> String {
    let mut svg = String::new();
    {
        let mut backend = Measured::new(SVGBackend::with_string(&mut svg, (640, 480)), UsualWidths);
        draw(&mut backend, 1.0, &Ink::light(), picture).expect("it can be drawn");
    }
    svg
}

/// Where an upright line stands whose foot is at the axis, each once for every time it is drawn.
fn uprights(svg: &str) -> Vec<i32> {
    let document = Document::parse(svg).expect("SVG is XML");
    let lines = document
        .descendants()
        .filter(|node| node.has_tag_name("polyline"));
    let points = |text: &str| -> Vec<(i32, i32)> {
        let pairs = text.split_whitespace().filter_map(|pair| pair.split_once(','));
        pairs
            .filter_map(|(x, y)| Some((x.parse().ok()?, y.parse().ok()?)))
            .collect()
    };
    lines
        .filter_map(|line| match points(line.attribute("points")?)[..] {
            [from, to] if from.0 == to.0 && (from.1 - to.1).abs() > 200 => Some(from.0),
            _ => None,
        })
        .collect()
}

/// Where a text begins.
fn text_at(svg: &str, text: &str) -> f64 {
    let document = Document::parse(svg).expect("SVG is XML");
    let found = document
        .descendants()
        .filter(|node| node.has_tag_name("text"))
        .find(|node| node.text().is_some_and(|words| words.trim() == text))
        .unwrap_or_else(|| panic!("{text:?} is not in the picture"));
    found
        .attribute("x")
        .and_then(|x| x.parse().ok())
        .expect("it has a place")
}

#[test]
fn every_level_of_a_break_line_has_its_number() {
    let (strength, _) = pictures(&format!("{PLAIN}&y.join=64@4,20@6"));
    assert_eq!(
        labels(&strength, Role::BreakLine(Side::X)),
        ["420: Ondrel breaks"]
    );
    assert_eq!(
        labels(&strength, Role::BreakLine(Side::Y)),
        ["232", "264", "274: Vessary breaks"]
    );
    // The levels hang together: each begins where the one before it ends.
    let lines: Vec<_> = strength
        .lines
        .iter()
        .filter(|line| line.role == Role::BreakLine(Side::Y))
        .collect();
    for pair in lines.windows(2) {
        assert_eq!(pair[0].points.last(), pair[1].points.first());
    }
    // A steady flow moves the line all the while, and leaves it without a number of its own.
    let (strength, _) = pictures(&format!("{PLAIN}&y.flow=9@1/3"));
    assert_eq!(labels(&strength, Role::BreakLine(Side::Y)).len(), 1);
}

#[test]
fn the_orbit_says_from_when_its_parity_and_its_break_lines_hold() {
    let (_, orbit) = pictures(PLAIN);
    assert_eq!(labels(&orbit, Role::Parity), ["parity"]);
    assert_eq!(labels(&orbit, Role::BreakLine(Side::Y)), ["232: Vessary breaks"]);
    assert!(!orbit.summary.contains(" on."), "{}", orbit.summary);
    let (_, orbit) = pictures(&format!("{PLAIN}&y.join=64@4&phase1.from=3&phase1.x.rate=0.05"));
    assert_eq!(labels(&orbit, Role::Parity), ["parity from 4 h on"]);
    assert_eq!(labels(&orbit, Role::BreakLine(Side::X)), ["420: Ondrel breaks"]);
    assert_eq!(
        labels(&orbit, Role::BreakLine(Side::Y)),
        ["264 in the end: Vessary breaks"]
    );
    let told = "the parity line and the fights nearby are those of what holds from 4 h on.";
    assert!(plain(&orbit.summary).ends_with(told), "{}", orbit.summary);
    // Without an orbit of its own the last stretch has neither.
    let (_, orbit) = pictures(&format!("{PLAIN}&phase1.from=3&phase1.x.wastage=0.01"));
    assert_eq!(labels(&orbit, Role::Parity), Vec::<String>::new());
    assert!(!orbit.summary.contains("nearby"), "{}", orbit.summary);
}

#[test]
fn words_of_a_break_line_begin_clear_of_the_mark_that_moved_it() {
    for join in ["64@4", "20@6", "5@1", "200@2"] {
        let (strength, _) = pictures(&format!("{PLAIN}&y.join={join}"));
        let svg = drawn(&strength);
        let marks = uprights(&svg);
        for line in strength
            .lines
            .iter()
            .filter(|line| matches!(line.role, Role::BreakLine(_)))
        {
            let at = text_at(&svg, &line.label);
            assert!(
                marks.iter().all(|mark| (at - f64::from(*mark)).abs() > 3.0),
                "{join}: {:?} begins at {at}, marks at {marks:?}",
                line.label
            );
        }
    }
}

/// The words of an axis ran over the edge of a narrow picture where the names are long.
#[test]
fn the_words_of_the_axes_stay_within_the_picture() {
    let long = "The%20second%20and%20the%20third%20of%20those%20that%20came%20over%20the%20hill";
    let link = PLAIN
        .replace("Ondrel", long)
        .replace("Vessary", &format!("{long}s"));
    let (strength, orbit) = pictures(&format!("{link}&counted=vehicles%20with%20their%20crews"));
    let (width, height) = (300, 240);
    for picture in [strength, orbit] {
        let mut svg = String::new();
        {
            let mut backend = Measured::new(SVGBackend::with_string(&mut svg, (width, height)), UsualWidths);
            draw(&mut backend, 1.0, &Ink::light(), &picture).expect("it can be drawn");
        }
        let document = Document::parse(&svg).expect("SVG is XML");
        let words = document.descendants().filter(|node| node.has_tag_name("text"));
        for node in words {
            let number = |name: &str| -> f64 {
                node.attribute(name)
                    .and_then(|text| text.parse().ok())
                    .expect(name)
            };
            let text = node.text().unwrap_or_default().trim();
            let wide = UsualWidths.width(text, "serif", number("font-size"), true);
            let left = match node.attribute("text-anchor") {
                Some("end") => number("x") - wide,
                Some("middle") => number("x") - wide / 2.0,
                _ => number("x"),
            };
            assert!(
                left >= -1.0 && left + wide <= f64::from(width) + 1.0,
                "{text:?} stands from {left} to {}",
                left + wide
            );
        }
    }
}

/// Words stood 32 px beside their place on the map, in a part in which the other side breaks.
#[test]
fn what_happens_on_a_map_is_told_where_it_does() {
    let asked = "x.name=Tarn&x.start=900&x.rate=0.05?&x.break=0.35&x.support.area=0.01&x.join=150@3&y.name=Osk&\
                 y.start=700?&y.fire=area&y.rate=0.0001&y.break=0.45&y.wastage=0.005&sothat=y.breaks,x.end:800..";
    let pairs = Pairs::parse(asked);
    let statement = Statement::read(&pairs).expect("it is one");
    let mut chart = Chart::new(&pairs, &statement).expect("two numbers are in question");
    while !chart.go_on(u32::MAX) {}
    let map = picture::map(&statement, &chart, None).expect("there is something to show");
    let mut told = 0;
    for line in map.lines.iter().filter(|line| line.role == Role::Region) {
        for (across, up) in &line.points {
            let values = Values::from([("x.rate".into(), *across), ("y.start".into(), *up)]);
            let outcome = fight(&statement.engagement_with(&values), Effort::Outcome).outcome;
            let breaks = if line.label.starts_with("Tarn") {
                Breaks::X
            } else {
                Breaks::Y
            };
            assert_eq!(outcome.breaks, breaks, "{}: {across}, {up}", line.label);
            let wanted = breaks == Breaks::Y && outcome.y.end.is_some() && outcome.x.end >= Some(800.0);
            assert_eq!(
                line.label.ends_with(", as wanted"),
                wanted,
                "{}: {across}, {up}",
                line.label
            );
            told += 1;
        }
    }
    assert!(told > 5, "{told}");
}

/// Letters as wide as DejaVu's left no room for the words of the last level: then its number stands there.
#[test]
fn a_level_without_room_for_words_has_its_number() {
    struct Wide;
    impl Measure for Wide {
        fn width(&self, text: &str, family: &str, size: f64, italic: bool) -> f64 {
            2.0 * UsualWidths.width(text, family, size, italic)
        }
    }
    let (strength, _) = pictures(&format!("{PLAIN}&y.join=64@4,20@6"));
    let mut svg = String::new();
    {
        let mut backend = Measured::new(SVGBackend::with_string(&mut svg, (360, 200)), Wide);
        draw(&mut backend, 1.0, &Ink::light(), &strength).expect("it can be drawn");
    }
    assert!(svg.contains("274"), "{svg}");
    assert!(
        !svg.contains("274: Vessary breaks"),
        "there was room after all: make it wider"
    );
}
