//! The pictures as they are drawn: core's pictures on the SVG backend, looked at shape by shape.
//!
//! The same code draws the page's canvas, so what holds here holds there.

use aftercount_core::asked::Chart;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture, Role};
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_tests::shown::{links, worked};
use aftercount_web::draw::{Ink, Layout, Measured, UsualWidths, draw, reading_on_strength};
use plotters::prelude::{DrawingBackend, RGBColor, SVGBackend};
use roxmltree::{Document, Node};

/// A picture drawn: its layout and the SVG, `width` by `height` CSS pixels with `scale` pixels to each.
fn drawn(picture: &Picture, width: u32, height: u32, scale: u32) -> (Layout, String) {
    let mut svg = String::new();
    let backend = SVGBackend::with_string(&mut svg, (width * scale, height * scale));
    let mut backend = Measured::new(backend, UsualWidths);
    let layout =
        draw(&mut backend, f64::from(scale), &Ink::light(), picture).expect("the SVG takes every shape");
    backend.present().expect("the SVG ends");
    drop(backend);
    (layout, svg)
}

/// A shape of the drawing.
#[derive(Debug)]
struct Shape {
    name: String,
    stroke: String,
    fill: String,
    width: f64,
    points: Vec<(f64, f64)>,
    text: String,
}

fn number(node: &Node, name: &str) -> f64 {
    node.attribute(name)
        .and_then(|value| value.parse().ok())
        .unwrap_or_default()
}

fn shape(node: &Node) -> Shape {
    let pair = |x: &str, y: &str| (number(node, x), number(node, y));
    let points = match node.tag_name().name() {
        "line" => vec![pair("x1", "y1"), pair("x2", "y2")],
        "rect" => {
            let ((x, y), (width, height)) = (pair("x", "y"), pair("width", "height"));
            vec![(x, y), (x + width, y + height)]
        }
        "circle" => vec![pair("cx", "cy")],
        "text" => vec![pair("x", "y")],
        _ => node
            .attribute("points")
            .unwrap_or_default()
            .split_whitespace()
            .map(point)
            .collect(),
    };
    let attribute = |name: &str| node.attribute(name).unwrap_or_default().to_owned();
    Shape {
        name: node.tag_name().name().to_owned(),
        stroke: attribute("stroke"),
        fill: attribute("fill"),
        width: number(node, "stroke-width"),
        points,
        text: node.text().unwrap_or_default().trim().to_owned(),
    }
}

fn point(pair: &str) -> (f64, f64) {
    let (x, y) = pair.split_once(',').unwrap_or_else(|| panic!("no point: {pair}"));
    (x.parse().expect("a number"), y.parse().expect("a number"))
}

fn shapes(svg: &str) -> Vec<Shape> {
    let document = Document::parse(svg).unwrap_or_else(|why| panic!("{why}: {svg}"));
    document
        .root_element()
        .descendants()
        .filter(Node::is_element)
        .skip(1)
        .map(|node| shape(&node))
        .collect()
}

fn hex(colour: RGBColor) -> String {
    format!("#{:02X}{:02X}{:02X}", colour.0, colour.1, colour.2)
}

/// The strokes of one colour and width, in CSS pixels.
fn strokes(shapes: &[Shape], colour: RGBColor, width: f64) -> Vec<&Shape> {
    let is_it =
        |shape: &&Shape| shape.name == "polyline" && shape.stroke == hex(colour) && shape.width == width;
    shapes.iter().filter(is_it).collect()
}

#[test]
fn nothing_is_drawn_outside_its_place() {
    for link in links() {
        let worked = worked(&link);
        for picture in [&worked.strength, &worked.orbit] {
            for (width, height, scale) in [(640, 400, 2), (300, 190, 1), (340, 260, 3)] {
                let (layout, svg) = drawn(picture, width, height, scale);
                check_places(&link, &shapes(&svg), &layout, (width, height), f64::from(scale));
            }
        }
    }
}

/// Every shape is on the canvas, and every stroke of the curves in the field.
fn check_places(link: &str, shapes: &[Shape], layout: &Layout, (width, height): (u32, u32), scale: f64) {
    for shape in shapes {
        // A curve's own strokes; the outlines of marks come back to where they began, and may reach over the edge of
        // the field, though not of the canvas.
        let thick = shape.name == "polyline" && shape.width >= (2.2 * scale).round();
        let curve = thick && !shape.points[1..].contains(&shape.points[0]);
        let (left, top, right, foot) = match curve {
            true => (layout.left, layout.top, layout.right, layout.foot),
            false => (0.0, 0.0, f64::from(width), f64::from(height)),
        };
        for &(x, y) in &shape.points {
            let (x, y) = (x / scale, y / scale);
            // The paper under a label reaches two pixels further than its words.
            let rounding = if shape.name == "rect" { 2.6 } else { 0.6 };
            let inside = (left - rounding..=right + rounding).contains(&x)
                && (top - rounding..=foot + rounding).contains(&y);
            assert!(inside, "{link}: {shape:?} leaves {width} by {height} at {scale}");
        }
    }
}

/// The demo's two forces without its reserve: curves that do not step.
const PLAIN: &str =
    "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.06&y.break=0.39";

/// Side X's curve is one solid stroke, side Y's is dashed, and every point of both is where the core says.
#[test]
fn the_curves_are_those_of_the_core() {
    let worked = worked(PLAIN);
    let (layout, svg) = drawn(&worked.strength, 640, 400, 2);
    let (shapes, ink) = (shapes(&svg), Ink::light());
    let trajectory = worked.fight.trajectory.as_ref().expect("asked for");
    for (side, colour) in [(Side::X, ink.x), (Side::Y, ink.y)] {
        let strokes = strokes(&shapes, colour, 4.0);
        match side {
            Side::X => assert_eq!(strokes.len(), 1, "a solid line"),
            Side::Y => assert!(strokes.len() > 15, "a dashed line: {} strokes", strokes.len()),
        }
        for (x, y) in strokes.iter().flat_map(|stroke| &stroke.points) {
            let t = layout.value_at(x / 2.0);
            let known = layout.y(trajectory.strengths_at(t)[side]);
            assert!(
                (y / 2.0 - known).abs() <= 1.5,
                "{side:?} at {t}: {} for {known}",
                y / 2.0
            );
        }
        let across: Vec<f64> = strokes
            .iter()
            .flat_map(|stroke| &stroke.points)
            .map(|point| point.0 / 2.0)
            .collect();
        let (first, last) = (across[0], across[across.len() - 1]);
        let end = layout.x(worked.fight.outcome.time.expect("somebody breaks"));
        assert!(
            (first - layout.left).abs() <= 1.0 && (last - end).abs() <= 20.0,
            "from {first} to {last} of {end}"
        );
    }
}

/// Open squares on X's curve and filled triangles on Y's, so that the sides are told apart without colour.
#[test]
fn marks_tell_the_sides_apart_in_grey() {
    let worked = worked(PLAIN);
    let (layout, svg) = drawn(&worked.strength, 640, 400, 2);
    let (shapes, ink) = (shapes(&svg), Ink::light());
    let trajectory = worked.fight.trajectory.as_ref().expect("asked for");
    let figures = |corners: usize, fill: RGBColor| -> Vec<&Shape> {
        let is_it = |shape: &&Shape| {
            shape.name == "polygon" && shape.points.len() == corners && shape.fill == hex(fill)
        };
        shapes.iter().filter(is_it).collect()
    };
    let (squares, triangles) = (figures(4, ink.paper), figures(3, ink.y));
    assert!(squares.len() >= 4, "{} squares", squares.len());
    assert!(triangles.len() >= 4, "{} triangles", triangles.len());
    for (side, marks) in [(Side::X, squares), (Side::Y, triangles)] {
        for mark in marks {
            let middle = |of: fn(&(f64, f64)) -> f64| {
                let all: Vec<f64> = mark.points.iter().map(of).collect();
                (all.iter().copied().fold(f64::MAX, f64::min) + all.iter().copied().fold(f64::MIN, f64::max))
                    / 4.0
            };
            let (x, y) = (middle(|point| point.0), middle(|point| point.1));
            let known = layout.y(trajectory.strengths_at(layout.value_at(x))[side]);
            assert!((y - known).abs() <= 2.5, "{side:?}: a mark at {y} for {known}");
        }
    }
}

/// The upright at the moment of defeat, the break lines at their heights, and the words beside them.
#[test]
fn the_moment_and_the_break_lines_stand_where_they_should() {
    let link = "x.name=Ondrel&x.start=600&x.rate=0.04&x.break=0.3&y.name=Vessary&y.start=400&y.rate=0.05&y.break=0.4";
    let worked = worked(link);
    let (layout, svg) = drawn(&worked.strength, 640, 400, 1);
    let (shapes, ink) = (shapes(&svg), Ink::light());
    let time = worked.fight.outcome.time.expect("somebody breaks");
    let upright = strokes(&shapes, ink.ink, 1.0).into_iter().any(|stroke| {
        let at = |x: f64| (x - layout.x(time)).abs() <= 0.6;
        let heights: Vec<f64> = stroke.points.iter().map(|point| point.1).collect();
        stroke.points.iter().all(|point| at(point.0)) && (heights[0] - heights[1]).abs() > 300.0
    });
    assert!(upright, "no upright at {time}");
    for (colour, line) in [(ink.x, 420.0), (ink.y, 240.0)] {
        let on_it = |shape: &&&Shape| {
            shape
                .points
                .iter()
                .all(|point| (point.1 - layout.y(line)).abs() <= 0.6)
        };
        let dots = strokes(&shapes, colour, 1.0).iter().filter(on_it).count();
        assert!(dots > 50, "{dots} dots on the line at {line}");
    }
    let words: Vec<&str> = shapes
        .iter()
        .filter(|shape| shape.name == "text")
        .map(|shape| shape.text.as_str())
        .collect();
    for known in [
        "Ondrel",
        "Vessary",
        "420: Ondrel breaks",
        "240: Vessary breaks",
        "time (h)",
        "combatants",
    ] {
        assert!(words.contains(&known), "`{known}` is not among {words:?}");
    }
    assert!(
        words.iter().any(|word| word.starts_with("Vessary breaks, ")),
        "{words:?}"
    );
}

#[test]
fn a_clock_is_one_line_and_no_defeat() {
    let worked = worked("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&until=6");
    let roles: Vec<Role> = worked.strength.lines.iter().map(|line| line.role).collect();
    assert!(
        roles.contains(&Role::Clock) && !roles.contains(&Role::Defeat),
        "{roles:?}"
    );
    let (layout, svg) = drawn(&worked.strength, 640, 400, 1);
    let x = layout.x(6.0);
    let shapes = shapes(&svg);
    // Far longer than a tick.
    let near = strokes(&shapes, Ink::light().ink, 1.0)
        .into_iter()
        .filter(|stroke| {
            let tall = (stroke.points[0].1 - stroke.points[1].1).abs() > 100.0;
            tall && stroke.points.iter().all(|point| (point.0 - x).abs() <= 5.0)
        });
    assert_eq!(near.count(), 1, "lines at {x}");
}

/// Names are drawn as they are, whatever they hold.
#[test]
fn hostile_names_are_only_words() {
    let name = "<script>alert(1)</script> & \"'";
    let mut pairs = Pairs::parse("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05");
    pairs.set("x.name", name);
    pairs.set("y.name", "\u{202f}]]><!--");
    let worked = worked(&pairs.link());
    for picture in [&worked.strength, &worked.orbit] {
        let (_, svg) = drawn(picture, 900, 500, 1);
        assert!(!svg.contains("<script") && !svg.contains("<!--"), "{svg}");
        let shapes = shapes(&svg);
        assert!(
            shapes.iter().any(|shape| shape.text.contains(name)),
            "the name is there in full"
        );
    }
}

/// The reading line: upright at the time, with a point on each curve.
#[test]
fn the_reading_line_reads_the_curves() {
    let worked = worked(PLAIN);
    let trajectory = worked.fight.trajectory.as_ref().expect("asked for");
    let (layout, _) = drawn(&worked.strength, 640, 400, 1);
    let (t, strengths) = (2.5, trajectory.strengths_at(2.5));
    let mut svg = String::new();
    let mut backend = Measured::new(SVGBackend::with_string(&mut svg, (640, 400)), UsualWidths);
    reading_on_strength(&mut backend, 1.0, &Ink::light(), &layout, t, &strengths).expect("drawn");
    backend.present().expect("the SVG ends");
    drop(backend);
    let shapes = shapes(&svg);
    let points: Vec<&Shape> = shapes.iter().filter(|shape| shape.name == "polygon").collect();
    assert_eq!(points.len(), 2);
    for (side, point) in Side::BOTH.into_iter().zip(points) {
        let height = point.points.iter().map(|corner| corner.1).sum::<f64>() / point.points.len() as f64;
        assert!(
            (height - layout.y(strengths[side])).abs() <= 1.0,
            "{side:?} at {height}"
        );
    }
}

#[test]
fn the_start_of_an_orbit_has_its_mark() {
    let worked = worked(PLAIN);
    let (_, svg) = drawn(&worked.orbit, 480, 400, 1);
    assert!(shapes(&svg).iter().any(|shape| shape.name == "circle"));
}

/// The points of a region are where its words may stand: they were joined by a dashed line across the map.
#[test]
fn no_line_joins_the_places_of_a_regions_words() {
    let pairs = Pairs::parse("x.start=600?&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.06?&y.break=0.4");
    let statement = Statement::read(&pairs).expect("it is one");
    let mut chart = Chart::new(&pairs, &statement).expect("two numbers are in question");
    while !chart.go_on(u32::MAX) {}
    let with = picture::map(&statement, &chart, None).expect("there is something to show");
    let mut without = with.clone();
    without.lines.retain(|line| line.role != Role::Region);
    assert!(without.lines.len() < with.lines.len());
    let lines = |picture: &Picture| {
        let shapes = shapes(&drawn(picture, 640, 480, 1).1);
        shapes.iter().filter(|shape| shape.name == "polyline").count()
    };
    assert_eq!(lines(&with), lines(&without));
}
