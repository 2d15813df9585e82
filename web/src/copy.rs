//! Passing the text on: selected to copy by hand, and offered to the clipboard where that is to be had.

use crate::dom::Dom;
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::HtmlTextAreaElement;

const COPIED: &str = "Copied.";
const BY_HAND: &str = "The clipboard is not to be had here: the text is selected, copy it with the keyboard.";

/// A box with a text to copy, and where it is said what came of it.
#[derive(Clone, Copy)]
pub(crate) struct Source {
    pub(crate) area: &'static str,
    pub(crate) said: &'static str,
}

/// The text of the engagement.
pub(crate) const TEXT: Source = Source {
    area: "text",
    said: "copied",
};

/// The working as plain text.
pub(crate) const WORKING: Source = Source {
    area: "working-text",
    said: "working-copied",
};

/// Selects a box with a text and puts it on the clipboard.
pub(crate) fn copy(dom: &Dom, source: &Source) {
    let Some(area) = dom.typed::<HtmlTextAreaElement>(source.area) else {
        return;
    };
    area.select();
    dom.set_text(source.said, "");
    let clipboard = dom.window.navigator().clipboard();
    // Outside a secure context there is none, whatever the type says.
    if clipboard.is_undefined() {
        dom.set_text(source.said, BY_HAND);
        return;
    }
    let done = says(dom, source, COPIED);
    let refused = says(dom, source, BY_HAND);
    // The promise that `then` makes ends with one of the two: nothing is left to fail.
    let _ = clipboard.write_text(&area.value()).then2(&done, &refused);
    // Each is called at most once; the browser frees them with the promise.
    done.into_js_value();
    refused.into_js_value();
}

fn says(dom: &Dom, source: &Source, text: &'static str) -> Closure<dyn FnMut(JsValue)> {
    let (dom, said) = (dom.clone(), source.said);
    Closure::new(move |_| dom.set_text(said, text))
}

/// Leaves the text where the boot script finds it after a trap.
pub(crate) fn keep(dom: &Dom, text: &str) {
    // A frozen window is no reason to stop: then a trap loses the last change only.
    let _ = js_sys::Reflect::set(dom.window.unchecked_ref(), &"aftercountText".into(), &text.into());
}
