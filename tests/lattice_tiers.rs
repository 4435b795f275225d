//! The tiers of a lattice give the same answers as plain rational arithmetic, for coordinates of every kind.

mod trusses;

use chordwright::exact::{
    Direction, Lattice, Point, Rational, Tier, compare_directions, orientation, ratio, spread, whole,
};
use num_bigint::BigInt;
use std::cmp::Ordering;
use trusses::Scatter;

/// Small whole numbers, so that much is in line, square, equal and in one place.
fn small(scatter: &mut Scatter) -> Rational {
    whole(scatter.below(7) as i64 - 3)
}

fn seven_and_sixteenths(scatter: &mut Scatter) -> Rational {
    small(scatter) * ratio(480, 7) + ratio(scatter.below(16) as i64, 16)
}

fn big(digits: usize) -> BigInt {
    "7".repeat(digits).parse().expect("digits")
}

type Kind = fn(&mut Scatter) -> Rational;

/// Coordinates that end in each of the tiers, and nearly degenerate ones.
const KINDS: [Kind; 6] = [
    small,
    seven_and_sixteenths,
    |s| small(s) * whole(1i64 << 40) + small(s),
    |s| small(s) * whole(big(40)),
    |s| small(s) * whole(big(40)) + small(s) / whole(big(39)),
    |s| small(s) + Rational::new(BigInt::from(s.below(3)), big(40) + BigInt::from(s.below(1000))),
];

fn compare_all(points: &[Point], lattice: &Lattice, scatter: &mut Scatter) {
    let mut pick = || scatter.below(points.len() as u64) as usize;
    for _ in 0..60 {
        let [a, b, c, d] = [pick(), pick(), pick(), pick()];
        let [p, q, r, s] = [a, b, c, d].map(|i| &points[i]);
        let (v, w) = (q - p, s - r);
        let zero = whole(0);
        assert_eq!(lattice.orientation(a, b, c), orientation(p, q, r));
        assert_eq!(lattice.turn([a, b], [c, d]), v.cross(&w).cmp(&zero));
        assert_eq!(lattice.facing([a, b], [c, d]), v.dot(&w).cmp(&zero));
        assert_eq!(lattice.compare_directions(a, b, c), compare_directions(&(q - p), &(r - p)));
        assert_eq!(lattice.compare_quadrances([a, b], [c, d]), v.quadrance().cmp(&w.quadrance()));
        assert_eq!(lattice.quadrance([a, b]), v.quadrance());
        assert_eq!(lattice.compare_places(a, b), p.cmp(q));
        assert_eq!(lattice.spread(a, b, c), spread(p, q, r));
        let is_below = spread(p, q, r).is_some_and(|spread| spread < ratio(1, 4));
        assert_eq!(lattice.spread_is_below(a, b, c, &ratio(1, 4)), is_below);
        compare_distances(lattice, [a, b, c, d]);
        compare_coarse(lattice, [a, b]);
    }
}

fn compare_distances(lattice: &Lattice, [a, b, c, d]: [usize; 4]) {
    let v = lattice.displacement([a, b]);
    let offset = |joint: usize| {
        let cross = v.cross(&lattice.displacement([a, joint]));
        &cross * &cross
    };
    for distance in [ratio(1, 4), whole(1), whole(3)] {
        let reach = lattice.reach(&distance);
        let allowed = &distance * &distance * v.quadrance();
        assert_eq!(lattice.is_beyond(c, [a, b], &reach), offset(c) > allowed);
        let w = lattice.displacement([a, c]);
        let dot = v.dot(&w);
        let most = &distance * &distance * v.quadrance().max(w.quadrance());
        assert_eq!(lattice.is_far_from_square(a, b, c, &reach), &dot * &dot > most);
    }
    assert_eq!(lattice.compare_offsets([a, b], c, d), offset(c).cmp(&offset(d)));
}

/// Coarse coordinates are never out of order, and directions never reversed.
fn compare_coarse(lattice: &Lattice, [a, b]: [usize; 2]) {
    let (p, q) = (lattice.point(a), lattice.point(b));
    let ([ax, ay], [bx, by]) = (lattice.coarse(a), lattice.coarse(b));
    assert!(p.x.cmp(&q.x) == ax.cmp(&bx) || ax == bx);
    assert!(p.y.cmp(&q.y) == ay.cmp(&by) || ay == by);
    let [x, y] = lattice.direction([a, b]).parts().map(Rational::from_integer);
    let v = lattice.displacement([a, b]);
    assert_eq!((&x * &v.y).cmp(&(&y * &v.x)), Ordering::Equal, "along the displacement");
    assert!(v.is_null() == lattice.direction([a, b]).is_null() && &x * &v.x + &y * &v.y >= whole(0), "the same way");
    assert!(Direction::of(&v).is_null() == v.is_null());
}

#[test]
fn every_tier_answers_as_plain_fractions_do() {
    let mut scatter = Scatter::new(3);
    let mut seen = [0; 3];
    for round in 0..48 {
        let kind = KINDS[round % KINDS.len()];
        let points: Vec<Point> = (0..9).map(|_| Point { x: kind(&mut scatter), y: kind(&mut scatter) }).collect();
        for tier in [Tier::Small, Tier::Wide, Tier::Fractions] {
            if let Some(lattice) = Lattice::in_tier(&points, tier) {
                seen[tier as usize] += 1;
                compare_all(&points, &lattice, &mut scatter);
            }
        }
        compare_all(&points, &Lattice::new(&points), &mut scatter);
    }
    assert!(seen.iter().all(|&count| count >= 16), "each tier was compared: {seen:?}");
}

#[test]
fn a_truss_gets_the_same_report_in_inches_and_shifted_beyond_every_lattice() {
    let truss = trusses::long_truss(12);
    let mut shifted = truss.clone();
    let far = Rational::new(big(40), BigInt::from(3));
    for joint in &mut shifted.joints {
        joint.x.value = &joint.x.value * whole(big(30)) + &far;
        joint.y.value = &joint.y.value * whole(big(30)) - &far;
    }
    let (before, after) = (trusses::usual(&truss).answers, trusses::usual(&shifted).answers);
    assert_eq!(before.clear, after.clear);
    assert_eq!((before.stands.state, before.stands.rank), (after.stands.state, after.stands.rank));
    assert_eq!(before.lines.state, after.lines.state);
}
