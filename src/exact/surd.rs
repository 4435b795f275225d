//! Lengths: square roots of rationals, kept exactly and rounded correctly when they are printed.

use super::rational::{Rational, whole};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;
use std::fmt;

/// A count of steps, and whether it is exactly the value that was rounded.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Rounded {
    /// The nearest whole number of steps; a tie goes up.
    pub steps: BigInt,
    /// True when nothing was rounded.
    pub exact: bool,
}

/// The length `coefficient · √radicand`, not negative, with a whole positive radicand (1 when it is rational).
///
/// Square factors of small primes are taken out of the radicand, so that a length prints short (`12√5`).
#[derive(Clone, Debug)]
pub struct Surd {
    coefficient: Rational,
    radicand: BigInt,
}

/// Square factors are looked for up to this prime: enough for the lattices of the trade, and quick.
const SMALL_PRIMES: [u32; 11] = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31];

impl Surd {
    /// The length whose square is `quadrance`; `None` when that is negative.
    pub fn of_quadrance(quadrance: &Rational) -> Option<Surd> {
        if quadrance.is_negative() {
            return None;
        }
        // √(a/b) = √(ab) / b
        let mut radicand = quadrance.numer() * quadrance.denom();
        let mut coefficient = Rational::new(BigInt::one(), quadrance.denom().clone());
        let root = radicand.sqrt();
        if &root * &root == radicand {
            return Some(Surd { coefficient: coefficient * Rational::from_integer(root), radicand: BigInt::one() });
        }
        for prime in SMALL_PRIMES {
            let square = BigInt::from(prime * prime);
            loop {
                let (quotient, remainder) = radicand.div_rem(&square);
                if !remainder.is_zero() {
                    break;
                }
                radicand = quotient;
                coefficient *= whole(prime);
            }
        }
        Some(Surd { coefficient, radicand })
    }

    /// The square of the length.
    pub fn quadrance(&self) -> Rational {
        &self.coefficient * &self.coefficient * Rational::from_integer(self.radicand.clone())
    }

    /// The length itself when it is rational.
    pub fn rational(&self) -> Option<&Rational> {
        self.radicand.is_one().then_some(&self.coefficient)
    }

    /// The coefficient and the radicand.
    pub fn parts(&self) -> (&Rational, &BigInt) {
        (&self.coefficient, &self.radicand)
    }

    /// The nearest whole number of `step`s, correctly rounded; a tie goes up. `None` when the step is not positive.
    pub fn nearest(&self, step: &Rational) -> Option<Rounded> {
        if !step.is_positive() {
            return None;
        }
        // floor(x + 1/2) = floor((floor(2x) + 1) / 2), and floor(2x) is an integer square root.
        let square = self.quadrance() / (step * step);
        let steps = (floor_sqrt(&(&square * whole(4))) + 1u32).div_floor(&BigInt::from(2));
        let exact = Rational::from_integer(&steps * &steps) == square;
        Some(Rounded { steps, exact })
    }

    /// Compares the length with a rational.
    pub fn compare(&self, other: &Rational) -> Ordering {
        if other.is_negative() { Ordering::Greater } else { self.quadrance().cmp(&(other * other)) }
    }
}

impl PartialEq for Surd {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Surd {}

impl PartialOrd for Surd {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Surd {
    /// Lengths are compared by their squares.
    fn cmp(&self, other: &Self) -> Ordering {
        self.quadrance().cmp(&other.quadrance())
    }
}

impl fmt::Display for Surd {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.radicand.is_one() {
            return write!(f, "{}", self.coefficient);
        }
        if !self.coefficient.numer().is_one() {
            write!(f, "{}", self.coefficient.numer())?;
        }
        write!(f, "√{}", self.radicand)?;
        if self.coefficient.denom().is_one() { Ok(()) } else { write!(f, "/{}", self.coefficient.denom()) }
    }
}

/// The largest integer whose square is at most `value` (0 for negative values).
pub fn floor_sqrt(value: &Rational) -> BigInt {
    if value.is_positive() { value.floor().to_integer().sqrt() } else { BigInt::zero() }
}

/// The smallest integer, not negative, whose square is at least `value`.
pub fn ceil_sqrt(value: &Rational) -> BigInt {
    let floor = floor_sqrt(value);
    if Rational::from_integer(&floor * &floor) < *value { floor + 1u32 } else { floor }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::ratio;

    fn surd(q: Rational) -> Surd {
        Surd::of_quadrance(&q).expect("not negative")
    }

    #[test]
    fn lengths_print_short() {
        for (q, expected) in [
            (whole(720), "12√5"),
            (whole(25), "5"),
            (ratio(1, 2), "√2/2"),
            (whole(0), "0"),
            (ratio(9, 4), "3/2"),
            (whole(7), "√7"),
        ] {
            assert_eq!(surd(q.clone()).to_string(), expected, "{q}");
        }
        assert!(Surd::of_quadrance(&whole(-1)).is_none());
    }

    #[test]
    fn rounding_is_to_the_nearest_and_a_tie_goes_up() {
        let step = ratio(1, 16);
        // 8'-0 by 6'-0 has exactly 10'-0.
        let exact = surd(whole(120 * 120)).nearest(&step).expect("a step");
        assert_eq!((exact.steps, exact.exact), (BigInt::from(1920), true));
        // 1/32 is midway between 0 and 1/16.
        assert_eq!(surd(ratio(1, 1024)).nearest(&step).expect("a step").steps, BigInt::from(1));
        // √2 = 22.627/16
        let root = surd(whole(2)).nearest(&step).expect("a step");
        assert_eq!((root.steps, root.exact), (BigInt::from(23), false));
    }

    #[test]
    fn floor_and_ceiling_enclose_the_root() {
        for (value, floor, ceil) in
            [(whole(16), 4, 4), (whole(17), 4, 5), (ratio(1, 3), 0, 1), (ratio(49, 2), 4, 5), (whole(-3), 0, 0)]
        {
            assert_eq!((floor_sqrt(&value), ceil_sqrt(&value)), (floor.into(), ceil.into()), "{value}");
        }
    }
}
