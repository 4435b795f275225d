//! Pieces on the page: their rows, and their outlines on the board.

use super::board::Board;
use super::book::{CellKind, CellView, RowView};
use super::path::{PathText, PathView};
use crate::checks::pieces::{Cut, EndShape, Left, Length, Piece, PieceEnd, Pieces};
use crate::measure::{Sheet, pretty};
use crate::page::state::camera::to_f64;
use crate::page::state::{Book, Checked, Pixel, State, Thing};
use crate::truss::Truss;

/// The titles of the table.
pub(super) const TITLES: [&str; 7] =
    ["member", "depth", "upper edge", "lower edge", "working line", "first end", "second end"];

/// How many rows the table has: one for each piece, for each finding, and for each two that overlap.
pub(super) fn row_count(checked: &Checked) -> usize {
    match checked.pieces() {
        Some(pieces) => pieces.pieces.len() + pieces.findings.len() + pieces.collisions.len(),
        None => 1,
    }
}

/// One row.
pub(super) fn row(checked: &Checked, index: usize) -> RowView {
    let Some(pieces) = checked.pieces() else {
        return words(Vec::new(), "row", "pieces are cut here for trusses of at most 300 members".into());
    };
    let truss = &checked.truss;
    let after = index.wrapping_sub(pieces.pieces.len());
    let last = after.wrapping_sub(pieces.findings.len());
    match (pieces.pieces.get(index), pieces.findings.get(after), pieces.collisions.get(last)) {
        (Some(piece), _, _) => {
            let class = if piece.left == Left::Whole { "row" } else { "row fault" };
            let cells = record(checked, piece).into_iter().enumerate().map(|(column, text)| {
                shown(pretty(&text), if (1..5).contains(&column) { CellKind::Number } else { CellKind::Words })
            });
            RowView { things: vec![Thing::Member(piece.member)], can_remove: false, class, cells: cells.collect() }
        }
        (None, Some(finding), _) => {
            let members = finding.members.iter().map(|&id| Thing::Member(id)).collect();
            words(members, "row total", format!("{}: {}", finding.level.name(), pretty(&finding.text)))
        }
        (None, None, Some(collision)) => {
            let [a, b] = collision.members.map(|id| truss.member(id).mark.as_str());
            let text = format!("the pieces of {a} and {b} overlap at {}", truss.mark(collision.joint));
            words(collision.members.map(Thing::Member).to_vec(), "row total", text)
        }
        _ => words(Vec::new(), "row", String::new()),
    }
}

fn words(things: Vec<Thing>, class: &'static str, text: String) -> RowView {
    RowView { things, can_remove: false, class, cells: vec![shown(text, CellKind::Wide)] }
}

fn shown(text: String, kind: CellKind) -> CellView {
    CellView { cell: None, text, label: String::new(), kind, error: String::new() }
}

fn record(checked: &Checked, piece: &Piece) -> Vec<String> {
    let truss = &checked.truss;
    let member = truss.member(piece.member);
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let depth = sheet.exact_words(&checked.shop().stock(member.role).depth);
    let lengths = [&piece.upper, &piece.lower, &piece.line].map(|length| match piece.left {
        Left::Nothing => "nothing".to_string(),
        _ => length_words(length),
    });
    let ends = piece.ends.each_ref().map(|end| end_words(truss, end));
    [vec![member.mark.clone(), depth], lengths.to_vec(), ends.to_vec()].concat()
}

fn length_words(length: &Length) -> String {
    if length.exact { length.text.clone() } else { format!("~ {}", length.text) }
}

/// `L3: 52.4°, 9 1/4 in 12, against B3; less 2 1/4"`.
fn end_words(truss: &Truss, end: &PieceEnd) -> String {
    let cut = |cut: &Cut| {
        let against = cut.against.map_or(String::new(), |id| {
            format!(", {} {}", if cut.mitre { "mitred with" } else { "against" }, truss.member(id).mark)
        });
        format!("{}°, {}{against}", cut.degrees, cut.bevel)
    };
    let shape = match &end.shape {
        EndShape::Square(None) => "square".to_string(),
        EndShape::Square(Some(id)) => format!("square against {}", truss.member(*id).mark),
        EndShape::One(only) => cut(only),
        EndShape::Two { cuts: [first, second], notch } => {
            let joined = if *notch { "notched" } else { "double" };
            format!("{joined}: {}; {}", cut(first), cut(second))
        }
    };
    format!("{}: {shape}; less {}", truss.mark(end.joint), length_words(&end.deduction))
}

/// The table as records, with its titles.
pub(in crate::page::state) fn piece_records(state: &State) -> Vec<Vec<String>> {
    let mut records = vec![TITLES.map(String::from).to_vec()];
    let Some(checked) = state.fresh() else { return records };
    let pieces = checked.pieces().map(|pieces| pieces.pieces.as_slice()).unwrap_or_default();
    records.extend(pieces.iter().map(|piece| record(checked, piece)));
    records
}

/// The outlines, while the table of pieces is open.
pub(super) fn draw_pieces(board: &Board, paths: &mut Vec<Option<PathView>>) {
    let state = board.state;
    let Some(checked) = state.fresh().filter(|_| state.book == Book::Pieces && shows_the_answers(state)) else {
        return;
    };
    let Some(Pieces { pieces, .. }) = checked.pieces() else { return };
    let mut outlines = PathText::default();
    for piece in pieces {
        let corners: Vec<Pixel> =
            piece.outline.iter().map(|[x, y]| board.camera.at((to_f64(&x.middle()), to_f64(&y.middle())))).collect();
        if !corners.is_empty() {
            outlines.polygon(&corners);
        }
    }
    paths.push(outlines.view("piece"));
}

/// Pieces are cut where the answers take the joints to be: they are drawn only where the board shows them there.
fn shows_the_answers(state: &State) -> bool {
    state.fresh().is_some_and(|checked| checked.report.points == state.points())
}
