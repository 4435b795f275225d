//! Chains that are almost straight, level, plumb or parallel.

use super::super::chains::Chain;
use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids};
use super::declared::{best_line, off_line, offset, spread_of, triple_quad, with_move_onto};
use super::{Doubts, deviation, is_long};
use crate::exact::order;
use crate::exact::{Point, Rational};
use crate::truss::{Edit, JointId, Role};
use num_traits::{Signed, Zero};
use std::cmp::Ordering;

/// Chains all of whose joints are near one line, but not all on it: one finding for each.
pub(crate) fn nearly_straight(frame: &Frame, chains: &[Chain], doubts: &mut Doubts) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NearlyStraight, Level::Caution, frame.limits);
    for chain in chains.iter().filter(|chain| chain.members.len() > 1 && !chain.is_straight) {
        let Some(base) = base_line(frame, chain) else { continue };
        let off = off_line(frame, base, &chain.joints);
        if off.is_empty() || doubts.all(&off) || off.iter().any(|&j| frame.lattice.is_beyond(j, base, &frame.reach)) {
            continue;
        }
        let means = |&&joint: &&usize| frame.is_near_or_set(|| offset(frame, base, joint), &[joint, base[0], base[1]]);
        let farther = |&&a: &&usize, &&b: &&usize| frame.lattice.compare_offsets(base, a, b);
        let Some(&worst) = off.iter().filter(means).max_by(farther) else { continue };
        let square = offset(frame, base, worst);
        doubts.mark(off.iter().copied());
        tally.add(|rule, level| straight(frame, chain, base, &off, (worst, &square), rule, level));
    }
    tally.finish()
}

/// The line that a chain is meant to follow: through the two joints that most others lie in line with, or its ends where
/// no three are in line.
fn base_line(frame: &Frame, chain: &Chain) -> Option<[usize; 2]> {
    let ends = chain.ends();
    let best = best_line(frame, &chain.joints)?;
    let on_best = chain.joints.len() - off_line(frame, best, &chain.joints).len();
    if on_best > 2 || frame.rank[ends[0]] == frame.rank[ends[1]] { Some(best) } else { Some(ends) }
}

fn straight(
    frame: &Frame,
    chain: &Chain,
    base: [usize; 2],
    off: &[usize],
    (worst, square): (usize, &Rational),
    rule: Rule,
    level: Level,
) -> Finding {
    let print = &frame.print;
    let start = chain.joints[0];
    let along = print.root(&frame.lattice.quadrance([start, worst]));
    let others = match off.len() {
        1 => String::new(),
        _ => format!(" ({} are off)", print.joints(off.iter().copied())),
    };
    let place = if worst == start { String::new() } else { format!(", {along} from {}", print.joint(start)) };
    let text = format!(
        "{} is almost straight: {} is {} off its line{place}{others}",
        chain.name(frame),
        print.joint(worst),
        deviation(frame, square)
    );
    let finding = Finding::new(rule, level, text)
        .joints(joint_ids(off.iter().copied().take(frame.limits.most_findings)))
        .members(member_ids(chain.members.iter().copied().take(frame.limits.most_findings)))
        .value("offset²", print.area(square));
    let finding = triple_quad(frame, finding, [base[0], worst, base[1]]);
    with_move_onto(frame, finding, base, off)
}

/// Chains whose line rises or runs by almost nothing.
pub(crate) fn nearly_level_or_plumb(frame: &Frame, chains: &[Chain], doubts: &mut Doubts) -> Vec<Finding> {
    let mut level_tally = Tally::new(Rule::NearlyLevel, Level::Caution, frame.limits);
    let mut plumb_tally = Tally::new(Rule::NearlyPlumb, Level::Caution, frame.limits);
    for chain in chains {
        let Some(base) = base_line(frame, chain) else { continue };
        let [x, y] = frame.lattice.coarse_along(base).map(|step| step.unsigned_abs());
        let steps = frame.reach.steps().unsigned_abs() + 1;
        // Quick: one of the two is near, and the other is not.
        if (x > steps) == (y > steps) || doubts.any(&base) {
            continue;
        }
        let v = frame.lattice.displacement(base);
        let (tally, rest) = if y <= steps { (&mut level_tally, &v.y) } else { (&mut plumb_tally, &v.x) };
        if is_long(frame, base) && frame.is_near(&(rest * rest), &base) {
            doubts.mark(base);
            tally.add(|rule, level| level_or_plumb(frame, chain, base, rule, level));
        }
    }
    [level_tally, plumb_tally].into_iter().flat_map(Tally::finish).collect()
}

fn level_or_plumb(frame: &Frame, chain: &Chain, [a, b]: [usize; 2], rule: Rule, level: Level) -> Finding {
    let print = &frame.print;
    let v = frame.lattice.displacement([a, b]);
    let (word, rest, what) = match rule {
        Rule::NearlyLevel => ("level", &v.y, "rises"),
        _ => ("plumb", &v.x, "leans"),
    };
    let what = if rule == Rule::NearlyLevel && rest.is_negative() { "falls" } else { what };
    let text = format!(
        "{} is almost {word}: it {what} {} from {} to {}",
        chain.name(frame),
        deviation(frame, &(rest * rest)),
        print.joint(a),
        print.joint(b)
    );
    let finding = Finding::new(rule, level, text)
        .joints(joint_ids([a, b]))
        .members(member_ids(chain.members.iter().copied().take(frame.limits.most_findings)))
        .value("run", &v.x)
        .value("rise", &v.y)
        .formula(Law::Quadrance, format!("({})² + ({})² = {}", v.x, v.y, v.quadrance()));
    if chain.members.len() > 1 || !frame.is_set(a) || !frame.is_set(b) {
        return finding;
    }
    let (p, q) = (frame.lattice.point(a), frame.lattice.point(b));
    let to = if rule == Rule::NearlyLevel {
        Point { x: q.x.clone(), y: p.y.clone() }
    } else {
        Point { x: p.x.clone(), y: q.y.clone() }
    };
    let text = format!("Move {} so that it is {word}", print.joint(b));
    finding.mend(text, Some(Edit::MoveJoints(vec![(JointId::new(b), to)])))
}

/// Posts, and chords, that are almost parallel to others.
///
/// Silent where a drafter means nothing: a line is only told against two or more that are exactly parallel; a chord of
/// two members or more against another one, too.
pub(crate) fn nearly_parallel(frame: &Frame, chains: &[Chain], doubts: &mut Doubts) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NearlyParallel, Level::Caution, frame.limits);
    let is_chord = |role: Role| matches!(role, Role::TopChord | Role::BottomChord);
    for posts in [true, false] {
        let of_kind = |chain: &&Chain| {
            let ends = chain.ends();
            let fits = if posts { chain.role == Role::Post } else { is_chord(chain.role) };
            fits && frame.rank[ends[0]] != frame.rank[ends[1]]
        };
        let mut lines: Vec<(&Chain, [usize; 2])> =
            chains.iter().filter(of_kind).map(|chain| (chain, rightwards(frame, chain.ends()))).collect();
        order::sort_by(&mut lines, |s, t| frame.lattice.turn(t.1, s.1));
        let families: Vec<&[(&Chain, [usize; 2])]> =
            lines.chunk_by(|s, t| frame.lattice.turn(s.1, t.1) == Ordering::Equal).collect();
        for i in 0..families.len() {
            let [first, second] = [families[i], families[(i + 1) % families.len()]];
            let (odd, family) = if first.len() <= second.len() { (first, second) } else { (second, first) };
            if odd.len() == family.len() && (posts || odd[0].0.members.len() < 2 || family[0].0.members.len() < 2) {
                continue;
            }
            odd.iter().for_each(|line| one_parallel(frame, line.0, family[0].0, doubts, &mut tally));
        }
    }
    tally.finish()
}

/// The ends of a line so that it goes to the right, or straight up.
fn rightwards(frame: &Frame, [a, b]: [usize; 2]) -> [usize; 2] {
    if frame.rank[a] < frame.rank[b] { [a, b] } else { [b, a] }
}

fn one_parallel(frame: &Frame, odd: &Chain, other: &Chain, doubts: &mut Doubts, tally: &mut Tally) {
    let pairs = [odd.ends(), other.ends()];
    let joints = pairs.concat();
    if doubts.any(&joints) {
        return;
    }
    let [v, w] = pairs.map(|pair| frame.lattice.displacement(pair));
    let cross = v.cross(&w);
    let square = &cross * &cross / v.quadrance().max(w.quadrance());
    if square.is_zero() || !frame.is_near(&square, &joints) || !pairs.iter().all(|&pair| is_long(frame, pair)) {
        return;
    }
    doubts.mark(odd.ends());
    tally.add(|rule, level| {
        let (name, than) = (odd.name(frame), other.name(frame));
        let off = deviation(frame, &square);
        let text = format!("{name} is almost parallel to {than}: it is {off} off over its length");
        let members = odd.members.iter().chain(&other.members).copied().take(frame.limits.most_findings);
        spread_of(Finding::new(rule, level, text).members(member_ids(members)), &v, &w)
    });
}
