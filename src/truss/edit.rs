//! Edits: the only way a truss changes.

use super::ids::{FigureId, JointId, MemberId, SupportId};
use super::model::{Figure, FigureKind, Joint, Member, Role, Support, SupportKind, Truss};
use super::validate::mark_problem;
use crate::exact::Point;
use crate::measure::{Sheet, Unit, Written};
use serde::{Deserialize, Serialize};
use thiserror::Error;

/// One change to a truss. Ids refer to the truss as it is before the change.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum Edit {
    /// Gives the sheet another title.
    Title(String),
    /// Gives the sheet another printing step.
    Step(Written),
    /// Gives the sheet another unit; every value keeps its true size and is written anew.
    Unit(Unit),
    /// Adds a joint at the end of the list.
    AddJoint(Joint),
    /// Changes a joint whole: mark, coordinates, loose or set.
    SetJoint(JointId, Joint),
    /// Moves several joints at once.
    MoveJoints(Vec<(JointId, Point)>),
    /// Adds a member at the end of the list.
    AddMember(Member),
    /// Changes a member whole.
    SetMember(MemberId, Member),
    /// Adds a support, or replaces the supports of its joint.
    SetSupport(Support),
    /// Takes a support away.
    RemoveSupport(SupportId),
    /// Adds a figure at the end of the list.
    AddFigure(Figure),
    /// Changes a figure whole.
    SetFigure(FigureId, Figure),
    /// Gives a figure another value, kept as it is written; a pitch takes rise and run apart.
    FigureReads(FigureId, FigureValue),
    /// Removes joints, members, supports and figures, and whatever cannot be without a removed joint.
    Remove(Selection),
    /// Several edits as one: each refers to the truss as the one before leaves it.
    All(Vec<Edit>),
}

/// A new value for a figure.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum FigureValue {
    /// A length, run, rise, angle or spread.
    One(Written),
    /// A pitch, as rise and run.
    Pitch {
        /// The rise.
        rise: Written,
        /// The run.
        run: Written,
    },
}

/// Some joints, members, supports and figures.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Selection {
    /// Joints.
    pub joints: Vec<JointId>,
    /// Members.
    pub members: Vec<MemberId>,
    /// Supports.
    pub supports: Vec<SupportId>,
    /// Figures.
    pub figures: Vec<FigureId>,
}

/// Why an edit was refused; the truss is as it was.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("{0}")]
pub struct EditError(pub String);

impl Selection {
    /// True when nothing is selected.
    pub fn is_empty(&self) -> bool {
        self.joints.is_empty() && self.members.is_empty() && self.supports.is_empty() && self.figures.is_empty()
    }
}

impl Truss {
    /// The truss after an edit.
    ///
    /// # Errors
    ///
    /// When the edit names something that is not there or would make a truss unfit to be checked; says why.
    pub fn edited(&self, edit: &Edit) -> Result<Truss, EditError> {
        let mut truss = self.clone();
        truss.apply(edit)?;
        // What cannot be written and read again would be lost when it is saved.
        truss.too_long().map_or(Ok(truss), |text| Err(EditError(text)))
    }

    fn apply(&mut self, edit: &Edit) -> Result<(), EditError> {
        match edit {
            Edit::Title(title) => self.title.clone_from(title),
            Edit::Step(step) => self.set_step(step)?,
            Edit::Unit(unit) => self.convert_to(*unit),
            Edit::AddJoint(joint) => self.put_joint(None, joint)?,
            Edit::SetJoint(id, joint) => self.put_joint(Some(*id), joint)?,
            Edit::MoveJoints(moves) => self.move_joints(moves)?,
            Edit::AddMember(member) => self.put_member(None, member)?,
            Edit::SetMember(id, member) => self.put_member(Some(*id), member)?,
            Edit::SetSupport(support) => self.put_support(support)?,
            Edit::RemoveSupport(id) => self.remove(&Selection { supports: vec![*id], ..Selection::default() }),
            Edit::AddFigure(figure) => self.put_figure(None, figure)?,
            Edit::SetFigure(id, figure) => self.put_figure(Some(*id), figure)?,
            Edit::FigureReads(id, value) => self.figure_reads(*id, value)?,
            Edit::Remove(selection) => self.remove(selection),
            Edit::All(edits) => edits.iter().try_for_each(|edit| self.apply(edit))?,
        }
        Ok(())
    }

    fn set_step(&mut self, step: &Written) -> Result<(), EditError> {
        if step.value < crate::exact::whole(0) {
            return Err(EditError("the step is negative; expected 0 or more".into()));
        }
        self.step = step.clone();
        Ok(())
    }

    fn put_joint(&mut self, id: Option<JointId>, joint: &Joint) -> Result<(), EditError> {
        let taken =
            self.joints.iter().enumerate().any(|(i, other)| other.mark == joint.mark && id != Some(JointId::new(i)));
        check_mark(&joint.mark, "joint", taken)?;
        put(&mut self.joints, id.map(JointId::index), joint.clone(), "joint")
    }

    fn move_joints(&mut self, moves: &[(JointId, Point)]) -> Result<(), EditError> {
        let (unit, step) = (self.unit, self.step.value.clone());
        let moved = |old: &Written, value: &crate::exact::Rational| match old.value == *value {
            true => old.clone(),
            false => Sheet::of(unit, &step).written(value),
        };
        for (id, point) in moves {
            let joint = self.joints.get_mut(id.index()).ok_or_else(|| missing("joint"))?;
            joint.x = moved(&joint.x, &point.x);
            joint.y = moved(&joint.y, &point.y);
        }
        Ok(())
    }

    fn put_member(&mut self, id: Option<MemberId>, member: &Member) -> Result<(), EditError> {
        let taken =
            self.members.iter().enumerate().any(|(i, other)| other.mark == member.mark && id != Some(MemberId::new(i)));
        check_mark(&member.mark, "member", taken)?;
        self.check_ends(&member.ends())?;
        if member.from == member.to {
            return Err(EditError(format!("member `{}` would begin and end at one joint", member.mark)));
        }
        put(&mut self.members, id.map(MemberId::index), member.clone(), "member")
    }

    fn put_support(&mut self, support: &Support) -> Result<(), EditError> {
        self.check_ends(&[support.joint])?;
        let old = self.supports.iter().position(|other| other.joint == support.joint);
        self.supports.retain(|other| other.joint != support.joint);
        let at = old.unwrap_or(self.supports.len()).min(self.supports.len());
        self.supports.insert(at, support.clone());
        self.first_problem()
    }

    fn put_figure(&mut self, id: Option<FigureId>, figure: &Figure) -> Result<(), EditError> {
        let taken =
            self.figures.iter().enumerate().any(|(i, other)| other.mark == figure.mark && id != Some(FigureId::new(i)));
        check_mark(&figure.mark, "figure", taken)?;
        match self.figure_problem(&figure.kind, figure.step.as_ref().map(|step| &step.value)) {
            Some(text) => Err(EditError(format!("figure `{}`: {text}", figure.mark))),
            None => put(&mut self.figures, id.map(FigureId::index), figure.clone(), "figure"),
        }
    }

    fn figure_reads(&mut self, id: FigureId, new: &FigureValue) -> Result<(), EditError> {
        let mut figure = self.figures.get(id.index()).ok_or_else(|| missing("figure"))?.clone();
        match (&mut figure.kind, new) {
            (
                FigureKind::Length { value, .. }
                | FigureKind::Run { value, .. }
                | FigureKind::Rise { value, .. }
                | FigureKind::Angle { value, .. }
                | FigureKind::Spread { value, .. },
                FigureValue::One(written),
            ) => value.clone_from(written),
            (FigureKind::Pitch { rise, run, .. }, FigureValue::Pitch { rise: new_rise, run: new_run }) => {
                rise.clone_from(new_rise);
                run.clone_from(new_run);
            }
            _ => return Err(EditError(format!("figure `{}` does not take such a value", figure.mark))),
        }
        self.put_figure(Some(id), &figure)
    }

    fn check_ends(&self, ends: &[JointId]) -> Result<(), EditError> {
        if ends.iter().all(|end| end.index() < self.joints.len()) { Ok(()) } else { Err(missing("joint")) }
    }

    fn first_problem(&self) -> Result<(), EditError> {
        self.problems().into_iter().next().map_or(Ok(()), |problem| Err(EditError(problem.text)))
    }

    fn remove(&mut self, gone: &Selection) {
        let keep_joint = keep(self.joints.len(), gone.joints.iter().map(|id| id.index()));
        let keep_member = keep(self.members.len(), gone.members.iter().map(|id| id.index()));
        let keep_support = keep(self.supports.len(), gone.supports.iter().map(|id| id.index()));
        let keep_figure = keep(self.figures.len(), gone.figures.iter().map(|id| id.index()));
        let stays = |joints: &[JointId]| joints.iter().all(|end| keep_joint.get(end.index()) == Some(&true));
        retain(&mut self.members, &keep_member, |member| stays(&member.ends()));
        retain(&mut self.supports, &keep_support, |support| stays(&[support.joint]));
        retain(&mut self.figures, &keep_figure, |figure| stays(&figure.kind.joints()));
        self.renumber(&keep_joint);
    }

    /// Drops the joints that are not kept and renumbers every mention of the rest.
    fn renumber(&mut self, keep_joint: &[bool]) {
        let mut next = 0;
        let new_id: Vec<JointId> = keep_joint
            .iter()
            .map(|&kept| {
                let id = JointId::new(next);
                next += usize::from(kept);
                id
            })
            .collect();
        retain(&mut self.joints, keep_joint, |_| true);
        for member in &mut self.members {
            member.from = new_id[member.from.index()];
            member.to = new_id[member.to.index()];
        }
        for support in &mut self.supports {
            support.joint = new_id[support.joint.index()];
        }
        for id in self.figures.iter_mut().flat_map(|figure| figure.kind.joints_mut()) {
            *id = new_id[id.index()];
        }
    }

    /// Brings every length to another unit, without changing its true size.
    fn convert_to(&mut self, unit: Unit) {
        if unit == self.unit {
            return;
        }
        let factor = self.unit.in_units_of(unit);
        let convert = |written: &mut Written| {
            *written = Sheet::of(unit, &crate::exact::whole(0)).written(&(&written.value * &factor));
        };
        convert(&mut self.step);
        for joint in &mut self.joints {
            convert(&mut joint.x);
            convert(&mut joint.y);
        }
        for figure in &mut self.figures {
            let is_length = match &mut figure.kind {
                FigureKind::Length { value, .. } | FigureKind::Run { value, .. } | FigureKind::Rise { value, .. } => {
                    convert(value);
                    true
                }
                kind => kind.is_relation(),
            };
            if let Some(step) = figure.step.as_mut().filter(|_| is_length) {
                convert(step);
            }
        }
        self.unit = unit;
    }

    /// A mark that no joint has yet: the letter and the next free number.
    pub fn free_joint_mark(&self, letter: &str) -> String {
        free_mark(letter, self.joints.iter().map(|joint| joint.mark.as_str()))
    }

    /// A mark that no member has yet, by its role: `T`, `B`, `W`, `P` or `M` and the next free number.
    pub fn free_member_mark(&self, role: Role) -> String {
        let letter = match role {
            Role::TopChord => "T",
            Role::BottomChord => "B",
            Role::Web => "W",
            Role::Post => "P",
            Role::Other => "M",
        };
        free_mark(letter, self.members.iter().map(|member| member.mark.as_str()))
    }

    /// A mark that no figure has yet: `f` and the next free number.
    pub fn free_figure_mark(&self) -> String {
        free_mark("f", self.figures.iter().map(|figure| figure.mark.as_str()))
    }

    /// The kind of support a joint has, if any.
    pub fn support_at(&self, joint: JointId) -> Option<&SupportKind> {
        self.supports.iter().find(|support| support.joint == joint).map(|support| &support.kind)
    }
}

/// One more than the greatest number in use behind this letter.
fn free_mark<'a>(letter: &str, used: impl Iterator<Item = &'a str>) -> String {
    let numbers = used.filter_map(|mark| mark.strip_prefix(letter)?.parse::<u32>().ok());
    let next = numbers.max().map_or(1, |greatest| greatest.saturating_add(1));
    format!("{letter}{next}")
}

fn keep(count: usize, gone: impl Iterator<Item = usize>) -> Vec<bool> {
    let mut kept = vec![true; count];
    for index in gone {
        if let Some(slot) = kept.get_mut(index) {
            *slot = false;
        }
    }
    kept
}

/// Keeps the items that are both marked to be kept and fit to stay.
fn retain<T>(list: &mut Vec<T>, kept: &[bool], fit: impl Fn(&T) -> bool) {
    let mut kept = kept.iter();
    list.retain(|item| kept.next() == Some(&true) && fit(item));
}

fn put<T>(list: &mut Vec<T>, index: Option<usize>, item: T, what: &str) -> Result<(), EditError> {
    match index {
        None => list.push(item),
        Some(index) => *list.get_mut(index).ok_or_else(|| missing(what))? = item,
    }
    Ok(())
}

fn check_mark(mark: &str, what: &str, taken: bool) -> Result<(), EditError> {
    if let Some(problem) = mark_problem(mark) {
        return Err(EditError(format!("the {what} mark {problem}")));
    }
    if taken { Err(EditError(format!("{what} mark `{mark}` is used already"))) } else { Ok(()) }
}

fn missing(what: &str) -> EditError {
    EditError(format!("that {what} is not there any more"))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::Rational;

    #[test]
    fn values_too_long_to_be_saved_are_refused() {
        let digits: Rational = crate::exact::parse_fraction(&"9".repeat(40)).expect("a number");
        let mut truss = Truss { unit: Unit::M, ..Truss::default() };
        let joint = |x: &Rational| {
            let x = Written::plain(x.clone());
            Joint { mark: "A".into(), y: x.clone(), x, loose: false }
        };
        truss = truss.edited(&Edit::AddJoint(joint(&digits))).expect("forty digits");
        let error = truss.edited(&Edit::Unit(Unit::Mm)).expect_err("forty-three digits");
        assert_eq!(error.0, "a coordinate of joint `A` has more than the limit of 40 digits");
        let far = Point { x: &digits * &digits, y: digits };
        assert!(truss.edited(&Edit::MoveJoints(vec![(JointId(0), far)])).is_err());
    }
}
