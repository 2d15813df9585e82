//! Reserves and flows as small tables. The rows are the items of the link's text and nothing beside it: they are filled
//! from the text after every change, and a row that is typed in rewrites its own item.

use crate::dom::{Dom, append, set};
use crate::form;
use crate::list_text::{List, items, swapped, with_item, with_more, without_item};
use aftercount_core::list_part;
use aftercount_core::pairs::Pairs;
use aftercount_core::sides::Side;
use web_sys::{Element, HtmlButtonElement, HtmlInputElement};

/// A place in a table: the key of its list, the row and the part, each counted from 0.
pub(crate) struct Cell {
    pub(crate) key: String,
    pub(crate) row: usize,
    pub(crate) part: usize,
}

/// What a button does to a list.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum Act {
    Add,
    Remove,
    Up,
    Down,
}

impl Act {
    const OF_A_ROW: [Act; 3] = [Act::Up, Act::Down, Act::Remove];

    pub(crate) fn of_word(word: &str) -> Option<Act> {
        [Act::Add, Act::Remove, Act::Up, Act::Down]
            .into_iter()
            .find(|act| act.word() == word)
    }

    fn word(self) -> &'static str {
        match self {
            Act::Add => "add",
            Act::Remove => "remove",
            Act::Up => "up",
            Act::Down => "down",
        }
    }

    fn sign(self) -> &'static str {
        match self {
            Act::Add => "+",
            Act::Remove => "×",
            Act::Up => "↑",
            Act::Down => "↓",
        }
    }
}

impl Cell {
    /// The cell that an input or a button belongs to.
    pub(crate) fn of(element: &Element) -> Option<Cell> {
        let number = |name: &str| element.get_attribute(name)?.parse().ok();
        Some(Cell {
            key: element.get_attribute("data-list")?,
            row: number("data-row").unwrap_or(0),
            part: number("data-part").unwrap_or(0),
        })
    }

    /// What was typed into this cell; `None` where the text has none.
    pub(crate) fn text(&self, pairs: &Pairs) -> Option<String> {
        let list = List::of_key(&self.key)?;
        let item = *items(pairs.get(&self.key)?).get(self.row)?;
        let part = *list.split(item).get(self.part)?;
        Some(list_part::typed(part.trim()).into_owned())
    }

    /// The text of the list once this cell holds `text`. Whatever that is, it stays in this cell.
    pub(crate) fn rewritten(&self, pairs: &Pairs, text: &str) -> Option<String> {
        let list = List::of_key(&self.key)?;
        let all = pairs.get(&self.key).unwrap_or_default();
        let item = list.with_part(items(all).get(self.row)?, self.part, &list_part::written(text));
        Some(with_item(all, self.row, &item))
    }

    /// The text of the list after a button, and the id of what then has the focus.
    pub(crate) fn acted(&self, pairs: &Pairs, act: Act) -> Option<(String, String)> {
        let list = List::of_key(&self.key)?;
        let all = pairs.get(&self.key).unwrap_or_default();
        let (row, count) = (self.row, items(all).len());
        let button = |row: usize, act: Act| id(&self.key, row, act.word());
        Some(match act {
            Act::Add => (
                with_more(all, list.fresh()),
                id(&self.key, count, list.parts()[0]),
            ),
            Act::Remove => {
                let next = match count {
                    0 | 1 => format!("{}.add", self.key),
                    _ => button(row.min(count - 2), Act::Remove),
                };
                (without_item(all, row), next)
            }
            Act::Up if row > 0 => {
                // At the end of its way a button can do no more: the focus goes to the one beside it.
                let next = if row > 1 { Act::Up } else { Act::Down };
                (swapped(all, row, row - 1), button(row - 1, next))
            }
            Act::Down if row + 1 < count => {
                let next = if row + 2 < count { Act::Down } else { Act::Up };
                (swapped(all, row, row + 1), button(row + 1, next))
            }
            Act::Up | Act::Down => return None,
        })
    }

    /// The cell's own id, in another row where it was moved.
    pub(crate) fn id_in(&self, row: usize) -> Option<String> {
        let part = List::of_key(&self.key)?.parts().get(self.part)?;
        Some(id(&self.key, row, part))
    }
}

/// The id of something in a row: `x.join.1.size`, as the slot is called.
fn id(key: &str, row: usize, what: &str) -> String {
    format!("{key}.{}.{what}", row + 1)
}

/// The ids of the fields of an item, which is counted from 1.
pub(crate) fn fields_of(key: &str, item: u32) -> Vec<String> {
    let parts = List::of_key(key).map_or(&[][..], List::parts);
    parts.iter().map(|part| format!("{key}.{item}.{part}")).collect()
}

/// Fills every table, and the text beside it, from the pairs.
pub(crate) fn show(dom: &Dom, pairs: &Pairs) {
    for side in Side::BOTH {
        for list in List::ALL {
            let key = format!("{}.{}", side.letter(), list.key());
            show_list(dom, list, &key, pairs, &form::name_of(pairs, side.letter()));
        }
    }
}

fn show_list(dom: &Dom, list: List, key: &str, pairs: &Pairs, name: &str) {
    let text = pairs.get(key).unwrap_or_default();
    if let Some(field) = dom.typed::<HtmlInputElement>(key)
        && field.value() != text
    {
        field.set_value(text);
    }
    let items = items(text);
    dom.set_shown(&format!("{key}.rows"), !items.is_empty());
    let Some(body) = dom.element(&format!("{key}.body")) else {
        return;
    };
    while body.child_element_count() as usize > items.len() {
        if let Some(last) = body.last_element_child() {
            last.remove();
        }
    }
    for row in body.child_element_count() as usize..items.len() {
        if let Some(fresh) = new_row(dom, list, key, row) {
            append(&body, &fresh);
        }
    }
    for (row, item) in items.iter().enumerate() {
        fill_row(dom, list, key, row, items.len(), item, name);
    }
}

fn new_row(dom: &Dom, list: List, key: &str, row: usize) -> Option<Element> {
    let line = dom.make("tr", "")?;
    let place = row.to_string();
    for (part, name) in list.parts().iter().enumerate() {
        let (cell, input) = (dom.make("td", "")?, dom.make("input", "")?);
        let attributes = [
            ("id", id(key, row, name).as_str()),
            ("type", "text"),
            ("inputmode", if part == 0 { "text" } else { "decimal" }),
            ("autocomplete", "off"),
            ("autocorrect", "off"),
            ("autocapitalize", "off"),
            ("spellcheck", "false"),
            ("data-list", key),
            ("data-row", &place),
            ("data-part", &part.to_string()),
            ("aria-describedby", &format!("{key}.points {key}.problem")),
        ]
        .map(|(name, value)| (name, value.to_owned()));
        for (name, value) in attributes {
            set(&input, name, &value);
        }
        append(&cell, &input);
        append(&line, &cell);
    }
    let cell = dom.make("td", "")?;
    set(&cell, "class", "moves");
    for act in Act::OF_A_ROW {
        let button = dom.make("button", act.sign())?;
        set(&button, "type", "button");
        set(&button, "id", &id(key, row, act.word()));
        set(&button, "data-list", key);
        set(&button, "data-row", &place);
        set(&button, "data-act", act.word());
        append(&cell, &button);
    }
    append(&line, &cell);
    Some(line)
}

fn fill_row(dom: &Dom, list: List, key: &str, row: usize, count: usize, item: &str, name: &str) {
    let what = format!("{name}: {} {}", list.item(), row + 1);
    for (text, part) in list.split(item).into_iter().zip(list.parts()) {
        let id = id(key, row, part);
        if let Some(input) = dom.typed::<HtmlInputElement>(&id) {
            // A blank typed at an end is no change to see, and must not move the caret.
            let text = list_part::typed(text.trim());
            if input.value().trim() != text.trim() {
                input.set_value(text.trim());
            }
            set(&input, "aria-label", &format!("{what}, {part}"));
        }
    }
    for act in Act::OF_A_ROW {
        if let Some(button) = dom.typed::<HtmlButtonElement>(&id(key, row, act.word())) {
            let words = match act {
                Act::Up => format!("{what}: move up"),
                Act::Down => format!("{what}: move down"),
                _ => format!("{what}: remove"),
            };
            set(&button, "aria-label", &words);
            button.set_disabled(match act {
                Act::Up => row == 0,
                Act::Down => row + 1 == count,
                _ => false,
            });
        }
    }
}
