//! Sorting, in one place.
//!
//! A sort of the standard library is made anew for every kind of item and every comparison, and is some kilobytes each
//! time. Here one sort puts places in order, and the items follow. What compares equal keeps its order.

use std::cmp::Ordering;

/// Sorts by a comparison.
pub fn sort_by<T>(items: &mut [T], mut compare: impl FnMut(&T, &T) -> Ordering) {
    let order = order_of(items.len(), &mut |one, other| compare(&items[one], &items[other]));
    arrange(order, &mut |one, other| items.swap(one, other));
}

/// Sorts by a key, which is worked out at every comparison.
pub fn sort_by_key<T, K: Ord>(items: &mut [T], mut key: impl FnMut(&T) -> K) {
    sort_by(items, |one, other| key(one).cmp(&key(other)));
}

/// Sorts.
pub fn sort<T: Ord>(items: &mut [T]) {
    sort_by(items, T::cmp);
}

/// The places `0..count`, in the order that a comparison of two places gives them.
fn order_of(count: usize, compare: &mut dyn FnMut(usize, usize) -> Ordering) -> Vec<usize> {
    let mut order: Vec<usize> = (0..count).collect();
    order.sort_by(|&one, &other| compare(one, other));
    order
}

/// Brings to every place what `order` names for it, by swaps along the cycles of the order.
fn arrange(mut order: Vec<usize>, swap: &mut dyn FnMut(usize, usize)) {
    for start in 0..order.len() {
        let mut place = start;
        while order[place] != start {
            let from = std::mem::replace(&mut order[place], place);
            swap(place, from);
            place = from;
        }
        order[place] = place;
    }
}

#[cfg(test)]
mod tests {
    use super::{sort, sort_by, sort_by_key};

    /// Numbers below `most`, without any order.
    fn numbers(count: u32, most: u32) -> Vec<u32> {
        (0..count).map(|i| (i.wrapping_mul(2_654_435_761) >> 7) % most).collect()
    }

    #[test]
    fn sorts_as_the_standard_library_does_and_keeps_the_order_of_what_is_equal() {
        for count in [0, 1, 2, 3, 20, 21, 1000] {
            for most in [1, 2, 7, 100_000] {
                let mut items: Vec<(u32, usize)> = numbers(count, most).into_iter().zip(0..).collect();
                let mut expected = items.clone();
                expected.sort_by_key(|item| item.0);
                sort_by_key(&mut items, |item| item.0);
                assert_eq!(items, expected);
                sort_by(&mut items, |one, other| other.cmp(one));
                expected.sort_by(|one, other| other.cmp(one));
                assert_eq!(items, expected);
                sort(&mut items);
                expected.sort();
                assert_eq!(items, expected);
            }
        }
    }
}
