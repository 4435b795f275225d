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

/// Serialisation of a [`Rational`] as its text `p/q`, for `#[serde(with = "fraction")]`.
pub mod fraction {
    use super::{Rational, parse_fraction};
    use serde::{Deserialize, Deserializer, Serializer, de::Error};

    /// Writes the number as an integer or `p/q`.
    pub fn serialize<S: Serializer>(value: &Rational, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(value)
    }

    /// Reads an integer or `p/q`.
    pub fn deserialize<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Rational, D::Error> {
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
