//! What makes a truss unfit to be checked, each problem with where it is.

use super::ids::{FigureId, JointId, MemberId, SupportId};
use super::model::{FigureKind, SupportKind, Truss};
use crate::exact::{Rational, whole};
use crate::measure::{Written, visible, within_digits};
use num_traits::{One, Signed, Zero};
use std::collections::HashSet;
use thiserror::Error;

/// The sizes a truss may have; the same in files, links and on the page.
pub struct Limit;

impl Limit {
    /// Joints in one truss.
    pub const JOINTS: usize = 50_000;
    /// Members in one truss.
    pub const MEMBERS: usize = 100_000;
    /// Figures in one truss.
    pub const FIGURES: usize = 100_000;
    /// Characters in a mark.
    pub const MARK_CHARACTERS: usize = 24;
    /// Bytes of text in a file.
    pub const FILE_BYTES: usize = 16 * 1024 * 1024;
    /// Digits in one number.
    pub const DIGITS: usize = 40;
    /// Depth of nested expressions.
    pub const DEPTH: usize = 32;
}

/// Where in a truss a problem is.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Place {
    /// In the sheet's own entries.
    Sheet,
    /// At a joint.
    Joint(JointId),
    /// At a member.
    Member(MemberId),
    /// At a support.
    Support(SupportId),
    /// At a figure.
    Figure(FigureId),
}

/// One thing that makes a truss unfit to be checked.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("{text}")]
pub struct Problem {
    /// Where it is.
    pub place: Place,
    /// What is wrong and what was expected, in a drafter's words.
    pub text: String,
}

impl Truss {
    /// Everything that makes the truss unfit to be checked, in the order of the lists; empty when it is fit.
    pub fn problems(&self) -> Vec<Problem> {
        let mut found = Vec::new();
        self.check_sheet(&mut found);
        self.check_joints(&mut found);
        self.check_members(&mut found);
        self.check_supports(&mut found);
        self.check_figures(&mut found);
        self.check_digits(&mut found);
        found
    }

    fn check_sheet(&self, found: &mut Vec<Problem>) {
        let mut add = |text: String| found.push(Problem { place: Place::Sheet, text });
        if self.step.value.is_negative() {
            add(format!("the step `{}` is negative; expected 0 or more", self.step.text));
        }
        for (count, limit, what) in [
            (self.joints.len(), Limit::JOINTS, "joints"),
            (self.members.len(), Limit::MEMBERS, "members"),
            (self.supports.len(), Limit::JOINTS, "supports"),
            (self.figures.len(), Limit::FIGURES, "figures"),
        ] {
            if count > limit {
                add(format!("{count} {what}: more than the limit of {limit}"));
            }
        }
    }

    fn check_joints(&self, found: &mut Vec<Problem>) {
        let mut seen = HashSet::new();
        for (index, joint) in self.joints.iter().enumerate() {
            let place = Place::Joint(JointId::new(index));
            check_mark(&joint.mark, "joint", place, &mut seen, found);
        }
    }

    fn check_members(&self, found: &mut Vec<Problem>) {
        let mut seen = HashSet::new();
        for (index, member) in self.members.iter().enumerate() {
            let place = Place::Member(MemberId::new(index));
            check_mark(&member.mark, "member", place.clone(), &mut seen, found);
            if member.ends().iter().any(|end| end.index() >= self.joints.len()) {
                found
                    .push(Problem { place, text: format!("member `{}` names a joint that is not there", member.mark) });
            }
        }
    }

    fn check_supports(&self, found: &mut Vec<Problem>) {
        for (index, support) in self.supports.iter().enumerate() {
            let mut add = |text: String| found.push(Problem { place: Place::Support(SupportId::new(index)), text });
            if support.joint.index() >= self.joints.len() {
                add("a support names a joint that is not there".into());
            }
            if let SupportKind::Roller { normal } = &support.kind
                && normal.iter().all(|part| part.value.is_zero())
            {
                add("the normal of a roller is 0, 0; expected a direction".into());
            }
        }
    }

    fn check_figures(&self, found: &mut Vec<Problem>) {
        let mut seen = HashSet::new();
        for (index, figure) in self.figures.iter().enumerate() {
            let place = Place::Figure(FigureId::new(index));
            check_mark(&figure.mark, "figure", place.clone(), &mut seen, found);
            if let Some(text) = self.figure_problem(&figure.kind, figure.step.as_ref().map(|step| &step.value)) {
                found.push(Problem { place, text: format!("figure `{}`: {text}", figure.mark) });
            }
        }
    }

    /// Values that are too long to be written and read again.
    fn check_digits(&self, found: &mut Vec<Problem>) {
        for (place, written) in self.values() {
            if !within_digits(&written.value) {
                let what = match &place {
                    Place::Sheet => "the step".to_owned(),
                    Place::Joint(id) => format!("a coordinate of joint `{}`", self.mark(*id)),
                    Place::Figure(id) => format!("a value of figure `{}`", self.figure(*id).mark),
                    Place::Member(_) | Place::Support(_) => "the normal of a roller".to_owned(),
                };
                found.push(Problem {
                    place,
                    text: format!("{what} has more than the limit of {} digits", Limit::DIGITS),
                });
            }
        }
    }

    /// Every value that is written on the sheet, with where it is.
    fn values(&self) -> impl Iterator<Item = (Place, &Written)> {
        let numbered = |id: usize| Place::Joint(JointId::new(id));
        let joints = self.joints.iter().enumerate();
        let joints = joints.flat_map(move |(id, joint)| [(numbered(id), &joint.x), (numbered(id), &joint.y)]);
        let supports = self.supports.iter().enumerate().flat_map(|(id, support)| {
            let parts: &[Written] = if let SupportKind::Roller { normal } = &support.kind { normal } else { &[] };
            parts.iter().map(move |part| (Place::Support(SupportId::new(id)), part))
        });
        let figures = self.figures.iter().enumerate().flat_map(|(id, figure)| {
            let place = move || Place::Figure(FigureId::new(id));
            figure.kind.values().into_iter().chain(&figure.step).map(move |written| (place(), written))
        });
        std::iter::once((Place::Sheet, &self.step)).chain(joints).chain(supports).chain(figures)
    }

    /// The first value that is too long to be written and read again, in words.
    pub(super) fn too_long(&self) -> Option<String> {
        if self.values().all(|(_, written)| within_digits(&written.value)) {
            return None;
        }
        let mut found = Vec::new();
        self.check_digits(&mut found);
        found.into_iter().next().map(|problem| problem.text)
    }

    /// What is wrong with one figure, if anything.
    pub fn figure_problem(&self, kind: &FigureKind, step: Option<&Rational>) -> Option<String> {
        if kind.joints().iter().any(|joint| joint.index() >= self.joints.len()) {
            return Some("names a joint that is not there".into());
        }
        if step.is_some_and(Signed::is_negative) {
            return Some("its step is negative; expected 0 or more".into());
        }
        repeated_joint(kind).map(|id| format!("names joint `{}` twice", self.mark(id))).or_else(|| value_problem(kind))
    }
}

fn check_mark<'a>(mark: &'a str, what: &str, place: Place, seen: &mut HashSet<&'a str>, found: &mut Vec<Problem>) {
    if let Some(text) = mark_problem(mark) {
        found.push(Problem { place, text: format!("{what} mark `{}` {text}", visible(mark)) });
    } else if !seen.insert(mark) {
        found.push(Problem { place, text: format!("{what} mark `{mark}` is used twice; expected each mark once") });
    }
}

/// What is wrong with a mark, if anything.
pub fn mark_problem(mark: &str) -> Option<String> {
    match mark {
        "" => Some("is empty; expected 1 to 24 characters".into()),
        _ if mark.chars().count() > Limit::MARK_CHARACTERS => Some("is longer than 24 characters".into()),
        _ if mark.chars().any(char::is_control) => Some("holds a control character".into()),
        _ => None,
    }
}

/// The first joint that a figure names twice where it may not. Two distances of one `equal` or `parallel` may share an end.
fn repeated_joint(kind: &FigureKind) -> Option<JointId> {
    let lists = match kind {
        FigureKind::Parallel { first, second } | FigureKind::Equal { first, second } => {
            vec![first.to_vec(), second.to_vec()]
        }
        _ => vec![kind.joints()],
    };
    lists.into_iter().find_map(|joints| {
        let mut seen = HashSet::new();
        joints.into_iter().find(|&joint| !seen.insert(joint))
    })
}

fn value_problem(kind: &FigureKind) -> Option<String> {
    let text = match kind {
        FigureKind::Length { value, .. } if value.value.is_negative() => "a length is 0 or more",
        FigureKind::Pitch { rise, run, .. } if rise.value.is_negative() || run.value.is_negative() => {
            "a pitch is unsigned: expected two numbers that are 0 or more"
        }
        FigureKind::Pitch { rise, run, .. } if rise.value.is_zero() && run.value.is_zero() => {
            "a pitch of 0:0 has no slope"
        }
        FigureKind::Angle { value, .. } if value.value.is_negative() || value.value > whole(180) => {
            "an angle is between 0 and 180 degrees"
        }
        FigureKind::Spread { value, .. } if value.value.is_negative() || value.value > Rational::one() => {
            "a spread is between 0 and 1"
        }
        FigureKind::InLine { joints } if joints.len() < 3 => "in line takes three joints or more",
        FigureKind::Level { joints } if joints.len() < 2 => "level takes two joints or more",
        FigureKind::Plumb { joints } if joints.len() < 2 => "plumb takes two joints or more",
        _ => return None,
    };
    Some(text.into())
}
