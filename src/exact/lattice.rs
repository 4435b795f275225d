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

use super::predicates::{self, Orientation};
use super::rational::Rational;
use super::{Point, Vector};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};
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

/// The direction from one point to another in lowest terms, as a row of whole numbers.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Direction {
    /// It fits machine integers.
    Short([i64; 2]),
    /// It does not.
    Long([BigInt; 2]),
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
/// A common denominator beyond this many bits cannot give a lattice that fits 60 bits and is not looked for further.
const DENOMINATOR_BITS: u64 = 256;

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
        let place = |value: &Rational, low: &Rational| ((value - low) * &scale).floor().to_integer();
        let coarse =
            |p: &Point| [place(&p.x, &low.x), place(&p.y, &low.y)].map(|c| c.to_i64().unwrap_or(0).clamp(0, WIDE_SPAN));
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
        rough(0).then_with(|| p.x.cmp(&q.x)).then_with(|| rough(1)).then_with(|| p.y.cmp(&q.y))
    }

    /// The side of the line from `a` to `b` on which `c` lies.
    pub fn orientation(&self, a: usize, b: usize, c: usize) -> Orientation {
        match self.turn([a, b], [a, c]) {
            Ordering::Greater => Orientation::Left,
            Ordering::Less => Orientation::Right,
            Ordering::Equal => Orientation::On,
        }
    }

    /// The sign of the cross product of the displacements along two pairs of points: `Greater` when the second lies
    /// counter-clockwise of the first, `Equal` when they are parallel or one is null.
    pub fn turn(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let (v, w) = (self.difference(first), self.difference(second));
        let quick = self.quick_sign(v, [w[1], w[0].wrapping_neg()]);
        quick.unwrap_or_else(|| self.displacement(first).cross(&self.displacement(second)).cmp(&Rational::zero()))
    }

    /// The sign of the dot product of the displacements along two pairs of points.
    pub fn facing(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let quick = self.quick_sign(self.difference(first), self.difference(second));
        quick.unwrap_or_else(|| self.displacement(first).dot(&self.displacement(second)).cmp(&Rational::zero()))
    }

    /// Orders the directions from `at` to two other points counter-clockwise, starting at the one to the right; see
    /// [`predicates::compare_directions`].
    pub fn compare_directions(&self, at: usize, a: usize, b: usize) -> Ordering {
        if self.tier == Tier::Fractions && !(self.clearly_apart(at, a) && self.clearly_apart(at, b)) {
            return predicates::compare_directions(&self.displacement([at, a]), &self.displacement([at, b]));
        }
        let (v, w) = (self.difference([at, a]), self.difference([at, b]));
        half_plane(v).cmp(&half_plane(w)).then_with(|| self.turn([at, b], [at, a]))
    }

    /// Compares the quadrances of two pairs of points.
    pub fn compare_quadrances(&self, first: [usize; 2], second: [usize; 2]) -> Ordering {
        let (v, w) = (self.difference(first), self.difference(second));
        match self.tier {
            Tier::Small => squares(v).cmp(&squares(w)),
            Tier::Wide => wide_squares(v).cmp(&wide_squares(w)),
            Tier::Fractions => self.displacement(first).quadrance().cmp(&self.displacement(second).quadrance()),
        }
    }

    /// True when `c` is farther than `reach` from the line through `a` and `b` (never said when these coincide).
    ///
    /// Quick, and cautious: `false` may mean that only exact distances can tell.
    pub fn is_beyond(&self, c: usize, [a, b]: [usize; 2], reach: &Reach) -> bool {
        let (v, w) = (self.difference([a, b]), self.difference([a, c]));
        match (self.tier, reach.square) {
            (Tier::Small, Some(square)) => {
                let cross = (v[0] * w[1] - v[1] * w[0]).unsigned_abs() as u128;
                let allowed = square.checked_mul(squares(v) as u128);
                allowed.is_some_and(|allowed| cross * cross > allowed)
            }
            _ => {
                let direction = self.displacement([a, b]);
                let cross = direction.cross(&self.displacement([a, c]));
                &cross * &cross > &reach.distance * &reach.distance * direction.quadrance()
            }
        }
    }

    /// The exact displacement along a pair of points.
    pub fn displacement(&self, [a, b]: [usize; 2]) -> Vector {
        &self.points[b] - &self.points[a]
    }

    /// The displacement along a pair in whole lattice steps; `None` in the tier that has none. Equal steps are equal
    /// displacements.
    pub fn steps_along(&self, pair: [usize; 2]) -> Option<[i64; 2]> {
        (self.tier != Tier::Fractions).then(|| self.difference(pair))
    }

    /// The spread at `at` between the lines to `a` and to `b`; `None` when either coincides with `at`.
    pub fn spread(&self, at: usize, a: usize, b: usize) -> Option<Rational> {
        if self.tier != Tier::Small {
            return super::spread(&self.points[at], &self.points[a], &self.points[b]);
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
        self.spread(at, a, b).is_some_and(|spread| spread < *limit)
    }

    /// The direction along a pair of points in lowest terms; zeros when they coincide.
    pub fn direction(&self, pair: [usize; 2]) -> Direction {
        if self.tier == Tier::Fractions {
            let v = self.displacement(pair);
            return Direction::of(&v);
        }
        let [x, y] = self.difference(pair);
        let common = x.gcd(&y).max(1);
        Direction::Short([x / common, y / common])
    }

    fn small_spread(&self, at: usize, a: usize, b: usize) -> (u128, u128) {
        let (v, w) = (self.difference([at, a]), self.difference([at, b]));
        let cross = (v[0] * w[1] - v[1] * w[0]).unsigned_abs() as u128;
        (cross * cross, squares(v) as u128 * squares(w) as u128)
    }

    fn difference(&self, [a, b]: [usize; 2]) -> [i64; 2] {
        let (p, q) = (self.coarse[a], self.coarse[b]);
        [q[0] - p[0], q[1] - p[1]]
    }

    /// True when both coordinates differ by more than the rounding, so that signs of differences are sure.
    fn clearly_apart(&self, a: usize, b: usize) -> bool {
        self.difference([a, b]).iter().all(|d| d.abs() > 1)
    }

    /// The sign of `v · w` where integers can tell.
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

impl Direction {
    /// The direction of a displacement in lowest terms.
    pub fn of(v: &Vector) -> Direction {
        let x = v.x.numer() * v.y.denom();
        let y = v.y.numer() * v.x.denom();
        let common = x.gcd(&y);
        if common.is_zero() {
            return Direction::Short([0, 0]);
        }
        let (x, y) = (x / &common, y / &common);
        let fits = |part: &BigInt| part.to_i64().filter(|part| part.abs() < WIDE_SPAN);
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

/// The least common denominator of all coordinates; `None` when it grows out of bounds.
fn common_denominator(points: &[Point]) -> Option<BigInt> {
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
fn extent(points: &[Point]) -> (Point, Rational) {
    let axis = |get: fn(&Point) -> &Rational| {
        let low = points.iter().map(get).min().cloned().unwrap_or_default();
        let high = points.iter().map(get).max().cloned().unwrap_or_default();
        let span = high - &low;
        (low, span)
    };
    let ((x, width), (y, height)) = (axis(|p| &p.x), axis(|p| &p.y));
    (Point { x, y }, width.max(height))
}

/// All coordinates above `low` in lattice steps; `None` when they do not fit.
fn scaled_all(points: &[Point], low: &Point, scale: &BigInt) -> Option<Vec<[i64; 2]>> {
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
