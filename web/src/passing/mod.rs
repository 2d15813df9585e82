//! Passing an engagement on: the dialogs that open and copy, files, pictures, and what the browser keeps.

pub(crate) mod changed;
mod copying;
mod downloads;
mod keeping;
mod opening;
mod pictures;
mod sheet_table;

use crate::dom::Dom;
use crate::listen::{After, Shared};
use crate::outcome::Good;
use crate::page::Page;
use aftercount_core::passing::finding::Finding;
use aftercount_core::passing::{json, saved};
use downloads::Downloads;
use keeping::Keeping;
use wasm_bindgen::JsCast;
use web_sys::{Element, HtmlDialogElement, HtmlInputElement, HtmlTextAreaElement};

/// What the page remembers of it.
pub(crate) struct Passing {
    downloads: Downloads,
    keeping: Keeping,
}

impl Passing {
    pub(crate) fn new(dom: &Dom) -> Passing {
        Passing {
            downloads: Downloads::new(dom),
            keeping: Keeping::new(dom),
        }
    }

    /// Shows anew what the browser keeps: it may have been changed by another page.
    pub(crate) fn show_kept(&mut self) {
        self.keeping.show();
    }
}

/// A button with something to do here.
pub(crate) fn click(page: &mut Page, button: &Element) -> Option<After> {
    if let Some(key) = button.get_attribute("data-back") {
        return Some(page.bring_back(Some(&key)));
    }
    if let Some(place) = place(button, "data-forget") {
        page.passing().keeping.forget(place);
        return Some(After::GoTo("keep".into()));
    }
    if let Some(place) = place(button, "data-take-up") {
        if let Some(kept) = page.passing().keeping.text(place) {
            page.take_up(&kept);
        }
        return Some(After::GoTo("leaves-head".into()));
    }
    let what = button.get_attribute("data-pass")?;
    Some(match what.as_str() {
        "open" => show_dialog(opening::DIALOG),
        "copy-as" => {
            page.field_left();
            copying::offer(page);
            show_dialog(copying::DIALOG)
        }
        "close" => close_dialog(button),
        "take-up" => opening::take_up_typed(page),
        "all-back" => page.bring_back(None),
        "save" => save(page),
        "keep" => {
            let kept = page.pairs().link();
            page.passing().keeping.keep(&kept);
            After::Nothing
        }
        "forget-all" => {
            page.passing().keeping.forget_all();
            After::GoTo("keep".into())
        }
        "json" => save_json(page, true),
        "json-line" => save_json(page, false),
        "csv" => sheet_table::save(page),
        picture => match picture.split_once('.') {
            Some((name, "png")) => pictures::save_png(page, name),
            Some((name, "svg")) => pictures::save_svg(page, name),
            _ => copying::choose(page, picture),
        },
    })
}

/// A file was chosen.
pub(crate) fn chosen(element: &Element) -> After {
    match element.id().as_str() {
        opening::FILE => opening::take_up_chosen(element),
        _ => After::Nothing,
    }
}

/// Something else is asked for. Not when its field is left, which a click does: the page would move under it.
pub(crate) fn asked_anew(page: &mut Page, element: &Element) {
    let id = element.id();
    if id.starts_with("table-") {
        sheet_table::clear_problem(page.dom());
    }
    // Whoever writes times means them.
    let means = [("table-step", "table-every"), ("table-list", "table-at")];
    if let Some((_, choice)) = means.iter().find(|(field, _)| *field == id)
        && let Some(choice) = page.dom().typed::<HtmlInputElement>(choice)
    {
        choice.set_checked(true);
    }
}

pub(crate) use opening::{dragged, dropped};

fn place(button: &Element, name: &str) -> Option<usize> {
    button.get_attribute(name)?.parse().ok()
}

/// Shows a dialog with its box in the focus, and what stands there chosen.
fn show_dialog(id: &'static str) -> After {
    After::Do(Box::new(move |page: &Shared| {
        let dom = page.borrow().dom().clone();
        let Some(dialog) = dom.typed::<HtmlDialogElement>(id).filter(|dialog| !dialog.open()) else {
            return;
        };
        // It fails where it is open, or out of the document.
        let _ = dialog.show_modal();
        if let Ok(Some(area)) = dialog.query_selector("textarea")
            && let Some(area) = area.dyn_ref::<HtmlTextAreaElement>()
        {
            // What cannot take the focus is still chosen.
            let _ = area.focus();
            area.select();
        }
    }))
}

fn close_dialog(button: &Element) -> After {
    let dialog = button.closest("dialog").ok().flatten();
    After::Do(Box::new(move |_| close(dialog.as_ref())))
}

fn close(dialog: Option<&Element>) {
    if let Some(dialog) = dialog.and_then(|dialog| dialog.dyn_ref::<HtmlDialogElement>()) {
        dialog.close();
    }
}

/// The version that stands on the page.
fn version(dom: &Dom) -> String {
    let version = dom.element("version").and_then(|element| element.text_content());
    version.unwrap_or_default()
}

/// Does something with the finding of the text as it stands, where there is one.
fn with_finding<T>(page: &Page, act: impl FnOnce(&Finding<'_>, &Good) -> T) -> Option<T> {
    let good = page.outcome()?;
    let version = version(page.dom());
    let asked = page.asked();
    let finding = Finding {
        pairs: page.pairs(),
        statement: &good.statement,
        outcome: &good.fight.outcome,
        asked: asked.as_deref(),
        reversal: page.nearest_reversal(),
        version: &version,
    };
    Some(act(&finding, good))
}

fn save(page: &mut Page) -> After {
    page.field_left();
    let (pairs, version, when) = (page.pairs(), version(page.dom()), keeping::now());
    let text = with_finding(page, |finding, _| {
        saved::saved(pairs, Some(finding), &version, &when)
    });
    let text = text.unwrap_or_else(|| saved::saved(pairs, None, &version, &when));
    offer_text(page, "", "txt", "text/plain;charset=utf-8", text)
}

fn save_json(page: &mut Page, pretty: bool) -> After {
    page.field_left();
    let answer = aftercount_core::answer::answer(&page.pairs().link());
    let text = json::json(&answer, page.pairs(), &version(page.dom()), pretty);
    let part = if pretty { "" } else { "line" };
    offer_text(page, part, "json", "application/json", text)
}

/// Offers a text as a file that bears the text mark, and nothing else that tells what is in it.
fn offer_text(page: &mut Page, part: &str, ending: &str, kind: &str, text: String) -> After {
    let name = file_name(page, part, ending);
    page.passing().downloads.text(&name, kind, text)
}

fn file_name(page: &Page, part: &str, ending: &str) -> String {
    let mark = aftercount_core::mark::text_mark(page.pairs());
    let dash = if part.is_empty() { "" } else { "-" };
    format!("aftercount-{mark}{dash}{part}.{ending}")
}
