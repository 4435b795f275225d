//! The judge of layouts: says whether places agree with every figure and with the sketch's sides, in exact arithmetic.
//!
//! # Invariants
//!
//! It knows nothing of how the places were found, and nothing else may say that a layout agrees.

use super::meaning::conditions;
use super::sides::Side;
use crate::exact::{Point, orientation};
use crate::truss::{FigureId, Truss};

/// The figures that places do not certainly agree with, in the order of the truss.
pub(crate) fn figures_that_fail(truss: &Truss, places: &[Point]) -> Vec<FigureId> {
    let fails = |index: &usize| !conditions(truss, &truss.figures[*index]).iter().all(|c| c.holds(places));
    (0..truss.figures.len()).filter(fails).map(FigureId::new).collect()
}

/// True when the places keep every set joint, lie on the sketched sides and agree with every figure but those disregarded.
pub(crate) fn is_layout(truss: &Truss, sides: &[Side], places: &[Point], disregarded: &[FigureId]) -> bool {
    places.len() == truss.joints.len()
        && truss.joints.iter().zip(places).all(|(joint, place)| joint.loose || joint.point() == *place)
        && keeps_sides(sides, places)
        && truss.figures.iter().enumerate().all(|(index, figure)| {
            disregarded.contains(&FigureId::new(index)) || conditions(truss, figure).iter().all(|c| c.holds(places))
        })
}

/// True when every joint lies on its sketched side.
pub(crate) fn keeps_sides(sides: &[Side], places: &[Point]) -> bool {
    sides.iter().all(|side| {
        let [a, b, c] = side.joints.map(|id| &places[id.index()]);
        orientation(a, b, c) == side.orientation
    })
}
