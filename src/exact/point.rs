//! Points and displacements with rational coordinates.

use super::rational::{Rational, fraction, whole};
use num_traits::Zero;
use serde::{Deserialize, Serialize};
use std::ops::{Add, Neg, Sub};

/// A place in the plane. `x` grows to the right, `y` upwards.
///
/// A point is not a displacement: two points cannot be added, their difference is a [`Vector`].
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub struct Point {
    /// Distance to the right of the origin.
    #[serde(with = "fraction")]
    pub x: Rational,
    /// Distance above the origin.
    #[serde(with = "fraction")]
    pub y: Rational,
}

/// A displacement: from one point to another, or the direction of a line.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub struct Vector {
    /// Displacement to the right.
    #[serde(with = "fraction")]
    pub x: Rational,
    /// Displacement upwards.
    #[serde(with = "fraction")]
    pub y: Rational,
}

impl Point {
    /// The point (x, y).
    pub fn new(x: impl Into<Rational>, y: impl Into<Rational>) -> Self {
        Point { x: x.into(), y: y.into() }
    }

    /// The point with whole coordinates (x, y).
    pub fn whole(x: i64, y: i64) -> Self {
        Point { x: whole(x), y: whole(y) }
    }

    /// The point midway between this one and the other.
    pub fn midpoint(&self, other: &Point) -> Point {
        let two = whole(2);
        Point { x: (&self.x + &other.x) / &two, y: (&self.y + &other.y) / &two }
    }
}

impl Vector {
    /// The displacement (x, y).
    pub fn new(x: impl Into<Rational>, y: impl Into<Rational>) -> Self {
        Vector { x: x.into(), y: y.into() }
    }

    /// The squared length.
    pub fn quadrance(&self) -> Rational {
        &self.x * &self.x + &self.y * &self.y
    }

    /// The dot product: zero when the two are square to each other.
    pub fn dot(&self, other: &Vector) -> Rational {
        &self.x * &other.x + &self.y * &other.y
    }

    /// The cross product: positive when `other` lies counter-clockwise of `self`, zero when the two are parallel.
    pub fn cross(&self, other: &Vector) -> Rational {
        &self.x * &other.y - &self.y * &other.x
    }

    /// True when both parts are zero, so that it has no direction.
    pub fn is_null(&self) -> bool {
        self.x.is_zero() && self.y.is_zero()
    }

    /// The displacement stretched by `factor`.
    pub fn scaled(&self, factor: &Rational) -> Vector {
        Vector { x: &self.x * factor, y: &self.y * factor }
    }
}

impl Sub for &Point {
    type Output = Vector;
    fn sub(self, from: &Point) -> Vector {
        Vector { x: &self.x - &from.x, y: &self.y - &from.y }
    }
}

impl Add<&Vector> for &Point {
    type Output = Point;
    fn add(self, by: &Vector) -> Point {
        Point { x: &self.x + &by.x, y: &self.y + &by.y }
    }
}

impl Neg for &Vector {
    type Output = Vector;
    fn neg(self) -> Vector {
        Vector { x: -&self.x, y: -&self.y }
    }
}
