//! The drawing: everything on the board that does not move with the pointer.

use super::dimensions::{draw_corners, draw_lengths, draw_strings};
use super::labels::{Anchor, LabelView, Labels};
use super::misfits::{Misfits, draw_misfits};
use super::path::{PathText, PathView, tenths};
use super::pieces::draw_pieces;
use crate::checks::{Finding, Level, Question, Rule};
use crate::exact::order;
use crate::measure::pretty;
use crate::page::state::camera::to_f64;
use crate::page::state::{Camera, Pixel, Shown, State};
use crate::truss::{FigureId, JointId, MemberId, Role, SupportKind, Truss};
use std::collections::HashSet;

/// The drawing, ready to be placed.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct DrawingView {
    /// Lines, from the lowest to the topmost.
    pub paths: Vec<PathView>,
    /// Texts.
    pub labels: Vec<LabelView>,
    /// What the board shows, in words; empty when it is the joints as entered.
    pub caption: String,
    /// The shape of a motion: path data at rest and at its far ends.
    pub motion: Option<[String; 3]>,
    /// The drawing in one sentence, for those who cannot see it.
    pub sentence: String,
}

/// A text's turn, as an attribute: empty when it is not turned.
pub struct Turned;

impl Turned {
    /// The value of `transform` for a label.
    pub fn attribute(label: &LabelView) -> String {
        let (x, y) = (tenths(label.at.x), tenths(label.at.y));
        if label.turn == 0.0 {
            format!("translate({x} {y})")
        } else {
            format!("translate({x} {y}) rotate({})", tenths(label.turn))
        }
    }
}

/// What is drawn where: shared by the parts of the drawing.
pub(super) struct Board<'a> {
    pub(super) state: &'a State,
    pub(super) truss: &'a Truss,
    pub(super) camera: Camera,
    pub(super) pixels: Vec<Pixel>,
    pub(super) doubtful: HashSet<FigureId>,
}

impl<'a> Board<'a> {
    pub(super) fn new(state: &'a State) -> Board<'a> {
        let pixels = state.places.iter().map(|&place| state.camera.at(place)).collect();
        Board { state, truss: &state.truss, camera: state.camera, pixels, doubtful: doubtful(state) }
    }

    pub(super) fn pixel(&self, id: JointId) -> Pixel {
        self.pixels.get(id.index()).copied().unwrap_or_default()
    }

    pub(super) fn ends(&self, id: MemberId) -> [Pixel; 2] {
        self.truss
            .members
            .get(id.index())
            .map_or_else(Default::default, |member| member.ends().map(|id| self.pixel(id)))
    }

    /// True when a line between the pixels can be seen.
    pub(super) fn sees(&self, a: Pixel, b: Pixel) -> bool {
        let (width, height) = self.state.board_size;
        a.x.max(b.x) >= -20.0 && a.x.min(b.x) <= width + 20.0 && a.y.max(b.y) >= -20.0 && a.y.min(b.y) <= height + 20.0
    }
}

/// The figures that are suspects or that the places do not agree with.
fn doubtful(state: &State) -> HashSet<FigureId> {
    let Some(checked) = state.fresh() else { return HashSet::new() };
    let close = &checked.report.answers.close;
    let failing = close.readings.iter().enumerate().filter(|(_, r)| !r.holds).map(|(index, _)| FigureId::new(index));
    let suspects = close.blamed().iter().map(|suspect| suspect.figure);
    if close.blamed().is_empty() { failing.collect() } else { suspects.collect() }
}

/// The findings that the board shows: the open one, else all faults and cautions of the chosen question.
fn shown_findings(state: &State) -> Vec<&Finding> {
    let Some(checked) = state.fresh() else { return Vec::new() };
    let findings = &checked.report.findings;
    match state.open_finding.and_then(|index| findings.get(index)) {
        Some(open) => vec![open],
        None => findings
            .iter()
            .filter(|f| f.rule.question() == state.question && f.level != Level::Note)
            // Where figures are under suspicion, they are what is shown.
            .filter(|f| f.rule != Rule::Excluded || checked.report.answers.close.blamed().is_empty())
            .take(200)
            .collect(),
    }
}

/// The drawing, from the state.
pub fn drawing_view(state: &State) -> DrawingView {
    let board = Board::new(state);
    let mut paths: Vec<Option<PathView>> = Vec::new();
    let mut labels = Labels::default();
    for pixel in board.pixels.iter().take(4000) {
        labels.block(*pixel);
    }
    draw_supports(&board, &mut paths);
    let strings = draw_strings(&board, &mut labels, &mut paths);
    draw_members(&board, &mut paths);
    draw_pieces(&board, &mut paths);
    draw_findings(&board, &mut paths);
    draw_joints(&board, &mut paths);
    draw_marks(&board, &mut labels);
    draw_lengths(&board, &mut labels, &mut paths);
    draw_corners(&board, &mut labels, &mut paths);
    let misfits = Misfits::of(&board);
    if let Some(misfits) = &misfits {
        draw_misfits(&board, misfits, &mut labels, &mut paths);
    }
    DrawingView {
        paths: strings.into_iter().chain(paths.into_iter().flatten()).collect(),
        labels: labels.into_views(),
        caption: caption(state, misfits.map(|misfits| misfits.times)),
        motion: motion(&board),
        sentence: sentence(state),
    }
}

/// What is shown, and how much larger misfits are drawn.
fn caption(state: &State, times: Option<u32>) -> String {
    let places = places_caption(state);
    match times.filter(|times| *times > 1) {
        Some(times) if places.is_empty() => format!("Misfits drawn {times} times as large"),
        Some(times) => format!("{places}, misfits {times} times as large"),
        None => places,
    }
}

fn places_caption(state: &State) -> String {
    if state.other_places().is_none() {
        return String::new();
    }
    match state.shown {
        Shown::Layout if state.has_layout() => layout_caption(state),
        Shown::Sketch | Shown::Layout => "Showing your sketch".into(),
        Shown::Nearest => "Showing the nearest places".into(),
        Shown::Without(index) => {
            let suspect = state.fresh().and_then(|checked| checked.report.answers.close.blamed().get(index));
            suspect.map_or_else(String::new, |s| {
                let others = state.fresh().map(|checked| checked.report.answers.close.pair.as_slice());
                let both = others.filter(|pair| pair.iter().any(|other| other == s)).unwrap_or(std::slice::from_ref(s));
                let marks: Vec<&str> = both.iter().map(|s| state.truss.figure(s.figure).mark.as_str()).collect();
                format!("Showing the layout without {}", marks.join(" and "))
            })
        }
    }
}

/// The layout that is shown: the proof, or the one without the only suspect.
fn layout_caption(state: &State) -> String {
    let close = state.fresh().map(|checked| &checked.report.answers.close);
    match close.map(|close| (close.layout.is_some(), close.suspects.as_slice())) {
        Some((false, [only])) => format!("Showing the layout without {}", state.truss.figure(only.figure).mark),
        _ => "Showing the layout that closes".into(),
    }
}

fn sentence(state: &State) -> String {
    let truss = &state.truss;
    format!(
        "Drawing of {} joints, {} members, {} supports and {} figures. The tables below hold the same.",
        truss.joints.len(),
        truss.members.len(),
        truss.supports.len(),
        truss.figures.len()
    )
}

fn draw_members(board: &Board, paths: &mut Vec<Option<PathView>>) {
    for (role, class) in [
        (Role::Other, "member other"),
        (Role::Web, "member web"),
        (Role::Post, "member post"),
        (Role::BottomChord, "member chord"),
        (Role::TopChord, "member chord"),
    ] {
        let mut path = PathText::default();
        for member in board.truss.members.iter().filter(|member| member.role == role) {
            let [a, b] = member.ends().map(|id| board.pixel(id));
            if board.sees(a, b) {
                path.line(a, b);
            }
        }
        paths.push(path.view(class));
    }
}

/// Draws the members and joints that findings are about over the others, cautions first, faults on top.
fn draw_findings(board: &Board, paths: &mut Vec<Option<PathView>>) {
    let findings = shown_findings(board.state);
    for (level, members, points) in [
        (Level::Note, "lit note", "lit-point note"),
        (Level::Caution, "lit caution", "lit-point caution"),
        (Level::Fault, "lit fault", "lit-point fault"),
    ] {
        let (mut lines, mut marks) = (PathText::default(), PathText::default());
        for finding in findings.iter().filter(|finding| finding.level == level) {
            for id in finding.members.iter().take(400) {
                let [a, b] = board.ends(*id);
                lines.line(a, b);
            }
            for id in finding.joints.iter().take(400) {
                marks.circle(board.pixel(*id), 7.5);
            }
            for point in finding.points.iter().take(400) {
                marks.cross(board.camera.pixel(point), 6.0);
            }
        }
        if level == Level::Fault {
            light_suspect(board, &mut lines, &mut marks);
        }
        paths.push(lines.view(members));
        paths.push(marks.view(points));
    }
}

/// Lights the suspect that is open, or the first: its joints, and its member where it has one.
fn light_suspect(board: &Board, lines: &mut PathText, marks: &mut PathText) {
    let state = board.state;
    let Some(checked) = state.fresh().filter(|_| state.question == Question::Close && state.open_finding.is_none())
    else {
        return;
    };
    let suspects = checked.report.answers.close.blamed();
    let Some(suspect) = suspects.get(state.open_suspect.unwrap_or(0)) else { return };
    let joints = board.truss.figure(suspect.figure).kind.joints();
    for &joint in &joints {
        marks.circle(board.pixel(joint), 7.5);
    }
    if let [from, to] = joints[..]
        && board.truss.members.iter().any(|m| m.ends() == [from, to] || m.ends() == [to, from])
    {
        lines.line(board.pixel(from), board.pixel(to));
    }
}

fn draw_joints(board: &Board, paths: &mut Vec<Option<PathView>>) {
    let (mut set, mut loose) = (PathText::default(), PathText::default());
    let crowded = board.pixels.len() > 600;
    for (joint, &pixel) in board.truss.joints.iter().zip(&board.pixels) {
        if board.sees(pixel, pixel) {
            let path = if joint.loose { &mut loose } else { &mut set };
            path.circle(
                pixel,
                if crowded {
                    2.0
                } else if joint.loose {
                    2.8
                } else {
                    3.8
                },
            );
        }
    }
    paths.push(set.view("joint"));
    paths.push(loose.view("joint loose"));
}

/// Support symbols: a triangle for a pin; a triangle on a line with a gap for a roller, turned to its normal.
fn draw_supports(board: &Board, paths: &mut Vec<Option<PathView>>) {
    let (mut solid, mut ground) = (PathText::default(), PathText::default());
    for support in board.truss.supports.iter().take(2000) {
        let (normal, is_roller) = match &support.kind {
            SupportKind::Pin => ((0.0, 1.0), false),
            SupportKind::Roller { normal } => ((to_f64(&normal[0].value), to_f64(&normal[1].value)), true),
        };
        let length = f64::hypot(normal.0, normal.1);
        let (nx, ny) = if length > 0.0 { (normal.0 / length, -normal.1 / length) } else { (0.0, -1.0) };
        let at = board.pixel(support.joint);
        // `along` runs against the normal, away from the truss; `aside` square to it.
        let place = |along: f64, aside: f64| Pixel::new(at.x - nx * along - ny * aside, at.y - ny * along + nx * aside);
        solid.polygon(&[place(5.0, 0.0), place(19.0, -9.0), place(19.0, 9.0)]);
        ground
            .line(place(if is_roller { 23.5 } else { 19.0 }, -15.0), place(if is_roller { 23.5 } else { 19.0 }, 15.0));
    }
    paths.push(ground.view("ground"));
    paths.push(solid.view("support"));
}

fn draw_marks(board: &Board, labels: &mut Labels) {
    let visible: Vec<usize> =
        (0..board.pixels.len()).filter(|&i| board.sees(board.pixels[i], board.pixels[i])).take(400).collect();
    if visible.len() >= 400 {
        return;
    }
    let mut around: Vec<Vec<f64>> = vec![Vec::new(); board.pixels.len()];
    for member in &board.truss.members {
        let [a, b] = member.ends().map(|id| board.pixel(id));
        for (id, from, to) in [(member.from, a, b), (member.to, b, a)] {
            if let Some(list) = around.get_mut(id.index()) {
                list.push((to.y - from.y).atan2(to.x - from.x));
            }
        }
    }
    for support in &board.truss.supports {
        if let Some(list) = around.get_mut(support.joint.index()) {
            list.push(std::f64::consts::FRAC_PI_2);
        }
    }
    for index in visible {
        let Some(joint) = board.truss.joints.get(index) else { continue };
        let at = board.pixels[index];
        let proposals = free_directions(&mut around[index]).into_iter().map(|angle| {
            let (sin, cos) = angle.sin_cos();
            let anchor = match cos {
                c if c > 0.5 => Anchor::Start,
                c if c < -0.5 => Anchor::End,
                _ => Anchor::Middle,
            };
            let out = if anchor == Anchor::Middle { 16.0 } else { 13.5 };
            LabelView {
                at: Pixel::new(at.x + cos * out, at.y + sin * 16.0),
                turn: 0.0,
                anchor,
                class: "label mark",
                text: joint.mark.clone(),
            }
        });
        labels.place(proposals);
    }
}

/// The middles of the gaps between the directions, widest first.
fn free_directions(directions: &mut [f64]) -> Vec<f64> {
    use std::f64::consts::{FRAC_PI_2, TAU};
    order::sort_by(directions, f64::total_cmp);
    let Some((&first, _)) = directions.split_first() else { return vec![-FRAC_PI_2] };
    let next = directions.iter().skip(1).copied().chain([first + TAU]);
    let mut gaps: Vec<(f64, f64)> = directions.iter().zip(next).map(|(&a, b)| (b - a, (a + b) / 2.0)).collect();
    order::sort_by(&mut gaps, |a, b| b.0.total_cmp(&a.0));
    gaps.into_iter().map(|(_, middle)| middle).collect()
}

/// The most members whose motion is drawn.
const MOST_MOVING: usize = 3000;
/// How far the joint that moves most is drawn out of its place, in pixels.
const STROKE: f64 = 26.0;

fn motion(board: &Board) -> Option<[String; 3]> {
    let checked = board.state.fresh().filter(|_| board.state.question == Question::Stands)?;
    let motion = &checked.report.answers.stands.motion;
    if motion.is_empty() || board.truss.members.len() > MOST_MOVING {
        return None;
    }
    let mut velocity = vec![(0.0, 0.0); board.pixels.len()];
    for part in motion {
        *velocity.get_mut(part.joint.index())? = (to_f64(&part.velocity.x), to_f64(&part.velocity.y));
    }
    let fastest = velocity.iter().map(|v| f64::hypot(v.0, v.1)).fold(0.0, f64::max);
    if fastest <= 0.0 {
        return None;
    }
    let shape = |share: f64| {
        let mut path = PathText::default();
        let place = |id: JointId| {
            let (pixel, v) = (board.pixel(id), velocity[id.index()]);
            Pixel::new(pixel.x + v.0 / fastest * STROKE * share, pixel.y - v.1 / fastest * STROKE * share)
        };
        for member in &board.truss.members {
            path.line(place(member.from), place(member.to));
        }
        path.0
    };
    Some([shape(0.0), shape(1.0), shape(-1.0)])
}

pub(super) fn figure_text(board: &Board, id: FigureId) -> String {
    board
        .truss
        .figures
        .get(id.index())
        .and_then(|figure| figure.kind.value_text())
        .map(|text| pretty(&text))
        .unwrap_or_default()
}
