//! The page's canvases: more pixels than they show, and text measured by the canvas itself.

use crate::dom::Dom;
use crate::draw::{self, Ink, Layout, Measure, Measured, parse_colour};
use aftercount_core::number;
use aftercount_core::picture::Picture;
use plotters_canvas::CanvasBackend;
use wasm_bindgen::JsCast;
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};

/// The least number of backing pixels for each CSS pixel: plotters counts in whole pixels, which shows below that.
const LEAST_SCALE: f64 = 2.0;
/// The most: beyond that memory grows and nothing is seen of it.
const MOST_SCALE: f64 = 4.0;
/// The usual size of the page's text, in CSS pixels.
const USUAL_TEXT: f64 = 16.0;
/// A picture whose text grows must keep room for its lines: the least width that is left, in pixels of the usual text.
const LEAST_WIDTH: f64 = 230.0;

/// A backend on a canvas of the page, cleared.
pub(crate) struct Canvas {
    pub(crate) backend: Measured<CanvasBackend, ByContext>,
    /// Backing pixels for each CSS pixel.
    pub(crate) scale: f64,
    /// How many times the usual size words, marks and lines should have, as readers set the size of their text.
    pub(crate) zoom: f64,
}

/// Measures by the canvas' own context: no element is added, so the policy has nothing to block.
pub(crate) struct ByContext(CanvasRenderingContext2d);

impl Measure for ByContext {
    fn width(&self, text: &str, family: &str, size: f64, italic: bool) -> f64 {
        let style = if italic { "italic " } else { "" };
        self.0.set_font(&format!("{style}{size}px {family}"));
        // A context that cannot measure is taken to set half an em a letter.
        self.0.measure_text(text).map_or_else(
            |_| text.chars().count() as f64 * size / 2.0,
            |metrics| metrics.width(),
        )
    }
}

/// Prepares the canvas under `id` for drawing; `None` where it is not shown, or has no size.
pub(crate) fn prepare(dom: &Dom, id: &str) -> Option<Canvas> {
    let canvas: HtmlCanvasElement = dom.typed(id)?;
    let scale = dom.window.device_pixel_ratio().clamp(LEAST_SCALE, MOST_SCALE);
    let (width, height) = (
        f64::from(canvas.client_width()),
        f64::from(canvas.client_height()),
    );
    if width < 40.0 || height < 40.0 {
        return None;
    }
    let size = ((width * scale).round() as u32, (height * scale).round() as u32);
    let context: CanvasRenderingContext2d = canvas.get_context("2d").ok()??.dyn_into().ok()?;
    if (canvas.width(), canvas.height()) == size {
        context.clear_rect(0.0, 0.0, f64::from(size.0), f64::from(size.1));
    } else {
        canvas.set_width(size.0);
        canvas.set_height(size.1);
    }
    let backend = Measured::new(CanvasBackend::with_canvas_object(canvas)?, ByContext(context));
    Some(Canvas {
        backend,
        scale,
        zoom: (text_size(dom) / USUAL_TEXT).min(width / LEAST_WIDTH).max(1.0),
    })
}

/// Draws a picture on the canvas under `id`; where its values stand, if it is shown at all.
///
/// # Errors
/// In words, where it cannot be drawn.
pub(crate) fn draw(
    dom: &Dom,
    id: &str,
    ink: &Ink,
    picture: Option<&Picture>,
) -> Result<Option<Layout>, String> {
    let (Some(picture), Some(mut canvas)) = (picture, prepare(dom, id)) else {
        return Ok(None);
    };
    let field = draw::draw(&mut canvas.backend, canvas.scale * canvas.zoom, ink, picture)?;
    Ok(Some(field.times(canvas.zoom)))
}

/// The size of the page's text, in CSS pixels.
fn text_size(dom: &Dom) -> f64 {
    let style = dom.window.get_computed_style(&dom.root).ok().flatten();
    let size = style.and_then(|style| style.get_property_value("font-size").ok());
    size.and_then(|size| number::plain(size.trim_end_matches("px")))
        .unwrap_or(USUAL_TEXT)
}

/// A canvas that is not on the page, `size` CSS pixels large, for a picture that is passed on.
pub(crate) fn apart(dom: &Dom, size: (u32, u32), scale: f64) -> Option<(HtmlCanvasElement, Canvas)> {
    let canvas: HtmlCanvasElement = dom.make("canvas", "")?.dyn_into().ok()?;
    let pixels = |length: u32| (f64::from(length) * scale).round() as u32;
    canvas.set_width(pixels(size.0));
    canvas.set_height(pixels(size.1));
    let context: CanvasRenderingContext2d = canvas.get_context("2d").ok()??.dyn_into().ok()?;
    let inside = CanvasBackend::with_canvas_object(canvas.clone())?;
    let backend = Measured::new(inside, ByContext(context));
    let zoom = 1.0;
    Some((canvas, Canvas { backend, scale, zoom }))
}

/// Measures text without a canvas on the page.
pub(crate) fn measure(dom: &Dom) -> Option<ByContext> {
    let canvas: HtmlCanvasElement = dom.make("canvas", "")?.dyn_into().ok()?;
    let context: CanvasRenderingContext2d = canvas.get_context("2d").ok()??.dyn_into().ok()?;
    Some(ByContext(context))
}

/// The colours and the face that the style sheet has now.
pub(crate) fn ink(dom: &Dom) -> Ink {
    let mut ink = Ink::light();
    let colour = |selector: &str, property: &str| {
        let element = dom.document.query_selector(selector).ok()??;
        let style = dom.window.get_computed_style(&element).ok()??;
        parse_colour(&style.get_property_value(property).ok()?)
    };
    let read = |place: &mut plotters::prelude::RGBColor, selector: &str, property: &str| {
        if let Some(found) = colour(selector, property) {
            *place = found;
        }
    };
    read(&mut ink.paper, "body", "background-color");
    read(&mut ink.ink, "#inks .ink", "color");
    read(&mut ink.faint, "#inks .faint", "color");
    read(&mut ink.x, "#inks .x", "color");
    read(&mut ink.y, "#inks .y", "color");
    if dom.matches("(forced-colors: active)") {
        // What only guides the eye would come in the same colour as the text, or in one as loud.
        ink.faint = ink.between();
    }
    if let Some(body) = dom.document.body()
        && let Ok(Some(style)) = dom.window.get_computed_style(&body)
        && let Ok(face) = style.get_property_value("font-family")
        && !face.is_empty()
    {
        ink.face = face;
    }
    ink
}
