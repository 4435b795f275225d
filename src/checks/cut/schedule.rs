//! The schedule: equal members together, and totals by role.

use super::super::answers::{CutAnswer, MemberRow};
use crate::exact::{Rational, Surd, order};
use crate::measure::Sheet;
use crate::truss::{MemberId, Role, Truss};
use num_bigint::BigInt;
use num_traits::{Signed, Zero};

/// Members of one role that are exactly equal: in length, and in slope apart from its sense.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Equal {
    /// What they are for.
    pub role: Role,
    /// The members, in the order of the truss.
    pub members: Vec<MemberId>,
    /// How many of them rise to the right and to the left: where both are more than none, these are opposite hands. Both
    /// are none for members that are level or plumb.
    pub hands: [usize; 2],
    /// The working length, printed to the sheet's step; `~` before one that is rounded.
    pub length: String,
    /// The bevel, printed.
    pub bevel: String,
    /// Degrees from 0 to 90, printed.
    pub degrees: String,
    /// The squared working length, exact.
    pub quadrance: Rational,
}

/// The total of one role.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Total {
    /// The role.
    pub role: Role,
    /// How many members.
    pub count: usize,
    /// Their printed lengths added up, printed.
    pub length: String,
}

/// The schedule of a truss.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Schedule {
    /// Groups of equal members: by role, longest first.
    pub groups: Vec<Equal>,
    /// Totals of the roles that have members.
    pub totals: Vec<Total>,
}

/// The schedule, from the rows of the members; empty when the rows are not those of the truss.
pub fn schedule(truss: &Truss, cut: &CutAnswer) -> Schedule {
    if cut.members.len() != truss.members.len() {
        return Schedule::default();
    }
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let role = |row: &MemberRow| truss.member(row.member).role;
    let mut rows: Vec<&MemberRow> = cut.members.iter().map(|row| &**row).collect();
    let alike = |a: &MemberRow, b: &MemberRow| {
        let by_size = b.quadrance.cmp(&a.quadrance).then_with(|| a.rise.abs().cmp(&b.rise.abs()));
        role(a).cmp(&role(b)).then(by_size)
    };
    order::sort_by(&mut rows, |a, b| alike(a, b).then(a.member.cmp(&b.member)));
    let mut found = Schedule::default();
    let (mut length, mut sum) = (Rational::zero(), Rational::zero());
    for (index, row) in rows.iter().enumerate() {
        let is_new = index == 0 || alike(rows[index - 1], row).is_ne();
        if is_new {
            found.groups.push(group(role(row), row));
            length = printed(&row.quadrance, &truss.step.value);
        }
        let Some(group) = found.groups.last_mut() else { continue };
        group.members.push(row.member);
        let sense = &row.run * &row.rise;
        if !sense.is_zero() {
            group.hands[usize::from(sense.is_negative())] += 1;
        }
        sum += &length;
        let is_last = rows.get(index + 1).is_none_or(|next| role(next) != role(row));
        if is_last {
            let count = found.groups.iter().filter(|g| g.role == role(row)).map(|g| g.members.len()).sum();
            found.totals.push(Total { role: role(row), count, length: sheet.length(&sum) });
            sum = Rational::zero();
        }
    }
    found
}

/// A group that is still without members.
fn group(role: Role, row: &MemberRow) -> Equal {
    Equal {
        role,
        members: Vec::new(),
        hands: [0, 0],
        length: if row.exact { row.length.clone() } else { format!("~ {}", row.length) },
        bevel: row.bevel.clone(),
        degrees: row.degrees.clone(),
        quadrance: row.quadrance.clone(),
    }
}

/// The length as it is printed; on a sheet without a step to a 1/1000 of its unit.
fn printed(quadrance: &Rational, step: &Rational) -> Rational {
    let step = if step.is_positive() { step.clone() } else { crate::exact::ratio(1, 1000) };
    let steps = Surd::of_quadrance(quadrance).and_then(|root| root.nearest(&step)).map(|n| n.steps);
    step * Rational::from_integer(steps.unwrap_or_else(BigInt::zero))
}
