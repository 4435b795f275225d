//! Chains: members of one role that follow each other through joints in a line, or nearly so.

use super::frame::{Frame, Spoke};
use crate::exact::Orientation;
use crate::truss::Role;
use std::cmp::Ordering;

/// Members that follow each other; a member that nothing follows is a chain of its own.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Chain {
    /// What its members are for.
    pub(crate) role: Role,
    /// The joints from one end to the other; one more than the members.
    pub(crate) joints: Vec<usize>,
    /// The members between them.
    pub(crate) members: Vec<usize>,
    /// True when all its joints lie on one line.
    pub(crate) is_straight: bool,
}

/// At a joint of more members than this no member is followed through it.
const CROWDED: usize = 64;

/// Members follow each other when the spread between them is at most one in this: about 3 degrees.
const TURN: i64 = 400;

/// Every member with a length, in exactly one chain; in the order of the first members. Linear time.
pub(crate) fn chains(frame: &Frame) -> Vec<Chain> {
    let follow = follow(frame);
    let mut seen = vec![false; frame.ends.len()];
    let mut found = Vec::new();
    for member in (0..frame.ends.len()).filter(|&member| !frame.has_no_length(member)) {
        if !seen[member] {
            found.push(chain_of(frame, &follow, member, &mut seen));
        }
    }
    found
}

/// For each member the one that follows it at its first and at its second end.
fn follow(frame: &Frame) -> Vec<[Option<u32>; 2]> {
    let mut follow = vec![[None; 2]; frame.ends.len()];
    for joint in 0..frame.joint_count() {
        let around = frame.around(joint);
        if !(2..=CROWDED).contains(&around.len()) {
            continue;
        }
        let best: Vec<Option<usize>> = (0..around.len()).map(|i| best_partner(frame, joint, around, i)).collect();
        for (i, partner) in best.iter().enumerate() {
            if let Some(k) = *partner
                && best[k] == Some(i)
            {
                let member = around[i].member as usize;
                let end = usize::from(frame.ends[member][1] == joint);
                follow[member][end] = Some(around[k].member);
            }
        }
    }
    follow
}

/// The spoke that goes on from another most nearly in line, if any does.
fn best_partner(frame: &Frame, joint: usize, around: &[Spoke], i: usize) -> Option<usize> {
    let role = frame.role(around[i].member as usize);
    let mut best: Option<usize> = None;
    for k in 0..around.len() {
        if k == i || frame.role(around[k].member as usize) != role || !goes_on(frame, joint, around[i], around[k]) {
            continue;
        }
        if best.is_none_or(|b| is_nearer(frame, joint, around[i], around[k], around[b])) {
            best = Some(k);
        }
    }
    best
}

fn goes_on(frame: &Frame, joint: usize, s: Spoke, t: Spoke) -> bool {
    let (a, b) = (s.far as usize, t.far as usize);
    if frame.lattice.facing([joint, a], [joint, b]) != Ordering::Less {
        return false;
    }
    if frame.lattice.turn([joint, a], [joint, b]) == Ordering::Equal {
        return true;
    }
    let slight = crate::exact::ratio(1, TURN);
    !frame.lattice.is_beyond(joint, [a, b], &frame.reach) && frame.lattice.spread_is_below(joint, a, b, &slight)
}

fn is_nearer(frame: &Frame, joint: usize, s: Spoke, t: Spoke, than: Spoke) -> bool {
    let spread = |other: Spoke| frame.lattice.spread(joint, s.far as usize, other.far as usize);
    spread(t) < spread(than)
}

fn chain_of(frame: &Frame, follow: &[[Option<u32>; 2]], member: usize, seen: &mut [bool]) -> Chain {
    seen[member] = true;
    let [a, b] = frame.ends[member];
    let (mut joints, mut members) = extend(frame, follow, member, 0, seen);
    joints.reverse();
    members.reverse();
    members.push(member);
    let (more_joints, more_members) = extend(frame, follow, member, 1, seen);
    let joints: Vec<usize> = joints.into_iter().chain([a, b]).chain(more_joints).collect();
    members.extend(more_members);
    let ends = [joints[0], joints[joints.len() - 1]];
    let on_line = |&joint: &usize| frame.lattice.orientation(ends[0], ends[1], joint) == Orientation::On;
    let is_straight = frame.rank[ends[0]] != frame.rank[ends[1]] && joints.iter().all(on_line);
    Chain { role: frame.role(member), joints, members, is_straight }
}

/// The joints and members that follow a member beyond one of its ends, outward.
fn extend(
    frame: &Frame,
    follow: &[[Option<u32>; 2]],
    member: usize,
    end: usize,
    seen: &mut [bool],
) -> (Vec<usize>, Vec<usize>) {
    let (mut joints, mut members) = (Vec::new(), Vec::new());
    let (mut member, mut end) = (member, end);
    while let Some(next) = follow[member][end].map(|next| next as usize) {
        if std::mem::replace(&mut seen[next], true) {
            break;
        }
        let joint = frame.ends[member][end];
        end = usize::from(frame.ends[next][0] == joint);
        member = next;
        joints.push(frame.ends[next][end]);
        members.push(next);
    }
    (joints, members)
}

impl Chain {
    /// Its first and last joint.
    pub(crate) fn ends(&self) -> [usize; 2] {
        [self.joints[0], self.joints[self.joints.len() - 1]]
    }

    /// `top chord T1 to T4`, or the mark of its only member.
    pub(crate) fn name(&self, frame: &Frame) -> String {
        match self.members.as_slice() {
            [only] => frame.print.member(*only).to_owned(),
            [first, .., last] => {
                format!("{} {} to {}", self.role.name(), frame.print.member(*first), frame.print.member(*last))
            }
            [] => String::new(),
        }
    }
}
