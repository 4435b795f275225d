//! All five questions, put together.

use super::answers::{Answers, CloseAnswer, Report};
use super::chains::chains;
use super::close::{Effort, Progress, close_watched};
use super::findings::Finding;
use super::frame::Frame;
use super::limits::Limits;
use super::placed::{Placed, Places};
use super::{clear, cut, lines, stands};
use crate::exact::order;
use crate::truss::{JointId, Truss};

/// Asks the five questions of a truss.
///
/// The geometric questions are asked of the layout where closing proved one, of the layout without the only suspect where
/// there is one, of the joints as given otherwise. The truss is taken to have no [`Truss::problems`]; one that has them
/// may be answered wrongly, and one that names a joint that is not there gets the report of an empty sheet.
pub fn report(truss: &Truss, limits: &Limits) -> Report {
    report_watched(truss, limits, &mut |_| true)
}

/// The same, telling how far the search for a layout, a proof and suspects is; when `watch` answers false that search stops,
/// and what it had not settled is answered `not settled`.
pub fn report_watched(truss: &Truss, limits: &Limits, watch: &mut dyn FnMut(Progress) -> bool) -> Report {
    if !is_whole(truss) {
        return report(&Truss::default(), limits);
    }
    let (close, mut found) = close_watched(truss, &Effort::default(), watch);
    let placed = place(truss, &close);
    let frame = Frame::new(&placed, limits);
    let chains = chains(&frame);
    let (lines, lines_found) = lines::lines(&frame, &chains);
    let (clear, clear_found) = clear::clear(&frame);
    let (stands, stands_found) = stands::stands(&frame);
    let (mut cut, cut_found) = cut::cut(&frame, &chains);
    drop(frame);
    if let Some(caution) = caution(truss, &close, placed.places) {
        cut.summary = format!("{caution}; {}", cut.summary);
    }
    found.extend([lines_found, clear_found, stands_found, cut_found].into_iter().flatten());
    sort(&mut found);
    let answers = Answers { close, lines, clear, stands, cut };
    Report { answers, findings: found, places: placed.places, points: placed.points }
}

/// True when every joint that is named is there.
fn is_whole(truss: &Truss) -> bool {
    let is_there = |joint: JointId| joint.index() < truss.joints.len();
    truss.members.iter().all(|member| member.ends().into_iter().all(is_there))
        && truss.supports.iter().all(|support| is_there(support.joint))
        && truss.figures.iter().all(|figure| figure.kind.joints().into_iter().all(is_there))
}

/// Where the geometric questions take the joints to be: at the layout that proves the figures; where exactly one figure is to
/// blame, at the layout without it; else as given.
fn place<'a>(truss: &'a Truss, close: &CloseAnswer) -> Placed<'a> {
    let layout = match (&close.layout, close.suspects.as_slice()) {
        (Some(layout), _) => Some(layout),
        (None, [only]) => Some(&only.layout),
        (None, _) => None,
    };
    match layout.filter(|layout| layout.len() == truss.joints.len()) {
        Some(layout) => Placed::at_layout(truss, layout.clone()),
        None => Placed::as_given(truss),
    }
}

/// What has to be said of lengths that do not rest on a proof.
fn caution(truss: &Truss, close: &CloseAnswer, places: Places) -> Option<String> {
    match (places, close.suspects.as_slice()) {
        (Places::Sketch, _) => Some("from the sketch, not for cutting".into()),
        (Places::Layout, [only]) if close.layout.is_none() => {
            Some(format!("if {} is the wrong figure", truss.figure(only.figure).mark))
        }
        _ => None,
    }
}

/// By question, worst first, then by rule; within a rule as they were found, which is the order of the lists.
fn sort(found: &mut [Finding]) {
    order::sort_by_key(found, |finding| (finding.rule.question(), finding.level, finding.rule));
}
