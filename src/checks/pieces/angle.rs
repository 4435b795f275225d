//! The angles of cuts: certified degrees, and bevels.

use crate::exact::{Rational, RootSum, Vector, degrees_of, nearest_degrees, nearest_multiple, ratio, whole};
use crate::measure::{Sheet, decimal};
use num_bigint::BigInt;
use num_traits::{One, Zero};
use std::cmp::Ordering;

/// Fractional bits that degrees are first looked for with, and at most. A tangent that is a sum of square roots belongs to
/// a rational number of degrees only at multiples of 7 1/2 (the others of them have no such tangent), which are no ties of
/// tenths; so the most is for the books only.
const BITS: [u32; 2] = [96, 6144];

/// The degrees from the working line to a cut that runs so far along the member for each unit across it, to a tenth.
pub(super) fn degrees(skew: Option<&RootSum>) -> String {
    let step = ratio(1, 10);
    let steps = skew.map_or_else(|| Some(BigInt::from(900)), |skew| tenths(skew, &step));
    steps.map_or_else(String::new, |steps| decimal(&(step * whole(steps)), 1))
}

fn tenths(skew: &RootSum, step: &Rational) -> Option<BigInt> {
    let direction = |skew: &Rational| Vector { x: skew.clone(), y: Rational::one() };
    if let Some(skew) = skew.rational() {
        return nearest_degrees(&direction(&skew), step).map(|(steps, _)| steps);
    }
    let mut bits = BITS[0];
    loop {
        let enclosure = skew.enclosure(bits);
        // More along the member is fewer degrees.
        let lo = nearest_multiple(degrees_of(&direction(enclosure.hi()), bits)?.lo(), step)?;
        let hi = nearest_multiple(degrees_of(&direction(enclosure.lo()), bits)?.hi(), step)?;
        if lo == hi || bits >= BITS[1] {
            return Some(lo);
        }
        bits *= 2;
    }
}

/// The bevel of such a cut.
pub(super) fn bevel(sheet: &Sheet, skew: Option<&RootSum>) -> String {
    let one = RootSum::from(whole(1));
    let Some(skew) = skew else { return sheet.bevel(&whole(1), &Rational::zero()) };
    let (base, step) = if sheet.unit().is_imperial() { (12, ratio(1, 16)) } else { (1000, whole(1)) };
    let is_steep = skew.compare(&one) == Ordering::Greater;
    let (small, large) = if is_steep { (&one, skew) } else { (skew, &one) };
    let steps = small.scaled(&whole(base)).nearest_over(large, &step).map(|rounded| rounded.steps).unwrap_or_default();
    // A leg that is rounded up to all of the base is not to be swapped with it.
    let (small, large) = (step * whole(steps), whole(base));
    if is_steep && small < large { sheet.bevel(&small, &large) } else { sheet.bevel(&large, &small) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::measure::Unit;

    #[test]
    fn cuts_are_told_by_degrees_and_bevel() {
        let sheet = Sheet::of(Unit::In, &ratio(1, 16));
        let root = |n: i64| RootSum::root(&whole(n)).expect("not negative");
        for (skew, angle, text) in [
            (RootSum::default(), "90.0", "0 in 12"),
            (RootSum::from(whole(1)), "45.0", "12 in 12"),
            (RootSum::from(ratio(1, 2)), "63.4", "6 in 12"),
            (RootSum::from(whole(2)), "26.6", "6 in 12 steep"),
            (root(3), "30.0", "6 15/16 in 12 steep"),
            (&root(2) - &RootSum::from(whole(1)), "67.5", "5 in 12"),
        ] {
            assert_eq!((degrees(Some(&skew)).as_str(), bevel(&sheet, Some(&skew)).as_str()), (angle, text));
        }
        assert_eq!((degrees(None).as_str(), bevel(&sheet, None).as_str()), ("90.0", "0 in 12"));
        assert_eq!(bevel(&Sheet::of(Unit::Mm, &whole(1)), Some(&root(3))), "577 in 1000 steep");
    }
}
