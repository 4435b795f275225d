//! Where layouts and exclusions are looked for, guided by floating point.
//!
//! # Invariants
//!
//! Nothing found here is believed: places are judged by [`super::verify`], exclusions by [`super::exclusion::judge`].
//! Floats are only used in this room.

pub(crate) mod adjust;
pub(crate) mod interior;
pub(crate) mod model;
pub(crate) mod place;
pub(crate) mod rows;
pub(crate) mod sparse;
pub(crate) mod worst;
