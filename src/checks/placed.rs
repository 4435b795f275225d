//! A truss with a place for every joint: what the geometric questions are asked of.

use crate::exact::Point;
use crate::truss::{JointId, Truss};
use serde::{Deserialize, Serialize};

/// Where the places of the joints come from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum Places {
    /// Every joint is set: the places are exact.
    Set,
    /// Loose joints stand where the proved layout puts them; anything smaller than the figures' steps means nothing there.
    Layout,
    /// Loose joints stand where they were sketched; only the arrangement means anything.
    Sketch,
}

/// A truss and the place of each of its joints.
#[derive(Clone, Debug)]
pub struct Placed<'a> {
    /// The truss.
    pub truss: &'a Truss,
    /// One point for each joint, in the order of [`Truss::joints`].
    pub points: Vec<Point>,
    /// Where the points come from.
    pub places: Places,
}

impl<'a> Placed<'a> {
    /// The truss with its joints where they are given: set, or as sketched.
    pub fn as_given(truss: &'a Truss) -> Placed<'a> {
        let places = if truss.joints.iter().any(|joint| joint.loose) { Places::Sketch } else { Places::Set };
        Placed { truss, points: truss.points(), places }
    }

    /// The truss with its joints where a layout puts them.
    pub fn at_layout(truss: &'a Truss, layout: Vec<Point>) -> Placed<'a> {
        let places = if truss.joints.iter().any(|joint| joint.loose) { Places::Layout } else { Places::Set };
        Placed { truss, points: layout, places }
    }

    /// The place of a joint.
    pub fn point(&self, id: JointId) -> &Point {
        &self.points[id.index()]
    }

    /// True when the joint's place is exact.
    pub fn is_set(&self, id: JointId) -> bool {
        !self.truss.joint(id).loose
    }
}
