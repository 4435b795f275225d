//! Relations that figures declare between set joints: in line, square, parallel, equal. They hold exactly or fail.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids};
use super::{Doubts, deviation};
use crate::exact::{Orientation, Rational, Vector};
use crate::truss::{Edit, FigureId, FigureKind, JointId};
use num_traits::Zero;

/// How many relations between set joints are declared, and a fault for each that fails.
pub(crate) fn relations(frame: &Frame, doubts: &mut Doubts) -> (usize, Vec<Finding>) {
    let mut tallies = [Rule::NotStraight, Rule::NotSquare, Rule::NotParallel, Rule::NotEqual]
        .map(|rule| Tally::new(rule, Level::Fault, frame.limits));
    let mut asked = 0;
    for (index, figure) in frame.truss.figures.iter().enumerate() {
        let joints: Vec<usize> = figure.kind.joints().into_iter().map(JointId::index).collect();
        if !joints.iter().all(|&joint| frame.is_set(joint)) {
            continue;
        }
        let (kind, check): (usize, Check) = match &figure.kind {
            FigureKind::InLine { .. } => (0, in_line),
            FigureKind::Square { .. } => (1, square),
            FigureKind::Parallel { .. } => (2, parallel),
            FigureKind::Equal { .. } => (3, equal),
            _ => continue,
        };
        asked += 1;
        if let Some((finding, off)) = check(frame, &joints) {
            doubts.mark(off);
            let text = format!("{} {}", figure.mark, finding.text);
            tallies[kind].add(|_, _| {
                let finding = Finding { text, ..finding };
                finding.joints(joint_ids(joints)).figures([FigureId::new(index)])
            });
        }
    }
    (asked, tallies.into_iter().flat_map(Tally::finish).collect())
}

/// What a relation among these joints finds when it fails, and the joints that it puts in question.
type Check = fn(&Frame, &[usize]) -> Option<(Finding, Vec<usize>)>;

fn in_line(frame: &Frame, joints: &[usize]) -> Option<(Finding, Vec<usize>)> {
    let base = best_line(frame, joints)?;
    let off = off_line(frame, base, joints);
    let &worst = off.iter().max_by(|&&a, &&b| frame.lattice.compare_offsets(base, a, b))?;
    let print = &frame.print;
    let [first, last] = base;
    let text = format!(
        "says that {} are in line, but {} is {} off the line through {} and {}",
        print.joints(joints.iter().copied()),
        print.joint(worst),
        deviation(frame, &offset(frame, base, worst)),
        print.joint(first),
        print.joint(last)
    );
    let finding = Finding::new(Rule::NotStraight, Level::Fault, text);
    let finding = triple_quad(frame, finding, [first, worst, last]);
    Some((with_move_onto(frame, finding, base, &off), off))
}

/// The line through two of the joints that most of them lie on: of the outer ones and the first two and last two.
pub(crate) fn best_line(frame: &Frame, joints: &[usize]) -> Option<[usize; 2]> {
    let n = joints.len();
    if n < 2 {
        return None;
    }
    let tried =
        [[0, n - 1], [0, 1], [n - 2, n - 1], [1.min(n - 1), n - 1], [0, n - 2]].map(|pair| pair.map(|i| joints[i]));
    let lines = tried.into_iter().filter(|[a, b]| frame.rank[*a] != frame.rank[*b]);
    lines.min_by_key(|&line| off_line(frame, line, joints).len())
}

/// The joints that do not lie on a line.
pub(crate) fn off_line(frame: &Frame, [a, b]: [usize; 2], joints: &[usize]) -> Vec<usize> {
    joints.iter().copied().filter(|&joint| frame.lattice.orientation(a, b, joint) != Orientation::On).collect()
}

/// The squared distance of a joint from a line.
pub(crate) fn offset(frame: &Frame, [a, b]: [usize; 2], joint: usize) -> Rational {
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([a, joint]));
    let cross = v.cross(&w);
    &cross * &cross / v.quadrance()
}

/// The triple quad formula of three joints, with both sides worked out.
pub(crate) fn triple_quad(frame: &Frame, finding: Finding, [a, b, c]: [usize; 3]) -> Finding {
    let [q1, q2, q3] = [[a, b], [b, c], [a, c]].map(|pair| frame.lattice.quadrance(pair));
    let sum = &q1 + &q2 + &q3;
    let right = crate::exact::whole(2) * (&q1 * &q1 + &q2 * &q2 + &q3 * &q3);
    let left = &sum * &sum;
    let sign = if left == right { "=" } else { "≠" };
    finding
        .formula(Law::TripleQuad, format!("({q1} + {q2} + {q3})² = {left} {sign} {right} = 2({q1}² + {q2}² + {q3}²)"))
}

/// The same, with the edit that moves the only joint that is off onto the line.
pub(crate) fn with_move_onto(frame: &Frame, finding: Finding, [a, b]: [usize; 2], off: &[usize]) -> Finding {
    let &[joint] = off else { return finding };
    if !frame.is_set(joint) {
        return finding;
    }
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([a, joint]));
    let foot = frame.lattice.point(a) + &v.scaled(&(v.dot(&w) / v.quadrance()));
    let text = format!("Move {} onto the line", frame.print.joint(joint));
    finding.mend(text, Some(Edit::MoveJoints(vec![(JointId::new(joint), foot)])))
}

fn no_line(rule: Rule, frame: &Frame, [a, b]: [usize; 2]) -> (Finding, Vec<usize>) {
    let text = format!("has no line to go by: {} stand in one place", frame.print.joints([a, b]));
    (Finding::new(rule, Level::Fault, text), Vec::new())
}

fn square(frame: &Frame, joints: &[usize]) -> Option<(Finding, Vec<usize>)> {
    let &[at, a, b] = joints else { return None };
    if let Some(pair) = [[at, a], [at, b]].into_iter().find(|[p, q]| frame.rank[*p] == frame.rank[*q]) {
        return Some(no_line(Rule::NotSquare, frame, pair));
    }
    let (v, w) = (frame.lattice.displacement([at, a]), frame.lattice.displacement([at, b]));
    let dot = v.dot(&w);
    if dot.is_zero() {
        return None;
    }
    let off = &dot * &dot / v.quadrance().max(w.quadrance());
    let print = &frame.print;
    let text = format!(
        "says that {} is square to {a} and {b}, but it is {} off",
        print.joint(at),
        deviation(frame, &off),
        a = print.joint(a),
        b = print.joint(b)
    );
    let finding = pythagoras(frame, Finding::new(Rule::NotSquare, Level::Fault, text), [at, a, b]);
    let foot = frame.lattice.point(b) + &v.scaled(&(-dot / v.quadrance()));
    let mend = format!("Move {} to where the corner is square.", print.joint(b));
    Some((finding.mend(mend, Some(Edit::MoveJoints(vec![(JointId::new(b), foot)]))), vec![at, a, b]))
}

/// Pythagoras for a corner, with both sides worked out.
pub(crate) fn pythagoras(frame: &Frame, finding: Finding, [at, a, b]: [usize; 3]) -> Finding {
    let [q1, q2, q3] = [[at, a], [at, b], [a, b]].map(|pair| frame.lattice.quadrance(pair));
    let sum = &q1 + &q2;
    let sign = if sum == q3 { "=" } else { "≠" };
    finding.formula(Law::Pythagoras, format!("{q1} + {q2} = {sum} {sign} {q3}"))
}

fn parallel(frame: &Frame, joints: &[usize]) -> Option<(Finding, Vec<usize>)> {
    let &[a, b, c, d] = joints else { return None };
    if let Some(pair) = [[a, b], [c, d]].into_iter().find(|[p, q]| frame.rank[*p] == frame.rank[*q]) {
        return Some(no_line(Rule::NotParallel, frame, pair));
    }
    let (v, w) = (frame.lattice.displacement([a, b]), frame.lattice.displacement([c, d]));
    let cross = v.cross(&w);
    if cross.is_zero() {
        return None;
    }
    let print = &frame.print;
    let text = format!(
        "says that {}-{} and {}-{} are parallel, but they part by {} over the shorter",
        print.joint(a),
        print.joint(b),
        print.joint(c),
        print.joint(d),
        deviation(frame, &(&cross * &cross / v.quadrance().max(w.quadrance())))
    );
    let finding = spread_of(Finding::new(Rule::NotParallel, Level::Fault, text), &v, &w);
    let end = frame.lattice.point(c) + &v.scaled(&(v.dot(&w) / v.quadrance()));
    let mend = format!("Move {} to where the lines are parallel.", print.joint(d));
    Some((finding.mend(mend, Some(Edit::MoveJoints(vec![(JointId::new(d), end)]))), vec![a, b, c, d]))
}

/// The spread of two directions, with the numbers in it.
pub(crate) fn spread_of(finding: Finding, v: &Vector, w: &Vector) -> Finding {
    let (cross, q1, q2) = (v.cross(w), v.quadrance(), w.quadrance());
    let spread = &cross * &cross / (&q1 * &q2);
    finding.formula(Law::Spread, format!("({cross})² / ({q1} × {q2}) = {spread}"))
}

fn equal(frame: &Frame, joints: &[usize]) -> Option<(Finding, Vec<usize>)> {
    let &[a, b, c, d] = joints else { return None };
    let [q1, q2] = [[a, b], [c, d]].map(|pair| frame.lattice.quadrance(pair));
    if q1 == q2 {
        return None;
    }
    let print = &frame.print;
    let (first, second) = (print.root(&q1), print.root(&q2));
    let although = if first == second { ", although both print alike" } else { "" };
    let text = format!(
        "says that {}-{} and {}-{} are equal, but they are {first} and {second}{although}",
        print.joint(a),
        print.joint(b),
        print.joint(c),
        print.joint(d)
    );
    let finding = Finding::new(Rule::NotEqual, Level::Fault, text);
    Some((finding.formula(Law::Quadrance, format!("{q1} ≠ {q2}")), vec![a, b, c, d]))
}
