//! Intervals of whole units: fixed-point arithmetic that always rounds outward.
//!
//! Checked 128-bit integers: where one would overflow, the result is unbounded, which is always true.

use crate::exact::{Interval, Rational};
use num_traits::ToPrimitive;

/// All numbers of units from `lo` to `hi`; [`Span::ALL`] when unbounded.
///
/// An end at `-BOUND` or `BOUND` stands for everything beyond it as well: a span that lies wholly beyond is that end alone,
/// never one whose ends have changed places.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Span {
    /// The least.
    pub lo: i128,
    /// The greatest.
    pub hi: i128,
}

/// Ends beyond this count as unbounded; products of two ends still fit.
const BOUND: i128 = 1 << 60;

impl Span {
    /// No bound at all.
    pub(crate) const ALL: Span = Span { lo: -BOUND, hi: BOUND };

    /// One number.
    pub(crate) fn at(value: i128) -> Span {
        Span { lo: value, hi: value }
    }

    /// True when it excludes nothing that matters.
    pub(crate) fn is_unbounded(self) -> bool {
        self.lo <= -BOUND || self.hi >= BOUND
    }

    /// The greatest distance from 0.
    pub(crate) fn reach(self) -> i128 {
        self.lo.abs().max(self.hi.abs())
    }

    /// The distance from end to end.
    pub(crate) fn width(self) -> i128 {
        self.hi - self.lo
    }

    /// What both hold, if anything.
    pub(crate) fn meet(self, other: Span) -> Option<Span> {
        let met = Span { lo: self.lo.max(other.lo), hi: self.hi.min(other.hi) };
        (met.lo <= met.hi).then_some(met)
    }

    /// Sums.
    pub(crate) fn plus(self, other: Span) -> Span {
        if self.is_unbounded() || other.is_unbounded() {
            return half_bounded(self, other);
        }
        Span { lo: self.lo + other.lo, hi: self.hi + other.hi }.clamped()
    }

    /// Differences.
    pub(crate) fn minus(self, other: Span) -> Span {
        self.plus(Span { lo: -other.hi, hi: -other.lo })
    }

    fn clamped(self) -> Span {
        Span { lo: self.lo.clamp(-BOUND, BOUND), hi: self.hi.clamp(-BOUND, BOUND) }
    }

    /// The squares, in square units; `None` beyond bounds above.
    pub(crate) fn squares(self) -> (i128, Option<i128>) {
        let least = if self.lo > 0 { self.lo } else { (-self.hi).max(0) };
        let greatest = if self.is_unbounded() { None } else { Some(self.reach() * self.reach()) };
        (least * least, greatest)
    }

    /// Narrows to the numbers whose square lies between `lo` and `hi` (square units, no upper bound for `None`).
    pub(crate) fn with_square_in(self, lo: i128, hi: Option<i128>) -> Option<Span> {
        let mut span = self;
        if let Some(hi) = hi {
            if hi < 0 {
                return None;
            }
            let root = floor_root(hi) + 1;
            span = span.meet(Span { lo: -root, hi: root })?;
        }
        if lo > 0 {
            let root = floor_root(lo);
            if span.lo > -root {
                span.lo = span.lo.max(root);
            }
            if span.hi < root {
                span.hi = span.hi.min(-root);
            }
        }
        (span.lo <= span.hi).then_some(span)
    }

    /// Products; unbounded when either is.
    pub(crate) fn times(self, other: Span) -> Option<Span> {
        if self.is_unbounded() || other.is_unbounded() {
            return None;
        }
        let ends = [self.lo * other.lo, self.lo * other.hi, self.hi * other.lo, self.hi * other.hi];
        let (mut lo, mut hi) = (ends[0], ends[0]);
        for end in ends {
            (lo, hi) = (lo.min(end), hi.max(end));
        }
        Some(Span { lo, hi })
    }
}

/// A sum where one is unbounded at one end only.
fn half_bounded(a: Span, b: Span) -> Span {
    let lo = if a.lo <= -BOUND || b.lo <= -BOUND { -BOUND } else { a.lo + b.lo };
    let hi = if a.hi >= BOUND || b.hi >= BOUND { BOUND } else { a.hi + b.hi };
    Span { lo, hi }.clamped()
}

/// The largest integer whose square is at most `value`, which is not negative.
pub(crate) fn floor_root(value: i128) -> i128 {
    if value <= 0 {
        return 0;
    }
    // The float is only a first guess; Newton's method in integers settles it.
    let mut root = (value as f64).sqrt() as i128;
    loop {
        let next = (root + value / root.max(1)) / 2;
        if next == root || next == root + 1 {
            break;
        }
        root = next;
    }
    while root * root > value {
        root -= 1;
    }
    while (root + 1) * (root + 1) <= value {
        root += 1;
    }
    root
}

/// The interval in units, outward; unbounded where it is too great.
pub(crate) fn span_of(interval: &Interval, unit: &Rational) -> Span {
    let lo = (interval.lo() / unit).floor().to_integer().to_i128().unwrap_or(-BOUND);
    let hi = (interval.hi() / unit).ceil().to_integer().to_i128().unwrap_or(BOUND);
    Span { lo, hi }.clamped()
}

/// An interval of squares in square units, outward; no upper bound where it is too great.
pub(crate) fn squares_of(interval: &Interval, unit: &Rational) -> (i128, Option<i128>) {
    let square = unit * unit;
    let lo = (interval.lo() / &square).floor().to_integer().to_i128().unwrap_or(0);
    let hi = (interval.hi() / &square).ceil().to_integer().to_i128().filter(|hi| *hi < BOUND * BOUND);
    (lo.clamp(0, BOUND * BOUND), hi)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{ratio, whole};
    use num_bigint::BigInt;

    #[test]
    fn what_lies_beyond_the_bound_is_not_empty() {
        let beyond = Span::at(BOUND);
        for bits in [61, 90, 126, 127, 200] {
            let far = Rational::from_integer(BigInt::from(1) << bits);
            let span = span_of(&Interval::around(&far, &ratio(1, 2)), &whole(1));
            assert!(span.meet(Span::ALL).is_some() && span.hi == BOUND, "2^{bits} {span:?}");
            let span = span_of(&Interval::around(&-far, &ratio(1, 2)), &whole(1));
            assert!(span.meet(Span::ALL).is_some() && span.lo == -BOUND, "-2^{bits} {span:?}");
        }
        let near = Span { lo: BOUND - 9, hi: BOUND - 8 };
        for sum in [near.plus(near), near.plus(beyond), beyond.plus(beyond), beyond.minus(Span::at(-7))] {
            assert_eq!(sum, beyond);
            assert_eq!(Span::at(0).minus(sum), Span::at(-BOUND));
        }
    }

    #[test]
    fn roots_are_floors() {
        for value in [0, 1, 2, 3, 4, 8, 9, 15, 16, 17, 99, 100, (1 << 100) - 1, 1 << 100, (1 << 119) + 12345] {
            let root = floor_root(value);
            assert!(root * root <= value && (root + 1) * (root + 1) > value, "{value}");
        }
    }

    #[test]
    fn a_square_narrows_from_both_sides() {
        let span = |lo, hi| Span { lo, hi };
        assert_eq!(span(0, 100).with_square_in(9, Some(16)), Some(span(3, 5)));
        assert_eq!(span(-100, 1).with_square_in(9, Some(16)), Some(span(-5, -3)));
        assert_eq!(span(-100, 100).with_square_in(9, Some(16)), Some(span(-5, 5)));
        assert_eq!(span(-2, 2).with_square_in(9, Some(16)), None);
    }
}
