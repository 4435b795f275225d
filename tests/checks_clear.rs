//! Is it clear? Small cases by hand, and a comparison of every pair against the sweep.

mod trusses;

use chordwright::checks::{ClearState, Level, Report, Rule};
use chordwright::exact::{Orientation, Point, on_segment, orientation, whole};
use chordwright::truss::{JointId, Truss};
use std::collections::BTreeSet;
use trusses::{Scatter, frame, long_truss, of_rule, only, usual};

#[test]
fn two_members_that_cross_are_named_with_the_place() {
    let report = usual(&frame(&[(0, 0), (8, 6), (0, 6), (8, 0)], &[(0, 1), (2, 3)]));
    assert_eq!(report.answers.clear.state, ClearState::NotClear);
    let finding = only(&report, Rule::Crossing);
    assert_eq!(finding.points, [Point::whole(4, 3)]);
    assert_eq!((finding.level, finding.members.len()), (Level::Fault, 2));
    assert!(finding.text.starts_with("M0 crosses M1"), "{}", finding.text);
}

#[test]
fn the_mend_of_a_crossing_puts_a_joint_there() {
    let truss = frame(&[(0, 0), (8, 6), (0, 6), (8, 0)], &[(0, 1), (2, 3)]);
    let report = usual(&truss);
    let edit = only(&report, Rule::Crossing).mend.as_ref().and_then(|mend| mend.edit.clone()).expect("a mend");
    let mended = truss.edited(&edit).expect("the edit fits");
    assert_eq!((mended.joints.len(), mended.members.len()), (5, 4));
    assert_eq!(usual(&mended).answers.clear.state, ClearState::Clear);
}

#[test]
fn a_joint_where_two_members_cross_stands_on_both_and_they_do_not_cross() {
    let report = usual(&frame(&[(0, 0), (8, 6), (0, 6), (8, 0), (4, 3)], &[(0, 1), (2, 3)]));
    assert!(of_rule(&report, Rule::Crossing).is_empty());
    assert_eq!(of_rule(&report, Rule::JointOnMember).len(), 2);
}

#[test]
fn an_overlap_names_its_two_members() {
    let report = usual(&frame(&[(0, 0), (4, 2), (8, 4), (12, 6)], &[(0, 2), (1, 3)]));
    let finding = only(&report, Rule::Overlap);
    assert_eq!(finding.members.len(), 2);
    assert!(finding.text.contains("from J1 to J2"), "{}", finding.text);
}

#[test]
fn the_same_members_twice_are_one_finding() {
    let report = usual(&frame(&[(0, 0), (4, 2)], &[(0, 1), (1, 0), (0, 1)]));
    assert_eq!(only(&report, Rule::Doubled).members.len(), 3);
    assert!(of_rule(&report, Rule::Overlap).is_empty());
}

#[test]
fn joints_in_one_place_and_members_without_length() {
    let report = usual(&frame(&[(0, 0), (4, 2), (4, 2)], &[(0, 1), (1, 2)]));
    assert_eq!(only(&report, Rule::SamePlace).joints, [JointId(1), JointId(2)]);
    assert_eq!(only(&report, Rule::NoLength).members.len(), 1);
}

#[test]
fn loose_ends_parts_and_unused_joints() {
    let report =
        usual(&frame(&[(0, 0), (40, 0), (0, 30), (99, 0), (99, 50), (70, 70)], &[(0, 1), (1, 2), (2, 0), (3, 4)]));
    assert_eq!(report.answers.clear.state, ClearState::Clear, "none of these is a fault");
    assert_eq!(of_rule(&report, Rule::LooseEnd).len(), 2);
    assert_eq!(only(&report, Rule::Apart).joints, [JointId(3), JointId(4)]);
    assert_eq!(only(&report, Rule::UnusedJoint).joints, [JointId(5)]);
}

#[test]
fn a_spread_of_a_quarter_is_allowed_and_less_is_tight() {
    // Spreads 1/5 and 16/25.
    let report = usual(&frame(&[(0, 0), (200, 0), (100, 50)], &[(0, 1), (1, 2), (2, 0)]));
    assert_eq!(of_rule(&report, Rule::TightSpread).len(), 2);
    assert!(report.answers.clear.summary.contains("least spread 1/5 at J0"), "{}", report.answers.clear.summary);
    // A straight joint has the spread 0 and is not tight.
    let report = usual(&frame(&[(0, 0), (100, 0), (200, 0)], &[(0, 1), (1, 2)]));
    assert!(of_rule(&report, Rule::TightSpread).is_empty());
}

#[test]
fn a_joint_that_almost_touches_a_member_is_told_and_moved_onto_it() {
    let truss = frame(&[(0, 0), (6400, 0), (3200, 3), (3200, 900)], &[(0, 1), (2, 3)]);
    let mut truss = truss;
    truss.step = chordwright::measure::Written::plain(whole(1));
    let report = usual(&truss);
    let finding = only(&report, Rule::NearlyMeeting);
    assert_eq!((finding.joints.as_slice(), finding.members.len()), ([JointId(2)].as_slice(), 1));
    let edit = finding.mend.as_ref().and_then(|mend| mend.edit.clone()).expect("a mend");
    assert_eq!(only(&usual(&truss.edited(&edit).expect("fits")), Rule::JointOnMember).joints, [JointId(2)]);
}

#[test]
fn panels_run_counter_clockwise_and_the_outline_clockwise() {
    let report = usual(&long_truss(6));
    let clear = &report.answers.clear;
    assert_eq!((clear.panels.len(), clear.outline.len()), (12, 1));
    let points = &report.points;
    let twice_area = |joints: &[JointId]| {
        (0..joints.len()).fold(whole(0), |sum, i| {
            let (p, q) = (&points[joints[i].index()], &points[joints[(i + 1) % joints.len()].index()]);
            sum + &p.x * &q.y - &p.y * &q.x
        })
    };
    let panels: chordwright::exact::Rational = clear.panels.iter().map(|panel| twice_area(panel)).sum();
    assert!(clear.panels.iter().all(|panel| twice_area(panel) > whole(0)), "counter-clockwise");
    assert_eq!(panels, -twice_area(&clear.outline[0]), "the panels fill the outline");
    assert_eq!(clear.outline[0].len(), 14);
}

/// Everything that meets, by comparing every pair: the slow twin.
#[derive(Debug, Default, PartialEq, Eq)]
struct Meetings {
    crossings: BTreeSet<[usize; 2]>,
    overlaps: BTreeSet<[usize; 2]>,
    on_member: BTreeSet<(usize, usize)>,
}

fn every_pair(truss: &Truss) -> Meetings {
    let points = truss.points();
    let mut found = Meetings::default();
    let ends = |m: usize| truss.members[m].ends().map(|end| end.index());
    let line = |m: usize| ends(m).map(|joint| &points[joint]);
    let joins = |m: usize| {
        let [a, b] = ends(m);
        [a.min(b), a.max(b)]
    };
    let is_first = |m: usize| line(m)[0] != line(m)[1] && (0..m).all(|other| joins(other) != joins(m));
    let members: Vec<usize> = (0..truss.members.len()).filter(|&m| is_first(m)).collect();
    let inside = |p: &Point, [a, b]: [&Point; 2]| p != a && p != b && on_segment(p, a, b);
    for &s in &members {
        for joint in (0..points.len()).filter(|&joint| inside(&points[joint], line(s))) {
            found.on_member.insert((joint, s));
        }
        for &t in members.iter().filter(|&&t| t > s) {
            let ([a, b], [c, d]) = (line(s), line(t));
            let sides = [orientation(a, b, c), orientation(a, b, d), orientation(c, d, a), orientation(c, d, b)];
            if sides == [Orientation::On; 4] {
                let covered =
                    [c, d].into_iter().any(|p| inside(p, [a, b])) || [a, b].into_iter().any(|p| inside(p, [c, d]));
                if covered || (a == c && b == d) || (a == d && b == c) {
                    found.overlaps.insert([s, t]);
                }
            } else if !sides.contains(&Orientation::On) && sides[0] != sides[1] && sides[2] != sides[3] {
                let joint_there = points.iter().any(|p| inside(p, [a, b]) && inside(p, [c, d]));
                if !joint_there {
                    found.crossings.insert([s, t]);
                }
            }
        }
    }
    found
}

fn told(report: &Report) -> Meetings {
    let pair = |rule| of_rule(report, rule).into_iter().map(|f| [f.members[0].index(), f.members[1].index()]).collect();
    let on_member = of_rule(report, Rule::JointOnMember);
    Meetings {
        crossings: pair(Rule::Crossing),
        overlaps: pair(Rule::Overlap),
        on_member: on_member.into_iter().map(|f| (f.joints[0].index(), f.members[0].index())).collect(),
    }
}

fn random_members(scatter: &mut Scatter, joints: usize, side: u64, members: usize) -> Truss {
    let places: Vec<_> = (0..joints).map(|_| (scatter.below(side) as i64, scatter.below(side) as i64)).collect();
    let pick = |scatter: &mut Scatter| scatter.below(joints as u64) as usize;
    let members: Vec<_> = (0..members).map(|_| (pick(scatter), pick(scatter))).collect();
    frame(&places, &members)
}

#[test]
fn the_sweep_finds_what_a_comparison_of_every_pair_finds() {
    let mut scatter = Scatter::new(9);
    for round in 0..4000 {
        let side = 2 + scatter.below(9);
        let (joints, members) = (2 + scatter.below(12) as usize, 1 + scatter.below(18) as usize);
        let truss = random_members(&mut scatter, joints, side, members);
        // Joints of one place are told once for each of the first two: compare frames without more than two in a place.
        let mut places: Vec<_> = truss.points();
        places.sort();
        if places.windows(3).any(|three| three[0] == three[2]) {
            continue;
        }
        assert_eq!(told(&usual(&truss)), every_pair(&truss), "round {round}: {truss:?}");
    }
}

#[test]
fn larger_random_frames_agree_as_well() {
    let mut scatter = Scatter::new(10);
    for _ in 0..20 {
        let truss = random_members(&mut scatter, 60, 1000, 40);
        assert_eq!(told(&usual(&truss)), every_pair(&truss));
    }
}

/// The truss turned by the rational rotation (3, 4, 5), stretched, and moved; or mirrored.
fn moved(truss: &Truss, mirrored: bool) -> Truss {
    let mut other = truss.clone();
    for joint in &mut other.joints {
        let (x, y) = (joint.x.value.clone(), joint.y.value.clone());
        let y = if mirrored { -y } else { y };
        let turned =
            [&x * whole(3) / whole(5) - &y * whole(4) / whole(5), &x * whole(4) / whole(5) + &y * whole(3) / whole(5)];
        joint.x.value = &turned[0] + whole(1_000_003) / whole(7);
        joint.y.value = &turned[1] - whole(17);
    }
    other
}

#[test]
fn a_truss_turned_moved_or_mirrored_gets_the_same_answers() {
    let mut scatter = Scatter::new(77);
    for _ in 0..300 {
        let truss = random_members(&mut scatter, 8, 6, 12);
        for other in [moved(&truss, false), moved(&truss, true)] {
            let (before, after) = (usual(&truss), usual(&other));
            assert_eq!(told(&before), told(&after));
            assert_eq!(before.answers.stands.rank, after.answers.stands.rank);
            assert_eq!(before.answers.clear.panels.len(), after.answers.clear.panels.len());
            assert_eq!(before.answers.clear.state, after.answers.clear.state);
        }
    }
}
