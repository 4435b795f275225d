//! Members that cross, overlap or run through a joint that they are not part of.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids, next_mark};
use super::boxes::{Box4, Boxes};
use super::strips::{Scanned, scan};
use super::sweep::{properly_cross, sweep};
use crate::exact::order;
use crate::exact::{Orientation, Point, is_between};
use crate::truss::{Edit, Joint, JointId, Member, MemberId};
use std::cell::OnceCell;

/// How two members meet where they should not.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Meeting {
    /// Inside both, in one point where no joint is.
    Crossing,
    /// Along a piece of both.
    Overlap,
}

/// Everything that meets where it should not.
pub(crate) struct Meetings {
    /// Pairs of members, the earlier first, in order.
    pub(crate) pairs: Vec<([u32; 2], Meeting)>,
    /// Joints strictly inside members that are not theirs, in order.
    pub(crate) on_member: Vec<(u32, u32)>,
    /// True when there are more than are listed.
    pub(crate) more: bool,
}

/// Finds the meetings among members that have a length, no two between the same joints, given as a mask over all members.
///
/// Complete up to `most` pairs; n log n time when few members meet.
pub(crate) fn meetings(members: &Members, most: usize) -> Meetings {
    match scan(members.frame, &members.is_in, 2 * most) {
        Some(scanned) => scanned_meetings(members, scanned),
        None => swept_meetings(members, most),
    }
}

/// Members that are looked at, and their boxes once they are needed.
pub(crate) struct Members<'f, 'a> {
    frame: &'f Frame<'a>,
    is_in: Vec<bool>,
    boxes: OnceCell<Boxes>,
}

impl<'f, 'a> Members<'f, 'a> {
    /// Those that the mask has.
    pub(crate) fn new(frame: &'f Frame<'a>, is_in: Vec<bool>) -> Members<'f, 'a> {
        Members { frame, is_in, boxes: OnceCell::new() }
    }

    fn list(&self) -> Vec<u32> {
        (0..self.is_in.len() as u32).filter(|&member| self.is_in[member as usize]).collect()
    }

    /// Their boxes.
    pub(crate) fn boxes(&self) -> &Boxes {
        let boxed = |member: u32| (member, member_box(self.frame, member as usize));
        self.boxes.get_or_init(|| Boxes::new(self.list().into_iter().map(boxed)))
    }
}

/// What the scan found, and the joints without members.
fn scanned_meetings(members: &Members, scanned: Scanned) -> Meetings {
    let frame = members.frame;
    let Scanned { mut pairs, mut on_member } = scanned;
    for joint in (0..frame.joint_count()).filter(|&joint| frame.around(joint).is_empty()) {
        let [x, y] = frame.lattice.coarse(joint);
        members.boxes().touching([x, y, x, y], |member| {
            let [left, right] = frame.left_to_right(member as usize);
            let is_inside = frame.rank[left] < frame.rank[joint] && frame.rank[joint] < frame.rank[right];
            if is_inside && frame.lattice.orientation(left, right, joint) == Orientation::On {
                on_member.push((joint as u32, member));
            }
            true
        });
    }
    let on_member = every_joint_there(frame, &on_member);
    order::sort(&mut pairs);
    pairs.dedup();
    let inside = |member: u32| -> Vec<u32> {
        on_member.iter().filter(|&&(_, other)| other == member).map(|&(joint, _)| joint).collect()
    };
    let met = |pair: [u32; 2]| {
        let [s, t] = pair.map(|member| member as usize);
        meeting(frame, s, t, &inside(pair[0])).map(|meeting| (pair, meeting))
    };
    Meetings { pairs: pairs.into_iter().filter_map(met).collect(), on_member, more: false }
}

fn swept_meetings(members: &Members, most: usize) -> Meetings {
    let (frame, boxes) = (members.frame, members.boxes());
    let swept = sweep(frame, &members.list(), most);
    let mut found = Meetings { pairs: Vec::new(), on_member: swept.on_member, more: swept.stopped };
    for &member in &swept.aside {
        if found.pairs.len() > 2 * most {
            found.more = true;
            break;
        }
        compare_with_all(frame, member, boxes, most, &mut found);
    }
    order::sort(&mut found.pairs);
    found.pairs.dedup();
    found.on_member = every_joint_there(frame, &found.on_member);
    found
}

/// Compares a member that was set aside with all the others, and with all the joints.
fn compare_with_all(frame: &Frame, member: u32, boxes: &Boxes, most: usize, found: &mut Meetings) {
    let inside = places_inside(frame, member as usize);
    found.on_member.extend(inside.iter().map(|&joint| (joint, member)));
    let enough = found.pairs.len() + most + 1;
    boxes.touching(member_box(frame, member as usize), |other| {
        if other != member
            && let Some(meeting) = meeting(frame, member as usize, other as usize, &inside)
        {
            found.pairs.push(([member.min(other), member.max(other)], meeting));
        }
        found.pairs.len() < enough
    });
    found.more |= found.pairs.len() >= enough;
}

fn meeting(frame: &Frame, s: usize, t: usize, inside_s: &[u32]) -> Option<Meeting> {
    let (a, b) = (frame.left_to_right(s), frame.left_to_right(t));
    if properly_cross(frame, a, b) {
        let at_joint = inside_s.iter().any(|&j| frame.lattice.orientation(b[0], b[1], j as usize) == Orientation::On);
        return (!at_joint).then_some(Meeting::Crossing);
    }
    let on_line = |joint| frame.lattice.orientation(a[0], a[1], joint) == Orientation::On;
    let share =
        |p: [usize; 2], q: [usize; 2]| frame.rank[p[0]].max(frame.rank[q[0]]) < frame.rank[p[1]].min(frame.rank[q[1]]);
    (share(a, b) && on_line(b[0]) && on_line(b[1])).then_some(Meeting::Overlap)
}

/// One joint for each place strictly inside a member, from left to right.
fn places_inside(frame: &Frame, member: usize) -> Vec<u32> {
    let [left, right] = frame.left_to_right(member);
    let [_, low, _, high] = member_box(frame, member);
    let from = frame.by_rank.partition_point(|&j| frame.rank[j as usize] <= frame.rank[left]);
    let to = frame.by_rank.partition_point(|&j| frame.rank[j as usize] < frame.rank[right]);
    let mut inside: Vec<u32> = frame.by_rank[from..to.max(from)]
        .iter()
        .copied()
        .filter(|&j| (low..=high).contains(&frame.lattice.coarse(j as usize)[1]))
        .filter(|&j| frame.lattice.orientation(left, right, j as usize) == Orientation::On)
        .collect();
    inside.dedup_by_key(|&mut j| frame.rank[j as usize]);
    inside
}

/// Every joint of the places that were found, in the order of the lists.
fn every_joint_there(frame: &Frame, places: &[(u32, u32)]) -> Vec<(u32, u32)> {
    let mut all = Vec::new();
    for &(joint, member) in places {
        let rank = frame.rank[joint as usize];
        let first = frame.by_rank.partition_point(|&j| frame.rank[j as usize] < rank);
        let there = frame.by_rank[first..].iter().take_while(|&&j| frame.rank[j as usize] == rank);
        all.extend(there.take(2).map(|&j| (j, member)));
    }
    order::sort(&mut all);
    all.dedup();
    all
}

/// The box of a member in coarse coordinates.
pub(crate) fn member_box(frame: &Frame, member: usize) -> Box4 {
    let [a, b] = frame.ends[member].map(|joint| frame.lattice.coarse(joint));
    [a[0].min(b[0]), a[1].min(b[1]), a[0].max(b[0]), a[1].max(b[1])]
}

/// The findings of all meetings.
pub(crate) fn findings(frame: &Frame, found: &Meetings) -> Vec<Finding> {
    let mut crossings = Tally::new(Rule::Crossing, Level::Fault, frame.limits);
    let mut overlaps = Tally::new(Rule::Overlap, Level::Fault, frame.limits);
    let mut on_member = Tally::new(Rule::JointOnMember, Level::Fault, frame.limits);
    for &([s, t], meeting) in &found.pairs {
        match meeting {
            Meeting::Crossing => crossings.add(|rule, level| crossing(frame, s as usize, t as usize, rule, level)),
            Meeting::Overlap => overlaps.add(|rule, level| overlap(frame, s as usize, t as usize, rule, level)),
        }
    }
    for &(joint, member) in &found.on_member {
        let [a, b] = frame.ends[member as usize];
        if frame.floor(&[joint as usize, a, b]).is_none() {
            continue;
        }
        on_member.add(|rule, level| joint_on_member(frame, joint as usize, member as usize, rule, level));
    }
    if found.more {
        if overlaps.count() > crossings.count() { overlaps.give_up() } else { crossings.give_up() }
    }
    [crossings, overlaps, on_member].into_iter().flat_map(Tally::finish).collect()
}

fn crossing(frame: &Frame, s: usize, t: usize, rule: Rule, level: Level) -> Finding {
    let [a, b] = frame.ends[s];
    let [c, d] = frame.ends[t];
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([c, d]));
    let (from_a, turn) = (frame.lattice.displacement([a, c]), v.cross(&w));
    let part = from_a.cross(&w) / &turn;
    let point = frame.lattice.point(a) + &v.scaled(&part);
    let (near, quadrance) = nearest_end(frame, &point, [a, b, c, d]);
    let (print, distance) = (&frame.print, frame.print.root(&quadrance));
    let (s_mark, t_mark) = (print.member(s), print.member(t));
    let text = format!("{s_mark} crosses {t_mark} between joints, {distance} from {}", print.joint(near));
    let sides = format!(
        "{} and {} lie on different sides of {t_mark}: {} and {}; so do {} and {} of {s_mark}: {} and {}",
        print.joint(a),
        print.joint(b),
        -from_a.cross(&w),
        w.cross(&frame.lattice.displacement([c, b])),
        print.joint(c),
        print.joint(d),
        v.cross(&from_a),
        v.cross(&frame.lattice.displacement([a, d])),
    );
    Finding::new(rule, level, text)
        .members(member_ids([s, t]))
        .value("they cross at", print.place(&point))
        .value(format!("quadrance from {}", print.joint(near)), print.area(&quadrance))
        .formula(Law::Orientation, sides)
        .mend(
            "Put a joint where they cross, or let one of them pass behind the other",
            Some(joined(frame, s, t, &point)),
        )
        .point(point)
}

fn nearest_end(frame: &Frame, point: &Point, ends: [usize; 4]) -> (usize, crate::exact::Rational) {
    let quadrance = |joint: usize| crate::exact::quadrance(point, frame.lattice.point(joint));
    ends.into_iter().map(|joint| (joint, quadrance(joint))).min_by(|a, b| a.1.cmp(&b.1)).unwrap_or_default()
}

/// The edit that puts a joint where two members cross and divides both there.
fn joined(frame: &Frame, s: usize, t: usize, point: &Point) -> Edit {
    let new_joint = JointId::new(frame.joint_count());
    let joint = Joint {
        mark: frame.free_joint_mark().into(),
        x: frame.print.sheet().written(&point.x),
        y: frame.print.sheet().written(&point.y),
        loose: [frame.ends[s], frame.ends[t]].concat().iter().any(|&end| !frame.is_set(end)),
    };
    let mut edits = vec![Edit::AddJoint(joint)];
    let mut first_mark: Option<String> = None;
    for member in [s, t] {
        let old = &frame.truss.members[member];
        let free = frame.free_member_mark(old.role).to_owned();
        let mark = if first_mark.as_ref() == Some(&free) { next_mark(&free) } else { free.clone() };
        first_mark = Some(free);
        edits.push(Edit::SetMember(MemberId::new(member), Member { to: new_joint, ..old.clone() }));
        edits.push(Edit::AddMember(Member { mark, from: new_joint, to: old.to, role: old.role }));
    }
    Edit::All(edits)
}

fn overlap(frame: &Frame, s: usize, t: usize, rule: Rule, level: Level) -> Finding {
    let (a, b) = (frame.left_to_right(s), frame.left_to_right(t));
    let later = if frame.rank[a[0]] >= frame.rank[b[0]] { a[0] } else { b[0] };
    let sooner = if frame.rank[a[1]] <= frame.rank[b[1]] { a[1] } else { b[1] };
    let shared = frame.lattice.displacement([later, sooner]).quadrance();
    let print = &frame.print;
    let text = format!(
        "{} and {} lie on one line and share {} of it, from {} to {}",
        print.member(s),
        print.member(t),
        print.root(&shared),
        print.joint(later),
        print.joint(sooner)
    );
    let v = frame.lattice.displacement(a);
    let zero = |joint: usize| v.cross(&frame.lattice.displacement([a[0], joint]));
    let line = format!(
        "both ends of {} are on the line of {}: cross products {} and {}",
        print.member(t),
        print.member(s),
        zero(b[0]),
        zero(b[1])
    );
    Finding::new(rule, level, text)
        .members(member_ids([s, t]))
        .value("quadrance of the shared piece", print.area(&shared))
        .formula(Law::Orientation, line)
}

fn joint_on_member(frame: &Frame, joint: usize, member: usize, rule: Rule, level: Level) -> Finding {
    let [a, b] = frame.ends[member];
    let print = &frame.print;
    let (from_a, from_b) = (frame.lattice.displacement([a, joint]), frame.lattice.displacement([b, joint]));
    let near = if from_a.quadrance() <= from_b.quadrance() { a } else { b };
    let quadrance = from_a.quadrance().min(from_b.quadrance());
    let text = format!(
        "{} stands on {}, {} from {}, and is not part of it",
        print.joint(joint),
        print.member(member),
        print.root(&quadrance),
        print.joint(near)
    );
    debug_assert!(is_between(frame.lattice.point(joint), frame.lattice.point(a), frame.lattice.point(b)), "inside");
    let [q1, q2, q3] = [from_a.quadrance(), from_b.quadrance(), frame.lattice.displacement([a, b]).quadrance()];
    let line = format!("({q1} + {q2} + {q3})² = 2({q1}² + {q2}² + {q3}²)");
    Finding::new(rule, level, text)
        .joints(joint_ids([joint]))
        .members(member_ids([member]))
        .formula(Law::TripleQuad, line)
        .mend(format!("Divide {} at {}", print.member(member), print.joint(joint)), Some(divided(frame, joint, member)))
}

/// The edit that ends a member at a joint and goes on with a new one.
fn divided(frame: &Frame, joint: usize, member: usize) -> Edit {
    let old = &frame.truss.members[member];
    let at = JointId::new(joint);
    let rest = Member { mark: frame.free_member_mark(old.role).into(), from: at, to: old.to, role: old.role };
    Edit::All(vec![Edit::SetMember(MemberId::new(member), Member { to: at, ..old.clone() }), Edit::AddMember(rest)])
}
