//! The text of a list of reserves or flows as rows: one item a row, one part of an item a cell, and nothing rewritten that
//! was not touched.

/// A kind of list.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum List {
    /// Reserves and withdrawals: `size@time`.
    Join,
    /// Steady reinforcement: `rate@from/to`.
    Flow,
}

/// The signs between the parts of an item, in order.
const BETWEEN: [char; 2] = ['@', '/'];

impl List {
    /// Both kinds.
    pub(crate) const ALL: [List; 2] = [List::Join, List::Flow];

    /// The key of the list, without the side's letter.
    pub(crate) fn key(self) -> &'static str {
        match self {
            List::Join => "join",
            List::Flow => "flow",
        }
    }

    /// The kind of a key with its letter, `x.join`.
    pub(crate) fn of_key(key: &str) -> Option<List> {
        let (letter, bare) = key.split_once('.')?;
        let list = List::ALL.into_iter().find(|list| list.key() == bare)?;
        matches!(letter, "x" | "y").then_some(list)
    }

    /// The names of an item's parts, as in the names of slots.
    pub(crate) fn parts(self) -> &'static [&'static str] {
        match self {
            List::Join => &["size", "time"],
            List::Flow => &["rate", "from", "to"],
        }
    }

    /// One item, as it is spoken.
    pub(crate) fn item(self) -> &'static str {
        match self {
            List::Join => "reserve",
            List::Flow => "reinforcement",
        }
    }

    /// What an added row begins with: it changes nothing, so the figures stay until it is filled in.
    pub(crate) fn fresh(self) -> &'static str {
        match self {
            List::Join => "0@0",
            List::Flow => "0@0/",
        }
    }

    /// The parts of an item; what is not there is empty.
    pub(crate) fn split(self, item: &str) -> Vec<&str> {
        let mut parts = Vec::new();
        let mut rest = Some(item);
        for sign in &BETWEEN[..self.parts().len() - 1] {
            let (part, behind) = match rest.map(|rest| rest.split_once(*sign)) {
                Some(Some((part, behind))) => (part, Some(behind)),
                Some(None) => (rest.unwrap_or_default(), None),
                None => ("", None),
            };
            parts.push(part);
            rest = behind;
        }
        parts.push(rest.unwrap_or_default());
        parts
    }

    /// The item with one of its parts replaced. Signs stay where they stood, and come where a part needs them.
    pub(crate) fn with_part(self, item: &str, part: usize, text: &str) -> String {
        let mut parts = self.split(item);
        let mut signs = 0;
        let mut rest = item;
        for sign in &BETWEEN[..parts.len() - 1] {
            let Some((_, behind)) = rest.split_once(*sign) else {
                break;
            };
            (signs, rest) = (signs + 1, behind);
        }
        if let Some(place) = parts.get_mut(part) {
            *place = text;
        }
        let last = parts.iter().rposition(|part| !part.is_empty()).unwrap_or(0);
        let mut written = parts[0].to_owned();
        for place in 1..=last.max(signs) {
            written.push(BETWEEN[place - 1]);
            written.push_str(parts[place]);
        }
        written
    }
}

/// The items of a list; none where nothing stands.
pub(crate) fn items(text: &str) -> Vec<&str> {
    if text.trim().is_empty() {
        return Vec::new();
    }
    text.split(',').collect()
}

/// The list with an item replaced; as it was where there is no such item.
pub(crate) fn with_item(text: &str, place: usize, item: &str) -> String {
    let mut items = items(text);
    if let Some(old) = items.get_mut(place) {
        *old = item;
    }
    items.join(",")
}

/// The list with an item taken out.
pub(crate) fn without_item(text: &str, place: usize) -> String {
    let items = items(text);
    let rest = items.iter().enumerate().filter(|(other, _)| *other != place);
    rest.map(|(_, item)| *item).collect::<Vec<_>>().join(",")
}

/// The list with two items in each other's place.
pub(crate) fn swapped(text: &str, one: usize, other: usize) -> String {
    let mut items = items(text);
    if one.max(other) < items.len() {
        items.swap(one, other);
    }
    items.join(",")
}

/// The list with an item more, at its end.
pub(crate) fn with_more(text: &str, item: &str) -> String {
    let mut items = items(text);
    items.push(item);
    items.join(",")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_not_touched_is_not_rewritten() {
        let text = " 64 @4, nonsense ,5@";
        assert_eq!(items(text).len(), 3);
        let item = List::Join.with_part(items(text)[2], 1, "6");
        assert_eq!(with_item(text, 2, &item), " 64 @4, nonsense ,5@6");
        assert_eq!(without_item(text, 1), " 64 @4,5@");
        assert_eq!(swapped(text, 0, 2), "5@, nonsense , 64 @4");
        assert_eq!(with_more("", "0@0"), "0@0");
        assert_eq!(without_item("64@4", 0), "");
    }

    #[test]
    fn parts_are_found_and_written_where_they_belong() {
        assert_eq!(List::Join.split("64"), ["64", ""]);
        assert_eq!(List::Join.split("64@4@5"), ["64", "4@5"]);
        assert_eq!(List::Flow.split("5@2/8"), ["5", "2", "8"]);
        assert_eq!(List::Flow.split("5@2"), ["5", "2", ""]);
        assert_eq!(List::Flow.split("5"), ["5", "", ""]);
        assert_eq!(List::Join.with_part("64", 0, "65"), "65");
        assert_eq!(List::Join.with_part("64", 1, "4"), "64@4");
        assert_eq!(List::Join.with_part("64@4", 0, ""), "@4");
        assert_eq!(List::Join.with_part("@4", 1, ""), "@");
        assert_eq!(List::Flow.with_part("5@2/8", 2, ""), "5@2/");
        assert_eq!(List::Flow.with_part("5", 2, "8"), "5@/8");
    }
}
