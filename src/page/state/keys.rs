//! The keys of the page: one table, which is also the help.

use super::event::{Event, KeyPress};
use super::model::State;
use crate::checks::Question;

/// A line of the key list.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct KeyHelp {
    /// The keys, as they are shown.
    pub keys: &'static str,
    /// What they do.
    pub words: &'static str,
}

const fn help(keys: &'static str, words: &'static str) -> KeyHelp {
    KeyHelp { keys, words }
}

/// Every key of the page, outside its text boxes.
pub const KEYS: &[KeyHelp] = &[
    help("1 to 5", "show the evidence for a question"),
    help("P", "pen down to draw, pen up to look and move"),
    help("L", "lay out a truss of a usual configuration"),
    help("N, Shift N", "select the next or the joint before"),
    help("M", "join two selected joints by a member"),
    help("arrows", "move the selected joints by one step (Shift: by twelve); else move the paper"),
    help("a digit, with something selected", "type its figure"),
    help("Enter", "go to the figure entry"),
    help("Delete", "remove what is selected"),
    help("K", "switch between the sketch and the layout"),
    help("F, + and −", "show all, larger, smaller"),
    help("Esc", "put away what is open, or select nothing"),
    help("Ctrl Z, Ctrl Y", "undo, redo"),
    help("Ctrl S, Ctrl P", "save to a file, print"),
    help("?", "this list"),
];

/// The event that a key stands for, if any; keys that need more of the state are handled in `update`.
pub(super) fn event_of(state: &State, press: &KeyPress) -> Option<Event> {
    let (held, key) = (press.held, press.key.as_str());
    if held.control {
        return match (key, held.shift) {
            ("z" | "Z", false) => Some(Event::UndoAsked),
            ("y" | "Y", _) | ("z" | "Z", true) => Some(Event::RedoAsked),
            ("s" | "S", _) => Some(Event::SaveAsked),
            ("p" | "P", _) => Some(Event::PrintAsked),
            _ => None,
        };
    }
    match key {
        "p" | "P" => Some(Event::PenToggled),
        "l" | "L" => Some(Event::PlanOpened),
        "f" | "F" => Some(Event::FitAsked),
        "k" | "K" => Some(Event::ShownToggled),
        "+" | "=" => Some(Event::ZoomAsked(1.25)),
        "-" if state.selection.is_empty() => Some(Event::ZoomAsked(0.8)),
        "Delete" | "Backspace" => Some(Event::RemoveAsked),
        "?" => Some(Event::HelpToggled),
        "1" | "2" | "3" | "4" | "5" if state.selection.is_empty() => {
            let index = usize::from(key.as_bytes()[0] - b'1');
            Question::ALL.get(index).copied().map(Event::QuestionChosen)
        }
        _ => None,
    }
}
