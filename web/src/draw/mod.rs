//! Core's pictures, drawn once for every backend of plotters: the canvas of the page and the SVG of print and export.

mod around;
mod axes;
mod ink;
mod labels;
mod layout;
mod lines;
mod measured;
mod part;
mod pen;
mod reading;
mod svg;

pub use around::{Around, draw_around};
pub use ink::{Ink, parse_colour};
pub use layout::Layout;
pub use measured::{Measure, Measured, UsualWidths};
pub use pen::Drawn;
pub use reading::{reading_on_orbit, reading_on_strength};
pub use svg::svg;

use aftercount_core::picture::Picture;
use labels::Labels;
use pen::Pen;
use plotters::prelude::DrawingBackend;
use plotters_backend::DrawingErrorKind;

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
) -> Result<Layout, DrawingErrorKind<B::ErrorType>> {
    backend.ensure_prepared()?;
    let mut pen = Pen::new(backend, scale, ink);
    let field = axes::layout(&pen, picture);
    axes::draw(&mut pen, &field, picture)?;
    lines::draw(&mut pen, &field, picture)?;
    Labels::of(&field, picture).draw(&mut pen, picture)?;
    backend.present()?;
    Ok(field)
}
