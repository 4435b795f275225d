//! Directions as rows of whole numbers.

use super::WIDE_SPAN;
use crate::exact::Vector;
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{ToPrimitive, Zero};

/// Directions of more bits are left as they are.
const REDUCED_BITS: u64 = 192;

/// The direction from one point to another, as a row of whole numbers: in lowest terms when it fits machine integers.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Direction {
    /// It fits machine integers.
    Short([i64; 2]),
    /// It does not.
    Long([BigInt; 2]),
}

impl Direction {
    /// The direction of a displacement in lowest terms.
    pub fn of(v: &Vector) -> Direction {
        let x = v.x.numer() * v.y.denom();
        let y = v.y.numer() * v.x.denom();
        Direction::of_parts([x, y])
    }

    /// In lowest terms, except where that would cost more than it saves.
    pub(super) fn of_parts([x, y]: [BigInt; 2]) -> Direction {
        if x.bits().max(y.bits()) > REDUCED_BITS {
            return Direction::Long([x, y]);
        }
        let common = x.gcd(&y);
        if common.is_zero() {
            return Direction::Short([0, 0]);
        }
        let (x, y) = (x / &common, y / &common);
        let fits = |part: &BigInt| part.to_i64().filter(|part| part.unsigned_abs() < WIDE_SPAN.unsigned_abs());
        match (fits(&x), fits(&y)) {
            (Some(x), Some(y)) => Direction::Short([x, y]),
            _ => Direction::Long([x, y]),
        }
    }

    /// True when there is no direction.
    pub fn is_null(&self) -> bool {
        *self == Direction::Short([0, 0])
    }

    /// Both parts.
    pub fn parts(&self) -> [BigInt; 2] {
        match self {
            Direction::Short(parts) => parts.map(BigInt::from),
            Direction::Long(parts) => parts.clone(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::Direction;
    use num_bigint::BigInt;

    #[test]
    fn the_least_machine_integer_is_a_long_direction() {
        let parts = [BigInt::from(i64::MIN), BigInt::from(3)];
        assert_eq!(Direction::of_parts(parts.clone()), Direction::Long(parts));
    }
}
