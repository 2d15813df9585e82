//! Core's pictures, drawn once for every backend of plotters: the canvas of the page and the SVG of print and export.

mod around;
mod axes;
mod ground;
mod ink;
mod labels;
mod layout;
mod lines;
mod measured;
mod pen;
mod reading;
mod surface;
mod svg;

pub use around::Around;
pub use ink::{Ink, parse_colour};
pub use layout::Layout;
pub use measured::{Measure, Measured, UsualWidths};
pub use reading::{reading_on_map, reading_on_orbit, reading_on_strength};
pub use surface::Drawn;
pub use svg::svg;

use aftercount_core::picture::Picture;
use labels::Labels;
use pen::Pen;
use plotters::prelude::DrawingBackend;
use surface::in_words;

/// Draws `picture` over the whole of `backend`, which has `scale` pixels for each CSS pixel, and says where its values
/// stand.
///
/// # Errors
/// Those of the backend.
pub fn draw<B: DrawingBackend>(
    backend: &mut B,
    scale: f64,
    ink: &Ink,
    picture: &Picture,
) -> Result<Layout, String> {
    backend.ensure_prepared().map_err(in_words)?;
    let field = draw_with(&mut Pen::new(backend, scale, ink), picture)?;
    backend.present().map_err(in_words)?;
    Ok(field)
}

/// The same with the words around it that a picture must not go without where it is passed on.
///
/// # Errors
/// Those of the backend.
pub fn draw_around<B: DrawingBackend>(
    backend: &mut B,
    scale: f64,
    ink: &Ink,
    picture: &Picture,
    around: &Around,
) -> Result<Layout, String> {
    backend.ensure_prepared().map_err(in_words)?;
    let field = around::draw(&mut Pen::new(backend, scale, ink), picture, around)?;
    backend.present().map_err(in_words)?;
    Ok(field)
}

/// Draws with a pen, over the whole of its sheet.
fn draw_with(pen: &mut Pen<'_>, picture: &Picture) -> Result<Layout, String> {
    let field = axes::layout(pen, picture);
    if let Some(ground) = &picture.ground {
        ground::draw(pen, &field, ground)?;
    }
    axes::draw(pen, &field, picture)?;
    lines::draw(pen, &field, picture)?;
    Labels::of(&field, picture).draw(pen, picture)?;
    Ok(field)
}
