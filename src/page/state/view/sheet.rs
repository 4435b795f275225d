//! The printed sheet: the drawing fitted to the paper, the answers with their findings, and every table whole.

use super::board::{DrawingView, drawing_view};
use super::book::{RowView, book_view, column_titles};
use super::path::tenths;
use crate::measure::{Sheet, pretty};
use crate::page::state::{Book, Camera, State};
use crate::truss::Selection;

/// The printed sheet.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SheetView {
    /// The title.
    pub title: String,
    /// Unit, step and fingerprint, in words.
    pub particulars: String,
    /// The drawing, for a paper of [`PAPER`] units.
    pub drawing: DrawingView,
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

/// The width of the drawing on paper, in units: type of 12 units is about 3 mm high on a page of 186 mm.
pub const PAPER: f64 = 740.0;
/// The least and greatest height of the drawing, in units.
const HEIGHTS: (f64, f64) = (300.0, 760.0);
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
    let (drawing, height) = paper_drawing(state);
    let step = Sheet::of(truss.unit, &truss.step.value).exact_words(&truss.step.value);
    Some(SheetView {
        title: super::head_view(state).title,
        particulars: format!(
            "unit {}, printed to {}, fingerprint {}",
            truss.unit.symbol(),
            pretty(&step),
            checked.fingerprint
        ),
        drawing,
        view_box: format!("0 0 {} {}", tenths(PAPER), tenths(height)),
        questions: questions(state, checked),
        tables: Book::ALL.into_iter().filter_map(|book| table(state, book)).collect(),
    })
}

/// The drawing alone, with nothing selected or opened, fitted to the paper.
pub(super) fn paper_drawing(state: &State) -> (DrawingView, f64) {
    let wide = Camera::fitted(&state.places, (PAPER, 10_000.0));
    let heights = state.places.iter().map(|&place| wide.at(place).y);
    let span = heights.clone().fold(f64::MIN, f64::max) - heights.fold(f64::MAX, f64::min);
    let height = (span + 180.0).clamp(HEIGHTS.0, HEIGHTS.1);
    let board_size = (PAPER, height);
    let paper = State {
        camera: Camera::fitted(&state.places, board_size),
        board_size,
        selection: Selection::default(),
        open_finding: None,
        ..state.clone()
    };
    (drawing_view(&paper), height)
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
