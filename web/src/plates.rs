//! The two pictures on the page, and the one reading line through both.

use crate::canvas;
use crate::dom::Dom;
use crate::draw::{self, Ink, Layout};
use crate::outcome::Good;
use crate::reading::{Pointer, Reading};
use aftercount_core::words::reading;
use web_sys::{HtmlButtonElement, HtmlElement};

/// The pictures as they were drawn last.
pub(crate) struct Plates {
    dom: Dom,
    ink: Ink,
    strength: Option<Layout>,
    orbit: Option<Layout>,
    reading: Reading,
}

impl Plates {
    pub(crate) fn new(dom: &Dom) -> Plates {
        Plates {
            dom: dom.clone(),
            ink: Ink::light(),
            strength: None,
            orbit: None,
            reading: Reading::default(),
        }
    }

    /// Draws both pictures anew, and the reading line over them.
    pub(crate) fn draw(&mut self, good: &Good) -> Result<(), String> {
        self.ink = canvas::ink(&self.dom);
        let draw = |id: &str, picture| canvas::draw(&self.dom, id, &self.ink, picture);
        (self.strength, self.orbit) = (
            draw("strength", good.strength.as_ref())?,
            draw("orbit", good.orbit.as_ref())?,
        );
        self.reading.keep_within(good);
        self.show_reading(good);
        Ok(())
    }

    /// Where the values of both pictures stand, as they were drawn last.
    pub(crate) fn fields(&self) -> (Option<Layout>, Option<Layout>) {
        (self.strength, self.orbit)
    }

    /// A key on the reading line; whether it was one of its keys.
    pub(crate) fn reading_key(&mut self, good: &Good, key: &str) -> bool {
        self.reading.key(good, key)
    }

    /// The moment that is read.
    pub(crate) fn time(&self, good: &Good) -> f64 {
        self.reading.time(good)
    }

    /// Forgets the moment that was chosen.
    pub(crate) fn forget_reading(&mut self) {
        self.reading.forget();
    }

    /// The pointer is over a picture; whether the reading moved.
    pub(crate) fn pointed(&mut self, good: &Good, pointer: &Pointer) -> bool {
        match (pointer.on_strength, self.strength, self.orbit) {
            (true, Some(field), _) => self.reading.point_at_time(good, field.value_at(pointer.x)),
            (false, _, Some(field)) => self.reading.point_at_orbit(good, &field, (pointer.x, pointer.y)),
            _ => false,
        }
    }

    /// Shows the reading: in words, on the slider, and as lines over the pictures.
    pub(crate) fn show_reading(&self, good: &Good) {
        let t = self.reading.time(good);
        let words = good.reading(t);
        self.dom.set_text("reading-words", &words);
        self.dom
            .set_text("continue", &reading::continue_from(&good.statement, t));
        if let Some(button) = self.dom.typed::<HtmlButtonElement>("continue") {
            button.set_disabled(!good.goes_on_from(t));
        }
        self.dom.set_attribute("reading", "aria-valuetext", &words);
        self.dom.set_attribute("reading", "aria-valuenow", &t.to_string());
        self.dom
            .set_attribute("reading", "aria-valuemax", &Reading::last(good).to_string());
        if let Err(error) = self.draw_reading(good, t) {
            web_sys::console::error_1(&error.into());
        }
    }

    fn draw_reading(&self, good: &Good, t: f64) -> Result<(), String> {
        let Some(strengths) = good.strengths_at(t) else {
            return Ok(());
        };
        if let (Some(field), Some(mut over)) = (self.strength, canvas::prepare(&self.dom, "strength-over")) {
            draw::reading_on_strength(&mut over.backend, over.scale, &self.ink, &field, t, &strengths)?;
            self.put_thumb(&field, t);
        }
        if let (Some(field), Some(mut over)) = (self.orbit, canvas::prepare(&self.dom, "orbit-over")) {
            draw::reading_on_orbit(&mut over.backend, over.scale, &self.ink, &field, &strengths)?;
        }
        Ok(())
    }

    /// The handle stands on the axis of time.
    fn put_thumb(&self, field: &Layout, t: f64) {
        if let Some(thumb) = self.dom.typed::<HtmlElement>("thumb") {
            // A handle that stays where it was is no reason to stop: the line itself is drawn.
            let _ = thumb.style().set_property("left", &format!("{}px", field.x(t)));
        }
    }
}
