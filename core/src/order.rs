//! Sorting by one short piece of code for all kinds of items: the standard library's brings 4 kB of its own into the page
//! for each kind.

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

/// The one sort that is compiled: sorted runs, at first of one item each, are merged two and two until one is left.
fn sort_places(places: &mut Vec<usize>, order: &dyn Fn(usize, usize) -> Ordering) {
    let mut merged = Vec::with_capacity(places.len());
    let mut length = 1;
    while length < places.len() {
        for two in places.chunks(2 * length) {
            let (mut low, mut high) = two.split_at(length.min(two.len()));
            while let ([first, low_rest @ ..], [second, high_rest @ ..]) = (low, high) {
                if order(*first, *second).is_gt() {
                    merged.push(*second);
                    high = high_rest;
                } else {
                    merged.push(*first);
                    low = low_rest;
                }
            }
            merged.extend_from_slice(low);
            merged.extend_from_slice(high);
        }
        std::mem::swap(places, &mut merged);
        merged.clear();
        length *= 2;
    }
}

#[cfg(test)]
mod tests {
    use super::sort_by;

    #[test]
    fn equal_items_keep_their_order() {
        for count in [0, 1, 2, 3, 4, 5, 7, 8, 9, 31, 32, 33, 200, 1000] {
            let mut items: Vec<(u8, usize)> = (0..count)
                .map(|place| ((place * 7919 % 13) as u8, place))
                .collect();
            let mut expected = items.clone();
            expected.sort();
            sort_by(&mut items, |a, b| a.0.cmp(&b.0));
            assert_eq!(items, expected);
        }
        let mut none: Vec<u8> = Vec::new();
        sort_by(&mut none, u8::cmp);
        assert!(none.is_empty());
    }
}
