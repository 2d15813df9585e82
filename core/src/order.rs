//! Sorting by one piece of code for all kinds of items: the standard library's brings 4 kB of its own into the page for
//! each kind.

use std::cmp::Ordering;

/// Sorts as [`slice::sort_by`] does; items that are equal keep their order.
pub fn sort_by<T>(items: &mut Vec<T>, order: impl Fn(&T, &T) -> Ordering) {
    if items.len() < 2 {
        return;
    }
    let mut places: Vec<usize> = (0..items.len()).collect();
    sort_places(&mut places, &|a, b| order(&items[a], &items[b]));
    let mut taken: Vec<Option<T>> = items.drain(..).map(Some).collect();
    items.extend(places.into_iter().filter_map(|place| taken[place].take()));
}

/// The one sort that is compiled.
fn sort_places(places: &mut [usize], order: &dyn Fn(usize, usize) -> Ordering) {
    places.sort_by(|a, b| order(*a, *b));
}

#[cfg(test)]
mod tests {
    use super::sort_by;

    #[test]
    fn equal_items_keep_their_order() {
        let mut items: Vec<(u8, usize)> = (0..200).map(|place| ((place * 7919 % 13) as u8, place)).collect();
        let mut expected = items.clone();
        expected.sort();
        sort_by(&mut items, |a, b| a.0.cmp(&b.0));
        assert_eq!(items, expected);
        let mut none: Vec<u8> = Vec::new();
        sort_by(&mut none, u8::cmp);
        assert!(none.is_empty());
    }
}
