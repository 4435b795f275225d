//! What there is to say of pieces: nothing left, and tight ends.

use super::Left;
use super::outline::Body;
use crate::checks::findings::{Finding, Level, Rule};
use crate::checks::frame::{Frame, Tally, joint_ids, member_ids};
use crate::exact::RootSum;
use std::cmp::Ordering;

/// Own choice: what is shorter than it is deep is hard to hold, and a point below 15 degrees breaks off.
const WHY: &str =
    "Own choice: a piece shorter than its depth is hard to hold and to fix, a point below 15 degrees breaks off.";

/// The findings, in the order of the members.
pub(super) fn findings(frame: &Frame, bodies: &[Option<Body>]) -> Vec<Finding> {
    let mut tally = Tally::new(Rule::TightEnd, Level::Caution, frame.limits);
    for (member, body) in bodies.iter().enumerate() {
        let Some(body) = body else { continue };
        match body.left {
            Left::Nothing => tally.add(|rule, level| {
                let text = format!("nothing is left of {}", between(frame, member));
                about(frame, member, rule, level, text, body)
            }),
            Left::Part => tally.add(|rule, level| {
                let text = format!("the end cuts of {} cross within its depth", between(frame, member));
                about(frame, member, rule, level, text, body)
            }),
            Left::Whole => whole_piece(frame, member, body, &mut tally),
        }
    }
    tally.finish()
}

fn whole_piece(frame: &Frame, member: usize, body: &Body, tally: &mut Tally) {
    let depth = RootSum::from(body.depth.clone());
    if body.line.compare(&depth) == Ordering::Less {
        tally.add(|rule, level| {
            let text = format!(
                "only {} is left of {}, less than its depth of {}",
                printed(frame, &body.line),
                between(frame, member),
                frame.print.length(&body.depth)
            );
            about(frame, member, rule, level, text, body)
        });
    }
    let ends = frame.left_to_right(member);
    for (side, &joint) in ends.iter().enumerate() {
        let count = body.outline.len();
        let is_sharp = |place: usize| {
            let [after, before] = [1, count - 1].map(|step| &body.outline[(place + step) % count]);
            body.outline[place].is_sharp(after, before)
        };
        if body.corners_of(side).into_iter().any(is_sharp) {
            tally.add(|rule, level| {
                let (mark, joint) = (frame.print.member(member), joint);
                let text =
                    format!("the end of {mark} at {} has a point sharper than 15 degrees", frame.print.joint(joint));
                Finding::new(rule, level, text).joints(joint_ids([joint])).members(member_ids([member])).words(WHY)
            });
        }
    }
}

/// `W3 between L1 and U2`.
fn between(frame: &Frame, member: usize) -> String {
    let [from, to] = frame.ends[member].map(|joint| frame.print.joint(joint));
    format!("{} between {from} and {to}", frame.print.member(member))
}

fn about(frame: &Frame, member: usize, rule: Rule, level: Level, text: String, body: &Body) -> Finding {
    let mut finding =
        Finding::new(rule, level, text).joints(joint_ids(frame.ends[member])).members(member_ids([member]));
    for (end, joint) in body.ends.iter().zip(frame.left_to_right(member)) {
        let deduction = printed(frame, &end.true_length(&end.at_line()));
        finding = finding.value(format!("deduction at {}", frame.print.joint(joint)), deduction);
    }
    finding.value("left along the working line", printed(frame, &body.line)).words(WHY)
}

fn printed(frame: &Frame, length: &RootSum) -> String {
    let steps = length.nearest(frame.print.step()).map(|rounded| rounded.steps).unwrap_or_default();
    frame.print.length(&frame.print.of_steps(&steps))
}
