//! "Copy…": the forms in which an engagement is copied, each into a box from which it can be copied by hand too.

use super::with_finding;
use crate::copy::Source;
use crate::dom::{Dom, set};
use crate::listen::After;
use crate::page::Page;
use aftercount_core::passing::words;
use web_sys::HtmlTextAreaElement;

pub(super) const DIALOG: &str = "copy-dialog";

const BOX: Source = Source {
    area: "copy-text",
    said: "copy-said",
};

/// Where a wiki's copy of the page lies, as long as nobody has said it.
const BESIDE: &str = "aftercount.html";

/// The buttons, by the form that they copy.
const FORMS: [&str; 4] = ["copy-link", "copy-address", "copy-finding", "copy-wiki"];

/// Prepares the dialog: which forms there are, and the text in the box.
pub(super) fn offer(page: &mut Page) {
    let dom = page.dom().clone();
    for form in FORMS {
        let here = text(page, form).is_some();
        if let Ok(Some(button)) = dom.document.query_selector(&format!("[data-pass={form}]")) {
            set(&button, "aria-disabled", if here { "false" } else { "true" });
        }
    }
    let without_address = address(&dom).is_none();
    dom.set_text(
        "copy-address-why",
        if without_address { words::NO_ADDRESS } else { "" },
    );
    let without_outcome = page.outcome().is_none();
    dom.set_text(
        "copy-finding-why",
        if without_outcome { words::NO_OUTCOME } else { "" },
    );
    dom.set_text("copy-said", "");
    fill(&dom, &page.pairs().link());
}

/// A form was chosen: into the box, and to the clipboard where that is to be had.
pub(super) fn choose(page: &mut Page, form: &str) -> After {
    let Some(text) = text(page, form) else {
        return After::Nothing;
    };
    fill(page.dom(), &text);
    After::Copy(BOX)
}

fn fill(dom: &Dom, text: &str) {
    if let Some(area) = dom.typed::<HtmlTextAreaElement>(BOX.area) {
        area.set_value(text);
    }
}

/// The engagement in one of the forms; `None` where it has none.
fn text(page: &Page, form: &str) -> Option<String> {
    let address = address(page.dom());
    match form {
        "copy-link" => Some(page.pairs().link()),
        "copy-address" => address.map(|address| format!("{address}#{}", page.pairs().link())),
        "copy-finding" => with_finding(page, |finding, _| finding.lines()),
        "copy-wiki" => with_finding(page, |finding, _| {
            finding.wiki(address.as_deref().unwrap_or(BESIDE))
        }),
        _ => None,
    }
}

/// The page's own address without its fragment and query; `None` for that of a file.
fn address(dom: &Dom) -> Option<String> {
    let location = dom.window.location();
    let protocol = location.protocol().ok()?;
    let from_server = matches!(protocol.as_str(), "http:" | "https:");
    let address = || {
        Some(format!(
            "{}{}",
            location.origin().ok()?,
            location.pathname().ok()?
        ))
    };
    from_server.then(address).flatten()
}
