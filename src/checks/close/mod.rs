//! Do the figures close? A layout that agrees with every figure, or a proof that none exists.
//!
//! ```text
//! figures -> meaning (exact intervals) -> search (guided by floating point) -> layout    -> verify
//!                                                                          \-> exclusion -> judged exactly
//! ```
//!
//! # Invariants
//!
//! "Closes" rests on a layout that [`verify`] found to agree, "does not close" on a certificate checked exactly; floating
//! point only guides. No clock, no randomness: work is bounded by counts in [`Effort`].

mod exclusion;
mod explain;
mod freedom;
mod implied;
mod meaning;
mod misfits;
#[cfg(test)]
mod networks;
mod proposal;
mod readings;
mod search;
mod settle;
mod sides;
mod slips;
mod strings;
mod suspects;
mod trial;
mod verify;
mod words;

use super::{CloseAnswer, CloseState, Finding, Proof, Suspect};
use crate::exact::{Interval, Point};
use crate::truss::{Edit, FigureId, FigureValue, Truss};
use serde::{Deserialize, Serialize};

/// How much work may be spent; counts, so that the answer is the same on every machine.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Effort {
    /// Rounds of adjustment from the sketch.
    pub adjustments: usize,
    /// Rounds of linear programming for one question.
    pub rounds: usize,
    /// Questions of the form "do the others close without these figures?".
    pub trials: usize,
    /// Splits of a box in one exclusion.
    pub splits: usize,
    /// Loose joints beyond which nothing is searched.
    pub joints: usize,
}

impl Default for Effort {
    fn default() -> Self {
        Effort { adjustments: 60, rounds: 12, trials: 400, splits: 64, joints: 5_000 }
    }
}

/// How far the work has come.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Progress {
    /// What is being done.
    pub stage: Stage,
    /// Steps done of it.
    pub done: usize,
    /// Steps there are, as far as is known.
    pub of: usize,
}

/// What is being done, in the order in which it is done.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
pub enum Stage {
    /// A layout is being looked for.
    Layout,
    /// A proof that there is none is being looked for.
    Exclusion,
    /// Figures are left out one by one.
    Suspects,
}

/// Answers "do the figures close?".
pub fn close(truss: &Truss, effort: &Effort) -> (CloseAnswer, Vec<Finding>) {
    close_watched(truss, effort, &mut |_| true)
}

/// The same, telling how far it is; when `watch` answers false it stops, with `not settled` unless that was settled before.
pub fn close_watched(
    truss: &Truss,
    effort: &Effort,
    watch: &mut dyn FnMut(Progress) -> bool,
) -> (CloseAnswer, Vec<Finding>) {
    if truss.figures.is_empty() {
        return (answer(CloseState::NoFigures, Proof::None, "no figures to ask about"), Vec::new());
    }
    let (answer, mut findings) = if truss.joints.iter().any(|joint| joint.loose) {
        settle::settle(truss, effort, watch)
    } else {
        set_joints(truss)
    };
    findings.extend(strings::short_strings(truss));
    (answer, findings)
}

fn answer(state: CloseState, proof: Proof, summary: impl Into<String>) -> CloseAnswer {
    CloseAnswer {
        state,
        proof,
        summary: summary.into(),
        layout: None,
        free_joints: Vec::new(),
        suspects: Vec::new(),
        readings: Vec::new(),
        pair: Vec::new(),
        nearest: None,
    }
}

/// Every joint is set: the figures hold or they do not.
fn set_joints(truss: &Truss) -> (CloseAnswer, Vec<Finding>) {
    let places = truss.points();
    let doubtful = verify::figures_that_fail(truss, &places);
    let certain = |id: &FigureId| meaning::conditions(truss, truss.figure(*id)).iter().any(|c| c.fails(&places));
    let failing: Vec<FigureId> = doubtful.iter().copied().filter(certain).collect();
    let count = truss.figures.len();
    let mut found = if doubtful.is_empty() {
        answer(CloseState::Closes, Proof::Layout, format!("{}, every one checked", settle::figures_counted(count)))
    } else if failing.is_empty() {
        answer(CloseState::NotSettled, Proof::Search, "an angle lies on the very border of its figure")
    } else {
        let summary = format!("{} of {count} figures disagree with the set joints", failing.len());
        answer(CloseState::DoesNotClose, Proof::Exclusion, summary)
    };
    found.readings = readings::readings(truss, &places);
    found.suspects = lone_suspect(truss, &doubtful, &places).into_iter().collect();
    found.layout = doubtful.is_empty().then(|| places.clone());
    let told = failing.iter().filter(|id| told_here(truss, **id));
    let findings = told.map(|id| misfits::misfit(truss, *id, &places)).collect();
    (found, findings)
}

/// Square, in line, parallel and equal among set joints are told by the question of true lines.
pub(crate) fn told_here(truss: &Truss, id: FigureId) -> bool {
    use crate::truss::FigureKind::{Level, Plumb};
    let kind = &truss.figure(id).kind;
    !kind.is_relation() || matches!(kind, Level { .. } | Plumb { .. })
}

/// Among set joints a figure is a suspect only when it is the one that fails.
fn lone_suspect(truss: &Truss, failing: &[FigureId], places: &[Point]) -> Option<Suspect> {
    let [id] = failing else { return None };
    let condition = meaning::conditions(truss, truss.figure(*id)).into_iter().find(|c| !c.holds(places))?;
    let implied_range: Interval = readings::enclosed_value(&condition, places)?;
    let proposal = misfits::implied(truss, *id, places)?;
    let slip = match &proposal.edit {
        Edit::FigureReads(_, FigureValue::One(right)) => implied::explained(truss, *id, &right.value),
        _ => None,
    };
    Some(Suspect { figure: *id, implied: proposal.text, implied_range, slip, layout: places.to_vec() })
}
