//! Numbers and the laws of rational trigonometry: everything here is exact.
//!
//! With rational coordinates every quadrance (squared distance) and every spread (squared sine of the angle between two
//! lines) is rational, so "straight", "square", "parallel" and "equal" are decided without a tolerance.
//!
//! # Invariants
//!
//! This room knows nothing of trusses, units or trade notation, and holds no floating-point number.

mod arc;
mod hundredths;
mod interval;
mod lattice;
mod laws;
pub mod modular;
pub mod order;
mod point;
mod predicates;
mod rational;
mod root_sum;
mod surd;

pub use arc::{degrees_of, degrees_of_spread, nearest_degrees, nearest_degrees_of_spread, spread_of_degrees};
pub use hundredths::{hundredths_of, hundredths_of_large};
pub use interval::Interval;
pub use lattice::{Direction, Lattice, Reach, Tier};
pub use laws::{
    archimedes, cross, cross_law_residual, pythagoras_residual, quadrance, spread, spread_between, spread_polynomial,
    triple_quad_residual, triple_spread_residual,
};
pub use point::{Point, Vector};
pub use predicates::{
    Orientation, compare_directions, in_line, is_between, is_parallel, is_square, on_segment, orientation,
};
pub use rational::{Rational, fraction, nearest_multiple, parse_fraction, ratio, whole};
pub use root_sum::RootSum;
pub use surd::{Rounded, Surd, ceil_sqrt, floor_sqrt};
