//! Certified enclosures of the spread of an angle in degrees.

use crate::exact::{Interval, Rational};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

/// Binary places carried beyond those asked for, against the rounding of each term.
const GUARD: u32 = 24;

/// An enclosure of sin² of an angle of 0 to 180 degrees, a few units of 2^-bits wide.
///
/// sin²θ = (1 - cos 2θ)/2, by the cosine series at φ = 2θ taken modulo a turn, in integers scaled by 2^(bits + guard).
pub(crate) fn spread_of_degrees(degrees: &Rational, bits: u32) -> Interval {
    let places = bits + GUARD;
    let one = BigInt::one() << places;
    // cos 2θ = -cos(2θ - 180°), so the argument stays within a half turn.
    let turned = (degrees * Rational::from_integer(2.into()) - Rational::from_integer(180.into())).abs();
    let scaled = &turned * Rational::from_integer(pi_scaled(places)) / Rational::from_integer(180.into());
    let argument = scaled.floor().to_integer();
    let cosine = cosine_scaled(&argument, places);
    let spread = (&one + cosine).div_floor(&BigInt::from(2));
    let slack = BigInt::one() << (GUARD - 4);
    let end = |n: BigInt| Rational::new(n, one.clone());
    let within = |r: Rational| r.max(Rational::zero()).min(Rational::one());
    Interval::between(within(end(&spread - &slack)), within(end(&spread + &slack))).outward(bits)
}

/// π by Machin's formula, scaled; off by less than a hundred units.
fn pi_scaled(places: u32) -> BigInt {
    let inverse_tangent = |n: u32| {
        let (mut power, mut sum, mut k) = ((BigInt::one() << places) / n, BigInt::zero(), 1u32);
        while !power.is_zero() {
            let term = &power / k;
            if k % 4 == 1 {
                sum += term
            } else {
                sum -= term
            }
            power /= n * n;
            k += 2;
        }
        sum
    };
    (inverse_tangent(5) * 4 - inverse_tangent(239)) * 4
}

/// The cosine series in scaled integers; each term is cut by less than a unit.
fn cosine_scaled(argument: &BigInt, places: u32) -> BigInt {
    let square: BigInt = (argument * argument) >> places;
    let (mut term, mut sum, mut k) = (BigInt::one() << places, BigInt::zero(), 0u32);
    while !term.is_zero() {
        if k % 4 == 0 {
            sum += &term
        } else {
            sum -= &term
        }
        term = ((&term * &square) >> places) / ((k + 1) * (k + 2));
        k += 2;
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{ratio, whole};

    #[test]
    fn the_spreads_of_known_angles_are_enclosed_tightly() {
        for (degrees, spread) in
            [(0, (0, 1)), (30, (1, 4)), (45, (1, 2)), (60, (3, 4)), (90, (1, 1)), (150, (1, 4)), (180, (0, 1))]
        {
            let enclosure = spread_of_degrees(&whole(degrees), 80);
            assert!(enclosure.contains(&ratio(spread.0, spread.1)), "{degrees}");
            assert!(enclosure.width() <= Rational::new(2.into(), BigInt::one() << 80u32), "{degrees}");
        }
    }

    #[test]
    fn fifteen_degrees_satisfies_the_spread_polynomial() {
        let s = spread_of_degrees(&whole(15), 80);
        let twice = |s: &Rational| whole(4) * s * (whole(1) - s);
        assert!(Interval::between(twice(s.lo()), twice(s.hi())).contains(&ratio(1, 4)));
    }
}
