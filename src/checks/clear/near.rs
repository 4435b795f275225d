//! Joints that almost touch a member or another joint.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids};
use super::boxes::Boxes;
use crate::exact::Rational;
use crate::exact::order;
use crate::truss::{Edit, JointId};
use num_traits::Signed;
use std::cmp::Ordering;
use std::collections::HashMap;

/// Pairs that may be compared for each joint and member of the truss before the search is given up.
const PAIRS_EACH: usize = 64;

/// An exact distance counts as so many comparisons.
const EXACT: usize = 64;

/// Joints nearer than the near distance to a member or a joint, but not on it.
pub(crate) fn nearly_meeting(frame: &Frame, boxes: &Boxes) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NearlyMeeting, Level::Caution, frame.limits);
    let mut left = PAIRS_EACH * (frame.joint_count() + frame.ends.len()).max(1);
    near_joints(frame, &mut tally, &mut left);
    near_members(frame, boxes, &mut tally, &mut left);
    if left == 0 {
        tally.give_up();
    }
    tally.finish()
}

fn near_joints(frame: &Frame, tally: &mut Tally, left: &mut usize) {
    let size = frame.reach.steps().max(1);
    let cell = |joint: usize| frame.lattice.coarse(joint).map(|c| c.div_euclid(size));
    let mut cells: HashMap<[i64; 2], Vec<usize>> = HashMap::new();
    let mut last_rank = None;
    for &joint in &frame.by_rank {
        let joint = joint as usize;
        if last_rank.replace(frame.rank[joint]) == Some(frame.rank[joint]) {
            continue;
        }
        let [x, y] = cell(joint);
        let around = (-1..=1).flat_map(|dx| (-1..=1).map(move |dy| [x + dx, y + dy]));
        for &other in around.filter_map(|key| cells.get(&key)).flatten() {
            if *left == 0 || tally.is_full() {
                return;
            }
            *left = left.saturating_sub(EXACT / 8);
            let quadrance = frame.lattice.displacement([other, joint]).quadrance();
            if frame.is_near(&quadrance, &[joint, other]) {
                tally.add(|rule, level| two_joints(frame, other.min(joint), other.max(joint), &quadrance, rule, level));
            }
        }
        cells.entry([x, y]).or_default().push(joint);
    }
}

fn two_joints(frame: &Frame, a: usize, b: usize, quadrance: &Rational, rule: Rule, level: Level) -> Finding {
    let v = frame.lattice.displacement([a, b]);
    let text = format!(
        "{} and {} stand only {} apart",
        frame.print.joint(a),
        frame.print.joint(b),
        frame.print.root(quadrance)
    );
    Finding::new(rule, level, text)
        .joints(joint_ids([a, b]))
        .formula(Law::Quadrance, format!("({})² + ({})² = {quadrance}", v.x, v.y))
}

fn near_members(frame: &Frame, boxes: &Boxes, tally: &mut Tally, left: &mut usize) {
    let reach = frame.reach.steps();
    for joint in 0..frame.joint_count() {
        let [x, y] = frame.lattice.coarse(joint);
        let mut near: Vec<u32> = Vec::new();
        boxes.touching([x - reach, y - reach, x + reach, y + reach], |member| {
            let is_near = is_beside(frame, joint, member as usize);
            *left = left.saturating_sub(if is_near { EXACT } else { 1 });
            if is_near {
                near.push(member);
            }
            *left > 0
        });
        order::sort(&mut near);
        for member in near {
            if let Some(square) = offset_inside(frame, joint, member as usize)
                && frame.is_near(&square, &with_ends(frame, joint, member as usize))
            {
                tally.add(|rule, level| joint_and_member(frame, joint, member as usize, &square, rule, level));
            }
        }
        if *left == 0 || tally.is_full() {
            return;
        }
    }
}

/// True when a joint may be near a member, but is neither at its end nor on its line. Quick.
fn is_beside(frame: &Frame, joint: usize, member: usize) -> bool {
    let [a, b] = frame.ends[member];
    !is_part(frame, joint, member)
        && !frame.lattice.is_beyond(joint, [a, b], &frame.reach)
        && frame.lattice.turn([a, b], [a, joint]) != Ordering::Equal
}

fn with_ends(frame: &Frame, joint: usize, member: usize) -> [usize; 3] {
    let [a, b] = frame.ends[member];
    [joint, a, b]
}

/// True when an end of the member stands where the joint stands.
fn is_part(frame: &Frame, joint: usize, member: usize) -> bool {
    frame.ends[member].iter().any(|&end| frame.rank[end] == frame.rank[joint])
}

/// The squared distance of a joint from a member's line, when its foot falls inside the member.
fn offset_inside(frame: &Frame, joint: usize, member: usize) -> Option<Rational> {
    let [a, b] = frame.ends[member];
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([a, joint]));
    let (along, whole) = (v.dot(&w), v.quadrance());
    let cross = v.cross(&w);
    (along.is_positive() && along < whole).then(|| &cross * &cross / whole)
}

fn joint_and_member(
    frame: &Frame,
    joint: usize,
    member: usize,
    square: &Rational,
    rule: Rule,
    level: Level,
) -> Finding {
    let [a, b] = frame.ends[member];
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([a, joint]));
    let (mark, member_mark) = (frame.print.joint(joint), frame.print.member(member));
    let text = format!("{mark} stands {} beside {member_mark}: it almost touches", frame.print.root(square));
    let cross = v.cross(&w);
    let formula = format!("offset² = ({cross})² / {} = {square}", v.quadrance());
    let foot = frame.lattice.point(a) + &v.scaled(&(v.dot(&w) / v.quadrance()));
    let finding = Finding::new(rule, level, text)
        .joints(joint_ids([joint]))
        .members(member_ids([member]))
        .formula(Law::Quadrance, formula);
    if !frame.is_set(joint) {
        return finding;
    }
    let edit = Edit::MoveJoints(vec![(JointId::new(joint), foot)]);
    finding.mend(format!("Move {mark} onto {member_mark}, or farther from it."), Some(edit))
}
