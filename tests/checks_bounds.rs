//! Hostile trusses: at the limits of size, all in one place, all through one joint, all crossing. No panic, and work that is
//! bounded: what grew with the square of the size, or worse, would not end within a working day.

mod trusses;

use chordwright::checks::{ClearState, Rule, StandsState};
use chordwright::exact::{Rational, whole};
use chordwright::truss::Truss;
use trusses::{Scatter, frame, lattice, long_truss, of_rule, pinned, rational_frame, usual};

#[test]
fn all_joints_in_one_place() {
    let places = vec![(3, 4); 50_000];
    let members: Vec<_> = (0..100_000).map(|i| (i % 50_000, (i * 7 + 1) % 50_000)).collect();
    let report = usual(&frame(&places, &members));
    assert_eq!(of_rule(&report, Rule::SamePlace).len(), 1);
    assert!(of_rule(&report, Rule::NoLength).len() <= 1001);
    assert_eq!(report.answers.stands.rank, 0);
}

#[test]
fn a_hundred_thousand_members_between_two_joints() {
    let report = usual(&frame(&[(0, 0), (5, 5)], &vec![(0, 1); 100_000]));
    assert_eq!(of_rule(&report, Rule::Doubled).len(), 1);
    assert_eq!(report.answers.stands.rank, 1);
}

/// Tips around a centre, all directions different.
fn star(tips: usize) -> Truss {
    let mut places = vec![(0, 0)];
    let quarter = tips as i64 / 4;
    for i in 0..quarter {
        let (x, y) = (1000 + i, 1000 + 2 * quarter - 2 * i);
        places.extend([(x, y), (-y, x), (-x, -y), (y, -x)]);
    }
    let members: Vec<_> = (1..places.len()).map(|tip| (0, tip)).collect();
    frame(&places, &members)
}

#[test]
fn a_star_of_fifty_thousand_members() {
    let report = usual(&star(49_996));
    assert_eq!(report.answers.clear.state, ClearState::Clear);
    assert_eq!(report.answers.stands.rank, 49_996);
}

#[test]
fn a_star_whose_members_all_lie_on_each_other() {
    let places: Vec<_> = (0..50_000).map(|i| (i, 2 * i)).collect();
    let members: Vec<_> = (1..50_000).map(|tip| (0, tip)).collect();
    let report = usual(&frame(&places, &members));
    assert_eq!(report.answers.clear.state, ClearState::NotClear);
    assert!(of_rule(&report, Rule::Overlap).len() <= 1001);
}

#[test]
fn every_joint_joined_with_every_other() {
    let mut scatter = Scatter::new(1);
    let places: Vec<_> = (0..160).map(|_| (scatter.below(1 << 20) as i64, scatter.below(1 << 20) as i64)).collect();
    let members: Vec<_> = (0..160).flat_map(|a| (a + 1..160).map(move |b| (a, b))).collect();
    let report = usual(&frame(&places, &members));
    assert!((1000..=1001).contains(&of_rule(&report, Rule::Crossing).len()));
    assert_eq!(report.answers.stands.rank, 317);
}

#[test]
fn joints_on_no_common_lattice() {
    let numerator = "9".repeat(40).parse::<num_bigint::BigInt>().expect("digits");
    let denominator = |i: usize| numerator.clone() - num_bigint::BigInt::from(2 * i);
    let place = |i: usize| {
        let (x, y) = (i / 200, i % 200);
        let part = |k: usize| Rational::new(num_bigint::BigInt::from(1), denominator(k));
        (whole(x as i64 * 50) + part(2 * i), whole(y as i64 * 50) + part(2 * i + 1))
    };
    let places: Vec<_> = (0..4_000).map(place).collect();
    let mut members: Vec<_> = (0..3_999).filter(|i| i % 200 != 199).map(|i| (i, i + 1)).collect();
    members.extend((0..3_800).map(|i| (i, i + 200)));
    let report = usual(&rational_frame(&places, &members));
    assert_eq!(report.answers.clear.state, ClearState::Clear);
}

#[test]
fn members_that_are_tangled_without_any_order() {
    let mut scatter = Scatter::new(5);
    let places: Vec<_> = (0..50_000).map(|_| (scatter.below(1 << 29) as i64, scatter.below(1 << 29) as i64)).collect();
    let members: Vec<_> =
        (0..100_000).map(|_| (scatter.below(50_000) as usize, scatter.below(50_000) as usize)).collect();
    let report = usual(&pinned(frame(&places, &members), 0));
    assert_ne!(report.answers.stands.state, StandsState::Rigid);
}

#[test]
fn loose_members_by_the_ten_thousand() {
    let places: Vec<_> = (0..50_000).map(|i| (i * 10, (i * i) % 977)).collect();
    let members: Vec<_> = (0..25_000).map(|i| (2 * i, 2 * i + 1)).collect();
    let report = usual(&frame(&places, &members));
    assert_eq!(report.answers.stands.rank, 25_000);
    assert!(of_rule(&report, Rule::Apart).len() <= 1001);
}

#[test]
fn a_long_truss_and_a_lattice_at_the_limits() {
    let report = usual(&long_truss(24_999));
    assert_eq!(report.answers.stands.state, StandsState::Rigid);
    let report = usual(&lattice(180));
    assert_eq!(report.answers.stands.state, StandsState::Rigid);
}
