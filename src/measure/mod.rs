//! Trade notation in and out: feet-inches-sixteenths, metric, bevels, pitches and degrees, all exact.

mod unit;
mod written;

pub use unit::Unit;
pub use written::Written;
