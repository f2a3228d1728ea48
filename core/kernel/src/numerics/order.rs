//! Sorting by one compiled body.
//!
//! std's sort is compiled anew for every type and every order; those copies made up a seventh of
//! what a browser has to load. Here places are sorted, and items moved once.

use std::cmp::Ordering;

/// Sorts, keeping equal items in their order.
pub fn sort<T: Ord>(items: &mut Vec<T>) {
    sort_by(items, T::cmp);
}

/// Sorts by a key, keeping equal items in their order.
pub fn sort_by_key<T, K: Ord>(items: &mut Vec<T>, key: impl Fn(&T) -> K) {
    sort_by(items, |a, b| key(a).cmp(&key(b)));
}

/// Sorts by a total order, keeping equal items in their order.
pub fn sort_by<T>(items: &mut Vec<T>, compare: impl Fn(&T, &T) -> Ordering) {
    let by_place = |a: usize, b: usize| match (items.get(a), items.get(b)) {
        (Some(a), Some(b)) => compare(a, b),
        _ => Ordering::Equal,
    };
    let order = places(items.len(), &by_place);
    let mut slots: Vec<Option<T>> = std::mem::take(items).into_iter().map(Some).collect();
    items.extend(
        order
            .into_iter()
            .filter_map(|place| slots.get_mut(place).and_then(Option::take)),
    );
}

fn places(count: usize, compare: &dyn Fn(usize, usize) -> Ordering) -> Vec<usize> {
    let mut order: Vec<usize> = (0..count).collect();
    order.sort_by(|&a, &b| compare(a, b));
    order
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn equal_items_keep_their_order() {
        let mut items = vec![(2, 'a'), (1, 'b'), (2, 'c'), (1, 'd'), (0, 'e')];
        sort_by_key(&mut items, |item| item.0);
        assert_eq!(items, [(0, 'e'), (1, 'b'), (1, 'd'), (2, 'a'), (2, 'c')]);
        let mut words = vec!["s".to_owned(), "p".to_owned(), "d".to_owned()];
        sort(&mut words);
        assert_eq!(words, ["d", "p", "s"]);
    }
}
