//! Axes: two hairlines with short outward ticks, and no grid.

use super::layout::Layout;
use super::pen::{Pen, SOLID, Set};
use super::surface::Drawn;
use aftercount_core::picture::{Axis, Picture, Role};
use aftercount_core::sides::Side;
use plotters::prelude::RGBColor;
use plotters::style::text_anchor::{HPos, VPos};

/// The size of the numbers, in CSS pixels.
const NUMBERS: f64 = 12.5;
/// The size of the words.
const WORDS: f64 = 13.0;
/// How far the words stay from the edges.
const EDGE: f64 = 2.0;
/// The length of a tick.
const TICK: f64 = 5.0;
/// The height under the field: the numbers, the words, and room for a finger on the reading line.
const UNDER: f64 = 44.0;

fn numbers(colour: RGBColor, across: HPos, up: VPos) -> Set {
    Set {
        size: NUMBERS,
        italic: false,
        colour,
        across,
        up,
    }
}

fn words(colour: RGBColor, across: HPos) -> Set {
    Set {
        size: WORDS,
        italic: true,
        colour,
        across,
        up: VPos::Top,
    }
}

/// Where the field stands, so that every number and label has its room.
pub(crate) fn layout(pen: &Pen<'_>, picture: &Picture) -> Layout {
    let (width, height) = pen.size();
    let set = numbers(pen.ink.ink, HPos::Right, VPos::Center);
    let widest = picture
        .up
        .ticks
        .iter()
        .map(|tick| pen.width(&tick.text, set))
        .fold(0.0, f64::max);
    let behind = picture
        .spots
        .iter()
        .map(|spot| pen.width(&spot.label, set))
        .fold(0.0, f64::max);
    // On the orbit the words of a spot stand inside the field.
    let behind = if is_orbit(picture) { 0.0 } else { behind };
    Layout {
        left: (widest + TICK + 6.0).min(width * 0.4),
        top: WORDS + 14.0,
        right: width - (behind * 0.7).clamp(20.0, width * 0.15),
        foot: (height - UNDER).max(WORDS + 34.0),
        across: (picture.across.from, picture.across.to),
        up: (picture.up.from, picture.up.to),
    }
}

/// Whether one side stands against the other, instead of both over time.
pub(crate) fn is_orbit(picture: &Picture) -> bool {
    picture.has(Role::Fight)
}

/// The hairlines, the ticks and their numbers, and what is measured.
pub(crate) fn draw(pen: &mut Pen<'_>, field: &Layout, picture: &Picture) -> Drawn {
    let ink = pen.ink.ink;
    pen.line(
        &[(field.left, field.foot), (field.right, field.foot)],
        ink,
        1.0,
        SOLID,
    )?;
    pen.line(
        &[(field.left, field.foot), (field.left, field.top)],
        ink,
        1.0,
        SOLID,
    )?;
    ticks_across(pen, field, &picture.across)?;
    ticks_up(pen, field, &picture.up)?;
    let (across, up) = match is_orbit(picture) {
        true => (side_colour(pen, Side::X), side_colour(pen, Side::Y)),
        false => (ink, ink),
    };
    let under = field.foot + TICK + NUMBERS + 7.0;
    let (across, up) = (words(across, HPos::Right), words(up, HPos::Left));
    // What is measured may be a name of sixty letters.
    let label = pen.fitted(&picture.across.label, across, field.right - EDGE);
    pen.label(&label, (field.right, under), across)?;
    let label = pen.fitted(&picture.up.label, up, pen.size().0 - 2.0 * EDGE);
    pen.label(&label, (EDGE, 1.0), up)
}

fn ticks_across(pen: &mut Pen<'_>, field: &Layout, axis: &Axis) -> Drawn {
    let set = numbers(pen.ink.ink, HPos::Center, VPos::Top);
    let mut free_from = f64::NEG_INFINITY;
    for tick in &axis.ticks {
        let x = field.x(tick.at);
        pen.line(
            &[(x, field.foot), (x, field.foot + TICK)],
            pen.ink.ink,
            1.0,
            SOLID,
        )?;
        let half = pen.width(&tick.text, set) / 2.0;
        // Numbers that would touch the one before are left out: their ticks remain.
        if x - half >= free_from && x + half <= pen.size().0 {
            pen.label(&tick.text, (x, field.foot + TICK + 3.0), set)?;
            free_from = x + half + 6.0;
        }
    }
    Ok(())
}

fn ticks_up(pen: &mut Pen<'_>, field: &Layout, axis: &Axis) -> Drawn {
    let set = numbers(pen.ink.ink, HPos::Right, VPos::Center);
    let mut free_under = f64::INFINITY;
    for tick in &axis.ticks {
        let y = field.y(tick.at);
        pen.line(
            &[(field.left - TICK, y), (field.left, y)],
            pen.ink.ink,
            1.0,
            SOLID,
        )?;
        if y + NUMBERS / 2.0 <= free_under {
            pen.label(&tick.text, (field.left - TICK - 3.0, y), set)?;
            free_under = y - NUMBERS / 2.0 - 1.0;
        }
    }
    Ok(())
}

/// The colour of a side.
pub(crate) fn side_colour(pen: &Pen<'_>, side: Side) -> RGBColor {
    match side {
        Side::X => pen.ink.x,
        Side::Y => pen.ink.y,
    }
}
