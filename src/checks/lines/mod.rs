//! Is every line true? What is declared and fails, and what is almost so.
//!
//! One cause gives one finding: each finding that is told marks the joints it puts in question, and what is asked later is
//! silent where these explain it. So a joint of a chord that is out of line is told by the chord, not again by every
//! member that ends at it.

mod alike;
mod chords;
mod corners;
mod declared;
mod equal;

use super::answers::{TrueAnswer, TrueState};
use super::chains::Chain;
use super::findings::{Finding, Level};
use super::frame::Frame;
use super::print::counted;
use crate::exact::{Rational, whole};
use num_traits::Zero;

/// Lines shorter than this many near distances are not asked whether they are almost level, square or parallel: at that
/// length a near distance is no small angle.
const SHORT: i64 = 16;

/// Answers the question for a placed truss.
pub(crate) fn lines(frame: &Frame, chains: &[Chain]) -> (TrueAnswer, Vec<Finding>) {
    let mut doubts = Doubts::new(frame);
    let (asked, mut found) = declared::relations(frame, &mut doubts);
    found.extend(chords::nearly_straight(frame, chains, &mut doubts));
    found.extend(chords::nearly_level_or_plumb(frame, chains, &mut doubts));
    found.extend(chords::nearly_parallel(frame, chains, &mut doubts));
    found.extend(alike::nearly_alike(frame, &mut doubts));
    found.extend(corners::nearly_square(frame, &doubts));
    found.extend(equal::nearly_equal(frame, &doubts));
    let fails = found.iter().filter(|finding| finding.level == Level::Fault).count();
    let near = found.len() - fails;
    let state = match (fails, near) {
        (0, 0) => TrueState::True,
        (0, _) => TrueState::Almost,
        _ => TrueState::NotTrue,
    };
    (TrueAnswer { state, summary: summary(asked, fails, near) }, found)
}

fn summary(asked: usize, fails: usize, near: usize) -> String {
    let near_words = match near {
        0 => "nothing is only almost so".to_owned(),
        near => format!("{} only almost so", counted(near, "thing is", "things are")),
    };
    match (asked, fails) {
        (0, _) => near_words,
        (1, 0) => format!("the declared relation holds; {near_words}"),
        (asked, 0) => format!("all {asked} declared relations hold; {near_words}"),
        (asked, 1) => format!("1 of {} fails; {near_words}", counted(asked, "declared relation", "declared relations")),
        (asked, fails) => format!("{fails} of {asked} declared relations fail; {near_words}"),
    }
}

/// The joints that a finding has put in question.
pub(crate) struct Doubts {
    joints: Vec<bool>,
}

impl Doubts {
    fn new(frame: &Frame) -> Doubts {
        Doubts { joints: vec![false; frame.joint_count()] }
    }

    /// Puts joints in question.
    fn mark(&mut self, joints: impl IntoIterator<Item = usize>) {
        joints.into_iter().for_each(|joint| self.joints[joint] = true);
    }

    /// True when one of the joints is in question already.
    fn any(&self, joints: &[usize]) -> bool {
        joints.iter().any(|&joint| self.joints[joint])
    }

    /// True when all of them are.
    fn all(&self, joints: &[usize]) -> bool {
        joints.iter().all(|&joint| self.joints[joint])
    }
}

/// A deviation from its square as the trade writes it; `less than 1/16"` where it would print as nothing.
pub(crate) fn deviation(frame: &Frame, square: &Rational) -> String {
    let step = frame.print.step();
    if whole(4) * square < step * step && !square.is_zero() {
        return format!("less than {}", frame.print.length(&(step / whole(2))));
    }
    frame.print.root(square)
}

/// True when a line is long enough to be asked whether it is almost level, square or parallel.
pub(crate) fn is_long(frame: &Frame, pair: [usize; 2]) -> bool {
    let least = frame.reach.steps().saturating_mul(SHORT);
    frame.lattice.coarse_along(pair).iter().any(|steps| steps.abs() > least)
}
