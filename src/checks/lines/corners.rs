//! Corners that are almost square.

use super::super::clear::neighbours;
use super::super::findings::{Finding, Level, Rule};
use super::super::frame::{Frame, Spoke, Tally, joint_ids, member_ids};
use super::declared::pythagoras;
use super::{Doubts, deviation, is_long};
use std::cmp::Ordering;

/// Neighbours at a joint that are almost square to each other, where no other finding explains it.
pub(crate) fn nearly_square(frame: &Frame, doubts: &Doubts) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NearlySquare, Level::Caution, frame.limits);
    for at in 0..frame.joint_count() {
        for (s, t) in neighbours(frame, at) {
            let (a, b) = (s.far as usize, t.far as usize);
            if frame.lattice.facing([at, a], [at, b]) != Ordering::Equal
                && !frame.lattice.is_far_from_square(at, a, b, &frame.reach)
                && !doubts.any(&[at, a, b])
            {
                one_corner(frame, at, s, t, &mut tally);
            }
        }
    }
    tally.finish()
}

fn one_corner(frame: &Frame, at: usize, s: Spoke, t: Spoke, tally: &mut Tally) {
    let (a, b) = (s.far as usize, t.far as usize);
    let square = || {
        let [v, w] = [[at, a], [at, b]].map(|pair| frame.lattice.displacement(pair));
        let dot = v.dot(&w);
        &dot * &dot / v.quadrance().max(w.quadrance())
    };
    if !frame.is_near_or_set(square, &[at, a, b]) || ![[at, a], [at, b]].iter().all(|&pair| is_long(frame, pair)) {
        return;
    }
    let members = [s.member as usize, t.member as usize];
    tally.add(|rule, level| {
        let text = format!(
            "{} are almost square at {}: {} off at the end of the shorter",
            frame.print.members(members),
            frame.print.joint(at),
            deviation(frame, &square())
        );
        let finding = Finding::new(rule, level, text).joints(joint_ids([at])).members(member_ids(members));
        pythagoras(frame, finding, [at, a, b])
    });
}
