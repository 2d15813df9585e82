//! The ground of a map: how it comes out at every place, by lightness and hatch, so that it is read without colour.

use super::layout::Layout;
use super::pen::{Pen, Point, SOLID};
use super::surface::Drawn;
use aftercount_core::picture::{Ground, Tone};
use aftercount_core::sides::Side;
use plotters::prelude::RGBColor;

/// The height of a row of the ground, in CSS pixels: its stairs are hidden under the line along which it flips.
const ROW: f64 = 1.0;

/// Between two lines of a hatch, in CSS pixels.
const HATCH: f64 = 9.0;

/// Between two of the dots that say where all that is wanted holds, and half of what one is wide, in CSS pixels.
const APART: f64 = 13.0;
const DOT: f64 = 1.2;

/// How far the tone is from the paper, out of 100.
fn depth(tone: Tone) -> u16 {
    match tone {
        Tone::Breaks(Side::X) => 8,
        Tone::Breaks(Side::Y) => 20,
        Tone::Both => 32,
        Tone::Neither => 0,
    }
}

/// Draws the whole ground.
pub(crate) fn draw(pen: &mut Pen<'_>, field: &Layout, ground: &Ground) -> Drawn {
    rows(pen, field, ground)?;
    let colour = mixed(pen.ink.ink, pen.ink.paper, 48);
    for (rises, tones) in [
        (true, [Tone::Breaks(Side::X), Tone::Both]),
        (false, [Tone::Breaks(Side::Y), Tone::Both]),
    ] {
        for piece in hatch(field, ground, rises, &tones) {
            pen.line(&piece, colour, 0.7, SOLID)?;
        }
    }
    dots(pen, field, ground)
}

/// Dots in rows, each row between those of the row before, where all that is wanted holds.
fn dots(pen: &mut Pen<'_>, field: &Layout, ground: &Ground) -> Drawn {
    let mut y = field.top + APART / 2.0;
    let mut shift = 0.0;
    while y < field.foot {
        let mut x = field.left + APART / 2.0 + shift;
        while x < field.right {
            let (across, up) = parts(field, (x, y));
            if ground.is_wanted(across, up) {
                let (x, y) = (x - DOT, y - DOT);
                pen.patch((x, y), (x + 2.0 * DOT, y + 2.0 * DOT), pen.ink.ink)?;
            }
            x += APART;
        }
        y += APART;
        shift = APART / 2.0 - shift;
    }
    Ok(())
}

fn rows(pen: &mut Pen<'_>, field: &Layout, ground: &Ground) -> Drawn {
    let mut top = field.top;
    while top < field.foot {
        let foot = (top + ROW).min(field.foot);
        let tone = |x: f64| tone_at(field, ground, (x, (top + foot) / 2.0));
        let mut from = field.left;
        let mut x = field.left;
        while x < field.right {
            let next = (x + 1.0).min(field.right);
            if next >= field.right || tone(next) != tone(from) {
                fill(pen, (from, top), (next, foot), tone(from))?;
                from = next;
            }
            x = next;
        }
        top = foot;
    }
    Ok(())
}

fn fill(pen: &mut Pen<'_>, from: Point, to: Point, tone: Tone) -> Drawn {
    let depth = depth(tone);
    if depth == 0 {
        return Ok(());
    }
    let colour = mixed(pen.ink.ink, pen.ink.paper, depth);
    pen.figure(&[from, (to.0, from.1), to, (from.0, to.1)], colour, true)
}

/// The pieces of the hatch that lie on one of these tones.
fn hatch(field: &Layout, ground: &Ground, rises: bool, tones: &[Tone]) -> Vec<[Point; 2]> {
    let (width, height) = (field.right - field.left, field.foot - field.top);
    let mut pieces = Vec::new();
    let mut offset = -height;
    while offset < width {
        let place = |down: f64| {
            let across = offset + if rises { height - down } else { down };
            (field.left + across, field.top + down)
        };
        let inside = |(x, _): Point| field.left <= x && x <= field.right;
        let mut since: Option<Point> = None;
        let mut last = place(0.0);
        let mut down = 0.0;
        while down <= height {
            let at = place(down);
            let on = inside(at) && tones.contains(&tone_at(field, ground, at));
            match (on, since) {
                (true, None) => since = Some(at),
                (false, Some(from)) => {
                    pieces.push([from, last]);
                    since = None;
                }
                _ => {}
            }
            last = at;
            down += 1.0;
        }
        pieces.extend(since.map(|from| [from, last]));
        offset += HATCH;
    }
    pieces.retain(|[from, to]| (to.1 - from.1).abs() > 1.5);
    pieces
}

fn tone_at(field: &Layout, ground: &Ground, at: Point) -> Tone {
    let (across, up) = parts(field, at);
    ground.tone(across, up)
}

/// A place as parts of both axes.
fn parts(field: &Layout, (x, y): Point) -> (f64, f64) {
    (
        (x - field.left) / (field.right - field.left),
        (field.foot - y) / (field.foot - field.top),
    )
}

/// So much ink out of 100 on the paper.
fn mixed(ink: RGBColor, paper: RGBColor, depth: u16) -> RGBColor {
    let mix = |ink: u8, paper: u8| ((depth * u16::from(ink) + (100 - depth) * u16::from(paper)) / 100) as u8;
    RGBColor(mix(ink.0, paper.0), mix(ink.1, paper.1), mix(ink.2, paper.2))
}
