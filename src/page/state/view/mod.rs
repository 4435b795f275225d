//! View models: what is to be shown, ready to be placed. No component computes anything.

mod answers;
mod board;
mod book;
mod dimensions;
mod evidence;
mod labels;
mod misfits;
mod overlay;
mod path;
mod pieces;
mod plan;
mod sheet;
mod svg;

pub use answers::{AnswerTile, Sign, WorkView, answer_tiles, work_view};
pub use board::{DrawingView, Turned, drawing_view};
pub use book::{BookView, CellKind, CellView, PAGE_ROWS, RowView, book_view, column_titles};
pub use evidence::{EvidenceLine, EvidenceView, FindingView, LimitView, MendView, SuspectView, evidence_view};
pub use labels::{Anchor, LabelView};
pub use overlay::{OverlayView, overlay_view};
pub use path::PathView;
pub(super) use pieces::piece_records;
pub use plan::{PREVIEW, PlanView, plan_view};
pub use sheet::{SheetTable, SheetView, sheet_view};
pub use svg::svg_text;

use super::cells::{Cell, Column, Row};
use super::model::{Source, State};
use super::paper::{Paper, Scale, SheetSetup, on_paper, scales};
use crate::measure::pretty;
use crate::truss::Selection;

/// The head of the page.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct HeadView {
    /// The title of the sheet.
    pub title: String,
    /// The symbol of the unit.
    pub unit: &'static str,
    /// The printing step, to be typed over.
    pub step: CellView,
    /// Where it came from and what it is now.
    pub source: String,
    /// The change that can be undone.
    pub undo: Option<String>,
    /// The change that can be made again.
    pub redo: Option<String>,
    /// The fingerprint, when the answers are there.
    pub fingerprint: String,
    /// The choice of paper and scale, while it is open.
    pub print: Option<PrintView>,
}

/// The choice of paper and scale.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PrintView {
    /// What is chosen.
    pub setup: SheetSetup,
    /// The paper that this comes to.
    pub paper: Paper,
    /// The standard scales.
    pub scales: &'static [Scale],
    /// The largest scale that fits the paper.
    pub fits: String,
}

fn print_view(state: &State) -> PrintView {
    let (unit, setup) = (state.truss.unit, state.setup);
    let free = on_paper(&state.places, unit, SheetSetup { times: None, ..setup });
    PrintView { setup, paper: free.paper, scales: scales(unit), fits: free.scale }
}

/// The head of the page, from the state.
pub fn head_view(state: &State) -> HeadView {
    let truss = &state.truss;
    let source = match &state.source {
        None => String::new(),
        Some(Source::Own) => "drawn here".into(),
        Some(Source::Demo(_)) => "a demonstration".into(),
        Some(Source::File(name)) => name.clone(),
        Some(Source::Link) => "from a link, checked here".into(),
        Some(Source::Kept) => "kept by this browser".into(),
    };
    HeadView {
        title: if truss.title.is_empty() { "Untitled truss".into() } else { truss.title.clone() },
        unit: truss.unit.symbol(),
        step: step_view(state),
        source,
        undo: state.history.undo_label().map(pretty),
        redo: state.history.redo_label().map(pretty),
        fingerprint: state.fresh().map(|checked| checked.fingerprint.clone()).unwrap_or_default(),
        print: state.print_panel.then(|| print_view(state)),
    }
}

fn step_view(state: &State) -> CellView {
    let cell = Cell::new(Row::Sheet, Column::Step);
    let refused = state.refused.as_ref().filter(|refused| refused.cell == cell);
    CellView {
        cell: Some(cell),
        text: refused.map_or(&state.truss.step.text, |refused| &refused.text).clone(),
        label: "the step that values are printed to".into(),
        kind: CellKind::Value,
        error: refused.map(|refused| pretty(&refused.error)).unwrap_or_default(),
    }
}

/// What can be done with what is selected.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SelectionView {
    /// What is selected, in words.
    pub words: String,
    /// True when joints are selected.
    pub joints: bool,
    /// True when members are selected.
    pub members: bool,
    /// True when two joints are selected that no member joins.
    pub can_join: bool,
    /// What typing would make: `length of T1`.
    pub offer: String,
}

/// What can be done with what is selected; `None` when nothing is.
pub fn selection_view(state: &State) -> Option<SelectionView> {
    let (truss, selection) = (&state.truss, &state.selection);
    if selection.is_empty() {
        return None;
    }
    let pair = match selection.joints[..] {
        [a, b] => Some((a, b)),
        _ => None,
    };
    let joined = |a, b| truss.members.iter().any(|m| m.ends() == [a, b] || m.ends() == [b, a]);
    Some(SelectionView {
        words: super::draw::name_selection(truss, selection),
        joints: !selection.joints.is_empty(),
        members: !selection.members.is_empty(),
        can_join: pair.is_some_and(|(a, b)| !joined(a, b)),
        offer: offer(state, selection),
    })
}

fn offer(state: &State, selection: &Selection) -> String {
    let truss = &state.truss;
    match (&selection.joints[..], &selection.members[..]) {
        ([a, b], []) => {
            let kind = super::entry::likely_kind(truss, *a, *b);
            format!("type the {kind} from {} to {}", truss.mark(*a), truss.mark(*b))
        }
        ([], [member]) => format!("type the length of {}", truss.member(*member).mark),
        ([_, at, _], []) => format!("type an angle at {}, such as angle 26.6", truss.mark(*at)),
        _ => String::new(),
    }
}
