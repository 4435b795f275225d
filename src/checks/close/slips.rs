//! Slips of the pen: how a right value may have become the wrong one on the drawing.

use crate::checks::Slip;
use crate::exact::{Rational, ratio, whole};
use crate::measure::Unit;
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};

/// Digits that are taken for each other.
const CONFUSED: [(u8, u8); 4] = [(b'6', b'9'), (b'1', b'7'), (b'3', b'8'), (b'5', b'6')];

/// The slip that turns `right` into `printed`, if one is known; both in `unit` when they are lengths, else plain.
pub(crate) fn slip(printed: &Rational, right: &Rational, unit: Option<Unit>) -> Option<Slip> {
    if printed == right {
        return None;
    }
    if *printed == -right {
        return Some(Slip::Sign);
    }
    match unit.filter(|unit| unit.is_imperial()) {
        Some(unit) => {
            let inches = unit.in_units_of(Unit::In);
            imperial(&(printed * &inches), &(right * &inches))
        }
        None => decimal(printed, right),
    }
}

/// How much a slip speaks for a reading, as a log likelihood against chance. The fraction slips fit many readings by chance.
pub(crate) fn weight(slip: Slip) -> f64 {
    match slip {
        Slip::DigitsSwapped | Slip::OneFoot | Slip::Sign | Slip::FeetAsInches | Slip::Decimal => 5.0,
        Slip::OneInch | Slip::DigitMisread => 3.0,
        Slip::FractionDropped | Slip::FractionMisread => 0.5,
        Slip::Neighbour => 0.2,
    }
}

/// Feet, whole inches and the fraction of an inch.
struct Parts {
    sign: bool,
    feet: BigInt,
    inches: BigInt,
    fraction: Rational,
}

impl Parts {
    fn of(inches: &Rational) -> Parts {
        let size = inches.abs();
        let (feet, rest) = size.floor().to_integer().div_rem(&BigInt::from(12));
        Parts { sign: inches.is_negative(), feet, inches: rest, fraction: size.fract() }
    }
}

fn imperial(printed: &Rational, right: &Rational) -> Option<Slip> {
    let (p, r) = (Parts::of(printed), Parts::of(right));
    let (gap, twelve) = ((printed - right).abs(), whole(12));
    if p.sign != r.sign {
        return None;
    }
    if gap == twelve {
        return Some(Slip::OneFoot);
    }
    if gap.is_one() {
        return Some(Slip::OneInch);
    }
    if p.fraction.is_zero() && p.feet == r.feet && p.inches == r.inches {
        return Some(Slip::FractionDropped);
    }
    let ratio_of_feet = printed == &(right * &twelve) || &(printed * &twelve) == right;
    if ratio_of_feet {
        return Some(Slip::FeetAsInches);
    }
    let (same_feet, same_inches, same_fraction) = (p.feet == r.feet, p.inches == r.inches, p.fraction == r.fraction);
    let digits = match (same_feet, same_inches, same_fraction) {
        (false, true, true) => digit_slip(&p.feet.to_string(), &r.feet.to_string()),
        (true, false, true) => digit_slip(&p.inches.to_string(), &r.inches.to_string()),
        _ => None,
    };
    let fraction = same_feet && same_inches && fraction_misread(&p.fraction, &r.fraction);
    digits.or(fraction.then_some(Slip::FractionMisread))
}

/// The same numerator over another denominator, or the same denominator under a numerator with one digit misread.
fn fraction_misread(printed: &Rational, right: &Rational) -> bool {
    let small = |r: &Rational| r.denom().to_i64().filter(|d| *d <= 64);
    let (Some(a), Some(b)) = (small(printed), small(right)) else { return false };
    if printed.is_zero() || right.is_zero() {
        return false;
    }
    let same_top = printed.numer() == right.numer() && a != b;
    let misread = a == b && digit_slip(&printed.numer().to_string(), &right.numer().to_string()).is_some();
    same_top || misread
}

fn decimal(printed: &Rational, right: &Rational) -> Option<Slip> {
    for power in [10i64, 100, 1000] {
        if *printed == right * whole(power) || *right == printed * whole(power) {
            return Some(Slip::Decimal);
        }
    }
    // Brought to whole numbers of the finest place that both need.
    let mut scale = Rational::one();
    for _ in 0..9 {
        let (p, r) = (printed * &scale, right * &scale);
        if p.is_integer() && r.is_integer() {
            let (p, r) = (p.to_integer(), r.to_integer());
            return if p.is_negative() == r.is_negative() {
                digit_slip(&p.abs().to_string(), &r.abs().to_string())
            } else {
                None
            };
        }
        scale /= ratio(1, 10);
    }
    None
}

/// Two neighbouring digits changed places, or one taken for another.
fn digit_slip(printed: &str, right: &str) -> Option<Slip> {
    let (p, r) = (printed.as_bytes(), right.as_bytes());
    if p.len() != r.len() {
        return None;
    }
    let different: Vec<usize> = (0..p.len()).filter(|&i| p[i] != r[i]).collect();
    match different.as_slice() {
        [i] => {
            let pair = (p[*i].min(r[*i]), p[*i].max(r[*i]));
            CONFUSED.contains(&pair).then_some(Slip::DigitMisread)
        }
        [i, k] if *k == i + 1 && p[*i] == r[*k] && p[*k] == r[*i] => Some(Slip::DigitsSwapped),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_slips_are_named() {
        let inches = |n: i64, d: i64| ratio(n, d);
        let cases = [
            (inches(84, 1), inches(72, 1), Some(Slip::OneFoot)),
            (inches(73, 1), inches(72, 1), Some(Slip::OneInch)),
            (inches(12 * 54, 1), inches(12 * 45, 1), Some(Slip::DigitsSwapped)),
            (inches(12 * 6 + 3, 1), inches(12 * 9 + 3, 1), Some(Slip::DigitMisread)),
            (inches(68, 1), inches(68 * 16 + 9, 16), Some(Slip::FractionDropped)),
            (inches(68 * 8 + 3, 8), inches(68 * 16 + 3, 16), Some(Slip::FractionMisread)),
            (inches(6, 1), inches(72, 1), Some(Slip::FeetAsInches)),
            (inches(-72, 1), inches(72, 1), Some(Slip::Sign)),
            (inches(70, 1), inches(72, 1), None),
        ];
        for (printed, right, expected) in cases {
            assert_eq!(slip(&printed, &right, Some(Unit::In)), expected, "{printed} for {right}");
        }
        assert_eq!(slip(&whole(3180), &whole(3810), Some(Unit::Mm)), Some(Slip::DigitsSwapped));
        assert_eq!(slip(&whole(381), &whole(3810), Some(Unit::Mm)), Some(Slip::Decimal));
        assert_eq!(slip(&ratio(266, 10), &ratio(296, 10), None), Some(Slip::DigitMisread));
    }
}
