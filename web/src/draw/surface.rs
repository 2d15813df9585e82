//! What a pen draws on: any backend of plotters, behind one pointer.
//!
//! The code of the pictures is long, and would stand in the page once for each backend if it knew which one it draws on.

use plotters::prelude::{DrawingBackend, ShapeStyle, TextStyle};
use plotters_backend::BackendCoord;
use std::fmt::Debug;

/// What drawing gives back: in words where the backend refuses.
pub type Drawn<T = ()> = Result<T, String>;

/// The few things that a pen needs of a backend.
pub(crate) trait Surface {
    /// Width and height in the backend's pixels.
    fn size(&self) -> (u32, u32);
    /// A line through points.
    fn path(&mut self, points: &[BackendCoord], style: &ShapeStyle) -> Drawn;
    /// A filled figure.
    fn polygon(&mut self, corners: &[BackendCoord], style: &ShapeStyle) -> Drawn;
    /// A circle, filled or not.
    fn circle(&mut self, at: BackendCoord, radius: u32, style: &ShapeStyle, filled: bool) -> Drawn;
    /// A filled rectangle between two corners.
    fn rectangle(&mut self, from: BackendCoord, to: BackendCoord, style: &ShapeStyle) -> Drawn;
    /// Words with their anchor at a point.
    fn words(&mut self, text: &str, style: &TextStyle<'_>, at: BackendCoord) -> Drawn;
    /// The width of words; `None` where the backend cannot measure.
    fn width(&self, text: &str, style: &TextStyle<'_>) -> Option<u32>;
}

impl<B: DrawingBackend> Surface for B {
    fn size(&self) -> (u32, u32) {
        self.get_size()
    }

    fn path(&mut self, points: &[BackendCoord], style: &ShapeStyle) -> Drawn {
        self.draw_path(points.iter().copied(), style).map_err(in_words)
    }

    fn polygon(&mut self, corners: &[BackendCoord], style: &ShapeStyle) -> Drawn {
        self.fill_polygon(corners.iter().copied(), style)
            .map_err(in_words)
    }

    fn circle(&mut self, at: BackendCoord, radius: u32, style: &ShapeStyle, filled: bool) -> Drawn {
        self.draw_circle(at, radius, style, filled).map_err(in_words)
    }

    fn rectangle(&mut self, from: BackendCoord, to: BackendCoord, style: &ShapeStyle) -> Drawn {
        self.draw_rect(from, to, style, true).map_err(in_words)
    }

    fn words(&mut self, text: &str, style: &TextStyle<'_>, at: BackendCoord) -> Drawn {
        self.draw_text(text, style, at).map_err(in_words)
    }

    fn width(&self, text: &str, style: &TextStyle<'_>) -> Option<u32> {
        self.estimate_text_size(text, style).ok().map(|size| size.0)
    }
}

/// What a backend gives as its reason.
pub(crate) fn in_words(error: impl Debug) -> String {
    format!("a picture could not be drawn: {error:?}")
}
