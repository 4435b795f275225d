//! What the sketch says beside the figures: on which side of the line between its neighbours a loose joint lies.
//!
//! Three joints that are linked two by two (by a member, a length figure, or both being set) make a triangle; with a
//! loose corner, its sketched orientation is a side condition, so that its mirror image is no solution. A loose joint in
//! no such triangle takes the line between its first two neighbours instead. A triangle sketched flatter than one in
//! [`FLATNESS`] says nothing: a rough sketch may well have that wrong.

use super::meaning::FLATNESS;
use crate::exact::{Orientation, Rational, order, orientation, quadrance, whole};
use crate::truss::{FigureKind, JointId, Truss};
use std::collections::BTreeSet;

/// Joints with more neighbours than this are not searched for triangles; no drawing has them.
const MOST_NEIGHBOURS: usize = 64;

/// Three joints and the way round they were sketched.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Side {
    /// The corners.
    pub joints: [JointId; 3],
    /// The side of the line from the first to the second on which the third lies; never `On`.
    pub orientation: Orientation,
}

impl Side {
    /// True when floats put the corners the way round that was sketched; a guide, never a verdict.
    pub(crate) fn holds_about(&self, places: &[[f64; 2]]) -> bool {
        let [a, b, c] = self.joints.map(|id| places[id.index()]);
        let cross = (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]);
        match self.orientation {
            Orientation::Left => cross > 0.0,
            Orientation::Right => cross < 0.0,
            Orientation::On => true,
        }
    }
}

/// Every side that the sketch tells, in the order of the joints.
pub(crate) fn sides(truss: &Truss) -> Vec<Side> {
    let links = links(truss);
    let mut found = Vec::new();
    let mut seen = BTreeSet::new();
    for a in (0..truss.joints.len()).map(JointId::new) {
        let neighbours: Vec<JointId> = links[a.index()].iter().copied().take(MOST_NEIGHBOURS).collect();
        let mut triangles = triangles_at(truss, &links, a, &neighbours);
        if triangles.is_empty() && truss.joint(a).loose && neighbours.len() >= 2 {
            triangles.push([a, neighbours[0], neighbours[1]]);
        }
        for triangle in triangles {
            let mut corners = triangle;
            order::sort(&mut corners);
            if seen.insert(corners) {
                found.extend(sketched(truss, triangle));
            }
        }
    }
    found
}

/// Triangles with this corner first and a loose corner; the other two in ascending order.
fn triangles_at(truss: &Truss, links: &[BTreeSet<JointId>], a: JointId, neighbours: &[JointId]) -> Vec<[JointId; 3]> {
    let is_set = |id: JointId| !truss.joint(id).loose;
    let mut found = Vec::new();
    for (i, &b) in neighbours.iter().enumerate() {
        for &c in &neighbours[i + 1..] {
            let closed = links[b.index()].contains(&c) || (is_set(b) && is_set(c));
            if closed && !(is_set(a) && is_set(b) && is_set(c)) {
                found.push([a, b, c]);
            }
        }
    }
    found
}

/// Joints that are tied by a member or a length figure.
fn links(truss: &Truss) -> Vec<BTreeSet<JointId>> {
    let mut links = vec![BTreeSet::new(); truss.joints.len()];
    let members = truss.members.iter().map(|member| member.ends());
    let lengths = truss.figures.iter().filter_map(|figure| match figure.kind {
        FigureKind::Length { from, to, .. } => Some([from, to]),
        _ => None,
    });
    for [a, b] in members.chain(lengths).filter(|[a, b]| a != b) {
        links[a.index()].insert(b);
        links[b.index()].insert(a);
    }
    links
}

/// The sketched side of the third joint, unless it is too near the line to say.
fn sketched(truss: &Truss, joints: [JointId; 3]) -> Option<Side> {
    let [a, b, c] = joints.map(|id| truss.joint(id).point());
    let longest: Rational = quadrance(&a, &b).max(quadrance(&b, &c)).max(quadrance(&a, &c));
    let cross = (&b - &a).cross(&(&c - &a));
    // height = |cross| / longest side, so height·FLATNESS < longest side is |cross|·FLATNESS < longest quadrance.
    let clear = num_traits::Signed::abs(&cross) * whole(FLATNESS) >= longest;
    let orientation = orientation(&a, &b, &c);
    (clear && orientation != Orientation::On).then_some(Side { joints, orientation })
}
