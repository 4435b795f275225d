//! All quadrances, the order around every joint, and the spreads of neighbours: exactly, and in plain floating point.

use chordwright::checks::steps::Prepared;
use chordwright::checks::{Limits, Placed};
use chordwright::exact::{Lattice, Rational};

/// Places and members in plain floating point, for the loop to compare with.
#[derive(Clone, Debug)]
pub struct Plain {
    /// Of each joint its place, in the sheet's unit.
    pub places: Vec<[f64; 2]>,
    /// Both ends of each member.
    pub ends: Vec<[usize; 2]>,
}

/// A pair of squared numbers whose quotient is a spread: cross² and the product of two quadrances, in lattice steps.
pub type Corners = Vec<[u128; 2]>;

/// Quadrances and spreads as fractions in lowest terms.
pub type Fractions = (Vec<Rational>, Vec<Rational>);

impl Plain {
    /// The places and members of a truss.
    pub fn of(placed: &Placed) -> Plain {
        use num_traits::ToPrimitive;
        let number = |value: &Rational| value.to_f64().unwrap_or(f64::NAN);
        Plain {
            places: placed.points.iter().map(|point| [number(&point.x), number(&point.y)]).collect(),
            ends: placed.truss.members.iter().map(|member| member.ends().map(|joint| joint.index())).collect(),
        }
    }

    /// The far ends of the members at each joint in the order of the list, in one list, with where each joint's start.
    fn neighbours(&self) -> (Vec<usize>, Vec<usize>) {
        let mut starts = vec![0; self.places.len() + 1];
        self.ends.iter().flatten().for_each(|&joint| starts[joint + 1] += 1);
        (1..starts.len()).for_each(|i| starts[i] += starts[i - 1]);
        let (mut next, mut far) = (starts.clone(), vec![0; 2 * self.ends.len()]);
        for &[a, b] in &self.ends {
            for (at, other) in [(a, b), (b, a)] {
                far[next[at]] = other;
                next[at] += 1;
            }
        }
        (starts, far)
    }

    fn along(&self, a: usize, b: usize) -> [f64; 2] {
        [0, 1].map(|axis| self.places[b][axis] - self.places[a][axis])
    }
}

/// The plain loop: quadrances and spreads of members that follow each other in the list, in no order around the joint.
pub fn floats(plain: &Plain) -> (Vec<f64>, Vec<f64>) {
    let square = |v: [f64; 2]| v[0] * v[0] + v[1] * v[1];
    let quadrances = plain.ends.iter().map(|&[a, b]| square(plain.along(a, b))).collect();
    let (starts, far) = plain.neighbours();
    let mut spreads = Vec::with_capacity(far.len());
    for at in 0..plain.places.len() {
        for (s, t) in round(&far[starts[at]..starts[at + 1]]) {
            let (v, w) = (plain.along(at, s), plain.along(at, t));
            let cross = v[0] * w[1] - v[1] * w[0];
            spreads.push(cross * cross / (square(v) * square(w)));
        }
    }
    (quadrances, spreads)
}

/// Exactly, in whole lattice steps, in which the checks decide: the places brought on a lattice, the order around every
/// joint, quadrances, and spreads as pairs of whole numbers.
///
/// # Panics
///
/// When the places are on no small lattice.
pub fn steps(placed: &Placed) -> (Vec<i64>, Corners) {
    let limits = Limits::default();
    let prepared = Prepared::new(placed, &limits);
    let lattice = prepared.lattice();
    let along = |a: usize, b: usize| lattice.steps_along([a, b]).expect("places on a lattice");
    let square = |v: [i64; 2]| v[0] * v[0] + v[1] * v[1];
    let ends = placed.truss.members.iter().map(|member| member.ends().map(|joint| joint.index()));
    let quadrances = ends.map(|[a, b]| square(along(a, b))).collect();
    let spreads = corners(&prepared, lattice, |at, s, t| {
        let (v, w) = (along(at, s), along(at, t));
        let cross = u128::from((v[0] * w[1] - v[1] * w[0]).unsigned_abs());
        [cross * cross, square(v) as u128 * square(w) as u128]
    });
    (quadrances, spreads)
}

/// Exactly, as fractions in lowest terms, as the schedule gives them: the order around every joint, quadrances, spreads.
pub fn fractions(placed: &Placed) -> Fractions {
    let limits = Limits::default();
    let prepared = Prepared::new(placed, &limits);
    let lattice = prepared.lattice();
    let ends = placed.truss.members.iter().map(|member| member.ends().map(|joint| joint.index()));
    let quadrances = ends.map(|ends| lattice.quadrance(ends)).collect();
    let spreads = corners(&prepared, lattice, |at, s, t| lattice.spread(at, s, t).expect("members with a length"));
    (quadrances, spreads)
}

/// Something of each pair of neighbours around each joint.
fn corners<T>(prepared: &Prepared, lattice: &Lattice, of: impl Fn(usize, usize, usize) -> T) -> Vec<T> {
    let mut all = Vec::new();
    let mut around = Vec::new();
    for at in 0..lattice.len() {
        around.clear();
        around.extend(prepared.around(at));
        all.extend(round(&around).map(|(s, t)| of(at, s, t)));
    }
    all
}

/// Each with the next, and the last with the first.
fn round(far: &[usize]) -> impl Iterator<Item = (usize, usize)> {
    let next = far.iter().skip(1).chain(far.first());
    far.iter().copied().zip(next.copied())
}

#[cfg(test)]
mod tests {
    use super::{Plain, fractions, steps};
    use chordwright::checks::Placed;
    use chordwright::exact::Rational;
    use num_traits::ToPrimitive;

    #[test]
    fn the_three_ways_say_the_same() {
        let truss = crate::braced_lattice(6);
        let placed = Placed::as_given(&truss);
        let (lengths, corners) = steps(&placed);
        let (quadrances, spreads) = fractions(&placed);
        let (plain, plain_spreads) = super::floats(&Plain::of(&placed));
        for ((steps, fraction), plain) in lengths.iter().zip(&quadrances).zip(plain) {
            assert_eq!(*fraction, Rational::new((*steps).into(), 256.into()));
            assert!((fraction.to_f64().expect("a number") - plain).abs() < 1e-9);
        }
        for (&[over, under], fraction) in corners.iter().zip(&spreads) {
            assert_eq!(*fraction, Rational::new(over.into(), under.into()));
        }
        // The loop has as many, in another order.
        assert_eq!(plain_spreads.len(), spreads.len());
    }
}
