//! From a motion modulo a prime to the exact motion, verified.
//!
//! The motion of a free column is lifted digit by digit (Dixon 1982): when R times the digits so far is zero modulo p^k,
//! the quotient by p^k is what the next digit has to mend, and one more solution modulo p gives it. Fractions are found in
//! the residues, and R times them is computed exactly. What comes out zero is a proof; what does not is thrown away.

use super::factor::Factor;
use super::matrix::{Matrix, NOWHERE};
use crate::exact::modular::reconstruct;
use crate::exact::{Direction, Rational, Vector};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};
use std::ops::{Add, Div, Mul, Rem, Sub};

/// A motion in whole numbers without a common factor, by column pair.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Velocities(pub(crate) Vec<[BigInt; 2]>);

/// Why a motion was not lifted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum NotLifted {
    /// The prime was unlucky: the motion modulo the prime is that of no exact one.
    Unlucky,
    /// The work is beyond the bound.
    TooMuch,
}

/// Digits beyond which no fraction is looked for.
const MOST_DIGITS: usize = 1024;

/// The exact motion of a free column, verified.
///
/// # Errors
///
/// [`NotLifted`] says why there is none.
pub(crate) fn lift(matrix: &Matrix, factor: &Factor, free: usize, most_work: usize) -> Result<Velocities, NotLifted> {
    let is_short = matrix.rows.iter().all(|row| matches!(row.direction, Direction::Short(_)));
    if is_short {
        lift_in::<i128>(matrix, factor, free, most_work)
    } else {
        lift_in::<BigInt>(matrix, factor, free, most_work)
    }
}

/// Whole numbers that residuals are kept in.
trait Whole:
    Clone
    + Zero
    + From<i64>
    + Add<Output = Self>
    + Sub<Output = Self>
    + Mul<Output = Self>
    + Div<Output = Self>
    + Rem<Output = Self>
{
    fn residue(&self, factor: &Factor) -> u64;
    fn parts(direction: &Direction) -> [Self; 2];
}

impl Whole for i128 {
    fn residue(&self, factor: &Factor) -> u64 {
        factor.field.of_wide(*self)
    }

    fn parts(direction: &Direction) -> [i128; 2] {
        match direction {
            Direction::Short(parts) => parts.map(i128::from),
            // Only asked of matrices whose directions are all short.
            Direction::Long(_) => [0, 0],
        }
    }
}

impl Whole for BigInt {
    fn residue(&self, factor: &Factor) -> u64 {
        factor.field.of_big(self)
    }

    fn parts(direction: &Direction) -> [BigInt; 2] {
        direction.parts()
    }
}

fn lift_in<T: Whole>(matrix: &Matrix, factor: &Factor, free: usize, most_work: usize) -> Result<Velocities, NotLifted> {
    let parts: Vec<[T; 2]> = matrix.rows.iter().map(|row| T::parts(&row.direction)).collect();
    let mut digits = vec![factor.motion(free)];
    let mut residual: Vec<T> = vec![T::zero(); matrix.rows.len()];
    let mut next_try = 1;
    let cost = 8 * (factor.size() + matrix.rows.len() * words(matrix));
    loop {
        if digits.len() == next_try {
            if let Some(found) = whole_velocities(matrix, factor, &digits) {
                return Ok(found);
            }
            next_try *= 2;
        }
        if digits.len() >= MOST_DIGITS || digits.len().saturating_mul(cost) > most_work {
            return Err(NotLifted::TooMuch);
        }
        residual = quotient(matrix, factor, &parts, residual, &digits[digits.len() - 1]).ok_or(NotLifted::Unlucky)?;
        digits.push(mend(matrix, factor, &residual));
    }
}

/// The work on a row in machine words, by the longest direction.
fn words(matrix: &Matrix) -> usize {
    let bits = matrix.rows.iter().map(|row| match &row.direction {
        Direction::Short(_) => 0,
        Direction::Long([x, y]) => x.bits().max(y.bits()),
    });
    1 + bits.max().unwrap_or(0) as usize / 4
}

/// (residual + R digit) / p; `None` when that is not whole, so that the prime was unlucky.
fn quotient<T: Whole>(
    matrix: &Matrix,
    factor: &Factor,
    parts: &[[T; 2]],
    residual: Vec<T>,
    digit: &[[u64; 2]],
) -> Option<Vec<T>> {
    let prime = T::from(factor.field.prime() as i64);
    let velocity = |at: u32| if at == NOWHERE { [0, 0] } else { digit[at as usize].map(|part| part as i64) };
    let row = |((row, [x, y]), old): ((&super::matrix::Row, &[T; 2]), T)| {
        let (v, w) = (velocity(row.at[0]), velocity(row.at[1]));
        let sum = old + x.clone() * T::from(v[0] - w[0]) + y.clone() * T::from(v[1] - w[1]);
        (sum.clone() % prime.clone()).is_zero().then(|| sum / prime.clone())
    };
    matrix.rows.iter().zip(parts).zip(residual).map(row).collect()
}

/// The next digit: solves G x = -Rᵀ D residual.
fn mend<T: Whole>(matrix: &Matrix, factor: &Factor, residual: &[T]) -> Vec<[u64; 2]> {
    let field = factor.field;
    let mut right = vec![[0u64; 2]; matrix.joints.len()];
    for (index, row) in matrix.rows.iter().enumerate() {
        let part = residual[index].residue(factor);
        if part == 0 || row.at[0] == row.at[1] {
            continue;
        }
        let weighted = field.minus(field.times(factor.weights[index], part));
        let [x, y] = factor.residues[index].map(|entry| field.times(weighted, entry));
        let first = &mut right[row.at[0] as usize];
        *first = [field.plus(first[0], x), field.plus(first[1], y)];
        if row.at[1] != NOWHERE {
            let second = &mut right[row.at[1] as usize];
            *second = [field.plus(second[0], field.minus(x)), field.plus(second[1], field.minus(y))];
        }
    }
    factor.solve(&right)
}

/// The fractions with these digits over a common denominator, if they are a motion.
fn whole_velocities(matrix: &Matrix, factor: &Factor, digits: &[Vec<[u64; 2]>]) -> Option<Velocities> {
    let prime = BigInt::from(factor.field.prime());
    let modulus = num_traits::pow(prime.clone(), digits.len());
    let half: BigInt = &modulus / 2u32;
    let bound = modulus.sqrt();
    let mut common = BigInt::one();
    let mut numbers: Vec<Rational> = Vec::with_capacity(2 * matrix.joints.len());
    for pair in 0..matrix.joints.len() {
        for axis in 0..2 {
            if digits.iter().all(|digit| digit[pair][axis] == 0) {
                numbers.push(Rational::zero());
                continue;
            }
            let residue = digits.iter().rev().fold(BigInt::zero(), |sum, digit| sum * &prime + digit[pair][axis]);
            // Most fractions of one motion share a denominator.
            let mut numerator = (&residue * &common).mod_floor(&modulus);
            if numerator > half {
                numerator -= &modulus;
            }
            if numerator.abs() < bound {
                numbers.push(Rational::new(numerator, common.clone()));
                continue;
            }
            let fraction = reconstruct(&residue, &modulus)?;
            common = common.lcm(fraction.denom());
            numbers.push(fraction);
        }
    }
    let numbers: Vec<BigInt> = numbers.into_iter().map(|n| n.numer() * (&common / n.denom())).collect();
    let velocities = without_common_factor(numbers);
    is_motion(matrix, &velocities).then_some(velocities)
}

fn without_common_factor(numbers: Vec<BigInt>) -> Velocities {
    let mut common = BigInt::zero();
    for number in numbers.iter().filter(|number| !number.is_zero()) {
        if common.is_one() {
            break;
        }
        common = common.gcd(number);
    }
    let common = common.max(BigInt::one());
    Velocities(numbers.chunks_exact(2).map(|pair| [&pair[0] / &common, &pair[1] / &common]).collect())
}

/// True when every row times the velocities is zero: computed exactly.
pub(crate) fn is_motion(matrix: &Matrix, velocities: &Velocities) -> bool {
    let nothing = [BigInt::zero(), BigInt::zero()];
    let velocity = |at: u32| if at == NOWHERE { &nothing } else { &velocities.0[at as usize] };
    matrix.rows.iter().all(|row| {
        let (v, w) = (velocity(row.at[0]), velocity(row.at[1]));
        if v == w {
            return true;
        }
        let [x, y] = row.direction.parts();
        (x * (&v[0] - &w[0]) + y * (&v[1] - &w[1])).is_zero()
    })
}

impl Velocities {
    /// The velocity of a column pair.
    pub(crate) fn vector(&self, pair: usize) -> Vector {
        let [x, y] = &self.0[pair];
        Vector { x: Rational::from_integer(x.clone()), y: Rational::from_integer(y.clone()) }
    }

    /// True when the column pair moves.
    pub(crate) fn moves(&self, pair: usize) -> bool {
        self.0[pair].iter().any(|part| !part.is_zero())
    }
}
