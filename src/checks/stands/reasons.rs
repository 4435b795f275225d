//! Why it moves, in the classical cases, and where a member could go.

use super::super::clear::properly_cross;
use super::super::frame::Frame;
use super::judge::Judged;
use super::lift::Velocities;
use super::matrix::Matrix;
use crate::exact::order;
use crate::exact::{Orientation, Point, Rational, whole};
use num_traits::{One, Zero};
use std::cmp::Ordering;
use std::collections::{BTreeMap, BTreeSet};

/// Joints and pairs looked at for a place for a member.
const LOOKED_AT: usize = 64;
/// Of these the shortest are compared with all members.
const COMPARED: usize = 16;

/// Why a joint is loose in a motion, where it is by itself.
pub(crate) fn loose_reason(frame: &Frame, matrix: &Matrix, velocities: &Velocities) -> Option<String> {
    let moving = matrix.joints.iter().enumerate().filter(|(pair, _)| velocities.moves(*pair));
    for joint in moving.map(|(_, &joint)| joint as usize) {
        if frame.is_supported(joint) {
            continue;
        }
        let around = frame.around(joint);
        let mark = frame.print.joint(joint);
        match around {
            [] => {}
            [only] => {
                return Some(format!("; only {} reaches {mark}: it swings", frame.print.member(only.member as usize)));
            }
            _ if all_in_line(frame, joint) => {
                return Some(format!("; all members at {mark} lie in one line: nothing stops it square to them"));
            }
            _ => {}
        }
    }
    None
}

fn all_in_line(frame: &Frame, joint: usize) -> bool {
    let around = frame.around(joint);
    let along = |k: usize| [joint, around[k].far as usize];
    around.len() > 1 && (1..around.len()).all(|k| frame.lattice.turn(along(0), along(k)) == Ordering::Equal)
}

/// Two joints that a motion brings nearer to each other or parts, so that a member between them would stop it: the
/// shortest that crosses nothing, of those that are looked at.
pub(crate) fn place_for_member(frame: &Frame, matrix: &Matrix, velocities: &Velocities) -> Option<[usize; 2]> {
    let mut column = BTreeMap::new();
    let moving: Vec<usize> = (0..matrix.joints.len()).filter(|&pair| velocities.moves(pair)).take(LOOKED_AT).collect();
    matrix.joints.iter().enumerate().for_each(|(pair, &joint)| _ = column.insert(joint as usize, pair));
    let mut pairs: Vec<[usize; 2]> = Vec::new();
    for a in moving.into_iter().map(|pair| matrix.joints[pair] as usize) {
        let near = frame.around(a).iter().take(LOOKED_AT).map(|spoke| spoke.far as usize);
        let mut beyond: BTreeSet<usize> = BTreeSet::new();
        beyond.extend(near.flat_map(|b| frame.around(b).iter().take(LOOKED_AT)).map(|spoke| spoke.far as usize));
        pairs.extend(
            beyond.into_iter().filter(|&b| would_stop(frame, velocities, &column, a, b)).map(|b| [a.min(b), a.max(b)]),
        );
    }
    order::sort(&mut pairs);
    pairs.dedup();
    order::sort_by(&mut pairs, |&p, &q| frame.lattice.compare_quadrances(p, q));
    pairs.into_iter().take(COMPARED).find(|&pair| is_open(frame, pair))
}

fn would_stop(frame: &Frame, velocities: &Velocities, column: &BTreeMap<usize, usize>, a: usize, b: usize) -> bool {
    if a == b || frame.rank[a] == frame.rank[b] || frame.around(a).iter().any(|spoke| spoke.far as usize == b) {
        return false;
    }
    let (Some(&v), Some(&w)) = (column.get(&a), column.get(&b)) else { return false };
    let (v, w) = (velocities.vector(v), velocities.vector(w));
    let apart = crate::exact::Vector { x: w.x - v.x, y: w.y - v.y };
    !frame.lattice.displacement([a, b]).dot(&apart).is_zero()
}

/// True when a member there would cross no member and pass over no joint.
fn is_open(frame: &Frame, pair: [usize; 2]) -> bool {
    let crosses = (0..frame.ends.len()).any(|member| properly_cross(frame, pair, frame.ends[member]));
    let passes = |joint: usize| {
        frame.rank[joint] != frame.rank[pair[0]]
            && frame.rank[joint] != frame.rank[pair[1]]
            && frame.lattice.orientation(pair[0], pair[1], joint) == Orientation::On
            && frame.lattice.facing([joint, pair[0]], [joint, pair[1]]) == Ordering::Less
    };
    !crosses && !(0..frame.joint_count()).any(passes)
}

/// Why a critical form moves, and the members that make it so.
pub(crate) fn critical_reason(
    frame: &Frame,
    matrix: &Matrix,
    judged: &Judged,
    stressed: &[usize],
) -> (String, Vec<usize>) {
    if let Some(joint) = judged.motion.as_ref().and_then(|velocities| joint_in_line(frame, matrix, velocities)) {
        let members = frame.around(joint).iter().map(|spoke| spoke.member as usize).collect();
        let mark = frame.print.joint(joint);
        return (format!("all members at {mark} lie in one line: nothing stops it square to them"), members);
    }
    if let Some(reason) = nine_members(frame, stressed) {
        return (reason, stressed.to_vec());
    }
    let text = match stressed {
        [] => String::new(),
        members => format!("{} hold each other instead of the joints", frame.print.members(members.iter().copied())),
    };
    (text, stressed.iter().copied().take(frame.limits.most_findings).collect())
}

/// A moving joint without a support whose members all lie in one line.
fn joint_in_line(frame: &Frame, matrix: &Matrix, velocities: &Velocities) -> Option<usize> {
    let moving =
        (0..matrix.joints.len()).filter(|&pair| velocities.moves(pair)).map(|pair| matrix.joints[pair] as usize);
    moving.into_iter().find(|&joint| !frame.is_supported(joint) && all_in_line(frame, joint))
}

/// The two frames of six joints with nine members, three at each joint: the prism, and every one of three joined to
/// every one of three others (K3,3). Their critical forms are classical: three connecting members through one point or
/// parallel; six joints on a conic (Bolker and Roth 1980).
fn nine_members(frame: &Frame, members: &[usize]) -> Option<String> {
    let mut near: BTreeMap<usize, Vec<usize>> = BTreeMap::new();
    for &member in members.iter().take(10) {
        let [a, b] = frame.ends[member];
        near.entry(a).or_default().push(b);
        near.entry(b).or_default().push(a);
    }
    if members.len() != 9 || near.len() != 6 || near.values().any(|list| list.len() != 3) {
        return None;
    }
    let joints: Vec<usize> = near.keys().copied().collect();
    let joined = |a: usize, b: usize| near.get(&a).is_some_and(|list| list.contains(&b));
    let triangle: Vec<usize> =
        joints.iter().copied().filter(|&a| near[&a].iter().any(|&b| near[&a].iter().any(|&c| joined(b, c)))).collect();
    match triangle.len() {
        0 => on_conic(frame, &joints),
        6 => connecting(frame, &joints, &joined),
        _ => None,
    }
}

fn on_conic(frame: &Frame, joints: &[usize]) -> Option<String> {
    let rows = joints.iter().map(|&joint| {
        let Point { x, y } = frame.lattice.point(joint);
        vec![x * x, x * y, y * y, x.clone(), y.clone(), Rational::one()]
    });
    let is_on = determinant(rows.collect()).is_zero();
    is_on.then(|| format!("{} lie on one conic", frame.print.joints(joints.iter().copied())))
}

/// The three members that connect the two triangles of a prism, and whether their lines meet in a point.
fn connecting(frame: &Frame, joints: &[usize], joined: &dyn Fn(usize, usize) -> bool) -> Option<String> {
    let in_triangle = |a: usize, b: usize| joints.iter().any(|&c| joined(a, c) && joined(b, c));
    let mut lines: Vec<[usize; 2]> = Vec::new();
    for (i, &a) in joints.iter().enumerate() {
        lines.extend(joints[i + 1..].iter().filter(|&&b| joined(a, b) && !in_triangle(a, b)).map(|&b| [a, b]));
    }
    let [first, second, third] = lines[..] else { return None };
    let names = lines.iter().map(|&[a, b]| format!("{}-{}", frame.print.joint(a), frame.print.joint(b)));
    let names: Vec<String> = names.collect();
    let names = super::super::print::listed(names.iter().map(String::as_str));
    let (v, w) = (frame.lattice.displacement(first), frame.lattice.displacement(second));
    let turn = v.cross(&w);
    if turn.is_zero() {
        let is_parallel = frame.lattice.turn(first, third) == Ordering::Equal;
        return is_parallel.then(|| format!("the three members that connect two triangles, {names}, are parallel"));
    }
    let part = frame.lattice.displacement([first[0], second[0]]).cross(&w) / turn;
    let point = frame.lattice.point(first[0]) + &v.scaled(&part);
    let from_third = &point - frame.lattice.point(third[0]);
    let meets = frame.lattice.displacement(third).cross(&from_third).is_zero();
    meets.then(|| {
        format!(
            "the lines of the three members that connect two triangles, {names}, meet in {}",
            frame.print.place(&point)
        )
    })
}

/// The determinant of a small square matrix, by elimination.
fn determinant(mut rows: Vec<Vec<Rational>>) -> Rational {
    let mut product = Rational::one();
    for k in 0..rows.len() {
        let Some(pivot) = (k..rows.len()).find(|&i| !rows[i][k].is_zero()) else { return Rational::zero() };
        if pivot != k {
            rows.swap(pivot, k);
            product *= whole(-1);
        }
        product *= rows[k][k].clone();
        let (done, rest) = rows.split_at_mut(k + 1);
        let pivot_row = &done[k];
        for row in rest {
            let factor = &row[k] / &pivot_row[k];
            row.iter_mut().zip(pivot_row).for_each(|(entry, other)| *entry -= &factor * other);
        }
    }
    product
}
