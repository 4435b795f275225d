//! Drawing: joints and members made and moved, supports and roles given.

use super::board_events::snapped_words;
use super::camera::Pixel;
use super::cells::support_kind;
use super::entry::likely_role;
use super::event::Effect;
use super::model::{State, Thing, Tone};
use super::snap::{snap, visible_step};
use super::update::{change, choose, say};
use crate::exact::{Point, Rational, Vector, whole};
use crate::measure::Sheet;
use crate::truss::{Edit, Joint, JointId, Member, Selection, Support, Truss};
use num_traits::Signed;

/// The place for a joint where the pointer is. The first joint of a sheet sits at the origin, wherever it was pressed.
pub(super) fn place_for_joint(state: &mut State, at: Pixel, free: bool) -> Point {
    if state.truss.joints.is_empty() {
        state.camera.origin = at;
        state.fitted = false;
        return Point::whole(0, 0);
    }
    snap(&state.truss, &state.camera, at, free, &[]).point
}

/// Makes a joint; gives its id back when it was made.
pub(super) fn add_joint(state: &mut State, point: Point, effects: &mut Vec<Effect>) -> Option<JointId> {
    let mark = next_mark(&state.truss, &point);
    let label = format!("drew {mark}");
    let loose = state.truss.joints.last().is_some_and(|joint| joint.loose);
    let sheet = Sheet::of(state.truss.unit, &state.truss.step.value);
    let joint = Joint { mark, x: sheet.written(&point.x), y: sheet.written(&point.y), loose };
    let id = JointId::new(state.truss.joints.len());
    change(state, &Edit::AddJoint(joint), label, effects).then_some(id)
}

/// The next mark of the trade's usual kind: L along the lowest line, U above it, each counting from 0.
fn next_mark(truss: &Truss, point: &Point) -> String {
    let lowest = truss.joints.iter().map(|joint| &joint.y.value).min();
    let letter = if lowest.is_none_or(|y| point.y <= *y) { "L" } else { "U" };
    let numbers = truss.joints.iter().filter_map(|joint| joint.mark.strip_prefix(letter)?.parse::<u32>().ok());
    let next = numbers.max().map_or(0, |greatest| greatest.saturating_add(1));
    format!("{letter}{next}")
}

/// Makes a member between two joints, unless there is one already.
pub(super) fn add_member(state: &mut State, from: JointId, to: JointId, effects: &mut Vec<Effect>) {
    let truss = &state.truss;
    if let Some(there) = truss.members.iter().find(|member| member.ends() == [from, to] || member.ends() == [to, from])
    {
        let text = format!("{} joins {} and {} already.", there.mark, truss.mark(from), truss.mark(to));
        return say(state, Tone::Refused, text);
    }
    let role = likely_role(truss, from, to);
    let member = Member { mark: truss.free_member_mark(role), from, to, role };
    let label = format!("drew {}", member.mark);
    change(state, &Edit::AddMember(member), label, effects);
}

/// Joins two selected joints.
pub(super) fn join_selected(state: &mut State, effects: &mut Vec<Effect>) {
    match state.selection.joints[..] {
        [from, to] => add_member(state, from, to, effects),
        _ => say(state, Tone::Refused, "Select two joints to join them by a member.".into()),
    }
}

/// Moves the joint that was taken hold of to a point, and with it whatever else is selected.
pub(super) fn move_joint(state: &mut State, joint: JointId, to: &Point, effects: &mut Vec<Effect>) {
    let Some(from) = state.truss.joints.get(joint.index()).map(Joint::point) else { return };
    let by = to - &from;
    move_by(state, &moving(state, joint), &by, effects);
}

/// The joints that move when this one is taken hold of.
pub(super) fn moving(state: &State, joint: JointId) -> Vec<JointId> {
    if state.selection.joints.contains(&joint) { state.selection.joints.clone() } else { vec![joint] }
}

fn move_by(state: &mut State, joints: &[JointId], by: &Vector, effects: &mut Vec<Effect>) {
    let moves = joints.iter().filter_map(|&id| Some((id, &state.truss.joints.get(id.index())?.point() + by))).collect();
    let selection = Selection { joints: joints.to_vec(), ..Selection::default() };
    let label = format!("moved {}", name_selection(&state.truss, &selection));
    change(state, &Edit::MoveJoints(moves), label, effects);
}

/// Moves the selected joints by some steps of the sheet.
pub(super) fn nudge(state: &mut State, right: i64, up: i64, steps: i64, effects: &mut Vec<Effect>) {
    let step = match &state.truss.step.value {
        step if step.is_positive() => step.clone(),
        _ => visible_step(&state.truss, &state.camera),
    };
    let stretch = |count: i64| -> Rational { &step * whole(count * steps) };
    let by = Vector { x: stretch(right), y: stretch(up) };
    let joints = state.selection.joints.clone();
    move_by(state, &joints, &by, effects);
    if let Some(&first) = joints.first() {
        let place = snapped_words(&state.truss, &state.truss.joint(first).point(), "");
        say(state, Tone::Done, format!("{}: {place}", state.truss.mark(first)));
    }
}

/// Gives the selected members a role.
pub(super) fn set_roles(state: &mut State, role: crate::truss::Role, effects: &mut Vec<Effect>) {
    let truss = &state.truss;
    let edits = state.selection.members.iter().filter_map(|&id| {
        let member = truss.members.get(id.index())?;
        Some(Edit::SetMember(id, Member { role, ..member.clone() }))
    });
    let edit = Edit::All(edits.collect());
    change(state, &edit, format!("made {} {}", name_selection(truss, &state.selection), role.name()), effects);
}

/// Gives the selected joints a support, or takes it away.
pub(super) fn set_supports(state: &mut State, kind: Option<&'static str>, effects: &mut Vec<Effect>) {
    let truss = &state.truss;
    let joints = &state.selection.joints;
    let edit = match kind.map(support_kind) {
        Some(Ok(kind)) => {
            Edit::All(joints.iter().map(|&joint| Edit::SetSupport(Support { joint, kind: kind.clone() })).collect())
        }
        Some(Err(error)) => return say(state, Tone::Refused, error),
        None => {
            let held = truss.supports.iter().enumerate().filter(|(_, support)| joints.contains(&support.joint));
            let supports = held.map(|(index, _)| crate::truss::SupportId::new(index)).collect();
            Edit::Remove(Selection { supports, ..Selection::default() })
        }
    };
    let label = format!("supported {}", name_selection(truss, &state.selection));
    change(state, &edit, label, effects);
}

/// Makes the selected joints loose or set.
pub(super) fn set_loose(state: &mut State, loose: bool, effects: &mut Vec<Effect>) {
    let truss = &state.truss;
    let edits = state.selection.joints.iter().filter_map(|&id| {
        let joint = truss.joints.get(id.index())?;
        Some(Edit::SetJoint(id, Joint { loose, ..joint.clone() }))
    });
    let edit = Edit::All(edits.collect());
    let label = format!("made {} {}", name_selection(truss, &state.selection), if loose { "loose" } else { "set" });
    change(state, &edit, label, effects);
}

/// The selection in a few words: `U2`, `U2 and L3`, `5 things`.
pub(super) fn name_selection(truss: &Truss, selection: &Selection) -> String {
    let joints = selection.joints.iter().filter_map(|id| truss.joints.get(id.index())).map(|joint| joint.mark.clone());
    let members = selection.members.iter().filter_map(|id| truss.members.get(id.index())).map(|m| m.mark.clone());
    let figures = selection.figures.iter().filter_map(|id| truss.figures.get(id.index())).map(|f| f.mark.clone());
    let supports = selection.supports.iter().filter_map(|id| truss.supports.get(id.index()));
    let supports = supports.map(|support| format!("the support at {}", truss.mark(support.joint)));
    let names: Vec<String> = joints.chain(members).chain(figures).chain(supports).collect();
    match names.as_slice() {
        [] => "nothing".into(),
        [one] => one.clone(),
        [one, other] => format!("{one} and {other}"),
        [one, other, third] => format!("{one}, {other} and {third}"),
        more => format!("{} things", more.len()),
    }
}

/// With the pen down, pressing a second joint keeps the first, so that a figure between them can be typed.
pub(super) fn press_thing(state: &mut State, thing: Thing) {
    let pair =
        matches!((&thing, &state.selection), (Thing::Joint(_), s) if s.joints.len() == 1 && s.members.is_empty());
    choose(state, thing, pair);
}
