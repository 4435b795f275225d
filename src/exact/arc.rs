//! Degrees, for the saw and for figured angles: certified enclosures, and rounding that is certain.
//!
//! Everything is fixed-point arithmetic in whole numbers. The arc tangent is reduced by the addition theorem to an argument
//! of at most 1/64, where its alternating series is cut; the error of every step is less than one unit in the last place,
//! and all of them together less than 2^[`SLACK`] units.
//!
//! A rational tangent belongs to a rational number of degrees only at multiples of 45 degrees, a rational squared sine only
//! at multiples of 30 and 45 degrees (Niven, *Irrational Numbers*, 1956); those cases are answered exactly, so that rounding
//! by raising the precision always ends.

use super::interval::Interval;
use super::point::Vector;
use super::rational::{Rational, nearest_multiple, ratio, whole};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};
use std::sync::OnceLock;

/// Fractional bits of the everyday table.
const BITS: u32 = 96;
/// Units in the last place that all errors together stay below, as a power of two.
const SLACK: u32 = 16;
/// The table holds the arc tangents of k/32.
const TABLE: u32 = 32;

/// Arc tangents of k/32 for k from 0 to 32, in units of 2^-bits.
struct Arcs {
    bits: u32,
    table: Vec<BigInt>,
}

impl Arcs {
    fn new(bits: u32) -> Arcs {
        let mut table = vec![BigInt::zero()];
        for k in 0..TABLE {
            // atan((k+1)/32) - atan(k/32) = atan(32 / (1024 + k(k+1)))
            let small = (BigInt::from(TABLE) << bits) / BigInt::from(TABLE * TABLE + k * (k + 1));
            let next = table[k as usize].clone() + small_arc(&small, bits);
            table.push(next);
        }
        Arcs { bits, table }
    }

    /// The arc tangent of `tangent` (from 0 to 1, in units of 2^-bits), within 2^SLACK units.
    fn arc(&self, tangent: &BigInt) -> BigInt {
        let one = BigInt::one() << self.bits;
        let k = ((tangent * TABLE + (&one >> 1u32)) >> self.bits).to_u32().unwrap_or(TABLE).min(TABLE);
        let node = (BigInt::from(k) << self.bits) / BigInt::from(TABLE);
        let rest = ((tangent - &node) << self.bits).div_floor(&(&one + ((tangent * &node) >> self.bits)));
        &self.table[k as usize] + small_arc(&rest, self.bits)
    }

    /// The arc tangent of 1: 45 degrees.
    fn eighth(&self) -> &BigInt {
        &self.table[TABLE as usize]
    }

    /// An enclosure of the degrees of an arc given in units, from 0 to 45.
    fn degrees(&self, arc: &BigInt) -> Interval {
        let slack = BigInt::one() << SLACK;
        let end = |arc: BigInt, eighth: BigInt| Rational::new(arc * 45, eighth);
        let lo = end((arc - &slack).max(BigInt::zero()), self.eighth() + &slack);
        Interval::between(lo, end(arc + &slack, self.eighth() - &slack))
    }
}

/// The alternating series of the arc tangent for an argument of at most 1/30 in size.
fn small_arc(x: &BigInt, bits: u32) -> BigInt {
    let square = (x * x) >> bits;
    let (mut power, mut sum, mut n) = (x.clone(), BigInt::zero(), 1u32);
    while !power.is_zero() && power != BigInt::from(-1) {
        let term = power.div_floor(&BigInt::from(n));
        sum = if n % 4 == 1 { sum + term } else { sum - term };
        power = (power * &square) >> bits;
        n += 2;
    }
    sum
}

fn everyday() -> &'static Arcs {
    static ARCS: OnceLock<Arcs> = OnceLock::new();
    ARCS.get_or_init(|| Arcs::new(BITS))
}

fn with_arcs<T>(bits: u32, act: impl FnOnce(&Arcs) -> T) -> T {
    if bits <= BITS { act(everyday()) } else { act(&Arcs::new(bits)) }
}

/// An enclosure of the direction of a vector in degrees, counter-clockwise from the right, from 0 to 360; narrower than
/// 2^(20 - bits) degrees. Exact at multiples of 45 degrees. `None` for a null vector.
pub fn degrees_of(v: &Vector, bits: u32) -> Option<Interval> {
    if v.is_null() {
        return None;
    }
    let (x, y) = (v.x.abs(), v.y.abs());
    let first = if x >= y { octant(&y, &x, bits) } else { reflect(90, &octant(&x, &y, bits)) };
    Some(match (v.x.is_negative(), v.y.is_negative()) {
        (false, false) => first,
        (true, false) => reflect(180, &first),
        (true, true) => &first + &Interval::exactly(whole(180)),
        (false, true) if v.y.is_zero() => first,
        (false, true) => reflect(360, &first),
    })
}

/// `degrees - interval`.
fn reflect(degrees: u32, interval: &Interval) -> Interval {
    &Interval::exactly(whole(degrees)) - interval
}

/// The angle whose tangent is `small / large`, for 0 <= small <= large.
fn octant(small: &Rational, large: &Rational, bits: u32) -> Interval {
    if small.is_zero() {
        return Interval::exactly(whole(0));
    }
    if small == large {
        return Interval::exactly(whole(45));
    }
    with_arcs(bits, |arcs| {
        let tangent = small / large;
        arcs.degrees(&arcs.arc(&((tangent.numer() << arcs.bits) / tangent.denom())))
    })
}

/// An enclosure of the degrees, from 0 to 90, of the angle between two lines with this spread; narrower than
/// 2^(22 - bits/2) degrees. Exact at 0, 30, 45, 60 and 90 degrees. `None` when the spread is not from 0 to 1.
pub fn degrees_of_spread(spread: &Rational, bits: u32) -> Option<Interval> {
    if spread.is_negative() || *spread > whole(1) {
        return None;
    }
    let half = ratio(1, 2);
    if *spread > half {
        return degrees_of_spread(&(whole(1) - spread), bits).map(|rest| reflect(90, &rest));
    }
    for (special, degrees) in [(whole(0), 0), (ratio(1, 4), 30), (half, 45)] {
        if *spread == special {
            return Some(Interval::exactly(whole(degrees)));
        }
    }
    // The squared tangent is s / (1 - s).
    let square = spread / (whole(1) - spread);
    with_arcs(bits, |arcs| {
        let root = Interval::exactly(square).sqrt(arcs.bits)?;
        let scale = whole(BigInt::one() << arcs.bits);
        let end = |tangent: &Rational| {
            let one = BigInt::one() << arcs.bits;
            arcs.degrees(&arcs.arc(&(tangent * &scale).to_integer().min(one)))
        };
        Some(end(root.lo()).hull(&end(root.hi())))
    })
}

/// An enclosure of the spread (squared sine) of an angle of `degrees`, narrower than 2^(16 - bits). Exact at multiples of
/// 30 and of 45 degrees.
pub fn spread_of_degrees(degrees: &Rational, bits: u32) -> Interval {
    let turn = whole(180);
    let within = degrees - (degrees / &turn).floor() * &turn;
    let sharp = if within > whole(90) { turn - within } else { within };
    if sharp > whole(45) {
        return &Interval::exactly(whole(1)) - &sharp_spread(&(whole(90) - sharp), bits);
    }
    sharp_spread(&sharp, bits)
}

/// The spread of an angle from 0 to 45 degrees.
fn sharp_spread(degrees: &Rational, bits: u32) -> Interval {
    for (special, spread) in [(0, ratio(0, 1)), (30, ratio(1, 4)), (45, ratio(1, 2))] {
        if *degrees == whole(special) {
            return Interval::exactly(spread);
        }
    }
    with_arcs(bits, |arcs| {
        // sin² = (1 - cos 2θ) / 2, with 2θ at most a quarter turn.
        let double = arcs.eighth() * degrees.numer() * 2 / (degrees.denom() * BigInt::from(45));
        let versed = versed_sine(&double, arcs.bits);
        let slack = BigInt::one() << SLACK;
        let unit = BigInt::one() << (arcs.bits + 1);
        let end = |n: BigInt| Rational::new(n, unit.clone());
        Interval::between(end((&versed - &slack).max(BigInt::zero())), end(versed + slack))
    })
}

/// `1 - cos x`, by its series, for x up to 1.6.
fn versed_sine(x: &BigInt, bits: u32) -> BigInt {
    let square = (x * x) >> bits;
    let (mut term, mut sum, mut n) = (&square >> 1u32, BigInt::zero(), 2u32);
    let mut adds = true;
    while !term.is_zero() {
        sum = if adds { sum + &term } else { sum - &term };
        term = ((term * &square) >> bits) / BigInt::from((n + 1) * (n + 2));
        n += 2;
        adds = !adds;
    }
    sum
}

/// The direction of a vector, counter-clockwise from the right, rounded to the nearest multiple of `step` degrees: the count
/// of steps, and whether it is exact. Certain: the precision is raised until both ends of the enclosure round alike.
///
/// `None` for a null vector or a step that is not positive.
pub fn nearest_degrees(v: &Vector, step: &Rational) -> Option<(BigInt, bool)> {
    settle(step, |bits| degrees_of(v, bits))
}

/// The degrees of a spread, rounded likewise.
pub fn nearest_degrees_of_spread(spread: &Rational, step: &Rational) -> Option<(BigInt, bool)> {
    settle(step, |bits| degrees_of_spread(spread, bits))
}

fn settle(step: &Rational, enclose: impl Fn(u32) -> Option<Interval>) -> Option<(BigInt, bool)> {
    let mut bits = BITS;
    loop {
        let enclosure = enclose(bits)?;
        let (lo, hi) = (nearest_multiple(enclosure.lo(), step)?, nearest_multiple(enclosure.hi(), step)?);
        if lo == hi {
            let exact = enclosure.is_exact() && (enclosure.lo() / step).is_integer();
            return Some((lo, exact));
        }
        bits = bits.checked_mul(2)?;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn special_angles_are_exact() {
        for (degrees, spread) in [
            (0, ratio(0, 1)),
            (30, ratio(1, 4)),
            (45, ratio(1, 2)),
            (60, ratio(3, 4)),
            (90, whole(1)),
            (150, ratio(1, 4)),
            (180, whole(0)),
        ] {
            assert_eq!(spread_of_degrees(&whole(degrees), 64), Interval::exactly(spread.clone()), "{degrees}");
            if degrees <= 90 {
                assert_eq!(degrees_of_spread(&spread, 64), Some(Interval::exactly(whole(degrees))));
                assert_eq!(
                    nearest_degrees_of_spread(&spread, &ratio(1, 100)),
                    Some((BigInt::from(degrees * 100), true))
                );
            }
        }
    }

    #[test]
    fn more_bits_give_a_narrower_enclosure_around_the_same_angle() {
        let v = Vector { x: whole(1237), y: whole(411) };
        let (wide, narrow) = (degrees_of(&v, 96).expect("a direction"), degrees_of(&v, 300).expect("a direction"));
        assert!(narrow.width() < wide.width());
        assert_eq!(wide.intersection(&narrow), Some(narrow));
    }
}
