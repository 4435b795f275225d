//! Work by its number, so that a page can ask for it.

use crate::values::{Plain, floats, fractions, steps};
use chordwright::checks::{Limits, Placed, report};
use chordwright::truss::Truss;
use std::hint::black_box;

/// What is done with a truss.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Work {
    /// All five questions.
    Report,
    /// Order, quadrances and spreads in lattice steps.
    Steps,
    /// Order, quadrances and spreads as fractions.
    Fractions,
    /// The plain floating-point loop.
    Floats,
}

impl Work {
    /// All of it, in the order of its numbers.
    pub const ALL: [Work; 4] = [Work::Report, Work::Steps, Work::Fractions, Work::Floats];

    /// Its number.
    pub fn number(self) -> u32 {
        self as u32
    }
}

/// A truss, ready to be worked on.
#[derive(Clone, Debug)]
pub struct Workload {
    truss: Truss,
    plain: Plain,
}

impl Workload {
    /// A long truss of so many members.
    pub fn long(members: usize) -> Workload {
        Workload::of(crate::long_truss(members))
    }

    /// Any truss.
    pub fn of(truss: Truss) -> Workload {
        let plain = Plain::of(&Placed::as_given(&truss));
        Workload { truss, plain }
    }

    /// Does the work once.
    pub fn run(&self, work: Work) {
        match work {
            Work::Report => drop(black_box(report(&self.truss, &Limits::default()))),
            Work::Steps => drop(black_box(steps(&Placed::as_given(&self.truss)))),
            Work::Fractions => drop(black_box(fractions(&Placed::as_given(&self.truss)))),
            Work::Floats => drop(black_box(floats(&self.plain))),
        }
    }
}
