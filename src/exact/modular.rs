//! Whole numbers modulo a prime of 31 bits, and the way back to fractions.
//!
//! Products fit 64 bits, which is as quick in WebAssembly as natively.

use super::rational::Rational;
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};

/// Primes below 2^31, the Mersenne prime first. More than one, for the rare matrix that is unlucky with one of them.
pub const PRIMES: [u32; 3] = [2_147_483_647, 2_147_483_629, 2_147_483_587];

/// Arithmetic modulo one prime 2^31 - c with a small c, without division.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Field {
    prime: u64,
    /// 2^31 - prime.
    less: u64,
}

const HALF: u32 = 31;

impl Field {
    /// Modulo one of [`PRIMES`].
    pub fn new(prime: u32) -> Field {
        debug_assert!(PRIMES.contains(&prime), "a prime just below 2^31");
        Field { prime: prime.into(), less: (1 << HALF) - u64::from(prime) }
    }

    /// The prime.
    pub fn prime(self) -> u64 {
        self.prime
    }

    /// A number below 2^40 with the same residue.
    #[inline]
    pub fn fold(self, value: u64) -> u64 {
        (value & ((1 << HALF) - 1)) + self.less * (value >> HALF)
    }

    /// The residue of any machine integer, from 0 to p - 1.
    pub fn of(self, value: i64) -> u64 {
        value.rem_euclid(self.prime as i64) as u64
    }

    /// The residue of a wide machine integer.
    pub fn of_wide(self, value: i128) -> u64 {
        match i64::try_from(value) {
            Ok(value) => self.of(value),
            Err(_) => value.rem_euclid(i128::from(self.prime)) as u64,
        }
    }

    /// The residue of an integer of any size.
    pub fn of_big(self, value: &BigInt) -> u64 {
        value.mod_floor(&BigInt::from(self.prime)).to_u64().unwrap_or(0)
    }

    /// The residue of a sum or product that was not reduced.
    #[inline]
    pub fn reduce(self, value: u64) -> u64 {
        let value = self.fold(self.fold(value));
        if value >= self.prime { value - self.prime } else { value }
    }

    /// The product of two residues.
    #[inline]
    pub fn times(self, a: u64, b: u64) -> u64 {
        self.reduce(a * b)
    }

    /// The sum of two residues.
    #[inline]
    pub fn plus(self, a: u64, b: u64) -> u64 {
        let sum = a + b;
        if sum >= self.prime { sum - self.prime } else { sum }
    }

    /// The residue that sums to zero with `a`.
    #[inline]
    pub fn minus(self, a: u64) -> u64 {
        if a == 0 { 0 } else { self.prime - a }
    }

    /// The reciprocal of a residue; 0 for 0, which has none.
    pub fn reciprocal(self, a: u64) -> u64 {
        // Fermat: a^(p - 2).
        let (mut power, mut base, mut left) = (1, a, self.prime - 2);
        while left > 0 {
            if left & 1 == 1 {
                power = self.times(power, base);
            }
            base = self.times(base, base);
            left >>= 1;
        }
        power
    }
}

/// The fraction `n/d` with `|n|` and `d` at most √(modulus/2) that has this residue, if there is one.
///
/// Rational reconstruction by the extended Euclidean algorithm (Wang 1981): unique when it exists.
pub fn reconstruct(residue: &BigInt, modulus: &BigInt) -> Option<Rational> {
    let bound = (modulus / 2u32).sqrt();
    let (mut r0, mut r1) = (modulus.clone(), residue.mod_floor(modulus));
    let (mut t0, mut t1) = (BigInt::zero(), BigInt::one());
    while r1 > bound {
        let (quotient, rest) = r0.div_rem(&r1);
        let next = t0 - &quotient * &t1;
        (r0, r1, t0, t1) = (r1, rest, t1, next);
    }
    if t1.is_zero() || t1.abs() > bound || !r1.gcd(&t1).is_one() {
        return None;
    }
    Some(Rational::new(r1, t1))
}

/// A stream of numbers without a pattern, always the same for the same seed (SplitMix64, Steele and others 2014).
#[derive(Clone, Debug)]
pub struct Scatter(u64);

impl Scatter {
    /// The stream of a seed.
    pub fn new(seed: u64) -> Scatter {
        Scatter(seed)
    }

    /// The next number.
    pub fn draw(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// The next residue that is not zero.
    pub fn residue(&mut self, field: Field) -> u64 {
        self.draw() % (field.prime() - 1) + 1
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::ratio;

    #[test]
    fn a_number_times_its_reciprocal_is_one() {
        for prime in PRIMES {
            let field = Field::new(prime);
            for a in [1, 2, 3, 1_000_003, u64::from(prime) - 1] {
                assert_eq!(field.times(a, field.reciprocal(a)), 1, "{a} modulo {prime}");
            }
        }
    }

    #[test]
    fn reduction_without_division_agrees_with_division() {
        let mut scatter = Scatter::new(7);
        for prime in PRIMES {
            let field = Field::new(prime);
            for value in (0..2000).map(|_| scatter.draw()).chain([0, 1, u64::MAX, prime.into(), u64::from(prime) * 2]) {
                assert_eq!(field.reduce(value), value % u64::from(prime), "{value} modulo {prime}");
            }
        }
    }

    #[test]
    fn fractions_come_back_from_their_residues() {
        let field = Field::new(PRIMES[0]);
        let modulus = BigInt::from(PRIMES[0]);
        for (n, d) in [(0, 1), (1, 1), (-1, 1), (3, 7), (-20000, 30001), (32000, 3)] {
            let residue = field.times(field.of(n), field.reciprocal(field.of(d)));
            assert_eq!(reconstruct(&BigInt::from(residue), &modulus), Some(ratio(n, d)), "{n}/{d}");
        }
    }

    #[test]
    fn the_stream_is_always_the_same() {
        assert_eq!(Scatter::new(1).draw(), Scatter::new(1).draw());
        assert_ne!(Scatter::new(1).draw(), Scatter::new(2).draw());
    }
}
