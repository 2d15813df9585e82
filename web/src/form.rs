//! The fields and the pairs. A field shows exactly what stands in the text, and an empty field is the key's absence.

use crate::dom::{Dom, control_value, set};
use crate::phases::is_phase_key;
use aftercount_core::keys::{KEYS, Key};
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::seen;
use wasm_bindgen::JsCast;
use web_sys::{Element, HtmlInputElement, HtmlSelectElement, HtmlTextAreaElement};

/// The key of the field that an event came from, and what the field holds now.
pub(crate) fn changed_field(element: &Element) -> Option<(String, String)> {
    let key = element
        .get_attribute("name")
        .filter(|name| names().any(|known| known == *name) || is_phase_key(name))?;
    Some((key, control_value(element)?))
}

/// Fills every field from the pairs, without touching those that already hold their text.
pub(crate) fn fill(dom: &Dom, pairs: &Pairs) {
    for (key, name) in rows() {
        let Some(element) = dom.element(&name) else {
            continue;
        };
        let text = pairs.get(&name);
        if let Some(select) = element.dyn_ref::<HtmlSelectElement>() {
            choose(dom, select, text, key.default.unwrap_or_default());
        } else if let Some(input) = element.dyn_ref::<HtmlInputElement>() {
            if input.value() != text.unwrap_or_default() {
                input.set_value(text.unwrap_or_default());
            }
        } else if let Some(area) = element.dyn_ref::<HtmlTextAreaElement>()
            && area.value() != text.unwrap_or_default()
        {
            area.set_value(text.unwrap_or_default());
        }
    }
}

/// Shows a choice. A word that is not among the choices is shown as it stands, marked as not one of ours: a choice that
/// fell back to the first would contradict the text.
pub(crate) fn choose(dom: &Dom, select: &HtmlSelectElement, text: Option<&str>, default: &str) {
    if let Ok(Some(foreign)) = select.query_selector("option[data-foreign]") {
        foreign.remove();
    }
    let word = text.map_or(default, str::trim);
    select.set_value(word);
    if select.value() != word
        && let Some(option) = dom.make("option", &seen(word))
    {
        set(&option, "value", word);
        set(&option, "data-foreign", "");
        crate::dom::append(select, &option);
        select.set_value(word);
    }
}

/// What a side is called: its name in the text, or the default.
pub(crate) fn name_of(pairs: &Pairs, letter: &str) -> String {
    let written = pairs
        .get(&format!("{letter}.name"))
        .map(str::trim)
        .filter(|name| !name.is_empty());
    match written {
        Some(name) => seen(name),
        None => format!("Side {}", letter.to_ascii_uppercase()),
    }
}

fn names() -> impl Iterator<Item = String> {
    rows().map(|(_, name)| name)
}

fn rows() -> impl Iterator<Item = (&'static Key, String)> {
    KEYS.iter().flat_map(|key| {
        let letters: &[&str] = match key.place {
            aftercount_core::keys::Place::Side => &["x", "y"],
            aftercount_core::keys::Place::Whole => &[""],
        };
        letters.iter().map(move |letter| (key, key.on(letter)))
    })
}
