//! Misfits drawn larger than they are, so that they can be seen: from the joint to where the printed value would have it.

use super::board::Board;
use super::labels::{Anchor, LabelView, Labels};
use super::path::{PathText, PathView};
use crate::checks::Question;
use crate::measure::pretty;
use crate::page::state::camera::to_f64;
use crate::page::state::{Pixel, Shown, State};
use crate::truss::{FigureId, FigureKind, JointId};

/// The greatest misfit is drawn about this long, in pixels, where it is smaller.
const LONGEST: f64 = 36.0;
/// The most misfits drawn.
const MOST: usize = 60;
/// The most misfits that are labelled.
const MOST_LABELLED: usize = 12;
/// Misfits are drawn one of these times as large.
const TIMES: [u32; 13] = [10_000, 5_000, 2_000, 1_000, 500, 200, 100, 50, 20, 10, 5, 2, 1];

/// One misfit: the joint it is drawn at and the way from there to where the figure would have it, in pixels.
struct Misfit {
    id: FigureId,
    at: Pixel,
    off: [f64; 2],
}

/// The figures whose misfits the board shows: those that the shown places do not agree with. At the bare sketch of loose
/// joints a misfit says nothing.
fn shown_figures(state: &State) -> Vec<FigureId> {
    let Some(checked) = state.fresh().filter(|_| state.question == Question::Close) else { return Vec::new() };
    let close = &checked.report.answers.close;
    let failing = || {
        let fails =
            |(index, reading): (usize, &crate::checks::Reading)| (!reading.holds).then_some(FigureId::new(index));
        close.readings.iter().enumerate().filter_map(fails).take(MOST).collect()
    };
    let of_suspect = |index: usize| {
        let both = if close.suspects.is_empty() {
            &close.pair[..]
        } else {
            close.suspects.get(index..=index).unwrap_or_default()
        };
        both.iter().map(|suspect| suspect.figure).collect()
    };
    let all_set = state.truss.joints.iter().all(|joint| !joint.loose);
    match state.shown {
        Shown::Without(index) => of_suspect(index),
        Shown::Layout if state.shows_without(0) => of_suspect(0),
        Shown::Nearest => failing(),
        _ if all_set => failing(),
        _ => Vec::new(),
    }
}

/// The misfits of a drawing, and how many times as large they are drawn.
pub(super) struct Misfits {
    found: Vec<Misfit>,
    /// The same for all of them.
    pub(super) times: u32,
}

impl Misfits {
    /// Those that the board shows; `None` when there is none.
    pub(super) fn of(board: &Board) -> Option<Misfits> {
        let found: Vec<Misfit> = shown_figures(board.state).into_iter().filter_map(|id| misfit(board, id)).collect();
        let longest = found.iter().map(|m| f64::hypot(m.off[0], m.off[1])).fold(0.0, f64::max);
        let times = TIMES.into_iter().find(|times| longest * f64::from(*times) <= LONGEST).unwrap_or(1);
        (longest > 0.0).then_some(Misfits { found, times })
    }
}

/// Draws the misfits, each with its joint's place by the figure, and names them where they are few.
pub(super) fn draw_misfits(board: &Board, misfits: &Misfits, labels: &mut Labels, paths: &mut Vec<Option<PathView>>) {
    let Misfits { found, times } = misfits;
    let (mut lines, mut ends) = (PathText::default(), PathText::default());
    for Misfit { id, at, off } in found {
        let way = off.map(|part| part * f64::from(*times));
        let length = f64::hypot(way[0], way[1]);
        let tip = Pixel::new(at.x + way[0], at.y + way[1]);
        let across = Pixel::new(-way[1] / length * 6.0, way[0] / length * 6.0);
        lines.line(*at, tip);
        ends.line(Pixel::new(tip.x - across.x, tip.y - across.y), Pixel::new(tip.x + across.x, tip.y + across.y));
        if found.len() <= MOST_LABELLED {
            labels.place(label_places(tip, way, length).map(|(at, anchor)| LabelView {
                at,
                turn: 0.0,
                anchor,
                class: "label doubtful",
                text: words(board.state, *id),
            }));
        }
    }
    paths.push(lines.view("misfit"));
    paths.push(ends.view("misfit end"));
}

fn label_places(tip: Pixel, way: [f64; 2], length: f64) -> [(Pixel, Anchor); 4] {
    let out = [way[0] / length, way[1] / length];
    let anchor = if out[0] < -0.3 { Anchor::End } else { Anchor::Start };
    let beyond =
        Pixel::new(tip.x + out[0] * 10.0 + if anchor == Anchor::Start { 6.0 } else { -6.0 }, tip.y + out[1] * 12.0);
    let aside = |x: f64, y: f64| Pixel::new(tip.x + x, tip.y + y);
    [
        (beyond, anchor),
        (aside(12.0, -14.0), Anchor::Start),
        (aside(12.0, 14.0), Anchor::Start),
        (aside(-12.0, 14.0), Anchor::End),
    ]
}

/// `f17 off 3/4"`; the misfit where the readings are about the places that are shown.
fn words(state: &State, id: FigureId) -> String {
    let mark = &state.truss.figure(id).mark;
    let is_read = !matches!(state.shown, Shown::Without(index) if index > 0);
    let reading = state.fresh().and_then(|checked| checked.report.answers.close.readings.get(id.index()));
    match reading.filter(|reading| is_read && !reading.misfit.is_empty()) {
        Some(reading) => format!("{mark} off {}", pretty(&reading.misfit)),
        None => format!("{mark} is off"),
    }
}

/// The misfit of one figure; `None` for one that has no value, or none that can be drawn.
fn misfit(board: &Board, id: FigureId) -> Option<Misfit> {
    let scale = board.camera.scale;
    let leg = |from: JointId, to: JointId| {
        let (a, b) = (board.pixel(from), board.pixel(to));
        [b.x - a.x, b.y - a.y]
    };
    let (to, off) = match &board.truss.figures.get(id.index())?.kind {
        FigureKind::Length { from, to, value } => {
            let way = leg(*from, *to);
            let length = f64::hypot(way[0], way[1]);
            let more = to_f64(&value.value) * scale - length;
            (*to, way.map(|part| part / length * more))
        }
        FigureKind::Run { from, to, value } => (*to, [to_f64(&value.value) * scale - leg(*from, *to)[0], 0.0]),
        FigureKind::Rise { from, to, value } => (*to, [0.0, -to_f64(&value.value) * scale - leg(*from, *to)[1]]),
        FigureKind::Pitch { from, to, rise, run } => {
            let way = leg(*from, *to);
            let slope = to_f64(&rise.value) / to_f64(&run.value);
            (*to, [0.0, way[0].abs() * slope * way[1].signum() - way[1]])
        }
        FigureKind::Angle { at, from, to, value } => {
            (*to, turned(leg(*at, *from), leg(*at, *to), to_f64(&value.value).to_radians()))
        }
        FigureKind::Spread { at, from, to, value } => {
            let (arm, way) = (leg(*at, *from), leg(*at, *to));
            let acute = to_f64(&value.value).clamp(0.0, 1.0).sqrt().asin();
            let is_obtuse = arm[0] * way[0] + arm[1] * way[1] < 0.0;
            (*to, turned(arm, way, if is_obtuse { std::f64::consts::PI - acute } else { acute }))
        }
        _ => return None,
    };
    off.iter().all(|part| part.is_finite()).then_some(Misfit { id, at: board.pixel(to), off })
}

/// The way from the end of an arm to where it would be at this angle from the other, along the arc.
fn turned(other: [f64; 2], arm: [f64; 2], angle: f64) -> [f64; 2] {
    let cross = other[0] * arm[1] - other[1] * arm[0];
    let dot = other[0] * arm[0] + other[1] * arm[1];
    let now = cross.atan2(dot);
    let more = angle * now.signum() - now;
    [-arm[1] * more, arm[0] * more]
}
