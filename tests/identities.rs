//! Three and four points of a plane: the identities of their quadrances and spreads, over random places and slips.

#![cfg(not(target_arch = "wasm32"))]

use chordwright::checks::{CloseState, Effort, Proof, close};
use chordwright::exact::{
    Point, Rational, Vector, archimedes, cross_law_residual, pythagoras_residual, quadrance, ratio, spread,
    triple_quad_residual, triple_spread_residual, whole,
};
use chordwright::measure::Written;
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Truss};
use num_integer::Integer;
use num_traits::Zero;
use proptest::prelude::*;

/// The determinant of a square matrix by its first row, entry by entry.
fn determinant(rows: &[Vec<Rational>]) -> Rational {
    let [top, others @ ..] = rows else { return whole(1) };
    let without = |column: usize| -> Vec<Vec<Rational>> {
        others.iter().map(|row| [&row[..column], &row[column + 1..]].concat()).collect()
    };
    let sign = |column: usize| whole(if column.is_multiple_of(2) { 1 } else { -1 });
    (0..top.len()).map(|column| sign(column) * &top[column] * determinant(&without(column))).sum()
}

/// The Cayley-Menger determinant of points from the quadrance of each pair.
fn cayley_menger(count: usize, quadrance: impl Fn(usize, usize) -> Rational) -> Rational {
    let entry = |i: usize, j: usize| match (i, j) {
        _ if i == j => whole(0),
        (0, _) | (_, 0) => whole(1),
        _ => quadrance(i - 1, j - 1),
    };
    let rows: Vec<Vec<Rational>> = (0..=count).map(|i| (0..=count).map(|j| entry(i, j)).collect()).collect();
    determinant(&rows)
}

fn of_points(points: &[Point]) -> Rational {
    cayley_menger(points.len(), |i, j| quadrance(&points[i], &points[j]))
}

/// The determinant of four points with the quadrance of the last two taken to be `changed`.
fn with_last(points: &[Point; 4], changed: &Rational) -> Rational {
    let is_last = |i: usize, j: usize| i.min(j) == 2 && i.max(j) == 3;
    cayley_menger(4, |i, j| if is_last(i, j) { changed.clone() } else { quadrance(&points[i], &points[j]) })
}

fn fractions() -> impl Strategy<Value = Rational> {
    (-2000..2000i64, 1..60i64).prop_map(|(n, d)| ratio(n, d))
}

fn points() -> impl Strategy<Value = Point> {
    (fractions(), fractions()).prop_map(|(x, y)| Point::new(x, y))
}

fn triangles() -> impl Strategy<Value = [Point; 3]> {
    let points = [points(), points(), points()];
    points.prop_filter("in line", |[a, b, c]| !(b - a).cross(&(c - a)).is_zero())
}

/// The mirror image of a point in the line through two others.
fn mirrored(point: &Point, a: &Point, b: &Point) -> Point {
    let (line, leg) = (b - a, point - a);
    let twice = whole(2) * leg.dot(&line) / line.quadrance();
    Point::new(&a.x + &line.x * &twice - &leg.x, &a.y + &line.y * &twice - &leg.y)
}

/// The quadrances and spreads of a triangle, each opposite its corner.
fn sides_and_spreads([a, b, c]: &[Point; 3]) -> ([Rational; 3], [Rational; 3]) {
    let spreads = [spread(a, b, c), spread(b, a, c), spread(c, a, b)].map(|s| s.expect("distinct corners"));
    ([quadrance(b, c), quadrance(a, c), quadrance(a, b)], spreads)
}

proptest! {
    #[test]
    fn archimedes_function_is_four_times_the_squared_cross(corners in [points(), points(), points()]) {
        let [a, b, c] = &corners;
        let [q1, q2, q3] = [quadrance(b, c), quadrance(a, c), quadrance(a, b)];
        let cross = (b - a).cross(&(c - a));
        let quadrea = whole(4) * &cross * &cross;
        prop_assert_eq!(archimedes(&q1, &q2, &q3), quadrea.clone());
        prop_assert_eq!(triple_quad_residual(&q1, &q2, &q3), quadrea.clone());
        prop_assert_eq!(of_points(&corners), -quadrea);
    }

    #[test]
    fn points_in_line_satisfy_the_triple_quad_formula(a in points(), along in points(), s in fractions(), t in fractions()) {
        let on_line = |by: &Rational| Point::new(&a.x + &along.x * by, &a.y + &along.y * by);
        let [b, c] = [on_line(&s), on_line(&t)];
        let q = [quadrance(&b, &c), quadrance(&a, &c), quadrance(&a, &b)];
        prop_assert_eq!(triple_quad_residual(&q[0], &q[1], &q[2]), whole(0));
        prop_assert_eq!(of_points(&[a, b, c]), whole(0));
    }

    #[test]
    fn triangles_satisfy_every_law(corners in triangles(), off in fractions()) {
        let (q, s) = sides_and_spreads(&corners);
        for [i, j, k] in [[0, 1, 2], [1, 2, 0], [2, 0, 1]] {
            prop_assert_eq!(&s[i] * &q[j], &s[j] * &q[i], "spread law");
            prop_assert_eq!(cross_law_residual(&q[i], &q[j], &q[k], &s[k]), whole(0), "cross law");
            prop_assert_eq!(pythagoras_residual(&q[i], &q[j], &q[k]).is_zero(), s[k] == whole(1), "Pythagoras");
        }
        prop_assert_eq!(triple_spread_residual(&s[0], &s[1], &s[2]), whole(0));
        // Another third spread goes with two others only if it is that of the difference where this is that of the sum.
        let other = whole(2) * (&s[0] + &s[1] - whole(2) * &s[0] * &s[1]) - &s[2];
        let changed = &s[2] + &off;
        let residual = triple_spread_residual(&s[0], &s[1], &changed);
        prop_assert_eq!(residual, -(&changed - &s[2]) * (&changed - other));
    }

    #[test]
    fn square_corners_satisfy_pythagoras(at in points(), leg in points(), by in fractions()) {
        let leg = Vector::new(leg.x, leg.y);
        let a = Point::new(&at.x + &leg.x, &at.y + &leg.y);
        let b = Point::new(&at.x - &leg.y * &by, &at.y + &leg.x * &by);
        let residual = pythagoras_residual(&quadrance(&at, &a), &quadrance(&at, &b), &quadrance(&a, &b));
        prop_assert_eq!(residual, whole(0));
    }

    #[test]
    fn four_points_of_a_plane_are_flat(four in [points(), points(), points(), points()]) {
        prop_assert_eq!(of_points(&four), whole(0));
    }

    #[test]
    fn one_changed_quadrance_of_four_points_is_flat_only_in_the_mirror(
        four in [points(), points(), points(), points()],
        off in fractions(),
    ) {
        let [a, b, c, d] = &four;
        prop_assume!(a != b);
        let (here, there) = (quadrance(c, d), quadrance(c, &mirrored(d, a, b)));
        prop_assert_eq!(with_last(&four, &there), whole(0));
        let changed = &here + off;
        let expected = whole(-2) * quadrance(a, b) * (&changed - &here) * (&changed - &there);
        prop_assert_eq!(with_last(&four, &changed), expected);
    }
}

/// Four joints whose six distances are integers: places, and the distances 12, 13, 14, 23, 24, 34.
#[derive(Clone, Debug)]
struct Quadrangle {
    places: [Point; 4],
    distances: [i64; 6],
}

const PAIRS: [(usize, usize); 6] = [(0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3)];

/// The root of a square integer.
fn root(square: &Rational) -> Option<i64> {
    let root = square.is_integer().then(|| square.numer().sqrt())?;
    (&root * &root == *square.numer()).then(|| i64::try_from(root).ok())?
}

impl Quadrangle {
    fn new(places: [Point; 4]) -> Option<Quadrangle> {
        let distances = PAIRS.map(|(i, j)| root(&quadrance(&places[i], &places[j])));
        distances
            .iter()
            .all(Option::is_some)
            .then(|| Quadrangle { places, distances: distances.map(Option::unwrap_or_default) })
    }

    fn smaller(&self, by: i64) -> Option<Quadrangle> {
        let by = ratio(1, by);
        Quadrangle::new(self.places.clone().map(|place| Point::new(&place.x * &by, &place.y * &by)))
    }

    fn truss(&self, step: Rational, changed: Option<(usize, i64)>) -> Truss {
        let mut truss = Truss { step: Written::plain(step), ..Truss::default() };
        for (index, place) in self.places.iter().enumerate() {
            let [x, y] = [&place.x, &place.y].map(|v| Written::plain(v.round()));
            truss.joints.push(Joint { mark: format!("J{index}"), x, y, loose: true });
        }
        for (index, ((from, to), distance)) in PAIRS.into_iter().zip(self.distances).enumerate() {
            let by = changed.filter(|(at, _)| *at == index).map_or(0, |(_, by)| by);
            let [from, to] = [from, to].map(JointId::new);
            let kind = FigureKind::Length { from, to, value: Written::plain(whole(distance + by)) };
            truss.figures.push(Figure { mark: format!("f{}", index + 1), kind, step: None });
        }
        assert_eq!(truss.problems(), Vec::new());
        truss
    }

    /// The Cayley-Menger determinant of the distances, one of them changed.
    fn flatness(&self, at: usize, by: i64) -> Rational {
        cayley_menger(4, |i, j| {
            let pair = PAIRS.iter().position(|pair| *pair == (i.min(j), i.max(j))).expect("a pair");
            let distance = self.distances[pair] + if pair == at { by } else { 0 };
            whole(distance * distance)
        })
    }
}

/// Rhombus, kites, rectangle and quadrangles of two Heronian triangles on one side.
fn known() -> Vec<Quadrangle> {
    let table: [[(i64, i64); 4]; 7] = [
        [(0, 0), (40, 0), (40, 30), (0, 30)],
        [(0, 0), (14, 0), (5, 12), (5, -12)],
        [(-8, 0), (8, 0), (0, 6), (0, -15)],
        [(0, 0), (60, 0), (60, 32), (60, -25)],
        [(0, 0), (14, 0), (5, 12), (9, 12)],
        [(-9, 0), (16, 0), (0, 12), (0, -12)],
        [(-35, 0), (35, 0), (0, 84), (0, 12)],
    ];
    let quadrangles = table.map(|places| Quadrangle::new(places.map(|(x, y)| Point::whole(x, y))));
    quadrangles.into_iter().flatten().collect()
}

/// Points of a circle at twice the angles of right triangles with whole sides: their distances are all rational, as in
/// Brahmagupta's quadrilaterals. In the smallest whole distances.
fn on_a_circle() -> impl Strategy<Value = Quadrangle> {
    let pairs = proptest::array::uniform3((1..5i64, 1..5i64));
    pairs.prop_filter_map("too large, or not four points", |pairs| {
        // Sine, cosine and what both are measured in.
        let turns = pairs.map(|(m, n)| [2 * m * n, m * m - n * n, m * m + n * n]);
        let common = turns.iter().fold(1, |common: i64, [_, _, radius]| common.lcm(radius));
        let twice = |[sine, cosine, radius]: [i64; 3]| {
            let (s, c) = (sine * common / radius, cosine * common / radius);
            Point::whole(c * c - s * s, 2 * s * c)
        };
        let places = [twice([0, 1, 1]), twice(turns[0]), twice(turns[1]), twice(turns[2])];
        let large = Quadrangle::new(places)?;
        let shared = large.distances.iter().fold(0, |shared: i64, distance| shared.gcd(distance));
        let is_small = !large.distances.contains(&0) && large.distances.iter().all(|d| d / shared < 3000);
        is_small.then(|| large.smaller(shared)).flatten()
    })
}

fn closes(quadrangle: &Quadrangle, step: &Rational) {
    let truss = quadrangle.truss(step.clone(), None);
    let (answer, findings) = close(&truss, &Effort::default());
    let what = format!("{:?} to {step}: {} {findings:?}", quadrangle.distances, answer.summary);
    assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{what}");
    let places = answer.layout.expect("a layout");
    let half = step / whole(2);
    for ((i, j), distance) in PAIRS.into_iter().zip(quadrangle.distances) {
        let (least, most) = (whole(distance) - &half, whole(distance) + &half);
        let found = quadrance(&places[i], &places[j]);
        assert!(found >= &least * &least && found <= &most * &most, "{what}: {i}-{j} is √{found}");
    }
}

/// One length longer or shorter: excluded, by proof, unless it is the mirror image's.
fn changed_does_not_close(quadrangle: &Quadrangle, step: &Rational, at: usize, by: i64) -> bool {
    if quadrangle.distances[at] + by <= 0 || quadrangle.flatness(at, by).is_zero() {
        return false;
    }
    let truss = quadrangle.truss(step.clone(), Some((at, by)));
    let (answer, findings) = close(&truss, &Effort::default());
    let what = format!("{:?} to {step}, {at} by {by}: {} {findings:?}", quadrangle.distances, answer.summary);
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{what}");
    true
}

#[test]
fn six_exact_lengths_of_four_joints_close() {
    let quadrangles = known();
    assert_eq!(quadrangles.len(), 7, "all six distances are integers");
    for quadrangle in &quadrangles {
        closes(quadrangle, &whole(0));
        closes(quadrangle, &ratio(1, 16));
    }
}

#[test]
fn one_wrong_length_of_six_does_not_close() {
    let mut excluded = 0;
    for quadrangle in known() {
        for at in 0..6 {
            for by in [-2, 1] {
                excluded += usize::from(changed_does_not_close(&quadrangle, &whole(0), at, by));
            }
        }
    }
    assert!(excluded >= 80, "{excluded}");
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    #[test]
    fn quadrilaterals_in_a_circle_close_and_not_with_a_wrong_length(quadrangle in on_a_circle(), at in 0..6usize) {
        prop_assert!(quadrangle.flatness(0, 0).is_zero());
        closes(&quadrangle, &whole(0));
        changed_does_not_close(&quadrangle, &whole(0), at, 1);
    }
}
