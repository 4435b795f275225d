//! Questions about position, answered exactly. Nothing else in the crate compares cross products of points.

use super::point::{Point, Vector};
use super::rational::Rational;
use num_traits::{Signed, Zero};
use std::cmp::Ordering;

/// On which side of a directed line a point lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Orientation {
    /// To the left of the line, counter-clockwise.
    Left,
    /// To the right of the line, clockwise.
    Right,
    /// On the line.
    On,
}

/// The side of the line from `a` to `b` on which `c` lies.
pub fn orientation(a: &Point, b: &Point, c: &Point) -> Orientation {
    match (b - a).cross(&(c - a)) {
        turn if turn.is_positive() => Orientation::Left,
        turn if turn.is_negative() => Orientation::Right,
        _ => Orientation::On,
    }
}

/// True when the three points lie on one line.
pub fn in_line(a: &Point, b: &Point, c: &Point) -> bool {
    orientation(a, b, c) == Orientation::On
}

/// True when the two directions are square to each other (and both are directions).
pub fn is_square(v: &Vector, w: &Vector) -> bool {
    !v.is_null() && !w.is_null() && v.dot(w).is_zero()
}

/// True when the two directions are parallel (and both are directions).
pub fn is_parallel(v: &Vector, w: &Vector) -> bool {
    !v.is_null() && !w.is_null() && v.cross(w).is_zero()
}

/// True when `p`, already known to be on the line through `a` and `b`, lies strictly between them.
pub fn is_between(p: &Point, a: &Point, b: &Point) -> bool {
    (a - p).dot(&(b - p)).is_negative()
}

/// True when `p` lies on the closed segment from `a` to `b`.
pub fn on_segment(p: &Point, a: &Point, b: &Point) -> bool {
    in_line(a, b, p) && (p == a || p == b || is_between(p, a, b))
}

/// Orders directions counter-clockwise, starting at the one to the right: by half plane, then by cross product, with no
/// angle. Parallel directions of the same sense are equal. A null vector has no direction and sorts first.
pub fn compare_directions(v: &Vector, w: &Vector) -> Ordering {
    half_plane(v).cmp(&half_plane(w)).then_with(|| Rational::zero().cmp(&v.cross(w)))
}

/// 0 for no direction, 1 for the half plane from right (included) to left, 2 for the rest.
fn half_plane(v: &Vector) -> u8 {
    match v {
        v if v.is_null() => 0,
        v if v.y.is_positive() || (v.y.is_zero() && v.x.is_positive()) => 1,
        _ => 2,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_sides_of_a_line() {
        let (a, b) = (Point::whole(0, 0), Point::whole(7, 1));
        assert_eq!(orientation(&a, &b, &Point::whole(7, 2)), Orientation::Left);
        assert_eq!(orientation(&a, &b, &Point::whole(7, 0)), Orientation::Right);
        assert_eq!(orientation(&a, &b, &Point::whole(14, 2)), Orientation::On);
    }

    #[test]
    fn a_segment_holds_its_ends_and_nothing_beyond() {
        let (a, b) = (Point::whole(0, 0), Point::whole(6, 3));
        for (p, expected) in
            [((0, 0), true), ((6, 3), true), ((2, 1), true), ((8, 4), false), ((-2, -1), false), ((2, 2), false)]
        {
            assert_eq!(on_segment(&Point::whole(p.0, p.1), &a, &b), expected, "{p:?}");
        }
    }

    #[test]
    fn directions_run_counter_clockwise_from_the_right() {
        let around = [(1, 0), (3, 1), (1, 1), (0, 2), (-1, 1), (-4, 0), (-1, -5), (0, -1), (2, -1)];
        let directions: Vec<_> = around.iter().map(|&(x, y)| &Point::whole(x, y) - &Point::whole(0, 0)).collect();
        for (i, v) in directions.iter().enumerate() {
            for (k, w) in directions.iter().enumerate() {
                assert_eq!(compare_directions(v, w), i.cmp(&k), "{v:?} {w:?}");
            }
        }
    }
}
