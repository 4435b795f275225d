//! The simple cases: chains of runs (or rises) that cannot close, and lengths that cannot reach.
//!
//! Floats guide the search (Bellman and Ford's for a negative cycle, Dijkstra's for the shortest way round); the judge
//! decides.

use super::judge::{Case, accepts, greatest_step, lengths};
use super::{Bound, Certificate, Link, Source};
use crate::checks::close::meaning::{Axis, Function};
use crate::checks::close::search::model::to_float;
use crate::truss::{FigureId, JointId};
use std::cmp::Ordering;
use std::collections::{BTreeMap, BinaryHeap};

/// Relaxations in all while chains are searched.
const MOST_WORK: usize = 3_000_000;
/// Set joints between which distances are looked at.
const MOST_SET: usize = 24;

/// A simple certificate, if there is one.
pub(crate) fn simple(case: &Case) -> Option<Certificate> {
    let found = set_figures(case).or_else(|| [Axis::X, Axis::Y].into_iter().find_map(|axis| chain(case, axis)));
    found.or_else(|| polygon(case))
}

fn sources(case: &Case) -> impl Iterator<Item = Source> {
    let kept = |figure: &usize| !case.disregarded.contains(&FigureId::new(*figure));
    let numbered = |figure: usize| {
        (0..case.conditions[figure].len()).map(move |c| Source { figure: FigureId::new(figure), condition: c })
    };
    (0..case.conditions.len()).filter(kept).flat_map(numbered)
}

fn set_figures(case: &Case) -> Option<Certificate> {
    sources(case).map(Certificate::Set).find(|certificate| accepts(case, certificate))
}

#[derive(Clone, Copy)]
struct Edge {
    link: Link,
    weight: f64,
}

/// A closed chain along an axis that can only shrink.
fn chain(case: &Case, axis: Axis) -> Option<Certificate> {
    let edges = chain_edges(case, axis);
    let joints = case.truss.joints.len();
    let scale = edges.iter().map(|edge| edge.weight.abs()).fold(0.0, f64::max);
    let (mut reached, mut by) = (vec![0.0f64; joints], vec![usize::MAX; joints]);
    for pass in 0..(MOST_WORK / edges.len().max(1)).min(joints + 1) {
        let mut changed = false;
        for (index, edge) in edges.iter().enumerate() {
            let next = reached[edge.link.from.index()] + edge.weight;
            if next < reached[edge.link.to.index()] - 1e-12 * scale {
                (reached[edge.link.to.index()], by[edge.link.to.index()]) = (next, index);
                changed = true;
            }
        }
        if !changed {
            return None;
        }
        if pass % 4 == 3
            && let Some(cycle) = cycle_in(&edges, &by)
        {
            let links: Vec<Link> = cycle.into_iter().map(|index| edges[index].link).collect();
            let certificate = Certificate::Chain { axis, links };
            if accepts(case, &certificate) {
                return Some(certificate);
            }
        }
    }
    None
}

fn chain_edges(case: &Case, axis: Axis) -> Vec<Edge> {
    let mut edges = Vec::new();
    let mut add = |from: JointId, to: JointId, bound: Bound| {
        for link in [Link { from, to, bound }, Link { from: to, to: from, bound }] {
            if let Some(step) = greatest_step(case, axis, &link) {
                edges.push(Edge { link, weight: to_float(&step) });
            }
        }
    };
    for source in sources(case) {
        match case.conditions[source.figure.index()][source.condition].function {
            Function::Along { axis: a, from, to } if a == axis => add(from, to, Bound::Figure(source)),
            Function::Quadrance { from, to } => add(from, to, Bound::Figure(source)),
            _ => {}
        }
    }
    let set: Vec<JointId> = set_joints(case).collect();
    set.windows(2).for_each(|pair| add(pair[0], pair[1], Bound::Set));
    edges
}

fn set_joints(case: &Case) -> impl Iterator<Item = JointId> {
    let joints = case.truss.joints.iter().enumerate().filter(|(_, joint)| !joint.loose);
    joints.map(|(index, _)| JointId::new(index))
}

/// A cycle among the edges by which joints were reached last.
fn cycle_in(edges: &[Edge], by: &[usize]) -> Option<Vec<usize>> {
    let mut seen = vec![usize::MAX; by.len()];
    for start in 0..by.len() {
        let mut at = start;
        while by[at] != usize::MAX && seen[at] == usize::MAX {
            seen[at] = start;
            at = edges[by[at]].link.from.index();
        }
        if by[at] != usize::MAX && seen[at] == start {
            let (mut cycle, mut round) = (Vec::new(), at);
            loop {
                cycle.push(by[round]);
                round = edges[by[round]].link.from.index();
                if round == at {
                    break;
                }
            }
            cycle.reverse();
            return Some(cycle);
        }
    }
    None
}

/// A joint and the way to it, the shortest first.
struct Waiting(f64, usize);

impl PartialEq for Waiting {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Waiting {}

impl PartialOrd for Waiting {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Waiting {
    fn cmp(&self, other: &Self) -> Ordering {
        other.0.total_cmp(&self.0).then(other.1.cmp(&self.1))
    }
}

struct Side {
    link: Link,
    least: f64,
    greatest: f64,
}

/// A length greater than the shortest way round.
fn polygon(case: &Case) -> Option<Certificate> {
    let sides = polygon_sides(case);
    let mut leaving: Vec<Vec<usize>> = vec![Vec::new(); case.truss.joints.len()];
    for (index, side) in sides.iter().enumerate() {
        leaving[side.link.from.index()].push(index);
    }
    let mut work = MOST_WORK;
    (0..sides.len()).step_by(2).find_map(|longest| {
        let round = way_round(&sides, &leaving, longest, &mut work)?;
        let links = std::iter::once(longest).chain(round).map(|index| sides[index].link).collect();
        let certificate = Certificate::Polygon { links };
        accepts(case, &certificate).then_some(certificate)
    })
}

/// Each length in both directions, one after the other.
fn polygon_sides(case: &Case) -> Vec<Side> {
    let mut links: Vec<Link> = Vec::new();
    for source in sources(case) {
        if let Function::Quadrance { from, to } = case.conditions[source.figure.index()][source.condition].function {
            links.push(Link { from, to, bound: Bound::Figure(source) });
        }
    }
    let set: Vec<JointId> = set_joints(case).take(MOST_SET).collect();
    for (i, &from) in set.iter().enumerate() {
        links.extend(set[i + 1..].iter().map(|&to| Link { from, to, bound: Bound::Set }));
    }
    let mut sides = Vec::new();
    for link in links {
        let Some(lengths) = lengths(case, &link) else { continue };
        let (least, greatest) = (to_float(lengths.lo()), to_float(lengths.hi()));
        let back = Link { from: link.to, to: link.from, bound: link.bound };
        sides.extend([link, back].map(|link| Side { link, least, greatest }));
    }
    sides
}

/// The shortest way between the ends of a side without it, when that is shorter than the side.
fn way_round(sides: &[Side], leaving: &[Vec<usize>], longest: usize, work: &mut usize) -> Option<Vec<usize>> {
    let (start, end) = (sides[longest].link.from.index(), sides[longest].link.to.index());
    let limit = sides[longest].least;
    let mut reached: BTreeMap<usize, (f64, usize)> = BTreeMap::from([(start, (0.0, usize::MAX))]);
    let mut waiting = BinaryHeap::from([Waiting(0.0, start)]);
    while let Some(Waiting(far, at)) = waiting.pop() {
        if at == end {
            break;
        }
        for &index in &leaving[at] {
            *work = work.checked_sub(1)?;
            let next = far + sides[index].greatest;
            let to = sides[index].link.to.index();
            if index / 2 == longest / 2 || next >= limit || reached.get(&to).is_some_and(|(known, _)| *known <= next) {
                continue;
            }
            reached.insert(to, (next, index));
            waiting.push(Waiting(next, to));
        }
    }
    let (mut way, mut at) = (Vec::new(), end);
    while at != start {
        let (_, index) = reached.get(&at)?;
        way.push(*index);
        at = sides[*index].link.from.index();
    }
    way.reverse();
    Some(way)
}
