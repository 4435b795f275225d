//! What differs between two reports on trusses of one size: for passing on little after a small change.

use super::answers::{JointRow, MemberRow, Report};
use crate::exact::Point;
use serde::{Deserialize, Serialize};
use std::rc::Rc;

/// The way from one report to another: the rows that changed, and everything else whole.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Changes {
    /// The new report without its rows and points.
    rest: Report,
    members: Vec<(u32, Rc<MemberRow>)>,
    joints: Vec<(u32, Rc<JointRow>)>,
    points: Vec<(u32, Point)>,
}

impl Changes {
    /// The way from one report to another; `None` when their trusses are of different sizes.
    pub fn between(old: &Report, new: &Report) -> Option<Changes> {
        let members = changed(&old.answers.cut.members, &new.answers.cut.members)?;
        let joints = changed(&old.answers.cut.joints, &new.answers.cut.joints)?;
        let points = changed(&old.points, &new.points)?;
        Some(Changes { rest: without_rows(new), members, joints, points })
    }

    /// The new report, from the old one; `None` when the rows do not fit it.
    pub fn applied(self, old: &Report) -> Option<Report> {
        let mut report = self.rest;
        report.answers.cut.members = with(&old.answers.cut.members, self.members)?;
        report.answers.cut.joints = with(&old.answers.cut.joints, self.joints)?;
        report.points = with(&old.points, self.points)?;
        Some(report)
    }
}

/// A report with rows and points left out, without making copies of them first.
fn without_rows(report: &Report) -> Report {
    let Report { answers, findings, places, .. } = report;
    let answers = super::answers::Answers {
        cut: super::answers::CutAnswer {
            state: answers.cut.state.clone(),
            summary: answers.cut.summary.clone(),
            members: Vec::new(),
            joints: Vec::new(),
        },
        close: answers.close.clone(),
        lines: answers.lines.clone(),
        clear: answers.clear.clone(),
        stands: answers.stands.clone(),
    };
    Report { answers, findings: findings.clone(), places: *places, points: Vec::new() }
}

fn changed<T: Clone + PartialEq>(old: &[T], new: &[T]) -> Option<Vec<(u32, T)>> {
    let differs = |(index, (old, new)): (usize, (&T, &T))| (old != new).then(|| (index as u32, new.clone()));
    (old.len() == new.len()).then(|| old.iter().zip(new).enumerate().filter_map(differs).collect())
}

fn with<T: Clone>(old: &[T], changed: Vec<(u32, T)>) -> Option<Vec<T>> {
    let mut all = old.to_vec();
    for (index, new) in changed {
        *all.get_mut(index as usize)? = new;
    }
    Some(all)
}
