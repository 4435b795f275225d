//! Is it clear? What crosses, overlaps, touches, is there twice or is not connected.

mod boxes;
mod joints;
mod meetings;
mod near;
mod panels;
mod places;
mod strips;
mod sweep;

pub(crate) use joints::{has_member, neighbours, parts};
pub(crate) use sweep::properly_cross;

use super::answers::{ClearAnswer, ClearState};
use super::findings::{Finding, Level, Rule};
use super::frame::Frame;
use super::print::counted;
use meetings::Members;
use panels::Panels;

/// Answers the question for a placed truss.
///
/// Faults are what cannot be built: `same place`, `no length`, `doubled`, `overlap`, `crossing`, `joint on member`. To be
/// looked at: `nearly meeting`, `tight spread`, `loose end`, `apart`. To be known: `unused joint`. Panels are walked when no
/// fault makes them meaningless.
pub(crate) fn clear(frame: &Frame) -> (ClearAnswer, Vec<Finding>) {
    let (members, doubled) = places::doubled(frame);
    let members = Members::new(frame, members);
    let met = meetings::meetings(&members, frame.limits.most_findings);
    let gaps = joints::acute_gaps(frame);
    let mut found = places::same_place(frame);
    found.extend(places::no_length(frame));
    found.extend(doubled);
    found.extend(meetings::findings(frame, &met));
    found.extend(near::nearly_meeting(frame, members.boxes()));
    found.extend(joints::tight_spreads(frame, &gaps));
    found.extend(joints::loose_ends(frame));
    found.extend(joints::apart_and_unused(frame));
    let is_clear = found.iter().all(|finding| finding.level != Level::Fault);
    let plane = met.pairs.is_empty() && met.on_member.is_empty() && found.iter().all(|f| f.rule != Rule::SamePlace);
    let panels = if plane { panels::panels(frame) } else { Panels::default() };
    let summary = if is_clear { clear_summary(frame, &gaps, &panels) } else { fault_summary(&found) };
    let state = if is_clear { ClearState::Clear } else { ClearState::NotClear };
    (ClearAnswer { state, summary, panels: panels.panels, outline: panels.outline }, found)
}

/// The pairs of members that cross or overlap, in order.
pub(crate) fn crossings(frame: &Frame) -> Vec<[u32; 2]> {
    let (members, _) = places::doubled(frame);
    let met = meetings::meetings(&Members::new(frame, members), frame.limits.most_findings);
    met.pairs.into_iter().map(|(pair, _)| pair).collect()
}

/// `least spread 49/149 at L0; 14 panels, 1 not a triangle`.
fn clear_summary(frame: &Frame, gaps: &[joints::Gap], panels: &Panels) -> String {
    let mut parts = Vec::new();
    if let Some((gap, spread)) = joints::least_spread(frame, gaps) {
        parts.push(format!("least spread {spread} at {}", frame.print.joint(gap.at)));
    }
    let others = panels.panels.iter().filter(|panel| panel.len() > 3).count();
    match (panels.panels.len(), others) {
        (0, _) => {}
        (all, 0) => parts.push(counted(all, "panel", "panels")),
        (all, 1) => parts.push(format!("{}, 1 not a triangle", counted(all, "panel", "panels"))),
        (all, some) => parts.push(format!("{}, {some} not triangles", counted(all, "panel", "panels"))),
    }
    if parts.is_empty() { "nothing meets where it should not".into() } else { parts.join("; ") }
}

/// `1 crossing, 2 joints on members`.
fn fault_summary(found: &[Finding]) -> String {
    let count = |rule: Rule| found.iter().filter(|f| f.rule == rule && f.level == Level::Fault).count();
    let named = [
        (Rule::SamePlace, "place with two joints", "places with two joints"),
        (Rule::NoLength, "member without length", "members without length"),
        (Rule::Doubled, "doubled member", "doubled members"),
        (Rule::Overlap, "overlap", "overlaps"),
        (Rule::Crossing, "crossing", "crossings"),
        (Rule::JointOnMember, "joint on a member", "joints on members"),
    ];
    let parts: Vec<String> = named
        .into_iter()
        .map(|(rule, one, many)| (count(rule), one, many))
        .filter(|&(count, ..)| count > 0)
        .map(|(count, one, many)| counted(count, one, many))
        .collect();
    parts.join(", ")
}
