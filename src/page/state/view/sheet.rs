//! The printed sheet: what the screen shows, laid out for paper, with every table whole.

use super::book::{RowView, book_view, column_titles};
use crate::measure::pretty;
use crate::page::state::{Book, State};

/// The parts of the sheet that are not on the screen already.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct SheetView {
    /// Findings by question: the question, the answer, and a line for each finding.
    pub questions: Vec<(String, Vec<String>)>,
    /// The tables.
    pub tables: Vec<SheetTable>,
    /// The fingerprint of the truss.
    pub fingerprint: String,
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

/// The most members of which tables are laid out for paper.
const MOST: usize = 1200;

/// The sheet, from the state; `None` before there are answers or for a truss whose tables would be too long.
pub fn sheet_view(state: &State) -> Option<SheetView> {
    let checked = state.fresh()?;
    if state.truss.members.len() + state.truss.figures.len() + state.truss.joints.len() > 3 * MOST {
        return None;
    }
    let questions = super::answer_tiles(state).into_iter().map(|tile| {
        let findings = checked.report.findings.iter().filter(|finding| finding.rule.question() == tile.question);
        let lines = findings.take(40).map(|finding| format!("{}: {}", finding.level.name(), pretty(&finding.text)));
        let detail = if tile.detail.is_empty() { String::new() } else { format!(" ({})", tile.detail) };
        (format!("{} {}{detail}", tile.question.text(), tile.answer), lines.collect())
    });
    Some(SheetView {
        questions: questions.collect(),
        tables: Book::ALL.into_iter().filter_map(|book| table(state, book)).collect(),
        fingerprint: checked.fingerprint.clone(),
    })
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
