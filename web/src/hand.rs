//! The two small buttons of a focused number: "ask" and "in doubt". They lie over the line of the label, or above it where
//! they would cover the label, so that nothing moves when they come, and stand behind the field in the order of the keys.

use crate::dom::{Dom, append, set};
use crate::list_text::List;
use crate::lists::Cell;
use aftercount_core::in_doubt::{Limits, asked, doubted};
use aftercount_core::keys;
use aftercount_core::pairs::Pairs;
use aftercount_core::words::entry;
use wasm_bindgen::JsCast;
use web_sys::{Element, HtmlElement};

/// What one of the buttons writes.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum Writes {
    Question,
    Interval,
}

impl Writes {
    const BOTH: [Writes; 2] = [Writes::Question, Writes::Interval];

    fn id(self) -> &'static str {
        match self {
            Writes::Question => "hand.ask",
            Writes::Interval => "hand.in-doubt",
        }
    }

    fn words(self) -> (&'static str, &'static str) {
        match self {
            Writes::Question => (entry::ASK, entry::ASK_MEANS),
            Writes::Interval => (entry::IN_DOUBT, entry::IN_DOUBT_MEANS),
        }
    }

    /// That of a button.
    pub(crate) fn of(button: &Element) -> Option<Writes> {
        Writes::BOTH.into_iter().find(|writes| writes.id() == button.id())
    }
}

/// Where a number stands in the text.
enum Place {
    /// It is all that its key holds.
    Key(String),
    /// It is a part of an item of a list.
    Part(Cell),
}

impl Place {
    fn of(field: &Element) -> Option<Place> {
        if field.has_attribute("data-part") {
            return Cell::of(field).map(Place::Part);
        }
        let key = field.get_attribute("name")?;
        Limits::of_key(&key).map(|_| Place::Key(key))
    }

    /// What stands there, and what number counts where nothing does.
    fn text(&self, pairs: &Pairs) -> (String, Option<&'static str>) {
        match self {
            Place::Key(key) => {
                let default = keys::find(key).and_then(|row| row.default);
                (pairs.get(key).unwrap_or_default().to_owned(), default)
            }
            Place::Part(cell) => (cell.text(pairs).unwrap_or_default(), None),
        }
    }

    fn limits(&self) -> Limits {
        match self {
            Place::Key(key) => Limits::of_key(key).unwrap_or(Limits::of_part("rate")),
            Place::Part(cell) => {
                let parts = List::of_key(&cell.key).map_or(&[][..], List::parts);
                Limits::of_part(parts.get(cell.part).copied().unwrap_or_default())
            }
        }
    }

    fn written(&self, pairs: &Pairs, writes: Writes) -> Option<String> {
        let (text, default) = self.text(pairs);
        match writes {
            Writes::Question => asked(&text),
            Writes::Interval => doubted(&text, default, self.limits()),
        }
    }
}

/// The buttons, and the field that they stand behind.
pub(crate) struct Hand {
    dom: Dom,
    bar: Option<Element>,
    field: Option<(String, Place)>,
}

impl Hand {
    pub(crate) fn new(dom: &Dom) -> Hand {
        Hand {
            dom: dom.clone(),
            bar: bar(dom),
            field: None,
        }
    }

    /// Something has the focus: the buttons stand behind it where it holds a number, and stay while it is on them.
    pub(crate) fn focused(&mut self, element: &Element, pairs: &Pairs) {
        if self.holds(element) {
            return;
        }
        self.take_away();
        let (Some(place), Some(bar)) = (Place::of(element), &self.bar) else {
            return;
        };
        // It fails on an element without a parent, which cannot have the focus.
        let _ = element.insert_adjacent_element("afterend", bar);
        let name = spoken(&self.dom, element);
        set(bar, "aria-label", &name);
        keep_clear(&self.dom, bar, element);
        self.field = Some((element.id(), place));
        self.show(pairs);
        for (writes, stop) in Writes::BOTH.into_iter().zip(["0", "-1"]) {
            let (words, means) = writes.words();
            self.dom
                .set_attribute(writes.id(), "aria-label", &format!("{words}: {name}. {means}"));
            self.dom.set_attribute(writes.id(), "tabindex", stop);
        }
    }

    /// The focus has left for `next`, or for nothing.
    pub(crate) fn left(&mut self, next: Option<&Element>) {
        let stays = next.is_some_and(|next| {
            self.holds(next) || self.field.as_ref().is_some_and(|(id, _)| *id == next.id())
        });
        if !stays {
            self.take_away();
        }
    }

    /// After a table was built anew its field is another element: the buttons go behind the one that has the focus now.
    pub(crate) fn again(&mut self, pairs: &Pairs) {
        if self.bar.as_ref().is_some_and(|bar| !bar.is_connected())
            && self.field.is_some()
            && let Some(element) = self.dom.document.active_element()
        {
            self.focused(&element, pairs);
        }
        self.show(pairs);
    }

    /// The id of the field, and what its text becomes; `None` where there is nothing to write.
    pub(crate) fn press(&self, pairs: &Pairs, writes: Writes) -> Option<(String, String, String)> {
        let (id, place) = self.field.as_ref()?;
        let text = place.written(pairs, writes)?;
        match place {
            Place::Key(key) => Some((id.clone(), key.clone(), text)),
            Place::Part(cell) => Some((id.clone(), cell.key.clone(), cell.rewritten(pairs, &text)?)),
        }
    }

    /// The id of what a key on the buttons moves the focus to.
    pub(crate) fn key(&self, element: &Element, key: &str) -> Option<String> {
        if !self.holds(element) {
            return None;
        }
        match key {
            "ArrowLeft" | "ArrowRight" => Writes::BOTH
                .into_iter()
                .map(Writes::id)
                .find(|id| *id != element.id())
                .map(str::to_owned),
            "Escape" => self.field.as_ref().map(|(id, _)| id.clone()),
            _ => None,
        }
    }

    /// Whether an element is one of the buttons.
    pub(crate) fn holds(&self, element: &Element) -> bool {
        self.bar.as_ref().is_some_and(|bar| bar.contains(Some(element)))
    }

    fn show(&self, pairs: &Pairs) {
        let Some((_, place)) = &self.field else { return };
        for writes in Writes::BOTH {
            let can = place.written(pairs, writes).is_some();
            self.dom
                .set_attribute(writes.id(), "aria-disabled", if can { "false" } else { "true" });
        }
    }

    fn take_away(&mut self) {
        self.field = None;
        if let Some(bar) = &self.bar {
            bar.remove();
        }
    }
}

fn bar(dom: &Dom) -> Option<Element> {
    let (bar, inner) = (dom.make("span", "")?, dom.make("span", "")?);
    set(&bar, "class", "hand");
    set(&bar, "role", "toolbar");
    for writes in Writes::BOTH {
        let (words, means) = writes.words();
        let button = dom.make("button", words)?;
        set(&button, "type", "button");
        set(&button, "id", writes.id());
        set(&button, "title", means);
        append(&inner, &button);
    }
    append(&bar, &inner);
    Some(bar)
}

/// Where the buttons would cover the label of a field they go to its right, if what stands beside the field leaves the
/// line free there, and else above it.
fn keep_clear(dom: &Dom, bar: &Element, field: &Element) -> Option<()> {
    let buttons: HtmlElement = bar.first_element_child()?.dyn_into().ok()?;
    // No call fails on a name that the style sheets have.
    let style = buttons.style();
    let put = |name: &str, value: &str| drop(style.set_property(name, value));
    for name in ["left", "right", "bottom"] {
        let _ = style.remove_property(name);
    }
    let label = label(dom, field)?.get_bounding_client_rect();
    let (over, from) = (buttons.get_bounding_client_rect(), bar.get_bounding_client_rect());
    if over.left() >= label.right() || over.right() <= label.left() || over.bottom() <= label.top() {
        return None;
    }
    let beside = field.parent_element()?.next_element_sibling();
    let beside = beside.filter(|beside| beside.matches(".beside").unwrap_or(false));
    let free = beside.map(|beside| beside.get_bounding_client_rect().left());
    match free.filter(|left| *left >= label.right()) {
        Some(left) => {
            put("left", &format!("{}px", left - from.left()));
            put("right", "auto");
        }
        None => put("bottom", &format!("{}px", from.bottom() - label.top())),
    }
    Some(())
}

/// The label of a field: its own, or in a table the head of its column.
fn label(dom: &Dom, field: &Element) -> Option<Element> {
    let own = format!("label[for='{}']", field.id());
    if let Ok(Some(label)) = dom.document.query_selector(&own) {
        return Some(label);
    }
    let column = field.get_attribute("data-part")?.parse::<u32>().ok()? + 1;
    let table = field.closest("table").ok()??;
    table.query_selector(&format!("th:nth-child({column})")).ok()?
}

/// What a field is called when it is read aloud: its own label, or the words of those that it names.
fn spoken(dom: &Dom, field: &Element) -> String {
    if let Some(label) = field.get_attribute("aria-label") {
        return label;
    }
    let words = |element: Option<Element>| element.and_then(|element| element.text_content());
    if let Some(names) = field.get_attribute("aria-labelledby") {
        let parts: Vec<String> = names
            .split_whitespace()
            .filter_map(|id| words(dom.element(id)))
            .map(|words| words.trim_end_matches(':').to_owned())
            .collect();
        return parts.join(": ");
    }
    words(label(dom, field)).unwrap_or_default()
}
