//! What moves with the pointer: the thing pointed at, the selection, and what is being drawn.

use super::board::Board;
use super::labels::{Anchor, LabelView};
use super::path::{PathText, PathView};
use crate::page::state::snap::snap;
use crate::page::state::{Drag, Pen, Pixel, State, Thing};
use crate::truss::{FigureId, JointId, MemberId};

/// What moves with the pointer, ready to be placed.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OverlayView {
    /// Lines.
    pub paths: Vec<PathView>,
    /// Texts.
    pub labels: Vec<LabelView>,
    /// The pointer's shape.
    pub cursor: &'static str,
}

/// What moves with the pointer, from the state.
pub fn overlay_view(state: &State) -> OverlayView {
    let board = Board::new(state);
    let mut view = OverlayView { cursor: cursor(state), ..OverlayView::default() };
    let mut selected = Lit::default();
    for &id in state.selection.joints.iter().take(2000) {
        selected.joint(&board, id);
    }
    for &id in state.selection.members.iter().take(2000) {
        selected.member(&board, id);
    }
    for &id in state.selection.figures.iter().take(200) {
        selected.figure(&board, id);
    }
    for id in state.selection.supports.iter().filter_map(|id| state.truss.supports.get(id.index())) {
        selected.joint(&board, id.joint);
    }
    selected.push(&mut view, ["selected-line", "selected-ring"]);
    let mut pointed = Lit::default();
    match state.pointed {
        Some(Thing::Joint(id)) => pointed.joint(&board, id),
        Some(Thing::Member(id)) => pointed.member(&board, id),
        Some(Thing::Figure(id)) => pointed.figure(&board, id),
        Some(Thing::Support(id)) => {
            if let Some(support) = state.truss.supports.get(id.index()) {
                pointed.joint(&board, support.joint);
            }
        }
        None => {}
    }
    pointed.push(&mut view, ["pointed-line", "pointed-ring"]);
    draw_act(&board, &mut view);
    view
}

fn cursor(state: &State) -> &'static str {
    match (&state.drag, state.pen, state.pointed) {
        (Drag::Pan { .. } | Drag::Pinch { .. }, ..) => "board grabbing",
        (Drag::Move { .. }, ..) => "board moving",
        (_, Pen::Down, _) => "board drawing",
        (_, Pen::Up, Some(_)) => "board pointing",
        _ => "board",
    }
}

#[derive(Default)]
struct Lit {
    lines: PathText,
    rings: PathText,
}

impl Lit {
    fn joint(&mut self, board: &Board, id: JointId) {
        self.rings.circle(board.pixel(id), 6.5);
    }

    fn member(&mut self, board: &Board, id: MemberId) {
        let [a, b] = board.ends(id);
        self.lines.line(a, b);
    }

    fn figure(&mut self, board: &Board, id: FigureId) {
        let Some(figure) = board.truss.figures.get(id.index()) else { return };
        let joints = figure.kind.joints();
        for &joint in &joints {
            self.joint(board, joint);
        }
        for pair in joints.windows(2) {
            self.lines.line(board.pixel(pair[0]), board.pixel(pair[1]));
        }
    }

    fn push(self, view: &mut OverlayView, [lines, rings]: [&'static str; 2]) {
        view.paths.extend(self.lines.view(lines));
        view.paths.extend(self.rings.view(rings));
    }
}

fn note(view: &mut OverlayView, at: Pixel, text: &str) {
    if !text.is_empty() {
        let at = Pixel::new(at.x + 14.0, at.y - 16.0);
        let text = crate::measure::pretty(text);
        view.labels.push(LabelView { at, turn: 0.0, anchor: Anchor::Start, class: "label snap", text });
    }
}

fn draw_act(board: &Board, view: &mut OverlayView) {
    let state = board.state;
    let mut ghost = PathText::default();
    match &state.drag {
        Drag::Move { joint, to, snapped, .. } => {
            let at = state.camera.pixel(to);
            for member in board.truss.members.iter().filter(|member| member.ends().contains(joint)) {
                let other = if member.from == *joint { member.to } else { member.from };
                ghost.line(at, board.pixel(other));
            }
            ghost.circle(at, 4.5);
            note(view, at, snapped);
        }
        Drag::Member { from, to, snapped, .. } => {
            let at = state.camera.pixel(to);
            ghost.line(board.pixel(*from), at);
            ghost.circle(at, 4.5);
            note(view, at, snapped);
        }
        Drag::Frame { from, to, .. } => {
            let corners = [*from, Pixel::new(to.x, from.y), *to, Pixel::new(from.x, to.y)];
            ghost.polygon(&corners);
        }
        Drag::None if state.pen == Pen::Down && state.pointed.is_none() => {
            if let Some(pointer) = state.pointer {
                let snapped = snap(board.truss, &state.camera, pointer, false, &[]);
                let at = state.camera.pixel(&snapped.point);
                ghost.circle(at, 3.6);
                let words =
                    crate::page::state::board_events::snapped_words(board.truss, &snapped.point, &snapped.words);
                note(view, at, &words);
            }
        }
        _ => {}
    }
    view.paths.extend(ghost.view("ghost"));
}
