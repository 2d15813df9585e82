//! Files for the browser's downloads. A page cannot see whether a sandbox allows them, so that in one the text also
//! stands in a box.

use crate::dom::Dom;
use crate::listen::After;
use aftercount_core::passing::words;
use js_sys::Array;
use web_sys::{Blob, BlobPropertyBag, HtmlAnchorElement, HtmlTextAreaElement, Url};

/// Offers files, one at a time.
pub(super) struct Downloads {
    dom: Dom,
    /// The address of the file before: it may still be read while this one is offered.
    last: Option<String>,
}

impl Downloads {
    pub(super) fn new(dom: &Dom) -> Downloads {
        Downloads {
            dom: dom.clone(),
            last: None,
        }
    }

    /// Offers a text of a kind as a file.
    pub(super) fn text(&mut self, name: &str, kind: &str, text: String) -> After {
        let options = BlobPropertyBag::new();
        options.set_type(kind);
        let Ok(blob) = Blob::new_with_str_sequence_and_options(&Array::of1(&text.as_str().into()), &options)
        else {
            return After::Nothing;
        };
        let confined = self.dom.is_confined();
        if let Some(area) = self.dom.typed::<HtmlTextAreaElement>("file-text") {
            area.set_value(if confined { &text } else { "" });
        }
        self.dom.set_shown("file-copy", confined);
        self.file(name, &blob, words::FRAMED);
        After::Nothing
    }

    /// Offers a picture as a file.
    pub(super) fn picture(&mut self, name: &str, blob: &Blob) {
        self.dom.set_shown("file-copy", false);
        self.file(name, blob, words::FRAMED_PICTURE);
    }

    /// Says what came of it, where no file did.
    pub(super) fn say(&self, words: &str) {
        self.dom.set_text("file-said", words);
    }

    fn file(&mut self, name: &str, blob: &Blob, confined: &str) {
        let Ok(address) = Url::create_object_url_with_blob(blob) else {
            return;
        };
        let link = self.dom.make("a", "").and_then(|link| {
            use wasm_bindgen::JsCast;
            link.dyn_into::<HtmlAnchorElement>().ok()
        });
        if let Some(link) = link {
            link.set_href(&address);
            link.set_download(name);
            link.click();
        }
        if let Some(last) = self.last.replace(address) {
            // An address that is gone already is no loss.
            let _ = Url::revoke_object_url(&last);
        }
        self.say(&if self.dom.is_confined() {
            format!("{name} {confined}")
        } else {
            format!("{name}: {}", words::OFFERED)
        });
    }
}
