//! The number type: a rational of any size, always in lowest terms with a positive denominator.

use num_bigint::BigInt;
use num_integer::Integer;
use num_rational::BigRational;
use num_traits::{Signed, Zero};

/// An exact rational number of any size. It displays as an integer or as `p/q` in lowest terms.
pub type Rational = BigRational;

/// The whole number `n`.
pub fn whole(n: impl Into<BigInt>) -> Rational {
    Rational::from_integer(n.into())
}

/// The fraction `numerator / denominator` of machine integers.
///
/// # Panics
///
/// When the denominator is zero; for numbers from outside use a parser.
pub fn ratio(numerator: i64, denominator: i64) -> Rational {
    Rational::new(numerator.into(), denominator.into())
}

/// The multiple of `step` nearest to `value`, as a count of steps; a tie goes away from zero.
///
/// `None` when the step is not positive.
pub fn nearest_multiple(value: &Rational, step: &Rational) -> Option<BigInt> {
    if !step.is_positive() {
        return None;
    }
    let steps = value.abs() / step;
    let twice: BigInt = steps.numer() * 2 + steps.denom();
    let count = twice.div_floor(&(steps.denom() * 2));
    Some(if value.is_negative() { -count } else { count })
}

/// Reads an integer or a fraction `p/q` of plain digits, as [`Rational`] displays.
pub fn parse_fraction(text: &str) -> Option<Rational> {
    let (numerator, denominator) = text.split_once('/').unwrap_or((text, "1"));
    let digits = |s: &str| !s.is_empty() && s.bytes().all(|b| b.is_ascii_digit());
    if !digits(numerator.strip_prefix('-').unwrap_or(numerator)) || !digits(denominator) {
        return None;
    }
    let denominator: BigInt = denominator.parse().ok()?;
    if denominator.is_zero() {
        return None;
    }
    Some(Rational::new(numerator.parse().ok()?, denominator))
}

/// Serialisation of a [`Rational`], for `#[serde(with = "fraction")]`: in documents that people read as its text `p/q`, else
/// in short as numbers.
pub mod fraction {
    use super::{Rational, parse_fraction};
    use num_bigint::BigInt;
    use num_integer::Integer;
    use num_traits::{One, Signed, ToPrimitive};
    use serde::{Deserialize, Deserializer, Serialize, Serializer, de::Error};

    /// Numerator and denominator, as numbers or as bytes, the least first.
    #[derive(Serialize, Deserialize)]
    enum Short {
        Whole(i64),
        Parts(i64, i64),
        Long(Vec<u8>, Vec<u8>),
    }

    impl Short {
        fn of(value: &Rational) -> Short {
            match (value.numer().to_i64(), value.denom().to_i64()) {
                (Some(numer), Some(1)) => Short::Whole(numer),
                (Some(numer), Some(denom)) => Short::Parts(numer, denom),
                _ => Short::Long(value.numer().to_signed_bytes_le(), value.denom().to_signed_bytes_le()),
            }
        }

        /// The number; `None` where the denominator is not positive.
        fn value(self) -> Option<Rational> {
            match self {
                Short::Whole(numer) => Some(Rational::new_raw(numer.into(), BigInt::one())),
                Short::Parts(numer, denom) if denom > 0 && i128::from(numer).gcd(&i128::from(denom)) == 1 => {
                    Some(Rational::new_raw(numer.into(), denom.into()))
                }
                Short::Parts(..) => None,
                Short::Long(numer, denom) => {
                    let [numer, denom] = [numer, denom].map(|bytes| BigInt::from_signed_bytes_le(&bytes));
                    denom.is_positive().then(|| Rational::new(numer, denom))
                }
            }
        }
    }

    /// Writes the number: as an integer or `p/q`, or in short.
    pub fn serialize<S: Serializer>(value: &Rational, serializer: S) -> Result<S::Ok, S::Error> {
        match serializer.is_human_readable() {
            true => serializer.collect_str(value),
            false => Short::of(value).serialize(serializer),
        }
    }

    /// Reads an integer or `p/q`, or the short form.
    pub fn deserialize<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Rational, D::Error> {
        if !deserializer.is_human_readable() {
            let short = Short::deserialize(deserializer)?;
            return short.value().ok_or_else(|| D::Error::custom("a fraction in lowest terms was expected"));
        }
        let text = std::borrow::Cow::<str>::deserialize(deserializer)?;
        parse_fraction(&text).ok_or_else(|| D::Error::custom(format!("`{text}` is not a fraction p/q")))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_tie_goes_away_from_zero() {
        for (value, expected) in
            [(ratio(1, 2), 1), (ratio(-1, 2), -1), (ratio(3, 2), 2), (ratio(7, 5), 1), (ratio(0, 1), 0)]
        {
            assert_eq!(nearest_multiple(&value, &whole(1)), Some(expected.into()), "{value}");
        }
        assert_eq!(
            nearest_multiple(&ratio(5, 32), &ratio(1, 16)),
            Some(3.into()),
            "5/32 is midway between 2/16 and 3/16"
        );
    }

    #[test]
    fn a_step_that_is_not_positive_has_no_multiples() {
        assert_eq!(nearest_multiple(&whole(3), &whole(0)), None);
        assert_eq!(nearest_multiple(&whole(3), &whole(-1)), None);
    }

    #[test]
    fn fractions_read_as_they_print() {
        for value in [ratio(0, 1), ratio(-7, 3), ratio(40, 7), whole(123_456_789)] {
            assert_eq!(parse_fraction(&value.to_string()), Some(value));
        }
        for bad in ["", "-", "1/0", "1/", "/2", "1.5", "+1", "1/-2", "--1", " 1"] {
            assert_eq!(parse_fraction(bad), None, "{bad}");
        }
    }
}
