//! Pieces worked out by hand.

use super::{Collision, Cut, EndShape, Left, Line, Piece, Pieces, Shop, Stock, pieces};
use crate::checks::{Limits, Placed, Rule};
use crate::exact::{Interval, Rational, ratio, whole};
use crate::measure::Written;
use crate::truss::{Joint, JointId, Member, MemberId, Role, Truss};

const T: Role = Role::TopChord;
const B: Role = Role::BottomChord;
const W: Role = Role::Web;
const P: Role = Role::Post;

/// Joints `J0` ... and members `M0` ... on a sheet in inches.
fn truss(places: &[(i64, i64)], members: &[(usize, usize, Role)]) -> Truss {
    let joint = |(i, &(x, y)): (usize, &(i64, i64))| Joint {
        mark: format!("J{i}"),
        x: Written::plain(whole(x)),
        y: Written::plain(whole(y)),
        loose: false,
    };
    let member = |(i, &(from, to, role)): (usize, &(usize, usize, Role))| Member {
        mark: format!("M{i}"),
        from: JointId::new(from),
        to: JointId::new(to),
        role,
    };
    Truss {
        joints: places.iter().enumerate().map(joint).collect(),
        members: members.iter().enumerate().map(member).collect(),
        ..Truss::default()
    }
}

fn cut_with(truss: &Truss, shop: &Shop) -> Pieces {
    pieces(&Placed::as_given(truss), shop, &Limits::default())
}

fn usual(truss: &Truss) -> Pieces {
    cut_with(truss, &Shop::default())
}

/// Upper edge, lower edge, working line, long points, deductions.
fn texts(piece: &Piece) -> [&str; 6] {
    let [from, to] = &piece.ends;
    [&piece.upper, &piece.lower, &piece.line, &piece.long, &from.deduction, &to.deduction].map(|l| l.text.as_str())
}

fn corners(piece: &Piece) -> Vec<(Rational, Rational)> {
    let exact = |interval: &Interval| {
        assert!(interval.is_exact(), "{interval:?}");
        interval.lo().clone()
    };
    piece.outline.iter().map(|[x, y]| (exact(x), exact(y))).collect()
}

fn one(shape: &EndShape) -> &Cut {
    match shape {
        EndShape::One(cut) => cut,
        other => panic!("one cut was expected: {other:?}"),
    }
}

fn findings(pieces: &Pieces) -> Vec<&str> {
    assert!(pieces.findings.iter().all(|finding| finding.rule == Rule::TightEnd));
    pieces.findings.iter().map(|finding| finding.text.as_str()).collect()
}

#[test]
fn a_post_between_level_chords_is_shorter_by_a_depth() {
    let places = [(0, 0), (100, 0), (200, 0), (0, 96), (100, 96), (200, 96)];
    let members = [(0, 1, B), (1, 2, B), (3, 4, T), (4, 5, T), (4, 1, P)];
    let cut = usual(&truss(&places, &members));
    let post = &cut.pieces[4];
    assert_eq!(texts(post), ["7'-8 1/2\"", "7'-8 1/2\"", "7'-8 1/2\"", "7'-8 1/2\"", "1 3/4\"", "1 3/4\""]);
    assert!(post.line.exact && post.line.enclosure.is_exact());
    assert!(matches!(post.ends[0].shape, EndShape::Square(Some(_))), "{:?}", post.ends[0]);
    let (low, high) = (ratio(7, 4), ratio(377, 4));
    let [left, right] = [ratio(393, 4), ratio(407, 4)];
    // From the right edge at the lower end, counter-clockwise.
    assert_eq!(corners(post), [(right.clone(), low.clone()), (right, high.clone()), (left.clone(), high), (left, low)]);
    assert_eq!(texts(&cut.pieces[0])[4..], ["0\"", "0\""], "chords run through");
    assert!(cut.collisions.is_empty() && cut.findings.is_empty(), "{:?}", cut.findings);
}

#[test]
fn a_web_at_45_degrees_loses_half_a_depth_times_root_2() {
    let places = [(-100, 0), (0, 0), (100, 0), (60, 60)];
    let cut = usual(&truss(&places, &[(0, 1, B), (1, 2, B), (1, 3, W)]));
    let web = &cut.pieces[2];
    // 58 1/4 √2 = 82.378; a half depth more or less at the edges.
    assert_eq!(texts(web), ["7'-0 1/8\"", "6'-8 5/8\"", "6'-10 3/8\"", "7'-0 1/8\"", "2 1/2\"", "0\""]);
    let square = web.line.enclosure.square();
    assert!(square.contains(&(ratio(233, 4) * ratio(233, 4) * whole(2))));
    assert!(square.width() < ratio(1, 1 << 40) && !web.line.exact);
    let end = one(&web.ends[0].shape);
    assert_eq!((end.degrees.as_str(), end.bevel.as_str(), end.mitre), ("45.0", "12 in 12", false));
    assert_eq!(web.ends[1].shape, EndShape::Square(None), "a free end is square");
    assert!(cut.collisions.is_empty());
}

#[test]
fn two_equal_rafters_meet_in_a_plumb_cut() {
    let cut = usual(&truss(&[(-48, 0), (0, 36), (48, 0)], &[(0, 1, T), (1, 2, T)]));
    // Half a depth is 7/4, along the plumb line 5/4 of it.
    let at_ridge: Vec<_> = corners(&cut.pieces[0]).into_iter().filter(|(x, _)| *x == whole(0)).collect();
    assert_eq!(at_ridge, [(whole(0), ratio(541, 16)), (whole(0), ratio(611, 16))]);
    let end = one(&cut.pieces[0].ends[1].shape);
    assert_eq!((end.degrees.as_str(), end.bevel.as_str(), end.mitre), ("53.1", "9 in 12", true));
    assert_eq!(end.against, Some(MemberId::new(1)));
    // 60 more or less 7/4 · 3/4.
    assert_eq!(texts(&cut.pieces[0]), ["5'-1 5/16\"", "4'-10 11/16\"", "5'-0\"", "5'-1 5/16\"", "0\"", "0\""]);
    assert!(cut.collisions.is_empty());
}

#[test]
fn a_heel_is_mitred_where_both_chords_end_and_stops_where_one_runs_through() {
    let heel = truss(&[(0, 0), (48, 36), (96, 0)], &[(0, 1, T), (0, 2, B)]);
    let cut = usual(&heel);
    // Half of the angle with the tangent 3/4 has the tangent 1/3.
    for piece in &cut.pieces {
        let end = one(&piece.ends[0].shape);
        assert_eq!((end.degrees.as_str(), end.bevel.as_str()), ("18.4", "4 in 12 steep"));
        assert_eq!(piece.ends[0].deduction.text, "0\"");
    }
    assert!(cut.collisions.is_empty() && cut.findings.is_empty());

    let through = truss(&[(0, 0), (48, 36), (96, 0), (-24, 0)], &[(0, 1, T), (0, 2, B), (3, 0, B)]);
    let cut = usual(&through);
    let end = one(&cut.pieces[0].ends[0].shape);
    assert_eq!((end.degrees.as_str(), end.bevel.as_str(), end.mitre), ("36.9", "9 in 12 steep", false));
    // 7/4 · 5/3
    assert_eq!(cut.pieces[0].ends[0].deduction.enclosure, Interval::exactly(ratio(35, 12)));
    assert_eq!(cut.pieces[1].ends[0].shape, EndShape::Square(None));
    assert!(cut.collisions.is_empty());
}

#[test]
fn mitres_of_unequal_depths_go_through_both_meetings_of_edges() {
    let of_depth = |depth| Stock { depth: whole(depth), line: Line::Centre };
    let shop = Shop { bottom_chord: of_depth(4), top_chord: of_depth(2), ..Shop::default() };
    // A square corner: outer edges meet at (-1, -2), inner ones at (1, 2).
    let cut = cut_with(&truss(&[(0, 0), (0, 60), (60, 0)], &[(0, 1, T), (0, 2, B)]), &shop);
    for piece in &cut.pieces {
        let corners = corners(piece);
        assert!(corners.contains(&(whole(-1), whole(-2))) && corners.contains(&(whole(1), whole(2))), "{corners:?}");
    }
    assert_eq!(one(&cut.pieces[0].ends[0].shape).bevel, "6 in 12 steep");
    assert_eq!(one(&cut.pieces[1].ends[0].shape).bevel, "6 in 12");
    assert!(cut.collisions.is_empty());
}

#[test]
fn a_web_between_a_chord_and_a_post_has_a_double_cut() {
    let places = [(-100, 0), (0, 0), (100, 0), (0, 80), (60, 60)];
    let drawn = truss(&places, &[(0, 1, B), (1, 2, B), (1, 3, P), (1, 4, W)]);
    let cut = usual(&drawn);
    let EndShape::Two { cuts: [upper, lower], notch } = &cut.pieces[3].ends[0].shape else {
        panic!("{:?}", cut.pieces[3].ends[0]);
    };
    assert_eq!((upper.against, lower.against, *notch), (Some(MemberId::new(2)), Some(MemberId::new(1)), false));
    assert_eq!(cut.pieces[3].outline.len(), 5);
    // The point lies on the working line, further out than both edges' ends.
    let [upper, lower, line, long, deduction, _] = texts(&cut.pieces[3]);
    assert_eq!((upper, lower, deduction), ("6'-8 5/8\"", "6'-8 5/8\"", "2 1/2\""));
    assert_eq!((line, long), ("6'-10 3/8\"", "6'-10 3/8\""));
    // The point lies where the edges of chord and post meet.
    let point = &cut.pieces[3].outline[4];
    assert!(point.iter().all(|part| *part == Interval::exactly(ratio(7, 4))), "{point:?}");
    assert!(cut.collisions.is_empty());

    // A gap moves both cuts square to the edges.
    let shop = Shop { gap: ratio(1, 4), ..Shop::default() };
    let point = &cut_with(&drawn, &shop).pieces[3].outline[4];
    assert!(point.iter().all(|part| *part == Interval::exactly(whole(2))), "{point:?}");
}

#[test]
fn a_post_on_a_chord_that_breaks_upwards_has_a_notch() {
    let places = [(-48, -36), (0, 0), (48, -36), (0, 60)];
    let cut = usual(&truss(&places, &[(0, 1, B), (1, 2, B), (1, 3, P)]));
    let post = &cut.pieces[2];
    assert!(matches!(post.ends[0].shape, EndShape::Two { notch: true, .. }), "{:?}", post.ends[0]);
    // The chords' upper edges are 7/4 · 5/4 above the joint, at the post's edges 7/4 · 3/4 lower.
    assert_eq!(post.ends[0].deduction.enclosure, Interval::exactly(ratio(35, 16)));
    assert_eq!(post.long.enclosure, Interval::exactly(whole(60) - ratio(7, 8)));
    assert_eq!(corners(post)[4], (whole(0), ratio(35, 16)));
    assert!(cut.collisions.is_empty());
}

#[test]
fn what_comes_from_opposite_is_butted() {
    let shop = Shop { gap: ratio(1, 8), ..Shop::default() };
    let cut = cut_with(&truss(&[(0, 0), (50, 0), (90, 0)], &[(0, 1, B), (1, 2, W)]), &shop);
    assert_eq!(cut.pieces[1].ends[0].shape, EndShape::Square(Some(MemberId::new(0))));
    assert_eq!(texts(&cut.pieces[1]), ["3'-3 7/8\"", "3'-3 7/8\"", "3'-3 7/8\"", "3'-3 7/8\"", "1/8\"", "0\""]);
    assert_eq!(cut.pieces[0].ends[1].deduction.text, "0\"");
}

#[test]
fn the_working_line_may_lie_anywhere_in_the_depth() {
    let mut shop = Shop::default();
    shop.bottom_chord.line = Line::Top;
    let drawn = truss(&[(-100, 0), (0, 0), (100, 0), (0, 60)], &[(0, 1, B), (1, 2, B), (1, 3, P)]);
    assert_eq!(cut_with(&drawn, &shop).pieces[2].ends[0].deduction.text, "0\"");
    shop.bottom_chord.line = Line::Bottom;
    assert_eq!(cut_with(&drawn, &shop).pieces[2].ends[0].deduction.text, "3 1/2\"");
    shop.bottom_chord.line = Line::Gauge(ratio(5, 4));
    assert_eq!(cut_with(&drawn, &shop).pieces[2].ends[0].deduction.text, "2 1/4\"");
}

#[test]
fn nothing_and_little_that_is_left_is_told() {
    let between_chords = |apart: i64| {
        let places = [(0, 0), (100, 0), (200, 0), (0, apart), (100, apart), (200, apart)];
        truss(&places, &[(0, 1, B), (1, 2, B), (3, 4, T), (4, 5, T), (1, 4, P)])
    };
    let cut = usual(&between_chords(3));
    assert_eq!(findings(&cut), ["nothing is left of M4 between J1 and J4"]);
    assert_eq!((cut.pieces[4].left, cut.pieces[4].outline.len()), (Left::Nothing, 0));
    assert_eq!(cut.pieces[4].line.text, "-1/2\"");
    let cut = usual(&between_chords(6));
    assert_eq!(findings(&cut), ["only 2 1/2\" is left of M4 between J1 and J4, less than its depth of 3 1/2\""]);
    assert!(usual(&between_chords(7)).findings.is_empty(), "just its depth");
}

#[test]
fn points_below_15_degrees_are_told() {
    let heel = |run: i64, rise: i64| {
        let places = [(0, 0), (run, rise), (900, 0), (-24, 0)];
        usual(&truss(&places, &[(0, 1, T), (0, 2, B), (3, 0, B)]))
    };
    assert_eq!(findings(&heel(400, 100)), ["the end of M0 at J0 has a point sharper than 15 degrees"]);
    // The tangent of 15 degrees is 0.26794919...
    assert!(heel(1_000_000_000, 267_949_193).findings.is_empty());
    assert_eq!(heel(1_000_000_000, 267_949_192).findings.len(), 1);
}

#[test]
fn webs_that_meet_on_a_chord_collide() {
    let places = [(-100, 0), (0, 0), (100, 0), (-60, 60), (60, 60)];
    let cut = usual(&truss(&places, &[(0, 1, B), (1, 2, B), (1, 3, W), (1, 4, W)]));
    let expected = Collision { joint: JointId::new(1), members: [MemberId::new(3), MemberId::new(2)] };
    assert_eq!(cut.collisions, [expected]);
}

#[test]
fn strange_input_is_cut_without_harm() {
    let places = [(0, 0), (10, 0), (10, 0), (3, 7), (-5, 0)];
    let members =
        [(0, 1, B), (0, 1, B), (1, 2, W), (0, 3, W), (3, 3, P), (0, 2, W), (4, 0, W), (3, 1, T), (4, 3, Role::Other)];
    let drawn = truss(&places, &members);
    for depth in [whole(-3), whole(0), ratio(1, 3), whole(1_000_000)] {
        for line in [Line::Centre, Line::Gauge(whole(-100)), Line::Gauge(whole(100))] {
            for gap in [whole(0), whole(-2), whole(50)] {
                let shop = Shop { gap, ..Shop::all_of(Stock { depth: depth.clone(), line: line.clone() }) };
                assert_eq!(cut_with(&drawn, &shop).pieces.len(), members.len());
            }
        }
    }
    let mut broken = drawn.clone();
    broken.members[0].to = JointId::new(77);
    assert!(usual(&broken).pieces.is_empty());
    assert!(usual(&Truss::default()).pieces.is_empty());
}
