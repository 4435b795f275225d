//! How the answers about closing print values: lengths as the trade writes them, degrees and plain numbers.

use super::meaning::signed_cosine;
use crate::exact::{Rational, Surd, nearest_multiple, ratio, whole};
use crate::measure::{Sheet, Unit};
use crate::truss::{Figure, FigureKind, Truss};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

/// The step to which lengths of a figure print: its own, the sheet's, or a fine one where those are exact.
pub(crate) fn length_step(truss: &Truss, figure: &Figure) -> Rational {
    let own = match figure.kind {
        FigureKind::Length { .. } | FigureKind::Run { .. } | FigureKind::Rise { .. } => truss.step_of(figure),
        _ => truss.step.value.clone(),
    };
    if own.is_positive() { own } else { fine_step(truss) }
}

/// A step fine enough to show any misfit that matters: 1/256" or 1/1000 mm.
pub(crate) fn fine_step(truss: &Truss) -> Rational {
    let (fine, of) = if truss.unit.is_imperial() { (ratio(1, 256), Unit::In) } else { (ratio(1, 1000), Unit::Mm) };
    fine * of.in_units_of(truss.unit)
}

/// A length, rounded to the step and printed as the trade writes it.
pub(crate) fn length(truss: &Truss, value: &Rational, step: &Rational) -> String {
    let rounded = nearest_multiple(value, step).map_or_else(|| value.clone(), |n| step * Rational::from_integer(n));
    exact_length(truss, &rounded)
}

/// The root of a quadrance to the nearest step; 0 for a negative one.
pub(crate) fn rounded_root(quadrance: &Rational, step: &Rational) -> Rational {
    let rounded = Surd::of_quadrance(quadrance).and_then(|surd| surd.nearest(step));
    rounded.map_or_else(Rational::zero, |r| step * Rational::from_integer(r.steps))
}

/// A length printed without rounding, as it can be typed.
pub(crate) fn exact_length(truss: &Truss, value: &Rational) -> String {
    Sheet::of(truss.unit, &truss.step.value).written(value).text
}

/// A plain number: a decimal where it ends within 12 places, else a fraction.
pub(crate) fn plain(value: &Rational) -> String {
    let mut scale = BigInt::one();
    for places in 0..=12usize {
        let scaled = value * Rational::from_integer(scale.clone());
        if scaled.is_integer() {
            return decimal(&scaled.to_integer(), places);
        }
        scale *= 10;
    }
    value.to_string()
}

fn decimal(scaled: &BigInt, places: usize) -> String {
    let digits = format!("{:0>width$}", scaled.abs().to_string(), width = places + 1);
    let (head, tail) = digits.split_at(digits.len() - places);
    let sign = if scaled.is_negative() { "-" } else { "" };
    if tail.is_empty() { format!("{sign}{head}") } else { format!("{sign}{head}.{tail}") }
}

/// A plain number to the nearest step.
pub(crate) fn rounded(value: &Rational, step: &Rational) -> Rational {
    nearest_multiple(value, step).map_or_else(|| value.clone(), |n| step * Rational::from_integer(n))
}

/// The angle with this signed squared cosine, in degrees to the nearest step (a tie goes up).
///
/// By bisection on the count of steps, each compared with a certified enclosure.
pub(crate) fn degrees_of(signed: &Rational, step: &Rational) -> Rational {
    let step = if step.is_positive() { step.clone() } else { ratio(1, 1000) };
    let (mut low, mut high) = (BigInt::zero(), (whole(180) / &step).ceil().to_integer());
    while low < high {
        let middle: BigInt = (&low + &high) / 2;
        let border = ((Rational::from_integer(middle.clone()) + ratio(1, 2)) * &step).min(whole(180));
        if *signed > *signed_cosine(&border).hi() { high = middle } else { low = middle + 1 }
    }
    (step * Rational::from_integer(low)).min(whole(180))
}

/// A plain number as a ratio is written on drawings: `6`, `6 1/2`, or a decimal on metric sheets of tenths.
pub(crate) fn plain_fraction(value: &Rational) -> String {
    if value.is_integer() || value.denom().is_even() && value.denom() > &BigInt::from(64) {
        return plain(value);
    }
    let (size, sign) = (value.abs(), if value.is_negative() { "-" } else { "" });
    let whole_part = size.floor().to_integer();
    let binary = size.denom().count_ones_is_one();
    match (binary, whole_part.is_zero()) {
        (false, _) => plain(value),
        (true, true) => format!("{sign}{size}"),
        (true, false) => format!("{sign}{whole_part} {}", size.fract()),
    }
}

trait PowerOfTwo {
    fn count_ones_is_one(&self) -> bool;
}

impl PowerOfTwo for BigInt {
    fn count_ones_is_one(&self) -> bool {
        self.magnitude().count_ones() == 1
    }
}
