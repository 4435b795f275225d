//! What each figure says, as exact intervals on functions of the joints' places: the one table of meanings.
//!
//! | figure | function | range |
//! |---|---|---|
//! | run, rise | difference of coordinates | `[v - p/2, v + p/2]` |
//! | length | quadrance | `[(v - p/2)², (v + p/2)²]`, lower end 0 when `v < p/2` |
//! | pitch | smaller leg / larger leg as printed, with the sketch's sense where it is clear | `[(a - p/2)/b, (a + p/2)/b]` |
//! | spread | cross² / (Q₁ Q₂) | `[s - p/2, s + p/2]` |
//! | angle | signed squared cosine: dot·abs(dot) / (Q₁ Q₂), which falls as the angle grows | enclosures of the ends |
//! | in line, square, parallel | offset² from the line meant | 0 between set joints, else `[0, (p/2)²]` |
//! | equal | difference of two lengths | 0 between set joints, else `[-p/2, p/2]` |
//! | level, plumb | difference of coordinates | 0 |
//!
//! # Invariants
//!
//! Nothing here knows how places are found. An angle's interval is irrational: `sure` lies inside it, `possible` encloses
//! it; for every other kind both are the same.

use crate::exact::{Interval, Point, Rational, Vector, spread_of_degrees, whole};
use crate::truss::{Figure, FigureKind, JointId, Truss};
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;

/// Angles are enclosed to this many binary places: far finer than any instrument of the trade.
pub(crate) const ANGLE_BITS: u32 = 80;

/// A sketch flatter than one in this says nothing about the side: a rough sketch is a fifth of a panel off.
pub(crate) const FLATNESS: u32 = 4;

/// A coordinate direction.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub(crate) enum Axis {
    /// To the right.
    X,
    /// Upwards.
    Y,
}

/// The sense of a leg as it was sketched.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Sense {
    /// To the right, or upwards.
    Plus,
    /// To the left, or downwards.
    Minus,
    /// The sketch does not say.
    Either,
}

/// A function of the places of some joints.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Function {
    /// Coordinate of `to` less that of `from`.
    Along { axis: Axis, from: JointId, to: JointId },
    /// Squared distance.
    Quadrance { from: JointId, to: JointId },
    /// The smaller printed leg over the larger, both in the sense of the sketch.
    Slope { from: JointId, to: JointId, small: Axis, senses: [Sense; 2] },
    /// Spread at a joint.
    Spread { at: JointId, from: JointId, to: JointId },
    /// Squared cosine with the sign of the cosine.
    Cosine { at: JointId, from: JointId, to: JointId },
    /// Squared distance of a joint from the line through two others.
    OffLine { joint: JointId, line: [JointId; 2] },
    /// Squared distance of the shorter leg's end from the line square to the longer leg.
    OffSquare { at: JointId, from: JointId, to: JointId },
    /// Squared distance by which the shorter line's end strays from the direction of the longer.
    OffParallel { first: [JointId; 2], second: [JointId; 2] },
    /// First length less the second.
    LengthDifference { first: [JointId; 2], second: [JointId; 2] },
}

/// One exact demand: a function has to lie in a range.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Condition {
    /// Of the places.
    pub function: Function,
    /// Values that certainly agree with the figure; `None` when no rational value is certain to.
    pub sure: Option<Interval>,
    /// No value outside agrees with the figure.
    pub possible: Interval,
}

impl Axis {
    /// The coordinate of a point.
    pub(crate) fn of(self, point: &Point) -> &Rational {
        match self {
            Axis::X => &point.x,
            Axis::Y => &point.y,
        }
    }

    /// The part of a displacement.
    pub(crate) fn part(self, vector: &Vector) -> &Rational {
        match self {
            Axis::X => &vector.x,
            Axis::Y => &vector.y,
        }
    }

    /// 0 for x, 1 for y.
    pub(crate) fn index(self) -> usize {
        match self {
            Axis::X => 0,
            Axis::Y => 1,
        }
    }

    /// The other one.
    pub(crate) fn other(self) -> Axis {
        match self {
            Axis::X => Axis::Y,
            Axis::Y => Axis::X,
        }
    }
}

impl Sense {
    /// A leg sketched shorter than one in [`FLATNESS`] of the other says nothing: a rough sketch may have it wrong.
    fn of(part: &Rational, other: &Rational) -> Sense {
        if part.abs() * whole(FLATNESS) < other.abs() {
            return Sense::Either;
        }
        match part.cmp(&Rational::zero()) {
            Ordering::Less => Sense::Minus,
            Ordering::Equal => Sense::Either,
            Ordering::Greater => Sense::Plus,
        }
    }

    /// True when a leg may have this signed length.
    pub(crate) fn allows(self, part: &Rational) -> bool {
        match self {
            Sense::Plus => !part.is_negative(),
            Sense::Minus => !part.is_positive(),
            Sense::Either => true,
        }
    }
}

impl Condition {
    fn plain(function: Function, range: Interval) -> Condition {
        Condition { function, sure: Some(range.clone()), possible: range }
    }

    /// True when the places certainly agree.
    pub(crate) fn holds(&self, places: &[Point]) -> bool {
        self.sure.as_ref().is_some_and(|range| self.function.lies_in(range, places))
    }

    /// True when the places certainly do not agree.
    pub(crate) fn fails(&self, places: &[Point]) -> bool {
        !self.function.lies_in(&self.possible, places)
    }

    /// True when it leaves no room at all.
    pub(crate) fn is_exact(&self) -> bool {
        self.possible.is_exact() || self.sure.is_none()
    }
}

impl Function {
    /// The joints it depends on, each once or more.
    pub(crate) fn joints(&self) -> Vec<JointId> {
        match self {
            Function::Along { from, to, .. } | Function::Quadrance { from, to } | Function::Slope { from, to, .. } => {
                vec![*from, *to]
            }
            Function::Spread { at, from, to }
            | Function::Cosine { at, from, to }
            | Function::OffSquare { at, from, to } => vec![*at, *from, *to],
            Function::OffLine { joint, line } => vec![*joint, line[0], line[1]],
            Function::OffParallel { first, second } | Function::LengthDifference { first, second } => {
                vec![first[0], first[1], second[0], second[1]]
            }
        }
    }

    /// True when the function's value lies in the range; false also where the function has no value.
    pub(crate) fn lies_in(&self, range: &Interval, places: &[Point]) -> bool {
        match self {
            Function::Slope { from, to, senses, .. } => {
                let leg = leg(places, *from, *to);
                senses[0].allows(&leg.x)
                    && senses[1].allows(&leg.y)
                    && self.value(places).is_some_and(|slope| range.contains(&slope))
            }
            Function::LengthDifference { first, second } => {
                let (q1, q2) =
                    (leg(places, first[0], first[1]).quadrance(), leg(places, second[0], second[1]).quadrance());
                !q1.is_zero()
                    && !q2.is_zero()
                    && compare_length_difference(&q1, &q2, range.lo()) != Ordering::Less
                    && compare_length_difference(&q1, &q2, range.hi()) != Ordering::Greater
            }
            _ => self.value(places).is_some_and(|value| range.contains(&value)),
        }
    }

    /// The exact value; `None` where it has none, and for a difference of lengths, which is a difference of roots.
    pub(crate) fn value(&self, places: &[Point]) -> Option<Rational> {
        match self {
            Function::Along { axis, from, to } => Some(axis.part(&leg(places, *from, *to)).clone()),
            Function::Quadrance { from, to } => Some(leg(places, *from, *to).quadrance()),
            Function::Slope { from, to, small, .. } => {
                let leg = leg(places, *from, *to);
                let (small, large) = (small.part(&leg).abs(), small.other().part(&leg).abs());
                (!large.is_zero()).then(|| small / large)
            }
            Function::Spread { at, from, to } => {
                crate::exact::spread(&places[at.index()], &places[from.index()], &places[to.index()])
            }
            Function::Cosine { at, from, to } => {
                let (u, v) = (leg(places, *at, *from), leg(places, *at, *to));
                let dot = u.dot(&v);
                ratio_of(&dot * dot.abs(), u.quadrance() * v.quadrance())
            }
            Function::OffLine { joint, line } => {
                let (u, v) = (leg(places, line[0], line[1]), leg(places, line[0], *joint));
                let cross = u.cross(&v);
                ratio_of(&cross * &cross, u.quadrance())
            }
            Function::OffSquare { at, from, to } => {
                let (u, v) = (leg(places, *at, *from), leg(places, *at, *to));
                let dot = u.dot(&v);
                stray(&dot, &u, &v)
            }
            Function::OffParallel { first, second } => {
                let (u, v) = (leg(places, first[0], first[1]), leg(places, second[0], second[1]));
                let cross = u.cross(&v);
                stray(&cross, &u, &v)
            }
            Function::LengthDifference { .. } => None,
        }
    }
}

/// The displacement between two joints.
pub(crate) fn leg(places: &[Point], from: JointId, to: JointId) -> Vector {
    &places[to.index()] - &places[from.index()]
}

fn ratio_of(numerator: Rational, denominator: Rational) -> Option<Rational> {
    (!denominator.is_zero()).then(|| numerator / denominator)
}

/// `product²` over the greater quadrance; `None` when either line has no direction.
fn stray(product: &Rational, u: &Vector, v: &Vector) -> Option<Rational> {
    let (q1, q2) = (u.quadrance(), v.quadrance());
    (!q1.is_zero() && !q2.is_zero()).then(|| product * product / q1.max(q2))
}

/// Compares `√q1 - √q2` with `d`, exactly: by squaring twice.
pub(crate) fn compare_length_difference(q1: &Rational, q2: &Rational, d: &Rational) -> Ordering {
    if d.is_negative() {
        return compare_length_difference(q2, q1, &-d).reverse();
    }
    // √q1 against √q2 + d: square to q1 - q2 - d² against 2 d √q2.
    let left = q1 - q2 - d * d;
    if left.is_negative() {
        return Ordering::Less;
    }
    (&left * &left).cmp(&(whole(4) * d * d * q2))
}

/// What a figure demands; several conditions for a figure over many joints.
pub(crate) fn conditions(truss: &Truss, figure: &Figure) -> Vec<Condition> {
    let half = truss.step_of(figure) / whole(2);
    match &figure.kind {
        FigureKind::Run { from, to, value } => vec![along(Axis::X, *from, *to, &value.value, &half)],
        FigureKind::Rise { from, to, value } => vec![along(Axis::Y, *from, *to, &value.value, &half)],
        FigureKind::Length { from, to, value } => {
            let function = Function::Quadrance { from: *from, to: *to };
            vec![Condition::plain(function, from_zero(&value.value, &half).square())]
        }
        FigureKind::Pitch { from, to, rise, run } => vec![pitch(truss, [*from, *to], &rise.value, &run.value, &half)],
        FigureKind::Spread { at, from, to, value } => {
            let function = Function::Spread { at: *at, from: *from, to: *to };
            vec![Condition::plain(function, from_zero(&value.value, &half))]
        }
        FigureKind::Angle { at, from, to, value } => vec![angle([*at, *from, *to], &value.value, &half)],
        FigureKind::Level { joints } => ties(Axis::Y, joints),
        FigureKind::Plumb { joints } => ties(Axis::X, joints),
        kind => relation(kind, &if is_all_set(truss, kind) { Rational::zero() } else { half }),
    }
}

/// True when no loose joint takes part.
pub(crate) fn is_all_set(truss: &Truss, kind: &FigureKind) -> bool {
    kind.joints().iter().all(|id| !truss.joint(*id).loose)
}

fn from_zero(value: &Rational, half: &Rational) -> Interval {
    Interval::between((value - half).max(Rational::zero()), value + half)
}

fn along(axis: Axis, from: JointId, to: JointId, value: &Rational, half: &Rational) -> Condition {
    Condition::plain(Function::Along { axis, from, to }, Interval::around(value, half))
}

fn ties(axis: Axis, joints: &[JointId]) -> Vec<Condition> {
    joints.windows(2).map(|pair| along(axis, pair[0], pair[1], &Rational::zero(), &Rational::zero())).collect()
}

fn pitch(truss: &Truss, ends: [JointId; 2], rise: &Rational, run: &Rational, half: &Rational) -> Condition {
    let (small, large, axis) = if rise <= run { (rise, run, Axis::Y) } else { (run, rise, Axis::X) };
    let sketch = &truss.joint(ends[1]).point() - &truss.joint(ends[0]).point();
    let senses = [Sense::of(&sketch.x, &sketch.y), Sense::of(&sketch.y, &sketch.x)];
    let range = from_zero(small, half).scaled(&large.recip());
    Condition::plain(Function::Slope { from: ends[0], to: ends[1], small: axis, senses }, range)
}

/// The signed squared cosine falls from 1 at 0° to -1 at 180°.
fn angle(joints: [JointId; 3], degrees: &Rational, half: &Rational) -> Condition {
    let low = signed_cosine(&(degrees - half).max(Rational::zero()));
    let high = signed_cosine(&(degrees + half).min(whole(180)));
    let function = Function::Cosine { at: joints[0], from: joints[1], to: joints[2] };
    let sure = Interval::new(high.hi().clone(), low.lo().clone());
    Condition { function, sure, possible: high.hull(&low) }
}

/// An enclosure of the squared cosine with the cosine's sign; exact at multiples of 30° and 45°, where alone it is rational
/// (Niven's theorem).
pub(crate) fn signed_cosine(degrees: &Rational) -> Interval {
    let square = &Interval::exactly(Rational::one()) - &spread_of_degrees(degrees, ANGLE_BITS);
    if *degrees > whole(90) { -&square } else { square }
}

fn relation(kind: &FigureKind, half: &Rational) -> Vec<Condition> {
    let offset = Interval::between(Rational::zero(), half * half);
    match kind {
        FigureKind::InLine { joints } => in_line(joints, &offset),
        FigureKind::Square { at, from, to } => {
            vec![Condition::plain(Function::OffSquare { at: *at, from: *from, to: *to }, offset)]
        }
        FigureKind::Parallel { first, second } => {
            vec![Condition::plain(Function::OffParallel { first: *first, second: *second }, offset)]
        }
        FigureKind::Equal { first, second } => {
            let range = Interval::around(&Rational::zero(), half);
            vec![Condition::plain(Function::LengthDifference { first: *first, second: *second }, range)]
        }
        _ => Vec::new(),
    }
}

/// The line meant is the one through the first and the last joint named; the others lie on it.
fn in_line(joints: &[JointId], offset: &Interval) -> Vec<Condition> {
    let [first, inner @ .., last] = joints else { return Vec::new() };
    let condition =
        |joint: &JointId| Condition::plain(Function::OffLine { joint: *joint, line: [*first, *last] }, offset.clone());
    inner.iter().map(condition).collect()
}
