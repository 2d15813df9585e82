//! What was changed since the text was received, and the way back.

use crate::dom::{Dom, append, set};
use aftercount_core::passing::changes::Change;
use aftercount_core::problem::seen;
use web_sys::Element;

/// Shows the changes; nothing where there are none.
pub(crate) fn show(dom: &Dom, changes: &[Change]) {
    dom.set_shown("changed", !changes.is_empty());
    let Some(list) = dom.element("changed-list") else {
        return;
    };
    list.set_text_content(None);
    for change in changes {
        if let Some(line) = line(dom, change) {
            append(&list, &line);
        }
    }
}

fn line(dom: &Dom, change: &Change) -> Option<Element> {
    let line = dom.make("li", "")?;
    let key = seen(&change.key);
    append(&line, &dom.make("code", &key)?);
    append(&line, &dom.make("span", &format!(" {} · ", change.words()))?);
    let button = dom.make("button", "back to as received")?;
    set(&button, "type", "button");
    set(&button, "data-back", &change.key);
    set(&button, "aria-label", &format!("{key}: back to as received"));
    append(&line, &button);
    Some(line)
}
