//! How the checks write lengths, slopes and lists of marks.

use crate::exact::{Lattice, Point, Rational, Vector, hundredths_of, hundredths_of_large, whole};
use crate::measure::Sheet;
use crate::truss::{JointId, MemberId, Truss};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::Signed;

/// Prints for one sheet.
#[derive(Clone, Debug)]
pub(crate) struct Print<'a> {
    truss: &'a Truss,
    sheet: Sheet,
}

/// Marks listed before the rest is only counted.
const LISTED: usize = 12;

/// A root to the nearest step, and whether it is exact.
#[derive(Clone, Debug)]
pub(crate) struct Root {
    /// The rounded length, in steps.
    pub(crate) steps: BigInt,
    /// True when nothing was rounded.
    pub(crate) exact: bool,
}

impl<'a> Print<'a> {
    /// Prints for this sheet, to this step where the sheet has none.
    pub(crate) fn new(truss: &'a Truss, near_step: &Rational) -> Print<'a> {
        Print { truss, sheet: Sheet::of(truss.unit, near_step) }
    }

    /// The sheet.
    pub(crate) fn sheet(&self) -> &Sheet {
        &self.sheet
    }

    /// A length in a sentence, as the trade writes it; with the unit on metric sheets.
    pub(crate) fn length(&self, value: &Rational) -> String {
        let text = self.sheet.length(value);
        if self.truss.unit.is_imperial() { text } else { format!("{text} {}", self.truss.unit.symbol()) }
    }

    /// The printing step.
    pub(crate) fn step(&self) -> &Rational {
        self.sheet.step()
    }

    /// The root of a quadrance to the nearest step, correctly rounded; a tie goes up.
    pub(crate) fn rounded_root(&self, quadrance: &Rational) -> Root {
        // floor(x + 1/2) = floor((floor(2x) + 1) / 2), and floor(2x) is an integer root.
        let (up, down) = (self.step().denom(), self.step().numer());
        let (above, below) = (quadrance.numer() * up * up, quadrance.denom() * down * down);
        let twice = (&above * 4u32).div_floor(&below).sqrt();
        let steps = (twice + 1u32).div_floor(&BigInt::from(2));
        let exact = &steps * &steps * below == above;
        Root { steps, exact }
    }

    /// A length of so many steps.
    pub(crate) fn of_steps(&self, steps: &BigInt) -> Rational {
        self.step() * whole(steps.clone())
    }

    /// The root of a quadrance as a length in a sentence.
    pub(crate) fn root(&self, quadrance: &Rational) -> String {
        self.length(&self.of_steps(&self.rounded_root(quadrance).steps))
    }

    /// The angle from the direction `v` counter-clockwise to `w`, in degrees.
    pub(crate) fn degrees(&self, v: &Vector, w: &Vector) -> String {
        self.sheet.turn_degrees(v, w)
    }

    /// The same at a joint of a lattice; quick.
    pub(crate) fn degrees_at(&self, lattice: &Lattice, at: usize, a: usize, b: usize) -> String {
        let quick = || match [lattice.steps_along([at, a])?, lattice.steps_along([at, b])?].map(|d| d.map(i128::from)) {
            [[vx, vy], [wx, wy]] => {
                hundredths_of(i64::try_from(vx * wx + vy * wy).ok()?, i64::try_from(vx * wy - vy * wx).ok()?)
            }
        };
        let large = || {
            let [dot, cross] = lattice.corner(at, a, b);
            hundredths_of_large(&dot, &cross)
        };
        match quick().or_else(large) {
            Some(hundredths) => hundredths_text(hundredths),
            None => self.degrees(&lattice.displacement([at, a]), &lattice.displacement([at, b])),
        }
    }

    /// The slope of the line between two points of a lattice, from 0 to 90 degrees; empty when they coincide.
    pub(crate) fn slope(&self, lattice: &Lattice, pair: [usize; 2]) -> String {
        let [x, y] = lattice.direction(pair).parts().map(|part| part.abs());
        match hundredths_of_large(&x, &y) {
            Some(hundredths) => hundredths_text(hundredths),
            None => {
                let v = lattice.displacement(pair);
                self.sheet.slope_degrees(&v.x, &v.y)
            }
        }
    }

    /// A place, exactly, in the sheet's unit.
    pub(crate) fn place(&self, point: &Point) -> String {
        format!("({}, {}) {}", point.x, point.y, self.truss.unit.symbol())
    }

    /// A quadrance with its unit.
    pub(crate) fn area(&self, quadrance: &Rational) -> String {
        self.sheet.quadrance(quadrance)
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

fn hundredths_text(hundredths: u32) -> String {
    format!("{}.{:02}", hundredths / 100, hundredths % 100)
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
