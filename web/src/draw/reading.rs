//! The reading line: upright through strength over time, and to the axes of one side against the other.

use super::ink::Ink;
use super::layout::Layout;
use super::pen::{Pen, Point, SOLID};
use super::surface::Drawn;
use aftercount_core::sides::{Both, Side};
use plotters::prelude::DrawingBackend;

/// Half the height of the point that is read, in CSS pixels.
const POINT: f64 = 4.5;

/// The line at the time `t`, and a point on each curve.
///
/// # Errors
/// Those of the backend.
pub fn reading_on_strength<B: DrawingBackend>(
    backend: &mut B,
    scale: f64,
    ink: &Ink,
    field: &Layout,
    t: f64,
    strengths: &Both<f64>,
) -> Drawn {
    let mut pen = Pen::new(backend, scale, ink);
    let x = field.x(t);
    pen.line(&[(x, field.top), (x, field.foot)], ink.ink, 1.0, SOLID)?;
    for side in Side::BOTH {
        let colour = super::axes::side_colour(&pen, side);
        diamond(&mut pen, (x, field.y(strengths[side])), colour)?;
    }
    Ok(())
}

/// The point of both strengths, and lines from it to both axes.
///
/// # Errors
/// Those of the backend.
pub fn reading_on_orbit<B: DrawingBackend>(
    backend: &mut B,
    scale: f64,
    ink: &Ink,
    field: &Layout,
    strengths: &Both<f64>,
) -> Drawn {
    let mut pen = Pen::new(backend, scale, ink);
    let (x, y) = field.place((strengths.x, strengths.y));
    pen.line(&[(x, field.foot), (x, y)], ink.x, 1.0, SOLID)?;
    pen.line(&[(field.left, y), (x, y)], ink.y, 1.0, SOLID)?;
    diamond(&mut pen, (x, y), ink.ink)
}

/// The place on a map, and lines from it to both axes.
///
/// # Errors
/// Those of the backend.
pub fn reading_on_map<B: DrawingBackend>(
    backend: &mut B,
    scale: f64,
    ink: &Ink,
    field: &Layout,
    at: Point,
) -> Drawn {
    let mut pen = Pen::new(backend, scale, ink);
    let (x, y) = field.place(at);
    pen.line(&[(x, field.foot), (x, y)], ink.ink, 1.0, SOLID)?;
    pen.line(&[(field.left, y), (x, y)], ink.ink, 1.0, SOLID)?;
    diamond(&mut pen, (x, y), ink.ink)
}

fn diamond(pen: &mut Pen<'_>, (x, y): Point, colour: plotters::prelude::RGBColor) -> Drawn {
    pen.figure(
        &[(x, y - POINT), (x + POINT, y), (x, y + POINT), (x - POINT, y)],
        colour,
        true,
    )
}
