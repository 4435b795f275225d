//! Trade notation in and out: feet-inches-sixteenths, metric, bevels, pitches and degrees, all exact.
//!
//! Reading is [`parse_length`] and its like; printing is [`Sheet`], which knows the unit and the printing step. Whatever a
//! sheet prints, the grammar reads back to the value that was printed.

mod print;
mod token;
mod unit;
mod value;
mod written;

pub use print::{Printed, Sheet, decimal, pretty};
pub use token::visible;
pub use unit::Unit;
pub use value::{
    MAX_CHARACTERS, MAX_DEPTH, MAX_DIGITS, ValueError, parse_degrees, parse_length, parse_pitch, parse_plain,
    within_digits,
};
pub use written::Written;
