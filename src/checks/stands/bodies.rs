//! Rigid by triangles: a proof of full rank that needs no elimination.
//!
//! A triangle that is not flat is rigid, to first order. Rigid bodies that share two joints in different places are one
//! rigid body, and so are a body and a joint that two members, not in one line, join to it. Most trusses are built up in
//! just this way, and then the rank of their members is 2 j - 3. What is not is left to the elimination; nothing is said
//! of it here. Linear time, apart from joints with very many members.

use super::super::clear::has_member;
use super::super::frame::Frame;
use super::supports::{Whole, whole_motion};
use std::cmp::Ordering;

/// The rank of members and holds, when triangles and supports prove it full; `None` says nothing.
pub(crate) fn full_rank(frame: &Frame) -> Option<usize> {
    let mut is_used = has_member(frame);
    frame.truss.supports.iter().for_each(|support| is_used[support.joint.index()] = true);
    let columns = 2 * is_used.iter().filter(|is| **is).count();
    if !is_one_body(frame, &is_used) {
        return None;
    }
    let supports: Vec<usize> = (0..frame.truss.supports.len()).collect();
    match supports.is_empty() {
        true => Some(columns - 3),
        false => (whole_motion(frame, &supports, true) == Whole::Held).then_some(columns),
    }
}

/// True when all joints in use are proved to be one rigid body.
fn is_one_body(frame: &Frame, is_used: &[bool]) -> bool {
    let groups = Groups::by_triangles(frame);
    let Some(largest) = groups.largest() else { return false };
    let mut body = Body::new(frame, groups);
    body.take_group(largest);
    while let Some(joint) = body.waiting.pop() {
        body.spread_from(joint as usize);
    }
    is_used.iter().zip(&body.has).all(|(is_used, has)| *has || !is_used)
}

/// Members in groups, each group a rigid body.
struct Groups {
    parent: Vec<u32>,
    size: Vec<u32>,
}

impl Groups {
    /// Members that are joined by triangles.
    fn by_triangles(frame: &Frame) -> Groups {
        let count = frame.ends.len();
        let mut groups = Groups { parent: (0..count as u32).collect(), size: vec![1; count] };
        for joint in 0..frame.joint_count() {
            let around = frame.around(joint);
            for (place, first) in around.iter().enumerate().filter(|_| around.len() > 1) {
                let second = around[(place + 1) % around.len()];
                let (u, v) = (first.far as usize, second.far as usize);
                let is_flat = || frame.lattice.turn([joint, u], [joint, v]) == Ordering::Equal;
                if let Some(third) = member_between(frame, u, v)
                    && !is_flat()
                {
                    groups.join(first.member, second.member);
                    groups.join(first.member, third);
                }
            }
        }
        groups
    }

    fn root(&mut self, mut member: u32) -> u32 {
        while self.parent[member as usize] != member {
            let above = self.parent[self.parent[member as usize] as usize];
            self.parent[member as usize] = above;
            member = above;
        }
        member
    }

    fn join(&mut self, a: u32, b: u32) {
        let (mut a, mut b) = (self.root(a), self.root(b));
        if a == b {
            return;
        }
        if self.size[a as usize] < self.size[b as usize] {
            std::mem::swap(&mut a, &mut b);
        }
        self.parent[b as usize] = a;
        self.size[a as usize] += self.size[b as usize];
    }

    /// The group with the most members, if any has three.
    fn largest(&self) -> Option<u32> {
        let is_root = |member: &u32| self.parent[*member as usize] == *member && self.size[*member as usize] > 2;
        (0..self.parent.len() as u32).filter(is_root).max_by_key(|&root| (self.size[root as usize], !root))
    }
}

/// The member between two joints, looked for at the one with fewer members.
fn member_between(frame: &Frame, u: usize, v: usize) -> Option<u32> {
    let (at, far) = if frame.around(u).len() <= frame.around(v).len() { (u, v) } else { (v, u) };
    frame.around(at).iter().find(|spoke| spoke.far as usize == far).map(|spoke| spoke.member)
}

/// The body that grows.
struct Body<'f, 'a> {
    frame: &'f Frame<'a>,
    groups: Groups,
    /// The members of each group, by its root.
    members: Vec<Vec<u32>>,
    /// Of each joint whether it is part of the body.
    has: Vec<bool>,
    /// Joints of the body from where it may spread.
    waiting: Vec<u32>,
    /// Of each joint outside, the end in the body of a member to it.
    held: Vec<Option<u32>>,
    /// Of each group outside, a joint of it in the body.
    touched: Vec<Option<u32>>,
}

impl<'f, 'a> Body<'f, 'a> {
    fn new(frame: &'f Frame<'a>, mut groups: Groups) -> Body<'f, 'a> {
        let count = frame.ends.len();
        let mut members = vec![Vec::new(); count];
        for member in 0..count as u32 {
            members[groups.root(member) as usize].push(member);
        }
        let joints = frame.joint_count();
        let (has, held, touched) = (vec![false; joints], vec![None; joints], vec![None; count]);
        Body { frame, groups, members, has, waiting: Vec::new(), held, touched }
    }

    fn take(&mut self, joint: usize) {
        if !std::mem::replace(&mut self.has[joint], true) {
            self.waiting.push(joint as u32);
        }
    }

    fn take_group(&mut self, root: u32) {
        for member in std::mem::take(&mut self.members[root as usize]) {
            self.frame.ends[member as usize].iter().for_each(|&joint| self.take(joint));
        }
    }

    /// Takes what a new joint of the body makes part of it.
    fn spread_from(&mut self, joint: usize) {
        let frame = self.frame;
        for spoke in frame.around(joint) {
            let root = self.groups.root(spoke.member);
            if self.groups.size[root as usize] > 2 && !self.members[root as usize].is_empty() {
                match self.touched[root as usize] {
                    Some(other) if frame.rank[other as usize] != frame.rank[joint] => self.take_group(root),
                    Some(_) => {}
                    None => self.touched[root as usize] = Some(joint as u32),
                }
            }
            let far = spoke.far as usize;
            match self.held[far] {
                _ if self.has[far] => {}
                Some(other) => {
                    if frame.lattice.turn([far, other as usize], [far, joint]) != Ordering::Equal {
                        self.take(far);
                    }
                }
                None => self.held[far] = Some(joint as u32),
            }
        }
    }
}
