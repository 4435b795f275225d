//! The limits that the checks go by: adjustable, each with its source.

use crate::exact::{Rational, fraction, ratio, whole};
use crate::measure::Unit;
use crate::truss::Truss;
use num_traits::Zero;
use serde::{Deserialize, Serialize};

/// What counts as near, tight, long and too much.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Limits {
    /// Something is *nearly* so when it is off by at most this many printing steps of the sheet. Four sixteenths are a
    /// quarter of an inch: more than rounding leaves, less than anybody draws on purpose (own choice).
    pub near_steps: u32,
    /// Neighbours at a joint leave it too close together below this spread: 1/4 is exactly 30 degrees (EN
    /// 1993-1-8:2005, 7.1.2(3), for welded hollow sections; quoted from memory).
    #[serde(with = "fraction")]
    pub tight_spread: Rational,
    /// A longer piece is noted, in millimetres: 48 ft, the semitrailer length that every state of the US has to admit
    /// (23 CFR 658).
    #[serde(with = "fraction")]
    pub longest_piece: Rational,
    /// Findings of one rule that are told one by one; what is beyond is told in one more.
    pub most_findings: usize,
    /// Steps of work that a check may spend where the work is not bounded by the size of the truss alone.
    pub most_work: usize,
}

impl Default for Limits {
    fn default() -> Limits {
        Limits {
            near_steps: 4,
            tight_spread: ratio(1, 4),
            longest_piece: ratio(146_304, 10),
            most_findings: 1000,
            most_work: 2_000_000_000,
        }
    }
}

impl Limits {
    /// The step that nearness is measured in, in the sheet's unit: the sheet's own, or 1/16 in (metric: 1 mm) where the
    /// sheet is exact.
    pub fn near_step(&self, truss: &Truss) -> Rational {
        if !truss.step.value.is_zero() {
            return truss.step.value.clone();
        }
        let millimetres = if truss.unit.is_imperial() { ratio(254, 160) } else { whole(1) };
        millimetres / truss.unit.in_millimetres()
    }

    /// The greatest deviation that counts as near, in the sheet's unit.
    pub fn near(&self, truss: &Truss) -> Rational {
        self.near_step(truss) * whole(self.near_steps)
    }

    /// The longest piece in a unit.
    pub fn longest_piece_in(&self, unit: Unit) -> Rational {
        &self.longest_piece / unit.in_millimetres()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::measure::Written;

    #[test]
    fn near_follows_the_step_of_the_sheet() {
        let mut truss = Truss::default();
        assert_eq!(Limits::default().near(&truss), ratio(1, 4));
        truss.step = Written::plain(whole(0));
        assert_eq!(Limits::default().near(&truss), ratio(1, 4), "an exact sheet in inches is taken in sixteenths");
        truss.unit = Unit::M;
        assert_eq!(Limits::default().near(&truss), ratio(4, 1000));
    }
}
