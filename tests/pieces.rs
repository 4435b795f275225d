//! Pieces of random triangles and trusses: laws of their outlines, mirror images, and clear joints.

#![cfg(not(target_arch = "wasm32"))]

mod trusses;

use chordwright::checks::pieces::{EndShape, Left, Piece, Pieces, Shop, pieces};
use chordwright::checks::{Limits, Placed, Question};
use chordwright::exact::{Interval, Point, Rational, Vector, in_line, quadrance, ratio, whole};
use chordwright::measure::Written;
use chordwright::truss::{Role, Truss};
use trusses::{Scatter, frame, long_truss, rational_frame};

fn cut_with(truss: &Truss, shop: &Shop) -> Pieces {
    pieces(&Placed::as_given(truss), shop, &Limits::default())
}

fn usual(truss: &Truss) -> Pieces {
    cut_with(truss, &Shop::usual(truss.unit))
}

/// Twice the area of an outline.
fn twice_area(piece: &Piece) -> Interval {
    let corners = &piece.outline;
    (0..corners.len()).fold(Interval::exactly(whole(0)), |sum, i| {
        let ([ax, ay], [bx, by]) = (&corners[i], &corners[(i + 1) % corners.len()]);
        &sum + &(&(ax * by) - &(ay * bx))
    })
}

fn overlap(a: &Interval, b: &Interval) -> bool {
    a.intersection(b).is_some()
}

fn in_roles(mut truss: Truss, roles: &[Role]) -> Truss {
    truss.members.iter_mut().zip(roles).for_each(|(member, role)| member.role = *role);
    truss
}

fn random_triangle(scatter: &mut Scatter) -> Truss {
    loop {
        let mut draw = || (scatter.below(400) as i64, scatter.below(400) as i64);
        let places = [draw(), draw(), draw()];
        let points = places.map(|(x, y)| Point::whole(x, y));
        if !in_line(&points[0], &points[1], &points[2]) {
            let roles = [0; 3].map(|_| Role::ALL[scatter.below(5) as usize]);
            return in_roles(frame(&places, &[(0, 1), (1, 2), (2, 0)]), &roles);
        }
    }
}

/// A gable on two equal rafters with a king post, a post and a web on either side of it, drawn from whole numbers.
///
/// ```text
///           U2
///        U1  |  U3
///     L0  L1 L2 L3  L4
/// ```
fn gable(run: i64, rise: i64) -> Truss {
    let places = [(-2 * run, 0), (-run, 0), (0, 0), (run, 0), (2 * run, 0), (-run, rise), (0, 2 * rise), (run, rise)];
    let members =
        [(0, 1), (1, 2), (2, 3), (3, 4), (0, 5), (5, 6), (6, 7), (7, 4), (1, 5), (2, 6), (3, 7), (5, 2), (2, 7)];
    let (b, t, p, w) = (Role::BottomChord, Role::TopChord, Role::Post, Role::Web);
    in_roles(frame(&places, &members), &[b, b, b, b, t, t, t, t, p, p, p, w, w])
}

#[test]
fn the_area_of_a_trapezoid_is_half_the_sum_of_its_edges_times_its_depth() {
    let mut scatter = Scatter::new(31);
    let mut trapezoids = 0;
    for _ in 0..120 {
        let truss = random_triangle(&mut scatter);
        let mut shop = Shop::usual(truss.unit);
        for role in Role::ALL {
            shop.stock_mut(role).depth = ratio(1 + scatter.below(40) as i64, 8);
        }
        let cut = cut_with(&truss, &shop);
        for (piece, member) in cut.pieces.iter().zip(&truss.members) {
            if piece.left != Left::Whole || piece.outline.len() != 4 {
                continue;
            }
            trapezoids += 1;
            let edges = &piece.upper.enclosure + &piece.lower.enclosure;
            let area = edges.scaled(&shop.stock(member.role).depth);
            let outlined = twice_area(piece);
            assert!(overlap(&area, &outlined), "{truss:?}: {area:?} {outlined:?}");
            assert!(outlined.width() < ratio(1, 1 << 30), "the enclosures are narrow");
        }
    }
    assert!(trapezoids > 200, "{trapezoids}");
}

#[test]
fn edges_of_an_outline_are_as_long_as_they_are_told() {
    let mut scatter = Scatter::new(32);
    for _ in 0..60 {
        for piece in usual(&random_triangle(&mut scatter)).pieces {
            if piece.left != Left::Whole {
                assert!(piece.outline.is_empty());
                continue;
            }
            // The lower edge runs from the first corner to the second.
            let [a, b] = [&piece.outline[0], &piece.outline[1]];
            let square = &(&b[0] - &a[0]).square() + &(&b[1] - &a[1]).square();
            assert!(overlap(&square, &piece.lower.enclosure.square()), "{piece:?}");
            // Nothing is longer than from long point to long point.
            for length in [&piece.upper, &piece.lower, &piece.line] {
                assert!(length.enclosure.lo() <= piece.long.enclosure.hi());
            }
        }
    }
}

#[test]
fn deductions_and_what_is_left_make_up_the_working_line() {
    let mut scatter = Scatter::new(33);
    for _ in 0..60 {
        let truss = random_triangle(&mut scatter);
        for (piece, member) in usual(&truss).pieces.iter().zip(&truss.members) {
            let [from, to] = piece.ends.each_ref().map(|end| &end.deduction.enclosure);
            let all = &(from + to) + &piece.line.enclosure;
            let [a, b] = member.ends().map(|joint| truss.joint(joint).point());
            assert!(overlap(&all.square(), &Interval::exactly(quadrance(&a, &b))), "{piece:?}");
        }
    }
}

#[test]
fn pieces_of_a_triangle_do_not_overlap() {
    let mut scatter = Scatter::new(34);
    for _ in 0..150 {
        let mut truss = random_triangle(&mut scatter);
        let roles: Vec<Role> = [Role::TopChord, Role::Post, Role::Web].into();
        truss = in_roles(truss, &roles);
        let cut = usual(&truss);
        // Where everything is whole and each joint has one that runs through and one that stops.
        assert!(cut.collisions.is_empty(), "{truss:?} {:?}", cut.collisions);
    }
}

#[test]
fn pieces_of_a_symmetrical_gable_do_not_overlap() {
    let mut scatter = Scatter::new(35);
    let drawn = (0..25).map(|_| (30 + scatter.below(90) as i64, 20 + scatter.below(80) as i64));
    for (run, rise) in drawn.chain([(60, 45), (48, 36), (36, 48), (60, 60)]) {
        let truss = gable(run, rise);
        let cut = usual(&truss);
        assert!(cut.pieces.iter().all(|piece| piece.left == Left::Whole), "{run} {rise}");
        assert!(cut.collisions.is_empty(), "{run} {rise}: {:?}", cut.collisions);
        for piece in &cut.pieces {
            for length in [&piece.upper, &piece.lower, &piece.line] {
                assert!(length.enclosure.lo() <= piece.long.enclosure.hi(), "{piece:?}");
            }
        }
        // The king post stops against both rafters, and the webs against chord and post.
        let shape = |member: usize, end: usize| &cut.pieces[member].ends[end].shape;
        assert!(matches!(shape(9, 1), EndShape::Two { notch: false, .. }), "{:?}", shape(9, 1));
        assert!(matches!(shape(11, 1), EndShape::Two { notch: false, .. }), "{:?}", shape(11, 1));
    }
}

#[test]
fn pieces_of_a_long_truss_are_alike_and_do_not_overlap() {
    let cut = usual(&long_truss(6));
    assert!(cut.collisions.is_empty(), "{:?}", cut.collisions);
    let inner = &cut.pieces[4];
    assert_eq!((inner.upper.text.as_str(), inner.lower.text.as_str()), ("5'-8 1/2\"", "5'-8 1/2\""), "72 less 3 1/2");
}

/// A truss in places that come from its own.
fn placed(truss: &Truss, place: impl Fn(&Rational, &Rational) -> [Rational; 2]) -> Truss {
    let mut other = truss.clone();
    for joint in &mut other.joints {
        let [x, y] = place(&joint.x.value, &joint.y.value);
        (joint.x, joint.y) = (Written::plain(x), Written::plain(y));
    }
    other
}

/// Corners as text, in an order of their own.
fn corners(piece: &Piece, place: impl Fn(&Interval, &Interval) -> [Interval; 2]) -> Vec<(String, String)> {
    // The middles of enclosures 2^-48 wide, to 2^-40.
    let near = |part: &Interval| (part.middle() * whole(1i64 << 40)).round().to_string();
    let mut corners: Vec<_> = piece
        .outline
        .iter()
        .map(|[x, y]| {
            let [x, y] = place(x, y);
            (near(&x), near(&y))
        })
        .collect();
    corners.sort();
    corners
}

#[test]
fn mirrored_trusses_give_mirrored_pieces() {
    let mut scatter = Scatter::new(36);
    let mut drawn: Vec<Truss> = (0..40).map(|_| random_triangle(&mut scatter)).collect();
    drawn.extend([gable(60, 45), gable(50, 37), long_truss(3)]);
    for truss in drawn {
        let mirrored = placed(&truss, |x, y| [-x, y.clone()]);
        let (before, after) = (usual(&truss), usual(&mirrored));
        assert_eq!(before.collisions.len(), after.collisions.len());
        for (before, after) in before.pieces.iter().zip(&after.pieces) {
            assert_eq!(corners(before, |x, y| [-x, y.clone()]), corners(after, |x, y| [x.clone(), y.clone()]));
            assert_eq!((&before.line, &before.long), (&after.line, &after.long));
            for (before, after) in before.ends.iter().zip(&after.ends) {
                assert_eq!(before.deduction, after.deduction);
                assert_eq!(std::mem::discriminant(&before.shape), std::mem::discriminant(&after.shape));
            }
        }
    }
}

#[test]
fn a_truss_turned_and_moved_gives_the_same_lengths() {
    let mut scatter = Scatter::new(37);
    for _ in 0..40 {
        let truss = random_triangle(&mut scatter);
        // By the right triangle 3, 4, 5; upper and lower may change places.
        let turned = placed(&truss, |x, y| {
            [(x * whole(3) - y * whole(4)) / whole(5) + whole(7), (x * whole(4) + y * whole(3)) / whole(5)]
        });
        let (before, after) = (usual(&truss), usual(&turned));
        for (before, after) in before.pieces.iter().zip(&after.pieces) {
            let edges = |piece: &Piece| {
                let mut edges = [piece.upper.text.clone(), piece.lower.text.clone()];
                edges.sort();
                edges
            };
            assert_eq!(edges(before), edges(after));
            assert_eq!((&before.line, &before.long, before.left), (&after.line, &after.long, after.left));
        }
    }
}

#[test]
fn members_with_rational_lengths_give_exact_numbers() {
    let cut = usual(&gable(60, 45));
    for piece in &cut.pieces {
        assert!(piece.outline.iter().flatten().all(Interval::is_exact), "{piece:?}");
        for length in [&piece.upper, &piece.lower, &piece.line, &piece.long] {
            assert!(length.enclosure.is_exact());
        }
    }
    // 7/4 off at the chord, 7/4 · 5/4 below the rafters' edges.
    let king = &cut.pieces[9];
    assert_eq!(*king.line.enclosure.lo(), whole(90) - ratio(7, 4) - ratio(7, 4) * ratio(5, 4));
    assert!(king.line.exact && king.line.text == "7'-2 1/16\"", "{}", king.line.text);
}

#[test]
fn random_trusses_with_random_settings_hold_their_laws() {
    let mut scatter = Scatter::new(38);
    for _ in 0..40 {
        let joints = 4 + scatter.below(4) as usize;
        let places: Vec<_> =
            (0..joints).map(|_| (ratio(scatter.below(900) as i64, 3), ratio(scatter.below(900) as i64, 7))).collect();
        let members: Vec<_> =
            (0..9).map(|_| (scatter.below(joints as u64) as usize, scatter.below(joints as u64) as usize)).collect();
        let roles: Vec<_> = members.iter().map(|_| Role::ALL[scatter.below(5) as usize]).collect();
        let truss = in_roles(rational_frame(&places, &members), &roles);
        let mut shop = Shop::usual(truss.unit);
        shop.gap = ratio(scatter.below(3) as i64, 16);
        for role in Role::ALL {
            shop.stock_mut(role).depth = ratio(1 + scatter.below(60) as i64, 8);
        }
        let cut = cut_with(&truss, &shop);
        assert_eq!(cut.pieces.len(), truss.members.len());
        assert!(cut.findings.iter().all(|finding| finding.rule.question() == Question::Cut));
        for piece in cut.pieces.iter().filter(|piece| piece.left == Left::Whole) {
            assert!((4..=6).contains(&piece.outline.len()));
            assert!(twice_area(piece).lo() > &whole(0), "counter-clockwise: {piece:?}");
            assert!(has_parallel_edges(&truss, piece), "{piece:?}");
        }
    }
}

/// The part of an outline to the left of the line from `a` to `b`.
fn clipped(outline: &[Point], a: &Point, b: &Point) -> Vec<Point> {
    let side = |p: &Point| (b - a).cross(&(p - a));
    let mut kept = Vec::new();
    for (i, p) in outline.iter().enumerate() {
        let q = &outline[(i + 1) % outline.len()];
        let (at_p, at_q) = (side(p), side(q));
        if at_p >= whole(0) {
            kept.push(p.clone());
        }
        if &at_p * &at_q < whole(0) {
            kept.push(p + &(q - p).scaled(&(&at_p / (&at_p - &at_q))));
        }
    }
    kept
}

/// True when two convex outlines share some area: the slow twin, which cuts one by every edge of the other.
fn share_area(a: &[Point], b: &[Point]) -> bool {
    let common = (0..b.len()).fold(a.to_vec(), |rest, i| clipped(&rest, &b[i], &b[(i + 1) % b.len()]));
    let cross = |i: usize| {
        let (p, q) = (&common[i], &common[(i + 1) % common.len()]);
        &p.x * &q.y - &p.y * &q.x
    };
    (0..common.len()).map(cross).sum::<Rational>() > whole(0)
}

#[test]
fn collisions_are_those_that_clipping_finds() {
    let ways =
        [(5, 0), (4, 3), (3, 4), (0, 5), (-3, 4), (-4, 3), (-5, 0), (-4, -3), (-3, -4), (0, -5), (3, -4), (4, -3)];
    let mut scatter = Scatter::new(39);
    let (mut collided, mut clear) = (0, 0);
    for _ in 0..150 {
        let mut places = vec![(0, 0)];
        places.extend(ways.iter().filter(|_| scatter.below(3) == 0).map(|(x, y)| (12 * x, 12 * y)));
        let members: Vec<_> = (1..places.len()).map(|far| (0, far)).collect();
        let roles: Vec<_> = members.iter().map(|_| Role::ALL[scatter.below(5) as usize]).collect();
        let truss = in_roles(frame(&places, &members), &roles);
        let mut shop = Shop::usual(truss.unit);
        for role in Role::ALL {
            shop.stock_mut(role).depth = ratio(4 + scatter.below(40) as i64, 8);
        }
        let cut = cut_with(&truss, &shop);
        let outline = |member: usize| -> Option<Vec<Point>> {
            let piece = &cut.pieces[member];
            let is_convex = piece.ends.iter().all(|end| !matches!(end.shape, EndShape::Two { notch: true, .. }));
            let corner = |[x, y]: &[Interval; 2]| {
                assert!(x.is_exact() && y.is_exact());
                Point { x: x.lo().clone(), y: y.lo().clone() }
            };
            (is_convex && piece.left == Left::Whole).then(|| piece.outline.iter().map(corner).collect())
        };
        // The ways go round counter-clockwise, and so do the members.
        for member in 0..members.len() {
            let next = (member + 1) % members.len();
            if member == next {
                continue;
            }
            let Some((a, b)) = outline(member).zip(outline(next)) else { continue };
            let told = cut.collisions.iter().any(|collision| {
                let pair = collision.members.map(|member| member.index());
                pair == [member, next] || pair == [next, member]
            });
            assert_eq!(told, share_area(&a, &b), "{truss:?} {member} {next}");
            *(if told { &mut collided } else { &mut clear }) += 1;
        }
    }
    assert!(collided > 20 && clear > 100, "{collided} {clear}");
}

/// True when the edge from the first corner to the second runs along the member.
fn has_parallel_edges(truss: &Truss, piece: &Piece) -> bool {
    let [a, b] = truss.member(piece.member).ends().map(|joint| truss.joint(joint).point());
    let Vector { x, y } = &b - &a;
    let [from, to] = [&piece.outline[0], &piece.outline[1]];
    let cross = &(&to[1] - &from[1]).scaled(&x) - &(&to[0] - &from[0]).scaled(&y);
    cross.contains(&whole(0))
}
