//! A value that a figure should read instead, as text and as the edit that puts it there.

use super::words;
use crate::exact::Rational;
use crate::measure::Written;
use crate::truss::{Edit, Figure, FigureId, FigureKind, FigureValue, Selection, Truss};

/// A value for a figure and the way it is written.
#[derive(Clone, Debug)]
pub(crate) struct Proposal {
    /// As the trade writes it; it can be typed in.
    pub text: String,
    /// The edit that gives the figure this value (a relation is taken away).
    pub edit: Edit,
}

/// A figure with another value: a length, degrees, a plain number, or the smaller part of a pitch.
pub(crate) fn proposal(truss: &Truss, id: FigureId, value: &Rational) -> Proposal {
    let figure = truss.figure(id);
    let written = |text: String| Written { text, value: value.clone() };
    match &figure.kind {
        FigureKind::Length { .. } | FigureKind::Run { .. } | FigureKind::Rise { .. } => {
            one(id, written(words::exact_length(truss, value)))
        }
        FigureKind::Angle { .. } | FigureKind::Spread { .. } => one(id, written(words::plain(value))),
        FigureKind::Pitch { rise, run, .. } => {
            let small = written(words::plain_fraction(value));
            let (rise, run) = if rise.value <= run.value { (small, run.clone()) } else { (rise.clone(), small) };
            let text = format!("{}:{}", rise.text, run.text);
            Proposal { text, edit: Edit::FigureReads(id, FigureValue::Pitch { rise, run }) }
        }
        _ => removal(figure, id),
    }
}

fn one(id: FigureId, written: Written) -> Proposal {
    Proposal { text: written.text.clone(), edit: Edit::FigureReads(id, FigureValue::One(written)) }
}

fn removal(figure: &Figure, id: FigureId) -> Proposal {
    let selection = Selection { figures: vec![id], ..Selection::default() };
    Proposal { text: format!("not {}", figure.kind.name()), edit: Edit::Remove(selection) }
}

/// The value that a figure prints, in the unit of `implied_range`; for a pitch its smaller part. `None` for a relation.
pub(crate) fn printed(figure: &Figure) -> Option<&Rational> {
    match &figure.kind {
        FigureKind::Length { value, .. }
        | FigureKind::Run { value, .. }
        | FigureKind::Rise { value, .. }
        | FigureKind::Angle { value, .. }
        | FigureKind::Spread { value, .. } => Some(&value.value),
        FigureKind::Pitch { rise, run, .. } => Some((&rise.value).min(&run.value)),
        _ => None,
    }
}

/// `f7, the length L0-U1`.
pub(crate) fn name_of(truss: &Truss, id: FigureId) -> String {
    let figure = truss.figure(id);
    let marks: Vec<&str> = figure.kind.joints().iter().take(6).map(|joint| truss.mark(*joint)).collect();
    format!("{}, the {} {}", figure.mark, figure.kind.name(), marks.join("-"))
}
