//! Single steps of the checks, for benchmarks that compare them with other ways to do the same. No part of the interface.

use super::answers::StandsAnswer;
use super::clear::crossings;
use super::frame::Frame;
use super::limits::Limits;
use super::placed::Placed;
use super::stands::{is_held, stands};
use crate::exact::Lattice;

/// A placed truss as the geometric questions see it: its joints on a lattice, its members in order around every joint.
pub struct Prepared<'a>(Frame<'a>);

impl<'a> Prepared<'a> {
    /// Prepares a placed truss, as every report does.
    pub fn new(placed: &'a Placed<'a>, limits: &'a Limits) -> Prepared<'a> {
        Prepared(Frame::new(placed, limits))
    }

    /// The lattice that the joints are on.
    pub fn lattice(&self) -> &Lattice<'a> {
        &self.0.lattice
    }

    /// The far ends of the members at a joint, by their places in the list of joints, counter-clockwise from the right.
    pub fn around(&self, joint: usize) -> impl Iterator<Item = usize> {
        self.0.around(joint).iter().map(|spoke| spoke.far as usize)
    }

    /// The pairs of members that cross or overlap, by their places in the list, the earlier first, in order; complete up
    /// to the findings that the limits allow.
    pub fn crossings(&self) -> Vec<[u32; 2]> {
        crossings(&self.0)
    }

    /// True when members and holds are proved to have a full rank.
    pub fn is_held(&self) -> bool {
        is_held(&self.0)
    }

    /// Whether it stands: the rank of the rigidity matrix, and a motion where it is short.
    pub fn stands(&self) -> StandsAnswer {
        stands(&self.0).0
    }
}
