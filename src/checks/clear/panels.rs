//! Panels: the regions that members enclose, found by walking along members that are in exact order around every joint.
//!
//! Every member is walked once each way, with the region on the left; at each joint the walk takes the next member
//! clockwise. A walk around a panel is counter-clockwise, and the walk around the outside of a part is clockwise. The outside is
//! known without any area: it is the walk that passes the leftmost joint of the part on its left.

use super::super::frame::Frame;
use super::joints::parts;
use crate::truss::JointId;

/// The panels and the outlines of the parts.
#[derive(Debug, Default)]
pub(crate) struct Panels {
    /// Counter-clockwise, in the order of the first member walked.
    pub(crate) panels: Vec<Vec<JointId>>,
    /// Clockwise, one for each part.
    pub(crate) outline: Vec<Vec<JointId>>,
}

/// Walks around every panel of a truss whose members neither cross nor overlap. Linear time.
pub(crate) fn panels(frame: &Frame) -> Panels {
    let walks = Walks::new(frame);
    let outside = walks.outside(frame);
    let mut seen = vec![false; walks.to.len()];
    let mut found = Panels::default();
    for start in 0..walks.to.len() {
        if seen[start] {
            continue;
        }
        let (joints, is_outside) = walks.walk(start, &outside, &mut seen);
        if is_outside {
            found.outline.push(joints);
        } else if joints.len() > 2 {
            found.panels.push(joints);
        }
    }
    found
}

/// Half members: number `starts[joint] + place around the joint`.
struct Walks {
    starts: Vec<usize>,
    from: Vec<usize>,
    to: Vec<usize>,
    /// The same member the other way.
    back: Vec<usize>,
}

impl Walks {
    fn new(frame: &Frame) -> Walks {
        let mut starts = vec![0];
        let (mut from, mut to) = (Vec::new(), Vec::new());
        let mut first_half = vec![usize::MAX; frame.ends.len()];
        let mut back = vec![0; 2 * frame.ends.len()];
        for joint in 0..frame.joint_count() {
            for spoke in frame.around(joint) {
                let half = to.len();
                let other = std::mem::replace(&mut first_half[spoke.member as usize], half);
                if other != usize::MAX {
                    (back[half], back[other]) = (other, half);
                }
                from.push(joint);
                to.push(spoke.far as usize);
            }
            starts.push(to.len());
        }
        Walks { starts, from, to, back }
    }

    /// The half members that have the outside on their left where they leave the leftmost joint of their part.
    fn outside(&self, frame: &Frame) -> Vec<bool> {
        let parts = parts(frame);
        let mut leftmost: Vec<Option<usize>> = vec![None; parts.len()];
        for joint in (0..parts.len()).filter(|&joint| !frame.around(joint).is_empty()) {
            let best = &mut leftmost[parts[joint]];
            if best.is_none_or(|other| frame.rank[joint] < frame.rank[other]) {
                *best = Some(joint);
            }
        }
        let mut outside = vec![false; self.to.len()];
        for joint in leftmost.into_iter().flatten() {
            // All members leave to the right: the outside is left of the steepest one.
            let halves = self.starts[joint]..self.starts[joint + 1];
            let steepest = halves.clone().rfind(|&half| self.turns_up(frame, half)).or(halves.clone().next_back());
            outside[steepest.unwrap_or(halves.start)] = true;
        }
        outside
    }

    /// True when the half member leaves to the right or upwards.
    fn turns_up(&self, frame: &Frame, half: usize) -> bool {
        let (from, to) = (frame.lattice.point(self.from[half]), frame.lattice.point(self.to[half]));
        to.y >= from.y
    }

    fn walk(&self, start: usize, outside: &[bool], seen: &mut [bool]) -> (Vec<JointId>, bool) {
        let (mut joints, mut is_outside, mut half) = (Vec::new(), false, start);
        while !seen[half] {
            seen[half] = true;
            is_outside |= outside[half];
            joints.push(JointId::new(self.from[half]));
            half = self.next(half);
        }
        (joints, is_outside)
    }

    /// The next half member with the same region on its left: at the far joint, the next one clockwise.
    fn next(&self, half: usize) -> usize {
        let (back, joint) = (self.back[half], self.to[half]);
        if back == self.starts[joint] { self.starts[joint + 1] - 1 } else { back - 1 }
    }
}
