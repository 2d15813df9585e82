//! Passing the text on: selected to copy by hand, and offered to the clipboard where that is to be had.

use crate::dom::Dom;
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::HtmlTextAreaElement;

const COPIED: &str = "Copied.";
const BY_HAND: &str = "The clipboard is not to be had here: the text is selected, copy it with the keyboard.";

/// Selects the box with the text and puts it on the clipboard.
pub(crate) fn copy(dom: &Dom) {
    let Some(area) = dom.typed::<HtmlTextAreaElement>("text") else {
        return;
    };
    area.select();
    dom.set_text("copied", "");
    let clipboard = dom.window.navigator().clipboard();
    // Outside a secure context there is none, whatever the type says.
    if clipboard.is_undefined() {
        dom.set_text("copied", BY_HAND);
        return;
    }
    let done = says(dom, COPIED);
    let refused = says(dom, BY_HAND);
    // The promise that `then` makes ends with one of the two: nothing is left to fail.
    let _ = clipboard.write_text(&area.value()).then2(&done, &refused);
    // Each is called at most once; the browser frees them with the promise.
    done.into_js_value();
    refused.into_js_value();
}

fn says(dom: &Dom, text: &'static str) -> Closure<dyn FnMut(JsValue)> {
    let dom = dom.clone();
    Closure::new(move |_| dom.set_text("copied", text))
}

/// Leaves the text where the boot script finds it after a trap.
pub(crate) fn keep(dom: &Dom, text: &str) {
    // A frozen window is no reason to stop: then a trap loses the last change only.
    let _ = js_sys::Reflect::set(dom.window.unchecked_ref(), &"aftercountText".into(), &text.into());
}
