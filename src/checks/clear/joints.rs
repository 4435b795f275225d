//! What leaves a joint: spreads between neighbours, loose ends, unused joints, and parts that are not connected.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Spoke, Tally, joint_ids, member_ids};
use super::super::print::counted;
use crate::exact::Rational;
use std::cmp::Ordering;

/// A spread of less than a right angle between neighbours at a joint.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Gap {
    pub(crate) at: usize,
    pub(crate) first: Spoke,
    pub(crate) second: Spoke,
}

/// The neighbours around a joint, counter-clockwise, each pair once; with two members the pair whose angle is at most
/// half a turn.
pub(crate) fn neighbours<'s>(frame: &'s Frame, joint: usize) -> impl Iterator<Item = (Spoke, Spoke)> + use<'s> {
    let around = frame.around(joint);
    let pairs = match around.len() {
        0 | 1 => 0,
        2 => 1,
        many => many,
    };
    let swapped = around.len() == 2
        && frame.lattice.turn([joint, around[0].far as usize], [joint, around[1].far as usize]) == Ordering::Less;
    (0..pairs).map(move |i| {
        let (first, second) = (around[i], around[(i + 1) % around.len()]);
        if swapped { (second, first) } else { (first, second) }
    })
}

/// Every gap of less than a right angle.
pub(crate) fn acute_gaps(frame: &Frame) -> Vec<Gap> {
    let mut gaps = Vec::new();
    for at in 0..frame.joint_count() {
        let acute = |s: &Spoke, t: &Spoke| {
            let (s, t) = ([at, s.far as usize], [at, t.far as usize]);
            frame.lattice.facing(s, t) == Ordering::Greater && frame.lattice.turn(s, t) == Ordering::Greater
        };
        gaps.extend(neighbours(frame, at).filter(|(s, t)| acute(s, t)).map(|(first, second)| Gap {
            at,
            first,
            second,
        }));
    }
    gaps
}

/// The gap with the least spread, the first of equals.
pub(crate) fn least_spread(frame: &Frame, gaps: &[Gap]) -> Option<(Gap, Rational)> {
    let mut least: Option<(Gap, Rational)> = None;
    for gap in gaps {
        let (at, a, b) = (gap.at, gap.first.far as usize, gap.second.far as usize);
        let is_less = least.as_ref().is_none_or(|(_, s)| frame.lattice.spread_is_below(at, a, b, s));
        if is_less {
            least = frame.lattice.spread(at, a, b).map(|spread| (*gap, spread));
        }
    }
    least
}

/// Neighbours whose spread is below the limit.
pub(crate) fn tight_spreads(frame: &Frame, gaps: &[Gap]) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::TightSpread, Level::Caution, frame.limits);
    let limit = &frame.limits.tight_spread;
    for gap in gaps {
        let (at, a, b) = (gap.at, gap.first.far as usize, gap.second.far as usize);
        if frame.lattice.spread_is_below(at, a, b, limit) && frame.floor(&[at, a, b]).is_some() {
            tally.add(|rule, level| tight_spread(frame, gap, rule, level));
        }
    }
    tally.finish()
}

fn tight_spread(frame: &Frame, gap: &Gap, rule: Rule, level: Level) -> Finding {
    let (at, a, b) = (gap.at, gap.first.far as usize, gap.second.far as usize);
    let (v, w) = (frame.lattice.displacement([at, a]), frame.lattice.displacement([at, b]));
    let spread = frame.lattice.spread(at, a, b).unwrap_or_default();
    let (first, second) = (gap.first.member as usize, gap.second.member as usize);
    let text = format!(
        "{} and {} leave {} at spread {spread} ({}°), less than {}",
        frame.print.member(first),
        frame.print.member(second),
        frame.print.joint(at),
        frame.print.degrees_at(&frame.lattice, at, a, b),
        frame.limits.tight_spread,
    );
    let formula = format!("({})² / ({} × {}) = {spread}", v.cross(&w), v.quadrance(), w.quadrance());
    Finding::new(rule, level, text)
        .joints(joint_ids([at]))
        .members(member_ids([first, second]))
        .formula(Law::Spread, formula)
        .words("The limit is adjustable. A spread of 1/4 is 30°: EN 1993-1-8:2005, 7.1.2(3), quoted from memory.")
}

/// Joints with one member and no support.
pub(crate) fn loose_ends(frame: &Frame) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::LooseEnd, Level::Caution, frame.limits);
    for joint in (0..frame.joint_count()).filter(|&joint| !frame.is_supported(joint)) {
        if let [only] = frame.around(joint) {
            tally.add(|rule, level| {
                let (mark, member) = (frame.print.joint(joint), frame.print.member(only.member as usize));
                Finding::new(rule, level, format!("{mark} is a loose end: only {member} reaches it"))
                    .joints(joint_ids([joint]))
                    .members(member_ids([only.member as usize]))
            });
        }
    }
    tally.finish()
}

/// The part that each joint belongs to, by the first joint of the part; and how many joints have a member.
pub(crate) fn parts(frame: &Frame) -> Vec<usize> {
    let mut first: Vec<usize> = (0..frame.joint_count()).collect();
    for &[a, b] in &frame.ends {
        let (a, b) = (root(&mut first, a), root(&mut first, b));
        first[a.max(b)] = a.min(b);
    }
    (0..frame.joint_count()).map(|joint| root(&mut first, joint)).collect()
}

fn root(first: &mut [usize], mut joint: usize) -> usize {
    while first[joint] != joint {
        first[joint] = first[first[joint]];
        joint = first[joint];
    }
    joint
}

/// Which joints an end of a member stands at.
pub(crate) fn has_member(frame: &Frame) -> Vec<bool> {
    let mut has = vec![false; frame.joint_count()];
    frame.ends.iter().flatten().for_each(|&joint| has[joint] = true);
    has
}

/// Joints without a member, and parts that are not connected with the first.
pub(crate) fn apart_and_unused(frame: &Frame) -> Vec<Finding> {
    let has_member = has_member(frame);
    let parts = parts(frame);
    let mut unused = Tally::new(Rule::UnusedJoint, Level::Note, frame.limits);
    let mut sizes = vec![0usize; frame.joint_count()];
    for joint in 0..frame.joint_count() {
        if has_member[joint] {
            sizes[parts[joint]] += 1;
        } else {
            let mark = frame.print.joint(joint);
            unused.add(|rule, level| {
                Finding::new(rule, level, format!("no member reaches {mark}")).joints(joint_ids([joint]))
            });
        }
    }
    let roots: Vec<usize> = (0..frame.joint_count()).filter(|&joint| sizes[joint] > 0).collect();
    [apart(frame, &parts, &roots, &sizes), unused.finish()].concat()
}

fn apart(frame: &Frame, parts: &[usize], roots: &[usize], sizes: &[usize]) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::Apart, Level::Caution, frame.limits);
    let Some(&main) = roots.iter().max_by_key(|&&r| (sizes[r], std::cmp::Reverse(r))) else { return Vec::new() };
    let mut listed: Vec<Vec<usize>> = vec![Vec::new(); parts.len()];
    for (joint, &part) in parts.iter().enumerate().filter(|&(_, &part)| sizes[part] > 0 && part != main) {
        if listed[part].len() < frame.limits.most_findings {
            listed[part].push(joint);
        }
    }
    for &part in roots.iter().filter(|&&part| part != main) {
        tally.add(|rule, level| {
            let joints = &listed[part];
            let text = format!(
                "{} {} not connected with the rest of the truss",
                frame.print.joints(joints.iter().copied()),
                if sizes[part] == 1 { "is" } else { "are" }
            );
            Finding::new(rule, level, text).joints(joint_ids(joints.iter().copied())).words(format!(
                "{} in this part, {} in the greatest",
                counted(sizes[part], "joint", "joints"),
                sizes[main]
            ))
        });
    }
    tally.finish()
}
