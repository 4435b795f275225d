//! Figured dimensions on the drawing: strings of runs below, rises to the right, lengths along members, angles at corners.

use super::board::{Board, figure_text};
use super::labels::{Anchor, CHARACTER, LabelView, Labels, reading_turn};
use super::path::{PathText, PathView};
use crate::exact::order;
use crate::measure::pretty;
use crate::page::state::{Pixel, Shown};
use crate::truss::{FigureId, FigureKind, JointId};

/// Pixels between the drawing and the first string, and between strings.
const FIRST: f64 = 46.0;
const APART: f64 = 30.0;
/// The most rows of strings on each side.
const ROWS: usize = 8;
/// The most figures drawn.
const MOST: usize = 600;

/// A dimension between two places of one axis.
struct Span {
    id: FigureId,
    lo: f64,
    hi: f64,
    text: String,
}

/// Draws strings of runs below the truss and of rises at its right; gives back their lines.
pub(super) fn draw_strings(board: &Board, labels: &mut Labels, paths: &mut Vec<Option<PathView>>) -> Vec<PathView> {
    let (mut runs, mut rises) = (Vec::new(), Vec::new());
    for (index, figure) in board.truss.figures.iter().enumerate().take(4 * MOST) {
        let id = FigureId::new(index);
        let span = |a: f64, b: f64| Span { id, lo: a.min(b), hi: a.max(b), text: figure_text(board, id) };
        match figure.kind {
            FigureKind::Run { from, to, .. } => runs.push(span(board.pixel(from).x, board.pixel(to).x)),
            FigureKind::Rise { from, to, .. } => rises.push(span(board.pixel(from).y, board.pixel(to).y)),
            _ => {}
        }
    }
    let fold = |f: fn(&Pixel) -> f64| board.pixels.iter().map(f).fold(f64::NEG_INFINITY, f64::max);
    let (below, right) = (fold(|p| p.y) + FIRST, fold(|p| p.x) + FIRST);
    let mut lines = Lines::default();
    for (row, span, text) in rows(runs) {
        let y = below + row as f64 * APART;
        let place = |x: f64| Pixel::new(x, y);
        let label = LabelView {
            at: Pixel::new((span.lo + span.hi) / 2.0, y - 9.0),
            turn: 0.0,
            anchor: Anchor::Middle,
            class: "",
            text,
        };
        lines.dimension(board, labels, &span, [place(span.lo), place(span.hi)], label);
    }
    for (row, span, text) in rows(rises) {
        let x = right + row as f64 * APART;
        let place = |y: f64| Pixel::new(x, y);
        let label = LabelView {
            at: Pixel::new(x - 9.0, (span.lo + span.hi) / 2.0),
            turn: -90.0,
            anchor: Anchor::Middle,
            class: "",
            text,
        };
        lines.dimension(board, labels, &span, [place(span.lo), place(span.hi)], label);
    }
    paths.push(lines.ticks.view("tick"));
    [lines.plain.view("dimension"), lines.doubtful.view("dimension doubtful")].into_iter().flatten().collect()
}

#[derive(Default)]
struct Lines {
    plain: PathText,
    doubtful: PathText,
    ticks: PathText,
}

impl Lines {
    fn dimension(&mut self, board: &Board, labels: &mut Labels, span: &Span, ends: [Pixel; 2], label: LabelView) {
        if !board.sees(ends[0], ends[1]) {
            return;
        }
        let doubtful = board.doubtful.contains(&span.id);
        let path = if doubtful { &mut self.doubtful } else { &mut self.plain };
        path.line(ends[0], ends[1]);
        for end in ends {
            self.ticks.line(Pixel::new(end.x - 4.0, end.y + 4.0), Pixel::new(end.x + 4.0, end.y - 4.0));
        }
        if label.width() + 10.0 > span.hi - span.lo {
            return;
        }
        place_value(board, labels, span.id, label);
    }
}

/// Places the value of a figure; a suspect is struck through, with what it should read beside it.
fn place_value(board: &Board, labels: &mut Labels, id: FigureId, label: LabelView) {
    let implied = board.state.fresh().and_then(|checked| {
        let suspects = checked.report.answers.close.blamed();
        suspects.iter().find(|suspect| suspect.figure == id).map(|suspect| pretty(&suspect.implied))
    });
    match implied {
        Some(implied) => {
            let (sin, cos) = label.turn.to_radians().sin_cos();
            let beside = Pixel::new(label.at.x - sin * 19.0, label.at.y + cos * 19.0);
            labels.force(LabelView { at: beside, class: "label mend", text: implied, ..label.clone() });
            labels.force(LabelView { class: "label figure struck", ..label });
        }
        None if board.doubtful.contains(&id) => labels.force(LabelView { class: "label figure doubtful", ..label }),
        None => {
            labels.place([LabelView { class: "label figure", ..label }]);
        }
    }
}

/// Gives each span a row in which it stands on no other, shortest first; repeated panels are named on their overall.
fn rows(mut spans: Vec<Span>) -> Vec<(usize, Span, String)> {
    // A figure of nothing (a joint plumb over another) has no dimension line.
    spans.retain(|span| span.hi - span.lo > 1.0);
    spans.truncate(MOST);
    order::sort_by(&mut spans, |a, b| (a.hi - a.lo).total_cmp(&(b.hi - b.lo)));
    let mut taken: Vec<Vec<(f64, f64)>> = Vec::new();
    let mut placed: Vec<(usize, Span, String)> = Vec::new();
    for span in spans {
        let free = |row: &Vec<(f64, f64)>| row.iter().all(|&(lo, hi)| hi <= span.lo + 0.5 || span.hi <= lo + 0.5);
        let row = taken.iter().position(free).unwrap_or(taken.len());
        if row >= ROWS {
            continue;
        }
        if row == taken.len() {
            taken.push(Vec::new());
        }
        taken[row].push((span.lo, span.hi));
        let text = with_panels(&placed, &span);
        placed.push((row, span, text));
    }
    placed
}

/// `40'-0" = 8 @ 5'-0"`, where equal panels make up the span exactly; else its own text.
fn with_panels(placed: &[(usize, Span, String)], whole: &Span) -> String {
    let inside = |span: &&Span| span.lo >= whole.lo - 0.5 && span.hi <= whole.hi + 0.5;
    let mut panels: Vec<&Span> = placed.iter().map(|(_, span, _)| span).filter(inside).collect();
    order::sort_by(&mut panels, |a, b| a.lo.total_cmp(&b.lo));
    let mut reach = whole.lo;
    for panel in &panels {
        if (panel.lo - reach).abs() > 0.5 || panel.text != panels[0].text {
            return whole.text.clone();
        }
        reach = panel.hi;
    }
    match panels.len() {
        0 | 1 => whole.text.clone(),
        n if (reach - whole.hi).abs() <= 0.5 => format!("{} = {n} @ {}", whole.text, panels[0].text),
        _ => whole.text.clone(),
    }
}

/// Draws lengths along their lines, and pitches below theirs.
pub(super) fn draw_lengths(board: &Board, labels: &mut Labels, paths: &mut Vec<Option<PathView>>) {
    let mut lines = PathText::default();
    let mut ordered: Vec<(usize, &crate::truss::Figure)> =
        board.truss.figures.iter().enumerate().take(4 * MOST).collect();
    order::sort_by_key(&mut ordered, |(index, _)| !board.doubtful.contains(&FigureId::new(*index)));
    for (index, figure) in ordered {
        let (from, to, side) = match figure.kind {
            FigureKind::Length { from, to, .. } => (from, to, 1.0),
            FigureKind::Pitch { from, to, .. } => (from, to, -1.0),
            _ => continue,
        };
        let (a, b) = (board.pixel(from), board.pixel(to));
        if !board.sees(a, b) {
            continue;
        }
        let joined = |m: &crate::truss::Member| m.ends() == [from, to] || m.ends() == [to, from];
        if side > 0.0 && board.truss.members.len() <= 2000 && !board.truss.members.iter().any(joined) {
            lines.line(a, b);
        }
        along(board, labels, FigureId::new(index), a, b, side);
    }
    paths.push(lines.view("dimension aligned"));
}

fn along(board: &Board, labels: &mut Labels, id: FigureId, a: Pixel, b: Pixel, side: f64) {
    let text = figure_text(board, id);
    let room = a.distance(b);
    let doubtful = board.doubtful.contains(&id);
    if !doubtful && text.chars().count() as f64 * CHARACTER + 14.0 > room {
        return;
    }
    let turn = reading_turn(a, b);
    let (sin, cos) = turn.to_radians().sin_cos();
    let proposal = |share: f64, out: f64| {
        let middle = a.towards(b, share);
        let at = Pixel::new(middle.x + sin * out, middle.y - cos * out);
        LabelView { at, turn, anchor: Anchor::Middle, class: "label figure", text: text.clone() }
    };
    if doubtful {
        return place_value(board, labels, id, proposal(0.5, 10.0));
    }
    let outs = [10.0 * side, -10.0 * side];
    labels.place([0.5, 0.42, 0.58].into_iter().flat_map(|share| outs.map(|out| proposal(share, out))));
}

/// Draws angles and spreads as arcs at their corners, and square corners as small squares.
pub(super) fn draw_corners(board: &Board, labels: &mut Labels, paths: &mut Vec<Option<PathView>>) {
    let mut arcs = PathText::default();
    for (index, figure) in board.truss.figures.iter().enumerate().take(4 * MOST) {
        let (at, from, to, is_square) = match figure.kind {
            FigureKind::Angle { at, from, to, .. } | FigureKind::Spread { at, from, to, .. } => (at, from, to, false),
            FigureKind::Square { at, from, to } => (at, from, to, true),
            _ => continue,
        };
        corner(board, labels, &mut arcs, FigureId::new(index), [at, from, to], is_square);
    }
    paths.push(arcs.view("dimension corner"));
}

fn corner(
    board: &Board,
    labels: &mut Labels,
    arcs: &mut PathText,
    id: FigureId,
    joints: [JointId; 3],
    is_square: bool,
) {
    let [at, from, to] = joints.map(|joint| board.pixel(joint));
    let unit = |end: Pixel, out: f64| at.towards(end, out / at.distance(end).max(1e-6));
    if is_square {
        let (p, q) = (unit(from, 10.0), unit(to, 10.0));
        let corner = Pixel::new(p.x + q.x - at.x, p.y + q.y - at.y);
        arcs.line(p, corner);
        arcs.line(corner, q);
        return;
    }
    let (p, q) = (unit(from, 24.0), unit(to, 24.0));
    let turn = (p.x - at.x) * (q.y - at.y) - (p.y - at.y) * (q.x - at.x);
    arcs.arc(p, 24.0, turn > 0.0, q);
    let middle = p.towards(q, 0.5);
    let mut text = figure_text(board, id);
    if matches!(board.truss.figure(id).kind, FigureKind::Angle { .. }) {
        text.push('°');
    }
    let label = LabelView { at: unit(middle, 40.0), turn: 0.0, anchor: Anchor::Middle, class: "label figure", text };
    if board.state.shown != Shown::Sketch || !board.doubtful.contains(&id) {
        labels.place([label.clone(), LabelView { at: unit(middle, 54.0), ..label }]);
    } else {
        place_value(board, labels, id, label);
    }
}
