//! Does it stand? The exact rank of the rigidity matrix, and the motion when it is short.
//!
//! ```text
//! Matrix -> bodies (rigid by triangles), or
//! Matrix -> Pattern (order of elimination) -> Factor (modulo a prime) -> lift (exact motion) -> answer
//! ```
//!
//! Unknowns are two for each joint that a member reaches or a support holds; a joint without either is told by *is it
//! clear?* and counts for nothing here.

mod bodies;
mod factor;
mod judge;
mod lift;
mod matrix;
mod order;
mod pebbles;
mod reasons;
mod supports;
mod tell;

use super::answers::{Motion, StandsAnswer, StandsState};
use super::findings::{Finding, Level, Rule};
use super::frame::Frame;
use super::print::counted;
use crate::truss::JointId;
use judge::{Judged, judge};
use matrix::Matrix;

/// Answers the question for a placed truss.
pub(crate) fn stands(frame: &Frame) -> (StandsAnswer, Vec<Finding>) {
    let matrix = Matrix::new(frame);
    let rows = matrix.rows.len() - matrix.ground;
    let columns = 2 * matrix.joints.len();
    let unknowns = if frame.truss.supports.is_empty() { columns.saturating_sub(3) } else { columns };
    match judge(frame, &matrix) {
        Ok(judged) => {
            let found = tell::findings(frame, &matrix, &judged, unknowns);
            let answer = StandsAnswer {
                state: state(frame, &judged),
                summary: summary(frame, &matrix, &judged, unknowns),
                rank: judged.rank,
                unknowns,
                spare_members: rows - judged.rank,
                motion: motion(&matrix, &judged),
            };
            (answer, found)
        }
        Err(factor::TooMuch) => not_settled(unknowns),
    }
}

/// True when the members and holds are proved to have a full rank.
pub(crate) fn is_held(frame: &Frame) -> bool {
    bodies::full_rank(frame).is_some() || judge::is_full(frame, &Matrix::new(frame))
}

fn state(frame: &Frame, judged: &Judged) -> StandsState {
    match judged {
        _ if frame.truss.supports.is_empty() => StandsState::NoSupports,
        Judged { ways: 0, .. } => StandsState::Rigid,
        Judged { is_generic: true, .. } => StandsState::CriticalForm,
        _ => StandsState::Mechanism,
    }
}

fn summary(frame: &Frame, matrix: &Matrix, judged: &Judged, unknowns: usize) -> String {
    if matrix.joints.is_empty() {
        return "no member and no support is drawn".into();
    }
    let rank = format!("rank {} of {unknowns}", judged.rank);
    let body = if frame.truss.supports.is_empty() { " as a free body, no supports drawn" } else { "" };
    let spare = (matrix.rows.len() - matrix.ground).saturating_sub(judged.rank);
    let ways = counted(judged.ways, "way to move", "ways to move");
    match (judged.ways, spare) {
        (0, 0) => format!("{rank}{body}: every joint is held, with nothing to spare"),
        (0, spare) => format!("{rank}{body}: every joint is held, with {spare} to spare"),
        _ => format!("{rank}{body}: {ways}"),
    }
}

fn motion(matrix: &Matrix, judged: &Judged) -> Vec<Motion> {
    let Some(velocities) = &judged.motion else { return Vec::new() };
    let moving = matrix.joints.iter().enumerate().filter(|(pair, _)| velocities.moves(*pair));
    moving.map(|(pair, &joint)| Motion { joint: JointId(joint), velocity: velocities.vector(pair) }).collect()
}

fn not_settled(unknowns: usize) -> (StandsAnswer, Vec<Finding>) {
    let text = "the members are so tangled that the rank was not found within the bound of work: nothing is said about whether it stands";
    let answer = StandsAnswer {
        state: StandsState::NotSettled,
        summary: "not settled within the bound of work".into(),
        rank: 0,
        unknowns,
        spare_members: 0,
        motion: Vec::new(),
    };
    (answer, vec![Finding::new(Rule::Mechanism, Level::Caution, text)])
}
