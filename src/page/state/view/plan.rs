//! The plan of a layout: its measures, and a preview.

use super::board::{DrawingView, drawing_view};
use crate::measure::pretty;
use crate::page::state::camera::{Camera, place_of};
use crate::page::state::plan::PlanField;
use crate::page::state::{Book, State};
use crate::truss::{Configuration, Truss};
use std::rc::Rc;

/// A plan, ready to be placed.
#[derive(Clone, Debug, PartialEq)]
pub struct PlanView {
    /// The configuration.
    pub configuration: Configuration,
    /// The measures that it has: which, what it is called, what is typed, and what that is understood as.
    pub fields: Vec<(PlanField, &'static str, String, String)>,
    /// Whether all figures are added.
    pub figured: bool,
    /// What is wrong, if anything.
    pub error: String,
    /// What it comes to: `16 joints, 29 members, 40 figures`.
    pub words: String,
    /// The preview, in a frame of [`PREVIEW`].
    pub preview: DrawingView,
}

/// Width and height of the preview.
pub const PREVIEW: (f64, f64) = (400.0, 150.0);

/// The plan, while it is open.
pub fn plan_view(state: &State) -> Option<PlanView> {
    let plan = state.plan.as_ref()?;
    let field = |field: PlanField| {
        let name = field.name(plan.configuration)?;
        let understood = pretty(&plan.understood(field, &state.truss));
        Some((field, name, plan.texts[field as usize].clone(), understood))
    };
    let (truss, error) = match plan.truss(&state.truss) {
        Ok(truss) => (truss, String::new()),
        Err(error) => (Truss::default(), pretty(&error)),
    };
    let words = match error.is_empty() {
        true => {
            format!("{} joints, {} members, {} figures", truss.joints.len(), truss.members.len(), truss.figures.len())
        }
        false => String::new(),
    };
    Some(PlanView {
        configuration: plan.configuration,
        fields: PlanField::ALL.into_iter().filter_map(field).collect(),
        figured: plan.figured,
        error,
        words,
        preview: preview(truss),
    })
}

fn preview(mut truss: Truss) -> DrawingView {
    truss.figures.clear();
    let places: Vec<_> = truss.joints.iter().map(|joint| place_of(&joint.point())).collect();
    // Marks and supports need room, strings do not.
    let (width, height) = PREVIEW;
    let mut camera = Camera::fitted(&places, (width, height + 90.0));
    camera.origin.y -= 14.0;
    let state = State {
        places: Rc::new(places),
        truss: Rc::new(truss),
        camera,
        board_size: PREVIEW,
        book: Book::Joints,
        ..State::default()
    };
    drawing_view(&state)
}
