//! A number put into the text of an engagement: what a button, a dragged handle or an answer writes.

use crate::pairs::Pairs;
use crate::slots::{Place, Slot};

/// Writes `text` as the number at `slot`. In a list nothing else is touched: its other items and parts, and their blanks,
/// stay as they were typed.
///
/// `pairs` hold the list that `slot` speaks of, where it speaks of one; where its item is not there nothing is written.
pub fn put(pairs: &mut Pairs, slot: &Slot, text: &str) {
    let Some((item, signs)) = part_of_item(slot.place) else {
        pairs.set(&slot.key, text);
        return;
    };
    let list = pairs.get(&slot.key).unwrap_or_default().to_owned();
    let mut items: Vec<&str> = list.split(',').collect();
    let Some(written) = items.get(item).and_then(|old| with_part(old, signs, text)) else {
        return;
    };
    items[item] = &written;
    pairs.set(&slot.key, &items.join(","));
}

/// The signs before and behind a number in an item; `None` at the item's own ends.
type Signs = (Option<char>, Option<char>);

/// The item of a list that a number stands in, counted from 0, and the sign before and behind it.
fn part_of_item(place: Place) -> Option<(usize, Signs)> {
    match place {
        Place::JoinSize(_, item) | Place::FlowRate(_, item) => Some((item, (None, Some('@')))),
        Place::JoinTime(_, item) => Some((item, (Some('@'), None))),
        Place::FlowFrom(_, item) => Some((item, (Some('@'), Some('/')))),
        Place::FlowTo(_, item) => Some((item, (Some('/'), None))),
        _ => None,
    }
}

/// The item with the part between two signs replaced, but for its blanks.
fn with_part(item: &str, (before, behind): Signs, text: &str) -> Option<String> {
    let from = match before {
        Some(sign) => item.find(sign)? + sign.len_utf8(),
        None => 0,
    };
    let to = match behind {
        Some(sign) => from + item.get(from..)?.find(sign)?,
        None => item.len(),
    };
    let old = item.get(from..to)?;
    let blanks = |trimmed: &str| old.len() - trimmed.len();
    let (first, last) = (blanks(old.trim_start()), blanks(old.trim_end()));
    let last = if old.trim().is_empty() { 0 } else { last };
    Some(format!(
        "{}{}{text}{}{}",
        &item[..from],
        &old[..first],
        &old[old.len() - last..],
        &item[to..]
    ))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::slots::slots;
    use crate::statement::{Statement, Values};

    const LINK: &str = "x.start=600&x.rate=0.04&x.join= 64 @4,-20@ 6&x.flow=5@2/8,3@1/&y.start=400&y.rate=0.06&phase1.from=3\
                        &phase1.x.rate=0.05";

    /// What is put in is read back in its slot, whatever else stands there.
    #[test]
    fn every_number_can_be_put_in() {
        let pairs = Pairs::parse(LINK);
        let statement = Statement::read(&pairs).expect("it reads");
        for slot in slots(&pairs, &statement) {
            let mut changed = pairs.clone();
            put(&mut changed, &slot, "0.75");
            let read = Statement::read(&changed);
            let expected = statement.engagement_with(&Values::from([(slot.name.clone(), 0.75)]));
            match read {
                Ok(read) => assert_eq!(read.engagement(), expected, "{}", slot.name),
                // A flow that would end before it begins.
                Err(_) => assert!(!slot.limits.hold(0.75), "{}", slot.name),
            }
        }
    }

    #[test]
    fn nothing_else_is_touched() {
        let pairs = Pairs::parse(LINK);
        let statement = Statement::read(&pairs).expect("it reads");
        let slots = slots(&pairs, &statement);
        for (name, key, text) in [
            ("x.join.1.size", "x.join", " 7 @4,-20@ 6"),
            ("x.join.2.time", "x.join", " 64 @4,-20@ 7"),
            ("x.flow.1.from", "x.flow", "5@7/8,3@1/"),
            ("x.flow.1.to", "x.flow", "5@2/7,3@1/"),
            ("phase1.from", "phase1.from", "7"),
        ] {
            let slot = slots.iter().find(|slot| slot.name == name).expect(name);
            let mut changed = pairs.clone();
            put(&mut changed, slot, "7");
            assert_eq!(changed.get(key), Some(text), "{name}");
        }
    }
}
