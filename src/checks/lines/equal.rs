//! Members that are almost as long as others of their kind.

use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, member_ids};
use super::Doubts;
use crate::exact::Rational;
use crate::exact::order;
use crate::truss::Role;
use num_traits::Signed;

/// Groups looked at beyond each one.
const LOOKED_AT: usize = 32;

/// Members of one role with the same run and rise, but for their signs.
struct Group {
    role: Role,
    /// Run and rise in coarse steps, not negative.
    steps: [u64; 2],
    members: Vec<usize>,
}

/// Members that differ in run and rise by a near distance from others of their role, which are more: one finding for each
/// kind. Groups that go on changing by small amounts, as along an arch, are meant to.
pub(crate) fn nearly_equal(frame: &Frame, doubts: &Doubts) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::NearlyEqual, Level::Caution, frame.limits);
    let groups = groups(frame);
    let reach = frame.reach.steps().unsigned_abs();
    let near =
        |s: &Group, t: &Group| s.role == t.role && s.steps.iter().zip(t.steps).all(|(&a, b)| a.abs_diff(b) <= reach);
    let mut told = vec![false; groups.len()];
    for family in by_size(&groups) {
        if groups[family].members.len() < 2 || told[family] {
            continue;
        }
        let around = family.saturating_sub(LOOKED_AT)..(family + LOOKED_AT + 1).min(groups.len());
        let close: Vec<usize> = around.filter(|&i| i != family && near(&groups[i], &groups[family])).collect();
        let goes_on = close.iter().any(|&i| {
            let beyond = i.saturating_sub(LOOKED_AT)..(i + LOOKED_AT + 1).min(groups.len());
            beyond.into_iter().any(|k| near(&groups[k], &groups[i]) && !near(&groups[k], &groups[family]))
        });
        if goes_on {
            continue;
        }
        let odd: Vec<usize> =
            close.into_iter().filter(|&i| groups[i].members.len() < groups[family].members.len()).collect();
        odd.iter().for_each(|&i| told[i] = true);
        let members: Vec<usize> = odd.iter().flat_map(|&i| groups[i].members.iter().copied()).collect();
        one_kind(frame, &groups[family], members, doubts, &mut tally);
    }
    tally.finish()
}

/// Groups by role, run and rise.
fn groups(frame: &Frame) -> Vec<Group> {
    let steps = |member: usize| frame.lattice.coarse_along(frame.ends[member]).map(|step| step.unsigned_abs());
    let mut members: Vec<(Role, [u64; 2], usize)> = (0..frame.ends.len())
        .filter(|&member| !frame.has_no_length(member))
        .map(|member| (frame.role(member), steps(member), member))
        .collect();
    order::sort(&mut members);
    members
        .chunk_by(|s, t| (s.0, s.1) == (t.0, t.1))
        .map(|group| Group { role: group[0].0, steps: group[0].1, members: group.iter().map(|&(_, _, m)| m).collect() })
        .collect()
}

/// The groups, greatest first.
fn by_size(groups: &[Group]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..groups.len()).collect();
    order::sort_by_key(&mut order, |&i| (std::cmp::Reverse(groups[i].members.len()), i));
    order
}

fn one_kind(frame: &Frame, family: &Group, odd: Vec<usize>, doubts: &Doubts, tally: &mut Tally) {
    let like = family.members[0];
    let quadrance = |member: usize| frame.lattice.quadrance(frame.ends[member]);
    let odd: Vec<usize> = odd.into_iter().filter(|&m| !doubts.any(&frame.ends[m]) && differs(frame, m, like)).collect();
    let Some(&first) = odd.first() else { return };
    tally.add(|rule, level| {
        let (q1, q2) = (quadrance(first), quadrance(like));
        let (long, other) = (frame.print.root(&q1), frame.print.root(&q2));
        let print_alike = if long == other { ", which print alike" } else { "" };
        let verb = if odd.len() == 1 { "is" } else { "are" };
        let text = format!(
            "{} {verb} almost as long as {}: {long} against {other}{print_alike}",
            frame.print.members(odd.iter().copied()),
            frame.print.members(family.members.iter().copied())
        );
        let told = odd.iter().chain(&family.members).copied().take(frame.limits.most_findings);
        Finding::new(rule, level, text).members(member_ids(told)).formula(Law::Quadrance, format!("{q1} ≠ {q2}"))
    });
}

/// True when the lengths differ, and the runs or rises by something that means anything.
fn differs(frame: &Frame, member: usize, like: usize) -> bool {
    let (pair, other) = (frame.ends[member], frame.ends[like]);
    let (v, w) = (frame.lattice.displacement(pair), frame.lattice.displacement(other));
    let apart = |a: &Rational, b: &Rational| (a.abs() - b.abs()).abs();
    let most = apart(&v.x, &w.x).max(apart(&v.y, &w.y));
    let is_long = v.quadrance() > &frame.near * &frame.near * crate::exact::whole(super::SHORT * super::SHORT);
    is_long && v.quadrance() != w.quadrance() && frame.is_near(&(&most * &most), &[pair, other].concat())
}
