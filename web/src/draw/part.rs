//! A part of a backend as a backend of its own, so that a picture can stand with words above and below it.

use plotters::prelude::DrawingBackend;
use plotters::style::text_anchor::Pos;
use plotters::style::{FontFamily, FontStyle, FontTransform};
use plotters_backend::{BackendColor, BackendCoord, BackendStyle, BackendTextStyle, DrawingErrorKind};

/// The part of a backend from a corner on, with a size of its own.
pub(crate) struct Part<'a, B> {
    backend: &'a mut B,
    corner: BackendCoord,
    size: (u32, u32),
    letters: f64,
}

impl<'a, B: DrawingBackend> Part<'a, B> {
    /// From `corner` on, `size` large, both in the backend's pixels.
    pub(crate) fn new(backend: &'a mut B, corner: BackendCoord, size: (u32, u32)) -> Part<'a, B> {
        Part {
            backend,
            corner,
            size,
            letters: 1.0,
        }
    }

    /// All of it, with letters `factor` times as large as they are asked for: some backends draw them smaller.
    pub(crate) fn with_letters(backend: &'a mut B, factor: f64) -> Part<'a, B> {
        let size = backend.get_size();
        Part {
            letters: factor,
            ..Part::new(backend, (0, 0), size)
        }
    }

    fn moved(&self, (x, y): BackendCoord) -> BackendCoord {
        (x + self.corner.0, y + self.corner.1)
    }
}

type Done<B> = Result<(), DrawingErrorKind<<B as DrawingBackend>::ErrorType>>;

impl<B: DrawingBackend> DrawingBackend for Part<'_, B> {
    type ErrorType = B::ErrorType;

    fn get_size(&self) -> (u32, u32) {
        self.size
    }

    fn ensure_prepared(&mut self) -> Done<B> {
        self.backend.ensure_prepared()
    }

    /// Only the whole is presented.
    fn present(&mut self) -> Done<B> {
        Ok(())
    }

    fn draw_pixel(&mut self, point: BackendCoord, color: BackendColor) -> Done<B> {
        let point = self.moved(point);
        self.backend.draw_pixel(point, color)
    }

    fn draw_line<S: BackendStyle>(&mut self, from: BackendCoord, to: BackendCoord, style: &S) -> Done<B> {
        let (from, to) = (self.moved(from), self.moved(to));
        self.backend.draw_line(from, to, style)
    }

    fn draw_rect<S: BackendStyle>(
        &mut self,
        upper_left: BackendCoord,
        bottom_right: BackendCoord,
        style: &S,
        fill: bool,
    ) -> Done<B> {
        let (from, to) = (self.moved(upper_left), self.moved(bottom_right));
        self.backend.draw_rect(from, to, style, fill)
    }

    fn draw_path<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(
        &mut self,
        path: I,
        style: &S,
    ) -> Done<B> {
        let path: Vec<BackendCoord> = path.into_iter().map(|point| self.moved(point)).collect();
        self.backend.draw_path(path, style)
    }

    fn draw_circle<S: BackendStyle>(
        &mut self,
        center: BackendCoord,
        radius: u32,
        style: &S,
        fill: bool,
    ) -> Done<B> {
        let center = self.moved(center);
        self.backend.draw_circle(center, radius, style, fill)
    }

    fn fill_polygon<S: BackendStyle, I: IntoIterator<Item = BackendCoord>>(
        &mut self,
        vertices: I,
        style: &S,
    ) -> Done<B> {
        let vertices: Vec<BackendCoord> = vertices.into_iter().map(|point| self.moved(point)).collect();
        self.backend.fill_polygon(vertices, style)
    }

    fn draw_text<S: BackendTextStyle>(&mut self, text: &str, style: &S, at: BackendCoord) -> Done<B> {
        let at = self.moved(at);
        let letters = Letters {
            style,
            factor: self.letters,
        };
        self.backend.draw_text(text, &letters, at)
    }

    fn estimate_text_size<S: BackendTextStyle>(
        &self,
        text: &str,
        style: &S,
    ) -> Result<(u32, u32), DrawingErrorKind<Self::ErrorType>> {
        self.backend.estimate_text_size(text, style)
    }
}

/// A style of text with larger letters.
struct Letters<'a, S> {
    style: &'a S,
    factor: f64,
}

impl<S: BackendTextStyle> BackendTextStyle for Letters<'_, S> {
    type FontError = S::FontError;

    fn color(&self) -> BackendColor {
        self.style.color()
    }

    fn size(&self) -> f64 {
        self.style.size() * self.factor
    }

    fn transform(&self) -> FontTransform {
        self.style.transform()
    }

    fn style(&self) -> FontStyle {
        self.style.style()
    }

    fn anchor(&self) -> Pos {
        self.style.anchor()
    }

    fn family(&self) -> FontFamily<'_> {
        self.style.family()
    }

    fn layout_box(&self, text: &str) -> Result<((i32, i32), (i32, i32)), Self::FontError> {
        self.style.layout_box(text)
    }

    fn draw<E, DrawFunc: FnMut(i32, i32, BackendColor) -> Result<(), E>>(
        &self,
        text: &str,
        pos: BackendCoord,
        draw: DrawFunc,
    ) -> Result<Result<(), E>, Self::FontError> {
        self.style.draw(text, pos, draw)
    }
}
