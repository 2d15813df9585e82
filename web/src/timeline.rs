//! What happens when, under the picture of strength over time.

use crate::dom::{Dom, append, set};
use crate::outcome::Good;
use aftercount_core::words::timeline::{Moment, timeline};
use web_sys::Element;

/// Shows it; nothing where there is nothing between the start and the end.
pub(crate) fn show(dom: &Dom, good: &Good) {
    let moments = timeline(&good.statement, &good.fight);
    let worth = moments.iter().any(|moment| !moment.mark.is_empty()) || moments.len() > 2;
    dom.set_shown("timeline-part", worth);
    let Some(list) = dom.element("timeline") else {
        return;
    };
    list.set_text_content(None);
    for moment in moments.iter().filter(|_| worth) {
        if let Some(line) = line(dom, moment) {
            append(&list, &line);
        }
    }
}

/// Takes it off the page.
pub(crate) fn clear(dom: &Dom) {
    dom.set_shown("timeline-part", false);
    dom.set_text("timeline", "");
}

fn line(dom: &Dom, moment: &Moment) -> Option<Element> {
    let line = dom.make("li", "")?;
    // The signs tell the parts apart where they are read aloud or copied.
    for (class, words) in [
        ("when", format!("{}: ", moment.at)),
        ("what", format!("{}. ", moment.what)),
        ("standing", format!("{}.", moment.standing)),
    ] {
        let part = dom.make("span", &words)?;
        set(&part, "class", class);
        append(&line, &part);
    }
    Some(line)
}
