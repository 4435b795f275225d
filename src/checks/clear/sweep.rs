//! One pass from left to right that proves members clear of each other, or names those that are not.
//!
//! A sweep as Shamos and Hoey (1976) describe it, with two changes that make it complete and robust. Members that meet
//! at a joint are no event of their own: at each place everything that ends there leaves before anything that starts there
//! enters, and entries are ordered by slope. And a member that is found to cross or to overlap another is *set aside* and the sweep goes on
//! without it; at the end the members that stayed are proved to be clear of each other, so that only those set aside have to be
//! compared with all. Only orientations are asked, so there is no rounding and no crossing point to compare.
//!
//! Time n log n for n members and joints, apart from the moves within the list of members at the front.

use super::super::frame::Frame;
use crate::exact::Orientation;
use crate::exact::order;
use std::cmp::Ordering;

/// What the sweep found.
#[derive(Debug, Default)]
pub(crate) struct Swept {
    /// A place (by its first joint) strictly inside a member that stayed to the end or was there until set aside.
    pub(crate) on_member: Vec<(u32, u32)>,
    /// The members that cross or overlap another: compare these with all.
    pub(crate) aside: Vec<u32>,
    /// True when so many were set aside that the sweep stopped.
    pub(crate) stopped: bool,
}

struct Sweep<'f, 'a> {
    frame: &'f Frame<'a>,
    /// The members at the front, from below upwards.
    front: Vec<u32>,
    /// Of each member its ends from left to right.
    ends: Vec<[u32; 2]>,
    swept: Swept,
    most: usize,
}

/// Sweeps over these members, each with a length, no two between the same joints.
pub(crate) fn sweep(frame: &Frame, members: &[u32], most: usize) -> Swept {
    let ends = (0..frame.ends.len()).map(|m| frame.left_to_right(m).map(|joint| joint as u32)).collect();
    let mut sweep = Sweep { frame, front: Vec::new(), ends, swept: Swept::default(), most };
    let starting = sweep.starting(members);
    let mut next = 0;
    for (place, &joint) in frame.by_rank.iter().enumerate() {
        let rank = frame.rank[joint as usize];
        if place > 0 && frame.rank[frame.by_rank[place - 1] as usize] == rank {
            continue;
        }
        let first = next;
        while next < starting.len() && sweep.rank(starting[next], 0) == rank {
            next += 1;
        }
        sweep.visit(joint, &starting[first..next]);
        if sweep.swept.aside.len() > most {
            sweep.swept.stopped = true;
            break;
        }
    }
    sweep.swept
}

impl Sweep<'_, '_> {
    /// The members in the order in which they enter: by the place of their left end, then upwards by slope.
    fn starting(&self, members: &[u32]) -> Vec<u32> {
        let mut starting = members.to_vec();
        order::sort_by(&mut starting, |&s, &t| {
            let by_place = self.rank(s, 0).cmp(&self.rank(t, 0));
            by_place.then_with(|| self.turn(t, s)).then(s.cmp(&t))
        });
        starting
    }

    fn rank(&self, member: u32, end: usize) -> u32 {
        self.frame.rank[self.end(member, end)]
    }

    fn end(&self, member: u32, end: usize) -> usize {
        self.ends[member as usize][end] as usize
    }

    fn pair(&self, member: u32) -> [usize; 2] {
        self.ends[member as usize].map(|joint| joint as usize)
    }

    /// `Greater` when the second member turns upwards from the first.
    fn turn(&self, s: u32, t: u32) -> Ordering {
        self.frame.lattice.turn(self.pair(s), self.pair(t))
    }

    fn side(&self, member: u32, joint: usize) -> Orientation {
        let [left, right] = self.pair(member);
        self.frame.lattice.orientation(left, right, joint)
    }

    fn visit(&mut self, joint: u32, starting: &[u32]) {
        let at = joint as usize;
        let low = self.front.partition_point(|&m| self.side(m, at) == Orientation::Left);
        let block = self.front[low..].iter().take_while(|&&m| self.side(m, at) == Orientation::On).count();
        let passing = self.leave(joint, low, block);
        let mut top = low + passing;
        for &member in starting {
            self.enter(member, low, &mut top);
        }
        self.settle(low, top);
    }

    /// Takes the members that end at a joint off the front, and sets aside all but one of those that pass through it.
    /// Gives how many stay: 0 or 1.
    fn leave(&mut self, joint: u32, low: usize, block: usize) -> usize {
        let rank = self.frame.rank[joint as usize];
        let through: Vec<u32> =
            self.front[low..low + block].iter().copied().filter(|&m| self.rank(m, 1) != rank).collect();
        self.swept.on_member.extend(through.iter().map(|&m| (joint, m)));
        self.swept.aside.extend(through.iter().skip(1));
        let stays = through.first().copied();
        self.front.splice(low..low + block, stays);
        usize::from(stays.is_some())
    }

    /// Puts a member on the front above those from `low` to `top` that it turns upwards from.
    fn enter(&mut self, member: u32, low: usize, top: &mut usize) {
        // All of these go through the member's left end, and the members enter in the order of their slopes.
        let mut at = *top;
        while at > low {
            match self.turn(self.front[at - 1], member) {
                Ordering::Greater => break,
                Ordering::Equal => return self.swept.aside.push(member),
                Ordering::Less => at -= 1,
            }
        }
        self.front.insert(at, member);
        *top += 1;
    }

    /// Compares neighbours on the front where they are new to each other, from below `low` to above `top`.
    fn settle(&mut self, low: usize, mut top: usize) {
        let mut at = low.saturating_sub(1);
        while at < top && at + 1 < self.front.len() {
            if !self.cross(self.front[at], self.front[at + 1]) {
                at += 1;
                continue;
            }
            // The upper one goes, and the next above it becomes the neighbour.
            let gone = self.front.remove(at + 1);
            self.swept.aside.push(gone);
            if at + 1 < top {
                top -= 1;
            }
            if self.swept.aside.len() > self.most {
                return;
            }
        }
    }

    /// True when the insides of two members cross in one point.
    fn cross(&self, s: u32, t: u32) -> bool {
        properly_cross(self.frame, self.pair(s), self.pair(t))
    }
}

/// True when two segments cross in one point that is inside both.
pub(crate) fn properly_cross(frame: &Frame, s: [usize; 2], t: [usize; 2]) -> bool {
    let side = |line: [usize; 2], joint| frame.lattice.orientation(line[0], line[1], joint);
    let parted = |line: [usize; 2], [a, b]: [usize; 2]| {
        matches!(
            (side(line, a), side(line, b)),
            (Orientation::Left, Orientation::Right) | (Orientation::Right, Orientation::Left)
        )
    };
    parted(s, t) && parted(t, s)
}
