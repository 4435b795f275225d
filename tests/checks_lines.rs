//! Is every line true? Declared relations, near misses, and silence where a drafter means nothing.

mod trusses;

use chordwright::checks::{Level, Places, Question, Report, Rule, TrueState};
use chordwright::exact::{Rational, ratio, whole};
use chordwright::measure::Written;
use chordwright::truss::{Edit, FigureKind, JointId, Role, Truss};
use trusses::{figured, frame, long_truss, of_rule, only, usual};

/// A parallel-chord truss of eight panels of 5 ft, 6 ft high, with one joint moved.
fn with_moved(joint: usize, dx: Rational, dy: Rational) -> Truss {
    let mut truss = long_truss(8);
    let old = &mut truss.joints[joint];
    old.x = Written::plain(&old.x.value + dx);
    old.y = Written::plain(&old.y.value + dy);
    truss
}

fn near_findings(report: &Report) -> Vec<(Rule, String)> {
    let of_lines = report.findings.iter().filter(|finding| finding.rule.question() == Question::True);
    of_lines.map(|finding| (finding.rule, finding.text.clone())).collect()
}

#[test]
fn a_true_truss_has_nothing_to_tell() {
    let report = usual(&long_truss(8));
    assert_eq!(near_findings(&report), []);
    assert_eq!(report.answers.lines.state, TrueState::True);
}

#[test]
fn a_kinked_chord_is_one_finding_with_its_mend() {
    // L3 is 1/8 in low.
    let truss = with_moved(6, whole(0), ratio(-1, 8));
    let report = usual(&truss);
    assert_eq!(report.answers.lines.state, TrueState::Almost);
    let found = near_findings(&report);
    assert_eq!(found.len(), 1, "{found:?}");
    let finding = only(&report, Rule::NearlyStraight);
    assert_eq!((finding.joints.as_slice(), finding.level), ([JointId(6)].as_slice(), Level::Caution));
    let edit = finding.mend.as_ref().and_then(|mend| mend.edit.clone()).expect("a mend");
    assert_eq!(usual(&truss.edited(&edit).expect("fits")).answers.lines.state, TrueState::True);
}

#[test]
fn an_end_joint_that_is_off_is_told_against_the_rest_of_the_chord() {
    let report = usual(&with_moved(0, whole(0), ratio(1, 8)));
    assert_eq!(only(&report, Rule::NearlyStraight).joints, [JointId(0)]);
    assert_eq!(near_findings(&report).len(), 1, "{:?}", near_findings(&report));
}

#[test]
fn a_joint_moved_along_the_chord_makes_its_post_nearly_plumb() {
    let report = usual(&with_moved(6, ratio(1, 16), whole(0)));
    let found = near_findings(&report);
    assert_eq!(found.iter().map(|(rule, _)| *rule).collect::<Vec<_>>(), [Rule::NearlyPlumb], "{found:?}");
}

#[test]
fn a_chord_that_falls_a_little_is_nearly_level() {
    let mut truss = long_truss(8);
    for panel in 0..=8 {
        truss.joints[2 * panel].y = Written::plain(ratio(panel as i64, 64));
    }
    let report = usual(&truss);
    assert_eq!(only(&report, Rule::NearlyLevel).members.len(), 8);
}

#[test]
fn a_deviation_beyond_the_near_distance_is_meant() {
    let report = usual(&with_moved(6, whole(0), whole(-5)));
    assert_eq!(near_findings(&report), []);
}

#[test]
fn an_arch_is_silent() {
    // Rises that change by amounts below the near distance from panel to panel.
    let places: Vec<_> = (0..=40).map(|i: i64| (whole(60 * i), ratio(i * (40 - i), 10))).collect();
    let members: Vec<_> = (0..40).map(|i| (i, i + 1)).collect();
    let mut truss = trusses::rational_frame(&places, &members);
    truss.members.iter_mut().for_each(|member| member.role = Role::TopChord);
    assert_eq!(near_findings(&usual(&truss)), []);
}

#[test]
fn halves_that_are_almost_mirror_images_name_the_joints() {
    // A gable whose one web joint is 1/8 in to the side, with nothing plumb or straight to tell it by.
    let places = [(0, 0), (320, 0), (160, 800), (1920, 0), (1600, 0), (1760, 800), (960, 500), (700, 330), (1220, 332)];
    let members = [(0, 2), (2, 1), (1, 7), (7, 6), (6, 8), (8, 4), (4, 5), (5, 3), (2, 7), (8, 5)];
    let mut truss = frame(&places, &members);
    truss.step = Written::plain(whole(1));
    let report = usual(&truss);
    let finding = only(&report, Rule::NearlyAlike);
    assert_eq!(finding.joints, [JointId(7), JointId(8)]);
}

#[test]
fn a_corner_that_is_almost_square() {
    let mut truss = frame(&[(0, 0), (600, 200), (-301, 901)], &[(0, 1), (0, 2)]);
    truss.step = Written::plain(whole(1));
    assert_eq!(only(&usual(&truss), Rule::NearlySquare).joints, [JointId(0)]);
}

#[test]
fn posts_that_lean_alike_but_one() {
    let places: Vec<_> = (0..5).flat_map(|i| [(100 * i, 7 * i * i), (100 * i + 30, 300 + 11 * i * i)]).collect();
    let mut places = places;
    // Posts along (30, 300), the last one a little off.
    for i in 0..5 {
        places[2 * i + 1] = (places[2 * i].0 + 30, places[2 * i].1 + 300);
    }
    places[9].0 += 1;
    let mut truss = frame(&places, &[(0, 1), (2, 3), (4, 5), (6, 7), (8, 9)]);
    truss.members.iter_mut().for_each(|member| member.role = Role::Post);
    truss.step = Written::plain(ratio(1, 2));
    let report = usual(&truss);
    assert_eq!(only(&report, Rule::NearlyParallel).members.first().map(|m| m.0), Some(4));
}

#[test]
fn a_piece_that_is_a_sixteenth_longer_than_its_like() {
    // Loose pieces, so that nothing else explains it.
    let mut places: Vec<_> =
        (0..6).flat_map(|i| [(whole(0), whole(50 * i)), (whole(100), whole(50 * i + 17))]).collect();
    places[5].0 += ratio(1, 16);
    let truss = trusses::rational_frame(&places, &[(0, 1), (2, 3), (4, 5), (6, 7), (8, 9), (10, 11)]);
    let report = usual(&truss);
    assert_eq!(only(&report, Rule::NearlyEqual).members.first().map(|m| m.0), Some(2));
}

fn ids<const N: usize>(joints: [u32; N]) -> Vec<JointId> {
    joints.map(JointId).to_vec()
}

#[test]
fn declared_relations_between_set_joints_hold_exactly_or_fail() {
    let truss = frame(&[(0, 0), (100, 1), (200, 0), (0, 100), (1, 200), (100, 102)], &[]);
    let in_line = FigureKind::InLine { joints: ids([0, 1, 2]) };
    let square = FigureKind::Square { at: JointId(0), from: JointId(2), to: JointId(4) };
    let parallel = FigureKind::Parallel { first: [JointId(0), JointId(2)], second: [JointId(3), JointId(5)] };
    let equal = FigureKind::Equal { first: [JointId(0), JointId(2)], second: [JointId(0), JointId(4)] };
    let rules = [Rule::NotStraight, Rule::NotSquare, Rule::NotParallel, Rule::NotEqual];
    for (kind, rule) in [in_line, square, parallel, equal].into_iter().zip(rules) {
        let truss = figured(truss.clone(), kind);
        let report = usual(&truss);
        assert_eq!(report.answers.lines.state, TrueState::NotTrue, "{}", rule.name());
        let finding = only(&report, rule);
        assert_eq!((finding.level, finding.figures.len()), (Level::Fault, 1));
        if let Some(Edit::MoveJoints(moves)) = finding.mend.as_ref().and_then(|mend| mend.edit.clone()) {
            let mended = truss.edited(&Edit::MoveJoints(moves)).expect("fits");
            assert!(of_rule(&usual(&mended), rule).is_empty(), "{} is mended", rule.name());
        }
    }
}

#[test]
fn relations_that_hold_are_counted() {
    let truss = frame(&[(0, 0), (100, 0), (200, 0), (0, 100)], &[]);
    let truss = figured(truss, FigureKind::InLine { joints: ids([0, 1, 2]) });
    let truss = figured(truss, FigureKind::Square { at: JointId(0), from: JointId(1), to: JointId(3) });
    let report = usual(&truss);
    assert_eq!(report.answers.lines.state, TrueState::True);
    assert!(report.answers.lines.summary.starts_with("all 2 declared relations hold"));
}

#[test]
fn a_sketched_joint_says_nothing() {
    let mut truss = with_moved(6, whole(0), ratio(-1, 8));
    truss.joints[6].loose = true;
    assert_eq!(near_findings(&usual(&truss)), []);
}

#[test]
fn at_a_layout_less_than_a_step_means_nothing() {
    let mut truss = frame(&[(0, 0), (60, 1), (120, 0), (60, 40)], &[(0, 1), (1, 2), (0, 3), (3, 2), (1, 3)]);
    truss.joints[1].loose = true;
    let length = |from, to, inches: i64| FigureKind::Length {
        from: JointId(from),
        to: JointId(to),
        value: Written::plain(whole(inches)),
    };
    for kind in [length(0, 1, 60), length(1, 2, 60), length(1, 3, 40), FigureKind::InLine { joints: ids([0, 1, 2]) }] {
        truss = figured(truss, kind);
    }
    let report = usual(&truss);
    assert_eq!(report.places, Places::Layout, "{:?}", report.answers.close);
    assert_eq!(near_findings(&report), []);
}
