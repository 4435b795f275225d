//! Printed lengths of a straight chord's pieces that do not add up to its printed overall.

use super::super::chains::Chain;
use super::super::findings::{Finding, Law, Level, Rule};
use super::super::frame::{Frame, Tally, joint_ids, member_ids};
use crate::exact::Rational;
use num_bigint::BigInt;
use num_traits::{Signed, Zero};

/// One note for each straight chain of two pieces or more whose printed lengths add up to something else.
pub(crate) fn roundings(frame: &Frame, chains: &[Chain], lengths: &[BigInt]) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::Rounding, Level::Note, frame.limits);
    if frame.truss.step.value.is_zero() {
        return Vec::new();
    }
    for chain in chains.iter().filter(|chain| chain.is_straight && chain.members.len() > 1) {
        let quadrance = frame.lattice.quadrance(chain.ends());
        let overall = frame.print.rounded_root(&quadrance).steps;
        let sum = chain.members.iter().fold(BigInt::zero(), |sum, &member| sum + &lengths[member]);
        if sum != overall {
            tally.add(|rule, level| {
                rounding(frame, chain, &frame.print.of_steps(&sum), &frame.print.of_steps(&overall), rule, level)
            });
        }
    }
    tally.finish()
}

fn rounding(frame: &Frame, chain: &Chain, sum: &Rational, overall: &Rational, rule: Rule, level: Level) -> Finding {
    let short = overall - sum;
    let [first, last] = chain.ends();
    let (printed, whole) = (frame.print.length(sum), frame.print.length(overall));
    let text = format!(
        "the printed lengths of {} add up to {printed}, {} {} than {whole} from {} to {}",
        chain.name(frame),
        frame.print.length(&short.abs()),
        if short.is_positive() { "less" } else { "more" },
        frame.print.joint(first),
        frame.print.joint(last),
    );
    Finding::new(rule, level, text)
        .joints(joint_ids([first, last]))
        .members(member_ids(chain.members.iter().copied()))
        .formula(Law::Sum, format!("{printed} ≠ {whole}"))
        .words("Each printed length is within half a step; lay the string out from one end, not piece by piece.")
}
