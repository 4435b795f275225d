//! The findings about standing, in words.

use super::super::clear::parts;
use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids};
use super::super::print::{counted, listed};
use super::judge::{Certainty, Judged};
use super::lift::Velocities;
use super::matrix::{Matrix, Source};
use super::reasons::{critical_reason, loose_reason, place_for_member};
use super::supports::{Whole, whole_motion};
use crate::exact::Point;
use crate::truss::{Edit, JointId, Member, Role};

/// Velocities that are written out.
const WRITTEN: usize = 8;

/// Everything there is to tell.
pub(crate) fn findings(frame: &Frame, matrix: &Matrix, judged: &Judged, unknowns: usize) -> Vec<Finding> {
    let has_supports = !frame.truss.supports.is_empty();
    let mut found = Vec::new();
    if matrix.joints.is_empty() {
        return found;
    }
    if !has_supports {
        let text = "no supports are drawn: the truss is judged as a free body";
        found.push(Finding::new(Rule::Supports, Level::Note, text));
    }
    if judged.ways > 0 {
        let parts = if has_supports { part_motions(frame, matrix) } else { Vec::new() };
        let whole: usize = parts.iter().map(|part| part.whole.ways()).sum();
        if judged.is_generic {
            found.push(critical(frame, matrix, judged, unknowns, &parts));
        } else {
            found.extend(support_findings(frame, &parts));
            let within = judged.ways.saturating_sub(whole);
            if within > 0 {
                found.push(mechanism(frame, matrix, judged, unknowns, within));
            }
        }
    }
    found.extend(spare(frame, matrix, judged));
    found
}

/// A part of the truss and how it can move as one piece.
struct PartMotion {
    joints: Vec<usize>,
    supports: Vec<usize>,
    whole: Whole,
}

/// The parts that can move as one piece.
fn part_motions(frame: &Frame, matrix: &Matrix) -> Vec<PartMotion> {
    let part_of = parts(frame);
    let mut all: Vec<PartMotion> = Vec::new();
    let mut place = vec![usize::MAX; part_of.len()];
    for joint in matrix.joints.iter().map(|&joint| joint as usize) {
        let at = &mut place[part_of[joint]];
        if *at == usize::MAX {
            *at = all.len();
            all.push(PartMotion { joints: Vec::new(), supports: Vec::new(), whole: Whole::Held });
        }
        all[*at].joints.push(joint);
    }
    for (index, support) in frame.truss.supports.iter().enumerate() {
        all[place[part_of[support.joint.index()]]].supports.push(index);
    }
    for part in &mut all {
        let can_turn = part.joints.iter().any(|&joint| frame.rank[joint] != frame.rank[part.joints[0]]);
        part.whole = whole_motion(frame, &part.supports, can_turn);
    }
    all.retain(|part| part.whole != Whole::Held);
    all
}

fn support_findings(frame: &Frame, parts: &[PartMotion]) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::Supports, Level::Fault, frame.limits);
    for part in parts {
        tally.add(|rule, level| {
            let supported = part.supports.iter().map(|&index| frame.truss.supports[index].joint.index());
            let joints: Vec<usize> = if part.supports.is_empty() { part.joints.clone() } else { supported.collect() };
            let joints = joints.into_iter().take(frame.limits.most_findings);
            let finding = Finding::new(rule, level, whole_text(frame, part)).joints(joint_ids(joints));
            match &part.whole {
                Whole::Turns(point) => finding.point(point.clone()).value("it turns about", frame.print.place(point)),
                _ => finding,
            }
        });
    }
    tally.finish()
}

/// What a part does against its supports.
fn whole_text(frame: &Frame, part: &PartMotion) -> String {
    let joints = || frame.print.joints(part.joints.iter().copied());
    match &part.whole {
        Whole::Held => String::new(),
        Whole::Loose(_) if part.supports.is_empty() => format!("no support holds the part with {}", joints()),
        Whole::Loose(ways) => {
            format!("the supports are too few: the part with {} can move whole, in {ways} ways", joints())
        }
        Whole::Slides(along) => format!(
            "the supports all hold in one direction: the part with {} slides along ({}, {})",
            joints(),
            along.x,
            along.y
        ),
        Whole::Turns(point) => {
            format!("the lines of all supports go through {}: the whole turns about it", named_place(frame, point))
        }
    }
}

/// The joint that stands there, or the coordinates.
fn named_place(frame: &Frame, point: &Point) -> String {
    let joint = (0..frame.joint_count()).find(|&joint| frame.lattice.point(joint) == point);
    joint.map_or_else(|| frame.print.place(point), |joint| frame.print.joint(joint).to_owned())
}

fn critical(frame: &Frame, matrix: &Matrix, judged: &Judged, unknowns: usize, parts: &[PartMotion]) -> Finding {
    let stressed = stressed_members(matrix, judged);
    let (reason, members) = match parts.iter().find(|part| part.whole != Whole::Held) {
        Some(part) => (whole_text(frame, part), Vec::new()),
        None => critical_reason(frame, matrix, judged, &stressed),
    };
    let text = format!("there are members enough, but in this very form it moves: {reason}");
    let finding = Finding::new(Rule::CriticalForm, Level::Fault, text).members(member_ids(members));
    with_motion(frame, matrix, judged, rank_evidence(finding, matrix, judged, unknowns))
        .words("With the same members and the joints a little elsewhere it would stand.")
}

fn mechanism(frame: &Frame, matrix: &Matrix, judged: &Judged, unknowns: usize, within: usize) -> Finding {
    let missing = counted(within, "member is", "members are");
    let moving = judged.motion.as_ref().map(|velocities| moving_joints(matrix, velocities)).unwrap_or_default();
    let (verb, who) = (if moving.len() == 1 { "moves" } else { "move" }, frame.print.joints(moving.iter().copied()));
    let moves = if moving.is_empty() { String::new() } else { format!(": {who} {verb}") };
    let reason =
        judged.motion.as_ref().and_then(|velocities| loose_reason(frame, matrix, velocities)).unwrap_or_default();
    let text = format!("{missing} missing{moves}{reason}");
    let finding = Finding::new(Rule::Mechanism, Level::Fault, text);
    let finding = with_motion(frame, matrix, judged, rank_evidence(finding, matrix, judged, unknowns));
    match judged.motion.as_ref().and_then(|velocities| place_for_member(frame, matrix, velocities)) {
        Some([a, b]) => {
            let ends = frame.print.joints([a, b]);
            let mark = frame.free_member_mark(Role::Web).to_owned();
            let member = Member { mark, from: JointId::new(a), to: JointId::new(b), role: Role::Web };
            finding.mend(format!("A member between {ends} would stop this motion."), Some(Edit::AddMember(member)))
        }
        None => finding,
    }
}

fn rank_evidence(finding: Finding, matrix: &Matrix, judged: &Judged, unknowns: usize) -> Finding {
    let rows = matrix.rows.len() - matrix.ground;
    let certainty = match judged.certainty {
        Certainty::Full => "The rank is full modulo a prime, so it is full",
        Certainty::Counted => "No places of the joints could give a greater rank: counted by the pebble game",
        Certainty::Motions => "As many independent motions were checked exactly as the rank is short",
        Certainty::Agreed => "The rank was found modulo a prime near 2³¹; it is not proved within the bound of work",
    };
    finding
        .formula(Law::RigidityRank, format!("{rows} members and holds, rank {}, {unknowns} needed", judged.rank))
        .words(certainty)
}

fn moving_joints(matrix: &Matrix, velocities: &Velocities) -> Vec<usize> {
    let moving = matrix.joints.iter().enumerate().filter(|(pair, _)| velocities.moves(*pair));
    moving.map(|(_, &joint)| joint as usize).collect()
}

fn with_motion(frame: &Frame, matrix: &Matrix, judged: &Judged, finding: Finding) -> Finding {
    let Some(velocities) = &judged.motion else { return finding };
    let moving = moving_joints(matrix, velocities);
    let told = moving.iter().copied().take(frame.limits.most_findings);
    let mut finding = finding
        .joints(joint_ids(told))
        .words("A motion that keeps every member's length to first order, checked exactly; up to a common factor:");
    let pairs = matrix.joints.iter().enumerate().filter(|(pair, _)| velocities.moves(*pair));
    for (pair, &joint) in pairs.take(WRITTEN) {
        let v = velocities.vector(pair);
        finding =
            finding.value(format!("velocity of {}", frame.print.joint(joint as usize)), format!("({}, {})", v.x, v.y));
    }
    if judged.ways > 1 { finding.words(format!("It is one of {} independent motions.", judged.ways)) } else { finding }
}

fn stressed_members(matrix: &Matrix, judged: &Judged) -> Vec<usize> {
    let members = matrix.rows.iter().zip(&judged.stressed).filter(|(_, stressed)| **stressed);
    members
        .filter_map(|(row, _)| if let Source::Member(member) = row.source { Some(member as usize) } else { None })
        .collect()
}

fn spare(frame: &Frame, matrix: &Matrix, judged: &Judged) -> Option<Finding> {
    let spare = (matrix.rows.len() - matrix.ground).saturating_sub(judged.rank);
    let members = stressed_members(matrix, judged);
    let mut holds: Vec<usize> = Vec::new();
    for (row, _) in matrix.rows.iter().zip(&judged.stressed).filter(|(_, stressed)| **stressed) {
        if let Source::Support(index) = row.source {
            holds.push(frame.truss.supports[index as usize].joint.index());
        }
    }
    holds.dedup();
    if spare == 0 || (members.is_empty() && holds.is_empty()) {
        return None;
    }
    let many = counted(spare, "member or hold more than is", "members or holds more than are");
    let mut names: Vec<String> = Vec::new();
    if !members.is_empty() {
        names.push(frame.print.members(members.iter().copied()));
    }
    if !holds.is_empty() {
        names.push(format!("the holds at {}", frame.print.joints(holds.iter().copied())));
    }
    let text = format!(
        "{many} needed: any one of {} could go without loosening anything",
        listed(names.iter().map(String::as_str))
    );
    let told = members.into_iter().take(frame.limits.most_findings);
    Some(
        Finding::new(Rule::SpareMember, Level::Note, text)
            .members(member_ids(told))
            .joints(joint_ids(holds))
            .words("They can be stressed against each other without any load; one that is cut too long or too short strains the others."),
    )
}
