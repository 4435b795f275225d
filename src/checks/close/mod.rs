//! Do the figures close? (in preparation)

use super::answers::{CloseAnswer, CloseState, Proof};
use super::findings::Finding;
use super::limits::Limits;
use crate::truss::Truss;

/// The answer and its findings.
pub fn close(_truss: &Truss, _limits: &Limits) -> (CloseAnswer, Vec<Finding>) {
    let answer = CloseAnswer {
        state: CloseState::NoFigures,
        proof: Proof::None,
        summary: String::new(),
        layout: None,
        free_joints: Vec::new(),
        suspects: Vec::new(),
        readings: Vec::new(),
    };
    (answer, Vec::new())
}
