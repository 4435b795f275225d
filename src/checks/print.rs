//! How the checks write lengths, slopes and lists of marks.

use crate::exact::{Point, Rational, Surd, Vector, nearest_multiple, ratio, whole};
use crate::measure::Unit;
use crate::truss::{JointId, MemberId, Truss};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{Signed, ToPrimitive, Zero};

/// Prints for one sheet.
#[derive(Clone, Debug)]
pub(crate) struct Print<'a> {
    truss: &'a Truss,
    step: Rational,
}

/// Marks listed before the rest is only counted.
const LISTED: usize = 12;

impl<'a> Print<'a> {
    /// Prints for this sheet, to this step where the sheet has none.
    pub(crate) fn new(truss: &'a Truss, near_step: Rational) -> Print<'a> {
        Print { truss, step: near_step }
    }

    /// A length in the sheet's unit, as the trade writes it.
    pub(crate) fn length(&self, value: &Rational) -> String {
        let steps = nearest_multiple(value, &self.step).unwrap_or_default();
        self.steps(&steps)
    }

    /// A root as a length, and whether it is exact.
    pub(crate) fn surd(&self, length: &Surd) -> (String, bool) {
        match length.nearest(&self.step) {
            Some(rounded) => (self.steps(&rounded.steps), rounded.exact),
            None => (length.to_string(), true),
        }
    }

    /// The printing step.
    pub(crate) fn step(&self) -> &Rational {
        &self.step
    }

    /// The root of a quadrance as a length.
    pub(crate) fn root(&self, quadrance: &Rational) -> String {
        Surd::of_quadrance(quadrance).map(|length| self.surd(&length).0).unwrap_or_default()
    }

    fn steps(&self, steps: &BigInt) -> String {
        let value = &self.step * Rational::from_integer(steps.clone());
        if !self.truss.unit.is_imperial() {
            return format!("{value} {}", self.truss.unit.symbol());
        }
        let inches = value * self.truss.unit.in_units_of(Unit::In);
        let sign = if inches.is_negative() { "-" } else { "" };
        let inches = inches.abs();
        let (feet, rest) = inches.to_integer().div_rem(&BigInt::from(12));
        let part = inches.fract();
        let part = if part.is_zero() { String::new() } else { format!(" {part}") };
        format!("{sign}{feet}'-{rest}{part}\"")
    }

    /// The smaller leg in 12 of the larger (metric: in 1000), to a sixteenth (metric: to 1); with its sense.
    pub(crate) fn bevel(&self, run: &Rational, rise: &Rational) -> String {
        let (base, step) =
            if self.truss.unit.is_imperial() { (whole(12), ratio(1, 16)) } else { (whole(1000), whole(1)) };
        let (small, large) = if run.abs() < rise.abs() { (run.abs(), rise.abs()) } else { (rise.abs(), run.abs()) };
        if large.is_zero() {
            return String::new();
        }
        let steps = nearest_multiple(&(small / large * &base), &step).unwrap_or_default();
        let leg = step * Rational::from_integer(steps);
        if run.abs() < rise.abs() { format!("{base}:{leg}") } else { format!("{leg}:{base}") }
    }

    /// The angle from the direction `v` counter-clockwise to `w`, in degrees.
    pub(crate) fn degrees(&self, v: &Vector, w: &Vector) -> String {
        let (cross, dot) = (v.cross(w).to_f64().unwrap_or(0.0), v.dot(w).to_f64().unwrap_or(0.0));
        let degrees = cross.atan2(dot).to_degrees();
        format!("{:.2}", if degrees < 0.0 { degrees + 360.0 } else { degrees })
    }

    /// A place, exactly, in the sheet's unit.
    pub(crate) fn place(&self, point: &Point) -> String {
        format!("({}, {}) {}", point.x, point.y, self.truss.unit.symbol())
    }

    /// A quadrance with its unit.
    pub(crate) fn area(&self, quadrance: &Rational) -> String {
        format!("{quadrance} {}²", self.truss.unit.symbol())
    }

    /// The mark of a joint.
    pub(crate) fn joint(&self, joint: usize) -> &'a str {
        self.truss.mark(JointId::new(joint))
    }

    /// The mark of a member.
    pub(crate) fn member(&self, member: usize) -> &'a str {
        &self.truss.member(MemberId::new(member)).mark
    }

    /// Marks of joints as a list: `L0, L1 and U1`.
    pub(crate) fn joints(&self, joints: impl IntoIterator<Item = usize>) -> String {
        listed(joints.into_iter().map(|joint| self.joint(joint)))
    }

    /// Marks of members as a list.
    pub(crate) fn members(&self, members: impl IntoIterator<Item = usize>) -> String {
        listed(members.into_iter().map(|member| self.member(member)))
    }
}

/// `A`, `A and B`, `A, B and C`; a long list ends in a count.
pub(crate) fn listed<'m>(marks: impl Iterator<Item = &'m str>) -> String {
    let marks: Vec<&str> = marks.collect();
    match marks.as_slice() {
        [] => String::new(),
        [one] => (*one).into(),
        many if many.len() > LISTED => {
            format!("{} and {} more", many[..LISTED - 1].join(", "), many.len() - LISTED + 1)
        }
        [rest @ .., last] => format!("{} and {last}", rest.join(", ")),
    }
}

/// `1 panel`, `2 panels`.
pub(crate) fn counted(count: usize, one: &str, many: &str) -> String {
    if count == 1 { format!("1 {one}") } else { format!("{count} {many}") }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn long_lists_end_in_a_count() {
        assert_eq!(listed(["A"].into_iter()), "A");
        assert_eq!(listed(["A", "B", "C"].into_iter()), "A, B and C");
        assert!(listed(std::iter::repeat_n("A", 40)).ends_with("A and 29 more"));
    }
}
