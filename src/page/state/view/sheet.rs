//! The printed sheet: the drawing fitted to the paper, the answers with their findings, and every table whole.

use super::board::{DrawingView, drawing_view};
use super::book::{RowView, book_view, column_titles};
use super::path::tenths;
use crate::measure::{Sheet, pretty};
use crate::page::state::paper::{OnPaper, UNIT, on_paper};
use crate::page::state::{Book, State};
use crate::truss::Selection;

/// The printed sheet.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SheetView {
    /// The title.
    pub title: String,
    /// The style of its paper.
    pub class: &'static str,
    /// What the title block says: names and values; an empty value is filled in by hand.
    pub block: Vec<(&'static str, String)>,
    /// The drawing.
    pub drawing: DrawingView,
    /// How wide the drawing is, as an attribute.
    pub width: String,
    /// The part of the plane that the drawing takes, as an attribute.
    pub view_box: String,
    /// Findings by question: the question, the answer, and a line for each finding.
    pub questions: Vec<(String, Vec<String>)>,
    /// The tables.
    pub tables: Vec<SheetTable>,
}

/// A table of the sheet.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SheetTable {
    /// Its title.
    pub title: String,
    /// The titles of its columns.
    pub columns: Vec<String>,
    /// Its rows.
    pub rows: Vec<Vec<String>>,
}

/// The most lines in tables that are laid out for paper.
const MOST: usize = 4000;
/// The most findings printed for one question.
const MOST_FINDINGS: usize = 60;

/// The sheet, from the state; `None` before there are answers, or for a truss whose tables would be too long for paper.
pub fn sheet_view(state: &State) -> Option<SheetView> {
    let checked = state.fresh()?;
    let truss = &state.truss;
    if truss.members.len() + truss.figures.len() + truss.joints.len() > MOST {
        return None;
    }
    let (drawing, on_paper) = paper_drawing(state);
    let step = Sheet::of(truss.unit, &truss.step.value).exact_words(&truss.step.value);
    Some(SheetView {
        title: super::head_view(state).title,
        class: on_paper.paper.class(),
        block: vec![
            ("truss", super::head_view(state).title),
            ("scale", on_paper.scale.clone()),
            ("unit", truss.unit.symbol().into()),
            ("printed to", pretty(&step)),
            ("fingerprint", checked.fingerprint.clone()),
            ("drawn", String::new()),
            ("checked", String::new()),
            ("date", String::new()),
            ("sheet", String::new()),
        ],
        drawing,
        width: format!("{}mm", tenths(on_paper.size.0 * UNIT)),
        view_box: format!("0 0 {} {}", tenths(on_paper.size.0), tenths(on_paper.size.1)),
        questions: questions(state, checked),
        tables: Book::ALL.into_iter().filter_map(|book| table(state, book)).collect(),
    })
}

/// The drawing alone, with nothing selected or opened, at a standard scale on the paper.
pub(super) fn paper_drawing(state: &State) -> (DrawingView, OnPaper) {
    let on_paper = on_paper(&state.places, state.truss.unit, state.setup);
    let paper = State {
        camera: on_paper.camera,
        board_size: on_paper.size,
        selection: Selection::default(),
        open_finding: None,
        ..state.clone()
    };
    (drawing_view(&paper), on_paper)
}

fn questions(state: &State, checked: &crate::page::state::Checked) -> Vec<(String, Vec<String>)> {
    let question = |tile: super::AnswerTile| {
        let findings = checked.report.findings.iter().filter(|finding| finding.rule.question() == tile.question);
        let lines = findings.take(MOST_FINDINGS).map(|f| format!("{}: {}", f.level.name(), pretty(&f.text)));
        let detail = if tile.detail.is_empty() { String::new() } else { format!(" ({})", tile.detail) };
        (format!("{} {}{detail}", tile.question.text(), tile.answer), lines.collect())
    };
    super::answer_tiles(state).into_iter().map(question).collect()
}

fn table(state: &State, book: Book) -> Option<SheetTable> {
    let mut rows = Vec::new();
    let mut start = 0;
    loop {
        let part = book_view(&State { book, book_start: start, refused: None, ..state.clone() });
        rows.extend(part.rows.iter().map(cells));
        start += super::PAGE_ROWS;
        if start >= part.total {
            break;
        }
    }
    let columns = column_titles(book).iter().map(|title| (*title).to_string()).collect();
    (!rows.is_empty()).then(|| SheetTable { title: book.title().into(), columns, rows })
}

fn cells(row: &RowView) -> Vec<String> {
    let text = |cell: &super::CellView| match cell.kind {
        super::CellKind::Check(yes) => if yes { "loose" } else { "set" }.to_string(),
        _ => pretty(&cell.text),
    };
    row.cells.iter().map(text).collect()
}
