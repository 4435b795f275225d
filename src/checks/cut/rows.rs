//! The rows of the schedule. Equal members are worked out once.

use super::super::answers::{JointRow, MemberRow, NeighbourSpread};
use super::super::clear::neighbours;
use super::super::frame::{Frame, Spoke};
use crate::exact::Rational;
use crate::truss::{JointId, MemberId};
use num_bigint::BigInt;
use std::collections::HashMap;
use std::rc::Rc;

/// One row for each member, and the printed lengths in steps.
pub(crate) fn member_rows(frame: &Frame) -> (Vec<Rc<MemberRow>>, Vec<BigInt>) {
    let mut known: HashMap<[i64; 2], (MemberRow, BigInt)> = HashMap::new();
    let row = |member: usize| {
        let Some(steps) = frame.lattice.steps_along(frame.ends[member]) else {
            let (row, length) = member_row(frame, member);
            return (Rc::new(row), length);
        };
        let (row, length) = known.entry(steps).or_insert_with(|| member_row(frame, member));
        (Rc::new(MemberRow { member: MemberId::new(member), ..row.clone() }), length.clone())
    };
    (0..frame.ends.len()).map(row).unzip()
}

fn member_row(frame: &Frame, member: usize) -> (MemberRow, BigInt) {
    let v = frame.lattice.displacement(frame.ends[member]);
    let quadrance = frame.lattice.quadrance(frame.ends[member]);
    let root = frame.print.rounded_root(&quadrance);
    let sheet = frame.print.sheet();
    let row = MemberRow {
        member: MemberId::new(member),
        bevel: sheet.bevel(&v.x, &v.y),
        degrees: frame.print.slope(&frame.lattice, frame.ends[member]),
        run: v.x,
        rise: v.y,
        quadrance,
        length: sheet.length(&frame.print.of_steps(&root.steps)),
        exact: root.exact,
    };
    (row, root.steps)
}

/// Two displacements in lattice steps.
type Corner = [[i64; 2]; 2];

/// One row for each joint.
pub(crate) fn joint_rows(frame: &Frame) -> Vec<Rc<JointRow>> {
    let mut known: HashMap<Corner, (Rational, String)> = HashMap::new();
    let mut row = |joint: usize| {
        let spreads = neighbours(frame, joint).map(|(s, t)| neighbour_spread(frame, joint, s, t, &mut known)).collect();
        Rc::new(JointRow { joint: JointId::new(joint), point: frame.lattice.point(joint).clone(), spreads })
    };
    (0..frame.joint_count()).map(&mut row).collect()
}

fn neighbour_spread(
    frame: &Frame,
    at: usize,
    s: Spoke,
    t: Spoke,
    known: &mut HashMap<Corner, (Rational, String)>,
) -> NeighbourSpread {
    let pairs = [[at, s.far as usize], [at, t.far as usize]];
    let (a, b) = (pairs[0][1], pairs[1][1]);
    let work_out = || {
        let spread = frame.lattice.spread(at, a, b).unwrap_or_default();
        (spread, frame.print.degrees_at(&frame.lattice, at, a, b))
    };
    let (spread, degrees) = match pairs.map(|pair| frame.lattice.steps_along(pair)) {
        [Some(v), Some(w)] => known.entry([v, w]).or_insert_with(work_out).clone(),
        _ => work_out(),
    };
    NeighbourSpread { between: [MemberId(s.member), MemberId(t.member)], spread, degrees }
}
