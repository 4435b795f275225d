//! Closed intervals of rationals, and arithmetic that encloses every result.

use super::rational::{Rational, fraction, whole};
use super::surd::{ceil_sqrt, floor_sqrt};
use num_bigint::BigInt;
use num_traits::{One, Signed, Zero};
use serde::{Deserialize, Serialize};
use std::ops::{Add, Mul, Neg, Sub};

/// All numbers from `lo` to `hi`, both included; never empty.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Interval {
    #[serde(with = "fraction")]
    lo: Rational,
    #[serde(with = "fraction")]
    hi: Rational,
}

impl Interval {
    /// The interval from `lo` to `hi`; `None` when it would be empty.
    pub fn new(lo: Rational, hi: Rational) -> Option<Interval> {
        (lo <= hi).then_some(Interval { lo, hi })
    }

    /// The interval between two numbers in either order.
    pub fn between(a: Rational, b: Rational) -> Interval {
        if a <= b { Interval { lo: a, hi: b } } else { Interval { lo: b, hi: a } }
    }

    /// The interval that holds one number only.
    pub fn exactly(value: Rational) -> Interval {
        Interval { lo: value.clone(), hi: value }
    }

    /// All numbers within `margin` (not negative) of `value`.
    pub fn around(value: &Rational, margin: &Rational) -> Interval {
        Interval::between(value - margin, value + margin)
    }

    /// The least number.
    pub fn lo(&self) -> &Rational {
        &self.lo
    }

    /// The greatest number.
    pub fn hi(&self) -> &Rational {
        &self.hi
    }

    /// The distance from the least number to the greatest.
    pub fn width(&self) -> Rational {
        &self.hi - &self.lo
    }

    /// The number midway.
    pub fn middle(&self) -> Rational {
        (&self.lo + &self.hi) / whole(2)
    }

    /// True when `value` lies in it.
    pub fn contains(&self, value: &Rational) -> bool {
        self.lo <= *value && *value <= self.hi
    }

    /// True when it holds one number only.
    pub fn is_exact(&self) -> bool {
        self.lo == self.hi
    }

    /// What both hold, if anything.
    pub fn intersection(&self, other: &Interval) -> Option<Interval> {
        let lo = (&self.lo).max(&other.lo).clone();
        let hi = (&self.hi).min(&other.hi).clone();
        Interval::new(lo, hi)
    }

    /// The least interval that holds both.
    pub fn hull(&self, other: &Interval) -> Interval {
        Interval { lo: (&self.lo).min(&other.lo).clone(), hi: (&self.hi).max(&other.hi).clone() }
    }

    /// The squares of its numbers.
    pub fn square(&self) -> Interval {
        let (a, b) = (&self.lo * &self.lo, &self.hi * &self.hi);
        if self.lo.is_positive() || self.hi.is_negative() {
            Interval::between(a, b)
        } else {
            Interval { lo: Rational::zero(), hi: a.max(b) }
        }
    }

    /// The quotients by the numbers of `divisor`; `None` when that contains zero.
    pub fn divided_by(&self, divisor: &Interval) -> Option<Interval> {
        if divisor.contains(&Rational::zero()) {
            return None;
        }
        Some(self * &Interval { lo: divisor.hi.recip(), hi: divisor.lo.recip() })
    }

    /// The stretched interval.
    pub fn scaled(&self, factor: &Rational) -> Interval {
        Interval::between(&self.lo * factor, &self.hi * factor)
    }

    /// An enclosure of the square roots of its numbers that are not negative, outward to multiples of 2^-bits.
    ///
    /// `None` when all of it is negative.
    pub fn sqrt(&self, bits: u32) -> Option<Interval> {
        if self.hi.is_negative() {
            return None;
        }
        let unit = BigInt::one() << bits;
        let square = Rational::from_integer(&unit * &unit);
        Some(Interval {
            lo: Rational::new(floor_sqrt(&(&self.lo * &square)), unit.clone()),
            hi: Rational::new(ceil_sqrt(&(&self.hi * &square)), unit),
        })
    }

    /// The enclosure with ends moved outward to multiples of 2^-bits, to keep numbers short.
    pub fn outward(&self, bits: u32) -> Interval {
        let unit = BigInt::one() << bits;
        let scale = Rational::from_integer(unit.clone());
        Interval {
            lo: Rational::new((&self.lo * &scale).floor().to_integer(), unit.clone()),
            hi: Rational::new((&self.hi * &scale).ceil().to_integer(), unit),
        }
    }
}

impl Add for &Interval {
    type Output = Interval;
    fn add(self, other: &Interval) -> Interval {
        Interval { lo: &self.lo + &other.lo, hi: &self.hi + &other.hi }
    }
}

impl Sub for &Interval {
    type Output = Interval;
    fn sub(self, other: &Interval) -> Interval {
        Interval { lo: &self.lo - &other.hi, hi: &self.hi - &other.lo }
    }
}

impl Neg for &Interval {
    type Output = Interval;
    fn neg(self) -> Interval {
        Interval { lo: -&self.hi, hi: -&self.lo }
    }
}

impl Mul for &Interval {
    type Output = Interval;
    fn mul(self, other: &Interval) -> Interval {
        let products = [&self.lo * &other.lo, &self.lo * &other.hi, &self.hi * &other.lo, &self.hi * &other.hi];
        let hull = |a: Interval, b: &Rational| a.hull(&Interval::exactly(b.clone()));
        products[1..].iter().fold(Interval::exactly(products[0].clone()), hull)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn interval(lo: i64, hi: i64) -> Interval {
        Interval::new(whole(lo), whole(hi)).expect("not empty")
    }

    #[test]
    fn products_take_the_extreme_corners() {
        assert_eq!(&interval(-2, 3) * &interval(-5, 1), interval(-15, 10));
        assert_eq!(interval(-2, 3).square(), interval(0, 9), "a square is never negative");
        assert_eq!(interval(-3, -2).square(), interval(4, 9));
    }

    #[test]
    fn division_by_an_interval_with_zero_is_refused() {
        assert!(interval(1, 2).divided_by(&interval(-1, 1)).is_none());
        assert_eq!(interval(2, 6).divided_by(&interval(1, 2)), Some(interval(1, 6)));
    }

    #[test]
    fn roots_are_enclosed() {
        let root = interval(2, 4).sqrt(8).expect("not negative");
        assert!(root.lo().clone() * root.lo() <= whole(2), "the lower end is below the root of 2");
        assert_eq!(root.hi(), &whole(2));
        assert!(interval(-2, -1).sqrt(8).is_none());
    }

    #[test]
    fn an_empty_interval_cannot_be_made() {
        assert!(Interval::new(whole(2), whole(1)).is_none());
        assert!(interval(0, 1).intersection(&interval(2, 3)).is_none());
    }
}
