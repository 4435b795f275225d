//! Sums of square roots of whole numbers with rational coefficients: exact, with certain signs and certain rounding.
//!
//! ```text
//! 7/2 - 3·√2 + 1/4·√5
//! ```
//!
//! Roots of whole numbers no two of which have a square as their product are linearly independent over the rationals
//! (Besicovitch, *On the linear independence of fractional powers of integers*, 1940). So a sum is zero exactly when its
//! coefficients vanish once such pairs are put together, and the sign of any other sum is certain after finitely many bits.

use super::interval::Interval;
use super::rational::{Rational, nearest_multiple, ratio, whole};
use super::surd::{Rounded, Surd};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;
use std::collections::BTreeMap;
use std::ops::{Add, Mul, Neg, Sub};

/// Fractional bits that signs are first looked for with.
const BITS: u32 = 64;

/// A sum of rational multiples of square roots.
///
/// Equality of values is asked by the sign of a difference: one value can be written in more than one way.
#[derive(Clone, Debug, Default)]
pub struct RootSum {
    /// Coefficients, none zero, by their radicands, which are whole and positive.
    terms: BTreeMap<BigInt, Rational>,
}

impl RootSum {
    /// The square root of a rational; `None` when that is negative.
    pub fn root(quadrance: &Rational) -> Option<RootSum> {
        let surd = Surd::of_quadrance(quadrance)?;
        let (coefficient, radicand) = surd.parts();
        let mut sum = RootSum::default();
        sum.put(radicand.clone(), coefficient.clone());
        Some(sum)
    }

    /// The value when it is written without a root.
    pub fn rational(&self) -> Option<Rational> {
        match self.terms.len() {
            0 => Some(Rational::zero()),
            1 => self.terms.get(&BigInt::one()).cloned(),
            _ => None,
        }
    }

    /// The stretched sum.
    pub fn scaled(&self, factor: &Rational) -> RootSum {
        if factor.is_zero() {
            return RootSum::default();
        }
        RootSum { terms: self.terms.iter().map(|(r, c)| (r.clone(), c * factor)).collect() }
    }

    /// The size of the value.
    pub fn abs(&self) -> RootSum {
        if self.sign() == Ordering::Less { -self } else { self.clone() }
    }

    /// True when the value is above zero.
    pub fn is_positive(&self) -> bool {
        self.sign() == Ordering::Greater
    }

    /// The value compared with zero; certain.
    pub fn sign(&self) -> Ordering {
        let signs = self.terms.values().map(|c| c.cmp(&Rational::zero()));
        let mut distinct: Vec<Ordering> = signs.collect();
        distinct.dedup();
        match distinct.as_slice() {
            [] => return Ordering::Equal,
            [one] => return *one,
            _ => {}
        }
        self.sign_at(BITS).unwrap_or_else(|| self.independent().sign_by_refining())
    }

    /// The sign of a sum of independent roots: zero only without terms, so that refining ends.
    fn sign_by_refining(&self) -> Ordering {
        if self.terms.is_empty() {
            return Ordering::Equal;
        }
        let mut bits = BITS;
        loop {
            if let Some(sign) = self.sign_at(bits) {
                return sign;
            }
            bits = bits.saturating_mul(2);
        }
    }

    fn sign_at(&self, bits: u32) -> Option<Ordering> {
        let (lo, hi, _) = self.fixed(bits);
        match (lo.is_positive(), hi.is_negative()) {
            (true, _) => Some(Ordering::Greater),
            (_, true) => Some(Ordering::Less),
            _ => (lo.is_zero() && hi.is_zero()).then_some(Ordering::Equal),
        }
    }

    /// Compares two values; certain.
    pub fn compare(&self, other: &RootSum) -> Ordering {
        (self - other).sign()
    }

    /// Whole numbers around the value times 2^bits and times the third number, which is whole and positive. They are at most
    /// one unit apart for each root.
    fn fixed(&self, bits: u32) -> (BigInt, BigInt, BigInt) {
        let common = self.terms.values().fold(BigInt::one(), |common, c| common.lcm(c.denom()));
        let (mut lo, mut hi) = (BigInt::zero(), BigInt::zero());
        for (radicand, coefficient) in &self.terms {
            let factor = coefficient.numer() * (&common / coefficient.denom());
            if radicand.is_one() {
                let exact = factor << bits;
                lo += &exact;
                hi += exact;
                continue;
            }
            let square: BigInt = (&factor * &factor * radicand) << (2 * bits);
            let size = square.sqrt();
            if factor.is_negative() {
                lo -= &size + 1;
                hi -= size;
            } else {
                lo += &size;
                hi += size + 1;
            }
        }
        (lo, hi, common)
    }

    /// An enclosure at most 2^-bits wide; one number only when it is written without a root.
    pub fn enclosure(&self, bits: u32) -> Interval {
        if let Some(value) = self.rational() {
            return Interval::exactly(value);
        }
        // Each root leaves a unit open, and moving outward two more.
        let bits = bits.saturating_add(2 + self.terms.len().ilog2());
        let (lo, hi, common) = self.fixed(bits);
        let unit = BigInt::one() << bits;
        let (lo, hi) = (lo.div_floor(&common), -(-hi).div_floor(&common));
        Interval::between(Rational::new(lo, unit.clone()), Rational::new(hi, unit))
    }

    /// A whole number of units of 2^-bits that is at most two units below the value, and not above it.
    pub fn units_below(&self, bits: u32) -> BigInt {
        let more = 1 + self.terms.len().checked_ilog2().unwrap_or(0);
        let (lo, _, common) = self.fixed(bits.saturating_add(more));
        lo.div_floor(&(common << more))
    }

    /// The nearest whole number of `step`s, correctly rounded; a tie goes away from zero. `None` when the step is not
    /// positive.
    pub fn nearest(&self, step: &Rational) -> Option<Rounded> {
        if !step.is_positive() {
            return None;
        }
        self.quickly_nearest(step).or_else(|| self.nearest_over(&RootSum::from(whole(1)), step))
    }

    /// The same where a first enclosure is enough.
    fn quickly_nearest(&self, step: &Rational) -> Option<Rounded> {
        let scaled = self.scaled(&step.recip());
        if let Some(value) = scaled.rational() {
            let exact = value.is_integer();
            return nearest_multiple(&value, &whole(1)).map(|steps| Rounded { steps, exact });
        }
        let (lo, hi, common) = scaled.fixed(BITS);
        let unit = common << BITS;
        let twice: BigInt = &lo * 2 + &unit;
        let (steps, rest) = twice.div_mod_floor(&(&unit * 2));
        let value = &steps * &unit;
        // Between two borders, and not where it could be the value itself.
        let is_certain = !rest.is_zero() && rest + (&hi - &lo) * 2 < &unit * 2 && (lo > value || hi < value);
        is_certain.then_some(Rounded { steps, exact: false })
    }

    /// The quotient by a positive `divisor`, rounded likewise. `None` when either is not positive.
    pub fn nearest_over(&self, divisor: &RootSum, step: &Rational) -> Option<Rounded> {
        if !step.is_positive() || !divisor.is_positive() {
            return None;
        }
        let mut bits = BITS;
        let steps = loop {
            let quotient = self.enclosure(bits).divided_by(&divisor.enclosure(bits));
            bits = bits.saturating_mul(2);
            let Some(quotient) = quotient else { continue };
            let (lo, hi) = (nearest_multiple(quotient.lo(), step)?, nearest_multiple(quotient.hi(), step)?);
            if &hi - &lo <= BigInt::one() {
                break if lo == hi { lo } else { self.on_a_border(divisor, step, lo, hi) };
            }
        };
        let exact = (self - &divisor.scaled(&(step * whole(steps.clone())))).sign() == Ordering::Equal;
        Some(Rounded { steps, exact })
    }

    /// Which of two neighbours the quotient is nearer to.
    fn on_a_border(&self, divisor: &RootSum, step: &Rational, lo: BigInt, hi: BigInt) -> BigInt {
        let border = (whole(lo.clone()) + ratio(1, 2)) * step;
        match (self - &divisor.scaled(&border)).sign() {
            Ordering::Less => lo,
            Ordering::Equal if lo.is_negative() => lo,
            _ => hi,
        }
    }

    /// The same value in roots no two of which have a square as their product.
    fn independent(&self) -> RootSum {
        let mut sum = RootSum::default();
        for (radicand, coefficient) in &self.terms {
            let alike = sum.terms.keys().find_map(|known| {
                let product = known * radicand;
                let root = product.sqrt();
                (&root * &root == product).then(|| (known.clone(), root))
            });
            match alike {
                // √r = √(k r) / k · √k
                Some((known, root)) => {
                    let factor = Rational::new(root, known.clone());
                    sum.put(known, coefficient * factor);
                }
                None => sum.put(radicand.clone(), coefficient.clone()),
            }
        }
        sum
    }

    fn put(&mut self, radicand: BigInt, coefficient: Rational) {
        if coefficient.is_zero() {
            return;
        }
        let entry = self.terms.entry(radicand);
        match entry {
            std::collections::btree_map::Entry::Vacant(free) => {
                free.insert(coefficient);
            }
            std::collections::btree_map::Entry::Occupied(mut taken) => {
                *taken.get_mut() += coefficient;
                if taken.get().is_zero() {
                    taken.remove();
                }
            }
        }
    }
}

impl From<Rational> for RootSum {
    fn from(value: Rational) -> RootSum {
        let mut sum = RootSum::default();
        sum.put(BigInt::one(), value);
        sum
    }
}

impl Add for &RootSum {
    type Output = RootSum;
    fn add(self, other: &RootSum) -> RootSum {
        let mut sum = self.clone();
        other.terms.iter().for_each(|(r, c)| sum.put(r.clone(), c.clone()));
        sum
    }
}

impl Sub for &RootSum {
    type Output = RootSum;
    fn sub(self, other: &RootSum) -> RootSum {
        let mut sum = self.clone();
        other.terms.iter().for_each(|(r, c)| sum.put(r.clone(), -c));
        sum
    }
}

impl Neg for &RootSum {
    type Output = RootSum;
    fn neg(self) -> RootSum {
        RootSum { terms: self.terms.iter().map(|(r, c)| (r.clone(), -c)).collect() }
    }
}

impl Mul for &RootSum {
    type Output = RootSum;
    fn mul(self, other: &RootSum) -> RootSum {
        let mut sum = RootSum::default();
        for (r, c) in &self.terms {
            for (s, d) in &other.terms {
                // √(g a) · √(g b) = g · √(a b)
                let common = r.gcd(s);
                let radicand = (r / &common) * (s / &common);
                sum.put(radicand, c * d * whole(common));
            }
        }
        sum
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn root(n: i64) -> RootSum {
        RootSum::root(&whole(n)).expect("not negative")
    }

    fn number(n: i64) -> RootSum {
        RootSum::from(whole(n))
    }

    #[test]
    fn signs_that_are_hard_to_see() {
        // (√2 + √3)² = 5 + 2√6
        let sum = &root(2) + &root(3);
        assert_eq!((&(&sum * &sum) - &(&number(5) + &root(24))).sign(), Ordering::Equal);
        // √(n + 1) + √(n - 1) is less than 2√n, here by 10^-18 / 4.
        let n = 1_000_000_000_000i64;
        let near = &(&root(n + 1) + &root(n - 1)) - &root(4 * n);
        assert_eq!(near.sign(), Ordering::Less);
    }

    #[test]
    fn roots_of_one_kind_meet_although_they_are_written_apart() {
        // 1369 = 37², which is not looked for when a root is taken.
        let apart = &(&root(2 * 1369) - &root(2).scaled(&whole(37))) + &number(0);
        assert_eq!(apart.sign(), Ordering::Equal);
        let product = &root(2 * 1369) * &root(2);
        assert_eq!((&product - &number(74)).sign(), Ordering::Equal);
    }

    #[test]
    fn rounding_is_certain_on_the_border_too() {
        let tie = &(&root(2 * 1369) - &root(2).scaled(&whole(37))) + &RootSum::from(ratio(1, 2));
        assert_eq!(tie.nearest(&whole(1)), Some(Rounded { steps: BigInt::from(1), exact: false }), "away from zero");
        assert_eq!((-&tie).nearest(&whole(1)), Some(Rounded { steps: BigInt::from(-1), exact: false }));
        assert_eq!(root(2).nearest(&ratio(1, 16)), Some(Rounded { steps: BigInt::from(23), exact: false }));
        assert_eq!(root(25).nearest(&whole(1)), Some(Rounded { steps: BigInt::from(5), exact: true }));
        assert_eq!(root(8).nearest_over(&root(2), &whole(1)), Some(Rounded { steps: BigInt::from(2), exact: true }));
        assert_eq!(root(2).nearest(&whole(0)), None);
        assert_eq!(root(2).nearest_over(&number(0), &whole(1)), None);
    }

    #[test]
    fn enclosures_are_as_narrow_as_they_are_asked_for() {
        let sum = &(&root(2) - &root(7)) + &RootSum::from(ratio(1, 3));
        for bits in [0, 1, 40, 200] {
            let width = sum.enclosure(bits).width() * whole(BigInt::one() << bits);
            assert!(width.is_positive() && width <= whole(1), "{bits} bits");
        }
        assert!(RootSum::from(ratio(1, 3)).enclosure(8).is_exact());
    }

    #[test]
    fn quick_rounding_and_units_agree_with_the_slow_way() {
        let mut scatter = crate::exact::modular::Scatter::new(5);
        let mut draw = |end: u64| (scatter.draw() % end) as i64;
        for _ in 0..400 {
            let terms = 1 + draw(4);
            let sum = (0..terms).fold(RootSum::from(ratio(draw(99) - 49, 1 + draw(7))), |sum, _| {
                &sum + &root(draw(60)).scaled(&ratio(draw(41) - 20, 1 + draw(9)))
            });
            let step = ratio(1 + draw(3), 1 + draw(16));
            assert_eq!(sum.nearest(&step), sum.nearest_over(&number(1), &step), "{sum:?} {step}");
            let below = RootSum::from(Rational::new(sum.units_below(20), BigInt::one() << 20u32));
            let off = (&sum - &below).scaled(&whole(1 << 20));
            assert!(off.sign() != Ordering::Less && off.compare(&number(2)) != Ordering::Greater, "{sum:?}");
        }
    }
}
