//! Joints in one place, members without a length, members that are there twice.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids};
use crate::exact::order;
use crate::truss::{Edit, MemberId, Selection};

/// Joints that stand in one place: one finding for each such place.
pub(crate) fn same_place(frame: &Frame) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::SamePlace, Level::Fault, frame.limits);
    for together in frame.by_rank.chunk_by(|&a, &b| frame.rank[a as usize] == frame.rank[b as usize]) {
        let joints = || together.iter().take(frame.limits.most_findings).map(|&joint| joint as usize);
        if together.len() < 2 || frame.floor(&joints().collect::<Vec<_>>()).is_none() {
            continue;
        }
        tally.add(|rule, level| {
            let text = format!("{} stand in one place", frame.print.joints(joints()));
            let place = frame.print.place(frame.lattice.point(together[0] as usize));
            Finding::new(rule, level, text).joints(joint_ids(joints())).value("place", place)
        });
    }
    tally.finish()
}

/// Members whose ends stand in one place.
pub(crate) fn no_length(frame: &Frame) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NoLength, Level::Fault, frame.limits);
    for member in (0..frame.ends.len()).filter(|&member| frame.has_no_length(member)) {
        let [a, b] = frame.ends[member];
        tally.add(|rule, level| {
            let (mark, ends) = (frame.print.member(member), frame.print.joints([a, b]));
            let text = if a == b {
                format!("{mark} begins and ends at {}", frame.print.joint(a))
            } else {
                format!("{mark} has no length: {ends} stand in one place")
            };
            Finding::new(rule, level, text)
                .members(member_ids([member]))
                .joints(joint_ids(if a == b { vec![a] } else { vec![a, b] }))
                .formula(Law::Quadrance, "0² + 0² = 0")
        });
    }
    tally.finish()
}

/// For each member whether it is looked at further: it has a length, and is the first between its joints. And a finding for
/// every pair of joints that has more than one.
pub(crate) fn doubled(frame: &Frame) -> (Vec<bool>, Vec<Finding>) {
    let mut is_first: Vec<bool> = (0..frame.ends.len()).map(|member| !frame.has_no_length(member)).collect();
    let mut groups: Vec<Vec<u32>> = Vec::new();
    for (joint, run) in frame.same_way() {
        let mut run: Vec<(u32, u32)> = run.iter().map(|spoke| (spoke.far, spoke.member)).collect();
        order::sort(&mut run);
        let pairs = run.chunk_by(|a, b| a.0 == b.0).filter(|group| group.len() > 1 && group[0].0 as usize > joint);
        groups.extend(pairs.map(|group| group.iter().map(|&(_, member)| member).collect::<Vec<u32>>()));
    }
    order::sort(&mut groups);
    let mut tally = Tally::new(Rule::Doubled, Level::Fault, frame.limits);
    for group in &groups {
        group[1..].iter().for_each(|&member| is_first[member as usize] = false);
        tally.add(|rule, level| doubled_finding(frame, group, rule, level));
    }
    (is_first, tally.finish())
}

fn doubled_finding(frame: &Frame, group: &[u32], rule: Rule, level: Level) -> Finding {
    let members = || group.iter().take(frame.limits.most_findings).map(|&member| member as usize);
    let [a, b] = frame.ends[group[0] as usize];
    let text =
        format!("{} all join {} and {}", frame.print.members(members()), frame.print.joint(a), frame.print.joint(b));
    let text = if group.len() == 2 { text.replace(" all join ", " both join ") } else { text };
    let spare: Vec<MemberId> = group[1..].iter().map(|&member| MemberId(member)).collect();
    let edit = Edit::Remove(Selection { members: spare, ..Selection::default() });
    Finding::new(rule, level, text)
        .members(member_ids(members()))
        .joints(joint_ids([a, b]))
        .mend(format!("Keep {} only.", frame.print.member(group[0] as usize)), Some(edit))
}
