//! A whole set of points on one integer lattice, so that questions about position are answered in machine integers.
//!
//! The coordinates of the trade lie on a lattice (sixteenths, millimetres, a span divided in seven). With the common
//! denominator taken out, a cross product of differences fits 64 bits for nearly every drawing and 128 bits for the rest.
//! Points on no such lattice are asked in rationals, after a filter of integers with a proved bound of error.
//!
//! # Invariants
//!
//! Every answer is exact and the same in each [`Tier`]; only [`Lattice::coarse`] is rounded, and never says that
//! two things are apart that are not.

mod direction;
mod scale;

pub use direction::Direction;

use super::predicates::Orientation;
use super::rational::Rational;
use super::{Point, Vector};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};
use scale::{common_denominator, extent, scaled_all};
use std::cmp::Ordering;

/// The arithmetic that a [`Lattice`] works in.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Tier {
    /// Coordinates span less than 2^30 lattice steps: products fit 64 bits.
    Small,
    /// Coordinates span less than 2^60 lattice steps: products fit 128 bits.
    Wide,
    /// No lattice of reasonable size: an integer filter, and rationals where it cannot tell.
    Fractions,
}

/// Points by their places in a list, and exact questions about them.
#[derive(Clone, Debug)]
pub struct Lattice<'a> {
    points: &'a [Point],
    /// Exact lattice coordinates in the first two tiers; rounded down in the third. All between 0 and the span.
    coarse: Vec<[i64; 2]>,
    /// Lattice steps (coarse steps in the third tier) to one unit.
    scale: Rational,
    tier: Tier,
}

/// A distance, prepared for many questions on one lattice.
#[derive(Clone, Debug)]
pub struct Reach {
    distance: Rational,
    /// The square in lattice steps, rounded up; `None` when it is too large for the quick answer.
    square: Option<u128>,
    /// In coarse steps, rounded up and one more.
    steps: i64,
}

const SMALL_SPAN: i64 = 1 << 30;
const WIDE_SPAN: i64 = 1 << 60;
impl<'a> Lattice<'a> {
    /// The lattice of these points, in the quickest tier that holds them.
    pub fn new(points: &'a [Point]) -> Lattice<'a> {
        Lattice::exact(points).unwrap_or_else(|| Lattice::rounded(points))
    }

    /// The same points in a slower tier than they need; `None` when they do not fit it. For comparing the tiers.
    pub fn in_tier(points: &'a [Point], tier: Tier) -> Option<Lattice<'a>> {
        match tier {
            Tier::Fractions => Some(Lattice::rounded(points)),
            tier => Lattice::exact(points).filter(|lattice| lattice.tier <= tier).map(|l| Lattice { tier, ..l }),
        }
    }

    fn exact(points: &'a [Point]) -> Option<Lattice<'a>> {
        let denominator = common_denominator(points)?;
        let (low, span) = extent(points);
        let tier = match (span.numer() * (&denominator / span.denom())).to_i64()? {
            span if span < SMALL_SPAN => Tier::Small,
            span if span < WIDE_SPAN => Tier::Wide,
            _ => return None,
        };
        let coarse = scaled_all(points, &low, &denominator)?;
        Some(Lattice { points, coarse, scale: Rational::from_integer(denominator), tier })
    }

    fn rounded(points: &'a [Point]) -> Lattice<'a> {
        let (low, span) = extent(points);
        let steps = Rational::from_integer(BigInt::from(WIDE_SPAN - 2));
        let scale = if span.is_zero() { Rational::one() } else { steps / span };
        let place = |value: &Rational, low: &Rational| {
            let above = value.numer() * low.denom() - low.numer() * value.denom();
            let place = (above * scale.numer()).div_floor(&(value.denom() * low.denom() * scale.denom()));
            place.to_i64().unwrap_or(0).clamp(0, WIDE_SPAN)
        };
        let coarse = |p: &Point| [place(&p.x, &low.x), place(&p.y, &low.y)];
        Lattice { coarse: points.iter().map(coarse).collect(), points, scale, tier: Tier::Fractions }
    }

    /// How many points there are.
    pub fn len(&self) -> usize {
        self.points.len()
    }

    /// True when there is no point.
    pub fn is_empty(&self) -> bool {
        self.points.is_empty()
    }

    /// The arithmetic in use.
    pub fn tier(&self) -> Tier {
        self.tier
    }

    /// A point.
    pub fn point(&self, i: usize) -> &'a Point {
        &self.points[i]
    }

    /// The coordinates in lattice steps from the lower left, rounded down where [`Self::tier`] is
    /// [`Tier::Fractions`]: never out of order, never negative, less than 2^60.
    pub fn coarse(&self, i: usize) -> [i64; 2] {
        self.coarse[i]
    }

    /// The displacement along a pair in coarse steps, each part off by less than one where coordinates are rounded.
    pub fn coarse_along(&self, pair: [usize; 2]) -> [i64; 2] {
        self.difference(pair)
    }

    /// How many coarse steps make one unit.
    pub fn scale(&self) -> &Rational {
        &self.scale
    }

    /// A distance prepared for [`Self::is_beyond`].
    pub fn reach(&self, distance: &Rational) -> Reach {
        let steps = distance * &self.scale;
        let square = (&steps * &steps).ceil().to_integer().to_u128();
        let most = BigInt::from(WIDE_SPAN);
        let steps: BigInt = steps.ceil().to_integer() + 1;
        let steps = steps.min(most).to_i64().unwrap_or(WIDE_SPAN);
        Reach { distance: distance.clone(), square, steps }
    }

    /// Orders two points from left to right, then upwards.
    pub fn compare_places(&self, a: usize, b: usize) -> Ordering {
        let rough = |axis: usize| self.coarse[a][axis].cmp(&self.coarse[b][axis]);
        if self.tier != Tier::Fractions {
            return rough(0).then_with(|| rough(1));
        }
        let (p, q) = (&self.points[a], &self.points[b]);
        rough(0).then_with(|| compare(&p.x, &q.x)).then_with(|| rough(1)).then_with(|| compare(&p.y, &q.y))
    }

    /// The side of the line from `a` to `b` on which `c` lies.
    #[inline]
    pub fn orientation(&self, a: usize, b: usize, c: usize) -> Orientation {
        match self.turn([a, b], [a, c]) {
            Ordering::Greater => Orientation::Left,
            Ordering::Less => Orientation::Right,
            Ordering::Equal => Orientation::On,
        }
    }

    /// The sign of the cross product of the displacements along two pairs of points: `Greater` when the second lies
    /// counter-clockwise of the first, `Equal` when they are parallel or one is null.
    #[inline]
    pub fn turn(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let (v, w) = (self.difference(first), self.difference(second));
        if self.tier == Tier::Small {
            return (v[0] * w[1]).cmp(&(v[1] * w[0]));
        }
        self.wide_turn(first, second, v, w)
    }

    fn wide_turn(&self, first: [usize; 2], second: [usize; 2], v: [i64; 2], w: [i64; 2]) -> Ordering {
        let quick = self.quick_sign(v, [w[1], w[0].wrapping_neg()]);
        quick.unwrap_or_else(|| self.unreduced(first).cross(&self.unreduced(second)).cmp(&BigInt::zero()))
    }

    /// The sign of the dot product of the displacements along two pairs of points.
    #[inline]
    pub fn facing(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let quick = self.quick_sign(self.difference(first), self.difference(second));
        quick.unwrap_or_else(|| self.unreduced(first).dot(&self.unreduced(second)).cmp(&BigInt::zero()))
    }

    /// Orders the directions from `at` to two other points counter-clockwise, starting at the one to the right; see
    /// [`super::compare_directions`].
    pub fn compare_directions(&self, at: usize, a: usize, b: usize) -> Ordering {
        let half = |far: usize| match self.tier {
            Tier::Fractions if !self.clearly_apart(at, far) => self.unreduced([at, far]).half_plane(),
            _ => half_plane(self.difference([at, far])),
        };
        half(a).cmp(&half(b)).then_with(|| self.turn([at, b], [at, a]))
    }

    /// Compares the quadrances of two pairs of points.
    pub fn compare_quadrances(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let (v, w) = (self.difference(first), self.difference(second));
        match self.tier {
            Tier::Small => squares(v).cmp(&squares(w)),
            Tier::Wide => wide_squares(v).cmp(&wide_squares(w)),
            Tier::Fractions => {
                let (v, w) = (self.unreduced(first), self.unreduced(second));
                (v.dot(&v) * &w.over * &w.over).cmp(&(w.dot(&w) * &v.over * &v.over))
            }
        }
    }

    /// True when `c` is farther than `reach` from the line through `a` and `b` (never said when these coincide).
    pub fn is_beyond(&self, c: usize, [a, b]: [usize; 2], reach: &Reach) -> bool {
        if let (Tier::Small, Some(square)) = (self.tier, reach.square) {
            let (v, w) = (self.difference([a, b]), self.difference([a, c]));
            let cross = (v[0] * w[1] - v[1] * w[0]).unsigned_abs().into();
            if let Some(is_beyond) = quotient_is_beyond(cross, squares(v) as u128, square) {
                return is_beyond;
            }
        }
        let (v, w) = (self.unreduced([a, b]), self.unreduced([a, c]));
        exceeds(&v.cross(&w), &w.over, &v.dot(&v), reach)
    }

    /// Compares the distances of two points from the line through a pair.
    pub fn compare_offsets(&self, [a, b]: [usize; 2], c: usize, d: usize) -> Ordering {
        let (v, to_c, to_d) = (self.unreduced([a, b]), self.unreduced([a, c]), self.unreduced([a, d]));
        (v.cross(&to_c).abs() * &to_d.over).cmp(&(v.cross(&to_d).abs() * &to_c.over))
    }

    /// True when the end of the shorter of two legs at a corner is farther than `reach` from where the corner would be
    /// square (never said when a leg has no length).
    pub fn is_far_from_square(&self, at: usize, a: usize, b: usize, reach: &Reach) -> bool {
        let [long, short] = if self.compare_quadrances([at, a], [at, b]).is_ge() { [a, b] } else { [b, a] };
        if let (Tier::Small, Some(square)) = (self.tier, reach.square) {
            let (v, w) = (self.difference([at, long]), self.difference([at, short]));
            let dot = (v[0] * w[0] + v[1] * w[1]).unsigned_abs().into();
            if let Some(is_beyond) = quotient_is_beyond(dot, squares(v) as u128, square) {
                return is_beyond;
            }
        }
        let (v, w) = (self.unreduced([at, long]), self.unreduced([at, short]));
        exceeds(&v.dot(&w), &w.over, &v.dot(&v), reach)
    }

    /// The exact displacement along a pair of points.
    pub fn displacement(&self, [a, b]: [usize; 2]) -> Vector {
        &self.points[b] - &self.points[a]
    }

    /// The quadrance between a pair of points.
    pub fn quadrance(&self, pair: [usize; 2]) -> Rational {
        let v = self.displacement(pair);
        let (a, b) = (v.x.denom(), v.y.denom());
        if a.is_one() || b.is_one() || a.gcd(b).is_one() {
            // Squares of lowest terms over coprime denominators add up to lowest terms.
            let (x, y) = (v.x.numer() * b, v.y.numer() * a);
            let over = a * b;
            return Rational::new_raw(&x * &x + &y * &y, &over * &over);
        }
        v.quadrance()
    }

    /// The dot and cross product of the displacements from `at` to two other points, both times the same positive number.
    pub fn corner(&self, at: usize, a: usize, b: usize) -> [BigInt; 2] {
        let (v, w) = (self.unreduced([at, a]), self.unreduced([at, b]));
        [v.dot(&w), v.cross(&w)]
    }

    /// The displacement along a pair in whole lattice steps; `None` in the tier that has none. Equal steps are equal
    /// displacements.
    pub fn steps_along(&self, pair: [usize; 2]) -> Option<[i64; 2]> {
        (self.tier != Tier::Fractions).then(|| self.difference(pair))
    }

    /// The spread at `at` between the lines to `a` and to `b`; `None` when either coincides with `at`.
    pub fn spread(&self, at: usize, a: usize, b: usize) -> Option<Rational> {
        if self.tier != Tier::Small {
            let (v, w) = (self.unreduced([at, a]), self.unreduced([at, b]));
            let (cross, whole) = (v.cross(&w), v.dot(&v) * w.dot(&w));
            return (!whole.is_zero()).then(|| Rational::new(&cross * &cross, whole));
        }
        let (numerator, denominator) = self.small_spread(at, a, b);
        if denominator == 0 {
            return None;
        }
        let common = numerator.gcd(&denominator);
        Some(Rational::new_raw((numerator / common).into(), (denominator / common).into()))
    }

    /// True when the spread at `at` is less than the limit; `false` when there is none.
    pub fn spread_is_below(&self, at: usize, a: usize, b: usize, limit: &Rational) -> bool {
        if self.tier == Tier::Small
            && let (Some(over), Some(under)) = (limit.numer().to_u128(), limit.denom().to_u128())
        {
            let (numerator, denominator) = self.small_spread(at, a, b);
            if let (Some(left), Some(right)) = (numerator.checked_mul(under), denominator.checked_mul(over)) {
                return left < right;
            }
        }
        let (v, w) = (self.unreduced([at, a]), self.unreduced([at, b]));
        let cross = v.cross(&w);
        &cross * &cross * limit.denom() < v.dot(&v) * w.dot(&w) * limit.numer()
    }

    /// The direction along a pair of points in lowest terms; zeros when they coincide.
    pub fn direction(&self, pair: [usize; 2]) -> Direction {
        if self.tier == Tier::Fractions {
            return Direction::of_parts(self.unreduced(pair).parts);
        }
        let [x, y] = self.difference(pair);
        let common = x.gcd(&y).max(1);
        Direction::Short([x / common, y / common])
    }

    /// The displacement over a common denominator, without looking for common factors.
    fn unreduced(&self, [a, b]: [usize; 2]) -> Unreduced {
        if self.tier != Tier::Fractions {
            let parts = self.difference([a, b]).map(BigInt::from);
            return Unreduced { parts, over: self.scale.to_integer() };
        }
        let (p, q) = (&self.points[a], &self.points[b]);
        let less = |p: &Rational, q: &Rational| {
            if p.denom() == q.denom() {
                return (q.numer() - p.numer(), p.denom().clone());
            }
            (q.numer() * p.denom() - p.numer() * q.denom(), p.denom() * q.denom())
        };
        let ((x, over_x), (y, over_y)) = (less(&p.x, &q.x), less(&p.y, &q.y));
        Unreduced { parts: [x * &over_y, y * &over_x], over: over_x * over_y }
    }

    fn small_spread(&self, at: usize, a: usize, b: usize) -> (u128, u128) {
        let (v, w) = (self.difference([at, a]), self.difference([at, b]));
        let cross = (v[0] * w[1] - v[1] * w[0]).unsigned_abs() as u128;
        (cross * cross, squares(v) as u128 * squares(w) as u128)
    }

    #[inline]
    fn difference(&self, [a, b]: [usize; 2]) -> [i64; 2] {
        let (p, q) = (self.coarse[a], self.coarse[b]);
        [q[0] - p[0], q[1] - p[1]]
    }

    /// True when both coordinates differ by more than the rounding, so that signs of differences are sure.
    fn clearly_apart(&self, a: usize, b: usize) -> bool {
        self.difference([a, b]).iter().all(|d| d.abs() > 1)
    }

    /// The sign of `v · w` where integers can tell.
    #[inline]
    fn quick_sign(&self, v: [i64; 2], w: [i64; 2]) -> Option<Ordering> {
        match self.tier {
            Tier::Small => Some((v[0] * w[0] + v[1] * w[1]).cmp(&0)),
            Tier::Wide => Some(wide_dot(v, w).cmp(&0)),
            Tier::Fractions => {
                // Each difference is short of the true one by less than 1 either way.
                let size = |d: [i64; 2]| d[0].unsigned_abs() as i128 + d[1].unsigned_abs() as i128;
                let dot = wide_dot(v, w);
                (dot.abs() > size(v) + size(w) + 2).then(|| dot.cmp(&0))
            }
        }
    }
}

/// A displacement as whole numbers over a positive denominator.
struct Unreduced {
    parts: [BigInt; 2],
    over: BigInt,
}

impl Unreduced {
    fn cross(&self, other: &Unreduced) -> BigInt {
        &self.parts[0] * &other.parts[1] - &self.parts[1] * &other.parts[0]
    }

    fn dot(&self, other: &Unreduced) -> BigInt {
        &self.parts[0] * &other.parts[0] + &self.parts[1] * &other.parts[1]
    }

    fn half_plane(&self) -> u8 {
        half_plane([&self.parts[0], &self.parts[1]].map(|part| part.signum().to_i64().unwrap_or(0)))
    }
}

fn compare(p: &Rational, q: &Rational) -> Ordering {
    if p.denom() == q.denom() {
        p.numer().cmp(q.numer())
    } else {
        (p.numer() * q.denom()).cmp(&(q.numer() * p.denom()))
    }
}

impl Reach {
    /// In coarse steps, rounded up, with one more for the rounding of a place.
    pub fn steps(&self) -> i64 {
        self.steps
    }

    /// The distance itself.
    pub fn distance(&self) -> &Rational {
        &self.distance
    }
}

/// Whether product²/whole is certainly more than a square rounded up; `None` when the roundings leave it open.
fn quotient_is_beyond(product: u128, whole: u128, square: u128) -> Option<bool> {
    let allowed = square.checked_mul(whole)?;
    match product * product {
        squared if squared > allowed => Some(true),
        // Rounded up by less than one.
        squared if squared <= allowed - whole => Some(false),
        _ => None,
    }
}

/// True when (product / over)² is more than reach² times whole.
fn exceeds(product: &BigInt, over: &BigInt, whole: &BigInt, reach: &Reach) -> bool {
    let (far, near) = (product * reach.distance.denom(), over * reach.distance.numer());
    &far * &far > &near * &near * whole
}

fn squares(v: [i64; 2]) -> i64 {
    v[0] * v[0] + v[1] * v[1]
}

fn wide_squares(v: [i64; 2]) -> i128 {
    wide_dot(v, v)
}

fn wide_dot(v: [i64; 2], w: [i64; 2]) -> i128 {
    i128::from(v[0]) * i128::from(w[0]) + i128::from(v[1]) * i128::from(w[1])
}

fn half_plane(v: [i64; 2]) -> u8 {
    match v {
        [0, 0] => 0,
        [x, y] if y > 0 || (y == 0 && x > 0) => 1,
        _ => 2,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::ratio;

    #[test]
    fn a_span_in_sevenths_and_sixteenths_is_small() {
        let points = [Point::new(ratio(480, 7), ratio(3, 16)), Point::whole(-480, 72), Point::whole(0, 0)];
        let lattice = Lattice::new(&points);
        assert_eq!(lattice.tier(), Tier::Small);
        assert_eq!(lattice.coarse(1), [0, 72 * 112]);
        assert_eq!(lattice.coarse(2), [480 * 112, 0]);
    }

    #[test]
    fn forty_digits_are_answered_in_fractions() {
        let huge = crate::exact::parse_fraction(&"9".repeat(40)).expect("digits");
        let points = [
            Point::whole(0, 0),
            Point::new(huge.clone(), huge.clone()),
            Point::new(&huge / crate::exact::whole(3), &huge / crate::exact::whole(3)),
            Point::new(&huge / crate::exact::whole(3), &huge / crate::exact::whole(3) + ratio(1, 1_000_000)),
        ];
        let lattice = Lattice::new(&points);
        assert_eq!(lattice.tier(), Tier::Fractions);
        assert_eq!(lattice.orientation(0, 1, 2), Orientation::On);
        assert_eq!(lattice.orientation(0, 1, 3), Orientation::Left, "a millionth above a line of forty digits");
    }

    #[test]
    fn no_points_make_an_empty_lattice() {
        assert!(Lattice::new(&[]).is_empty());
    }
}
