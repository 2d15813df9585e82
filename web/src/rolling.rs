//! What gets in the way of a reader with a keyboard: parts that roll within themselves, the sentence that stays in sight,
//! under which the browser would otherwise bring a field that takes the focus, and a field that is seen in part.

use crate::dom::{Dom, set};
use wasm_bindgen::JsCast;
use web_sys::{Element, HtmlElement, ScrollIntoViewOptions, ScrollLogicalPosition};

/// What may be larger than its place, and what it is called where it is.
const MAY_ROLL: [(&str, &str); 2] = [
    (".formula", "A formula that is wider than the page"),
    (".said", "What the model leaves, in words"),
];

/// Lets the style sheet know how much of the window the sentence covers as it is shown now.
pub(crate) fn leave_room(dom: &Dom) {
    let said = dom.document.query_selector(".said").ok().flatten();
    if let (Some(said), Some(root)) = (said, dom.root.dyn_ref::<HtmlElement>()) {
        // Without it the style sheet has a height of its own.
        let _ = root
            .style()
            .set_property("--said", &format!("{}px", said.client_height()));
    }
}

/// Brings the whole of what has the focus into sight; of what is higher than the window its beginning. Firefox leaves what
/// it has come to where it is, if any part of it can be seen.
pub(crate) fn bring_into_sight(dom: &Dom) {
    let Some(stop) = dom.document.active_element() else {
        return;
    };
    let options = ScrollIntoViewOptions::new();
    options.set_block(if stop.get_bounding_client_rect().top() < 0.0 {
        ScrollLogicalPosition::Start
    } else {
        ScrollLogicalPosition::Nearest
    });
    options.set_inline(ScrollLogicalPosition::Nearest);
    stop.scroll_into_view_with_scroll_into_view_options(&options);
}

/// Makes a stop of each part that rolls as it is shown now, as a formula does that is wider than the page. It is rolled
/// with the arrows; what does not roll is no stop on the way.
pub(crate) fn mark(dom: &Dom) {
    for (selector, name) in MAY_ROLL {
        let Ok(found) = dom.document.query_selector_all(selector) else {
            continue;
        };
        let elements = (0..found.length()).filter_map(|at| found.item(at)?.dyn_into::<Element>().ok());
        // All are measured before any is changed, so that the browser lays the page out once; and what is folded away is not
        // measured, since it would be laid out for that alone.
        let measured: Vec<(Element, bool)> = elements
            .filter(|element| matches!(element.closest("details:not([open])"), Ok(None)))
            .map(|element| (element.clone(), rolls(&element)))
            .collect();
        for (element, rolls) in measured {
            for (attribute, value) in [("tabindex", "0"), ("role", "group"), ("aria-label", name)] {
                if rolls {
                    set(&element, attribute, value);
                } else {
                    // Taking an attribute away cannot fail.
                    let _ = element.remove_attribute(attribute);
                }
            }
        }
    }
}

/// A pixel more is a matter of rounding.
fn rolls(element: &Element) -> bool {
    element.scroll_width() > element.client_width() + 1
        || element.scroll_height() > element.client_height() + 1
}
