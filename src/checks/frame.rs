//! A placed truss prepared for questions: its joints on a lattice, and its members in order around every joint.

use super::findings::{Finding, Level, Rule};
use super::limits::Limits;
use super::placed::{Placed, Places};
use super::print::Print;
use crate::exact::{Lattice, Rational, Reach};
use crate::truss::{JointId, MemberId, Role, Truss};
use num_traits::Zero;
use std::cell::OnceCell;
use std::cmp::Ordering;

/// What every geometric question stands on.
pub(crate) struct Frame<'a> {
    pub(crate) truss: &'a Truss,
    pub(crate) limits: &'a Limits,
    pub(crate) print: Print<'a>,
    pub(crate) lattice: Lattice<'a>,
    /// Where the joints' places come from.
    pub(crate) places: Places,
    /// The step that deviations are measured in.
    pub(crate) step: Rational,
    /// The greatest deviation that counts as near.
    pub(crate) near: Rational,
    /// The same, prepared for the lattice.
    pub(crate) reach: Reach,
    /// Both ends of each member.
    pub(crate) ends: Vec<[usize; 2]>,
    /// The distinct places in order from left to right, then upwards: of each joint its rank.
    pub(crate) rank: Vec<u32>,
    /// Joints in the order of their ranks.
    pub(crate) by_rank: Vec<u32>,
    starts: Vec<u32>,
    spokes: Vec<Spoke>,
    /// Joints with members that leave them in one direction, and which of their spokes these are.
    runs: Vec<(u32, [u32; 2])>,
    supported: Vec<bool>,
    free_marks: [OnceCell<String>; 6],
}

/// A member as seen from one of its ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Spoke {
    /// The member.
    pub(crate) member: u32,
    /// The joint at its other end.
    pub(crate) far: u32,
}

impl<'a> Frame<'a> {
    /// Prepares a placed truss. Near linear: two sorts.
    pub(crate) fn new(placed: &'a Placed<'a>, limits: &'a Limits) -> Frame<'a> {
        let truss = placed.truss;
        let lattice = Lattice::new(&placed.points);
        let (step, near) = (limits.near_step(truss), limits.near(truss));
        let ends: Vec<[usize; 2]> = truss.members.iter().map(|m| m.ends().map(JointId::index)).collect();
        let (rank, by_rank) = ranks(&lattice);
        let (starts, spokes) = spokes(&lattice, &ends, &rank);
        let runs = runs(&lattice, &starts, &spokes);
        let mut supported = vec![false; truss.joints.len()];
        truss.supports.iter().for_each(|support| supported[support.joint.index()] = true);
        Frame {
            print: Print::new(truss, &step),
            reach: lattice.reach(&near),
            places: placed.places,
            truss,
            limits,
            lattice,
            step,
            near,
            ends,
            rank,
            by_rank,
            starts,
            spokes,
            runs,
            supported,
            free_marks: Default::default(),
        }
    }

    /// How many joints there are.
    pub(crate) fn joint_count(&self) -> usize {
        self.rank.len()
    }

    /// The members with a length that end at a joint, counter-clockwise from the right.
    pub(crate) fn around(&self, joint: usize) -> &[Spoke] {
        &self.spokes[self.starts[joint] as usize..self.starts[joint + 1] as usize]
    }

    /// The members that leave a joint in one direction, where there are two or more of them: the joint, and these members.
    pub(crate) fn same_way(&self) -> impl Iterator<Item = (usize, &[Spoke])> {
        self.runs.iter().map(|&(joint, [from, to])| (joint as usize, &self.spokes[from as usize..to as usize]))
    }

    /// True when both ends of a member stand in one place.
    pub(crate) fn has_no_length(&self, member: usize) -> bool {
        let [a, b] = self.ends[member];
        self.rank[a] == self.rank[b]
    }

    /// The ends of a member in the order of their ranks.
    pub(crate) fn left_to_right(&self, member: usize) -> [usize; 2] {
        let [a, b] = self.ends[member];
        if self.rank[a] <= self.rank[b] { [a, b] } else { [b, a] }
    }

    /// What a member is for.
    pub(crate) fn role(&self, member: usize) -> Role {
        self.truss.members[member].role
    }

    /// True when a support holds the joint.
    pub(crate) fn is_supported(&self, joint: usize) -> bool {
        self.supported[joint]
    }

    /// True when the joint's place is exact.
    pub(crate) fn is_set(&self, joint: usize) -> bool {
        !self.truss.joints[joint].loose
    }

    /// What a deviation among these joints has to exceed to mean anything: zero between set joints, a whole step where
    /// a loose joint stands in a layout; `None` where a loose joint is only sketched.
    pub(crate) fn floor(&self, joints: &[usize]) -> Option<Rational> {
        if joints.iter().all(|&joint| self.is_set(joint)) {
            return Some(Rational::zero());
        }
        (self.places != Places::Sketch).then(|| self.step.clone())
    }

    /// True when the square root of `square` is near but not zero, and means something among these joints.
    pub(crate) fn is_near(&self, square: &Rational, joints: &[usize]) -> bool {
        let Some(floor) = self.floor(joints) else { return false };
        *square > &floor * &floor && !square.is_zero() && *square <= &self.near * &self.near
    }

    /// The same of a deviation that is known to be near and not zero: worked out only where it has to exceed a step.
    pub(crate) fn is_near_or_set(&self, square: impl Fn() -> Rational, joints: &[usize]) -> bool {
        self.floor(joints).is_some_and(|floor| floor.is_zero() || self.is_near(&square(), joints))
    }

    /// A joint mark that is still free.
    pub(crate) fn free_joint_mark(&self) -> &str {
        self.free_marks[5].get_or_init(|| self.truss.free_joint_mark("J"))
    }

    /// A member mark that is still free.
    pub(crate) fn free_member_mark(&self, role: Role) -> &str {
        let at = Role::ALL.iter().position(|&other| other == role).unwrap_or(4);
        self.free_marks[at].get_or_init(|| self.truss.free_member_mark(role))
    }
}

/// The mark after a free one.
pub(crate) fn next_mark(mark: &str) -> String {
    let letters = mark.trim_end_matches(|c: char| c.is_ascii_digit());
    let number: u64 = mark[letters.len()..].parse().unwrap_or(0);
    format!("{letters}{}", number.saturating_add(1))
}

/// Ids from places in a list.
pub(crate) fn joint_ids(joints: impl IntoIterator<Item = usize>) -> impl Iterator<Item = JointId> {
    joints.into_iter().map(JointId::new)
}

/// Ids from places in a list.
pub(crate) fn member_ids(members: impl IntoIterator<Item = usize>) -> impl Iterator<Item = MemberId> {
    members.into_iter().map(MemberId::new)
}

/// Findings of one rule, told one by one up to a limit; what is beyond it is told in one more finding.
pub(crate) struct Tally {
    rule: Rule,
    level: Level,
    most: usize,
    found: Vec<Finding>,
    more: usize,
    /// The search was given up, so that there may be still more.
    open: bool,
}

impl Tally {
    /// An empty tally of a rule.
    pub(crate) fn new(rule: Rule, level: Level, limits: &Limits) -> Tally {
        Tally { rule, level, most: limits.most_findings, found: Vec::new(), more: 0, open: false }
    }

    /// Takes another finding; it is only made when it is told.
    pub(crate) fn add(&mut self, finding: impl FnOnce(Rule, Level) -> Finding) {
        if self.found.len() < self.most {
            self.found.push(finding(self.rule, self.level));
        } else {
            self.more += 1;
        }
    }

    /// True when nothing more will be told.
    pub(crate) fn is_full(&self) -> bool {
        self.found.len() >= self.most
    }

    /// The search was given up before its end.
    pub(crate) fn give_up(&mut self) {
        self.open = true;
    }

    /// All that was added.
    pub(crate) fn count(&self) -> usize {
        self.found.len() + self.more
    }

    /// The findings, with the last one for what was not told.
    pub(crate) fn finish(self) -> Vec<Finding> {
        let mut found = self.found;
        let told = found.len();
        let name = self.rule.name();
        if self.open {
            let text = format!("there are more findings of `{name}`: the search stopped after the first {told}");
            found.push(Finding::new(self.rule, self.level, text));
        } else if self.more > 0 {
            let text = format!("{} more findings of `{name}`; the first {told} are listed", self.more);
            found.push(Finding::new(self.rule, self.level, text));
        }
        found
    }
}

fn ranks(lattice: &Lattice) -> (Vec<u32>, Vec<u32>) {
    let mut order: Vec<u32> = (0..lattice.len() as u32).collect();
    order.sort_by(|&a, &b| lattice.compare_places(a as usize, b as usize).then(a.cmp(&b)));
    let mut rank = vec![0; lattice.len()];
    let mut next = 0;
    for (i, &joint) in order.iter().enumerate() {
        if i > 0 && lattice.compare_places(order[i - 1] as usize, joint as usize) == Ordering::Less {
            next += 1;
        }
        rank[joint as usize] = next;
    }
    (rank, order)
}

/// The runs of two spokes or more in one direction.
fn runs(lattice: &Lattice, starts: &[u32], spokes: &[Spoke]) -> Vec<(u32, [u32; 2])> {
    let mut runs = Vec::new();
    for joint in 0..lattice.len() {
        let is_along = |place: usize| {
            let [s, t] = [place - 1, place].map(|place| [joint, spokes[place].far as usize]);
            lattice.turn(s, t) == Ordering::Equal && lattice.facing(s, t) == Ordering::Greater
        };
        let (first, end) = (starts[joint] as usize, starts[joint + 1] as usize);
        let mut from = first;
        for place in first + 1..=end {
            if place == end || !is_along(place) {
                if place - from > 1 {
                    runs.push((joint as u32, [from as u32, place as u32]));
                }
                from = place;
            }
        }
    }
    runs
}

/// The spokes of all joints in one list, with where those of each joint start.
fn spokes(lattice: &Lattice, ends: &[[usize; 2]], rank: &[u32]) -> (Vec<u32>, Vec<Spoke>) {
    let real = || ends.iter().enumerate().filter(|(_, [a, b])| rank[*a] != rank[*b]);
    let mut starts = vec![0u32; lattice.len() + 1];
    real().flat_map(|(_, ends)| ends).for_each(|&joint| starts[joint + 1] += 1);
    for i in 1..starts.len() {
        starts[i] += starts[i - 1];
    }
    let mut next = starts.clone();
    let mut spokes = vec![Spoke { member: 0, far: 0 }; starts.last().map_or(0, |&n| n as usize)];
    for (member, &[a, b]) in real() {
        for (at, far) in [(a, b), (b, a)] {
            spokes[next[at] as usize] = Spoke { member: member as u32, far: far as u32 };
            next[at] += 1;
        }
    }
    for joint in 0..lattice.len() {
        // Members between the same joints are side by side: in one order seen from one end, in the other from the other.
        let side_by_side = |s: &Spoke, t: &Spoke| {
            let order = s.member.cmp(&t.member);
            if rank[joint] < rank[s.far as usize] { order } else { order.reverse() }
        };
        spokes[starts[joint] as usize..starts[joint + 1] as usize].sort_by(|s, t| {
            lattice.compare_directions(joint, s.far as usize, t.far as usize).then_with(|| side_by_side(s, t))
        });
    }
    (starts, spokes)
}
