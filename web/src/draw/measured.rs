//! A backend that hands every call on and measures text by a way of its own.
//!
//! plotters measures text in the page by adding an element with a style, which the page's policy blocks; and without a
//! font at hand it only guesses. So the canvas measures through its context, and the SVG by a table of usual widths.

use plotters::prelude::DrawingBackend;
use plotters_backend::{BackendColor, BackendCoord, BackendStyle, BackendTextStyle, DrawingErrorKind};

/// How wide a text is in a font `size` pixels high; the last argument says whether it is italic.
pub trait Measure {
    /// The width in the backend's pixels.
    fn width(&self, text: &str, family: &str, size: f64, italic: bool) -> f64;
}

/// A backend with its measure.
pub struct Measured<B, M> {
    backend: B,
    measure: M,
}

impl<B: DrawingBackend, M: Measure> Measured<B, M> {
    /// Puts the two together.
    pub fn new(backend: B, measure: M) -> Measured<B, M> {
        Measured { backend, measure }
    }
}

type Done<B> = Result<(), DrawingErrorKind<<B as DrawingBackend>::ErrorType>>;

impl<B: DrawingBackend, M: Measure> DrawingBackend for Measured<B, M> {
    type ErrorType = B::ErrorType;

    fn get_size(&self) -> (u32, u32) {
        self.backend.get_size()
    }

    fn ensure_prepared(&mut self) -> Done<B> {
        self.backend.ensure_prepared()
    }

    fn present(&mut self) -> Done<B> {
        self.backend.present()
    }

    fn draw_pixel(&mut self, point: BackendCoord, color: BackendColor) -> Done<B> {
        self.backend.draw_pixel(point, color)
    }

    fn draw_line<S: BackendStyle>(&mut self, from: BackendCoord, to: BackendCoord, style: &S) -> Done<B> {
        self.backend.draw_line(from, to, style)
    }

    fn draw_rect<S: BackendStyle>(
        &mut self,
        upper_left: BackendCoord,
        bottom_right: BackendCoord,
        style: &S,
        fill: bool,
    ) -> Done<B> {
        self.backend.draw_rect(upper_left, bottom_right, style, fill)
    }

    fn draw_path<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(
        &mut self,
        path: I,
        style: &S,
    ) -> Done<B> {
        self.backend.draw_path(path, style)
    }

    fn draw_circle<S: BackendStyle>(
        &mut self,
        center: BackendCoord,
        radius: u32,
        style: &S,
        fill: bool,
    ) -> Done<B> {
        self.backend.draw_circle(center, radius, style, fill)
    }

    fn fill_polygon<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(
        &mut self,
        vertices: I,
        style: &S,
    ) -> Done<B> {
        self.backend.fill_polygon(vertices, style)
    }

    fn draw_text<S: BackendTextStyle>(&mut self, text: &str, style: &S, at: BackendCoord) -> Done<B> {
        self.backend.draw_text(text, style, at)
    }

    fn estimate_text_size<S: BackendTextStyle>(
        &self,
        text: &str,
        style: &S,
    ) -> Result<(u32, u32), DrawingErrorKind<Self::ErrorType>> {
        let italic = !matches!(style.style().as_str(), "normal" | "bold");
        let width = self
            .measure
            .width(text, style.family().as_str(), style.size(), italic);
        Ok((width.ceil() as u32, style.size().ceil() as u32))
    }
}

/// The usual widths of a book face, where nothing can be measured.
pub struct UsualWidths;

impl Measure for UsualWidths {
    fn width(&self, text: &str, _family: &str, size: f64, _italic: bool) -> f64 {
        let ems: f64 = text.chars().map(usual_width).sum();
        ems * size
    }
}

fn usual_width(letter: char) -> f64 {
    match letter {
        ' ' | ',' | '.' | ':' | ';' | 'i' | 'j' | 'l' | 't' | 'f' | 'I' | '\'' | '’' => 0.29,
        '\u{202f}' | '\u{2009}' => 0.2,
        'm' | 'w' | 'M' | 'W' => 0.85,
        'A'..='Z' => 0.7,
        _ => 0.52,
    }
}
