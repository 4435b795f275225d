//! What pointers do on the board.

use super::camera::Pixel;
use super::draw;
use super::event::{Button, Effect, Modifiers, PointerAct};
use super::hit::{joint_at, thing_at, within};
use super::model::{Drag, Pen, Shown, State, Thing};
use super::snap::snap;
use super::update::choose;
use crate::exact::Point;
use crate::measure::Sheet;
use crate::truss::{JointId, Selection, Truss};

/// Pixels that a pressed pointer may stray before it is a drag.
const STRAY: f64 = 4.0;
/// Pixels within which a drawn member ends at a joint.
const END_REACH: f64 = 14.0;

/// Takes in what a pointer did.
pub(super) fn pointer(state: &mut State, act: PointerAct, effects: &mut Vec<Effect>) {
    match act {
        PointerAct::Down { id, at, button, held, finger } => down(state, id, at, button, held, finger),
        PointerAct::Move { id, at, held } => moved(state, id, at, held, effects),
        PointerAct::Up { id, at } => up(state, id, at, effects),
        PointerAct::Cancel { id } => {
            if owner(&state.drag).is_none_or(|owner| owner == id) {
                state.drag = Drag::None;
            }
        }
        PointerAct::Leave => {
            state.pointer = None;
            if state.drag == Drag::None {
                state.pointed = None;
            }
        }
    }
}

/// The pointer that a drag belongs to; a pinch belongs to two.
fn owner(drag: &Drag) -> Option<i32> {
    match drag {
        Drag::None | Drag::Pinch { .. } => None,
        Drag::Pressed { id, .. }
        | Drag::Pan { id, .. }
        | Drag::Move { id, .. }
        | Drag::Member { id, .. }
        | Drag::Frame { id, .. } => Some(*id),
    }
}

fn down(state: &mut State, id: i32, at: Pixel, button: Button, held: Modifiers, finger: bool) {
    if let Some(first) = owner(&state.drag).filter(|&first| finger && first != id) {
        let before = state.pointer.unwrap_or(at);
        state.drag = Drag::Pinch { fingers: [(first, before), (id, at)] };
        return;
    }
    if state.drag != Drag::None {
        return;
    }
    state.pointer = Some(at);
    state.drag = match button {
        Button::Main => {
            let on = thing_at(&state.truss, &state.places, &state.camera, at, finger);
            state.pointed = on;
            Drag::Pressed { id, at, on, extend: held.shift || held.control }
        }
        _ => Drag::Pan { id, last: at },
    };
}

fn moved(state: &mut State, id: i32, at: Pixel, held: Modifiers, effects: &mut Vec<Effect>) {
    match state.drag.clone() {
        Drag::None => {
            state.pointed = thing_at(&state.truss, &state.places, &state.camera, at, false);
            state.pointer = (state.pen == Pen::Down).then_some(at);
        }
        Drag::Pinch { fingers } => pinch(state, fingers, id, at),
        drag if owner(&drag) != Some(id) => {}
        Drag::Pressed { at: from, on, extend, .. } => {
            if from.distance(at) > STRAY {
                begin(state, id, from, on, extend, effects);
                moved(state, id, at, held, effects);
            }
        }
        Drag::Pan { last, .. } => {
            state.camera = state.camera.panned(at.x - last.x, at.y - last.y);
            state.fitted = false;
            state.drag = Drag::Pan { id, last: at };
            state.pointer = Some(at);
        }
        Drag::Move { joint, .. } => {
            let moving = draw::moving(state, joint);
            let snapped = snap(&state.truss, &state.camera, at, held.alt, &moving);
            let words = snapped_words(&state.truss, &snapped.point, &snapped.words);
            state.drag = Drag::Move { id, joint, to: snapped.point, snapped: words };
        }
        Drag::Member { from, .. } => state.drag = member_drag(state, id, from, at, held),
        Drag::Frame { from, .. } => state.drag = Drag::Frame { id, from, to: at },
    }
}

/// What a drag that left its place becomes.
fn begin(state: &mut State, id: i32, from: Pixel, on: Option<Thing>, extend: bool, effects: &mut Vec<Effect>) {
    state.drag = match (state.pen, on) {
        (Pen::Up, Some(Thing::Joint(joint))) => {
            state.shown = Shown::Sketch;
            let to = state.truss.joint(joint).point();
            Drag::Move { id, joint, to, snapped: String::new() }
        }
        (Pen::Down, Some(Thing::Joint(joint))) => start_member(state, id, joint),
        (Pen::Down, None) if !extend => {
            let point = draw::place_for_joint(state, from, false);
            match draw::add_joint(state, point, effects) {
                Some(joint) => start_member(state, id, joint),
                None => Drag::None,
            }
        }
        (Pen::Up, None) if !extend => Drag::Pan { id, last: from },
        _ => Drag::Frame { id, from, to: from },
    };
}

fn start_member(state: &State, id: i32, from: JointId) -> Drag {
    Drag::Member { id, from, to: state.truss.joint(from).point(), onto: None, snapped: String::new() }
}

fn member_drag(state: &State, id: i32, from: JointId, at: Pixel, held: Modifiers) -> Drag {
    let onto = joint_at(&state.truss.points(), &state.camera, at, END_REACH).filter(|&joint| joint != from);
    match onto {
        Some(joint) => {
            let snapped = format!("to {}", state.truss.mark(joint));
            Drag::Member { id, from, to: state.truss.joint(joint).point(), onto, snapped }
        }
        None => {
            let snapped = snap(&state.truss, &state.camera, at, held.alt, &[]);
            let words = snapped_words(&state.truss, &snapped.point, &snapped.words);
            Drag::Member { id, from, to: snapped.point, onto, snapped: words }
        }
    }
}

fn pinch(state: &mut State, mut fingers: [(i32, Pixel); 2], id: i32, at: Pixel) {
    let Some(finger) = fingers.iter().position(|(finger, _)| *finger == id) else { return };
    let (before, other) = (fingers[finger].1, fingers[1 - finger].1);
    fingers[finger].1 = at;
    let stretch = at.distance(other) / before.distance(other).max(1.0);
    let (middle_before, middle) = (before.towards(other, 0.5), at.towards(other, 0.5));
    state.camera = state
        .camera
        .panned(middle.x - middle_before.x, middle.y - middle_before.y)
        .zoomed(stretch.clamp(0.2, 5.0), middle);
    state.fitted = false;
    state.drag = Drag::Pinch { fingers };
}

fn up(state: &mut State, id: i32, at: Pixel, effects: &mut Vec<Effect>) {
    let drag = match &state.drag {
        Drag::Pinch { fingers } if fingers.iter().any(|(finger, _)| *finger == id) => Drag::None,
        drag if owner(drag) == Some(id) => drag.clone(),
        _ => return,
    };
    state.drag = Drag::None;
    state.pointer = None;
    match drag {
        Drag::Pressed { on, extend, .. } => pressed(state, at, on, extend, effects),
        Drag::Move { joint, to, .. } => draw::move_joint(state, joint, &to, effects),
        Drag::Member { from, to, onto, .. } => end_member(state, from, to, onto, effects),
        Drag::Frame { from, to, .. } => {
            state.selection = within(&state.truss, &state.places, &state.camera, from, to);
        }
        Drag::None | Drag::Pan { .. } | Drag::Pinch { .. } => {}
    }
}

fn pressed(state: &mut State, at: Pixel, on: Option<Thing>, extend: bool, effects: &mut Vec<Effect>) {
    match (state.pen, on) {
        (Pen::Up, Some(thing)) => choose(state, thing, extend),
        (Pen::Down, Some(thing)) => draw::press_thing(state, thing),
        (Pen::Up, None) if !extend => state.selection = Selection::default(),
        (Pen::Down, None) => {
            let point = draw::place_for_joint(state, at, extend);
            if let Some(joint) = draw::add_joint(state, point, effects) {
                choose(state, Thing::Joint(joint), false);
            }
        }
        _ => {}
    }
}

fn end_member(state: &mut State, from: JointId, to: Point, onto: Option<JointId>, effects: &mut Vec<Effect>) {
    if state.truss.joints.get(from.index()).is_none_or(|joint| onto.is_none() && joint.point() == to) {
        return;
    }
    if let Some(end) = onto.or_else(|| draw::add_joint(state, to, effects)) {
        draw::add_member(state, from, end, effects);
        state.selection = Selection { joints: vec![end], ..Selection::default() };
    }
}

/// A place in words: its coordinates, and what it was drawn to.
pub(super) fn snapped_words(truss: &Truss, point: &Point, words: &str) -> String {
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let place = format!("{} right, {} up", sheet.length(&point.x), sheet.length(&point.y));
    if words.is_empty() { place } else { format!("{place}; {words}") }
}
