//! The working on the page: each line in words and as a formula, and all of them as plain text to copy.

use crate::dom::{Dom, append, set};
use crate::outcome::Good;
use aftercount_core::caution;
use aftercount_core::words::math::Math;
use aftercount_core::words::working::{WorkingLine, working};
use web_sys::{Element, HtmlTextAreaElement};

/// Shows the working of `good`, whose text has this mark.
pub(crate) fn show(dom: &Dom, good: &Good, mark: &str) {
    let lines = working(&good.statement, &good.fight.outcome);
    if let Some(list) = dom.element("working-lines") {
        list.set_text_content(None);
        for line in &lines {
            show_line(dom, &list, line);
        }
    }
    if let Some(area) = dom.typed::<HtmlTextAreaElement>("working-text") {
        area.set_value(&plain(good, &lines, mark));
    }
}

/// Takes it off the page.
pub(crate) fn clear(dom: &Dom) {
    dom.set_text("working-lines", "");
    if let Some(area) = dom.typed::<HtmlTextAreaElement>("working-text") {
        area.set_value("");
    }
}

fn show_line(dom: &Dom, list: &Element, line: &WorkingLine) {
    let end = if line.math.is_some() { ":" } else { "." };
    let (Some(item), Some(words)) = (
        dom.make("li", ""),
        dom.make("span", &format!("{}{end}", line.words)),
    ) else {
        return;
    };
    if !line.name.is_empty() {
        set(&item, "id", &id(line.name));
        // A figure that links here moves the focus with it.
        set(&item, "tabindex", "-1");
    }
    append(&item, &words);
    if let Some(formula) = line.math.as_ref().and_then(|math| formula(dom, math)) {
        append(&item, &formula);
    }
    append(list, &item);
}

fn formula(dom: &Dom, math: &Math) -> Option<Element> {
    let holder = dom.make("div", "")?;
    set(&holder, "class", "formula");
    // The one place where markup is set, since it is the core's own: a formula is built of the core's letters, signs and
    // numbers. Names and other texts of the user stand in the words only, and `tests/sheet.rs` holds it to that.
    holder.set_inner_html(&math.to_mathml());
    Some(holder)
}

/// The id of a line, by its name.
pub(crate) fn id(name: &str) -> String {
    format!("working.{name}")
}

/// What is copied: the marking and the caution travel with every text.
fn plain(good: &Good, lines: &[WorkingLine], mark: &str) -> String {
    let statement = &good.statement;
    let heads = [
        statement.marking.clone(),
        statement.title.clone(),
        good.sentence(),
    ];
    let feet = [format!("Text mark {mark}."), caution::SHORT.into()];
    let all = heads
        .into_iter()
        .chain(lines.iter().map(WorkingLine::text))
        .chain(feet);
    let filled: Vec<String> = all.filter(|line| !line.is_empty()).collect();
    filled.join("\n")
}
