//! In which order to eliminate joints, so that few entries arise.
//!
//! Joints with at most three neighbours go first, again and again: a truss that is built up triangle by triangle goes whole in this
//! way. What remains is parted along the middle by its places, the joints on the parting line last (nested dissection, George 1973).

use crate::exact::order as sorting;
use std::collections::HashSet;
use std::hash::{BuildHasherDefault, Hasher};

/// Neighbours of each joint, without repetition.
pub(crate) type Neighbours = Vec<Vec<u32>>;

/// Joints with at most this many neighbours are eliminated at once: three new pairs replace three old ones.
const FEW: usize = 3;

/// What is left of a part is not parted further below this size.
const SMALL_PART: usize = 8;

/// An order of elimination. `place` gives coordinates that only guide. n log n time.
pub(crate) fn order(neighbours: &Neighbours, place: &[[i64; 2]]) -> Vec<u32> {
    let (mut order, rest, graph) = peel(neighbours);
    let mut parting = Parting { graph, place, label: vec![0; place.len()], next: 0 };
    parting.part(rest, &mut order);
    order
}

/// Eliminates joints with few neighbours; gives them in order, the rest, and the neighbours of the rest.
fn peel(neighbours: &Neighbours) -> (Vec<u32>, Vec<u32>, Neighbours) {
    let mut graph = neighbours.clone();
    let mut pairs: PairSet = PairSet::default();
    for (a, list) in graph.iter().enumerate() {
        pairs.extend(list.iter().map(|&b| pair(a as u32, b)));
    }
    let mut degree: Vec<usize> = graph.iter().map(Vec::len).collect();
    let mut gone = vec![false; graph.len()];
    let mut order = Vec::new();
    let mut ready: Vec<u32> = (0..graph.len() as u32).rev().filter(|&a| degree[a as usize] <= FEW).collect();
    while let Some(a) = ready.pop() {
        let at = a as usize;
        if std::mem::replace(&mut gone[at], true) {
            continue;
        }
        order.push(a);
        let left: Vec<u32> = graph[at].iter().copied().filter(|&b| !gone[b as usize]).collect();
        for (i, &b) in left.iter().enumerate() {
            degree[b as usize] -= 1;
            for &c in &left[i + 1..] {
                if pairs.insert(pair(b, c)) {
                    graph[b as usize].push(c);
                    graph[c as usize].push(b);
                    degree[b as usize] += 1;
                    degree[c as usize] += 1;
                }
            }
        }
        ready.extend(left.iter().rev().copied().filter(|&b| degree[b as usize] <= FEW));
    }
    let rest: Vec<u32> = (0..graph.len() as u32).filter(|&a| !gone[a as usize]).collect();
    for &a in &rest {
        graph[a as usize].retain(|&b| !gone[b as usize]);
    }
    (order, rest, graph)
}

fn pair(a: u32, b: u32) -> u64 {
    (u64::from(a.min(b)) << 32) | u64::from(a.max(b))
}

type PairSet = HashSet<u64, BuildHasherDefault<PairHasher>>;

/// Mixes one number by a multiplication; the keys come from a truss whose size is bounded.
#[derive(Default)]
pub(crate) struct PairHasher(u64);

impl Hasher for PairHasher {
    fn finish(&self) -> u64 {
        self.0 ^ (self.0 >> 32)
    }

    fn write(&mut self, bytes: &[u8]) {
        bytes.iter().for_each(|&byte| self.write_u64(byte.into()));
    }

    fn write_u64(&mut self, value: u64) {
        self.0 =
            (self.0 ^ value).wrapping_mul(0x9e37_79b9_7f4a_7c15).rotate_left(23).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    }
}

struct Parting<'p> {
    graph: Neighbours,
    place: &'p [[i64; 2]],
    /// The part that each joint belongs to at the moment.
    label: Vec<u32>,
    next: u32,
}

impl Parting<'_> {
    fn part(&mut self, mut joints: Vec<u32>, order: &mut Vec<u32>) {
        if joints.len() <= SMALL_PART {
            return order.extend(joints);
        }
        let axis = self.longer_axis(&joints);
        let middle = joints.len() / 2;
        joints.select_nth_unstable_by_key(middle, |&joint| (self.place[joint as usize][axis], joint));
        let upper = joints.split_off(middle);
        let [low, high] = [self.relabel(&joints), self.relabel(&upper)];
        let (low_edge, low_rest) = self.edge(joints, high);
        let (high_edge, high_rest) = self.edge(upper, low);
        let (edge, low_all, high_all) = if low_edge.len() <= high_edge.len() {
            (low_edge, low_rest, merged(high_rest, high_edge))
        } else {
            (high_edge, merged(low_rest, low_edge), high_rest)
        };
        self.part(low_all, order);
        self.part(high_all, order);
        order.extend(edge);
    }

    fn longer_axis(&self, joints: &[u32]) -> usize {
        let span = |axis: usize| {
            let values = || joints.iter().map(|&joint| self.place[joint as usize][axis]);
            values().max().unwrap_or(0) - values().min().unwrap_or(0)
        };
        usize::from(span(1) > span(0))
    }

    fn relabel(&mut self, joints: &[u32]) -> u32 {
        self.next += 1;
        joints.iter().for_each(|&joint| self.label[joint as usize] = self.next);
        self.next
    }

    /// The joints with a neighbour in the other part, and those without.
    fn edge(&self, joints: Vec<u32>, other: u32) -> (Vec<u32>, Vec<u32>) {
        let mut sorted = joints;
        sorting::sort(&mut sorted);
        sorted.into_iter().partition(|&joint| {
            self.graph[joint as usize].iter().any(|&neighbour| self.label[neighbour as usize] == other)
        })
    }
}

fn merged(mut a: Vec<u32>, b: Vec<u32>) -> Vec<u32> {
    a.extend(b);
    a
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_joint_is_eliminated_once() {
        // A square lattice with one diagonal in each field.
        let side = 12u32;
        let mut neighbours: Neighbours = vec![Vec::new(); (side * side) as usize];
        for x in 0..side {
            for y in 0..side {
                for (dx, dy) in [(1, 0), (0, 1), (1, 1)] {
                    if x + dx < side && y + dy < side {
                        let (a, b) = (x * side + y, (x + dx) * side + y + dy);
                        neighbours[a as usize].push(b);
                        neighbours[b as usize].push(a);
                    }
                }
            }
        }
        let place: Vec<[i64; 2]> = (0..side * side).map(|i| [(i / side).into(), (i % side).into()]).collect();
        let mut order = order(&neighbours, &place);
        order.sort_unstable();
        assert_eq!(order, (0..side * side).collect::<Vec<_>>());
    }
}
