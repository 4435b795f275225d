//! Does it stand? Against theorems, published trusses, and a plain elimination in fractions.

mod trusses;

use chordwright::checks::{Report, Rule, StandsState};
use chordwright::exact::{Rational, Vector, whole};
use chordwright::truss::{SupportKind, Truss};
use num_traits::Zero;
use serde_json::Value;
use trusses::{Scatter, bare_lattice, fraction, frame, of_rule, only, pinned, rational_frame, rolling, usual};

/// The rank of the rigidity matrix, by elimination of all of it in fractions: the slow twin.
fn plain_rank(truss: &Truss) -> usize {
    let count = 2 * truss.joints.len();
    let points = truss.points();
    let mut rows: Vec<Vec<Rational>> = Vec::new();
    for member in &truss.members {
        let [a, b] = member.ends().map(|end| end.index());
        let v = &points[a] - &points[b];
        let mut row = vec![Rational::zero(); count];
        for (joint, sign) in [(a, 1), (b, -1)] {
            row[2 * joint] += &v.x * whole(sign);
            row[2 * joint + 1] += &v.y * whole(sign);
        }
        rows.push(row);
    }
    for support in &truss.supports {
        let normals = match &support.kind {
            SupportKind::Pin => vec![(whole(1), whole(0)), (whole(0), whole(1))],
            SupportKind::Roller { normal: [x, y] } => vec![(x.value.clone(), y.value.clone())],
        };
        for (x, y) in normals {
            let mut row = vec![Rational::zero(); count];
            row[2 * support.joint.index()] = x;
            row[2 * support.joint.index() + 1] = y;
            rows.push(row);
        }
    }
    let mut rank = 0;
    for column in 0..count {
        let Some(pivot) = (rank..rows.len()).find(|&i| !rows[i][column].is_zero()) else { continue };
        rows.swap(rank, pivot);
        for i in rank + 1..rows.len() {
            let factor = &rows[i][column] / &rows[rank][column];
            if !factor.is_zero() {
                let pivot_row = rows[rank].clone();
                rows[i].iter_mut().zip(&pivot_row).for_each(|(entry, other)| *entry -= &factor * other);
            }
        }
        rank += 1;
    }
    rank
}

/// Every member keeps its length to first order, every hold holds, and something moves.
fn assert_motion(truss: &Truss, report: &Report) {
    let motion = &report.answers.stands.motion;
    let still = Vector { x: Rational::zero(), y: Rational::zero() };
    let velocity = |joint| motion.iter().find(|m| m.joint == joint).map_or(&still, |m| &m.velocity);
    assert!(motion.iter().any(|m| !m.velocity.is_null()), "something moves");
    let points = truss.points();
    for member in &truss.members {
        let along = &points[member.to.index()] - &points[member.from.index()];
        let (v, w) = (velocity(member.from), velocity(member.to));
        let apart = Vector { x: &w.x - &v.x, y: &w.y - &v.y };
        assert!(along.dot(&apart).is_zero(), "{} keeps its length", member.mark);
    }
    for support in &truss.supports {
        let v = velocity(support.joint);
        match &support.kind {
            SupportKind::Pin => assert!(v.is_null(), "a pin does not move"),
            SupportKind::Roller { normal: [x, y] } => {
                assert!((&x.value * &v.x + &y.value * &v.y).is_zero(), "a roller moves square to its normal");
            }
        }
    }
}

fn entries(text: &str) -> Vec<Value> {
    serde_json::from_str::<Vec<Value>>(text).expect("test data")
}

/// A truss of the test data.
fn published(entry: &Value) -> Truss {
    let joints = entry["joints"].as_object().expect("joints");
    let marks: Vec<&String> = joints.keys().collect();
    let at = |mark: &Value| marks.iter().position(|m| m.as_str() == mark.as_str().expect("a mark")).expect("a joint");
    let place = |mark: &&String| {
        let pair = &joints[mark.as_str()];
        (fraction(pair[0].as_str().expect("x")), fraction(pair[1].as_str().expect("y")))
    };
    let places: Vec<_> = marks.iter().map(place).collect();
    let members: Vec<_> =
        entry["members"].as_array().expect("members").iter().map(|pair| (at(&pair[0]), at(&pair[1]))).collect();
    let mut truss = rational_frame(&places, &members);
    for support in entry["supports"].as_array().into_iter().flatten() {
        let normal = if support[1] == "x" { (1, 0) } else { (0, 1) };
        truss = rolling(truss, at(&support[0]), normal);
    }
    truss
}

#[test]
fn the_ranks_of_the_theorems() {
    for entry in entries(include_str!("data/rigidity.json")) {
        let report = usual(&published(&entry));
        let expected = entry["rank"].as_u64().expect("a rank") as usize;
        assert_eq!(report.answers.stands.rank, expected, "{} {}", entry["id"], entry["what"]);
        assert_eq!(report.answers.stands.state, StandsState::NoSupports);
        let full = report.answers.stands.unknowns == expected;
        assert_eq!(report.answers.stands.motion.is_empty(), full, "{}: a motion exactly when it moves", entry["id"]);
        if !full {
            assert_motion(&published(&entry), &report);
        }
    }
}

#[test]
fn published_trusses_stand_with_the_published_counts() {
    for entry in entries(include_str!("data/trusses.json")) {
        let truss = published(&entry);
        let report = usual(&truss);
        let stands = &report.answers.stands;
        let rank = entry["rank"].as_u64().expect("a rank") as usize;
        assert_eq!((stands.state, stands.rank), (StandsState::Rigid, rank), "{}", entry["id"]);
        assert_eq!(stands.spare_members, truss.members.len() + truss.supports.len() - rank, "{}", entry["id"]);
        for (row, quadrance) in report.answers.cut.members.iter().zip(entry["quadrances"].as_array().expect("values")) {
            assert_eq!(row.quadrance, fraction(quadrance.as_str().expect("a fraction")), "{}", entry["id"]);
        }
    }
}

#[test]
fn classical_critical_forms_are_named() {
    let all = entries(include_str!("data/rigidity.json"));
    let entry = |id: &str| all.iter().find(|entry| entry["id"] == id).expect("an entry");
    for (id, words) in [("RG-1", "on one conic"), ("RG-3", "on one conic"), ("RG-7", "meet in (0, 0)")] {
        let report = usual(&published(entry(id)));
        let finding = only(&report, Rule::CriticalForm);
        assert!(finding.text.contains(words), "{id}: {}", finding.text);
    }
    // Three parallel members between two triangles that are not alike.
    let prism = [(0, 1), (1, 2), (0, 2), (3, 4), (4, 5), (3, 5), (0, 3), (1, 4), (2, 5)];
    let report = usual(&frame(&[(0, 0), (4, 1), (1, 3), (0, 7), (4, 9), (1, 12)], &prism));
    assert_eq!(report.answers.stands.rank, 8);
    assert!(only(&report, Rule::CriticalForm).text.contains("are parallel"));
}

#[test]
fn a_square_without_a_diagonal_is_a_mechanism_and_the_diagonal_mends_it() {
    let square = frame(&[(0, 0), (4, 0), (4, 3), (0, 3)], &[(0, 1), (1, 2), (2, 3), (3, 0)]);
    let truss = rolling(pinned(square, 0), 1, (0, 1));
    let report = usual(&truss);
    assert_eq!(report.answers.stands.state, StandsState::Mechanism);
    assert_motion(&truss, &report);
    let finding = only(&report, Rule::Mechanism);
    let edit = finding.mend.as_ref().and_then(|mend| mend.edit.as_ref()).expect("a mend");
    let mended = usual(&truss.edited(edit).expect("the edit fits"));
    assert_eq!(mended.answers.stands.state, StandsState::Rigid);
    assert!(mended.findings.iter().all(|finding| finding.rule != Rule::Mechanism));
}

#[test]
fn supports_that_let_the_whole_move_are_named() {
    let triangle = || frame(&[(0, 0), (8, 0), (4, 3)], &[(0, 1), (1, 2), (2, 0)]);
    let parallel = rolling(rolling(rolling(triangle(), 0, (0, 1)), 1, (0, 1)), 2, (0, 1));
    let report = usual(&parallel);
    assert_eq!(report.answers.stands.state, StandsState::Mechanism);
    assert!(only(&report, Rule::Supports).text.contains("hold in one direction"), "{:?}", report.findings);
    assert!(of_rule(&report, Rule::Mechanism).is_empty(), "no member is missing");
    assert_motion(&parallel, &report);
    let concurrent = rolling(rolling(rolling(triangle(), 0, (1, 0)), 1, (0, 1)), 2, (4, -3));
    let report = usual(&concurrent);
    assert_eq!(report.answers.stands.state, StandsState::CriticalForm);
    assert!(only(&report, Rule::CriticalForm).text.contains("turns about it"), "{:?}", report.findings);
    assert_motion(&concurrent, &report);
    let one_pin = pinned(triangle(), 0);
    let report = usual(&one_pin);
    assert_eq!(report.answers.stands.state, StandsState::Mechanism);
    assert!(only(&report, Rule::Supports).text.contains("go through J0"), "{:?}", report.findings);
}

#[test]
fn a_joint_between_two_members_in_line_is_critical() {
    let truss = pinned(pinned(frame(&[(0, 0), (5, 0), (9, 0)], &[(0, 1), (1, 2)]), 0), 2);
    let report = usual(&truss);
    assert_eq!(report.answers.stands.state, StandsState::CriticalForm);
    assert!(only(&report, Rule::CriticalForm).text.contains("J1 lie in one line"), "{:?}", report.findings);
    assert_motion(&truss, &report);
}

#[test]
fn spare_members_are_those_that_hold_each_other() {
    let braced = frame(
        &[(0, 0), (4, 0), (4, 3), (0, 3), (9, 1)],
        &[(0, 1), (1, 2), (2, 3), (3, 0), (0, 2), (1, 3), (1, 4), (2, 4)],
    );
    let report = usual(&rolling(pinned(braced, 0), 1, (0, 1)));
    assert_eq!((report.answers.stands.state, report.answers.stands.spare_members), (StandsState::Rigid, 1));
    let members: Vec<u32> = only(&report, Rule::SpareMember).members.iter().map(|member| member.0).collect();
    assert_eq!(members, [0, 1, 2, 3, 4, 5], "the two members of the tip are needed");
}

#[test]
fn an_empty_truss_and_one_of_unused_joints_have_nothing_to_judge() {
    for truss in [Truss::default(), frame(&[(0, 0), (3, 4)], &[])] {
        let stands = usual(&truss).answers.stands;
        assert_eq!((stands.state, stands.rank, stands.unknowns), (StandsState::NoSupports, 0, 0));
    }
    let one_pin = usual(&pinned(frame(&[(0, 0)], &[]), 0)).answers.stands;
    assert_eq!((one_pin.state, one_pin.rank, one_pin.unknowns), (StandsState::Rigid, 2, 2));
}

#[test]
fn a_lattice_with_just_enough_stands_and_with_one_member_less_moves() {
    let mut truss = bare_lattice(20);
    let stands = usual(&truss).answers.stands;
    assert_eq!((stands.state, stands.spare_members), (StandsState::Rigid, 0));
    for place in [0, 300, 700] {
        truss = bare_lattice(20);
        truss.members.remove(place);
        let report = usual(&truss);
        assert_eq!(report.answers.stands.state, StandsState::Mechanism);
        assert_eq!(report.answers.stands.rank + 1, report.answers.stands.unknowns);
        assert_motion(&truss, &report);
    }
}

/// A small frame on few places, so that much is in line, parallel or in one place.
fn random_frame(scatter: &mut Scatter) -> Truss {
    let joints = 3 + scatter.below(6) as usize;
    let side = 2 + scatter.below(5);
    let places: Vec<_> = (0..joints).map(|_| (scatter.below(side) as i64, scatter.below(side) as i64)).collect();
    let mut members = Vec::new();
    for a in 0..joints {
        members.extend((a + 1..joints).filter(|_| scatter.below(10) < 5).map(|b| (a, b)));
    }
    let mut truss = frame(&places, &members);
    for joint in 0..joints {
        truss = match scatter.below(6) {
            0 => pinned(truss, joint),
            1 => rolling(truss, joint, [(0, 1), (1, 0), (1, 1), (-2, 1)][scatter.below(4) as usize]),
            _ => truss,
        };
    }
    truss
}

#[test]
fn the_rank_is_that_of_a_plain_elimination() {
    let mut scatter = Scatter::new(42);
    for round in 0..3000 {
        let truss = random_frame(&mut scatter);
        let report = usual(&truss);
        let stands = &report.answers.stands;
        assert_eq!(stands.rank, plain_rank(&truss), "round {round}: {truss:?}");
        let used = 2 * truss.joints.iter().enumerate().filter(|(i, _)| is_used(&truss, *i)).count();
        let unknowns = if truss.supports.is_empty() { used.saturating_sub(3) } else { used };
        assert_eq!(stands.unknowns, unknowns, "round {round}");
        if stands.rank < stands.unknowns {
            assert_motion(&truss, &report);
        }
    }
}

fn is_used(truss: &Truss, joint: usize) -> bool {
    truss.members.iter().any(|m| m.ends().iter().any(|end| end.index() == joint))
        || truss.supports.iter().any(|s| s.joint.index() == joint)
}
