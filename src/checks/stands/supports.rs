//! What the supports alone leave free: the ways in which a part moves whole.

use super::super::frame::Frame;
use crate::exact::{Direction, Point, Rational, Vector};
use crate::truss::SupportKind;
use num_traits::{One, Zero};

/// How a part can move as one piece against its supports.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Whole {
    /// Not at all.
    Held,
    /// It slides in one direction: all supports hold in another.
    Slides(Vector),
    /// It turns about a point through which the lines of all supports go.
    Turns(Point),
    /// In two ways or three.
    Loose(usize),
}

impl Whole {
    /// In how many ways.
    pub(crate) fn ways(&self) -> usize {
        match self {
            Whole::Held => 0,
            Whole::Slides(_) | Whole::Turns(_) => 1,
            Whole::Loose(ways) => *ways,
        }
    }
}

/// A hold as a condition on (velocity to the right, velocity upwards, rate of turning).
type Hold = [Rational; 3];

/// How a part with these supports (by their places in the list) can move as one piece. `can_turn` is false for a part that
/// is one place only.
pub(crate) fn whole_motion(frame: &Frame, supports: &[usize], can_turn: bool) -> Whole {
    let ways = if can_turn { 3 } else { 2 };
    let mut rows: Vec<Hold> = Vec::new();
    for support in supports.iter().map(|&index| &frame.truss.supports[index]) {
        let point = frame.lattice.point(support.joint.index());
        for normal in normals(&support.kind) {
            let [u, v, turn] = hold(point, &normal);
            insert(&mut rows, [u, v, if can_turn { turn } else { Rational::zero() }]);
        }
        if rows.len() == ways {
            return Whole::Held;
        }
    }
    match rows.as_slice() {
        [first, second] => one_way(first, second),
        rows => Whole::Loose(ways - rows.len()),
    }
}

fn normals(kind: &SupportKind) -> Vec<Vector> {
    let vector = |x: Rational, y: Rational| Vector { x, y };
    match kind {
        SupportKind::Pin => {
            vec![vector(Rational::one(), Rational::zero()), vector(Rational::zero(), Rational::one())]
        }
        SupportKind::Roller { normal: [x, y] } => {
            // In lowest terms, so that numbers stay short.
            let [x, y] = Direction::of(&vector(x.value.clone(), y.value.clone())).parts();
            vec![vector(Rational::from_integer(x), Rational::from_integer(y))]
        }
    }
}

/// The point (x, y) moves by (u - w y, v + w x); along the normal (a, b) that is a u + b v + (b x - a y) w.
fn hold(point: &Point, normal: &Vector) -> Hold {
    [normal.x.clone(), normal.y.clone(), &normal.y * &point.x - &normal.x * &point.y]
}

/// Adds a condition to reduced ones, if it says something new.
fn insert(rows: &mut Vec<Hold>, mut new: Hold) {
    for row in rows.iter() {
        let lead = row.iter().position(|entry| !entry.is_zero()).unwrap_or(0);
        let factor = &new[lead] / &row[lead];
        for (entry, other) in new.iter_mut().zip(row) {
            *entry = &*entry - &factor * other;
        }
    }
    if new.iter().any(|entry| !entry.is_zero()) {
        rows.push(new);
    }
}

/// The only motion that two conditions leave: their cross product.
fn one_way(a: &Hold, b: &Hold) -> Whole {
    let minor = |i: usize, k: usize| &a[i] * &b[k] - &a[k] * &b[i];
    let (u, v, turn) = (minor(1, 2), minor(2, 0), minor(0, 1));
    if turn.is_zero() {
        let [x, y] = Direction::of(&Vector { x: u, y: v }).parts();
        return Whole::Slides(Vector { x: Rational::from_integer(x), y: Rational::from_integer(y) });
    }
    // It stands still where u - w y = 0 and v + w x = 0.
    Whole::Turns(Point { x: -v / &turn, y: u / turn })
}
