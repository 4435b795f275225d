//! Which members are near a place: boxes in a tree.
//!
//! The boxes are sorted along a space-filling curve and joined eight by eight, level upon level. A query looks only into
//! boxes that it touches. Coordinates are those of [`crate::exact::Lattice::coarse`], which never part what touches.

use crate::exact::order;
/// A box: left, bottom, right, top.
pub(crate) type Box4 = [i64; 4];

/// Boxes in a tree.
#[derive(Debug)]
pub(crate) struct Boxes {
    /// The items in the order of the leaves.
    items: Vec<u32>,
    /// The leaves' boxes, then the boxes of eight of them, and so on.
    levels: Vec<Vec<Box4>>,
}

const JOINED: usize = 8;

impl Boxes {
    /// The tree of these items and their boxes.
    pub(crate) fn new(boxes: impl Iterator<Item = (u32, Box4)>) -> Boxes {
        let mut all: Vec<(u64, u32, Box4)> = boxes.map(|(item, b)| (curve(b), item, b)).collect();
        order::sort(&mut all);
        let mut levels = vec![all.iter().map(|&(_, _, b)| b).collect::<Vec<_>>()];
        while levels.last().is_some_and(|level| level.len() > JOINED) {
            let next = levels[levels.len() - 1].chunks(JOINED).map(hull).collect();
            levels.push(next);
        }
        Boxes { items: all.into_iter().map(|(_, item, _)| item).collect(), levels }
    }

    /// Tells every item whose box touches the query until `tell` says to stop, with `false`.
    pub(crate) fn touching(&self, query: Box4, mut tell: impl FnMut(u32) -> bool) {
        let top = self.levels.len() - 1;
        let mut open: Vec<(usize, usize)> = (0..self.levels[top].len()).rev().map(|i| (top, i)).collect();
        while let Some((level, i)) = open.pop() {
            if !touch(self.levels[level][i], query) {
                continue;
            }
            if level == 0 {
                if !tell(self.items[i]) {
                    return;
                }
                continue;
            }
            let end = ((i + 1) * JOINED).min(self.levels[level - 1].len());
            open.extend((i * JOINED..end).rev().map(|child| (level - 1, child)));
        }
    }
}

fn touch(a: Box4, b: Box4) -> bool {
    a[0] <= b[2] && b[0] <= a[2] && a[1] <= b[3] && b[1] <= a[3]
}

fn hull(boxes: &[Box4]) -> Box4 {
    let grown = |a: Box4, b: &Box4| [a[0].min(b[0]), a[1].min(b[1]), a[2].max(b[2]), a[3].max(b[3])];
    boxes[1..].iter().fold(boxes[0], grown)
}

/// The place of a box's middle along Morton's curve.
fn curve(b: Box4) -> u64 {
    // Middles are below 2^60: the top 31 bits of each are woven.
    let weave = |c: i64| {
        let mut bits = (c as u64) & 0x7fff_ffff;
        for (shift, mask) in [
            (16, 0x0000_ffff_0000_ffff),
            (8, 0x00ff_00ff_00ff_00ff),
            (4, 0x0f0f_0f0f_0f0f_0f0f),
            (2, 0x3333_3333_3333_3333),
            (1, 0x5555_5555_5555_5555),
        ] {
            bits = (bits | (bits << shift)) & mask;
        }
        bits
    };
    let middle = |low: i64, high: i64| low / 2 + high / 2;
    let (x, y) = (middle(b[0], b[2]), middle(b[1], b[3]));
    // Small lattices stay below 2^31 and are not shifted; the choice is by size, so that the curve is the same for all.
    if x < 1 << 31 && y < 1 << 31 {
        weave(x) | (weave(y) << 1)
    } else {
        weave(x >> 29) | (weave(y >> 29) << 1) | (1 << 63)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_query_finds_what_a_search_of_all_finds() {
        let boxes: Vec<(u32, Box4)> = (0..500u32)
            .map(|i| {
                let (x, y) = (i64::from(i * 37 % 211), i64::from(i * 53 % 197));
                (i, [x, y, x + i64::from(i % 9), y + i64::from(i % 5)])
            })
            .collect();
        let tree = Boxes::new(boxes.iter().copied());
        for query in [[0, 0, 10, 10], [50, 50, 50, 50], [100, 0, 120, 200], [-5, -5, -1, -1], [0, 0, 300, 300]] {
            let mut found = Vec::new();
            tree.touching(query, |item| {
                found.push(item);
                true
            });
            found.sort_unstable();
            let all: Vec<u32> = boxes.iter().filter(|(_, b)| touch(*b, query)).map(|&(i, _)| i).collect();
            assert_eq!(found, all, "{query:?}");
        }
    }

    #[test]
    fn an_empty_tree_finds_nothing() {
        Boxes::new(std::iter::empty()).touching([0, 0, 1, 1], |_| panic!("nothing is there"));
    }
}
