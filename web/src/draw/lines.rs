//! The lines and spots of a picture, each role in its own hand.

use super::axes::{is_orbit, side_colour};
use super::labels::is_on_the_way;
use super::layout::Layout;
use super::pen::{Dash, Pen, Point, SOLID};
use super::surface::Drawn;
use aftercount_core::picture::{Line, Picture, Role, Spot};
use aftercount_core::sides::Side;
use plotters::prelude::RGBColor;

/// Side Y's stroke, as in the form's and the legend's signs.
const LONG_DASH: Dash = &[14.0, 6.0];
const DOTS: Dash = &[2.0, 3.5];
const DASH_DOT: Dash = &[9.0, 3.0, 2.0, 3.0];
const SHORT_DASH: Dash = &[5.0, 4.0];

/// Where along the path its direction is shown: not half-way, where the reading line waits.
const ON_THE_WAY: f64 = 0.35;

/// Half the height of a mark, in CSS pixels.
const MARK: f64 = 4.2;

/// The same of what happens on the way.
const SMALL_MARK: f64 = 3.0;

/// Every line, the background first, then the marks.
pub(crate) fn draw(pen: &mut Pen<'_>, field: &Layout, picture: &Picture) -> Drawn {
    // The points of a region are places for its words.
    for line in picture.lines.iter().filter(|line| line.role != Role::Region) {
        let points: Vec<Point> = line.points.iter().map(|point| field.place(*point)).collect();
        let (colour, width, dash) = hand(pen, line.role);
        pen.line(&points, colour, width, dash)?;
        if line.role == Role::Wanted {
            // Two thin lines side by side.
            pen.line(&points, pen.ink.paper, width - 2.4, SOLID)?;
        }
    }
    for line in &picture.lines {
        match line.role {
            Role::Strength(side) => marks_along(pen, field, picture, line, side)?,
            Role::Fight => direction(pen, field, line)?,
            _ => {}
        }
    }
    for (index, spot) in picture.spots.iter().enumerate() {
        if is_on_the_way(picture, index) {
            pen.dot(field.place(spot.at), SMALL_MARK, pen.ink.ink, false)?;
        } else {
            draw_spot(pen, field, spot, is_orbit(picture) && index == 0)?;
        }
    }
    Ok(())
}

/// Colour, width in CSS pixels and dash of a role.
fn hand(pen: &Pen<'_>, role: Role) -> (RGBColor, f64, Dash) {
    match role {
        Role::Strength(Side::X) => (pen.ink.x, 2.2, SOLID),
        Role::Strength(Side::Y) => (pen.ink.y, 2.2, LONG_DASH),
        Role::Fight => (pen.ink.ink, 2.4, SOLID),
        Role::ToTheLast => (pen.ink.ink, 1.2, SHORT_DASH),
        Role::Neighbour => (pen.ink.faint, 1.0, SOLID),
        Role::Parity => (pen.ink.ink, 1.0, DASH_DOT),
        Role::BreakLine(side) => (side_colour(pen, side), 1.2, DOTS),
        Role::Defeat | Role::Clock | Role::Change => (pen.ink.ink, 1.0, SOLID),
        Role::Instant => (pen.ink.between(), 0.8, SOLID),
        Role::Now => (pen.ink.ink, 1.0, SHORT_DASH),
        Role::Met => (pen.ink.ink, 6.0, SOLID),
        Role::Flip => (pen.ink.ink, 2.4, SOLID),
        Role::Wanted => (pen.ink.ink, 5.0, SOLID),
        // Words without a line.
        Role::Region | Role::Contour => (pen.ink.ink, 0.9, SHORT_DASH),
    }
}

/// Marks where the ticks of the axis meet the curve, so that the sides are told apart without colour.
fn marks_along(pen: &mut Pen<'_>, field: &Layout, picture: &Picture, line: &Line, side: Side) -> Drawn {
    let colour = side_colour(pen, side);
    let ends = line.points.last().map_or(0.0, |last| last.0);
    for tick in picture.across.ticks.iter().filter(|tick| tick.at < ends * 0.97) {
        if let Some(up) = height_at(&line.points, tick.at) {
            mark(pen, field.place((tick.at, up)), side, colour)?;
        }
    }
    Ok(())
}

/// The height of a curve over `at`, between its points.
fn height_at(points: &[(f64, f64)], at: f64) -> Option<f64> {
    if points.first().is_none_or(|first| at < first.0) {
        return None;
    }
    let after = points.iter().position(|point| point.0 >= at)?;
    let (to, from) = (points[after], points[after.saturating_sub(1)]);
    if to.0 == from.0 {
        return Some(to.1);
    }
    Some(from.1 + (to.1 - from.1) * (at - from.0) / (to.0 - from.0))
}

fn mark(pen: &mut Pen<'_>, (x, y): Point, side: Side, colour: RGBColor) -> Drawn {
    match side {
        Side::X => {
            let corners = [
                (x - MARK, y - MARK),
                (x + MARK, y - MARK),
                (x + MARK, y + MARK),
                (x - MARK, y + MARK),
            ];
            pen.figure(&corners, colour, false)
        }
        Side::Y => {
            let corners = [
                (x, y - MARK * 1.3),
                (x + MARK * 1.2, y + MARK * 0.8),
                (x - MARK * 1.2, y + MARK * 0.8),
            ];
            pen.figure(&corners, colour, true)
        }
    }
}

fn draw_spot(pen: &mut Pen<'_>, field: &Layout, spot: &Spot, begins: bool) -> Drawn {
    let at = field.place(spot.at);
    match spot.side {
        Some(side) => mark(pen, at, side, side_colour(pen, side)),
        None => pen.dot(at, MARK, pen.ink.ink, !begins),
    }
}

/// An open arrow head, for the way the engagement goes.
fn direction(pen: &mut Pen<'_>, field: &Layout, line: &Line) -> Drawn {
    let points: Vec<Point> = line.points.iter().map(|point| field.place(*point)).collect();
    let Some((from, to)) = on_the_way(&points) else {
        return Ok(());
    };
    let (dx, dy) = (to.0 - from.0, to.1 - from.1);
    let length = dx.hypot(dy);
    let (dx, dy) = (dx / length * 8.0, dy / length * 8.0);
    let left = (to.0 - dx - dy * 0.55, to.1 - dy + dx * 0.55);
    let right = (to.0 - dx + dy * 0.55, to.1 - dy - dx * 0.55);
    // Along an axis it would hang over the edge.
    let inside =
        |(x, y): Point| (field.left..=field.right).contains(&x) && (field.top..=field.foot).contains(&y);
    if !inside(left) || !inside(right) {
        return Ok(());
    }
    pen.line(&[left, to, right], pen.ink.ink, 1.8, SOLID)
}

/// Two points some pixels apart on the way; `None` on a path too short to have a direction.
fn on_the_way(points: &[Point]) -> Option<(Point, Point)> {
    let gap = |from: Point, to: Point| (to.0 - from.0).hypot(to.1 - from.1);
    let length: f64 = points.windows(2).map(|pair| gap(pair[0], pair[1])).sum();
    if length <= 40.0 {
        return None;
    }
    let mut walked = 0.0;
    let mut from = None;
    for pair in points.windows(2) {
        walked += gap(pair[0], pair[1]);
        if walked > length * ON_THE_WAY && from.is_none() {
            from = Some(pair[0]);
        }
        if let Some(from) = from
            && gap(from, pair[1]) > 4.0
        {
            return Some((from, pair[1]));
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_curve_is_read_between_its_points() {
        let points = [(0.0, 10.0), (2.0, 6.0), (4.0, 6.0)];
        assert_eq!(height_at(&points, 0.0), Some(10.0));
        assert_eq!(height_at(&points, 1.0), Some(8.0));
        assert_eq!(height_at(&points, 5.0), None);
        assert_eq!(height_at(&points, -1.0), None);
    }

    #[test]
    fn a_path_that_stays_has_no_direction() {
        assert_eq!(on_the_way(&[(5.0, 5.0)]), None);
        assert_eq!(on_the_way(&[(5.0, 5.0), (6.0, 5.0)]), None);
        assert!(on_the_way(&[(0.0, 0.0), (30.0, 0.0), (60.0, 0.0)]).is_some());
    }
}
