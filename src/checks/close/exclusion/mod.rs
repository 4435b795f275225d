//! Proofs that no layout exists: certificates, and the judge who alone may accept them.
//!
//! - a figure among set joints that does not hold;
//! - a *chain*: differences of one coordinate round a closed way whose upper bounds add up to less than nothing;
//! - a *polygon*: a length greater than the way round its other sides;
//! - a *stress*: boxes that hold every admissible place, and multipliers whose combination of figures cannot be reached in
//!   them, with splits of boxes where one is too wide.
//!
//! # Invariants
//!
//! A certificate says nothing by itself: only [`judge::accepts`] does, in exact arithmetic, and it knows nothing of how
//! certificates are found.

pub(crate) mod boxes;
pub(crate) mod chains;
pub(crate) mod forms;
pub(crate) mod judge;
pub(crate) mod span;
pub(crate) mod stress;
#[cfg(test)]
mod tampering;

use super::meaning::Axis;
use crate::exact::Rational;
use crate::truss::{FigureId, JointId};

/// One condition of one figure.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub(crate) struct Source {
    /// The figure.
    pub figure: FigureId,
    /// Which of its conditions.
    pub condition: usize,
}

/// What bounds the way from one joint to another.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Bound {
    /// A condition of a figure.
    Figure(Source),
    /// Both are set.
    Set,
}

/// One step of a chain or a polygon.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Link {
    /// From this joint.
    pub from: JointId,
    /// To this one.
    pub to: JointId,
    /// What bounds it.
    pub bound: Bound,
}

/// A proof that no layout exists.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Certificate {
    /// A figure among set joints does not hold.
    Set(Source),
    /// Round the links, which close, the coordinate can grow by less than nothing.
    Chain {
        /// Which coordinate.
        axis: Axis,
        /// Each from where the one before ends.
        links: Vec<Link>,
    },
    /// The first link is longer than the others together, which lead from its one end to the other.
    Polygon {
        /// The longest first.
        links: Vec<Link>,
    },
    /// A combination of conditions that cannot be reached.
    Stress(Stress),
}

/// A combination of conditions over boxes.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Stress {
    /// Boxes count from this joint.
    pub origin: JointId,
    /// Without figures that give a direction, the whole may be turned so that this joint lies straight to the right of the
    /// origin.
    pub turned: Option<JointId>,
    /// One unit of the boxes, in the sheet's unit.
    pub unit: Rational,
    /// The conditions that narrow the boxes and may be combined.
    pub conditions: Vec<Source>,
    /// The sketch's sides that may be used, by their places in the list of sides.
    pub sides: Vec<usize>,
    /// The proof, box by box.
    pub branch: Branch,
}

/// The proof for one box.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Branch {
    /// Narrowing leaves nothing of the box.
    Empty,
    /// A combination cannot be reached in the box.
    Combined {
        /// Where the functions are expanded: places of the joints of the boxes, in units.
        around: Vec<[i128; 2]>,
        /// Multipliers, positive for an upper bound and negative for a lower.
        multipliers: Vec<(Part, i128)>,
    },
    /// The box is cut in two, each with its proof.
    Split {
        /// Of this joint, from the origin.
        joint: JointId,
        /// Along this axis.
        axis: Axis,
        /// In units; both halves hold it.
        at: i128,
        /// The half below, and the half above.
        halves: Box<[Branch; 2]>,
    },
}

/// One inequality of a condition or a side.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Part {
    /// A form of a condition, by its place among the condition's forms.
    Condition(Source, usize),
    /// A side of the sketch.
    Side(usize),
}
