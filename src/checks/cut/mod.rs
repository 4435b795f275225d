//! What is cut? The schedule of members and joints, and what the shop has to know of it.

mod dimensions;
mod rounding;
mod rows;
mod schedule;

pub use dimensions::{DimensionString, dimension_strings};
pub use schedule::{Equal, Schedule, Total, schedule};

use super::answers::CutAnswer;
use super::chains::Chain;
use super::findings::{Finding, Level, Rule};
use super::frame::{Frame, Tally, member_ids};
use super::print::counted;
use crate::exact::Rational;
use crate::truss::Role;
use num_bigint::BigInt;
use std::collections::{BTreeMap, HashSet};
use std::rc::Rc;

/// Answers the question for a placed truss: every member and every joint has its row.
pub(crate) fn cut(frame: &Frame, chains: &[Chain]) -> (CutAnswer, Vec<Finding>) {
    let (members, steps) = rows::member_rows(frame);
    let mut found = too_long(frame, &members);
    found.extend(rounding::roundings(frame, chains, &steps));
    let answer = CutAnswer {
        state: counted(members.len(), "piece", "pieces"),
        summary: summary(frame, &members, &steps),
        joints: rows::joint_rows(frame),
        members,
    };
    (answer, found)
}

/// `8 lengths, 164'-3 5/16" in all: top chord 44'-8 11/16", bottom chord 40'-0"`.
fn summary(frame: &Frame, members: &[Rc<super::MemberRow>], steps: &[BigInt]) -> String {
    if members.is_empty() {
        return "no members".into();
    }
    let lengths: HashSet<&Rational> = members.iter().map(|row| &row.quadrance).collect();
    let mut totals: BTreeMap<Role, BigInt> = BTreeMap::new();
    steps.iter().enumerate().for_each(|(member, steps)| *totals.entry(frame.role(member)).or_default() += steps);
    let length = |steps: &BigInt| frame.print.length(&frame.print.of_steps(steps));
    let all = length(&totals.values().sum());
    let all = format!("{}, {all} in all", counted(lengths.len(), "length", "lengths"));
    let roles: Vec<String> = totals.iter().map(|(role, steps)| format!("{} {}", role.name(), length(steps))).collect();
    if roles.len() > 1 { format!("{all}: {}", roles.join(", ")) } else { all }
}

/// Members longer than the longest piece of the limits.
fn too_long(frame: &Frame, members: &[Rc<super::MemberRow>]) -> Vec<Finding> {
    let limit = frame.limits.longest_piece_in(frame.truss.unit);
    let square = &limit * &limit;
    let mut tally = Tally::new(Rule::TooLong, Level::Note, frame.limits);
    for (member, row) in members.iter().enumerate().filter(|(_, row)| row.quadrance > square) {
        tally.add(|rule, level| {
            let mark = frame.print.member(member);
            let text = format!("{mark} is {} long, more than {}", row.length, frame.print.length(&limit));
            Finding::new(rule, level, text)
                .members(member_ids([member]))
                .value(format!("quadrance of {mark}"), frame.print.area(&row.quadrance))
                .value("square of the limit", frame.print.area(&square))
                .words("The limit is adjustable; 48 ft is the semitrailer length that every state of the US admits (23 CFR 658).")
        });
    }
    tally.finish()
}
