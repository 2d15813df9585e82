//! A picture as SVG, in the page's units and with letters that can be read and searched.

use super::around::{self, Around};
use super::ink::Ink;
use super::measured::{Measure, Measured};
use super::pen::Pen;
use super::surface::in_words;
use aftercount_core::passing::finding::escaped;
use aftercount_core::picture::Picture;
use plotters::prelude::{DrawingBackend, SVGBackend};

/// Pixels for each unit: plotters counts in whole pixels, and a curve of those is a staircase.
const SCALE: u32 = 8;

/// plotters writes letters into an SVG so many times smaller than it was told.
const LETTERS: f64 = 1.24;

/// `picture` as an SVG of its own, `size` units large, with the words around it where there are any.
///
/// # Errors
/// In words, where a picture cannot be drawn.
pub fn svg(
    picture: &Picture,
    ink: &Ink,
    size: (u32, u32),
    measure: impl Measure,
    around: Option<&Around>,
) -> Result<String, String> {
    let pixels = (size.0 * SCALE, size.1 * SCALE);
    let mut text = String::new();
    {
        let mut backend = Measured::new(SVGBackend::with_string(&mut text, pixels), measure);
        backend.ensure_prepared().map_err(in_words)?;
        let mut pen = Pen::new(&mut backend, f64::from(SCALE), ink).with_letters(LETTERS);
        match around {
            Some(around) => around::draw(&mut pen, picture, around)?,
            None => super::draw_with(&mut pen, picture)?,
        };
        backend.present().map_err(in_words)?;
    }
    Ok(in_units(&text, size, pixels, &picture.summary))
}

/// The same with its size in units, and its summary for those who do not see it.
fn in_units(text: &str, size: (u32, u32), pixels: (u32, u32), summary: &str) -> String {
    let head = |(width, height): (u32, u32)| format!("<svg width=\"{width}\" height=\"{height}\" ");
    let rest = text.strip_prefix(&head(pixels)).unwrap_or(text);
    let (attributes, inside) = rest.split_once('>').unwrap_or((rest, ""));
    format!(
        "{}role=\"img\" {attributes}>\n<title>{}</title>{inside}",
        head(size),
        escaped(summary)
    )
}
