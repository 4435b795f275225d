//! The laws of rational trigonometry over exact numbers.
//!
//! The five main laws (Pythagoras, triple quad, spread, cross, triple spread) are given as *residuals*: the difference of
//! the two sides, zero when the law holds. Quadrances are `q1`, `q2`, `q3`; the spread opposite `q3` is `s3`.

use super::point::{Point, Vector};
use super::rational::{Rational, whole};
use num_traits::{One, Zero};

/// The quadrance (squared distance) between two points.
pub fn quadrance(a: &Point, b: &Point) -> Rational {
    (b - a).quadrance()
}

/// The spread (squared sine of the angle) between the directions `v` and `w`: 0 parallel, 1 square.
///
/// `None` when either has no direction.
pub fn spread_between(v: &Vector, w: &Vector) -> Option<Rational> {
    if v.is_null() || w.is_null() {
        return None;
    }
    let cross = v.cross(w);
    Some(&cross * &cross / (v.quadrance() * w.quadrance()))
}

/// The spread at `at` between the lines to `a` and to `b`; `None` when either coincides with `at`.
pub fn spread(at: &Point, a: &Point, b: &Point) -> Option<Rational> {
    spread_between(&(a - at), &(b - at))
}

/// The cross (squared cosine) between two directions: 1 minus the spread.
pub fn cross(v: &Vector, w: &Vector) -> Option<Rational> {
    spread_between(v, w).map(|s| Rational::one() - s)
}

/// Pythagoras: `q1 + q2 - q3`, zero exactly when the lines of `q1` and `q2` are square.
pub fn pythagoras_residual(q1: &Rational, q2: &Rational, q3: &Rational) -> Rational {
    q1 + q2 - q3
}

/// Archimedes' function `4 q1 q2 - (q1 + q2 - q3)²`: sixteen times the squared area of the triangle with these
/// quadrances. Negative when no triangle has them.
pub fn archimedes(q1: &Rational, q2: &Rational, q3: &Rational) -> Rational {
    let half = q1 + q2 - q3;
    whole(4) * q1 * q2 - &half * &half
}

/// Triple quad formula: `(q1 + q2 + q3)² - 2(q1² + q2² + q3²)`, zero exactly when the three points are in line.
pub fn triple_quad_residual(q1: &Rational, q2: &Rational, q3: &Rational) -> Rational {
    let sum = q1 + q2 + q3;
    &sum * &sum - whole(2) * (q1 * q1 + q2 * q2 + q3 * q3)
}

/// Cross law: `(q1 + q2 - q3)² - 4 q1 q2 (1 - s3)`.
pub fn cross_law_residual(q1: &Rational, q2: &Rational, q3: &Rational, s3: &Rational) -> Rational {
    let half = q1 + q2 - q3;
    &half * &half - whole(4) * q1 * q2 * (Rational::one() - s3)
}

/// Triple spread formula: `(s1 + s2 + s3)² - 2(s1² + s2² + s3²) - 4 s1 s2 s3`.
pub fn triple_spread_residual(s1: &Rational, s2: &Rational, s3: &Rational) -> Rational {
    triple_quad_residual(s1, s2, s3) - whole(4) * s1 * s2 * s3
}

/// The spread polynomial `S_n(s)`: the spread of `n` times the angle whose spread is `s`.
///
/// Recursion `S_n = 2(1 - 2s) S_(n-1) - S_(n-2) + 2s`.
pub fn spread_polynomial(n: u32, s: &Rational) -> Rational {
    let (mut before, mut now) = (Rational::zero(), s.clone());
    if n == 0 {
        return before;
    }
    let factor = whole(2) - whole(4) * s;
    for _ in 1..n {
        let next = &factor * &now - &before + whole(2) * s;
        before = std::mem::replace(&mut now, next);
    }
    now
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::ratio;

    fn triangle() -> [Point; 3] {
        [Point::whole(0, 0), Point::whole(15, 0), Point::whole(5, 12)]
    }

    #[test]
    fn the_laws_hold_on_a_triangle() {
        let [a, b, c] = triangle();
        let (q1, q2, q3) = (quadrance(&b, &c), quadrance(&a, &c), quadrance(&a, &b));
        let s = |at, p, q| spread(at, p, q).expect("distinct points");
        let (s1, s2, s3) = (s(&a, &b, &c), s(&b, &a, &c), s(&c, &a, &b));
        assert_eq!(&s1 / &q1, &s2 / &q2, "spread law");
        assert_eq!(&s2 / &q2, &s3 / &q3, "spread law");
        assert!(cross_law_residual(&q1, &q2, &q3, &s3).is_zero(), "cross law");
        assert!(triple_spread_residual(&s1, &s2, &s3).is_zero(), "triple spread formula");
        assert_eq!(archimedes(&q1, &q2, &q3), whole(16 * 90 * 90), "the area is 90");
    }

    #[test]
    fn a_point_has_no_spread_with_itself() {
        let [a, b, _] = triangle();
        assert_eq!(spread(&a, &a, &b), None);
    }

    #[test]
    fn three_points_in_line_satisfy_the_triple_quad_formula() {
        assert!(triple_quad_residual(&whole(4), &whole(9), &whole(25)).is_zero());
        assert!(!triple_quad_residual(&whole(4), &whole(9), &whole(24)).is_zero());
    }

    #[test]
    fn twice_and_three_times_a_spread() {
        let s = ratio(1, 5);
        assert_eq!(spread_polynomial(0, &s), whole(0));
        assert_eq!(spread_polynomial(2, &s), whole(4) * &s * (whole(1) - &s));
        assert_eq!(spread_polynomial(3, &ratio(1, 4)), whole(1), "three times 30 degrees is square");
    }
}
