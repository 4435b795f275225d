//! Does it stand?
use super::answers::{StandsAnswer, StandsState};
use super::findings::Finding;
use super::frame::Frame;
pub(crate) fn stands(_frame: &Frame) -> (StandsAnswer, Vec<Finding>) {
    let state = StandsState::NoSupports;
    (StandsAnswer { state, summary: String::new(), rank: 0, unknowns: 0, spare_members: 0, motion: Vec::new() }, Vec::new())
}
