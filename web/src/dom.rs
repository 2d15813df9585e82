//! The few things that the page's life does to the document, each in one line.

use wasm_bindgen::{JsCast, JsValue};
use web_sys::{
    Document, Element, HtmlElement, HtmlInputElement, HtmlSelectElement, HtmlTextAreaElement, Window,
};

/// The window and its document. Everything that came in through the address is put in as text or as a value, never as
/// markup.
#[derive(Clone)]
pub(crate) struct Dom {
    pub(crate) window: Window,
    pub(crate) document: Document,
    pub(crate) root: Element,
}

impl Dom {
    /// Fails outside a window, as in a worker.
    pub(crate) fn find() -> Result<Dom, JsValue> {
        let window = web_sys::window().ok_or("there is no window")?;
        let document = window.document().ok_or("there is no document")?;
        let root = document.document_element().ok_or("the document is empty")?;
        Ok(Dom {
            window,
            document,
            root,
        })
    }

    pub(crate) fn element(&self, id: &str) -> Option<Element> {
        self.document.get_element_by_id(id)
    }

    /// The element with this id, as what it is.
    pub(crate) fn typed<T: JsCast>(&self, id: &str) -> Option<T> {
        self.element(id)?.dyn_into().ok()
    }

    /// Puts words into an element, what stands between grave accents as code.
    pub(crate) fn set_words(&self, id: &str, words: &str) {
        if let Some(place) = self.element(id) {
            place.set_text_content(None);
            append_words(self, &place, words);
        }
    }

    /// Gives a list these choices, each a value and its words, of which one is chosen.
    pub(crate) fn set_choices(
        &self,
        list: &HtmlSelectElement,
        choices: impl Iterator<Item = (String, String)>,
        chosen: i32,
    ) {
        list.set_text_content(None);
        for (value, words) in choices {
            if let Some(option) = self.make("option", &words) {
                set(&option, "value", &value);
                append(list, &option);
            }
        }
        list.set_selected_index(chosen);
    }

    /// Sets the text of an element where it differs, so that unchanged live regions stay silent.
    pub(crate) fn set_text(&self, id: &str, text: &str) {
        if let Some(element) = self.element(id)
            && element.text_content().as_deref() != Some(text)
        {
            element.set_text_content(Some(text));
        }
    }

    pub(crate) fn set_shown(&self, id: &str, shown: bool) {
        if let Some(element) = self.element(id) {
            // `hidden` is a plain attribute: neither call can fail.
            let _ = if shown {
                element.remove_attribute("hidden")
            } else {
                element.set_attribute("hidden", "")
            };
        }
    }

    pub(crate) fn set_attribute(&self, id: &str, name: &str, value: &str) {
        if let Some(element) = self.element(id) {
            set(&element, name, value);
        }
    }

    /// An attribute of `<html>`, where the style sheet and the tests look.
    pub(crate) fn mark_root(&self, name: &str, value: Option<&str>) {
        match value {
            Some(value) => set(&self.root, name, value),
            // Taking an attribute away cannot fail.
            None => drop(self.root.remove_attribute(name)),
        }
    }

    /// A new element with a text in it.
    pub(crate) fn make(&self, tag: &str, text: &str) -> Option<Element> {
        let element = self.document.create_element(tag).ok()?;
        element.set_text_content(Some(text));
        Some(element)
    }

    /// Moves the focus, opening what hides the element.
    pub(crate) fn go_to(&self, id: &str) {
        let Some(element) = self.typed::<HtmlElement>(id) else {
            return;
        };
        if let Ok(Some(details)) = element.closest("details") {
            set(&details, "open", "");
        }
        // The browser scrolls to what it gives the focus; where it refuses, everything stays as it was.
        let _ = element.focus();
        // A field is chosen whole, as by the Tab key: what is typed there next takes its place.
        if let Some(input) = element.dyn_ref::<HtmlInputElement>() {
            input.select();
        }
    }

    /// Whether a media query holds.
    pub(crate) fn matches(&self, query: &str) -> bool {
        matches!(self.window.match_media(query), Ok(Some(media)) if media.matches())
    }

    /// Whether the page may be in a sandbox: in a frame, or in a window of no origin of its own, which may store nothing
    /// either.
    pub(crate) fn is_confined(&self) -> bool {
        self.is_framed() || self.window.local_storage().is_err()
    }

    /// Whether the page stands in a frame of another page.
    pub(crate) fn is_framed(&self) -> bool {
        match self.window.top() {
            // An opaque origin may refuse: then it is framed.
            Ok(Some(top)) => !js_sys::Object::is(top.as_ref(), self.window.as_ref()),
            _ => true,
        }
    }
}

/// Sets an attribute whose name is known to be good.
pub(crate) fn set(element: &Element, name: &str, value: &str) {
    // It fails on malformed names only, and ours are constants.
    let _ = element.set_attribute(name, value);
}

/// Appends a child to a fresh element.
pub(crate) fn append(parent: &Element, child: &Element) {
    // It fails where a node would contain itself, which a fresh child cannot.
    let _ = parent.append_child(child);
}

/// Appends words to an element, what stands between grave accents as code.
pub(crate) fn append_words(dom: &Dom, parent: &Element, words: &str) {
    for (index, part) in words.split('`').enumerate().filter(|(_, part)| !part.is_empty()) {
        match dom.make(if index % 2 == 1 { "code" } else { "span" }, part) {
            Some(piece) => append(parent, &piece),
            None => return,
        }
    }
}

/// What a form control holds now; `None` where the element is no control of ours.
pub(crate) fn control_value(element: &Element) -> Option<String> {
    if let Some(input) = element.dyn_ref::<HtmlInputElement>() {
        Some(input.value())
    } else if let Some(select) = element.dyn_ref::<HtmlSelectElement>() {
        Some(select.value())
    } else {
        element
            .dyn_ref::<HtmlTextAreaElement>()
            .map(HtmlTextAreaElement::value)
    }
}
