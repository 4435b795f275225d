//! From rational points to the steps of a lattice.

use crate::exact::{Point, Rational};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, ToPrimitive};

/// A common denominator beyond this many bits cannot give a lattice that fits 60 bits and is not looked for further.
const DENOMINATOR_BITS: u64 = 256;

/// The least common denominator of all coordinates; `None` when it grows out of bounds.
pub(super) fn common_denominator(points: &[Point]) -> Option<BigInt> {
    let mut common = BigInt::one();
    let mut last = BigInt::one();
    for denominator in points.iter().flat_map(|p| [p.x.denom(), p.y.denom()]) {
        if *denominator == last || common.is_multiple_of(denominator) {
            continue;
        }
        common = common.lcm(denominator);
        if common.bits() > DENOMINATOR_BITS {
            return None;
        }
        last.clone_from(denominator);
    }
    Some(common)
}

/// The lower left corner, and the greater of width and height.
pub(super) fn extent(points: &[Point]) -> (Point, Rational) {
    let axis = |get: fn(&Point) -> &Rational| {
        let is_less = |a: &Rational, b: &Rational| match whole_parts(a, b) {
            Some([a, b]) => a < b,
            None => a < b,
        };
        let mut ends = points.first().map(|point| [get(point); 2]);
        if let Some([low, high]) = &mut ends {
            for value in points.iter().map(get) {
                if is_less(value, low) {
                    *low = value;
                } else if is_less(high, value) {
                    *high = value;
                }
            }
        }
        let [low, high] = ends.map_or_else(Default::default, |ends| ends.map(Rational::clone));
        let span = high - &low;
        (low, span)
    };
    let ((x, width), (y, height)) = (axis(|p| &p.x), axis(|p| &p.y));
    (Point { x, y }, width.max(height))
}

/// Two numbers over the product of their denominators, where that fits.
fn whole_parts(a: &Rational, b: &Rational) -> Option<[i128; 2]> {
    let small = |value: &Rational| Some([value.numer().to_i64()?, value.denom().to_i64()?].map(i128::from));
    let ([a, over_a], [b, over_b]) = (small(a)?, small(b)?);
    Some([a * over_b, b * over_a])
}

/// All coordinates above `low` in lattice steps; `None` when they do not fit.
pub(super) fn scaled_all(points: &[Point], low: &Point, scale: &BigInt) -> Option<Vec<[i64; 2]>> {
    let low = [&low.x, &low.y].map(|value| value.numer() * (scale / value.denom()));
    let short = match (scale.to_i64(), low[0].to_i64(), low[1].to_i64()) {
        (Some(scale), Some(x), Some(y)) => Some((scale, x, y)),
        _ => None,
    };
    let one = |value: &Rational, low: &BigInt, short: Option<(i64, i64)>| {
        if let (Some((scale, low)), Some(numer), Some(denom)) = (short, value.numer().to_i64(), value.denom().to_i64())
            && let Some(steps) = numer.checked_mul(scale / denom)
        {
            return steps.checked_sub(low);
        }
        (value.numer() * (scale / value.denom()) - low).to_i64()
    };
    let place = |p: &Point| {
        let x = one(&p.x, &low[0], short.map(|(scale, x, _)| (scale, x)))?;
        let y = one(&p.y, &low[1], short.map(|(scale, _, y)| (scale, y)))?;
        Some([x, y])
    };
    points.iter().map(place).collect()
}
