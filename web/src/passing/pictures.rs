//! The pictures as files, with the marking, the outcome, the caution and the text mark inside.

use super::{file_name, offer_text, version};
use crate::canvas;
use crate::dom::Dom;
use crate::draw::{self, Around, Ink};
use crate::listen::{After, Shared};
use crate::page::Page;
use aftercount_core::caution;
use aftercount_core::passing::finding::mark_and_version;
use aftercount_core::passing::words;
use aftercount_core::picture::Picture;
use aftercount_core::problem::seen;
use aftercount_core::words::format::plain;
use wasm_bindgen::closure::Closure;
use web_sys::Blob;

/// Width and height, in CSS pixels.
const SIZE: (u32, u32) = (800, 760);

/// Pixels of the picture for each CSS pixel.
const SCALE: f64 = 2.0;

/// Offers the picture `strength`, `orbit` or `asked` as SVG.
pub(super) fn save_svg(page: &mut Page, name: &str) -> After {
    page.field_left();
    let ink = light(page.dom());
    let drawn = with_picture(page, name, |picture, around| {
        let measure = canvas::measure(page.dom())?;
        draw::svg(picture, &ink, SIZE, measure, Some(around)).ok()
    });
    match drawn.flatten() {
        Some(svg) => offer_text(page, name, "svg", "image/svg+xml", svg),
        None => refuse(page),
    }
}

/// Offers it as PNG, which the browser makes by and by.
pub(super) fn save_png(page: &mut Page, name: &str) -> After {
    page.field_left();
    let ink = light(page.dom());
    let drawn = with_picture(page, name, |picture, around| {
        let (element, mut canvas) = canvas::apart(page.dom(), SIZE, SCALE)?;
        draw::draw_around(&mut canvas.backend, SCALE, &ink, picture, around).ok()?;
        Some(element)
    });
    let Some(element) = drawn.flatten() else {
        return refuse(page);
    };
    let file = file_name(page, name, "png");
    After::Do(Box::new(move |page: &Shared| {
        let page = page.clone();
        let done = Closure::once_into_js(move |blob: Option<Blob>| {
            let Ok(mut page) = page.try_borrow_mut() else {
                return;
            };
            match blob {
                Some(blob) => page.passing().downloads.picture(&file, &blob),
                None => drop(refuse(&mut page)),
            }
        });
        use wasm_bindgen::JsCast;
        // It fails on a canvas that holds something from elsewhere, which this one does not.
        let _ = element.to_blob(done.unchecked_ref());
    }))
}

/// What is drawn on white paper, in the page's own face.
fn light(dom: &Dom) -> Ink {
    Ink {
        face: canvas::ink(dom).face,
        ..Ink::light()
    }
}

fn refuse(page: &mut Page) -> After {
    let why = if page.outcome().is_some() {
        words::NO_PICTURE
    } else {
        words::NO_OUTCOME
    };
    page.passing().downloads.say(why);
    After::Nothing
}

/// Does something with a picture and what stands around it; `None` where there is none.
fn with_picture<T>(page: &Page, name: &str, act: impl FnOnce(&Picture, &Around) -> T) -> Option<T> {
    let (picture, statement, sentence) = if name == "asked" {
        let (picture, statement) = page.asked_picture()?;
        (picture, statement, page.asked()?)
    } else {
        let good = page.outcome()?;
        let picture = if name == "orbit" {
            &good.orbit
        } else {
            &good.strength
        };
        (picture.as_ref()?, &good.statement, good.sentence())
    };
    let around = Around {
        marking: seen(&statement.marking),
        title: seen(&statement.title),
        sentence: plain(&sentence),
        mark: mark_and_version(page.pairs(), &version(page.dom())),
        caution: caution::SHORT.into(),
    };
    Some(act(picture, &around))
}
