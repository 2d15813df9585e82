//! "Open…": a text that is pasted, a file that is chosen, or one that is dropped anywhere on the page.

use crate::dom::Dom;
use crate::listen::{After, Shared};
use crate::page::Page;
use aftercount_core::passing::received::{LONGEST, TOO_LONG, received};
use aftercount_core::passing::{remarks, words};
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{DataTransfer, DragEvent, Element, Event, File, HtmlInputElement, HtmlTextAreaElement};

pub(super) const DIALOG: &str = "open-dialog";
pub(super) const FILE: &str = "open-file";
const BOX: &str = "open-text";
const SAID: &str = "open-said";
/// Says what is odd about what was opened.
const OPENED: &str = "opened-said";

/// The text in the box is to be opened.
pub(super) fn take_up_typed(page: &mut Page) -> After {
    let area = page.dom().typed::<HtmlTextAreaElement>(BOX);
    let text = area.map(|area| area.value()).unwrap_or_default();
    take_up(page, &text)
}

/// A file was chosen.
pub(super) fn take_up_chosen(input: &Element) -> After {
    let files = input
        .dyn_ref::<HtmlInputElement>()
        .and_then(HtmlInputElement::files);
    match files.and_then(|files| files.get(0)) {
        Some(file) => After::Do(Box::new(move |page: &Shared| read(page, &file))),
        None => After::Nothing,
    }
}

/// Something is dragged over the page: a file may be dropped. Without this the browser would leave the page for it.
pub(crate) fn dragged(_page: &mut Page, event: &Event) -> After {
    if transfer(event).is_some_and(|transfer| transfer.types().includes(&"Files".into(), 0)) {
        event.prevent_default();
    }
    After::Nothing
}

/// Something was dropped on the page.
pub(crate) fn dropped(_page: &mut Page, event: &Event) -> After {
    let files = transfer(event).and_then(|transfer| transfer.files());
    match files.and_then(|files| files.get(0)) {
        Some(file) => {
            event.prevent_default();
            After::Do(Box::new(move |page: &Shared| read(page, &file)))
        }
        None => After::Nothing,
    }
}

fn transfer(event: &Event) -> Option<DataTransfer> {
    event.dyn_ref::<DragEvent>()?.data_transfer()
}

/// Reads a file, and opens what it holds.
fn read(page: &Shared, file: &File) {
    if file.size() > LONGEST as f64 {
        return refuse(page, TOO_LONG);
    }
    let (opens, refuses) = (page.clone(), page.clone());
    let done = Closure::<dyn FnMut(JsValue)>::new(move |text: JsValue| {
        let Ok(mut page) = opens.try_borrow_mut() else {
            return;
        };
        let after = take_up(&mut page, &text.as_string().unwrap_or_default());
        drop(page);
        crate::listen::do_after(&opens, after);
    });
    let refused = Closure::<dyn FnMut(JsValue)>::new(move |_| refuse(&refuses, words::UNREADABLE));
    // The promise that `then` makes ends with one of the two: nothing is left to fail.
    let _ = file.text().then2(&done, &refused);
    // Each is called at most once; the browser frees them with the promise.
    done.into_js_value();
    refused.into_js_value();
}

/// Says why nothing was opened, in the dialog, which is shown where it is not.
fn refuse(page: &Shared, why: &str) {
    let Ok(borrowed) = page.try_borrow() else { return };
    say(borrowed.dom(), why);
    drop(borrowed);
    crate::listen::do_after(page, super::show_dialog(DIALOG));
}

/// Opens what a text holds, and says where it holds nothing.
fn take_up(page: &mut Page, text: &str) -> After {
    match received(text) {
        Ok(pairs) => {
            page.take_up(&pairs);
            let remark = remarks::beside(text, &pairs);
            page.dom().set_text(OPENED, remark.as_deref().unwrap_or_default());
            page.dom().set_shown(OPENED, remark.is_some());
            clear(page.dom());
            After::Do(Box::new(|page: &Shared| {
                let dom = page.borrow().dom().clone();
                super::close(dom.element(DIALOG).as_ref());
                dom.go_to("leaves-head");
            }))
        }
        Err(why) => {
            say(
                page.dom(),
                &remarks::in_place_of(text).unwrap_or_else(|| why.into()),
            );
            super::show_dialog(DIALOG)
        }
    }
}

fn say(dom: &Dom, why: &str) {
    dom.set_words(SAID, why);
    dom.set_shown(SAID, !why.is_empty());
}

/// Leaves nothing in the dialog that would be opened again by mistake.
fn clear(dom: &Dom) {
    say(dom, "");
    if let Some(area) = dom.typed::<HtmlTextAreaElement>(BOX) {
        area.set_value("");
    }
    if let Some(input) = dom.typed::<HtmlInputElement>(FILE) {
        input.set_value("");
    }
}
