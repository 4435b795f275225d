//! Pieces that overlap.

use super::outline::{Body, Corner};
use super::{Collision, Left};
use crate::checks::frame::Frame;
use crate::truss::{JointId, MemberId};
use num_traits::Zero;
use std::cmp::Ordering;

/// Neighbours at a joint whose outlines share some area.
pub(super) fn collisions(frame: &Frame, bodies: &[Option<Body>]) -> Vec<Collision> {
    let mut found = Vec::new();
    for joint in 0..frame.joint_count() {
        let around = frame.around(joint);
        let pairs = if around.len() > 2 { around.len() } else { around.len().saturating_sub(1) };
        for place in 0..pairs {
            let members = [around[place], around[(place + 1) % around.len()]].map(|spoke| spoke.member as usize);
            let [a, b] = members.map(|member| bodies[member].as_ref());
            if a.zip(b).is_some_and(|(a, b)| do_overlap(a, b)) {
                found.push(Collision { joint: JointId::new(joint), members: members.map(MemberId::new) });
            }
        }
    }
    found
}

/// True when two pieces share some area; touching is fine.
pub(super) fn do_overlap(a: &Body, b: &Body) -> bool {
    let is_solid = |body: &Body| body.left == Left::Whole && !body.depth.is_zero();
    if !is_solid(a) || !is_solid(b) {
        return false;
    }
    let (a, b) = (a.parts(), b.parts());
    a.iter().any(|a| b.iter().any(|b| !is_parted_by(a, b) && !is_parted_by(b, a)))
}

/// True when an edge of the one parts it from the other; of convex outlines without a common area one has such an edge.
fn is_parted_by(a: &[Corner], b: &[Corner]) -> bool {
    (0..a.len()).any(|i| {
        let (from, to) = (&a[i], &a[(i + 1) % a.len()]);
        b.iter().all(|corner| from.turn(to, corner) != Ordering::Greater)
    })
}
